/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-joy-line-private.h"

#include <math.h>
#include <string.h>

#include "tf-many.h"
#include "tf-proportion.h"
#include "tf-sort.h"

enum
{
  MIN_IN_BIN = 5
};
#define BIN_DEG 5.0

/* Rows by the first key, those of one by the second. */
static guint *
order_by (const double *first, const double *second, const guint *rows, guint n)
{
  g_autofree double *keys = tf_new_many (double, n + 1);
  for (guint k = 0; k < n; k++)
    keys[k] = second[k];
  g_autofree guint *by_second = tf_sort_order (keys, n);
  for (guint k = 0; k < n; k++)
    keys[k] = first[by_second[k]];
  guint *order = tf_sort_order (keys, n);
  for (guint k = 0; k < n; k++)
    order[k] = by_second[order[k]];
  for (guint k = 0; rows != NULL && k < n; k++)
    order[k] = rows[order[k]];
  return order;
}

void
tf_joy_points_order (TfJoyPoints *points, gboolean by_ratio)
{
  if (by_ratio ? points->by_ratio != NULL : points->by_x != NULL)
    return;
  if (!by_ratio)
    {
      points->by_x = order_by (points->x, points->y, NULL, points->n);
      points->by_y = order_by (points->y, points->x, NULL, points->n);
      return;
    }
  guint n = points->n, m = 0;
  g_autofree double *ratio = tf_new_many (double, n + 1), *x = tf_new_many (double, n + 1);
  g_autofree guint *rows = tf_new_many (guint, n + 1);
  for (guint k = 0; k < n; k++)
    if (points->x[k] > 0.0)
      {
        ratio[m] = points->y[k] / points->x[k];
        x[m] = points->x[k];
        rows[m++] = k;
      }
  points->by_ratio = order_by (ratio, x, rows, m);
  points->n_ratio = m;
}

/* The values of y bin by bin, in the order of the points: those of bin b from start[b] to before start[b + 1]. */
static double *
part_by_bin (const TfJoyPoints *points, guint start[TF_JOY_BINS + 1])
{
  guint at[TF_JOY_BINS + 1] = { 0 };
  double *values = tf_new_many (double, points->n + 1);
  for (guint k = 0; k < points->n; k++)
    at[points->bin[k] + 1]++;
  for (int b = 0; b < TF_JOY_BINS; b++)
    at[b + 1] += at[b];
  memcpy (start, at, sizeof at);
  for (guint k = 0; k < points->n; k++)
    values[at[points->bin[k]]++] = points->y[k];
  return values;
}

/* @values are overwritten. */
static double
scatter_of (double *values, guint m)
{
  double centre = tf_median (values, m);
  for (guint k = 0; k < m; k++)
    values[k] = fabs (values[k] - centre);
  return m < MIN_IN_BIN ? 0.0 : 1.4826 * tf_median (values, m);
}

/* With no scatter anywhere all bins weigh by their counts alone. */
static void
measure_scatter (TfJoyPoints *points)
{
  double greatest = 0.0;
  if (points->bin_scatter[0] > 0.0)
    return;
  guint start[TF_JOY_BINS + 1];
  g_autofree double *values = part_by_bin (points, start);
  for (int b = 0; b < TF_JOY_BINS; b++)
    {
      points->bin_scatter[b] = scatter_of (values + start[b], start[b + 1] - start[b]);
      greatest = fmax (greatest, points->bin_scatter[b]);
    }
  double least = greatest > 0.0 ? 0.01 * greatest : 1.0;
  for (int b = 0; b < TF_JOY_BINS; b++)
    points->bin_scatter[b] = fmax (points->bin_scatter[b], least);
}

TfJoyPoints *
tf_joy_points_new (guint n, const double *x, const double *y, const double *flux, const double *lat)
{
  TfJoyPoints *points = g_new0 (TfJoyPoints, 1);
  points->n = n;
  points->x = tf_dup_many (x, n, sizeof *x);
  points->y = tf_dup_many (y, n, sizeof *y);
  points->flux = tf_dup_many (flux, n, sizeof *flux);
  points->count = tf_new_many (double, n);
  points->bin = tf_new_many (int, n);
  for (guint k = 0; k < n; k++)
    {
      points->count[k] = 1.0;
      points->bin[k] = CLAMP ((int)floor (lat[k] / BIN_DEG), 0, TF_JOY_BINS - 1);
    }
  return points;
}

