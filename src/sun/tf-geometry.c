/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-geometry.h"

#include <float.h>
#include <math.h>

#include "tf-constants.h"

/* The vectors used here and in tf-geometry-rows.c:
 *   native          (-eta, xi, 1) of the tangent plane, not normalised; xi, eta in radians
 *   helioprojective (cos ty cos tx, cos ty sin tx, sin ty), towards the Sun's centre is (1, 0, 0)
 *   from the Sun    (x west, y north, z to the observer), HCC of Thompson 2006, eq. 15
 */

/* -- making ---------------------------------------------------------------------------------- */

static void
clear (TfGeometry *g)
{
  guint width = g->width, height = g->height;
  *g = (TfGeometry){ .projection = TF_PROJECTION_NONE, .width = width, .height = height };
  g->radius_mm = g->distance_mm = g->sin_b0 = g->cos_b0 = g->lonpole_deg = NAN;
  for (int i = 0; i < 2; i++)
    {
      g->crpix[i] = g->crval_deg[i] = NAN;
      for (int j = 0; j < 2; j++)
        g->cd[i][j] = g->inverse[i][j] = NAN;
    }
  for (int i = 0; i < 9; i++)
    g->rotation[i / 3][i % 3] = NAN;
  g->observer = (TfObserver){ NAN, NAN, NAN, NAN, TF_OBSERVER_UNKNOWN };
}

static gboolean
invert (TfGeometry *g)
{
  double a = g->cd[0][0], b = g->cd[0][1], c = g->cd[1][0], d = g->cd[1][1];
  double det = a * d - b * c, size = (fabs (a) + fabs (b)) * (fabs (c) + fabs (d));
  if (!isfinite (size) || !(fabs (det) > 1e-12 * size))
    return FALSE;
  g->inverse[0][0] = d / det;
  g->inverse[0][1] = -b / det;
  g->inverse[1][0] = -c / det;
  g->inverse[1][1] = a / det;
  return TRUE;
}

/* Calabretta & Greisen 2002, eqs. 2, 5 and 7, for a zenithal projection; transposed, so that it
 * leads from native to helioprojective. */
static void
make_rotation (TfGeometry *g)
{
  double a = g->crval_deg[0] * TF_DEG, d = g->crval_deg[1] * TF_DEG, p = g->lonpole_deg * TF_DEG;
  double sa = sin (a), ca = cos (a), sd = sin (d), cd = cos (d), sp = sin (p), cp = cos (p);
  g->rotation[0][0] = -sa * sp - ca * cp * sd;
  g->rotation[1][0] = ca * sp - sa * cp * sd;
  g->rotation[2][0] = cp * cd;
  g->rotation[0][1] = sa * cp - ca * sp * sd;
  g->rotation[1][1] = -ca * cp - sa * sp * sd;
  g->rotation[2][1] = sp * cd;
  g->rotation[0][2] = ca * cd;
  g->rotation[1][2] = sa * cd;
  g->rotation[2][2] = sd;
}

static gboolean
make_tan (TfGeometry *g)
{
  const TfObserver *o = &g->observer;
  double all
      = o->distance_m + o->b0_deg + o->stonyhurst_lon_deg + o->carrington_lon_deg + g->lonpole_deg;
  g->distance_mm = o->distance_m * 1e-6;
  if (!isfinite (all) || !(g->distance_mm > g->radius_mm) || fabs (o->b0_deg) > 90.0
      || fabs (g->crval_deg[1]) > 90.0)
    return FALSE;
  make_rotation (g);
  g->sin_b0 = sin (o->b0_deg * TF_DEG);
  g->cos_b0 = cos (o->b0_deg * TF_DEG);
  return TRUE;
}

/* A map's axes are longitude and latitude and nothing between. */
static gboolean
make_map (TfGeometry *g)
{
  double scale = fabs (g->cd[0][0]) + fabs (g->cd[1][1]);
  double between = fabs (g->cd[0][1]) + fabs (g->cd[1][0]);
  g->observer = (TfObserver){ NAN, NAN, NAN, NAN, TF_OBSERVER_UNKNOWN };
  g->distance_mm = g->sin_b0 = g->cos_b0 = NAN;
  for (int i = 0; i < 9; i++)
    g->rotation[i / 3][i % 3] = NAN;
  return between <= 1e-9 * scale && fabs (g->crval_deg[1]) <= 90.0;
}

gboolean
tf_geometry_make (TfGeometry *geometry)
{
  TfGeometry *g = geometry;
  double all = g->crpix[0] + g->crpix[1] + g->crval_deg[0] + g->crval_deg[1] + g->radius_mm;
  gboolean good = isfinite (all) && g->radius_mm > 0.0 && invert (g);
  if (good && g->projection == TF_PROJECTION_TAN)
    good = make_tan (g);
  else
    good = good && tf_geometry_is_map (g) && make_map (g);
  if (!good)
    clear (g);
  return good;
}

