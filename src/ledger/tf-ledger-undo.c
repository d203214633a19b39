/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Undo and redo are acts that name the act they take back or bring again. A person walks back
 * through the deeds this replica recorded for them, as far as there are any, and forward again
 * until a new deed is done. Deeds done as one (a bundle) go and come together, in one transaction. */

#include "tf-ledger-private.h"

#include <glib/gi18n-lib.h>

#include "tf-json.h"

#define DEEDS                                                                                      \
  "FROM deed d JOIN act a ON a.replica = d.replica AND a.seq = d.seq"                              \
  " WHERE d.person = ?1 AND d.replica = ?2 AND a.kind IN ('keep', 'withdraw', 'drop', 'class', "   \
  "'note', 'resolve', 'geometry', 'divide', 'study', 'edition', 'link', 'cut', "   \
  "'label', 'external', 'scale')"

typedef struct
{
  const char *kind;
  const char *next;     /* the deed to begin with */
  const char *together; /* all that go with it, in their order */
  const char *nothing;
} Way;

static const Way ways[] = {
  { "undo", "SELECT d.seq " DEEDS " AND d.undone = 0 ORDER BY d.seq DESC LIMIT 1",
    "SELECT seq FROM deed WHERE person = ?1 AND replica = ?2 AND undone = 0 AND bundle = ?3 ORDER "
    "BY seq DESC",
    N_ ("there is nothing to undo") },
  { "redo", "SELECT d.seq " DEEDS " AND d.undone = 1 ORDER BY d.seq LIMIT 1",
    "SELECT seq FROM deed WHERE person = ?1 AND replica = ?2 AND undone = 1 AND bundle = ?3 ORDER "
    "BY seq",
    N_ ("there is nothing to redo") },
};

static gint64
find_deed (TfLedger *ledger, const Way *way, gint64 person, GError **error)
{
  return tf_value (ledger, error, 0, way->next, "ii", person, ledger->replica);
}

/* The deed and those done as one with it. */
static GArray *
list_together (TfLedger *ledger, const Way *way, gint64 seq, gint64 person, GError **error)
{
  g_autoptr (GArray) list = g_array_new (FALSE, FALSE, sizeof (gint64));
  gint64 bundle = tf_value (ledger, NULL, 0,
                            "SELECT bundle FROM deed WHERE replica = ?1 AND seq = ?2", "ii",
                            ledger->replica, seq);
  if (bundle == 0) /* of a ledger made before there were bundles */
    return g_array_append_val (list, seq), g_steal_pointer (&list);
  g_autoptr (sqlite3_stmt) query
      = tf_query (ledger, error, way->together, "iii", person, ledger->replica, bundle);
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      gint64 one = sqlite3_column_int64 (query, 0);
      g_array_append_val (list, one);
    }
  return more == 0 ? g_steal_pointer (&list) : NULL;
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
append_all (TfLedger *ledger, const Way *way, gint64 seq, gint64 person, GError **error)
{
  g_autoptr (GArray) list = list_together (ledger, way, seq, person, error);
  for (guint k = 0; list != NULL && k < list->len; k++)
    if (!append (ledger, way->kind, g_array_index (list, gint64, k), person, error))
      return FALSE;
  return list != NULL;
}

/* What was undone, and where. */
static void
tell (TfLedger *ledger, gint64 seq, TfUndone *undone)
{
  TfActAbout about = { 0 };
  tf_act_about (ledger, ledger->replica, seq, &about);
  undone->what = g_steal_pointer (&about.what);
  undone->region = g_steal_pointer (&about.region);
  undone->frame = about.frame;
  tf_act_about_clear (&about);
}

static gboolean
walk (TfLedger *ledger, const Way *way, gint64 person, TfUndone *undone, GError **error)
{
  if (!tf_ledger_begin (ledger, error))
    return FALSE;
  GError *problem = NULL;
  gint64 seq = find_deed (ledger, way, person, &problem);
  if (seq == 0 && problem == NULL)
    g_set_error_literal (&problem, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE, _ (way->nothing));
  if (problem != NULL || !append_all (ledger, way, seq, person, &problem))
    {
      tf_ledger_rollback (ledger);
      g_propagate_error (error, problem);
      return FALSE;
    }
  if (!tf_ledger_commit (ledger, error))
    return FALSE;
  tf_replica_store_state (ledger);
  if (undone != NULL)
    tell (ledger, seq, undone);
  return TRUE;
}

void
tf_undone_clear (TfUndone *undone)
{
  g_clear_pointer (&undone->what, g_free);
  g_clear_pointer (&undone->region, g_free);
  undone->frame = 0;
}

gboolean
tf_ledger_undo (TfLedger *ledger, gint64 person, TfUndone *undone, GError **error)
{
  g_return_val_if_fail (ledger != NULL, FALSE);
  return walk (ledger, &ways[0], person, undone, error);
}

gboolean
tf_ledger_redo (TfLedger *ledger, gint64 person, TfUndone *undone, GError **error)
{
  g_return_val_if_fail (ledger != NULL, FALSE);
  return walk (ledger, &ways[1], person, undone, error);
}

gboolean
tf_ledger_can_undo (TfLedger *ledger, gint64 person)
{
  g_return_val_if_fail (ledger != NULL, FALSE);
  return ledger->read_only == NULL && find_deed (ledger, &ways[0], person, NULL) != 0;
}

gboolean
tf_ledger_can_redo (TfLedger *ledger, gint64 person)
{
  g_return_val_if_fail (ledger != NULL, FALSE);
  return ledger->read_only == NULL && find_deed (ledger, &ways[1], person, NULL) != 0;
}
