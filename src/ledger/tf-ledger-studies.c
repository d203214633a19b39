/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Acts "study" and "edition" and their projections. Both are texts under a name: the same functions
 * serve both, and the table has the name of the kind of act. */

#include "tf-ledger-studies.h"

#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-json.h"
#include "tf-ledger-private.h"

void
tf_named_free (TfNamed *named)
{
  if (named == NULL)
    return;
  char *texts[] = { named->name, named->study, named->checksum, named->text, named->person };
  for (guint k = 0; k < G_N_ELEMENTS (texts); k++)
    g_free (texts[k]);
  g_free (named);
}

/* -- projections ------------------------------------------------------------------------------- */

static gboolean
damaged (TfLedger *ledger, const char *kind, GError **error)
{
  g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_DAMAGED,
               _ ("the ledger %s: an act of kind %s is incomplete; run check, or go back to a "
                  "backup"),
               ledger->path, kind);
  return FALSE;
}

gboolean
tf_named_put (TfLedger *ledger, const TfAct *act, GError **error)
{
  gboolean study = strcmp (act->kind, "study") == 0;
  const char *name = tf_json_member_string (act->body, "name");
  const char *text = tf_json_member_string (act->body, "text");
  const char *of = tf_json_member_string (act->body, "study");
  gint64 version = tf_json_member_int (act->body, "version", 0);
  if (name == NULL || text == NULL || (!study && of == NULL))
    return damaged (ledger, act->kind, error);
  g_autofree char *checksum = tf_content_id ("tiltfield named text 1", text, NULL);
  if (study)
    return tf_run (ledger, error,
                   "INSERT OR IGNORE INTO study (uid, name, version, checksum, text, replica, seq,"
                   " live) VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7, 0)",
                   "htihtii", act->subject, name, version, checksum, text, act->replica, act->seq);
  return tf_run (ledger, error,
                 "INSERT OR IGNORE INTO edition (uid, name, study, study_version, checksum, text,"
                 " replica, seq, live) VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8, 0)",
                 "httihtii", act->subject, name, of, version, checksum, text, act->replica,
                 act->seq);
}

gboolean
tf_named_project (TfLedger *ledger, const char *table, const char *subject, GError **error)
{
  gint64 replica = 0, seq = 0;
  if (!tf_project_current (ledger, subject, &replica, &seq, error))
    return FALSE;
  return tf_run (ledger, error,
                 strcmp (table, "study") == 0
                     ? "UPDATE study SET live = (replica = ?2 AND seq = ?3) WHERE uid = ?1"
                     : "UPDATE edition SET live = (replica = ?2 AND seq = ?3) WHERE uid = ?1",
                 "hii", subject, replica, seq);
}

/* -- deeds ------------------------------------------------------------------------------------- */

static char *
subject_of (const char *kind, const char *name)
{
  g_autofree char *hash = tf_content_id ("tiltfield name 1", kind, name, NULL);
  g_autofree char *uid = g_strndup (hash, TF_ID_HEX);
  return tf_subject (*kind == 's' ? 's' : 'e', uid, NULL);
}

static gboolean
append (TfLedger *ledger, const char *kind, const char *name, const char *study, guint version,
        const char *text, gint64 person, GError **error)
{
  g_autofree char *uid = tf_text_value (
      ledger, error, "SELECT lower (hex (uid)) FROM person WHERE id = ?1", "i", person);
  if (uid == NULL)
    {
      if (error != NULL && *error == NULL)
        g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE,
                     _ ("the ledger %s has no such person; say who keeps it"), ledger->path);
      return FALSE;
    }
  g_autofree char *subject = subject_of (kind, name);
  g_autoptr (JsonBuilder) body = json_builder_new ();
  json_builder_begin_object (body);
  tf_json_string (body, "person", uid);
  tf_json_string (body, "name", name);
  if (study != NULL)
    tf_json_string (body, "study", study);
  tf_json_int (body, "version", version);
  tf_json_string (body, "text", text);
  json_builder_end_object (body);
  return tf_act_append (ledger, kind, subject, body, error);
}

static gboolean
end_deed (TfLedger *ledger, gboolean ok, GError **error)
{
  if (!ok)
    tf_ledger_rollback (ledger);
  else if ((ok = tf_ledger_commit (ledger, error)))
    tf_replica_store_state (ledger);
  return ok;
}

guint
tf_ledger_keep_study (TfLedger *ledger, const char *name, const char *text, gint64 person,
                      GError **error)
{
  g_return_val_if_fail (ledger != NULL && name != NULL && text != NULL, 0);
  if (!tf_ledger_begin (ledger, error))
    return 0;
  g_autofree char *subject = subject_of ("study", name);
  gint64 same = tf_value (
      ledger, NULL, 0, "SELECT version FROM study WHERE uid = ?1 AND live = 1 AND text = ?2", "ht",
      subject, text);
  gint64 version
      = 1 + tf_value (ledger, NULL, 0, "SELECT max (version) FROM study WHERE uid = ?1", "h", subject);
  if (same != 0) /* nothing to write; what is done as one with it goes on */
    return end_deed (ledger, TRUE, error) ? (guint)same : 0;
  gboolean ok = append (ledger, "study", name, NULL, (guint)version, text, person, error);
  return end_deed (ledger, ok, error) ? (guint)version : 0;
}

