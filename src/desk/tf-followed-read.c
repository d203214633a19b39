/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* What the Follow bench shows, read in a lane of its own: there passages are also made anew when
 * marks, hints, links or cuts have changed since. */

#include "tf-followed-private.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-intake.h"
#include "tf-study.h"

typedef struct
{
  /* asked */
  guint serial;
  gint64 passage, beside;
  TfSight sight;
  int now; /* the look in view then */
  gboolean writable;
  /* brought */
  GPtrArray *passages;
  TfPassageContent *content, *beside_content;
} Reading;

static void
reading_free (gpointer data)
{
  Reading *r = data;
  g_clear_pointer (&r->passages, g_ptr_array_unref);
  g_clear_pointer (&r->content, tf_passage_content_unref);
  g_clear_pointer (&r->beside_content, tf_passage_content_unref);
  g_free (r);
}

static gboolean
make_passages (TfLedger *ledger, const Reading *asked, GError **error)
{
  if (!asked->writable || !tf_ledger_follow_is_due (ledger))
    return TRUE;
  TfFollowParams params;
  tf_ledger_follow_params (ledger, &params);
  return tf_ledger_follow (ledger, &params, NULL, NULL, error);
}

static gboolean
has_passage (const GPtrArray *passages, gint64 id)
{
  for (guint k = 0; k < passages->len; k++)
    if (((const TfPassageRow *)g_ptr_array_index (passages, k))->id == id)
      return TRUE;
  return FALSE;
}

/* That of the mark, else the one asked for, else the newest with most sightings. */
static gint64
wanted_passage (TfLedger *ledger, const Reading *asked, const GPtrArray *passages)
{
  gint64 of_sight = asked->sight.mark != 0 ? tf_ledger_passage_of (ledger, asked->sight) : 0;
  if (of_sight != 0)
    return of_sight;
  if (asked->passage != 0 && has_passage (passages, asked->passage))
    return asked->passage;
  const TfPassageRow *best = NULL;
  for (guint k = 0; k < passages->len; k++)
    {
      const TfPassageRow *row = g_ptr_array_index (passages, k);
      if (best == NULL || row->n_marks > best->n_marks
          || (row->n_marks == best->n_marks && row->n_frames >= best->n_frames))
        best = row;
    }
  return best != NULL ? best->id : 0;
}

static gpointer
read_in_lane (TfLedger *ledger, gpointer data, GError **error)
{
  const Reading *asked = data;
  Reading *r = g_new0 (Reading, 1);
  *r = *asked;
  gboolean fine = make_passages (ledger, asked, error);
  r->passages = fine ? tf_ledger_passages (ledger, error) : NULL;
  if (r->passages == NULL)
    {
      reading_free (r);
      return NULL;
    }
  r->passage = wanted_passage (ledger, asked, r->passages);
  if (r->passage != 0)
    r->content = tf_passage_content_read (ledger, r->passage, error);
  if (asked->beside != 0 && has_passage (r->passages, asked->beside) && r->content != NULL)
    r->beside_content = tf_passage_content_read (ledger, asked->beside, NULL);
  if (r->passage != 0 && r->content == NULL)
    {
      reading_free (r);
      return NULL;
    }
  return r;
}

/* -- taking it ------------------------------------------------------------------------------- */

static int
compare_passages (gconstpointer a, gconstpointer b, gpointer data)
{
  const TfPassageRow *x = tf_passage_item_get_row ((TfPassageItem *)a),
                     *y = tf_passage_item_get_row ((TfPassageItem *)b);
  if ((x->n_marks > 0) != (y->n_marks > 0))
    return x->n_marks > 0 ? -1 : 1;
  return (x->first_time.s > y->first_time.s) - (x->first_time.s < y->first_time.s);
}

static void
take_passages (TfFollowed *self, GPtrArray *rows)
{
  g_autoptr (GPtrArray) items = g_ptr_array_new_with_free_func (g_object_unref);
  g_ptr_array_set_free_func (rows, NULL);
  for (guint k = 0; k < rows->len; k++)
    g_ptr_array_add (items, tf_passage_item_new (g_ptr_array_index (rows, k)));
  g_list_store_splice (self->passages, 0, g_list_model_get_n_items (G_LIST_MODEL (self->passages)),
                       items->pdata, items->len);
  g_list_store_sort (self->passages, compare_passages, NULL);
}

