/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-noise-private.h"

#include <math.h>
#include <string.h>

/* A ring's sigma is the fixed point of "the median distance from the median of the pixels
 * within CLIP sigma": reached from below, so that the many pixels of an active disk that are
 * not noise never enter. CORE is that median for a normal distribution cut at CLIP: 2 Phi
 * (CORE) - 1 = (2 Phi (CLIP) - 1) / 2. */
#define CLIP 2.5
#define CORE 0.66475116

enum
{
  WANTED = 300000,   /* pixels looked at for sigma */
  LOOKED_AT = 50000, /* and for the correlation */
  FEWEST = 60,       /* pixels that make a ring */
  REACH = 4,         /* longest lag of the autocorrelation, pixels */
  TURNS = 60,
};

/* -- sorting and medians --------------------------------------------------------------------- */

/* Floats as integers of the same order. */
static guint32
to_key (float value)
{
  guint32 bits;
  memcpy (&bits, &value, sizeof bits);
  return (bits & 0x80000000u) != 0 ? ~bits : bits | 0x80000000u;
}

static float
from_key (guint32 key)
{
  guint32 bits = (key & 0x80000000u) != 0 ? key & 0x7fffffffu : ~key;
  float value;
  memcpy (&value, &bits, sizeof value);
  return value;
}

/* Radix sort, three passes of 11 bits. */
static void
sort_floats (float *values, gsize n)
{
  g_autofree guint32 *keys = g_new (guint32, n), *other = g_new (guint32, n);
  for (gsize k = 0; k < n; k++)
    keys[k] = to_key (values[k]);
  for (guint shift = 0; shift < 33; shift += 11)
    {
      gsize start[2049] = { 0 };
      for (gsize k = 0; k < n; k++)
        start[((keys[k] >> shift) & 2047) + 1]++;
      for (guint b = 0; b < 2048; b++)
        start[b + 1] += start[b];
      for (gsize k = 0; k < n; k++)
        other[start[(keys[k] >> shift) & 2047]++] = keys[k];
      guint32 *swap = keys;
      keys = other;
      other = swap;
    }
  for (gsize k = 0; k < n; k++)
    values[k] = from_key (keys[k]);
}

/* First index whose value is >= @limit. */
static gsize
lower_bound (const float *sorted, gsize n, double limit)
{
  gsize low = 0, high = n;
  while (low < high)
    {
      gsize middle = low + (high - low) / 2;
      if ((double)sorted[middle] < limit)
        low = middle + 1;
      else
        high = middle;
    }
  return low;
}

static double
median_of (const float *sorted, gsize n)
{
  return n % 2 == 1 ? (double)sorted[n / 2]
                    : 0.5 * ((double)sorted[n / 2 - 1] + (double)sorted[n / 2]);
}

/* The @share quantile of |value - centre| of a sorted array: how far must one reach to hold
 * that many? */
static double
reach_of (const float *sorted, gsize n, double centre, double share)
{
  double low = 0, high = MAX (centre - (double)sorted[0], (double)sorted[n - 1] - centre);
  for (guint k = 0; k < 48 && high - low > 1e-7 * high; k++)
    {
      double d = 0.5 * (low + high);
      gsize held = lower_bound (sorted, n, nextafter (centre + d, INFINITY))
                   - lower_bound (sorted, n, centre - d);
      if ((double)held < share * (double)n)
        low = d;
      else
        high = d;
    }
  return high;
}

/* Values stored in whole steps stand in runs, and a median of them moves by whole steps. Each
 * run is spread evenly over the half gaps on its sides; values that stand alone are left alone.
 * A run that holds most of the sample is no noise cut into steps, but a picture without noise:
 * nothing is spread then. Returns the step about the median, 0 where there is none. */
static double
spread_steps (float *sorted, gsize n)
{
  double step = 0, left = 0;
  float middle = sorted[n / 2];
  if (lower_bound (sorted, n, nextafter ((double)middle, INFINITY))
          - lower_bound (sorted, n, (double)middle)
      > n * 6 / 10)
    return 0;
  for (gsize a = 0, b; a < n; a = b)
    {
      double value = (double)sorted[a];
      for (b = a + 1; b < n && !((double)sorted[b] > value); b++)
        ;
      double right = b < n ? 0.5 * ((double)sorted[b] - value) : left;
      double first = a > 0 ? left : right;
      if (b - a > 1 && a <= n / 2 && n / 2 < b)
        step = first + right;
      for (gsize k = a; b - a > 1 && k < b; k++)
        sorted[k]
            = (float)(value - first + (first + right) * ((double)(k - a) + 0.5) / (double)(b - a));
      left = right;
    }
  return step;
}

