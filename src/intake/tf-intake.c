/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* fill: files through the workers into the ledger. At most two jobs a worker are under way, so
 * memory does not grow with the number of files. Hints are measured with an even floor, each
 * frame's own: what studies and tables want; a study says how many rows have another floor than
 * its own. */

#include "tf-intake-private.h"

#include <glib/gi18n-lib.h>

typedef struct
{
  TfIntake shared;
  TfLedger *ledger;
  GThreadPool *workers;
  guint under_way, most;
  guint done, total;
  TfIntakeFunc func;
  gpointer data;
} Fill;

void
tf_intake_params_init (TfIntakeParams *params)
{
  g_return_if_fail (params != NULL);
  *params = (TfIntakeParams){ 0 };
  tf_hint_params_init (&params->hint);
  tf_measure_params_init (&params->measure);
  tf_complexity_params_init (&params->complexity);
  params->measure.floor_kind = TF_FLOOR_EVEN;
  params->measure.outline_term = TRUE;
}

static void
report (Fill *fill, const char *path, TfIntakeOutcome outcome, gint64 frame, guint n_hints,
        const char *message)
{
  fill->done++;
  TfIntakeReport r = { path, outcome, frame, n_hints, message, fill->done, fill->total };
  if (fill->func != NULL)
    fill->func (&r, fill->data);
}

/* Nothing is left to do for a frame of the ledger. */
static gboolean
is_complete (Fill *fill, gint64 frame)
{
  if (fill->shared.params->no_hints || tf_ledger_has_hints (fill->ledger, frame, fill->shared.rule))
    return TRUE;
  g_autoptr (TfFrameRow) row = tf_ledger_frame (fill->ledger, frame, NULL);
  return row != NULL && row->refusal != NULL;
}

static void
send (Fill *fill, TfJob *job, TfJobStage stage)
{
  job->stage = stage;
  g_thread_pool_push (fill->workers, job,
                      NULL); /* an unshared pool has all its threads: it does not fail */
  fill->under_way++;
}

static void
report_refused (Fill *fill, const TfJob *job, gint64 frame)
{
  g_autofree char *why = tf_note_dup_text (job->info->refusal, FALSE);
  g_autofree char *message = g_strdup_printf ("%s: %s", job->path, why);
  report (fill, job->path, TF_INTAKE_REFUSED, frame, 0, message);
}

/* A frame that was refused before is refused again, with its reason. */
static void
report_known (Fill *fill, const char *path, gint64 frame)
{
  g_autoptr (TfFrameRow) row = tf_ledger_frame (fill->ledger, frame, NULL);
  gboolean refused = row != NULL && row->refusal != NULL;
  g_autofree char *message = refused ? g_strdup_printf ("%s: %s", path, row->refusal) : NULL;
  report (fill, path, refused ? TF_INTAKE_REFUSED : TF_INTAKE_THERE, frame, 0, message);
}

/* The header was read. A frame that the ledger knows, at whatever path, or that is refused ends
 * here. */
static gboolean
take_looked (Fill *fill, TfJob *job, gboolean *again, GError **error)
{
  gint64 known = tf_ledger_find_frame (fill->ledger, job->checksum, job->hdu, job->plane);
  gboolean refused = job->info->refusal != NULL;
  *again = !(refused || (known != 0 && is_complete (fill, known)));
  if (*again)
    return TRUE;
  gint64 frame = tf_ledger_add_frame (fill->ledger, job->path, job->checksum, job->hdu, job->plane,
                                      job->info, job->noise_gauss, error);
  if (frame == 0)
    return FALSE;
  if (refused)
    report_refused (fill, job, frame);
  else
    report (fill, job->path, TF_INTAKE_THERE, frame, 0, NULL);
  return TRUE;
}

static gboolean
put_hints (Fill *fill, const TfJob *job, gint64 frame, GError **error)
{
  const TfComplexityRows complexity
      = { fill->shared.complexity, (const TfComplexityRow *)(void *)job->complexity->data,
          job->complexity->len };
  return tf_ledger_add_hints_with (fill->ledger, frame, fill->shared.rule, job->hints,
                                   fill->shared.method, &complexity, error);
}

static gboolean
take_found (Fill *fill, TfJob *job, GError **error)
{
  gint64 frame = tf_ledger_add_frame (fill->ledger, job->path, job->checksum, job->hdu, job->plane,
                                      job->info, job->noise_gauss, error);
  if (frame == 0 || (job->hints != NULL && !put_hints (fill, job, frame, error)))
    return FALSE;
  report (fill, job->path, TF_INTAKE_ADDED, frame, job->hints != NULL ? job->hints->len : 0, NULL);
  return TRUE;
}

