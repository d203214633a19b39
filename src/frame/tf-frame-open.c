/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-frame.h"
#include "tf-frame-private.h"

#include <gio/gio.h>
#include <glib/gi18n-lib.h>
#include <math.h>

#include "tf-constants.h"
#include "tf-fits-private.h"
#include "tf-witness.h"

/* -- which picture of the file --------------------------------------------------------------- */

static TfFrameInfo *
read_info (const TfFits *fits)
{
  TfFrameInfo *info = tf_frame_info_read (tf_fits_get_header (fits), tf_fits_get_width (fits),
                                          tf_fits_get_height (fits));
  info->n_planes = tf_fits_get_planes (fits);
  return info;
}

/* The picture asked for; when none is named, the first with the @wanted role, else the first of
 * all. */
static TfFits *
choose (const char *path, const TfFrameSpec *spec, TfRole wanted, TfFrameInfo **info,
        GError **error)
{
  int hdu = spec != NULL ? spec->hdu : 0;
  g_autoptr (TfFits) fits = tf_fits_open (path, hdu, error);
  if (fits == NULL)
    return NULL;
  g_autoptr (TfFrameInfo) first = read_info (fits);
  int first_hdu = tf_fits_get_hdu (fits);
  gboolean more = hdu <= 0 && first->role != wanted;
  while (more && tf_fits_next (fits))
    {
      g_autoptr (TfFrameInfo) next = read_info (fits);
      if (next->role != wanted)
        continue;
      *info = g_steal_pointer (&next);
      return g_steal_pointer (&fits);
    }
  *info = g_steal_pointer (&first);
  if (more)
    {
      tf_fits_close (g_steal_pointer (&fits));
      return tf_fits_open (path, first_hdu, error);
    }
  return g_steal_pointer (&fits);
}

TfFrameInfo *
tf_frame_look (const char *path, const TfFrameSpec *spec, int *hdu_used, GError **error)
{
  g_autoptr (TfFrameInfo) info = NULL;
  g_autoptr (TfFits) fits = choose (path, spec, TF_ROLE_FIELD, &info, error);
  if (fits == NULL)
    return NULL;
  if (hdu_used != NULL)
    *hdu_used = tf_fits_get_hdu (fits);
  return g_steal_pointer (&info);
}

/* -- pixels ---------------------------------------------------------------------------------- */

/* handles: one a worker, opened when first needed; first is worker 0's, and the only one when
 * the file cannot be shared. mutex guards error. */
typedef struct
{
  TfFits *first;
  TfFits **handles;
  guint width, plane;
  double to_gauss, fill;
  float *pixels;
  TfPyramid *pyramid;
  GMutex mutex;
  GError *error;
} Reading;

/* What is not a number or the fill value becomes NaN, the rest gauss. */
__attribute__ ((target_clones ("arch=x86-64-v3", "default"))) static void
clean (float *values, gsize n, float factor, float fill)
{
  for (gsize k = 0; k < n; k++)
    {
      float v = values[k];
      gboolean good = v - v <= 0 && !(v <= fill && v >= fill);
      values[k] = good ? v * factor : NAN;
    }
}

static void
keep_error (Reading *reading, GError *problem)
{
  g_mutex_lock (&reading->mutex);
  if (reading->error == NULL)
    reading->error = problem;
  else
    g_error_free (problem);
  g_mutex_unlock (&reading->mutex);
}

static gboolean
read_with (Reading *reading, TfFits *fits, guint first, guint n)
{
  GError *problem = NULL;
  float *out = reading->pixels + (gsize)first * reading->width;
  if (tf_fits_read_rows (fits, reading->plane, first, n, out, &problem))
    return TRUE;
  keep_error (reading, problem);
  return FALSE;
}

static TfFits *
handle_of (Reading *reading, guint worker)
{
  GError *problem = NULL;
  if (worker == 0)
    return reading->first;
  if (reading->handles[worker] == NULL)
    {
      reading->handles[worker] = tf_fits_reopen (reading->first, &problem);
      if (reading->handles[worker] == NULL)
        keep_error (reading, problem);
    }
  return reading->handles[worker];
}

static void
read_band (guint band, guint first, guint n, guint worker, gpointer data)
{
  Reading *reading = data;
  TfFits *fits = handle_of (reading, worker);
  if (fits == NULL || !read_with (reading, fits, first, n))
    return;
  clean (reading->pixels + (gsize)first * reading->width, (gsize)n * reading->width,
         (float)reading->to_gauss, (float)reading->fill);
  tf_pyramid_add_band (reading->pyramid, reading->pixels, first, n, worker);
}

static gboolean
cancelled (const TfWork *work, const char *path, GError **error)
{
  if (work == NULL || !tf_cancel_is_raised (work->cancel))
    return FALSE;
  g_set_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_CANCELLED, _ ("%s: opening was cancelled"),
               path);
  return TRUE;
}

