/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-frame.h"
#include "tf-frame-private.h"

#include <math.h>
#include <string.h>

#include "tf-noise-private.h"
#include "tf-pyramid-private.h"
#include "tf-witness.h"

struct _TfFrame
{
  TfFrameInfo *info;
  TfPixels *pixels;
  char *path;
  int hdu;
  TfNoise noise;
  TfPyramid pyramid;
  gsize first_filled; /* whether its level 1 is; by g_once_init_enter */
};

G_DEFINE_QUARK (tf - frame - error, tf_frame_error)

TfFrame *
tf_frame_new_take (TfFrameInfo *info, TfPixels *pixels, TfPyramid *pyramid, const char *path,
                   int hdu, const TfWork *work)
{
  TfFrame *frame = g_atomic_rc_box_new0 (TfFrame);
  frame->info = info;
  frame->pixels = pixels;
  frame->path = g_strdup (path);
  frame->hdu = hdu;
  frame->noise.correlation = 1;
  const float *values = tf_pixels_get (pixels);
  const TfGeometry *g = &info->geometry;
  frame->pyramid = *pyramid;
  *pyramid = (TfPyramid){ 0 };
  if (info->role != TF_ROLE_INTENSITY)
    tf_noise_measure (values, g, work, &frame->noise);
  return frame;
}

TfFrame *
tf_frame_new (TfFrameInfo *info, const float *pixels, const TfWork *work)
{
  g_return_val_if_fail (info != NULL && pixels != NULL, NULL);
  g_return_val_if_fail (info->geometry.width > 0 && info->geometry.height > 0, NULL);
  gsize n = (gsize)info->geometry.width * info->geometry.height;
  TfPixels *copy = tf_pixels_new (work != NULL ? work->pool : NULL, n);
  if (copy == NULL)
    {
      tf_frame_info_free (info);
      return NULL;
    }
  memcpy (tf_pixels_get (copy), pixels, n * sizeof (float));
  TfPyramid pyramid;
  tf_pyramid_make (&pyramid, pixels, info->geometry.width, info->geometry.height, work);
  return tf_frame_new_take (info, copy, &pyramid, "", 1, work);
}

/* What was said of the limb was said of the other geometry. */
static void
judge_again (TfFrame *frame)
{
  const TfGeometry *g = &frame->info->geometry;
  TfNotes *cautions = frame->info->cautions;
  double x = NAN, y = NAN;
  for (guint k = tf_notes_get_n (cautions); k > 0; k--)
    {
      const char *code = tf_note_get_code (tf_notes_get (cautions, k - 1));
      if (g_str_equal (code, "limb-off") || g_str_equal (code, "header-lies"))
        g_ptr_array_remove_index (cautions, k - 1);
    }
  tf_geometry_disk_centre (g, &x, &y);
  tf_notes_add (cautions, "geometry-by-hand", "dddd", x, y, tf_geometry_disk_radius (g),
                tf_geometry_north_angle (g));
  TfLimbFit fit = tf_limb_fit (tf_pixels_get (frame->pixels), g);
  tf_limb_judge (&fit, g, cautions);
}

TfFrame *
tf_frame_with_geometry (const TfFrame *frame, const TfGeometry *geometry, const TfWork *work)
{
  const TfGeometry *old = &frame->info->geometry;
  g_return_val_if_fail (geometry->width == old->width && geometry->height == old->height, NULL);
  TfFrame *other = g_atomic_rc_box_new0 (TfFrame);
  other->info = tf_frame_info_copy (frame->info);
  other->info->geometry = *geometry;
  other->pixels = tf_pixels_ref (frame->pixels);
  other->path = g_strdup (frame->path);
  other->hdu = frame->hdu;
  tf_frame_get_level (frame, 1, NULL, NULL); /* the two share its memory */
  other->pyramid = frame->pyramid;
  other->first_filled = 1;
  for (guint k = 0; k < other->pyramid.n; k++)
    tf_pixels_ref (other->pyramid.levels[k].pixels);
  other->noise.correlation = 1;
  if (other->info->role != TF_ROLE_INTENSITY)
    tf_noise_measure (tf_pixels_get (other->pixels), geometry, work, &other->noise);
  judge_again (other);
  return other;
}

TfFrame *
tf_frame_ref (TfFrame *frame)
{
  return g_atomic_rc_box_acquire (frame);
}

static void
frame_clear (gpointer data)
{
  TfFrame *frame = data;
  tf_pyramid_clear (&frame->pyramid);
  tf_pixels_unref (frame->pixels);
  tf_frame_info_free (frame->info);
  g_free (frame->path);
}

void
tf_frame_unref (TfFrame *frame)
{
  if (frame != NULL)
    g_atomic_rc_box_release_full (frame, frame_clear);
}

const TfFrameInfo *
tf_frame_get_info (const TfFrame *frame)
{
  return frame->info;
}

const TfGeometry *
tf_frame_get_geometry (const TfFrame *frame)
{
  return &frame->info->geometry;
}

const char *
tf_frame_get_path (const TfFrame *frame)
{
  return frame->path;
}

int
tf_frame_get_hdu (const TfFrame *frame)
{
  return frame->hdu;
}

guint
tf_frame_get_width (const TfFrame *frame)
{
  return frame->info->geometry.width;
}

guint
tf_frame_get_height (const TfFrame *frame)
{
  return frame->info->geometry.height;
}

const float *
tf_frame_get_pixels (const TfFrame *frame)
{
  return tf_pixels_get (frame->pixels);
}

double
tf_frame_value (const TfFrame *frame, double x, double y)
{
  const TfGeometry *g = &frame->info->geometry;
  if (!(x >= 0.5 && x < g->width + 0.5 && y >= 0.5 && y < g->height + 0.5))
    return NAN;
  gsize column = (gsize)floor (x - 0.5), row = (gsize)floor (y - 0.5);
  return (double)tf_pixels_get (frame->pixels)[row * g->width + column];
}

const TfNotes *
tf_frame_get_cautions (const TfFrame *frame)
{
  return frame->info->cautions;
}

const TfNoiseRing *
tf_frame_get_noise (const TfFrame *frame, guint *n)
{
  if (n != NULL)
    *n = frame->noise.n;
  return frame->noise.rings;
}

double
tf_frame_noise_at (const TfFrame *frame, double mu)
{
  return tf_noise_at (&frame->noise, mu);
}

double
tf_frame_noise_correlation (const TfFrame *frame)
{
  return frame->noise.correlation;
}

guint
tf_frame_get_n_levels (const TfFrame *frame)
{
  return frame->pyramid.n;
}

/* Seen from outside it was there all along. */
static void
need_first (const TfFrame *frame)
{
  gsize *filled = (gsize *)&frame->first_filled;
  if (!g_once_init_enter (filled))
    return;
  tf_pyramid_fill_first (&frame->pyramid, tf_pixels_get (frame->pixels));
  g_once_init_leave (filled, 1);
}

const float *
tf_frame_get_level (const TfFrame *frame, guint level, guint *width, guint *height)
{
  if (level > frame->pyramid.n)
    return NULL;
  if (level == 1)
    need_first (frame);
  const TfGeometry *g = &frame->info->geometry;
  TfLevel zero = { frame->pixels, g->width, g->height };
  const TfLevel *l = level == 0 ? &zero : &frame->pyramid.levels[level - 1];
  if (width != NULL)
    *width = l->width;
  if (height != NULL)
    *height = l->height;
  return tf_pixels_get (l->pixels);
}
