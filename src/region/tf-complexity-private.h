/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include "tf-inversion-private.h"

G_BEGIN_DECLS

/** tf_complexity_r: Schrijver's R on one grid, Mx. */
double tf_complexity_r (const TfTraced *traced, const TfComplexityParams *params);
/** tf_complexity_flux_near: unsigned flux inside the outline within params->near_mm of
 * strong-gradient stretches, Mx. */
double tf_complexity_flux_near (const TfTraced *traced, const TfInversion *inversion,
                                const TfComplexityParams *params);
/** tf_complexity_pieces: connected parts of one polarity at @strong_gauss with at least @share of
 * the flux of all of them. */
guint tf_complexity_pieces (const TfTraced *traced, double strong_gauss, double share);
/** tf_complexity_delta: sets delta_candidate, its distance and reason. */
void tf_complexity_delta (TfComplexity *complexity, const TfTraced *traced,
                          const TfComplexityParams *params);

G_END_DECLS
