/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfJudge: Hale's verdict for what the window shows, under a study's divides.
 * Immutable, may be read from any thread. */

#include "tf-study.h"

G_BEGIN_DECLS

typedef struct _TfJudge TfJudge;

TfJudge *tf_judge_new (void);
/** tf_judge_new_for: by that study's divides and options. */
TfJudge *tf_judge_new_for (const TfStudy *study);
TfJudge *tf_judge_ref (TfJudge *judge);
void tf_judge_unref (TfJudge *judge);
const TfDivides *tf_judge_get_divides (const TfJudge *judge);
const TfVerdictParams *tf_judge_get_params (const TfJudge *judge);
/** tf_judge_measure: @row: (out) (nullable): the measure as a sample row */
TfVerdict tf_judge_measure (const TfJudge *judge, const TfMeasure *measure, TfSampleRow *row);
TfVerdict tf_judge_point (const TfJudge *judge, const TfPoint *point);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfJudge, tf_judge_unref)

G_END_DECLS
