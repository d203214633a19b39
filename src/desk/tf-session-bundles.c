/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Study bundles: the study in view as one, and one read back, worked out again and compared with its
 * own numbers. Both are of the whole study, whatever stretch is picked on the wings. */

#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-bundle.h"
#include "tf-save-as.h"
#include "tf-session-bundles.h"
#include "tf-session-laws-private.h"
#include "tf-session-studies.h"
#include "tf-study-task.h"

/* -- saving one ------------------------------------------------------------------------------------ */

enum
{
  SAVE_STEPS = TF_STUDY_WHOLE_STEPS + 2,
  LOOK_STEPS = 3
};

typedef struct
{
  char *path; /* of the ledger */
  TfStudy *study;
  TfSaving *saving;
  guint at;
} Making;

static void
making_free (gpointer data)
{
  Making *making = data;
  g_free (making->path);
  tf_study_free (making->study);
  g_free (making);
}

static gboolean
step (gpointer data, GError **error)
{
  Making *making = data;
  tf_saving_tell (making->saving, making->at++, SAVE_STEPS);
  if (!tf_saving_is_stopped (making->saving))
    return TRUE;
  g_set_error_literal (error, G_IO_ERROR, G_IO_ERROR_CANCELLED, _ ("It was stopped: nothing was saved."));
  return FALSE;
}

static char *
write_bundle (TfSaving *saving, gpointer job, const char *path, GError **error)
{
  Making *making = job;
  making->saving = saving;
  g_autoptr (TfLedger) ledger = tf_ledger_open (making->path, error);
  g_autoptr (TfFindings) findings
      = ledger != NULL ? tf_study_whole (making->study, ledger, tf_saving_get_cancel (saving), step, making,
                                         error)
                       : NULL;
  if (findings == NULL)
    return NULL;
  making->study->even_floor_gauss = findings->even_floor_gauss;
  g_autoptr (TfStudyTaken) taken
      = step (making, error) ? tf_study_take_whole (making->study, ledger, error) : NULL;
  if (taken == NULL || !step (making, error)
      || !tf_bundle_write (path, making->study, findings, taken, error))
    return NULL;
  return g_strdup_printf (_ ("Saved: %s: the study with %u rows, %u of them picks, its numbers and its charts"),
                          path, tf_study_taken_get_n (taken), tf_sample_get_n (findings->sample));
}

void
tf_session_save_bundle (TfSession *self, const char *path)
{
  g_return_if_fail (TF_IS_SESSION (self) && path != NULL);
  if (self->path == NULL)
    return;
  Making *making = g_new0 (Making, 1);
  making->path = g_strdup (self->path);
  making->study = tf_study_copy (self->laws->study);
  making->study->version = tf_session_is_study_changed (self) ? 0 : tf_session_get_kept_version (self);
  tf_save_as (self, path, write_bundle, making, making_free);
}

/* -- looking at one -------------------------------------------------------------------------------- */

typedef struct
{
  char *path;
  TfStudyTask *task;
  TfBundleTold told;
} Looking;

static void
looking_free (gpointer data)
{
  Looking *looking = data;
  tf_study_task_unref (looking->task);
  g_free (looking->path);
  g_free (looking);
}

void
tf_bundle_look_free (TfBundleLook *look)
{
  if (look == NULL)
    return;
  g_clear_pointer (&look->differences, g_ptr_array_unref);
  g_clear_pointer (&look->not_compared, g_ptr_array_unref);
  tf_study_free (look->study);
  g_free (look->program);
  g_free (look->name);
  g_free (look);
}

static void
look_in_thread (GTask *gtask, gpointer source, gpointer data, GCancellable *cancellable)
{
  const Looking *looking = data;
  GError *error = NULL;
  g_autoptr (TfBundle) bundle
      = tf_study_task_step (looking->task, &error) ? tf_bundle_read (looking->path, &error) : NULL;
  g_autoptr (TfFindings) findings = bundle != NULL && tf_study_task_step (looking->task, &error)
                                        ? tf_study_run_taken (bundle->study, bundle->taken, NULL)
                                        : NULL;
  if (findings == NULL || !tf_study_task_step (looking->task, &error))
    {
      g_task_return_error (gtask, error);
      return;
    }
  TfBundleLook *look = g_new0 (TfBundleLook, 1);
  look->differences = tf_bundle_differences (bundle, bundle->study, findings, &look->not_compared);
  look->n_rows = tf_study_taken_get_n (bundle->taken);
  look->n_picks = tf_sample_get_n (findings->sample);
  look->program = g_strdup (bundle->program);
  look->name = g_path_get_basename (looking->path);
  look->study = tf_study_copy (bundle->study);
  g_task_return_pointer (gtask, look, (GDestroyNotify)tf_bundle_look_free);
}

static void
looked (GObject *source, GAsyncResult *result, gpointer data)
{
  TfSession *self = TF_SESSION (source);
  g_autoptr (GObject) kept = data;
  g_autoptr (GError) error = NULL;
  g_autoptr (TfBundleLook) look = g_task_propagate_pointer (G_TASK (result), &error);
  const Looking *looking = g_task_get_task_data (G_TASK (result));
  if (tf_study_task_end (looking->task, self))
    looking->told (look, error != NULL ? error->message : NULL, kept);
}

void
tf_session_look_at_bundle (TfSession *self, const char *path, TfBundleTold told, GObject *data)
{
  g_return_if_fail (TF_IS_SESSION (self) && path != NULL && told != NULL);
  TfStudyTask *task = tf_study_task_begin (self, _ ("Working the bundle out again"), LOOK_STEPS);
  if (task == NULL)
    return;
  Looking *looking = g_new0 (Looking, 1);
  *looking = (Looking){ g_strdup (path), task, told };
  g_autoptr (GTask) gtask
      = g_task_new (self, NULL, looked, data != NULL ? g_object_ref (data) : NULL);
  g_task_set_task_data (gtask, looking, looking_free);
  g_task_run_in_thread (gtask, look_in_thread);
}
