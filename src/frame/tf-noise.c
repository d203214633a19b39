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

/* Wide faint fields, such as the edges of plage, hide in the noise of one pixel but not in that of
 * a mean: pixels about which the mean of the row is off the ring's median by more than OFF sigma
 * do not count in a second turn. White noise gives such a mean 0.2 sigma; as much room is left
 * because neighbouring pixels' noise may hang together. Common practice, no source. */
#define OFF 0.9

/* Rings nearer the limb than this have few pixels: all of those in the rows looked at count. */
#define OUTER_MU 0.2

enum
{
  BESIDE = 12,     /* pixels on either side that the mean is over */
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

/* A pixel of the sample: its value's key, and the mean of the row about it, NaN where too little
 * of it is there. */
typedef struct
{
  guint32 key;
  float mean;
} Pixel;

/* By value. Radix sort, three passes of 11 bits. */
static void
sort_pixels (GArray *pixels)
{
  gsize n = pixels->len;
  Pixel *own = (Pixel *)(void *)pixels->data, *from = own;
  g_autofree Pixel *room = g_new (Pixel, MAX (n, 1));
  Pixel *to = room;
  for (guint shift = 0; shift < 33; shift += 11)
    {
      gsize start[2049] = { 0 };
      for (gsize k = 0; k < n; k++)
        start[((from[k].key >> shift) & 2047) + 1]++;
      for (guint b = 0; b < 2048; b++)
        start[b + 1] += start[b];
      for (gsize k = 0; k < n; k++)
        to[start[(from[k].key >> shift) & 2047]++] = from[k];
      Pixel *swap = from;
      from = to;
      to = swap;
    }
  memcpy (own, from, n * sizeof *own);
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
  GArray *pixels[TF_NOISE_RINGS]; /* of Pixel */
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
rings_add (Rings *rings, double place, double share, float value, float mean)
{
  if (!isfinite (value) || !(share >= 0 && share <= 1))
    return;
  guint k = MIN ((guint)(share * TF_NOISE_RINGS), TF_NOISE_RINGS - 1);
  g_array_append_val (rings->pixels[k], ((Pixel){ to_key (value), mean }));
  rings->sum[k] += place;
}

/* What is worked out along a row: mu, and sum and number of the values before each column. */
typedef struct
{
  float *mu;
  double *sum;
  guint *n;
} Row;

static void
row_fill (const Row *row, const float *line, guint width)
{
  for (guint x = 0; x < width; x++)
    {
      gboolean there = isfinite (line[x]);
      row->sum[x + 1] = row->sum[x] + (there ? (double)line[x] : 0);
      row->n[x + 1] = row->n[x] + (there ? 1 : 0);
    }
}

static float
mean_about (const Row *row, guint x, guint width)
{
  guint a = x > BESIDE ? x - BESIDE : 0, b = MIN (x + BESIDE + 1, width);
  guint n = row->n[b] - row->n[a];
  return n > BESIDE ? (float)((row->sum[b] - row->sum[a]) / n) : NAN;
}

/* Row @k of the sample is every @step-th pixel of the frame's row @y, each row begun one further
 * so that no column is favoured. */
static void
rings_add_row (Rings *rings, const Sample *sample, guint k, guint y, const Row *row)
{
  const TfGeometry *g = sample->g;
  gboolean map = tf_geometry_is_map (g), disk = g->projection == TF_PROJECTION_TAN;
  const float *line = sample->pixels + (gsize)y * g->width;
  guint next = k % sample->step;
  TfPlace place = { 0 };
  if (map && !tf_geometry_pixel_to_sun (g, 0.5 * (g->width + 1), y + 1.0, &place))
    return;
  if (disk)
    tf_geometry_row_mu (g, y + 1.0, 1, g->width, row->mu);
  row_fill (row, line, g->width);
  for (guint x = 0; x < g->width; x++)
    {
      if (x != next && !(disk && row->mu[x] < (float)OUTER_MU))
        continue;
      double at = map ? fabs (place.lat_deg) : disk ? (double)row->mu[x] : 1;
      rings_add (rings, at, map ? at / 90 : at, line[x], mean_about (row, x, g->width));
      next += x == next ? sample->step : 0;
    }
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
  g_autofree double *sum = g_new0 (double, sample->g->width + 1);
  g_autofree guint *count = g_new0 (guint, sample->g->width + 1);
  for (guint k = 0; k < TF_NOISE_RINGS; k++)
    rings->pixels[k] = g_array_sized_new (FALSE, FALSE, sizeof (Pixel), WANTED / PARTS / TF_NOISE_RINGS);
  for (guint k = rows * band / PARTS; k < rows * (band + 1) / PARTS; k++)
    rings_add_row (rings, sample, k, step / 2 + k * step, &(Row){ mu, sum, count });
}

/* Sigma of those of @sorted about which the mean is off @centre by @most or less; NaN when they are fewer
 * than @fewest. @values: room for all. */
static double
sigma_of (const GArray *sorted, double centre, double most, guint fewest, float *values)
{
  gsize n = 0;
  for (guint k = 0; k < sorted->len; k++)
    {
      const Pixel *pixel = &g_array_index (sorted, Pixel, k);
      if (!(fabs ((double)pixel->mean - centre) > most))
        values[n++] = from_key (pixel->key);
    }
  if (n < fewest)
    return NAN;
  double step = spread_steps (values, n), sigma = core_sigma (values, n);
  return sqrt (MAX (sigma * sigma - step * step / 12, 0)); /* what the spreading added */
}

/* And a ring here. */
static void
judge_ring (guint turn, guint first, guint n, guint worker, gpointer data)
{
  Sample *sample = data;
  guint band = TF_NOISE_RINGS - 1 - turn; /* the largest first */
  double sum = 0;
  g_autoptr (GArray) pixels = g_array_new (FALSE, FALSE, sizeof (Pixel));
  for (guint k = 0; k < PARTS; k++)
    {
      const GArray *part = sample->parts[k].pixels[band];
      if (part->len > 0)
        g_array_append_vals (pixels, part->data, part->len);
      sum += sample->parts[k].sum[band];
    }
  sample->good[band] = pixels->len >= FEWEST;
  if (!sample->good[band])
    return;
  sort_pixels (pixels);
  g_autofree float *values = g_new (float, pixels->len);
  double centre = (double)from_key (g_array_index (pixels, Pixel, pixels->len / 2).key);
  double sigma = sigma_of (pixels, centre, INFINITY, FEWEST, values);
  double calm = sigma_of (pixels, centre, OFF * sigma, MAX (FEWEST, pixels->len / 20), values);
  sample->judged[band] = (TfNoiseRing){ sum / pixels->len, sigma > 0 && calm > 0 ? calm : sigma };
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
      g_array_unref (sample.parts[part].pixels[k]);
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
