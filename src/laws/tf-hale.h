/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfHale: the table of Hale's law: one row a cycle and hemisphere, one over the hemispheres, one
 * over all cycles (cycle 0). share = breaks / (keeps + breaks), n that denominator; "cannot say"
 * always beside it. */

#include <glib.h>

#include "tf-bands.h"
#include "tf-proportion.h"
#include "tf-verdict.h"

G_BEGIN_DECLS

typedef struct
{
  double level; /* 0.95 */
  int draws;    /* 1000 */
  int seed;
  const TfCancel *cancel; /* as in TfJoyParams */
} TfHaleParams;
extern const TfOption tf_hale_options[];

typedef struct
{
  int cycle;      /* 0: all */
  int hemisphere; /* 1, -1, 0 both */
  guint n;        /* keeps + breaks */
  guint regions;  /* distinct regions among those n */
  guint keeps, breaks, cannot_say;
  guint leaning;         /* of n: whose cycle leans on a provisional minimum */
  double share;          /* breaks / n; NaN for n = 0 */
  TfInterval bounds;     /* at least / at most: every "cannot say" keeps / breaks */
  double expected_false; /* mean of tf_hale_expected_false() over the n rows that have one; NaN when
                            none has */
  TfInterval wilson, clopper_pearson, cluster;
} TfHaleRow;

/**
 * tf_hale_table:
 * @verdicts: one a row of @sample
 * A row whose cycle is unsure counts (as "cannot say") with its likelier cycle; one without a cycle
 * in the last row only.
 * Returns: (element-type TfHaleRow) (transfer full): by cycle, then N, S, both; last over all,
 * cycle 0.
 */
GArray *
tf_hale_table (const TfSample *sample, const TfVerdict *verdicts, const TfHaleParams *params);
/** tf_hale_row: one row of it. */
TfHaleRow tf_hale_row (const TfSample *sample, const TfVerdict *verdicts, int cycle, int hemisphere,
                       const TfHaleParams *params);
/**
 * tf_hale_expected_false: chance that position errors alone turn an axis over, so that a keeping
 * region reads as breaking.
 *
 * The leader is the western pole, so it changes when the east-west component of the separation, x =
 * s cos(tilt), changes sign. Errors of the separation vector are taken as Gaussian and independent
 * along the axis (sigma_s) and across it (s sigma_tilt, in radians): sigma_x^2 = (sigma_s cos
 * tilt)^2 + (s sigma_tilt sin tilt)^2, and the chance is Q (x / sigma_x), Q the upper tail of the
 * normal distribution. Own derivation; checked against random draws in the tests.
 * Returns: 0 to 0.5; NaN when separation, its uncertainty, tilt (or bearing) or its uncertainty is
 * absent.
 */
double tf_hale_expected_false (const TfSampleRow *row);

G_END_DECLS
