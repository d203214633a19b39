/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfBin: medians of one quantity in steps of another, with their intervals.
 *
 * The interval of a median is that of the order statistics (no shape of the distribution is
 * assumed): from the r-th to the (n + 1 - r)-th value, r the greatest with 2 P (B < r) <= 1 - level,
 * B binomial (n, 1/2) (Conover, Practical Nonparametric Statistics, 3rd ed., section 3.2; from
 * memory, checked against R's binomial quantiles). Scatter is 1.4826 times the median distance from
 * the median; its interval is that of the same median. What cannot be had is NaN. */

#include <glib.h>

#include "tf-proportion.h"

G_BEGIN_DECLS

typedef struct
{
  double from, to; /* edges; from <= x < to */
  double x;        /* mean of x in the bin */
  guint n;
  double median, scatter;
  TfInterval median_ci, scatter_ci;
} TfBin;

/** tf_median_interval: of @n sorted values. */
TfInterval tf_median_interval (const double *sorted, guint n, double level);
/**
 * tf_bins:
 * @x, @y: @n pairs; a pair with a value that is not finite, or an x outside [@from, @to), is left out
 * @step: width of a bin, > 0
 * Returns: (element-type TfBin) (transfer full): every bin from @from to @to, empty ones included.
 */
GArray *tf_bins (const double *x, const double *y, guint n, double from, double to, double step,
                 double level);

G_END_DECLS
