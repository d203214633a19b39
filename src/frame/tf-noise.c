/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-noise-private.h"

#include <math.h>
#include <string.h>

/* A ring's sigma is the fixed point of "the median distance from the median of the pixels
 * within CLIP sigma": reached from below, so that the many pixels of an active disk that are
 * not noise never enter. CORE is that median for a normal distribution cut at CLIP: 2 Phi
 * (CORE) - 1 = (2 Phi (CLIP) - 1) / 2. A narrow cut keeps the faint edges of plage out: 2 sigma
 * came out 5 % high on an active disk where 2.5 did 7 %. */
#define CLIP 2.0
#define CORE 0.63911187

enum
{
  WANTED = 300000, /* pixels looked at for sigma */
  FEWEST = 60,     /* pixels that make a ring */
  TURNS = 60,
  PARTS = 8,       /* of the rows, shared out to threads */
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

/* Rows are shared out to threads in parts, each with its own lists, which are put one behind the
 * other: the same for any number of threads. */
typedef struct
{
  GArray *values[TF_NOISE_RINGS]; /* of float */
  double sum[TF_NOISE_RINGS];     /* of mu or |latitude| */
} Rings;

typedef struct
{
  const float *pixels;
  const TfGeometry *g;
  guint step;
  Rings parts[PARTS];
  TfNoiseRing judged[TF_NOISE_RINGS];
  gboolean good[TF_NOISE_RINGS];
} Sample;

static void
rings_add (Rings *rings, double place, double share, float value)
{
  if (!isfinite (value) || !(share >= 0 && share <= 1))
    return;
  guint k = MIN ((guint)(share * TF_NOISE_RINGS), TF_NOISE_RINGS - 1);
  g_array_append_val (rings->values[k], value);
  rings->sum[k] += place;
}

/* Row @row of the sample is every @step-th pixel of the frame's row @y, each row begun one further
 * so that no column is favoured. */
static void
rings_add_row (Rings *rings, const Sample *sample, guint row, guint y, float *mu)
{
  const TfGeometry *g = sample->g;
  gboolean map = tf_geometry_is_map (g), disk = g->projection == TF_PROJECTION_TAN;
  const float *line = sample->pixels + (gsize)y * g->width;
  TfPlace place = { 0 };
  if (map && !tf_geometry_pixel_to_sun (g, 0.5 * (g->width + 1), y + 1.0, &place))
    return;
  if (disk)
    tf_geometry_row_mu (g, y + 1.0, 1, g->width, mu);
  for (guint x = row % sample->step; x < g->width; x += sample->step)
    if (map)
      rings_add (rings, fabs (place.lat_deg), fabs (place.lat_deg) / 90, line[x]);
    else
      rings_add (rings, disk ? (double)mu[x] : 1, disk ? (double)mu[x] : 1, line[x]);
}

/* A "band" of the pool is a part here. */
static void
fill_part (guint band, guint first, guint n, guint worker, gpointer data)
{
  Sample *sample = data;
  Rings *rings = &sample->parts[band];
  guint step = sample->step, height = sample->g->height;
  guint rows = height > step / 2 ? (height - step / 2 - 1) / step + 1 : 0;
  g_autofree float *mu = g_new (float, sample->g->width);
  for (guint k = 0; k < TF_NOISE_RINGS; k++)
    rings->values[k] = g_array_new (FALSE, FALSE, sizeof (float));
  for (guint row = rows * band / PARTS; row < rows * (band + 1) / PARTS; row++)
    rings_add_row (rings, sample, row, step / 2 + row * step, mu);
}

/* And a ring here. */
static void
judge_ring (guint band, guint first, guint n, guint worker, gpointer data)
{
  Sample *sample = data;
  double sum = 0;
  g_autoptr (GArray) values = g_array_new (FALSE, FALSE, sizeof (float));
  for (guint k = 0; k < PARTS; k++)
    {
      const GArray *part = sample->parts[k].values[band];
      if (part->len > 0)
        g_array_append_vals (values, part->data, part->len);
      sum += sample->parts[k].sum[band];
    }
  sample->good[band] = values->len >= FEWEST;
  if (!sample->good[band])
    return;
  float *sorted = (float *)(void *)values->data;
  sort_floats (sorted, values->len);
  double step = spread_steps (sorted, values->len), sigma = core_sigma (sorted, values->len);
  sigma = sqrt (MAX (sigma * sigma - step * step / 12, 0)); /* what the spreading added */
  sample->judged[band] = (TfNoiseRing){ sum / values->len, sigma };
}

static void
measure_rings (const float *pixels, const TfGeometry *g, const TfWork *work, TfNoise *noise)
{
  Sample sample = { .pixels = pixels, .g = g };
  sample.step = (guint)MAX (1.0, floor (sqrt ((double)g->width * g->height / WANTED)));
  tf_bands_run (work, PARTS * TF_BAND_ROWS, fill_part, &sample);
  tf_bands_run (work, TF_NOISE_RINGS * TF_BAND_ROWS, judge_ring, &sample);
  for (guint k = 0; k < TF_NOISE_RINGS; k++)
    if (sample.good[k])
      noise->rings[noise->n++] = sample.judged[k];
  for (guint part = 0; part < PARTS; part++)
    for (guint k = 0; k < TF_NOISE_RINGS; k++)
      g_array_unref (sample.parts[part].values[k]);
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

void
tf_noise_measure (const float *pixels, const TfGeometry *g, const TfWork *work, TfNoise *noise)
{
  TfWork whole = { .workers = work != NULL ? work->workers : NULL }; /* never half a noise */
  *noise = (TfNoise){ .correlation = 1 };
  measure_rings (pixels, g, &whole, noise);
  noise->correlation = tf_noise_correlation (pixels, g, &whole, noise);
}
