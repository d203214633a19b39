/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Undo and redo are acts that name the act they take back or bring again. A person walks back
 * through the deeds this replica recorded for them, as far as there are any, and forward again
 * until a new deed is done. */

#include "tf-ledger-private.h"

#include <glib/gi18n-lib.h>

#include "tf-json.h"

#define DEEDS                                                                                      \
  "FROM deed d JOIN act a ON a.replica = d.replica AND a.seq = d.seq"                              \
  " WHERE d.person = ?1 AND d.replica = ?2 AND a.kind IN ('keep', 'withdraw', 'drop', 'class', "   \
  "'note', 'resolve', 'geometry', 'divide', 'study', 'edition', 'link', 'cut')"
#define LAST_SQL "SELECT d.seq " DEEDS " AND d.undone = 0 ORDER BY d.seq DESC LIMIT 1"
#define NEXT_SQL "SELECT d.seq " DEEDS " AND d.undone = 1 ORDER BY d.seq LIMIT 1"

static gint64
find_deed (TfLedger *ledger, const char *sql, gint64 person, GError **error)
{
  return tf_value (ledger, error, 0, sql, "ii", person, ledger->replica);
}

static gboolean
append (TfLedger *ledger, const char *kind, gint64 seq, gint64 person, GError **error)
{
  g_autofree char *subject = tf_text_value (
      ledger, error, "SELECT lower (hex (subject)) FROM act WHERE replica = ?1 AND seq = ?2", "ii",
      ledger->replica, seq);
  g_autofree char *uid = tf_text_value (
      ledger, error, "SELECT lower (hex (uid)) FROM person WHERE id = ?1", "i", person);
  if (subject == NULL || uid == NULL)
    return FALSE;
  g_autoptr (JsonBuilder) body = json_builder_new ();
  json_builder_begin_object (body);
  tf_json_string (body, "person", uid);
  tf_json_string (body, "replica", ledger->replica_id);
  tf_json_int (body, "act", seq);
  json_builder_end_object (body);
  return tf_act_append (ledger, kind, subject, body, error);
}

static gboolean
walk (TfLedger *ledger, const char *kind, const char *sql, const char *nothing, gint64 person,
      char **what, GError **error)
{
  if (!tf_ledger_begin (ledger, error))
    return FALSE;
  GError *problem = NULL;
  gint64 seq = find_deed (ledger, sql, person, &problem);
  if (seq == 0 && problem == NULL)
    g_set_error_literal (&problem, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE, nothing);
  if (problem != NULL || !append (ledger, kind, seq, person, &problem))
    {
      tf_ledger_rollback (ledger);
      g_propagate_error (error, problem);
      return FALSE;
    }
  if (!tf_ledger_commit (ledger, error))
    return FALSE;
  tf_replica_store_state (ledger);
  if (what != NULL)
    *what = tf_text_value (ledger, NULL, "SELECT kind FROM act WHERE replica = ?1 AND seq = ?2",
                           "ii", ledger->replica, seq);
  return TRUE;
}

gboolean
tf_ledger_undo (TfLedger *ledger, gint64 person, char **what, GError **error)
{
  g_return_val_if_fail (ledger != NULL, FALSE);
  return walk (ledger, "undo", LAST_SQL, _ ("there is nothing to undo"), person, what, error);
}

gboolean
tf_ledger_redo (TfLedger *ledger, gint64 person, char **what, GError **error)
{
  g_return_val_if_fail (ledger != NULL, FALSE);
  return walk (ledger, "redo", NEXT_SQL, _ ("there is nothing to redo"), person, what, error);
}

gboolean
tf_ledger_can_undo (TfLedger *ledger, gint64 person)
{
  g_return_val_if_fail (ledger != NULL, FALSE);
  return ledger->read_only == NULL && find_deed (ledger, LAST_SQL, person, NULL) != 0;
}

gboolean
tf_ledger_can_redo (TfLedger *ledger, gint64 person)
{
  g_return_val_if_fail (ledger != NULL, FALSE);
  return ledger->read_only == NULL && find_deed (ledger, NEXT_SQL, person, NULL) != 0;
}
