/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* From a cluster's cells to one simple outline on the Sun. Everything happens on a small box of the grid about the cluster. Only
 * ground that is nearest to the cluster's own pieces is taken, so that outlines do not overlap. */

#include <math.h>
#include <string.h>

#include "tf-constants.h"
#include "tf-hint-private.h"

enum { CLOSINGS = 4 };
static const double CLOSE_STEP = 1.5;

typedef struct
{
  guint x0, y0, width, height;
  gint32 *label;    /* 0 in the shape, -1 outside: as tf_hint_nearest takes it */
  guint8 *own;      /* ground of the cluster */
  gint32 *nearest;
  float *distance;
} Box;

static gboolean
is_own (const TfHintPieces *pieces, gint32 piece, guint k)
{
  return piece >= 0 && tf_hint_root (pieces, (guint)piece) == k;
}

static void
box_open (Box *box, const TfHintPieces *pieces, guint root)
{
  guint n = pieces->grid->n, x0 = n, x1 = 0, y0 = n, y1 = 0;
  guint margin = 3 + (guint)ceil (pieces->params->close_mm * pow (CLOSE_STEP, CLOSINGS - 1) / pieces->grid->cell_mm);
  for (guint y = 0; y < n; y++)
    for (guint x = 0; x < n; x++)
      if (is_own (pieces, pieces->piece[(gsize)y * n + x], root))
        {
          x0 = MIN (x0, x);
          x1 = MAX (x1, x);
          y0 = MIN (y0, y);
          y1 = MAX (y1, y);
        }
  box->x0 = x0 > margin ? x0 - margin : 0;
  box->y0 = y0 > margin ? y0 - margin : 0;
  box->width = MIN (x1 + margin, n - 1) - box->x0 + 1;
  box->height = MIN (y1 + margin, n - 1) - box->y0 + 1;
  gsize cells = (gsize)box->width * box->height;
  box->label = g_new (gint32, cells);
  box->own = g_new (guint8, cells);
  box->nearest = g_new (gint32, cells);
  box->distance = g_new (float, cells);
  for (guint y = 0; y < box->height; y++)
    for (guint x = 0; x < box->width; x++)
      {
        gsize from = (gsize)(box->y0 + y) * n + box->x0 + x, to = (gsize)y * box->width + x;
        box->label[to] = is_own (pieces, pieces->piece[from], root) ? 0 : -1;
        box->own[to] = is_own (pieces, pieces->nearest[from], root) ? 1 : 0;
      }
}

static void
box_close (Box *box)
{
  g_free (box->label);
  g_free (box->own);
  g_free (box->nearest);
  g_free (box->distance);
}

/* Grows the shape by @cells, within its own ground. */
static void
grow (Box *box, double cells)
{
  tf_hint_nearest (box->label, box->width, box->height, box->nearest, box->distance);
  for (gsize k = 0; k < (gsize)box->width * box->height; k++)
    box->label[k] = box->own[k] && box->distance[k] <= (float)cells ? 0 : -1;
}

/* Keeps what is farther than @cells from ground outside the shape. */
static void
shrink (Box *box, const gint32 *before, double cells)
{
  gsize n = (gsize)box->width * box->height;
  g_autofree gint32 *outside = g_new (gint32, n);
  for (gsize k = 0; k < n; k++)
    outside[k] = box->label[k] < 0 ? 0 : -1;
  tf_hint_nearest (outside, box->width, box->height, box->nearest, box->distance);
  for (gsize k = 0; k < n; k++)
    if (before[k] < 0 && box->label[k] == 0 && box->distance[k] <= (float)cells)
      box->label[k] = -1;
}

/* Marks all that can be reached from @start over cells of label @of; by sides, or by corners too. */
static guint
reach (const Box *box, gsize start, gint32 of, gboolean corners, guint8 *seen)
{
  g_autoptr (GArray) stack = g_array_new (FALSE, FALSE, sizeof (gsize));
  guint n = 0;
  seen[start] = 1;
  g_array_append_val (stack, start);
  while (stack->len > 0)
    {
      gsize at = g_array_index (stack, gsize, stack->len - 1);
      guint x = (guint)(at % box->width), y = (guint)(at / box->width);
      g_array_set_size (stack, stack->len - 1);
      n++;
      for (guint ny = y > 0 ? y - 1 : 0; ny <= MIN (y + 1, box->height - 1); ny++)
        for (guint nx = x > 0 ? x - 1 : 0; nx <= MIN (x + 1, box->width - 1); nx++)
          {
            gsize next = (gsize)ny * box->width + nx;
            if (seen[next] || box->label[next] != of || (!corners && nx != x && ny != y))
              continue;
            seen[next] = 1;
            g_array_append_val (stack, next);
          }
    }
  return n;
}

