/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The parts of the wings: geometry and hit-testing (tf-wings.c), the drawing (tf-wings-draw.c), its
 * scale (tf-wings-scale.c), the dots (tf-wings-dots.c) and the density picture
 * (tf-wings-density.c). */

#include "tf-wings.h"

G_BEGIN_DECLS

#pragma GCC visibility push(hidden)

/** tf_wings_first: index of the first dot at or after @year; n when there is none. */
guint tf_wings_first (const TfWings *wings, double year);
/** tf_wings_radius: of a dot's symbol, user units; grows with the root of the flux. */
double tf_wings_radius (float flux_mx);
/** tf_wings_x, tf_wings_y: into the plot's area as tf_wings_plot() gives it. */
double tf_wings_x (const TfWings *wings, TfArea plot, double year);
double tf_wings_y (const TfWings *wings, TfArea plot, double lat_deg);

/** tf_wings_draw_density: the dots first..end-1 as a grid of small cells: filled where positive
 * polarity leads in most, hollow where negative does, a stroke across where a quarter or more
 * breaks Hale's law; the more dots the denser. */
void tf_wings_draw_density (cairo_t *cr, const TfWings *wings, const TfChartStyle *style,
                            TfArea plot, guint first, guint end);
/** tf_wings_draw_dots: the dots first..end-1 one by one. */
void tf_wings_draw_dots (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea plot,
                         guint first, guint end);
/** tf_wings_draw_scale: lines and labels of latitude and time. */
void
tf_wings_draw_scale (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea plot);
/** tf_wings_draw_cycles: the cycles' bands and names. */
void
tf_wings_draw_cycles (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea plot);
/** tf_wings_draw_divides: the divides with their bands. */
void
tf_wings_draw_divides (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea plot);

#pragma GCC visibility pop

G_END_DECLS
