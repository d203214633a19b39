/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* What one desk leaves for the next: notes that are still open, and the moment of handing over. */

#include "tf-ledger-private.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-json.h"

void
tf_region_note_free (TfRegionNote *note)
{
  if (note == NULL)
    return;
  g_free (note->number);
  g_free (note->text);
  g_free (note->person);
  g_free (note->resolver);
  g_free (note);
}

static TfTime
from_wall (gint64 ms)
{
  g_autoptr (GDateTime) at = g_date_time_new_from_unix_utc (ms / 1000);
  if (at == NULL)
    return TF_TIME_UNKNOWN;
  return tf_time_from_calendar (g_date_time_get_year (at), g_date_time_get_month (at),
                                g_date_time_get_day_of_month (at), g_date_time_get_hour (at),
                                g_date_time_get_minute (at),
                                g_date_time_get_second (at) + 0.001 * (double)(ms % 1000),
                                TF_SCALE_UTC);
}

/* The act that wrote the note as it stands has the note's clock and its subject. */
#define NOTES_SQL                                                                                  \
  "SELECT n.region, n.person, n.text, p.name, coalesce ((SELECT max (a.wall) FROM act a JOIN deed " \
  "d ON d.replica = a.replica AND d.seq = a.seq AND d.person = n.person WHERE a.clock = n.clock "  \
  "AND a.kind = 'note'), 0), r.text IS n.text, q.name, g.number FROM note n JOIN person p "        \
  "ON p.id = n.person JOIN region g ON g.id = n.region LEFT JOIN resolved r ON r.region = n.region AND r.author = n.person LEFT JOIN person " \
  "q ON q.id = r.person ORDER BY n.clock DESC, n.region"

GPtrArray *
tf_ledger_notes (TfLedger *ledger, GError **error)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  g_autoptr (GPtrArray) notes = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_region_note_free);
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, NOTES_SQL, "");
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      TfRegionNote *note = g_new0 (TfRegionNote, 1);
      note->region = sqlite3_column_int64 (query, 0);
      note->author = sqlite3_column_int64 (query, 1);
      note->text = g_strdup (tf_column_text (query, 2));
      note->person = g_strdup (tf_column_text (query, 3));
      note->written = from_wall (sqlite3_column_int64 (query, 4));
      note->resolved = sqlite3_column_int (query, 5);
      note->resolver = note->resolved ? g_strdup (tf_column_text (query, 6)) : NULL;
      note->number = g_strdup (tf_column_text (query, 7));
      g_ptr_array_add (notes, note);
    }
  return more == 0 ? g_steal_pointer (&notes) : NULL;
}

GArray *
tf_ledger_moments (TfLedger *ledger, const char *vantage, TfTime from, TfTime until, GError **error)
{
  g_return_val_if_fail (ledger != NULL && vantage != NULL, NULL);
  g_autoptr (GArray) moments = g_array_new (FALSE, FALSE, sizeof (TfMoment));
  g_autoptr (sqlite3_stmt) query = tf_query (
      ledger, error,
      "SELECT f.id, f.time, EXISTS (SELECT 1 FROM mark m WHERE m.frame = f.id AND m.live = 1) "
      "FROM frame f WHERE f.time BETWEEN ?1 AND ?2 AND f.vantage = ?3 AND f.refusal IS NULL AND "
      "f.kind IN ('disk', 'cut-out') ORDER BY f.time, f.id",
      "ddt", from.s, until.s, vantage);
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      TfMoment moment = { sqlite3_column_int64 (query, 0), { tf_column_double (query, 1) },
                          sqlite3_column_int (query, 2) };
      g_array_append_val (moments, moment);
    }
  return more == 0 ? g_steal_pointer (&moments) : NULL;
}

