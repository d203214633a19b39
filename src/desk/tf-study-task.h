/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfStudyTask: a study being worked out whole (an edition, a comparison, a bundle read back) in a thread:
 * counted in steps, stopped at any moment. One at a time a session; "status-changed" tells of it.
 * Reference counted: the thread may outlive the wish for it. */

#include "tf-session.h"
#include "tf-study.h"

G_BEGIN_DECLS

typedef struct _TfStudyTask TfStudyTask;

/** tf_study_task_begin: (transfer full) (nullable): @words: "Working out the edition"; NULL, and said,
 * when another is under way. */
TfStudyTask *tf_study_task_begin (TfSession *session, const char *words, guint steps);
/** tf_study_task_end: the thread is done. FALSE: it was stopped, or the ledger let go: take nothing of it. */
gboolean tf_study_task_end (TfStudyTask *task, TfSession *session);
TfStudyTask *tf_study_task_ref (TfStudyTask *task);
void tf_study_task_unref (TfStudyTask *task);
/** tf_study_task_step: from the thread: the next step begins. FALSE, with an error, once it is stopped. */
gboolean tf_study_task_step (TfStudyTask *task, GError **error);

/** TF_STUDY_WHOLE_STEPS: the steps of tf_study_whole(). */
#define TF_STUDY_WHOLE_STEPS 3
/** TfStudyStep: a step begins; FALSE with an error: stop. */
typedef gboolean (*TfStudyStep) (gpointer data, GError **error);
/** tf_study_whole: as tf_study_run(), in steps that are told and stopped. */
TfFindings *tf_study_whole (const TfStudy *study, TfLedger *ledger, TfCancel *cancel, TfStudyStep step,
                            gpointer data, GError **error);
/** tf_study_task_whole: the same for a task. */
TfFindings *tf_study_task_whole (TfStudyTask *task, const TfStudy *study, TfLedger *ledger, GError **error);

/** tf_session_dup_study_task: (transfer full) (nullable): "Working out the edition: step 2 of 4". */
char *tf_session_dup_study_task (TfSession *session);
/** tf_session_stop_study_task: nothing comes of it. */
void tf_session_stop_study_task (TfSession *session);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfStudyTask, tf_study_task_unref)

G_END_DECLS
