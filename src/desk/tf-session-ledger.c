/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The session and its ledger: opening, reading again after every change (its own and other
 * programs'), all off the main thread. */

#include "tf-session-laws-private.h"

#include <glib/gi18n-lib.h>

enum
{
  WATCH_SECONDS = 2
};

/* What one reading brings. */
typedef struct
{
  /* asked */
  gboolean all;
  gint64 frame;
  char *person;
  gint64 person_key;
  TfStudy *study; /* brought: with the divides of the ledger */
  /* brought */
  TfJudge *judge;
  gint64 version;
  GPtrArray *frames; /* all of them, when asked */
  TfFrameRow *row;   /* else the one */
  GPtrArray *rows;   /* of the frame */
  GHashTable *joins; /* of its hints */
  GArray *points, *dots, *mark_dots;
  char *read_only, *draft;
  char **notices;
  gboolean can_undo, can_redo;
} Reading;

static void
reading_free (gpointer data)
{
  Reading *r = data;
  g_free (r->person);
  tf_study_free (r->study);
  g_clear_pointer (&r->judge, tf_judge_unref);
  g_clear_pointer (&r->frames, g_ptr_array_unref);
  g_clear_pointer (&r->row, tf_frame_row_free);
  g_clear_pointer (&r->rows, g_ptr_array_unref);
  g_clear_pointer (&r->joins, g_hash_table_unref);
  g_clear_pointer (&r->points, g_array_unref);
  g_clear_pointer (&r->dots, g_array_unref);
  g_clear_pointer (&r->mark_dots, g_array_unref);
  g_free (r->read_only);
  g_free (r->draft);
  g_strfreev (r->notices);
  g_free (r);
}

/* The dots of the points from first to end - 1. */
typedef struct
{
  const Reading *reading;
  guint first, end;
} Part;

static gpointer
judge_part (gpointer data)
{
  const Part *part = data;
  const Reading *r = part->reading;
  for (guint k = part->first; k < part->end; k++)
    {
      const TfPoint *p = &g_array_index (r->points, TfPoint, k);
      g_array_index (r->dots, TfWingsDot, k)
          = (TfWingsDot){ .year = p->year,
                          .lat_deg = p->lat_deg,
                          .flux_mx = p->flux_mx,
                          .leading = p->leading,
                          .verdict = (gint8)tf_judge_point (r->judge, p).kind,
                          .hint = p->hint,
                          .id = (gint64)k + 1 };
    }
  return NULL;
}

/* Half of them in a second thread when there are many. */
static void
make_dots (Reading *r)
{
  enum
  {
    MANY = 50000
  };
  guint n = r->points->len, middle = n > MANY ? n / 2 : n;
  r->dots = g_array_sized_new (FALSE, FALSE, sizeof (TfWingsDot), n);
  g_array_set_size (r->dots, n);
  Part parts[] = { { r, 0, middle }, { r, middle, n } };
  GThread *other = middle < n ? g_thread_new ("tf-dots", judge_part, &parts[1]) : NULL;
  judge_part (&parts[0]);
  if (other != NULL)
    g_thread_join (other);
  r->mark_dots = g_array_sized_new (FALSE, FALSE, sizeof (TfWingsDot), n);
  for (guint k = 0; k < n; k++)
    if (!g_array_index (r->dots, TfWingsDot, k).hint)
      g_array_append_val (r->mark_dots, g_array_index (r->dots, TfWingsDot, k));
}

static char **
dup_notices (TfLedger *ledger)
{
  const TfNotes *notes = tf_ledger_get_notices (ledger);
  GPtrArray *texts = g_ptr_array_new ();
  for (guint k = 0; k < tf_notes_get_n (notes); k++)
    g_ptr_array_add (texts, tf_note_dup_text (tf_notes_get (notes, k), FALSE));
  g_ptr_array_add (texts, NULL);
  return (char **)g_ptr_array_free (texts, FALSE);
}

/* Whether the person's last deed can be undone. */
static void
read_person (Reading *r, TfLedger *ledger)
{
  gint64 key = r->person_key = tf_session_find_person (ledger, r->person);
  if (key == 0)
    return;
  r->can_undo = tf_ledger_can_undo (ledger, key);
  r->can_redo = tf_ledger_can_redo (ledger, key);
  if (r->frame != 0)
    r->draft = tf_ledger_dup_draft (ledger, r->frame, key);
}

static gboolean
read_frames (Reading *r, TfLedger *ledger, GError **error)
{
  if (r->all)
    {
      r->frames = tf_ledger_frames (ledger, error);
      if (r->frames == NULL)
        return FALSE;
    }
  if (r->frame == 0)
    return TRUE;
  if (!r->all)
    r->row = tf_ledger_frame (ledger, r->frame, NULL);
  TfRowQuery query = { .marks = TRUE, .hints = TRUE, .frame = r->frame };
  r->rows = tf_ledger_rows (ledger, &query, error);
  if (r->rows != NULL)
    r->joins = tf_session_read_joins (ledger, r->rows, r->person_key);
  return r->rows != NULL;
}

static gpointer
read_in_lane (TfLedger *ledger, gpointer data, GError **error)
{
  const Reading *asked = data;
  Reading *r = g_new0 (Reading, 1);
  r->all = asked->all;
  r->frame = asked->frame;
  r->person = g_strdup (asked->person);
  r->study = tf_study_copy (asked->study);
  r->version = tf_ledger_get_version (ledger);
  const TfNote *read_only = tf_ledger_get_read_only (ledger);
  r->read_only = read_only != NULL ? tf_note_dup_text (read_only, FALSE) : NULL;
  r->notices = dup_notices (ledger);
  read_person (r, ledger);
  gboolean ready = tf_study_read_divides (r->study, ledger, error);
  r->judge = tf_judge_new_for (r->study);
  if (ready && read_frames (r, ledger, error))
    r->points = tf_ledger_points (ledger, error);
  if (r->points == NULL)
    {
      reading_free (r);
      return NULL;
    }
  make_dots (r);
  return r;
}

static void
take_ledger_state (TfSession *self, Reading *r)
{
  gboolean first = !self->open;
  self->open = TRUE;
  g_clear_pointer (&self->trouble, g_free);
  g_free (self->read_only);
  self->read_only = g_steal_pointer (&r->read_only);
  if (!self->wrote)
    {
      self->can_undo = r->can_undo;
      self->can_redo = r->can_redo;
    }
  self->version = r->version;
  if (!first)
    return;
  tf_session_emit (self, TF_SIGNAL_LEDGER);
  for (guint k = 0; r->notices != NULL && r->notices[k] != NULL; k++)
    tf_session_say (self, r->notices[k]);
  g_auto (GStrv) waiting = g_steal_pointer (&self->to_add);
  if (waiting != NULL)
    tf_session_add_frames (self, waiting);
}

static void
take_reading (TfSession *self, Reading *r)
{
  gboolean first = !self->open;
  take_ledger_state (self, r);
  gint64 now = self->frame_item != NULL ? tf_frame_item_get_row (self->frame_item)->id : 0;
  tf_session_take_divides (self, r->study, r->judge);
  if (r->frames != NULL)
    tf_session_replace_frames (self, g_steal_pointer (&r->frames));
  TfFrameItem *item = r->row != NULL ? tf_session_find_frame (self, r->row->id) : NULL;
  if (item != NULL)
    tf_frame_item_set_row (item, g_steal_pointer (&r->row));
  tf_session_check_geometry (self);
  if (r->rows != NULL && r->frame == now)
    {
      g_clear_pointer (&self->joins, g_hash_table_unref);
      self->joins = g_steal_pointer (&r->joins);
      tf_session_replace_regions (self, r->rows);
      gboolean newest = tf_session_get_pending (self) == 0 && !self->outdated;
      if (newest) /* else the ledger may have had an older draft yet */
        {
          tf_session_forget_hoped (self);
          tf_session_restore_draft (self, r->draft);
        }
    }
  tf_session_replace_points (self, g_steal_pointer (&r->points), g_steal_pointer (&r->dots),
                             g_steal_pointer (&r->mark_dots));
  if (first)
    tf_session_make_passages (self);
  tf_session_judge_divide (self);
  tf_session_forget_laws (self);
  tf_session_update_shift (self);
  tf_session_emit (self, TF_SIGNAL_STATUS);
}

static void start_reading (TfSession *self);

static void
read_done (GObject *source, GAsyncResult *result, gpointer data)
{
  TfSession *self = TF_SESSION (source);
  g_autoptr (GError) error = NULL;
  Reading *r = tf_lane_finish (result, &error);
  if (g_error_matches (error, G_IO_ERROR, G_IO_ERROR_CANCELLED)
      || g_task_get_cancellable (G_TASK (result)) != self->reading)
    {
      g_clear_pointer (&r, reading_free);
      return;
    }
  self->refreshing = FALSE;
  if (r != NULL)
    take_reading (self, r);
  else if (error != NULL)
    {
      g_free (self->trouble);
      self->trouble = g_strdup (error->message);
      tf_session_emit (self, TF_SIGNAL_LEDGER);
      tf_session_emit (self, TF_SIGNAL_STATUS);
    }
  g_clear_pointer (&r, reading_free);
  if (self->refresh_again)
    start_reading (self);
}

static void
start_reading (TfSession *self)
{
  if (self->reader == NULL)
    return;
  Reading *asked = g_new0 (Reading, 1);
  asked->all = self->refresh_all || !self->open;
  asked->frame = self->frame_item == NULL ? 0 : tf_frame_item_get_row (self->frame_item)->id;
  asked->person = g_strdup (self->person);
  asked->study = tf_study_copy (self->laws->study);
  self->refreshing = TRUE;
  self->outdated = FALSE;
  self->refresh_again = self->refresh_all = FALSE;
  tf_lane_push (self->reader, self, self->reading, read_in_lane, asked, reading_free, reading_free,
                read_done, NULL);
}

void
tf_session_refresh (TfSession *self, gboolean all)
{
  g_return_if_fail (TF_IS_SESSION (self));
  self->refresh_all = self->refresh_all || all;
  if (self->refreshing)
    self->refresh_again = TRUE;
  else
    start_reading (self);
}

static gpointer
look_in_lane (TfLedger *ledger, gpointer data, GError **error)
{
  gint64 *version = g_new (gint64, 1);
  *version = tf_ledger_get_version (ledger);
  return version;
}

static void
looked (GObject *source, GAsyncResult *result, gpointer data)
{
  TfSession *self = TF_SESSION (source);
  g_autofree gint64 *version = tf_lane_finish (result, NULL);
  if (version != NULL && g_task_get_cancellable (G_TASK (result)) == self->reading
      && *version != self->version && !self->refreshing)
    tf_session_refresh (self, TRUE);
}

/* Another program, a fill for one, may write into the same file. */
static gboolean
watch (gpointer data)
{
  TfSession *self = data;
  if (self->reader != NULL && self->open && !self->refreshing)
    tf_lane_push (self->reader, self, self->reading, look_in_lane, NULL, NULL, g_free, looked,
                  NULL);
  return G_SOURCE_CONTINUE;
}

void
tf_session_close (TfSession *self)
{
  g_clear_handle_id (&self->watch, g_source_remove);
  if (self->reading != NULL)
    g_cancellable_cancel (self->reading);
  g_clear_object (&self->reading);
  g_clear_pointer (&self->arrivals, tf_watch_free);
  g_clear_pointer (&self->feed, tf_feed_free);
  g_clear_pointer (&self->progress, g_free);
  g_clear_pointer (&self->to_add, g_strfreev);
  if (self->writer != NULL)
    {
      g_signal_handlers_disconnect_by_data (self->writer, self);
      tf_writer_close (self->writer);
    }
  g_clear_object (&self->writer);
  g_clear_pointer (&self->reader, tf_lane_close);
  tf_session_close_join (self);
  tf_session_laws_close (self);
  g_clear_pointer (&self->path, g_free);
  g_clear_pointer (&self->trouble, g_free);
  g_clear_pointer (&self->read_only, g_free);
  self->open = self->wrote = self->can_undo = self->can_redo = FALSE;
  self->refreshing = self->refresh_again = self->refresh_all = FALSE;
}

void
tf_session_open_ledger (TfSession *self, const char *path, char letter)
{
  g_return_if_fail (TF_IS_SESSION (self) && path != NULL);
  tf_session_close (self);
  tf_session_clear_frames (self);
  tf_session_replace_points (self, NULL, NULL, NULL);
  g_autoptr (GFile) file = g_file_new_for_commandline_arg (path);
  self->path = g_file_get_path (file);
  if (self->path == NULL)
    self->path = g_strdup (path);
  self->reading = g_cancellable_new ();
  self->reader = tf_lane_new (self->path, letter);
  self->writer = tf_writer_new (self->path, 0); /* opens the file with its first deed */
  tf_session_connect_writer (self);
  tf_session_connect_shift (self);
  self->refresh_all = TRUE;
  start_reading (self);
  self->watch = g_timeout_add_seconds (WATCH_SECONDS, watch, self);
  tf_session_emit (self, TF_SIGNAL_LEDGER);
  tf_session_emit (self, TF_SIGNAL_STATUS);
}

const char *
tf_session_get_ledger_path (TfSession *self)
{
  return self->path;
}

char *
tf_session_dup_ledger_name (TfSession *self)
{
  if (self->path == NULL)
    return NULL;
  char *name = g_path_get_basename (self->path);
  char *ending = g_strrstr (name, ".ledger");
  if (ending != NULL && ending != name && ending[7] == '\0')
    *ending = '\0';
  return name;
}

gboolean
tf_session_has_ledger (TfSession *self)
{
  return self->open;
}

const char *
tf_session_get_ledger_problem (TfSession *self)
{
  return self->trouble != NULL ? self->trouble : self->read_only;
}

gboolean
tf_session_is_writable (TfSession *self)
{
  return self->open && self->read_only == NULL;
}

const char *
tf_session_get_person (TfSession *self)
{
  return self->person;
}

void
tf_session_set_person (TfSession *self, const char *name)
{
  g_return_if_fail (TF_IS_SESSION (self));
  g_autofree char *clean = g_strstrip (g_strdup (name != NULL ? name : ""));
  g_free (self->person);
  self->person = clean[0] != '\0' ? g_strdup (clean) : NULL;
  self->wrote = self->can_undo = self->can_redo = FALSE;
  if (self->reader != NULL)
    tf_lane_reopen (self->reader);
  if (self->draft != NULL)
    tf_session_store_draft (self);
  tf_session_emit (self, TF_SIGNAL_LEDGER);
  tf_session_refresh (self, FALSE);
}
