/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-pyramid-private.h"

#include <math.h>

enum
{
  SMALLEST = 64,
  BAND_LEVELS = 6, /* a band's 64 rows are one row of that level */
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
step_rows (const Step *step)
{
  for (guint y = 0; y < (step->below_height + 1) / 2; y++)
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

/* The level just made is the one below. */
static void
step_up (Step *step)
{
  step->below = step->mean;
  step->below_weight = step->weight;
  step->below_height = (step->below_height + 1) / 2;
  step->below_width = step->width;
}

static gsize
row_half (guint width, guint level)
{
  return ((gsize)width >> level) + 1;
}

void
tf_pyramid_open (TfPyramid *pyramid, guint width, guint height, const TfWork *work)
{
  guint w = width, h = height;
  *pyramid = (TfPyramid){ .width = width, .height = height };
  while (MAX (w, h) > SMALLEST && pyramid->n < TF_MAX_LEVELS)
    {
      w = (w + 1) / 2;
      h = (h + 1) / 2;
      TfPixels *pixels = tf_pixels_new (work != NULL ? work->pool : NULL, (gsize)w * h);
      if (pixels == NULL)
        break;
      pyramid->levels[pyramid->n++] = (TfLevel){ pixels, w, h };
    }
  pyramid->n_workers = tf_workers_get_n (work != NULL ? work->workers : NULL);
  pyramid->room_size = TF_BAND_ROWS * row_half (width, 1) + (TF_BAND_ROWS / 4) * row_half (width, 2);
  pyramid->room = g_new (float, pyramid->room_size * pyramid->n_workers);
  if (pyramid->n >= BAND_LEVELS)
    {
      const TfLevel *last = &pyramid->levels[BAND_LEVELS - 1];
      pyramid->weight = g_new (float, (gsize)last->width * last->height);
    }
}

void
tf_pyramid_add_band (TfPyramid *pyramid, const float *pixels, guint first, guint n, guint worker)
{
  float *first_level = pyramid->room + worker * pyramid->room_size;
  float *even = first_level + (TF_BAND_ROWS / 2) * row_half (pyramid->width, 1);
  float *odd = even + (TF_BAND_ROWS / 2) * row_half (pyramid->width, 1);
  Step step = { .below = pixels + (gsize)first * pyramid->width,
                .below_width = pyramid->width,
                .below_height = n };
  for (guint k = 0; k < MIN (pyramid->n, BAND_LEVELS); k++)
    {
      const TfLevel *level = &pyramid->levels[k];
      gsize at = (gsize)(first >> (k + 1)) * level->width;
      step.mean = k == 0 ? first_level : tf_pixels_get (level->pixels) + at;
      step.weight = k + 1 == BAND_LEVELS ? pyramid->weight + at : k % 2 == 0 ? even : odd;
      step.width = level->width;
      step_rows (&step);
      step_up (&step);
    }
}

void
tf_pyramid_fill_first (const TfPyramid *pyramid, const float *pixels)
{
  const TfLevel *level = &pyramid->levels[0];
  g_autofree float *weight = g_new (float, (TF_BAND_ROWS / 2) * row_half (pyramid->width, 1));
  for (guint first = 0; first < pyramid->height; first += TF_BAND_ROWS)
    {
      Step step = { .below = pixels + (gsize)first * pyramid->width,
                    .below_width = pyramid->width,
                    .below_height = MIN (TF_BAND_ROWS, pyramid->height - first),
                    .mean = tf_pixels_get (level->pixels) + (gsize)(first / 2) * level->width,
                    .weight = weight,
                    .width = level->width };
      step_rows (&step);
    }
}

void
tf_pyramid_close (TfPyramid *pyramid)
{
  float *weight = g_steal_pointer (&pyramid->weight);
  for (guint k = BAND_LEVELS; k < pyramid->n; k++)
    {
      const TfLevel *below = &pyramid->levels[k - 1], *level = &pyramid->levels[k];
      float *next = g_new (float, (gsize)level->width * level->height);
      Step step = { .below = tf_pixels_get (below->pixels),
                    .below_weight = weight,
                    .below_width = below->width,
                    .below_height = below->height,
                    .mean = tf_pixels_get (level->pixels),
                    .weight = next,
                    .width = level->width };
      step_rows (&step);
      g_free (weight);
      weight = next;
    }
  g_free (weight);
  g_clear_pointer (&pyramid->room, g_free);
}

typedef struct
{
  TfPyramid *pyramid;
  const float *pixels;
} Making;

static void
make_band (guint band, guint first, guint n, guint worker, gpointer data)
{
  const Making *making = data;
  tf_pyramid_add_band (making->pyramid, making->pixels, first, n, worker);
}

void
tf_pyramid_make (TfPyramid *pyramid, const float *pixels, guint width, guint height,
                 const TfWork *work)
{
  Making making = { pyramid, pixels };
  /* Not to be cancelled: never half a pyramid. */
  TfWork whole = { .pool = work != NULL ? work->pool : NULL,
                   .workers = work != NULL ? work->workers : NULL };
  tf_pyramid_open (pyramid, width, height, &whole);
  tf_bands_run (&whole, height, make_band, &making);
  tf_pyramid_close (pyramid);
}

void
tf_pyramid_clear (TfPyramid *pyramid)
{
  for (guint k = 0; k < pyramid->n; k++)
    tf_pixels_unref (pyramid->levels[k].pixels);
  g_free (pyramid->room);
  g_free (pyramid->weight);
  *pyramid = (TfPyramid){ 0 };
}
