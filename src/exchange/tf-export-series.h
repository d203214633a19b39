/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The series of a region as a table: a row a mark or hint, in the columns of all tables, with what
 * was derived, and from which window, before them. */

#include "tf-export.h"
#include "tf-series.h"

G_BEGIN_DECLS

/** tf_export_series: @series: (element-type TfSeries): one a passage, in order of time. */
gboolean tf_export_series (const char *path, const GPtrArray *series, const TfStudy *study,
                           const char *source, GError **error);

G_END_DECLS