/* What was drawn before the passage was read again is not drawn again. */
static void
keep_pictures (GListModel *before, const GPtrArray *items)
{
  g_autoptr (GHashTable) by_frame = g_hash_table_new_full (g_direct_hash, g_direct_equal, NULL, g_object_unref);
  for (guint k = 0; k < g_list_model_get_n_items (before); k++)
    {
      TfLookItem *item = g_list_model_get_item (before, k);
      g_hash_table_insert (by_frame, GSIZE_TO_POINTER (tf_look_item_get_spec (item)->frame), item);
    }
  for (guint k = 0; k < items->len; k++)
    {
      TfLookItem *item = g_ptr_array_index (items, k);
      TfLookItem *old = g_hash_table_lookup (
          by_frame, GSIZE_TO_POINTER (tf_look_item_get_spec (item)->frame));
      if (old != NULL && tf_look_item_is_waiting (item))
        tf_look_item_share_picture (item, old);
    }
}

static void
take_looks (GListStore *store, TfPassageContent *content)
{
  g_autoptr (GPtrArray) items = g_ptr_array_new_with_free_func (g_object_unref);
  guint n = content != NULL ? content->looks->len : 0;
  for (guint k = 0; k < n; k++)
    g_ptr_array_add (items, tf_look_item_new (g_ptr_array_index (content->looks, k)));
  if (content != NULL) /* the items have them now */
    {
      g_ptr_array_set_free_func (content->looks, NULL);
      g_ptr_array_set_size (content->looks, 0);
    }
  keep_pictures (G_LIST_MODEL (store), items);
  g_list_store_splice (store, 0, g_list_model_get_n_items (G_LIST_MODEL (store)), items->pdata,
                       items->len);
}

/* The moment stays where it was when the passage is the same; else that of the mark one came from, or
 * the middle one. */
static int
find_now (TfFollowed *self, gint64 before, TfTime time, TfSight sight)
{
  GListModel *looks = G_LIST_MODEL (self->looks);
  int n = (int)g_list_model_get_n_items (looks), nearest = -1;
  double least = INFINITY;
  for (int k = 0; k < n; k++)
    {
      g_autoptr (TfLookItem) item = g_list_model_get_item (looks, (guint)k);
      const TfLookSpec *spec = tf_look_item_get_spec (item);
      if (sight.mark != 0 && spec->mark == sight.mark && spec->is_hint == sight.is_hint)
        return k;
      double away = fabs (spec->time.s - time.s);
      if (spec->kind != TF_LOOK_GAP && (nearest < 0 || away < least))
        {
          nearest = k;
          least = isfinite (away) ? away : INFINITY;
        }
    }
  if (before == tf_followed_get_chosen (self) && tf_time_is_known (time))
    return nearest;
  return nearest >= 0 ? n / 2 : -1;
}

static TfTime
time_now (TfFollowed *self)
{
  if (self->now < 0)
    return TF_TIME_UNKNOWN;
  g_autoptr (TfLookItem) item
      = g_list_model_get_item (G_LIST_MODEL (self->looks), (guint)self->now);
  return item != NULL ? tf_look_item_get_spec (item)->time : TF_TIME_UNKNOWN;
}

/* What is in view stays in view, in whatever passage it then lies. */
static TfSight
sight_now (TfFollowed *self)
{
  g_autoptr (TfLookItem) item
      = self->now < 0 ? NULL
                      : g_list_model_get_item (G_LIST_MODEL (self->looks), (guint)self->now);
  const TfLookSpec *spec = item != NULL ? tf_look_item_get_spec (item) : NULL;
  return spec != NULL ? (TfSight){ spec->mark, spec->is_hint } : (TfSight){ 0 };
}

/* Asked of every reading, told of a change or not: a reading may see one before it is told. Who has
 * chosen another passage leaves what is in view. */
static TfSight
sight_to_keep (TfFollowed *self)
{
  return self->want == tf_followed_get_chosen (self) ? sight_now (self) : (TfSight){ 0 };
}

