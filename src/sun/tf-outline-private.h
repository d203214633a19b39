/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The inside of TfOutline, for the tf-outline-*.c files only.
 *
 * All rings lie within 89 deg of one centre. There they are also kept in the gnomonic plane about
 * it, u towards west and v towards north: great circles are straight lines in that plane, so
 * even-odd on its straight edges is exact on the sphere. The edges of a ring are sorted into slabs
 * of v, so that a point is tested against the few edges at its height.
 */

#include "tf-outline.h"

G_BEGIN_DECLS

typedef struct
{
  double centre[3], west[3], north[3];
} TfTangent;

typedef struct
{
  TfVertex *vertices; /* n; longitudes run on within the ring, the first one in [0, 360) */
  double *u, *v;      /* n; gnomonic */
  guint n;
  double u_min, u_max, v_min, v_max;
  guint n_slabs;
  double slabs_per_v;
  guint *slab_start; /* n_slabs + 1 */
  guint *slab_edges; /* edge k joins vertices k and k + 1 */
} TfRing;

/* A grid of cells over all rings. A cell that no edge touches is wholly inside or wholly outside, so
 * that most points are settled by looking it up. */
enum
{
  TF_GRID = 32,
  TF_CELL_OUT = 0,
  TF_CELL_IN = 1,
  TF_CELL_ASK = 2, /* an edge runs through it */
};

typedef struct
{
  double u_min, v_min, per_u, per_v; /* cells a unit of u, of v */
  guint8 rings[TF_GRID * TF_GRID];   /* left-out areas count as inside */
  guint8 without[TF_GRID * TF_GRID]; /* left-out areas are outside */
} TfGrid;

struct _TfOutline
{
  TfTime time;
  GPtrArray *rings, *left_out; /* of TfRing */
  guint n_vertices;            /* of all of them */
  TfPinnedPole pins[2];        /* their strings are owned here */
  guint n_pins;
  TfTangent tangent;
  double cap_lon, cap_lat, cap_radius; /* deg */
  TfGrid grid;
};

/** tf_outline_start: an outline without rings, to be filled and then finished. */
TfOutline *tf_outline_start (TfTime time);
/** tf_outline_fill: copies the vertices in; fewer than 3, a number that is not finite, or a
 * latitude beyond the poles is an error that names the ring by @name. */
gboolean tf_outline_fill (TfOutline *outline, const TfVertex *vertices, guint n, gboolean left_out,
                          const char *name, GError **error);
void tf_outline_fill_pin (TfOutline *outline, const TfPinnedPole *pin);
void tf_outline_fill_pins_of (TfOutline *outline, const TfOutline *from);
/** tf_outline_finish: projects and sorts. @outline is taken; NULL when it has no ring or is larger
 * than a hemisphere. */
TfOutline *tf_outline_finish (TfOutline *outline, GError **error);

/** tf_outline_project: makes the plane, the slabs and the cap; FALSE when a vertex lies 89 deg or
 * more from the centre. */
gboolean tf_outline_project (TfOutline *outline);

TfTangent tf_tangent_at (const double centre[3]);
/** tf_tangent_project: FALSE 89 deg or more from the centre. */
gboolean tf_tangent_project (const TfTangent *tangent, const double unit[3], double *u, double *v);
void tf_tangent_lift (const TfTangent *tangent, double u, double v, double unit[3]);
TfVertex tf_vertex_of (const double unit[3]);

/** tf_outline_make_grid: after the rings are projected. */
void tf_outline_make_grid (TfOutline *outline);
/** tf_grid_cell: number of the cell of (u, v); -1 outside the grid. */
static inline int
tf_grid_cell (const TfGrid *grid, double u, double v)
{
  double column = (u - grid->u_min) * grid->per_u, row = (v - grid->v_min) * grid->per_v;
  if (!(column >= 0.0 && column < TF_GRID && row >= 0.0 && row < TF_GRID))
    return -1;
  return (int)row * TF_GRID + (int)column;
}

/** tf_outline_inside_rings: even-odd over all rings, of a point of the plane.
 * tf_outline_inside_left_out: in any left-out area. */
gboolean tf_outline_inside_rings (const TfOutline *outline, double u, double v);
gboolean tf_outline_inside_left_out (const TfOutline *outline, double u, double v);
gboolean tf_ring_contains (const TfRing *ring, double u, double v);
/** tf_ring_crossings: appends the u of every crossing of the line at @v to @u (doubles). */
void tf_ring_crossings (const TfRing *ring, double v, GArray *u);

G_END_DECLS
