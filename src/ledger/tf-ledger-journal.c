/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* The journal: the log as people read it. */

#include "tf-ledger-private.h"

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

static TfJournalEntry *
read_entry (sqlite3_stmt *query)
{
  TfJournalEntry *entry = g_new0 (TfJournalEntry, 1);
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
  return entry;
}

void
tf_journal_entry_free (TfJournalEntry *entry)
{
  if (entry == NULL)
    return;
  g_free (entry->replica);
  g_free (entry->kind);
  g_free (entry->person);
  g_free (entry->subject);
  g_free (entry);
}

GPtrArray *
tf_ledger_journal (TfLedger *ledger, guint limit, GError **error)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  g_autoptr (GPtrArray) entries
      = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_journal_entry_free);
  g_autoptr (sqlite3_stmt) query = tf_query (
      ledger, error,
      "SELECT r.id, a.seq, a.wall, a.kind, p.name, a.subject, coalesce (d.undone, 0) FROM act a"
      " JOIN replica r ON r.no = a.replica LEFT JOIN deed d ON d.replica = a.replica AND d.seq = "
      "a.seq"
      " LEFT JOIN person p ON p.id = d.person ORDER BY a.clock DESC, r.id DESC, a.seq DESC LIMIT "
      "?1",
      "i", (gint64)limit);
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    g_ptr_array_add (entries, read_entry (query));
  return more == 0 ? g_steal_pointer (&entries) : NULL;
}
