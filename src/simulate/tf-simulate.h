/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Invented suns from known truth. Every frame is made from a TfSun, says SIMULATD = T in its
 * header, and has its truth written beside it as JSON. Seeded (GSL mt19937): equal input gives
 * equal bytes.
 */

#include <glib.h>
#include <json-glib/json-glib.h>

#include "tf-frame.h"
#include "tf-frame-write.h"
#include "tf-geometry.h"
#include "tf-option.h"

G_BEGIN_DECLS

#define TF_SIMULATE_ERROR (tf_simulate_error_quark ())
GQuark tf_simulate_error_quark (void);
typedef enum
{
  TF_SIMULATE_ERROR_OPTION, /* what was asked cannot be drawn, or not in that style of header */
  TF_SIMULATE_ERROR_WRITE,  /* a truth file cannot be written (a frame: TF_FRAME_ERROR_WRITE) */
  TF_SIMULATE_ERROR_CANCELLED,
} TfSimulateError;

/** TfBipole: Gaussian poles on the sphere, exact flux balance unless imbalance says otherwise;
 * the whole turns with the rotation law. */
typedef struct
{
  double lat_deg, carrington_lon_deg;        /* midpoint of the poles at the sun's epoch */
  double separation_deg, axis_tilt_deg;      /* + leader equatorward */
  int leading_polarity;                      /* 1, -1 */
  double flux_mx;                            /* of each polarity */
  double lead_radius_deg, follow_radius_deg; /* Gaussian sigma */
  double imbalance;                          /* share taken from the following pole */
  /* The following pole is broken into so many pieces, the leading one into a third of them; 0:
   * smooth. Flux and centroid of the pole stay exactly as they are. */
  guint fragments;
  /* From the epoch: flux grows linearly over grow_s from born_s, then decays with e-time decay_s
   * (0: does not decay). grow_s 0: constant at all times. */
  double born_s, grow_s, decay_s;
} TfBipole;

/** TfBlob: one signed Gaussian: decayed plage, a nest's part, a quadrupole's part. */
typedef struct
{
  double lat_deg, carrington_lon_deg, radius_deg, flux_mx; /* signed */
} TfBlob;

typedef struct _TfSun TfSun;
TfSun *tf_sun_new (TfTime epoch, guint64 seed);
void tf_sun_free (TfSun *sun);
/** tf_sun_add_bipole: @name: for the truth file; @what: "bipole", "anti-hale", "complex", ... */
void tf_sun_add_bipole (TfSun *sun, const char *name, const char *what, const TfBipole *bipole);
void tf_sun_add_quadrupole (TfSun *sun, const char *name, const TfBipole *first,
                            const TfBipole *second);
void tf_sun_add_blob (TfSun *sun, const char *name, const char *what, const TfBlob *blob);
/** tf_sun_add_network: @n small mixed-polarity elements over the sphere, fluxes exponential
 * with mean @flux_mx. */
void tf_sun_add_network (TfSun *sun, guint n, double flux_mx);
/** tf_sun_field: radial field, G, at a unit vector (Carrington frame) at @time: the truth
 * itself. */
double tf_sun_field (const TfSun *sun, TfTime time, const double unit[3]);
/** tf_sun_flux: flux of the source @name at @time, Mx: positive and negative as drawn, each
 * pole whole, before opposite polarities that overlap cancel. FALSE when there is no such
 * source. */
gboolean tf_sun_flux (const TfSun *sun, const char *name, TfTime time, double *positive_mx,
                      double *negative_mx);

/** TfHeaderStyle: the dialect a frame is written in (own spellings of real habits). */
typedef enum
{
  TF_STYLE_STANDARD, /* WCS, arcsec, HGLN/HGLT/DSUN */
  TF_STYLE_TURNED,   /* CROTA2: 179.93 deg are added to the turn that the shot asks for */
  /* X0, Y0, R0 in pixels, B0 in radians, mm-dd-yy; north up and from the Earth only */
  TF_STYLE_OLD_PIXELS,
  /* centre and semidiameter in pixels, radians, YYYY/MM/DD with GPS time; likewise */
  TF_STYLE_GROUND,
  TF_STYLE_TAI, /* TAI strings, no CUNIT */
} TfHeaderStyle;

typedef struct
{
  guint size;                  /* pixels a side */
  double scale_arcsec;         /* 0: so that the disk fills 0.92 of the side */
  double centre_dx, centre_dy; /* pixels off the middle */
  double north_angle_deg;
  double noise_gauss;
  double psf_arcsec;    /* Gaussian FWHM; 0 none */
  double quantum_gauss; /* 0: floats */
  TfHeaderStyle style;
  /* Source UNKNOWN: the Earth. carrington_lon_deg NaN: from the Stonyhurst longitude and the
   * Earth's L0. */
  TfObserver observer;
  const char *instrument; /* TELESCOP */
  const char *desk;       /* OBSERVER: who was on duty; NULL: no such card */
  gboolean intensity; /* a continuum picture, counts, with spots: a companion, no field */
  guint supersample; /* points a pixel side; 0: 2 */
} TfShot;
void tf_shot_init (TfShot *shot);

/** tf_sun_shoot: the pixels of a frame, G (NaN off the disk), with the geometry they were made
 * with. B_los = B_r mu, meant over the points of a pixel, blurred, with noise, in steps of the
 * quantum. Not for intensity pictures. */
TfFrame *tf_sun_shoot (const TfSun *sun, TfTime time, const TfShot *shot, guint64 seed,
                       const TfWork *work, GError **error);
/** tf_sun_shoot_map: Carrington map of @width columns of rotation @rotation, each column at its
 * own time. */
TfFrame *tf_sun_shoot_map (const TfSun *sun, int rotation, guint width, guint height,
                           const TfShot *shot, guint64 seed, GError **error);
/** tf_sun_write: shoots and writes FITS in the shot's style, and @path with .truth.json in
 * place of .fits beside it. */
gboolean tf_sun_write (const TfSun *sun, const char *path, TfTime time, const TfShot *shot,
                       guint64 seed, const TfWork *work, GError **error);
gboolean tf_sun_write_map (const TfSun *sun, const char *path, int rotation, guint width,
                           guint height, const TfShot *shot, guint64 seed, GError **error);
/** tf_sun_build_truth: every source with its place, flux, tilt, polarity at @time; regions
 * beyond the limb say so. */
void tf_sun_build_truth (const TfSun *sun, TfTime time, const TfShot *shot, JsonBuilder *builder);

/* -- scenarios -------------------------------------------------------------------------------- */
/** tf_simulate_demo: the Brindle Head frames into @folder: about 24 of 512 pixels, and their
 * truth. The same bytes every time. */
gboolean tf_simulate_demo (const char *folder, const TfWork *work, GError **error);

typedef struct
{
  int size;
  int n_frames;
  double start_year, cadence_hours;
  int n_regions;
  double anti_hale_share, noise_gauss;
  int style; /* TfHeaderStyle */
  int seed;
} TfSimulateParams;
extern const TfOption tf_simulate_options[];
/** tf_simulate_frames: a sun of that activity followed through the frames, into @folder. */
gboolean tf_simulate_frames (const char *folder, const TfSimulateParams *params, const TfWork *work,
                             GError **error);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfSun, tf_sun_free)

G_END_DECLS
