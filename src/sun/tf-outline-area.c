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
  MOST_EDGES = 2000, /* for the sum by slabs */
  LINES = 512        /* of the plain sum for outlines of more edges: good to 1e-4 */
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
  for (guint i = 0; i < edges->len; i++)
    for (guint j = i + 2; j < edges->len; j++)
      add_meeting (&g_array_index (edges, Edge, i), &g_array_index (edges, Edge, j), heights);
}

/* Where a line of constant v meets an edge. */
typedef struct
{
  double u;
  int left_out; /* number of the left-out area; -1: one of the rings */
} Meeting;

typedef struct
{
  const TfOutline *outline;
  GArray *meetings; /* of Meeting, on the line in hand */
  GArray *at;       /* of double: those with one ring */
  gboolean *within; /* a left-out area each: whether the sweep is in it */
} Sweep;

/* The integral of the area element du dv / (1 + u^2 + v^2)^(3/2) over u. */
static double
upto (double u, double v)
{
  double w = 1.0 + v * v;
  return u / (w * sqrt (w + u * u));
}

static void
meet_rings (Sweep *sweep, GPtrArray *rings, gboolean left_out, double v)
{
  for (guint k = 0; k < rings->len; k++)
    {
      g_array_set_size (sweep->at, 0);
      tf_ring_crossings (g_ptr_array_index (rings, k), v, sweep->at);
      for (guint j = 0; j < sweep->at->len; j++)
        {
          Meeting meeting = { g_array_index (sweep->at, double, j), left_out ? (int)k : -1 };
          g_array_append_val (sweep->meetings, meeting);
        }
    }
}

/* From west to east, turning inside and outside at each edge. */
static double
line_area (Sweep *sweep, double v)
{
  gboolean in = FALSE;
  guint n_left_out = 0;
  double sum = 0.0;
  g_array_set_size (sweep->meetings, 0);
  meet_rings (sweep, sweep->outline->rings, FALSE, v);
  meet_rings (sweep, sweep->outline->left_out, TRUE, v);
  g_array_sort (sweep->meetings, compare); /* u stands first in a Meeting */
  for (guint k = 0; k + 1 < sweep->meetings->len; k++)
    {
      const Meeting *m = &g_array_index (sweep->meetings, Meeting, k);
      if (m->left_out < 0)
        in = !in;
      else
        {
          gboolean *within = &sweep->within[m->left_out];
          *within = !*within;
          n_left_out = *within ? n_left_out + 1 : n_left_out - 1;
        }
      if (in && n_left_out == 0)
        sum += upto (m[1].u, v) - upto (m[0].u, v);
    }
  /* The last edge leads out of everything. */
  for (guint k = 0; k < sweep->outline->left_out->len; k++)
    sweep->within[k] = FALSE;
  return sum;
}

static double
slab_area (Sweep *sweep, double low, double high)
{
  double sum = 0.0, pieces = ceil ((high - low) / MOST_HEIGHT), half = 0.5 * (high - low) / pieces;
  for (int piece = 0; piece < (int)pieces && half > 0.0; piece++)
    {
      double middle = low + (2.0 * piece + 1.0) * half;
      for (int j = 0; j < 4; j++)
        sum += half * weights[j]
               * (line_area (sweep, middle - half * nodes[j])
                  + line_area (sweep, middle + half * nodes[j]));
    }
  return sum;
}

static double
sum_by_slabs (Sweep *sweep)
{
  g_autoptr (GArray) edges = g_array_new (FALSE, FALSE, sizeof (Edge));
  g_autoptr (GArray) heights = g_array_new (FALSE, FALSE, sizeof (double));
  double sum = 0.0;
  add_edges (sweep->outline->rings, edges, heights);
  add_edges (sweep->outline->left_out, edges, heights);
  add_meetings (edges, heights);
  g_array_sort (heights, compare);
  for (guint k = 0; k + 1 < heights->len; k++)
    sum += slab_area (sweep, g_array_index (heights, double, k),
                      g_array_index (heights, double, k + 1));
  return sum;
}

static double
sum_by_lines (Sweep *sweep)
{
  const TfGrid *grid = &sweep->outline->grid;
  double height = TF_GRID / grid->per_v / LINES, sum = 0.0;
  for (int k = 0; k < LINES; k++)
    sum += height * line_area (sweep, grid->v_min + (k + 0.5) * height);
  return sum;
}

double
tf_outline_area (const TfOutline *outline, double radius_mm)
{
  g_autoptr (GArray) meetings = g_array_new (FALSE, FALSE, sizeof (Meeting));
  g_autoptr (GArray) at = g_array_new (FALSE, FALSE, sizeof (double));
  g_autofree gboolean *within = g_new0 (gboolean, MAX (outline->left_out->len, 1));
  Sweep sweep = { outline, meetings, at, within };
  gboolean many = outline->n_vertices > MOST_EDGES;
  return (many ? sum_by_lines (&sweep) : sum_by_slabs (&sweep)) * radius_mm * radius_mm;
}
