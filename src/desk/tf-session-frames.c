/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The session's roll: its frames, the one on the plate, and how old the newest is. */

#include "tf-session-private.h"

#include <math.h>
#include <glib/gi18n-lib.h>

/* -- the list -------------------------------------------------------------------------------- */

static gboolean
in_pick (gpointer object, gpointer data)
{
  return tf_session_shows_frame (data, object);
}

void
tf_session_update_pick (TfSession *self)
{
  if (self->shown == NULL)
    {
      self->filter = gtk_custom_filter_new (in_pick, self, NULL);
      self->shown = gtk_filter_list_model_new (g_object_ref (G_LIST_MODEL (self->frames)),
                                               g_object_ref (GTK_FILTER (self->filter)));
      return;
    }
  gtk_filter_changed (GTK_FILTER (self->filter), GTK_FILTER_CHANGE_DIFFERENT);
}

GListModel *
tf_session_get_frames (TfSession *self)
{
  return G_LIST_MODEL (self->shown);
}

guint
tf_session_get_n_frames (TfSession *self)
{
  return g_list_model_get_n_items (G_LIST_MODEL (self->frames));
}

TfFrameItem *
tf_session_find_frame (TfSession *self, gint64 id)
{
  guint n = tf_session_get_n_frames (self);
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfFrameItem) item = g_list_model_get_item (G_LIST_MODEL (self->frames), k);
      if (tf_frame_item_get_row (item)->id == id)
        return item; /* the list holds it */
    }
  return NULL;
}

/* Items that stand already are kept, so that selection and thumbnails stay. */
static GHashTable *
index_frames (TfSession *self)
{
  GHashTable *index = g_hash_table_new_full (g_int64_hash, g_int64_equal, g_free, g_object_unref);
  guint n = tf_session_get_n_frames (self);
  for (guint k = 0; k < n; k++)
    {
      TfFrameItem *item = g_list_model_get_item (G_LIST_MODEL (self->frames), k);
      g_hash_table_insert (index, g_memdup2 (&tf_frame_item_get_row (item)->id, sizeof (gint64)),
                           item);
    }
  return index;
}

static void
set_days (GPtrArray *items)
{
  g_autofree char *before = NULL;
  for (guint k = 0; k < items->len; k++)
    {
      TfFrameItem *item = g_ptr_array_index (items, k);
      g_autofree char *day = tf_frame_item_dup_day (item);
      tf_frame_item_set_day (item, g_strcmp0 (day, before) != 0 ? day : NULL);
      g_free (before);
      before = g_steal_pointer (&day);
    }
}

static gboolean
same_items (TfSession *self, const GPtrArray *items)
{
  guint n = tf_session_get_n_frames (self);
  if (n != items->len)
    return FALSE;
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfFrameItem) item = g_list_model_get_item (G_LIST_MODEL (self->frames), k);
      if (item != g_ptr_array_index (items, k))
        return FALSE;
    }
  return TRUE;
}

static void
choose_first (TfSession *self)
{
  guint n = g_list_model_get_n_items (G_LIST_MODEL (self->shown));
  g_autoptr (TfFrameItem) best = NULL;
  for (guint k = 0; k < n && best == NULL; k++)
    {
      g_autoptr (TfFrameItem) item = g_list_model_get_item (G_LIST_MODEL (self->shown), k);
      if (tf_frame_item_get_state (item) != TF_FRAME_REFUSED)
        best = g_steal_pointer (&item);
    }
  if (best != NULL)
    tf_session_choose_frame (self, best);
}

void
tf_session_replace_frames (TfSession *self, GPtrArray *rows)
{
  g_autoptr (GHashTable) index = index_frames (self);
  g_autoptr (GPtrArray) items = g_ptr_array_new_with_free_func (g_object_unref);
  g_ptr_array_set_free_func (rows, NULL);
  for (guint k = 0; k < rows->len; k++)
    {
      TfFrameRow *row = g_ptr_array_index (rows, k);
      TfFrameItem *item = g_hash_table_lookup (index, &row->id);
      if (item != NULL)
        {
          g_ptr_array_add (items, g_object_ref (item));
          tf_frame_item_set_row (item, row);
        }
      else
        g_ptr_array_add (items, tf_frame_item_new (row));
    }
  g_ptr_array_unref (rows);
  set_days (items);
  if (!same_items (self, items))
    g_list_store_splice (self->frames, 0, tf_session_get_n_frames (self), items->pdata, items->len);
  tf_session_emit (self, TF_SIGNAL_FRAMES);
  if (self->frame_item == NULL)
    choose_first (self);
}

