/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* One region or two? A reading costs the way its flux must go to the other sign, and flux that finds none the longest plausible way. Two
 * hills of a small region that were joined one by one to a large neighbour close over a much shorter way by themselves, and their
 * neighbour loses nothing; one pair of poles out of the middle of a quadrupole would leave the others the longer way. Total length of the
 * connections as the measure: after Georgoulis & Rust 2007, ApJ 661, L109. Two compact hills, strong for their ground, are more likely a
 * region than shards of one plage: less is asked of them. */

#include <math.h>

#include "tf-hint-private.h"

static const double CM2_IN_MM2 = 1e16;

/* The hills of one region: signed flux, and for each the sum of flux * flux * way over all hills of the other sign. */
typedef struct
{
  const TfHintPieces *pieces;
  guint n;
  guint *hill;
  double *flux, *ways;
  double sum[2], all_ways; /* per sign, Mx; Mx2 Mm */
} Region;

static const TfHintCluster *
hill_at (const TfHintPieces *pieces, guint k)
{
  return &g_array_index (pieces->hills, TfHintCluster, k);
}

static double
way_between (const Region *r, guint a, guint b)
{
  TfHintCluster pair = tf_hint_sum (hill_at (r->pieces, r->hill[a]), hill_at (r->pieces, r->hill[b]));
  return tf_hint_separation (&pair, r->pieces->grid->radius_mm);
}

static void
region_init (Region *r, const TfHintPieces *pieces, guint root)
{
  guint all = pieces->clusters->len;
  *r = (Region){ .pieces = pieces, .hill = g_new (guint, all), .flux = g_new (double, all), .ways = g_new0 (double, all) };
  for (guint k = 0; k < all; k++)
    if (tf_hint_root (pieces, k) == root)
      {
        const TfHintCluster *hill = hill_at (pieces, k);
        r->flux[r->n] = hill->flux[0] - hill->flux[1];
        r->sum[r->flux[r->n] < 0.0] += fabs (r->flux[r->n]);
        r->hill[r->n++] = k;
      }
  for (guint a = 0; a < r->n; a++)
    for (guint b = 0; b < r->n && r->flux[a] > 0.0; b++)
      if (r->flux[b] < 0.0)
        {
          double way = -r->flux[a] * r->flux[b] * way_between (r, a, b);
          r->ways[a] += way;
          r->ways[b] += way;
          r->all_ways += way;
        }
}

static void
region_clear (Region *r)
{
  g_free (r->hill);
  g_free (r->flux);
  g_free (r->ways);
}

/* What a reading with so much flux of each sign costs, Mx Mm. */
static double
cost_of (const double flux[2], double ways, const TfHintParams *p)
{
  double total = flux[0] + flux[1], closed = 2.0 * MIN (flux[0], flux[1]);
  double open = (total - closed) * tf_hint_length (total, p);
  return closed > 0.0 ? open + closed * ways / (flux[0] * flux[1]) : open;
}

static gboolean
is_region (const double flux[2], const TfHintParams *p)
{
  double total = flux[0] + flux[1];
  return total >= p->part_mx && MIN (flux[0], flux[1]) >= p->nest_weaker * total;
}

static gboolean
is_compact (const TfHintCluster *hill, const TfHintParams *p)
{
  return tf_hint_total (hill) >= p->part_gauss * hill->area_mm2 * CM2_IN_MM2;
}

/* What is saved when hills @a (positive) and @b stand for themselves, as a share of what the smaller part's flux costs in the whole, by the
 * share that is asked for. */
static double
gain_of (const Region *r, guint a, guint b)
{
  const TfHintParams *p = r->pieces->params;
  double part[2] = { r->flux[a], -r->flux[b] }, rest[2] = { r->sum[0] - part[0], r->sum[1] - part[1] };
  if (!is_region (part, p) || !is_region (rest, p))
    return 0.0;
  double own = part[0] * part[1] * way_between (r, a, b);
  double saved = cost_of (r->sum, r->all_ways, p) - cost_of (part, own, p)
                 - cost_of (rest, r->all_ways - r->ways[a] - r->ways[b] + own, p);
  gboolean smaller = part[0] + part[1] <= rest[0] + rest[1];
  gboolean compact = is_compact (hill_at (r->pieces, r->hill[a]), p) && is_compact (hill_at (r->pieces, r->hill[b]), p);
  double from = smaller ? r->ways[a] : r->all_ways - r->ways[a], to = smaller ? r->ways[b] : r->all_ways - r->ways[b];
  return saved / (from / r->sum[1] + to / r->sum[0]) / (compact ? p->part_compact : p->part_gain);
}

/* The first hill that is @in the pair or out of it becomes the root of all such. */
static void
set_apart (TfHintPieces *pieces, const Region *r, guint a, guint b, gboolean in)
{
  TfHintCluster *root = NULL;
  for (guint k = 0; k < r->n; k++)
    {
      TfHintCluster *cluster = &g_array_index (pieces->clusters, TfHintCluster, r->hill[k]);
      if ((k == a || k == b) != in)
        continue;
      cluster->into = root != NULL ? root->into : (int)r->hill[k];
      if (root != NULL)
        *root = tf_hint_sum (root, hill_at (pieces, r->hill[k]));
      else
        {
          *cluster = *hill_at (pieces, r->hill[k]);
          root = cluster;
        }
    }
}

/* Takes the pair that saves most out of a region. */
static gboolean
take_pair (TfHintPieces *pieces, guint root)
{
  Region r;
  guint best_a = 0, best_b = 0;
  double best = 0.0;
  region_init (&r, pieces, root);
  for (guint a = 0; a < r.n; a++)
    for (guint b = 0; b < r.n && r.flux[a] > 0.0; b++)
      {
        double gain = r.flux[b] < 0.0 ? gain_of (&r, a, b) : 0.0;
        if (gain > best)
          {
            best = gain;
            best_a = a;
            best_b = b;
          }
      }
  gboolean taken = best >= 1.0;
  if (taken)
    {
      set_apart (pieces, &r, best_a, best_b, TRUE);
      set_apart (pieces, &r, best_a, best_b, FALSE);
    }
  region_clear (&r);
  return taken;
}

gboolean
tf_hint_part (TfHintPieces *pieces)
{
  gboolean any = FALSE;
  for (guint k = 0; k < pieces->clusters->len; k++)
    while (tf_hint_root (pieces, k) == k && take_pair (pieces, k))
      any = TRUE;
  return any;
}
