/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfStudyLive: the shares and the slope of a study while its divides move, however many rows there
 * are: only the rows in reach of a divide are judged again (tf-tally.h). What takes draws, medians
 * or other choices stays as it was found. */

#include "tf-study.h"

G_BEGIN_DECLS

typedef struct _TfStudyLive TfStudyLive;

/** tf_study_live_new: begins with @findings, which must live as long as it; about half a second at a
 * million rows. NULL when the study's line is not one that can be kept (tf_tally_offers()). */
TfStudyLive *tf_study_live_new (const TfStudy *study, const TfFindings *findings);
void tf_study_live_free (TfStudyLive *live);
/** tf_study_live_move: @study as before but for its divides. Returns how many verdicts changed. */
guint tf_study_live_move (TfStudyLive *live, const TfStudy *study);
/** tf_study_live_hale: (element-type TfHaleRow): as they stand now, without draws. Borrowed, until
 * the next move. */
const GArray *tf_study_live_hale (const TfStudyLive *live);
/** tf_study_live_joy: (element-type TfJoyFit): the slope over all cycles, without its interval.
 * Borrowed, until the next move. */
const GArray *tf_study_live_joy (const TfStudyLive *live);
/** tf_study_live_dup_words: tf_findings_dup_words() with these numbers. @study: as it was moved. */
char *tf_study_live_dup_words (const TfStudyLive *live, const TfStudy *study);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfStudyLive, tf_study_live_free)

G_END_DECLS