static guint
count_parts (const Box *box)
{
  gsize cells = (gsize)box->width * box->height;
  g_autofree guint8 *seen = g_new0 (guint8, cells);
  guint parts = 0;
  for (gsize k = 0; k < cells; k++)
    if (box->label[k] == 0 && !seen[k])
      {
        reach (box, k, 0, FALSE, seen);
        parts++;
      }
  return parts;
}

static void
close_shape (Box *box, double cells_wide)
{
  gsize cells = (gsize)box->width * box->height;
  g_autofree gint32 *before = g_memdup2 (box->label, cells * sizeof *before);
  double size = cells_wide;
  for (guint k = 0; k < CLOSINGS; k++)
    {
      memcpy (box->label, before, cells * sizeof *before);
      grow (box, size);
      shrink (box, before, size);
      if (count_parts (box) == 1)
        return;
      size *= CLOSE_STEP;
    }
}

static void
fill_holes (Box *box)
{
  gsize cells = (gsize)box->width * box->height;
  g_autofree guint8 *seen = g_new0 (guint8, cells);
  for (gsize k = 0; k < cells; k++)
    {
      guint x = (guint)(k % box->width), y = (guint)(k / box->width);
      gboolean border = x == 0 || y == 0 || x == box->width - 1 || y == box->height - 1;
      if (border && box->label[k] < 0 && !seen[k])
        reach (box, k, -1, TRUE, seen);
    }
  for (gsize k = 0; k < cells; k++)
    if (box->label[k] < 0 && !seen[k])
      box->label[k] = 0;
}

/* The shape as numbers with a rim of zeros, smoothed when it is large enough. */
static float *
soften (const Box *box, double cell_mm, const TfHintParams *p)
{
  guint w = box->width + 2, h = box->height + 2;
  float *values = g_new0 (float, (gsize)w * h);
  g_autofree float *room = g_new (float, (gsize)w * h);
  double area = 0.0;
  for (guint y = 0; y < box->height; y++)
    for (guint x = 0; x < box->width; x++)
      if (box->label[(gsize)y * box->width + x] == 0)
        {
          values[(gsize)(y + 1) * w + x + 1] = 1.0f;
          area += cell_mm * cell_mm;
        }
  if (area >= p->soften_mm2 && p->soften_mm > 0.0)
    tf_hint_blur (values, room, w, h, p->soften_mm / cell_mm);
  for (guint k = 0; k < w; k++)
    values[k] = values[(gsize)(h - 1) * w + k] = 0.0f;
  for (guint k = 0; k < h; k++)
    values[(gsize)k * w] = values[(gsize)k * w + w - 1] = 0.0f;
  return values;
}

static gboolean
touches_edge (const Box *box, const TfHintGrid *g)
{
  for (guint y = 0; y < box->height; y++)
    for (guint x = 0; x < box->width; x++)
      if (box->label[(gsize)y * box->width + x] == 0 && isnan (g->field[(gsize)(box->y0 + y) * g->n + box->x0 + x]))
        return TRUE;
  return FALSE;
}

static TfOutline *
lift (const GArray *line, const Box *box, const TfHintGrid *g, TfTime time, double simplify_mm)
{
  const double *p = (const double *)(const void *)line->data;
  guint n = line->len / 2;
  g_autofree TfVertex *ring = g_new (TfVertex, n);
  for (guint k = 0; k < n; k++)
    {
      double unit[3];
      tf_hint_grid_unit (g, box->x0 + p[2 * k] - 1.0, box->y0 + p[2 * k + 1] - 1.0, unit);
      tf_sphere_lonlat (unit, &ring[k].lon_deg, &ring[k].lat_deg);
    }
  g_autoptr (TfOutline) full = tf_outline_new (time, ring, n, NULL);
  return full != NULL ? tf_outline_simplify (full, simplify_mm / g->radius_mm / TF_DEG) : NULL;
}

TfOutline *
tf_hint_outline (const TfHintPieces *pieces, guint k, TfTime time, gboolean *edge)
{
  const TfHintGrid *g = pieces->grid;
  Box box;
  TfOutline *outline = NULL;
  box_open (&box, pieces, k);
  close_shape (&box, pieces->params->close_mm / g->cell_mm);
  fill_holes (&box);
  grow (&box, pieces->params->grow_mm / g->cell_mm);
  fill_holes (&box);
  *edge = touches_edge (&box, g);
  g_autofree float *values = soften (&box, g->cell_mm, pieces->params);
  g_autoptr (GArray) line = tf_hint_contour (values, box.width + 2, box.height + 2);
  if (line != NULL)
    outline = lift (line, &box, g, time, pieces->params->simplify_mm);
  box_close (&box);
  return outline;
}
