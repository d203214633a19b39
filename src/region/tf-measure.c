/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-measure.h"

#include <math.h>
#include <string.h>

#include <glib/gi18n-lib.h>

#include "tf-constants.h"
#include "tf-measure-private.h"

/* Leading polarity is sure beyond this many sigma of the poles' distance in longitude. */
static const double SURE_SIGMAS = 2.0;
/* A share of the observed field that the potential estimate leaves unexplained is said above
 * this. */
static const double LEFT_SAID = 0.02;

typedef struct
{
  TfSpread noise, outline, floor;
} Terms;

void
tf_measure_clear (TfMeasure *measure)
{
  g_clear_pointer (&measure->cautions, g_ptr_array_unref);
  memset (measure, 0, sizeof *measure);
}

void
tf_measure_copy (TfMeasure *to, const TfMeasure *from)
{
  *to = *from;
  to->cautions = tf_notes_new ();
  for (guint k = 0; k < tf_notes_get_n (from->cautions); k++)
    tf_notes_add_copy (to->cautions, tf_notes_get (from->cautions, k));
}

/* Terms in quadrature; a term that is not there (NaN) adds nothing, but if none is there the
 * sum is NaN. */
static double
quadrature (double a, double b, double c)
{
  double sum = 0.0;
  if (isnan (a) && isnan (b) && isnan (c))
    return NAN;
  sum += isnan (a) ? 0.0 : a * a;
  sum += isnan (b) ? 0.0 : b * b;
  sum += isnan (c) ? 0.0 : c * c;
  return sqrt (sum);
}

static void
set_nothing (TfSpread *spread)
{
  *spread = (TfSpread){ { NAN, NAN }, { NAN, NAN }, NAN, NAN, NAN, NAN };
}

static void
set_pole (TfPole *pole, const TfFrame *frame, const TfAxis *axis, guint sign, const TfSum *sum,
          const Terms *terms)
{
  const TfGeometry *g = tf_frame_get_geometry (frame);
  double hemisphere = 2.0 * TF_PI * g->radius_mm * g->radius_mm;
  pole->flux_mx = axis->flux[sign];
  pole->flux_noise_mx = terms->noise.flux[sign];
  pole->flux_sigma_mx
      = quadrature (terms->noise.flux[sign], terms->outline.flux[sign], terms->floor.flux[sign]);
  pole->carrington_lon_deg = axis->lon[sign];
  pole->lon_deg = axis->has[sign] ? tf_geometry_stonyhurst_of (g, axis->lon[sign]) : (double)NAN;
  pole->lat_deg = axis->lat[sign];
  pole->pinned = axis->pinned[sign];
  pole->place_noise_deg = pole->pinned ? 0.0 : terms->noise.place[sign];
  pole->place_sigma_deg = pole->pinned
                              ? 0.0
                              : quadrature (terms->noise.place[sign], terms->outline.place[sign],
                                            terms->floor.place[sign]);
  pole->rms_radius_deg = axis->radius[sign];
  pole->pixels = sum->n;
  pole->magnetic_area_msh = 1e6 * sum->area / hemisphere;
}

/* On a map a region's time is that of its own column, where the rotation is known. */
static void
set_map_time (TfMeasure *m, const TfFrame *frame)
{
  double x, y;
  if (!tf_geometry_sun_to_pixel (tf_frame_get_geometry (frame), m->carrington_lon_deg, m->lat_deg,
                                 &x, &y, NULL))
    return;
  TfTime column = tf_frame_info_column_time (tf_frame_get_info (frame), x);
  if (tf_time_is_known (column))
    m->time = column;
}

