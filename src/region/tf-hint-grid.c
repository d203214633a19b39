/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* The working grid of the hints: one pass over the pixels, a Gaussian, the noise of what comes out. */

#include <math.h>
#include <string.h>

#include "tf-constants.h"
#include "tf-hint-private.h"

enum
{
  STRIPES = 4, /* of rows, each with its own sums, added in order: the same for any number of threads */
  RINGS = 8,
  RING_CELLS = 50, /* fewer than this do not make a ring of their own */
  CLIPS = 6,
};
/* Pixels are taken from a little farther out than cells, so that the outermost cells are whole. */
static const double MU_BEYOND = 0.05;
/* A pixel of the pyramid this small is fine enough for the grid, in cells. */
static const double FINE = 0.42;
/* Cells less covered than this hold nothing. */
static const double COVERED = 0.05;

typedef struct
{
  const TfHintGrid *grid;
  TfGeometry geometry; /* of the pyramid's level */
  const float *pixels;
  guint width, height;
  double scale;
  gboolean radial;
  float *sums; /* STRIPES times n x n of flux, then of area */
} Pass;

static double
dot (const double a[3], const double b[3])
{
  return a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
}

/* A pixel's flux is shared among the four cells about it, linearly: all in one cell would let the pieces depend on where the
 * pixels happen to lie. */
static inline void
share (float *to, guint n, float x, float y, float value)
{
  float low = value * (1.0f - y), high = value * y;
  to[0] += low * (1.0f - x);
  to[1] += low * x;
  to[n] += high * (1.0f - x);
  to[n + 1] += high * x;
}

/* Room for one row of pixels: their places, then where they lie in cells and what they bring; 0 where nothing. */
typedef struct
{
  double (*unit)[3], *mu, *area;
  double *x, *y;
  float *flux, *cover;
} Row;

/* Without a branch, so that it runs on vectors. */
__attribute__ ((target_clones ("arch=x86-64-v3", "default"))) static void
project (const Pass *pass, const float *pixels, guint n, const Row *row)
{
  const double *centre = pass->grid->centre, *west = pass->grid->west, *north = pass->grid->north;
  double half = 0.5 * pass->grid->n - 0.5, per_cell = pass->grid->radius_mm / pass->grid->cell_mm;
  double least_mu = pass->grid->edge_mu - MU_BEYOND, scale = pass->scale;
  for (guint k = 0; k < n; k++)
    {
      const double *unit = row->unit[k];
      gboolean there = row->mu[k] > least_mu && pixels[k] - pixels[k] <= 0.0f;
      double stretch = per_cell * sqrt (2.0 / (1.0 + (unit[0] * centre[0] + unit[1] * centre[1] + unit[2] * centre[2])));
      row->x[k] = half + stretch * (unit[0] * west[0] + unit[1] * west[1] + unit[2] * west[2]);
      row->y[k] = half + stretch * (unit[0] * north[0] + unit[1] * north[1] + unit[2] * north[2]);
      row->flux[k] = (float)(pixels[k] * scale * row->area[k] / (pass->radial ? 1.0 : row->mu[k]));
      row->cover[k] = there ? (float)row->area[k] : 0.0f;
    }
}

static gboolean
is_square (const TfGeometry *g)
{
  double along = hypot (g->cd[0][0], g->cd[1][0]), across = hypot (g->cd[0][1], g->cd[1][1]);
  double skew = g->cd[0][0] * g->cd[0][1] + g->cd[1][0] * g->cd[1][1];
  return fabs (along - across) < 1e-3 * along && fabs (skew) < 1e-3 * along * across;
}

/* The columns that can see the disk; all of them where there is no circle to go by. */
static guint
find_columns (const TfGeometry *g, guint y, guint *first)
{
  double cx, cy, r = 1.01 * tf_geometry_disk_radius (g) + 2.0;
  *first = 0;
  if (!is_square (g) || !tf_geometry_disk_centre (g, &cx, &cy) || !(r > 0.0))
    return g->width;
  double half = sqrt (MAX (0.0, r * r - (y + 1.0 - cy) * (y + 1.0 - cy)));
  double x0 = CLAMP (floor (cx - half) - 1.0, 0.0, g->width), x1 = CLAMP (ceil (cx + half), 0.0, g->width);
  *first = (guint)x0;
  return half > 0.0 ? (guint)x1 - (guint)x0 : 0;
}

