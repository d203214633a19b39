/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The same rows under other choices: what the window asks while somebody turns the knobs. A ledger's
 * rows are read once; sieve, sampling rule, divides and methods then act on them in memory. */

#include "tf-study-take.h"

G_BEGIN_DECLS

/** TfStretch: a stretch of time and a band of latitude, both ends included. NaN: open. */
typedef struct
{
  double from_year, to_year;
  double low_deg, high_deg;
} TfStretch;
gboolean tf_stretch_is_all (const TfStretch *stretch);
gboolean tf_stretch_is_same (const TfStretch *a, const TfStretch *b);

/** tf_study_copy: (transfer full) */
TfStudy *tf_study_copy (const TfStudy *study);

/** TfFindingsDepth: how much is worked out. */
typedef enum
{
  TF_FINDINGS_QUICK,    /* no draws, nothing under other choices */
  TF_FINDINGS_WHAT_IF,  /* the other choices, no draws */
  TF_FINDINGS_COMPLETE, /* the draws; the other choices are those of @before, which have none */
} TfFindingsDepth;
/**
 * tf_study_again: the laws of the rows that lie in the stretch, under @study.
 * @ledger: (nullable): for other choices that need other measures
 * @before: (nullable): findings of the same question with its other choices
 * @cancel: (nullable): raised by another thread, the draws end at once
 * Returns: (transfer full): NULL when it was cancelled.
 */
TfFindings *tf_study_again (const TfStudyTaken *taken, const TfStudy *study,
                            const TfStretch *stretch, TfFindingsDepth depth, TfLedger *ledger,
                            const TfFindings *before, const TfCancel *cancel);

G_END_DECLS
