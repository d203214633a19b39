/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Persons. A person's id is made from the name, so that the desk "north" is one person in every
 * ledger it works in; whether two people share a name is for keys to say, once parcels are signed. */

#include "tf-ledger-private.h"

#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-json.h"

static gboolean
append_person (TfLedger *ledger, const char *uid, const char *name, GError **error)
{
  g_autoptr (JsonBuilder) body = json_builder_new ();
  json_builder_begin_object (body);
  tf_json_string (body, "person", uid);
  tf_json_string (body, "name", name);
  json_builder_end_object (body);
  g_autofree char *subject = tf_subject ('p', uid, NULL);
  return tf_act_append (ledger, "person", subject, body, error);
}

gint64
tf_ledger_person (TfLedger *ledger, const char *name, GError **error)
{
  g_return_val_if_fail (ledger != NULL && name != NULL, 0);
  g_autofree char *clean
      = g_strstrip (g_utf8_normalize (name, -1, G_NORMALIZE_NFC) ?: g_strdup (""));
  if (*clean == '\0')
    {
      g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE,
                   _ ("a person needs a name; say who judges"));
      return 0;
    }
  g_autofree char *hash = tf_content_id ("tiltfield person 1", clean, NULL);
  g_autofree char *uid = g_strndup (hash, TF_ID_HEX);
  gint64 id = tf_value (ledger, NULL, 0, "SELECT id FROM person WHERE uid = ?1", "h", uid);
  if (id != 0)
    return id;
  if (!tf_ledger_begin (ledger, error))
    return 0;
  if (tf_value (ledger, NULL, 0, "SELECT id FROM person WHERE uid = ?1", "h", uid) == 0
      && !append_person (ledger, uid, clean, error))
    {
      tf_ledger_rollback (ledger);
      return 0;
    }
  if (!tf_ledger_commit (ledger, error))
    return 0;
  tf_replica_store_state (ledger);
  return tf_value (ledger, error, 0, "SELECT id FROM person WHERE uid = ?1", "h", uid);
}

char **
tf_ledger_dup_persons (TfLedger *ledger)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  g_autoptr (GPtrArray) names = g_ptr_array_new ();
  g_autoptr (sqlite3_stmt) query
      = tf_query (ledger, NULL, "SELECT name FROM person ORDER BY id", "");
  while (query != NULL && tf_query_step (ledger, query, NULL) > 0)
    g_ptr_array_add (names, g_strdup (tf_column_text (query, 0)));
  g_ptr_array_add (names, NULL);
  return (char **)g_ptr_array_free (g_steal_pointer (&names), FALSE);
}
