/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Rows in blocks as they lie in memory, so that a million of them are read in the time of a copy: points
 * for the wings (table pack), briefs for studies (table brief). Whoever changes a mark, a hint, a
 * measure or an outside table spoils their blocks in the same transaction; before the commit all
 * spoilt blocks are filled anew, so that what is committed is whole. A block of another machine or of
 * an older program is told by its head and read row by row.
 *
 * A block's id: kind (as point.hint) in the bits from 40 up, mark >> bits below. */

#include "tf-ledger-private.h"

#include <string.h>

#include "tf-ledger-brief.h"

enum
{
  KIND_BITS = 40
};

typedef struct
{
  guint32 magic, layout, size, n; /* size: of an item */
} Head;

#define MAGIC 0x50544650u /* reads otherwise on a machine of the other byte order */

/* -- the two tables -------------------------------------------------------------------------- */

static gboolean
append_points (TfLedger *ledger, int kind, gint64 first, gint64 end, GArray *items, GError **error)
{
  g_autoptr (sqlite3_stmt) query
      = tf_query (ledger, error,
                  "SELECT * FROM point WHERE hint = ?1 AND mark >= ?2 AND mark < ?3", "iii",
                  (gint64)kind, first, end);
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      TfPoint point;
      tf_point_read (&point, query);
      g_array_append_val (items, point);
    }
  return more == 0;
}

#define SPOIL "ON CONFLICT (id) DO UPDATE SET data = NULL"
#define INTO(table) "INSERT INTO " table " (id, data) "

/* Scripts of one table whose blocks hold 2^bits rows. */
#define SCRIPTS(table, bits)                                                                       \
  INTO (table) "VALUES ((?1 << 40) | (?2 >> " bits "), NULL) " SPOIL,                                  \
      INTO (table) "SELECT DISTINCT (1 << 40) | (id >> " bits "), NULL FROM hint WHERE frame = ?1 " SPOIL, \
      INTO (table) "SELECT DISTINCT id >> " bits ", NULL FROM mark WHERE frame = ?1 " SPOIL,       \
      INTO (table) "SELECT DISTINCT (2 << 40) | (id >> " bits "), NULL FROM outside_row "          \
                   "WHERE outside = ?1 " SPOIL,                                                    \
      INTO (table) "SELECT DISTINCT (hint << 40) | (mark >> " bits "), NULL FROM point WHERE TRUE " SPOIL, \
      "SELECT id FROM " table " WHERE data IS NULL", "DELETE FROM " table " WHERE id = ?1",        \
      "UPDATE " table " SET data = ?2 WHERE id = ?1", "SELECT id, data FROM " table,               \
      "SELECT count (*) FROM (SELECT DISTINCT (hint << 40) | (mark >> " bits ") AS id FROM point " \
      "WHERE hint < ?1) p WHERE NOT EXISTS (SELECT 1 FROM " table " k WHERE k.id = p.id AND "      \
      "k.data IS NOT NULL)"

static const struct
{
  const char *table;
  int bits;
  guint32 layout; /* rises when the meaning of an item's members changes */
  guint size;     /* of an item */
  int kinds;      /* which have rows in it */
  gboolean (*append) (TfLedger *ledger, int kind, gint64 first, gint64 end, GArray *items,
                      GError **error);
  const char *spoil, *spoil_hints, *spoil_marks, *spoil_outside, *spoil_all, *spoilt, *drop, *fill,
      *all, *missing;
} packs[TF_PACKS] = {
  [TF_PACK_POINT] = { "pack", 8, 1, sizeof (TfPoint), 3, append_points, SCRIPTS ("pack", "8") },
  [TF_PACK_BRIEF] = { "brief", 6, 1, sizeof (TfBrief), 2, tf_brief_append, SCRIPTS ("brief", "6") },
};

G_STATIC_ASSERT (TF_POINT_BLOCK == 1 << 8);
G_STATIC_ASSERT (TF_BRIEF_BLOCK == 1 << 6);

gboolean
tf_pack_spoil (TfLedger *ledger, int kind, gint64 mark, GError **error)
{
  for (int p = 0; p < TF_PACKS; p++)
    if (!tf_run (ledger, error, packs[p].spoil, "ii", (gint64)kind, mark))
      return FALSE;
  return TRUE;
}

gboolean
tf_pack_spoil_frame (TfLedger *ledger, gint64 frame, GError **error)
{
  for (int p = 0; p < TF_PACKS; p++)
    if (!tf_run (ledger, error, packs[p].spoil_hints, "i", frame))
      return FALSE;
  return TRUE;
}

gboolean
tf_pack_spoil_measures (TfLedger *ledger, gint64 frame, GError **error)
{
  return tf_run (ledger, error, packs[TF_PACK_BRIEF].spoil_hints, "i", frame)
         && tf_run (ledger, error, packs[TF_PACK_BRIEF].spoil_marks, "i", frame);
}

gboolean
tf_pack_spoil_outside (TfLedger *ledger, gint64 outside, GError **error)
{
  return tf_run (ledger, error, packs[TF_PACK_POINT].spoil_outside, "i", outside);
}

/* -- one block ------------------------------------------------------------------------------- */

