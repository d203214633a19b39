/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-hint.h"

#include <math.h>
#include <stddef.h>

#include <glib/gi18n-lib.h>

#include "tf-hint-private.h"

static const double BIPOLE_WEAKER = 0.15, SMALL_WEAKER = 0.25;
static const double SMALL_MX = 1e21, SMALL_LENGTH_MM = 45.0;
static const double UNIPOLAR_MU = 0.45, MU_FULL = 0.5;
static const double LONG = 0.9, ONE_SIDED = 0.5;

#define AT(member) offsetof (TfHintParams, member)

const TfOption tf_hint_options[] = {
  { "cell", TF_OPTION_NUMBER, "Mm", 4.0, 1.0, 10.0, NULL, N_ ("cell of the equal-area working grid"), AT (cell_mm) },
  { "smooth-field", TF_OPTION_NUMBER, "Mm", 4.0, 1.0, 20.0, NULL, N_ ("sigma of the Gaussian that smooths the field"),
    AT (smooth_mm) },
  { "low-sigma", TF_OPTION_NUMBER, "sigma", 3.5, 1.0, 20.0, NULL,
    N_ ("low level of the smoothed radial field in units of its noise"), AT (low_sigma) },
  { "low-gauss", TF_OPTION_NUMBER, "G", 12.0, 0.0, 500.0, NULL, N_ ("least low level, in (scaled) gauss"),
    AT (low_gauss) },
  { "high-sigma", TF_OPTION_NUMBER, "sigma", 8.0, 1.0, 50.0, NULL,
    N_ ("level that a piece must reach somewhere, in units of the noise"), AT (high_sigma) },
  { "patch-flux", TF_OPTION_NUMBER, "Mx", 4e19, 0.0, 1e22, NULL, N_ ("pieces with less flux are dropped"),
    AT (patch_mx) },
  { "reach", TF_OPTION_NUMBER, "Mm", 40.0, 1.0, 200.0, NULL, N_ ("widest gap across which pieces may be joined"),
    AT (reach_mm) },
  { "least-score", TF_OPTION_NUMBER, "", 0.14, 0.01, 1.0, NULL, N_ ("score below which no more pieces are joined"),
    AT (score_min) },
  { "bipole-flux", TF_OPTION_NUMBER, "Mx", 3e20, 0.0, 1e23, NULL,
    N_ ("least unsigned flux of a bipole, times (0.5/mu)^2 below mu 0.5"), AT (bipole_mx) },
  { "unipolar-flux", TF_OPTION_NUMBER, "Mx", 2e21, 0.0, 1e23, NULL,
    N_ ("least flux of a unipolar hint, times (0.5/mu)^2 below mu 0.5"), AT (unipolar_mx) },
  { "grow", TF_OPTION_NUMBER, "Mm", 6.0, 0.0, 50.0, NULL, N_ ("an outline is grown by this"), AT (grow_mm) },
  { "simplify", TF_OPTION_NUMBER, "Mm", 3.0, 0.1, 30.0, NULL, N_ ("tolerance to which an outline is simplified"),
    AT (simplify_mm) },
  { NULL },
};

void
tf_hint_params_init (TfHintParams *params)
{
  tf_options_reset (tf_hint_options, params);
}

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
  double limb = MAX (1.0, (MU_FULL / mu) * (MU_FULL / mu));
  *unipolar = weaker < BIPOLE_WEAKER;
  if (isnan (mu))
    return FALSE;
  if (*unipolar)
    return total >= p->unipolar_mx * limb && mu >= UNIPOLAR_MU;
  if (total < p->bipole_mx * limb)
    return FALSE;
  return total >= SMALL_MX || (weaker >= SMALL_WEAKER && tf_hint_separation (cluster, radius_mm) <= SMALL_LENGTH_MM);
}

static void
add_cautions (TfHint *hint, const TfHintPieces *pieces, const TfHintCluster *cluster, gboolean edge,
              const TfMeasureParams *measure)
{
  double total = tf_hint_total (cluster), length = tf_hint_length (total);
  double separation = tf_hint_separation (cluster, pieces->grid->radius_mm);
  double sided = fabs (cluster->flux[0] - cluster->flux[1]) / total;
  hint->cautions = tf_notes_new ();
  if (cluster->nest)
    tf_notes_add (hint->cautions, "hint-neighbour-near", "");
  if (separation > LONG * length)
    tf_notes_add (hint->cautions, "hint-long", "dd", separation, length);
  if (!hint->unipolar && sided > ONE_SIDED)
    tf_notes_add (hint->cautions, "hint-one-sided", "d", 100.0 * sided);
  if (edge)
    tf_notes_add (hint->cautions, "hint-at-edge", "");
  if (pieces->grid->active)
    tf_notes_add (hint->cautions, "hint-active-frame", "d", pieces->params->low_gauss);
  if (!hint->unipolar && hint->measure.leader_flips)
    tf_notes_add (hint->cautions, "hint-leader-flips", "d", 100.0 * measure->floor_step);
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
  if (!tf_measure_region (&hint->measure, frame, outline, measure, NULL))
    {
      tf_hint_free (hint);
      return NULL;
    }
  add_cautions (hint, pieces, cluster, edge, measure);
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

/* What the threads share; every cluster has its own place in @hints. */
typedef struct
{
  const TfFrame *frame;
  const TfHintPieces *pieces;
  const TfMeasureParams *measure;
  TfHint **hints;
} Search;

/* A "band" of the pool is one cluster here. */
static void
try_cluster (guint band, guint first, guint n, guint worker, gpointer data)
{
  const Search *search = data;
  if (tf_hint_root (search->pieces, band) == band)
    search->hints[band] = make_hint (search->frame, search->pieces, band, search->measure);
}

static GPtrArray *
gather (Search *search, const TfWork *work, GError **error)
{
  guint n = search->pieces->clusters->len;
  g_autoptr (GPtrArray) hints = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_hint_free);
  g_autofree TfHint **found = g_new0 (TfHint *, MAX (n, 1));
  search->hints = found;
  gboolean done = tf_bands_run (work, n * TF_BAND_ROWS, try_cluster, search);
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
  g_autoptr (TfHintPieces) pieces = tf_hint_pieces_new (grid, params);
  tf_hint_join (pieces);
  Search search = { frame, pieces, measure, NULL };
  return gather (&search, work, error);
}
