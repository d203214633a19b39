/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* What the hand holds over the plate: the brush's circle at its size on the Sun, the handles of
 * corners, and the line of a proposed split. */

#include "tf-plate-private.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-widget-style.h"

enum
{
  CIRCLE = 48,
  HANDLE = 4,       /* half its side */
  HANDLE_HIT = 13,  /* how near a press takes hold */
  HANDLE_APART = 22 /* handles nearer than this would be in each other's way */
};

static const TfGeometry *
geometry_of (TfPlate *self)
{
  TfFrame *frame = tf_session_get_frame (self->session);
  return frame != NULL ? tf_frame_get_geometry (frame) : NULL;
}

static gboolean
to_view (TfPlate *self, TfVertex vertex, double *x, double *y)
{
  const TfGeometry *geometry = geometry_of (self);
  return geometry != NULL
         && tf_view_from_sun (tf_session_get_view (self->session), geometry, vertex.lon_deg,
                              vertex.lat_deg, x, y);
}

gboolean
tf_plate_to_sun (TfPlate *self, double x, double y, TfVertex *vertex)
{
  TfPlace place;
  const TfGeometry *geometry = geometry_of (self);
  if (geometry == NULL
      || !tf_view_to_sun (tf_session_get_view (self->session), geometry, x, y, &place))
    return FALSE;
  *vertex = (TfVertex){ place.carrington_lon_deg, place.lat_deg };
  return TRUE;
}

/* Degrees a pixel of the view, where the outline in hand is. */
static double
degrees_a_pixel (TfPlate *self)
{
  double lon, lat, radius, x, y;
  TfVertex here, there;
  TfOutline *base = tf_session_get_base (self->session);
  if (base == NULL)
    return NAN;
  tf_outline_get_cap (base, &lon, &lat, &radius);
  if (!to_view (self, (TfVertex){ lon, lat }, &x, &y) || !tf_plate_to_sun (self, x, y, &here)
      || !tf_plate_to_sun (self, x + 4, y + 3, &there))
    return NAN;
  return tf_sphere_distance (here.lon_deg, here.lat_deg, there.lon_deg, there.lat_deg) / 5;
}

double
tf_plate_handles_apart (TfPlate *self)
{
  double scale = degrees_a_pixel (self);
  return isfinite (scale) ? HANDLE_APART * scale : 0.5;
}

double
tf_plate_hit_degrees (TfPlate *self)
{
  double scale = degrees_a_pixel (self);
  return isfinite (scale) ? HANDLE_HIT * scale : 0.3;
}

gboolean
tf_plate_corner_at (TfPlate *self, double x, double y, TfCornerPlace *place)
{
  g_autoptr (GArray) list
      = tf_session_list_corners (self->session, tf_plate_handles_apart (self));
  double least = HANDLE_HIT;
  gboolean found = FALSE;
  for (guint k = 0; k < list->len; k++)
    {
      double hx, hy;
      TfCornerPlace here = g_array_index (list, TfCornerPlace, k);
      if (!to_view (self, tf_session_get_corner (self->session, here), &hx, &hy)
          || hypot (hx - x, hy - y) > least)
        continue;
      least = hypot (hx - x, hy - y);
      *place = here;
      found = TRUE;
    }
  return found;
}

static gboolean
same_corner (TfCornerPlace a, TfCornerPlace b)
{
  return a.ring == b.ring && a.corner == b.corner && a.left_out == b.left_out;
}

/* The next (1) or previous (-1) handle is the chosen one. */
void
tf_plate_step_corner (TfPlate *self, int step)
{
  g_autoptr (GArray) list
      = tf_session_list_corners (self->session, tf_plate_handles_apart (self));
  int n = (int)list->len, at = step > 0 ? -1 : n;
  for (int k = 0; k < n; k++)
    if (self->has_corner && same_corner (self->corner, g_array_index (list, TfCornerPlace, k)))
      at = k;
  self->has_corner = n > 0;
  if (n > 0)
    self->corner = g_array_index (list, TfCornerPlace, (at + step + n) % n);
  gtk_widget_queue_draw (GTK_WIDGET (self));
}

/* -- drawing --------------------------------------------------------------------------------- */

/* Each line twice, dark under light, so that it is seen on every field. */
static void
stroke_twice (cairo_t *cr)
{
  cairo_set_source_rgba (cr, 0.05, 0.06, 0.08, 0.75);
  cairo_set_line_width (cr, 3.4);
  cairo_stroke_preserve (cr);
  cairo_set_source_rgb (cr, 1.0, 0.945, 0.78);
  cairo_set_line_width (cr, 1.4);
  cairo_stroke (cr);
}

