/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfOptionRow: one option of a method as a control: a switch, a number with its unit and range, or a
 * choice. What it says and allows comes from the option's own table. */

#include <gtk/gtk.h>

#include "tf-option.h"

G_BEGIN_DECLS

#define TF_TYPE_OPTION_ROW (tf_option_row_get_type ())
G_DECLARE_FINAL_TYPE (TfOptionRow, tf_option_row, TF, OPTION_ROW, GtkWidget)

/* signal: "changed": by a hand; tf_option_row_store() gives what it is now. */

GtkWidget *tf_option_row_new (const TfOption *option);
/** tf_option_row_show: the value of @params; no signal. */
void tf_option_row_show (TfOptionRow *row, gconstpointer params);
/** tf_option_row_store: into @params. */
void tf_option_row_store (TfOptionRow *row, gpointer params);

G_END_DECLS
