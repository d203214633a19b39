/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-plate-shot.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-constants.h"
#include "tf-figure.h"
#include "tf-number.h"
#include "tf-plate-figure.h"
#include "tf-plate-overlay.h"
#include "tf-save-as.h"

/* Wide enough for a page with its margins; labels of 7 points. */
static const double width_mm = 150, text_mm = 2.5;
static const guint32 ground = 0xff17191d;
enum
{
  FINE = 2 /* pixels of the picture a pixel of the view */
};

typedef struct
{
  char *head, *title;
  TfFrame *frame;
  TfView view;
  TfPaint paint;
  TfWork work;
  TfPlateOverlay over;
  TfPlateFigure figure;
} Shot;

static void
shot_free (gpointer data)
{
  Shot *shot = data;
  g_free (shot->head);
  g_free (shot->title);
  tf_frame_unref (shot->frame);
  tf_pool_unref (shot->work.pool);
  tf_workers_unref (shot->work.workers);
  tf_plate_overlay_clear (&shot->over);
  g_free (shot);
}

/* -- words ----------------------------------------------------------------------------------- */

static char *
dup_head (TfFrame *frame)
{
  const TfFrameInfo *info = tf_frame_get_info (frame);
  g_autofree char *time = tf_time_dup_iso (info->time, 0),
                  *vantage = tf_observer_dup_vantage (&info->geometry.observer),
                  *file = g_path_get_basename (tf_frame_get_path (frame));
  GString *text = g_string_new (time != NULL ? time : _ ("time unknown"));
  g_string_append_printf (text, " · %s", info->instrument);
  if (!tf_geometry_is_map (&info->geometry))
    g_string_append_printf (text, _ (" · seen from %s"),
                            strcmp (vantage, "earth") == 0 ? _ ("the Earth") : vantage);
  g_string_append_printf (text, " · %s", file);
  if (info->simulated)
    g_string_append (text, _ ("\nsimulated: an invented Sun"));
  return g_string_free (text, FALSE);
}

static const char *
scale_words (TfSession *session)
{
  gboolean map = tf_geometry_is_map (tf_frame_get_geometry (tf_session_get_frame (session)));
  switch (tf_session_get_view (session)->look)
    {
    case TF_LOOK_UNROLLED:
      return _ ("at the equator");
    case TF_LOOK_CLOSE:
      return _ ("in the middle");
    case TF_LOOK_DISK:
    default:
      return map ? _ ("at the equator") : _ ("at the disk’s centre");
    }
}

char *
tf_plate_shot_dup_name (TfSession *session)
{
  TfFrame *frame = tf_session_get_frame (session);
  g_return_val_if_fail (frame != NULL, NULL);
  g_autofree char *stem = g_path_get_basename (tf_frame_get_path (frame));
  char *dot = strchr (stem, '.');
  if (dot != NULL && dot != stem)
    *dot = '\0';
  static const char *const looks[] = { "disk", "unrolled", "close" };
  return g_strdup_printf ("%s-%s.png", stem, looks[tf_session_get_view (session)->look]);
}

/* -- in the thread --------------------------------------------------------------------------- */

static cairo_surface_t *
new_picture (const Shot *shot)
{
  TfView view = shot->view;
  view.width = round (view.width) * FINE;
  view.height = round (view.height) * FINE;
  view.zoom *= FINE;
  cairo_surface_t *picture
      = cairo_image_surface_create (CAIRO_FORMAT_RGB24, (int)view.width, (int)view.height);
  guint32 *pixels = (guint32 *)(gpointer)cairo_image_surface_get_data (picture);
  tf_picture_render (shot->frame, &view, &shot->paint, pixels,
                     (guint)cairo_image_surface_get_stride (picture) / 4, &shot->work);
  cairo_surface_mark_dirty (picture);
  return picture;
}

static void
draw (cairo_t *cr, const TfChartStyle *style, TfArea area, gpointer data)
{
  const Shot *shot = data;
  tf_plate_figure_draw (cr, &shot->figure, style, area);
}

static char *
save (TfSaving *saving, gpointer job, const char *path, GError **error)
{
  Shot *shot = job;
  TfChartStyle style = tf_chart_style (FALSE, FALSE, text_mm * 72 / 25.4);
  double width = width_mm * 72 / 25.4;
  shot->figure.picture = new_picture (shot);
  TfFigurePage page = { .width_mm = width_mm,
                        .text_mm = text_mm,
                        .title = shot->title,
                        .cancel = tf_saving_get_cancel (saving) };
  page.height_mm = tf_plate_figure_height (&shot->figure, &style, width) * 25.4 / 72;
  gboolean good = tf_figure_write (path, &page, draw, shot, error);
  cairo_surface_destroy (shot->figure.picture);
  return good ? g_strdup_printf (_ ("The picture is saved as %s."), path) : NULL;
}

