/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <string.h>

#include "tf-constants.h"
#include "tf-measure-private.h"

enum
{
  SIGMA_STEPS = 512
};
static const double CM2_IN_MM2 = 1e16;

double
tf_region_scale (const TfMeasureParams *params)
{
  return isnan (params->scale) ? 1.0 : params->scale;
}

/* Whether the field used is the observed one divided by mu. */
gboolean
tf_region_divides (const TfFrame *frame, const TfMeasureParams *params)
{
  return params->field_used != TF_FIELD_USED_OBSERVED
         && !tf_geometry_is_map (tf_frame_get_geometry (frame))
         && tf_frame_get_info (frame)->field != TF_FIELD_RADIAL;
}

double
tf_region_sigma (const TfFrame *frame, double mu, double abs_z)
{
  gboolean map = tf_geometry_is_map (tf_frame_get_geometry (frame));
  return tf_frame_noise_at (frame, map ? asin (MIN (abs_z, 1.0)) / TF_DEG : mu);
}

/* On a map and in a radial product noise does not grow by 1/mu: the value at mu 0.5, or at 30
 * deg of latitude. */
double
tf_even_floor (const TfFrame *frame)
{
  gboolean map = tf_geometry_is_map (tf_frame_get_geometry (frame));
  gboolean los = !map && tf_frame_get_info (frame)->field != TF_FIELD_RADIAL;
  return 3.0 * tf_region_sigma (frame, 0.5, 0.5) / (los ? 0.5 : 1.0);
}

double
tf_region_even_floor (const TfFrame *frame, const TfMeasureParams *params)
{
  if (!isnan (params->floor_gauss))
    return params->floor_gauss;
  return tf_even_floor (frame) * tf_region_scale (params);
}

/* Noise as a table over mu (maps: sine of latitude), so that a pixel costs a look-up. */
static void
fill_sigma_table (const TfFrame *frame, double scale, float table[SIGMA_STEPS + 2])
{
  for (guint k = 0; k <= SIGMA_STEPS; k++)
    {
      double t = (double)k / SIGMA_STEPS;
      table[k] = (float)(scale * tf_region_sigma (frame, t, t));
    }
  table[SIGMA_STEPS + 1] = table[SIGMA_STEPS];
}

/* @t in [0, 1]; the table goes one step beyond. */
static inline float
look_up (const float *table, float t)
{
  float at = t * SIGMA_STEPS;
  int k = (int)at;
  return table[k] + (at - (float)k) * (table[k + 1] - table[k]);
}

static inline void
look_at (TfExtreme *extreme, float size)
{
  if (size < extreme->value)
    return;
  extreme->n = size > extreme->value ? 1 : extreme->n + 1;
  extreme->value = size;
}

static void
fill_samples (TfRegionSamples *s)
{
  float table[SIGMA_STEPS + 2];
  const TfMeasureParams *p = s->params;
  gboolean map = tf_geometry_is_map (tf_frame_get_geometry (s->frame));
  gboolean divides = tf_region_divides (s->frame, p), even = p->floor_kind == TF_FLOOR_EVEN;
  double even_floor = even ? tf_region_even_floor (s->frame, p) : 0.0, sum_mu = 0.0, sum_z = 0.0;
  float scale = (float)tf_region_scale (p);
  gboolean from_sigma = isnan (p->floor_gauss);
  fill_sigma_table (s->frame, scale, table);
  for (guint k = 0; k < s->n; k++)
    {
      const TfMaskPixel *pixel = &s->pixels[k];
      TfSampled *out = &s->samples[k];
      double mu = pixel->mu, z = fabs (pixel->unit[2]);
      out->field = pixel->field * scale;
      out->sigma = look_up (table, map ? (float)z : pixel->mu);
      out->weight = (float)(pixel->area_mm2 * CM2_IN_MM2 / (divides ? mu : 1.0));
      look_at (&s->extreme[pixel->field > 0.0f ? TF_POSITIVE : TF_NEGATIVE], fabsf (pixel->field));
      if (even)
        out->floor = (float)(divides ? even_floor * mu : even_floor);
      else
        out->floor = from_sigma ? (float)p->floor_sigma * out->sigma : (float)p->floor_gauss;
      sum_mu += mu;
      sum_z += z;
    }
  s->mean_mu = sum_mu / s->n;
  s->mean_abs_z = sum_z / s->n;
}