static gboolean
append_rows (TfLedger *ledger, TfPack pack, gint64 id, GArray *items, GError **error)
{
  gint64 kind = id >> KIND_BITS, bits = packs[pack].bits,
         first = (id & (((gint64)1 << KIND_BITS) - 1)) << bits;
  return packs[pack].append (ledger, (int)kind, first, first + ((gint64)1 << bits), items, error);
}

/* The items of a block; NULL when it is not one that this program may read. */
static gconstpointer
open_block (TfPack pack, const guint8 *data, gsize size, guint *n)
{
  Head head;
  if (data == NULL || size < sizeof head)
    return NULL;
  memcpy (&head, data, sizeof head);
  if (head.magic != MAGIC || head.layout != packs[pack].layout || head.size != packs[pack].size
      || size != sizeof head + (gsize)head.n * packs[pack].size)
    return NULL;
  *n = head.n;
  return data + sizeof head;
}

static GByteArray *
make_block (TfLedger *ledger, TfPack pack, gint64 id, GError **error)
{
  g_autoptr (GArray) items = g_array_new (FALSE, FALSE, packs[pack].size);
  if (!append_rows (ledger, pack, id, items, error))
    return NULL;
  const Head head = { MAGIC, packs[pack].layout, packs[pack].size, items->len };
  GByteArray *data = g_byte_array_new ();
  if (items->len == 0)
    return data;
  g_byte_array_append (data, (const guint8 *)&head, sizeof head);
  g_byte_array_append (data, (const guint8 *)items->data, items->len * packs[pack].size);
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
fill_block (TfLedger *ledger, TfPack pack, gint64 id, GError **error)
{
  g_autoptr (GByteArray) data = make_block (ledger, pack, id, error);
  if (data == NULL)
    return FALSE;
  if (data->len == 0)
    return tf_run (ledger, error, packs[pack].drop, "i", id);
  return tf_run (ledger, error, packs[pack].fill, "ib", id, data->data, (gsize)data->len);
}

gboolean
tf_pack_fill (TfLedger *ledger, GError **error)
{
  for (int p = 0; p < TF_PACKS; p++)
    {
      g_autoptr (GArray) spoilt = list_ids (ledger, packs[p].spoilt, error);
      for (guint k = 0; spoilt != NULL && k < spoilt->len; k++)
        if (!fill_block (ledger, (TfPack)p, g_array_index (spoilt, gint64, k), error))
          return FALSE;
      if (spoilt == NULL)
        return FALSE;
    }
  return TRUE;
}

gboolean
tf_pack_spoil_all (TfLedger *ledger, GError **error)
{
  for (int p = 0; p < TF_PACKS; p++)
    if (!tf_run (ledger, error, packs[p].spoil_all, ""))
      return FALSE;
  return TRUE;
}

gboolean
tf_pack_is_there (TfLedger *ledger, TfPack pack)
{
  return tf_value (ledger, NULL, 0, "SELECT 1 FROM sqlite_schema WHERE name = ?1", "t",
                   packs[pack].table)
         == 1;
}

gboolean
tf_pack_each (TfLedger *ledger, TfPack pack, TfPackFunc func, gpointer user, GError **error)
{
  g_autoptr (GArray) block = g_array_new (FALSE, FALSE, packs[pack].size);
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, packs[pack].all, "");
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      guint n;
      const guint8 *data = sqlite3_column_blob (query, 1);
      gconstpointer items = open_block (pack, data, (gsize)sqlite3_column_bytes (query, 1), &n);
      if (items != NULL && (gsize)items % sizeof (gint64) == 0)
        {
          func (items, n, user);
          continue;
        }
      g_array_set_size (block, 0);
      if (items != NULL)
        g_array_append_vals (block, items, n); /* where they lie as their type asks */
      else if (!append_rows (ledger, pack, sqlite3_column_int64 (query, 0), block, error))
        return FALSE;
      func (block->data, block->len, user);
    }
  return more == 0;
}

/* -- check ----------------------------------------------------------------------------------- */

static gboolean
is_right (TfLedger *ledger, TfPack pack, gint64 id, const guint8 *data, gsize size)
{
  g_autoptr (GArray) rows = g_array_new (FALSE, FALSE, packs[pack].size);
  guint n;
  gconstpointer items = open_block (pack, data, size, &n);
  return items != NULL && append_rows (ledger, pack, id, rows, NULL) && n == rows->len
         && (n == 0 || memcmp (items, rows->data, (gsize)n * packs[pack].size) == 0);
}

gboolean
tf_pack_check (TfLedger *ledger, TfPack pack, TfNotes *findings, GError **error)
{
  int missing = (int)tf_value (ledger, error, 0, packs[pack].missing, "i", (gint64)packs[pack].kinds);
  int strange = 0, more = -1;
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, packs[pack].all, "");
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    if (sqlite3_column_type (query, 1) != SQLITE_NULL)
      strange += !is_right (ledger, pack, sqlite3_column_int64 (query, 0),
                            sqlite3_column_blob (query, 1), (gsize)sqlite3_column_bytes (query, 1));
  if (missing > 0 || strange > 0)
    tf_notes_add (findings, "check-points", "ssii", ledger->path, packs[pack].table, missing, strange);
  return more == 0;
}
