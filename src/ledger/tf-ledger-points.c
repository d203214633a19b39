/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* The narrow table behind the wings: one row for every live mark, every open hint and every row of
 * an outside table (hint: 0, 1, 2). A hint is
 * open when it is of the newest rule run on its frame, no live mark came from it and nobody
 * dropped it. */

#include "tf-ledger-private.h"
#include "tf-many.h"

#include <math.h>
#include <string.h>

#define MEASURED                                                                                   \
  " e.time, e.year, e.lat_deg, e.flux_unsigned_mx, e.axis_tilt_deg, e.mu, e.cmd_deg, "             \
  "e.separation_deg, e.imbalance,"                                                                 \
  " e.leading, e.leading_sure,"
#define MEASURED_2                                                                                 \
  " e.axis_tilt_deg IS NULL AND e.axis_bearing_deg IS NOT NULL,"                                   \
  " coalesce (1 IN (coalesce (e.witness_a, 0), coalesce (e.witness_b, 0), coalesce (e.witness_c, " \
  "0))"                                                                                            \
  " AND -1 IN (coalesce (e.witness_a, 0), coalesce (e.witness_b, 0), coalesce (e.witness_c, 0)), " \
  "0)"
#define MARK_POINTS                                                                                \
  "SELECT 0, m.id, m.frame, m.region," MEASURED " e.leading = 0," MEASURED_2                       \
  " FROM mark m JOIN measure e ON e.id = m.measure WHERE m.live = 1"
#define HINT_POINTS                                                                                \
  "SELECT 1, h.id, h.frame, 0," MEASURED " h.unipolar," MEASURED_2                                 \
  " FROM hint h JOIN measure e ON e.id = h.measure"                                                \
  " WHERE h.rule = (SELECT u.rule FROM run u WHERE u.frame = h.frame ORDER BY u.id DESC LIMIT 1)"  \
  " AND NOT EXISTS (SELECT 1 FROM dropped d WHERE d.hint = h.id)"                                  \
  " AND NOT EXISTS (SELECT 1 FROM mark m WHERE m.hint = h.id AND m.live = 1)"

/* Rows of outside tables: no frame; the region is the first row's local key, apart from marks'. What
 * the source calls a hint is none of them. */
#define OUTSIDE_POINTS                                                                             \
  "SELECT 2, o.id, 0, 1073741824 + o.id - o.ordinal + o.grp, o.time, o.year, o.lat_deg, "          \
  "o.flux_unsigned_mx, o.axis_tilt_deg, o.mu, o.cmd_deg, o.separation_deg, o.imbalance, "          \
  "o.leading, o.leading_sure, 0, "                                                                 \
  "coalesce (o.leading_lat_deg * o.following_lat_deg < 0, 0), -1 FROM outside_row o "              \
  "WHERE o.hinted = 0"

const char tf_point_all_sql[]
    = MARK_POINTS " UNION ALL " HINT_POINTS " UNION ALL " OUTSIDE_POINTS;

gboolean
tf_point_refresh_outside (TfLedger *ledger, gint64 outside, GError **error)
{
  return tf_pack_spoil_outside (ledger, outside, error)
         && tf_run (ledger, error,
                 "DELETE FROM point WHERE hint = 2 AND mark IN (SELECT id FROM outside_row WHERE "
                 "outside = ?1)",
                 "i", outside)
         && tf_run (ledger, error, "INSERT INTO point " OUTSIDE_POINTS " AND o.outside = ?1", "i",
                    outside);
}

gboolean
tf_point_refresh_mark (TfLedger *ledger, gint64 mark, GError **error)
{
  return tf_pack_spoil (ledger, 0, mark, error)
         && tf_run (ledger, error, "DELETE FROM point WHERE hint = 0 AND mark = ?1", "i", mark)
         && tf_run (ledger, error, "INSERT INTO point " MARK_POINTS " AND m.id = ?1", "i", mark);
}

gboolean
tf_point_refresh_hint (TfLedger *ledger, gint64 hint, GError **error)
{
  return tf_pack_spoil (ledger, 1, hint, error)
         && tf_run (ledger, error, "DELETE FROM point WHERE hint = 1 AND mark = ?1", "i", hint)
         && tf_run (ledger, error, "INSERT INTO point " HINT_POINTS " AND h.id = ?1", "i", hint);
}

/* All hints of a frame: after a rule was run. */
gboolean
tf_point_refresh_frame (TfLedger *ledger, gint64 frame, GError **error)
{
  return tf_pack_spoil_frame (ledger, frame, error)
         && tf_run (ledger, error, "DELETE FROM point WHERE hint = 1 AND frame = ?1", "i", frame)
         && tf_run (ledger, error, "INSERT INTO point " HINT_POINTS " AND h.frame = ?1", "i",
                    frame);
}

