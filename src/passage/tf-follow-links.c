/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Links by mutual best overlap.
 *
 * Sightings are taken in order of time, frame id and own id, so that the result does not depend on
 * the order in which they came. On each frame what several people drew of one region is one node.
 * For a node a, its partner forward is its mutual best overlap on the earliest later frame that has
 * one within the gap; a node's partner back likewise; a and b are linked when each is the other's
 * partner. Frames on which a region was missed, and cut-outs, are so passed over. */

#include "tf-follow-private.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "tf-constants.h"

typedef struct
{
  double time_s, observer_lon_deg;
  guint first, n; /* nodes, as a run of Follow.nodes */
} Frame;

typedef struct
{
  const TfSighting *sightings;
  const TfFollowParams *params;
  GHashTable *cuts; /* pairs of sightings */
  GArray *nodes;    /* guint: the sighting that stands for the node, frame after frame */
  GArray *frames;   /* Frame */
  TfShape *shapes;  /* of sightings; made when first asked for */
  GArray *links;
} Follow;

/* -- order ---------------------------------------------------------------------------------- */
int
tf_sighting_compare (const TfSighting *a, const TfSighting *b)
{
  if (isnan (a->time.s) != isnan (b->time.s))
    return isnan (a->time.s) ? 1 : -1;
  if (a->time.s < b->time.s || a->time.s > b->time.s)
    return a->time.s < b->time.s ? -1 : 1;
  int by_frame = strcmp (a->frame_id, b->frame_id);
  return by_frame != 0 ? by_frame : strcmp (a->id, b->id);
}

static int
compare_indices (gconstpointer a, gconstpointer b, gpointer data)
{
  const TfSighting *s = data;
  return tf_sighting_compare (&s[*(const guint *)a], &s[*(const guint *)b]);
}

/* Two unknown places count as one: maps are linked with maps only. */
gboolean
tf_sighting_one_vantage (double lon_a_deg, double lon_b_deg, double within_deg)
{
  if (isnan (lon_a_deg) || isnan (lon_b_deg))
    return isnan (lon_a_deg) && isnan (lon_b_deg);
  return fabs (tf_wrap_180 (lon_a_deg - lon_b_deg)) <= within_deg;
}

/* -- overlap -------------------------------------------------------------------------------- */
static const TfShape *
shape_of (Follow *follow, guint k)
{
  if (follow->shapes[k].points == NULL)
    tf_shape_init (&follow->shapes[k], follow->sightings[k].outline);
  return &follow->shapes[k];
}

static gint64 *
pair_key (guint a, guint b)
{
  gint64 *key = g_new (gint64, 1);
  *key = (gint64)MIN (a, b) << 32 | MAX (a, b);
  return key;
}

static gboolean
is_cut (const Follow *follow, guint a, guint b)
{
  gint64 key = (gint64)MIN (a, b) << 32 | MAX (a, b);
  return g_hash_table_contains (follow->cuts, &key);
}

/* Share of the smaller that both cover, and how alike the two are: a small outline inside a large
 * one has a share of 1 and is little alike. */
static double
compare_shapes (Follow *follow, guint earlier, guint later, double *alike)
{
  const TfShape *a = shape_of (follow, earlier), *b = shape_of (follow, later);
  double seconds = follow->sightings[later].time.s - follow->sightings[earlier].time.s;
  double common = tf_shape_common (a, b, seconds, (guint)follow->params->law);
  *alike = common / sqrt (a->area_deg2 * b->area_deg2);
  return common / MIN (a->area_deg2, b->area_deg2);
}

/* The node of @frame that overlaps sighting @k best; -1 where none does enough. */
static int
best_on (Follow *follow, guint k, const Frame *frame, double *share)
{
  int best = -1;
  double most = 0.0;
  for (guint m = frame->first; m < frame->first + frame->n; m++)
    {
      guint other = g_array_index (follow->nodes, guint, m);
      gboolean before = tf_sighting_compare (&follow->sightings[k], &follow->sightings[other]) < 0;
      double alike, its = is_cut (follow, k, other) ? 0.0
                                                    : compare_shapes (follow, before ? k : other,
                                                                      before ? other : k, &alike);
      if (its < follow->params->share || !(alike > most))
        continue;
      best = (int)other;
      most = alike;
      *share = its;
    }
  return best;
}

static void
add_link (Follow *follow, guint a, guint b, TfLinkKind kind, double overlap)
{
  TfLink link = { a, b, kind, overlap };
  g_array_append_val (follow->links, link);
}

