/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The measure of the line in hand and of the draft. While a line is drawn it is measured at once,
 * without the outline term, in the main thread as long as that is quick, else by a worker that has
 * one measure in hand at a time. At rest a worker measures with the outline term, and what comes of
 * an older draft is dropped. */

#include "tf-session-private.h"

#include <glib/gi18n-lib.h>
#include <time.h>

enum
{
  MIN_VERTICES = 3
};
static const double quick_ms = 6; /* processor time */

typedef struct
{
  TfFrame *frame;
  TfOutline *outline;
  TfMeasureParams params;
  guint64 serial;
  gboolean live; /* of a line in hand */
  guint n_line;  /* vertices it had */
} Order;

static void
order_free (gpointer data)
{
  Order *order = data;
  tf_frame_unref (order->frame);
  tf_outline_unref (order->outline);
  g_free (order);
}

static void
measure_free (gpointer data)
{
  tf_measure_clear (data);
  g_free (data);
}

static double
thread_ms (void)
{
  struct timespec t;
  clock_gettime (CLOCK_THREAD_CPUTIME_ID, &t);
  return (double)t.tv_sec * 1e3 + (double)t.tv_nsec / 1e6;
}

void
tf_session_forget_measure (TfSession *self)
{
  self->draft_serial++;
  self->measured = self->at_rest = FALSE;
  g_clear_pointer (&self->measure_problem, g_free);
}

static void
say_problem (TfSession *self, const char *text)
{
  g_free (self->measure_problem);
  self->measure_problem = g_strdup (text);
}

/* Takes what @measure owns; @error: why there is none. */
static void
take_measure (TfSession *self, TfMeasure *measure, const GError *error)
{
  self->measured = error == NULL;
  if (error != NULL)
    say_problem (self, error->message);
  else
    {
      g_clear_pointer (&self->measure_problem, g_free);
      tf_measure_clear (&self->measure);
      self->measure = *measure;
      *measure = (TfMeasure){ 0 };
    }
  tf_session_judge_choice (self);
}

/* -- at once ---------------------------------------------------------------------------------- */

static void
measure_now (TfSession *self, const TfOutline *outline)
{
  TfMeasureParams params = self->params;
  params.outline_term = FALSE;
  double start = thread_ms ();
  g_autoptr (GError) error = NULL;
  g_autoptr (TfMask) mask = tf_mask_new (self->frame, outline, params.mu_min, (guint)params.law);
  g_auto (TfMeasure) measure = { 0 };
  tf_session_forget_measure (self);
  tf_measure_masked (&measure, self->frame, mask, NULL, &params, &error);
  take_measure (self, &measure, error);
  self->slow = self->slow || thread_ms () - start > quick_ms;
}

/* -- by a worker ------------------------------------------------------------------------------ */

static void
measure_in_thread (GTask *task, gpointer source, gpointer data, GCancellable *cancellable)
{
  const Order *order = data;
  GError *error = NULL;
  TfMeasure *measure = g_new0 (TfMeasure, 1);
  if (tf_measure_region (measure, order->frame, order->outline, &order->params, &error))
    {
      g_task_return_pointer (task, measure, measure_free);
      return;
    }
  measure_free (measure);
  g_task_return_error (task, error);
}

static void
live_done (TfSession *self, const Order *order, TfMeasure *measure, const GError *error)
{
  self->live_busy = FALSE;
  if (self->line->len == 0 || order->frame != self->frame)
    return; /* finished or put away meanwhile */
  take_measure (self, measure, error);
  tf_session_emit (self, TF_SIGNAL_CHOICE);
  if (order->n_line != self->line->len)
    tf_session_measure_line (self);
}

static void
order_done (GObject *source, GAsyncResult *result, gpointer data)
{
  g_autoptr (TfSession) self = data; /* not the task's source: the worker may let go of that last */
  const Order *order = g_task_get_task_data (G_TASK (result));
  g_autoptr (GError) error = NULL;
  TfMeasure *measure = g_task_propagate_pointer (G_TASK (result), &error);
  if (order->live)
    live_done (self, order, measure, error);
  else if (order->serial == self->draft_serial)
    {
      take_measure (self, measure, error);
      self->at_rest = self->measured;
      tf_session_emit (self, TF_SIGNAL_CHOICE);
    }
  g_clear_pointer (&measure, measure_free);
}

static void
order_measure (TfSession *self, TfOutline *outline, gboolean live)
{
  Order *order = g_new0 (Order, 1);
  order->frame = tf_frame_ref (self->frame);
  order->outline = tf_outline_ref (outline);
  order->params = self->params;
  order->params.outline_term = !live;
  order->serial = self->draft_serial;
  order->live = live;
  order->n_line = self->line->len;
  g_autoptr (GTask) task = g_task_new (NULL, NULL, order_done, g_object_ref (self));
  g_task_set_task_data (task, order, order_free);
  g_task_run_in_thread (task, measure_in_thread);
}

/* -- the line and the draft ------------------------------------------------------------------- */

static void
measure_outline (TfSession *self, TfOutline *outline)
{
  if (!self->slow)
    measure_now (self, outline);
  else if (!self->live_busy)
    {
      self->live_busy = TRUE;
      order_measure (self, outline, TRUE);
    }
}

void
tf_session_measure_line (TfSession *self)
{
  g_return_if_fail (TF_IS_SESSION (self));
  if (self->frame == NULL || (self->line->len == 0 && self->draft != NULL))
    return; /* the line was finished meanwhile */
  TfTime time = tf_frame_get_info (self->frame)->time;
  const TfVertex *line = (const TfVertex *)(gconstpointer)self->line->data;
  g_autoptr (GError) error = NULL;
  g_autoptr (TfOutline) outline = NULL;
  if (self->line->len >= MIN_VERTICES)
    outline = tf_outline_new (time, line, self->line->len, &error);
  if (outline != NULL)
    measure_outline (self, outline);
  else
    {
      tf_session_forget_measure (self);
      say_problem (self, error != NULL ? error->message : _ ("Go on round the region."));
    }
  tf_session_emit (self, TF_SIGNAL_CHOICE);
}

void
tf_session_measure_draft (TfSession *self)
{
  if (!self->slow)
    measure_now (self, self->draft);
  else
    {
      tf_session_forget_measure (self);
      say_problem (self, _ ("Measuring…"));
      tf_session_judge_choice (self);
    }
  order_measure (self, self->draft, FALSE);
}
