/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-proportion.h"

#include <math.h>
#include <stdlib.h>
#include <gsl/gsl_cdf.h>
#include <gsl/gsl_rng.h>

#include "tf-distinct.h"
#include "tf-many.h"
#include "tf-sort.h"

#define NO_INTERVAL ((TfInterval){ NAN, NAN })

static gboolean
level_is_good (double level)
{
  return level > 0.0 && level < 1.0;
}

TfInterval
tf_wilson (guint x, guint n, double level)
{
  if (n == 0 || x > n || !level_is_good (level))
    return NO_INTERVAL;
  double z = gsl_cdf_ugaussian_Pinv (0.5 * (1.0 + level));
  double p = (double)x / n, zz = z * z / n;
  double centre = p + 0.5 * zz, half = z * sqrt (p * (1.0 - p) / n + 0.25 * zz / n);
  return (TfInterval){ x == 0 ? 0.0 : fmax (0.0, (centre - half) / (1.0 + zz)),
                       x == n ? 1.0 : fmin (1.0, (centre + half) / (1.0 + zz)) };
}

/* The point below which a beta (@a, @b) variable, both > 0, lies with chance @p. By halving on
 * GSL's distribution function: gsl_cdf_beta_Pinv fails to converge, and calls GSL's error handler,
 * for some of the smallest counts already (62 of the 159,600 limits with n < 400 in GSL 2.7). */
static double
beta_quantile (double p, double a, double b)
{
  double low = 0.0, high = 1.0;
  for (int k = 0; k < 1100 && high - low > 4e-16 * high; k++)
    {
      double middle = 0.5 * (low + high);
      double below = gsl_cdf_beta_P (middle, a, b);
      if (isnan (below))
        return NAN;
      if (below < p)
        low = middle;
      else
        high = middle;
    }
  return 0.5 * (low + high);
}

TfInterval
tf_clopper_pearson (guint x, guint n, double level)
{
  if (n == 0 || x > n || !level_is_good (level))
    return NO_INTERVAL;
  double tail = 0.5 * (1.0 - level);
  return (TfInterval){ x == 0 ? 0.0 : beta_quantile (tail, x, (double)n - x + 1.0),
                       x == n ? 1.0 : beta_quantile (1.0 - tail, x + 1.0, (double)n - x) };
}

typedef struct
{
  double row, column, n; /* x of the table's n are in the first row and the first column */
} Margins;

/* The hypergeometric weight of x + @step from that of x: whole tables by ratios, so that nothing
 * overflows however large they are. */
static double
next_weight (const Margins *m, double x, double weight, int step)
{
  if (step > 0)
    return weight * (m->row - x) * (m->column - x)
           / ((x + 1.0) * (m->n - m->row - m->column + x + 1.0));
  return weight * x * (m->n - m->row - m->column + x)
         / ((m->row - x + 1.0) * (m->column - x + 1.0));
}

/* The weight of @wanted relative to that of @mode. */
static double
weight_from (const Margins *m, double mode, double wanted)
{
  double weight = 1.0;
  int step = wanted > mode ? 1 : -1;
  for (double x = mode; fabs (x - wanted) > 0.5; x += step)
    weight = next_weight (m, x, weight, step);
  return weight;
}

double
tf_fisher_exact (guint a, guint b, guint c, guint d)
{
  const Margins m = { (double)a + b, (double)a + c, (double)a + b + c + d };
  double low = fmax (0.0, m.row + m.column - m.n), high = fmin (m.row, m.column);
  double mode = fmin (high, fmax (low, floor ((m.row + 1.0) * (m.column + 1.0) / (m.n + 2.0))));
  double limit = weight_from (&m, mode, a) * (1.0 + 1e-7), all = 1.0, unlikely = 1.0 <= limit;
  for (int step = -1; step <= 1; step += 2)
    {
      double weight = 1.0;
      for (double x = mode; step > 0 ? x < high - 0.5 : x > low + 0.5; x += step)
        {
          weight = next_weight (&m, x, weight, step);
          if (!(weight > 0.0))
            break;
          all += weight;
          unlikely += weight <= limit ? weight : 0.0;
        }
    }
  return fmin (1.0, unlikely / all);
}

