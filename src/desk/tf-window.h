/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfWindow: one window on one ledger. It holds the session, gives it to its panels, and shows
 * what concerns all of them: the ledger's name, the person, the age of the newest frame, and, in
 * bars that stay, what could not be opened or saved. All commands are window actions. */

#include <adwaita.h>

#include "tf-session.h"

G_BEGIN_DECLS

#define TF_TYPE_WINDOW (tf_window_get_type ())
G_DECLARE_FINAL_TYPE (TfWindow, tf_window, TF, WINDOW, AdwApplicationWindow)

TfWindow *tf_window_new (GtkApplication *application);
TfSession *tf_window_get_session (TfWindow *window);
/** tf_window_open: a ledger and frames; a path is taken for a ledger by its ending or its first
 * bytes. */
void tf_window_open (TfWindow *window, char *const *paths);
/** tf_window_is_ledger: whether @path is (or by its name would be) a ledger */
gboolean tf_window_is_ledger (const char *path);
/** tf_window_say: something to be said once */
void tf_window_say (TfWindow *window, const char *text);

G_END_DECLS