/* -- on the main thread ---------------------------------------------------------------------- */

static void
fill_figure (Shot *shot, TfSession *session)
{
  double mm_a_degree = tf_frame_get_geometry (shot->frame)->radius_mm * TF_DEG;
  gboolean inversion = FALSE;
  for (guint k = 0; k < shot->over.overlay.n_lines; k++)
    inversion = inversion || shot->over.overlay.lines[k].kind == TF_LINE_INVERSION;
  shot->figure = (TfPlateFigure){
    .width = round (shot->view.width),
    .height = round (shot->view.height),
    .overlay = shot->over.overlay,
    .units_a_mm = tf_session_get_pixels_a_degree (session) / mm_a_degree,
    .scale_at = scale_words (session),
    .head = shot->head,
    .range_gauss = shot->paint.range_gauss,
    .low = tf_paint_colour (&shot->paint, -1) & 0xffffff,
    .middle = tf_paint_colour (&shot->paint, 0) & 0xffffff,
    .high = tf_paint_colour (&shot->paint, 1) & 0xffffff,
    .caution = inversion ? _ ("Inversion lines describe the field; they are no flare forecast.")
                         : NULL,
  };
}

void
tf_plate_shot_save (TfSession *session, const char *path)
{
  g_return_if_fail (TF_IS_SESSION (session) && path != NULL);
  TfFrame *frame = tf_session_get_frame (session);
  g_return_if_fail (frame != NULL);
  Shot *shot = g_new0 (Shot, 1);
  shot->frame = tf_frame_ref (frame);
  shot->view = *tf_session_get_view (session);
  shot->paint = (TfPaint){ .range_gauss = tf_session_get_range (session),
                           .palette = tf_session_get_palette (session),
                           .ground = ground,
                           .dark = TRUE };
  shot->work.pool = tf_pool_ref (tf_session_get_pool (session));
  shot->work.workers = tf_workers_ref (tf_session_get_workers (session));
  shot->head = dup_head (frame);
  shot->title = g_strdup (shot->head);
  tf_plate_overlay_collect (&shot->over, session, &shot->view, 0);
  fill_figure (shot, session);
  tf_save_as (session, path, save, shot, shot_free);
}

/* -- a position ------------------------------------------------------------------------------ */

static void
append_number (GString *text, const char *head, double value, const char *form, const char *tail)
{
  if (!isfinite (value))
    return;
  g_autofree char *number = tf_number_dup_form (value, form, FALSE);
  g_string_append_printf (text, "  %s%s%s", head, number, tail);
}

char *
tf_plate_dup_position (TfSession *session, double vx, double vy)
{
  g_return_val_if_fail (TF_IS_SESSION (session), NULL);
  TfFrame *frame = tf_session_get_frame (session);
  TfPlace place;
  double x, y;
  const TfView *view = tf_session_get_view (session);
  if (frame == NULL || !tf_view_to_sun (view, tf_frame_get_geometry (frame), vx, vy, &place))
    return NULL;
  g_autofree char *time = tf_time_dup_iso (tf_frame_get_info (frame)->time, 0),
                  *file = g_path_get_basename (tf_frame_get_path (frame));
  GString *text = g_string_new (time != NULL ? time : "time unknown");
  append_number (text, place.lat_deg < 0 ? "S" : "N", fabs (place.lat_deg), ".2f", "");
  append_number (text, place.cmd_deg < 0 ? "CMD E" : "CMD W", fabs (place.cmd_deg), ".2f", "");
  append_number (text, "Stonyhurst ", place.stonyhurst_lon_deg, "+.2f", "");
  append_number (text, "Carrington ", place.carrington_lon_deg, ".2f", "");
  append_number (text, "mu ", place.mu, ".3f", "");
  if (tf_view_to_pixel (view, tf_frame_get_geometry (frame), vx, vy, &x, &y))
    {
      append_number (text, "", tf_frame_value (frame, x, y), "+.1f", " G");
      append_number (text, "pixel ", x, ".1f", "");
      g_autofree char *row = tf_number_dup_form (y, ".1f", FALSE);
      g_string_append_printf (text, ",%s", row);
    }
  g_string_append_printf (text, "  %s", file);
  return g_string_free (text, FALSE);
}
