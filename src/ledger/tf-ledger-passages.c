/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Reading what follow made. Which region a passage belongs to is looked up from its live marks each
 * time, so that a mark kept since counts. */

#include "tf-ledger-follow-private.h"

#include <string.h>
#include <glib/gi18n-lib.h>

/* The marks of passages, those of hints that follow saw before they were kept included. By passage:
 * "+" keeps the planner from going through all hints. */
#define MARKS_OF(passages)                                                                         \
  "SELECT m.id, m.region, m.frame FROM member b JOIN mark m ON m.id = b.mark AND m.live = 1 "      \
  "WHERE +b.hint = 0 AND b.passage IN (" passages ")"                                              \
  " UNION SELECT m.id, m.region, m.frame FROM member b JOIN mark m ON m.hint = b.mark AND m.live " \
  "= 1 WHERE +b.hint = 1 AND b.passage IN (" passages ")"
/* First in time, then the region with the lower number. */
#define REGION_OF(passages)                                                                        \
  "SELECT k.region FROM (" MARKS_OF (passages) ") k JOIN frame f ON f.id = k.frame "               \
                                               "ORDER BY f.time, k.region LIMIT 1"
#define REGION_SQL                                                                                 \
  "coalesce ((" REGION_OF ("q.id") "), (" REGION_OF (                                              \
      "SELECT w.id FROM passage w WHERE w.same = q.same") "), 0)"

#define PASSAGE_COLUMNS                                                                            \
  "SELECT q.id, lower (hex (q.cid)), q.vantage, (SELECT f.time FROM frame f WHERE f.id = (CASE "   \
  "q.first_hint WHEN 1 THEN (SELECT frame "                                                        \
  "FROM hint WHERE id = q.first_mark) ELSE (SELECT frame FROM mark WHERE id = q.first_mark) "      \
  "END)), (SELECT f.time FROM frame f WHERE f.id "                                                 \
  "= (CASE q.last_hint WHEN 1 THEN (SELECT frame FROM hint WHERE id = q.last_mark) ELSE (SELECT "  \
  "frame FROM mark WHERE id = q.last_mark) "                                                       \
  "END)), q.first_hint, q.first_mark, q.last_hint, q.last_mark, q.n_frames, q.born, q.ended, "     \
  "q.split_from, q.merged_into, q.same, " REGION_SQL ", (SELECT count (*) FROM (" MARKS_OF (       \
      "q.id") ")), (SELECT count (DISTINCT region) FROM "                                          \
              "(" MARKS_OF ("q.id") ")), "                                                         \
                                    "(SELECT count (*) FROM member b "                             \
                                    "JOIN point p ON p.hint = 1 AND "                              \
                                    "p.mark = b.mark WHERE b.hint = 1 "                            \
                                    "AND b.passage = q.id) FROM passage "                          \
                                    "q "

void
tf_passage_row_free (TfPassageRow *row)
{
  if (row == NULL)
    return;
  g_free (row->content_id);
  g_free (row->vantage);
  g_free (row->number);
  g_free (row);
}

static TfSight
column_sight (sqlite3_stmt *query, int hint)
{
  return (TfSight){ sqlite3_column_int64 (query, hint + 1), sqlite3_column_int (query, hint) != 0 };
}

static TfPassageRow *
read_passage (TfLedger *ledger, sqlite3_stmt *query)
{
  TfPassageRow *row = g_new0 (TfPassageRow, 1);
  row->id = sqlite3_column_int64 (query, 0);
  row->content_id = g_strdup (tf_column_text (query, 1));
  row->vantage = g_strdup (tf_column_text (query, 2));
  row->first_time.s = tf_column_double (query, 3);
  row->last_time.s = tf_column_double (query, 4);
  row->first = column_sight (query, 5);
  row->last = column_sight (query, 7);
  row->n_frames = (guint)sqlite3_column_int (query, 9);
  row->born = (TfEnd)sqlite3_column_int (query, 10);
  row->ended = (TfEnd)sqlite3_column_int (query, 11);
  row->split_from = sqlite3_column_int64 (query, 12);
  row->merged_into = sqlite3_column_int64 (query, 13);
  row->same = sqlite3_column_int64 (query, 14);
  row->region = sqlite3_column_int64 (query, 15);
  row->n_marks = (guint)sqlite3_column_int (query, 16);
  row->n_regions = (guint)sqlite3_column_int (query, 17);
  row->n_hints = (guint)sqlite3_column_int (query, 18);
  row->number
      = tf_text_value (ledger, NULL, "SELECT number FROM region WHERE id = ?1", "i", row->region);
  if (row->number == NULL)
    row->number = g_strdup ("");
  return row;
}

