/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Projections made anew. A scratch database holds empty projections; the ledger is attached to it
 * as "src", read-only, so that the names of log and machine rows mean the ledger's and the names
 * of projections the scratch's. The functions that project an act when it is written then do all
 * the work. */

#include "tf-ledger-check-private.h"

#include <string.h>

static TfLedger *
scratch_new (const TfLedger *ledger, GError **error)
{
  TfLedger *scratch = g_new0 (TfLedger, 1);
  scratch->path = g_strdup (ledger->path);
  scratch->now = ledger->now;
  scratch->now_data = ledger->now_data;
  scratch->notices = tf_notes_new ();
  scratch->statements = tf_statements_new ();
  int rc = sqlite3_open_v2 ("", &scratch->db,
                            SQLITE_OPEN_READWRITE | SQLITE_OPEN_CREATE | SQLITE_OPEN_URI, NULL);
  if (rc == SQLITE_OK)
    {
      sqlite3_busy_timeout (scratch->db, ledger->busy_ms);
      if (tf_run (scratch, error, "PRAGMA foreign_keys = OFF", "")
          && tf_run (scratch, error, "ATTACH ?1 AS src", "t", ledger->uri))
        return scratch;
    }
  else
    tf_ledger_set_error (error, scratch->db, rc, ledger->path);
  tf_ledger_close (scratch);
  return NULL;
}

/* -- schema
 * ------------------------------------------------------------------------------------------ */
#define NAMES(schema)                                                                              \
  "SELECT name, type, sql FROM " schema                                                            \
  ".sqlite_schema WHERE name NOT LIKE 'sqlite\\_%' ESCAPE '\\'"
#define SCHEMA_SQL                                                                                 \
  "SELECT DISTINCT name FROM (SELECT * FROM (" NAMES ("main") " EXCEPT " NAMES (                   \
      "src") ") UNION ALL SELECT * FROM (" NAMES ("src") " EXCEPT " NAMES ("main") ")) ORDER BY "  \
                                                                                   "name"

static gboolean
make_schema (TfLedger *scratch, GError **error)
{
  for (const TfMigration *m = tf_ledger_migrations; m->sql != NULL; m++)
    for (guint k = 0; m->sql[k] != NULL; k++)
      if (!tf_run_script (scratch, m->sql[k], error))
        return FALSE;
  return TRUE;
}

gboolean
tf_check_schema (TfLedger *ledger, TfNotes *findings, GError **error)
{
  if (tf_value (ledger, NULL, 0, "PRAGMA user_version", "") != TF_LEDGER_VERSION)
    return TRUE; /* a newer one: not ours to judge */
  g_autoptr (TfLedger) scratch = scratch_new (ledger, error);
  if (scratch == NULL || !make_schema (scratch, error))
    return FALSE;
  g_autoptr (sqlite3_stmt) query = tf_query (scratch, error, SCHEMA_SQL, "");
  int more = -1;
  while (query != NULL && (more = tf_query_step (scratch, query, error)) > 0)
    tf_notes_add (findings, "check-schema", "ss", ledger->path, tf_column_text (query, 0));
  return more == 0;
}

/* -- projections
 * -------------------------------------------------------------------------------------- */
static gboolean
replay_act (TfLedger *scratch, sqlite3_stmt *query, TfNotes *findings, GError **error)
{
  g_autofree char *id = tf_column_dup_hex (query, 1);
  g_autofree char *subject = tf_column_dup_hex (query, 5);
  g_autofree char *kind = g_strdup (tf_column_text (query, 4));
  g_autoptr (JsonNode) root = json_from_string (tf_column_text (query, 6), NULL);
  TfAct act = { .replica = sqlite3_column_int64 (query, 0),
                .seq = sqlite3_column_int64 (query, 2),
                .clock = sqlite3_column_int64 (query, 3),
                .kind = kind,
                .subject = subject };
  GError *problem = NULL;
  if (root != NULL && JSON_NODE_HOLDS_OBJECT (root))
    {
      act.body = json_node_get_object (root);
      if (tf_project_act (scratch, &act, &problem))
        return TRUE;
    }
  if (problem != NULL && !g_error_matches (problem, TF_LEDGER_ERROR, TF_LEDGER_ERROR_DAMAGED)
      && !g_error_matches (problem, TF_LEDGER_ERROR, TF_LEDGER_ERROR_DATABASE))
    {
      g_propagate_error (error, problem);
      return FALSE;
    }
  g_clear_error (&problem);
  if (tf_notes_get_n (findings) < 10 * TF_MOST_FINDINGS)
    tf_notes_add (findings, "check-act-unreadable", "ssi", scratch->path, id, (int)act.seq);
  return TRUE;
}

static gboolean
replay (TfLedger *scratch, TfNotes *findings, GError **error)
{
  g_autoptr (sqlite3_stmt) query = tf_query (
      scratch, error,
      "SELECT a.replica, r.id, a.seq, a.clock, a.kind, a.subject, CAST (a.body AS TEXT) FROM act a"
      " JOIN replica r ON r.no = a.replica ORDER BY a.clock, r.id, a.seq",
      "");
  int more = -1;
  while (query != NULL && (more = tf_query_step (scratch, query, error)) > 0)
    if (!replay_act (scratch, query, findings, error))
      return FALSE;
  if (more != 0 || !tf_run (scratch, error, "DELETE FROM point", ""))
    return FALSE;
  g_autofree char *points = g_strconcat ("INSERT INTO point ", tf_point_all_sql, NULL);
  return tf_run (scratch, error, points, "");
}

