/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>

#include "tf-joy-line-private.h"

/* The line of Theil 1950 and Sen 1968 (J. Am. Stat. Assoc. 63, 1379), without a look at every pair.
 *
 * With points in order of x (and of y where x is the same), the pairs whose slope lies below b are
 * the inversions of y - b x, and a merge sort counts them. The median slope is found by halving b.
 */

typedef struct
{
  double v, w; /* y - b x; count */
} Item;

/* Merges the sorted left[0..n_left) and right[0..n_right) into @out; adds the weight of inversions.
 */
static double
merge (const Item *left, guint n_left, const Item *right, guint n_right, Item *out)
{
  double waiting = 0.0, found = 0.0;
  for (guint k = 0; k < n_left; k++)
    waiting += left[k].w;
  guint i = 0, j = 0;
  while (i < n_left && j < n_right)
    {
      if (left[i].v <= right[j].v)
        {
          waiting -= left[i].w;
          *out++ = left[i++];
          continue;
        }
      found += right[j].w * waiting;
      *out++ = right[j++];
    }
  while (i < n_left)
    *out++ = left[i++];
  while (j < n_right)
    *out++ = right[j++];
  return found;
}

static double
count_inversions (Item *items, Item *other, guint n)
{
  double found = 0.0;
  for (guint width = 1; width < n; width *= 2)
    {
      for (guint at = 0; at < n; at += 2 * width)
        {
          guint n_left = MIN (width, n - at), n_right = MIN (width, n - at - n_left);
          found += merge (items + at, n_left, items + at + n_left, n_right, other + at);
        }
      Item *swap = items;
      items = other;
      other = swap;
    }
  return found;
}

typedef struct
{
  const TfJoyPoints *points;
  double pairs; /* of different x, by weight */
  Item *items, *other;
} Pairs;

static double
count_pairs (const TfJoyPoints *points)
{
  double all = 0.0, same = 0.0, group = 0.0;
  for (guint k = 0; k < points->n; k++)
    {
      double count = points->count[points->by_x[k]];
      gboolean goes_on = k > 0 && !(points->x[points->by_x[k]] > points->x[points->by_x[k - 1]]);
      group = goes_on ? group + count : count;
      same += count * (2.0 * group - count); /* the sum of these is the sum of group^2 */
      all += count;
    }
  return 0.5 * (all * all - same);
}

/* The share of pairs whose slope is less than @slope. */
static double
share_below (const Pairs *pairs, double slope)
{
  const TfJoyPoints *p = pairs->points;
  guint n = 0;
  for (guint k = 0; k < p->n; k++)
    {
      guint row = p->by_x[k];
      if (p->count[row] > 0.0)
        pairs->items[n++] = (Item){ p->y[row] - slope * p->x[row], p->count[row] };
    }
  return count_inversions (pairs->items, pairs->other, n) / pairs->pairs;
}

/* Whether the slope wanted lies above @slope: the lower median has fewer than @share below it; the
 * upper one is the last with no more than that. */
static gboolean
lies_above (const Pairs *pairs, double slope, double share, gboolean upper)
{
  double below = share_below (pairs, slope);
  return upper ? below <= share : below < share;
}

/* The quantile @share of the pairs' slopes, looked for about @guess, to within @tolerance or to the
 * last digits. */
static double
find_slope (const Pairs *pairs, double share, gboolean upper, double guess, double step,
            double tolerance)
{
  double low = guess - step, high = guess + step;
  for (double wider = step; !lies_above (pairs, low, share, upper) && isfinite (low); wider *= 2.0)
    low -= wider;
  for (double wider = step; lies_above (pairs, high, share, upper) && isfinite (high); wider *= 2.0)
    high += wider;
  while (high - low > fmax (tolerance, 4e-16 * fmax (fabs (low), fabs (high))))
    {
      double middle = 0.5 * (low + high);
      if (!(middle > low && middle < high))
        break;
      if (lies_above (pairs, middle, share, upper))
        low = middle;
      else
        high = middle;
    }
  return isfinite (low) && isfinite (high) ? 0.5 * (low + high) : NAN;
}

/* The whole sample: as exact as the arithmetic, midway between the two middle slopes of an even
 * number. */
static double
find_exactly (const Pairs *pairs, TfJoyPoints *points)
{
  double start = tf_joy_line_free_least_squares (points).slope;
  double step = fmax (1e-3 * fabs (start), 1e-6);
  double low = find_slope (pairs, 0.5, FALSE, start, step, 0.0);
  double high = find_slope (pairs, 0.5, TRUE, low, step, 0.0);
  double reach = fmin (0.49, 1.0 / sqrt (points->n)); /* three standard errors of the share */
  points->sen_slope = 0.5 * (low + high);
  points->sen_step = find_slope (pairs, 0.5 + reach, FALSE, high, step, 0.01 * step)
                     - find_slope (pairs, 0.5 - reach, FALSE, low, step, 0.01 * step);
  points->sen_step = fmax (points->sen_step, 1e-9 * (1.0 + fabs (points->sen_slope)));
  return points->sen_slope;
}

static double
median_of (const TfJoyPoints *points, const guint *order, const double *values)
{
  double total = 0.0;
  for (guint k = 0; k < points->n; k++)
    total += points->count[k];
  TfJoyRunning median = { .half = 0.5 * total, .value = NAN };
  for (guint k = 0; k < points->n; k++)
    tf_joy_running_add (&median, values[order[k]], points->count[order[k]]);
  return median.value;
}

TfJoyLine
tf_joy_line_free_robust (TfJoyPoints *points)
{
  tf_joy_points_order (points, FALSE);
  Pairs pairs = { .points = points, .pairs = count_pairs (points) };
  if (!(pairs.pairs > 0.0))
    return (TfJoyLine){ NAN, NAN };
  g_autofree Item *items = g_new (Item, points->n), *other = g_new (Item, points->n);
  pairs.items = items;
  pairs.other = other;
  gboolean near = points->drawn && points->sen_step > 0.0;
  double slope = near ? find_slope (&pairs, 0.5, FALSE, points->sen_slope, 0.5 * points->sen_step,
                                    1e-3 * points->sen_step)
                      : find_exactly (&pairs, points);
  double x = median_of (points, points->by_x, points->x),
         y = median_of (points, points->by_y, points->y);
  return (TfJoyLine){ slope, y - slope * x };
}
