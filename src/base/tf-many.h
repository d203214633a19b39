/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Room for as many items as there may be regions: g_new() of some, and of a million in large pages where
 * the system has them, because to be given a million small ones takes longer than to fill them. */

#include <glib.h>

G_BEGIN_DECLS

#define tf_new_many(type, n)  ((type *)tf_many (n, sizeof (type)))
#define tf_new0_many(type, n) ((type *)tf_many0 (n, sizeof (type)))
/** tf_many, tf_many0: (transfer full): freed by g_free(). */
gpointer tf_many (gsize n, gsize size) G_GNUC_MALLOC;
gpointer tf_many0 (gsize n, gsize size) G_GNUC_MALLOC;
/** tf_dup_many: (transfer full): a copy. */
gpointer tf_dup_many (gconstpointer items, gsize n, gsize size);
/** tf_array_of_many: g_array_sized_new() of items that are not cleared. */
GArray *tf_array_of_many (guint size, guint n);

G_END_DECLS
