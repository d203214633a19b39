/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The charts of a study as files: PDF, a column wide. */

#include "tf-study.h"

G_BEGIN_DECLS

/** tf_findings_write_figures: the charts that have something to show, as FOLDER/NAME.pdf.
 * Returns: (transfer full) (element-type filename): what was written; NULL on error. */
GPtrArray *tf_findings_write_figures (const TfFindings *findings, const TfStudy *study,
                                      const char *folder, GError **error);

G_END_DECLS
