/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Proportions and resampling shared by the laws. Intervals by GSL's distributions; random numbers by GSL's mt19937, seeded, so that a
 * run repeats to the last digit. */

#include <glib.h>

G_BEGIN_DECLS

typedef struct
{
  double low, high;
} TfInterval;

/** tf_wilson: Wilson 1927 score interval of x of n at @level (0.95); NaN for n = 0. */
TfInterval tf_wilson (guint x, guint n, double level);
/** tf_clopper_pearson: exact, by beta quantiles (Clopper & Pearson 1934). */
TfInterval tf_clopper_pearson (guint x, guint n, double level);
/** tf_quantile: of @n sorted values, linear between order statistics (type 7). */
double tf_quantile (const double *sorted, guint n, double p);
/** tf_median: of values in any order (copied); NaN for none. */
double tf_median (const double *values, guint n);
/** tf_weighted_median: smallest value at which half of the weight is reached, midway on a tie; NaN for no weight. */
double tf_weighted_median (const double *values, const double *weights, guint n);

/** TfResampleFunc: the statistic for the rows given by index; NaN when it cannot be had. */
typedef double (*TfResampleFunc) (const guint *rows, guint n, gpointer data);
/**
 * tf_bootstrap_clusters: percentile interval of a statistic when whole clusters are drawn with replacement.
 * @cluster: cluster id of each of @n rows (any numbers)
 * @seed: generator mt19937
 */
TfInterval tf_bootstrap_clusters (const guint32 *cluster, guint n, guint draws, guint64 seed, double level,
                                  TfResampleFunc func, gpointer data);

G_END_DECLS
