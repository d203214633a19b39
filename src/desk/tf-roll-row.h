/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfRollRow: one frame in the roll: a day heading when it is the first of its day, a stripe that
 * tells its state, a small picture, the time and what is on it. */

#include "tf-frame-item.h"

G_BEGIN_DECLS

#define TF_TYPE_ROLL_ROW (tf_roll_row_get_type ())
G_DECLARE_FINAL_TYPE (TfRollRow, tf_roll_row, TF, ROLL_ROW, GtkWidget)

/** tf_roll_row_set_item: NULL lets go */
void tf_roll_row_set_item (TfRollRow *row, TfFrameItem *item);
/** tf_roll_row_dup_name: what a screen reader says of the row */
char *tf_roll_row_dup_name (TfFrameItem *item);

G_END_DECLS
