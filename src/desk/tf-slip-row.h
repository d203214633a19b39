/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfSlipRow: one number of the slip: its name, its value, what stands under it; pressed, it
 * opens how the number was got. */

#include <gtk/gtk.h>

G_BEGIN_DECLS

#define TF_TYPE_SLIP_ROW (tf_slip_row_get_type ())
G_DECLARE_FINAL_TYPE (TfSlipRow, tf_slip_row, TF, SLIP_ROW, GtkWidget)

/** tf_slip_row_set: (nullable) @under */
void tf_slip_row_set (TfSlipRow *row, const char *name, const char *value, const char *under,
                      const char *how);
const char *tf_slip_row_get_value (TfSlipRow *row);
const char *tf_slip_row_get_how (TfSlipRow *row);

G_END_DECLS