/* Sigma of the noise in a sorted sample. */
static double
core_sigma (const float *sorted, gsize n)
{
  double centre = median_of (sorted, n);
  double sigma = reach_of (sorted, n, centre, 0.2) / 0.253347; /* 2 Phi (0.253347) - 1 = 0.2 */
  for (guint turn = 0; turn < TURNS && sigma > 0; turn++)
    {
      gsize a = lower_bound (sorted, n, centre - CLIP * sigma);
      gsize b = lower_bound (sorted, n, nextafter (centre + CLIP * sigma, INFINITY));
      if (b - a < FEWEST / 2)
        break;
      centre = median_of (sorted + a, b - a);
      double next = reach_of (sorted + a, b - a, centre, 0.5) / CORE;
      gboolean settled = fabs (next - sigma) < 1e-3 * sigma;
      sigma = next;
      if (settled)
        break;
    }
  return sigma;
}

/* -- rings ----------------------------------------------------------------------------------- */

typedef struct
{
  GArray *values[TF_NOISE_RINGS]; /* of float */
  double sum[TF_NOISE_RINGS];     /* of mu or |latitude| */
} Rings;

static void
rings_add (Rings *rings, double place, double share, float value)
{
  if (!isfinite (value) || !(share >= 0 && share <= 1))
    return;
  guint k = MIN ((guint)(share * TF_NOISE_RINGS), TF_NOISE_RINGS - 1);
  g_array_append_val (rings->values[k], value);
  rings->sum[k] += place;
}

/* Every @step-th pixel of every @step-th row, each row begun one further so that no column is
 * favoured. */
static void
rings_fill (Rings *rings, const float *pixels, const TfGeometry *g, guint step)
{
  gboolean map = tf_geometry_is_map (g), disk = g->projection == TF_PROJECTION_TAN;
  g_autofree float *mu = g_new (float, g->width);
  for (guint y = step / 2, row = 0; y < g->height; y += step, row++)
    {
      TfPlace place = { 0 };
      if (map && !tf_geometry_pixel_to_sun (g, 0.5 * (g->width + 1), y + 1.0, &place))
        continue;
      if (disk)
        tf_geometry_row_mu (g, y + 1.0, 1, g->width, mu);
      const float *line = pixels + (gsize)y * g->width;
      for (guint x = row % step; x < g->width; x += step)
        if (map)
          rings_add (rings, fabs (place.lat_deg), fabs (place.lat_deg) / 90, line[x]);
        else
          rings_add (rings, disk ? (double)mu[x] : 1, disk ? (double)mu[x] : 1, line[x]);
    }
}

static void
rings_judge (Rings *rings, TfNoise *noise)
{
  for (guint k = 0; k < TF_NOISE_RINGS; k++)
    {
      GArray *values = rings->values[k];
      if (values->len < FEWEST)
        continue;
      float *sorted = (float *)(void *)values->data;
      sort_floats (sorted, values->len);
      double step = spread_steps (sorted, values->len);
      double sigma = core_sigma (sorted, values->len);
      sigma = sqrt (MAX (sigma * sigma - step * step / 12, 0)); /* what the spreading added */
      noise->rings[noise->n++] = (TfNoiseRing){ rings->sum[k] / values->len, sigma };
    }
}

double
tf_noise_at (const TfNoise *noise, double mu)
{
  if (noise->n == 0 || isnan (mu))
    return NAN;
  const TfNoiseRing *r = noise->rings;
  if (mu <= r[0].mu)
    return r[0].gauss;
  for (guint k = 1; k < noise->n; k++)
    if (mu <= r[k].mu)
      return r[k - 1].gauss
             + (r[k].gauss - r[k - 1].gauss) * (mu - r[k - 1].mu) / (r[k].mu - r[k - 1].mu);
  return r[noise->n - 1].gauss;
}

/* -- correlation ----------------------------------------------------------------------------- */