guint
tf_holm (const double *p, guint n, double *adjusted)
{
  g_autofree double *given = g_memdup2 (p, n * sizeof *p);
  g_autofree gboolean *done = g_new0 (gboolean, n + 1);
  guint m = 0;
  double greatest = 0.0;
  for (guint k = 0; k < n; k++)
    {
      m += !isnan (given[k]);
      adjusted[k] = NAN;
    }
  for (guint left = m; left > 0; left--)
    {
      guint least = n;
      for (guint k = 0; k < n; k++)
        if (!done[k] && !isnan (given[k]) && (least == n || given[k] < given[least]))
          least = k;
      greatest = fmax (greatest, fmin (1.0, left * given[least]));
      adjusted[least] = greatest;
      done[least] = TRUE;
    }
  return m;
}

double
tf_quantile (const double *sorted, guint n, double p)
{
  if (n == 0 || !(p >= 0.0 && p <= 1.0))
    return NAN;
  double place = p * (n - 1);
  guint below = (guint)floor (place);
  if (below + 1 >= n)
    return sorted[n - 1];
  return sorted[below] + (place - below) * (sorted[below + 1] - sorted[below]);
}

static int
compare_numbers (gconstpointer a, gconstpointer b)
{
  double left = *(const double *)a, right = *(const double *)b;
  return (left > right) - (left < right);
}

/* Hoare 1961. */
double
tf_select (double *values, guint n, guint wanted)
{
  gssize low = 0, high = (gssize)n - 1;
  while (low < high)
    {
      double pivot = values[low + (high - low) / 2];
      gssize i = low, j = high;
      while (i <= j)
        {
          while (values[i] < pivot)
            i++;
          while (values[j] > pivot)
            j--;
          if (i > j)
            break;
          double swap = values[i];
          values[i++] = values[j];
          values[j--] = swap;
        }
      if ((gssize)wanted <= j)
        high = j;
      else if ((gssize)wanted >= i)
        low = i;
      else
        break;
    }
  return values[wanted];
}

double
tf_median (const double *values, guint n)
{
  if (n == 0)
    return NAN;
  g_autofree double *some = tf_dup_many (values, n, sizeof *values);
  for (guint k = 0; k < n; k++)
    if (isnan (some[k]))
      return NAN;
  double upper = tf_select (some, n, n / 2);
  if (n % 2 == 1)
    return upper;
  double lower = some[0]; /* the greatest before it */
  for (guint k = 1; k < n / 2; k++)
    lower = fmax (lower, some[k]);
  return lower + 0.5 * (upper - lower);
}

typedef struct
{
  double value, weight; /* value first: compare_numbers reads it */
} Weighed;

double
tf_weighted_median (const double *values, const double *weights, guint n)
{
  g_autofree Weighed *rows = g_new (Weighed, n);
  guint m = 0;
  for (guint k = 0; k < n; k++)
    if (isfinite (values[k]) && weights[k] > 0.0 && isfinite (weights[k]))
      rows[m++] = (Weighed){ values[k], weights[k] };
  if (m == 0)
    return NAN;
  qsort (rows, m, sizeof *rows, compare_numbers);
  double total = 0.0, sum = 0.0;
  for (guint k = 0; k < m; k++)
    total += rows[k].weight;
  for (guint k = 0; k < m; k++)
    {
      sum += rows[k].weight;
      if (fabs (sum - 0.5 * total) <= 1e-12 * total && k + 1 < m)
        return 0.5 * (rows[k].value + rows[k + 1].value);
      if (sum > 0.5 * total)
        return rows[k].value;
    }
  return rows[m - 1].value;
}

/* The rows by cluster: those of cluster c are rows[start[c]] to rows[start[c + 1] - 1]; clusters in
 * the order in which they first come, so that a draw means the same whatever the ids are. */
typedef struct
{
  guint n;
  guint *start, *rows;
} Clusters;

static Clusters
clusters_new (const guint32 *cluster, guint n)
{
  g_autoptr (TfDistinct) numbers = tf_distinct_new (n);
  g_autofree guint *of_row = g_new (guint, n);
  Clusters result = { 0, g_new0 (guint, n + 2), g_new (guint, n) };
  for (guint k = 0; k < n; k++)
    {
      of_row[k] = tf_distinct_add (numbers, cluster[k]);
      result.start[of_row[k] + 2]++;
    }
  result.n = tf_distinct_get_n (numbers);
  for (guint c = 2; c <= result.n; c++)
    result.start[c] += result.start[c - 1];
  for (guint k = 0; k < n; k++)
    result.rows[result.start[of_row[k] + 1]++] = k;
  return result;
}

