/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfDistinct: different numbers (of regions, of passages), numbered from 0 in the order in which they
 * first come. A million cost some hundredths of a second. */

#include <glib.h>

G_BEGIN_DECLS

typedef struct _TfDistinct TfDistinct;

/** tf_distinct_new: @expected: how many may come; more are no harm. */
TfDistinct *tf_distinct_new (guint expected);
void tf_distinct_free (TfDistinct *distinct);
/** tf_distinct_add: the number of @id, a new one when it has not come before. */
guint tf_distinct_add (TfDistinct *distinct, guint32 id);
/** tf_distinct_find: the number of @id; G_MAXUINT when it has not come. */
guint tf_distinct_find (const TfDistinct *distinct, guint32 id);
guint tf_distinct_get_n (const TfDistinct *distinct);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfDistinct, tf_distinct_free)

G_END_DECLS
