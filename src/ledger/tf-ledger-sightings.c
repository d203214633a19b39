/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Live marks and open hints as sightings, frames as lookouts, links and cuts as ties. Ids are those
 * of the hint or first mark a sighting comes from, so that a passage keeps its name when its first
 * hint is kept, or its first mark is drawn better. */

#include "tf-ledger-follow-private.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-constants.h"

guint
tf_sight_hash (gconstpointer sight)
{
  const TfSight *s = sight;
  gint64 key = s->is_hint ? -s->mark : s->mark;
  return g_int64_hash (&key);
}

gboolean
tf_sight_equal (gconstpointer a, gconstpointer b)
{
  const TfSight *p = a, *q = b;
  return p->mark == q->mark && !p->is_hint == !q->is_hint;
}

int
tf_sightings_find (const TfSightings *all, TfSight sight)
{
  return GPOINTER_TO_INT (g_hash_table_lookup (all->index, &sight)) - 1;
}

TfTime
tf_time_at_sun (TfTime time, const TfFrameInfo *info)
{
  double distance = info->geometry.observer.distance_m;
  return tf_time_add (time, isfinite (distance) ? -distance / TF_LIGHT_M_S : 0.0);
}

void
tf_sightings_free (TfSightings *all)
{
  if (all == NULL)
    return;
  g_string_chunk_free (all->texts);
  g_array_unref (all->sightings);
  g_array_unref (all->sights);
  g_array_unref (all->roots);
  g_hash_table_unref (all->index);
  g_hash_table_unref (all->frames);
  g_array_unref (all->lookouts);
  g_array_unref (all->said);
  g_array_unref (all->ties);
  g_ptr_array_unref (all->outlines);
  g_free (all);
}

static TfSightings *
sightings_new (void)
{
  TfSightings *all = g_new0 (TfSightings, 1);
  all->texts = g_string_chunk_new (4096);
  all->sightings = g_array_new (FALSE, TRUE, sizeof (TfSighting));
  all->sights = g_array_new (FALSE, FALSE, sizeof (TfSight));
  all->roots = g_array_new (FALSE, FALSE, sizeof (const char *));
  all->index = g_hash_table_new_full (tf_sight_hash, tf_sight_equal, g_free, NULL);
  all->frames = g_hash_table_new_full (g_int64_hash, g_int64_equal, g_free, g_free);
  all->lookouts = g_array_new (FALSE, FALSE, sizeof (TfLookout));
  all->said = g_array_new (FALSE, FALSE, sizeof (TfSaid));
  all->ties = g_array_new (FALSE, FALSE, sizeof (TfTie));
  all->outlines = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_outline_unref);
  return all;
}

/* -- frames --------------------------------------------------------------------------------- */
#define FRAMES_SQL                                                                                 \
  "SELECT f.id, f.info, EXISTS (SELECT 1 FROM run u WHERE u.frame = f.id) FROM frame f WHERE "     \
  "f.refusal IS NULL"

static gboolean
load_frames (TfLedger *ledger, TfSightings *all, GError **error)
{
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, FRAMES_SQL, "");
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      TfFrameInfo *info = tf_info_from_text (tf_column_text (query, 1), error);
      if (info == NULL)
        return FALSE;
      const TfObserver *o = &info->geometry.observer;
      gboolean map = tf_geometry_is_map (&info->geometry);
      gint64 *key = g_new (gint64, 1);
      TfLookout *look = g_new (TfLookout, 1);
      *key = sqlite3_column_int64 (query, 0);
      *look = (TfLookout){ tf_time_at_sun (info->time, info), map ? NAN : o->stonyhurst_lon_deg,
                           map ? NAN : o->carrington_lon_deg, map ? NAN : o->b0_deg,
                           info->kind == TF_KIND_DISK };
      tf_frame_info_free (info);
      g_hash_table_insert (all->frames, key, look);
      if (sqlite3_column_int (query, 2))
        g_array_append_val (all->lookouts, *look);
    }
  return more == 0;
}

/* -- sightings ------------------------------------------------------------------------------ */
/* A mark's root: its hint, else the first of the marks it takes the place of. A hint's: itself. */
#define MARKS_SQL                                                                                  \
  "SELECT 0, m.id, m.frame, lower (hex (f.cid)), lower (hex (m.uid)), m.person, m.region, "        \
  "e.time, "                                                                                       \
  "e.carrington_lon_deg, e.lat_deg, e.cmd_deg, f.time, CASE WHEN m.hint IS NOT NULL THEN (SELECT " \
  "lower (hex "                                                                                    \
  "(h.cid)) FROM hint h WHERE h.id = m.hint) WHEN m.follows IS NULL THEN lower (hex (m.uid)) "     \
  "ELSE "                                                                                          \
  "(WITH RECURSIVE chain (id, follows, uid, depth) AS (SELECT m.id, m.follows, m.uid, 0 UNION "    \
  "ALL SELECT "                                                                                    \
  "n.id, n.follows, n.uid, c.depth + 1 FROM chain c JOIN mark n ON n.id = c.follows) SELECT "      \
  "lower (hex (uid)) FROM "                                                                        \
  "chain ORDER BY depth DESC LIMIT 1) END FROM point q JOIN mark m ON m.id = q.mark JOIN measure " \
  "e ON e.id = "                                                                                   \
  "m.measure JOIN frame f ON f.id = m.frame WHERE q.hint = 0"
