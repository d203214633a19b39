/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfMeasure: what one outline on one frame holds, method "flux-centroid/1". A plain struct; nothing in it depends on the cycle.
 *
 * Flux in Mx, field in G, angles deg, lengths Mm. Longitudes: Stonyhurst (-180, 180] (NaN on maps) and Carrington [0, 360).
 * leading = the western pole. axis_bearing: from following to leading pole, from west towards north, (-90, 90]; always there with
 * two poles. axis_tilt: positive = leader equatorward in both hemispheres; NaN when the poles straddle the equator.
 * hemisphere and latitude = midpoint of the two poles. NaN means "no value" and becomes null in JSON, NULL in the ledger.
 */

#include <glib.h>
#include <json-glib/json-glib.h>

#include "tf-correction.h"
#include "tf-frame.h"
#include "tf-mask.h"
#include "tf-option.h"
#include "tf-outline.h"

G_BEGIN_DECLS

#define TF_MEASURE_METHOD "flux-centroid/1"

#define TF_REGION_ERROR (tf_region_error_quark ())
GQuark tf_region_error_quark (void);
typedef enum
{
  TF_REGION_ERROR_EMPTY,     /* no pixel of the frame lies inside the outline */
  TF_REGION_ERROR_OPTION,    /* options that cannot go together */
  TF_REGION_ERROR_KIND,      /* not on this kind of frame */
  TF_REGION_ERROR_CANCELLED,
} TfRegionError;

typedef enum
{
  TF_FIELD_USED_RADIAL,    /* B_los / mu, or a radial product as it is */
  TF_FIELD_USED_OBSERVED,  /* as observed */
  TF_FIELD_USED_POTENTIAL, /* potential-field radial estimate (tf-potential.h); a radial product as it is */
} TfFieldUsed;
typedef enum
{
  TF_FLOOR_LOCAL, /* |B as observed| >= k sigma(mu), or >= floor_gauss */
  TF_FLOOR_EVEN,  /* |B used| >= floor_gauss */
} TfFloorKind;

typedef struct
{
  int field_used;        /* TfFieldUsed */
  int floor_kind;        /* TfFloorKind */
  double floor_sigma;    /* 3: local floor in sigma when floor_gauss is NaN */
  double floor_gauss;    /* NaN: from sigma; even floor: this value, or 3 sigma(0.5)/0.5 of this frame when NaN */
  double mu_min;         /* 0.17 */
  int tilt_form;         /* 0 planar with cos of the mean latitude; 1 great circle bearing at the midpoint */
  int law;               /* rotation law, for carrying the outline to the frame */
  double scale;          /* instrument scale that multiplies the field; NaN: not scaled (1) */
  double strong_floors;  /* 3: witness (b) */
  double piece_share;    /* 0.15 */
  double smooth_px;      /* 0.9: Gaussian of the noise term's field */
  double floor_step;     /* 0.2: the floor term */
  double outline_deg;    /* 0.5: the outline term's amplitude ... */
  double outline_share;  /* 0.08: ... or this share of the radius, whichever is more */
  gboolean outline_term; /* computed at rest, not while dragging */
  double ephemeral_mx;   /* 3e20 */
  int realisations;      /* 0; 500 on demand: seeded noise realisations instead of the formula */
  int seed;
  double potential_step_mm, potential_margin_mm; /* 1, 60: grid and surroundings of the potential estimate */
} TfMeasureParams;
extern const TfOption tf_measure_options[];

typedef struct
{
  double flux_mx, flux_sigma_mx; /* sigma: noise, outline and floor in quadrature */
  double flux_noise_mx;          /* the noise term alone */
  double lon_deg, carrington_lon_deg, lat_deg;
  double place_sigma_deg, place_noise_deg;
  double rms_radius_deg;         /* about the pole */
  guint pixels;
  double magnetic_area_msh;      /* millionths of the hemisphere */
  gboolean pinned;
} TfPole;

typedef struct
{
  double noise, outline, floor, total; /* deg */
} TfTiltTerms;

enum
{
  TF_WITNESS_ABSENT = 2 /* a witness that is not there: null in JSON */
};

