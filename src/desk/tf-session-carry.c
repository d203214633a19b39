/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Outlines carried from another frame by the rotation law. They are offered among the hints, each
 * with the region it is of; kept, it is a mark of that region. A hint in whose middle a carried
 * outline lies, and it in the outline's, continues that region, and kept it says so. */

#include "tf-session-private.h"

#include <math.h>
#include <glib/gi18n-lib.h>

typedef struct
{
  gint64 from, to; /* frames */
  TfFrame *frame;
  TfMeasureParams params;
  char *method;
  GArray *regions; /* gint64: these alone; NULL: all */
} Job;

static void
job_free (gpointer data)
{
  Job *job = data;
  tf_frame_unref (job->frame);
  g_free (job->method);
  g_clear_pointer (&job->regions, g_array_unref);
  g_free (job);
}

static gpointer
job_copy (const Job *job)
{
  Job *copy = g_memdup2 (job, sizeof *job);
  copy->frame = tf_frame_ref (job->frame);
  copy->method = g_strdup (job->method);
  copy->regions = job->regions != NULL ? g_array_ref (job->regions) : NULL;
  return copy;
}

static gboolean
is_wanted (const Job *job, gint64 region)
{
  for (guint k = 0; job->regions != NULL && k < job->regions->len; k++)
    if (g_array_index (job->regions, gint64, k) == region)
      return TRUE;
  return job->regions == NULL;
}

static void
set_text (char **text, const char *value)
{
  g_free (*text);
  *text = g_strdup (value);
}

/* The row of a mark of the other frame as it would be on this one; FALSE: it cannot be seen. */
static gboolean
carry_row (TfRow *row, const Job *job)
{
  TfTime time = tf_frame_get_info (job->frame)->time;
  g_autoptr (TfOutline) carried = tf_outline_carry (row->outline, time, (guint)job->params.law);
  g_auto (TfMeasure) measure = { 0 };
  if (carried == NULL
      || !tf_measure_region (&measure, job->frame, carried, &job->params, NULL))
    return FALSE;
  tf_outline_unref (row->outline);
  row->outline = g_steal_pointer (&carried);
  tf_measure_clear (&row->measure);
  row->measure = measure;
  measure = (TfMeasure){ 0 };
  row->mark = -row->mark;
  row->is_hint = TRUE;
  row->frame = job->to;
  set_text (&row->method, job->method);
  set_text (&row->mw_class, "");
  return TRUE;
}

static gpointer
carry_in_lane (TfLedger *ledger, gpointer data, GError **error)
{
  const Job *job = data;
  TfRowQuery query = { .marks = TRUE, .frame = job->from };
  g_autoptr (GPtrArray) rows = tf_ledger_rows (ledger, &query, error);
  if (rows == NULL)
    return NULL;
  for (guint k = rows->len; k > 0; k--)
    {
      TfRow *row = rows->pdata[k - 1];
      if (!is_wanted (job, row->region_key) || !carry_row (row, job))
        g_ptr_array_remove_index (rows, k - 1);
    }
  return g_steal_pointer (&rows);
}

static void
carried (GObject *source, GAsyncResult *result, gpointer data)
{
  TfSession *self = TF_SESSION (source);
  g_autoptr (GError) error = NULL;
  g_autoptr (GPtrArray) rows = tf_lane_finish (result, &error);
  gint64 now = self->frame_item != NULL ? tf_frame_item_get_row (self->frame_item)->id : 0;
  if (g_task_get_cancellable (G_TASK (result)) != self->reading || rows == NULL)
    {
      if (error != NULL && !g_error_matches (error, G_IO_ERROR, G_IO_ERROR_CANCELLED))
        tf_session_say (self, error->message);
      return;
    }
  if (now != self->carried_frame)
    return; /* another frame meanwhile */
  g_ptr_array_set_size (self->carried, 0);
  g_ptr_array_set_free_func (rows, NULL);
  for (guint k = 0; k < rows->len; k++)
    {
      TfRow *row = rows->pdata[k];
      TfVerdict verdict = tf_judge_measure (self->judge, &row->measure, NULL);
      g_ptr_array_add (self->carried, tf_region_item_new (row, verdict));
    }
  if (rows->len == 0)
    tf_session_say (self, _ ("None of those regions can be seen on this frame."));
  else
    self->want_next_hint = self->region == NULL;
  tf_session_refresh (self, FALSE);
}

/* -- from which frame, to which ---------------------------------------------------------------- */

static double
time_of (TfFrameItem *item)
{
  return tf_frame_item_get_row (item)->info->time.s;
}

/* The nearest frame before @to with marks. */
static TfFrameItem *
frame_before (TfSession *self, TfFrameItem *to)
{
  TfFrameItem *best = NULL;
  guint n = g_list_model_get_n_items (G_LIST_MODEL (self->frames));
  for (guint k = 0; to != NULL && k < n; k++)
    {
      g_autoptr (TfFrameItem) item = g_list_model_get_item (G_LIST_MODEL (self->frames), k);
      if (tf_frame_item_get_row (item)->n_marks > 0 && time_of (item) < time_of (to)
          && (best == NULL || time_of (item) > time_of (best)))
        best = item; /* the list holds it */
    }
  return best;
}

static gboolean
carry (TfSession *self, TfFrameItem *from, GArray *regions)
{
  Job job = { .from = tf_frame_item_get_row (from)->id,
              .to = tf_frame_item_get_row (self->frame_item)->id,
              .frame = self->frame,
              .params = self->params,
              .method = self->method,
              .regions = regions };
  self->carried_frame = job.to;
  tf_lane_push (self->reader, self, self->reading, carry_in_lane, job_copy (&job), job_free,
                (GDestroyNotify)g_ptr_array_unref, carried, NULL);
  return TRUE;
}