/* Byte by byte the same for the same row, so that packs can be compared. */
void
tf_point_read (TfPoint *point, sqlite3_stmt *query)
{
  memset (point, 0, sizeof *point);
  point->hint = sqlite3_column_int (query, 0) == 1;
  point->outside = sqlite3_column_int (query, 0) == 2;
  point->mark = sqlite3_column_int64 (query, 1);
  point->frame = sqlite3_column_int64 (query, 2);
  point->region = (guint32)sqlite3_column_int64 (query, 3);
  point->time.s = tf_column_double (query, 4);
  point->year = tf_column_double (query, 5);
  point->lat_deg = (float)tf_column_double (query, 6);
  point->flux_mx = (float)tf_column_double (query, 7);
  point->tilt_deg = (float)tf_column_double (query, 8);
  point->mu = (float)tf_column_double (query, 9);
  point->cmd_deg = (float)tf_column_double (query, 10);
  point->separation_deg = (float)tf_column_double (query, 11);
  point->imbalance = (float)tf_column_double (query, 12);
  point->leading = (gint8)sqlite3_column_int (query, 13);
  point->leading_sure = (gint8)sqlite3_column_int (query, 14);
  point->unipolar = (gint8)sqlite3_column_int (query, 15);
  point->straddles = (gint8)sqlite3_column_int (query, 16);
  point->witnesses_differ = (gint8)sqlite3_column_int (query, 17);
}

static int
compare_numbers (double a, double b)
{
  if (isnan (a) || isnan (b))
    return isnan (a) - isnan (b);
  return (a > b) - (a < b);
}

static int
compare_points (gconstpointer a, gconstpointer b)
{
  const TfPoint *p = a, *q = b;
  int by_time = compare_numbers (p->time.s, q->time.s);
  if (by_time != 0)
    return by_time;
  if (p->outside != q->outside)
    return p->outside - q->outside;
  return p->hint != q->hint ? p->hint - q->hint : (p->mark > q->mark) - (p->mark < q->mark);
}

/* Merges neighbouring runs that are in order until one is left: cheap for what nearly is, as points
 * are: by mark they come in time, and marks and hints are two runs. */
static guint
end_of_run (const TfPoint *points, guint from, guint n)
{
  guint end = from + 1;
  while (end < n && compare_points (&points[end - 1], &points[end]) <= 0)
    end++;
  return MIN (end, n);
}

static void
merge (const TfPoint *a, guint n, const TfPoint *b, guint m, TfPoint *out)
{
  guint i = 0, j = 0;
  while (i < n && j < m)
    *out++ = compare_points (&a[i], &b[j]) <= 0 ? a[i++] : b[j++];
  memcpy (out, a + i, (n - i) * sizeof *out);
  memcpy (out + (n - i), b + j, (m - j) * sizeof *out);
}

static void
sort_points (GArray *points)
{
  guint n = points->len;
  TfPoint *from = (TfPoint *)(gpointer)points->data;
  if (n < 2 || end_of_run (from, 0, n) == n)
    return;
  g_autofree TfPoint *other = tf_new_many (TfPoint, n);
  TfPoint *to = other;
  for (guint runs = 2; runs > 1;)
    {
      runs = 0;
      for (guint at = 0; at < n; runs++)
        {
          guint middle = end_of_run (from, at, n), end = middle < n ? end_of_run (from, middle, n) : n;
          merge (from + at, middle - at, from + middle, end - middle, to + at);
          at = end;
        }
      TfPoint *swap = from;
      from = to;
      to = swap;
    }
  if (from == other)
    memcpy (points->data, other, n * sizeof *other);
}

static gboolean
read_rows (TfLedger *ledger, GArray *points, GError **error)
{
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, "SELECT * FROM point", "");
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      TfPoint point;
      tf_point_read (&point, query);
      g_array_append_val (points, point);
    }
  return more == 0;
}

static void
take_block (gconstpointer items, guint n, gpointer points)
{
  g_array_append_vals (points, items, n);
}

GArray *
tf_ledger_points (TfLedger *ledger, GError **error)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  /* not in an older one that cannot be written */
  gboolean packed = tf_pack_is_there (ledger, TF_PACK_POINT);
  gint64 n = packed ? tf_value (ledger, NULL, 0, "SELECT count (*) FROM pack", "") * TF_POINT_BLOCK : 0;
  g_autoptr (GArray) points = tf_array_of_many (sizeof (TfPoint), (guint)CLAMP (n, 1, 1 << 22));
  if (!(packed ? tf_pack_each (ledger, TF_PACK_POINT, take_block, points, error)
               : read_rows (ledger, points, error)))
    return NULL;
  sort_points (points);
  return g_steal_pointer (&points);
}
