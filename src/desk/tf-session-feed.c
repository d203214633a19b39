/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Frames coming into the session: into the ledger off the main thread, or, without a ledger,
 * only to be looked at. */

#include "tf-session-private.h"

#include <math.h>
#include <glib/gi18n-lib.h>

/* -- frames only to look at, without a ledger ------------------------------------------------ */

static TfFrameRow *
look_row (const char *path)
{
  g_autoptr (GError) error = NULL;
  int hdu = 0;
  TfFrameInfo *info = tf_frame_look (path, NULL, &hdu, &error);
  TfFrameRow *row = g_new0 (TfFrameRow, 1);
  row->path = g_canonicalize_filename (path, NULL);
  row->hdu = hdu;
  row->plane = 1;
  row->noise_gauss = NAN;
  row->info = info;
  if (info == NULL)
    {
      row->info = g_new0 (TfFrameInfo, 1);
      row->info->time = TF_TIME_UNKNOWN;
      row->refusal = g_strdup (error->message);
    }
  else if (info->refusal != NULL)
    row->refusal = tf_note_dup_text (info->refusal, FALSE);
  return row;
}

static int
by_time (gconstpointer a, gconstpointer b)
{
  const TfFrameRow *ra = *(TfFrameRow *const *)a, *rb = *(TfFrameRow *const *)b;
  gboolean ka = tf_time_is_known (ra->info->time), kb = tf_time_is_known (rb->info->time);
  if (ka && kb)
    return (ra->info->time.s > rb->info->time.s) - (ra->info->time.s < rb->info->time.s);
  return kb - ka;
}

static void
look_in_thread (GTask *task, gpointer source, gpointer data, GCancellable *cancellable)
{
  GError *error = NULL;
  g_auto (GStrv) files = tf_intake_list (data, &error);
  if (files == NULL)
    {
      g_task_return_error (task, error);
      return;
    }
  GPtrArray *rows = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_frame_row_free);
  for (guint k = 0; files[k] != NULL; k++)
    g_ptr_array_add (rows, look_row (files[k]));
  g_ptr_array_sort (rows, by_time);
  for (guint k = 0; k < rows->len; k++)
    ((TfFrameRow *)g_ptr_array_index (rows, k))->id = -(gint64)k - 1;
  g_task_return_pointer (task, rows, (GDestroyNotify)g_ptr_array_unref);
}

static void
looked_at (GObject *source, GAsyncResult *result, gpointer data)
{
  g_autoptr (TfSession) self = data; /* not the task's source: the worker may let go of that last */
  g_autoptr (GError) error = NULL;
  GPtrArray *rows = g_task_propagate_pointer (G_TASK (result), &error);
  if (rows == NULL)
    {
      g_free (self->feed_trouble);
      self->feed_trouble = g_strdup (error->message);
      tf_session_emit (self, TF_SIGNAL_STATUS);
    }
  else if (self->path != NULL)
    g_ptr_array_unref (rows); /* a ledger was opened meanwhile */
  else
    {
      tf_session_clear_frames (self);
      tf_session_replace_frames (self, rows);
    }
}

static void
look_at (TfSession *self, char *const *paths)
{
  g_autoptr (GPtrArray) all = g_ptr_array_new ();
  guint n = tf_session_get_n_frames (self);
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfFrameItem) item = g_list_model_get_item (G_LIST_MODEL (self->frames), k);
      g_ptr_array_add (all, g_strdup (tf_frame_item_get_row (item)->path));
    }
  for (guint k = 0; paths[k] != NULL; k++)
    g_ptr_array_add (all, g_strdup (paths[k]));
  g_ptr_array_add (all, NULL);
  g_autoptr (GTask) task = g_task_new (NULL, NULL, looked_at, g_object_ref (self));
  g_task_set_task_data (task, g_ptr_array_free (g_steal_pointer (&all), FALSE),
                        (GDestroyNotify)g_strfreev);
  g_task_run_in_thread (task, look_in_thread);
}

/* -- frames into the ledger ------------------------------------------------------------------ */

/* What could not be read stays to be read: one sentence a file. Those refused stand in the roll. */
static void
keep_trouble (TfSession *self, const TfFeedState *state)
{
  g_clear_pointer (&self->feed_trouble, g_free);
  if (state->error != NULL)
    self->feed_trouble = g_strdup (state->error);
  else if (state->messages->len > 0)
    {
      g_ptr_array_add (state->messages, NULL);
      self->feed_trouble = g_strjoinv ("\n", (char **)state->messages->pdata);
      g_ptr_array_remove_index (state->messages, state->messages->len - 1);
    }
}

