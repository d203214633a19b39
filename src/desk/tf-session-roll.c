/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Which frames the roll shows, the folder that is watched for new ones, and frames whose file has
 * moved. */

#include "tf-session-private.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

/* -- the filter ------------------------------------------------------------------------------ */

static const char *const filter_names[TF_N_ROLL_FILTERS]
    = { "all", "untouched", "waiting", "done", "refused" };

const char *
tf_roll_filter_name (TfRollFilter filter)
{
  g_return_val_if_fail (filter < TF_N_ROLL_FILTERS, NULL);
  return filter_names[filter];
}

static gboolean
fits_filter (const TfSession *self, TfFrameItem *item)
{
  static const TfFrameState states[TF_N_ROLL_FILTERS] = {
    [TF_ROLL_UNTOUCHED] = TF_FRAME_UNTOUCHED,
    [TF_ROLL_WAITING] = TF_FRAME_WAITING,
    [TF_ROLL_DONE] = TF_FRAME_DONE,
    [TF_ROLL_REFUSED] = TF_FRAME_REFUSED,
  };
  const char *instrument = tf_frame_item_get_row (item)->info->instrument;
  return (self->roll_filter == TF_ROLL_ALL
          || tf_frame_item_get_state (item) == states[self->roll_filter])
         && (self->roll_instrument == NULL || g_strcmp0 (instrument, self->roll_instrument) == 0);
}

gboolean
tf_session_shows_frame (TfSession *self, TfFrameItem *item)
{
  if (!fits_filter (self, item))
    return FALSE;
  if (isnan (self->pick_from))
    return TRUE;
  const TfFrameRow *row = tf_frame_item_get_row (item);
  double year = tf_time_year (row->info->time);
  return year >= self->pick_from && year <= self->pick_to
         && (self->pick_frames == NULL || g_hash_table_contains (self->pick_frames, &row->id));
}

static void
filter_again (TfSession *self)
{
  tf_session_update_pick (self);
  tf_session_emit (self, TF_SIGNAL_FRAMES);
}

TfRollFilter
tf_session_get_roll_filter (TfSession *self)
{
  return self->roll_filter;
}

void
tf_session_set_roll_filter (TfSession *self, TfRollFilter filter)
{
  g_return_if_fail (TF_IS_SESSION (self) && filter < TF_N_ROLL_FILTERS);
  self->roll_filter = filter;
  filter_again (self);
}

const char *
tf_session_get_roll_instrument (TfSession *self)
{
  return self->roll_instrument;
}

void
tf_session_set_roll_instrument (TfSession *self, const char *instrument)
{
  g_return_if_fail (TF_IS_SESSION (self));
  g_free (self->roll_instrument);
  self->roll_instrument = instrument != NULL && *instrument != '\0' ? g_strdup (instrument) : NULL;
  filter_again (self);
}

static int
by_name (gconstpointer a, gconstpointer b)
{
  return strcmp (*(char *const *)a, *(char *const *)b);
}

char **
tf_session_dup_instruments (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), NULL);
  GPtrArray *names = g_ptr_array_new ();
  guint n = tf_session_get_n_frames (self);
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfFrameItem) item = g_list_model_get_item (G_LIST_MODEL (self->frames), k);
      const char *name = tf_frame_item_get_row (item)->info->instrument;
      if (name != NULL && !g_ptr_array_find_with_equal_func (names, name, g_str_equal, NULL))
        g_ptr_array_add (names, g_strdup (name));
    }
  g_ptr_array_sort (names, by_name);
  g_ptr_array_add (names, NULL);
  return (char **)g_ptr_array_free (names, FALSE);
}

/* -- the watched folder ---------------------------------------------------------------------- */

static void
arrived (char *const *paths, gpointer data)
{
  TfSession *self = data;
  self->feed_quiet = self->feed == NULL;
  tf_session_add_frames (self, paths);
}

const char *
tf_session_get_watched (TfSession *self)
{
  return self->arrivals != NULL ? tf_watch_get_folder (self->arrivals) : NULL;
}

gboolean
tf_session_set_watched (TfSession *self, const char *folder)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  g_autoptr (GError) error = NULL;
  g_clear_pointer (&self->arrivals, tf_watch_free);
  if (folder != NULL && self->path != NULL)
    self->arrivals = tf_watch_new (folder, arrived, self, &error);
  if (error != NULL)
    tf_session_say (self, error->message);
  tf_session_emit (self, TF_SIGNAL_FRAMES);
  return folder == NULL || self->arrivals != NULL;
}

/* -- moved files ----------------------------------------------------------------------------- */

typedef struct
{
  char *ledger, *folder;
  guint missing, found;
} Search;

static void
search_free (gpointer data)
{
  Search *search = data;
  g_free (search->ledger);
  g_free (search->folder);
  g_free (search);
}

static void
search_in_thread (GTask *task, gpointer source, gpointer data, GCancellable *cancellable)
{
  Search *search = data;
  GError *error = NULL;
  char *paths[] = { search->folder, NULL };
  g_autoptr (TfLedger) ledger = tf_ledger_open (search->ledger, &error);
  if (ledger != NULL
      && tf_intake_find_moved (ledger, paths, NULL, &search->missing, &search->found, &error))
    g_task_return_boolean (task, TRUE);
  else
    g_task_return_error (task, error);
}

static void
searched (GObject *source, GAsyncResult *result, gpointer data)
{
  g_autoptr (TfSession) self = data;
  g_autoptr (GError) error = NULL;
  const Search *search = g_task_get_task_data (G_TASK (result));
  gboolean good = g_task_propagate_boolean (G_TASK (result), &error);
  if (g_strcmp0 (self->path, search->ledger) != 0)
    return; /* another ledger was opened meanwhile */
  g_autofree char *text
      = !good                ? g_strdup (error->message)
        : search->missing == 0 ? g_strdup (_ ("No frame is missing: every file is where it was."))
                               : g_strdup_printf (_ ("%u of %u missing frames were found."),
                                                  search->found, search->missing);
  tf_session_say (self, text);
  if (good && search->found > 0)
    {
      tf_session_refresh (self, TRUE);
      self->look_again = TRUE;
    }
}

void
tf_session_find_moved (TfSession *self, const char *folder)
{
  g_return_if_fail (TF_IS_SESSION (self) && folder != NULL);
  if (!tf_session_is_writable (self))
    return;
  Search *search = g_new0 (Search, 1);
  search->ledger = g_strdup (self->path);
  search->folder = g_strdup (folder);
  g_autoptr (GTask) task = g_task_new (NULL, NULL, searched, g_object_ref (self));
  g_task_set_task_data (task, search, search_free);
  g_task_run_in_thread (task, search_in_thread);
}

gboolean
tf_session_is_file_missing (TfSession *self)
{
  return self->frame_item != NULL && self->frame == NULL && !self->loading
         && tf_frame_item_get_row (self->frame_item)->id > 0
         && !g_file_test (tf_frame_item_get_row (self->frame_item)->path, G_FILE_TEST_EXISTS);
}

void
tf_session_clear_roll (TfSession *self)
{
  g_clear_pointer (&self->arrivals, tf_watch_free);
  g_clear_pointer (&self->roll_instrument, g_free);
}
