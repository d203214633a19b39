/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* What differs between two states of a study: documents to the digits printed, and editions with
 * the reasons: rows gone, new or changed, choices changed, another program. */

#include "tf-columns.h"
#include "tf-study.h"

G_BEGIN_DECLS

/** tf_json_differences: (transfer full) (element-type utf8): "joy[3].slope: was 0.41, is 0.43";
 * numbers that agree to the digits printed (shares 0.01 %, slopes 0.001, tilts 0.01 degrees) are
 * equal; at most 1,000. */
GPtrArray *tf_json_differences (JsonNode *before, JsonNode *now);

/** tf_edition_dup_text: a study's state: its choices, its numbers and what each pick says.
 * @rows: (element-type TfExportRow): what the study read, in its order */
char *tf_edition_dup_text (const TfStudy *study, const TfFindings *findings, const GArray *rows);
/** tf_edition_differences: (transfer full) (element-type utf8): sentences; empty: the same. NULL when
 * @text is no edition. */
GPtrArray *tf_edition_differences (const char *text, const char *now, GError **error);

G_END_DECLS
