/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* The flat rows: live marks and open hints with everything that is known of them. */

#include "tf-ledger-private.h"

#include <math.h>
#include <glib/gi18n-lib.h>

/* Columns 0 to 26; the measure's follow. Marks and hints give the same ones. */
#define COMMON                                                                                     \
  " f.path, f.checksum, t.text, e.program, f.instrument, f.vantage, f.kind, f.time_source, "       \
  "f.simulated, coalesce (v.id, 0), coalesce (v.same, 0), lower (hex (v.cid)), coalesce (v.born, 0), "

/* A mark that follow has not seen stands in the passage of its hint. */
#define MARK_PASSAGE                                                                               \
  " LEFT JOIN member b ON b.hint = 0 AND b.mark = m.id LEFT JOIN member c ON c.hint = 1 AND "      \
  "c.mark = m.hint LEFT JOIN passage v ON v.id = coalesce (b.passage, c.passage)"
#define HINT_PASSAGE                                                                               \
  " LEFT JOIN member b ON b.hint = 1 AND b.mark = h.id LEFT JOIN passage v ON v.id = b.passage"

/* One's own note, class or fact, else the newest of anybody's. */
#define FACT(what)                                                                                 \
  " coalesce ((SELECT x.text FROM fact x WHERE x.region = m.region AND x.person = m.person AND "   \
  "x.what = '" what "'), (SELECT x.text FROM fact x WHERE x.region = m.region AND x.what = '" what \
  "' ORDER BY x.clock DESC LIMIT 1)"

#define MARK_COLUMNS                                                                               \
  "m.id, 0, lower (hex (m.uid)), m.frame, m.region, g.number, m.origin," FACT ("label") ", m.label),"                  \
  " coalesce ((SELECT n.text FROM note n WHERE n.region = m.region AND n.person = m.person),"      \
  " (SELECT n.text FROM note n WHERE n.region = m.region ORDER BY n.clock DESC LIMIT 1), ''),"     \
  " coalesce ((SELECT c.class FROM class c WHERE c.region = m.region AND c.frame = m.frame AND "   \
  "c.person = m.person),"                                                                          \
  " (SELECT c.class FROM class c WHERE c.region = m.region AND c.frame = m.frame ORDER BY "        \
  "c.clock DESC LIMIT 1), ''),"                                                                    \
  " p.name, e.leading = 0, m.outline," FACT ("external") ", '')," COMMON

#define MARK_FROM                                                                                  \
  " FROM mark m JOIN region g ON g.id = m.region JOIN person p ON p.id = m.person JOIN measure e " \
  "ON e.id = m.measure"                                                                            \
  " JOIN frame f ON f.id = m.frame JOIN method t ON t.id = e.method" MARK_PASSAGE

#define HINT_COLUMNS                                                                               \
  "h.id, 1, lower (hex (h.cid)), h.frame, 0, '', -1, '', '', '', '', h.unipolar, "                 \
  "h.outline, ''," COMMON

#define HINT_FROM                                                                                  \
  " FROM hint h JOIN measure e ON e.id = h.measure JOIN frame f ON f.id = h.frame JOIN method t "  \
  "ON t.id = e.method" HINT_PASSAGE

enum
{
  FIRST_COMMON = 14,
  FIRST_MEASURED = 27
};

static const char *
origin_name (int origin)
{
  static const char *const names[] = { "kept as hinted", "changed", "drawn new" };
  return origin >= 0 && origin < (int)G_N_ELEMENTS (names) ? names[origin] : "hint";
}

static char *
dup_column (sqlite3_stmt *query, int column)
{
  return g_strdup (tf_column_text (query, column));
}

static TfOutline *
read_outline (TfLedger *ledger, const char *text, GError **error)
{
  GError *problem = NULL;
  TfOutline *outline = tf_outline_from_text (text, &problem);
  if (outline != NULL)
    return outline;
  g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_DAMAGED,
               _ ("the ledger %s: an outline cannot be read: %s; run check"), ledger->path,
               problem->message);
  g_error_free (problem);
  return NULL;
}