void
tf_session_clear_frames (TfSession *self)
{
  tf_loader_cancel (self->loader);
  self->loading = FALSE;
  g_clear_pointer (&self->frame, tf_frame_unref);
  g_clear_object (&self->frame_item);
  g_clear_pointer (&self->frame_problem, g_free);
  tf_session_drop_draft (self);
  g_list_store_remove_all (self->frames);
  tf_session_replace_regions (self, NULL);
  tf_session_emit (self, TF_SIGNAL_FRAMES);
  tf_session_emit (self, TF_SIGNAL_FRAME);
}

/* -- the frame on the plate ------------------------------------------------------------------ */

TfFrameItem *
tf_session_get_frame_item (TfSession *self)
{
  return self->frame_item;
}

TfFrame *
tf_session_get_frame (TfSession *self)
{
  return self->frame;
}

const char *
tf_session_get_frame_problem (TfSession *self)
{
  return self->frame_problem;
}

gboolean
tf_session_is_loading (TfSession *self)
{
  return self->loading;
}

/* Flipping through frames of one instrument keeps the same part of the Sun in view. */
static gboolean
keeps_view (const TfFrame *before, const TfFrame *now)
{
  if (before == NULL || now == NULL)
    return FALSE;
  const TfGeometry *a = tf_frame_get_geometry (before), *b = tf_frame_get_geometry (now);
  return a->projection == b->projection && a->width == b->width && a->height == b->height
         && fabs (a->crpix[0] - b->crpix[0]) < 2 && fabs (a->crpix[1] - b->crpix[1]) < 2;
}

static void
loaded (TfFrame *frame, const GError *error, gpointer data)
{
  TfSession *self = data;
  self->loading = FALSE;
  gboolean keep
      = self->reopening ? frame != NULL && !self->fitted
                        : keeps_view (self->frame, frame) && self->fitted
                              && self->view.look == TF_LOOK_DISK;
  if (self->reopening && frame != NULL)
    tf_session_move_draft (self, frame);
  self->reopening = FALSE;
  g_clear_pointer (&self->frame, tf_frame_unref);
  g_clear_pointer (&self->frame_problem, g_free);
  if (frame != NULL)
    self->frame = tf_frame_ref (frame);
  else
    self->frame_problem = g_strdup (error->message);
  if (!keep)
    tf_session_fit (self);
  else
    self->view.turn_deg
        = self->north_up ? tf_geometry_north_angle (tf_frame_get_geometry (frame)) : 0;
  tf_session_emit (self, TF_SIGNAL_FRAME);
  tf_session_emit (self, TF_SIGNAL_VIEW);
  tf_session_emit (self, TF_SIGNAL_STATUS);
  g_autofree char *text = g_steal_pointer (&self->draft_text);
  tf_session_restore_draft (self, text);
  if (self->draft != NULL && frame != NULL && !self->measured)
    tf_session_measure_draft (self);
}

/* The same frame under another geometry: what is in hand stays in hand. */
void
tf_session_reopen_frame (TfSession *self)
{
  const TfFrameRow *row = tf_frame_item_get_row (self->frame_item);
  TfFrameSpec spec = { .hdu = row->hdu, .plane = row->plane };
  self->loading = self->reopening = TRUE;
  tf_session_emit (self, TF_SIGNAL_STATUS);
  tf_loader_open (self->loader, row->path, &spec, &self->correction, loaded, self);
}

