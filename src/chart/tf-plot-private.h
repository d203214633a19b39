/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* A pair of axes: what the charts of the laws share. Sizes follow the size of the text, so that one
 * chart is right on the screen and in a printed column. */

#include "tf-chart-private.h"

G_BEGIN_DECLS

#pragma GCC visibility push(hidden)

/** TfTickForm: (transfer full): the label of a value. */
typedef char *(*TfTickForm) (double value);

typedef struct
{
  TfArea plot; /* where the data are */
  double x0, x1, y0, y1;
} TfPlot;

/** tf_plot_within: @area less the room for labels: @left and @below in heights of text. */
TfPlot tf_plot_within (const TfChartStyle *style, TfArea area, double left, double below);
double tf_plot_x (const TfPlot *plot, double x);
double tf_plot_y (const TfPlot *plot, double y);
double tf_plot_back_x (const TfPlot *plot, double px);
double tf_plot_back_y (const TfPlot *plot, double py);
/** tf_plot_step: a round step that gives labels of @room units at least. */
double tf_plot_step (double from, double to, double length, double room);
/** tf_plot_draw_x: ticks and labels under the plot, @title under them (nullable). */
void tf_plot_draw_x (cairo_t *cr, const TfPlot *plot, const TfChartStyle *style, double step,
                     TfTickForm form, const char *title);
/** tf_plot_draw_y: thin lines across with labels at the left, @title above them (nullable). */
void tf_plot_draw_y (cairo_t *cr, const TfPlot *plot, const TfChartStyle *style, double step,
                     TfTickForm form, const char *title);
/** tf_plot_whisker_x, tf_plot_whisker_y: an interval with feet of @foot units; nothing where it is
 * NaN. Given in data. Along x an end past the axis is an arrow at the axis' end. */
void tf_plot_whisker_x (cairo_t *cr, const TfPlot *plot, const TfChartStyle *style, double low,
                        double high, double y_units, double foot);
void tf_plot_whisker_y (cairo_t *cr, const TfPlot *plot, const TfChartStyle *style, double x,
                        double low, double high, double foot);
/** tf_plot_median: the sign of a median: a ring filled with the ground. */
void tf_plot_median (cairo_t *cr, const TfPlot *plot, const TfChartStyle *style, double x, double y);
/** tf_plot_clip: to the plot; undone by cairo_restore. */
void tf_plot_clip (cairo_t *cr, const TfPlot *plot);

/** tf_plot_cloud: @n points (data x and y in turn) in the slate of @style: dots, or cells whose
 * darkness tells how many fall in them when there are more than can be told apart. NaN is left out.
 * On paper as on pixels. */
void tf_plot_cloud (cairo_t *cr, const TfPlot *plot, const TfChartStyle *style, const double *xy,
                    guint n);
/** tf_plot_nearest: index of the point (data x, y in turn) nearest to a place within @reach units,
 * or -1. */
int tf_plot_nearest (const TfPlot *plot, const double *xy, guint n, double px, double py,
                     double reach);
/** tf_plot_legend: one line of the legend at a place: a sample of the sign, then words. Returns the
 * height of the line. */
double tf_plot_note (cairo_t *cr, const TfChartStyle *style, TfArea area, double y,
                     const char *text);

char *tf_tick_degrees (double value);
char *tf_tick_plain (double value);
char *tf_tick_percent (double value);
/** tf_chart_dup_percent: "4.2 %" in the user's digits; a dash for NaN. */
char *tf_chart_dup_percent (double share, int decimals);

#pragma GCC visibility pop

G_END_DECLS
