/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>

#include "tf-constants.h"
#include "tf-pair-private.h"
#include "tf-rotation.h"

/* Two frames averaged over cells on the Sun, at the middle of their times. */

#define COVERED   0.9 /* of a cell's area, on both frames */
#define BLOCK_DEG 15.0

/* Rows of cells of one latitude, each with as many cells as fit the circle. */
typedef struct
{
  double cell_deg;
  guint n_rows, n;
  guint *first, *in_row; /* of each row */
} Grid;

typedef struct
{
  double area, field, noise2, mu; /* sums, weighed by area */
} Sum;

static void
grid_init (Grid *grid, double cell_deg)
{
  *grid = (Grid){ .cell_deg = cell_deg, .n_rows = (guint)ceil (180.0 / cell_deg) };
  grid->first = g_new0 (guint, grid->n_rows);
  grid->in_row = g_new0 (guint, grid->n_rows);
  for (guint r = 0; r < grid->n_rows; r++)
    {
      double lat = -90.0 + (r + 0.5) * cell_deg;
      grid->first[r] = grid->n;
      grid->in_row[r] = (guint)fmax (1.0, round (360.0 * cos (lat * TF_DEG) / cell_deg));
      grid->n += grid->in_row[r];
    }
}

static void
grid_clear (Grid *grid)
{
  g_free (grid->first);
  g_free (grid->in_row);
}

G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (Grid, grid_clear)

static guint
row_at (const Grid *grid, double lat_deg)
{
  return MIN ((guint)((lat_deg + 90.0) / grid->cell_deg), grid->n_rows - 1);
}

static guint
cell_at (const Grid *grid, double lon_deg, double lat_deg)
{
  guint row = row_at (grid, lat_deg);
  double turn = lon_deg / 360.0 - floor (lon_deg / 360.0);
  return grid->first[row] + MIN ((guint)(turn * grid->in_row[row]), grid->in_row[row] - 1);
}

/* Area of a cell of the row on the unit sphere. */
static double
cell_area (const Grid *grid, guint row)
{
  double low = -90.0 + row * grid->cell_deg, high = fmin (90.0, low + grid->cell_deg);
  return 2.0 * TF_PI * (sin (high * TF_DEG) - sin (low * TF_DEG)) / grid->in_row[row];
}

/* Adds a frame's pixels, turned by the rotation law to @time. */
static void
add_frame (const Grid *grid, Sum *sums, const TfFrame *frame, TfTime time,
           const TfPairParams *params)
{
  const TfFrameInfo *info = tf_frame_get_info (frame);
  const TfGeometry *geometry = tf_frame_get_geometry (frame);
  const float *pixels = tf_frame_get_pixels (frame);
  guint width = tf_frame_get_width (frame), height = tf_frame_get_height (frame);
  double seconds = time.s - info->time.s, correlation = tf_frame_noise_correlation (frame);
  gboolean radial = info->field == TF_FIELD_RADIAL;
  for (guint y = 1; y <= height; y++)
    for (guint x = 1; x <= width; x++)
      {
        double field = pixels[(gsize)(y - 1) * width + x - 1];
        TfPlace place;
        if (isnan (field) || !tf_geometry_pixel_to_sun (geometry, x, y, &place)
            || !(place.mu >= params->mu_min))
          continue;
        double lon = place.carrington_lon_deg
                     + tf_rotation_carry ((guint)params->law, place.lat_deg, seconds);
        double area = tf_geometry_area (geometry, x, y) / (TF_RADIUS_MM * TF_RADIUS_MM);
        double sigma = tf_frame_noise_at (frame, place.mu), up = radial ? 1.0 : 1.0 / place.mu;
        Sum *sum = &sums[cell_at (grid, lon, place.lat_deg)];
        sum->area += area;
        sum->field += area * field * up;
        sum->noise2 += area * area * sigma * sigma * up * up * correlation;
        sum->mu += area * place.mu;
      }
}

static void
take_cell (GArray *cells, const Sum *const sums[2], guint32 block)
{
  TfPairCell cell = { .mu = 1.0, .block = block };
  for (int f = 0; f < 2; f++)
    {
      cell.field[f] = sums[f]->field / sums[f]->area;
      cell.sigma[f] = sqrt (sums[f]->noise2) / sums[f]->area;
      cell.mu = fmin (cell.mu, sums[f]->mu / sums[f]->area);
    }
  if (cell.sigma[0] > 0.0 && cell.sigma[1] > 0.0)
    g_array_append_val (cells, cell);
}

void
tf_pair_cells (GArray *cells, const TfFrame *instrument, const TfFrame *reference, guint32 pair,
               const TfPairParams *params)
{
  TfTime first = tf_frame_get_info (instrument)->time, second = tf_frame_get_info (reference)->time;
  TfTime middle = tf_time_add (first, 0.5 * (second.s - first.s));
  g_auto (Grid) grid = { 0 };
  grid_init (&grid, params->cell_deg);
  g_autofree Sum *a = g_new0 (Sum, grid.n), *b = g_new0 (Sum, grid.n);
  add_frame (&grid, a, instrument, middle, params);
  add_frame (&grid, b, reference, middle, params);
  guint in_block = (guint)fmax (1.0, round (BLOCK_DEG / params->cell_deg));
  for (guint row = 0; row < grid.n_rows; row++)
    for (guint k = 0; k < grid.in_row[row]; k++)
      {
        guint at = grid.first[row] + k;
        double least = COVERED * cell_area (&grid, row);
        const Sum *const both[2] = { &a[at], &b[at] };
        if (a[at].area >= least && b[at].area >= least)
          take_cell (cells, both, pair * 100000u + row / in_block * 1000u + k / in_block);
      }
}
