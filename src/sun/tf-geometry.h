/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfGeometry: pixel <-> Sun, closed forms only, immutable after tf_geometry_make_*; a plain value
 * of a few hundred bytes, cheap to copy, safe to share between threads.
 *
 * Pixels are FITS pixels: 1-based, integers at pixel centres, x along a row, y along columns.
 * Helioprojective angles: theta_x west positive, theta_y north positive, arcsec.
 * Stonyhurst and Carrington longitude: west positive; Stonyhurst (-180, 180], Carrington [0, 360).
 * CMD = longitude minus the observer's longitude.
 * mu is the exact finite-distance cosine of the angle between the local vertical and the line of
 * sight: (D cos psi - R) / d. Off the disk everything is NaN.
 * On maps (Carrington longitude x sine latitude or latitude) mu, Stonyhurst longitude and CMD are
 * NaN.
 *
 * Thompson 2006, A&A 449, 791 (projections and signs); Calabretta & Greisen 2002, A&A 395, 1077
 * (TAN, CEA, CAR).
 */

#include <glib.h>

#include "tf-observer.h"

G_BEGIN_DECLS

typedef enum
{
  TF_PROJECTION_NONE,
  TF_PROJECTION_TAN, /* helioprojective gnomonic */
  TF_PROJECTION_CEA, /* map: Carrington longitude x sine latitude */
  TF_PROJECTION_CAR, /* map: Carrington longitude x latitude */
} TfProjection;

typedef struct
{
  TfProjection projection;
  guint width, height; /* pixels */
  double crpix[2];     /* reference pixel */
  double crval_deg[2]; /* TAN: helioprojective lon, lat; maps: Carrington lon, latitude */
  double cd[2][2];     /* deg/pixel; CEA: [1][1] is d(sin lat)/pixel */
  double lonpole_deg;  /* native longitude of the celestial pole: 180 unless given */
  TfObserver observer; /* maps: source UNKNOWN */
  double radius_mm;    /* of the photosphere */
  /* derived by tf_geometry_make_*: do not set */
  double inverse[2][2];
  double rotation[3][3]; /* TAN: native unit vector -> helioprojective unit vector */
  double sin_b0, cos_b0;
  double distance_mm;
} TfGeometry;

/** TfPlace: a point of the photosphere, or all NaN. */
typedef struct
{
  double stonyhurst_lon_deg, carrington_lon_deg, lat_deg;
  double cmd_deg;
  double mu;
} TfPlace;

/**
 * tf_geometry_make: completes the derived members from the plain ones.
 * Returns: FALSE, and an all-NaN geometry, when the matrix is singular, a number is not finite, the
 *   projection is NONE, or a TAN geometry has no observer (distance must exceed the radius).
 */
gboolean tf_geometry_make (TfGeometry *geometry);
/** tf_geometry_make_disk: a TAN geometry from simple numbers: centre pixel, scale arcsec/pixel
 * (both axes), north_angle_deg: position angle of solar north counted from image up,
 * counter-clockwise. */
gboolean tf_geometry_make_disk (TfGeometry *geometry, guint width, guint height, double centre_x,
                                double centre_y, double scale_arcsec, double north_angle_deg,
                                const TfObserver *observer, double radius_mm);

/* -- one point ------------------------------------------------------------------------------- */
/** tf_geometry_pixel_to_projective: theta_x, theta_y, arcsec, in (-180 deg, 180 deg]. TAN only. */
void tf_geometry_pixel_to_projective (const TfGeometry *g, double x, double y, double *tx_arcsec,
                                      double *ty_arcsec);
gboolean tf_geometry_projective_to_pixel (const TfGeometry *g, double tx_arcsec, double ty_arcsec,
                                          double *x, double *y);
/** tf_geometry_pixel_to_sun: FALSE and NaN off the disk or off the map. */
gboolean tf_geometry_pixel_to_sun (const TfGeometry *g, double x, double y, TfPlace *place);
/**
 * tf_geometry_sun_to_pixel: from Carrington longitude and latitude, deg.
 * @mu: (out) (nullable): NaN on maps
 * Returns: FALSE when the point is behind the limb (x and y are then NaN) or the input is not
 * finite. On maps the column returned is the one within the map's own 360 deg where there is one.
 */
gboolean tf_geometry_sun_to_pixel (const TfGeometry *g, double carrington_lon_deg, double lat_deg,
                                   double *x, double *y, double *mu);
/** tf_geometry_mu: by the short form, NaN off the disk. */
double tf_geometry_mu (const TfGeometry *g, double x, double y);
/** tf_geometry_area: area on the Sun of the pixel about (x, y), Mm2: solid angle d^2 / mu; on maps
 * R^2 dlon d(sin lat). */
double tf_geometry_area (const TfGeometry *g, double x, double y);

/* -- rows, for hot loops --------------------------------------------------------------------- */
/** tf_geometry_row_mu: mu of pixels x0 .. x0+n-1 of row y; NaN off the disk, and on maps. */
void tf_geometry_row_mu (const TfGeometry *g, double y, double x0, guint n, float *mu);
/**
 * tf_geometry_row_sun: unit vectors on the Sun in the Carrington frame (x towards longitude 0, z
 * north), mu and pixel area (Mm2), of n pixels; NaN off the disk. Any of the outputs may be NULL.
 * Doubles, closed form, no trigonometry a pixel.
 */
void tf_geometry_row_sun (const TfGeometry *g, double y, double x0, guint n, double (*unit)[3],
                          double *mu, double *area);

/** tf_geometry_central_carrington: longitude of the central meridian of the frame's observer
 * (Carrington); NaN on maps. */
double tf_geometry_central_carrington (const TfGeometry *g);
double tf_geometry_stonyhurst_of (const TfGeometry *g, double carrington_lon_deg);
/** tf_geometry_radius_arcsec: asin (R/D). tf_geometry_scale_arcsec: sqrt |det cd|; NaN on maps. */
double tf_geometry_radius_arcsec (const TfGeometry *g);
double tf_geometry_scale_arcsec (const TfGeometry *g);
/** tf_geometry_north_angle: position angle of solar north from image up, counter-clockwise,
 * (-180, 180]. */
double tf_geometry_north_angle (const TfGeometry *g);
/** tf_geometry_disk_centre: pixel of the Sun's centre; FALSE on maps. */
gboolean tf_geometry_disk_centre (const TfGeometry *g, double *x, double *y);
/** tf_geometry_disk_radius: radius of the disk in pixels (mean over the axes), NaN on maps. */
double tf_geometry_disk_radius (const TfGeometry *g);
gboolean tf_geometry_is_map (const TfGeometry *g);
const char *tf_projection_name (TfProjection projection);

/* -- the sphere ------------------------------------------------------------------------------ */
/** tf_sphere_unit: unit vector of longitude and latitude, deg. */
void tf_sphere_unit (double lon_deg, double lat_deg, double unit[3]);
/** tf_sphere_lonlat: of any non-zero vector; lon in [0, 360). */
void tf_sphere_lonlat (const double vector[3], double *lon_deg, double *lat_deg);
/** tf_sphere_distance: great-circle angle, deg, exact for small and large angles. */
double tf_sphere_distance (double lon1_deg, double lat1_deg, double lon2_deg, double lat2_deg);

G_END_DECLS