/* Takes one job back from the workers. */
static gboolean
take_one (Fill *fill, gboolean go_on, GError **error)
{
  g_autoptr (TfJob) job = g_async_queue_pop (fill->shared.done);
  fill->under_way--;
  if (job->failure != NULL)
    {
      report (fill, job->path, TF_INTAKE_FAILED, 0, 0, job->failure);
      return TRUE;
    }
  if (job->stage == JOB_FIND)
    return take_found (fill, job, error);
  gboolean again = FALSE;
  if (!take_looked (fill, job, &again, error))
    return FALSE;
  if (again && go_on)
    send (fill, g_steal_pointer (&job), JOB_FIND);
  return TRUE;
}

static gboolean
start_one (Fill *fill, const char *path)
{
  gint64 known = tf_ledger_find_file (fill->ledger, path);
  if (known != 0 && fill->shared.params->spec.hdu == 0 && fill->shared.params->spec.plane <= 1
      && is_complete (fill, known))
    {
      report_known (fill, path, known);
      return FALSE;
    }
  send (fill, tf_job_new (path), JOB_LOOK);
  return TRUE;
}

static gboolean
is_ours (const TfIntakeParams *params, guint k)
{
  return params->parts == 0 || k % params->parts == params->part - 1;
}

/* What is under way is dropped when the ledger cannot be written, and finished when the caller
 * asked to stop. */
static void
drain (Fill *fill)
{
  while (fill->under_way > 0)
    {
      tf_job_free (g_async_queue_pop (fill->shared.done));
      fill->under_way--;
    }
}

static gboolean
run (Fill *fill, char *const *files, TfCancel *cancel, GError **error)
{
  for (guint k = 0; files[k] != NULL && !tf_cancel_is_raised (cancel); k++)
    {
      if (!is_ours (fill->shared.params, k) || !start_one (fill, files[k]))
        continue;
      while (fill->under_way >= fill->most)
        if (!take_one (fill, !tf_cancel_is_raised (cancel), error))
          return FALSE;
    }
  while (fill->under_way > 0)
    if (!take_one (fill, !tf_cancel_is_raised (cancel), error))
      return FALSE;
  if (!tf_cancel_is_raised (cancel) || fill->done == fill->total)
    return TRUE;
  g_set_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_CANCELLED,
               _ ("stopped after %u of %u files; the same call goes on from there"), fill->done,
               fill->total);
  return FALSE;
}

static guint
count_ours (char *const *files, const TfIntakeParams *params)
{
  guint n = 0;
  for (guint k = 0; files[k] != NULL; k++)
    n += is_ours (params, k) ? 1 : 0;
  return n;
}

gboolean
tf_intake_fill (TfLedger *ledger, char *const *files, const TfIntakeParams *params,
                TfCancel *cancel, TfIntakeFunc func, gpointer data, GError **error)
{
  g_return_val_if_fail (ledger != NULL && files != NULL && params != NULL, FALSE);
  g_return_val_if_fail (params->parts == 0 || (params->part >= 1 && params->part <= params->parts),
                        FALSE);
  const TfNote *why = tf_ledger_get_read_only (ledger);
  if (why != NULL)
    {
      g_autofree char *text = tf_note_dup_text (why, FALSE);
      g_set_error_literal (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_READ_ONLY, text);
      return FALSE;
    }
  guint n = params->workers > 0 ? params->workers : g_get_num_processors ();
  Fill fill = {
    .ledger = ledger, .most = 2 * n, .total = count_ours (files, params), .func = func, .data = data
  };
  fill.shared
      = (TfIntake){ .params = params, .pool = tf_pool_new (), .done = g_async_queue_new () };
  fill.shared.rule = tf_options_dup_canonical (tf_hint_options, &params->hint, TF_HINT_RULE);
  fill.shared.method
      = tf_options_dup_canonical (tf_measure_options, &params->measure, TF_MEASURE_METHOD);
  fill.shared.complexity
      = tf_options_dup_canonical (tf_complexity_options, &params->complexity, TF_COMPLEXITY_METHOD);
  fill.workers = g_thread_pool_new (tf_job_work, &fill.shared, (int)n, FALSE, error);
  gboolean ok = fill.workers != NULL && run (&fill, files, cancel, error);
  drain (&fill);
  if (fill.workers != NULL)
    g_thread_pool_free (fill.workers, FALSE, TRUE);
  g_async_queue_unref (fill.shared.done);
  tf_pool_unref (fill.shared.pool);
  g_free (fill.shared.rule);
  g_free (fill.shared.method);
  g_free (fill.shared.complexity);
  return ok;
}