static void
take (TfFollowed *self, Reading *r)
{
  gint64 before = tf_followed_get_chosen (self);
  TfTime time = time_now (self);
  /* Who stepped on while it was read is not thrown back. */
  TfSight sight = self->now != r->now && self->now >= 0 ? sight_now (self) : r->sight;
  g_cancellable_cancel (self->drawing);
  g_clear_object (&self->drawing);
  self->drawing = g_cancellable_new ();
  g_clear_pointer (&self->stretch, tf_series_free);
  self->taking = TRUE;
  take_passages (self, r->passages);
  g_clear_pointer (&self->content, tf_passage_content_unref);
  g_clear_pointer (&self->beside, tf_passage_content_unref);
  self->content = g_steal_pointer (&r->content);
  self->beside = g_steal_pointer (&r->beside_content);
  self->want = tf_followed_get_chosen (self);
  take_looks (self->looks, self->content);
  take_looks (self->beside_looks, self->beside);
  self->taking = FALSE;
  self->now = find_now (self, before, time, sight);
  if (before != self->want)
    self->from = self->to = TF_TIME_UNKNOWN;
  tf_followed_derive (self);
  self->want_sight = (TfSight){ 0 };
  g_clear_pointer (&self->problem, g_free);
  if (self->content == NULL)
    self->problem = g_strdup (_ ("There are no passages yet. Add frames: their hints are linked from "
                                 "frame to frame, and marks take their place."));
  tf_followed_emit (self, TF_FOLLOWED_PASSAGES);
  tf_followed_emit (self, TF_FOLLOWED_PASSAGE);
  tf_followed_emit (self, TF_FOLLOWED_MOMENT);
  tf_followed_render (self);
}

static void start_reading (TfFollowed *self);

/* -- one floor for the passage --------------------------------------------------------------- */

typedef struct
{
  gint64 passage;
  double floor_gauss;
} Evening;

static gpointer
even_in_lane (TfLedger *ledger, gpointer data, GError **error)
{
  const Evening *asked = data;
  TfRowQuery query = { .marks = TRUE, .hints = TRUE, .passage = asked->passage };
  return GINT_TO_POINTER (
      tf_intake_measure_even (ledger, asked->floor_gauss, &query, NULL, error) ? 1 : 0);
}

static void
evened (GObject *source, GAsyncResult *result, gpointer data)
{
  TfFollowed *self = TF_FOLLOWED (source);
  gboolean done = tf_lane_finish (result, NULL) != NULL; /* else the bench goes on saying how many lack it */
  self->reading--;
  if (done && self->lane != NULL && self->active)
    start_reading (self);
  tf_followed_emit (self, TF_FOLLOWED_BUSY);
}

/* Once a passage: what cannot be measured, because its frame is gone, stays as it is and is told. */
static void
measure_even (TfFollowed *self)
{
  const TfPassageContent *c = self->content;
  double floor = c != NULL ? c->series->floor_gauss : NAN;
  if (!isfinite (floor) || c->series->n_other_floor == 0 || !tf_session_is_writable (self->session))
    return;
  g_autofree char *now
      = g_strdup_printf ("%s %.0f %u", c->passage->content_id, floor, c->rows->len);
  if (g_strcmp0 (now, self->evened) == 0)
    return;
  g_free (self->evened);
  self->evened = g_steal_pointer (&now);
  Evening *asked = g_new (Evening, 1);
  *asked = (Evening){ c->passage->id, floor };
  self->reading++;
  tf_lane_push (self->lane, self, self->cancellable, even_in_lane, asked, g_free, NULL, evened, NULL);
}

static void
read_done (GObject *source, GAsyncResult *result, gpointer data)
{
  TfFollowed *self = TF_FOLLOWED (source);
  g_autoptr (GError) error = NULL;
  Reading *r = tf_lane_finish (result, &error);
  self->reading--;
  if (r != NULL && r->serial == self->serial && self->lane != NULL)
    {
      take (self, r);
      measure_even (self);
    }
  else if (error != NULL && !g_error_matches (error, G_IO_ERROR, G_IO_ERROR_CANCELLED)
           && self->lane != NULL)
    {
      g_free (self->problem);
      self->problem = g_strdup (error->message);
      tf_followed_emit (self, TF_FOLLOWED_PASSAGE);
    }
  g_clear_pointer (&r, reading_free);
  tf_followed_emit (self, TF_FOLLOWED_BUSY);
}

static void
close_lane (TfFollowed *self)
{
  if (self->cancellable != NULL)
    g_cancellable_cancel (self->cancellable);
  g_clear_object (&self->cancellable);
  g_clear_pointer (&self->lane, tf_lane_close);
  g_clear_pointer (&self->lane_path, g_free);
}

