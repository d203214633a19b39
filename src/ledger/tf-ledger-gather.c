/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Part ledgers into one, a frame a transaction. Content ids do the work: what is there already is
 * not put in twice, and gathering can be stopped and started again. */

#include "tf-ledger-private.h"

#include <glib/gi18n-lib.h>

static void
hint_free (gpointer data)
{
  TfHint *hint = data;
  g_clear_pointer (&hint->outline, tf_outline_unref);
  tf_measure_clear (&hint->measure);
  g_clear_pointer (&hint->cautions, g_ptr_array_unref);
  g_free (hint);
}

static TfHint *
read_hint (sqlite3_stmt *query, GError **error)
{
  TfOutline *outline = tf_outline_from_text (tf_column_text (query, 1), error);
  if (outline == NULL)
    return NULL;
  TfHint *hint = g_new0 (TfHint, 1);
  hint->unipolar = sqlite3_column_int (query, 0);
  hint->outline = outline;
  hint->cautions = tf_notes_from_store (tf_column_text (query, 2), NULL);
  tf_measure_from_row (&hint->measure, query, 3);
  return hint;
}

/* The hints of one run; @figures: (element-type TfComplexityRow) one each, all by one @method, or
 * none. */
static GPtrArray *
read_hints (TfLedger *part, gint64 frame, gint64 rule, GArray *figures, char **method,
            GError **error)
{
  g_autofree char *measured = tf_measure_dup_columns ("e.");
  g_autofree char *sql = g_strconcat (
      "SELECT h.unipolar, h.outline, h.notes, ", measured, ", ", tf_complexity_columns_sql,
      " FROM hint h JOIN measure e ON e.id = h.measure", tf_complexity_join_sql, " WHERE h.frame = ?1 AND h.rule = ?2"
      " ORDER BY h.ordinal",
      NULL);
  int after = 3 + (int)tf_measure_n_columns ();
  g_autoptr (GPtrArray) hints = g_ptr_array_new_with_free_func (hint_free);
  g_autoptr (sqlite3_stmt) query = tf_query (part, error, sql, "ii", frame, rule);
  int more = -1;
  while (query != NULL && (more = tf_query_step (part, query, error)) > 0)
    {
      TfHint *hint = read_hint (query, error);
      if (hint == NULL)
        return NULL;
      g_ptr_array_add (hints, hint);
      TfComplexityRow row;
      if (!tf_complexity_from_row (&row, query, after))
        continue;
      if (*method == NULL)
        *method = g_strdup (tf_column_text (query, after + TF_COMPLEXITY_COLUMNS));
      g_array_append_val (figures, row);
    }
  if (figures->len != hints->len) /* an older part: figures are worked out later */
    g_array_set_size (figures, 0);
  return more == 0 ? g_steal_pointer (&hints) : NULL;
}

static gboolean
gather_runs (TfLedger *ledger, TfLedger *part, gint64 from, gint64 to, guint *n_hints,
             GError **error)
{
  g_autoptr (sqlite3_stmt) query = tf_query (
      part, error,
      "SELECT u.rule, r.text, t.text, (SELECT max (e.program) FROM hint h JOIN measure e ON e.id = "
      "h.measure"
      " WHERE h.frame = u.frame AND h.rule = u.rule) FROM run u JOIN method r ON r.id = u.rule"
      " JOIN method t ON t.id = u.method WHERE u.frame = ?1 ORDER BY u.id",
      "i", from);
  int more = -1;
  while (query != NULL && (more = tf_query_step (part, query, error)) > 0)
    {
      const char *rule = tf_column_text (query, 1);
      if (tf_ledger_has_hints (ledger, to, rule))
        continue;
      g_autofree char *method = NULL;
      g_autoptr (GArray) figures = g_array_new (FALSE, FALSE, sizeof (TfComplexityRow));
      g_autoptr (GPtrArray) hints = read_hints (part, from, sqlite3_column_int64 (query, 0),
                                                figures, &method, error);
      TfComplexityRows complexity
          = { method, (const TfComplexityRow *)(void *)figures->data, figures->len };
      if (hints == NULL
          || !tf_hints_put (ledger, to, rule, hints, tf_column_text (query, 2),
                            &complexity, tf_column_text (query, 3), error))
        return FALSE;
      *n_hints += hints->len;
    }
  return more == 0;
}

static gboolean
gather_places (TfLedger *ledger, TfLedger *part, gint64 from, gint64 to, GError **error)
{
  g_autoptr (sqlite3_stmt) query
      = tf_query (part, error, "SELECT path, size, mtime FROM place WHERE frame = ?1", "i", from);
  int more = -1;
  while (query != NULL && (more = tf_query_step (part, query, error)) > 0)
    if (!tf_place_put (ledger, to, tf_column_text (query, 0), sqlite3_column_int64 (query, 1),
                       sqlite3_column_int64 (query, 2), error))
      return FALSE;
  return more == 0;
}

static gboolean
gather_frame (TfLedger *ledger, TfLedger *part, const TfFrameRow *row, guint *n_frames,
              guint *n_hints, GError **error)
{
  if (!tf_ledger_begin (ledger, error))
    return FALSE;
  gboolean known = tf_ledger_find_frame (ledger, row->checksum, row->hdu, row->plane) != 0;
  gint64 to = tf_frame_put (ledger, row->path, row->checksum, row->hdu, row->plane, row->info,
                            row->noise_gauss, error);
  if (to == 0 || !gather_places (ledger, part, row->id, to, error)
      || !gather_runs (ledger, part, row->id, to, n_hints, error))
    {
      tf_ledger_rollback (ledger);
      return FALSE;
    }
  *n_frames += known ? 0 : 1;
  return tf_ledger_commit (ledger, error);
}

gboolean
tf_ledger_gather (TfLedger *ledger, TfLedger *part, guint *n_frames, guint *n_hints, TfNotes *said,
                  GError **error)
{
  g_return_val_if_fail (ledger != NULL && part != NULL && ledger != part, FALSE);
  guint new_frames = 0, new_hints = 0;
  g_autoptr (GPtrArray) frames = tf_ledger_frames (part, error);
  gboolean ok = frames != NULL;
  for (guint k = 0; ok && k < frames->len; k++)
    ok = gather_frame (ledger, part, g_ptr_array_index (frames, k), &new_frames, &new_hints, error);
  ok = ok && tf_outside_gather (ledger, part, error);
  gint64 acts = tf_value (part, NULL, 0,
                          "SELECT count (*) FROM act WHERE kind NOT IN ('begin', 'person')", "");
  if (ok && acts > 0 && said != NULL)
    tf_notes_add (said, "gather-acts-left", "si", part->path, (int)acts);
  if (n_frames != NULL)
    *n_frames = new_frames;
  if (n_hints != NULL)
    *n_hints = new_hints;
  return ok;
}
