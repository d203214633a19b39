/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Pieces: what stands above the low level and reaches the high one, each sign alone, parted into hills where the saddle
 * is well below the lower top (watershed by flooding from the top: Vincent & Soille 1991, IEEE PAMI 13, 583; union-find). */

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "tf-hint-private.h"

static const double CM2_IN_MM2 = 1e16;

/* Hills of one sign while they are flooded. */
typedef struct
{
  const TfHintGrid *grid;
  double saddle; /* two hills are one when it reaches this share of the lower top */
  int sign;
  float *height;    /* smoothed once more */
  gint32 *label;    /* hill of each cell, -1 */
  GArray *parent;   /* gint32 */
  GArray *top;      /* float: highest cell */
} Flood;

static gint32
find (GArray *parent, gint32 k)
{
  gint32 *p = (gint32 *)(void *)parent->data;
  while (p[k] != k)
    {
      p[k] = p[p[k]];
      k = p[k];
    }
  return k;
}

/* The hill of the higher top takes the other. */
static gint32
unite (Flood *flood, gint32 a, gint32 b)
{
  float *top = (float *)(void *)flood->top->data;
  gint32 to = top[a] >= top[b] ? a : b, from = to == a ? b : a;
  g_array_index (flood->parent, gint32, from) = to;
  return to;
}

static gint32
new_hill (Flood *flood, float top)
{
  gint32 k = (gint32)flood->parent->len;
  g_array_append_val (flood->parent, k);
  g_array_append_val (flood->top, top);
  return k;
}

/* A cell joins the highest hill it touches; hills that meet here are one when the saddle is high. */
static void
flood_cell (Flood *flood, gsize at)
{
  guint n = flood->grid->n, x = (guint)(at % n), y = (guint)(at / n);
  gint32 mine = -1;
  for (guint ny = y > 0 ? y - 1 : 0; ny <= MIN (y + 1, n - 1); ny++)
    for (guint nx = x > 0 ? x - 1 : 0; nx <= MIN (x + 1, n - 1); nx++)
      {
        gint32 label = flood->label[(gsize)ny * n + nx];
        if (label < 0)
          continue;
        label = find (flood->parent, label);
        if (mine < 0 || label == mine)
          {
            mine = label;
            continue;
          }
        float lower = MIN (g_array_index (flood->top, float, mine), g_array_index (flood->top, float, label));
        if (flood->height[at] >= (float)flood->saddle * lower)
          mine = unite (flood, mine, label);
        else if (g_array_index (flood->top, float, label) > g_array_index (flood->top, float, mine))
          mine = label;
      }
  if (mine < 0)
    mine = new_hill (flood, flood->height[at]);
  flood->label[at] = mine;
}

typedef struct
{
  float height;
  guint32 at;
} Order;

static int
by_height (const void *a, const void *b)
{
  const Order *x = a, *y = b;
  if (x->height > y->height)
    return -1;
  if (x->height < y->height)
    return 1;
  return (x->at > y->at) - (x->at < y->at);
}

static void
flood_all (Flood *flood)
{
  gsize cells = (gsize)flood->grid->n * flood->grid->n;
  g_autoptr (GArray) order = g_array_new (FALSE, FALSE, sizeof (Order));
  for (gsize k = 0; k < cells; k++)
    {
      flood->label[k] = -1;
      if ((float)flood->sign * flood->grid->field[k] >= flood->grid->low[k])
        g_array_append_val (order, ((Order){ flood->height[k], (guint32)k }));
    }
  if (order->len == 0)
    return;
  qsort (order->data, order->len, sizeof (Order), by_height);
  for (guint k = 0; k < order->len; k++)
    flood_cell (flood, g_array_index (order, Order, k).at);
}

/* Which connected blobs reach the high level: whole blobs, so that a low hill beside a high one stays. */
static void
mark_blobs (const Flood *flood, guint8 *keep)
{
  const TfHintGrid *g = flood->grid;
  gsize cells = (gsize)g->n * g->n;
  g_autoptr (GArray) stack = g_array_new (FALSE, FALSE, sizeof (guint32));
  for (gsize k = 0; k < cells; k++)
    if (flood->label[k] >= 0 && !keep[k] && (float)flood->sign * g->field[k] >= g->high[k])
      {
        guint32 at = (guint32)k;
        keep[at] = 1;
        g_array_append_val (stack, at);
        while (stack->len > 0)
          {
            at = g_array_index (stack, guint32, stack->len - 1);
            g_array_set_size (stack, stack->len - 1);
            guint x = at % g->n, y = at / g->n;
            for (guint ny = y > 0 ? y - 1 : 0; ny <= MIN (y + 1, g->n - 1); ny++)
              for (guint nx = x > 0 ? x - 1 : 0; nx <= MIN (x + 1, g->n - 1); nx++)
                {
                  guint32 next = ny * g->n + nx;
                  if (flood->label[next] < 0 || keep[next])
                    continue;
                  keep[next] = 1;
                  g_array_append_val (stack, next);
                }
          }
      }
}

