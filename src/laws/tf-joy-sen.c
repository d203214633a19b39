/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>

#include "tf-joy-line-private.h"

/* The line of Theil 1950 and Sen 1968 (J. Am. Stat. Assoc. 63, 1379), without a look at every pair.
 *
 * With points in order of x (and of y where x is the same), the pairs whose slope lies below b are
 * the inversions of y - b x, and a merge sort counts them. So two slopes are driven towards the median
 * from both sides until few pairs lie between them; those are the inversions between the orders at the
 * one and at the other, and are listed.
 */

typedef struct
{
  double v, w; /* y - b x; count */
  guint row;
} Item;

typedef struct
{
  double slope, weight;
} Slope;

static void
list_pair (GArray *list, const TfJoyPoints *points, const Item *a, const Item *b)
{
  double x = points->x[b->row] - points->x[a->row], y = points->y[b->row] - points->y[a->row];
  const Slope slope = { y / x, a->w * b->w };
  g_array_append_val (list, slope);
}

/* Merges the sorted left[0..n_left) and right[0..n_right) into @out; adds the weight of inversions.
 * @list: (nullable): each of them is added (Slope of its pair in @points).
 */
static double
merge (const Item *left, guint n_left, const Item *right, guint n_right, Item *out,
       const TfJoyPoints *points, GArray *list)
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
      for (guint k = i; list != NULL && k < n_left; k++)
        list_pair (list, points, &left[k], &right[j]);
      *out++ = right[j++];
    }
  while (i < n_left)
    *out++ = left[i++];
  while (j < n_right)
    *out++ = right[j++];
  return found;
}

