/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-noise-private.h"

#include <math.h>

/* How neighbouring pixels' noise hangs together: the autocorrelation of the weak pixels, taken on
 * groups of rows spread over the frame. Each group has its own sums, added up in order: the same
 * for any number of threads. */

enum
{
  LOOKED_AT = 50000, /* pixels, about */
  REACH = 4,         /* longest lag, pixels */
  LANES = 8,
};

/* One row in units of its sigma: 0 for what is not weak, its square, and 1 or 0. */
typedef struct
{
  float *v, *square, *there;
} WeakRow;

typedef struct
{
  double product[REACH + 1][2 * REACH + 1], squares[REACH + 1][2 * REACH + 1],
      n[REACH + 1][2 * REACH + 1];
} Lags;

typedef struct
{
  const float *pixels;
  const TfGeometry *g;
  const TfNoise *noise;
  guint first, step; /* rows at which the groups begin, and from one to the next */
  Lags *groups;      /* added up in order */
} Correlation;

static void
weak_row (const Correlation *c, guint y, float *mu, const WeakRow *out)
{
  const TfGeometry *g = c->g;
  const float *line = c->pixels + (gsize)y * g->width;
  double sigma = c->noise->rings[c->noise->n - 1].gauss;
  TfPlace place;
  if (tf_geometry_is_map (g))
    sigma = tf_geometry_pixel_to_sun (g, 0.5 * (g->width + 1), y + 1.0, &place)
                ? tf_noise_at (c->noise, fabs (place.lat_deg))
                : NAN;
  if (g->projection == TF_PROJECTION_TAN)
    tf_geometry_row_mu (g, y + 1.0, 1, g->width, mu);
  for (guint x = 0; x < g->width; x++)
    {
      double s
          = g->projection == TF_PROJECTION_TAN ? tf_noise_at (c->noise, (double)mu[x]) : sigma;
      double v = (double)line[x] / s;
      gboolean weak = fabs (v) < TF_NOISE_CLIP;
      out->v[x] = weak ? (float)v : 0.0f;
      out->square[x] = out->v[x] * out->v[x];
      out->there[x] = weak ? 1.0f : 0.0f;
    }
}

/* One lag over one row: sums in lanes, added up in order. */
__attribute__ ((target_clones ("arch=x86-64-v3", "default"))) static void
add_lag (const WeakRow *a, const WeakRow *b, guint at, guint to, guint n, double sums[3])
{
  float product[LANES] = { 0 }, squares[LANES] = { 0 }, count[LANES] = { 0 };
  const float *va = a->v + at, *qa = a->square + at, *ta = a->there + at;
  const float *vb = b->v + to, *qb = b->square + to, *tb = b->there + to;
  guint x = 0;
  for (; x + LANES <= n; x += LANES)
    for (guint l = 0; l < LANES; l++)
      {
        product[l] += va[x + l] * vb[x + l];
        squares[l] += qa[x + l] * tb[x + l] + ta[x + l] * qb[x + l];
        count[l] += ta[x + l] * tb[x + l];
      }
  for (; x < n; x++)
    {
      product[0] += va[x] * vb[x];
      squares[0] += qa[x] * tb[x] + ta[x] * qb[x];
      count[0] += ta[x] * tb[x];
    }
  for (guint l = 0; l < LANES; l++)
    {
      sums[0] += (double)product[l];
      sums[1] += 0.5 * (double)squares[l];
      sums[2] += (double)count[l];
    }
}

static void
lags_add (Lags *lags, const WeakRow rows[REACH + 1], guint n_rows, guint width)
{
  for (guint dy = 0; dy < n_rows; dy++)
    for (int dx = dy == 0 ? 1 : -REACH; dx <= REACH; dx++)
      {
        guint at = (guint)MAX (0, -dx), to = (guint)MAX (0, dx);
        double sums[3] = { 0 };
        if (at + to < width)
          add_lag (&rows[0], &rows[dy], at, to, width - at - to, sums);
        lags->product[dy][dx + REACH] += sums[0];
        lags->squares[dy][dx + REACH] += sums[1];
        lags->n[dy][dx + REACH] += sums[2];
      }
}

/* A "band" of the pool is a group of rows here. */
static void
add_group (guint band, guint first, guint n, guint worker, gpointer data)
{
  const Correlation *c = data;
  guint width = c->g->width, y = c->first + band * c->step;
  guint n_rows = MIN (REACH + 1, c->g->height - y);
  WeakRow rows[REACH + 1];
  g_autofree float *memory = g_new (float, (gsize)(3 * (REACH + 1) + 1) * width);
  float *next = memory + width;
  for (guint k = 0; k < n_rows; k++, next += 3 * (gsize)width)
    {
      rows[k] = (WeakRow){ next, next + width, next + 2 * (gsize)width };
      weak_row (c, y + k, memory, &rows[k]);
    }
  lags_add (&c->groups[band], rows, n_rows, width);
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

double
tf_noise_correlation (const float *pixels, const TfGeometry *g, const TfWork *work,
                      const TfNoise *noise)
{
  if (noise->n == 0 || !(noise->rings[noise->n - 1].gauss > 0))
    return 1;
  guint groups = CLAMP (LOOKED_AT / g->width, 4, 32), step = MAX (REACH + 1, g->height / groups);
  guint first = MIN (step / 2, g->height - 1), n = (g->height - 1 - first) / step + 1;
  g_autofree Lags *lags = g_new0 (Lags, n);
  Lags sum = { 0 };
  Correlation c = { pixels, g, noise, first, step, lags };
  tf_bands_run (work, n * TF_BAND_ROWS, add_group, &c);
  for (guint k = 0; k < n; k++)
    for (guint dy = 0; dy <= REACH; dy++)
      for (guint dx = 0; dx <= 2 * REACH; dx++)
        {
          sum.product[dy][dx] += lags[k].product[dy][dx];
          sum.squares[dy][dx] += lags[k].squares[dy][dx];
          sum.n[dy][dx] += lags[k].n[dy][dx];
        }
  return lags_factor (&sum);
}
