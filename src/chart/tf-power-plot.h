/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The power curve: how often a difference is found, with its interval, against the number of regions
 * in each of two groups (on a scale of doublings); the number needed for the power asked for. */

#include "tf-chart.h"
#include "tf-power.h"

G_BEGIN_DECLS

/** tf_power_plot_draw: @wanted: power asked for; NaN: none is marked. */
void tf_power_plot_draw (cairo_t *cr, const TfPowerCurve *curve, double wanted,
                         const TfChartStyle *style, TfArea area);
/** tf_power_plot_hit: index of the point within 8 units, or -1. */
int tf_power_plot_hit (const TfPowerCurve *curve, const TfChartStyle *style, TfArea area, double x,
                       double y);
char *tf_power_plot_dup_description (const TfPowerCurve *curve, double wanted);
/** tf_power_plot_write: as a figure, PDF, SVG or PNG by the ending of @path. */
gboolean tf_power_plot_write (const TfPowerCurve *curve, double wanted, const char *path,
                              GError **error);

G_END_DECLS
