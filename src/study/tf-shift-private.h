/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* What the files of the shift share. */

#include "tf-shift.h"

G_BEGIN_DECLS

/* Everything seen from one vantage in the days up to a frame. */
typedef struct
{
  gint64 frame;
  TfTime time;      /* of the frame */
  TfObserver observer;
  GArray *moments;  /* TfMoment, in time order */
  GPtrArray *rows;  /* TfRow, in time order, outlines and complexity with them */
  guint *track;     /* of each row: rows of one region have one number */
  guint n_tracks;
  GPtrArray *classes; /* TfRegionClass, oldest frame first */
  guint law;
} TfShiftSky;

/* Looks back this far, days: for what is on the disk, and for what went round the limb. */
#define TF_SHIFT_DISK_DAYS  14.0
#define TF_SHIFT_ROUND_DAYS 35.0

gboolean tf_shift_sky_read (TfShiftSky *sky, TfLedger *ledger, gint64 frame, GError **error);
void tf_shift_sky_clear (TfShiftSky *sky);

TfShiftRow *tf_shift_row_new (void);
void tf_shift_row_free (TfShiftRow *row);
void tf_others_free (TfOthers *others);
/* The class that stood at @time: the last person's word on the newest frame until then; NULL. */
const TfRegionClass *tf_shift_class_at (const TfShiftSky *sky, gint64 region, TfTime time);
/* From the newest list that holds for about the frame's day. */
gboolean tf_shift_add_others (const TfShiftSky *sky, TfLedger *ledger, TfShift *shift, GError **error);
/* Rows of last rotation's regions that cross the east limb from a day before to three days after. */
void tf_shift_add_due (const TfShiftSky *sky, GPtrArray *rows);

G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (TfShiftSky, tf_shift_sky_clear)

G_END_DECLS
