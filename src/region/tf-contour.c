/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-contour-private.h"

#include <string.h>

/* Edges are numbered: from node k to the right 2 k, upwards 2 k + 1. Every edge that a line crosses
 * has at most one edge after it and one before it. */
typedef struct
{
  const double *values;
  const guint8 *there;
  guint width, height;
  double level;
  gint32 *next, *before; /* edge -> edge, or -1 */
} Tracer;

/* Pairs of sides (0 low, 1 right, 2 high, 3 left) that a line joins, by the code of the corners
 * that are above: lower left 1, lower right 2, upper right 4, upper left 8. Saddles with a high
 * middle stand at 5 and 10, with a low one at 16 and 17. */
static const gint8 joins[18][4] = {
  [0] = { -1, -1, -1, -1 },  [1] = { 0, 3, -1, -1 },  [2] = { 1, 0, -1, -1 },
  [3] = { 1, 3, -1, -1 },    [4] = { 2, 1, -1, -1 },  [5] = { 0, 1, 2, 3 },
  [6] = { 2, 0, -1, -1 },    [7] = { 2, 3, -1, -1 },  [8] = { 3, 2, -1, -1 },
  [9] = { 0, 2, -1, -1 },    [10] = { 3, 0, 1, 2 },   [11] = { 1, 2, -1, -1 },
  [12] = { 3, 1, -1, -1 },   [13] = { 0, 1, -1, -1 }, [14] = { 3, 0, -1, -1 },
  [15] = { -1, -1, -1, -1 }, [16] = { 0, 3, 2, 1 },   [17] = { 1, 0, 3, 2 },
};

static guint
find_code (const Tracer *t, gsize k)
{
  const gsize corner[4] = { k, k + 1, k + t->width + 1, k + t->width };
  double mean = 0.0;
  guint code = 0;
  for (guint c = 0; c < 4; c++)
    {
      if (t->there != NULL && !t->there[corner[c]])
        return 0;
      mean += 0.25 * t->values[corner[c]];
      code |= (t->values[corner[c]] > t->level ? 1u : 0u) << c;
    }
  if (code == 5 && mean <= t->level)
    return 16;
  if (code == 10 && mean <= t->level)
    return 17;
  return code;
}

static void
cross_square (Tracer *t, gsize k)
{
  const gsize sides[4] = { 2 * k, 2 * (k + 1) + 1, 2 * (k + t->width), 2 * k + 1 };
  const gint8 *join = joins[find_code (t, k)];
  for (guint pair = 0; pair < 4 && join[pair] >= 0; pair += 2)
    {
      gsize from = sides[join[pair]], to = sides[join[pair + 1]];
      t->next[from] = (gint32)to;
      t->before[to] = (gint32)from;
    }
}

static TfContourPoint
edge_point (const Tracer *t, gint32 edge)
{
  gsize k = (gsize)edge / 2, other = edge % 2 == 0 ? k + 1 : k + t->width;
  double a = t->values[k] - t->level, b = t->values[other] - t->level;
  double share = a / (a - b);
  TfContourPoint p = { (double)(k % t->width), (double)(k / t->width) };
  if (edge % 2 == 0)
    p.x += share;
  else
    p.y += share;
  return p;
}

/* Takes the line that begins at @edge; its edges are forgotten. */
static GArray *
follow (Tracer *t, gint32 edge)
{
  GArray *line = g_array_new (FALSE, FALSE, sizeof (TfContourPoint));
  while (edge >= 0)
    {
      TfContourPoint p = edge_point (t, edge);
      gint32 next = t->next[edge];
      g_array_append_val (line, p);
      t->next[edge] = -1;
      if (next >= 0)
        t->before[next] = -1;
      edge = next;
    }
  return line;
}

GPtrArray *
tf_contours (const double *values, const guint8 *there, guint width, guint height, double level)
{
  GPtrArray *lines = g_ptr_array_new_with_free_func ((GDestroyNotify)g_array_unref);
  gsize n = (gsize)width * height;
  g_return_val_if_fail (n < G_MAXINT32 / 2, lines);
  g_autofree gint32 *next = g_new (gint32, 2 * n), *before = g_new (gint32, 2 * n);
  Tracer t = { values, there, width, height, level, next, before };
  memset (next, 0xff, 2 * n * sizeof *next);
  memset (before, 0xff, 2 * n * sizeof *before);
  for (guint y = 0; y + 1 < height; y++)
    for (guint x = 0; x + 1 < width; x++)
      cross_square (&t, (gsize)y * width + x);
  for (gint32 edge = 0; edge < (gint32)(2 * n); edge++)
    if (next[edge] >= 0 && before[edge] < 0)
      g_ptr_array_add (lines, follow (&t, edge));
  for (gint32 edge = 0; edge < (gint32)(2 * n); edge++)
    if (next[edge] >= 0)
      g_ptr_array_add (lines, follow (&t, edge));
  return lines;
}
