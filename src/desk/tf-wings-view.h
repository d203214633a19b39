/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfWingsView: the butterfly strip along the bottom: the map of the program. The wheel zooms
 * time about the pointer, a drag picks a stretch of time, a double click shows all, a click on a
 * dot goes to its frame and region. By keyboard: arrows move along time, + and − zoom, Home
 * shows all. */

#include "tf-session.h"

G_BEGIN_DECLS

#define TF_TYPE_WINGS_VIEW (tf_wings_view_get_type ())
G_DECLARE_FINAL_TYPE (TfWingsView, tf_wings_view, TF, WINGS_VIEW, GtkWidget)

/** tf_wings_view_get_span: the years in view. */
void tf_wings_view_get_span (TfWingsView *view, double *from, double *to);
void tf_wings_view_set_session (TfWingsView *view, TfSession *session);

G_END_DECLS
