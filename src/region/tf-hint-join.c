/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Pieces are joined to regions, best pair first, by how much of each other's flux they balance, by the gap between them
 * and by how long a region of their flux may plausibly be. Nothing here knows hemisphere, cycle or polarity order: a frame with all signs
 * turned gives the same hints. Numbers and what each step is good for: the study of hints in the design notes. */

#include <math.h>

#include "tf-constants.h"
#include "tf-hint-private.h"

static TfHintCluster *
cluster_at (const TfHintPieces *pieces, guint k)
{
  return &g_array_index (pieces->clusters, TfHintCluster, k);
}

double
tf_hint_length (double total_mx, const TfHintParams *p)
{
  return CLAMP (p->length_mm * pow (total_mx / p->length_mx, 0.25), p->length_least_mm, p->length_most_mm);
}

static double
angle_between (const double a[3], const double b[3])
{
  double cross[3] = { a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0] };
  return atan2 (sqrt (cross[0] * cross[0] + cross[1] * cross[1] + cross[2] * cross[2]),
                a[0] * b[0] + a[1] * b[1] + a[2] * b[2]);
}

double
tf_hint_separation (const TfHintCluster *cluster, double radius_mm)
{
  if (!(cluster->flux[0] > 0.0) || !(cluster->flux[1] > 0.0))
    return 0.0;
  return radius_mm * angle_between (cluster->place[0], cluster->place[1]);
}

void
tf_hint_centre (const TfHintCluster *cluster, double unit[3])
{
  double length = 0.0;
  for (guint k = 0; k < 3; k++)
    {
      unit[k] = cluster->place[0][k] + cluster->place[1][k];
      length += unit[k] * unit[k];
    }
  for (guint k = 0; k < 3; k++)
    unit[k] /= sqrt (length);
}

static double
centre_distance (const TfHintCluster *a, const TfHintCluster *b, double radius_mm)
{
  double p[3], q[3];
  tf_hint_centre (a, p);
  tf_hint_centre (b, q);
  return radius_mm * angle_between (p, q);
}

TfHintCluster
tf_hint_sum (const TfHintCluster *a, const TfHintCluster *b)
{
  TfHintCluster sum = *a;
  sum.area_mm2 += b->area_mm2;
  for (guint sign = 0; sign < 2; sign++)
    {
      sum.flux[sign] += b->flux[sign];
      for (guint k = 0; k < 3; k++)
        sum.place[sign][k] += b->place[sign][k];
    }
  return sum;
}

static double
net (const TfHintCluster *cluster)
{
  return fabs (cluster->flux[0] - cluster->flux[1]);
}

/* Two regions that stand for themselves are never made one, however near. */
static gboolean
is_nest (const TfHintCluster *a, const TfHintCluster *b, const TfHintParams *p)
{
  double ta = tf_hint_total (a), tb = tf_hint_total (b);
  return tf_hint_weaker (a) >= p->nest_weaker && tf_hint_weaker (b) >= p->nest_weaker && MIN (ta, tb) > p->nest_mx
         && MIN (ta, tb) >= p->nest_small * MAX (ta, tb);
}

double
tf_hint_score (const TfHintPieces *pieces, const TfHintCluster *a, const TfHintCluster *b, double gap_mm)
{
  const TfHintParams *p = pieces->params;
  double radius = pieces->grid->radius_mm, ta = tf_hint_total (a), tb = tf_hint_total (b);
  TfHintCluster sum = tf_hint_sum (a, b);
  double length = tf_hint_length (ta + tb, p), distance = centre_distance (a, b, radius);
  if (tf_hint_separation (&sum, radius) > length || distance > p->centres_share * length || is_nest (a, b, p))
    return 0.0;
  double gain = (net (a) + net (b) - net (&sum)) / (2.0 * MIN (ta, tb));
  double near = exp (-(distance / length) * (distance / length));
  if (gain >= p->balance)
    return gain * exp (-gap_mm / p->gap_mm) * near;
  double score = p->same_weight * exp (-gap_mm / p->gap_same_mm) * near;
  /* Whichever is the larger: of two nearly alike a few per cent of flux must not decide. */
  double before = MIN (net (a) / ta, net (b) / tb);
  gboolean grows = net (&sum) / (ta + tb) > before + p->balance;
  return grows && MIN (ta, tb) >= 0.25 * MAX (ta, tb) ? 0.5 * score : score;
}

