/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-outline-private.h"

#include <math.h>

#include "tf-constants.h"
#include "tf-rotation.h"

typedef TfVertex (*MoveFunc) (TfVertex vertex, const void *data);

/* Every vertex of every ring through @move; NULL when what comes out is no outline. */
static TfOutline *
move_rings (const TfOutline *outline, TfTime time, MoveFunc move, const void *data)
{
  g_autoptr (TfOutline) moved = tf_outline_start (time);
  for (int left_out = 0; left_out < 2; left_out++)
    {
      GPtrArray *rings = left_out ? outline->left_out : outline->rings;
      for (guint k = 0; k < rings->len; k++)
        {
          const TfRing *ring = g_ptr_array_index (rings, k);
          g_autofree TfVertex *vertices = g_memdup2 (ring->vertices, ring->n * sizeof *vertices);
          for (guint j = 0; j < ring->n; j++)
            vertices[j] = move (vertices[j], data);
          if (!tf_outline_fill (moved, vertices, ring->n, left_out, "", NULL))
            return NULL;
        }
    }
  tf_outline_fill_pins_of (moved, outline);
  return tf_outline_finish (g_steal_pointer (&moved), NULL);
}

/* -- deform ---------------------------------------------------------------------------------- */

typedef struct
{
  TfTangent tangent;
  double west, north, scale; /* rad, rad, 1 */
  const double *amplitude_deg, *phase;
} Deform;

/* The tangent plane here is the equidistant one: a vertex lies at its great-circle distance from
 * the centre, in its direction. */
static TfVertex
deform_vertex (TfVertex vertex, const void *data)
{
  const Deform *d = data;
  double p[3], u = 0.0, v = 0.0, w = 0.0, out[3];
  tf_sphere_unit (vertex.lon_deg, vertex.lat_deg, p);
  for (int k = 0; k < 3; k++)
    {
      u += p[k] * d->tangent.west[k];
      v += p[k] * d->tangent.north[k];
      w += p[k] * d->tangent.centre[k];
    }
  double angle = atan2 (v, u), rho = d->scale * atan2 (hypot (u, v), w);
  for (int k = 0; k < 3; k++)
    rho += d->amplitude_deg[k] * TF_DEG * cos ((k + 1) * (angle - d->phase[k]));
  rho = MAX (rho, 0.0);
  double x = d->west + rho * cos (angle), y = d->north + rho * sin (angle), r = hypot (x, y);
  double across = r > 0.0 ? sin (r) / r : 1.0;
  for (int k = 0; k < 3; k++)
    out[k] = cos (r) * d->tangent.centre[k]
             + across * (x * d->tangent.west[k] + y * d->tangent.north[k]);
  return tf_vertex_of (out);
}

TfOutline *
tf_outline_deform (const TfOutline *outline, double west_deg, double north_deg, double scale,
                   const double amplitude_deg[3], const double phase[3])
{
  Deform deform = {
    .tangent = outline->tangent,
    .west = west_deg * TF_DEG,
    .north = north_deg * TF_DEG,
    .scale = scale,
    .amplitude_deg = amplitude_deg,
    .phase = phase,
  };
  return move_rings (outline, outline->time, deform_vertex, &deform);
}

/* -- carry ----------------------------------------------------------------------------------- */

typedef struct
{
  guint law;
  double seconds;
} Carry;

static TfVertex
carry_vertex (TfVertex vertex, const void *data)
{
  const Carry *c = data;
  vertex.lon_deg += tf_rotation_carry (c->law, vertex.lat_deg, c->seconds);
  return vertex;
}

TfOutline *
tf_outline_carry (const TfOutline *outline, TfTime time, guint law)
{
  Carry carry = { law, time.s - outline->time.s };
  if (!isfinite (carry.seconds))
    return NULL;
  TfOutline *moved = move_rings (outline, time, carry_vertex, &carry);
  for (guint k = 0; moved != NULL && k < moved->n_pins; k++)
    {
      TfPinnedPole *pin = &moved->pins[k];
      pin->lon_deg
          = tf_wrap_360 (pin->lon_deg + tf_rotation_carry (law, pin->lat_deg, carry.seconds));
    }
  return moved;
}

/* -- simplify -------------------------------------------------------------------------------- */

/* Great-circle distance of p from the arc a b, deg. */
static double
arc_distance (TfVertex p, TfVertex a, TfVertex b)
{
  double up[3], ua[3], ub[3], n[3], length = 0.0, height = 0.0, from_a = 0.0, from_b = 0.0;
  tf_sphere_unit (p.lon_deg, p.lat_deg, up);
  tf_sphere_unit (a.lon_deg, a.lat_deg, ua);
  tf_sphere_unit (b.lon_deg, b.lat_deg, ub);
  for (int k = 0; k < 3; k++)
    {
      int i = (k + 1) % 3, j = (k + 2) % 3;
      n[k] = ua[i] * ub[j] - ua[j] * ub[i];
      length += n[k] * n[k];
      height += n[k] * up[k];
    }
  for (int k = 0; k < 3; k++)
    { /* components of p along the arc's direction at a and at b */
      int i = (k + 1) % 3, j = (k + 2) % 3;
      from_a += (n[i] * ua[j] - n[j] * ua[i]) * up[k];
      from_b += (n[i] * ub[j] - n[j] * ub[i]) * up[k];
    }
  if (length > 1e-24 && from_a >= 0.0 && from_b <= 0.0)
    return fabs (asin (CLAMP (height / sqrt (length), -1.0, 1.0))) / TF_DEG;
  return MIN (tf_sphere_distance (p.lon_deg, p.lat_deg, a.lon_deg, a.lat_deg),
              tf_sphere_distance (p.lon_deg, p.lat_deg, b.lon_deg, b.lat_deg));
}

