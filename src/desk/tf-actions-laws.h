/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include "tf-session.h"
#include "tf-window.h"

G_BEGIN_DECLS

/** tf_window_add_laws_actions: commands of the Laws bench and of the stretches on the wings. */
void tf_window_add_laws_actions (TfWindow *window);
void tf_window_update_laws_actions (TfWindow *window);
/** tf_window_add_study_actions: commands of named studies and editions. */
void tf_window_add_study_actions (TfWindow *window);
void tf_window_update_study_actions (TfWindow *window);
/** tf_window_add_chart_actions: charts as files; scales of instruments. */
void tf_window_add_chart_actions (TfWindow *window);
/** tf_study_menu_new: (transfer full): the studies there are, and what can be done with one. */
GMenuModel *tf_study_menu_new (TfSession *session);

G_END_DECLS