static void
clusters_clear (Clusters *clusters)
{
  g_free (clusters->start);
  g_free (clusters->rows);
}

/* One draw: as many clusters as there are, with replacement, their rows appended to @drawn. */
static void
draw_rows (const Clusters *clusters, gsl_rng *rng, GArray *drawn)
{
  g_array_set_size (drawn, 0);
  for (guint k = 0; k < clusters->n; k++)
    {
      guint c = (guint)gsl_rng_uniform_int (rng, clusters->n);
      g_array_append_vals (drawn, clusters->rows + clusters->start[c],
                           clusters->start[c + 1] - clusters->start[c]);
    }
}

static TfInterval
percentiles (double *values, guint n, guint draws, double level)
{
  if (2 * n < draws)
    return NO_INTERVAL;
  tf_sort_numbers (values, n);
  return (TfInterval){ tf_quantile (values, n, 0.5 * (1.0 - level)),
                       tf_quantile (values, n, 0.5 * (1.0 + level)) };
}

/* What one draw gives. */
typedef double (*DrawFunc) (const Clusters *clusters, gsl_rng *rng, gpointer data);

static TfInterval
bootstrap (const guint32 *cluster, guint n, guint draws, guint64 seed, double level,
           const TfCancel *cancel, DrawFunc func, gpointer data)
{
  if (n == 0 || draws == 0 || !level_is_good (level))
    return NO_INTERVAL;
  Clusters clusters = clusters_new (cluster, n);
  TfInterval result = NO_INTERVAL;
  gsl_rng *rng = clusters.n < 2 ? NULL : gsl_rng_alloc (gsl_rng_mt19937);
  if (rng != NULL)
    {
      gsl_rng_set (rng, (unsigned long)seed);
      g_autofree double *values = g_new (double, draws);
      guint good = 0;
      for (guint d = 0; d < draws && !tf_cancel_is_raised (cancel); d++)
        {
          double value = func (&clusters, rng, data);
          if (!isnan (value))
            values[good++] = value;
        }
      if (!tf_cancel_is_raised (cancel))
        result = percentiles (values, good, draws, level);
      gsl_rng_free (rng);
    }
  clusters_clear (&clusters);
  return result;
}

typedef struct
{
  TfResampleFunc func;
  gpointer data;
  GArray *drawn; /* guint */
} Resample;

static double
draw_statistic (const Clusters *clusters, gsl_rng *rng, gpointer data)
{
  Resample *resample = data;
  draw_rows (clusters, rng, resample->drawn);
  return resample->func ((const guint *)resample->drawn->data, resample->drawn->len,
                         resample->data);
}

TfInterval
tf_bootstrap_clusters (const guint32 *cluster, guint n, guint draws, guint64 seed, double level,
                       const TfCancel *cancel, TfResampleFunc func, gpointer data)
{
  g_autoptr (GArray) drawn = g_array_sized_new (FALSE, FALSE, sizeof (guint), n);
  Resample resample = { func, data, drawn };
  return bootstrap (cluster, n, draws, seed, level, cancel, draw_statistic, &resample);
}

/* Sums over each cluster, made at the first draw. */
typedef struct
{
  const guint8 *is;
  guint *sums;
} Share;

static double
draw_share (const Clusters *clusters, gsl_rng *rng, gpointer data)
{
  Share *share = data;
  if (share->sums == NULL)
    {
      share->sums = g_new0 (guint, clusters->n);
      for (guint c = 0; c < clusters->n; c++)
        for (guint k = clusters->start[c]; k < clusters->start[c + 1]; k++)
          share->sums[c] += share->is[clusters->rows[k]] != 0;
    }
  double sum = 0.0, all = 0.0;
  for (guint k = 0; k < clusters->n; k++)
    {
      guint c = (guint)gsl_rng_uniform_int (rng, clusters->n);
      sum += share->sums[c];
      all += clusters->start[c + 1] - clusters->start[c];
    }
  return sum / all;
}

TfInterval
tf_bootstrap_share (const guint32 *cluster, const guint8 *is, guint n, guint draws, guint64 seed,
                    double level, const TfCancel *cancel)
{
  Share share = { is, NULL };
  TfInterval result = bootstrap (cluster, n, draws, seed, level, cancel, draw_share, &share);
  g_free (share.sums);
  return result;
}
