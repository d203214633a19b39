/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-hint.h"

#include <math.h>

#include <glib/gi18n-lib.h>

#include "tf-hint-private.h"

void
tf_hint_free (TfHint *hint)
{
  if (hint == NULL)
    return;
  tf_outline_unref (hint->outline);
  tf_measure_clear (&hint->measure);
  g_clear_pointer (&hint->cautions, g_ptr_array_unref);
  g_free (hint);
}

static double
mu_of (const TfFrame *frame, const TfHintCluster *cluster)
{
  double unit[3], lon, lat, x, y, mu = NAN;
  tf_hint_centre (cluster, unit);
  tf_sphere_lonlat (unit, &lon, &lat);
  tf_geometry_sun_to_pixel (tf_frame_get_geometry (frame), lon, lat, &x, &y, &mu);
  return mu;
}

/* Whether a cluster is offered, and as what. */
static gboolean
is_offered (const TfHintCluster *cluster, const TfHintParams *p, double radius_mm, double mu, gboolean *unipolar)
{
  double total = tf_hint_total (cluster), weaker = tf_hint_weaker (cluster);
  double limb = MAX (1.0, (p->full_mu / mu) * (p->full_mu / mu));
  *unipolar = weaker < p->single_weaker;
  if (isnan (mu))
    return FALSE;
  if (*unipolar)
    return total >= p->unipolar_mx * limb && mu >= p->unipolar_mu;
  if (total < p->bipole_mx * limb)
    return FALSE;
  return total >= p->small_mx || (weaker >= p->small_weaker && tf_hint_separation (cluster, radius_mm) <= p->small_mm);
}

/* By what was measured, as it is printed beside them. */
static void
add_cautions (TfHint *hint, const TfHintPieces *pieces, gboolean edge, const TfMeasureParams *measure)
{
  const TfHintParams *p = pieces->params;
  const TfMeasure *m = &hint->measure;
  double length = tf_hint_length (m->flux_unsigned_mx, p);
  hint->cautions = tf_notes_new ();
  if (m->separation_mm > p->long_share * length)
    tf_notes_add (hint->cautions, "hint-long", "dd", m->separation_mm, length);
  if (!hint->unipolar && fabs (m->imbalance) > p->one_sided)
    tf_notes_add (hint->cautions, "hint-one-sided", "d", 100.0 * fabs (m->imbalance));
  if (edge || tf_notes_find (m->cautions, "touches-missing-data") != NULL)
    tf_notes_add (hint->cautions, "hint-at-edge", "");
  if (pieces->grid->active)
    tf_notes_add (hint->cautions, "hint-active-frame", "d", p->low_gauss);
  if (!hint->unipolar && m->leader_flips)
    tf_notes_add (hint->cautions, "hint-leader-flips", "d", 100.0 * measure->floor_step);
}

/* Whoever stands close by was kept apart, by the rule for regions that stand for themselves or by its score. */
static void
tell_neighbours (const TfHintPieces *pieces, TfHint *const *hints)
{
  for (guint k = 0; k < pieces->pairs->len; k++)
    {
      const TfHintPair *pair = &g_array_index (pieces->pairs, TfHintPair, k);
      if (!(pair->gap_mm < pieces->params->near_mm) || hints[pair->a] == NULL || hints[pair->b] == NULL)
        continue;
      for (guint side = 0; side < 2; side++)
        {
          TfHint *hint = hints[side == 0 ? pair->a : pair->b];
          if (tf_notes_find (hint->cautions, "hint-neighbour-near") == NULL)
            tf_notes_add (hint->cautions, "hint-neighbour-near", "d", pieces->params->near_mm);
        }
    }
}

static TfHint *
make_hint (const TfFrame *frame, const TfHintPieces *pieces, guint k, const TfMeasureParams *measure)
{
  const TfHintCluster *cluster = &g_array_index (pieces->clusters, TfHintCluster, k);
  gboolean unipolar, edge;
  if (!is_offered (cluster, pieces->params, pieces->grid->radius_mm, mu_of (frame, cluster), &unipolar))
    return NULL;
  TfOutline *outline = tf_hint_outline (pieces, k, tf_frame_get_info (frame)->time, &edge);
  if (outline == NULL)
    return NULL;
  TfHint *hint = g_new0 (TfHint, 1);
  hint->unipolar = unipolar;
  hint->outline = outline;
  /* Of no hint whose pixels are all below the floor is there anything to tell. */
  if (!tf_measure_region (&hint->measure, frame, outline, measure, NULL) || !(hint->measure.flux_unsigned_mx > 0.0))
    {
      tf_hint_free (hint);
      return NULL;
    }
  add_cautions (hint, pieces, edge, measure);
  return hint;
}

