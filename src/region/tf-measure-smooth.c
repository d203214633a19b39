/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* The field about a region smoothed by a small Gaussian: pixels outside the outline take part,
 * pixels without a value do not (the kernel is made whole over the others). */

#include <math.h>
#include <string.h>

#include "tf-measure-private.h"

enum
{
  MAX_REACH = 20
};

typedef struct
{
  guint x0, y0, width, height; /* of the frame: the mask's box and a margin */
  gboolean gaps;
  float *field, *weight, *half; /* field with 0 in the gaps; 1 and 0; room for the row pass */
} Patch;

static void
open_patch (Patch *patch, const TfRegionSamples *samples, guint reach, float scale)
{
  guint x0, y0, w, h, frame_w = tf_frame_get_width (samples->frame);
  tf_mask_get_box (samples->mask, &x0, &y0, &w, &h);
  patch->x0 = x0 > reach ? x0 - reach : 0;
  patch->y0 = y0 > reach ? y0 - reach : 0;
  patch->width = MIN (x0 + w + reach, frame_w) - patch->x0;
  patch->height = MIN (y0 + h + reach, tf_frame_get_height (samples->frame)) - patch->y0;
  gsize n = (gsize)patch->width * patch->height;
  patch->field = g_new (float, n);
  patch->half = g_new (float, n);
  for (guint y = 0; y < patch->height; y++)
    {
      const float *row
          = tf_frame_get_pixels (samples->frame) + (gsize)(patch->y0 + y) * frame_w + patch->x0;
      float *out = patch->field + (gsize)y * patch->width;
      for (guint x = 0; x < patch->width; x++)
        {
          gboolean there = isfinite (row[x]);
          out[x] = there ? row[x] * scale : 0.0f;
          patch->gaps |= !there;
        }
    }
  if (!patch->gaps)
    return;
  patch->weight = g_new (float, n);
  for (guint y = 0; y < patch->height; y++)
    {
      const float *row
          = tf_frame_get_pixels (samples->frame) + (gsize)(patch->y0 + y) * frame_w + patch->x0;
      for (guint x = 0; x < patch->width; x++)
        patch->weight[(gsize)y * patch->width + x] = isfinite (row[x]) ? 1.0f : 0.0f;
    }
}

/* Rows, then columns; over the patch's border the kernel is cut. */
__attribute__ ((target_clones ("arch=x86-64-v3", "default"))) static void
blur_rows (const float *in, float *out, guint width, guint height, const float *kernel, int reach)
{
  for (guint y = 0; y < height; y++)
    {
      const float *row = in + (gsize)y * width;
      float *to = out + (gsize)y * width;
      memset (to, 0, width * sizeof *to);
      for (int k = -reach; k <= reach; k++)
        {
          float c = kernel[k + reach];
          int first = MAX (0, -k), last = MIN ((int)width, (int)width - k);
          for (int x = first; x < last; x++)
            to[x] += c * row[x + k];
        }
    }
}

__attribute__ ((target_clones ("arch=x86-64-v3", "default"))) static void
blur_columns (const float *in, float *out, guint width, guint height, const float *kernel,
              int reach)
{
  for (int y = 0; y < (int)height; y++)
    {
      float *to = out + (gsize)y * width;
      memset (to, 0, width * sizeof *to);
      for (int k = MAX (-reach, -y); k <= MIN (reach, (int)height - 1 - y); k++)
        {
          float c = kernel[k + reach];
          const float *row = in + (gsize)(y + k) * width;
          for (guint x = 0; x < width; x++)
            to[x] += c * row[x];
        }
    }
}

static void
blur (float *values, Patch *patch, const float *kernel, int reach)
{
  blur_rows (values, patch->half, patch->width, patch->height, kernel, reach);
  blur_columns (patch->half, values, patch->width, patch->height, kernel, reach);
}

/* @squares: sum of the kernel's squares: the share of the noise's variance that it leaves. */
static int
make_kernel (double sigma, float kernel[2 * MAX_REACH + 1], double *squares)
{
  int reach = MIN (MAX_REACH, (int)ceil (4.0 * sigma));
  double sum = 0.0;
  for (int k = -reach; k <= reach; k++)
    sum += exp (-0.5 * k * k / (sigma * sigma));
  for (int k = -reach; k <= reach; k++)
    {
      double c = exp (-0.5 * k * k / (sigma * sigma)) / sum;
      kernel[k + reach] = (float)c;
      *squares += c * c;
    }
  return reach;
}

float *
tf_region_smooth (const TfRegionSamples *samples, double *rest)
{
  float kernel[2 * MAX_REACH + 1];
  double squares = 0.0;
  int reach = make_kernel (samples->params->smooth_px, kernel, &squares);
  Patch patch = { 0 };
  float *out = g_new (float, MAX (samples->n, 1));
  *rest = sqrt (MAX (0.0, 1.0 - squares * squares));
  open_patch (&patch, samples, (guint)reach, (float)tf_region_scale (samples->params));
  blur (patch.field, &patch, kernel, reach);
  if (patch.gaps)
    blur (patch.weight, &patch, kernel, reach);
  for (guint k = 0; k < samples->n; k++)
    {
      gsize at = (gsize)(samples->pixels[k].y - patch.y0) * patch.width
                 + (samples->pixels[k].x - patch.x0);
      out[k] = patch.gaps ? patch.field[at] / patch.weight[at] : patch.field[at];
      if (samples->added != NULL)
        out[k] += samples->added[k];
    }
  g_free (patch.field);
  g_free (patch.weight);
  g_free (patch.half);
  return out;
}
