/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* A passage on one axis of time: axis tilt with its uncertainty against where Joy's law would put
 * it, flux of each polarity, separation, length of the strong-gradient inversion line, mu. One dot a
 * mark (or hint, drawn open and fainter). Neighbours are joined by a thin line only where no frame is
 * missing between them: a gap in the frames is a gap. Stretches near the limb are shaded and figures
 * that are not given there are faint, never left away.
 *
 * The lowest panels are left out where the area is too low for all.
 */

#include "tf-chart.h"
#include "tf-time.h"

G_BEGIN_DECLS

typedef struct
{
  TfTime time;
  double tilt_deg, tilt_sigma_deg;                   /* axis tilt; NaN: none */
  double positive_mx, negative_mx, positive_sigma_mx, negative_sigma_mx;
  double separation_mm, separation_sigma_mm;
  double line_mm; /* strong-gradient inversion line; NaN: not measured */
  double mu;      /* NaN on maps */
  gboolean hint;  /* nobody has judged it */
} TfSeriesMoment;

typedef struct
{
  const TfSeriesMoment *points; /* in order of time, borrowed */
  guint n;
  double joy_deg, joy_scatter_deg; /* expected axis tilt; NaN: no band */
  const char *joy_name;            /* of the relation; borrowed */
  double limb_mu;                  /* below it the stretch is shaded: 0.5 */
  double line_mu;                  /* below it the inversion line is faint: 0.7 */
  double cadence_s;                /* usual step; longer than 2.2 of it between neighbours is a gap */
  int now;                         /* the moment looked at; -1 */
  int taken;                       /* which mark the study's sampling rule takes; -1 */
  const char *taken_words;         /* "study takes this mark: greatest flux"; borrowed */
  TfTime from, to;                 /* stretch that is brushed; unknown: none */
} TfSeriesChart;

/** tf_series_chart_cadence: median step between neighbours, s; NaN for fewer than two. */
double tf_series_chart_cadence (const TfSeriesMoment *points, guint n);
void tf_series_chart_draw (cairo_t *cr, const TfSeriesChart *chart, const TfChartStyle *style,
                           TfArea area);
/** tf_series_chart_draw_still: what the points alone decide, and Joy's band: worth keeping as a picture while a stretch is
 * brushed or the passage played. tf_series_chart_draw_over: the rest, on top: stretch, moments, words. Both make
 * tf_series_chart_draw(). */
void tf_series_chart_draw_still (cairo_t *cr, const TfSeriesChart *chart, const TfChartStyle *style,
                                 TfArea area);
void tf_series_chart_draw_over (cairo_t *cr, const TfSeriesChart *chart, const TfChartStyle *style,
                                TfArea area);
/** tf_series_chart_nearest: index of the point nearest in time to @x, -1 without points. */
int tf_series_chart_nearest (const TfSeriesChart *chart, const TfChartStyle *style, TfArea area,
                             double x);
TfTime tf_series_chart_time_at (const TfSeriesChart *chart, const TfChartStyle *style, TfArea area,
                                double x);
/** tf_series_chart_dup_point: one point in words, with units. */
char *tf_series_chart_dup_point (const TfSeriesMoment *point);
/** tf_series_chart_dup_description: what the chart shows now, for a screen reader. */
char *tf_series_chart_dup_description (const TfSeriesChart *chart);
/** tf_series_chart_dup_day: "12 Oct 06:00" in UTC. */
char *tf_series_chart_dup_day (TfTime time);

G_END_DECLS
