/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Work over the rows of a picture in bands of 64, on a pool of threads. Bands are numbered from 0 in
 * row order; per-band results that are added up in that order are the same, bit for bit, for any
 * number of threads.
 */

#include <glib.h>

#include "tf-pool.h"

G_BEGIN_DECLS

enum
{
  TF_BAND_ROWS = 64
};

typedef struct _TfWorkers TfWorkers;
typedef struct _TfCancel TfCancel;

/** TfWork: what slow work may use; every member may be NULL, and so may a pointer to the whole. */
typedef struct
{
  TfPool *pool;       /* pixel memory */
  TfWorkers *workers; /* threads; NULL: the calling one */
  TfCancel *cancel;   /* asked between bands */
} TfWork;

/** tf_cancel_new: a flag that one thread raises and others look at. */
TfCancel *tf_cancel_new (void);
TfCancel *tf_cancel_ref (TfCancel *cancel);
void tf_cancel_unref (TfCancel *cancel);
void tf_cancel_raise (TfCancel *cancel);
/** tf_cancel_is_raised: FALSE for NULL. */
gboolean tf_cancel_is_raised (const TfCancel *cancel);

/** tf_workers_new: @n threads in all, the caller's included; 0: one a core. */
TfWorkers *tf_workers_new (guint n);
TfWorkers *tf_workers_ref (TfWorkers *workers);
void tf_workers_unref (TfWorkers *workers);
/** tf_workers_get_n: 1 for NULL. */
guint tf_workers_get_n (const TfWorkers *workers);

/** TfBandFunc: rows @first .. @first + @n - 1; @band = @first / TF_BAND_ROWS; @worker < tf_workers_get_n(). */
typedef void (*TfBandFunc) (guint band, guint first, guint n, guint worker, gpointer data);

/** tf_bands_count: how many bands @n_rows make. */
guint tf_bands_count (guint n_rows);

/**
 * tf_bands_run: calls @func once for every band of @n_rows rows and returns when all are done.
 * @work: (nullable): threads and cancel flag
 * Returns: FALSE when cancelled (some bands were not done). Not to be called from inside @func.
 */
gboolean tf_bands_run (const TfWork *work, guint n_rows, TfBandFunc func, gpointer data);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfWorkers, tf_workers_unref)
G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfCancel, tf_cancel_unref)

G_END_DECLS