static void
draw_brush (TfPlate *self, cairo_t *cr, gboolean in)
{
  TfVertex middle;
  if (!self->pointer_in || !tf_plate_to_sun (self, self->pointer_x, self->pointer_y, &middle))
    return;
  TfTime time = tf_frame_get_info (tf_session_get_frame (self->session))->time;
  g_autoptr (TfOutline) circle
      = tf_outline_new_cap (time, middle.lon_deg, middle.lat_deg,
                            tf_session_get_brush (self->session), CIRCLE);
  guint n = 0;
  const TfVertex *ring = circle != NULL ? tf_outline_get_ring (circle, 0, FALSE, &n) : NULL;
  cairo_new_path (cr);
  for (guint k = 0; k <= n && n > 0; k++)
    {
      double x, y;
      if (to_view (self, ring[k % n], &x, &y))
        cairo_line_to (cr, x, y);
    }
  double x = floor (self->pointer_x) + 0.5, y = floor (self->pointer_y) + 0.5;
  cairo_move_to (cr, x - 4, y);
  cairo_line_to (cr, x + 4, y);
  if (in)
    {
      cairo_move_to (cr, x, y - 4);
      cairo_line_to (cr, x, y + 4);
    }
  stroke_twice (cr);
}

static void
draw_handle (TfPlate *self, cairo_t *cr, TfCornerPlace place)
{
  double x, y;
  gboolean chosen = self->has_corner && same_corner (place, self->corner);
  double half = chosen ? HANDLE + 2 : HANDLE;
  if (!to_view (self, tf_session_get_corner (self->session, place), &x, &y))
    return;
  cairo_rectangle (cr, floor (x) + 0.5 - half, floor (y) + 0.5 - half, 2 * half, 2 * half);
  cairo_set_source_rgba (cr, chosen ? 1 : 0.05, chosen ? 0.945 : 0.06, chosen ? 0.78 : 0.08, 0.8);
  cairo_fill_preserve (cr);
  stroke_twice (cr);
}

static void
draw_handles (TfPlate *self, cairo_t *cr)
{
  g_autoptr (GArray) list
      = tf_session_list_corners (self->session, tf_plate_handles_apart (self));
  gboolean shown = FALSE;
  for (guint k = 0; k < list->len; k++)
    {
      TfCornerPlace place = g_array_index (list, TfCornerPlace, k);
      shown = shown || (self->has_corner && same_corner (place, self->corner));
      draw_handle (self, cr, place);
    }
  if (self->has_corner && !shown) /* moved near to another, or just put in */
    draw_handle (self, cr, self->corner);
}

/* The line of a proposed split, in what the hand is drawn in, with its name below its lower end:
 * labels stand above outlines. */
static void
draw_proposal (TfPlate *self, cairo_t *cr)
{
  static const double dashes[] = { 7, 5 };
  const TfProposal *proposal = tf_session_get_proposal (self->session);
  double ax, ay, bx, by;
  if (proposal == NULL || !to_view (self, proposal->line.a, &ax, &ay)
      || !to_view (self, proposal->line.b, &bx, &by))
    return;
  cairo_save (cr);
  cairo_new_path (cr);
  cairo_move_to (cr, ax, ay);
  cairo_line_to (cr, bx, by);
  cairo_set_dash (cr, dashes, G_N_ELEMENTS (dashes), 0);
  stroke_twice (cr);
  cairo_restore (cr);
  TfChartStyle style = tf_widget_chart_style (GTK_WIDGET (self), 0.9);
  double x = ay > by ? ax : bx, y = fmax (ay, by) + 4;
  for (int k = 0; k < 4; k++) /* a dark edge */
    tf_chart_text (cr, &style, x + (k % 2 ? 1 : -1), y + (k / 2 ? 1 : -1), 0.5, 0,
                   (TfColour){ 0.05, 0.06, 0.08, 0.75 }, _ ("split here? Shift+S"));
  tf_chart_text (cr, &style, x, y, 0.5, 0, (TfColour){ 1.0, 0.945, 0.78, 1 },
                 _ ("split here? Shift+S"));
}

void
tf_plate_draw_hand (TfPlate *self, cairo_t *cr)
{
  TfTool tool = tf_session_get_tool (self->session);
  if (tool == TF_TOOL_BRUSH_IN || tool == TF_TOOL_BRUSH_OUT)
    draw_brush (self, cr, tool == TF_TOOL_BRUSH_IN);
  else if (tool == TF_TOOL_CORNERS)
    draw_handles (self, cr);
  else
    draw_proposal (self, cr);
}