gboolean
tf_geometry_make_disk (TfGeometry *geometry, guint width, guint height, double centre_x,
                       double centre_y, double scale_arcsec, double north_angle_deg,
                       const TfObserver *observer, double radius_mm)
{
  double s = scale_arcsec / 3600.0, c = cos (north_angle_deg * TF_DEG),
         n = sin (north_angle_deg * TF_DEG);
  *geometry = (TfGeometry){
    .projection = TF_PROJECTION_TAN,
    .width = width,
    .height = height,
    .crpix = { centre_x, centre_y },
    .cd = { { s * c, s * n }, { -s * n, s * c } },
    .lonpole_deg = 180.0,
    .observer = *observer,
    .radius_mm = radius_mm,
  };
  return tf_geometry_make (geometry);
}

/* -- the tangent plane ----------------------------------------------------------------------- */

static void
pixel_to_vector (const TfGeometry *g, double x, double y, double w[3])
{
  double dx = x - g->crpix[0], dy = y - g->crpix[1];
  double xi = (g->cd[0][0] * dx + g->cd[0][1] * dy) * TF_DEG,
         eta = (g->cd[1][0] * dx + g->cd[1][1] * dy) * TF_DEG;
  for (int k = 0; k < 3; k++)
    w[k] = -g->rotation[k][0] * eta + g->rotation[k][1] * xi + g->rotation[k][2];
}

/* FALSE for a direction at right angles to the axis of the projection or behind it. */
static gboolean
vector_to_pixel (const TfGeometry *g, const double w[3], double *x, double *y)
{
  double native[3], size = fabs (w[0]) + fabs (w[1]) + fabs (w[2]);
  for (int k = 0; k < 3; k++)
    native[k] = g->rotation[0][k] * w[0] + g->rotation[1][k] * w[1] + g->rotation[2][k] * w[2];
  *x = *y = NAN;
  if (!(native[2] > 1e-9 * size))
    return FALSE;
  double xi = native[1] / native[2] / TF_DEG, eta = -native[0] / native[2] / TF_DEG;
  *x = g->crpix[0] + g->inverse[0][0] * xi + g->inverse[0][1] * eta;
  *y = g->crpix[1] + g->inverse[1][0] * xi + g->inverse[1][1] * eta;
  return TRUE;
}

void
tf_geometry_pixel_to_projective (const TfGeometry *g, double x, double y, double *tx_arcsec,
                                 double *ty_arcsec)
{
  *tx_arcsec = *ty_arcsec = NAN;
  if (g->projection != TF_PROJECTION_TAN)
    return;
  double w[3];
  pixel_to_vector (g, x, y, w);
  *tx_arcsec = tf_wrap_180 (atan2 (w[1], w[0]) / TF_DEG) * 3600.0;
  *ty_arcsec = atan2 (w[2], hypot (w[0], w[1])) / TF_ARCSEC;
}

gboolean
tf_geometry_projective_to_pixel (const TfGeometry *g, double tx_arcsec, double ty_arcsec, double *x,
                                 double *y)
{
  double w[3];
  *x = *y = NAN;
  if (g->projection != TF_PROJECTION_TAN)
    return FALSE;
  tf_sphere_unit (tx_arcsec / 3600.0, ty_arcsec / 3600.0, w);
  return vector_to_pixel (g, w, x, y);
}

/* -- maps ------------------------------------------------------------------------------------ */

static gboolean
map_to_sun (const TfGeometry *g, double x, double y, TfPlace *place)
{
  double lon = g->crval_deg[0] + g->cd[0][0] * (x - g->crpix[0]);
  double step = g->cd[1][1] * (y - g->crpix[1]), lat;
  if (g->projection == TF_PROJECTION_CEA)
    {
      double s = sin (g->crval_deg[1] * TF_DEG) + step;
      lat = fabs (s) <= 1.0 ? asin (s) / TF_DEG : NAN;
    }
  else
    lat = g->crval_deg[1] + step;
  if (!isfinite (lon) || !(fabs (lat) <= 90.0) || x < 0.5 || x > g->width + 0.5 || y < 0.5
      || y > g->height + 0.5)
    return FALSE;
  place->carrington_lon_deg = tf_wrap_360 (lon);
  place->lat_deg = lat;
  return TRUE;
}

/* Of the columns a turn apart the one inside the map; else the one nearest its middle. */
static double
map_column (const TfGeometry *g, double x)
{
  double turn = fabs (360.0 * g->inverse[0][0]);
  double inside = x - floor ((x - 0.5) / turn) * turn;
  if (inside <= g->width + 0.5)
    return inside;
  double middle = 0.5 * (g->width + 1.0);
  return x - round ((x - middle) / turn) * turn;
}

