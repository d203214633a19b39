/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfSpots: what a companion intensity frame of the same time shows inside one outline: spots with
 * umbra and penumbra, their polarity by the magnetogram, the leading spot, the tilt of the spots.
 *
 * Intensity is divided by the quiet Sun's at the same mu (limb darkening, tf-limb-shape) and by
 * what is left of it, the median, about the outline, so that the quiet Sun is 1. A spot is a
 * connected part below the penumbra's level, its umbra what is below the umbra's. Both frames are
 * laid on one flat equal-area grid. Areas in millionths of the hemisphere, angles in deg,
 * longitudes Carrington at the magnetogram's time. NaN: no value.
 */

#include <glib.h>
#include <json-glib/json-glib.h>

#include "tf-measure.h"

G_BEGIN_DECLS

typedef struct
{
  double apart_min;       /* 30: most minutes between the two frames */
  double vantage_deg;     /* 1: most degrees between their observers */
  double cover;           /* 0.98: least share of the outline that the intensity frame holds */
  int limb;               /* TfLimbMethod */
  double umbra, penumbra; /* 0.655, 0.945 of the quiet Sun */
  double spot_fwhm_mm, spot_step_mm; /* 2, 1: resolution at which spots are looked for */
  double smallest_msh;               /* 5: smaller dark places are no spots */
} TfCompanionParams;
extern const TfOption tf_companion_options[];
void tf_companion_params_init (TfCompanionParams *params);

typedef enum
{
  TF_LIMB_OWN,       /* the frame's own radial profile, where it spans enough of mu */
  TF_LIMB_PUBLISHED, /* a published law */
} TfLimbMethod;

typedef struct
{
  double lon_deg, lat_deg;    /* area-weighted */
  double area_msh, umbra_msh; /* the whole spot; its umbra */
  double field_gauss;         /* mean field used over the umbra, or over a spot without one */
  int polarity;               /* 1, -1 */
  guint umbrae;
  gboolean delta; /* umbrae of both polarities less than 2 deg apart within this penumbra */
} TfSpot;

typedef struct
{
  guint n;
  TfVertex *points; /* owned; Carrington; a closed contour's first point is repeated at its end */
  gboolean umbra;   /* else penumbra */
} TfSpotContour;

typedef struct
{
  gboolean matched;
  TfNote *refusal; /* owned: why the frames do not belong together; NULL when they do */
  guint n, n_contours;
  TfSpot *spots;           /* owned; largest first */
  TfSpotContour *contours; /* owned */
  int leading_polarity;    /* of the leading spot: 1, -1, 0; TF_WITNESS_ABSENT without */
  gboolean delta;
  double area_msh, umbra_msh;
  /* area-weighted middles of the two polarities */
  double leading_lon_deg, leading_lat_deg, following_lon_deg, following_lat_deg;
  double axis_bearing_deg, axis_tilt_deg, separation_deg; /* as TfMeasure's, of the spots */
  double apart_min;     /* between the two frames */
  TfLimbMethod limb;    /* by which limb darkening was taken out */
  double quiet_scatter; /* rms of the frame's quiet places about 1 */
  double quiet_here;    /* median about the outline over the profile; taken out */
  TfNotes *notes;       /* owned */
} TfSpots;

/**
 * tf_companion_matches: whether two frames show the same Sun: by role, a limb that is where the
 * header puts it, time, vantage and view.
 * @outline: (nullable): at the field's time; NULL: half of what the field frame shows of the disk
 *   must be in view
 * @reason: (out) (transfer full) (nullable): why they do not
 */
gboolean
tf_companion_matches (const TfFrameInfo *field, const TfFrameInfo *intensity,
                      const TfOutline *outline, const TfCompanionParams *params, TfNote **reason);

/** tf_spots_find: @measure: the field used, its scale and rotation law. Frames that do not match
 * give matched FALSE and the refusal. */
void tf_spots_find (TfSpots *spots, const TfFrame *field, const TfFrame *intensity,
                    const TfOutline *outline, const TfMeasureParams *measure,
                    const TfCompanionParams *params);
void tf_spots_clear (TfSpots *spots);

/** tf_measure_region_with: tf_measure_region with the leading spot as the third witness, where
 * @spots (nullable) tell one. */
gboolean
tf_measure_region_with (TfMeasure *m, const TfFrame *frame, const TfOutline *outline,
                        const TfMeasureParams *params, const TfSpots *spots, GError **error);

/** tf_spots_build_json: the builder's next value: {matched, reason, leading_polarity,
 * axis_bearing_deg, axis_tilt_deg, separation_deg, area_msh, umbra_area_msh, delta, spots, umbra,
 * penumbra, parameters, cautions}; null for NULL. */
void
tf_spots_build_json (const TfSpots *spots, const TfCompanionParams *params, JsonBuilder *builder);
/** tf_spots_dup_text: lines for a person. */
char *tf_spots_dup_text (const TfSpots *spots, const TfCompanionParams *params);

G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (TfSpots, tf_spots_clear)

G_END_DECLS
