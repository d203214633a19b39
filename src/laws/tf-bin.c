/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-bin.h"

#include <math.h>
#include <gsl/gsl_cdf.h>

#include "tf-many.h"
#include "tf-sort.h"

/* The greatest r with 2 P (B < r) <= 1 - level; 0 when there is none. Sought from where the normal
 * distribution would put it. */
static guint
rank_of (guint n, double level)
{
  double tail = 0.5 * (1.0 - level);
  double guess = 0.5 * n + gsl_cdf_ugaussian_Pinv (tail) * 0.5 * sqrt (n);
  guint r = guess > 1.0 ? (guint)guess : 0;
  while (r > 0 && gsl_cdf_binomial_P (r - 1, 0.5, n) > tail)
    r--;
  while (r < n / 2 && gsl_cdf_binomial_P (r, 0.5, n) <= tail)
    r++;
  return r;
}

TfInterval
tf_median_interval (const double *sorted, guint n, double level)
{
  guint r = n > 0 && level > 0.0 && level < 1.0 ? rank_of (n, level) : 0;
  return r == 0 ? (TfInterval){ NAN, NAN } : (TfInterval){ sorted[r - 1], sorted[n - r] };
}

/* @values is overwritten. */
static void
describe (TfBin *bin, double *values, double level)
{
  bin->median = bin->scatter = NAN;
  bin->median_ci = bin->scatter_ci = (TfInterval){ NAN, NAN };
  if (bin->n == 0)
    return;
  tf_sort_numbers (values, bin->n);
  bin->median = tf_quantile (values, bin->n, 0.5);
  bin->median_ci = tf_median_interval (values, bin->n, level);
  for (guint k = 0; k < bin->n; k++)
    values[k] = 1.4826 * fabs (values[k] - bin->median);
  tf_sort_numbers (values, bin->n);
  bin->scatter = bin->n < 3 ? NAN : tf_quantile (values, bin->n, 0.5);
  bin->scatter_ci = tf_median_interval (values, bin->n, level);
}

GArray *
tf_bins (const double *x, const double *y, guint n, double from, double to, double step,
         double level)
{
  g_return_val_if_fail (step > 0.0 && to > from, NULL);
  guint n_bins = (guint)ceil ((to - from) / step - 1e-9);
  GArray *bins = g_array_sized_new (FALSE, TRUE, sizeof (TfBin), n_bins);
  g_autofree guint *start = g_new0 (guint, n_bins + 2);
  g_autofree guint *of = tf_new_many (guint, n + 1);
  g_autofree double *values = tf_new_many (double, n + 1);
  g_array_set_size (bins, n_bins);
  TfBin *bin = (TfBin *)(gpointer)bins->data;
  for (guint k = 0; k < n; k++)
    {
      gboolean good = isfinite (x[k]) && isfinite (y[k]) && x[k] >= from && x[k] < to;
      of[k] = good ? MIN ((guint)((x[k] - from) / step), n_bins - 1) : n_bins;
      if (!good)
        continue;
      bin[of[k]].n++;
      bin[of[k]].x += (x[k] - bin[of[k]].x) / bin[of[k]].n;
    }
  for (guint b = 0; b < n_bins; b++)
    start[b + 1] = start[b] + bin[b].n;
  g_autofree guint *at = g_memdup2 (start, (n_bins + 1) * sizeof *start);
  for (guint k = 0; k < n; k++)
    if (of[k] < n_bins)
      values[at[of[k]]++] = y[k];
  for (guint b = 0; b < n_bins; b++)
    {
      bin[b].from = from + b * step;
      bin[b].to = bin[b].from + step;
      if (bin[b].n == 0)
        bin[b].x = NAN;
      describe (&bin[b], values + start[b], level);
    }
  return bins;
}
