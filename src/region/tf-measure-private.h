/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* What the files of the measurement share.
 *
 * Field, floor and sigma of a sample are in (scaled) gauss as observed, whatever field is
 * used; a sample's weight turns gauss as observed into Mx: area / mu for the radial field of a
 * line-of-sight frame, else area. So a floor on the radial field is floor * mu here, and noise
 * is always that of the observed field. Index 0 is the positive polarity, 1 the negative.
 */

#include <glib.h>

#include "tf-measure.h"
#include "tf-potential.h"

G_BEGIN_DECLS

enum
{
  TF_POSITIVE,
  TF_NEGATIVE
};

/* Levels of |field| / floor at which sums are kept; each holds all that is above it. */
typedef enum
{
  TF_LEVEL_LOW,    /* floor * (1 - step) */
  TF_LEVEL_BASE,   /* floor */
  TF_LEVEL_HIGH,   /* floor * (1 + step) */
  TF_LEVEL_STRONG, /* floor * strong_floors */
  TF_N_LEVELS
} TfFloorLevel;

typedef struct
{
  float field, floor, sigma;
  float weight; /* Mx a gauss as observed */
} TfSampled;

/* The greatest |field| of one sign in the frame's own values. */
typedef struct
{
  float value;
  guint n; /* pixels that have exactly it */
} TfExtreme;

/* A mask's pixels made ready to be summed. */
typedef struct
{
  const TfFrame *frame;
  const TfMask *mask;
  const TfMeasureParams *params;
  guint n;
  const TfMaskPixel *pixels;
  TfSampled *samples;
  float *added; /* G as observed: what the potential adds, in the field already; else NULL */
  TfExtreme extreme[2];
  double mean_mu;    /* maps: 1 */
  double mean_abs_z; /* of the unit vectors */
} TfRegionSamples;

typedef struct
{
  double flux;   /* Mx */
  double sum[3]; /* of flux * unit vector */
  double area;   /* Mm2 */
  double area_z; /* of area * sin (latitude) */
  guint n;
} TfSum;

typedef struct
{
  TfSum at[TF_N_LEVELS][2];
} TfSums;

/* Two poles and what follows from them. */
typedef struct
{
  gboolean has[2], pinned[2];
  double flux[2];
  double unit[2][3], lon[2], lat[2];
  double radius[2]; /* rms about the pole, deg */
  int west;         /* index of the western pole; -1 without two poles */
  double dx, dy;    /* leading - following: longitude * cos (mean latitude), latitude; deg */
  double bearing, tilt, separation;
  double dipole; /* G */
} TfAxis;

/* One-sigma of one term. */
typedef struct
{
  double flux[2], place[2], tilt, separation, dx, dipole;
} TfSpread;

/* tf-measure-sums.c */
/** tf_region_samples_new: @potential: (nullable): when it is the field used. */
TfRegionSamples *
tf_region_samples_new (const TfFrame *frame, const TfMask *mask, const TfMeasureParams *params,
                       const TfPotential *potential);
void tf_region_samples_free (TfRegionSamples *samples);
void tf_region_sums (const TfRegionSamples *samples, TfSums *sums);
static inline void
tf_sum_add (TfSum *sum, const double unit[3], double area, double flux)
{
  sum->flux += flux;
  sum->sum[0] += flux * unit[0];
  sum->sum[1] += flux * unit[1];
  sum->sum[2] += flux * unit[2];
  sum->area += area;
  sum->area_z += area * unit[2];
  sum->n++;
}
/** tf_region_floor: as observed; tf_region_sigma: of a pixel; at mu (maps: sin |latitude|). */
double tf_region_even_floor (const TfFrame *frame, const TfMeasureParams *params);
double tf_region_scale (const TfMeasureParams *params);
double tf_region_sigma (const TfFrame *frame, double mu, double abs_z);
gboolean tf_region_divides (const TfFrame *frame, const TfMeasureParams *params);
void tf_axis_from_sums (TfAxis *axis, const TfSum sums[2], const TfOutline *outline,
                        double radius_mm, gboolean great_circle);
/** tf_axis_difference: absolute differences, axial for the tilt; NaN where one has no value. */
void tf_axis_difference (const TfAxis *a, const TfAxis *b, TfSpread *spread);

/* tf-measure-noise.c */
/** tf_region_noise: the noise term; @noise_flux: unsigned flux expected of noise alone, Mx. */
void tf_region_noise (const TfRegionSamples *samples, const TfAxis *axis, double sine_mean,
                      TfSpread *spread, double *noise_flux);
/** tf_region_realise: the same from seeded realisations of the smoothed field. */
void tf_region_realise (const TfRegionSamples *samples, const TfOutline *outline, TfSpread *spread);
/** tf_region_smooth: the field, scaled, smoothed by params->smooth_px; one value a sample.
 * @rest: what part of a pixel's sigma is no longer in it: sqrt (1 - sum of the kernel's
 * squares). */
float *tf_region_smooth (const TfRegionSamples *samples, double *rest);

/* tf-measure-outline.c */
/** tf_region_floor_term: Returns: whether the western pole is another at one of the floors. */
gboolean tf_region_floor_term (const TfRegionSamples *samples, const TfSums *sums,
                               const TfAxis *axis, const TfOutline *outline, TfSpread *spread);
void tf_region_outline_term (const TfFrame *frame, const TfOutline *outline,
                             const TfMeasureParams *params, const TfPotential *potential,
                             TfSpread *spread);

/* tf-measure-pieces.c */
typedef struct
{
  guint n;     /* with at least piece_share of the flux */
  int witness; /* the western of the strongest piece of each polarity */
} TfPieces;
typedef struct
{
  double flux, sum[3], floor_flux; /* sum: of flux * unit vector */
  int sign;                        /* of the polarity it belongs to; 0 when it was taken */
  guint piece;                     /* 1 + index of its piece; 0: none */
} TfPieceCell;
typedef struct
{
  int sign;
  double flux, sum[3]; /* flux and sum unsigned */
} TfPiece;
typedef struct
{
  guint width, height;
  TfPieceCell *cells;
  GArray *pieces; /* TfPiece, of any strength */
} TfPieceField;
void tf_region_find_pieces (const TfRegionSamples *samples, TfPieceField *field);
void tf_piece_field_clear (TfPieceField *field);
G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (TfPieceField, tf_piece_field_clear)
void tf_region_pieces (const TfRegionSamples *samples, double flux_unsigned, TfPieces *pieces);
/** tf_axis_witness: the polarity whose pole is west; 0 when nearer than @least deg, ABSENT
 * without two poles. */
int tf_axis_witness (const TfAxis *axis, double least);

/* tf-measure.c */
/** tf_region_measure: tf_measure_masked with the third witness told by a leading spot, unless
 * @spot_witness is TF_WITNESS_ABSENT. */
gboolean tf_region_measure (TfMeasure *measure, const TfFrame *frame, const TfMask *mask,
                            const TfOutline *outline, const TfMeasureParams *params,
                            int spot_witness, GError **error);

/* tf-measure-cautions.c */
void tf_region_cautions (TfMeasure *measure, const TfRegionSamples *samples, const TfAxis *axis);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfRegionSamples, tf_region_samples_free)

G_END_DECLS