static void
add_row (const Pass *pass, guint y, const Row *row, float *flux, float *covered)
{
  guint size = pass->grid->n, first, n = find_columns (&pass->geometry, y, &first);
  const float *pixels = pass->pixels + (gsize)y * pass->width + first;
  tf_geometry_row_sun (&pass->geometry, y + 1.0, first + 1.0, n, row->unit, row->mu, row->area);
  project (pass, pixels, n, row);
  for (guint k = 0; k < n; k++)
    {
      double x = row->x[k], y_cell = row->y[k];
      if (!(row->cover[k] > 0.0f) || !(x >= 0.0 && x < size - 1 && y_cell >= 0.0 && y_cell < size - 1))
        continue;
      guint i = (guint)x, j = (guint)y_cell;
      gsize at = (gsize)j * size + i;
      float right = (float)(x - i), up = (float)(y_cell - j);
      share (flux + at, size, right, up, row->flux[k]);
      share (covered + at, size, right, up, row->cover[k]);
    }
}

/* A "band" of the pool is a stripe here, whatever the number of rows. */
static void
do_stripe (guint band, guint first, guint n, guint worker, gpointer data)
{
  const Pass *pass = data;
  gsize cells = (gsize)pass->grid->n * pass->grid->n, width = pass->width;
  float *flux = pass->sums + band * cells, *covered = pass->sums + (STRIPES + band) * cells;
  g_autofree double *room = g_new (double, 7 * width);
  g_autofree float *brings = g_new (float, 2 * width);
  Row row = { (double (*)[3])room, room + 3 * width, room + 4 * width, room + 5 * width, room + 6 * width,
              brings, brings + width };
  guint from = pass->height * band / STRIPES, to = pass->height * (band + 1) / STRIPES;
  memset (flux, 0, cells * sizeof *flux);
  memset (covered, 0, cells * sizeof *covered);
  for (guint y = from; y < to; y++)
    add_row (pass, y, &row, flux, covered);
}

static void
choose_level (Pass *pass, const TfFrame *frame, double cell_mm)
{
  const TfGeometry *g = tf_frame_get_geometry (frame);
  double pixel_mm = tf_geometry_scale_arcsec (g) * TF_ARCSEC * (g->distance_mm - g->radius_mm);
  guint level = 0;
  while (pixel_mm * 2.0 < FINE * cell_mm && level < tf_frame_get_n_levels (frame))
    {
      pixel_mm *= 2.0;
      level++;
    }
  double factor = exp2 (level);
  pass->pixels = tf_frame_get_level (frame, level, &pass->width, &pass->height);
  pass->geometry = *g;
  pass->geometry.width = pass->width;
  pass->geometry.height = pass->height;
  for (guint k = 0; k < 2; k++)
    {
      pass->geometry.crpix[k] = (g->crpix[k] - 0.5) / factor + 0.5;
      for (guint j = 0; j < 2; j++)
        pass->geometry.cd[k][j] = g->cd[k][j] * factor;
    }
  tf_geometry_make (&pass->geometry);
}

static void
add_stripes (float *sums, gsize cells)
{
  for (guint s = 1; s < STRIPES; s++)
    for (gsize k = 0; k < cells; k++)
      sums[k] += sums[s * cells + k];
}

__attribute__ ((target_clones ("arch=x86-64-v3", "default"))) static void
add_times (float *restrict to, const float *restrict from, float c, gsize n)
{
  for (gsize x = 0; x < n; x++)
    to[x] += c * from[x];
}

