/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-pyramid-private.h"

#include <math.h>

enum
{
  SMALLEST = 64
};

/* One step: every box of 2 x 2 of the level below, weighted by how many frame pixels stand in each. */
typedef struct
{
  const float *below, *below_weight; /* below_weight NULL: 1 for finite, 0 for NaN */
  guint below_width, below_height;
  float *mean, *weight;
  guint width;
} Step;

static inline void
add (const Step *step, guint x, guint y, float *sum, float *weight)
{
  gsize at = (gsize)y * step->below_width + x;
  float value = step->below[at];
  float w = step->below_weight != NULL ? step->below_weight[at] : 1.0f;
  if (isfinite (value))
    {
      *sum += w * value;
      *weight += w;
    }
}

static inline void
box (const Step *step, guint x, guint y)
{
  float sum = 0, weight = 0;
  guint x1 = MIN (2 * x + 2, step->below_width), y1 = MIN (2 * y + 2, step->below_height);
  for (guint v = 2 * y; v < y1; v++)
    for (guint u = 2 * x; u < x1; u++)
      add (step, u, v, &sum, &weight);
  gsize at = (gsize)y * step->width + x;
  step->mean[at] = weight > 0 ? sum / weight : NAN;
  step->weight[at] = weight;
}

/* Full boxes of the frame itself, without a branch, so that it vectorises. */
__attribute__ ((target_clones ("arch=x86-64-v3", "default"))) static void
first_row (const float *a, const float *b, guint n, float *mean, float *weight)
{
  for (guint x = 0; x < n; x++)
    {
      float v[4] = { a[2 * x], a[2 * x + 1], b[2 * x], b[2 * x + 1] };
      float sum = 0, count = 0;
      for (guint k = 0; k < 4; k++)
        {
          gboolean good = v[k] - v[k] <= 0; /* FALSE for NaN and infinities */
          sum += good ? v[k] : 0.0f;
          count += good ? 1.0f : 0.0f;
        }
      mean[x] = count > 0 ? sum / count : NAN;
      weight[x] = count;
    }
}

static void
step_rows (guint band, guint first, guint n, guint worker, gpointer data)
{
  const Step *step = data;
  for (guint y = first; y < first + n; y++)
    {
      guint done = 0;
      if (step->below_weight == NULL && 2 * y + 1 < step->below_height)
        {
          const float *a = step->below + (gsize)2 * y * step->below_width;
          gsize at = (gsize)y * step->width;
          done = step->below_width / 2;
          first_row (a, a + step->below_width, done, step->mean + at, step->weight + at);
        }
      for (guint x = done; x < step->width; x++)
        box (step, x, y);
    }
}

guint
tf_pyramid_make (const float *pixels, guint width, guint height, const TfWork *work, TfLevel *levels)
{
  TfPool *pool = work != NULL ? work->pool : NULL;
  TfWork whole = { .pool = pool, .workers = work != NULL ? work->workers : NULL };
  TfPixels *weights = NULL;
  guint n = 0;
  Step step = { .below = pixels, .below_width = width, .below_height = height };
  while (MAX (step.below_width, step.below_height) > SMALLEST && n < TF_MAX_LEVELS)
    {
      guint w = (step.below_width + 1) / 2, h = (step.below_height + 1) / 2;
      TfPixels *mean = tf_pixels_new (pool, (gsize)w * h), *weight = tf_pixels_new (pool, (gsize)w * h);
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