/* "@" stands for main or src. Local keys of projections are replaced by their ids. */
#define PERSON "(SELECT x.uid FROM @.person x WHERE x.id = t.person)"
#define REGION "(SELECT x.uid FROM @.region x WHERE x.id = t.region)"
static const char *const compared[][2] = {
  { "person", "SELECT uid, name FROM @.person" },
  { "deed", "SELECT replica, seq, undone, CASE bundle WHEN 0 THEN seq ELSE bundle END, " PERSON " FROM @.deed t" },
  { "region", "SELECT uid, number FROM @.region" },
  { "mark", "SELECT uid, replica, seq, frame, origin, hint, outline, measure, label, live, " PERSON
            ", " REGION ", (SELECT x.uid FROM @.mark x WHERE x.id = t.follows) FROM @.mark t" },
  { "dropped", "SELECT hint, " PERSON " FROM @.dropped t" },
  { "class", "SELECT frame, class, evidence, clock, " PERSON ", " REGION " FROM @.class t" },
  { "fact", "SELECT what, text, clock, " PERSON ", " REGION " FROM @.fact t" },
  { "note", "SELECT text, clock, " PERSON ", " REGION " FROM @.note t" },
  { "resolved", "SELECT text, clock, " PERSON ", " REGION ", (SELECT x.uid FROM @.person x WHERE "
                "x.id = t.author) FROM @.resolved t" },
  { "tie", "SELECT a, b, cut, reason, clock, " PERSON " FROM @.tie t" },
  { "shift", "SELECT uid, time, clock, " PERSON " FROM @.shift t" },
  { "geometry", "SELECT frame, text, clock, " PERSON " FROM @.geometry t" },
  { "divide", "SELECT study, cycle, hemisphere, points, shown, clock, " PERSON " FROM @.divide t" },
  { "scale", "SELECT instrument, reference, factor, sigma, evidence, clock, " PERSON " FROM @.scale t" },
  { "study", "SELECT uid, name, version, checksum, text, replica, seq, live FROM @.study" },
  { "edition", "SELECT uid, name, study, study_version, checksum, text, replica, seq, live FROM "
               "@.edition" },
  { "point", "SELECT hint, CASE WHEN hint > 0 THEN mark ELSE (SELECT x.uid FROM @.mark x WHERE x.id "
             "= t.mark) END, frame, "
             "CASE WHEN hint > 0 THEN region ELSE " REGION
             " END, time, year, lat_deg, flux_mx, tilt_deg, mu, cmd_deg,"
             " separation_deg, imbalance, leading, leading_sure, unipolar, straddles, "
             "witnesses_differ FROM @.point t" },
};

static gboolean
compare_table (TfLedger *scratch, const char *table, const char *rows, TfNotes *findings,
               GError **error)
{
  g_auto (GStrv) parts = g_strsplit (rows, "@", -1);
  g_autofree char *made = g_strjoinv ("main", parts);
  g_autofree char *kept = g_strjoinv ("src", parts);
  g_autofree char *sql = g_strdup_printf (
      "SELECT (SELECT count (*) FROM (%s EXCEPT %s)), (SELECT count (*) FROM (%s EXCEPT %s)),"
      " (SELECT count (*) FROM main.%s), (SELECT count (*) FROM src.%s)",
      made, kept, kept, made, table, table);
  g_autoptr (sqlite3_stmt) query = tf_query (scratch, error, sql, "");
  if (query == NULL || tf_query_step (scratch, query, error) <= 0)
    return FALSE;
  int missing = sqlite3_column_int (query, 0), strange = sqlite3_column_int (query, 1);
  if (missing > 0 || strange > 0
      || sqlite3_column_int64 (query, 2) != sqlite3_column_int64 (query, 3))
    tf_notes_add (findings, strcmp (table, "point") == 0 ? "check-points" : "check-projection",
                  "ssii", scratch->path, table, missing, strange);
  return TRUE;
}

static gboolean
rebuild (TfLedger *scratch, TfNotes *findings, GError **error)
{
  for (guint k = 0; tf_ledger_projections[k] != NULL; k++)
    if (!tf_run_script (scratch, tf_ledger_projections[k], error))
      return FALSE;
  if (!tf_run_script (scratch, "BEGIN", error) || !replay (scratch, findings, error))
    return FALSE;
  for (guint k = 0; k < G_N_ELEMENTS (compared); k++)
    if (!compare_table (scratch, compared[k][0], compared[k][1], findings, error))
      return FALSE;
  return TRUE;
}

gboolean
tf_check_projections (TfLedger *ledger, TfNotes *findings, GError **error)
{
  g_autoptr (TfLedger) scratch = scratch_new (ledger, error);
  if (scratch == NULL)
    return FALSE;
  gboolean ok = rebuild (scratch, findings, error);
  tf_ledger_rollback (scratch);
  return ok;
}