void
tf_hint_blur (float *values, float *room, guint width, guint height, double sigma)
{
  enum { MAX = 24 };
  float kernel[2 * MAX + 1];
  int reach = MIN (MAX, (int)ceil (4.0 * sigma));
  double sum = 0.0;
  for (int k = -reach; k <= reach; k++)
    sum += exp (-0.5 * k * k / (sigma * sigma));
  for (int k = -reach; k <= reach; k++)
    kernel[k + reach] = (float)(exp (-0.5 * k * k / (sigma * sigma)) / sum);
  memset (room, 0, (gsize)width * height * sizeof *room);
  for (int y = 0; y < (int)height; y++)
    for (int k = -reach; k <= reach; k++)
      {
        int first = MAX (0, -k), last = MIN ((int)width, (int)width - k);
        gsize at = (gsize)y * width;
        if (first < last)
          add_times (room + at + first, values + at + first + k, kernel[k + reach], (gsize)(last - first));
      }
  memset (values, 0, (gsize)width * height * sizeof *values);
  for (int y = 0; y < (int)height; y++)
    for (int k = MAX (-reach, -y); k <= MIN (reach, (int)height - 1 - y); k++)
      add_times (values + (gsize)y * width, room + (gsize)(y + k) * width, kernel[k + reach], width);
}

void
tf_hint_grid_unit (const TfHintGrid *g, double x, double y, double unit[3])
{
  double u = (x - 0.5 * g->n) * g->cell_mm / g->radius_mm, v = (y - 0.5 * g->n) * g->cell_mm / g->radius_mm;
  double r2 = u * u + v * v, along = 1.0 - 0.5 * r2, across = sqrt (MAX (0.0, 1.0 - 0.25 * r2));
  for (guint k = 0; k < 3; k++)
    unit[k] = along * g->centre[k] + across * (u * g->west[k] + v * g->north[k]);
}

/* The exact cosine for an observer at a finite distance, as everywhere. */
static void
fill_mu (TfHintGrid *g, const TfGeometry *geometry)
{
  double d = geometry->distance_mm, r = geometry->radius_mm;
  for (guint y = 0; y < g->n; y++)
    for (guint x = 0; x < g->n; x++)
      {
        double unit[3];
        tf_hint_grid_unit (g, x + 0.5, y + 0.5, unit);
        double c = dot (unit, g->centre);
        g->mu[(gsize)y * g->n + x] = (float)((d * c - r) / sqrt (d * d + r * r - 2.0 * d * r * c));
      }
}

static void
divide (TfHintGrid *g, float *flux, float *area)
{
  gsize cells = (gsize)g->n * g->n;
  double least = COVERED * g->cell_mm * g->cell_mm;
  for (gsize k = 0; k < cells; k++)
    g->field[k] = g->mu[k] >= g->edge_mu && area[k] > least ? flux[k] / area[k] : NAN;
}

/* -- noise ------------------------------------------------------------------------------------------------- */

/* Values >= 0: their bits as integers have the same order. Radix sort, three passes of 11 bits. */
static void
sort_sizes (float *values, guint n)
{
  g_autofree guint32 *keys = g_new (guint32, MAX (n, 1)), *other = g_new (guint32, MAX (n, 1));
  memcpy (keys, values, n * sizeof *values);
  for (guint shift = 0; shift < 33; shift += 11)
    {
      guint start[2049] = { 0 };
      for (guint k = 0; k < n; k++)
        start[((keys[k] >> shift) & 2047) + 1]++;
      for (guint b = 0; b < 2048; b++)
        start[b + 1] += start[b];
      for (guint k = 0; k < n; k++)
        other[start[(keys[k] >> shift) & 2047]++] = keys[k];
      guint32 *swap = keys;
      keys = other;
      other = swap;
    }
  memcpy (values, keys, n * sizeof *values);
}

/* 1.4826 MAD about 0, clipped at 3 sigma until it stands. */
static double
clipped_mad (GArray *sizes)
{
  float *v = (float *)(void *)sizes->data;
  guint n = sizes->len;
  double sigma = NAN;
  sort_sizes (v, n);
  for (guint pass = 0; pass < CLIPS && n > 0; pass++)
    {
      sigma = 1.4826 * v[n / 2];
      while (n > 1 && v[n - 1] > 3.0 * sigma)
        n--;
    }
  return sigma;
}

static guint
ring_of (double mu, double edge)
{
  return (guint)CLAMP ((mu - edge) / (1.0 - edge) * RINGS, 0.0, RINGS - 1.0);
}

typedef struct
{
  GArray *sizes[RINGS];
  double *sigma;
} Rings;

