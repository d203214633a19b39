/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfStudySource: all that a study was run on, apart from any ledger: what a study bundle keeps and
 * gives back. Rows stand in the ledger's order; the sample row of each has its place as its number,
 * and regions and passages numbered from 1 in the order in which they first come, so that draws
 * repeat. Fluxes are as measured: the study says whether scales are applied.
 */

#include "tf-study.h"

G_BEGIN_DECLS

typedef struct
{
  GPtrArray *rows;   /* TfRow */
  TfSample *all;     /* one a row */
  GPtrArray *scales; /* TfKeptScale */
  double floor_gauss; /* the even floor; NaN: not known */
} TfStudySource;

/** tf_study_source_new: empty, for somebody who fills it. */
TfStudySource *tf_study_source_new (double floor_gauss);
/** tf_study_source_read: what tf_study_run() would take of the ledger. */
TfStudySource *tf_study_source_read (const TfStudy *study, TfLedger *ledger, GError **error);
void tf_study_source_free (TfStudySource *source);
/** tf_study_run_source: as tf_study_run(); what would need other measures, or hints that are not
 * among the rows, is "not-measured". */
TfFindings *tf_study_run_source (const TfStudy *study, const TfStudySource *source);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfStudySource, tf_study_source_free)

G_END_DECLS
