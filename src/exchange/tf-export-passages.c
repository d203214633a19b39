/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-export-kinds.h"

#include <math.h>

#include "tf-export-private.h"
#include "tf-ledger-follow.h"

/* Passages and regions: rows of marks put together. */

/* A passage or a region. */
typedef struct
{
  TfExportRow flat; /* first: of the mark that stands for it */
  guint32 key;      /* what its marks share */
  guint n_marks, n_hints, n_frames, n_passages;
  TfTime first, last;
  TfHeld held;
  const TfPassageRow *passage, *split_from, *merged_into, *same; /* NULL: follow has not seen it */
} Group;

#define TF_COLUMNS_ROW Group
#include "tf-columns-table.h"

static char *
dup_id (const TfPassageRow *passage)
{
  return g_strdup (passage != NULL ? passage->content_id : "");
}

static char *
dup_end (const TfPassageRow *passage, gboolean born)
{
  return g_strdup (passage != NULL ? tf_end_name (born ? passage->born : passage->ended) : "");
}

TIME (get_first, r->first)
TIME (get_last, r->last)
NUMBER (get_frames, r->n_frames)
NUMBER (get_marks, r->n_marks)
NUMBER (get_hints, r->n_hints)
NUMBER (get_passages, r->n_passages)
NUMBER (get_held, r->held.of > 0 ? r->held.held : (double)NAN)
NUMBER (get_held_of, r->held.of > 0 ? r->held.of : (double)NAN)
TAKE (get_born, dup_end (r->passage, TRUE))
TAKE (get_ended, dup_end (r->passage, FALSE))
TAKE (get_same, dup_id (r->same))
TAKE (get_split, dup_id (r->split_from))
TAKE (get_merged, dup_id (r->merged_into))

#define OF_BOTH                                                                                                            \
  AS_TEXT ("first_time", "time.start;obs", "its first frame, UTC", get_first),                                             \
  AS_TEXT ("last_time", "time.end;obs", "its last frame, UTC", get_last),                                                  \
  AS_INT ("frames", "meta.number", "frames that it was seen on", get_frames),                                              \
  AS_INT ("marks", "meta.number", "marks, outside rows too", get_marks),                                                   \
  AS_INT ("hints", "meta.number", "hints that nobody has judged", get_hints),                                              \
  AS_INT ("held", "meta.number", "marks from mu 0.5 whose verdict is that of the one that stands for it", get_held),       \
  AS_INT ("held_of", "meta.number", "marks from mu 0.5 that have a verdict", get_held_of)

static const TfColumn passage_columns[] = {
  OF_BOTH,
  AS_TEXT ("born", "meta.code.status", "how it began: on disk, over the limb, far side, unknown", get_born),
  AS_TEXT ("ended", "meta.code.status", "how it ended", get_ended),
  AS_TEXT ("first_passage_of_region", "meta.id.parent", "passages of one region share it", get_same),
  AS_TEXT ("split_from", "meta.id.assoc", "passage that it split off from", get_split),
  AS_TEXT ("merged_into", "meta.id.assoc", "passage that it merged into", get_merged),
  { NULL },
};

static const TfColumn region_columns[] = {
  OF_BOTH,
  AS_INT ("passages", "meta.number", "disk passages, from all vantages", get_passages),
  { NULL },
};

/* -- putting together -------------------------------------------------------------------------- */

typedef struct
{
  const GArray *rows; /* TfExportRow */
  GArray *groups;     /* Group, in the order in which they first come */
  GHashTable *at;     /* key -> index of the group + 1 */
  GHashTable *seen;   /* "key frame", "key passage": counted once */
  gboolean regions;
} Gathering;

static guint32
key_of (const Gathering *all, const TfSampleRow *sample)
{
  return all->regions ? sample->region : sample->passage;
}

static Group *
find_group (Gathering *all, guint32 key)
{
  guint at = GPOINTER_TO_UINT (g_hash_table_lookup (all->at, GUINT_TO_POINTER (key)));
  if (at == 0)
    {
      const Group fresh = { .key = key, .first = TF_TIME_UNKNOWN, .last = TF_TIME_UNKNOWN };
      g_array_append_val (all->groups, fresh);
      at = all->groups->len;
      g_hash_table_insert (all->at, GUINT_TO_POINTER (key), GUINT_TO_POINTER (at));
    }
  return &g_array_index (all->groups, Group, at - 1);
}

static gboolean
is_new (Gathering *all, const char *kind, guint32 key, gint64 other)
{
  return g_hash_table_add (all->seen,
                           g_strdup_printf ("%s %u %" G_GINT64_FORMAT, kind, key, other));
}

/* Greatest flux among those seen well; what a source lacks is no reason against it. */
static gboolean
is_better (const TfSampleRow *a, const TfSampleRow *b)
{
  gboolean well_a = !(a->mu < 0.5), well_b = !(b->mu < 0.5);
  if (well_a != well_b)
    return well_a;
  return a->flux_mx > b->flux_mx || (isnan (b->flux_mx) && !isnan (a->flux_mx));
}

