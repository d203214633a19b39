/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* What the plate draws: the picture, the overlay over it, the line in hand. */

#include "tf-plate-private.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-widget-style.h"

static const guint32 ground = 0xff17191d;
static const double label_share = 0.86, stretch_min = 0.5;

enum
{
  SETTLE_MS = 120,
  CROSS = 9
};

/* -- the picture ----------------------------------------------------------------------------- */

void
tf_plate_draw_picture (TfPlate *self, int width, int height)
{
  TfFrame *frame = tf_session_get_frame (self->session);
  int scale = gtk_widget_get_scale_factor (GTK_WIDGET (self));
  gboolean fits = self->picture != NULL
                  && cairo_image_surface_get_width (self->picture) == width * scale
                  && cairo_image_surface_get_height (self->picture) == height * scale;
  if (frame == NULL || (fits && !self->picture_stale))
    return;
  /* a new surface each time: the last one may still be held by a render node */
  g_clear_pointer (&self->picture, cairo_surface_destroy);
  self->picture = cairo_image_surface_create (CAIRO_FORMAT_RGB24, width * scale, height * scale);
  TfView view = *tf_session_get_view (self->session);
  view.width = width * scale;
  view.height = height * scale;
  view.zoom *= scale;
  TfPaint paint = { .range_gauss = tf_session_get_range (self->session),
                    .palette = tf_session_get_palette (self->session),
                    .ground = ground,
                    .dark = TRUE };
  TfWork work = { .pool = tf_session_get_pool (self->session),
                  .workers = tf_session_get_workers (self->session) };
  guint32 *pixels = (guint32 *)(gpointer)cairo_image_surface_get_data (self->picture);
  tf_picture_render (frame, &view, &paint, pixels,
                     (guint)cairo_image_surface_get_stride (self->picture) / 4, &work);
  cairo_surface_mark_dirty (self->picture);
  self->picture_stale = FALSE;
}

/* -- the overlay ----------------------------------------------------------------------------- */

static TfChartStyle
overlay_style (TfPlate *self)
{
  TfChartStyle style = tf_widget_chart_style (GTK_WIDGET (self), label_share);
  return tf_chart_style (TRUE, style.contrast,
                         style.text_pt); /* the plate is dark in both styles */
}

static gboolean
same_kind (const TfView *a, const TfView *b)
{
  return a->look == b->look && fabs (a->turn_deg - b->turn_deg) < 1e-9
         && fabs (a->width - b->width) < 0.5 && fabs (a->height - b->height) < 0.5
         && fabs (a->centre_lon_deg - b->centre_lon_deg) < 1e-9
         && fabs (a->centre_lat_deg - b->centre_lat_deg) < 1e-9;
}

static gboolean
settled (gpointer data)
{
  TfPlate *self = data;
  self->settle = 0;
  self->overlay_stale = TRUE;
  gtk_widget_queue_draw (GTK_WIDGET (self));
  return G_SOURCE_REMOVE;
}

/* While the disk is zoomed the overlay is stretched, and made anew when the zooming rests. */
static gboolean
may_stretch (TfPlate *self, const TfView *view)
{
  double stretch = view->zoom / self->overlay_view.zoom;
  if (fabs (stretch - 1) < 1e-9)
    return TRUE;
  if (view->look != TF_LOOK_DISK || stretch < stretch_min || stretch > 1 / stretch_min)
    return FALSE;
  g_clear_handle_id (&self->settle, g_source_remove);
  self->settle = g_timeout_add (SETTLE_MS, settled, self);
  return TRUE;
}

static gboolean
same_content (TfPlate *self)
{
  gboolean stroke = tf_session_has_stroke (self->session);
  const void *draft = stroke ? (const void *)self : tf_session_get_draft (self->session); /* in a stroke: whatever it is */
  const TfMeasure *measure = draft != NULL && !stroke ? tf_session_get_measure (self->session) : NULL;
  const void *now[3] = { draft, tf_session_get_region (self->session), measure };
  gboolean same = TRUE;
  for (guint k = 0; k < G_N_ELEMENTS (now); k++)
    {
      same = same && now[k] == self->overlay_of[k];
      self->overlay_of[k] = now[k];
    }
  return same;
}

