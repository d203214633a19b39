/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-line.h"

#include <math.h>
#include <stdlib.h>
#include <glib/gi18n-lib.h>
#include <gsl/gsl_cdf.h>
#include <gsl/gsl_fit.h>
#include <gsl/gsl_statistics_double.h>

static const TfLine no_line = { NAN, NAN, NAN, NAN, NAN };

/* Sums about the means. */
typedef struct
{
  double x, y, xx, xy, yy;
} Moments;

static Moments
moments_of (const double *x, const double *y, guint n)
{
  Moments m = { .x = gsl_stats_mean (x, 1, n), .y = gsl_stats_mean (y, 1, n) };
  for (guint k = 0; k < n; k++)
    {
      m.xx += (x[k] - m.x) * (x[k] - m.x);
      m.xy += (x[k] - m.x) * (y[k] - m.y);
      m.yy += (y[k] - m.y) * (y[k] - m.y);
    }
  return m;
}

static TfLine
line_through_means (const Moments *m, double slope)
{
  return (TfLine){ slope, m->y - slope * m->x, NAN, NAN, NAN };
}

static TfLine
least_squares (const double *x, const double *y, guint n)
{
  double c0, c1, c00, c01, c11, sum;
  if (n < 3)
    return no_line;
  gsl_fit_linear (x, 1, y, 1, n, &c0, &c1, &c00, &c01, &c11, &sum);
  return (TfLine){ c1, c0, sqrt (c11), sqrt (c00), sum };
}

static TfLine
inverse (const double *x, const double *y, guint n)
{
  Moments m = moments_of (x, y, n);
  return n < 3 ? no_line : line_through_means (&m, m.yy / m.xy);
}

static TfLine
reduced_major_axis (const double *x, const double *y, guint n)
{
  Moments m = moments_of (x, y, n);
  return n < 3 ? no_line : line_through_means (&m, copysign (sqrt (m.yy / m.xx), m.xy));
}

static TfLine
orthogonal (const double *x, const double *y, guint n)
{
  return tf_line_deming (x, y, n, 1.0);
}

const TfLineMethod tf_line_methods[] = {
  { "least-squares", N_ ("errors in y alone (Legendre 1805; Gauss 1809)"), least_squares },
  { "inverse", N_ ("errors in x alone: x on y"), inverse },
  { "reduced-major-axis", N_ ("the ratio of the spreads (Teissier 1948, from memory)"),
    reduced_major_axis },
  { "orthogonal", N_ ("equal errors in x and y (Adcock 1878)"), orthogonal },
  { NULL, NULL, NULL },
};

TfLine
tf_line_deming (const double *x, const double *y, guint n, double ratio)
{
  if (n < 3 || !(ratio > 0.0))
    return no_line;
  Moments m = moments_of (x, y, n);
  double half = m.yy - ratio * m.xx;
  return line_through_means (&m, (half + sqrt (half * half + 4.0 * ratio * m.xy * m.xy))
                                     / (2.0 * m.xy));
}

/* -- York --------------------------------------------------------------------------------------- */

typedef struct
{
  const double *x, *y, *wx, *wy;
  guint n;
} Weighed;

/* One step of York et al. 2004: the line that follows from the slope @b. */
static TfLine
york_step (const Weighed *p, double b)
{
  double sum = 0, mean_x = 0, mean_y = 0, mean_beta = 0, upper = 0, lower = 0, spread = 0, chi2 = 0;
  for (guint k = 0; k < p->n; k++)
    {
      double w = p->wx[k] * p->wy[k] / (p->wx[k] + b * b * p->wy[k]);
      sum += w;
      mean_x += w * p->x[k];
      mean_y += w * p->y[k];
    }
  mean_x /= sum;
  mean_y /= sum;
  for (int round = 0; round < 2; round++)
    for (guint k = 0; k < p->n; k++)
      {
        double w = p->wx[k] * p->wy[k] / (p->wx[k] + b * b * p->wy[k]);
        double u = p->x[k] - mean_x, v = p->y[k] - mean_y;
        double beta = w * (u / p->wy[k] + b * v / p->wx[k]);
        if (round == 0)
          {
            upper += w * beta * v;
            lower += w * beta * u;
            mean_beta += w * beta / sum;
            continue;
          }
        spread += w * (beta - mean_beta) * (beta - mean_beta);
        double off = v - b * u;
        chi2 += w * off * off;
      }
  double adjusted = mean_x + mean_beta; /* mean of the adjusted x */
  TfLine line = { upper / lower, 0.0, sqrt (1.0 / spread), 0.0, chi2 };
  line.intercept = mean_y - line.slope * mean_x;
  line.intercept_sd = sqrt (1.0 / sum + adjusted * adjusted / spread);
  return line;
}

