/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include "tf-study.h"

G_BEGIN_DECLS

/** tf_study_dup_divides: the moved divides of the study under its options. */
TfDivides *tf_study_dup_divides (const TfStudy *study);
/** tf_study_judge: (transfer full): a verdict for each row, as if every minimum had come @later_s
 * seconds later. */
TfVerdict *tf_study_judge (const TfStudy *study, const TfSample *sample, double later_s);
/** tf_study_take_rows: the rows that pass the sieve into @findings; what is left out is counted by
 * reason. */
void tf_study_take_rows (TfFindings *findings, const TfStudy *study, const GPtrArray *rows);
/** tf_study_add_cautions: what must be said beside the numbers. */
void tf_study_add_cautions (TfFindings *findings, const TfStudy *study, const GPtrArray *rows);
/** tf_study_count: one more of @key. */
void tf_study_count (GHashTable *counts, const char *key);
/** tf_study_has_floor: whether a row was measured with the even floor @gauss (within 0.5 %). */
gboolean tf_study_has_floor (const TfRow *row, double gauss);
/** tf_study_what_if: (element-type TfWhatIf): the share and the slope under other choices, each
 * alone. */
GArray *tf_study_what_if (const TfStudy *study, const TfSample *sample);

G_END_DECLS
