/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Charts as files for print: PDF, SVG or PNG by the file's ending, one column wide, light ground,
 * fonts embedded. The same drawing as in the window. */

#include "tf-bands.h"
#include "tf-laws-charts.h"

G_BEGIN_DECLS

#define TF_CHART_ERROR (tf_chart_error_quark ())
GQuark tf_chart_error_quark (void);
typedef enum
{
  TF_CHART_ERROR_ENDING, /* not .pdf, .svg or .png */
  TF_CHART_ERROR_WRITE,  /* the file cannot be written */
  TF_CHART_ERROR_STOPPED /* cancelled: no file is written */
} TfChartError;

typedef struct
{
  double width_mm, height_mm; /* 88: a column */
  double text_mm;             /* size of the labels; 2.3: 6.5 points */
  const char *title;          /* nullable; into the file's own properties */
  const char *subject;        /* nullable; the study in words */
  TfCancel *cancel;           /* nullable; looked at before the file and while pixels are packed */
} TfFigurePage;

/** TfFigureFunc: draws into an area in units of a point (1/72 inch). */
typedef void (*TfFigureFunc) (cairo_t *cr, const TfChartStyle *style, TfArea area, gpointer data);

/** tf_figure_write: all of the file or none of it (written beside it and moved). */
gboolean tf_figure_write (const char *path, const TfFigurePage *page, TfFigureFunc draw,
                          gpointer data, GError **error);

/** tf_laws_chart_write: one chart as a file of that name. @cancel: (nullable) */
gboolean tf_laws_chart_write (const TfLawsChart *chart, const TfLawsCharts *charts, const char *path,
                              const char *subject, TfCancel *cancel, GError **error);
/**
 * tf_laws_charts_write: every chart that has something to show, as FOLDER/NAME.ENDING.
 * @folder: made when it is not there
 * @ending: "pdf", "svg" or "png"
 * @subject: (nullable): the study in words, kept in the files' properties
 * Returns: (transfer full) (element-type filename): what was written; NULL on error
 */
GPtrArray *tf_laws_charts_write (const TfLawsCharts *charts, const char *folder,
                                 const char *ending, const char *subject, GError **error);

G_END_DECLS
