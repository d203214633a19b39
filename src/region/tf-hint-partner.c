/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* A pole that stands alone looks for its partner below the high level. That level tells regions from clutter, and one pole that reaches
 * it has told enough; the other is often wide and weak, and on a coarse, noisy or foreshortened frame it stays just below. Were each
 * sign judged by itself, such a region would be lost there and found on a finer frame of the same Sun. Only clusters of one sign look,
 * and only for what makes a bipole of them: whoever has found its like is left as it is. */

#include "tf-hint-private.h"

/* Of each faint hill: the nearest pole that it may belong to, -1 without any. */
typedef struct
{
  gint32 root;
  float gap_mm;
} Offer;

static const TfHintCluster *
faint_at (const TfHintPieces *pieces, guint k)
{
  return &g_array_index (pieces->faint, TfHintCluster, k);
}

static TfHintCluster *
cluster_at (const TfHintPieces *pieces, guint k)
{
  return &g_array_index (pieces->clusters, TfHintCluster, k);
}

static guint
sign_of (const TfHintCluster *cluster)
{
  return cluster->flux[0] >= cluster->flux[1] ? 0 : 1;
}

static gboolean
is_alone (const TfHintPieces *pieces, guint k)
{
  return tf_hint_root (pieces, k) == k && tf_hint_weaker (cluster_at (pieces, k)) < pieces->params->tidy_single;
}

/* A faint hill is within reach of the pole whose ground it lies on; touching cells have no gap. */
static Offer *
find_offers (const TfHintPieces *pieces)
{
  Offer *offers = g_new (Offer, MAX (pieces->faint->len, 1));
  float cell = (float)pieces->grid->cell_mm, reach = (float)pieces->params->reach_mm;
  for (guint k = 0; k < pieces->faint->len; k++)
    offers[k] = (Offer){ -1, reach };
  for (gsize at = 0; at < (gsize)pieces->grid->n * pieces->grid->n; at++)
    {
      if (pieces->piece[at] > -2 || pieces->nearest[at] < 0)
        continue;
      guint faint = (guint)(-2 - pieces->piece[at]);
      if (!(pieces->distance[at] - cell < offers[faint].gap_mm))
        continue;
      guint root = tf_hint_root (pieces, (guint)pieces->nearest[at]);
      if (is_alone (pieces, root) && sign_of (cluster_at (pieces, root)) != sign_of (faint_at (pieces, faint)))
        offers[faint] = (Offer){ (gint32)root, pieces->distance[at] - cell };
    }
  return offers;
}

/* The faint hills in @taken become the root's own, and so does the ground they lie on. */
static void
adopt (TfHintPieces *pieces, guint root, const TfHintCluster *sum, const guint8 *taken)
{
  *cluster_at (pieces, root) = *sum;
  for (gsize at = 0; at < (gsize)pieces->grid->n * pieces->grid->n; at++)
    if (pieces->piece[at] < -1 && taken[-2 - pieces->piece[at]])
      {
        pieces->piece[at] = pieces->nearest[at] = (gint32)root;
        pieces->distance[at] = 0.0f;
      }
}

/* Takes what is offered to the pole, best first, and keeps it when that makes a bipole. */
static void
try_root (TfHintPieces *pieces, guint root, const Offer *offers)
{
  const TfHintParams *p = pieces->params;
  TfHintCluster sum = *cluster_at (pieces, root);
  g_autofree guint8 *taken = g_new0 (guint8, MAX (pieces->faint->len, 1));
  for (gint best = 0; best >= 0;)
    {
      double most = p->score_min;
      best = -1;
      for (guint k = 0; k < pieces->faint->len; k++)
        {
          if (taken[k] || offers[k].root != (gint32)root)
            continue;
          double score = tf_hint_score (pieces, &sum, faint_at (pieces, k), (double)offers[k].gap_mm);
          if (score >= most)
            {
              most = score;
              best = (gint)k;
            }
        }
      if (best < 0)
        break;
      taken[best] = 1;
      sum = tf_hint_sum (&sum, faint_at (pieces, (guint)best));
    }
  if (tf_hint_weaker (&sum) >= p->tidy_weaker && tf_hint_total (&sum) >= p->bipole_mx)
    adopt (pieces, root, &sum, taken);
}

void
tf_hint_partners (TfHintPieces *pieces)
{
  g_autofree Offer *offers = find_offers (pieces);
  for (guint k = 0; k < pieces->clusters->len; k++)
    if (is_alone (pieces, k))
      try_root (pieces, k, offers);
}