static gint
by_flux (gconstpointer a, gconstpointer b)
{
  double fa = (*(TfHint *const *)a)->measure.flux_unsigned_mx, fb = (*(TfHint *const *)b)->measure.flux_unsigned_mx;
  return (fa < fb) - (fa > fb);
}

static gboolean
set_cancelled (GError **error)
{
  g_set_error_literal (error, TF_REGION_ERROR, TF_REGION_ERROR_CANCELLED, _ ("The search for hints was stopped."));
  return FALSE;
}

static gboolean
check_kind (const TfFrame *frame, GError **error)
{
  if (!tf_geometry_is_map (tf_frame_get_geometry (frame)))
    return TRUE;
  g_set_error (error, TF_REGION_ERROR, TF_REGION_ERROR_KIND,
               _ ("No hints are made on the map %s: its columns are of different days. Draw outlines by hand, or take hints "
                  "from the disk frames."),
               tf_frame_get_path (frame));
  return FALSE;
}

typedef struct
{
  double flux;
  guint cluster;
} Turn;

/* What the threads share; every cluster has its own place in @hints. */
typedef struct
{
  const TfFrame *frame;
  const TfHintPieces *pieces;
  const TfMeasureParams *measure;
  TfHint **hints;
  const Turn *order;
} Search;

/* A "band" of the pool is one cluster here. */
static void
try_cluster (guint band, guint first, guint n, guint worker, gpointer data)
{
  const Search *search = data;
  guint k = search->order[band].cluster;
  if (tf_hint_root (search->pieces, k) == k)
    search->hints[k] = make_hint (search->frame, search->pieces, k, search->measure);
}

static int
by_work (const void *a, const void *b)
{
  const Turn *x = a, *y = b;
  if (x->flux > y->flux || x->flux < y->flux)
    return x->flux > y->flux ? -1 : 1;
  return (x->cluster > y->cluster) - (x->cluster < y->cluster);
}

/* The strongest first: they are the largest, and none of them shall be what all wait for at the end. */
static Turn *
put_in_order (const TfHintPieces *pieces)
{
  guint n = pieces->clusters->len;
  Turn *order = g_new (Turn, MAX (n, 1));
  for (guint k = 0; k < n; k++)
    order[k] = (Turn){ tf_hint_total (&g_array_index (pieces->clusters, TfHintCluster, k)), k };
  qsort (order, n, sizeof *order, by_work);
  return order;
}

static GPtrArray *
gather (Search *search, const TfWork *work, GError **error)
{
  guint n = search->pieces->clusters->len;
  g_autoptr (GPtrArray) hints = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_hint_free);
  g_autofree TfHint **found = g_new0 (TfHint *, MAX (n, 1));
  g_autofree Turn *order = put_in_order (search->pieces);
  search->hints = found;
  search->order = order;
  gboolean done = tf_bands_run (work, n * TF_BAND_ROWS, try_cluster, search);
  if (done)
    tell_neighbours (search->pieces, found);
  for (guint k = 0; k < n; k++)
    if (found[k] != NULL)
      g_ptr_array_add (hints, found[k]);
  if (!done)
    return set_cancelled (error), NULL;
  g_ptr_array_sort (hints, by_flux);
  return g_steal_pointer (&hints);
}

GPtrArray *
tf_hints_find (const TfFrame *frame, const TfHintParams *params, const TfMeasureParams *measure, const TfWork *work,
               GError **error)
{
  g_return_val_if_fail (frame != NULL && params != NULL && measure != NULL, NULL);
  if (!check_kind (frame, error))
    return NULL;
  double scale = isnan (measure->scale) ? 1.0 : measure->scale;
  g_autoptr (TfHintGrid) grid = tf_hint_grid_new (frame, params, scale, work);
  if (grid == NULL)
    return set_cancelled (error), NULL;
  g_autoptr (TfHintPieces) pieces = tf_hint_pieces_new (grid, params, work);
  tf_hint_grid_free_levels (grid);
  tf_hint_join (pieces);
  Search search = { frame, pieces, measure, NULL, NULL };
  return gather (&search, work, error);
}
