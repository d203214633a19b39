/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfChartView: one chart of a study. It is drawn off the main thread; what was drawn last stands
 * until the new picture is there. A click on a sign opens the region behind it; by keyboard arrows
 * go from sign to sign (Shift: farther), which says what it is, and Return opens what is there. */

#include <gtk/gtk.h>

#include "tf-laws-charts.h"

G_BEGIN_DECLS

#define TF_TYPE_CHART_VIEW (tf_chart_view_get_type ())
G_DECLARE_FINAL_TYPE (TfChartView, tf_chart_view, TF, CHART_VIEW, GtkWidget)

/* signal: "row-chosen" (int): a row of the sample */

GtkWidget *tf_chart_view_new (const TfLawsChart *chart);
const TfLawsChart *tf_chart_view_get_chart (TfChartView *view);
/** tf_chart_view_set_chart: another chart in the same place. */
void tf_chart_view_set_chart (TfChartView *view, const TfLawsChart *chart);
/** tf_chart_view_show: (nullable) @charts; kept alive. */
void tf_chart_view_show (TfChartView *view, TfLawsCharts *charts);

/** tf_chart_view_set_fits: it is the enlarged one: it takes what room there is, as far as the chart can. */
void tf_chart_view_set_fits (TfChartView *view, gboolean fits);

G_END_DECLS
