/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-outline-private.h"

#include <math.h>

/* A point and an edge fall into cells by sums that may differ in the last digit: every edge is taken
 * this much thicker, in cells. */
#define THICK 1e-6

static int
clamp_cell (double at)
{
  return (int)CLAMP (at, 0.0, TF_GRID - 1.0);
}

static void
mark_cells (guint8 *cells, int row, double u1, double u2)
{
  int first = clamp_cell (MIN (u1, u2) - THICK), last = clamp_cell (MAX (u1, u2) + THICK);
  for (int column = first; column <= last; column++)
    cells[row * TF_GRID + column] = TF_CELL_ASK;
}

/* @u, @v: ends of the edge, in cells. Row by row, from where the edge enters the row to where it
 * leaves it. */
static void
mark_edge (guint8 *cells, const double u[2], const double v[2])
{
  double low = MIN (v[0], v[1]) - THICK, high = MAX (v[0], v[1]) + THICK, rise = v[1] - v[0];
  for (int row = clamp_cell (low); row <= clamp_cell (high); row++)
    {
      double at[2] = { u[0], u[1] };
      for (int end = 0; end < 2 && fabs (rise) > THICK; end++)
        {
          double t = (row + end - v[0]) / rise, margin = THICK / fabs (rise);
          t = CLAMP (t + (end == (rise > 0.0) ? margin : -margin), 0.0, 1.0);
          at[end] = u[0] + t * (u[1] - u[0]);
        }
      mark_cells (cells, row, at[0], at[1]);
    }
}

static void
mark_rings (guint8 *cells, const TfGrid *grid, GPtrArray *rings)
{
  for (guint k = 0; k < rings->len; k++)
    {
      const TfRing *ring = g_ptr_array_index (rings, k);
      for (guint j = 0; j < ring->n; j++)
        {
          guint next = (j + 1) % ring->n;
          const double u[2] = { (ring->u[j] - grid->u_min) * grid->per_u,
                                (ring->u[next] - grid->u_min) * grid->per_u };
          const double v[2] = { (ring->v[j] - grid->v_min) * grid->per_v,
                                (ring->v[next] - grid->v_min) * grid->per_v };
          mark_edge (cells, u, v);
        }
    }
}

/* A little wider than the rings, so that no vertex stands on the border. */
static void
place_grid (TfGrid *grid, GPtrArray *rings)
{
  double u_min = G_MAXDOUBLE, u_max = -G_MAXDOUBLE, v_min = G_MAXDOUBLE, v_max = -G_MAXDOUBLE;
  for (guint k = 0; k < rings->len; k++)
    {
      const TfRing *ring = g_ptr_array_index (rings, k);
      u_min = MIN (u_min, ring->u_min);
      u_max = MAX (u_max, ring->u_max);
      v_min = MIN (v_min, ring->v_min);
      v_max = MAX (v_max, ring->v_max);
    }
  double wide = MAX ((u_max - u_min) * 1.001, 1e-12), high = MAX ((v_max - v_min) * 1.001, 1e-12);
  grid->u_min = 0.5 * (u_min + u_max - wide);
  grid->v_min = 0.5 * (v_min + v_max - high);
  grid->per_u = TF_GRID / wide;
  grid->per_v = TF_GRID / high;
}

void
tf_outline_make_grid (TfOutline *outline)
{
  TfGrid *grid = &outline->grid;
  place_grid (grid, outline->rings);
  mark_rings (grid->rings, grid, outline->rings);
  mark_rings (grid->without, grid, outline->rings);
  mark_rings (grid->without, grid, outline->left_out);
  for (int cell = 0; cell < TF_GRID * TF_GRID; cell++)
    {
      double u = grid->u_min + (cell % TF_GRID + 0.5) / grid->per_u;
      double v = grid->v_min + (cell / TF_GRID + 0.5) / grid->per_v;
      if (grid->rings[cell] == TF_CELL_ASK)
        continue;
      gboolean in = tf_outline_inside_rings (outline, u, v);
      grid->rings[cell] = in ? TF_CELL_IN : TF_CELL_OUT;
      if (grid->without[cell] != TF_CELL_ASK)
        grid->without[cell]
            = in && !tf_outline_inside_left_out (outline, u, v) ? TF_CELL_IN : TF_CELL_OUT;
    }
}
