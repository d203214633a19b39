/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Complexity figures of measured outlines: machine rows beside the measure, put in once. That
 * figures were refused (near the limb) is a row, too. */

#include "tf-ledger-private.h"

#include <math.h>
#include <glib/gi18n-lib.h>

const char tf_complexity_columns_sql[]
    = "x.given, x.mu, x.r_mx, x.strong_gradient_length_mm, x.gradient_weighted_gauss, "
      "x.flux_near_mx, x.strong_pieces, x.delta_candidate, "
      "(SELECT z.text FROM method z WHERE z.id = x.method)";
const char tf_complexity_join_sql[]
    = " LEFT JOIN complexity x ON x.id = (SELECT max (y.id) FROM complexity y WHERE y.measure = "
      "e.id)";

TfComplexityRow
tf_complexity_row (const TfComplexity *c)
{
  TfComplexityRow row = { .there = c->given, .mu = c->mu };
  row.r_mx = row.strong_gradient_length_mm = row.gradient_weighted_gauss = row.flux_near_mx = NAN;
  if (!c->given)
    return row;
  row.r_mx = c->r_mx;
  row.strong_gradient_length_mm = c->strong_gradient_length_mm;
  row.gradient_weighted_gauss = c->gradient_weighted_gauss;
  row.flux_near_mx = c->flux_near_mx;
  row.pieces = c->pieces;
  row.delta_candidate = c->delta_candidate;
  return row;
}

gboolean
tf_complexity_from_row (TfComplexityRow *row, sqlite3_stmt *query, int column)
{
  *row = (TfComplexityRow){ 0 };
  row->there = sqlite3_column_int (query, column);
  row->mu = tf_column_double (query, column + 1);
  row->r_mx = tf_column_double (query, column + 2);
  row->strong_gradient_length_mm = tf_column_double (query, column + 3);
  row->gradient_weighted_gauss = tf_column_double (query, column + 4);
  row->flux_near_mx = tf_column_double (query, column + 5);
  row->pieces = (guint)sqlite3_column_int (query, column + 6);
  row->delta_candidate = sqlite3_column_int (query, column + 7);
  return sqlite3_column_type (query, column) != SQLITE_NULL;
}

#define PUT_SQL                                                                                    \
  "INSERT INTO complexity (cid, measure, method, program, given, mu, r_mx, "                       \
  "strong_gradient_length_mm, gradient_weighted_gauss, flux_near_mx, strong_pieces, "              \
  "delta_candidate) VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8, ?9, ?10, "        \
  "iif (?5, ?11, NULL), iif (?5, ?12, NULL))"

gboolean
tf_complexity_put (TfLedger *ledger, gint64 measure, const char *method,
                   const TfComplexityRow *row, const char *program, GError **error)
{
  gint64 method_key = tf_method_key (ledger, method, error);
  g_autofree char *measured = tf_text_value (
      ledger, error, "SELECT lower (hex (cid)) FROM measure WHERE id = ?1", "i", measure);
  if (method_key == 0 || measured == NULL)
    return FALSE;
  g_autofree char *cid = tf_content_id ("tiltfield complexity 1", measured, method, NULL);
  if (tf_value (ledger, NULL, 0, "SELECT id FROM complexity WHERE cid = ?1", "h", cid) != 0)
    return TRUE;
  return tf_run (ledger, error, PUT_SQL, "hiitidddddii", cid, measure, method_key, program,
                 (gint64)(row->there != 0), row->mu, row->r_mx, row->strong_gradient_length_mm,
                 row->gradient_weighted_gauss, row->flux_near_mx, (gint64)row->pieces,
                 (gint64)(row->delta_candidate != 0))
         && tf_digest_store (ledger, "complexity", sqlite3_last_insert_rowid (ledger->db), error);
}

static gint64
measure_of (TfLedger *ledger, gint64 key, gboolean hint, GError **error)
{
  gint64 measure = tf_value (ledger, error, 0,
                             hint ? "SELECT measure FROM hint WHERE id = ?1"
                                  : "SELECT measure FROM mark WHERE id = ?1",
                             "i", key);
  if (measure == 0 && error != NULL && *error == NULL)
    g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE,
                 _ ("the ledger %s has no mark or hint %" G_GINT64_FORMAT), ledger->path, key);
  return measure;
}

gboolean
tf_ledger_add_complexity (TfLedger *ledger, guint n, const gint64 *keys, const gboolean *hints,
                          const char *method, const TfComplexityRow *rows, GError **error)
{
  g_return_val_if_fail (ledger != NULL && method != NULL, FALSE);
  if (n == 0)
    return TRUE;
  if (!tf_ledger_begin (ledger, error))
    return FALSE;
  for (guint k = 0; k < n; k++)
    {
      gint64 measure = measure_of (ledger, keys[k], hints[k], error);
      if (measure == 0
          || !tf_complexity_put (ledger, measure, method, &rows[k], TF_VERSION, error))
        {
          tf_ledger_rollback (ledger);
          return FALSE;
        }
    }
  return tf_ledger_commit (ledger, error);
}
