/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfPowerView: how many regions are needed to tell two slopes or two shares apart: the question as
 * options, worked out point by point off the main thread, drawn and told as it comes. */

#include <gtk/gtk.h>

#include "tf-power.h"

G_BEGIN_DECLS

#define TF_TYPE_POWER_VIEW (tf_power_view_get_type ())
G_DECLARE_FINAL_TYPE (TfPowerView, tf_power_view, TF, POWER_VIEW, GtkWidget)

GtkWidget *tf_power_view_new (void);
/** tf_power_view_start: works it out, anew. tf_power_view_stop: what is there stays. */
void tf_power_view_start (TfPowerView *view);
void tf_power_view_stop (TfPowerView *view);
gboolean tf_power_view_is_busy (TfPowerView *view);
/** tf_power_view_set_option: by its name, as `power` takes it. */
gboolean tf_power_view_set_option (TfPowerView *view, const char *name, const char *text);
/** tf_power_view_dup_curve: (nullable) (transfer full): what is there. @wanted: the power asked for. */
TfPowerCurve *tf_power_view_dup_curve (TfPowerView *view, double *wanted);

G_END_DECLS