/* The region's place: midpoint of the poles, or the one pole. */
static void
set_place (TfMeasure *m, const TfFrame *frame, const TfAxis *axis)
{
  const TfGeometry *g = tf_frame_get_geometry (frame);
  double middle[3] = { 0.0 }, x, y;
  m->lat_deg = m->carrington_lon_deg = m->stonyhurst_lon_deg = m->cmd_deg = m->mu = NAN;
  if (!axis->has[0] && !axis->has[1])
    return;
  for (guint sign = 0; sign < 2; sign++)
    for (guint k = 0; k < 3 && axis->has[sign]; k++)
      middle[k] += axis->unit[sign][k];
  tf_sphere_lonlat (middle, &m->carrington_lon_deg, &m->lat_deg);
  m->stonyhurst_lon_deg = tf_geometry_stonyhurst_of (g, m->carrington_lon_deg);
  if (tf_geometry_is_map (g))
    {
      set_map_time (m, frame);
      return;
    }
  m->cmd_deg = tf_wrap_180 (m->carrington_lon_deg - tf_geometry_central_carrington (g));
  tf_geometry_sun_to_pixel (g, m->carrington_lon_deg, m->lat_deg, &x, &y, &m->mu);
}

static void
set_axis (TfMeasure *m, const TfFrame *frame, const TfAxis *axis, const Terms *terms)
{
  double radius = tf_frame_get_geometry (frame)->radius_mm;
  m->axis_bearing_deg = axis->bearing;
  m->axis_tilt_deg = axis->tilt;
  m->tilt_terms.noise = terms->noise.tilt;
  m->tilt_terms.outline = terms->outline.tilt;
  m->tilt_terms.floor = terms->floor.tilt;
  m->tilt_terms.total = quadrature (terms->noise.tilt, terms->outline.tilt, terms->floor.tilt);
  m->separation_deg = axis->separation;
  m->separation_noise_deg = terms->noise.separation;
  m->separation_sigma_deg
      = quadrature (terms->noise.separation, terms->outline.separation, terms->floor.separation);
  m->separation_mm = axis->separation * TF_DEG * radius;
  m->compactness = axis->separation / (axis->radius[0] + axis->radius[1]);
}

static void
set_flux (TfMeasure *m, const TfFrame *frame, const TfAxis *axis, const Terms *terms,
          const TfMeasureParams *params)
{
  double radius = tf_frame_get_geometry (frame)->radius_mm;
  double sum = axis->flux[0] + axis->flux[1];
  m->flux_unsigned_mx = sum;
  m->imbalance
      = sum > 0.0 ? (axis->flux[TF_POSITIVE] - axis->flux[TF_NEGATIVE]) / sum : (double)NAN;
  m->ephemeral = sum < params->ephemeral_mx;
  m->axial_dipole_gauss = axis->dipole;
  m->axial_dipole_sigma_gauss
      = quadrature (terms->noise.dipole, terms->outline.dipole, terms->floor.dipole);
  m->axial_dipole_poles_gauss = NAN;
  if (axis->has[0] && axis->has[1])
    m->axial_dipole_poles_gauss = 3.0 * 0.5 * sum
                                  * (axis->unit[TF_POSITIVE][2] - axis->unit[TF_NEGATIVE][2])
                                  / (4.0 * TF_PI * radius * radius * 1e16);
}

/* Witness (a) is undecided when the poles' longitudes differ by less than their own one-sigma. */
static void
set_witnesses (TfMeasure *m, const TfSums *sums, const TfAxis *axis, const TfPieces *pieces,
               const Terms *terms, double radius_mm, gboolean circle)
{
  TfAxis strong;
  double sigma = quadrature (terms->noise.dx, terms->outline.dx, terms->floor.dx);
  tf_axis_from_sums (&strong, sums->at[TF_LEVEL_STRONG], NULL, radius_mm, circle);
  m->leading_polarity = axis->west < 0 ? 0 : axis->west == TF_POSITIVE ? 1 : -1;
  m->witnesses[0] = tf_axis_witness (axis, isnan (sigma) ? 0.0 : sigma);
  m->witnesses[1] = tf_axis_witness (&strong, 0.0);
  m->witnesses[2] = pieces->witness;
  m->leading_sure = m->leading_polarity != 0 && axis->dx > SURE_SIGMAS * sigma;
  for (guint k = 0; k < G_N_ELEMENTS (m->witnesses); k++)
    m->leading_sure = m->leading_sure && m->witnesses[k] == m->leading_polarity;
}