gboolean
tf_ledger_keep_edition (TfLedger *ledger, const char *name, const char *study, guint study_version,
                        const char *text, gint64 person, GError **error)
{
  g_return_val_if_fail (ledger != NULL && name != NULL && study != NULL && text != NULL, FALSE);
  if (!tf_ledger_begin (ledger, error))
    return FALSE;
  if (tf_value (ledger, NULL, 0, "SELECT 1 FROM edition WHERE name = ?1 AND live = 1", "t", name)
      != 0)
    {
      tf_ledger_rollback (ledger);
      g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE,
                   _ ("the ledger %s has an edition “%s” already, and an edition is never changed; "
                      "give this one another name"),
                   ledger->path, name);
      return FALSE;
    }
  return end_deed (ledger,
                   append (ledger, "edition", name, study, study_version, text, person, error),
                   error);
}

/* -- reading ----------------------------------------------------------------------------------- */

#define WHO                                                                                        \
  "(SELECT p.name FROM deed d JOIN person p ON p.id = d.person WHERE d.replica = t.replica AND "   \
  "d.seq = t.seq), (SELECT a.wall FROM act a WHERE a.replica = t.replica AND a.seq = t.seq)"
#define STUDIES_SQL                                                                                \
  "SELECT t.name, t.version, NULL, lower (hex (t.checksum)), t.text, " WHO " FROM study t "        \
  "WHERE t.live = 1 AND t.text <> '' AND (?1 = '' OR t.name = ?1) ORDER BY t.name"
#define EDITIONS_SQL                                                                               \
  "SELECT t.name, t.study_version, t.study, lower (hex (t.checksum)), t.text, " WHO                \
  " FROM edition t WHERE t.live = 1 AND (?1 = '' OR t.name = ?1) ORDER BY t.id"
#define EDITION_NAMES_SQL                                                                          \
  "SELECT t.name, t.study_version, t.study, lower (hex (t.checksum)), '', " WHO                    \
  " FROM edition t WHERE t.live = 1 AND ?1 = '' ORDER BY t.id"

static TfNamed *
read_named (sqlite3_stmt *query)
{
  TfNamed *named = g_new0 (TfNamed, 1);
  named->name = g_strdup (tf_column_text (query, 0));
  named->version = (guint)sqlite3_column_int (query, 1);
  if (sqlite3_column_type (query, 2) != SQLITE_NULL)
    named->study = g_strdup (tf_column_text (query, 2));
  named->checksum = g_strdup (tf_column_text (query, 3));
  named->text = g_strdup (tf_column_text (query, 4));
  named->person = g_strdup (tf_column_text (query, 5));
  named->wall = tf_time_from_jd (2440587.5, (double)sqlite3_column_int64 (query, 6) / 86400000.0,
                                 TF_SCALE_UTC); /* ms since 1970 */
  return named;
}

static GPtrArray *
read_all (TfLedger *ledger, const char *sql, const char *name, GError **error)
{
  g_autoptr (GPtrArray) all = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_named_free);
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, sql, "t", name);
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    g_ptr_array_add (all, read_named (query));
  return more == 0 ? g_steal_pointer (&all) : NULL;
}

static TfNamed *
read_one (TfLedger *ledger, const char *sql, const char *name, GError **error)
{
  g_autoptr (GPtrArray) all = *name != '\0' ? read_all (ledger, sql, name, error) : NULL;
  return all != NULL && all->len > 0 ? g_ptr_array_steal_index (all, all->len - 1) : NULL;
}

TfNamed *
tf_ledger_study (TfLedger *ledger, const char *name, GError **error)
{
  g_return_val_if_fail (ledger != NULL && name != NULL, NULL);
  return read_one (ledger, STUDIES_SQL, name, error);
}

GPtrArray *
tf_ledger_studies (TfLedger *ledger, GError **error)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  return read_all (ledger, STUDIES_SQL, "", error);
}

TfNamed *
tf_ledger_edition (TfLedger *ledger, const char *name, GError **error)
{
  g_return_val_if_fail (ledger != NULL && name != NULL, NULL);
  return read_one (ledger, EDITIONS_SQL, name, error);
}

GPtrArray *
tf_ledger_editions (TfLedger *ledger, GError **error)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  return read_all (ledger, EDITIONS_SQL, "", error);
}

GPtrArray *
tf_ledger_edition_names (TfLedger *ledger, GError **error)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  return read_all (ledger, EDITION_NAMES_SQL, "", error);
}