GPtrArray *
tf_ledger_passages (TfLedger *ledger, GError **error)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  g_autoptr (GPtrArray) rows = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_passage_row_free);
  g_autoptr (sqlite3_stmt) query
      = tf_query (ledger, error, PASSAGE_COLUMNS "ORDER BY q.first_time, q.cid", "");
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    g_ptr_array_add (rows, read_passage (ledger, query));
  return more == 0 ? g_steal_pointer (&rows) : NULL;
}

TfPassageRow *
tf_ledger_passage (TfLedger *ledger, gint64 passage, GError **error)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  g_autoptr (sqlite3_stmt) query
      = tf_query (ledger, error, PASSAGE_COLUMNS "WHERE q.id = ?1", "i", passage);
  int more = query != NULL ? tf_query_step (ledger, query, error) : -1;
  if (more == 0)
    g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE,
                 _ ("the ledger %s has no passage %" G_GINT64_FORMAT "; follow has made them anew"),
                 ledger->path, passage);
  return more > 0 ? read_passage (ledger, query) : NULL;
}

gint64
tf_ledger_passage_of (TfLedger *ledger, TfSight sight)
{
  g_return_val_if_fail (ledger != NULL, 0);
  gint64 passage
      = tf_value (ledger, NULL, 0, "SELECT passage FROM member WHERE hint = ?1 AND mark = ?2", "ii",
                  (gint64)(sight.is_hint != FALSE), sight.mark);
  if (passage != 0 || sight.is_hint)
    return passage;
  return tf_value (ledger, NULL, 0,
                   "SELECT b.passage FROM mark m JOIN member b ON b.hint = 1 AND b.mark = m.hint "
                   "WHERE m.id = ?1",
                   "i", sight.mark);
}

gint64
tf_ledger_region_of_passage (TfLedger *ledger, gint64 passage)
{
  g_return_val_if_fail (ledger != NULL, 0);
  return tf_value (ledger, NULL, 0, "SELECT " REGION_SQL " FROM passage q WHERE q.id = ?1", "i",
                   passage);
}

/* All passages that are one region with ?1. */
#define SAME_PASSAGES                                                                              \
  "SELECT w.id FROM passage w WHERE w.same = (SELECT same FROM passage WHERE id = ?1)"
#define ONLY_REGION_SQL                                                                            \
  "SELECT CASE count (DISTINCT k.region) WHEN 1 THEN max (k.region) ELSE 0 END FROM (" MARKS_OF (  \
      SAME_PASSAGES) ") k"

gint64
tf_ledger_region_to_join (TfLedger *ledger, gint64 frame, gint64 person, gint64 hint,
                          const TfOutline *outline, char **number)
{
  g_return_val_if_fail (ledger != NULL && outline != NULL, 0);
  gint64 passage = hint != 0 ? tf_ledger_passage_of (ledger, (TfSight){ hint, TRUE }) : 0;
  if (passage == 0)
    passage = tf_ledger_recognise (ledger, frame, outline);
  gint64 region = passage != 0 ? tf_value (ledger, NULL, 0, ONLY_REGION_SQL, "i", passage) : 0;
  gboolean marked = tf_value (ledger, NULL, 0,
                              "SELECT 1 FROM mark WHERE region = ?1 AND frame = ?2 AND person = ?3 "
                              "AND live = 1",
                              "iii", region, frame, person)
                    != 0;
  if (marked)
    region = 0;
  if (number != NULL)
    *number = tf_text_value (ledger, NULL, "SELECT number FROM region WHERE id = ?1", "i", region);
  return region;
}

GPtrArray *
tf_ledger_passage_rows (TfLedger *ledger, gint64 passage, gboolean same, gboolean outlines,
                        GError **error)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  if (passage == 0)
    return g_ptr_array_new_with_free_func ((GDestroyNotify)tf_row_free);
  return tf_ledger_rows (ledger,
                         &(TfRowQuery){ .marks = TRUE,
                                        .hints = TRUE,
                                        .passage = passage,
                                        .same = same,
                                        .no_outlines = !outlines,
                                        .complexity = TRUE },
                         error);
}