void
tf_session_choose_frame (TfSession *self, TfFrameItem *item)
{
  g_return_if_fail (TF_IS_SESSION (self));
  if (item == self->frame_item)
    return;
  g_set_object (&self->frame_item, item);
  tf_session_drop_draft (self);
  g_clear_object (&self->region);
  g_clear_pointer (&self->saved, g_free);
  tf_session_replace_regions (self, NULL);
  if (item == NULL)
    return;
  const TfFrameRow *row = tf_frame_item_get_row (item);
  TfFrameSpec spec = { .hdu = row->hdu, .plane = row->plane };
  self->loading = TRUE;
  tf_session_emit (self, TF_SIGNAL_FRAME);
  tf_session_emit (self, TF_SIGNAL_STATUS);
  self->reopening = FALSE;
  self->correction = tf_frame_row_get_correction (row, self->person);
  self->preview = tf_correction_none ();
  tf_session_update_method (self);
  tf_loader_open (self->loader, row->path, &spec, &self->correction, loaded, self);
  if (self->passages_due)
    tf_session_make_passages (self);
  tf_session_refresh (self, FALSE);
}

/* The next frame in that direction on which hints wait, round the end; NULL when there is none. */
static TfFrameItem *
ref_waiting_frame (TfSession *self, int step)
{
  GListModel *list = G_LIST_MODEL (self->shown);
  int n = (int)g_list_model_get_n_items (list), at = step > 0 ? -1 : n;
  for (int k = 0; k < n; k++)
    {
      g_autoptr (TfFrameItem) item = g_list_model_get_item (list, (guint)k);
      if (item == self->frame_item)
        at = k;
    }
  for (int tried = 0; tried < n; tried++)
    {
      at = (at + step + n) % n;
      g_autoptr (TfFrameItem) item = g_list_model_get_item (list, (guint)at);
      if (item != self->frame_item && tf_frame_item_get_state (item) == TF_FRAME_WAITING)
        return g_steal_pointer (&item);
    }
  return NULL;
}

gboolean
tf_session_has_waiting_frame (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  g_autoptr (TfFrameItem) item = ref_waiting_frame (self, 1);
  return item != NULL;
}

gboolean
tf_session_step_waiting_frame (TfSession *self, int step)
{
  g_return_val_if_fail (TF_IS_SESSION (self) && (step == 1 || step == -1), FALSE);
  g_autoptr (TfFrameItem) item = ref_waiting_frame (self, step);
  if (item != NULL)
    tf_session_choose_frame (self, item);
  return item != NULL;
}

void
tf_session_step_frame (TfSession *self, int step)
{
  GListModel *list = G_LIST_MODEL (self->shown);
  int n = (int)g_list_model_get_n_items (list);
  for (int k = 0; k < n; k++)
    {
      g_autoptr (TfFrameItem) item = g_list_model_get_item (list, (guint)k);
      if (item != self->frame_item && self->frame_item != NULL)
        continue;
      g_autoptr (TfFrameItem) next
          = k + step >= 0 && k + step < n ? g_list_model_get_item (list, (guint)(k + step)) : NULL;
      if (next != NULL)
        tf_session_choose_frame (self, next);
      return;
    }
}

/* -- the newest ------------------------------------------------------------------------------ */

static int
by_value (gconstpointer a, gconstpointer b)
{
  double x = *(const double *)a, y = *(const double *)b;
  return (x > y) - (x < y);
}

TfTime
tf_session_get_newest (TfSession *self, double *cadence_s)
{
  enum
  {
    N_STEPS = 15
  };
  double steps[N_STEPS];
  guint n_steps = 0;
  TfTime newest = TF_TIME_UNKNOWN, later = TF_TIME_UNKNOWN;
  for (guint k = tf_session_get_n_frames (self); k > 0 && n_steps < N_STEPS; k--)
    {
      g_autoptr (TfFrameItem) item = g_list_model_get_item (G_LIST_MODEL (self->frames), k - 1);
      TfTime time = tf_frame_item_get_row (item)->info->time;
      if (!tf_time_is_known (time))
        continue;
      if (!tf_time_is_known (newest))
        newest = time;
      if (tf_time_is_known (later) && later.s > time.s)
        steps[n_steps++] = later.s - time.s;
      later = time;
    }
  qsort (steps, n_steps, sizeof *steps, by_value);
  *cadence_s = n_steps > 0 ? steps[n_steps / 2] : NAN;
  return newest;
}