/* Cluster b goes into a; pairs of b become pairs of a, doubled ones keep the smaller gap. */
static void
merge (TfHintPieces *pieces, guint a, guint b)
{
  GArray *pairs = pieces->pairs;
  *cluster_at (pieces, a) = tf_hint_sum (cluster_at (pieces, a), cluster_at (pieces, b));
  cluster_at (pieces, b)->into = (int)a;
  for (guint k = pairs->len; k-- > 0;)
    {
      TfHintPair *pair = &g_array_index (pairs, TfHintPair, k);
      if (pair->a == b)
        pair->a = a;
      if (pair->b == b)
        pair->b = a;
      if (pair->a == pair->b)
        g_array_remove_index_fast (pairs, k);
    }
  for (guint k = pairs->len; k-- > 0;)
    {
      TfHintPair *pair = &g_array_index (pairs, TfHintPair, k);
      for (guint j = 0; j < k; j++)
        {
          TfHintPair *other = &g_array_index (pairs, TfHintPair, j);
          if (MIN (pair->a, pair->b) != MIN (other->a, other->b) || MAX (pair->a, pair->b) != MAX (other->a, other->b))
            continue;
          other->gap_mm = MIN (other->gap_mm, pair->gap_mm);
          g_array_remove_index_fast (pairs, k);
          break;
        }
    }
}

static void
rescore (TfHintPieces *pieces, int only)
{
  for (guint k = 0; k < pieces->pairs->len; k++)
    {
      TfHintPair *pair = &g_array_index (pieces->pairs, TfHintPair, k);
      if (only < 0 || pair->a == (guint)only || pair->b == (guint)only)
        pair->score = tf_hint_score (pieces, cluster_at (pieces, pair->a), cluster_at (pieces, pair->b), pair->gap_mm);
    }
}

static void
join_by_score (TfHintPieces *pieces)
{
  rescore (pieces, -1);
  for (;;)
    {
      TfHintPair best = { 0 };
      for (guint k = 0; k < pieces->pairs->len; k++)
        {
          const TfHintPair *pair = &g_array_index (pieces->pairs, TfHintPair, k);
          if (pair->score > best.score)
            best = *pair;
        }
      if (!(best.score >= pieces->params->score_min))
        return;
      merge (pieces, MIN (best.a, best.b), MAX (best.a, best.b));
      rescore (pieces, (int)MIN (best.a, best.b));
    }
}

/* -- tidying ----------------------------------------------------------------------------------------------- */

static gboolean
leftover_fits (const TfHintPieces *pieces, const TfHintPair *pair)
{
  const TfHintCluster *a = cluster_at (pieces, pair->a), *b = cluster_at (pieces, pair->b);
  const TfHintParams *p = pieces->params;
  gboolean one = tf_hint_weaker (a) < p->tidy_single, two = tf_hint_weaker (b) < p->tidy_single;
  if (one == two || pair->gap_mm > p->tidy_mm)
    return FALSE;
  TfHintCluster sum = tf_hint_sum (a, b);
  return tf_hint_weaker (&sum) >= p->tidy_weaker
         && tf_hint_separation (&sum, pieces->grid->radius_mm) <= p->tidy_length * tf_hint_length (tf_hint_total (&sum), p);
}

static gboolean
same_plage (const TfHintPieces *pieces, const TfHintPair *pair)
{
  const TfHintCluster *a = cluster_at (pieces, pair->a), *b = cluster_at (pieces, pair->b);
  const TfHintParams *p = pieces->params;
  return tf_hint_weaker (a) < p->single_weaker && tf_hint_weaker (b) < p->single_weaker && pair->gap_mm <= p->plage_mm
         && (a->flux[0] > a->flux[1]) == (b->flux[0] > b->flux[1])
         && centre_distance (a, b, pieces->grid->radius_mm) < p->plage_centres_mm;
}

/* Joins pairs that fit, smallest gap first, until none does. */
static void
tidy (TfHintPieces *pieces, gboolean (*fits) (const TfHintPieces *, const TfHintPair *))
{
  for (;;)
    {
      const TfHintPair *best = NULL;
      for (guint k = 0; k < pieces->pairs->len; k++)
        {
          const TfHintPair *pair = &g_array_index (pieces->pairs, TfHintPair, k);
          if ((best == NULL || pair->gap_mm < best->gap_mm) && fits (pieces, pair))
            best = pair;
        }
      if (best == NULL)
        return;
      merge (pieces, MIN (best->a, best->b), MAX (best->a, best->b));
    }
}

/* Pairs of hills become pairs of what the hills now belong to. */
static void
renew_pairs (TfHintPieces *pieces)
{
  g_array_set_size (pieces->pairs, 0);
  for (guint k = 0; k < pieces->touching->len; k++)
    {
      TfHintPair pair = g_array_index (pieces->touching, TfHintPair, k);
      pair.a = tf_hint_root (pieces, pair.a);
      pair.b = tf_hint_root (pieces, pair.b);
      if (pair.a != pair.b)
        g_array_append_val (pieces->pairs, pair);
    }
}

void
tf_hint_join (TfHintPieces *pieces)
{
  pieces->hills = g_array_copy (pieces->clusters);
  pieces->touching = g_array_copy (pieces->pairs);
  join_by_score (pieces);
  tidy (pieces, leftover_fits);
  if (tf_hint_part (pieces))
    renew_pairs (pieces);
  tf_hint_partners (pieces);
  tidy (pieces, same_plage);
}
