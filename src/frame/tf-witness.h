/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* What pixels tell about a geometry: the limb (centre, radius and scale only) and the
 * orientation witness. Neither corrects anything by itself. */

#include <glib.h>

#include "tf-frame.h"

G_BEGIN_DECLS

typedef struct
{
  gboolean found;
  double centre_x, centre_y; /* FITS pixels */
  double radius_px;
  double sigma_px; /* scatter of the limb points about the circle */
  guint n_points;
  double seen_deg; /* how much of the circle they stand for */
} TfLimbFit;

/** tf_limb_fit: a circle through the edge of the valid pixels (or of the noise, where the whole
 * array is filled): edges along rays, robust least squares. Looked for near the header's first, then
 * anywhere in the picture. found is FALSE on maps and when fewer than 60 deg of limb are seen.
 * tf_limb_fit_bright: the same on an intensity picture, whose sky is dark. */
TfLimbFit tf_limb_fit (const float *pixels, const TfGeometry *geometry);
TfLimbFit tf_limb_fit_bright (const float *pixels, const TfGeometry *geometry);
/** tf_limb_judge: caution above max (0.2 %, 0.5 px); "header-lies" above 1 %. Adds to @cautions. */
void tf_limb_judge (const TfLimbFit *fit, const TfGeometry *geometry, TfNotes *cautions);

typedef enum
{
  TF_WITNESS_CANNOT_SAY,
  TF_WITNESS_AGREES,
  TF_WITNESS_TURNED,   /* features move as on a disk turned by 180 deg */
  TF_WITNESS_MIRRORED, /* features move against the turn with the rows the other way */
} TfOrientation;

/** tf_orientation_witness: two frames of one instrument at least 3 h apart: do features move
 * west at the Sun's rate under the header's orientation, or better under a turned one? @score:
 * (out) (nullable): correlations of the four readings: as given, turned 180, mirrored
 * east-west, mirrored north-south. @reason: (out) (nullable): why it cannot say. */
TfOrientation tf_orientation_witness (const TfFrame *earlier, const TfFrame *later, double score[4],
                                      TfNote **reason);

/** tf_orientation_fits: whether the witness can hold two frames against each other by their headers:
 * full disks of one instrument, 3 h to 5 days apart, whichever is the earlier. */
gboolean tf_orientation_fits (const TfFrameInfo *one, const TfFrameInfo *other);
/** tf_orientation_name: "agrees" "turned" "mirrored" "cannot say" */
const char *tf_orientation_name (TfOrientation answer);
/** tf_orientation_note: what the witness said, as a sentence: an alarm, never a correction.
 * @reason: (nullable): why it cannot say */
TfNote *tf_orientation_note (TfOrientation answer, const TfNote *reason, TfTime other);

G_END_DECLS
