/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* The journal: the log as people read it. */

#include "tf-ledger-private.h"

#include <math.h>
#include <string.h>

#include "tf-json.h"

/* 1970-01-01T00:00:00Z as a calendar date, then the wall clock's own seconds: UTC as that machine
 * told it. */
static TfTime
wall_time (gint64 ms)
{
  g_autoptr (GDateTime) date = g_date_time_new_from_unix_utc (ms / 1000);
  if (date == NULL)
    return TF_TIME_UNKNOWN;
  return tf_time_from_calendar (g_date_time_get_year (date), g_date_time_get_month (date),
                                g_date_time_get_day_of_month (date), g_date_time_get_hour (date),
                                g_date_time_get_minute (date),
                                g_date_time_get_second (date) + (double)(ms % 1000) / 1000,
                                TF_SCALE_UTC);
}

/* -- what an act is about
 * ---------------------------------------------------------------------------- */
static char *
member (JsonObject *body, const char *key)
{
  const char *text = body != NULL ? tf_json_member_string (body, key) : NULL;
  return g_strdup (text != NULL ? text : "");
}

static gint64
frame_of (TfLedger *ledger, JsonObject *body)
{
  g_autofree char *frame = member (body, "frame"), *hint = member (body, "hint");
  if (strlen (frame) == TF_CID_HEX)
    return tf_value (ledger, NULL, 0, "SELECT id FROM frame WHERE cid = ?1", "h", frame);
  if (strlen (hint) == TF_CID_HEX)
    return tf_value (ledger, NULL, 0, "SELECT frame FROM hint WHERE cid = ?1", "h", hint);
  return 0;
}

static JsonNode *
body_of (TfLedger *ledger, gint64 replica, gint64 seq, char **kind)
{
  *kind = tf_text_value (ledger, NULL, "SELECT kind FROM act WHERE replica = ?1 AND seq = ?2", "ii",
                         replica, seq);
  g_autofree char *text = tf_text_value (
      ledger, NULL, "SELECT CAST (body AS TEXT) FROM act WHERE replica = ?1 AND seq = ?2", "ii",
      replica, seq);
  g_autoptr (JsonNode) root = text != NULL ? json_from_string (text, NULL) : NULL;
  return root != NULL && JSON_NODE_HOLDS_OBJECT (root) ? g_steal_pointer (&root) : NULL;
}

static char *
text_of (JsonObject *body)
{
  static const char *const keys[] = { "text", "class", "name", "reason" };
  for (guint k = 0; k < G_N_ELEMENTS (keys); k++)
    {
      g_autofree char *text = member (body, keys[k]);
      if (text[0] != '\0')
        return g_steal_pointer (&text);
    }
  return g_strdup ("");
}

/* A link or cut is about its later sighting, and the region either of its marks has. */
static void
fill_tie (TfLedger *ledger, JsonObject *body, TfActAbout *about)
{
  g_autofree char *a = member (body, "a"), *b = member (body, "b");
  const char *const ids[] = { a, b };
  double latest = -HUGE_VAL;
  for (guint k = 0; k < G_N_ELEMENTS (ids); k++)
    {
      gboolean hint = strlen (ids[k]) == TF_CID_HEX;
      g_autoptr (sqlite3_stmt) query = tf_query (
          ledger, NULL,
          hint ? "SELECT f.id, coalesce (f.time, 0), '' FROM hint h JOIN frame f ON f.id = h.frame WHERE h.cid = ?1"
               : "SELECT f.id, coalesce (f.time, 0), g.number FROM mark m JOIN frame f ON f.id = m.frame JOIN region g ON g.id = m.region WHERE m.uid = ?1",
          "h", ids[k]);
      if (query == NULL || tf_query_step (ledger, query, NULL) <= 0)
        continue;
      if (sqlite3_column_double (query, 1) > latest)
        {
          latest = sqlite3_column_double (query, 1);
          about->frame = sqlite3_column_int64 (query, 0);
        }
      if (about->region == NULL && !hint)
        about->region = g_strdup (tf_column_text (query, 2));
    }
}

static void
fill_about (TfLedger *ledger, JsonObject *body, TfActAbout *about)
{
  g_autofree char *region = member (body, "region"), *tied = member (body, "b");
  about->as = member (body, "as");
  about->text = text_of (body);
  about->frame = frame_of (ledger, body);
  if (strlen (region) == TF_ID_HEX)
    about->region
        = tf_text_value (ledger, NULL, "SELECT number FROM region WHERE uid = ?1", "h", region);
  if (*tied != '\0')
    fill_tie (ledger, body, about);
  if (about->region == NULL)
    about->region = g_strdup ("");
  if (about->frame != 0)
    about->frame_time = tf_text_value (ledger, NULL, "SELECT time_text FROM frame WHERE id = ?1",
                                       "i", about->frame);
  if (about->frame_time == NULL)
    about->frame_time = g_strdup ("");
}

