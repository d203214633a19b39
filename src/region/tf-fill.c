/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-fill-private.h"

#include <math.h>
#include <string.h>

#include "tf-geometry.h"

enum
{
  CHUNK = 256,
  CELLS = 160,  /* of the grid, a side */
  MAX_BITS = 63 /* left-out rings told apart */
};
/* Beyond this the gnomonic plane runs away: ask the outline itself. */
static const double MAX_RADIUS_DEG = 75.0;

typedef enum
{
  CELL_OUTSIDE,
  CELL_INSIDE,
  CELL_MIXED,
} Cell;

typedef struct
{
  double u0, v0, u1, v1; /* v0 < v1 */
  guint64 bit;           /* which ring it belongs to: bit 0 all rings, bit k left-out ring k */
} Edge;

struct _TfFill
{
  TfOutline *outline;
  gboolean plane; /* FALSE: too large, the outline itself is asked */
  double west[3], north[3], centre[3];
  double u_min, v_min, u_step, v_step;
  GArray *edges;     /* Edge */
  GArray *row_edges; /* guint: edges that touch each row of cells */
  guint row_first[CELLS + 1];
  guint8 cell[CELLS * CELLS + 1]; /* the last: what lies off the grid, always outside */
};

static double
dot (const double a[3], const double b[3])
{
  return a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
}

static gboolean
to_plane (const TfFill *fill, const double unit[3], double *u, double *v)
{
  double c = dot (unit, fill->centre);
  if (!(c > 0.05))
    return FALSE;
  *u = dot (unit, fill->west) / c;
  *v = dot (unit, fill->north) / c;
  return TRUE;
}

static void
add_ring (TfFill *fill, const TfVertex *ring, guint n, guint64 bit)
{
  double u0 = 0.0, v0 = 0.0, u1 = 0.0, v1 = 0.0, unit[3];
  tf_sphere_unit (ring[n - 1].lon_deg, ring[n - 1].lat_deg, unit);
  if (!to_plane (fill, unit, &u0, &v0))
    fill->plane = FALSE;
  for (guint k = 0; k < n && fill->plane; k++)
    {
      tf_sphere_unit (ring[k].lon_deg, ring[k].lat_deg, unit);
      if (!to_plane (fill, unit, &u1, &v1))
        fill->plane = FALSE;
      else if (v0 < v1)
        g_array_append_val (fill->edges, ((Edge){ u0, v0, u1, v1, bit }));
      else if (v1 < v0)
        g_array_append_val (fill->edges, ((Edge){ u1, v1, u0, v0, bit }));
      u0 = u1;
      v0 = v1;
    }
}

static void
add_rings (TfFill *fill)
{
  guint n;
  for (guint k = 0; k < tf_outline_get_n_rings (fill->outline); k++)
    {
      const TfVertex *ring = tf_outline_get_ring (fill->outline, k, FALSE, &n);
      add_ring (fill, ring, n, 1);
    }
  for (guint k = 0; k < tf_outline_get_n_left_out (fill->outline); k++)
    {
      const TfVertex *ring = tf_outline_get_ring (fill->outline, k, TRUE, &n);
      add_ring (fill, ring, n, (guint64)1 << (1 + k % MAX_BITS));
    }
}

static void
set_grid (TfFill *fill)
{
  double u0 = INFINITY, u1 = -INFINITY, v0 = INFINITY, v1 = -INFINITY;
  for (guint k = 0; k < fill->edges->len; k++)
    {
      const Edge *e = &g_array_index (fill->edges, Edge, k);
      u0 = MIN (u0, MIN (e->u0, e->u1));
      u1 = MAX (u1, MAX (e->u0, e->u1));
      v0 = MIN (v0, e->v0);
      v1 = MAX (v1, e->v1);
    }
  if (!(u1 > u0) || !(v1 > v0))
    {
      fill->plane = FALSE;
      return;
    }
  fill->u_step = (u1 - u0) / (CELLS - 2);
  fill->v_step = (v1 - v0) / (CELLS - 2);
  fill->u_min = u0 - fill->u_step;
  fill->v_min = v0 - fill->v_step;
}

static guint
clamp_cell (double x)
{
  return (guint)CLAMP (x, 0.0, (double)(CELLS - 1));
}

/* Marks the cells of one row that an edge may touch, one cell to spare on each side. */
static void
mark_edge (TfFill *fill, const Edge *e, guint row)
{
  double lo = fill->v_min + row * fill->v_step, hi = lo + fill->v_step;
  double slope = (e->u1 - e->u0) / (e->v1 - e->v0);
  double ua = e->u0 + slope * (CLAMP (lo, e->v0, e->v1) - e->v0);
  double ub = e->u0 + slope * (CLAMP (hi, e->v0, e->v1) - e->v0);
  guint first = clamp_cell ((MIN (ua, ub) - fill->u_min) / fill->u_step - 1.0);
  guint last = clamp_cell ((MAX (ua, ub) - fill->u_min) / fill->u_step + 1.0);
  for (guint c = first; c <= last; c++)
    fill->cell[row * CELLS + c] = CELL_MIXED;
}