gint64
tf_ledger_newest (TfLedger *ledger)
{
  g_return_val_if_fail (ledger != NULL, 0);
  return tf_value (ledger, NULL, 0,
                   "SELECT id FROM frame WHERE refusal IS NULL AND time IS NOT NULL AND kind IN "
                   "('disk', 'cut-out') ORDER BY time DESC, id LIMIT 1",
                   "");
}

void
tf_region_class_free (TfRegionClass *entry)
{
  if (entry == NULL)
    return;
  g_free (entry->mw_class);
  g_free (entry->person);
  g_free (entry->evidence);
  g_free (entry);
}

GPtrArray *
tf_ledger_classes (TfLedger *ledger, GError **error)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  g_autoptr (GPtrArray) classes
      = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_region_class_free);
  g_autoptr (sqlite3_stmt) query
      = tf_query (ledger, error,
                  "SELECT c.region, c.frame, f.time, c.class, p.name, c.evidence FROM class c JOIN "
                  "frame f ON f.id = c.frame JOIN person p ON p.id = c.person ORDER BY f.time, "
                  "c.clock",
                  "");
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      TfRegionClass *entry = g_new0 (TfRegionClass, 1);
      entry->region = sqlite3_column_int64 (query, 0);
      entry->frame = sqlite3_column_int64 (query, 1);
      entry->time.s = tf_column_double (query, 2);
      entry->mw_class = g_strdup (tf_column_text (query, 3));
      entry->person = g_strdup (tf_column_text (query, 4));
      entry->evidence = g_strdup (tf_column_text (query, 5));
      g_ptr_array_add (classes, entry);
    }
  return more == 0 ? g_steal_pointer (&classes) : NULL;
}

void
tf_listing_free (TfListing *listing)
{
  if (listing == NULL)
    return;
  g_free (listing->number);
  g_free (listing->mw_class);
  g_free (listing->source);
  g_free (listing);
}

#define LISTINGS_SQL                                                                               \
  "SELECT o.region, coalesce (json_extract (o.flat, '$.class'), ''), t.source, o.time, o.lat_deg, " \
  "o.cmd_deg, o.carrington_lon_deg, json_extract (o.flat, '$.spot_area_msh'), "                    \
  "coalesce (json_extract (o.flat, '$.listed') = 'due', 0) FROM outside t JOIN outside_row o ON "  \
  "o.outside = t.id WHERE t.format = 'daily-region-summary' AND o.time BETWEEN ?1 AND ?2 "         \
  "ORDER BY o.time, o.id"

GPtrArray *
tf_ledger_listings (TfLedger *ledger, TfTime from, TfTime until, GError **error)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  g_autoptr (GPtrArray) listings = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_listing_free);
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, LISTINGS_SQL, "dd", from.s, until.s);
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      TfListing *listing = g_new0 (TfListing, 1);
      listing->number = g_strdup (tf_column_text (query, 0));
      listing->mw_class = g_strdup (tf_column_text (query, 1));
      listing->source = g_strdup (tf_column_text (query, 2));
      listing->time.s = tf_column_double (query, 3);
      listing->lat_deg = tf_column_double (query, 4);
      listing->cmd_deg = tf_column_double (query, 5);
      listing->carrington_lon_deg = tf_column_double (query, 6);
      listing->spot_area_msh = tf_column_double (query, 7);
      listing->due = sqlite3_column_int (query, 8);
      g_ptr_array_add (listings, listing);
    }
  return more == 0 ? g_steal_pointer (&listings) : NULL;
}

static char *
uid_of (TfLedger *ledger, const char *sql, gint64 key, const char *what, GError **error)
{
  char *uid = tf_text_value (ledger, error, sql, "i", key);
  if (uid == NULL && error != NULL && *error == NULL)
    g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE,
                 _ ("the ledger %s has no %s %" G_GINT64_FORMAT), ledger->path, what, key);
  return uid;
}

#define PERSON_SQL "SELECT lower (hex (uid)) FROM person WHERE id = ?1"

