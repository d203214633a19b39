/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfPreferences: what the window remembers between days: a key file in the user's configuration
 * folder. Numbers never depend on it. */

#include <glib.h>

G_BEGIN_DECLS

/** tf_preferences_dup: (nullable) the value of a key ("person", "ledger", "palette") */
char *tf_preferences_dup (const char *key);
/** tf_preferences_set: NULL takes the key away. A file that cannot be written is no error a
 * person could act upon: it is left. */
void tf_preferences_set (const char *key, const char *value);

G_END_DECLS