/* The first and last row of cells that an edge may touch. */
static void
find_rows (const TfFill *fill, const Edge *e, guint rows[2])
{
  rows[0] = clamp_cell ((e->v0 - fill->v_min) / fill->v_step - 0.01);
  rows[1] = clamp_cell ((e->v1 - fill->v_min) / fill->v_step + 0.01);
}

static gboolean
test_edges (const TfFill *fill, guint row, double u, double v)
{
  const guint *index = (const guint *)(const void *)fill->row_edges->data;
  const Edge *edges = (const Edge *)(const void *)fill->edges->data;
  guint64 bits = 0;
  for (guint k = fill->row_first[row]; k < fill->row_first[row + 1]; k++)
    {
      const Edge *e = &edges[index[k]];
      if (v >= e->v0 && v < e->v1 && u < e->u0 + (e->u1 - e->u0) * ((v - e->v0) / (e->v1 - e->v0)))
        bits ^= e->bit;
    }
  return bits == 1;
}

/* A run of unmarked cells has one state: no edge passes between them. */
static void
settle_row (TfFill *fill, guint row)
{
  double v = fill->v_min + (row + 0.5) * fill->v_step;
  guint8 *cells = fill->cell + (gsize)row * CELLS;
  for (guint c = 0, end; c < CELLS; c = end + 1)
    {
      const guint8 *mixed = memchr (cells + c, CELL_MIXED, CELLS - c);
      end = mixed != NULL ? (guint)(mixed - cells) : CELLS;
      if (end > c && test_edges (fill, row, fill->u_min + (c + 0.5) * fill->u_step, v))
        memset (cells + c, CELL_INSIDE, end - c);
    }
}

static void
make_grid (TfFill *fill)
{
  guint n = fill->edges->len;
  const Edge *edges = (const Edge *)(const void *)fill->edges->data;
  g_autofree guint (*rows)[2] = g_malloc_n (MAX (n, 1), sizeof *rows);
  for (guint k = 0; k < n; k++)
    find_rows (fill, &edges[k], rows[k]);
  for (guint row = 0; row < CELLS; row++)
    {
      fill->row_first[row] = fill->row_edges->len;
      for (guint k = 0; k < n; k++)
        if (row >= rows[k][0] && row <= rows[k][1])
          {
            g_array_append_val (fill->row_edges, k);
            mark_edge (fill, &edges[k], row);
          }
      fill->row_first[row + 1] = fill->row_edges->len;
      settle_row (fill, row);
    }
}

TfFill *
tf_fill_new (const TfOutline *outline)
{
  g_return_val_if_fail (outline != NULL, NULL);
  TfFill *fill = g_new0 (TfFill, 1);
  double lon, lat, radius;
  fill->outline = tf_outline_ref ((TfOutline *)outline);
  fill->edges = g_array_new (FALSE, FALSE, sizeof (Edge));
  fill->row_edges = g_array_new (FALSE, FALSE, sizeof (guint));
  tf_outline_get_cap (outline, &lon, &lat, &radius);
  fill->plane = radius < MAX_RADIUS_DEG;
  tf_sphere_unit (lon, lat, fill->centre);
  tf_sphere_unit (lon + 90.0, 0.0, fill->west);
  tf_sphere_unit (lat >= 0.0 ? lon + 180.0 : lon, 90.0 - fabs (lat), fill->north);
  if (lat < 0.0)
    tf_sphere_unit (lon, lat + 90.0, fill->north);
  if (fill->plane)
    add_rings (fill);
  if (fill->plane)
    set_grid (fill);
  if (fill->plane)
    make_grid (fill);
  return fill;
}

void
tf_fill_free (TfFill *fill)
{
  if (fill == NULL)
    return;
  tf_outline_unref (fill->outline);
  g_array_unref (fill->edges);
  g_array_unref (fill->row_edges);
  g_free (fill);
}

gboolean
tf_fill_contains (const TfFill *fill, const double unit[3])
{
  if (!fill->plane)
    return isfinite (unit[0]) && tf_outline_contains (fill->outline, unit);
  double u, v;
  if (!to_plane (fill, unit, &u, &v))
    return FALSE;
  double c = (u - fill->u_min) / fill->u_step, r = (v - fill->v_min) / fill->v_step;
  if (!(c >= 0.0 && c < CELLS && r >= 0.0 && r < CELLS))
    return FALSE;
  guint8 cell = fill->cell[(guint)r * CELLS + (guint)c];
  if (cell == CELL_MIXED)
    return test_edges (fill, (guint)r, u, v);
  return cell == CELL_INSIDE;
}

/* Points to be asked for: each part of theirs @stride apart. */
typedef struct
{
  const double *x, *y, *z;
  guint stride;
} Points;

/* In which cell each point lies; a point that the plane does not hold, or that is none, lies off
 * the grid. Without a branch, so that it runs on vectors. */
