/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Passages from links, and regions from passages. All by joining sets: the order of joining does not
 * matter, and everything is numbered at the end in the order of the sightings. */

#include "tf-follow-private.h"

#include <math.h>
#include <string.h>

#include "tf-constants.h"

#define SYNODIC_DEG_DAY 13.2 /* of active latitudes, seen from the Earth; common practice */
#define BEYOND_LIMB_DEG 100.0

/* -- sets ----------------------------------------------------------------------------------- */
static guint *
sets_new (guint n)
{
  guint *sets = g_new (guint, n + 1);
  for (guint k = 0; k < n; k++)
    sets[k] = k;
  return sets;
}

static guint
set_of (guint *sets, guint k)
{
  while (sets[k] != k)
    k = sets[k] = sets[sets[k]];
  return k;
}

static void
join (guint *sets, guint a, guint b)
{
  guint p = set_of (sets, a), q = set_of (sets, b);
  sets[MAX (p, q)] = MIN (p, q);
}

typedef struct
{
  const TfSighting *sightings;
  guint n;
  const TfLink *links;
  guint n_links;
  const TfTie *ties;
  guint n_ties;
  const TfFollowParams *params;
  guint *order; /* sightings in their order */
} Assembly;

static int
compare_indices (gconstpointer a, gconstpointer b, gpointer data)
{
  const TfSighting *s = data;
  return tf_sighting_compare (&s[*(const guint *)a], &s[*(const guint *)b]);
}

/* A person's cut between two sets. */
static gboolean
is_cut (const Assembly *as, guint *sets, const guint *of, guint p, guint q)
{
  for (guint k = 0; k < as->n_ties; k++)
    if (as->ties[k].cut)
      {
        guint a = of != NULL ? of[as->ties[k].a] : as->ties[k].a;
        guint b = of != NULL ? of[as->ties[k].b] : as->ties[k].b;
        a = set_of (sets, a), b = set_of (sets, b);
        if ((a == p && b == q) || (a == q && b == p))
          return TRUE;
      }
  return FALSE;
}

gboolean
tf_sighting_one_passage (const TfSighting *a, const TfSighting *b, const TfFollowParams *params)
{
  if (!tf_sighting_one_vantage (a->observer_lon_deg, b->observer_lon_deg, params->vantage_deg))
    return FALSE;
  const TfSighting *first = a->time.s <= b->time.s ? a : b;
  double days = fabs (a->time.s - b->time.s) / TF_DAY_S;
  double from = isnan (first->cmd_deg) ? 0.0 : first->cmd_deg;
  return from + SYNODIC_DEG_DAY * days <= BEYOND_LIMB_DEG;
}

/* -- sightings to passages ------------------------------------------------------------------ */
typedef struct
{
  guint region, order, sighting;
} Said;

static int
compare_said (gconstpointer a, gconstpointer b)
{
  const Said *p = a, *q = b;
  if (p->region != q->region)
    return p->region < q->region ? -1 : 1;
  return (p->order > q->order) - (p->order < q->order);
}

/* Sightings of which a person says the region, region by region in order of time. */
static GArray *
list_said (const Assembly *as)
{
  GArray *said = g_array_new (FALSE, FALSE, sizeof (Said));
  for (guint k = 0; k < as->n; k++)
    {
      guint index = as->order[k];
      Said one = { as->sightings[index].region, k, index };
      if (one.region != 0)
        g_array_append_val (said, one);
    }
  g_array_sort (said, compare_said);
  return said;
}

/* Each mark with the last one before it of its region that it can share a passage with. */
static void
join_said (const Assembly *as, guint *sets, const GArray *said)
{
  for (guint k = 1; k < said->len; k++)
    {
      const Said *b = &g_array_index (said, Said, k);
      for (guint back = 1; back <= MIN (k, 50); back++)
        {
          const Said *a = &g_array_index (said, Said, k - back);
          if (a->region != b->region)
            break;
          if (!tf_sighting_one_passage (&as->sightings[a->sighting], &as->sightings[b->sighting],
                                        as->params))
            continue;
          guint p = set_of (sets, a->sighting), q = set_of (sets, b->sighting);
          if (p != q && !is_cut (as, sets, NULL, p, q))
            join (sets, p, q);
          break;
        }
    }
}

static guint *
find_sets (const Assembly *as, const GArray *said)
{
  guint *sets = sets_new (as->n);
  for (guint k = 0; k < as->n_links; k++)
    if (as->links[k].kind == TF_LINK_SAME || as->links[k].kind == TF_LINK_NEXT)
      join (sets, as->links[k].a, as->links[k].b);
  for (guint k = 0; k < as->n_ties; k++)
    if (!as->ties[k].cut
        && tf_sighting_one_passage (&as->sightings[as->ties[k].a], &as->sightings[as->ties[k].b],
                                    as->params))
      join (sets, as->ties[k].a, as->ties[k].b);
  join_said (as, sets, said);
  return sets;
}

static void
add_sighting (TfPassages *found, const Assembly *as, guint *numbers, guint set, guint k)
{
  if (numbers[set] == 0)
    {
      TfPassage fresh
          = { .first = k, .split_from = -1, .merged_into = -1, .region = found->passages->len };
      g_array_append_val (found->passages, fresh);
      numbers[set] = found->passages->len;
    }
  TfPassage *passage = &g_array_index (found->passages, TfPassage, numbers[set] - 1);
  passage->last = k;
  passage->n++;
  /* A running mean, on the circle: observers of one vantage lie close together. */
  double lon = as->sightings[k].observer_lon_deg;
  passage->observer_lon_deg
      = passage->n == 1
            ? lon
            : tf_wrap_180 (passage->observer_lon_deg
                           + tf_wrap_180 (lon - passage->observer_lon_deg) / passage->n);
  found->passage[k] = numbers[set] - 1;
}

