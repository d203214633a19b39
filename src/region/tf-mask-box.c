/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-mask-box-private.h"

#include <math.h>

#include "tf-constants.h"

/* Edges are followed in steps of at most this, deg. */
static const double STEP_DEG = 1.0;

typedef struct
{
  double x0, x1, y0, y1; /* FITS pixels */
  gboolean hidden;       /* some point is behind the limb */
  double mu_min;         /* smallest seen */
} Extent;

static void
extend (Extent *extent, double x, double y, double margin)
{
  extent->x0 = MIN (extent->x0, x - margin);
  extent->x1 = MAX (extent->x1, x + margin);
  extent->y0 = MIN (extent->y0, y - margin);
  extent->y1 = MAX (extent->y1, y + margin);
}

/* On a map columns are counted from the middle of the outline, so that it is not torn at
 * longitude 0; what lies over the map's own edge is another time and stays outside. */
static gboolean
place (const TfGeometry *g, double centre_lon, const double unit[3], double *x, double *y,
       double *mu)
{
  double lon, lat;
  tf_sphere_lonlat (unit, &lon, &lat);
  if (!tf_geometry_is_map (g))
    return tf_geometry_sun_to_pixel (g, lon, lat, x, y, mu);
  *mu = 1.0;
  if (!tf_geometry_sun_to_pixel (g, centre_lon, lat, x, y, NULL))
    return FALSE;
  *x += tf_wrap_180 (lon - centre_lon) / g->cd[0][0];
  return TRUE;
}

static void
extend_edge (Extent *extent, const TfGeometry *g, double centre_lon, const TfVertex *a,
             const TfVertex *b)
{
  double p[3], q[3];
  tf_sphere_unit (a->lon_deg, a->lat_deg, p);
  tf_sphere_unit (b->lon_deg, b->lat_deg, q);
  double angle = tf_sphere_distance (a->lon_deg, a->lat_deg, b->lon_deg, b->lat_deg);
  guint n = (guint)MAX (1.0, ceil (angle / STEP_DEG));
  for (guint k = 0; k < n; k++)
    {
      double x, y, mu, t = (double)k / n;
      double unit[3]
          = { p[0] + t * (q[0] - p[0]), p[1] + t * (q[1] - p[1]), p[2] + t * (q[2] - p[2]) };
      if (!place (g, centre_lon, unit, &x, &y, &mu))
        {
          extent->hidden = TRUE;
          continue;
        }
      extent->mu_min = MIN (extent->mu_min, mu);
      extend (extent, x, y, 2.0);
    }
}

/* The limb inside the outline belongs to the seen part's border. */
static void
extend_limb (Extent *extent, const TfGeometry *g, const TfFill *fill)
{
  enum
  {
    POINTS = 1440
  };
  double to[3], a[3], b[3];
  double l0 = tf_geometry_central_carrington (g), b0 = g->observer.b0_deg;
  tf_sphere_unit (l0, b0, to);
  tf_sphere_unit (l0 + 90.0, 0.0, a);
  tf_sphere_unit (b0 < 0.0 ? l0 : l0 + 180.0, 90.0 - fabs (b0), b);
  double psi = acos (g->radius_mm / g->distance_mm) - 1e-4;
  double margin = 2.0 + 2.0 * TF_PI * tf_geometry_disk_radius (g) / POINTS;
  for (guint k = 0; k < POINTS; k++)
    {
      double unit[3], x, y, mu, t = 2.0 * TF_PI * k / POINTS;
      for (guint i = 0; i < 3; i++)
        unit[i] = cos (psi) * to[i] + sin (psi) * (cos (t) * a[i] + sin (t) * b[i]);
      if (tf_fill_contains (fill, unit) && place (g, 0.0, unit, &x, &y, &mu))
        extend (extent, x, y, margin);
    }
}

/* An outline about a pole of the Sun takes every column of a map. */
static void
extend_poles (Extent *extent, const TfGeometry *g, const TfFill *fill)
{
  for (int sign = -1; sign <= 1; sign += 2)
    {
      double unit[3] = { 0.0, 0.0, sign };
      if (!tf_fill_contains (fill, unit))
        continue;
      extend (extent, 0.0, sign * (g->cd[1][1] < 0.0 ? -1.0 : 1.0) > 0.0 ? g->height + 1.0 : 0.0,
              0.0);
      extend (extent, g->width + 1.0, extent->y0, 0.0);
    }
}

static TfMaskBox
clip (const Extent *extent, const TfGeometry *g, double mu_min)
{
  TfMaskBox box = { 0 };
  double w = g->width, h = g->height;
  double x0 = MAX (1.0, floor (extent->x0)), x1 = MIN (w, ceil (extent->x1));
  double y0 = MAX (1.0, floor (extent->y0)), y1 = MIN (h, ceil (extent->y1));
  if (!(x1 >= x0) || !(y1 >= y0))
    return box;
  box.x0 = (guint)(x0 - 1.0);
  box.y0 = (guint)(y0 - 1.0);
  box.width = (guint)(x1 - x0) + 1;
  box.height = (guint)(y1 - y0) + 1;
  box.whole = !extent->hidden && extent->mu_min >= mu_min && extent->x0 >= 0.5
              && extent->x1 <= w + 0.5 && extent->y0 >= 0.5 && extent->y1 <= h + 0.5;
  return box;
}

TfMaskBox
tf_mask_box (const TfGeometry *geometry, const TfOutline *outline, const TfFill *fill,
             double mu_min)
{
  Extent extent = { INFINITY, -INFINITY, INFINITY, -INFINITY, FALSE, 1.0 };
  double lon, lat, radius;
  tf_outline_get_cap (outline, &lon, &lat, &radius);
  for (guint r = 0; r < tf_outline_get_n_rings (outline); r++)
    {
      guint n;
      const TfVertex *ring = tf_outline_get_ring (outline, r, FALSE, &n);
      for (guint k = 0; k < n; k++)
        extend_edge (&extent, geometry, lon, &ring[k], &ring[(k + 1) % n]);
    }
  if (tf_geometry_is_map (geometry))
    extend_poles (&extent, geometry, fill);
  else if (extent.hidden)
    extend_limb (&extent, geometry, fill);
  return clip (&extent, geometry, mu_min);
}