#define HINTS_SQL                                                                                  \
  "SELECT 1, h.id, h.frame, lower (hex (f.cid)), '', 0, 0, e.time, e.carrington_lon_deg, "         \
  "e.lat_deg, e.cmd_deg, f.time, lower (hex (h.cid)) FROM point q JOIN hint h ON h.id = q.mark "   \
  "JOIN "                                                                                          \
  "measure e ON e.id = h.measure JOIN frame f ON f.id = h.frame WHERE q.hint = 1"

static void
add_sighting (TfSightings *all, sqlite3_stmt *query)
{
  TfSight sight = { sqlite3_column_int64 (query, 1), sqlite3_column_int (query, 0) != 0 };
  gint64 frame = sqlite3_column_int64 (query, 2);
  const TfLookout *look = g_hash_table_lookup (all->frames, &frame);
  const char *root = g_string_chunk_insert (all->texts, tf_column_text (query, 12));
  g_autofree char *id = g_strconcat (root, tf_column_text (query, 4), NULL);
  double travel = look != NULL ? look->time.s - tf_column_double (query, 11) : 0.0;
  TfSighting s = {
    .id = g_string_chunk_insert (all->texts, id),
    .time = { tf_column_double (query, 7) + (isfinite (travel) ? travel : 0.0) },
    .frame = (guint32)frame,
    .frame_id = g_string_chunk_insert_const (all->texts, tf_column_text (query, 3)),
    .lon_deg = tf_column_double (query, 8),
    .lat_deg = tf_column_double (query, 9),
    .observer_lon_deg = look != NULL ? look->observer_lon_deg : NAN,
    .cmd_deg = tf_column_double (query, 10),
    .author = (guint32)sqlite3_column_int64 (query, 5),
    .region = (guint32)sqlite3_column_int64 (query, 6),
  };
  g_array_append_val (all->sightings, s);
  g_array_append_val (all->sights, sight);
  g_array_append_val (all->roots, root);
  g_hash_table_insert (all->index, g_memdup2 (&sight, sizeof sight),
                       GINT_TO_POINTER (all->sights->len));
}

static gboolean
load_sightings (TfLedger *ledger, TfSightings *all, const char *sql, GError **error)
{
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, sql, "");
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    add_sighting (all, query);
  return more == 0;
}

/* -- ties ----------------------------------------------------------------------------------- */
static gboolean
load_said (TfLedger *ledger, TfSightings *all, GError **error)
{
  g_autoptr (sqlite3_stmt) query = tf_query (
      ledger, error, "SELECT lower (hex (a)), lower (hex (b)), cut FROM tie ORDER BY a, b", "");
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      TfSaid said = { g_string_chunk_insert (all->texts, tf_column_text (query, 0)),
                      g_string_chunk_insert (all->texts, tf_column_text (query, 1)),
                      sqlite3_column_int (query, 2) };
      g_array_append_val (all->said, said);
    }
  return more == 0;
}

static void
find_ties (TfLedger *ledger, TfSightings *all)
{
  for (guint k = 0; k < all->said->len; k++)
    {
      const TfSaid *said = &g_array_index (all->said, TfSaid, k);
      TfSight a, b;
      if (!tf_tie_find (ledger, said->a, &a) || !tf_tie_find (ledger, said->b, &b))
        continue;
      int p = tf_sightings_find (all, a), q = tf_sightings_find (all, b);
      TfTie tie = { (guint)p, (guint)q, said->cut };
      if (p >= 0 && q >= 0 && p != q)
        g_array_append_val (all->ties, tie);
    }
}

TfSightings *
tf_sightings_load (TfLedger *ledger, GError **error)
{
  g_autoptr (TfSightings) all = sightings_new ();
  if (!load_frames (ledger, all, error) || !load_sightings (ledger, all, MARKS_SQL, error)
      || !load_sightings (ledger, all, HINTS_SQL, error) || !load_said (ledger, all, error))
    return NULL;
  find_ties (ledger, all);
  return g_steal_pointer (&all);
}

gboolean
tf_sightings_read_outline (TfSightings *all, TfLedger *ledger, guint k, GError **error)
{
  TfSighting *s = &g_array_index (all->sightings, TfSighting, k);
  const TfSight *sight = &g_array_index (all->sights, TfSight, k);
  if (s->outline != NULL)
    return TRUE;
  g_autofree char *text = tf_text_value (ledger, error,
                                         sight->is_hint ? "SELECT outline FROM hint WHERE id = ?1"
                                                        : "SELECT outline FROM mark WHERE id = ?1",
                                         "i", sight->mark);
  TfOutline *outline = text != NULL ? tf_outline_from_text (text, error) : NULL;
  if (outline == NULL)
    return FALSE;
  g_ptr_array_add (all->outlines, outline);
  s->outline = outline;
  return TRUE;
}
