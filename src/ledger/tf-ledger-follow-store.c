/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Passages, members, links and returns into their tables. A passage that is still there keeps its
 * local key, so that what a window has open stays what it is; only what differs is written. */

#include "tf-ledger-follow-private.h"

#include <math.h>
#include <string.h>

GArray *
tf_follow_read_links (TfLedger *ledger, GError **error)
{
  g_autoptr (GArray) links = g_array_new (FALSE, FALSE, sizeof (TfStoredLink));
  g_autoptr (sqlite3_stmt) query = tf_query (
      ledger, error, "SELECT a_hint, a_mark, b_hint, b_mark, kind, overlap FROM linked", "");
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      TfStoredLink link = { { sqlite3_column_int64 (query, 1), sqlite3_column_int (query, 0) != 0 },
                            { sqlite3_column_int64 (query, 3), sqlite3_column_int (query, 2) != 0 },
                            (TfLinkKind)sqlite3_column_int (query, 4),
                            tf_column_double (query, 5) };
      g_array_append_val (links, link);
    }
  return more == 0 ? g_steal_pointer (&links) : NULL;
}

typedef struct
{
  TfLedger *ledger;
  const TfSightings *all;
  const TfPassages *found;
  gint64 *keys; /* of passages */
  gboolean changed;
} Store;

static const TfSight *
sight (const Store *store, guint k)
{
  return &g_array_index (store->all->sights, TfSight, k);
}

static gint64
hint_flag (const TfSight *s)
{
  return s->is_hint != FALSE;
}

/* TRUE when the statement changed a row. */
static void
note_change (Store *store)
{
  store->changed = store->changed || sqlite3_changes (store->ledger->db) > 0;
}

/* -- passages ------------------------------------------------------------------------------- */
/* Two passages may begin with one hint, when two people made different marks of it. */
char **
tf_follow_content_ids (const TfSightings *all, const TfPassages *found, const char *method)
{
  guint n = found->passages->len;
  g_autoptr (GHashTable) taken = g_hash_table_new (g_str_hash, g_str_equal);
  char **ids = g_new0 (char *, n + 1);
  for (guint k = 0; k < n; k++)
    {
      guint first = g_array_index (found->passages, TfPassage, k).first;
      ids[k] = tf_content_id ("tiltfield passage 1", method,
                              g_array_index (all->roots, const char *, first), NULL);
      if (!g_hash_table_add (taken, ids[k]))
        {
          g_free (ids[k]);
          ids[k] = tf_content_id ("tiltfield passage 1", method,
                                  g_array_index (all->sightings, TfSighting, first).id, NULL);
          g_hash_table_add (taken, ids[k]);
        }
    }
  return ids;
}

#define PUT_SQL                                                                                    \
  "INSERT INTO passage (cid, vantage, first_time, last_time, first_hint, first_mark, last_hint, "  \
  "last_mark, n_frames, born, ended, "                                                             \
  "split_from, merged_into, same) VALUES (?1, '', NULL, NULL, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0) ON "   \
  "CONFLICT (cid) DO NOTHING"

static gboolean
put_keys (Store *store, const char *method, GError **error)
{
  g_auto (GStrv) ids = tf_follow_content_ids (store->all, store->found, method);
  for (guint k = 0; k < store->found->passages->len; k++)
    {
      if (!tf_run (store->ledger, error, PUT_SQL, "h", ids[k]))
        return FALSE;
      note_change (store);
      store->keys[k] = tf_value (store->ledger, error, 0, "SELECT id FROM passage WHERE cid = ?1",
                                 "h", ids[k]);
      if (store->keys[k] == 0)
        return FALSE;
    }
  return TRUE;
}