static void
set_method (TfMeasure *m, const TfRegionSamples *samples)
{
  const TfMeasureParams *p = samples->params;
  m->time = tf_frame_get_info (samples->frame)->time;
  m->field_used = (TfFieldUsed)p->field_used;
  if (samples->added == NULL && m->field_used == TF_FIELD_USED_POTENTIAL)
    m->field_used = TF_FIELD_USED_RADIAL;
  m->floor_kind = (TfFloorKind)p->floor_kind;
  m->scale = p->scale;
  m->noise_gauss = tf_region_scale (p)
                   * tf_region_sigma (samples->frame, samples->mean_mu, samples->mean_abs_z);
  if (p->floor_kind == TF_FLOOR_EVEN)
    m->floor_gauss = tf_region_even_floor (samples->frame, p);
  else
    m->floor_gauss = isnan (p->floor_gauss) ? p->floor_sigma * m->noise_gauss : p->floor_gauss;
}

static double
sine_mean (const TfSum sums[2])
{
  double area = sums[0].area + sums[1].area;
  return area > 0.0 ? (sums[0].area_z + sums[1].area_z) / area : 0.0;
}

static void
find_terms (Terms *terms, TfMeasure *m, const TfRegionSamples *samples, const TfSums *sums,
            const TfAxis *axis, const TfOutline *outline)
{
  tf_region_noise (samples, axis, sine_mean (sums->at[TF_LEVEL_BASE]), &terms->noise,
                   &m->noise_flux_mx);
  if (samples->params->realisations > 1)
    tf_region_realise (samples, outline, &terms->noise);
  m->leader_flips = tf_region_floor_term (samples, sums, axis, outline, &terms->floor);
}

static gboolean
check_params (const TfFrame *frame, const TfMeasureParams *params, GError **error)
{
  if (params->field_used == TF_FIELD_USED_POTENTIAL
      && tf_geometry_is_map (tf_frame_get_geometry (frame))
      && tf_frame_get_info (frame)->field != TF_FIELD_RADIAL)
    g_set_error_literal (error, TF_REGION_ERROR, TF_REGION_ERROR_KIND,
                         _ ("A map has no line of sight to work a potential field out from: choose "
                            "the radial field or the field as "
                            "observed."));
  else if (params->strong_floors < 1.0 + params->floor_step)
    g_set_error_literal (error, TF_REGION_ERROR, TF_REGION_ERROR_OPTION,
                         _ ("Strong field must lie above the floor by more than the floor's step: "
                            "raise strong-floors or lower floor-step."));
  else
    return TRUE;
  return FALSE;
}

/* @outline is at the frame's time. */
static void
measure (TfMeasure *m, const TfFrame *frame, const TfMask *mask, const TfOutline *outline,
         const TfMeasureParams *params, const TfPotential *potential, int spot_witness)
{
  double radius = tf_frame_get_geometry (frame)->radius_mm;
  gboolean circle = params->tilt_form == 1;
  TfSums sums;
  TfAxis axis;
  TfPieces pieces;
  Terms terms;
  const TfSum *base = sums.at[TF_LEVEL_BASE];
  set_nothing (&terms.outline);
  if (params->outline_term && outline != NULL) /* first, so that not all pixels are held at once */
    tf_region_outline_term (frame, outline, params, potential, &terms.outline);
  g_autoptr (TfRegionSamples) samples = tf_region_samples_new (frame, mask, params, potential);
  m->cautions = tf_notes_new ();
  set_method (m, samples);
  tf_region_sums (samples, &sums);
  tf_axis_from_sums (&axis, base, outline, radius, circle);
  tf_region_pieces (samples, axis.flux[0] + axis.flux[1], &pieces);
  if (spot_witness != TF_WITNESS_ABSENT)
    pieces.witness = spot_witness;
  find_terms (&terms, m, samples, &sums, &axis, outline);
  m->pieces = pieces.n;
  set_pole (&m->positive, frame, &axis, TF_POSITIVE, &base[TF_POSITIVE], &terms);
  set_pole (&m->negative, frame, &axis, TF_NEGATIVE, &base[TF_NEGATIVE], &terms);
  set_place (m, frame, &axis);
  set_axis (m, frame, &axis, &terms);
  set_flux (m, frame, &axis, &terms, params);
  set_witnesses (m, &sums, &axis, &pieces, &terms, radius, circle);
  tf_region_cautions (m, samples, &axis);
  if (potential != NULL && tf_potential_get_left (potential) > LEFT_SAID)
    tf_notes_add (m->cautions, "potential-unsettled", "d",
                  100.0 * tf_potential_get_left (potential));
}

