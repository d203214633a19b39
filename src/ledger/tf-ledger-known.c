/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Which known regions should be on a frame, and which of them an outline is: by carried outlines,
 * with the rotation law and the options that follow used last. */

#include "tf-ledger-follow-private.h"

#include <math.h>

#include "tf-constants.h"
#include "tf-rotation.h"

void
tf_known_free (TfKnown *known)
{
  if (known == NULL)
    return;
  g_clear_pointer (&known->ghost, tf_outline_unref);
  g_free (known);
}

static TfOutline *
read_outline (TfLedger *ledger, TfSight sight)
{
  g_autofree char *text = tf_text_value (ledger, NULL,
                                         sight.is_hint ? "SELECT outline FROM hint WHERE id = ?1"
                                                       : "SELECT outline FROM mark WHERE id = ?1",
                                         "i", sight.mark);
  return text != NULL ? tf_outline_from_text (text, NULL) : NULL;
}

/* A member of each passage near a time; with what it takes to judge it. */
typedef struct
{
  gint64 passage;
  TfSight sight;
  gint64 frame;
  double time_s; /* at the Sun */
} Near;

#define MEMBER_FRAME                                                                               \
  "(CASE b.hint WHEN 1 THEN (SELECT frame FROM hint WHERE id = b.mark) ELSE (SELECT frame FROM "   \
  "mark WHERE id = b.mark) END)"
#define LIVE "EXISTS (SELECT 1 FROM point p WHERE p.hint = b.hint AND p.mark = b.mark)"
#define NEAR_SQL                                                                                   \
  "SELECT b.passage, b.hint, b.mark, b.time, " MEMBER_FRAME                                        \
  " FROM member b WHERE b.time >= ?1 AND b.time <= ?2 AND " LIVE                                   \
  " ORDER BY b.time, b.hint, b.mark"

static GArray *
list_near (TfLedger *ledger, double from, double to, GError **error)
{
  g_autoptr (GArray) near_ones = g_array_new (FALSE, FALSE, sizeof (Near));
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, NEAR_SQL, "dd", from, to);
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      Near one = { sqlite3_column_int64 (query, 0),
                   { sqlite3_column_int64 (query, 2), sqlite3_column_int (query, 1) != 0 },
                   sqlite3_column_int64 (query, 4),
                   tf_column_double (query, 3) };
      g_array_append_val (near_ones, one);
    }
  return more == 0 ? g_steal_pointer (&near_ones) : NULL;
}

typedef struct
{
  TfFrameRow *row;
  double time_s; /* at the Sun */
  const TfObserver *observer;
  TfFollowParams params;
} Here;

static void
here_clear (Here *here)
{
  g_clear_pointer (&here->row, tf_frame_row_free);
}
G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (Here, here_clear)

static gboolean
here_init (Here *here, TfLedger *ledger, gint64 frame, GError **error)
{
  here->row = tf_ledger_frame (ledger, frame, error);
  if (here->row == NULL)
    return FALSE;
  here->time_s = tf_time_at_sun (here->row->info->time, here->row->info).s;
  here->observer = &here->row->info->geometry.observer;
  tf_ledger_follow_params (ledger, &here->params);
  return TRUE;
}

static gboolean
one_vantage (TfLedger *ledger, const Here *here, gint64 frame, GHashTable *frames)
{
  gpointer answer;
  if (g_hash_table_lookup_extended (frames, GSIZE_TO_POINTER (frame), NULL, &answer))
    return GPOINTER_TO_INT (answer);
  g_autoptr (TfFrameRow) row = tf_ledger_frame (ledger, frame, NULL);
  double there = row != NULL ? row->info->geometry.observer.stonyhurst_lon_deg : NAN,
         own = here->observer->stonyhurst_lon_deg;
  gboolean one = isnan (own) || isnan (there)
                     ? isnan (own) && isnan (there)
                     : fabs (tf_wrap_180 (own - there)) <= here->params.vantage_deg;
  g_hash_table_insert (frames, GSIZE_TO_POINTER (frame), GINT_TO_POINTER (one));
  return one;
}

/* The outline carried to the frame: NULL when its place is beyond the limb. */
static TfOutline *
carry (TfLedger *ledger, const Here *here, const Near *from)
{
  g_autoptr (TfOutline) outline = read_outline (ledger, from->sight);
  if (outline == NULL)
    return NULL;
  TfTime to = tf_time_add (tf_outline_get_time (outline), here->time_s - from->time_s);
  g_autoptr (TfOutline) ghost = tf_outline_carry (outline, to, (guint)here->params.law);
  double lon, lat, radius, x, y;
  if (ghost == NULL)
    return NULL;
  tf_outline_get_cap (ghost, &lon, &lat, &radius);
  return tf_geometry_sun_to_pixel (&here->row->info->geometry, lon, lat, &x, &y, NULL)
             ? g_steal_pointer (&ghost)
             : NULL;
}

