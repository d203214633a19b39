/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* What part of the Sun the plate shows, and how. */

#include "tf-session-private.h"

#include <math.h>

enum
{
  CLOSE_DEGREES = 24
}; /* across, when no region is chosen */
static const double range_min = 5, range_max = 5000;

const TfView *
tf_session_get_view (TfSession *self)
{
  return &self->view;
}

static const TfGeometry *
geometry_of (TfSession *self)
{
  return self->frame != NULL ? tf_frame_get_geometry (self->frame) : NULL;
}

/* The middle of the close look: the draft, else the chosen region, else the middle of the disk. */
static void
fit_close (TfSession *self)
{
  double lon = tf_geometry_central_carrington (geometry_of (self)), lat = 0,
         radius = CLOSE_DEGREES / 2.0;
  const TfOutline *outline = self->draft;
  if (outline == NULL && self->region != NULL)
    outline = tf_region_item_get_row (self->region)->outline;
  if (outline != NULL)
    tf_outline_get_cap (outline, &lon, &lat, &radius);
  self->view.centre_lon_deg = isfinite (lon) ? lon : 180;
  self->view.centre_lat_deg = lat;
  double across = fmax (2.0 * radius * 1.6, 6.0);
  self->view.zoom = fmin (self->view.width, self->view.height) / across;
}

void
tf_session_fit (TfSession *self)
{
  g_return_if_fail (TF_IS_SESSION (self));
  const TfGeometry *geometry = geometry_of (self);
  self->fitted = TRUE;
  if (geometry == NULL || self->view.width < 2 || self->view.height < 2)
    return;
  if (self->view.look == TF_LOOK_CLOSE)
    fit_close (self);
  else
    tf_view_fit (&self->view, geometry, self->north_up);
  tf_session_emit (self, TF_SIGNAL_VIEW);
}

void
tf_session_set_view_size (TfSession *self, double width, double height)
{
  if (fabs (self->view.width - width) < 0.5 && fabs (self->view.height - height) < 0.5)
    return;
  self->view.width = width;
  self->view.height = height;
  if (self->fitted)
    tf_session_fit (self);
  else
    tf_session_emit (self, TF_SIGNAL_VIEW);
}

void
tf_session_pan (TfSession *self, double dx, double dy)
{
  const TfGeometry *geometry = geometry_of (self);
  if (geometry == NULL)
    return;
  self->fitted = FALSE;
  tf_view_pan (&self->view, geometry, dx, dy);
  tf_session_emit (self, TF_SIGNAL_VIEW);
}

void
tf_session_zoom (TfSession *self, double factor, double vx, double vy)
{
  const TfGeometry *geometry = geometry_of (self);
  if (geometry == NULL)
    return;
  self->fitted = FALSE;
  tf_view_zoom (&self->view, geometry, factor, vx, vy);
  tf_session_emit (self, TF_SIGNAL_VIEW);
}

void
tf_session_set_pointer (TfSession *self, gboolean in, double vx, double vy)
{
  g_return_if_fail (TF_IS_SESSION (self));
  self->pointer_in = in;
  self->pointer_x = vx;
  self->pointer_y = vy;
}

gboolean
tf_session_get_pointer (TfSession *self, double *vx, double *vy)
{
  *vx = self->pointer_x;
  *vy = self->pointer_y;
  return self->pointer_in;
}

/* -- from one look to another ---------------------------------------------------------------- */

/* View pixels a degree on the Sun, in the middle of the disk; on a map along a row. */
static double
pixels_a_degree (const TfView *view, const TfGeometry *geometry)
{
  if (view->look != TF_LOOK_DISK)
    return view->zoom;
  if (tf_geometry_is_map (geometry))
    return view->zoom / hypot (geometry->cd[0][0], geometry->cd[1][0]);
  return view->zoom * tf_geometry_disk_radius (geometry) * G_PI / 180;
}

