/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Numbers into order, in time that goes with their count alone. */

#include <glib.h>

G_BEGIN_DECLS

/** tf_sort_numbers: the least first, NaN last. */
void tf_sort_numbers (double *values, guint n);
/** tf_sort_order: (transfer full): indices of @keys, the least first, NaN last, equal ones as they
 * stand. */
guint *tf_sort_order (const double *keys, guint n);

G_END_DECLS
