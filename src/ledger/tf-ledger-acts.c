/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* The log of deeds. An act is never changed and never removed; (replica, seq) has no gaps; its
 * hash covers all of it and the hash before it in its replica. */

#include "tf-ledger-private.h"

#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-json.h"

#define NO_HASH "0000000000000000000000000000000000000000000000000000000000000000"

char *
tf_subject (char tag, ...)
{
  GString *subject = g_string_new (NULL);
  g_string_append_printf (subject, "%02x", (guint)tag);
  va_list ap;
  va_start (ap, tag);
  const char *id;
  while ((id = va_arg (ap, const char *)) != NULL)
    g_string_append (subject, id);
  va_end (ap);
  return g_string_free (subject, FALSE);
}

char *
tf_act_hash (const char *before, const char *replica, gint64 seq, gint64 clock, gint64 wall,
             const char *kind, const char *subject, const void *body, gsize n_body,
             const char *after)
{
  TfDigest digest;
  tf_digest_begin (&digest, "tiltfield act 1");
  tf_digest_add_text (&digest, before);
  tf_digest_add_text (&digest, replica);
  tf_digest_add_int (&digest, seq);
  tf_digest_add_int (&digest, clock);
  tf_digest_add_int (&digest, wall);
  tf_digest_add_text (&digest, kind);
  tf_digest_add_text (&digest, subject);
  tf_digest_add (&digest, body, n_body);
  tf_digest_add_text (&digest, after);
  return tf_digest_end (&digest);
}

char *
tf_act_dup_after (TfLedger *ledger, gint64 replica, gint64 seq, GError **error)
{
  g_autoptr (sqlite3_stmt) query = tf_query (
      ledger, error,
      "SELECT lower (hex (r.id)), x.p_seq FROM after x JOIN replica r ON r.no = x.p_replica"
      " WHERE x.replica = ?1 AND x.seq = ?2 ORDER BY r.id, x.p_seq",
      "ii", replica, seq);
  if (query == NULL)
    return NULL;
  g_autoptr (GString) text = g_string_new (NULL);
  int more;
  while ((more = tf_query_step (ledger, query, error)) > 0)
    g_string_append_printf (text, "%s:%" G_GINT64_FORMAT " ", tf_column_text (query, 0),
                            (gint64)sqlite3_column_int64 (query, 1));
  return more == 0 ? g_string_free (g_steal_pointer (&text), FALSE) : NULL;
}

/* The heads of the subject: what this ledger holds of it that nothing replaces yet. */
#define HEADS_SQL                                                                                  \
  "INSERT INTO after (replica, seq, p_replica, p_seq) SELECT ?1, ?2, a.replica, a.seq FROM act a " \
  "WHERE a.subject = ?3"                                                                           \
  " AND NOT (a.replica = ?1 AND a.seq = ?2) AND NOT EXISTS"                                        \
  " (SELECT 1 FROM after x WHERE x.p_replica = a.replica AND x.p_seq = a.seq)"

#define ACT_SQL                                                                                    \
  "INSERT INTO act (replica, seq, clock, wall, kind, subject, body, before, hash) VALUES (?1, "    \
  "?2, ?3, ?4, ?5, ?6, ?7, ?8,"                                                                    \
  " zeroblob (32))"

static gboolean
write_act (TfLedger *ledger, TfAct *act, gint64 wall, const char *body, GError **error)
{
  g_autofree char *before = tf_text_value (
      ledger, NULL, "SELECT lower (hex (hash)) FROM act WHERE replica = ?1 AND seq = ?2", "ii",
      act->replica, act->seq - 1);
  if (before == NULL)
    before = g_strdup (NO_HASH);
  gsize n = strlen (body);
  if (!tf_run (ledger, error, ACT_SQL, "iiiithbh", act->replica, act->seq, act->clock, wall,
               act->kind, act->subject, body, n, before)
      || !tf_run (ledger, error, HEADS_SQL, "iih", act->replica, act->seq, act->subject))
    return FALSE;
  g_autofree char *after = tf_act_dup_after (ledger, act->replica, act->seq, error);
  if (after == NULL)
    return FALSE;
  g_autofree char *hash = tf_act_hash (before, ledger->replica_id, act->seq, act->clock, wall,
                                       act->kind, act->subject, body, n, after);
  return tf_run (ledger, error, "UPDATE act SET hash = ?3 WHERE replica = ?1 AND seq = ?2", "iih",
                 act->replica, act->seq, hash)
         && tf_run (ledger, error,
                    "INSERT INTO have (replica, upto) VALUES (?1, ?2) ON CONFLICT (replica) DO "
                    "UPDATE SET upto = ?2",
                    "ii", act->replica, act->seq);
}

/* Acts done as one say so in their bodies: which was the first of them, and what they are together. */
static void
put_bundle (TfLedger *ledger, TfAct *act)
{
  if (ledger->bundle_as == NULL || !tf_act_is_deed (act->kind))
    return;
  if (ledger->bundle == 0)
    ledger->bundle = act->seq;
  json_object_set_int_member (act->body, "bundle", ledger->bundle);
  json_object_set_string_member (act->body, "as", ledger->bundle_as);
}

gboolean
tf_act_append (TfLedger *ledger, const char *kind, const char *subject, JsonBuilder *body,
               GError **error)
{
  /* Another handle on this file may have begun one for us since we opened it. */
  if (ledger->replica == 0 && !tf_replica_choose (ledger, error))
    return FALSE;
  if (ledger->replica == 0 && !tf_replica_begin (ledger, error))
    return FALSE;
  g_autoptr (JsonNode) root = json_builder_get_root (body);
  TfAct act = {
    .replica = ledger->replica,
    .seq
    = tf_value (ledger, NULL, 0, "SELECT upto FROM have WHERE replica = ?1", "i", ledger->replica)
      + 1,
    .clock = tf_value (ledger, NULL, 0, "SELECT max (clock) FROM act", "") + 1,
    .kind = kind,
    .subject = subject,
    .body = json_node_get_object (root),
  };
  put_bundle (ledger, &act);
  g_autofree char *text = tf_json_node_dup_text (root, FALSE);
  return write_act (ledger, &act, ledger->now (ledger->now_data), text, error)
         && tf_project_act (ledger, &act, error);
}