static void
add_row (Gathering *all, const TfExportRow *row)
{
  Group *g = find_group (all, key_of (all, &row->sample));
  TfTime time = row->sample.time;
  if (g->flat.row == NULL || is_better (&row->sample, &g->flat.sample))
    g->flat = *row;
  g->n_hints += row->row->is_hint != 0;
  g->n_marks += row->row->is_hint == 0;
  g->n_frames += row->row->frame != 0 && is_new (all, "frame", g->key, row->row->frame);
  g->n_passages += is_new (all, "passage", g->key, row->sample.passage);
  if (tf_time_is_known (time) && !(g->first.s <= time.s))
    g->first = time;
  if (tf_time_is_known (time) && !(g->last.s >= time.s))
    g->last = time;
}

/* How far the marks hold to the verdict of the one that stands for them. */
static void
hold (Gathering *all)
{
  guint n = all->groups->len;
  g_autoptr (TfSample) every = tf_sample_new (), picks = tf_sample_new ();
  g_autofree TfVerdict *of_every = g_new (TfVerdict, all->rows->len + 1), *of_picks = g_new (TfVerdict, n + 1);
  for (guint k = 0; k < all->rows->len; k++)
    {
      const TfExportRow *row = &g_array_index (all->rows, TfExportRow, k);
      TfSampleRow s = row->sample;
      s.passage = key_of (all, &s);
      tf_sample_add (every, &s);
      of_every[k] = row->verdict;
    }
  for (guint k = 0; k < n; k++)
    {
      const Group *g = &g_array_index (all->groups, Group, k);
      TfSampleRow s = g->flat.sample;
      s.passage = g->key;
      tf_sample_add (picks, &s);
      of_picks[k] = g->flat.verdict;
    }
  g_autofree TfHeld *held = tf_held (every, of_every, picks, of_picks);
  for (guint k = 0; k < n; k++)
    {
      Group *g = &g_array_index (all->groups, Group, k);
      g->held = held[k];
      g->flat.verdict = of_picks[k];
    }
}

static Gathering
gather (const GArray *rows, gboolean regions)
{
  Gathering all = { rows, g_array_new (FALSE, TRUE, sizeof (Group)), g_hash_table_new (NULL, NULL),
                    g_hash_table_new_full (g_str_hash, g_str_equal, g_free, NULL), regions };
  for (guint k = 0; k < rows->len; k++)
    add_row (&all, &g_array_index (rows, TfExportRow, k));
  hold (&all);
  return all;
}

static void
gathering_clear (Gathering *all)
{
  g_clear_pointer (&all->groups, g_array_unref);
  g_clear_pointer (&all->at, g_hash_table_unref);
  g_clear_pointer (&all->seen, g_hash_table_unref);
}
G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (Gathering, gathering_clear)

/* -- what follow knows ------------------------------------------------------------------------- */

static const TfPassageRow *
find_passage (GHashTable *by_id, gint64 id)
{
  return g_hash_table_lookup (by_id, &id);
}

static void
add_passages (Gathering *all, const GPtrArray *passages)
{
  g_autoptr (GHashTable) by_id = g_hash_table_new (g_int64_hash, g_int64_equal);
  for (guint k = 0; k < passages->len; k++)
    g_hash_table_insert (by_id, &((TfPassageRow *)g_ptr_array_index (passages, k))->id,
                         g_ptr_array_index (passages, k));
  for (guint k = 0; k < all->groups->len; k++)
    {
      Group *g = &g_array_index (all->groups, Group, k);
      g->passage = find_passage (by_id, g->flat.row->passage_key);
      if (g->passage == NULL)
        continue;
      g->same = find_passage (by_id, g->passage->same);
      g->split_from = find_passage (by_id, g->passage->split_from);
      g->merged_into = find_passage (by_id, g->passage->merged_into);
    }
}

static gboolean
write_groups (const char *path, TfLedger *ledger, const TfStudy *study, gboolean with_hints,
              gboolean regions, const char *source, guint *n, GError **error)
{
  g_autoptr (GPtrArray) keep = NULL;
  g_autoptr (GArray) rows = tf_export_rows (ledger, study, with_hints, &keep, error);
  g_autoptr (GPtrArray) passages = rows != NULL ? tf_ledger_passages (ledger, error) : NULL;
  if (passages == NULL)
    return FALSE;
  g_auto (Gathering) all = gather (rows, regions);
  add_passages (&all, passages);
  g_autoptr (GArray) facts = tf_facts_new (all.groups, study, source);
  g_auto (TfTableOut) table = { 0 };
  tf_facts_add (facts, "pick",
                g_strdup ("the mark of greatest flux, from mu 0.5 where there is one"));
  tf_table_out_init (&table, regions ? "regions" : "passages", TRUE,
                     regions ? region_columns : passage_columns, all.groups, facts);
  *n = all.groups->len;
  return tf_export_write_table (path, &table, error);
}

gboolean
tf_export_passages (const char *path, TfLedger *ledger, const TfStudy *study, gboolean with_hints,
                    const char *source, guint *n, GError **error)
{
  return write_groups (path, ledger, study, with_hints, FALSE, source, n, error);
}

gboolean
tf_export_regions (const char *path, TfLedger *ledger, const TfStudy *study, gboolean with_hints,
                   const char *source, guint *n, GError **error)
{
  return write_groups (path, ledger, study, with_hints, TRUE, source, n, error);
}