/* -- links ---------------------------------------------------------------------------------- */
static void
link_clear (gpointer link)
{
  g_free (((TfPassageLink *)link)->reason);
  g_free (((TfPassageLink *)link)->person);
}

#define IN_PASSAGE(hint, mark)                                                                     \
  "EXISTS (SELECT 1 FROM member b WHERE b.passage = ?1 AND b.hint = " hint " AND b.mark = " mark ")"
#define LINKS_SQL                                                                                  \
  "SELECT l.a_hint, l.a_mark, l.b_hint, l.b_mark, l.kind, l.overlap FROM member c JOIN linked l "  \
  "ON l.a_hint = c.hint AND l.a_mark = c.mark "                                                    \
  "WHERE c.passage = ?1 UNION SELECT l.a_hint, l.a_mark, l.b_hint, l.b_mark, l.kind, l.overlap "   \
  "FROM member c JOIN linked l ON l.b_hint = "                                                     \
  "c.hint AND l.b_mark = c.mark WHERE c.passage = ?1"

static gboolean
read_hand_links (TfLedger *ledger, gint64 passage, GArray *links, GError **error)
{
  g_autoptr (sqlite3_stmt) query
      = tf_query (ledger, error,
                  "SELECT lower (hex (t.a)), lower (hex (t.b)), t.reason, p.name FROM tie t JOIN "
                  "person p ON p.id = t.person WHERE t.cut = 0 ORDER BY t.clock",
                  "");
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      TfPassageLink link = { .kind = TF_LINK_HAND, .overlap = (double)__builtin_nan ("") };
      if (!tf_tie_find (ledger, tf_column_text (query, 0), &link.a)
          || !tf_tie_find (ledger, tf_column_text (query, 1), &link.b)
          || (tf_ledger_passage_of (ledger, link.a) != passage
              && tf_ledger_passage_of (ledger, link.b) != passage))
        continue;
      link.reason = g_strdup (tf_column_text (query, 2));
      link.person = g_strdup (tf_column_text (query, 3));
      g_array_append_val (links, link);
    }
  return more == 0;
}

GArray *
tf_ledger_passage_links (TfLedger *ledger, gint64 passage, GError **error)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  g_autoptr (GArray) links = g_array_new (FALSE, TRUE, sizeof (TfPassageLink));
  g_array_set_clear_func (links, link_clear);
  {
    g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, LINKS_SQL, "i", passage);
    int more = -1;
    while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
      {
        TfPassageLink link = { column_sight (query, 0),
                               column_sight (query, 2),
                               (TfLinkKind)sqlite3_column_int (query, 4),
                               tf_column_double (query, 5),
                               NULL,
                               NULL };
        g_array_append_val (links, link);
      }
    if (more != 0)
      return NULL;
  }
  return read_hand_links (ledger, passage, links, error) ? g_steal_pointer (&links) : NULL;
}

/* -- returns -------------------------------------------------------------------------------- */
#define RETURNS_SQL                                                                                \
  "SELECT r.earlier, r.later, p.last_hint, p.last_mark, q.first_hint, q.first_mark, r.lon_deg, "   \
  "r.lat_deg FROM passage_return r JOIN passage p "                                                \
  "ON p.id = r.earlier JOIN passage q ON q.id = r.later WHERE ?1 = 0 OR r.earlier = ?1 OR "        \
  "r.later = ?1 ORDER BY q.first_time, q.cid"

GArray *
tf_ledger_returns (TfLedger *ledger, gint64 passage, GError **error)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  g_autoptr (GArray) offers = g_array_new (FALSE, FALSE, sizeof (TfReturnOffer));
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, RETURNS_SQL, "i", passage);
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      TfReturnOffer offer = { sqlite3_column_int64 (query, 0), sqlite3_column_int64 (query, 1),
                              column_sight (query, 2),         column_sight (query, 4),
                              tf_column_double (query, 6),     tf_column_double (query, 7) };
      g_array_append_val (offers, offer);
    }
  return more == 0 ? g_steal_pointer (&offers) : NULL;
}
