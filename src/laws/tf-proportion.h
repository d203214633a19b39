/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Proportions and resampling shared by the laws. Intervals by GSL's distributions; random numbers
 * by GSL's mt19937, seeded, so that a run repeats to the last digit. GSL's error handler ends the
 * program by default: the programs switch it off with gsl_set_error_handler_off (), and nothing
 * here gives GSL an argument for which it would be called. An interval that cannot be had is NaN on
 * both sides. */

#include <glib.h>

#include "tf-bands.h"

G_BEGIN_DECLS

typedef struct
{
  double low, high;
} TfInterval;

/** tf_wilson: Wilson 1927 score interval of x of n at @level (0.95); NaN for n = 0, x > n or a
 * level outside (0, 1). */
TfInterval tf_wilson (guint x, guint n, double level);
/** tf_clopper_pearson: exact, by the beta quantiles (x, n-x+1) and (x+1, n-x) (Clopper & Pearson
 * 1934); NaN as above. */
TfInterval tf_clopper_pearson (guint x, guint n, double level);
/** tf_fisher_exact: two-sided chance of a 2 x 2 table with rows (@a, @b) and (@c, @d) under equal
 * shares: the sum over all tables of the same margins that are no likelier (Fisher 1935; the rule of
 * Irwin 1935, as R has it). 1 when a margin is 0. */
double tf_fisher_exact (guint a, guint b, guint c, guint d);
/** tf_holm: chances adjusted for the number of comparisons (Holm 1979, Scand. J. Statist. 6, 65); NaN
 * ones stay NaN and do not count. Returns how many count. @adjusted may be @p. */
guint tf_holm (const double *p, guint n, double *adjusted);
/** tf_quantile: of @n sorted values, linear between order statistics (type 7). */
double tf_quantile (const double *sorted, guint n, double p);
/** tf_median: of values in any order (copied); NaN for none, and when one is NaN. */
double tf_median (const double *values, guint n);
/** tf_select: the value that is at @wanted in order; it is put there, smaller ones before it. None is NaN. */
double tf_select (double *values, guint n, guint wanted);
/** tf_weighted_median: smallest value at which half of the weight is reached, midway to the next on
 * a tie; rows that are not finite or have no weight are left out; NaN when none is left. */
double tf_weighted_median (const double *values, const double *weights, guint n);

/** TfResampleFunc: the statistic for the rows given by index; NaN when it cannot be had. */
typedef double (*TfResampleFunc) (const guint *rows, guint n, gpointer data);
/**
 * tf_bootstrap_clusters: percentile interval of a statistic when whole clusters are drawn with
 * replacement.
 * @cluster: cluster id of each of @n rows (any numbers; only which rows share one matters)
 * @seed: generator mt19937 (its low 32 bits)
 * @cancel: (nullable): raised by another thread, no more is drawn
 * Draws in which the statistic is NaN are left out. NaN for fewer than two clusters, when more than
 * half of the draws are NaN, and when it was cancelled.
 */
TfInterval tf_bootstrap_clusters (const guint32 *cluster, guint n, guint draws, guint64 seed,
                                  double level, const TfCancel *cancel, TfResampleFunc func,
                                  gpointer data);
/** tf_bootstrap_share: tf_bootstrap_clusters() of the share of rows whose @is is not 0, by the same
 * draws, in time that goes with the clusters and not with the rows. */
TfInterval tf_bootstrap_share (const guint32 *cluster, const guint8 *is, guint n, guint draws,
                               guint64 seed, double level, const TfCancel *cancel);

G_END_DECLS
