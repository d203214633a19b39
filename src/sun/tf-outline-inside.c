/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-outline-private.h"

#include <math.h>

#include "tf-constants.h"

/* cos (89 deg): beyond it the gnomonic plane runs away. */
#define REACH 0.017452406437283512

TfTangent
tf_tangent_at (const double centre[3])
{
  TfTangent t;
  double lon, lat;
  tf_sphere_lonlat (centre, &lon, &lat);
  tf_sphere_unit (lon, lat, t.centre);
  tf_sphere_unit (lon + 90.0, 0.0, t.west);
  t.north[0] = t.centre[1] * t.west[2] - t.centre[2] * t.west[1];
  t.north[1] = t.centre[2] * t.west[0] - t.centre[0] * t.west[2];
  t.north[2] = t.centre[0] * t.west[1] - t.centre[1] * t.west[0];
  return t;
}

static double
dot (const double a[3], const double b[3])
{
  return a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
}

gboolean
tf_tangent_project (const TfTangent *t, const double unit[3], double *u, double *v)
{
  double along = dot (unit, t->centre);
  if (!(along > REACH))
    return FALSE;
  *u = dot (unit, t->west) / along;
  *v = dot (unit, t->north) / along;
  return TRUE;
}

void
tf_tangent_lift (const TfTangent *t, double u, double v, double unit[3])
{
  double length = sqrt (1.0 + u * u + v * v);
  for (int k = 0; k < 3; k++)
    unit[k] = (t->centre[k] + u * t->west[k] + v * t->north[k]) / length;
}

TfVertex
tf_vertex_of (const double unit[3])
{
  TfVertex vertex;
  tf_sphere_lonlat (unit, &vertex.lon_deg, &vertex.lat_deg);
  return vertex;
}

/* -- slabs ----------------------------------------------------------------------------------- */

static guint
slab_of (const TfRing *ring, double v)
{
  double k = (v - ring->v_min) * ring->slabs_per_v;
  return k <= 0.0 ? 0 : MIN ((guint)k, ring->n_slabs - 1);
}

static void
edge_slabs (const TfRing *ring, guint k, guint *first, guint *last)
{
  double v1 = ring->v[k], v2 = ring->v[(k + 1) % ring->n];
  *first = slab_of (ring, MIN (v1, v2));
  *last = slab_of (ring, MAX (v1, v2));
}

/* How many edges stand in each slab, added up; gives the sum of all. */
static guint
count_slabs (TfRing *ring, guint n_slabs)
{
  guint first, last;
  double height = ring->v_max - ring->v_min;
  ring->n_slabs = n_slabs;
  ring->slabs_per_v = height > 0.0 ? n_slabs / height : 0.0;
  g_free (ring->slab_start);
  ring->slab_start = g_new0 (guint, n_slabs + 1);
  for (guint k = 0; k < ring->n; k++)
    {
      edge_slabs (ring, k, &first, &last);
      for (guint s = first; s <= last; s++)
        ring->slab_start[s + 1]++;
    }
  for (guint s = 0; s < n_slabs; s++)
    ring->slab_start[s + 1] += ring->slab_start[s];
  return ring->slab_start[n_slabs];
}

/* Fewer slabs for a ring that runs up and down all the time, so that the lists stay short. */
static void
sort_into_slabs (TfRing *ring)
{
  guint first, last, n_slabs = CLAMP (ring->n / 2, 1, 256);
  while (count_slabs (ring, n_slabs) > 8 * ring->n + 1024 && n_slabs > 1)
    n_slabs /= 2;
  g_autofree guint *used = g_new0 (guint, n_slabs);
  ring->slab_edges = g_new (guint, ring->slab_start[n_slabs]);
  for (guint k = 0; k < ring->n; k++)
    {
      edge_slabs (ring, k, &first, &last);
      for (guint s = first; s <= last; s++)
        ring->slab_edges[ring->slab_start[s] + used[s]++] = k;
    }
}

static gboolean
project_ring (TfRing *ring, const TfTangent *tangent)
{
  ring->u_min = ring->v_min = G_MAXDOUBLE;
  ring->u_max = ring->v_max = -G_MAXDOUBLE;
  for (guint k = 0; k < ring->n; k++)
    {
      double unit[3];
      tf_sphere_unit (ring->vertices[k].lon_deg, ring->vertices[k].lat_deg, unit);
      if (!tf_tangent_project (tangent, unit, &ring->u[k], &ring->v[k]))
        return FALSE;
      ring->u_min = MIN (ring->u_min, ring->u[k]);
      ring->u_max = MAX (ring->u_max, ring->u[k]);
      ring->v_min = MIN (ring->v_min, ring->v[k]);
      ring->v_max = MAX (ring->v_max, ring->v[k]);
    }
  sort_into_slabs (ring);
  return TRUE;
}

/* -- inside ---------------------------------------------------------------------------------- */

/* Half-open in v, so that a vertex at the very height of the point counts once. */
static gboolean
crosses (const TfRing *ring, guint k, double v, double *u)
{
  guint next = k + 1 == ring->n ? 0 : k + 1;
  double v1 = ring->v[k], v2 = ring->v[next];
  if ((v1 > v) == (v2 > v))
    return FALSE;
  *u = ring->u[k] + (ring->u[next] - ring->u[k]) * ((v - v1) / (v2 - v1));
  return TRUE;
}

