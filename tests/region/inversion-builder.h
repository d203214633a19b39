/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Frames of any field given as a function of the place, for lines and figures with known truth. */

#include "region-builder.h"
#include "tf-complexity.h"

/* Field at a place, G. @to_observer: unit vector, Carrington frame. A function that gives the
 * radial field is turned into that of the line of sight by the caller's own mu. */
typedef double (*BuilderFunc) (const double unit[3], const double to_observer[3],
                               gconstpointer data);

/** builder_frame_func: each pixel is the mean over how->fine x how->fine places; noise by how. */
TfFrame *builder_frame_func (const BuilderFrame *how, BuilderFunc func, gconstpointer data);
/** builder_to_observer: unit vector from a place of the Sun towards the frame's observer. */
void builder_to_observer (const TfGeometry *g, const double unit[3], double to_observer[3]);
/** builder_complexity: measured with default options but for @params. */
void builder_complexity (TfComplexity *c, const TfFrame *frame, const TfOutline *outline,
                         const TfComplexityParams *params);

void add_inversion_tests (void);
void add_complexity_tests (void);
void add_potential_tests (void);
void add_companion_tests (void);