static void
add_cell (TfHintCluster *cluster, const TfHintGrid *g, gsize at)
{
  double unit[3], flux = fabs ((double)g->field[at]) * g->cell_mm * g->cell_mm * CM2_IN_MM2;
  guint sign = g->field[at] > 0.0f ? 0 : 1;
  tf_hint_grid_unit (g, (double)(at % g->n) + 0.5, (double)(at / g->n) + 0.5, unit);
  cluster->flux[sign] += flux;
  cluster->area_mm2 += g->cell_mm * g->cell_mm;
  for (guint k = 0; k < 3; k++)
    cluster->place[sign][k] += flux * unit[k];
}

/* Hills of kept blobs become clusters, the others are faint; patches too weak are dropped. */
static void
take_hills (TfHintPieces *pieces, Flood *flood, const guint8 *keep)
{
  const TfHintGrid *g = pieces->grid;
  gsize cells = (gsize)g->n * g->n;
  guint n = flood->parent->len;
  g_autofree TfHintCluster *sums = g_new0 (TfHintCluster, MAX (n, 1));
  g_autofree gint32 *name = g_new (gint32, MAX (n, 1));
  g_autofree guint8 *kept = g_new0 (guint8, MAX (n, 1)); /* a hill is kept or faint as a whole: it lies in one blob */
  for (gsize k = 0; k < cells; k++)
    if (flood->label[k] >= 0)
      {
        gint32 hill = find (flood->parent, flood->label[k]);
        add_cell (&sums[hill], g, k);
        kept[hill] = keep[k];
      }
  for (guint k = 0; k < n; k++)
    {
      GArray *to = kept[k] ? pieces->clusters : pieces->faint;
      name[k] = -1;
      if (tf_hint_total (&sums[k]) < pieces->params->patch_mx)
        continue;
      sums[k].into = (int)to->len;
      name[k] = kept[k] ? sums[k].into : -2 - sums[k].into;
      g_array_append_val (to, sums[k]);
    }
  for (gsize k = 0; k < cells; k++)
    if (flood->label[k] >= 0)
      pieces->piece[k] = name[find (flood->parent, flood->label[k])];
}

/* Both signs, found side by side, taken one after the other. */
typedef struct
{
  const TfHintPieces *pieces;
  Flood flood[2];
  guint8 *keep[2];
} Hills;

/* A "band" of the pool is a sign here. */
static void
find_hills (guint band, guint first, guint n, guint worker, gpointer data)
{
  Hills *hills = data;
  const TfHintPieces *pieces = hills->pieces;
  const TfHintGrid *g = pieces->grid;
  gsize cells = (gsize)g->n * g->n;
  int sign = band == 0 ? 1 : -1;
  g_autofree float *height = g_new (float, cells), *room = g_new (float, cells);
  Flood *flood = &hills->flood[band];
  *flood = (Flood){ .grid = g, .saddle = pieces->params->saddle, .sign = sign, .height = height };
  flood->label = g_new (gint32, cells);
  flood->parent = g_array_new (FALSE, FALSE, sizeof (gint32));
  flood->top = g_array_new (FALSE, FALSE, sizeof (float));
  hills->keep[band] = g_new0 (guint8, cells);
  for (gsize k = 0; k < cells; k++)
    {
      float f = (float)sign * g->field[k];
      height[k] = f > 0.0f ? f : 0.0f;
    }
  tf_hint_blur (height, room, g->n, g->n, pieces->params->hill_mm / g->cell_mm);
  flood_all (flood);
  mark_blobs (flood, hills->keep[band]);
  flood->height = NULL;
}