static TfRow *
read_row (sqlite3_stmt *query, gboolean complexity)
{
  TfRow *row = g_new0 (TfRow, 1);
  row->mark = sqlite3_column_int64 (query, 0);
  row->is_hint = sqlite3_column_int (query, 1);
  row->mark_id = dup_column (query, 2);
  row->frame = sqlite3_column_int64 (query, 3);
  row->region_key = sqlite3_column_int64 (query, 4);
  row->region = dup_column (query, 5);
  row->origin = origin_name (sqlite3_column_int (query, 6));
  row->label = dup_column (query, 7);
  row->note = dup_column (query, 8);
  row->mw_class = dup_column (query, 9);
  row->person = dup_column (query, 10);
  row->unipolar = sqlite3_column_int (query, 11);
  row->external = dup_column (query, 13);
  row->frame_path = dup_column (query, FIRST_COMMON);
  row->frame_checksum = dup_column (query, FIRST_COMMON + 1);
  row->method = dup_column (query, FIRST_COMMON + 2);
  row->program_version = dup_column (query, FIRST_COMMON + 3);
  row->instrument = dup_column (query, FIRST_COMMON + 4);
  row->vantage = dup_column (query, FIRST_COMMON + 5);
  row->kind = tf_kind_name (tf_kind_from_name (tf_column_text (query, FIRST_COMMON + 6)));
  row->time_source = dup_column (query, FIRST_COMMON + 7);
  row->simulated = sqlite3_column_int (query, FIRST_COMMON + 8);
  row->passage_key = sqlite3_column_int64 (query, FIRST_COMMON + 9);
  row->same = sqlite3_column_int64 (query, FIRST_COMMON + 10);
  row->born = sqlite3_column_int (query, FIRST_COMMON + 12);
  row->passage = row->passage_key != 0 ? dup_column (query, FIRST_COMMON + 11)
                                       : g_strdup (row->is_hint ? "" : row->mark_id);
  tf_measure_from_row (&row->measure, query, FIRST_MEASURED);
  int after = FIRST_MEASURED + (int)tf_measure_n_columns ();
  row->complexity_method
      = complexity && tf_complexity_from_row (&row->complexity, query, after)
            ? dup_column (query, after + TF_COMPLEXITY_COLUMNS)
            : NULL;
  return row;
}

void
tf_row_free (TfRow *row)
{
  if (row == NULL)
    return;
  char *texts[] = { row->mark_id, row->region,          row->passage,    row->label,
                    row->note,    row->mw_class,        row->frame_path, row->frame_checksum,
                    row->method,  row->program_version, row->person,     row->instrument,
                    row->vantage, row->time_source,     row->complexity_method,
                    row->external };
  for (guint k = 0; k < G_N_ELEMENTS (texts); k++)
    g_free (texts[k]);
  g_clear_pointer (&row->outline, tf_outline_unref);
  g_clear_pointer (&row->outside, tf_outside_row_free);
  tf_measure_clear (&row->measure);
  g_free (row);
}

/* @where is appended; ?1 is @key. */
static gboolean
read_rows (TfLedger *ledger, gboolean hints, const char *where, gint64 key, gboolean outlines,
           gboolean complexity, GPtrArray *rows, GError **error)
{
  g_autofree char *measured = tf_measure_dup_columns ("e.");
  g_autofree char *sql = g_strconcat ("SELECT ", hints ? HINT_COLUMNS : MARK_COLUMNS, measured,
                                      complexity ? ", " : "",
                                      complexity ? tf_complexity_columns_sql : "",
                                      hints ? HINT_FROM : MARK_FROM,
                                      complexity ? tf_complexity_join_sql : "", where, NULL);
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, sql, "i", key);
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      TfRow *row = read_row (query, complexity);
      g_ptr_array_add (rows, row);
      if (outlines
          && (row->outline = read_outline (ledger, tf_column_text (query, 12), error)) == NULL)
        return FALSE;
    }
  return more == 0;
}

static int
compare_rows (gconstpointer a, gconstpointer b)
{
  const TfRow *p = *(TfRow *const *)a, *q = *(TfRow *const *)b;
  double s = p->measure.time.s, t = q->measure.time.s;
  if (isnan (s) || isnan (t))
    {
      if (isnan (s) != isnan (t))
        return isnan (s) ? 1 : -1;
    }
  else if (s < t || s > t)
    return s < t ? -1 : 1;
  if (p->is_hint != q->is_hint)
    return p->is_hint ? 1 : -1;
  if ((p->outside != NULL) != (q->outside != NULL))
    return p->outside != NULL ? 1 : -1;
  return (p->mark > q->mark) - (p->mark < q->mark);
}

#define OPEN_HINTS                                                                                 \
  " WHERE (?1 = 0 OR h.frame = ?1) AND EXISTS (SELECT 1 FROM point q WHERE q.hint = 1 AND q.mark " \
  "= h.id)"