static void
number_passages (TfPassages *found, const Assembly *as, guint *sets)
{
  g_autofree guint *numbers = g_new0 (guint, as->n + 1);
  for (guint k = 0; k < as->n; k++)
    add_sighting (found, as, numbers, set_of (sets, as->order[k]), as->order[k]);
}

static gboolean
one_frame (const TfSighting *a, const TfSighting *b)
{
  return strcmp (a->frame_id, b->frame_id) == 0;
}

/* A passage that begins where it overlaps another came out of it; one that ends so went into it. */
static void
find_splits (TfPassages *found, const Assembly *as)
{
  for (guint k = 0; k < as->n_links; k++)
    {
      const TfLink *link = &as->links[k];
      guint pa = found->passage[link->a], pb = found->passage[link->b];
      TfPassage *a = &g_array_index (found->passages, TfPassage, pa);
      TfPassage *b = &g_array_index (found->passages, TfPassage, pb);
      if (pa == pb)
        continue;
      if (link->kind == TF_LINK_FROM
          && one_frame (&as->sightings[link->b], &as->sightings[b->first]))
        b->split_from = (int)pa;
      if (link->kind == TF_LINK_INTO
          && one_frame (&as->sightings[link->a], &as->sightings[a->last]))
        a->merged_into = (int)pb;
    }
}

/* -- passages to regions -------------------------------------------------------------------- */
/* Two vantages: how often two passages overlap, of all the times that each overlaps any. */
static void
join_vantages (const Assembly *as, const TfPassages *found, guint *regions)
{
  guint n = found->passages->len;
  g_autofree guint *all = g_new0 (guint, n + 1);
  g_autoptr (GHashTable) pairs = g_hash_table_new_full (g_int64_hash, g_int64_equal, g_free, NULL);
  for (guint k = 0; k < as->n_links; k++)
    {
      if (as->links[k].kind != TF_LINK_ACROSS)
        continue;
      guint p = found->passage[as->links[k].a], q = found->passage[as->links[k].b];
      gint64 *key = g_new (gint64, 1);
      *key = (gint64)MIN (p, q) << 32 | MAX (p, q);
      guint count = GPOINTER_TO_UINT (g_hash_table_lookup (pairs, key)) + 1;
      g_hash_table_replace (pairs, key, GUINT_TO_POINTER (count));
      all[p]++;
      all[q]++;
    }
  GHashTableIter iter;
  gpointer key, count;
  g_hash_table_iter_init (&iter, pairs);
  while (g_hash_table_iter_next (&iter, &key, &count))
    {
      guint p = (guint)(*(gint64 *)key >> 32), q = (guint)(*(gint64 *)key & 0xffffffff);
      if (2 * GPOINTER_TO_UINT (count) >= MIN (all[p], all[q])
          && !is_cut (as, regions, found->passage, set_of (regions, p), set_of (regions, q)))
        join (regions, p, q);
    }
}

/* What a person said: marks of one region, and links that no one passage can hold. */
static void
join_by_people (const Assembly *as, const TfPassages *found, const GArray *said, guint *regions)
{
  for (guint k = 0; k < as->n_ties; k++)
    if (!as->ties[k].cut)
      join (regions, found->passage[as->ties[k].a], found->passage[as->ties[k].b]);
  for (guint k = 1; k < said->len; k++)
    {
      const Said *a = &g_array_index (said, Said, k - 1), *b = &g_array_index (said, Said, k);
      guint p = found->passage[a->sighting], q = found->passage[b->sighting];
      if (a->region == b->region && set_of (regions, p) != set_of (regions, q)
          && !is_cut (as, regions, found->passage, set_of (regions, p), set_of (regions, q)))
        join (regions, p, q);
    }
}

static void
number_regions (TfPassages *found, const Assembly *as, const GArray *said)
{
  g_autofree guint *regions = sets_new (found->passages->len);
  join_by_people (as, found, said, regions);
  join_vantages (as, found, regions);
  for (guint k = 0; k < found->passages->len; k++)
    g_array_index (found->passages, TfPassage, k).region = set_of (regions, k);
}

TfPassages *
tf_follow_passages (const TfSighting *sightings, guint n, const TfLink *links, guint n_links,
                    const TfTie *ties, guint n_ties, const TfLookout *lookouts, guint n_lookouts,
                    const TfFollowParams *params)
{
  g_return_val_if_fail (params != NULL && (sightings != NULL || n == 0), NULL);
  g_autofree guint *order = sets_new (n);
  g_qsort_with_data (order, (gint)n, sizeof *order, compare_indices, (gpointer)sightings);
  Assembly as = { sightings, n, links, n_links, ties, n_ties, params, order };
  g_autoptr (GArray) said = list_said (&as);
  g_autofree guint *sets = find_sets (&as, said);
  TfPassages *found = g_new0 (TfPassages, 1);
  found->passage = g_new0 (guint, n + 1);
  found->passages = g_array_new (FALSE, FALSE, sizeof (TfPassage));
  found->returns = g_array_new (FALSE, FALSE, sizeof (TfReturn));
  number_passages (found, &as, sets);
  find_splits (found, &as);
  number_regions (found, &as, said);
  /* Returns are looked for among what the limb hides; what returned did not end behind it. */
  tf_follow_ends (found, sightings, lookouts, n_lookouts, params);
  tf_follow_returns (found, sightings, ties, n_ties, params);
  tf_follow_ends (found, sightings, lookouts, n_lookouts, params);
  return found;
}

void
tf_passages_free (TfPassages *passages)
{
  if (passages == NULL)
    return;
  g_free (passages->passage);
  g_array_unref (passages->passages);
  g_array_unref (passages->returns);
  g_free (passages);
}
