/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* The outline and floor terms of the uncertainty.
 *
 * Outline: the region is measured in 16 fixed deformations of its outline; each mixes a shift,
 * a change of size and the first three harmonics, with signs from an orthogonal two-level
 * design (Box & Hunter 1961, Technometrics 3, 311; from memory), so that 16 are enough for the
 * effects of all to add up in the scatter. The root mean square displacement of the line is
 * the amplitude: outline_deg, or outline_share of the outline's radius, whichever is more. The
 * term is 1.4826 times the median absolute deviation. Pixels are read once, in a wider outline
 * that holds them all; only those above the floor are kept, so that a deformation costs one
 * inside test a pixel. Floor: root mean square of the changes at floors 1 +- step.
 */

#include <math.h>
#include <stdlib.h>

#include "tf-constants.h"
#include "tf-fill-private.h"
#include "tf-measure-private.h"

enum
{
  DEFORMATIONS = 16,
  LANES = 4,
};
/* Shifts and harmonics together move no point by more amplitudes than this. */
static const double REACH = 2.3;

/* What is mixed: each part's share of the amplitude, and the run's bits whose parity is its
 * sign. The squares of the shares, shifts and harmonics halved (their mean over the angle),
 * add up to 1. */
typedef enum
{
  PART_SIZE,
  PART_WEST,
  PART_NORTH,
  PART_COS_1,
  PART_SIN_1,
  PART_COS_2,
  PART_SIN_2,
  PART_COS_3,
  PART_SIN_3,
  N_PARTS
} Part;

static const struct
{
  double share;
  guint bits;
} parts[N_PARTS] = {
  { 0.60, 1 },  { 0.50, 2 },  { 0.50, 4 },  { 0.30, 8 },  { 0.30, 7 },
  { 0.42, 11 }, { 0.42, 13 }, { 0.36, 14 }, { 0.36, 15 },
};

static double
part (guint run, Part which)
{
  guint bits = run & parts[which].bits, odd = 0;
  for (; bits != 0; bits &= bits - 1)
    odd ^= 1;
  return odd ? -parts[which].share : parts[which].share;
}

/* @radius: of a circle of the outline's area, deg, so that a change of size moves the line by
 * its share. */
static TfOutline *
deform (const TfOutline *outline, guint run, double amplitude, double radius)
{
  double size[3], phase[3];
  for (guint k = 0; k < 3; k++)
    {
      double c = part (run, PART_COS_1 + 2 * k), s = part (run, PART_SIN_1 + 2 * k);
      size[k] = amplitude * hypot (c, s);
      phase[k] = atan2 (s, c) / (k + 1);
    }
  double scale = MAX (0.1, 1.0 + part (run, PART_SIZE) * amplitude / radius);
  return tf_outline_deform (outline, amplitude * part (run, PART_WEST),
                            amplitude * part (run, PART_NORTH), scale, size, phase);
}

static gint
compare (gconstpointer a, gconstpointer b)
{
  double x = *(const double *)a, y = *(const double *)b;
  return (x > y) - (x < y);
}

/* Median of the finite values, which are put in order. */
static double
median (double *values, guint n)
{
  guint m = 0;
  for (guint k = 0; k < n; k++)
    if (isfinite (values[k]))
      values[m++] = values[k];
  if (m == 0)
    return NAN;
  qsort (values, m, sizeof *values, compare);
  return m % 2 == 1 ? values[m / 2] : 0.5 * (values[m / 2 - 1] + values[m / 2]);
}

/* @values: differences from the outline as drawn. */
static double
deviation (double values[DEFORMATIONS])
{
  double middle = median (values, DEFORMATIONS);
  for (guint k = 0; k < DEFORMATIONS; k++)
    values[k] = fabs (values[k] - middle);
  return 1.4826 * median (values, DEFORMATIONS);
}

/* Places: the differences are distances already; of two normal axes the root mean square is
 * 1.2011 times the median. */
static double
middle_distance (const double values[DEFORMATIONS])
{
  double copy[DEFORMATIONS];
  for (guint k = 0; k < DEFORMATIONS; k++)
    copy[k] = values[k];
  return 1.2011 * median (copy, DEFORMATIONS);
}

/* The pixels above the floor of all deformations together: the positive ones, then the negative. */
typedef struct
{
  guint n, n_positive;
  double *x, *y, *z, *flux, *area;
  guint8 *inside;
} Kept;

static gboolean
is_kept (const TfSampled *s, guint sign)
{
  double flux = (double)s->field * s->weight;
  return fabsf (s->field) >= s->floor && (sign == TF_POSITIVE ? flux > 0.0 : flux < 0.0);
}

