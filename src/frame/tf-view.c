/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>

#include "tf-constants.h"
#include "tf-picture.h"

/* View <-> frame pixel <-> Sun. (u, w) is the offset from the middle of the view, w up: in
 * frame pixels for DISK, in degrees for UNROLLED and CLOSE. */

typedef struct
{
  double u, w;
} Offset;

static Offset
offset_of (const TfView *view, double vx, double vy)
{
  return (Offset){ (vx - view->width / 2) / view->zoom, (view->height / 2 - vy) / view->zoom };
}

static void
point_of (const TfView *view, Offset o, double *vx, double *vy)
{
  *vx = view->width / 2 + o.u * view->zoom;
  *vy = view->height / 2 - o.w * view->zoom;
}

/* -- unrolled -------------------------------------------------------------------------------- */

static gboolean
unrolled_to_lonlat (const TfView *view, Offset o, double *lon, double *lat)
{
  double s = sin (view->centre_lat_deg * TF_DEG) + o.w * TF_DEG;
  if (!(fabs (s) <= 1) || !(fabs (o.u) <= 180))
    return FALSE;
  *lon = tf_wrap_360 (view->centre_lon_deg + o.u);
  *lat = asin (s) / TF_DEG;
  return TRUE;
}

static Offset
unrolled_from_lonlat (const TfView *view, double lon, double lat)
{
  return (Offset){ tf_wrap_180 (lon - view->centre_lon_deg),
                   (sin (lat * TF_DEG) - sin (view->centre_lat_deg * TF_DEG)) / TF_DEG };
}

/* -- close: azimuthal equal-area (Calabretta & Greisen 2002, ZEA; Snyder 1987, Lambert) -------- */

static gboolean
close_to_lonlat (const TfView *view, Offset o, double *lon, double *lat)
{
  double x = o.u * TF_DEG, y = o.w * TF_DEG, rho2 = x * x + y * y;
  double s0 = sin (view->centre_lat_deg * TF_DEG), c0 = cos (view->centre_lat_deg * TF_DEG);
  if (!(rho2 <= 4))
    return FALSE;
  double q = sqrt (1 - rho2 / 4), z = 1 - rho2 / 2; /* sin c = rho q, cos c = z */
  *lat = asin (CLAMP (z * s0 + y * q * c0, -1, 1)) / TF_DEG;
  *lon = tf_wrap_360 (view->centre_lon_deg + atan2 (x * q, z * c0 - y * q * s0) / TF_DEG);
  return TRUE;
}

static Offset
close_from_lonlat (const TfView *view, double lon, double lat)
{
  double s0 = sin (view->centre_lat_deg * TF_DEG), c0 = cos (view->centre_lat_deg * TF_DEG);
  double s = sin (lat * TF_DEG), c = cos (lat * TF_DEG), dl = (lon - view->centre_lon_deg) * TF_DEG;
  double k = sqrt (2 / MAX (1e-12, 1 + s0 * s + c0 * c * cos (dl)));
  return (Offset){ k * c * sin (dl) / TF_DEG, k * (c0 * s - s0 * c * cos (dl)) / TF_DEG };
}

static gboolean
to_lonlat (const TfView *view, double vx, double vy, double *lon, double *lat)
{
  Offset o = offset_of (view, vx, vy);
  return view->look == TF_LOOK_UNROLLED ? unrolled_to_lonlat (view, o, lon, lat)
                                        : close_to_lonlat (view, o, lon, lat);
}

/* -- the four ways --------------------------------------------------------------------------- */

gboolean
tf_view_to_pixel (const TfView *view, const TfGeometry *geometry, double vx, double vy, double *x,
                  double *y)
{
  if (view->look == TF_LOOK_DISK)
    {
      Offset o = offset_of (view, vx, vy);
      double c = cos (view->turn_deg * TF_DEG), s = sin (view->turn_deg * TF_DEG);
      *x = view->centre_x + c * o.u - s * o.w;
      *y = view->centre_y + s * o.u + c * o.w;
      return isfinite (*x) && isfinite (*y);
    }
  double lon, lat;
  *x = *y = NAN;
  return to_lonlat (view, vx, vy, &lon, &lat)
         && tf_geometry_sun_to_pixel (geometry, lon, lat, x, y, NULL);
}

