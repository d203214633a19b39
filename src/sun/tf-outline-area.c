/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-outline-private.h"

#include <math.h>

/* Area by lines of constant v of the gnomonic plane. Along such a line the area inside is a closed
 * form of the crossings; between the heights at which an edge begins, ends or meets another it is a
 * smooth function of v, summed by Gauss-Legendre. So holes, left-out areas and rings that cross
 * themselves are all counted as tf_outline_contains counts them.
 */

/* Abramowitz & Stegun, Handbook of Mathematical Functions, table 25.4, n = 8. */
static const double nodes[4]
    = { 0.183434642495650, 0.525532409916329, 0.796666477413627, 0.960289856497536 };
static const double weights[4]
    = { 0.362683783378362, 0.313706645877887, 0.222381034453374, 0.101228536290376 };

#define MOST_HEIGHT 0.25 /* of v: a taller slab is summed in pieces */

enum
{
  MOST_EDGES = 2000 /* above it, meeting edges are not looked for: their error is then small */
};

static int
compare (gconstpointer a, gconstpointer b)
{
  double p = *(const double *)a, q = *(const double *)b;
  return (p > q) - (p < q);
}

typedef struct
{
  double u1, v1, u2, v2;
} Edge;

static void
add_edges (GPtrArray *rings, GArray *edges, GArray *heights)
{
  for (guint k = 0; k < rings->len; k++)
    {
      const TfRing *ring = g_ptr_array_index (rings, k);
      for (guint j = 0; j < ring->n; j++)
        {
          guint next = (j + 1) % ring->n;
          Edge edge = { ring->u[j], ring->v[j], ring->u[next], ring->v[next] };
          g_array_append_val (edges, edge);
          g_array_append_val (heights, edge.v1);
        }
    }
}

static void
add_meeting (const Edge *a, const Edge *b, GArray *heights)
{
  double ax = a->u2 - a->u1, ay = a->v2 - a->v1, bx = b->u2 - b->u1, by = b->v2 - b->v1;
  double cross = ax * by - ay * bx, dx = b->u1 - a->u1, dy = b->v1 - a->v1;
  double s = (dx * by - dy * bx) / cross, t = (dx * ay - dy * ax) / cross;
  double v = a->v1 + s * ay;
  if (s > 0.0 && s < 1.0 && t > 0.0 && t < 1.0)
    g_array_append_val (heights, v);
}

static void
add_meetings (const GArray *edges, GArray *heights)
{
  if (edges->len > MOST_EDGES)
    return;
  for (guint i = 0; i < edges->len; i++)
    for (guint j = i + 2; j < edges->len; j++)
      add_meeting (&g_array_index (edges, Edge, i), &g_array_index (edges, Edge, j), heights);
}

typedef struct
{
  const TfOutline *outline;
  GArray *all; /* of double */
} Line;

/* The integral of the area element du dv / (1 + u^2 + v^2)^(3/2) over u. */
static double
upto (double u, double v)
{
  double w = 1.0 + v * v;
  return u / (w * sqrt (w + u * u));
}

static gboolean
inside (const TfOutline *outline, double u, double v)
{
  return tf_outline_inside_rings (outline, u, v) && !tf_outline_inside_left_out (outline, u, v);
}

static double
line_area (Line *line, double v)
{
  GPtrArray *kinds[2] = { line->outline->rings, line->outline->left_out };
  double sum = 0.0;
  g_array_set_size (line->all, 0);
  for (int kind = 0; kind < 2; kind++)
    for (guint k = 0; k < kinds[kind]->len; k++)
      tf_ring_crossings (g_ptr_array_index (kinds[kind], k), v, line->all);
  g_array_sort (line->all, compare);
  for (guint k = 0; k + 1 < line->all->len; k++)
    {
      double a = g_array_index (line->all, double, k), b = g_array_index (line->all, double, k + 1);
      if (b > a && inside (line->outline, 0.5 * (a + b), v))
        sum += upto (b, v) - upto (a, v);
    }
  return sum;
}

static double
slab_area (Line *line, double low, double high)
{
  double sum = 0.0, pieces = ceil ((high - low) / MOST_HEIGHT), half = 0.5 * (high - low) / pieces;
  for (int piece = 0; piece < (int)pieces && half > 0.0; piece++)
    {
      double middle = low + (2.0 * piece + 1.0) * half;
      for (int j = 0; j < 4; j++)
        sum += half * weights[j]
               * (line_area (line, middle - half * nodes[j])
                  + line_area (line, middle + half * nodes[j]));
    }
  return sum;
}

double
tf_outline_area (const TfOutline *outline, double radius_mm)
{
  g_autoptr (GArray) edges = g_array_new (FALSE, FALSE, sizeof (Edge));
  g_autoptr (GArray) heights = g_array_new (FALSE, FALSE, sizeof (double));
  g_autoptr (GArray) all = g_array_new (FALSE, FALSE, sizeof (double));
  Line line = { .outline = outline, .all = all };
  double sum = 0.0;
  add_edges (outline->rings, edges, heights);
  add_edges (outline->left_out, edges, heights);
  add_meetings (edges, heights);
  g_array_sort (heights, compare);
  for (guint k = 0; k + 1 < heights->len; k++)
    sum += slab_area (&line, g_array_index (heights, double, k),
                      g_array_index (heights, double, k + 1));
  return sum * radius_mm * radius_mm;
}