/* -- nodes ---------------------------------------------------------------------------------- */
/* The one that stands for several: a person's before a rule's, then the least id. */
static gboolean
stands_before (const TfSighting *a, const TfSighting *b)
{
  if ((a->author != 0) != (b->author != 0))
    return a->author != 0;
  return strcmp (a->id, b->id) < 0;
}

/* Whether @b is the best of its author's outlines for @a on their frame. */
static gboolean
is_best_of_author (Follow *follow, const guint *run, guint n, guint a, guint b)
{
  double alike, own;
  compare_shapes (follow, a, b, &own);
  for (guint k = 0; k < n; k++)
    if (run[k] != b && follow->sightings[run[k]].author == follow->sightings[b].author)
      {
        compare_shapes (follow, a, run[k], &alike);
        if (alike > own)
          return FALSE;
      }
  return TRUE;
}

static gboolean
is_same (Follow *follow, const guint *run, guint n, guint a, guint b, double *share)
{
  const TfSighting *p = &follow->sightings[a], *q = &follow->sightings[b];
  double alike;
  if (p->author == q->author || is_cut (follow, a, b))
    return FALSE;
  *share = compare_shapes (follow, a, b, &alike);
  if (p->region != 0 && p->region == q->region)
    return TRUE;
  return *share >= follow->params->same_share && is_best_of_author (follow, run, n, a, b)
         && is_best_of_author (follow, run, n, b, a);
}

/* The sightings of one frame, by id: those of one region become one node. */
static void
add_nodes (Follow *follow, const guint *run, guint n)
{
  const TfSighting *s = follow->sightings;
  g_autofree guint *stands = g_new (guint, n);
  gboolean one_author = TRUE;
  for (guint k = 0; k < n; k++)
    {
      stands[k] = k;
      one_author = one_author && s[run[k]].author == s[run[0]].author;
    }
  for (guint a = 0; a < n && !one_author; a++)
    for (guint b = a + 1; b < n; b++)
      {
        double share;
        if (stands[b] == stands[a] || !is_same (follow, run, n, run[a], run[b], &share))
          continue;
        guint from = stands[b], to = stands[a];
        if (stands_before (&s[run[from]], &s[run[to]]))
          from = stands[a], to = stands[b];
        for (guint k = 0; k < n; k++)
          stands[k] = stands[k] == from ? to : stands[k];
        add_link (follow, run[a], run[b], TF_LINK_SAME, share);
      }
  Frame frame = { s[run[0]].time.s, s[run[0]].observer_lon_deg, follow->nodes->len, 0 };
  for (guint k = 0; k < n; k++)
    if (stands[k] == k)
      {
        g_array_append_val (follow->nodes, run[k]);
        frame.n++;
      }
  g_array_append_val (follow->frames, frame);
}

/* Maps have a time a region, so that a frame is a run of one frame id and one instant. */
static void
list_frames (Follow *follow, const guint *order, guint n)
{
  const TfSighting *s = follow->sightings;
  for (guint first = 0, next; first < n; first = next)
    {
      for (next = first + 1; next < n; next++)
        if (s[order[next]].time.s > s[order[first]].time.s
            || strcmp (s[order[next]].frame_id, s[order[first]].frame_id) != 0)
          break;
      add_nodes (follow, order + first, next - first);
    }
}

/* -- partners ------------------------------------------------------------------------------- */
typedef struct
{
  int partner; /* mutual best on the nearest frame that has one; -1 */
  int touched; /* best on the nearest frame with any, when it is not mutual; -1 */
  double share, touched_share;
} Partner;

/* Looks from node @k of frame @at in steps of @step for a partner, within @most seconds, among
 * frames that do (or do not) share its vantage. */
static Partner
look (Follow *follow, guint k, guint at, int step, double most, gboolean own_vantage)
{
  const Frame *here = &g_array_index (follow->frames, Frame, at);
  Partner found = { -1, -1, NAN, NAN };
  gboolean first = TRUE;
  for (int j = (int)at + step; j >= 0 && j < (int)follow->frames->len; j += step)
    {
      const Frame *there = &g_array_index (follow->frames, Frame, j);
      if (fabs (there->time_s - here->time_s) > most)
        break;
      if (tf_sighting_one_vantage (here->observer_lon_deg, there->observer_lon_deg,
                                   follow->params->vantage_deg)
          != own_vantage)
        continue;
      double share = 0.0, back = 0.0;
      int best = best_on (follow, k, there, &share);
      if (best < 0)
        continue;
      if (best_on (follow, (guint)best, here, &back) == (int)k)
        {
          found.partner = best;
          found.share = share;
          return found;
        }
      if (first)
        {
          found.touched = best;
          found.touched_share = share;
        }
      first = FALSE;
    }
  return found;
}