gboolean
tf_view_from_pixel (const TfView *view, const TfGeometry *geometry, double x, double y, double *vx,
                    double *vy)
{
  *vx = *vy = NAN;
  if (view->look == TF_LOOK_DISK)
    {
      double c = cos (view->turn_deg * TF_DEG), s = sin (view->turn_deg * TF_DEG);
      double dx = x - view->centre_x, dy = y - view->centre_y;
      point_of (view, (Offset){ c * dx + s * dy, c * dy - s * dx }, vx, vy);
      return isfinite (*vx) && isfinite (*vy);
    }
  TfPlace place;
  return tf_geometry_pixel_to_sun (geometry, x, y, &place)
         && tf_view_from_sun (view, geometry, place.carrington_lon_deg, place.lat_deg, vx, vy);
}

gboolean
tf_view_to_sun (const TfView *view, const TfGeometry *geometry, double vx, double vy,
                TfPlace *place)
{
  double x, y, lon, lat;
  *place = (TfPlace){ NAN, NAN, NAN, NAN, NAN };
  if (view->look == TF_LOOK_DISK)
    return tf_view_to_pixel (view, geometry, vx, vy, &x, &y)
           && tf_geometry_pixel_to_sun (geometry, x, y, place);
  if (!to_lonlat (view, vx, vy, &lon, &lat))
    return FALSE;
  if (tf_geometry_sun_to_pixel (geometry, lon, lat, &x, &y, NULL)
      && tf_geometry_pixel_to_sun (geometry, x, y, place))
    return TRUE;
  *place = (TfPlace){ tf_geometry_stonyhurst_of (geometry, lon), lon, lat,
                      tf_wrap_180 (lon - tf_geometry_central_carrington (geometry)),
                      NAN }; /* behind the limb: no mu */
  return TRUE;
}

gboolean
tf_view_from_sun (const TfView *view, const TfGeometry *geometry, double lon_deg, double lat_deg,
                  double *vx, double *vy)
{
  double x, y;
  *vx = *vy = NAN;
  if (!tf_geometry_sun_to_pixel (geometry, lon_deg, lat_deg, &x, &y, NULL))
    return FALSE;
  if (view->look == TF_LOOK_DISK)
    return tf_view_from_pixel (view, geometry, x, y, vx, vy);
  point_of (view,
            view->look == TF_LOOK_UNROLLED ? unrolled_from_lonlat (view, lon_deg, lat_deg)
                                           : close_from_lonlat (view, lon_deg, lat_deg),
            vx, vy);
  return TRUE;
}

/* -- fitting and moving ---------------------------------------------------------------------- */

#define MARGIN 1.05

static void
fit_disk (TfView *view, const TfGeometry *g)
{
  double cx, cy, r = tf_geometry_disk_radius (g);
  double c = fabs (cos (view->turn_deg * TF_DEG)), s = fabs (sin (view->turn_deg * TF_DEG));
  double wide = c * g->width + s * g->height, high = s * g->width + c * g->height;
  view->centre_x = 0.5 * (g->width + 1);
  view->centre_y = 0.5 * (g->height + 1);
  if (!tf_geometry_is_map (g) && tf_geometry_disk_centre (g, &cx, &cy) && cx > 0
      && cx < g->width + 1 && cy > 0 && cy < g->height + 1 && 1.5 * r < MAX (wide, high))
    {
      view->centre_x = cx;
      view->centre_y = cy;
      wide = high = 2 * r;
    }
  view->zoom = MIN (view->width / wide, view->height / high) / MARGIN;
}