#define FILL_SQL                                                                                   \
  "UPDATE passage SET vantage = ?2, first_time = ?3, last_time = ?4, first_hint = ?5, first_mark " \
  "= ?6, last_hint = ?7, last_mark = ?8, "                                                         \
  "n_frames = ?9, born = ?10, ended = ?11, split_from = ?12, merged_into = ?13, same = ?14 WHERE " \
  "id = ?1 AND (vantage, first_time, "                                                             \
  "last_time, first_hint, first_mark, last_hint, last_mark, n_frames, born, ended, split_from, "   \
  "merged_into, same) IS NOT (?2, ?3, ?4, "                                                        \
  "?5, ?6, ?7, ?8, ?9, ?10, ?11, ?12, ?13, ?14)"

static gint64
key_of (const Store *store, int passage)
{
  return passage >= 0 ? store->keys[passage] : 0;
}

static guint *
count_frames (const Store *store)
{
  guint *counts = g_new0 (guint, store->found->passages->len + 1);
  g_autoptr (GHashTable) seen = g_hash_table_new_full (g_int64_hash, g_int64_equal, g_free, NULL);
  for (guint k = 0; k < store->all->sightings->len; k++)
    {
      gint64 *key = g_new (gint64, 1);
      *key = (gint64)store->found->passage[k] << 32
             | g_array_index (store->all->sightings, TfSighting, k).frame;
      if (g_hash_table_add (seen, key))
        counts[store->found->passage[k]]++;
    }
  return counts;
}

static gboolean
fill_passages (Store *store, GError **error)
{
  g_autofree guint *frames = count_frames (store);
  for (guint k = 0; k < store->found->passages->len; k++)
    {
      const TfPassage *p = &g_array_index (store->found->passages, TfPassage, k);
      const TfSight *first = sight (store, p->first), *last = sight (store, p->last);
      g_autofree char *vantage
          = tf_observer_dup_vantage (&(TfObserver){ .stonyhurst_lon_deg = p->observer_lon_deg });
      if (!tf_run (store->ledger, error, FILL_SQL, "itddiiiiiiiiii", store->keys[k], vantage,
                   g_array_index (store->all->sightings, TfSighting, p->first).time.s,
                   g_array_index (store->all->sightings, TfSighting, p->last).time.s,
                   hint_flag (first), first->mark, hint_flag (last), last->mark, (gint64)frames[k],
                   (gint64)p->born, (gint64)p->ended, key_of (store, p->split_from),
                   key_of (store, p->merged_into), store->keys[p->region]))
        return FALSE;
      note_change (store);
    }
  return TRUE;
}

/* -- members -------------------------------------------------------------------------------- */
#define MEMBER_SQL                                                                                 \
  "INSERT INTO member (hint, mark, passage, time) VALUES (?1, ?2, ?3, ?4) ON CONFLICT (hint, "     \
  "mark) DO UPDATE SET passage = "                                                                 \
  "excluded.passage, time = excluded.time WHERE (passage, time) IS NOT (excluded.passage, "        \
  "excluded.time)"

static gboolean
put_members (Store *store, GError **error)
{
  for (guint k = 0; k < store->all->sights->len; k++)
    {
      const TfSight *s = sight (store, k);
      if (!tf_run (store->ledger, error, MEMBER_SQL, "iiid", hint_flag (s), s->mark,
                   store->keys[store->found->passage[k]],
                   g_array_index (store->all->sightings, TfSighting, k).time.s))
        return FALSE;
      note_change (store);
    }
  gboolean done = tf_run (store->ledger, error,
                          "DELETE FROM member WHERE NOT EXISTS (SELECT 1 FROM point q WHERE q.hint "
                          "= member.hint AND q.mark = member.mark)",
                          "");
  note_change (store);
  done = done
         && tf_run (store->ledger, error,
                    "DELETE FROM passage WHERE id NOT IN (SELECT passage FROM member)", "");
  note_change (store);
  return done;
}

/* -- links, returns, ties ------------------------------------------------------------------- */
static guint
link_hash (gconstpointer link)
{
  const TfStoredLink *l = link;
  return tf_sight_hash (&l->a) * 31 + tf_sight_hash (&l->b) + (guint)l->kind;
}

