/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-companion.h"

#include <math.h>
#include <stddef.h>

#include <glib/gi18n-lib.h>

#include "tf-constants.h"
#include "tf-fill-private.h"
#include "tf-measure-private.h"

enum
{
  VIEW_SAMPLES = 24
};
/* Least share of the field frame's disk that the intensity frame must hold when no outline is
 * given. */
static const double HALF = 0.5;

static const char *const limbs[] = { "own", "published", NULL };

#define AT(member) offsetof (TfCompanionParams, member)

/* The two levels: Mathew, Martinez Pillet, Solanki & Krivova 2007, A&A 465, 291 (from memory;
 * continuum near 677 nm). The limits of the match are our choice: in half an hour a region moves a
 * quarter of a degree. */
const TfOption tf_companion_options[] = {
  { "companion-apart", TF_OPTION_NUMBER, "min", 30.0, 0.0, 1440.0, NULL,
    N_ ("most time between a magnetogram and its companion intensity frame"), AT (apart_min) },
  { "companion-vantage", TF_OPTION_NUMBER, "deg", 1.0, 0.0, 90.0, NULL,
    N_ ("most angle between the observers of the two"), AT (vantage_deg) },
  { "companion-cover", TF_OPTION_NUMBER, "", 0.98, 0.1, 1.0, NULL,
    N_ ("least share of the outline that the companion shows"), AT (cover) },
  { "limb-darkening", TF_OPTION_CHOICE, "", TF_LIMB_OWN, 0, 1, limbs,
    N_ ("own: by the companion's own profile from centre to limb; published: by the law of Allen's "
        "Astrophysical Quantities"),
    AT (limb) },
  { "umbra-level", TF_OPTION_NUMBER, "", 0.655, 0.1, 0.95, NULL,
    N_ ("umbra: below this share of the quiet Sun (Mathew and others 2007)"), AT (umbra) },
  { "penumbra-level", TF_OPTION_NUMBER, "", 0.945, 0.2, 0.99, NULL,
    N_ ("spot: below this share of the quiet Sun (Mathew and others 2007)"), AT (penumbra) },
  { "spot-fwhm", TF_OPTION_NUMBER, "Mm", 2.0, 0.5, 20.0, NULL,
    N_ ("width of the Gaussian through which spots are looked for"), AT (spot_fwhm_mm) },
  { "spot-step", TF_OPTION_NUMBER, "Mm", 1.0, 0.25, 10.0, NULL,
    N_ ("distance of the nodes on which spots are looked for"), AT (spot_step_mm) },
  { "spot-smallest", TF_OPTION_NUMBER, "msh", 5.0, 0.0, 1000.0, NULL,
    N_ ("dark places smaller than this many millionths of the hemisphere are no spots"),
    AT (smallest_msh) },
  { NULL },
};

void
tf_companion_params_init (TfCompanionParams *params)
{
  tf_options_reset (tf_companion_options, params);
}

/* Between the observers as seen from the Sun; by Stonyhurst longitude where both have one. */
static double
vantage_angle (const TfObserver *a, const TfObserver *b)
{
  gboolean stonyhurst = isfinite (a->stonyhurst_lon_deg) && isfinite (b->stonyhurst_lon_deg);
  return tf_sphere_distance (stonyhurst ? a->stonyhurst_lon_deg : a->carrington_lon_deg, a->b0_deg,
                             stonyhurst ? b->stonyhurst_lon_deg : b->carrington_lon_deg, b->b0_deg);
}

static gboolean
holds (const TfGeometry *g, double lon, double lat)
{
  double x, y, mu;
  return tf_geometry_sun_to_pixel (g, lon, lat, &x, &y, &mu) && x >= 0.5 && y >= 0.5
         && x <= g->width + 0.5 && y <= g->height + 0.5;
}

typedef struct
{
  const TfGeometry *geometry;
  double all, held;
} View;

static void
add_sample (const double unit[3], double weight, gpointer data)
{
  View *view = data;
  double lon, lat;
  tf_sphere_lonlat (unit, &lon, &lat);
  view->all += weight;
  view->held += holds (view->geometry, lon, lat) ? weight : 0.0;
}

