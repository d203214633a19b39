/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>

#include "tf-hint-private.h"

static const float FAR = 1e9f;

/* Along columns, all of them a row at a time: nearest label below each cell's row or in it. */
static void
sweep_up (const gint32 *label, guint width, guint height, gint32 *nearest, float *distance)
{
  for (guint y = 0; y < height; y++)
    {
      gsize k = (gsize)y * width;
      for (guint x = 0; x < width; x++, k++)
        {
          gint32 before = y > 0 ? nearest[k - width] : -1;
          float one_more = before >= 0 ? distance[k - width] + 1.0f : FAR;
          nearest[k] = label[k] >= 0 ? label[k] : before;
          distance[k] = label[k] >= 0 ? 0.0f : one_more;
        }
    }
}

/* What comes from above is taken where it is nearer. */
static void
sweep_down (const gint32 *label, guint width, guint height, gint32 *nearest, float *distance)
{
  g_autofree gint32 *last = g_new (gint32, MAX (width, 1));
  g_autofree float *away = g_new (float, MAX (width, 1));
  for (guint x = 0; x < width; x++)
    {
      last[x] = -1;
      away[x] = FAR;
    }
  for (guint y = height; y-- > 0;)
    {
      gsize k = (gsize)y * width;
      for (guint x = 0; x < width; x++, k++)
        {
          last[x] = label[k] >= 0 ? label[k] : last[x];
          away[x] = label[k] >= 0 ? 0.0f : last[x] >= 0 ? away[x] + 1.0f : FAR;
          nearest[k] = away[x] < distance[k] ? last[x] : nearest[k];
          distance[k] = away[x] < distance[k] ? away[x] : distance[k];
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
  sweep_up (label, width, height, nearest, distance);
  sweep_down (label, width, height, nearest, distance);
  for (guint y = 0; y < height; y++)
    row (&e, width, nearest + (gsize)y * width, distance + (gsize)y * width);
}