/* One row in units of its sigma; what is not weak is NaN. */
static void
weak_row (const float *pixels, const TfGeometry *g, const TfNoise *noise, guint y, float *mu,
          float *out)
{
  const float *line = pixels + (gsize)y * g->width;
  double sigma = noise->rings[noise->n - 1].gauss;
  TfPlace place;
  if (tf_geometry_is_map (g))
    sigma = tf_geometry_pixel_to_sun (g, 0.5 * (g->width + 1), y + 1.0, &place)
                ? tf_noise_at (noise, fabs (place.lat_deg))
                : NAN;
  if (g->projection == TF_PROJECTION_TAN)
    tf_geometry_row_mu (g, y + 1.0, 1, g->width, mu);
  for (guint x = 0; x < g->width; x++)
    {
      double s = g->projection == TF_PROJECTION_TAN ? tf_noise_at (noise, (double)mu[x]) : sigma;
      double v = (double)line[x] / s;
      out[x] = fabs (v) < CLIP ? (float)v : NAN;
    }
}

typedef struct
{
  double product[REACH + 1][2 * REACH + 1], squares[REACH + 1][2 * REACH + 1],
      n[REACH + 1][2 * REACH + 1];
} Lags;

static void
lags_add (Lags *lags, float *const rows[REACH + 1], guint n_rows, guint width)
{
  for (guint dy = 0; dy < n_rows; dy++)
    for (int dx = dy == 0 ? 1 : -REACH; dx <= REACH; dx++)
      for (guint x = (guint)MAX (0, -dx); x + (guint)MAX (0, dx) < width; x++)
        {
          double a = (double)rows[0][x], b = (double)rows[dy][(int)x + dx];
          if (isnan (a) || isnan (b))
            continue;
          lags->product[dy][dx + REACH] += a * b;
          lags->squares[dy][dx + REACH] += 0.5 * (a * a + b * b);
          lags->n[dy][dx + REACH]++;
        }
}

static gboolean
is_far (guint dy, guint k)
{
  return dy == REACH || k == 0 || k == 2 * REACH;
}

/* 1 + 2 sum of rho over half the lags. What is still there at the longest lags is the Sun's own
 * structure, not noise: it is taken off first. Only what stands above three times its own error
 * counts. */
static double
lags_factor (const Lags *lags)
{
  double sum = 0, n = 0, factor = 1;
  for (guint dy = 0; dy <= REACH; dy++)
    for (guint k = 0; k <= 2 * REACH; k++)
      if (is_far (dy, k) && lags->squares[dy][k] > 0)
        {
          sum += lags->product[dy][k] / lags->squares[dy][k];
          n++;
        }
  double far = n > 0 ? CLAMP (sum / n, 0, 0.9) : 0;
  for (guint dy = 0; dy < REACH; dy++)
    for (guint k = 1; k < 2 * REACH; k++)
      {
        if (!(lags->squares[dy][k] > 0))
          continue;
        double rho = (lags->product[dy][k] / lags->squares[dy][k] - far) / (1 - far);
        if (rho > MAX (0.01, 3 / sqrt (lags->n[dy][k])))
          factor += 2 * rho;
      }
  return factor;
}

static double
measure_correlation (const float *pixels, const TfGeometry *g, const TfNoise *noise)
{
  if (noise->n == 0 || !(noise->rings[noise->n - 1].gauss > 0))
    return 1;
  Lags lags = { 0 };
  float *rows[REACH + 1];
  g_autofree float *mu = g_new (float, g->width);
  g_autofree float *memory = g_new (float, (gsize)(REACH + 1) * g->width);
  for (guint k = 0; k <= REACH; k++)
    rows[k] = memory + (gsize)k * g->width;
  guint groups = CLAMP (LOOKED_AT / g->width, 4, 32), step = MAX (REACH + 1, g->height / groups);
  for (guint y = MIN (step / 2, g->height - 1); y < g->height; y += step)
    {
      guint n = MIN (REACH + 1, g->height - y);
      for (guint k = 0; k < n; k++)
        weak_row (pixels, g, noise, y + k, mu, rows[k]);
      lags_add (&lags, rows, n, g->width);
    }
  return lags_factor (&lags);
}

void
tf_noise_measure (const float *pixels, const TfGeometry *g, TfNoise *noise)
{
  Rings rings = { 0 };
  *noise = (TfNoise){ .correlation = 1 };
  for (guint k = 0; k < TF_NOISE_RINGS; k++)
    rings.values[k] = g_array_new (FALSE, FALSE, sizeof (float));
  guint step = (guint)MAX (1.0, floor (sqrt ((double)g->width * g->height / WANTED)));
  rings_fill (&rings, pixels, g, step);
  rings_judge (&rings, noise);
  for (guint k = 0; k < TF_NOISE_RINGS; k++)
    g_array_unref (rings.values[k]);
  noise->correlation = measure_correlation (pixels, g, noise);
}