static void
forget_shapes (Follow *follow, guint *low, double before_s)
{
  for (; *low < follow->frames->len; (*low)++)
    {
      const Frame *frame = &g_array_index (follow->frames, Frame, *low);
      if (frame->time_s >= before_s)
        return;
      for (guint m = frame->first; m < frame->first + frame->n; m++)
        tf_shape_clear (&follow->shapes[g_array_index (follow->nodes, guint, m)]);
    }
}

/* Links of one kind: what looks forward and what looks back must agree. */
static void
link_partners (Follow *follow, guint n, double most_s, gboolean own_vantage)
{
  TfLinkKind kind = own_vantage ? TF_LINK_NEXT : TF_LINK_ACROSS;
  g_autofree int *back = g_new (int, n + 1);
  memset (back, 0xff, (n + 1) * sizeof *back);
  guint low = 0;
  for (guint at = 0; at < follow->frames->len; at++)
    {
      const Frame *frame = &g_array_index (follow->frames, Frame, at);
      forget_shapes (follow, &low, frame->time_s - 2.0 * most_s - 1.0);
      for (guint m = frame->first; m < frame->first + frame->n; m++)
        {
          guint k = g_array_index (follow->nodes, guint, m);
          Partner p = look (follow, k, at, -1, most_s, own_vantage);
          back[k] = p.partner;
          if (own_vantage && p.touched >= 0)
            add_link (follow, (guint)p.touched, k, TF_LINK_FROM, p.touched_share);
        }
    }
  low = 0;
  for (guint at = 0; at < follow->frames->len; at++)
    {
      const Frame *frame = &g_array_index (follow->frames, Frame, at);
      forget_shapes (follow, &low, frame->time_s - 2.0 * most_s - 1.0);
      for (guint m = frame->first; m < frame->first + frame->n; m++)
        {
          guint k = g_array_index (follow->nodes, guint, m);
          Partner p = look (follow, k, at, 1, most_s, own_vantage);
          if (p.partner >= 0 && back[p.partner] == (int)k)
            add_link (follow, k, (guint)p.partner, kind, p.share);
          if (own_vantage && p.touched >= 0)
            add_link (follow, k, (guint)p.touched, TF_LINK_INTO, p.touched_share);
        }
    }
}

static int
compare_links (gconstpointer a, gconstpointer b, gpointer data)
{
  const TfLink *p = a, *q = b;
  const TfSighting *s = data;
  int by_a = tf_sighting_compare (&s[p->a], &s[q->a]);
  int by_b = by_a != 0 ? by_a : tf_sighting_compare (&s[p->b], &s[q->b]);
  return by_b != 0 ? by_b : (p->kind > q->kind) - (p->kind < q->kind);
}

static gboolean
is_sighted (const TfSighting *s)
{
  return tf_time_is_known (s->time) && s->outline != NULL;
}

GArray *
tf_follow_links (const TfSighting *sightings, guint n, const TfTie *ties, guint n_ties,
                 const TfFollowParams *params)
{
  g_return_val_if_fail (params != NULL && (sightings != NULL || n == 0), NULL);
  Follow follow = { .sightings = sightings, .params = params };
  follow.cuts = g_hash_table_new_full (g_int64_hash, g_int64_equal, g_free, NULL);
  follow.nodes = g_array_new (FALSE, FALSE, sizeof (guint));
  follow.frames = g_array_new (FALSE, FALSE, sizeof (Frame));
  follow.links = g_array_new (FALSE, FALSE, sizeof (TfLink));
  follow.shapes = g_new0 (TfShape, n + 1);
  for (guint k = 0; k < n_ties; k++)
    if (ties[k].cut)
      g_hash_table_add (follow.cuts, pair_key (ties[k].a, ties[k].b));
  g_autofree guint *order = g_new (guint, n + 1);
  guint n_sighted = 0;
  for (guint k = 0; k < n; k++)
    if (is_sighted (&sightings[k]))
      order[n_sighted++] = k;
  g_qsort_with_data (order, (gint)n_sighted, sizeof *order, compare_indices, (gpointer)sightings);
  list_frames (&follow, order, n_sighted);
  link_partners (&follow, n, params->gap_days * TF_DAY_S, TRUE);
  link_partners (&follow, n, params->across_hours * 3600.0, FALSE);
  g_array_sort_with_data (follow.links, compare_links, (gpointer)sightings);
  for (guint k = 0; k < n; k++)
    tf_shape_clear (&follow.shapes[k]);
  g_free (follow.shapes);
  g_array_unref (follow.frames);
  g_array_unref (follow.nodes);
  g_hash_table_unref (follow.cuts);
  return follow.links;
}
