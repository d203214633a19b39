/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The members of TfLawsCharts, for the files of its charts alone. */

#include "tf-bin.h"
#include "tf-laws-charts.h"
#include "tf-plot-private.h"
#include "tf-wings.h"

G_BEGIN_DECLS

#pragma GCC visibility push(hidden)

/* Points of a chart and the sample rows behind them. */
typedef struct
{
  guint n;
  double *xy; /* x, y in turn */
  guint *row;
} TfChartPoints;

/* What bars and words need of a row. */
typedef struct
{
  gint8 kind; /* TfVerdictKind */
  gint8 cycle;
  gint8 side; /* 1, -1, 0 */
  float lat, tilt, separation, year;
} TfChartRow;

typedef struct
{
  guint age, row;
} TfChartSight;

enum
{
  TF_TILT_BINS = 36 /* of 5 deg, from -90 */
};

struct _TfLawsCharts
{
  TfLawsCharts *before; /* whose all else is; NULL: its own */
  guint n;
  TfChartRow *rows;
  GArray *hale; /* TfHaleRow, those drawn */
  TfHaleRow all;
  double level;

  TfJoyFit fit; /* slope NaN: none */
  TfJoyParams joy;
  gboolean all_relations;
  TfChartPoints tilts; /* |lat|, tilt of the rows that Joy's law is fitted to */
  GArray *lat_bins;    /* TfBin of 5 deg */
  double lat_top, tilt_top;
  guint beyond; /* points outside the frame */

  guint tilt_counts[3][TF_TILT_BINS]; /* by TfVerdictKind */
  guint n_tilts;
  double mean_tilt, median_tilt;

  TfChartPoints residuals; /* separation, tilt less the fit's */
  GArray *separation_bins; /* TfBin of the residuals */
  double separation_top;

  TfEmergenceParams emergence;
  guint n_born;
  GArray *ages[TF_EMERGENCE_SIDES]; /* of TfEmergenceAge */
  GArray *seen;                     /* TfChartSight: picks whose passage is seen at an age */

  TfWingsDot *dots;
  TfDivides *divides;
  TfWings wings; /* of these */
};

/** tf_laws_fit_tilt: the tilt that the fit puts at |lat|, deg; @slope may be another one. */
double tf_laws_fit_tilt (const TfLawsCharts *charts, double slope, double abs_lat_deg);

/** tf_laws_place_points: places of a cloud; x NaN outside the plot. */
double *tf_laws_place_points (const TfChartPoints *points, const TfPlot *plot, guint *n);

void tf_hale_bars_draw (cairo_t *cr, const TfLawsCharts *charts, const TfChartStyle *style,
                        TfArea area);
int tf_hale_bars_hit (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area, double x,
                      double y, int after);
double *tf_hale_bars_dup_places (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area,
                            guint *n);
char *tf_hale_bars_dup_sign (const TfLawsCharts *charts, guint k);
char *tf_hale_bars_dup_description (const TfLawsCharts *charts);
double tf_hale_bars_height (const TfLawsCharts *charts, const TfChartStyle *style, double width);
gboolean tf_hale_bars_has (const TfLawsCharts *charts);

void tf_joy_plot_draw (cairo_t *cr, const TfLawsCharts *charts, const TfChartStyle *style,
                       TfArea area);
int tf_joy_plot_hit (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area, double x,
                     double y, int after);
double *tf_joy_plot_dup_places (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area,
                            guint *n);
char *tf_joy_plot_dup_sign (const TfLawsCharts *charts, guint k);
char *tf_joy_plot_dup_description (const TfLawsCharts *charts);
double tf_joy_plot_height (const TfLawsCharts *charts, const TfChartStyle *style, double width);
gboolean tf_joy_plot_has (const TfLawsCharts *charts);

void tf_tilt_bars_draw (cairo_t *cr, const TfLawsCharts *charts, const TfChartStyle *style,
                        TfArea area);
int tf_tilt_bars_hit (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area, double x,
                      double y, int after);
double *tf_tilt_bars_dup_places (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area,
                            guint *n);
char *tf_tilt_bars_dup_sign (const TfLawsCharts *charts, guint k);
char *tf_tilt_bars_dup_description (const TfLawsCharts *charts);
double tf_tilt_bars_height (const TfLawsCharts *charts, const TfChartStyle *style, double width);
gboolean tf_tilt_bars_has (const TfLawsCharts *charts);

void tf_separation_plot_draw (cairo_t *cr, const TfLawsCharts *charts, const TfChartStyle *style,
                              TfArea area);
int tf_separation_plot_hit (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area,
                            double x, double y, int after);
double *tf_separation_plot_dup_places (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area,
                            guint *n);
char *tf_separation_plot_dup_sign (const TfLawsCharts *charts, guint k);
char *tf_separation_plot_dup_description (const TfLawsCharts *charts);
double tf_separation_plot_height (const TfLawsCharts *charts, const TfChartStyle *style,
                                  double width);
gboolean tf_separation_plot_has (const TfLawsCharts *charts);

void tf_emergence_plot_draw (cairo_t *cr, const TfLawsCharts *charts, const TfChartStyle *style,
                             TfArea area);
int tf_emergence_plot_hit (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area,
                           double x, double y, int after);
double *tf_emergence_plot_dup_places (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area,
                            guint *n);
char *tf_emergence_plot_dup_sign (const TfLawsCharts *charts, guint k);
char *tf_emergence_plot_dup_description (const TfLawsCharts *charts);
double tf_emergence_plot_height (const TfLawsCharts *charts, const TfChartStyle *style,
                                 double width);
gboolean tf_emergence_plot_has (const TfLawsCharts *charts);

void tf_wings_figure_make (TfLawsCharts *charts, const TfLawsFacts *facts);
void tf_wings_figure_draw (cairo_t *cr, const TfLawsCharts *charts, const TfChartStyle *style,
                           TfArea area);
int tf_wings_figure_hit (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area,
                         double x, double y, int after);
double *tf_wings_figure_dup_places (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area,
                            guint *n);
char *tf_wings_figure_dup_sign (const TfLawsCharts *charts, guint k);
char *tf_wings_figure_dup_description (const TfLawsCharts *charts);
double tf_wings_figure_height (const TfLawsCharts *charts, const TfChartStyle *style, double width);
gboolean tf_wings_figure_has (const TfLawsCharts *charts);

#pragma GCC visibility pop

G_END_DECLS