static gboolean
link_equal (gconstpointer a, gconstpointer b)
{
  const TfStoredLink *p = a, *q = b;
  return p->kind == q->kind && tf_sight_equal (&p->a, &q->a) && tf_sight_equal (&p->b, &q->b);
}

static gboolean
put_link (Store *store, const TfStoredLink *l, GError **error)
{
  return tf_run (store->ledger, error,
                 "INSERT OR IGNORE INTO linked (a_hint, a_mark, b_hint, b_mark, kind, overlap) "
                 "VALUES (?1, ?2, ?3, ?4, ?5, ?6)",
                 "iiiiid", hint_flag (&l->a), l->a.mark, hint_flag (&l->b), l->b.mark,
                 (gint64)l->kind, l->overlap);
}

static gboolean
drop_link (Store *store, const TfStoredLink *l, GError **error)
{
  return tf_run (store->ledger, error,
                 "DELETE FROM linked WHERE a_hint = ?1 AND a_mark = ?2 AND b_hint = ?3 AND b_mark "
                 "= ?4 AND kind = ?5",
                 "iiiii", hint_flag (&l->a), l->a.mark, hint_flag (&l->b), l->b.mark,
                 (gint64)l->kind);
}

static gboolean
put_links (Store *store, const GArray *links, GError **error)
{
  g_autoptr (GArray) stored = tf_follow_read_links (store->ledger, error);
  if (stored == NULL)
    return FALSE;
  g_autoptr (GHashTable) there = g_hash_table_new (link_hash, link_equal);
  for (guint k = 0; k < stored->len; k++)
    g_hash_table_add (there, &g_array_index (stored, TfStoredLink, k));
  for (guint k = 0; k < links->len; k++)
    {
      const TfLink *link = &g_array_index (links, TfLink, k);
      TfStoredLink l
          = { *sight (store, link->a), *sight (store, link->b), link->kind, link->overlap };
      if (!g_hash_table_remove (there, &l) && !put_link (store, &l, error))
        return FALSE;
    }
  GHashTableIter iter;
  gpointer gone;
  g_hash_table_iter_init (&iter, there);
  while (g_hash_table_iter_next (&iter, &gone, NULL))
    if (!drop_link (store, gone, error))
      return FALSE;
  return TRUE;
}

static gboolean
put_returns (Store *store, GError **error)
{
  if (!tf_run (store->ledger, error, "DELETE FROM passage_return", ""))
    return FALSE;
  for (guint k = 0; k < store->found->returns->len; k++)
    {
      const TfReturn *r = &g_array_index (store->found->returns, TfReturn, k);
      if (!tf_run (store->ledger, error,
                   "INSERT INTO passage_return (earlier, later, lon_deg, lat_deg) VALUES (?1, ?2, "
                   "?3, ?4)",
                   "iidd", store->keys[r->earlier], store->keys[r->later], r->lon_deg, r->lat_deg))
        return FALSE;
    }
  return TRUE;
}

gboolean
tf_follow_store (TfLedger *ledger, const TfSightings *all, const GArray *links,
                 const TfPassages *found, const char *method, gboolean *changed, GError **error)
{
  g_autofree gint64 *keys = g_new0 (gint64, found->passages->len + 1);
  Store store = { ledger, all, found, keys, FALSE };
  gboolean ok
      = put_keys (&store, method, error) && fill_passages (&store, error)
        && put_members (&store, error) && put_links (&store, links, error)
        && put_returns (&store, error) && tf_run (ledger, error, "DELETE FROM tied", "")
        && tf_run (ledger, error, "INSERT INTO tied (a, b, cut) SELECT a, b, cut FROM tie", "")
        && tf_run (ledger, error,
                   "INSERT INTO setting (key, value) VALUES ('followed', ?1) ON CONFLICT (key) DO "
                   "UPDATE SET value = ?1",
                   "t", method);
  *changed = store.changed;
  return ok;
}
