/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The session's roll: its frames, the one on the plate, and new ones coming in. */

#include "tf-session-private.h"

#include <math.h>
#include <glib/gi18n-lib.h>

/* -- the list -------------------------------------------------------------------------------- */

static gboolean
in_pick (gpointer object, gpointer data)
{
  const TfSession *self = data;
  if (isnan (self->pick_from))
    return TRUE;
  double year = tf_time_year (tf_frame_item_get_row (object)->info->time);
  return year >= self->pick_from && year <= self->pick_to;
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
      g_hash_table_insert (index, g_memdup2 (&tf_frame_item_get_row (item)->id, sizeof (gint64)), item);
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

/* -- the frame on the plate ------------------------------------------------------------------- */

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
  gboolean keep = keeps_view (self->frame, frame) && self->fitted && self->view.look == TF_LOOK_DISK;
  g_clear_pointer (&self->frame, tf_frame_unref);
  g_clear_pointer (&self->frame_problem, g_free);
  if (frame != NULL)
    self->frame = tf_frame_ref (frame);
  else
    self->frame_problem = g_strdup (error->message);
  if (!keep)
    tf_session_fit (self);
  else
    self->view.turn_deg = self->north_up ? tf_geometry_north_angle (tf_frame_get_geometry (frame)) : 0;
  tf_session_emit (self, TF_SIGNAL_FRAME);
  tf_session_emit (self, TF_SIGNAL_VIEW);
  tf_session_emit (self, TF_SIGNAL_STATUS);
  g_autofree char *text = g_steal_pointer (&self->draft_text);
  tf_session_restore_draft (self, text);
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
  tf_loader_open (self->loader, row->path, &spec, loaded, self);
  tf_session_refresh (self, FALSE);
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
      g_autoptr (TfFrameItem) next = k + step >= 0 && k + step < n ? g_list_model_get_item (list, (guint)(k + step)) : NULL;
      if (next != NULL)
        tf_session_choose_frame (self, next);
      return;
    }
}

/* -- frames only to look at, without a ledger -------------------------------------------------- */

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
  g_task_set_task_data (task, g_ptr_array_free (g_steal_pointer (&all), FALSE), (GDestroyNotify)g_strfreev);
  g_task_run_in_thread (task, look_in_thread);
}

/* -- frames into the ledger -------------------------------------------------------------------- */

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
  keep_trouble (self, state);
  if (state->error != NULL)
    return;
  GString *text = g_string_new (NULL);
  g_string_append_printf (text, ngettext ("%u frame added", "%u frames added", state->added), state->added);
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
  if (state->finished)
    {
      say_fed (self, state);
      g_clear_pointer (&self->feed, tf_feed_free);
      tf_session_refresh (self, TRUE);
    }
  g_free (self->progress);
  self->progress = NULL;
  if (!state->finished)
    self->progress = state->listing ? g_strdup (_ ("Looking for frames…"))
                                    : g_strdup_printf (_ ("Taking in frames: %u of %u"), state->done, state->total);
  self->progress_share = state->total > 0 ? (double)state->done / state->total : -1;
  tf_session_emit (self, TF_SIGNAL_STATUS);
}

void
tf_session_add_frames (TfSession *self, char *const *paths)
{
  g_return_if_fail (TF_IS_SESSION (self) && paths != NULL);
  if (self->path == NULL)
    look_at (self, paths);
  else if (!self->open)
    {
      g_strfreev (self->to_add);
      self->to_add = g_strdupv ((char **)paths);
    }
  else if (self->feed != NULL)
    tf_session_say (self, _ ("Frames are being taken in just now; add these when that is done."));
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
  if (!self->loading)
    return;
  tf_loader_cancel (self->loader);
  self->loading = FALSE;
  g_free (self->frame_problem);
  self->frame_problem = g_strdup (_ ("Opening this frame was cancelled. Choose it again to open it."));
  g_clear_pointer (&self->frame, tf_frame_unref);
  tf_session_emit (self, TF_SIGNAL_FRAME);
  tf_session_emit (self, TF_SIGNAL_STATUS);
}

/* -- the newest -------------------------------------------------------------------------------- */

static int
by_value (gconstpointer a, gconstpointer b)
{
  double x = *(const double *)a, y = *(const double *)b;
  return (x > y) - (x < y);
}

TfTime
tf_session_get_newest (TfSession *self, double *cadence_s)
{
  enum { N_STEPS = 15 };
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
