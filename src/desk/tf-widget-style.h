/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* What drawings take from the widget they stand in: light or dark, contrast, the size of the
 * user's text. */

#include <gtk/gtk.h>

#include "tf-chart.h"

G_BEGIN_DECLS

/** tf_widget_text_size: height of the widget's own text in pixels, text scaling included. */
double tf_widget_text_size (GtkWidget *widget);
/** tf_widget_chart_style: @share: of the widget's own text size */
TfChartStyle tf_widget_chart_style (GtkWidget *widget, double share);
/** tf_widget_name_inside: the same accessible name for the focusable parts inside, which have none of their own (a GtkDropDown's button). */
void tf_widget_name_inside (GtkWidget *widget, const char *name);
/** tf_widget_describe: sets the accessible description when it changed. (transfer full) @text */
void tf_widget_describe (GtkWidget *widget, char *text);
/** tf_widget_paints_textures: the renderer takes textures better than cairo nodes. */
gboolean tf_widget_paints_textures (GtkWidget *widget);
/** tf_surface_append: adds an image surface to a snapshot the way the renderer likes, its top
 * left at (x, y), drawn at 1/@scale. */
void tf_surface_append (GtkSnapshot *snapshot, GtkWidget *widget, cairo_surface_t *surface,
                        double x, double y, double scale);

/** tf_widget_focus_when_open: what is in a closed GtkExpander is passed by on the way of Tab: GTK 4.8 would ask
 * for the window of a child that has none then. */
void tf_widget_focus_when_open (GtkWidget *expander, GtkWidget *child);

G_END_DECLS
