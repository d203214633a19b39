/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* How the hints of two frames, or hints and truth, are held against each other.
 *
 * Overlap of two outlines on a frame: the sum of |B_r| dA over the pixels inside both, by that over the pixels inside either; area
 * likewise. Outlines of another time are carried to the frame's by the default rotation law. No floor: noise counts as it stands.
 */

#include <glib.h>

#include "tf-hint.h"

typedef struct
{
  double flux, area; /* 0 to 1 */
} HintOverlap;

HintOverlap hints_overlap (const TfFrame *frame, const TfOutline *a, const TfOutline *b);
/** hints_best: the hint of @hints that overlaps @outline most by flux; NULL when none does. @overlap: (out) (nullable). */
const TfHint *hints_best (const TfFrame *frame, const GPtrArray *hints, const TfOutline *outline, HintOverlap *overlap);
/** hints_find: by the default rule, measured without the outline term. */
GPtrArray *hints_find (const TfFrame *frame);
/** hints_frame: @pixels on @geometry, everything else as in @like. */
TfFrame *hints_frame (const TfFrame *like, const TfGeometry *geometry, const float *pixels);
/** hints_flux: the sum of |B_r| dA inside @outline, Mx: for weights. */
double hints_flux (const TfFrame *frame, const TfOutline *outline);
/** hints_print: one line a hint. */
void hints_print (const char *what, const TfFrame *frame, const GPtrArray *hints);
