/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfStudyTaken: what a study is run on, apart from any ledger, reference counted; once it is filled any
 * thread may use it. Rows stand in the ledger's order; the sample row of each has its place as its
 * number, and regions and passages numbered from 1 in the order in which they first come, so that draws
 * repeat. A study bundle keeps one and gives it back.
 */

#include "tf-study.h"

G_BEGIN_DECLS

typedef struct _TfStudyTaken TfStudyTaken;

/** tf_study_take: of a ledger, no more than the study asks about, with fluxes as it asks for them. */
TfStudyTaken *tf_study_take (const TfStudy *study, TfLedger *ledger, GError **error);
/** tf_study_take_whole: likewise with every column of each row, and fluxes as measured. */
TfStudyTaken *tf_study_take_whole (const TfStudy *study, TfLedger *ledger, GError **error);
/** tf_study_taken_new: empty, for somebody who fills it with whole rows. @floor_gauss: the even floor; NaN:
 * not known. @scales: (transfer full) (element-type TfKeptScale) */
TfStudyTaken *tf_study_taken_new (double floor_gauss, GPtrArray *scales);
/** tf_study_taken_add: @row: (transfer full). The number of @sample is set. */
void tf_study_taken_add (TfStudyTaken *taken, TfRow *row, TfSampleRow sample);
/** tf_study_taken_close: after the last one: they are put into the order in which a ledger's rows are
 * taken, by time and latitude, so that no sum hangs on how a file has them. */
void tf_study_taken_close (TfStudyTaken *taken);
TfStudyTaken *tf_study_taken_ref (TfStudyTaken *taken);
void tf_study_taken_unref (TfStudyTaken *taken);
/** tf_study_taken_serves: whether @study needs no other rows than these. */
gboolean tf_study_taken_serves (const TfStudyTaken *taken, const TfStudy *study);

guint tf_study_taken_get_n (const TfStudyTaken *taken);
const TfSample *tf_study_taken_get_sample (const TfStudyTaken *taken);
/** tf_study_taken_get_row: @k: place; NULL when not taken whole. */
const TfRow *tf_study_taken_get_row (const TfStudyTaken *taken, guint k);
/** tf_study_taken_get_scales: (element-type TfKeptScale) */
const GPtrArray *tf_study_taken_get_scales (const TfStudyTaken *taken);

/** tf_study_run_taken: what tf_study_run() does. @ledger: (nullable): without, other choices that need other
 * measures, or hints that are not among the rows, are "not-measured". */
TfFindings *tf_study_run_taken (const TfStudy *study, const TfStudyTaken *taken, TfLedger *ledger);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfStudyTaken, tf_study_taken_unref)

G_END_DECLS