#define JUDGED_HINTS                                                                               \
  " WHERE (?1 = 0 OR h.frame = ?1) AND (EXISTS (SELECT 1 FROM point q WHERE q.hint = 1 AND "       \
  "q.mark = h.id)"                                                                                 \
  " OR EXISTS (SELECT 1 FROM dropped d WHERE d.hint = h.id) OR EXISTS (SELECT 1 FROM mark m "      \
  "WHERE m.hint = h.id AND m.live))"

/* Of one passage (?1), or of all that are one region with it: both keys are looked up. */
#define IN_PASSAGES(passages)                                                                      \
  " WHERE m.live = 1 AND (m.id IN (SELECT y.mark FROM member y WHERE y.hint = 0 AND y.passage "    \
  "IN (" passages ")) OR m.hint IN (SELECT y.mark FROM member y WHERE y.hint = 1 AND y.passage "   \
  "IN (" passages ")))"
#define HINTS_IN_PASSAGES(passages)                                                                \
  " WHERE h.id IN (SELECT y.mark FROM member y JOIN point q ON q.hint = 1 AND q.mark = y.mark "    \
  "WHERE y.hint = 1 AND y.passage IN (" passages "))"
#define ONE_PASSAGE "?1"
#define SAME_REGION                                                                                \
  "SELECT w.id FROM passage w WHERE w.same = (SELECT z.same FROM passage z WHERE z.id = ?1)"

static const char *
choose_where (const TfRowQuery *query, gboolean hints)
{
  if (query->passage != 0 && hints)
    return query->same ? HINTS_IN_PASSAGES (SAME_REGION) : HINTS_IN_PASSAGES (ONE_PASSAGE);
  if (query->passage != 0)
    return query->same ? IN_PASSAGES (SAME_REGION) : IN_PASSAGES (ONE_PASSAGE);
  if (hints)
    return query->judged_hints ? JUDGED_HINTS : OPEN_HINTS;
  return " WHERE m.live = 1 AND (?1 = 0 OR m.frame = ?1)";
}

/* A mark that follow has not seen is of one region with the others of its number. */
static void
complete_same (const GPtrArray *rows)
{
  g_autoptr (GHashTable) by_region = g_hash_table_new (g_direct_hash, g_direct_equal);
  gboolean missing = FALSE;
  for (guint k = 0; k < rows->len; k++)
    {
      const TfRow *row = g_ptr_array_index (rows, k);
      missing = missing || (row->same == 0 && row->region_key != 0);
      if (row->same != 0 && row->region_key != 0)
        g_hash_table_insert (by_region, GSIZE_TO_POINTER (row->region_key), GSIZE_TO_POINTER (row->same));
    }
  for (guint k = 0; k < rows->len && missing; k++)
    {
      TfRow *row = g_ptr_array_index (rows, k);
      if (row->same == 0 && row->region_key != 0)
        row->same = (gint64)GPOINTER_TO_SIZE (g_hash_table_lookup (by_region, GSIZE_TO_POINTER (row->region_key)));
    }
}

GPtrArray *
tf_ledger_rows (TfLedger *ledger, const TfRowQuery *query, GError **error)
{
  g_return_val_if_fail (ledger != NULL && query != NULL, NULL);
  g_autoptr (GPtrArray) rows = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_row_free);
  gint64 key = query->passage != 0 ? query->passage : query->frame;
  for (int hints = 0; hints < 2; hints++)
    if ((hints ? query->hints : query->marks)
        && !read_rows (ledger, hints, choose_where (query, hints), key, !query->no_outlines,
                       query->complexity, rows, error))
      return NULL;
  if (query->outside && key == 0 && !tf_outside_read_rows (ledger, 0, rows, error))
    return NULL;
  g_ptr_array_sort (rows, compare_rows);
  complete_same (rows);
  return g_steal_pointer (&rows);
}

TfRow *
tf_ledger_row (TfLedger *ledger, gint64 mark, gboolean is_hint, GError **error)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  g_autoptr (GPtrArray) rows = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_row_free);
  if (!read_rows (ledger, is_hint, is_hint ? " WHERE h.id = ?1" : " WHERE m.id = ?1", mark, TRUE,
                  TRUE, rows, error))
    return NULL;
  if (rows->len == 0)
    {
      g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE,
                   _ ("the ledger %s has no mark or hint %" G_GINT64_FORMAT), ledger->path, mark);
      return NULL;
    }
  g_ptr_array_set_free_func (rows, NULL);
  return g_ptr_array_index (rows, 0);
}
