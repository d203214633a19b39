/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Closed lines of equal value by marching squares. Each square between four cell centres is crossed by at most two pieces of line;
 * a line is followed from edge to edge until it is back. Values beyond the border count as 0, so that every line closes. */

#include <math.h>

#include "tf-hint-private.h"

/* Edges are numbered: from cell (x, y) to the right 2 (y w + x), upwards 2 (y w + x) + 1. */
typedef struct
{
  const float *values;
  guint width, height;
  GHashTable *next; /* edge + 1 -> edge + 1 */
} Tracer;

static double
value (const Tracer *t, guint x, guint y)
{
  return (double)t->values[(gsize)y * t->width + x];
}

static gboolean
inside (const Tracer *t, guint x, guint y)
{
  return value (t, x, y) > 0.5;
}

static void
link_edges (Tracer *t, guint from, guint to)
{
  g_hash_table_insert (t->next, GUINT_TO_POINTER (from + 1), GUINT_TO_POINTER (to + 1));
}

/* The square with lower left corner (x, y): lines run with the inside on their left. */
static void
cross_square (Tracer *t, guint x, guint y)
{
  guint at = y * t->width + x;
  guint low = 2 * at, left = 2 * at + 1, right = 2 * (at + 1) + 1, high = 2 * (at + t->width);
  guint code = inside (t, x, y) | inside (t, x + 1, y) << 1 | inside (t, x + 1, y + 1) << 2 | inside (t, x, y + 1) << 3;
  switch (code)
    {
    case 1: link_edges (t, low, left); break;
    case 2: link_edges (t, right, low); break;
    case 3: link_edges (t, right, left); break;
    case 4: link_edges (t, high, right); break;
    case 5: link_edges (t, low, left); link_edges (t, high, right); break;
    case 6: link_edges (t, high, low); break;
    case 7: link_edges (t, high, left); break;
    case 8: link_edges (t, left, high); break;
    case 9: link_edges (t, low, high); break;
    case 10: link_edges (t, left, high); link_edges (t, right, low); break;
    case 11: link_edges (t, right, high); break;
    case 12: link_edges (t, left, right); break;
    case 13: link_edges (t, low, right); break;
    case 14: link_edges (t, left, low); break;
    default: break;
    }
}

static void
add_point (const Tracer *t, GArray *line, guint edge)
{
  guint x = edge / 2 % t->width, y = edge / 2 / t->width;
  double a = value (t, x, y), b = edge % 2 == 0 ? value (t, x + 1, y) : value (t, x, y + 1);
  double part = (0.5 - a) / (b - a);
  double point[2] = { x + 0.5 + (edge % 2 == 0 ? part : 0.0), y + 0.5 + (edge % 2 == 0 ? 0.0 : part) };
  g_array_append_vals (line, point, 2);
}

/* Twice the area, positive when run with the inside on the left. */
static double
signed_area (const GArray *line)
{
  const double *p = (const double *)(const void *)line->data;
  guint n = line->len / 2;
  double sum = 0.0;
  for (guint k = 0; k < n; k++)
    {
      guint j = (k + 1) % n;
      sum += p[2 * k] * p[2 * j + 1] - p[2 * j] * p[2 * k + 1];
    }
  return sum;
}

static GArray *
follow (Tracer *t, guint start)
{
  GArray *line = g_array_new (FALSE, FALSE, sizeof (double));
  guint edge = start;
  for (;;)
    {
      gpointer next = g_hash_table_lookup (t->next, GUINT_TO_POINTER (edge + 1));
      if (next == NULL)
        return line;
      g_hash_table_remove (t->next, GUINT_TO_POINTER (edge + 1));
      add_point (t, line, edge);
      edge = GPOINTER_TO_UINT (next) - 1;
    }
}

GArray *
tf_hint_contour (const float *values, guint width, guint height)
{
  Tracer t = { values, width, height, g_hash_table_new (NULL, NULL) };
  GArray *best = NULL;
  for (guint y = 0; y + 1 < height; y++)
    for (guint x = 0; x + 1 < width; x++)
      cross_square (&t, x, y);
  for (guint edge = 0; edge < 2 * width * height; edge++)
    {
      if (!g_hash_table_contains (t.next, GUINT_TO_POINTER (edge + 1)))
        continue;
      GArray *line = follow (&t, edge);
      if (line->len >= 6 && (best == NULL || signed_area (line) > signed_area (best)))
        {
          GArray *old = best;
          best = line;
          line = old;
        }
      if (line != NULL)
        g_array_unref (line);
    }
  g_hash_table_unref (t.next);
  return best;
}
