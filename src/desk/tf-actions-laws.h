/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include <adwaita.h>

#include "tf-session.h"
#include "tf-window.h"

G_BEGIN_DECLS

/** tf_window_add_laws_actions: commands of the Laws bench and of the stretches on the wings. */
void tf_window_add_laws_actions (TfWindow *window);
void tf_window_update_laws_actions (TfWindow *window);
/** tf_window_add_study_actions: commands of named studies and editions. */
void tf_window_add_study_actions (TfWindow *window);
void tf_window_update_study_actions (TfWindow *window);
/** tf_window_add_chart_actions: charts as files. tf_window_add_scale_actions: scales of instruments. */
void tf_window_add_chart_actions (TfWindow *window);
void tf_window_add_scale_actions (TfWindow *window);
/** tf_window_add_bundle_actions: study bundles saved and looked at. */
void tf_window_add_bundle_actions (TfWindow *window);
void tf_window_update_bundle_actions (TfWindow *window);
/** tf_window_ask_study_file: the command @action is given the path that is chosen. @name: of a file to be
 * saved; NULL: one is opened. @kind, @pattern: of the files shown. */
void tf_window_ask_study_file (TfWindow *window, const char *action, const char *title, const char *name,
                               const char *kind, const char *pattern);
/** tf_window_show_lines: a question with no answer but "close": lines that can be selected. */
AdwMessageDialog *tf_window_show_lines (TfWindow *window, const char *heading, const char *body,
                                       const char *lines);
/** tf_laws_dup_lines: (transfer full): sentences about numbers, a line each, with as many digits as are read. */
char *tf_laws_dup_lines (const GPtrArray *lines);
/** tf_window_set_lines: what a dialog shows under its words: as high as it is, then scrolled. */
void tf_window_set_lines (AdwMessageDialog *dialog, GtkWidget *scrolled, GtkWidget *child);
/** tf_study_menu_new: (transfer full): the studies there are, and what can be done with one. */
GMenuModel *tf_study_menu_new (TfSession *session);

G_END_DECLS