static void
say_fed (TfSession *self, const TfFeedState *state)
{
  gboolean quiet = self->feed_quiet && state->added == 0 && state->failed == 0;
  self->feed_quiet = FALSE;
  keep_trouble (self, state);
  if (state->error != NULL || quiet)
    return;
  GString *text = g_string_new (NULL);
  g_string_append_printf (text, ngettext ("%u frame added", "%u frames added", state->added),
                          state->added);
  if (state->there > 0)
    g_string_append_printf (text, _ (", %u there already"), state->there);
  if (state->refused > 0)
    g_string_append_printf (text, _ (", %u refused"), state->refused);
  if (state->failed > 0)
    g_string_append_printf (text, _ (", %u could not be read"), state->failed);
  if (state->cancelled)
    g_string_append (text, _ (", then cancelled"));
  tf_session_say (self, text->str);
  g_string_free (text, TRUE);
}

const char *
tf_session_get_feed_trouble (TfSession *self)
{
  return self->feed_trouble;
}

void
tf_session_forget_feed_trouble (TfSession *self)
{
  g_return_if_fail (TF_IS_SESSION (self));
  g_clear_pointer (&self->feed_trouble, g_free);
  tf_session_emit (self, TF_SIGNAL_STATUS);
}

static void
fed (const TfFeedState *state, gpointer data)
{
  TfSession *self = data;
  g_auto (GStrv) next = NULL;
  if (state->finished)
    {
      say_fed (self, state);
      g_clear_pointer (&self->feed, tf_feed_free);
      tf_session_make_passages (self);
      tf_session_refresh (self, TRUE);
      next = g_steal_pointer (&self->to_add);
    }
  g_free (self->progress);
  self->progress = NULL;
  if (!state->finished)
    self->progress = state->listing ? g_strdup (_ ("Looking for frames…"))
                                    : g_strdup_printf (_ ("Taking in frames: %u of %u"),
                                                       state->done, state->total);
  self->progress_share = state->total > 0 ? (double)state->done / state->total : -1;
  tf_session_emit (self, TF_SIGNAL_STATUS);
  if (next != NULL)
    tf_session_add_frames (self, next);
}

static void
wait_in_line (TfSession *self, char *const *paths)
{
  GStrvBuilder *line = g_strv_builder_new ();
  if (self->to_add != NULL)
    g_strv_builder_addv (line, (const char **)self->to_add);
  g_strv_builder_addv (line, (const char **)paths);
  g_strfreev (self->to_add);
  self->to_add = g_strv_builder_end (line);
  g_strv_builder_unref (line);
}

void
tf_session_add_frames (TfSession *self, char *const *paths)
{
  g_return_if_fail (TF_IS_SESSION (self) && paths != NULL);
  if (self->path == NULL)
    look_at (self, paths);
  else if (!self->open)
    wait_in_line (self, paths);
  else if (self->feed != NULL)
    {
      wait_in_line (self, paths);
      tf_session_say (self, _ ("These frames are added when those under way are in."));
    }
  else
    {
      self->feed = tf_feed_new (self->path, paths, fed, self);
      tf_session_emit (self, TF_SIGNAL_STATUS);
    }
}

const char *
tf_session_get_progress (TfSession *self, double *share)
{
  if (share != NULL)
    *share = self->progress != NULL ? self->progress_share : -1;
  if (self->progress != NULL)
    return self->progress;
  return self->loading ? _ ("Opening the frame…") : NULL;
}

void
tf_session_cancel (TfSession *self)
{
  if (self->feed != NULL)
    tf_feed_cancel (self->feed);
  g_clear_pointer (&self->to_add, g_strfreev);
  if (!self->loading)
    return;
  tf_loader_cancel (self->loader);
  self->loading = FALSE;
  g_free (self->frame_problem);
  self->frame_problem
      = g_strdup (_ ("Opening this frame was cancelled. Choose it again to open it."));
  g_clear_pointer (&self->frame, tf_frame_unref);
  tf_session_emit (self, TF_SIGNAL_FRAME);
  tf_session_emit (self, TF_SIGNAL_STATUS);
}