static void
keep_pixel (Kept *kept, const TfMaskPixel *pixel, double flux)
{
  guint n = kept->n++;
  kept->x[n] = pixel->unit[0];
  kept->y[n] = pixel->unit[1];
  kept->z[n] = pixel->unit[2];
  kept->flux[n] = flux;
  kept->area[n] = pixel->area_mm2;
}

static void
keep_pixels (Kept *kept, const TfRegionSamples *samples)
{
  gsize most = 1;
  for (guint k = 0; k < samples->n; k++)
    most += fabsf (samples->samples[k].field) >= samples->samples[k].floor;
  double *room = g_new (double, 5 * most);
  *kept = (Kept){ .x = room,
                  .y = room + most,
                  .z = room + 2 * most,
                  .flux = room + 3 * most,
                  .area = room + 4 * most,
                  .inside = g_new (guint8, most) };
  for (guint sign = 0; sign < 2; sign++)
    {
      for (guint k = 0; k < samples->n; k++)
        if (is_kept (&samples->samples[k], sign))
          keep_pixel (kept, &samples->pixels[k],
                      fabs ((double)samples->samples[k].field * samples->samples[k].weight));
      if (sign == TF_POSITIVE)
        kept->n_positive = kept->n;
    }
}

static void
close_kept (Kept *kept)
{
  g_free (kept->x);
  g_free (kept->inside);
}

/* Sums in lanes that are added up in order. */
typedef struct
{
  double flux[LANES], x[LANES], y[LANES], z[LANES], area[LANES], area_z[LANES];
} Lanes;

static inline void
add_lane (Lanes *lanes, guint l, const Kept *kept, guint k)
{
  double flux = kept->flux[k] * kept->inside[k], area = kept->area[k] * kept->inside[k];
  lanes->flux[l] += flux;
  lanes->x[l] += flux * kept->x[k];
  lanes->y[l] += flux * kept->y[k];
  lanes->z[l] += flux * kept->z[k];
  lanes->area[l] += area;
  lanes->area_z[l] += area * kept->z[k];
}

__attribute__ ((target_clones ("arch=x86-64-v3", "default"))) static void
fill_lanes (Lanes *out, const Kept *kept, guint first, guint end)
{
  Lanes lanes = { 0 };
  guint k = first;
  for (; k + LANES <= end; k += LANES)
    for (guint l = 0; l < LANES; l++)
      add_lane (&lanes, l, kept, k + l);
  for (; k < end; k++)
    add_lane (&lanes, 0, kept, k);
  *out = lanes;
}

static void
sum_sign (const Kept *kept, guint first, guint end, TfSum *sum)
{
  Lanes lanes;
  fill_lanes (&lanes, kept, first, end);
  for (guint l = 0; l < LANES; l++)
    {
      sum->flux += lanes.flux[l];
      sum->sum[0] += lanes.x[l];
      sum->sum[1] += lanes.y[l];
      sum->sum[2] += lanes.z[l];
      sum->area += lanes.area[l];
      sum->area_z += lanes.area_z[l];
    }
  for (guint k = first; k < end; k++)
    sum->n += kept->inside[k];
}

static void
sum_inside (const Kept *kept, const TfOutline *outline, TfSum sums[2])
{
  g_autoptr (TfFill) fill = tf_fill_new (outline);
  tf_fill_columns (fill, kept->x, kept->y, kept->z, kept->n, kept->inside);
  sum_sign (kept, 0, kept->n_positive, &sums[TF_POSITIVE]);
  sum_sign (kept, kept->n_positive, kept->n, &sums[TF_NEGATIVE]);
}

/* A bound below every floor there is on the frame, as observed; 0 where the field is not the
 * observed one. */
static float
least_floor (const TfFrame *frame, const TfMeasureParams *params, const TfPotential *potential)
{
  static const double ROUNDING = 0.999;
  double least = params->floor_gauss;
  guint n;
  const TfNoiseRing *rings = tf_frame_get_noise (frame, &n);
  if (potential != NULL)
    return 0.0f;
  if (params->floor_kind == TF_FLOOR_EVEN)
    least = tf_region_even_floor (frame, params)
            * (tf_region_divides (frame, params) ? params->mu_min : 1.0);
  else if (isnan (least))
    {
      least = n > 0 ? (double)INFINITY : 0.0;
      for (guint k = 0; k < n; k++)
        least = MIN (least, params->floor_sigma * rings[k].gauss * tf_region_scale (params));
    }
  return least > 0.0 ? (float)(ROUNDING * least / tf_region_scale (params)) : 0.0f;
}