/* Sorts; the sorted items are in @items or in @other, as *sorted says. */
static double
count_inversions (Item *items, Item *other, guint n, const TfJoyPoints *points, GArray *list,
                  Item **sorted)
{
  double found = 0.0;
  for (guint width = 1; width < n; width *= 2)
    {
      for (guint at = 0; at < n; at += 2 * width)
        {
          guint n_left = MIN (width, n - at), n_right = MIN (width, n - at - n_left);
          found += merge (items + at, n_left, items + at + n_left, n_right, other + at,
                          points, list);
        }
      Item *swap = items;
      items = other;
      other = swap;
    }
  *sorted = items;
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

/* The points in the order of y - slope x, and the weight of the pairs whose slope is less. */
static double
sort_at (const Pairs *pairs, double slope, Item **sorted, guint *n_sorted)
{
  const TfJoyPoints *p = pairs->points;
  guint n = 0;
  for (guint k = 0; k < p->n; k++)
    {
      guint row = p->by_x[k];
      if (p->count[row] > 0.0)
        pairs->items[n++] = (Item){ p->y[row] - slope * p->x[row], p->count[row], row };
    }
  *n_sorted = n;
  return count_inversions (pairs->items, pairs->other, n, NULL, NULL, sorted);
}

static double
count_below (const Pairs *pairs, double slope)
{
  Item *sorted;
  guint n;
  return sort_at (pairs, slope, &sorted, &n);
}

/* Two slopes with the one that is looked for between them: no more than the weight @target below @low,
 * more below @high. */
typedef struct
{
  double target, low, high, below_low, below_high;
} Bracket;

static void
move_end (Bracket *b, double slope, double below)
{
  if (below > b->target)
    {
      b->high = slope;
      b->below_high = below;
    }
  else
    {
      b->low = slope;
      b->below_low = below;
    }
}

static Bracket
bracket_about (const Pairs *pairs, double target, double guess, double step)
{
  Bracket b = { target, NAN, NAN, 0.0, pairs->pairs };
  double wider = step, slope = guess;
  move_end (&b, guess, count_below (pairs, guess));
  gboolean up = isnan (b.high);
  while ((isnan (b.low) || isnan (b.high)) && isfinite (slope))
    {
      slope += up ? wider : -wider;
      move_end (&b, slope, count_below (pairs, slope));
      wider *= 2.0;
    }
  return b;
}

/* Until no more than @most pairs lie between, or the two are as near as @tolerance or as numbers go. A
 * step goes where the counts say and a little beyond, so that both ends come near; each third goes to the
 * middle, so that it ends whatever the counts say. */
static void
close_in (const Pairs *pairs, Bracket *b, double most, double tolerance)
{
  const double beyond = 0.02;
  for (guint k = 0; b->below_high - b->below_low > most; k++)
    {
      double width = b->high - b->low,
             told = (b->target - b->below_low) / (b->below_high - b->below_low),
             part = k % 3 == 2 ? 0.5
                               : CLAMP (told + (k % 3 == 0 ? -beyond : beyond), 0.01, 0.99);
      if (!(width > fmax (tolerance, 4e-16 * fmax (fabs (b->low), fabs (b->high)))))
        return;
      double slope = b->low + part * width;
      if (!(slope > b->low && slope < b->high))
        return;
      move_end (b, slope, count_below (pairs, slope));
    }
}

/* A quantile of the slopes, to within @tolerance. */
static double
find_nearly (const Pairs *pairs, double share, double guess, double step, double tolerance)
{
  Bracket b = bracket_about (pairs, share * pairs->pairs, guess, step);
  close_in (pairs, &b, 0.0, tolerance);
  return 0.5 * (b.low + b.high);
}

static int
compare_slopes (gconstpointer a, gconstpointer b)
{
  double p = ((const Slope *)a)->slope, q = ((const Slope *)b)->slope;
  return (p > q) - (p < q);
}

/* The slopes of the pairs between the two ends, in order. */
static GArray *
list_between (const Pairs *pairs, const Bracket *b)
{
  Item *sorted, *again;
  guint n;
  GArray *list = g_array_new (FALSE, FALSE, sizeof (Slope));
  if (!isfinite (b->low) || !isfinite (b->high))
    return list;
  sort_at (pairs, b->low, &sorted, &n);
  for (guint k = 0; k < n; k++)
    sorted[k].v = pairs->points->y[sorted[k].row] - b->high * pairs->points->x[sorted[k].row];
  count_inversions (sorted, sorted == pairs->items ? pairs->other : pairs->items, n, pairs->points,
                    list, &again);
  g_array_sort (list, compare_slopes);
  return list;
}

/* Midway between the two slopes where half of the weight is reached and passed; @list begins where the
 * weight @below lies below. NaN when it ends before. */
static double
middle_of (const GArray *list, double below, double half)
{
  double lower = NAN;
  for (guint k = 0; k < list->len; k++)
    {
      const Slope *s = &g_array_index (list, Slope, k);
      below += s->weight;
      if (isnan (lower) && below >= half)
        lower = s->slope;
      if (below > half)
        return 0.5 * (lower + s->slope);
    }
  return NAN;
}

/* The whole sample. Counts are whole numbers: no count is half of the pairs less a quarter, so that the
 * lower of two middle slopes lies surely between the ends. */
static double
find_exactly (const Pairs *pairs, TfJoyPoints *points)
{
  double start = tf_joy_line_free_least_squares (points).slope, half = 0.5 * pairs->pairs;
  double step = fmax (1e-3 * fabs (start), 1e-6);
  Bracket b = bracket_about (pairs, half - 0.25, start, step);
  close_in (pairs, &b, 4.0 * points->n + 64.0, 1e-14 * step);
  for (double wider = b.high - b.low; !(b.below_high > half) && isfinite (b.high); wider *= 2.0)
    move_end (&b, b.high + wider, count_below (pairs, b.high + wider));
  points->sen_slope = 0.5 * (b.low + b.high); /* when too many pairs have one slope */
  if (!(b.below_high - b.below_low > 64.0 * points->n + 1024.0))
    {
      g_autoptr (GArray) list = list_between (pairs, &b);
      double middle = middle_of (list, b.below_low, half);
      points->sen_slope = isnan (middle) ? points->sen_slope : middle;
    }
  return points->sen_slope;
}

/* How far draws may go: three standard errors of the share. */
static void
measure_step (const Pairs *pairs, TfJoyPoints *points)
{
  double step = fmax (1e-3 * fabs (points->sen_slope), 1e-6),
         reach = fmin (0.49, 1.0 / sqrt (points->n));
  points->sen_step
      = find_nearly (pairs, 0.5 + reach, points->sen_slope, step, 0.01 * step)
        - find_nearly (pairs, 0.5 - reach, points->sen_slope, step, 0.01 * step);
  points->sen_step = fmax (points->sen_step, 1e-9 * (1.0 + fabs (points->sen_slope)));
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
  if (points->drawn && points->sen_known && !(points->sen_step > 0.0))
    measure_step (&pairs, points);
  double slope = points->drawn && points->sen_known
                     ? find_nearly (&pairs, 0.5, points->sen_slope, 0.5 * points->sen_step,
                                    1e-3 * points->sen_step)
                     : find_exactly (&pairs, points);
  points->sen_known |= !points->drawn;
  double x = median_of (points, points->by_x, points->x),
         y = median_of (points, points->by_y, points->y);
  return (TfJoyLine){ slope, y - slope * x };
}
