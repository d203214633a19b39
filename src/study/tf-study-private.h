/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include "tf-study.h"

G_BEGIN_DECLS

TfDivides *tf_study_dup_divides (const TfStudy *study);
TfVerdict *tf_study_judge (const TfStudy *study, const TfSample *sample);
/** tf_study_has_floor: whether a row was measured with the even floor @gauss (within 0.5 %). */
gboolean tf_study_has_floor (const TfRow *row, double gauss);
/** tf_study_even_floor: the greatest, over instruments, of the median over that instrument's frames of 3 sigma (mu 0.5)/0.5. */
double tf_study_even_floor (TfLedger *ledger, GError **error);
/** tf_study_what_if: (element-type TfWhatIf): the share and the slope under other choices, each alone. */
GArray *tf_study_what_if (const TfStudy *study, const TfSample *sample);

G_END_DECLS