/* Left-out areas of the wide cap are not cut: each deformation has its own. */
static void
open_kept (Kept *kept, const TfFrame *frame, const TfOutline *outline,
           const TfMeasureParams *params, const TfPotential *potential, double reach)
{
  double lon, lat, radius;
  tf_outline_get_cap (outline, &lon, &lat, &radius);
  g_autoptr (TfOutline) cap
      = tf_outline_new_cap (tf_outline_get_time (outline), lon, lat, MIN (radius + reach, 80.0), 0);
  g_autoptr (TfMask) mask = tf_mask_new_above (frame, cap, params->mu_min, (guint)params->law,
                                               least_floor (frame, params, potential));
  g_autoptr (TfRegionSamples) samples = tf_region_samples_new (frame, mask, params, potential);
  keep_pixels (kept, samples);
}

typedef struct
{
  double flux[2][DEFORMATIONS], place[2][DEFORMATIONS];
  double tilt[DEFORMATIONS], separation[DEFORMATIONS], dx[DEFORMATIONS], dipole[DEFORMATIONS];
} Trials;

static void
settle (Trials *trials, TfSpread *spread)
{
  for (guint sign = 0; sign < 2; sign++)
    {
      spread->flux[sign] = deviation (trials->flux[sign]);
      spread->place[sign] = middle_distance (trials->place[sign]);
    }
  spread->tilt = deviation (trials->tilt);
  spread->separation = deviation (trials->separation);
  spread->dx = deviation (trials->dx);
  spread->dipole = deviation (trials->dipole);
}

void
tf_region_outline_term (const TfFrame *frame, const TfOutline *outline,
                        const TfMeasureParams *params, const TfPotential *potential,
                        TfSpread *spread)
{
  double lon, lat, radius, radius_mm = tf_frame_get_geometry (frame)->radius_mm;
  tf_outline_get_cap (outline, &lon, &lat, &radius);
  double amplitude = MAX (params->outline_deg, params->outline_share * radius);
  double mean = sqrt (tf_outline_area (outline, radius_mm) / TF_PI) / radius_mm / TF_DEG;
  gboolean circle = params->tilt_form == 1;
  Kept kept;
  Trials trials;
  TfSum sums[2] = { 0 };
  TfAxis base, axis;
  mean = MAX (mean, 0.1);
  open_kept (&kept, frame, outline, params, potential,
             amplitude * (REACH + parts[PART_SIZE].share * radius / mean));
  sum_inside (&kept, outline, sums);
  tf_axis_from_sums (&base, sums, outline, radius_mm, circle);
  for (guint k = 0; k < DEFORMATIONS; k++)
    {
      g_autoptr (TfOutline) changed = deform (outline, k, amplitude, mean);
      TfSum inside[2] = { 0 };
      TfSpread d;
      sum_inside (&kept, changed, inside);
      tf_axis_from_sums (&axis, inside, outline, radius_mm, circle);
      tf_axis_difference (&axis, &base, &d);
      for (guint sign = 0; sign < 2; sign++)
        {
          trials.flux[sign][k] = d.flux[sign];
          trials.place[sign][k] = d.place[sign];
        }
      trials.tilt[k] = d.tilt;
      trials.separation[k] = d.separation;
      trials.dx[k] = d.dx;
      trials.dipole[k] = d.dipole;
    }
  settle (&trials, spread);
  close_kept (&kept);
}

static double
half (double up, double down)
{
  if (isnan (up) || isnan (down))
    return NAN;
  return sqrt (0.5 * (up * up + down * down));
}

gboolean
tf_region_floor_term (const TfRegionSamples *samples, const TfSums *sums, const TfAxis *axis,
                      const TfOutline *outline, TfSpread *spread)
{
  double radius = tf_frame_get_geometry (samples->frame)->radius_mm;
  gboolean circle = samples->params->tilt_form == 1;
  TfAxis low, high;
  TfSpread up, down;
  tf_axis_from_sums (&low, sums->at[TF_LEVEL_LOW], outline, radius, circle);
  tf_axis_from_sums (&high, sums->at[TF_LEVEL_HIGH], outline, radius, circle);
  tf_axis_difference (&high, axis, &up);
  tf_axis_difference (&low, axis, &down);
  for (guint sign = 0; sign < 2; sign++)
    {
      spread->flux[sign] = half (up.flux[sign], down.flux[sign]);
      spread->place[sign] = half (up.place[sign], down.place[sign]);
    }
  spread->tilt = half (up.tilt, down.tilt);
  spread->separation = half (up.separation, down.separation);
  spread->dx = half (up.dx, down.dx);
  spread->dipole = half (up.dipole, down.dipole);
  return low.west != axis->west || high.west != axis->west;
}
