/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* What check looks at: the file, its schema, the log, the machine rows' digests, and the
 * projections made anew from the log alone (tf-ledger-rebuild.c). It changes nothing. */

#include "tf-ledger-private.h"
#include "tf-ledger-check-private.h"
#include "tf-ledger-follow-private.h"

#include <string.h>

/* -- digests of machine rows
 * ------------------------------------------------------------------------- */
const char *const tf_digest_tables[]
    = { "frame", "measure", "hint", "complexity", "outside", "outside_row", NULL };

/* All that never changes in a row. */
static char *
digest_columns (const char *table)
{
  if (strcmp (table, "frame") == 0)
    return g_strdup ("cid, checksum, hdu, plane, kind, role, time, time_text, time_source, "
                     "instrument, vantage, simulated,"
                     " noise_gauss, refusal, info");
  if (strcmp (table, "hint") == 0)
    return g_strdup ("cid, frame, rule, ordinal, unipolar, outline, measure, notes");
  if (strcmp (table, "complexity") == 0)
    return g_strdup ("cid, measure, method, program, given, mu, r_mx, strong_gradient_length_mm, "
                     "gradient_weighted_gauss, flux_near_mx, strong_pieces, delta_candidate");
  if (strcmp (table, "outside") == 0)
    return g_strdup ("cid, name, checksum, format, source, licence, about, columns, linking, "
                     "program, n_rows, n_left");
  if (strcmp (table, "outside_row") == 0)
    return g_strdup ("cid, outside, ordinal, place, grp, region, passage, time, year, flat, "
                     "hinted, leading, leading_sure, lat_deg, axis_tilt_deg, flux_unsigned_mx, "
                     "cmd_deg, mu, separation_deg, imbalance");
  g_autofree char *measured = tf_measure_dup_columns ("");
  return g_strconcat ("cid, frame, method, program, time_text, year, cautions, ", measured, NULL);
}

static char *
row_digest (sqlite3_stmt *query, const char *table)
{
  g_autofree char *tag = g_strdup_printf ("tiltfield %s row 1", table);
  return tf_digest_row (query, tag, 2, sqlite3_column_count (query) - 1);
}

gboolean
tf_digest_store (TfLedger *ledger, const char *table, gint64 id, GError **error)
{
  g_autofree char *names = digest_columns (table);
  g_autofree char *read
      = g_strdup_printf ("SELECT id, NULL, %s FROM %s WHERE id = ?1", names, table);
  g_autofree char *write = g_strdup_printf ("UPDATE %s SET digest = ?2 WHERE id = ?1", table);
  g_autofree char *digest = NULL;
  {
    g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, read, "i", id);
    if (query == NULL || tf_query_step (ledger, query, error) <= 0)
      return FALSE;
    digest = row_digest (query, table);
  }
  return tf_run (ledger, error, write, "ih", id, digest);
}

static gboolean
check_machine_rows (TfLedger *ledger, const char *table, TfNotes *findings, GError **error)
{
  g_autofree char *names = digest_columns (table);
  g_autofree char *sql = g_strdup_printf ("SELECT id, digest, %s FROM %s", names, table);
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, sql, "");
  guint most = findings->len + TF_MOST_FINDINGS;
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      g_autofree char *kept = tf_column_dup_hex (query, 1);
      g_autofree char *made = row_digest (query, table);
      if (strcmp (kept, made) != 0 && findings->len < most)
        tf_notes_add (findings, "check-machine-row", "ssi", ledger->path, table,
                      sqlite3_column_int (query, 0));
    }
  return more == 0;
}

/* -- the file
 * ---------------------------------------------------------------------------------------- */
static gboolean
check_file (TfLedger *ledger, TfNotes *findings, GError **error)
{
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, "PRAGMA integrity_check (20)", "");
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    if (strcmp (tf_column_text (query, 0), "ok") != 0)
      tf_notes_add (findings, "check-file", "ss", ledger->path, tf_column_text (query, 0));
  return more == 0;
}

static gboolean
check_references (TfLedger *ledger, TfNotes *findings, GError **error)
{
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, "PRAGMA foreign_key_check", "");
  guint most = findings->len + TF_MOST_FINDINGS;
  int more = query != NULL ? 1 : -1;
  while (more > 0 && findings->len < most && (more = tf_query_step (ledger, query, error)) > 0)
    tf_notes_add (findings, "check-reference", "sss", ledger->path, tf_column_text (query, 0),
                  tf_column_text (query, 2));
  return more >= 0;
}

/* -- the log
 * ----------------------------------------------------------------------------------------- */
typedef struct
{
  gint64 replica, seq; /* of the act before */
  char *hash;
  guint most; /* findings */
} Chain;

