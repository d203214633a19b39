/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfConditionRow: one condition of a sieve with pickers: a column of the tables, a comparison, a value
 * with its unit. What is not a condition yet says what it lacks and is not taken. */

#include <gtk/gtk.h>

#include "tf-sieve.h"

G_BEGIN_DECLS

#define TF_TYPE_CONDITION_ROW (tf_condition_row_get_type ())
G_DECLARE_FINAL_TYPE (TfConditionRow, tf_condition_row, TF, CONDITION_ROW, GtkWidget)

/* signals: "changed": by a hand; "removed": its button */

/** tf_condition_row_new: @condition: (nullable): what it begins with. */
GtkWidget *tf_condition_row_new (const TfCondition *condition);
/** tf_condition_row_dup: (transfer full): NULL while there is none. */
TfCondition *tf_condition_row_dup (TfConditionRow *row);
/** tf_condition_row_tell: how many rows it leaves out, and how many pass for lack of the quantity. */
void tf_condition_row_tell (TfConditionRow *row, guint left_out, guint lacking);
/** tf_condition_row_focus: to the picker of its column. */
void tf_condition_row_focus (TfConditionRow *row);

G_END_DECLS
