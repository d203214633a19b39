/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* The point table again, in blocks of points as they lie in memory, so that a million of them are read
 * in the time of a copy. Whoever changes a point spoils its block in the same transaction; before the
 * commit all spoilt blocks are filled anew, so that what is committed is whole. A block of another
 * machine or of an older program is told by its head and read row by row.
 *
 * A block's id: kind (as point.hint) in the bits from 40 up, mark / 256 below. */

#include "tf-ledger-private.h"

#include <string.h>

enum
{
  BLOCK_BITS = 8,
  KIND_BITS = 40,
  LAYOUT = 1 /* rises when the meaning of TfPoint's members changes */
};

typedef struct
{
  guint32 magic, layout, size, n; /* size: of a TfPoint */
} Head;

#define MAGIC 0x50544650u /* reads otherwise on a machine of the other byte order */

#define SPOIL "ON CONFLICT (id) DO UPDATE SET data = NULL"

gboolean
tf_pack_spoil (TfLedger *ledger, int kind, gint64 mark, GError **error)
{
  return tf_run (ledger, error, "INSERT INTO pack (id, data) VALUES (?1, NULL) " SPOIL, "i",
                 (gint64)kind << KIND_BITS | mark >> BLOCK_BITS);
}

gboolean
tf_pack_spoil_frame (TfLedger *ledger, gint64 frame, GError **error)
{
  return tf_run (ledger, error,
                 "INSERT INTO pack (id, data) SELECT DISTINCT (1 << 40) | (id >> 8), NULL FROM hint "
                 "WHERE frame = ?1 " SPOIL,
                 "i", frame);
}

gboolean
tf_pack_spoil_outside (TfLedger *ledger, gint64 outside, GError **error)
{
  return tf_run (ledger, error,
                 "INSERT INTO pack (id, data) SELECT DISTINCT (2 << 40) | (id >> 8), NULL FROM "
                 "outside_row WHERE outside = ?1 " SPOIL,
                 "i", outside);
}

/* -- one block ------------------------------------------------------------------------------- */

static gboolean
append_rows (TfLedger *ledger, gint64 id, GArray *points, GError **error)
{
  gint64 kind = id >> KIND_BITS, first = (id & (((gint64)1 << KIND_BITS) - 1)) << BLOCK_BITS;
  g_autoptr (sqlite3_stmt) query
      = tf_query (ledger, error,
                  "SELECT * FROM point WHERE hint = ?1 AND mark >= ?2 AND mark < ?3", "iii", kind,
                  first, first + (1 << BLOCK_BITS));
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      TfPoint point;
      tf_point_read (&point, query);
      g_array_append_val (points, point);
    }
  return more == 0;
}

static gboolean
append_block (const guint8 *data, gsize size, GArray *points)
{
  Head head;
  if (data == NULL || size < sizeof head)
    return FALSE;
  memcpy (&head, data, sizeof head);
  if (head.magic != MAGIC || head.layout != LAYOUT || head.size != sizeof (TfPoint)
      || size != sizeof head + (gsize)head.n * sizeof (TfPoint))
    return FALSE;
  g_array_append_vals (points, data + sizeof head, head.n);
  return TRUE;
}

static GByteArray *
make_block (TfLedger *ledger, gint64 id, GError **error)
{
  g_autoptr (GArray) points = g_array_new (FALSE, FALSE, sizeof (TfPoint));
  if (!append_rows (ledger, id, points, error))
    return NULL;
  const Head head = { MAGIC, LAYOUT, sizeof (TfPoint), points->len };
  GByteArray *data = g_byte_array_new ();
  if (points->len == 0)
    return data;
  g_byte_array_append (data, (const guint8 *)&head, sizeof head);
  g_byte_array_append (data, (const guint8 *)points->data, points->len * (guint)sizeof (TfPoint));
  return data;
}

/* -- all of them ----------------------------------------------------------------------------- */

