/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* What the orientation witness says of the frame on the plate and the one of its instrument that is
 * nearest in time: asked when the frame has stood for a while, off the main thread, once a frame. */

#include "tf-session-private.h"

#include <math.h>

#include "tf-witness.h"

enum
{
  REST_MS = 1200 /* who flips through frames is not held up */
};

typedef struct
{
  TfFrame *frame;
  char *path;
  TfFrameSpec spec;
  TfCorrection correction; /* of the other */
  TfWork work;
  TfNote *note; /* what came of it */
} Question;

static void
question_free (gpointer data)
{
  Question *q = data;
  tf_frame_unref (q->frame);
  g_free (q->path);
  tf_pool_unref (q->work.pool);
  tf_workers_unref (q->work.workers);
  tf_note_free (q->note);
  g_free (q);
}

static const TfFrameRow *
find_other (TfSession *self)
{
  const TfFrameInfo *info = tf_frame_get_info (self->frame);
  const TfFrameRow *best = NULL;
  double least = INFINITY;
  guint n = tf_session_get_n_frames (self);
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfFrameItem) item = g_list_model_get_item (G_LIST_MODEL (self->frames), k);
      const TfFrameRow *row = tf_frame_item_get_row (item);
      double apart = fabs (row->info->time.s - info->time.s);
      if (apart < least && tf_orientation_fits (info, row->info))
        best = row;
      least = best == row ? apart : least;
    }
  return best;
}

static void
ask_in_thread (GTask *task, gpointer source, gpointer data, GCancellable *cancellable)
{
  Question *q = data;
  g_autoptr (TfFrame) read = tf_frame_open (q->path, &q->spec, &q->work, NULL);
  g_autoptr (TfFrame) other
      = read != NULL ? tf_frame_corrected (read, &q->correction, &q->work) : NULL;
  if (other != NULL)
    {
      TfTime own = tf_frame_get_info (q->frame)->time, its = tf_frame_get_info (other)->time;
      gboolean before = its.s < own.s;
      g_autoptr (TfNote) reason = NULL;
      TfOrientation answer = tf_orientation_witness (before ? other : q->frame,
                                                     before ? q->frame : other, NULL, &reason);
      q->note = tf_orientation_note (answer, reason, its);
    }
  g_task_return_boolean (task, TRUE);
}

static void
answered (GObject *source, GAsyncResult *result, gpointer data)
{
  g_autoptr (TfSession) self = data;
  Question *q = g_task_get_task_data (G_TASK (result));
  if (q->note == NULL || self->witnesses == NULL)
    return;
  g_hash_table_replace (self->witnesses, tf_frame_ref (q->frame), g_steal_pointer (&q->note));
  if (q->frame == self->frame)
    tf_session_emit (self, TF_SIGNAL_OVERLAYS);
}

static gboolean
rested (gpointer data)
{
  TfSession *self = data;
  self->witness_timer = 0;
  const TfFrameRow *other = self->frame != NULL ? find_other (self) : NULL;
  if (other == NULL || g_hash_table_contains (self->witnesses, self->frame))
    return G_SOURCE_REMOVE;
  Question *q = g_new0 (Question, 1);
  q->frame = tf_frame_ref (self->frame);
  q->path = g_strdup (other->path);
  q->spec = (TfFrameSpec){ other->hdu, other->plane };
  q->correction = tf_frame_row_get_correction (other, self->person);
  q->work.pool = tf_pool_ref (self->pool);
  q->work.workers = tf_workers_ref (self->workers);
  g_autoptr (GTask) task = g_task_new (NULL, NULL, answered, g_object_ref (self));
  g_task_set_task_data (task, q, question_free);
  g_task_run_in_thread (task, ask_in_thread);
  return G_SOURCE_REMOVE;
}

/* Frames that are gone are let go: only what was said of the one on the plate is kept. */
static gboolean
is_another (gpointer frame, gpointer note, gpointer data)
{
  return frame != ((TfSession *)data)->frame;
}

static void
frame_changed (TfSession *self)
{
  g_clear_handle_id (&self->witness_timer, g_source_remove);
  g_hash_table_foreach_remove (self->witnesses, is_another, self);
  if (self->frame != NULL && !self->loading)
    self->witness_timer = g_timeout_add (REST_MS, rested, self);
}

const TfNote *
tf_session_get_witness (TfSession *self)
{
  return self->frame != NULL ? g_hash_table_lookup (self->witnesses, self->frame) : NULL;
}

void
tf_session_init_witness (TfSession *self)
{
  self->witnesses = g_hash_table_new_full (NULL, NULL, (GDestroyNotify)tf_frame_unref,
                                           (GDestroyNotify)tf_note_free);
  g_signal_connect (self, "frame-changed", G_CALLBACK (frame_changed), NULL);
}

void
tf_session_clear_witness (TfSession *self)
{
  g_clear_handle_id (&self->witness_timer, g_source_remove);
  g_clear_pointer (&self->witnesses, g_hash_table_unref);
}