/* The estimate as an observed field that stood upright would show it: times mu. */
static void
add_potential (TfRegionSamples *s, const TfPotential *potential)
{
  double scale = tf_region_scale (s->params);
  s->added = g_new (float, s->n);
  for (guint k = 0; k < s->n; k++)
    {
      const TfMaskPixel *pixel = &s->pixels[k];
      double field
          = pixel->mu * tf_potential_radial (potential, pixel->unit, pixel->field, pixel->mu);
      s->added[k] = (float)(scale * (field - pixel->field));
      s->samples[k].field += s->added[k];
    }
}

TfRegionSamples *
tf_region_samples_new (const TfFrame *frame, const TfMask *mask, const TfMeasureParams *params,
                       const TfPotential *potential)
{
  TfRegionSamples *s = g_new0 (TfRegionSamples, 1);
  s->frame = frame;
  s->mask = mask;
  s->params = params;
  s->n = tf_mask_get_n (mask);
  s->pixels = s->n > 0 ? tf_mask_get (mask, 0) : NULL;
  s->samples = g_new (TfSampled, MAX (s->n, 1));
  if (s->n > 0)
    fill_samples (s);
  if (s->n > 0 && potential != NULL)
    add_potential (s, potential);
  return s;
}

void
tf_region_samples_free (TfRegionSamples *samples)
{
  if (samples == NULL)
    return;
  g_free (samples->samples);
  g_free (samples->added);
  g_free (samples);
}

static void
merge (TfSum *to, const TfSum *from)
{
  to->flux += from->flux;
  for (guint k = 0; k < 3; k++)
    to->sum[k] += from->sum[k];
  to->area += from->area;
  to->area_z += from->area_z;
  to->n += from->n;
}

/* One pass: each pixel goes into the highest level it reaches; then the levels are summed from
 * the top. Levels may not be in order when strong_floors < 1 + floor_step: the options' ranges
 * keep them so. A pixel at a floor of 0 G belongs to every level. */
void
tf_region_sums (const TfRegionSamples *samples, TfSums *sums)
{
  const TfMeasureParams *p = samples->params;
  const float low = (float)(1.0 - p->floor_step), high = (float)(1.0 + p->floor_step);
  const float strong = (float)p->strong_floors;
  memset (sums, 0, sizeof *sums);
  for (guint k = 0; k < samples->n; k++)
    {
      const TfSampled *s = &samples->samples[k];
      float size = fabsf (s->field), floor = s->floor;
      if (!(size >= low * floor) || !(size > 0.0f))
        continue;
      guint level = (size >= floor) + (size >= high * floor) + (size >= strong * floor);
      tf_sum_add (&sums->at[level][s->field > 0.0f ? TF_POSITIVE : TF_NEGATIVE],
                  samples->pixels[k].unit, samples->pixels[k].area_mm2, (double)size * s->weight);
    }
  for (guint level = TF_N_LEVELS - 1; level > 0; level--)
    for (guint sign = 0; sign < 2; sign++)
      merge (&sums->at[level - 1][sign], &sums->at[level][sign]);
}

/* A pole of one pixel still has that pixel's own extent: a uniform square of side a has rms
 * radius a / sqrt (6). */
static double
rms_radius (const TfSum *sum, double length, double radius_mm)
{
  double pixel = sqrt (sum->area / (6.0 * sum->n)) / radius_mm;
  return MAX (sqrt (2.0 * MAX (0.0, 1.0 - length / sum->flux)), pixel) / TF_DEG;
}

