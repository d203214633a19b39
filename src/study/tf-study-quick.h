/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfStudyQuick: share and robust slope of parts of the same rows under one choice after the other. What
 * no choice changes is told once a row, and tilts over latitudes stand in order once for all; a choice
 * then costs a look at each row's few bytes. What it gives is what tf_joy_slope() and a count over
 * tf_study_judge() give. */

#include "tf-study-private.h"

G_BEGIN_DECLS

typedef struct _TfStudyQuick TfStudyQuick;

/** tf_study_quick_new: @all: what the findings' samples are parts of, must live as long.
 * @workers: (nullable). Returns: (nullable): NULL when the study's fit is not of that kind. */
TfStudyQuick *tf_study_quick_new (const TfStudy *study, const TfFindings *findings,
                                  const TfSample *all, TfWorkers *workers);
void tf_study_quick_free (TfStudyQuick *quick);
/** tf_study_quick_fill: counts, share and slope of @row. @variant: the study with other divides, equator
 * zone, steepness or sampling rule; @later_s as in tf_study_judge(). Any thread. FALSE, and nothing
 * done: it takes the long way. */
gboolean tf_study_quick_fill (const TfStudyQuick *quick, const TfStudy *variant,
                              const TfSample *sample, double later_s, TfWhatIf *row);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfStudyQuick, tf_study_quick_free)

G_END_DECLS