/* An undo is about what it undoes. */
void
tf_act_about (TfLedger *ledger, gint64 replica, gint64 seq, TfActAbout *about)
{
  g_autofree char *kind = NULL, *of = NULL;
  g_autoptr (JsonNode) root = body_of (ledger, replica, seq, &kind);
  JsonObject *body = root != NULL ? json_node_get_object (root) : NULL;
  if (g_strcmp0 (kind, "undo") == 0 || g_strcmp0 (kind, "redo") == 0)
    {
      g_autofree char *id = member (body, "replica");
      gint64 of_replica
          = tf_value (ledger, NULL, 0, "SELECT no FROM replica WHERE id = ?1", "h", id);
      g_autoptr (JsonNode) undone = body_of (
          ledger, of_replica, body != NULL ? tf_json_member_int (body, "act", 0) : 0, &of);
      fill_about (ledger, undone != NULL ? json_node_get_object (undone) : NULL, about);
    }
  else
    fill_about (ledger, body, about);
  about->of = g_strdup (of != NULL ? of : "");
  about->what = g_strdup (about->as[0] != '\0' ? about->as : kind != NULL ? kind : "");
}

void
tf_act_about_clear (TfActAbout *about)
{
  g_free (about->what);
  g_free (about->as);
  g_free (about->of);
  g_free (about->region);
  g_free (about->frame_time);
  g_free (about->text);
  *about = (TfActAbout){ 0 };
}

/* -- entries
 * ----------------------------------------------------------------------------------------- */
static TfJournalEntry *
read_entry (TfLedger *ledger, sqlite3_stmt *query)
{
  TfJournalEntry *entry = g_new0 (TfJournalEntry, 1);
  TfActAbout about = { 0 };
  g_autofree char *id = tf_column_dup_hex (query, 0);
  gsize n = strlen (id);
  entry->replica = g_strdup (n > 8 ? id + n - 8 : id);
  entry->seq = sqlite3_column_int64 (query, 1);
  entry->wall = wall_time (sqlite3_column_int64 (query, 2));
  entry->kind = g_strdup (tf_column_text (query, 3));
  entry->person = g_strdup (tf_column_text (query, 4));
  g_autofree char *subject = tf_column_dup_hex (query, 5);
  entry->subject = g_strdup (strlen (subject) > 2 ? subject + 2 : subject);
  entry->undone = sqlite3_column_int (query, 6) > 0;
  tf_act_about (ledger, sqlite3_column_int64 (query, 7), entry->seq, &about);
  entry->as = g_steal_pointer (&about.as);
  entry->of = g_steal_pointer (&about.of);
  entry->region = g_steal_pointer (&about.region);
  entry->frame_time = g_steal_pointer (&about.frame_time);
  entry->text = g_steal_pointer (&about.text);
  tf_act_about_clear (&about);
  return entry;
}

void
tf_journal_entry_free (TfJournalEntry *entry)
{
  if (entry == NULL)
    return;
  char *texts[] = { entry->replica, entry->kind,       entry->person, entry->subject, entry->as,
                    entry->of,      entry->frame_time, entry->region, entry->text };
  for (guint k = 0; k < G_N_ELEMENTS (texts); k++)
    g_free (texts[k]);
  g_free (entry);
}

/* ?2: the region's key, 0 for all. Subjects begin with a tag and, but for hints and persons, the
 * region's id. */
#define JOURNAL_SQL                                                                                \
  "SELECT r.id, a.seq, a.wall, a.kind, p.name, a.subject, coalesce (d.undone, 0), a.replica FROM " \
  "act a JOIN replica r ON r.no = a.replica LEFT JOIN deed d ON d.replica = a.replica AND d.seq "  \
  "= a.seq LEFT JOIN person p ON p.id = d.person WHERE ?2 = 0 OR substr (a.subject, 2, 16) = "     \
  "(SELECT g.uid FROM region g WHERE g.id = ?2) ORDER BY a.clock DESC, r.id DESC, a.seq DESC "     \
  "LIMIT ?1"

GPtrArray *
tf_ledger_journal_of (TfLedger *ledger, gint64 region, guint limit, GError **error)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  g_autoptr (GPtrArray) entries
      = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_journal_entry_free);
  g_autoptr (sqlite3_stmt) query
      = tf_query (ledger, error, JOURNAL_SQL, "ii", (gint64)limit, region);
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    g_ptr_array_add (entries, read_entry (ledger, query));
  return more == 0 ? g_steal_pointer (&entries) : NULL;
}

GPtrArray *
tf_ledger_journal (TfLedger *ledger, guint limit, GError **error)
{
  return tf_ledger_journal_of (ledger, 0, limit, error);
}
