/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Marks of one passage are one region. The ledger's rule says which region a mark would join when it
 * is kept; the slip says it beforehand, and the deed asks the same rule when it is carried out. For
 * that passages are made anew in a lane of their own when frames came in or marks were drawn. */

#include "tf-session-private.h"


enum
{
  MANY_POINTS = 30000 /* above it passages are made anew only by the Follow bench and follow: minutes */
};

/* -- passages made anew ---------------------------------------------------------------------- */

static gpointer
make_in_lane (TfLedger *ledger, gpointer data, GError **error)
{
  const TfWork work = { .cancel = data };
  TfFollowSum *sum = g_new0 (TfFollowSum, 1);
  TfFollowParams params;
  tf_ledger_follow_params (ledger, &params);
  if (!tf_ledger_follow_is_due (ledger) || tf_ledger_follow (ledger, &params, &work, sum, error))
    return sum;
  g_free (sum);
  return NULL;
}

/* What could not be done now is done with the next frames. */
static void
made (GObject *source, GAsyncResult *result, gpointer data)
{
  TfSession *self = TF_SESSION (source);
  g_autofree TfFollowSum *sum = tf_lane_finish (result, NULL);
  if (g_task_get_cancellable (G_TASK (result)) != self->reading || sum == NULL)
    return;
  if (sum->changed)
    tf_session_refresh (self, FALSE);
  tf_session_ask_join (self);
}

void
tf_session_make_passages (TfSession *self)
{
  self->passages_due = FALSE;
  if (!tf_session_is_writable (self) || self->points->len > MANY_POINTS)
    return;
  if (self->follower == NULL)
    {
      self->follower = tf_lane_new (self->path, 0);
      self->follow_cancel = tf_cancel_new ();
    }
  tf_lane_push (self->follower, self, self->reading, make_in_lane, tf_cancel_ref (self->follow_cancel),
                (GDestroyNotify)tf_cancel_unref, g_free, made, NULL);
}

void
tf_session_close_join (TfSession *self)
{
  if (self->follow_cancel != NULL)
    tf_cancel_raise (self->follow_cancel);
  g_clear_pointer (&self->follower, tf_lane_close);
  g_clear_pointer (&self->follow_cancel, tf_cancel_unref);
  g_clear_pointer (&self->joins, g_hash_table_unref);
  self->passages_due = FALSE;
  for (guint k = 0; k < G_N_ELEMENTS (self->draft_joins); k++)
    g_clear_pointer (&self->draft_joins[k], g_free);
}

gint64
tf_session_find_person (TfLedger *ledger, const char *name)
{
  g_auto (GStrv) known = tf_ledger_dup_persons (ledger);
  gboolean there = name != NULL && known != NULL
                   && g_strv_contains ((const char *const *)known, name);
  return there ? tf_ledger_person (ledger, name, NULL) : 0;
}

/* -- of the hints on a frame ------------------------------------------------------------------ */

GHashTable *
tf_session_read_joins (TfLedger *ledger, const GPtrArray *rows, gint64 person)
{
  GHashTable *joins = g_hash_table_new_full (g_int64_hash, g_int64_equal, g_free, g_free);
  for (guint k = 0; k < rows->len; k++)
    {
      const TfRow *row = g_ptr_array_index (rows, k);
      if (!row->is_hint)
        continue;
      char *number = NULL;
      if (tf_ledger_region_to_join (ledger, row->frame, person, row->mark, row->outline, &number) != 0)
        g_hash_table_insert (joins, g_memdup2 (&row->mark, sizeof row->mark), number);
    }
  return joins;
}

/* -- of the draft ----------------------------------------------------------------------------- */

typedef struct
{
  gint64 frame;
  char *person;
  TfOutline *outline[2]; /* NULL: not asked */
  guint64 serial;
} Question;

static void
question_free (gpointer data)
{
  Question *asked = data;
  g_free (asked->person);
  for (guint k = 0; k < G_N_ELEMENTS (asked->outline); k++)
    g_clear_pointer (&asked->outline[k], tf_outline_unref);
  g_free (asked);
}

static gpointer
ask_in_lane (TfLedger *ledger, gpointer data, GError **error)
{
  const Question *asked = data;
  char **numbers = g_new0 (char *, G_N_ELEMENTS (asked->outline) + 1);
  gint64 person = tf_session_find_person (ledger, asked->person);
  for (guint k = 0; k < G_N_ELEMENTS (asked->outline); k++)
    {
      if (asked->outline[k] != NULL)
        tf_ledger_region_to_join (ledger, asked->frame, person, 0, asked->outline[k], &numbers[k]);
      if (numbers[k] == NULL)
        numbers[k] = g_strdup ("");
    }
  return numbers;
}

static void
answered (GObject *source, GAsyncResult *result, gpointer data)
{
  TfSession *self = TF_SESSION (source);
  g_auto (GStrv) numbers = tf_lane_finish (result, NULL);
  if (numbers == NULL || self->draft == NULL || GPOINTER_TO_UINT (data) != self->join_serial)
    return;
  for (guint k = 0; k < G_N_ELEMENTS (self->draft_joins); k++)
    {
      g_free (self->draft_joins[k]);
      self->draft_joins[k] = numbers[k][0] != '\0' ? g_strdup (numbers[k]) : NULL;
    }
  tf_session_emit (self, TF_SIGNAL_CHOICE);
}

void
tf_session_ask_join (TfSession *self)
{
  self->join_serial++;
  for (guint k = 0; k < G_N_ELEMENTS (self->draft_joins); k++)
    g_clear_pointer (&self->draft_joins[k], g_free);
  if (self->draft == NULL || self->reader == NULL || self->frame_item == NULL)
    return;
  Question *asked = g_new0 (Question, 1);
  asked->frame = tf_frame_item_get_row (self->frame_item)->id;
  asked->person = g_strdup (self->person);
  asked->outline[0] = tf_outline_ref (self->draft);
  asked->outline[1] = self->other != NULL ? tf_outline_ref (self->other) : NULL;
  tf_lane_push (self->reader, self, self->reading, ask_in_lane, asked, question_free,
                (GDestroyNotify)g_strfreev, answered, GUINT_TO_POINTER (self->join_serial));
}

/* -- what the slip says ----------------------------------------------------------------------- */

static const char *
joined_by_hint (TfSession *self, TfRegionItem *hint)
{
  const TfRow *row = tf_region_item_get_row (hint);
  if (tf_region_item_is_carried (hint))
    return row->region;
  if (!row->is_hint)
    return NULL;
  const char *continued = tf_session_get_continued (self, hint);
  if (continued != NULL || self->joins == NULL)
    return continued;
  return g_hash_table_lookup (self->joins, &row->mark);
}

const char *
tf_session_get_joins (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), NULL);
  if (self->draft == NULL)
    return self->region != NULL && self->line->len == 0 ? joined_by_hint (self, self->region) : NULL;
  return tf_session_get_replaces (self) ? joined_by_hint (self, self->replaced) : self->draft_joins[0];
}

const char *
tf_session_get_other_joins (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), NULL);
  const char *first = tf_session_get_joins (self);
  const char *own = self->other != NULL ? self->draft_joins[1] : NULL;
  return g_strcmp0 (own, first) != 0 ? own : NULL; /* one region has one mark on a frame */
}
