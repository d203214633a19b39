/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>

#include "tf-hint-private.h"

static const float FAR = 1e9f;

/* Along columns: nearest label above or below, by two sweeps. */
static void
columns (const gint32 *label, guint width, guint height, gint32 *nearest, float *distance)
{
  for (guint x = 0; x < width; x++)
    {
      gint32 last = -1;
      guint at = 0;
      for (guint y = 0; y < height; y++)
        {
          gsize k = (gsize)y * width + x;
          if (label[k] >= 0)
            {
              last = label[k];
              at = y;
            }
          nearest[k] = last;
          distance[k] = last >= 0 ? (float)(y - at) : FAR;
        }
      last = -1;
      for (guint y = height; y-- > 0;)
        {
          gsize k = (gsize)y * width + x;
          if (label[k] >= 0)
            {
              last = label[k];
              at = y;
            }
          if (last >= 0 && (float)(at - y) < distance[k])
            {
              nearest[k] = last;
              distance[k] = (float)(at - y);
            }
        }
    }
}

/* Room for one row: the parabolas of its lower envelope. */
typedef struct
{
  guint *vertex;
  double *start;
  double *height;
  gint32 *label;
} Envelope;

static guint
envelope (const Envelope *e, guint width)
{
  guint n = 0;
  for (guint x = 0; x < width; x++)
    {
      if (e->height[x] >= (double)FAR)
        continue;
      double cross = -INFINITY;
      while (n > 0)
        {
          guint v = e->vertex[n - 1];
          cross = ((e->height[x] + (double)x * x) - (e->height[v] + (double)v * v)) / (2.0 * ((double)x - v));
          if (cross > e->start[n - 1])
            break;
          n--;
          cross = -INFINITY;
        }
      e->vertex[n] = x;
      e->start[n] = cross;
      n++;
    }
  return n;
}

static void
row (const Envelope *e, guint width, gint32 *nearest, float *distance)
{
  for (guint x = 0; x < width; x++)
    {
      e->height[x] = distance[x] >= FAR ? (double)FAR : (double)distance[x] * distance[x];
      e->label[x] = nearest[x];
    }
  guint n = envelope (e, width), k = 0;
  for (guint x = 0; x < width && n > 0; x++)
    {
      while (k + 1 < n && e->start[k + 1] < x)
        k++;
      double dx = (double)x - e->vertex[k];
      nearest[x] = e->label[e->vertex[k]];
      distance[x] = (float)sqrt (dx * dx + e->height[e->vertex[k]]);
    }
}

void
tf_hint_nearest (const gint32 *label, guint width, guint height, gint32 *nearest, float *distance)
{
  g_autofree guint *vertex = g_new (guint, width);
  g_autofree double *start = g_new (double, width), *heights = g_new (double, width);
  g_autofree gint32 *labels = g_new (gint32, width);
  Envelope e = { vertex, start, heights, labels };
  columns (label, width, height, nearest, distance);
  for (guint y = 0; y < height; y++)
    row (&e, width, nearest + (gsize)y * width, distance + (gsize)y * width);
}
