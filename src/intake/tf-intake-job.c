/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* What a worker does: one frame, one thread. */

#include "tf-intake-private.h"

#include <math.h>
#include <string.h>

TfJob *
tf_job_new (const char *path)
{
  TfJob *job = g_new0 (TfJob, 1);
  job->path = g_strdup (path);
  job->noise_gauss = NAN;
  return job;
}

void
tf_job_free (TfJob *job)
{
  if (job == NULL)
    return;
  g_free (job->path);
  g_free (job->checksum);
  g_free (job->failure);
  tf_frame_info_free (job->info);
  g_clear_pointer (&job->hints, g_ptr_array_unref);
  g_clear_pointer (&job->complexity, g_array_unref);
  g_free (job);
}

/* One line that names the file. */
static void
fail (TfJob *job, const GError *error)
{
  g_autofree char *line = g_strdelimit (g_strdup (error->message), "\n", ' ');
  g_autofree char *name = g_path_get_basename (job->path);
  job->failure = strstr (line, name) != NULL ? g_steal_pointer (&line)
                                             : g_strdup_printf ("%s: %s", job->path, line);
}

static void
look (TfJob *job, const TfIntake *intake)
{
  g_autoptr (GError) error = NULL;
  job->info = tf_frame_look (job->path, &intake->params->spec, &job->hdu, &error);
  job->plane = MAX (intake->params->spec.plane, 1);
  if (job->info != NULL)
    job->checksum = tf_frame_file_checksum (job->path, NULL, &error);
  if (error != NULL)
    fail (job, error);
}

/* The header's cautions are among the frame's. */
static void
take_cautions (TfJob *job, const TfFrame *frame)
{
  const TfNotes *cautions = tf_frame_get_cautions (frame);
  for (guint k = 0; k < tf_notes_get_n (cautions); k++)
    tf_notes_add_copy (job->info->cautions, tf_notes_get (cautions, k));
}

/* The noise, the hints and the grids of one frame are one thread's work: frames go side by side. */
static void
add_complexity (TfJob *job, const TfFrame *frame, const TfIntakeParams *params)
{
  job->complexity = g_array_sized_new (FALSE, TRUE, sizeof (TfComplexityRow), job->hints->len);
  for (guint k = 0; k < job->hints->len; k++)
    {
      const TfHint *hint = g_ptr_array_index (job->hints, k);
      g_auto (TfComplexity) c = { 0 };
      tf_complexity_region (&c, frame, hint->outline, &params->measure, &params->complexity);
      TfComplexityRow row = tf_complexity_row (&c);
      g_array_append_val (job->complexity, row);
    }
}

static void
find (TfJob *job, const TfIntake *intake)
{
  g_autoptr (GError) error = NULL;
  TfWork work = { .pool = intake->pool };
  TfFrameSpec spec = { job->hdu, job->plane };
  g_autoptr (TfFrame) frame = tf_frame_open (job->path, &spec, &work, &error);
  if (frame == NULL)
    {
      fail (job, error);
      return;
    }
  tf_frame_info_free (job->info);
  job->info = tf_frame_info_copy (tf_frame_get_info (frame));
  take_cautions (job, frame);
  job->noise_gauss = tf_frame_noise_at (frame, 0.5);
  if (intake->params->no_hints)
    return;
  job->hints
      = tf_hints_find (frame, &intake->params->hint, &intake->params->measure, &work, &error);
  if (job->hints == NULL && g_error_matches (error, TF_REGION_ERROR, TF_REGION_ERROR_KIND))
    job->hints = g_ptr_array_new (); /* a map: outlines are drawn by hand */
  else if (job->hints == NULL)
    fail (job, error);
  if (job->hints != NULL)
    add_complexity (job, frame, intake->params);
}

void
tf_job_work (gpointer data, gpointer user_data)
{
  TfJob *job = data;
  const TfIntake *intake = user_data;
  if (job->stage == JOB_LOOK)
    look (job, intake);
  else
    find (job, intake);
  g_async_queue_push (intake->done, job);
}