gboolean
tf_session_can_carry (TfSession *self)
{
  return self->frame != NULL && self->reader != NULL && self->draft == NULL
         && frame_before (self, self->frame_item) != NULL;
}

gboolean
tf_session_carry (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  return tf_session_can_carry (self)
         && carry (self, frame_before (self, self->frame_item), NULL);
}

gboolean
tf_session_can_carry_on (TfSession *self)
{
  return self->frame != NULL && self->reader != NULL && self->draft == NULL && self->region != NULL
         && !tf_region_item_get_row (self->region)->is_hint;
}

typedef struct
{
  TfFrameItem *from, *to;
  GArray *regions;
  gulong handler;
} Later;

static void
later_free (gpointer data, GClosure *closure)
{
  Later *later = data;
  g_object_unref (later->from);
  g_object_unref (later->to);
  g_array_unref (later->regions);
  g_free (later);
}

/* The next frame's pixels came. */
static void
opened (TfSession *self, gpointer data)
{
  Later *later = data;
  if (self->frame_item == later->to && (self->frame == NULL || self->loading))
    return;
  if (self->frame_item == later->to && self->reader != NULL)
    carry (self, later->from, later->regions);
  g_signal_handler_disconnect (self, later->handler);
}

gboolean
tf_session_carry_on (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  if (!tf_session_can_carry_on (self))
    return FALSE;
  g_autoptr (GPtrArray) chosen = tf_session_dup_chosen (self);
  g_autoptr (TfFrameItem) from = g_object_ref (self->frame_item);
  tf_session_step_frame (self, 1);
  if (self->frame_item == from)
    {
      tf_session_say (self, _ ("There is no frame after this one."));
      return FALSE;
    }
  Later *later = g_new0 (Later, 1);
  later->from = g_steal_pointer (&from);
  later->to = g_object_ref (self->frame_item);
  later->regions = g_array_new (FALSE, FALSE, sizeof (gint64));
  for (guint k = 0; k < chosen->len; k++)
    g_array_append_val (later->regions, tf_region_item_get_row (chosen->pdata[k])->region_key);
  later->handler = g_signal_connect_data (self, "frame-changed", G_CALLBACK (opened), later,
                                          later_free, 0);
  if (self->frame != NULL && !self->loading)
    opened (self, later);
  return TRUE;
}

/* -- among the hints --------------------------------------------------------------------------- */

static gboolean
is_marked (const GPtrArray *items, gint64 region)
{
  for (guint k = 0; k < items->len; k++)
    {
      const TfRow *row = tf_region_item_get_row (items->pdata[k]);
      if (!row->is_hint && row->region_key == region)
        return TRUE;
    }
  return FALSE;
}

void
tf_session_add_carried (TfSession *self, GPtrArray *items)
{
  gint64 now = self->frame_item != NULL ? tf_frame_item_get_row (self->frame_item)->id : 0;
  if (now != self->carried_frame)
    g_ptr_array_set_size (self->carried, 0);
  for (guint k = 0; k < self->carried->len; k++)
    {
      TfRegionItem *item = self->carried->pdata[k];
      if (!is_marked (items, tf_region_item_get_row (item)->region_key))
        g_ptr_array_add (items, g_object_ref (item));
    }
}

gboolean
tf_session_drop_carried (TfSession *self, TfRegionItem *item)
{
  if (item == NULL || !tf_region_item_is_carried (item))
    return FALSE;
  g_ptr_array_remove (self->carried, item);
  return TRUE;
}

static gboolean
holds_middle (const TfRow *outer, const TfRow *inner)
{
  double unit[3];
  if (!isfinite (inner->measure.carrington_lon_deg))
    return FALSE;
  tf_sphere_unit (inner->measure.carrington_lon_deg, inner->measure.lat_deg, unit);
  return tf_outline_contains_rings (outer->outline, unit);
}

static gboolean
same_region (TfRegionItem *a, TfRegionItem *b)
{
  const TfRow *p = tf_region_item_get_row (a), *q = tf_region_item_get_row (b);
  return holds_middle (p, q) && holds_middle (q, p);
}

/* The first item of the list that is (@carried) or is not a carried one and fits. */
static TfRegionItem *
find_fitting (TfSession *self, TfRegionItem *of, gboolean is_carried)
{
  guint n = g_list_model_get_n_items (G_LIST_MODEL (self->regions));
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfRegionItem) item = g_list_model_get_item (G_LIST_MODEL (self->regions), k);
      if (tf_region_item_get_row (item)->is_hint && tf_region_item_is_carried (item) == is_carried
          && same_region (of, item))
        return item; /* the list holds it */
    }
  return NULL;
}

TfRegionItem *
tf_session_find_hint_of_carried (TfSession *self, TfRegionItem *item)
{
  return find_fitting (self, item, FALSE);
}

static TfRegionItem *
continued (TfSession *self, TfRegionItem *hint)
{
  if (hint == NULL || !tf_region_item_get_row (hint)->is_hint || tf_region_item_is_carried (hint))
    return NULL;
  return find_fitting (self, hint, TRUE);
}

gint64
tf_session_get_continued_key (TfSession *self, TfRegionItem *hint)
{
  TfRegionItem *item = continued (self, hint);
  return item != NULL ? tf_region_item_get_row (item)->region_key : 0;
}

const char *
tf_session_get_continued (TfSession *self, TfRegionItem *hint)
{
  TfRegionItem *item = continued (self, hint);
  return item != NULL ? tf_region_item_get_row (item)->region : NULL;
}