static void
take_signs (TfHintPieces *pieces, const TfWork *work)
{
  Hills hills = { .pieces = pieces };
  TfWork whole = { .workers = work != NULL ? work->workers : NULL };
  tf_bands_run (&whole, 2 * TF_BAND_ROWS, find_hills, &hills);
  for (guint k = 0; k < 2; k++)
    {
      take_hills (pieces, &hills.flood[k], hills.keep[k]);
      g_array_unref (hills.flood[k].parent);
      g_array_unref (hills.flood[k].top);
      g_free (hills.flood[k].label);
      g_free (hills.keep[k]);
    }
}

/* -- neighbours -------------------------------------------------------------------------------------------- */

static void
note_pair (GHashTable *seen, GArray *pairs, gint32 a, gint32 b, double gap)
{
  gint64 key = ((gint64)MIN (a, b) << 32) | (gint64)MAX (a, b);
  gpointer found = g_hash_table_lookup (seen, &key);
  if (found != NULL)
    {
      TfHintPair *pair = &g_array_index (pairs, TfHintPair, GPOINTER_TO_UINT (found) - 1);
      pair->gap_mm = MIN (pair->gap_mm, gap);
      return;
    }
  TfHintPair pair = { (guint)MIN (a, b), (guint)MAX (a, b), gap, 0.0 };
  g_array_append_val (pairs, pair);
  g_hash_table_insert (seen, g_memdup2 (&key, sizeof key), GUINT_TO_POINTER (pairs->len));
}

/* Two pieces are neighbours when the ground nearest to each of them meets; their gap is the way across that ground. */
static void
find_pairs (TfHintPieces *pieces)
{
  guint n = pieces->grid->n;
  g_autoptr (GHashTable) seen = g_hash_table_new_full (g_int64_hash, g_int64_equal, g_free, NULL);
  for (guint y = 0; y + 1 < n; y++)
    for (guint x = 0; x + 1 < n; x++)
      for (guint side = 0; side < 2; side++)
        {
          gsize at = (gsize)y * n + x, next = side == 0 ? at + 1 : at + n;
          gint32 a = pieces->nearest[at], b = pieces->nearest[next];
          double gap = pieces->distance[at] + pieces->distance[next];
          if (a >= 0 && b >= 0 && a != b && gap < pieces->params->reach_mm)
            note_pair (seen, pieces->pairs, a, b, gap);
        }
}

TfHintPieces *
tf_hint_pieces_new (const TfHintGrid *grid, const TfHintParams *params, const TfWork *work)
{
  TfHintPieces *pieces = g_new0 (TfHintPieces, 1);
  gsize cells = (gsize)grid->n * grid->n;
  pieces->grid = grid;
  pieces->params = params;
  pieces->piece = g_new (gint32, cells);
  pieces->nearest = g_new (gint32, cells);
  pieces->distance = g_new (float, cells);
  pieces->clusters = g_array_new (FALSE, TRUE, sizeof (TfHintCluster));
  pieces->faint = g_array_new (FALSE, TRUE, sizeof (TfHintCluster));
  pieces->pairs = g_array_new (FALSE, TRUE, sizeof (TfHintPair));
  memset (pieces->piece, 0xff, cells * sizeof *pieces->piece);
  take_signs (pieces, work);
  tf_hint_nearest (pieces->piece, grid->n, grid->n, pieces->nearest, pieces->distance);
  for (gsize k = 0; k < cells; k++)
    pieces->distance[k] *= (float)grid->cell_mm;
  find_pairs (pieces);
  return pieces;
}

void
tf_hint_pieces_free (TfHintPieces *pieces)
{
  if (pieces == NULL)
    return;
  g_free (pieces->piece);
  g_free (pieces->nearest);
  g_free (pieces->distance);
  g_array_unref (pieces->clusters);
  g_array_unref (pieces->faint);
  g_array_unref (pieces->pairs);
  g_clear_pointer (&pieces->hills, g_array_unref);
  g_clear_pointer (&pieces->touching, g_array_unref);
  g_free (pieces);
}

double
tf_hint_total (const TfHintCluster *cluster)
{
  return cluster->flux[0] + cluster->flux[1];
}

double
tf_hint_weaker (const TfHintCluster *cluster)
{
  return MIN (cluster->flux[0], cluster->flux[1]) / tf_hint_total (cluster);
}

guint
tf_hint_root (const TfHintPieces *pieces, guint k)
{
  while (g_array_index (pieces->clusters, TfHintCluster, k).into != (int)k)
    k = (guint)g_array_index (pieces->clusters, TfHintCluster, k).into;
  return k;
}