static void
find_pole (TfAxis *axis, guint sign, const TfSum *sum, double radius_mm)
{
  double length
      = sqrt (sum->sum[0] * sum->sum[0] + sum->sum[1] * sum->sum[1] + sum->sum[2] * sum->sum[2]);
  axis->flux[sign] = sum->flux;
  axis->has[sign] = length > 0.0;
  axis->radius[sign] = axis->has[sign] ? rms_radius (sum, length, radius_mm) : (double)NAN;
  axis->lon[sign] = axis->lat[sign] = NAN;
  if (!axis->has[sign])
    return;
  for (guint k = 0; k < 3; k++)
    axis->unit[sign][k] = sum->sum[k] / length;
  tf_sphere_lonlat (axis->unit[sign], &axis->lon[sign], &axis->lat[sign]);
}

static void
apply_pins (TfAxis *axis, const TfOutline *outline)
{
  for (guint k = 0; k < tf_outline_get_n_pins (outline); k++)
    {
      const TfPinnedPole *pin = tf_outline_get_pin (outline, k);
      guint sign = pin->polarity > 0 ? TF_POSITIVE : TF_NEGATIVE;
      axis->has[sign] = axis->pinned[sign] = TRUE;
      axis->lon[sign] = tf_wrap_360 (pin->lon_deg);
      axis->lat[sign] = pin->lat_deg;
      tf_sphere_unit (pin->lon_deg, pin->lat_deg, axis->unit[sign]);
    }
}

/* 3 / (4 pi R^2) times the sum of B_r sin (latitude) dA, after the net flux is taken away
 * evenly from the area above the floor; Mx / cm2 = G. */
static double
dipole (const TfSum sums[2], double radius_mm)
{
  double area = sums[0].area + sums[1].area;
  if (!(area > 0.0))
    return NAN;
  double net = sums[TF_POSITIVE].flux - sums[TF_NEGATIVE].flux;
  double moment = sums[TF_POSITIVE].sum[2] - sums[TF_NEGATIVE].sum[2];
  double mean = (sums[0].area_z + sums[1].area_z) / area;
  return 3.0 * (moment - net * mean) / (4.0 * TF_PI * radius_mm * radius_mm * CM2_IN_MM2);
}

void
tf_axis_from_sums (TfAxis *axis, const TfSum sums[2], const TfOutline *outline, double radius_mm,
                   gboolean great_circle)
{
  memset (axis, 0, sizeof *axis);
  axis->west = -1;
  axis->dx = axis->dy = axis->bearing = axis->tilt = axis->separation = NAN;
  axis->dipole = dipole (sums, radius_mm);
  for (guint sign = 0; sign < 2; sign++)
    find_pole (axis, sign, &sums[sign], radius_mm);
  if (outline != NULL)
    apply_pins (axis, outline);
  if (!axis->has[0] || !axis->has[1])
    return;
  axis->west = tf_wrap_180 (axis->lon[TF_POSITIVE] - axis->lon[TF_NEGATIVE]) >= 0.0 ? TF_POSITIVE
                                                                                    : TF_NEGATIVE;
  guint lead = (guint)axis->west, follow = 1 - lead;
  double mean = 0.5 * (axis->lat[lead] + axis->lat[follow]);
  axis->dx = tf_wrap_180 (axis->lon[lead] - axis->lon[follow]) * cos (mean * TF_DEG);
  axis->dy = axis->lat[lead] - axis->lat[follow];
  axis->separation
      = tf_sphere_distance (axis->lon[lead], axis->lat[lead], axis->lon[follow], axis->lat[follow]);
  tf_tilt (axis->lon[lead], axis->lat[lead], axis->lon[follow], axis->lat[follow], great_circle,
           &axis->bearing, &axis->tilt);
}

void
tf_axis_difference (const TfAxis *a, const TfAxis *b, TfSpread *spread)
{
  for (guint sign = 0; sign < 2; sign++)
    {
      spread->flux[sign] = a->flux[sign] - b->flux[sign];
      spread->place[sign]
          = a->has[sign] && b->has[sign]
                ? tf_sphere_distance (a->lon[sign], a->lat[sign], b->lon[sign], b->lat[sign])
                : (double)NAN;
    }
  spread->tilt = remainder (a->bearing - b->bearing, 180.0);
  spread->separation = a->separation - b->separation;
  spread->dx = a->west == b->west ? a->dx - b->dx : a->dx + b->dx;
  spread->dipole = a->dipole - b->dipole;
}