typedef struct
{
  TfTime time;
  TfFieldUsed field_used;
  TfFloorKind floor_kind;
  double floor_gauss;    /* local: at the region's mean mu */
  double noise_gauss;    /* sigma at the region */
  double noise_flux_mx;  /* unsigned flux expected of noise alone above the floor */
  double scale;          /* NaN: not scaled */
  TfPole positive, negative;
  int leading_polarity;  /* 1, -1; 0 without two poles */
  gboolean leading_sure;
  gboolean leader_flips; /* the western pole is another with the floor at 1 +- floor_step; not kept in the ledger */
  int witnesses[3];      /* 1, -1, 0 undecided, TF_WITNESS_ABSENT */
  double lat_deg, carrington_lon_deg, stonyhurst_lon_deg, cmd_deg, mu; /* midpoint of the poles, or the one pole's place */
  double axis_bearing_deg, axis_tilt_deg;
  TfTiltTerms tilt_terms;
  double separation_deg, separation_sigma_deg, separation_noise_deg, separation_mm;
  double compactness;
  guint pieces;
  double flux_unsigned_mx, imbalance;
  gboolean ephemeral;    /* unsigned flux below ephemeral_mx */
  double axial_dipole_gauss, axial_dipole_sigma_gauss, axial_dipole_poles_gauss;
  TfNotes *cautions;     /* owned */
} TfMeasure;

void tf_measure_params_init (TfMeasureParams *params);
/** tf_measure_dup_method: the canonical text of @params, which keys the method in the ledger; with the person's @correction (nullable) of the
 * frame's geometry, if any: " geometry=x,y,radius,north" at its end. tf_measure_read_method: the inverse; FALSE when it is not of this version. */
char *tf_measure_dup_method (const TfMeasureParams *params, const TfCorrection *correction);
gboolean tf_measure_read_method (const char *method, TfMeasureParams *params, TfCorrection *correction);
/** tf_measure_dup_even_method: the canonical text of @method with the even floor @floor_gauss instead of its own; NULL when @method is not of
 * this version. @params: (out): what it stands for. A correction of the geometry stays in it. */
char *tf_measure_dup_even_method (const char *method, double floor_gauss, TfMeasureParams *params);
/** tf_measure_clear: frees what it owns and zeroes. */
void tf_measure_clear (TfMeasure *measure);
void tf_measure_copy (TfMeasure *to, const TfMeasure *from);

/**
 * tf_measure_region: measures @outline on @frame.
 * Returns: FALSE with TF_REGION_ERROR_EMPTY when there is nothing inside. Unipolar, weak or doubtful regions are measured, with cautions.
 */
gboolean tf_measure_region (TfMeasure *measure, const TfFrame *frame, const TfOutline *outline,
                            const TfMeasureParams *params, GError **error);
/** tf_measure_masked: the same from a mask already made (dragging); the outline term needs @outline, else NULL. */
gboolean tf_measure_masked (TfMeasure *measure, const TfFrame *frame, const TfMask *mask, const TfOutline *outline,
                            const TfMeasureParams *params, GError **error);
/** tf_even_floor: 3 sigma (mu = 0.5) / 0.5 of one frame, G: the median over a study's frames is its even floor. */
double tf_even_floor (const TfFrame *frame);

/** tf_tilt: the two angles from two poles (deg): @bearing_deg and @axis_tilt_deg (NaN when straddling).
 * West pole first; @great_circle: bearing at the midpoint instead of planar. */
void tf_tilt (double lead_lon_deg, double lead_lat_deg, double follow_lon_deg, double follow_lat_deg, gboolean great_circle,
              double *bearing_deg, double *axis_tilt_deg);

/** tf_measure_build_members: all members of 6-commands "measure" that do not depend on the cycle, into the open object: from "time" to
 * "axial_dipole_gauss", and "cautions"; "complexity" is tf_complexity_build_members (). */
void tf_measure_build_members (const TfMeasure *measure, JsonBuilder *builder);
const char *tf_field_used_name (TfFieldUsed used); /* "radial" "as observed" "potential" */
const char *tf_floor_kind_name (TfFloorKind kind); /* "local" "even" */

G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (TfMeasure, tf_measure_clear)

G_END_DECLS