static gboolean
map_from_sun (const TfGeometry *g, double carrington_lon_deg, double lat_deg, double *x, double *y)
{
  double along = g->projection == TF_PROJECTION_CEA
                     ? sin (lat_deg * TF_DEG) - sin (g->crval_deg[1] * TF_DEG)
                     : lat_deg - g->crval_deg[1];
  if (!isfinite (carrington_lon_deg) || !(fabs (lat_deg) <= 90.0))
    return FALSE;
  *x = map_column (g, g->crpix[0] + g->inverse[0][0] * (carrington_lon_deg - g->crval_deg[0]));
  *y = g->crpix[1] + g->inverse[1][1] * along;
  return TRUE;
}

/* Of the pixels of row @y; what reaches over a pole is not counted. */
static double
map_area (const TfGeometry *g, double y)
{
  double edges[2];
  for (int k = 0; k < 2; k++)
    {
      double step = g->cd[1][1] * (y - 0.5 + k - g->crpix[1]);
      if (g->projection == TF_PROJECTION_CEA)
        edges[k] = CLAMP (sin (g->crval_deg[1] * TF_DEG) + step, -1.0, 1.0);
      else
        edges[k] = sin (CLAMP (g->crval_deg[1] + step, -90.0, 90.0) * TF_DEG);
    }
  return g->radius_mm * g->radius_mm * fabs (g->cd[0][0]) * TF_DEG * fabs (edges[1] - edges[0]);
}

/* -- one point ------------------------------------------------------------------------------- */

/* Where the line of sight @w (not normalised) meets the photosphere: mu, and @t so that t w is the
 * point as seen from the observer, Mm. D sin rho = R sin (arccos mu), so mu needs no trigonometry.
 */
static gboolean
meet (const TfGeometry *g, const double w[3], double *mu, double *t)
{
  double side2 = w[1] * w[1] + w[2] * w[2], length2 = side2 + w[0] * w[0];
  double d = g->distance_mm, r = g->radius_mm, inside = r * r * length2 - d * d * side2;
  if (!(inside >= 0.0) || !(w[0] > 0.0))
    return FALSE;
  *mu = sqrt (inside / length2) / r;
  *t = (d * w[0] - sqrt (inside)) / length2;
  return TRUE;
}

static void
hcc_to_place (const TfGeometry *g, const double p[3], TfPlace *place)
{
  double north = p[1] * g->cos_b0 + p[2] * g->sin_b0, front = p[2] * g->cos_b0 - p[1] * g->sin_b0;
  const TfObserver *o = &g->observer;
  place->cmd_deg = tf_wrap_180 (atan2 (p[0], front) / TF_DEG);
  place->lat_deg = atan2 (north, hypot (p[0], front)) / TF_DEG;
  place->stonyhurst_lon_deg = tf_wrap_180 (place->cmd_deg + o->stonyhurst_lon_deg);
  place->carrington_lon_deg = tf_wrap_360 (place->cmd_deg + o->carrington_lon_deg);
}

gboolean
tf_geometry_pixel_to_sun (const TfGeometry *g, double x, double y, TfPlace *place)
{
  *place = (TfPlace){ NAN, NAN, NAN, NAN, NAN };
  if (tf_geometry_is_map (g))
    return map_to_sun (g, x, y, place);
  double w[3], t;
  pixel_to_vector (g, x, y, w);
  if (g->projection != TF_PROJECTION_TAN || !meet (g, w, &place->mu, &t))
    return FALSE;
  hcc_to_place (g, (const double[3]){ t * w[1], t * w[2], g->distance_mm - t * w[0] }, place);
  return TRUE;
}

gboolean
tf_geometry_sun_to_pixel (const TfGeometry *g, double carrington_lon_deg, double lat_deg, double *x,
                          double *y, double *mu)
{
  double n[3], d = g->distance_mm, r = g->radius_mm;
  *x = *y = NAN;
  if (mu != NULL)
    *mu = NAN;
  if (tf_geometry_is_map (g))
    return map_from_sun (g, carrington_lon_deg, lat_deg, x, y);
  if (g->projection != TF_PROJECTION_TAN || !(fabs (lat_deg) <= 90.0))
    return FALSE;
  tf_sphere_unit (carrington_lon_deg - g->observer.carrington_lon_deg, lat_deg, n);
  double north = n[2] * g->cos_b0 - n[0] * g->sin_b0, towards = n[2] * g->sin_b0 + n[0] * g->cos_b0;
  if (!(d * towards >= r))
    return FALSE;
  double w[3] = { d - r * towards, r * n[1], r * north };
  if (!vector_to_pixel (g, w, x, y))
    return FALSE;
  if (mu != NULL)
    *mu = (d * towards - r) / sqrt (w[0] * w[0] + w[1] * w[1] + w[2] * w[2]);
  return TRUE;
}

