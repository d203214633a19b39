/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-wings-private.h"

#include <math.h>

#include "tf-chart-private.h"
#include "tf-verdict.h"

/* Side of a cell in pixels. Three is the smallest in which a filled and a hollow square differ. */
#define SIDE        3
#define CELLS_MAX   4096
#define HINT_WEIGHT 0.4f

typedef struct
{
  float all, positive, negative, breaks, judged;
} Cell;

typedef struct
{
  int columns, rows;
  Cell *cells;
} Grid;

static int
side_cells (double units)
{
  return CLAMP ((int)ceil (units / SIDE), 1, CELLS_MAX);
}

static void
fill_grid (Grid *grid, const TfWings *wings, TfArea plot, guint first, guint end)
{
  double x0 = tf_wings_x (wings, plot, 0) - plot.x, y0 = tf_wings_y (wings, plot, 0) - plot.y;
  double dx = tf_wings_x (wings, plot, 1) - plot.x - x0,
         dy = tf_wings_y (wings, plot, 1) - plot.y - y0;
  x0 /= SIDE, dx /= SIDE, y0 /= SIDE, dy /= SIDE;
  for (guint k = first; k < end; k++)
    {
      const TfWingsDot *dot = &wings->dots[k];
      double column = x0 + dx * dot->year, row = y0 + dy * (double)dot->lat_deg;
      if (!(column >= 0 && column < grid->columns && row >= 0 && row < grid->rows))
        continue;
      Cell *cell = &grid->cells[(gsize)row * (gsize)grid->columns + (gsize)column];
      float weight = dot->hint ? HINT_WEIGHT : 1.0f;
      cell->all += weight;
      cell->positive += dot->leading > 0 ? weight : 0;
      cell->negative += dot->leading < 0 ? weight : 0;
      cell->breaks += dot->verdict == TF_VERDICT_BREAKS ? weight : 0;
      cell->judged += dot->verdict != TF_VERDICT_CANNOT_SAY ? weight : 0;
    }
}

static guint32
pixel_of (TfColour colour, double alpha)
{
  guint32 a = (guint32)lround (alpha * 255);
  guint32 r = (guint32)lround (colour.r * alpha * 255),
          g = (guint32)lround (colour.g * alpha * 255);
  guint32 b = (guint32)lround (colour.b * alpha * 255);
  return a << 24 | r << 16 | g << 8 | b;
}

/* Which pixels of a cell carry its colour. */
typedef enum
{
  CELL_FILLED,
  CELL_HOLLOW,
  CELL_STRUCK,
} CellForm;

static gboolean
form_has (CellForm form, int x, int y)
{
  return form == CELL_FILLED
         || (form == CELL_HOLLOW ? x != SIDE / 2 || y != SIDE / 2 : x + y == SIDE - 1);
}

static void
paint_cell (guint32 *pixels, int stride, CellForm form, guint32 pixel)
{
  for (int y = 0; y < SIDE; y++)
    for (int x = 0; x < SIDE; x++)
      if (form_has (form, x, y))
        pixels[y * stride + x] = pixel;
}

static float
busiest (const Grid *grid)
{
  float most = 1;
  for (int k = 0; k < grid->columns * grid->rows; k++)
    most = MAX (most, grid->cells[k].all);
  return most;
}

static void
paint_grid (const Grid *grid, const TfWings *wings, const TfChartStyle *style, guint32 *pixels,
            int stride)
{
  double scale = 1 / log1p ((double)busiest (grid));
  for (int row = 0; row < grid->rows; row++)
    for (int column = 0; column < grid->columns; column++)
      {
        const Cell *cell = &grid->cells[row * grid->columns + column];
        if (!(cell->all > 0))
          continue;
        guint32 *corner = pixels + (gsize)row * SIDE * (gsize)stride + (gsize)column * SIDE;
        double alpha = 0.30 + 0.70 * log1p ((double)cell->all) * scale;
        gboolean positive = cell->positive >= cell->negative,
                 known = cell->positive + cell->negative > 0;
        TfColour colour = wings->plain || !known ? style->slate
                          : positive             ? style->positive
                                                 : style->negative;
        CellForm form = wings->plain || !known || positive ? CELL_FILLED : CELL_HOLLOW;
        paint_cell (corner, stride, form, pixel_of (colour, MIN (alpha, 1)));
        if (!wings->plain && cell->breaks > 0 && 4 * cell->breaks >= cell->judged)
          paint_cell (corner, stride, CELL_STRUCK, pixel_of (style->breaks, 1));
      }
}

void
tf_wings_draw_density (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea plot,
                       guint first, guint end)
{
  Grid grid = { .columns = side_cells (plot.width), .rows = side_cells (plot.height) };
  grid.cells = g_new0 (Cell, (gsize)grid.columns * (gsize)grid.rows);
  fill_grid (&grid, wings, plot, first, end);
  cairo_surface_t *picture
      = cairo_image_surface_create (CAIRO_FORMAT_ARGB32, grid.columns * SIDE, grid.rows * SIDE);
  if (cairo_surface_status (picture) == CAIRO_STATUS_SUCCESS)
    {
      guint32 *pixels = (guint32 *)(void *)cairo_image_surface_get_data (picture);
      cairo_surface_flush (picture);
      paint_grid (&grid, wings, style, pixels, cairo_image_surface_get_stride (picture) / 4);
      cairo_surface_mark_dirty (picture);
      cairo_save (cr);
      cairo_set_source_surface (cr, picture, plot.x, plot.y);
      cairo_pattern_set_filter (cairo_get_source (cr), CAIRO_FILTER_NEAREST);
      cairo_rectangle (cr, plot.x, plot.y, plot.width, plot.height);
      cairo_fill (cr);
      cairo_restore (cr);
    }
  cairo_surface_destroy (picture);
  g_free (grid.cells);
}
