/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfHale: the table of Hale's law: one row a cycle and hemisphere, one over the hemispheres, one over all cycles (cycle 0).
 * share = breaks / (keeps + breaks), n that denominator; "cannot say" always beside it. */

#include <glib.h>

#include "tf-proportion.h"
#include "tf-verdict.h"

G_BEGIN_DECLS

typedef struct
{
  double level; /* 0.95 */
  int draws;    /* 1000 */
  int seed;
} TfHaleParams;
extern const TfOption tf_hale_options[];

typedef struct
{
  int cycle;      /* 0: all */
  int hemisphere; /* 1, -1, 0 both */
  guint n, regions, keeps, breaks, cannot_say;
  double share;
  TfInterval bounds;         /* at least / at most: every "cannot say" keeps / breaks */
  double expected_false;     /* share expected to break from position errors alone */
  TfInterval wilson, clopper_pearson, cluster;
} TfHaleRow;

/** tf_hale_table: @verdicts: one a row of @sample. Returns: (element-type TfHaleRow) (transfer full): by cycle, then N, S, both; last all. */
GArray *tf_hale_table (const TfSample *sample, const TfVerdict *verdicts, const TfHaleParams *params);
/** tf_hale_expected_false: chance that a position error turns the axis over, so that a keeping region reads as breaking:
 * from separation and its uncertainty and the tilt's; NaN when they are absent. */
double tf_hale_expected_false (const TfSampleRow *row);

G_END_DECLS