static GArray *
list_ids (TfLedger *ledger, const char *sql, GError **error)
{
  g_autoptr (GArray) ids = g_array_new (FALSE, FALSE, sizeof (gint64));
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, sql, "");
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      gint64 id = sqlite3_column_int64 (query, 0);
      g_array_append_val (ids, id);
    }
  return more == 0 ? g_steal_pointer (&ids) : NULL;
}

static gboolean
fill_block (TfLedger *ledger, gint64 id, GError **error)
{
  g_autoptr (GByteArray) data = make_block (ledger, id, error);
  if (data == NULL)
    return FALSE;
  if (data->len == 0)
    return tf_run (ledger, error, "DELETE FROM pack WHERE id = ?1", "i", id);
  return tf_run (ledger, error, "UPDATE pack SET data = ?2 WHERE id = ?1", "ib", id, data->data,
                 (gsize)data->len);
}

gboolean
tf_pack_fill (TfLedger *ledger, GError **error)
{
  g_autoptr (GArray) spoilt = list_ids (ledger, "SELECT id FROM pack WHERE data IS NULL", error);
  for (guint k = 0; spoilt != NULL && k < spoilt->len; k++)
    if (!fill_block (ledger, g_array_index (spoilt, gint64, k), error))
      return FALSE;
  return spoilt != NULL;
}

gboolean
tf_pack_spoil_all (TfLedger *ledger, GError **error)
{
  return tf_run (ledger, error,
                 "INSERT INTO pack (id, data) SELECT DISTINCT (hint << 40) | (mark >> 8), NULL FROM "
                 "point WHERE TRUE " SPOIL,
                 "");
}

gboolean
tf_pack_is_there (TfLedger *ledger)
{
  return tf_value (ledger, NULL, 0, "SELECT 1 FROM sqlite_schema WHERE name = 'pack'", "") == 1;
}

gboolean
tf_pack_read (TfLedger *ledger, GArray *points, GError **error)
{
  g_autoptr (GArray) loose = g_array_new (FALSE, FALSE, sizeof (gint64));
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, "SELECT id, data FROM pack", "");
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      gint64 id = sqlite3_column_int64 (query, 0);
      const guint8 *data = sqlite3_column_blob (query, 1);
      if (!append_block (data, (gsize)sqlite3_column_bytes (query, 1), points))
        g_array_append_val (loose, id);
    }
  for (guint k = 0; more == 0 && k < loose->len; k++)
    if (!append_rows (ledger, g_array_index (loose, gint64, k), points, error))
      return FALSE;
  return more == 0;
}

/* -- check ----------------------------------------------------------------------------------- */

static gboolean
is_right (TfLedger *ledger, gint64 id, const guint8 *data, gsize size)
{
  g_autoptr (GArray) kept = g_array_new (FALSE, FALSE, sizeof (TfPoint));
  g_autoptr (GArray) rows = g_array_new (FALSE, FALSE, sizeof (TfPoint));
  return append_block (data, size, kept) && append_rows (ledger, id, rows, NULL)
         && kept->len == rows->len
         && memcmp (kept->data, rows->data, kept->len * sizeof (TfPoint)) == 0;
}

gboolean
tf_pack_check (TfLedger *ledger, TfNotes *findings, GError **error)
{
  int missing = (int)tf_value (
      ledger, error, 0,
      "SELECT count (*) FROM (SELECT DISTINCT (hint << 40) | (mark >> 8) AS id FROM point) p WHERE NOT "
      "EXISTS (SELECT 1 FROM pack k WHERE k.id = p.id AND k.data IS NOT NULL)",
      "");
  int strange = 0, more = -1;
  g_autoptr (sqlite3_stmt) query
      = tf_query (ledger, error, "SELECT id, data FROM pack WHERE data IS NOT NULL", "");
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    strange += !is_right (ledger, sqlite3_column_int64 (query, 0), sqlite3_column_blob (query, 1),
                          (gsize)sqlite3_column_bytes (query, 1));
  if (missing > 0 || strange > 0)
    tf_notes_add (findings, "check-points", "ssii", ledger->path, "pack", missing, strange);
  return more == 0;
}
