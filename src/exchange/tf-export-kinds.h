/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Other tables of a ledger than that of marks, in the same formats.
 *
 * A passage and a region are told by the mark that stands for them (greatest flux, where mu is at
 * least 0.5 if there is such a one), in the columns of all tables, which other programs and `bring`
 * know already; behind them stand the numbers of their own. Outside rows and, when asked, hints are
 * in. A verdict is "cannot say" where the marks do not hold to it.
 */

#include "tf-export.h"

G_BEGIN_DECLS

/** tf_export_passages, tf_export_regions, tf_export_frames: a table by the ending of @path.
 * @n: (out): rows */
gboolean tf_export_passages (const char *path, TfLedger *ledger, const TfStudy *study,
                             gboolean with_hints, const char *source, guint *n, GError **error);
gboolean tf_export_regions (const char *path, TfLedger *ledger, const TfStudy *study,
                            gboolean with_hints, const char *source, guint *n, GError **error);
gboolean tf_export_frames (const char *path, TfLedger *ledger, const char *source, guint *n,
                           GError **error);

G_END_DECLS
