/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* What the charts share among themselves and nobody else needs. */

#include <pango/pangocairo.h>

#include "tf-chart.h"

G_BEGIN_DECLS

#pragma GCC visibility push(hidden)

/* From this radius on a struck diamond has a seam beside its stroke. */
#define TF_SEAM_RADIUS 6.0
/* An open ring looks smaller than a disc of the same width: it is drawn larger by this. */
#define TF_RING_SHARE 1.12

/** tf_chart_mix: @a moved by @share (0 to 1) towards @b; keeps the opacity of @a. */
TfColour tf_chart_mix (TfColour a, TfColour b, double share);
/** tf_chart_edge: the line round an amber disc, which gives it its contrast on a light ground. */
TfColour tf_chart_edge (const TfChartStyle *style);
/** tf_chart_diamond_path: adds a diamond to the path. */
void tf_chart_diamond_path (cairo_t *cr, double x, double y, double radius);
/** tf_chart_measure: size of a label, user units. */
void tf_chart_measure (cairo_t *cr, const TfChartStyle *style, const char *text, double *width,
                       double *height);
/** tf_chart_text_on: a label with a @halo about its letters, for pictures of any brightness. */
double tf_chart_text_on (cairo_t *cr, const TfChartStyle *style, double x, double y, double align_x,
                         double align_y, TfColour halo, TfColour colour, const char *text);
/** tf_chart_dup_degrees: "−24°", "+9°" with @sign; a dash for NaN. */
char *tf_chart_dup_degrees (double deg, gboolean sign);

#pragma GCC visibility pop

G_END_DECLS