/* A "band" of the pool is a ring here. */
static void
judge_ring (guint ring, guint first, guint n, guint worker, gpointer data)
{
  const Rings *rings = data;
  rings->sigma[ring] = rings->sizes[ring]->len >= RING_CELLS ? clipped_mad (rings->sizes[ring]) : (double)NAN;
}

/* Rings with too few cells take the value of the nearest good one. */
static void
fill_rings (const TfHintGrid *g, const TfWork *work, double sigma[RINGS])
{
  Rings rings = { .sigma = sigma };
  for (guint r = 0; r < RINGS; r++)
    rings.sizes[r] = g_array_new (FALSE, FALSE, sizeof (float));
  for (gsize k = 0; k < (gsize)g->n * g->n; k++)
    if (isfinite (g->field[k]))
      g_array_append_val (rings.sizes[ring_of (g->mu[k], g->edge_mu)], ((float){ fabsf (g->field[k]) }));
  tf_bands_run (work, RINGS * TF_BAND_ROWS, judge_ring, &rings);
  for (guint r = 0; r < RINGS; r++)
    g_array_unref (rings.sizes[r]);
  for (guint step = 1; step < RINGS; step++)
    for (guint r = 0; r < RINGS; r++)
      if (isnan (sigma[r]))
        {
          if (r + step < RINGS && !isnan (sigma[r + step]))
            sigma[r] = sigma[r + step];
          else if (r >= step && !isnan (sigma[r - step]))
            sigma[r] = sigma[r - step];
        }
}

static double
sigma_at (const double sigma[RINGS], double mu, double edge)
{
  double at = (mu - edge) / (1.0 - edge) * RINGS - 0.5;
  at = CLAMP (at, 0.0, RINGS - 1.0);
  guint k = MIN ((guint)at, RINGS - 2);
  return sigma[k] + (at - k) * (sigma[k + 1] - sigma[k]);
}

/* What white noise of the pixels alone leaves in the smoothed field at @mu. */
static double
white_noise (const TfFrame *frame, const TfHintParams *p, double scale, double mu)
{
  const TfGeometry *g = tf_frame_get_geometry (frame);
  double pixel_mm = tf_geometry_scale_arcsec (g) * TF_ARCSEC * (g->distance_mm - g->radius_mm);
  double radial = tf_frame_get_info (frame)->field == TF_FIELD_RADIAL ? 1.0 : mu;
  return scale * tf_frame_noise_at (frame, mu) / radial * pixel_mm / sqrt (4.0 * TF_PI * mu) / p->smooth_mm;
}

/* The scatter of the smoothed field is network and pixel noise. A level must clear the network's long tail by more than it must clear
 * noise, which is Gaussian: what noise explains beyond half of the scatter brings the level down to noise-sigma. Without this a
 * coarse or noisy frame would lose faint poles that a better frame of the same Sun shows. */
static void
fill_lows (const TfHintGrid *g, const TfHintParams *p, const TfFrame *frame, double scale, const TfWork *work,
           double low[RINGS])
{
  fill_rings (g, work, low);
  for (guint r = 0; r < RINGS; r++)
    {
      double white = white_noise (frame, p, scale, g->edge_mu + (r + 0.5) * (1.0 - g->edge_mu) / RINGS) / low[r];
      double noise = CLAMP (2.0 * white * white - 1.0, 0.0, 1.0);
      low[r] *= p->low_sigma + noise * (p->noise_sigma - p->low_sigma);
    }
}

static void
fill_levels (TfHintGrid *g, const TfHintParams *p, const TfFrame *frame, double scale, const TfWork *work)
{
  double lows[RINGS];
  gsize there = 0, above = 0;
  fill_lows (g, p, frame, scale, work, lows);
  for (gsize k = 0; k < (gsize)g->n * g->n; k++)
    {
      double low = MAX (sigma_at (lows, g->mu[k], g->edge_mu), p->low_gauss);
      g->low[k] = (float)(isnan (low) ? p->low_gauss : low);
      g->high[k] = (float)(g->low[k] * p->high_sigma / p->low_sigma);
      there += isfinite (g->field[k]);
      above += fabsf (g->field[k]) >= (float)p->low_gauss;
    }
  g->active = (double)above > p->active_share * (double)there;
  for (gsize k = 0; k < (gsize)g->n * g->n && g->active; k++)
    {
      g->low[k] = (float)p->low_gauss;
      g->high[k] = (float)(p->low_gauss * p->high_sigma / p->low_sigma);
    }
}