double
tf_session_get_pixels_a_degree (TfSession *self)
{
  const TfGeometry *geometry = geometry_of (self);
  return geometry != NULL ? pixels_a_degree (&self->view, geometry) : NAN;
}

/* Turns: a close look turns about its middle while it moves. */
static void
hold (TfView *view, const TfGeometry *geometry, const TfPlace *place, double vx, double vy)
{
  double x, y;
  for (guint turn = 0; turn < 16; turn++)
    {
      if (!tf_view_from_sun (view, geometry, place->carrington_lon_deg, place->lat_deg, &x, &y)
          || hypot (vx - x, vy - y) < 1e-6)
        return;
      tf_view_pan (view, geometry, vx - x, vy - y);
    }
}

/* What the new look is made about: the place under the pointer, else in the middle of the view. */
static gboolean
place_held (TfSession *self, double *vx, double *vy, TfPlace *place)
{
  const TfGeometry *geometry = geometry_of (self);
  *vx = self->pointer_x;
  *vy = self->pointer_y;
  if (self->pointer_in && tf_view_to_sun (&self->view, geometry, *vx, *vy, place))
    return TRUE;
  *vx = self->view.width / 2;
  *vy = self->view.height / 2;
  return !self->fitted && tf_view_to_sun (&self->view, geometry, *vx, *vy, place);
}

static gboolean
has_close_centre (TfSession *self)
{
  return self->draft != NULL || self->region != NULL;
}

/* The same point of the Sun stays under the pointer, and a part seen large stays large. A close
 * look of a chosen region is about that region. */
void
tf_session_set_look (TfSession *self, TfLook look)
{
  g_return_if_fail (TF_IS_SESSION (self));
  const TfGeometry *geometry = geometry_of (self);
  TfPlace place;
  double vx, vy;
  gboolean whole = self->fitted;
  if (look == self->view.look || geometry == NULL)
    {
      self->view.look = look;
      tf_session_fit (self);
      tf_session_emit (self, TF_SIGNAL_VIEW);
      return;
    }
  double scale = pixels_a_degree (&self->view, geometry);
  gboolean held = place_held (self, &vx, &vy, &place)
                  && !(look == TF_LOOK_CLOSE && has_close_centre (self));
  self->view.look = look;
  tf_session_fit (self);
  if (held)
    {
      if (!whole)
        tf_view_zoom (&self->view, geometry, scale / pixels_a_degree (&self->view, geometry),
                      self->view.width / 2, self->view.height / 2);
      hold (&self->view, geometry, &place, vx, vy);
      self->fitted = FALSE;
    }
  tf_session_emit (self, TF_SIGNAL_VIEW);
}

gboolean
tf_session_get_north_up (TfSession *self)
{
  return self->north_up;
}

void
tf_session_set_north_up (TfSession *self, gboolean north_up)
{
  g_return_if_fail (TF_IS_SESSION (self));
  self->north_up = north_up;
  const TfGeometry *geometry = geometry_of (self);
  if (self->fitted)
    tf_session_fit (self);
  else if (geometry != NULL && !tf_geometry_is_map (geometry))
    self->view.turn_deg = north_up ? tf_geometry_north_angle (geometry) : 0;
  tf_session_emit (self, TF_SIGNAL_VIEW);
}

double
tf_session_get_range (TfSession *self)
{
  return self->range;
}

void
tf_session_set_range (TfSession *self, double gauss)
{
  g_return_if_fail (TF_IS_SESSION (self) && isfinite (gauss));
  self->range = CLAMP (gauss, range_min, range_max);
  tf_session_emit (self, TF_SIGNAL_VIEW);
}

TfPalette
tf_session_get_palette (TfSession *self)
{
  return self->palette;
}

void
tf_session_set_palette (TfSession *self, TfPalette palette)
{
  g_return_if_fail (TF_IS_SESSION (self));
  self->palette = palette;
  tf_session_emit (self, TF_SIGNAL_VIEW);
}