static gboolean
overlay_serves (TfPlate *self)
{
  const TfView *view = tf_session_get_view (self->session);
  double dx, dy, stretch;
  if (!same_content (self) || self->overlay == NULL || self->overlay_stale
      || !same_kind (&self->overlay_view, view) || !may_stretch (self, view))
    return FALSE;
  tf_plate_place_overlay (self, &dx, &dy, &stretch);
  /* panned so far that the margin does not reach: only then, not while stretching */
  return stretch > 1 || stretch < 1
         || (fabs (dx + TF_PLATE_MARGIN) <= TF_PLATE_MARGIN
             && fabs (dy + TF_PLATE_MARGIN) <= TF_PLATE_MARGIN);
}

void
tf_plate_draw_overlay (TfPlate *self, int width, int height)
{
  TfFrame *frame = tf_session_get_frame (self->session);
  if (frame == NULL || overlay_serves (self))
    return;
  int scale = gtk_widget_get_scale_factor (GTK_WIDGET (self));
  double full_width = width + 2.0 * TF_PLATE_MARGIN, full_height = height + 2.0 * TF_PLATE_MARGIN;
  g_clear_pointer (&self->overlay, cairo_surface_destroy);
  g_clear_handle_id (&self->settle, g_source_remove);
  self->overlay_view = *tf_session_get_view (self->session);
  self->overlay = cairo_image_surface_create (CAIRO_FORMAT_ARGB32, (int)full_width * scale,
                                              (int)full_height * scale);
  g_auto (TfPlateOverlay) over = { 0 };
  tf_plate_overlay_collect_still (&over, self->session, &self->overlay_view, TF_PLATE_MARGIN);
  TfChartStyle style = overlay_style (self);
  cairo_t *cr = cairo_create (self->overlay);
  cairo_scale (cr, scale, scale);
  tf_overlay_draw (cr, &over.overlay, &style, (TfArea){ 0, 0, full_width, full_height });
  cairo_destroy (cr);
  self->overlay_stale = FALSE;
}

void
tf_plate_place_overlay (TfPlate *self, double *dx, double *dy, double *stretch)
{
  const TfView *view = tf_session_get_view (self->session);
  const TfGeometry *geometry = tf_frame_get_geometry (tf_session_get_frame (self->session));
  double x0 = 0, y0 = 0, x1 = 0, y1 = 0;
  *stretch = 1;
  *dx = *dy = -TF_PLATE_MARGIN;
  if (view->look != TF_LOOK_DISK
      || !tf_view_from_pixel (&self->overlay_view, geometry, 1, 1, &x0, &y0)
      || !tf_view_from_pixel (view, geometry, 1, 1, &x1, &y1))
    return;
  if (fabs (view->zoom / self->overlay_view.zoom - 1) > 1e-9)
    *stretch = view->zoom / self->overlay_view.zoom;
  *dx = round (x1 - *stretch * (x0 + TF_PLATE_MARGIN));
  *dy = round (y1 - *stretch * (y0 + TF_PLATE_MARGIN));
}

/* -- the line in hand ------------------------------------------------------------------------ */

/* Where the arrow keys have put the pointer. */
static void
draw_cross (TfPlate *self, cairo_t *cr)
{
  double x = floor (self->pointer_x) + 0.5, y = floor (self->pointer_y) + 0.5;
  for (guint k = 0; k < 2; k++)
    {
      cairo_move_to (cr, x - CROSS, y);
      cairo_line_to (cr, x + CROSS, y);
      cairo_move_to (cr, x, y - CROSS);
      cairo_line_to (cr, x, y + CROSS);
      cairo_set_source_rgba (cr, k, k, k, 0.9);
      cairo_set_line_width (cr, k == 0 ? 3 : 1);
      cairo_stroke (cr);
    }
}

/* -- a geometry that is being tried ---------------------------------------------------------- */

gboolean
tf_plate_has_preview (TfPlate *self)
{
  TfCorrection c = tf_session_get_preview (self->session);
  return tf_correction_is_set (&c) && tf_session_get_frame (self->session) != NULL
         && tf_session_get_view (self->session)->look == TF_LOOK_DISK;
}

