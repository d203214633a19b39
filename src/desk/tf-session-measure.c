/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The measure of the line in hand and of the draft. While a line is drawn it is measured at once,
 * without the outline term, in the main thread as long as that is quick, else by a worker that has
 * one measure in hand at a time. At rest a worker measures with the outline term, and what comes of
 * an older draft is dropped. */

#include "tf-session-private.h"

#include <math.h>
#include <glib/gi18n-lib.h>
#include <time.h>

enum
{
  MIN_VERTICES = 3
};
static const double quick_ms = 6;  /* processor time */
static const double quick_px = 500; /* pixels across: what is larger is not even tried in the main thread */

typedef struct
{
  TfFrame *frame;
  TfOutline *outline;
  TfMeasureParams params;
  guint64 serial;
  gboolean live;  /* of a line in hand */
  gboolean other; /* of the second half of a split */
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

static void
measure_half (TfSession *self, const TfOutline *half)
{
  TfMeasureParams params = self->params;
  params.outline_term = FALSE;
  g_autoptr (TfMask) mask = tf_mask_new (self->frame, half, params.mu_min, (guint)params.law);
  tf_measure_clear (&self->other_measure);
  self->other_at_rest = FALSE;
  self->other_measured
      = tf_measure_masked (&self->other_measure, self->frame, mask, NULL, &params, NULL);
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
  if ((self->line->len == 0 && !self->brushing) || order->frame != self->frame)
    return; /* finished or put away meanwhile */
  take_measure (self, measure, error);
  tf_session_emit (self, TF_SIGNAL_CHOICE);
  if (self->brushing && order->outline != self->draft)
    tf_session_measure_live (self, self->draft);
  else if (!self->brushing && order->n_line != self->line->len)
    tf_session_measure_line (self);
}

/* With the outline term. */
static void
rest_done (TfSession *self, const Order *order, TfMeasure *measure, const GError *error)
{
  if (!order->other)
    {
      take_measure (self, measure, error);
      self->at_rest = self->measured;
    }
  else if (measure != NULL)
    {
      tf_measure_clear (&self->other_measure);
      self->other_measure = *measure;
      *measure = (TfMeasure){ 0 };
      self->other_measured = self->other_at_rest = TRUE;
    }
  tf_session_emit (self, TF_SIGNAL_CHOICE);
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
    rest_done (self, order, measure, error);
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
  order->other = outline == self->other;
  order->n_line = self->line->len;
  g_autoptr (GTask) task = g_task_new (NULL, NULL, order_done, g_object_ref (self));
  g_task_set_task_data (task, order, order_free);
  g_task_run_in_thread (task, measure_in_thread);
}

static gboolean
is_quick (TfSession *self, const TfOutline *outline)
{
  double lon, lat, radius_deg, radius_px = tf_geometry_disk_radius (tf_frame_get_geometry (self->frame));
  tf_outline_get_cap (outline, &lon, &lat, &radius_deg);
  gboolean large = 2 * radius_px * sin (fmin (radius_deg, 90) * G_PI / 180) > quick_px; /* a map has no disk: not large */
  return !self->slow && !large;
}

/* -- the line and the draft ------------------------------------------------------------------- */

void
tf_session_measure_live (TfSession *self, TfOutline *outline)
{
  if (is_quick (self, outline))
    measure_now (self, outline);
  else if (!self->live_busy)
    {
      self->live_busy = TRUE;
      order_measure (self, outline, TRUE);
    }
}

/* The outline that the line in hand would make. */
static TfOutline *
outline_of_line (TfSession *self, GError **error)
{
  const TfVertex *line = (const TfVertex *)(gconstpointer)self->line->data;
  TfOutline *base = tf_session_get_base (self);
  if (self->line->len < MIN_VERTICES)
    return NULL;
  if (self->tool == TF_TOOL_LEAVE_OUT && base != NULL)
    return tf_outline_with_ring (base, line, self->line->len, TRUE, error);
  return tf_outline_new (tf_frame_get_info (self->frame)->time, line, self->line->len, error);
}

void
tf_session_measure_line (TfSession *self)
{
  g_return_if_fail (TF_IS_SESSION (self));
  if (self->brushing && self->draft != NULL)
    {
      tf_session_measure_live (self, self->draft);
      tf_session_emit (self, TF_SIGNAL_CHOICE);
    }
  if (self->frame == NULL || self->brushing || (self->line->len == 0 && self->draft != NULL))
    return; /* the line was finished meanwhile */
  const TfVertex *line = (const TfVertex *)(gconstpointer)self->line->data;
  if (self->tool == TF_TOOL_SPLIT && self->line->len > 1)
    tf_session_measure_split (self, line[0], line[self->line->len - 1]);
  else if (self->tool != TF_TOOL_SPLIT)
    {
      g_autoptr (GError) error = NULL;
      g_autoptr (TfOutline) outline = outline_of_line (self, &error);
      if (outline != NULL)
        tf_session_measure_live (self, outline);
      else
        {
          tf_session_forget_measure (self);
          say_problem (self, error != NULL ? error->message : _ ("Go on round the region."));
        }
    }
  tf_session_emit (self, TF_SIGNAL_CHOICE);
}

/* Both halves of what the line in hand would part, at once. */
void
tf_session_measure_split (TfSession *self, TfVertex a, TfVertex b)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfOutline) one = NULL, other = NULL;
  TfOutline *base = tf_session_get_base (self);
  if (base == NULL || !tf_outline_split (base, a, b, &one, &other, &error))
    {
      tf_session_forget_measure (self);
      self->other_measured = FALSE;
      say_problem (self, error != NULL ? error->message : _ ("Draw right across the outline."));
      return;
    }
  measure_now (self, one);
  measure_half (self, other);
}

void
tf_session_measure_draft (TfSession *self)
{
  if (is_quick (self, self->draft))
    measure_now (self, self->draft);
  else
    {
      tf_session_forget_measure (self);
      say_problem (self, _ ("Measuring…"));
      tf_session_judge_choice (self);
    }
  if (self->other != NULL)
    measure_half (self, self->other);
  order_measure (self, self->draft, FALSE);
  if (self->other != NULL)
    order_measure (self, self->other, FALSE);
  tf_session_ask_join (self);
}