static gboolean
end (TfLedger *ledger, gboolean ok, GError **error)
{
  if (!ok)
    tf_ledger_rollback (ledger);
  else if ((ok = tf_ledger_commit (ledger, error)))
    tf_replica_store_state (ledger);
  return ok;
}

static gboolean
resolve (TfLedger *ledger, gint64 region, gint64 author, gint64 person, gboolean resolved,
         GError **error)
{
  g_autofree char *who = uid_of (ledger, PERSON_SQL, person, _ ("person"), error);
  g_autofree char *by = who != NULL ? uid_of (ledger, PERSON_SQL, author, _ ("person"), error) : NULL;
  g_autofree char *about
      = by != NULL ? uid_of (ledger, "SELECT lower (hex (uid)) FROM region WHERE id = ?1", region,
                             _ ("region"), error)
                   : NULL;
  if (about == NULL)
    return FALSE;
  g_autofree char *text
      = tf_text_value (ledger, error, "SELECT text FROM note WHERE region = ?1 AND person = ?2",
                       "ii", region, author);
  if (text == NULL)
    {
      if (error != NULL && *error == NULL)
        g_set_error_literal (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE,
                             _ ("that note is not there any more"));
      return FALSE;
    }
  g_autoptr (JsonBuilder) body = json_builder_new ();
  json_builder_begin_object (body);
  tf_json_string (body, "person", who);
  tf_json_string (body, "region", about);
  tf_json_string (body, "author", by);
  tf_json_string (body, "text", resolved ? text : "");
  json_builder_end_object (body);
  g_autofree char *subject = tf_subject ('r', about, by, NULL);
  return tf_act_append (ledger, "resolve", subject, body, error);
}

gboolean
tf_ledger_resolve (TfLedger *ledger, gint64 region, gint64 author, gint64 person, gboolean resolved,
                   GError **error)
{
  g_return_val_if_fail (ledger != NULL, FALSE);
  return tf_ledger_begin (ledger, error)
         && end (ledger, resolve (ledger, region, author, person, resolved, error), error);
}

static gboolean
hand_over (TfLedger *ledger, gint64 person, TfTime time, GError **error)
{
  g_autofree char *who = uid_of (ledger, PERSON_SQL, person, _ ("person"), error);
  g_autofree char *uid = tf_uuid7 (ledger->now (ledger->now_data));
  if (who == NULL)
    return FALSE;
  g_autoptr (JsonBuilder) body = json_builder_new ();
  json_builder_begin_object (body);
  tf_json_string (body, "person", who);
  tf_json_string (body, "shift", uid);
  tf_json_number (body, "time", time.s);
  json_builder_end_object (body);
  g_autofree char *subject = tf_subject ('s', uid, NULL);
  return tf_act_append (ledger, "shift", subject, body, error);
}

gboolean
tf_ledger_hand_over (TfLedger *ledger, gint64 person, TfTime time, GError **error)
{
  g_return_val_if_fail (ledger != NULL, FALSE);
  return tf_ledger_begin (ledger, error)
         && end (ledger, hand_over (ledger, person, time, error), error);
}

TfTime
tf_ledger_last_shift (TfLedger *ledger, char **person)
{
  g_return_val_if_fail (ledger != NULL, TF_TIME_UNKNOWN);
  g_autoptr (sqlite3_stmt) query
      = tf_query (ledger, NULL,
                  "SELECT a.wall, p.name FROM shift s JOIN person p ON p.id = s.person JOIN act a ON "
                  "a.clock = s.clock AND a.kind = 'shift' ORDER BY s.clock DESC LIMIT 1",
                  "");
  if (query == NULL || tf_query_step (ledger, query, NULL) <= 0)
    return TF_TIME_UNKNOWN;
  if (person != NULL)
    *person = g_strdup (tf_column_text (query, 1));
  return from_wall (sqlite3_column_int64 (query, 0));
}