static gboolean
read_pixels (TfFits *fits, const TfFrameInfo *info, guint plane, float *pixels, TfPyramid *pyramid,
             const TfWork *work, GError **error)
{
  guint height = tf_fits_get_height (fits);
  TfWork serial
      = { .pool = work != NULL ? work->pool : NULL, .cancel = work != NULL ? work->cancel : NULL };
  const TfWork *use = tf_fits_may_share (fits) ? work : &serial;
  guint n = tf_workers_get_n (use != NULL ? use->workers : NULL);
  g_autofree TfFits **handles = g_new0 (TfFits *, n);
  Reading reading = { .first = fits,
                      .handles = handles,
                      .width = tf_fits_get_width (fits),
                      .plane = plane,
                      .to_gauss = info->to_gauss,
                      .fill = info->fill_value,
                      .pixels = pixels,
                      .pyramid = pyramid };
  g_mutex_init (&reading.mutex);
  tf_pyramid_open (pyramid, reading.width, height, use);
  tf_bands_run (use, height, read_band, &reading);
  tf_pyramid_close (pyramid);
  g_mutex_clear (&reading.mutex);
  for (guint k = 0; k < n; k++)
    tf_fits_close (handles[k]);
  if (reading.error == NULL)
    return TRUE;
  g_propagate_error (error, reading.error);
  return FALSE;
}

/* -- what the pixels tell -------------------------------------------------------------------- */

/* Off the disk: one value that nearly all pixels hold is a fill, not a field.
 * Returns: whether pixels were changed. */
static gboolean
drop_fill (float *pixels, TfFrameInfo *info)
{
  const TfGeometry *g = &info->geometry;
  double cx, cy, r = tf_geometry_disk_radius (g);
  if (g->projection != TF_PROJECTION_TAN || !tf_geometry_disk_centre (g, &cx, &cy) || !(r > 0))
    return FALSE;
  guint n = 0, same = 0, step = MAX (1, MAX (g->width, g->height) / 256);
  float fill = NAN;
  for (guint pass = 0; pass < 2; pass++)
    for (guint y = 0; y < g->height; y += step)
      for (guint x = 0; x < g->width; x += step)
        {
          float v = pixels[(gsize)y * g->width + x];
          double dx = x + 1 - cx, dy = y + 1 - cy, least = 1.03 * r + 2;
          if (isnan (v) || dx * dx + dy * dy < least * least)
            continue;
          if (pass == 0 && isnan (fill))
            fill = v;
          if (pass == 1)
            {
              n++;
              same += v <= fill && v >= fill;
            }
        }
  if (n < 20 || same < 0.95 * n)
    return FALSE;
  tf_notes_add (info->repairs, "fill-off-disk", "d", (double)fill);
  info->fill_value = (double)fill;
  for (guint y = 0; y < g->height; y++)
    for (guint x = 0; x < g->width; x++)
      {
        float *v = &pixels[(gsize)y * g->width + x];
        gboolean off = hypot (x + 1 - cx, y + 1 - cy) > r;
        if (*v <= fill && *v >= fill && (off || fabsf (fill) > 5000))
          *v = NAN;
      }
  return TRUE;
}

/* Share of the pixels well on the disk (of all on maps) without a value. */
static void
judge_missing (const float *pixels, TfFrameInfo *info)
{
  const TfGeometry *g = &info->geometry;
  double cx = 0, cy = 0, r = tf_geometry_disk_radius (g);
  gboolean disk = g->projection == TF_PROJECTION_TAN && tf_geometry_disk_centre (g, &cx, &cy);
  guint n = 0, missing = 0, step = MAX (1, MAX (g->width, g->height) / 300);
  for (guint y = 0; y < g->height; y += step)
    for (guint x = 0; x < g->width; x += step)
      {
        double dx = x + 1 - cx, dy = y + 1 - cy, most = 0.985 * r;
        if (disk && dx * dx + dy * dy > most * most)
          continue;
        n++;
        missing += isnan (pixels[(gsize)y * g->width + x]) != 0;
      }
  if (n > 0 && missing > 0.001 * n)
    tf_notes_add (info->cautions, "missing-data", "d", 100.0 * missing / n);
}

/* So much of a limb is no edge of something cut. */
static const double WHOLE_LIMB_DEG = 240.0;

/* On what the header makes a cut-out a whole limb is the header's lie; a piece of one may be the
 * edge of what was cut. */
static void
judge_pixels (const float *pixels, TfFrameInfo *info)
{
  judge_missing (pixels, info);
  if (info->kind != TF_KIND_DISK && info->kind != TF_KIND_CUT_OUT)
    return;
  TfLimbFit fit = info->role == TF_ROLE_INTENSITY ? tf_limb_fit_bright (pixels, &info->geometry)
                                                  : tf_limb_fit (pixels, &info->geometry);
  if (info->kind == TF_KIND_DISK || fit.seen_deg >= WHOLE_LIMB_DEG)
    tf_limb_judge (&fit, &info->geometry, info->cautions);
}

