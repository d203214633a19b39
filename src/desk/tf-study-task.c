/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-study-task.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-session-laws-private.h"

enum
{
  LOOK_MS = 100
};

struct _TfStudyTask
{
  char *words;
  guint steps;
  TfCancel *cancel;
  gint at; /* atomic */
  /* main thread */
  TfSession *session; /* borrowed; NULL once it is stopped */
  gint shown;
  guint timer;
};

static void
task_clear (gpointer data)
{
  TfStudyTask *task = data;
  g_clear_handle_id (&task->timer, g_source_remove);
  tf_cancel_unref (task->cancel);
  g_free (task->words);
}

TfStudyTask *
tf_study_task_ref (TfStudyTask *task)
{
  return g_atomic_rc_box_acquire (task);
}

void
tf_study_task_unref (TfStudyTask *task)
{
  if (task != NULL)
    g_atomic_rc_box_release_full (task, task_clear);
}

/* -- in the thread ------------------------------------------------------------------------------- */

static gboolean
is_stopped (const TfCancel *cancel, GError **error)
{
  gboolean stopped = tf_cancel_is_raised (cancel);
  if (stopped)
    g_set_error_literal (error, G_IO_ERROR, G_IO_ERROR_CANCELLED, _ ("It was stopped."));
  return stopped;
}

gboolean
tf_study_task_step (TfStudyTask *task, GError **error)
{
  g_atomic_int_inc (&task->at);
  return !is_stopped (task->cancel, error);
}

TfFindings *
tf_study_whole (const TfStudy *study, TfLedger *ledger, TfCancel *cancel, TfStudyStep step, gpointer data,
                GError **error)
{
  const TfStretch all = { NAN, NAN, NAN, NAN };
  if (!step (data, error))
    return NULL;
  g_autoptr (TfStudyTaken) taken = tf_study_take (study, ledger, error);
  if (taken == NULL || !step (data, error))
    return NULL;
  g_autoptr (TfFindings) choices
      = tf_study_again (taken, study, &all, TF_FINDINGS_WHAT_IF, ledger, NULL, cancel);
  if (is_stopped (cancel, error) || !step (data, error))
    return NULL;
  TfFindings *findings
      = tf_study_again (taken, study, &all, TF_FINDINGS_COMPLETE, ledger, choices, cancel);
  if (findings == NULL)
    is_stopped (cancel, error);
  return findings;
}

static gboolean
next_step (gpointer data, GError **error)
{
  return tf_study_task_step (data, error);
}

TfFindings *
tf_study_task_whole (TfStudyTask *task, const TfStudy *study, TfLedger *ledger, GError **error)
{
  return tf_study_whole (study, ledger, task->cancel, next_step, task, error);
}

/* -- in the main thread -------------------------------------------------------------------------- */

static gboolean
look (gpointer data)
{
  TfStudyTask *task = data;
  gint now = g_atomic_int_get (&task->at);
  if (task->session != NULL && now != task->shown)
    {
      task->shown = now;
      tf_session_emit (task->session, TF_SIGNAL_STATUS);
    }
  return G_SOURCE_CONTINUE;
}

static void
let_go (TfSession *session)
{
  TfStudyTask *task = session->laws->task;
  session->laws->task = NULL;
  g_clear_handle_id (&task->timer, g_source_remove);
  task->session = NULL;
  tf_study_task_unref (task);
  tf_session_emit (session, TF_SIGNAL_STATUS);
  tf_session_emit (session, TF_SIGNAL_LAWS);
}

TfStudyTask *
tf_study_task_begin (TfSession *session, const char *words, guint steps)
{
  TfSessionLaws *laws = session->laws;
  if (laws->task != NULL)
    {
      tf_session_say (session, _ ("A study is being worked out: wait for it, or stop it."));
      return NULL;
    }
  TfStudyTask *task = g_atomic_rc_box_new0 (TfStudyTask);
  task->words = g_strdup (words);
  task->steps = steps;
  task->cancel = tf_cancel_new ();
  task->session = session;
  task->timer = g_timeout_add (LOOK_MS, look, task);
  laws->task = tf_study_task_ref (task);
  tf_session_emit (session, TF_SIGNAL_STATUS);
  tf_session_emit (session, TF_SIGNAL_LAWS);
  return task;
}

gboolean
tf_study_task_end (TfStudyTask *task, TfSession *session)
{
  gboolean own = session->laws != NULL && session->laws->task == task;
  if (own)
    let_go (session);
  return own;
}

char *
tf_session_dup_study_task (TfSession *session)
{
  const TfStudyTask *task = session->laws->task;
  if (task == NULL)
    return NULL;
  guint at = CLAMP ((guint)g_atomic_int_get (&task->at), 1, task->steps);
  return g_strdup_printf (_ ("%s: step %u of %u"), task->words, at, task->steps);
}

void
tf_session_stop_study_task (TfSession *session)
{
  if (session->laws->task == NULL)
    return;
  tf_cancel_raise (session->laws->task->cancel);
  let_go (session);
}
