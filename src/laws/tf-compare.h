/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfComparison: two parts of a sample side by side, for Hale's law and for Joy's.
 *
 * Compared are the hemispheres (over all cycles, and in each), each cycle with the next that is
 * there, odd cycles with even ones (the 22-year alternation), the regions up to the median flux
 * and above it, and ephemeral regions with the others. Shares by Fisher's exact test, in which a
 * region counts once, by the verdict of most of its rows (the first on a tie), because it holds for
 * independent cases alone; slopes by the bootstrap of their difference, clustered by region. Chances
 * are adjusted for the number of comparisons by Holm's method, shares and slopes apart; both numbers
 * are given with them.
 */

#include "tf-group.h"
#include "tf-hale.h"
#include "tf-joy.h"

G_BEGIN_DECLS

typedef struct
{
  const char *kind; /* "hemispheres" "cycles" "odd-even" "sizes" "ephemeral" */
  TfGroup groups[2];
  guint regions[2], breaks[2]; /* with a verdict */
  double share[2];             /* NaN for no region */
  double share_p, share_p_holm;
  guint n_tilts[2];
  double slope[2];              /* in tf_joy_unit() */
  TfInterval difference;        /* of the slopes, first - second */
  double slope_p, slope_p_holm; /* NaN without draws, or where a slope cannot be had */
} TfComparison;

typedef struct
{
  GArray
      *rows; /* TfComparison, of groups that both have five regions with a verdict, or five tilts */
  guint n_shares, n_slopes; /* how many comparisons each correction is for */
  double divider_mx;        /* the median flux; NaN when no row has a flux */
} TfComparisons;

/** tf_compare_groups: one pair, kind NULL, not adjusted. */
TfComparison tf_compare_groups (const TfSample *sample, const TfVerdict *verdicts, TfGroup first,
                                TfGroup second, const TfJoyParams *joy);

TfComparisons *
tf_compare (const TfSample *sample, const TfVerdict *verdicts, const TfJoyParams *joy);
void tf_comparisons_free (TfComparisons *comparisons);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfComparisons, tf_comparisons_free)

G_END_DECLS
