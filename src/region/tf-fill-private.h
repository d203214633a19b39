/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfFill: an outline made ready for very many "is this point inside?" questions.
 *
 * The outline is laid into the gnomonic plane about its cap's centre, where great circles are
 * straight lines. A grid over that plane knows which cells lie wholly inside or outside; only
 * points in cells that an edge may touch are tested edge by edge. The answer is that of
 * tf_outline_contains.
 */

#include <glib.h>

#include "tf-outline.h"

G_BEGIN_DECLS

typedef struct _TfFill TfFill;

TfFill *tf_fill_new (const TfOutline *outline);
void tf_fill_free (TfFill *fill);
/** tf_fill_contains: unit vector in the Carrington frame; left-out areas are outside; FALSE for
 * NaN. */
gboolean tf_fill_contains (const TfFill *fill, const double unit[3]);
/** tf_fill_row: the same for @n points; @inside gets 1 and 0. */
void tf_fill_row (const TfFill *fill, const double (*unit)[3], guint n, guint8 *inside);
/** tf_fill_columns: the same where the three parts of the vectors stand in columns of their own. */
void tf_fill_columns (const TfFill *fill, const double *x, const double *y, const double *z,
                      guint n, guint8 *inside);
/**
 * tf_fill_sample: @n x @n points spread over the outline's box; calls @func for those inside.
 * @weight: solid angle that the point stands for, in units of its cell.
 */
typedef void (*TfFillFunc) (const double unit[3], double weight, gpointer data);
void tf_fill_sample (const TfFill *fill, guint n, TfFillFunc func, gpointer data);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfFill, tf_fill_free)

G_END_DECLS