double
tf_geometry_mu (const TfGeometry *g, double x, double y)
{
  double w[3], mu, t;
  if (g->projection != TF_PROJECTION_TAN)
    return NAN;
  pixel_to_vector (g, x, y, w);
  return meet (g, w, &mu, &t) ? mu : NAN;
}

/* The solid angle of a pixel of a gnomonic image is det cd / (1 + xi^2 + eta^2)^(3/2); the distance
 * of the point is t |w|, and |w|^2 = 1 + xi^2 + eta^2. */
double
tf_geometry_area (const TfGeometry *g, double x, double y)
{
  TfPlace place;
  double w[3], mu, t;
  if (tf_geometry_is_map (g))
    return map_to_sun (g, x, y, &place) ? map_area (g, y) : NAN;
  if (g->projection != TF_PROJECTION_TAN)
    return NAN;
  pixel_to_vector (g, x, y, w);
  if (!meet (g, w, &mu, &t))
    return NAN;
  double det = fabs (g->cd[0][0] * g->cd[1][1] - g->cd[0][1] * g->cd[1][0]) * TF_DEG * TF_DEG;
  return t * t * det / (mu * sqrt (w[0] * w[0] + w[1] * w[1] + w[2] * w[2]));
}

/* -- the whole frame ------------------------------------------------------------------------- */

gboolean
tf_geometry_is_map (const TfGeometry *g)
{
  return g->projection == TF_PROJECTION_CEA || g->projection == TF_PROJECTION_CAR;
}

double
tf_geometry_central_carrington (const TfGeometry *g)
{
  return g->projection == TF_PROJECTION_TAN ? tf_wrap_360 (g->observer.carrington_lon_deg) : NAN;
}

double
tf_geometry_stonyhurst_of (const TfGeometry *g, double carrington_lon_deg)
{
  if (g->projection != TF_PROJECTION_TAN)
    return NAN;
  return tf_wrap_180 (carrington_lon_deg - g->observer.carrington_lon_deg
                      + g->observer.stonyhurst_lon_deg);
}

double
tf_geometry_radius_arcsec (const TfGeometry *g)
{
  return g->projection == TF_PROJECTION_TAN ? asin (g->radius_mm / g->distance_mm) / TF_ARCSEC
                                            : NAN;
}

double
tf_geometry_scale_arcsec (const TfGeometry *g)
{
  if (g->projection != TF_PROJECTION_TAN)
    return NAN;
  return sqrt (fabs (g->cd[0][0] * g->cd[1][1] - g->cd[0][1] * g->cd[1][0])) * 3600.0;
}

/* The derivative of the projection at the Sun's centre towards north. */
double
tf_geometry_north_angle (const TfGeometry *g)
{
  if (tf_geometry_is_map (g))
    return g->cd[1][1] > 0.0 ? 0.0 : 180.0;
  if (g->projection != TF_PROJECTION_TAN)
    return NAN;
  const double *centre = g->rotation[0], *north = g->rotation[2];
  double xi = north[1] * centre[2] - centre[1] * north[2];
  double eta = centre[0] * north[2] - north[0] * centre[2];
  double dx = g->inverse[0][0] * xi + g->inverse[0][1] * eta,
         dy = g->inverse[1][0] * xi + g->inverse[1][1] * eta;
  return tf_wrap_180 (atan2 (-dx, dy) / TF_DEG);
}

gboolean
tf_geometry_disk_centre (const TfGeometry *g, double *x, double *y)
{
  return tf_geometry_projective_to_pixel (g, 0.0, 0.0, x, y);
}

double
tf_geometry_disk_radius (const TfGeometry *g)
{
  if (g->projection != TF_PROJECTION_TAN)
    return NAN;
  double d = g->distance_mm, r = g->radius_mm, deg = r / sqrt ((d - r) * (d + r)) / TF_DEG;
  return 0.5 * deg
         * (1.0 / hypot (g->cd[0][0], g->cd[1][0]) + 1.0 / hypot (g->cd[0][1], g->cd[1][1]));
}

const char *
tf_projection_name (TfProjection projection)
{
  switch (projection)
    {
    case TF_PROJECTION_TAN:
      return "TAN";
    case TF_PROJECTION_CEA:
      return "CEA";
    case TF_PROJECTION_CAR:
      return "CAR";
    case TF_PROJECTION_NONE:
    default:
      return "none";
    }
}