gboolean
tf_ring_contains (const TfRing *ring, double u, double v)
{
  gboolean inside = FALSE;
  double at;
  if (u < ring->u_min || u > ring->u_max || v < ring->v_min || v > ring->v_max)
    return FALSE;
  guint slab = slab_of (ring, v);
  for (guint k = ring->slab_start[slab]; k < ring->slab_start[slab + 1]; k++)
    if (crosses (ring, ring->slab_edges[k], v, &at) && u < at)
      inside = !inside;
  return inside;
}

void
tf_ring_crossings (const TfRing *ring, double v, GArray *u)
{
  double at;
  if (v < ring->v_min || v > ring->v_max)
    return;
  guint slab = slab_of (ring, v);
  for (guint k = ring->slab_start[slab]; k < ring->slab_start[slab + 1]; k++)
    if (crosses (ring, ring->slab_edges[k], v, &at))
      g_array_append_val (u, at);
}

gboolean
tf_outline_inside_rings (const TfOutline *outline, double u, double v)
{
  gboolean inside = FALSE;
  for (guint k = 0; k < outline->rings->len; k++)
    inside ^= tf_ring_contains (g_ptr_array_index (outline->rings, k), u, v);
  return inside;
}

gboolean
tf_outline_inside_left_out (const TfOutline *outline, double u, double v)
{
  for (guint k = 0; k < outline->left_out->len; k++)
    if (tf_ring_contains (g_ptr_array_index (outline->left_out, k), u, v))
      return TRUE;
  return FALSE;
}

gboolean
tf_outline_contains (const TfOutline *outline, const double unit[3])
{
  double u, v;
  if (!tf_tangent_project (&outline->tangent, unit, &u, &v))
    return FALSE;
  int cell = tf_grid_cell (&outline->grid, u, v);
  if (cell < 0 || outline->grid.without[cell] != TF_CELL_ASK)
    return cell >= 0 && outline->grid.without[cell] == TF_CELL_IN;
  return tf_outline_inside_rings (outline, u, v) && !tf_outline_inside_left_out (outline, u, v);
}

gboolean
tf_outline_contains_rings (const TfOutline *outline, const double unit[3])
{
  double u, v;
  if (!tf_tangent_project (&outline->tangent, unit, &u, &v))
    return FALSE;
  int cell = tf_grid_cell (&outline->grid, u, v);
  if (cell < 0 || outline->grid.rings[cell] != TF_CELL_ASK)
    return cell >= 0 && outline->grid.rings[cell] == TF_CELL_IN;
  return tf_outline_inside_rings (outline, u, v);
}

/* -- finishing ------------------------------------------------------------------------------- */

/* Mean direction of the edges, each weighted by its length, so that crowded vertices pull no more.
 */
static void
add_edges (const TfRing *ring, double sum[3])
{
  double here[3], next[3];
  const TfVertex *p = ring->vertices;
  tf_sphere_unit (p[0].lon_deg, p[0].lat_deg, here);
  for (guint k = 0; k < ring->n; k++)
    {
      const TfVertex *q = &p[(k + 1) % ring->n];
      tf_sphere_unit (q->lon_deg, q->lat_deg, next);
      double length = tf_sphere_distance (p[k].lon_deg, p[k].lat_deg, q->lon_deg, q->lat_deg);
      for (int j = 0; j < 3; j++)
        {
          sum[j] += length * (here[j] + next[j]);
          here[j] = next[j];
        }
    }
}

static void
make_cap (TfOutline *outline)
{
  tf_sphere_lonlat (outline->tangent.centre, &outline->cap_lon, &outline->cap_lat);
  for (guint k = 0; k < outline->rings->len; k++)
    {
      const TfRing *ring = g_ptr_array_index (outline->rings, k);
      for (guint j = 0; j < ring->n; j++)
        {
          const TfVertex *p = &ring->vertices[j];
          double r
              = tf_sphere_distance (outline->cap_lon, outline->cap_lat, p->lon_deg, p->lat_deg);
          outline->cap_radius = MAX (outline->cap_radius, r);
        }
    }
}

gboolean
tf_outline_project (TfOutline *outline)
{
  double sum[3] = { 0.0, 0.0, 0.0 };
  for (guint k = 0; k < outline->rings->len; k++)
    add_edges (g_ptr_array_index (outline->rings, k), sum);
  double length = sqrt (dot (sum, sum));
  if (!(length > 0.0))
    { /* all vertices in one point: any of them will do */
      const TfRing *ring = g_ptr_array_index (outline->rings, 0);
      tf_sphere_unit (ring->vertices[0].lon_deg, ring->vertices[0].lat_deg, sum);
    }
  outline->tangent = tf_tangent_at (sum);
  for (guint k = 0; k < outline->rings->len; k++)
    if (!project_ring (g_ptr_array_index (outline->rings, k), &outline->tangent))
      return FALSE;
  for (guint k = 0; k < outline->left_out->len; k++)
    if (!project_ring (g_ptr_array_index (outline->left_out, k), &outline->tangent))
      return FALSE;
  make_cap (outline);
  tf_outline_make_grid (outline);
  return TRUE;
}