void
tf_joy_points_free (TfJoyPoints *points)
{
  g_free (points->x);
  g_free (points->y);
  g_free (points->flux);
  g_free (points->count);
  g_free (points->bin);
  g_free (points->by_ratio);
  g_free (points->by_x);
  g_free (points->by_y);
  g_free (points);
}

void
tf_joy_points_count (TfJoyPoints *points, const guint *rows, guint n)
{
  points->drawn = TRUE;
  memset (points->count, 0, points->n * sizeof *points->count);
  for (guint k = 0; k < n; k++)
    points->count[rows[k]] += 1.0;
}

/* Weighted sums about the weighted means, so that the free line loses no digits. */
typedef struct
{
  double w, x, y, xx, xy; /* sum of weights; means; central sums */
} Sums;

static void
sums_add (Sums *sums, double w, double x, double y)
{
  if (!(w > 0.0))
    return;
  sums->w += w;
  double dx = x - sums->x, part = w / sums->w;
  sums->x += part * dx;
  sums->y += part * (y - sums->y);
  sums->xx += w * dx * (x - sums->x);
  sums->xy += w * dx * (y - sums->y);
}

static TfJoyLine
line_of_sums (const Sums *sums, gboolean free_line)
{
  TfJoyLine none = { NAN, NAN };
  if (!(sums->w > 0.0))
    return none;
  if (free_line)
    {
      double slope = sums->xx > 0.0 ? sums->xy / sums->xx : NAN;
      return (TfJoyLine){ slope, sums->y - slope * sums->x };
    }
  double xx = sums->xx + sums->w * sums->x * sums->x;
  double xy = sums->xy + sums->w * sums->x * sums->y;
  return (TfJoyLine){ xx > 0.0 ? xy / xx : NAN, NAN };
}

static TfJoyLine
least_squares (const TfJoyPoints *points, gboolean by_flux, gboolean free_line)
{
  Sums sums = { 0 };
  for (guint k = 0; k < points->n; k++)
    sums_add (&sums, by_flux ? points->count[k] * points->flux[k] : points->count[k], points->x[k],
              points->y[k]);
  return line_of_sums (&sums, free_line);
}

TfJoyLine
tf_joy_line_least_squares (TfJoyPoints *points)
{
  return least_squares (points, FALSE, FALSE);
}

TfJoyLine
tf_joy_line_flux_weighted (TfJoyPoints *points)
{
  return least_squares (points, TRUE, FALSE);
}

TfJoyLine
tf_joy_line_free_least_squares (TfJoyPoints *points)
{
  return least_squares (points, FALSE, TRUE);
}

TfJoyLine
tf_joy_line_free_flux_weighted (TfJoyPoints *points)
{
  return least_squares (points, TRUE, TRUE);
}

void
tf_joy_running_add (TfJoyRunning *median, double value, double weight)
{
  if (median->done || !(weight > 0.0))
    return;
  if (median->met)
    {
      median->value = 0.5 * (median->value + value);
      median->done = TRUE;
      return;
    }
  median->sum += weight;
  median->value = value;
  median->met = fabs (median->sum - median->half) <= 2e-12 * median->half;
  median->done = !median->met && median->sum > median->half;
}

/* Puts values below @pivot before those that are it, and those before the greater: in [low, high). */
static void
part_ratios (TfJoyRatio *ratios, guint low, guint high, double pivot, guint *first, guint *after)
{
  guint at = low;
  while (at < high)
    {
      guint with = ratios[at].value < pivot ? low++ : ratios[at].value > pivot ? --high : at;
      gboolean above = ratios[at].value > pivot;
      TfJoyRatio swap = ratios[at];
      ratios[at] = ratios[with];
      ratios[with] = swap;
      at += !above;
    }
  *first = low;
  *after = high;
}

static double
weight_of (const TfJoyRatio *ratios, guint low, guint high)
{
  double sum = 0.0;
  for (guint k = low; k < high; k++)
    sum += ratios[k].weight;
  return sum;
}

