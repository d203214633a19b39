/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfDialView: the dial of chart/tf-dial.h in a widget. TfVerdictSign: the diamond beside the
 * verdict. */

#include <gtk/gtk.h>

#include "tf-dial.h"

G_BEGIN_DECLS

#define TF_TYPE_DIAL_VIEW (tf_dial_view_get_type ())
G_DECLARE_FINAL_TYPE (TfDialView, tf_dial_view, TF, DIAL_VIEW, GtkWidget)

void tf_dial_view_set (TfDialView *view, const TfDial *dial);

#define TF_TYPE_VERDICT_SIGN (tf_verdict_sign_get_type ())
G_DECLARE_FINAL_TYPE (TfVerdictSign, tf_verdict_sign, TF, VERDICT_SIGN, GtkWidget)

void tf_verdict_sign_set (TfVerdictSign *sign, TfDiamond kind);

G_END_DECLS