static void
fit_unrolled (TfView *view, const TfGeometry *g)
{
  double span = 180;
  view->centre_lat_deg = 0;
  view->centre_lon_deg = tf_geometry_central_carrington (g);
  if (tf_geometry_is_map (g))
    {
      TfPlace middle = { 0 };
      span = 360;
      tf_geometry_pixel_to_sun (g, 0.5 * (g->width + 1), 0.5 * (g->height + 1), &middle);
      view->centre_lon_deg = middle.carrington_lon_deg;
    }
  if (!isfinite (view->centre_lon_deg))
    view->centre_lon_deg = 0;
  view->zoom = MIN (view->width / span, view->height / (2 / TF_DEG)) / MARGIN;
}

void
tf_view_fit (TfView *view, const TfGeometry *geometry, gboolean north_up)
{
  g_return_if_fail (view->width > 0 && view->height > 0);
  double north = tf_geometry_north_angle (geometry);
  if (view->look == TF_LOOK_UNROLLED)
    fit_unrolled (view, geometry);
  else if (view->look == TF_LOOK_CLOSE)
    view->zoom = MIN (view->width, view->height)
                 / 20; /* 20 deg about the centre, which the caller has set */
  else
    {
      view->turn_deg = north_up && isfinite (north) && !tf_geometry_is_map (geometry) ? north : 0;
      fit_disk (view, geometry);
    }
}

void
tf_view_pan (TfView *view, const TfGeometry *geometry, double dx, double dy)
{
  double mx = view->width / 2 - dx, my = view->height / 2 - dy, lon, lat;
  if (view->look == TF_LOOK_DISK)
    {
      double x, y;
      if (tf_view_to_pixel (view, geometry, mx, my, &x, &y))
        {
          view->centre_x = x;
          view->centre_y = y;
        }
      return;
    }
  if (view->look == TF_LOOK_UNROLLED)
    {
      double s = CLAMP (sin (view->centre_lat_deg * TF_DEG) + dy * TF_DEG / view->zoom, -1, 1);
      view->centre_lon_deg = tf_wrap_360 (view->centre_lon_deg - dx / view->zoom);
      view->centre_lat_deg = asin (s) / TF_DEG;
    }
  else if (to_lonlat (view, mx, my, &lon, &lat))
    {
      view->centre_lon_deg = lon;
      view->centre_lat_deg = lat;
    }
}

/* What stands under (vx, vy): frame pixels, or longitude and latitude. */
static gboolean
under (const TfView *view, const TfGeometry *geometry, double vx, double vy, double place[2])
{
  return view->look == TF_LOOK_DISK
             ? tf_view_to_pixel (view, geometry, vx, vy, &place[0], &place[1])
             : to_lonlat (view, vx, vy, &place[0], &place[1]);
}

void
tf_view_zoom (TfView *view, const TfGeometry *geometry, double factor, double vx, double vy)
{
  static const double least[] = { 0.002, 0.2, 0.5 }, most[] = { 128, 400, 800 };
  double place[2], x, y;
  gboolean held = under (view, geometry, vx, vy, place);
  if (!(factor > 0))
    return;
  view->zoom = CLAMP (view->zoom * factor, least[view->look], most[view->look]);
  for (guint turn = 0; held && turn < 8;
       turn++) /* one turn but for CLOSE, where moving the centre turns the picture */
    {
      if (view->look == TF_LOOK_DISK)
        tf_view_from_pixel (view, geometry, place[0], place[1], &x, &y);
      else
        point_of (view,
                  view->look == TF_LOOK_UNROLLED ? unrolled_from_lonlat (view, place[0], place[1])
                                                 : close_from_lonlat (view, place[0], place[1]),
                  &x, &y);
      if (!isfinite (x + y) || hypot (vx - x, vy - y) < 1e-9)
        break;
      tf_view_pan (view, geometry, vx - x, vy - y);
    }
}
