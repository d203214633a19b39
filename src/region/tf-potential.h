/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfPotential: the radial field about one region, estimated as that of the potential field whose
 * line-of-sight component is the one observed: Leka, Barnes & Wagner 2017, Solar Physics 292, 36
 * (arXiv 1701.04836), here on a flat equal-area box.
 *
 * It is kept as what the estimate adds to B_los / mu, on a grid, so that the pixels keep their own
 * detail and noise. Immutable once made, reference counted. Meaningful for line-of-sight frames of
 * the disk only.
 */

#include <glib.h>

#include "tf-frame.h"
#include "tf-outline.h"

G_BEGIN_DECLS

typedef struct _TfPotential TfPotential;

/**
 * tf_potential_new:
 * @outline: at the frame's time
 * @step_mm: of the grid, Mm on the Sun; 0.1 to 20
 * @margin_mm: added to the outline's cap on all sides
 * Returns: (transfer full) (nullable): NULL on maps and radial products, where the box is not on
 *   the disk, and without memory.
 */
TfPotential *
tf_potential_new (const TfFrame *frame, const TfOutline *outline, double step_mm, double margin_mm);
void tf_potential_free (TfPotential *potential);

/**
 * tf_potential_radial:
 * @unit: place in the Carrington frame; @observed_gauss: the field observed there; @mu: there, > 0
 * Returns: the radial field, G; outside the box B_los / mu.
 */
double tf_potential_radial (const TfPotential *potential, const double unit[3],
                            double observed_gauss, double mu);
/** tf_potential_get_left: rms of the observed field that the estimate does not explain, as a share
 * of its rms. */
double tf_potential_get_left (const TfPotential *potential);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfPotential, tf_potential_free)

G_END_DECLS