/* One act: its place in the numbering, its link to the one before, its own hash. */
static gboolean
check_act (TfLedger *ledger, sqlite3_stmt *query, Chain *chain, TfNotes *findings, GError **error)
{
  gint64 replica = sqlite3_column_int64 (query, 0), seq = sqlite3_column_int64 (query, 2);
  g_autofree char *id = tf_column_dup_hex (query, 1);
  g_autofree char *subject = tf_column_dup_hex (query, 6);
  g_autofree char *before = tf_column_dup_hex (query, 8);
  g_autofree char *hash = tf_column_dup_hex (query, 9);
  gboolean first = replica != chain->replica;
  if (findings->len >= chain->most)
    return TRUE;
  if (seq != (first ? 1 : chain->seq + 1))
    tf_notes_add (findings, "check-act-gap", "ssi", ledger->path, id, (int)seq);
  else if (!first && strcmp (before, chain->hash) != 0)
    tf_notes_add (findings, "check-act-chain", "ssi", ledger->path, id, (int)seq);
  g_autofree char *after = tf_act_dup_after (ledger, replica, seq, error);
  if (after == NULL)
    return FALSE;
  const void *body = sqlite3_column_blob (query, 7);
  g_autofree char *made = tf_act_hash (
      before, id, seq, sqlite3_column_int64 (query, 3), sqlite3_column_int64 (query, 4),
      tf_column_text (query, 5), subject, body, (gsize)sqlite3_column_bytes (query, 7), after);
  if (strcmp (made, hash) != 0)
    tf_notes_add (findings, "check-act-hash", "ssi", ledger->path, id, (int)seq);
  chain->replica = replica;
  chain->seq = seq;
  g_free (chain->hash);
  chain->hash = g_steal_pointer (&hash);
  return TRUE;
}

static gboolean
check_acts (TfLedger *ledger, TfNotes *findings, GError **error)
{
  Chain chain = { .most = findings->len + TF_MOST_FINDINGS };
  g_autoptr (sqlite3_stmt) query = tf_query (
      ledger, error,
      "SELECT a.replica, r.id, a.seq, a.clock, a.wall, a.kind, a.subject, a.body, a.before,"
      " a.hash FROM act a LEFT JOIN replica r ON r.no = a.replica ORDER BY a.replica, a.seq",
      "");
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    if (!check_act (ledger, query, &chain, findings, error))
      {
        more = -1;
        break;
      }
  g_free (chain.hash);
  return more == 0;
}

/* Where the version vector and the acts disagree, acts are missing at the end. */
static gboolean
check_have (TfLedger *ledger, TfNotes *findings, GError **error)
{
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, error,
                                             "SELECT r.id, coalesce (h.upto, 0), coalesce ((SELECT "
                                             "max (a.seq) FROM act a WHERE a.replica = r.no), 0)"
                                             " FROM replica r LEFT JOIN have h ON h.replica = r.no",
                                             "");
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      g_autofree char *id = tf_column_dup_hex (query, 0);
      if (sqlite3_column_int64 (query, 1) != sqlite3_column_int64 (query, 2))
        tf_notes_add (findings, "check-act-gap", "ssi", ledger->path, id,
                      sqlite3_column_int (query, 1));
    }
  return more == 0;
}

static gboolean
check_inside (TfLedger *ledger, TfNotes *findings, GError **error)
{
  gboolean ok = check_file (ledger, findings, error) && check_references (ledger, findings, error)
                && check_acts (ledger, findings, error) && check_have (ledger, findings, error)
                && tf_follow_check (ledger, findings, error);
  for (guint k = 0; ok && tf_digest_tables[k] != NULL; k++)
    ok = check_machine_rows (ledger, tf_digest_tables[k], findings, error);
  return ok;
}

static gboolean
check_packs (TfLedger *ledger, TfNotes *findings, GError **error)
{
  for (int pack = 0; pack < TF_PACKS; pack++)
    if (tf_pack_is_there (ledger, (TfPack)pack)
        && !tf_pack_check (ledger, (TfPack)pack, findings, error))
      return FALSE;
  return TRUE;
}

gboolean
tf_ledger_check (TfLedger *ledger, TfNotes *findings, GError **error)
{
  g_return_val_if_fail (ledger != NULL && findings != NULL, FALSE);
  if (!tf_run (ledger, error, "BEGIN", ""))
    return FALSE;
  gboolean ok = check_inside (ledger, findings, error);
  tf_ledger_rollback (ledger);
  return ok && tf_check_schema (ledger, findings, error)
         && tf_check_projections (ledger, findings, error)
         && check_packs (ledger, findings, error);
}
