/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfSeriesView: the charts of the passage in hand. A click chooses the moment, a drag a stretch of
 * time, a double click all of it again. */

#include "tf-followed.h"
#include "tf-series-chart.h"

G_BEGIN_DECLS

#define TF_TYPE_SERIES_VIEW (tf_series_view_get_type ())
G_DECLARE_FINAL_TYPE (TfSeriesView, tf_series_view, TF, SERIES_VIEW, GtkWidget)

void tf_series_view_set_followed (TfSeriesView *view, TfFollowed *followed);
/** tf_followed_chart: what the charts show; borrows from @followed until its passage changes. */
TfSeriesChart tf_followed_chart (TfFollowed *followed);

G_END_DECLS