static TfKnown *
find_known (GPtrArray *list, gint64 passage)
{
  for (guint k = 0; k < list->len; k++)
    if (((TfKnown *)g_ptr_array_index (list, k))->passage == passage)
      return g_ptr_array_index (list, k);
  return NULL;
}

/* What is on the frame itself of a passage, and how well it fits the ghost. */
static void
add_here (TfLedger *ledger, const Here *here, GPtrArray *list, const Near *own)
{
  TfKnown *known = find_known (list, own->passage);
  if (known == NULL)
    return;
  g_autoptr (TfOutline) outline = read_outline (ledger, own->sight);
  known->here = own->sight;
  known->overlap
      = outline != NULL ? tf_follow_overlap (known->ghost, outline, 0.0, &here->params) : NAN;
}

GPtrArray *
tf_ledger_known (TfLedger *ledger, gint64 frame, GError **error)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  g_auto (Here) here = { 0 };
  if (!here_init (&here, ledger, frame, error))
    return NULL;
  g_autoptr (GPtrArray) list = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_known_free);
  g_autoptr (GArray) near_ones
      = list_near (ledger, here.time_s - here.params.gap_days * TF_DAY_S, here.time_s, error);
  if (near_ones == NULL)
    return NULL;
  g_autoptr (GHashTable) frames = g_hash_table_new (g_direct_hash, g_direct_equal);
  for (guint k = near_ones->len; k-- > 0;)
    {
      const Near *one = &g_array_index (near_ones, Near, k);
      if (one->frame == frame || find_known (list, one->passage) != NULL
          || !one_vantage (ledger, &here, one->frame, frames))
        continue;
      TfOutline *ghost = carry (ledger, &here, one);
      if (ghost == NULL)
        continue;
      TfKnown *known = g_new0 (TfKnown, 1);
      *known = (TfKnown){ one->passage, one->sight, { 0 }, ghost, NAN };
      g_ptr_array_add (list, known);
    }
  for (guint k = near_ones->len; k-- > 0;)
    if (g_array_index (near_ones, Near, k).frame == frame)
      add_here (ledger, &here, list, &g_array_index (near_ones, Near, k));
  return g_steal_pointer (&list);
}

/* Overlap counts; of equal ones the nearer in time. */
gint64
tf_ledger_recognise (TfLedger *ledger, gint64 frame, const TfOutline *outline)
{
  g_return_val_if_fail (ledger != NULL && outline != NULL, 0);
  g_auto (Here) here = { 0 };
  if (!here_init (&here, ledger, frame, NULL))
    return 0;
  double gap = here.params.gap_days * TF_DAY_S;
  g_autoptr (GArray) near_ones = list_near (ledger, here.time_s - gap, here.time_s + gap, NULL);
  g_autoptr (GHashTable) frames = g_hash_table_new (g_direct_hash, g_direct_equal);
  g_autoptr (GHashTable) nearest = g_hash_table_new (g_direct_hash, g_direct_equal);
  gint64 best = 0;
  double most = here.params.share;
  for (guint k = 0; near_ones != NULL && k < near_ones->len; k++)
    {
      const Near *one = &g_array_index (near_ones, Near, k);
      const Near *other = g_hash_table_lookup (nearest, GSIZE_TO_POINTER (one->passage));
      if (one_vantage (ledger, &here, one->frame, frames)
          && (other == NULL
              || fabs (one->time_s - here.time_s) < fabs (other->time_s - here.time_s)))
        g_hash_table_insert (nearest, GSIZE_TO_POINTER (one->passage), (gpointer)one);
    }
  for (guint k = 0; near_ones != NULL && k < near_ones->len; k++)
    {
      const Near *one = &g_array_index (near_ones, Near, k);
      if (g_hash_table_lookup (nearest, GSIZE_TO_POINTER (one->passage)) != one)
        continue;
      g_autoptr (TfOutline) its = read_outline (ledger, one->sight);
      double share = its != NULL
                         ? tf_follow_overlap (its, outline, here.time_s - one->time_s, &here.params)
                         : 0.0;
      if (share > most)
        {
          most = share;
          best = one->passage;
        }
    }
  return best;
}
