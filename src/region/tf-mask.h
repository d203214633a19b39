/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfMask: which pixels of a frame lie in an outline, as a list row by row.
 *
 * A pixel belongs when its centre lies inside the outline (carried to the frame's time), outside left-out areas, is finite, and
 * mu >= mu_min (maps: always). Per pixel the mask keeps mu, area and the unit vector, so that floors and deformations
 * can be tried without geometry.
 */

#include <glib.h>

#include "tf-frame.h"
#include "tf-outline.h"

G_BEGIN_DECLS

typedef struct
{
  guint32 x, y;     /* 0-based column and row of the frame */
  float field;      /* G as observed */
  float mu;         /* 1 on maps */
  double area_mm2;  /* on the Sun */
  double unit[3];   /* Carrington frame */
} TfMaskPixel;

typedef struct _TfMask TfMask; /* immutable */

/** tf_mask_outline: (transfer full): @outline carried to the frame's time by rotation law @law. On a map, whose columns are of
 * different times, and where a time is unknown, it stays where it is drawn. */
TfOutline *tf_mask_outline (const TfFrame *frame, const TfOutline *outline, guint law);
/** tf_mask_new: @outline at any time: it is carried to the frame's by rotation law @law. An outline wholly behind the limb gives no pixels. */
TfMask *tf_mask_new (const TfFrame *frame, const TfOutline *outline, double mu_min, guint law);
/** tf_mask_new_above: only pixels whose field as observed is @least_gauss or more of either sign; none is counted as missing.
 * 0: all pixels. */
TfMask *tf_mask_new_above (const TfFrame *frame, const TfOutline *outline, double mu_min, guint law, float least_gauss);
void tf_mask_free (TfMask *mask);
guint tf_mask_get_n (const TfMask *mask);
const TfMaskPixel *tf_mask_get (const TfMask *mask, guint k);
/** tf_mask_get_missing: pixels inside the outline without a value (on the disk); tf_mask_get_cut: part of the outline beyond mu_min or the frame (0-1). */
guint tf_mask_get_missing (const TfMask *mask);
double tf_mask_get_cut (const TfMask *mask);
/** tf_mask_get_box: box of the frame that holds the mask, from its 0-based corner. */
void tf_mask_get_box (const TfMask *mask, guint *x0, guint *y0, guint *width, guint *height);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfMask, tf_mask_free)

G_END_DECLS