double
tf_joy_ratio_median (TfJoyRatio *ratios, guint n)
{
  const double doubt = 1e-9;
  double half = 0.5 * weight_of (ratios, 0, n), before = 0.0;
  for (guint low = 0, high = n; low < high;)
    {
      guint first, after;
      double pivot = ratios[low + (high - low) / 2].value;
      part_ratios (ratios, low, high, pivot, &first, &after);
      double less = before + weight_of (ratios, low, first),
             upto = less + weight_of (ratios, first, after);
      if (less > half * (1.0 + doubt))
        high = first;
      else if (upto < half * (1.0 - doubt))
        {
          low = after;
          before = upto;
        }
      else
        return less < half * (1.0 - doubt) && upto > half * (1.0 + doubt) ? pivot : NAN;
    }
  return NAN;
}

static double
median_once (const TfJoyPoints *points)
{
  g_autofree TfJoyRatio *ratios = tf_new_many (TfJoyRatio, points->n + 1);
  guint n = 0;
  for (guint k = 0; k < points->n; k++)
    if (points->x[k] > 0.0)
      ratios[n++] = (TfJoyRatio){ points->y[k] / points->x[k], points->x[k] };
  return tf_joy_ratio_median (ratios, n);
}

TfJoyLine
tf_joy_line_robust (TfJoyPoints *points)
{
  if (!points->drawn && points->by_ratio == NULL)
    {
      double once = median_once (points);
      if (!isnan (once))
        return (TfJoyLine){ once, NAN };
    }
  tf_joy_points_order (points, TRUE);
  double total = 0.0;
  for (guint k = 0; k < points->n; k++)
    total += points->count[k] * points->x[k];
  TfJoyRunning median = { .half = 0.5 * total, .value = NAN };
  for (guint j = 0; j < points->n_ratio && !median.done; j++)
    {
      guint k = points->by_ratio[j];
      tf_joy_running_add (&median, points->y[k] / points->x[k], points->count[k] * points->x[k]);
    }
  return (TfJoyLine){ median.value, NAN };
}

/* The middle value of each bin, or midway between the two: what the running medians give while every point
 * counts once. */
static void
find_middles (const TfJoyPoints *points, TfJoyRunning medians[TF_JOY_BINS])
{
  guint start[TF_JOY_BINS + 1];
  g_autofree double *values = part_by_bin (points, start);
  for (int b = 0; b < TF_JOY_BINS; b++)
    {
      guint m = start[b + 1] - start[b];
      double *some = values + start[b];
      if (m == 0)
        continue;
      double upper = tf_select (some, m, m / 2), lower = upper;
      for (guint k = 0; m % 2 == 0 && k < m / 2; k++)
        lower = k == 0 ? some[0] : fmax (lower, some[k]);
      medians[b].value = m % 2 == 1 ? upper : 0.5 * (lower + upper);
    }
}

static void
run_medians (TfJoyPoints *points, TfJoyRunning medians[TF_JOY_BINS])
{
  tf_joy_points_order (points, FALSE);
  for (guint j = 0; j < points->n; j++)
    {
      guint k = points->by_y[j];
      tf_joy_running_add (&medians[points->bin[k]], points->y[k], points->count[k]);
    }
}

static TfJoyLine
bin_medians (TfJoyPoints *points, gboolean free_line)
{
  measure_scatter (points);
  double total[TF_JOY_BINS] = { 0 }, sum_x[TF_JOY_BINS] = { 0 };
  for (guint k = 0; k < points->n; k++)
    {
      total[points->bin[k]] += points->count[k];
      sum_x[points->bin[k]] += points->count[k] * points->x[k];
    }
  TfJoyRunning medians[TF_JOY_BINS];
  for (int b = 0; b < TF_JOY_BINS; b++)
    medians[b] = (TfJoyRunning){ .half = 0.5 * total[b], .value = NAN };
  if (points->drawn)
    run_medians (points, medians);
  else
    find_middles (points, medians);
  Sums sums = { 0 };
  for (int b = 0; b < TF_JOY_BINS; b++)
    if (total[b] >= MIN_IN_BIN)
      sums_add (&sums, total[b] / (points->bin_scatter[b] * points->bin_scatter[b]),
                sum_x[b] / total[b], medians[b].value);
  return line_of_sums (&sums, free_line);
}

TfJoyLine
tf_joy_line_bin_medians (TfJoyPoints *points)
{
  return bin_medians (points, FALSE);
}

TfJoyLine
tf_joy_line_free_bin_medians (TfJoyPoints *points)
{
  return bin_medians (points, TRUE);
}