/* -- all of it --------------------------------------------------------------------------------------------- */

static void
set_plane (TfHintGrid *g, const TfGeometry *geometry, const TfHintParams *p)
{
  double lon = tf_geometry_central_carrington (geometry), lat = geometry->observer.b0_deg * TF_DEG;
  g->cell_mm = p->cell_mm;
  g->radius_mm = geometry->radius_mm;
  g->edge_mu = p->edge_mu;
  /* 2 sin (psi / 2) where the last pixels are, and a margin */
  g->n = 2 * (guint)ceil (1.05 * sqrt (2.0 * (1.0 - p->edge_mu + MU_BEYOND)) * g->radius_mm / g->cell_mm);
  tf_sphere_unit (lon, geometry->observer.b0_deg, g->centre);
  tf_sphere_unit (lon + 90.0, 0.0, g->west);
  g->north[0] = -sin (lat) * cos (lon * TF_DEG);
  g->north[1] = -sin (lat) * sin (lon * TF_DEG);
  g->north[2] = cos (lat);
}

/* What comes after the stripes, each part by itself. */
typedef struct
{
  TfHintGrid *grid;
  const TfGeometry *geometry;
  float *flux, *area;
  double sigma; /* cells */
} Smoothing;

/* A "band" of the pool is one of three parts here; low lends its room. */
static void
smooth_part (guint band, guint first, guint n, guint worker, gpointer data)
{
  const Smoothing *s = data;
  TfHintGrid *g = s->grid;
  float *sums = band == 0 ? s->flux : s->area;
  if (band == 2)
    {
      fill_mu (g, s->geometry);
      return;
    }
  add_stripes (sums, (gsize)g->n * g->n);
  tf_hint_blur (sums, band == 0 ? g->field : g->low, g->n, g->n, s->sigma);
}

TfHintGrid *
tf_hint_grid_new (const TfFrame *frame, const TfHintParams *params, double scale, const TfWork *work)
{
  TfHintGrid *g = g_new0 (TfHintGrid, 1);
  const TfGeometry *geometry = tf_frame_get_geometry (frame);
  set_plane (g, geometry, params);
  gsize cells = (gsize)g->n * g->n;
  Pass pass = { .grid = g, .scale = scale, .radial = tf_frame_get_info (frame)->field == TF_FIELD_RADIAL };
  choose_level (&pass, frame, params->cell_mm);
  g_autoptr (TfPixels) room = tf_pixels_new (NULL, 2 * STRIPES * cells); /* given back before regions are measured */
  if (room == NULL)
    return g_free (g), NULL;
  pass.sums = tf_pixels_get (room);
  float *flux = pass.sums, *area = pass.sums + STRIPES * cells;
  g->field = g_new (float, cells);
  g->mu = g_new (float, cells);
  g->low = g_new (float, cells);
  g->high = g_new (float, cells);
  gboolean done = tf_bands_run (work, STRIPES * TF_BAND_ROWS, do_stripe, &pass);
  if (!done)
    return tf_hint_grid_free (g), NULL;
  Smoothing smoothing = { g, geometry, flux, area, params->smooth_mm / params->cell_mm };
  TfWork whole = { .workers = work != NULL ? work->workers : NULL };
  tf_bands_run (&whole, 3 * TF_BAND_ROWS, smooth_part, &smoothing);
  divide (g, flux, area);
  fill_levels (g, params, frame, scale, &whole);
  return g;
}

void
tf_hint_grid_free_levels (TfHintGrid *grid)
{
  g_clear_pointer (&grid->mu, g_free);
  g_clear_pointer (&grid->low, g_free);
  g_clear_pointer (&grid->high, g_free);
}

void
tf_hint_grid_free (TfHintGrid *grid)
{
  if (grid == NULL)
    return;
  tf_hint_grid_free_levels (grid);
  g_free (grid->field);
  g_free (grid);
}