TfLine
tf_line_york (const double *x, const double *y, const double *weight_x, const double *weight_y,
              guint n)
{
  const Weighed points = { x, y, weight_x, weight_y, n };
  for (guint k = 0; k < n; k++)
    if (!(weight_x[k] > 0.0 && weight_y[k] > 0.0))
      return no_line;
  TfLine line = n < 3 ? no_line : least_squares (x, y, n);
  for (int step = 0; n >= 3 && step < 500; step++)
    {
      TfLine next = york_step (&points, line.slope);
      if (!isfinite (next.slope))
        return no_line;
      if (fabs (next.slope - line.slope) <= 1e-14 * fabs (next.slope))
        return next;
      line = next;
    }
  return fabs (york_step (&points, line.slope).slope - line.slope) < 1e-9 * fabs (line.slope)
             ? line
             : no_line;
}

/* -- pairs -------------------------------------------------------------------------------------- */

static int
sign_of (double value)
{
  return (value > 0.0) - (value < 0.0);
}

/* The chance that @n ranks in random order have a sum of signs at least as far from 0 as @score:
 * the number of orders with k inversions, built up rank by rank. */
static double
exact_chance (guint n, long score)
{
  guint pairs = n * (n - 1) / 2;
  g_autofree double *share = g_new0 (double, pairs + 1), *next = g_new0 (double, pairs + 1);
  share[0] = 1.0;
  for (guint ranks = 2; ranks <= n; ranks++)
    {
      double running = 0.0;
      for (guint k = 0; k <= pairs; k++)
        {
          running += share[k] - (k >= ranks ? share[k - ranks] : 0.0);
          next[k] = running / ranks;
        }
      double *swap = share;
      share = next;
      next = swap;
    }
  double chance = 0.0;
  for (guint k = 0; k <= pairs; k++)
    if (labs ((long)pairs - 2 * (long)k) >= labs (score))
      chance += share[k];
  return fmin (1.0, chance);
}

static int
compare_numbers (gconstpointer a, gconstpointer b)
{
  double left = *(const double *)a, right = *(const double *)b;
  return (left > right) - (left < right);
}

/* Sums over groups of equal values of t (t-1), t (t-1) (t-2) and t (t-1) (2 t + 5). */
typedef struct
{
  double two, three, five;
} Ties;

static Ties
ties_of (const double *values, guint n)
{
  Ties ties = { 0 };
  g_autofree double *sorted = g_memdup2 (values, n * sizeof *values);
  qsort (sorted, n, sizeof *sorted, compare_numbers);
  for (guint first = 0, next = 0; first < n; first = next)
    {
      while (next < n && !(sorted[next] > sorted[first]))
        next++;
      double t = next - first;
      ties.two += t * (t - 1.0);
      ties.three += t * (t - 1.0) * (t - 2.0);
      ties.five += t * (t - 1.0) * (2.0 * t + 5.0);
    }
  return ties;
}

/* Variance of the sum of signs when nothing is related (Kendall 1970, Rank Correlation Methods, eq.
 * 4.4, from memory). */
static double
score_variance (double n, const Ties *x, const Ties *y)
{
  double v = (n * (n - 1.0) * (2.0 * n + 5.0) - x->five - y->five) / 18.0
             + x->two * y->two / (2.0 * n * (n - 1.0));
  return n > 2.0 ? v + x->three * y->three / (9.0 * n * (n - 1.0) * (n - 2.0)) : v;
}

double
tf_kendall (const double *x, const double *y, guint n, double *p)
{
  long score = 0;
  for (guint i = 0; i < n; i++)
    for (guint j = 0; j < i; j++)
      score += sign_of (x[i] - x[j]) * sign_of (y[i] - y[j]);
  if (p != NULL)
    *p = NAN;
  if (n < 2)
    return NAN;
  Ties of_x = ties_of (x, n), of_y = ties_of (y, n);
  double all = (double)n * (n - 1.0), spread = (all - of_x.two) * (all - of_y.two);
  if (!(spread > 0.0))
    return NAN;
  if (p != NULL && n <= 60 && !(of_x.two > 0.0) && !(of_y.two > 0.0))
    *p = exact_chance (n, score);
  else if (p != NULL)
    *p = 2.0 * gsl_cdf_ugaussian_Q (fabs ((double)score) / sqrt (score_variance (n, &of_x, &of_y)));
  return 2.0 * (double)score / sqrt (spread);
}

TfInterval
tf_sen_interval (const double *x, const double *y, guint n, double level)
{
  const TfInterval none = { NAN, NAN };
  if (n < 3 || !(level > 0.0 && level < 1.0))
    return none;
  g_autofree double *slopes = g_new (double, (gsize)n *(n - 1) / 2);
  guint m = 0;
  for (guint i = 0; i < n; i++)
    for (guint j = 0; j < i; j++)
      if (sign_of (x[i] - x[j]) != 0)
        slopes[m++] = (y[i] - y[j]) / (x[i] - x[j]);
  qsort (slopes, m, sizeof *slopes, compare_numbers);
  Ties of_x = ties_of (x, n), of_y = ties_of (y, n);
  double reach
      = gsl_cdf_ugaussian_Pinv (0.5 * (1.0 + level)) * sqrt (score_variance (n, &of_x, &of_y));
  double low = round (0.5 * (m - reach)), high = round (0.5 * (m + reach));
  if (m == 0 || low < 1.0 || high + 1.0 > m)
    return none;
  return (TfInterval){ slopes[(guint)low - 1], slopes[(guint)high] };
}