static inline void
find_cells (const TfFill *fill, const Points *p, guint stride, guint n, gint32 *cell)
{
  const double *w = fill->west, *m = fill->north, *c = fill->centre;
  const double *px = p->x, *py = p->y, *pz = p->z;
  double su = 1.0 / fill->u_step, sv = 1.0 / fill->v_step, u0 = -fill->u_min * su,
         v0 = -fill->v_min * sv;
  for (guint k = 0; k < n; k++)
    {
      double x = px[k * stride], y = py[k * stride], z = pz[k * stride];
      double along = x * c[0] + y * c[1] + z * c[2],
             over = along > 0.05 ? 1.0 / along : (double)NAN;
      float column = (float)((x * w[0] + y * w[1] + z * w[2]) * over * su + u0);
      float row = (float)((x * m[0] + y * m[1] + z * m[2]) * over * sv + v0);
      gboolean there = (column >= 0.0f) & (column < CELLS) & (row >= 0.0f) & (row < CELLS);
      gint32 i = (gint32)(there ? column : 0.0f), j = (gint32)(there ? row : 0.0f);
      cell[k] = there ? j * CELLS + i : CELLS * CELLS;
    }
}

/* The stride is known where it is one of these, so that both run on vectors. */
__attribute__ ((target_clones ("arch=x86-64-v3", "default"))) static void
find_cells_apart (const TfFill *fill, const Points *p, guint n, gint32 *cell)
{
  find_cells (fill, p, 1, n, cell);
}

__attribute__ ((target_clones ("arch=x86-64-v3", "default"))) static void
find_cells_together (const TfFill *fill, const Points *p, guint n, gint32 *cell)
{
  find_cells (fill, p, 3, n, cell);
}

static gboolean
contains_point (const TfFill *fill, const Points *p, gsize k)
{
  const double unit[3] = { p->x[k * p->stride], p->y[k * p->stride], p->z[k * p->stride] };
  return tf_fill_contains (fill, unit);
}

/* A float's place is off by less than 1e-4 of a cell: mixed cells have a cell to spare on each
 * side. */
static void
ask_some (const TfFill *fill, const Points *p, guint n, guint8 *inside)
{
  gint32 cell[CHUNK];
  if (p->stride == 1)
    find_cells_apart (fill, p, n, cell);
  else
    find_cells_together (fill, p, n, cell);
  for (guint k = 0; k < n; k++)
    inside[k] = fill->cell[cell[k]];
  for (guint k = 0; k < n; k++)
    if (inside[k] == CELL_MIXED)
      inside[k] = contains_point (fill, p, k) ? 1 : 0;
}

static void
ask (const TfFill *fill, const Points *points, guint n, guint8 *inside)
{
  for (guint first = 0; first < n; first += CHUNK)
    {
      gsize at = (gsize)first * points->stride;
      Points p = { points->x + at, points->y + at, points->z + at, points->stride };
      guint some = MIN (CHUNK, n - first);
      if (fill->plane)
        ask_some (fill, &p, some, inside + first);
      else
        for (guint k = 0; k < some; k++)
          inside[first + k] = contains_point (fill, &p, k) ? 1 : 0;
    }
}

void
tf_fill_row (const TfFill *fill, const double (*unit)[3], guint n, guint8 *inside)
{
  const double *first = &unit[0][0];
  Points points = { first, first + 1, first + 2, 3 };
  ask (fill, &points, n, inside);
}

void
tf_fill_columns (const TfFill *fill, const double *x, const double *y, const double *z, guint n,
                 guint8 *inside)
{
  Points points = { x, y, z, 1 };
  ask (fill, &points, n, inside);
}

/* The whole sphere by rows of latitude, for outlines too large for the plane. */
static void
sample_sphere (const TfFill *fill, guint n, TfFillFunc func, gpointer data)
{
  for (guint j = 0; j < n; j++)
    for (guint k = 0; k < n; k++)
      {
        double unit[3];
        double sin_lat = (j + 0.5) / n * 2.0 - 1.0;
        tf_sphere_unit ((k + 0.5) * 360.0 / n, asin (sin_lat) / (G_PI / 180.0), unit);
        if (tf_fill_contains (fill, unit))
          func (unit, 1.0, data);
      }
}

void
tf_fill_sample (const TfFill *fill, guint n, TfFillFunc func, gpointer data)
{
  if (!fill->plane)
    {
      sample_sphere (fill, n, func, data);
      return;
    }
  for (guint j = 0; j < n; j++)
    for (guint k = 0; k < n; k++)
      {
        double unit[3];
        double u = fill->u_min + fill->u_step * (1.0 + (k + 0.5) * (CELLS - 2) / n);
        double v = fill->v_min + fill->v_step * (1.0 + (j + 0.5) * (CELLS - 2) / n);
        double norm = 1.0 / sqrt (1.0 + u * u + v * v);
        for (guint i = 0; i < 3; i++)
          unit[i] = (fill->centre[i] + u * fill->west[i] + v * fill->north[i]) * norm;
        if (tf_fill_contains (fill, unit))
          func (unit, norm * norm * norm, data);
      }
}