/* The potential estimate on a box about the mask's pixels, so that it is the same with and
 * without an outline. */
static TfPotential *
make_potential (const TfFrame *frame, const TfMask *mask, const TfMeasureParams *params)
{
  double middle[3] = { 0.0 }, lon, lat, radius = 0.0;
  guint n = tf_mask_get_n (mask);
  const TfMaskPixel *pixels = tf_mask_get (mask, 0);
  for (guint k = 0; k < n; k++)
    for (guint i = 0; i < 3; i++)
      middle[i] += pixels[k].unit[i];
  tf_sphere_lonlat (middle, &lon, &lat);
  for (guint k = 0; k < n; k++)
    {
      double pixel_lon, pixel_lat;
      tf_sphere_lonlat (pixels[k].unit, &pixel_lon, &pixel_lat);
      radius = fmax (radius, tf_sphere_distance (lon, lat, pixel_lon, pixel_lat));
    }
  g_autoptr (TfOutline) cap = tf_outline_new_cap (tf_frame_get_info (frame)->time, lon, lat,
                                                  CLAMP (radius, 0.01, 80.0), 0);
  return tf_potential_new (frame, cap, params->potential_step_mm, params->potential_margin_mm);
}

gboolean
tf_region_measure (TfMeasure *m, const TfFrame *frame, const TfMask *mask, const TfOutline *outline,
                   const TfMeasureParams *params, int spot_witness, GError **error)
{
  g_return_val_if_fail (m != NULL && frame != NULL && mask != NULL && params != NULL, FALSE);
  memset (m, 0, sizeof *m);
  if (!check_params (frame, params, error))
    return FALSE;
  if (tf_mask_get_n (mask) == 0)
    {
      const char *path = tf_frame_get_path (frame);
      g_set_error (error, TF_REGION_ERROR, TF_REGION_ERROR_EMPTY,
                   _ ("No pixel of the frame %s lies inside the outline: it is behind the limb, "
                      "off the frame or smaller than "
                      "a pixel. Draw it elsewhere or choose another frame."),
                   path[0] != '\0' ? path : _ ("in memory"));
      return FALSE;
    }
  gboolean wants = params->field_used == TF_FIELD_USED_POTENTIAL
                   && tf_frame_get_info (frame)->field != TF_FIELD_RADIAL;
  g_autoptr (TfOutline) here
      = outline != NULL ? tf_mask_outline (frame, outline, (guint)params->law) : NULL;
  g_autoptr (TfPotential) potential = wants ? make_potential (frame, mask, params) : NULL;
  if (wants && potential == NULL)
    {
      g_set_error_literal (error, TF_REGION_ERROR, TF_REGION_ERROR_OPTION,
                           _ ("The potential field cannot be worked out here: the region's "
                              "surroundings lie beyond the limb, or there is no "
                              "memory for its box. Choose the radial field, or another frame."));
      return FALSE;
    }
  measure (m, frame, mask, here, params, potential, spot_witness);
  return TRUE;
}

gboolean
tf_measure_masked (TfMeasure *m, const TfFrame *frame, const TfMask *mask, const TfOutline *outline,
                   const TfMeasureParams *params, GError **error)
{
  return tf_region_measure (m, frame, mask, outline, params, TF_WITNESS_ABSENT, error);
}

gboolean
tf_measure_region (TfMeasure *m, const TfFrame *frame, const TfOutline *outline,
                   const TfMeasureParams *params, GError **error)
{
  g_return_val_if_fail (m != NULL && frame != NULL && outline != NULL && params != NULL, FALSE);
  g_autoptr (TfMask) mask = tf_mask_new (frame, outline, params->mu_min, (guint)params->law);
  return tf_measure_masked (m, frame, mask, outline, params, error);
}
