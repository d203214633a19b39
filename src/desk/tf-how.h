/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfHow: a flat button round something derived, which opens how it was got. Its child is what is
 * read; reached by Tab, opened by Enter, closed by Escape. */

#include <gtk/gtk.h>

G_BEGIN_DECLS

#define TF_TYPE_HOW (tf_how_get_type ())
G_DECLARE_FINAL_TYPE (TfHow, tf_how, TF, HOW, GtkButton)

/** tf_how_set: "@name: @value. How it was got" is its accessible name; @how: what opens. */
void tf_how_set (TfHow *how, const char *name, const char *value, const char *text);
const char *tf_how_get_text (TfHow *how);

G_END_DECLS