/* Index of the vertex between @from and @to (which may run over the end) that lies farthest off. */
static guint
farthest (const TfRing *ring, guint from, guint to, double *distance)
{
  const TfVertex *v = ring->vertices;
  guint best = from;
  *distance = -1.0;
  for (guint k = from + 1; k < to; k++)
    {
      double d = arc_distance (v[k % ring->n], v[from % ring->n], v[to % ring->n]);
      if (d > *distance)
        {
          *distance = d;
          best = k;
        }
    }
  return best;
}

typedef struct
{
  guint from, to;
} Span;

/* Douglas & Peucker 1973, Cartographica 10, 112; with a list of spans instead of recursion. */
static void
keep_between (const TfRing *ring, guint from, guint to, double tolerance, gboolean *keep)
{
  g_autoptr (GArray) spans = g_array_new (FALSE, FALSE, sizeof (Span));
  Span span = { from, to };
  g_array_append_val (spans, span);
  while (spans->len > 0)
    {
      double distance;
      span = g_array_index (spans, Span, spans->len - 1);
      g_array_set_size (spans, spans->len - 1);
      guint best = farthest (ring, span.from, span.to, &distance);
      if (!(distance > tolerance))
        continue;
      keep[best % ring->n] = TRUE;
      g_array_append_val (spans, ((Span){ span.from, best }));
      g_array_append_val (spans, ((Span){ best, span.to }));
    }
}

static void
fill_kept (TfOutline *to, const TfRing *ring, gboolean left_out, const gboolean *keep)
{
  g_autoptr (GArray) kept = g_array_new (FALSE, FALSE, sizeof (TfVertex));
  for (guint k = 0; k < ring->n; k++)
    if (keep[k])
      g_array_append_val (kept, ring->vertices[k]);
  tf_outline_fill (to, (const TfVertex *)kept->data, kept->len, left_out, "", NULL);
}

static void
simplify_ring (TfOutline *to, const TfRing *ring, gboolean left_out, double tolerance)
{
  double d1, d2;
  g_autofree gboolean *keep = g_new0 (gboolean, ring->n);
  guint far = farthest (ring, 0, ring->n, &d1);
  keep[0] = keep[far] = TRUE;
  keep_between (ring, 0, far, tolerance, keep);
  keep_between (ring, far, ring->n, tolerance, keep);
  guint one = farthest (ring, 0, far, &d1), other = farthest (ring, far, ring->n, &d2);
  keep[d1 >= d2 ? one : other] = TRUE; /* a third vertex in any case */
  fill_kept (to, ring, left_out, keep);
}

/* A place to 1e-6 deg. */
static gint64 *
place_key (TfVertex vertex)
{
  gint64 lon = llround (tf_wrap_360 (vertex.lon_deg) * 1e6), lat = llround (vertex.lat_deg * 1e6);
  gint64 key = lon * 400000000 + lat;
  return g_memdup2 (&key, sizeof key);
}

static GHashTable *
places_of (const TfOutline *outline)
{
  GHashTable *places = g_hash_table_new_full (g_int64_hash, g_int64_equal, g_free, NULL);
  for (int left_out = 0; left_out < 2; left_out++)
    {
      GPtrArray *rings = left_out ? outline->left_out : outline->rings;
      for (guint k = 0; k < rings->len; k++)
        {
          const TfRing *ring = g_ptr_array_index (rings, k);
          for (guint j = 0; j < ring->n; j++)
            g_hash_table_add (places, place_key (ring->vertices[j]));
        }
    }
  return places;
}

static guint
mark_known (const TfRing *ring, GHashTable *places, gboolean *keep, guint *first)
{
  guint n = 0;
  for (guint k = 0; k < ring->n; k++)
    {
      g_autofree gint64 *key = place_key (ring->vertices[k]);
      keep[k] = g_hash_table_contains (places, key);
      if (keep[k] && n++ == 0)
        *first = k;
    }
  return n;
}

static void
simplify_new_of (TfOutline *to, const TfRing *ring, gboolean left_out, double tolerance,
                 GHashTable *places)
{
  guint first = 0;
  g_autofree gboolean *known = g_new0 (gboolean, ring->n);
  if (mark_known (ring, places, known, &first) < 3)
    {
      simplify_ring (to, ring, left_out, tolerance);
      return;
    }
  g_autofree gboolean *keep = g_memdup2 (known, ring->n * sizeof *known);
  guint from = first;
  for (guint k = first + 1; k <= first + ring->n; k++)
    if (known[k % ring->n])
      {
        keep_between (ring, from, k, tolerance, keep);
        from = k;
      }
  fill_kept (to, ring, left_out, keep);
}

static TfOutline *
simplify (const TfOutline *outline, double tolerance_deg, GHashTable *places)
{
  TfOutline *simple = tf_outline_start (outline->time);
  for (int left_out = 0; left_out < 2; left_out++)
    {
      GPtrArray *rings = left_out ? outline->left_out : outline->rings;
      for (guint k = 0; k < rings->len; k++)
        if (places != NULL)
          simplify_new_of (simple, g_ptr_array_index (rings, k), left_out, tolerance_deg, places);
        else
          simplify_ring (simple, g_ptr_array_index (rings, k), left_out, tolerance_deg);
    }
  tf_outline_fill_pins_of (simple, outline);
  return tf_outline_finish (simple, NULL);
}

TfOutline *
tf_outline_simplify (const TfOutline *outline, double tolerance_deg)
{
  return simplify (outline, tolerance_deg, NULL);
}

TfOutline *
tf_outline_simplify_new (const TfOutline *outline, const TfOutline *before, double tolerance_deg)
{
  g_autoptr (GHashTable) places = places_of (before);
  return simplify (outline, tolerance_deg, places);
}