/* The limb as a dashed circle, and a stroke where solar north would be. */
static void
draw_preview (TfPlate *self, cairo_t *cr)
{
  static const double dash[] = { 7, 5 };
  TfCorrection c = tf_session_get_preview (self->session);
  const TfView *view = tf_session_get_view (self->session);
  const TfGeometry *g = tf_frame_get_geometry (tf_session_get_frame (self->session));
  double north = c.north_angle_deg * G_PI / 180, at[3][2];
  static const double reach[] = { 0, 0.94, 1.06 };
  for (guint k = 0; k < G_N_ELEMENTS (reach); k++)
    if (!tf_view_from_pixel (view, g, c.centre_x - reach[k] * c.radius_px * sin (north),
                             c.centre_y + reach[k] * c.radius_px * cos (north), &at[k][0],
                             &at[k][1]))
      return;
  cairo_new_path (cr);
  cairo_arc (cr, at[0][0], at[0][1], c.radius_px * view->zoom, 0, 2 * G_PI);
  cairo_new_sub_path (cr);
  cairo_move_to (cr, at[1][0], at[1][1]);
  cairo_line_to (cr, at[2][0], at[2][1]);
  cairo_set_source_rgba (cr, 0, 0, 0, 0.7);
  cairo_set_line_width (cr, 4);
  cairo_stroke_preserve (cr);
  cairo_set_dash (cr, dash, 2, 0);
  cairo_set_source_rgb (cr, 1, 0.945, 0.78);
  cairo_set_line_width (cr, 1.8);
  cairo_stroke (cr);
  cairo_set_dash (cr, NULL, 0, 0);
}

typedef double Point[2];

/* The draft that changes with every move, over the surface that does not. */
static void
draw_stroke (TfPlate *self, cairo_t *cr, int width, int height)
{
  g_auto (TfPlateOverlay) over = { 0 };
  TfChartStyle style = overlay_style (self);
  tf_plate_overlay_collect_stroke (&over, self->session);
  tf_overlay_draw (cr, &over.overlay, &style, (TfArea){ 0, 0, width, height });
}

void
tf_plate_draw_line (TfPlate *self, cairo_t *cr, int width, int height)
{
  const TfVertex *line;
  guint n;
  TfFrame *frame = tf_session_get_frame (self->session);
  tf_session_get_line (self->session, &line, &n);
  if (tf_session_has_stroke (self->session))
    draw_stroke (self, cr, width, height);
  tf_plate_draw_hand (self, cr);
  if (tf_plate_has_preview (self))
    draw_preview (self, cr);
  if (self->by_keys && self->pointer_in)
    draw_cross (self, cr);
  if (n == 0 || frame == NULL)
    return;
  g_auto (TfPlateOverlay) over = { 0 };
  tf_plate_overlay_init (&over, tf_session_get_view (self->session),
                         tf_frame_get_geometry (frame), 0);
  g_autofree Point *points = g_new (Point, (gsize)n + 1);
  guint seen = 0;
  for (guint k = 0; k < n; k++)
    if (over.overlay.project (line[k].lon_deg, line[k].lat_deg, &points[seen][0], &points[seen][1],
                              over.overlay.data))
      seen++;
  TfTool tool = tf_session_get_tool (self->session);
  if (self->pointer_in
      && (tool == TF_TOOL_POLYGON || (tool == TF_TOOL_LEAVE_OUT && !self->moved)
          || (tool == TF_TOOL_SPLIT && n == 1)))
    {
      points[seen][0] = self->pointer_x;
      points[seen++][1] = self->pointer_y;
    }
  TfOverlayItem item = { .stroke = TF_STROKE_DRAFT, .chosen = TRUE, .verdict = -1 };
  tf_plate_overlay_set_poles (&item, tf_session_get_measure (self->session));
  over.overlay.axes = TRUE;
  over.overlay.items = &item;
  over.overlay.n_items = 1;
  over.overlay.draft = (const Point *)points;
  over.overlay.n_draft = seen;
  TfChartStyle style = overlay_style (self);
  tf_overlay_draw (cr, &over.overlay, &style, (TfArea){ 0, 0, width, height });
}

TfRegionItem *
tf_plate_item_at (TfPlate *self, double x, double y)
{
  TfFrame *frame = tf_session_get_frame (self->session);
  if (frame == NULL)
    return NULL;
  const TfView *view = tf_session_get_view (self->session);
  GListModel *list = tf_session_get_regions (self->session);
  g_auto (TfPlateOverlay) over = { 0 };
  tf_plate_overlay_collect (&over, self->session, view, 0);
  /* neither the draft nor a ghost is chosen by a click: they stand after the regions */
  over.overlay.n_items = g_list_model_get_n_items (list);
  int hit = tf_overlay_hit (&over.overlay, (TfArea){ 0, 0, view->width, view->height }, x, y);
  if (hit < 0)
    return NULL;
  g_autoptr (TfRegionItem) item = g_list_model_get_item (list, (guint)hit);
  return item; /* the list holds it */
}
