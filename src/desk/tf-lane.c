/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-lane.h"

struct _TfLane
{
  GThread *thread;
  GAsyncQueue *jobs; /* of Job; a Job without func ends the thread */
  char *path;
  char letter;
  int reopen; /* atomic */
};

typedef struct
{
  TfLaneFunc func;
  gpointer data;
  GDestroyNotify free_data, free_result;
  GTask *task; /* touched in the main thread only: it may hold the last reference of its source */
  GCancellable *cancellable;
  gpointer result;
  GError *error;
} Job;

static void
job_free (Job *job)
{
  if (job->free_data != NULL && job->data != NULL)
    job->free_data (job->data);
  g_clear_object (&job->task);
  g_clear_object (&job->cancellable);
  g_clear_error (&job->error);
  g_free (job);
}

static TfLedger *
open_ledger (TfLane *lane, GError **error)
{
  if (lane->letter != 0)
    return tf_ledger_open_or_create (lane->path, lane->letter, error);
  return tf_ledger_open (lane->path, error);
}

static void
run_job (Job *job, TfLedger *ledger, const GError *trouble)
{
  if (g_cancellable_set_error_if_cancelled (job->cancellable, &job->error))
    return;
  if (ledger == NULL)
    job->error = g_error_copy (trouble);
  else
    job->result = job->func (ledger, job->data, &job->error);
}

/* Back in the main thread. */
static gboolean
hand_over (gpointer data)
{
  Job *job = data;
  if (job->error != NULL)
    g_task_return_error (job->task, g_steal_pointer (&job->error));
  else
    g_task_return_pointer (job->task, job->result, job->free_result);
  job_free (job);
  return G_SOURCE_REMOVE;
}

static gpointer
lane_main (gpointer data)
{
  TfLane *lane = data;
  g_autoptr (TfLedger) ledger = NULL;
  g_autoptr (GError) trouble = NULL;
  for (;;)
    {
      Job *job = g_async_queue_pop (lane->jobs);
      if (job->func == NULL)
        {
          job_free (job);
          break;
        }
      if (g_atomic_int_compare_and_exchange (&lane->reopen, 1, 0))
        {
          g_clear_pointer (&ledger, tf_ledger_close);
          g_clear_error (&trouble);
          ledger = open_ledger (lane, &trouble);
        }
      run_job (job, ledger, trouble);
      g_idle_add_full (G_PRIORITY_DEFAULT, hand_over, job, NULL);
    }
  return NULL;
}

TfLane *
tf_lane_new (const char *path, char letter)
{
  g_return_val_if_fail (path != NULL, NULL);
  TfLane *lane = g_new0 (TfLane, 1);
  lane->path = g_strdup (path);
  lane->letter = letter;
  lane->reopen = 1;
  lane->jobs = g_async_queue_new ();
  lane->thread = g_thread_new ("tf-lane", lane_main, lane);
  return lane;
}

void
tf_lane_close (TfLane *lane)
{
  if (lane == NULL)
    return;
  g_async_queue_push (lane->jobs, g_new0 (Job, 1));
  g_thread_join (lane->thread);
  g_async_queue_unref (lane->jobs);
  g_free (lane->path);
  g_free (lane);
}

void
tf_lane_reopen (TfLane *lane)
{
  g_return_if_fail (lane != NULL);
  g_atomic_int_set (&lane->reopen, 1);
}

void
tf_lane_push (TfLane *lane, gpointer source, GCancellable *cancellable, TfLaneFunc func,
              gpointer data, GDestroyNotify free_data, GDestroyNotify free_result,
              GAsyncReadyCallback done, gpointer user_data)
{
  g_return_if_fail (lane != NULL && func != NULL);
  Job *job = g_new0 (Job, 1);
  job->func = func;
  job->data = data;
  job->free_data = free_data;
  job->free_result = free_result;
  job->task = g_task_new (source, cancellable, done, user_data);
  job->cancellable = cancellable != NULL ? g_object_ref (cancellable) : NULL;
  g_async_queue_push (lane->jobs, job);
}

gpointer
tf_lane_finish (GAsyncResult *result, GError **error)
{
  g_return_val_if_fail (G_IS_TASK (result), NULL);
  return g_task_propagate_pointer (G_TASK (result), error);
}
