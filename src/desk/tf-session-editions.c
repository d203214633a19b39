/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Editions of the study in view: worked out in the reading lane's thread, kept as a deed, compared. They
 * are of the whole study, whatever stretch is picked on the wings. */

#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-export.h"
#include "tf-session-laws-private.h"
#include "tf-session-studies.h"
#include "tf-study-compare.h"
#include "tf-study-task.h"

/* -- working one out, in a thread ---------------------------------------------------------------- */

static char *
work_out (TfStudyTask *task, TfLedger *ledger, const TfStudy *study, GError **error)
{
  g_autoptr (TfFindings) findings = tf_study_task_whole (task, study, ledger, error);
  g_autoptr (GPtrArray) keep = NULL;
  g_autoptr (TfStudy) now = tf_study_copy (study);
  if (findings == NULL || !tf_study_task_step (task, error))
    return NULL;
  now->even_floor_gauss = findings->even_floor_gauss;
  g_autoptr (GArray) rows = tf_export_rows (ledger, now, now->sieve.with_hints, &keep, error);
  return rows != NULL ? tf_edition_dup_text (now, findings, rows) : NULL;
}

typedef struct
{
  char *path;
  TfStudy *study;
  TfStudyTask *task;
  char *name;            /* of the edition to be kept */
  char *first, *second;  /* of those to be compared; second NULL: the study */
  TfCompared compared;
} Job;

static void
job_free (gpointer data)
{
  Job *job = data;
  g_free (job->path);
  tf_study_free (job->study);
  tf_study_task_unref (job->task);
  g_free (job->name);
  g_free (job->first);
  g_free (job->second);
  g_free (job);
}

enum
{
  STEPS = TF_STUDY_WHOLE_STEPS + 1
};

static Job *
job_new (TfSession *self, TfStudyTask *task)
{
  Job *job = g_new0 (Job, 1);
  job->path = g_strdup (self->path);
  job->study = tf_study_copy (self->laws->study);
  job->task = task;
  return job;
}

/* -- keeping one --------------------------------------------------------------------------------- */

static void
make (GTask *task, gpointer source, gpointer data, GCancellable *cancellable)
{
  const Job *job = data;
  GError *error = NULL;
  g_autoptr (TfLedger) ledger = tf_ledger_open (job->path, &error);
  char *text = ledger != NULL ? work_out (job->task, ledger, job->study, &error) : NULL;
  if (text != NULL)
    g_task_return_pointer (task, text, g_free);
  else
    g_task_return_error (task, error);
}

static void
keep (TfSession *self, const Job *job, const char *text)
{
  TfDeed *all = tf_deed_new_together ("edition", self->person);
  TfDeed *edition = tf_deed_new (TF_DEED_EDITION, self->person);
  edition->study = g_strdup (job->study->name);
  edition->name = g_strdup (job->name);
  edition->text = g_strdup (text);
  tf_deed_add (all, tf_session_study_deed (self, job->study));
  tf_deed_add (all, edition);
  tf_session_push_study (self, all);
  g_autofree char *line = g_strdup_printf (_ ("The edition “%s” is kept."), job->name);
  tf_session_say (self, line);
}

static void
made (GObject *source, GAsyncResult *result, gpointer data)
{
  TfSession *self = TF_SESSION (source);
  g_autoptr (GError) error = NULL;
  g_autofree char *text = g_task_propagate_pointer (G_TASK (result), &error);
  const Job *job = g_task_get_task_data (G_TASK (result));
  if (!tf_study_task_end (job->task, self))
    return;
  if (text != NULL && self->person != NULL)
    keep (self, job, text);
  else if (error != NULL)
    tf_session_say (self, error->message);
}

void
tf_session_keep_edition (TfSession *self, const char *name)
{
  g_return_if_fail (TF_IS_SESSION (self) && name != NULL);
  if (!tf_session_is_writable (self) || self->laws->hold.in_hand)
    return;
  if (self->person == NULL)
    {
      tf_session_emit (self, TF_SIGNAL_PERSON_NEEDED);
      return;
    }
  TfStudyTask *own = tf_study_task_begin (self, _ ("Working out the edition"), STEPS);
  if (own == NULL)
    return;
  Job *job = job_new (self, own);
  job->name = g_strstrip (g_strdup (name));
  g_autoptr (GTask) task = g_task_new (self, NULL, made, NULL);
  g_task_set_task_data (task, job, job_free);
  g_task_run_in_thread (task, make);
}