/* -- opening --------------------------------------------------------------------------------- */

static gboolean
check_role (const TfFrameInfo *info, TfRole wanted, const char *path, GError **error)
{
  if (info->role == wanted)
    return TRUE;
  g_autofree char *why = info->refusal != NULL ? tf_note_dup_text (info->refusal, FALSE) : NULL;
  if (wanted == TF_ROLE_INTENSITY && info->role == TF_ROLE_FIELD)
    g_set_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_REFUSED,
                 _ ("%s is a magnetogram; a companion is an intensity picture"), path);
  else
    g_set_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_REFUSED, "%s: %s", path,
                 why != NULL ? why : "");
  return FALSE;
}

static guint
choose_plane (const TfFits *fits, const TfFrameSpec *spec, const char *path, GError **error)
{
  int plane = spec != NULL && spec->plane > 0 ? spec->plane : 1;
  if ((guint)plane <= tf_fits_get_planes (fits))
    return (guint)plane;
  g_set_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_READ,
               _ ("%s, HDU %d has %u planes; plane %d was asked for"), path, tf_fits_get_hdu (fits),
               tf_fits_get_planes (fits), plane);
  return 0;
}

static TfFrame *
open_role (const char *path, const TfFrameSpec *spec, TfRole wanted, const TfWork *work,
           GError **error)
{
  g_return_val_if_fail (path != NULL, NULL);
  g_autoptr (TfFrameInfo) info = NULL;
  g_autoptr (TfFits) fits = choose (path, spec, wanted, &info, error);
  if (fits == NULL || !check_role (info, wanted, path, error) || !tf_fits_check_size (fits, error))
    return NULL;
  guint plane = choose_plane (fits, spec, path, error);
  if (plane == 0 || cancelled (work, path, error))
    return NULL;
  TfPixels *pixels = tf_pixels_new (work != NULL ? work->pool : NULL,
                                    (gsize)tf_fits_get_width (fits) * tf_fits_get_height (fits));
  if (pixels == NULL)
    {
      g_set_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_MEMORY,
                   _ ("%s: there is not enough memory for %u × %u pixels"), path,
                   tf_fits_get_width (fits), tf_fits_get_height (fits));
      return NULL;
    }
  g_auto (TfPyramid) pyramid = { 0 };
  if (!read_pixels (fits, info, plane, tf_pixels_get (pixels), &pyramid, work, error)
      || cancelled (work, path, error))
    {
      tf_pixels_unref (pixels);
      return NULL;
    }
  if (drop_fill (tf_pixels_get (pixels), info))
    {
      tf_pyramid_clear (&pyramid);
      tf_pyramid_make (&pyramid, tf_pixels_get (pixels), tf_fits_get_width (fits),
                       tf_fits_get_height (fits), work);
    }
  judge_pixels (tf_pixels_get (pixels), info);
  return tf_frame_new_take (g_steal_pointer (&info), pixels, &pyramid, path,
                            tf_fits_get_hdu (fits), work);
}

TfFrame *
tf_frame_open (const char *path, const TfFrameSpec *spec, const TfWork *work, GError **error)
{
  return open_role (path, spec, TF_ROLE_FIELD, work, error);
}

TfFrame *
tf_frame_open_companion (const char *path, const TfFrameSpec *spec, const TfWork *work,
                         GError **error)
{
  return open_role (path, spec, TF_ROLE_INTENSITY, work, error);
}

char *
tf_frame_file_checksum (const char *path, const TfCancel *cancel, GError **error)
{
  enum
  {
    PIECE = 1 << 18
  };
  g_autoptr (GFile) file = g_file_new_for_path (path);
  g_autoptr (GError) problem = NULL;
  g_autoptr (GFileInputStream) stream = g_file_read (file, NULL, &problem);
  g_autoptr (GChecksum) sum = g_checksum_new (G_CHECKSUM_SHA256);
  g_autofree guchar *piece = g_malloc (PIECE);
  gssize n = stream != NULL ? 1 : -1;
  while (n > 0 && !tf_cancel_is_raised (cancel))
    {
      n = g_input_stream_read (G_INPUT_STREAM (stream), piece, PIECE, NULL, &problem);
      if (n > 0)
        g_checksum_update (sum, piece, n);
    }
  if (n == 0)
    return g_strdup (g_checksum_get_string (sum));
  if (n < 0)
    g_set_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_READ, _ ("%s cannot be read: %s"), path,
                 problem->message);
  else
    g_set_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_CANCELLED,
                 _ ("%s: the checksum was cancelled"), path);
  return NULL;
}