static double
share_of_outline (const TfGeometry *intensity, const TfOutline *outline)
{
  View view = { intensity, 0.0, 0.0 };
  g_autoptr (TfFill) fill = tf_fill_new (outline);
  tf_fill_sample (fill, VIEW_SAMPLES, add_sample, &view);
  return view.all > 0.0 ? view.held / view.all : 0.0;
}

static double
share_of_disk (const TfGeometry *intensity, const TfGeometry *field)
{
  double all = 0.0, held = 0.0;
  for (guint k = 0; k < VIEW_SAMPLES * VIEW_SAMPLES; k++)
    {
      TfPlace place;
      double x = 0.5 + field->width * (k % VIEW_SAMPLES + 0.5) / VIEW_SAMPLES;
      double y = 0.5 + field->height * (k / VIEW_SAMPLES + 0.5) / VIEW_SAMPLES;
      if (!tf_geometry_pixel_to_sun (field, x, y, &place))
        continue;
      all += 1.0;
      held += holds (intensity, place.carrington_lon_deg, place.lat_deg) ? 1.0 : 0.0;
    }
  return all > 0.0 ? held / all : 0.0;
}

static TfNote *
find_reason (const TfFrameInfo *field, const TfFrameInfo *intensity, const TfOutline *outline,
             const TfCompanionParams *params)
{
  if (intensity->role != TF_ROLE_INTENSITY)
    return tf_note_new ("companion-no-intensity", "");
  if (tf_geometry_is_map (&field->geometry) || field->geometry.projection == TF_PROJECTION_NONE
      || intensity->geometry.projection != TF_PROJECTION_TAN)
    return tf_note_new ("companion-no-disk", "");
  if (tf_notes_find (intensity->cautions, "header-lies") != NULL
      || tf_notes_find (intensity->cautions, "header-of-another-size") != NULL)
    return tf_note_new ("companion-lies", "");
  if (!tf_time_is_known (field->time) || !tf_time_is_known (intensity->time))
    return tf_note_new ("companion-no-time", "");
  double minutes = fabs (field->time.s - intensity->time.s) / 60.0;
  if (minutes > params->apart_min)
    return tf_note_new ("companion-apart", "dd", minutes, params->apart_min);
  double angle = vantage_angle (&field->geometry.observer, &intensity->geometry.observer);
  if (!(angle <= params->vantage_deg))
    return tf_note_new ("companion-vantage", "dd", angle, params->vantage_deg);
  double share = outline != NULL ? share_of_outline (&intensity->geometry, outline)
                                 : share_of_disk (&intensity->geometry, &field->geometry);
  if (share < (outline != NULL ? params->cover : HALF))
    return tf_note_new (outline != NULL ? "companion-view" : "companion-view-disk", "d",
                        100.0 * share);
  return NULL;
}

gboolean
tf_companion_matches (const TfFrameInfo *field, const TfFrameInfo *intensity,
                      const TfOutline *outline, const TfCompanionParams *params, TfNote **reason)
{
  g_return_val_if_fail (field != NULL && intensity != NULL && params != NULL, FALSE);
  g_autoptr (TfNote) why = find_reason (field, intensity, outline, params);
  gboolean matches = why == NULL;
  if (reason != NULL)
    *reason = g_steal_pointer (&why);
  return matches;
}

gboolean
tf_measure_region_with (TfMeasure *m, const TfFrame *frame, const TfOutline *outline,
                        const TfMeasureParams *params, const TfSpots *spots, GError **error)
{
  g_return_val_if_fail (m != NULL && frame != NULL && outline != NULL && params != NULL, FALSE);
  int witness = spots != NULL && spots->matched ? spots->leading_polarity : TF_WITNESS_ABSENT;
  g_autoptr (TfMask) mask = tf_mask_new (frame, outline, params->mu_min, (guint)params->law);
  return tf_region_measure (m, frame, mask, outline, params, witness, error);
}