gboolean
tf_session_makes_edition (TfSession *self)
{
  return self->laws->task != NULL;
}

/* -- a choice of "what if" taken in ---------------------------------------------------------------- */

static gboolean
is_taken (TfSession *self, const char *name)
{
  const GPtrArray *editions = self->laws->editions;
  for (guint k = 0; editions != NULL && k < editions->len; k++)
    if (strcmp (((TfNamed *)g_ptr_array_index (editions, k))->name, name) == 0)
      return TRUE;
  return FALSE;
}

static char *
dup_free_name (TfSession *self, const char *choice)
{
  g_autofree char *stem = g_strdup_printf ("%s · %s", self->laws->study->name, choice);
  char *name = g_strdup (stem);
  for (guint n = 2; is_taken (self, name); n++)
    {
      g_free (name);
      name = g_strdup_printf ("%s %u", stem, n);
    }
  return name;
}

gboolean
tf_session_apply_what_if (TfSession *self, const char *what_if)
{
  g_return_val_if_fail (TF_IS_SESSION (self) && what_if != NULL, FALSE);
  g_autoptr (TfStudy) study = tf_study_copy (self->laws->study);
  if (!tf_what_if_apply (what_if, study))
    return FALSE;
  g_autofree char *name = dup_free_name (self, what_if);
  tf_session_set_study (self, study);
  tf_session_keep_edition (self, name);
  return TRUE;
}

/* -- comparing -------------------------------------------------------------------------------------- */

static char *
dup_edition (TfLedger *ledger, const Job *job, const char *name, GError **error)
{
  if (name == NULL)
    return work_out (job->task, ledger, job->study, error);
  g_autoptr (TfNamed) named = tf_ledger_edition (ledger, name, error);
  if (named == NULL && error != NULL && *error == NULL)
    g_set_error (error, TF_STUDY_ERROR, TF_STUDY_ERROR_READ, _ ("%s has no edition “%s”"), job->path,
                 name);
  return named != NULL ? g_strdup (named->text) : NULL;
}

static void
compare (GTask *task, gpointer source, gpointer data, GCancellable *cancellable)
{
  const Job *job = data;
  GError *error = NULL;
  g_autoptr (TfLedger) ledger = tf_ledger_open (job->path, &error);
  g_autofree char *first = ledger != NULL ? dup_edition (ledger, job, job->first, &error) : NULL;
  g_autofree char *second = first != NULL ? dup_edition (ledger, job, job->second, &error) : NULL;
  GPtrArray *differences
      = second != NULL ? tf_edition_differences (first, second, &error) : NULL;
  if (differences != NULL)
    g_task_return_pointer (task, differences, (GDestroyNotify)g_ptr_array_unref);
  else
    g_task_return_error (task, error);
}

static void
compared (GObject *source, GAsyncResult *result, gpointer data)
{
  g_autoptr (GObject) kept = data;
  const Job *job = g_task_get_task_data (G_TASK (result));
  g_autoptr (GError) error = NULL;
  g_autoptr (GPtrArray) differences = g_task_propagate_pointer (G_TASK (result), &error);
  if (tf_study_task_end (job->task, TF_SESSION (source)))
    job->compared (differences, error != NULL ? error->message : NULL, kept);
}

void
tf_session_compare_editions (TfSession *self, const char *first, const char *second,
                             TfCompared done, GObject *data)
{
  g_return_if_fail (TF_IS_SESSION (self) && first != NULL && done != NULL);
  TfStudyTask *own = tf_study_task_begin (self, _ ("Comparing"), STEPS);
  if (own == NULL)
    return;
  Job *job = job_new (self, own);
  job->first = g_strdup (first);
  job->second = g_strdup (second);
  job->compared = done;
  g_autoptr (GTask) task
      = g_task_new (self, NULL, compared, data != NULL ? g_object_ref (data) : NULL);
  g_task_set_task_data (task, job, job_free);
  g_task_run_in_thread (task, compare);
}
