/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* What the files of this folder share. A source is a region, a blob or one element of the
 * network; it is drawn by elements, Gaussians on the sphere: B = peak exp (-(1 - cos b) /
 * sigma^2), b the angle to the middle, cut at (1 - cos b) / sigma^2 = TF_ELEMENT_CUT (5 sigma)
 * and normalised so that the flux within the cut is exact: flux = 2 pi R^2 sigma^2 (1 - exp
 * (-cut)) peak. (van Ballegooijen, Cartledge & Priest 1998, ApJ 501, 866, have the same shape
 * with a width of sqrt 2 sigma.) All elements of a source turn about the Sun's axis together,
 * at the rate of the source's own latitude.
 */

#include "tf-simulate.h"

enum
{
  TF_POLES_MAX = 4
};
#define TF_ELEMENT_CUT 12.5
#define TF_EXPOSURE_S  60.0

typedef struct
{
  double unit[3]; /* Carrington frame, at the epoch */
  double sigma;   /* radians */
  double flux_mx; /* signed, grown */
} TfElement;

/** TfPoleTruth: one pole as it was asked for. */
typedef struct
{
  double lon_deg, lat_deg, radius_deg, flux_mx; /* Carrington at the epoch; flux signed, grown */
} TfPoleTruth;

/** TfDrawn: what is left of a source where opposite polarities overlap: flux and centroids of
 * the sum of its elements. */
typedef struct
{
  double flux_mx[2]; /* positive, negative (>= 0); grown */
  double lon_deg[2], lat_deg[2]; /* Carrington at the epoch; NaN without that polarity */
} TfDrawn;

typedef struct
{
  char *name, *what; /* name NULL: network */
  guint first, n;    /* elements */
  double lat_deg;    /* whose rate it turns at */
  double born_s, grow_s, decay_s;
  guint n_poles;
  TfPoleTruth pole[TF_POLES_MAX]; /* bipole: leading, following */
  gboolean is_bipole;
  TfBipole bipole;
  TfDrawn drawn;
} TfSource;

/** TfLit: an element as it is at one time. */
typedef struct
{
  double unit[3];
  double peak_gauss;
  double cos_cut; /* nothing is drawn where the cosine is less */
  double inverse; /* 1 / sigma^2 */
} TfLit;

TfTime tf_sun_get_epoch (const TfSun *sun);
guint64 tf_sun_get_seed (const TfSun *sun);
guint tf_sun_get_n_sources (const TfSun *sun);
const TfSource *tf_sun_get_source (const TfSun *sun, guint k);
guint tf_sun_get_n_elements (const TfSun *sun);
/** tf_source_growth: share of the grown flux, 0 to 1. */
double tf_source_growth (const TfSource *source, double seconds);
/** tf_source_carry: how far it has moved in Carrington longitude since the epoch, deg. */
double tf_source_carry (const TfSource *source, double seconds);
/** tf_sun_light: every element at @time into @lit (tf_sun_get_n_elements); returns how many are
 * not nothing. */
guint tf_sun_light (const TfSun *sun, TfTime time, TfLit *lit);
/** tf_lit_field: the sum of @n elements at a point, G. */
double tf_lit_field (const TfLit *lit, guint n, const double unit[3]);
/** tf_element_peak: G of an element with that flux (Mx) and sigma (radians). */
double tf_element_peak (double flux_mx, double sigma);
/** tf_tangents: unit vectors to the west and north at a point that is no pole of the axis. */
void tf_tangents (const double unit[3], double west[3], double north[3]);
/** tf_source_draw: fills source->drawn. */
void tf_source_draw (TfSource *source, const TfElement *elements);

/* -- frames ----------------------------------------------------------------------------------- */
gboolean tf_shot_geometry (const TfShot *shot, TfTime time, TfGeometry *geometry, GError **error);
gboolean tf_shot_map_geometry (guint width, guint height, TfGeometry *geometry, GError **error);
/** tf_map_column_time: when the Earth's central meridian was at that longitude in rotation
 * @rotation. */
TfTime tf_map_column_time (int rotation, double carrington_lon_deg);
TfHeader *tf_style_header (const TfShot *shot, const TfGeometry *geometry, TfTime time,
                           guint64 seed);
TfHeader *tf_style_map_header (const TfShot *shot, const TfGeometry *geometry, int rotation,
                               guint64 seed);
/** tf_style_check: FALSE when the style cannot say what the shot asks for. */
gboolean tf_style_check (const TfShot *shot, GError **error);

/** tf_truth_write: the truth of a frame, or of a map (@rotation not 0), beside @path. */
gboolean tf_truth_write (const TfSun *sun, const char *path, TfTime time, int rotation,
                         const TfShot *shot, const TfGeometry *geometry, guint64 seed,
                         GError **error);

/* -- pixels ----------------------------------------------------------------------------------- */
/** tf_shoot_disk: what the detector would see: B_los, G, or counts of intensity; NaN off the
 * disk. (transfer full): width * height; NULL when cancelled. */
float *tf_shoot_disk (const TfSun *sun, TfTime time, const TfShot *shot, const TfGeometry *geometry,
                      guint64 seed, const TfWork *work, GError **error);
float *tf_shoot_map (const TfSun *sun, int rotation, const TfShot *shot, const TfGeometry *geometry,
                     guint64 seed);
/** tf_detector_blur: by the shot's PSF, what lies off the disk counting as 0 G. */
void tf_detector_blur (float *pixels, guint width, guint height, double fwhm_px);
/** tf_detector_read: noise and steps, in row order. */
void tf_detector_read (float *pixels, gsize n, double noise, double quantum, guint64 seed);

/* -- scenarios -------------------------------------------------------------------------------- */
gboolean tf_simulate_make_folder (const char *folder, GError **error);