static void
open_lane (TfFollowed *self)
{
  const char *path = tf_session_get_ledger_path (self->session);
  if (self->lane != NULL && g_strcmp0 (path, self->lane_path) == 0)
    return;
  close_lane (self);
  self->want = self->want_beside = 0;
  self->want_sight = (TfSight){ 0 };
  self->now = -1;
  if (path == NULL || !tf_session_has_ledger (self->session))
    return;
  self->lane_path = g_strdup (path);
  self->lane = tf_lane_new (path, 0);
  self->cancellable = g_cancellable_new ();
}

static void
start_reading (TfFollowed *self)
{
  open_lane (self);
  self->stale = FALSE;
  if (self->lane == NULL)
    return;
  Reading *asked = g_new0 (Reading, 1);
  asked->serial = ++self->serial;
  asked->passage = self->want;
  asked->sight = self->want_sight.mark != 0 ? self->want_sight : sight_to_keep (self);
  asked->now = self->now;
  asked->beside = self->want_beside;
  asked->writable = tf_session_is_writable (self->session);
  self->reading++;
  tf_lane_push (self->lane, self, self->cancellable, read_in_lane, asked, reading_free,
                reading_free, read_done, NULL);
  tf_followed_emit (self, TF_FOLLOWED_BUSY);
}

static void
ledger_changed (TfFollowed *self)
{
  self->stale = TRUE;
  if (self->active)
    start_reading (self);
}

void
tf_followed_set_active (TfFollowed *self, gboolean active)
{
  g_return_if_fail (TF_IS_FOLLOWED (self));
  self->active = active;
  if (!active)
    tf_followed_set_playing (self, FALSE);
  else if (self->stale || self->content == NULL || self->want_sight.mark != 0)
    start_reading (self);
}

void
tf_followed_choose (TfFollowed *self, gint64 passage)
{
  g_return_if_fail (TF_IS_FOLLOWED (self));
  if (passage == self->want && self->want_sight.mark == 0 && self->content != NULL)
    return;
  self->want = passage;
  self->want_sight = (TfSight){ 0 };
  self->want_beside = 0;
  if (self->active)
    start_reading (self);
}

void
tf_followed_choose_sight (TfFollowed *self, TfSight sight)
{
  g_return_if_fail (TF_IS_FOLLOWED (self));
  int here = self->content != NULL && !self->stale ? tf_passage_content_find (self->content, sight)
                                                   : -1;
  if (here >= 0)
    {
      tf_followed_set_now_point (self, here);
      return;
    }
  self->want_sight = sight;
  if (self->active)
    start_reading (self);
}

void
tf_followed_set_beside (TfFollowed *self, gint64 passage)
{
  g_return_if_fail (TF_IS_FOLLOWED (self));
  if (passage == self->want_beside)
    return;
  self->want_beside = passage;
  start_reading (self);
}

static void
view_changed (TfFollowed *self)
{
  if (fabs (self->range - tf_session_get_range (self->session)) > 0.5
      || self->palette != tf_session_get_palette (self->session))
    tf_followed_forget_pictures (self);
  TfUnits units = tf_session_get_units (self->session);
  if (memcmp (&units, &self->units, sizeof units) == 0)
    return;
  self->units = units;
  tf_followed_emit (self, TF_FOLLOWED_MOMENT);
}

void
tf_followed_connect (TfFollowed *self)
{
  g_signal_connect_object (self->session, "points-changed", G_CALLBACK (ledger_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (self->session, "ledger-changed", G_CALLBACK (ledger_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (self->session, "view-changed", G_CALLBACK (view_changed), self,
                           G_CONNECT_SWAPPED);
}

void
tf_followed_close (TfFollowed *self)
{
  if (self->session != NULL)
    g_signal_handlers_disconnect_by_data (self->session, self);
  self->session = NULL; /* what a worker still has in hand is dropped when it comes */
  self->active = FALSE;
  g_clear_handle_id (&self->timer, g_source_remove);
  if (self->drawing != NULL)
    g_cancellable_cancel (self->drawing);
  g_clear_object (&self->drawing);
  close_lane (self);
  g_clear_pointer (&self->pool, tf_pool_unref);
}
