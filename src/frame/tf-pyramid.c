/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-pyramid-private.h"

#include <math.h>

enum
{
  SMALLEST = 64
};

/* One step: every box of 2 x 2 of the level below, weighted by how many frame pixels stand in
 * each. */
typedef struct
{
  const float *below, *below_weight; /* below_weight NULL: 1 everywhere */
  guint below_width, below_height;
  float *mean, *weight;
  guint width;
} Step;

/* Full boxes of two rows, without a branch, so that it vectorises. A value that is not finite
 * has no weight. */
__attribute__ ((target_clones ("arch=x86-64-v3", "default"))) static void
first_boxes (const float *restrict a, const float *restrict b, guint n, float *restrict mean,
             float *restrict weight)
{
  for (guint x = 0; x < n; x++)
    {
      float p = a[2 * x], q = a[2 * x + 1], r = b[2 * x], s = b[2 * x + 1];
      float wp = p - p <= 0 ? 1.0f : 0.0f, wq = q - q <= 0 ? 1.0f : 0.0f;
      float wr = r - r <= 0 ? 1.0f : 0.0f, ws = s - s <= 0 ? 1.0f : 0.0f;
      float sum
          = (wp > 0 ? p : 0.0f) + (wq > 0 ? q : 0.0f) + (wr > 0 ? r : 0.0f) + (ws > 0 ? s : 0.0f);
      float count = wp + wq + wr + ws;
      weight[x] = count;
      mean[x] = count > 0 ? sum / count : NAN;
    }
}

__attribute__ ((target_clones ("arch=x86-64-v3", "default"))) static void
further_boxes (const float *restrict a, const float *restrict b, const float *restrict wa,
               const float *restrict wb, guint n, float *restrict mean, float *restrict weight)
{
  for (guint x = 0; x < n; x++)
    {
      float wp = wa[2 * x], wq = wa[2 * x + 1], wr = wb[2 * x], ws = wb[2 * x + 1];
      float p = wp > 0 ? a[2 * x] : 0.0f, q = wq > 0 ? a[2 * x + 1] : 0.0f;
      float r = wr > 0 ? b[2 * x] : 0.0f, s = ws > 0 ? b[2 * x + 1] : 0.0f;
      float count = wp + wq + wr + ws;
      weight[x] = count;
      mean[x] = count > 0 ? (wp * p + wq * q + wr * r + ws * s) / count : NAN;
    }
}

/* A box at the right or top edge, of what there is. */
static void
edge_box (const Step *step, guint x, guint y)
{
  float sum = 0, weight = 0;
  guint x1 = MIN (2 * x + 2, step->below_width), y1 = MIN (2 * y + 2, step->below_height);
  for (guint v = 2 * y; v < y1; v++)
    for (guint u = 2 * x; u < x1; u++)
      {
        gsize at = (gsize)v * step->below_width + u;
        float w = step->below_weight != NULL ? step->below_weight[at] : 1.0f;
        if (isfinite (step->below[at]))
          {
            sum += w * step->below[at];
            weight += w;
          }
      }
  gsize at = (gsize)y * step->width + x;
  step->mean[at] = weight > 0 ? sum / weight : NAN;
  step->weight[at] = weight;
}

static void
step_rows (guint band, guint first, guint n, guint worker, gpointer data)
{
  const Step *step = data;
  for (guint y = first; y < first + n; y++)
    {
      gsize at = (gsize)y * step->width, below = (gsize)2 * y * step->below_width;
      guint done = 2 * y + 1 < step->below_height ? step->below_width / 2 : 0;
      const float *a = step->below + below, *w = step->below_weight;
      if (done > 0 && w == NULL)
        first_boxes (a, a + step->below_width, done, step->mean + at, step->weight + at);
      else if (done > 0)
        further_boxes (a, a + step->below_width, w + below, w + below + step->below_width, done,
                       step->mean + at, step->weight + at);
      for (guint x = done; x < step->width; x++)
        edge_box (step, x, y);
    }
}

guint
tf_pyramid_make (const float *pixels, guint width, guint height, const TfWork *work,
                 TfLevel *levels)
{
  TfPool *pool = work != NULL ? work->pool : NULL;
  TfWork whole = { .pool = pool, .workers = work != NULL ? work->workers : NULL };
  TfPixels *weights = NULL;
  guint n = 0;
  Step step = { .below = pixels, .below_width = width, .below_height = height };
  while (MAX (step.below_width, step.below_height) > SMALLEST && n < TF_MAX_LEVELS)
    {
      guint w = (step.below_width + 1) / 2, h = (step.below_height + 1) / 2;
      TfPixels *mean = tf_pixels_new (pool, (gsize)w * h),
               *weight = tf_pixels_new (pool, (gsize)w * h);
      if (mean == NULL || weight == NULL)
        {
          tf_pixels_unref (mean);
          tf_pixels_unref (weight);
          break;
        }
      step.mean = tf_pixels_get (mean);
      step.weight = tf_pixels_get (weight);
      step.width = w;
      tf_bands_run (&whole, h, step_rows, &step);
      tf_pixels_unref (weights);
      weights = weight;
      levels[n++] = (TfLevel){ mean, w, h };
      step.below = step.mean;
      step.below_weight = step.weight;
      step.below_width = w;
      step.below_height = h;
    }
  tf_pixels_unref (weights);
  return n;
}
