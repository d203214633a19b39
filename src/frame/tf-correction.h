/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfCorrection: where a person puts the disk of a frame whose header does not: centre and radius,
 * FITS pixels, and north angle, deg, as in tf_geometry_north_angle(). Observer and radius of the
 * Sun stay the header's; the scale follows from the radius. A plain value; without one its radius
 * is NaN. A limb fit can settle centre and radius, never the north angle. */

#include <glib.h>

#include "tf-frame.h"
#include "tf-outline.h"

G_BEGIN_DECLS

typedef struct
{
  double centre_x, centre_y, radius_px, north_angle_deg;
} TfCorrection;

/** tf_correction_none: says nothing. */
TfCorrection tf_correction_none (void);
gboolean tf_correction_is_set (const TfCorrection *correction);
/** tf_correction_equal: two that say nothing are equal. */
gboolean tf_correction_equal (const TfCorrection *a, const TfCorrection *b);
/** tf_correction_of: what a geometry says; none on maps. */
TfCorrection tf_correction_of (const TfGeometry *geometry);
/** tf_correction_apply: @geometry as the header has it -> as corrected. FALSE on maps, for numbers
 * that make no disk, and when the rows run against the Sun (a mirrored picture). */
gboolean tf_correction_apply (const TfCorrection *correction, const TfGeometry *geometry,
                              TfGeometry *corrected);
/** tf_correction_dup_text: "x,y,radius,north" in the C locale; "" for none. */
char *tf_correction_dup_text (const TfCorrection *correction);
/** tf_correction_from_text: FALSE, and none, when it is not that. */
gboolean tf_correction_from_text (TfCorrection *correction, const char *text);

/** tf_frame_corrected: the same pixels under the correction, as tf_frame_with_geometry(); the frame
 * itself without one. NULL when it cannot be applied. */
TfFrame *
tf_frame_corrected (TfFrame *frame, const TfCorrection *correction, const TfWork *work);
/** tf_outline_between: the outline round the same pixels under another geometry of the frame. NULL
 * when a vertex is on the disk in one and off it in the other. */
TfOutline *
tf_outline_between (const TfOutline *outline, const TfGeometry *from, const TfGeometry *to);

G_END_DECLS
