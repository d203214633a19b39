/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfPreferencesDialog: how marks are measured in this window, and how the plate looks. A row an
 * option, made from the method's own table; what is chosen is kept with every mark. */

#include <adwaita.h>

#include "tf-session.h"

G_BEGIN_DECLS

#define TF_TYPE_PREFERENCES_DIALOG (tf_preferences_dialog_get_type ())
G_DECLARE_FINAL_TYPE (TfPreferencesDialog, tf_preferences_dialog, TF, PREFERENCES_DIALOG,
                      AdwPreferencesWindow)

GtkWidget *tf_preferences_dialog_new (GtkWindow *parent, TfSession *session);

/** tf_preferences_restore_measure: as it was chosen last. */
void tf_preferences_restore_measure (TfSession *session);
/** tf_preferences_set_measure: one option, by name and C-locale text, as in a table; kept. FALSE with
 * an error that says the range. */
gboolean tf_preferences_set_measure (TfSession *session, const char *option, const char *text,
                                     GError **error);

G_END_DECLS
