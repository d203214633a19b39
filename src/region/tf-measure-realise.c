/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* The noise term by trial: normal noise of the frame's sigma is laid over the smoothed field,
 * the region is measured anew, and the root mean square departure from the measure of the
 * smoothed field itself is taken. Equal seeds give equal numbers on every machine (GRand is a
 * fixed generator). */

#include <math.h>

#include "tf-constants.h"
#include "tf-measure-private.h"

/* Polar method of Marsaglia & Bray 1964: two normal numbers at a time. */
typedef struct
{
  GRand *rand;
  gboolean has;
  double kept;
} Gauss;

static double
draw (Gauss *gauss)
{
  double u, v, r2;
  gauss->has = !gauss->has;
  if (!gauss->has)
    return gauss->kept;
  do
    {
      u = g_rand_double_range (gauss->rand, -1.0, 1.0);
      v = g_rand_double_range (gauss->rand, -1.0, 1.0);
      r2 = u * u + v * v;
    }
  while (!(r2 < 1.0) || !(r2 > 0.0));
  double factor = sqrt (-2.0 * log (r2) / r2);
  gauss->kept = v * factor;
  return u * factor;
}

/* @rest: share of sigma that is laid on; @gauss: NULL for the smoothed field as it is. */
static void
realise (const TfRegionSamples *samples, const float *smooth, double rest, Gauss *gauss,
         TfSum sums[2])
{
  for (guint k = 0; k < samples->n; k++)
    {
      const TfSampled *s = &samples->samples[k];
      double d = smooth[k] + (gauss != NULL ? rest * s->sigma * draw (gauss) : 0.0);
      if (fabs (d) >= s->floor)
        tf_sum_add (&sums[d > 0.0 ? TF_POSITIVE : TF_NEGATIVE], samples->pixels[k].unit,
                    samples->pixels[k].area_mm2, fabs (d) * s->weight);
    }
}

/* Adds up one quantity's first two moments. */
typedef struct
{
  double n, sum, sum2;
} Scatter;

static void
scatter_add (Scatter *scatter, double x)
{
  if (!isfinite (x))
    return;
  scatter->n += 1.0;
  scatter->sum += x;
  scatter->sum2 += x * x;
}

static double
scatter_rms (const Scatter *scatter, double factor)
{
  if (scatter->n < 2.0)
    return NAN;
  double mean = scatter->sum / scatter->n;
  double variance
      = MAX (0.0, scatter->sum2 / scatter->n - mean * mean) * scatter->n / (scatter->n - 1.0);
  return sqrt (factor * variance + mean * mean);
}

void
tf_region_realise (const TfRegionSamples *samples, const TfOutline *outline, TfSpread *spread)
{
  Scatter flux[2] = { 0 }, west[2] = { 0 }, north[2] = { 0 }, tilt = { 0 }, separation = { 0 },
          dx = { 0 }, dipole = { 0 };
  double radius = tf_frame_get_geometry (samples->frame)->radius_mm;
  double factor = tf_frame_noise_correlation (samples->frame);
  double rest;
  g_autofree float *smooth = tf_region_smooth (samples, &rest);
  g_autoptr (GRand) rand = g_rand_new_with_seed ((guint32)samples->params->seed);
  Gauss gauss = { rand, FALSE, 0.0 };
  TfAxis first, axis;
  TfSum still[2] = { 0 };
  realise (samples, smooth, rest, NULL, still);
  tf_axis_from_sums (&first, still, outline, radius, samples->params->tilt_form == 1);
  for (int k = 0; k < samples->params->realisations; k++)
    {
      TfSum sums[2] = { 0 };
      TfSpread d;
      realise (samples, smooth, rest, &gauss, sums);
      tf_axis_from_sums (&axis, sums, outline, radius, samples->params->tilt_form == 1);
      tf_axis_difference (&axis, &first, &d);
      for (guint sign = 0; sign < 2; sign++)
        {
          scatter_add (&flux[sign], d.flux[sign]);
          scatter_add (&north[sign], axis.lat[sign] - first.lat[sign]);
          scatter_add (&west[sign], tf_wrap_180 (axis.lon[sign] - first.lon[sign])
                                        * cos (first.lat[sign] * TF_DEG));
        }
      scatter_add (&tilt, d.tilt);
      scatter_add (&separation, d.separation);
      scatter_add (&dx, d.dx);
      scatter_add (&dipole, d.dipole);
    }
  for (guint sign = 0; sign < 2; sign++)
    {
      spread->flux[sign] = scatter_rms (&flux[sign], factor);
      spread->place[sign]
          = hypot (scatter_rms (&west[sign], factor), scatter_rms (&north[sign], factor));
    }
  spread->tilt = scatter_rms (&tilt, factor);
  spread->separation = scatter_rms (&separation, factor);
  spread->dx = scatter_rms (&dx, factor);
  spread->dipole = scatter_rms (&dipole, factor);
}
