/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfDivide: the line on the wings that parts an old cycle from the new one about a minimum, one a
 * minimum and hemisphere.
 *
 * It acts from 24 months before to 18 months after the minimum (options). Computed: midway between
 * the latitudes expected of the old and the new cycle; moved: a polyline a person drew. Within
 * band_deg of it a region's cycle is unsure. A cycle is told from time and latitude only, never
 * from polarity. A set of divides belongs to a study.
 */

#include <glib.h>

#include "tf-cycle.h"
#include "tf-note.h"
#include "tf-option.h"

G_BEGIN_DECLS

typedef struct
{
  int before_months, after_months; /* 24, 18 */
  double band_deg;                 /* 4 */
  double far_lat_deg;              /* 22: from -36 to -24 months, |lat| >= this is unsure */
  double near_lat_deg;             /* 6: from +18 to +30 months, |lat| < this is unsure */
  double late_months;              /* 48 after a maximum with no next minimum listed ... */
  double late_lat_deg;             /* ... |lat| > 18 is unsure */
  gboolean by_date_only;           /* what-if: the date alone */
  double provisional_year;         /* a person's provisional next minimum, decimal year; NaN none */
} TfDivideParams;
extern const TfOption tf_divide_options[];

typedef struct _TfDivides TfDivides; /* immutable, reference counted */

/** tf_divides_new: all computed. A provisional minimum that is not after the last listed maximum is
 * not used. */
TfDivides *tf_divides_new (const TfDivideParams *params);
/** tf_divides_with: a copy in which the divide at the minimum beginning @cycle, hemisphere +1/-1,
 * follows @n points (time, |lat|), sorted by time; n 0 sets it back to computed. Linear between
 * points; beyond the first and the last their latitudes hold. It acts in the same months as the
 * computed one. */
TfDivides *tf_divides_with (const TfDivides *divides, int cycle, int hemisphere,
                            const TfTime *times, const double *lats, guint n);
/** tf_divides_with_params: a copy under other options; moved divides stay as they were drawn. */
TfDivides *tf_divides_with_params (const TfDivides *divides, const TfDivideParams *params);
TfDivides *tf_divides_ref (TfDivides *divides);
void tf_divides_unref (TfDivides *divides);
const TfDivideParams *tf_divides_get_params (const TfDivides *divides);
/** tf_divides_get_last: the last cycle with a minimum, a provisional one included; there is a divide
 * at the minimum beginning each from 2 on. */
int tf_divides_get_last (const TfDivides *divides);
/** tf_divides_get_minimum: when cycle @number begins, by the table or the provisional minimum; unknown
 * beyond tf_divides_get_last(). */
TfTime tf_divides_get_minimum (const TfDivides *divides, int number);
/** tf_divides_get_moved: points of a moved divide: times (s of TT) and |lat|, borrowed; 0 when it is
 * computed. */
guint tf_divides_get_moved (const TfDivides *divides, int cycle, int hemisphere,
                            const double **times, const double **lats);
gboolean tf_divides_is_moved (const TfDivides *divides, int cycle, int hemisphere);
/** tf_divides_latitude: |lat| of the divide about the minimum beginning @cycle; NaN where it does
 * not act. */
double tf_divides_latitude (const TfDivides *divides, int cycle, int hemisphere, TfTime time);

typedef struct
{
  int number; /* the cycle, or the likelier one when unsure; 0 unknown */
  int other;  /* when unsure: the other reading; 0 */
  gboolean sure;
  const char *reason; /* note code. Sure: "cycle-by-date", "cycle-by-divide", "cycle-provisional"
                         (either, leaning on a provisional minimum). Unsure: "cycle-near-divide",
                         "cycle-early-wing", "cycle-late-wing", "cycle-next-minimum-unknown",
                         "cycle-no-latitude", "cycle-no-time", "cycle-before-table" */
} TfCycleCall;

/**
 * tf_divides_call: to which cycle a region belongs; the first rule that applies says it.
 *
 * 1. No time, or before cycle 1: unsure, number 0.
 * 2. by_date_only, or far from every minimum: the date.
 * 3. No latitude (NaN): unsure.
 * 4. A divide acts: above it the new cycle, below the old; within band_deg (included) unsure.
 * 5. The year after a divide ends and |lat| < near_lat_deg: unsure.
 * 6. The year before one begins and |lat| >= far_lat_deg: unsure.
 * 7. late_months after the last maximum, next minimum not known, |lat| > late_lat_deg: unsure.
 * 8. The date.
 *
 * @lat_deg: signed; 0 counts as north
 */
TfCycleCall tf_divides_call (const TfDivides *divides, TfTime time, double lat_deg);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfDivides, tf_divides_unref)

G_END_DECLS
