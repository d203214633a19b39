/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Divides that people moved. One divide a study (by its name; "default" is the one that needs none
 * made), minimum and hemisphere: its points as they were last drawn, or computed again. */

#include "tf-ledger.h"

G_BEGIN_DECLS

/** TfMovedDivide: |lat| through points in order of time. */
typedef struct
{
  int cycle;             /* the cycle that the minimum begins */
  int hemisphere;        /* 1, -1 */
  guint n;               /* 0: computed */
  TfTime *times;         /* to the second */
  double *lats;          /* |lat|, deg */
  gboolean shown;        /* polarity was shown while it was moved, this time or before */
  char *person;          /* who moved it last */
} TfMovedDivide;
TfMovedDivide *tf_moved_divide_copy (const TfMovedDivide *divide);
void tf_moved_divide_free (TfMovedDivide *divide);

/** tf_ledger_set_divide: a deed; n 0 sets the divide back to computed. Person and order of points are
 * not checked against anything but that times rise. */
gboolean tf_ledger_set_divide (TfLedger *ledger, const char *study, const TfMovedDivide *divide,
                               gint64 person, GError **error);
/** tf_ledger_divides: (element-type TfMovedDivide): those of the study that are moved now, by cycle,
 * north first. */
GPtrArray *tf_ledger_divides (TfLedger *ledger, const char *study, GError **error);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfMovedDivide, tf_moved_divide_free)

G_END_DECLS
