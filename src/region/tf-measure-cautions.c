/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>

#include "tf-measure-private.h"

/* Limits of 3-science.md are this project's own; they stand here and nowhere else. */
static const double NEAR_LIMB_MU = 0.5, NEAR_LIMB_STRONG_MU = 0.34;
static const double WEAK_SHARE = 0.20, UNIPOLAR_SHARE = 0.10;
static const double OVERLAP_COMPACTNESS = 0.8, UNSURE_COMPACTNESS = 0.5;
static const double FLOOR_SIGMAS = 2.0;
static const double CUT_SHARE = 0.01;
/* A core that cannot go higher shows as several pixels of exactly one extreme value. */
static const double SATURATED_GAUSS = 500.0;
enum
{
  SATURATED_PIXELS = 4,
  MOST_PIECES = 2
};

static void
caution_limb (TfMeasure *m)
{
  if (m->mu < NEAR_LIMB_STRONG_MU)
    tf_notes_add (m->cautions, "near-limb-strong", "d", m->mu);
  else if (m->mu < NEAR_LIMB_MU)
    tf_notes_add (m->cautions, "near-limb", "d", m->mu);
}

static void
caution_balance (TfMeasure *m, const TfAxis *axis)
{
  double weaker = MIN (axis->flux[0], axis->flux[1]) / (axis->flux[0] + axis->flux[1]);
  if (!(axis->flux[0] + axis->flux[1] > 0.0))
    tf_notes_add (m->cautions, "nothing-above-floor", "d", m->floor_gauss);
  else if (weaker < UNIPOLAR_SHARE)
    tf_notes_add (m->cautions, "unipolar", "d", 100.0 * weaker);
  else if (weaker < WEAK_SHARE)
    tf_notes_add (m->cautions, "weak-polarity", "d", 100.0 * weaker);
}

static void
caution_shape (TfMeasure *m)
{
  if (m->compactness < OVERLAP_COMPACTNESS)
    tf_notes_add (m->cautions, "poles-overlap", "d", m->compactness);
  if (m->compactness < UNSURE_COMPACTNESS)
    tf_notes_add (m->cautions, "tilt-unsure", "d", m->compactness);
  if (m->pieces > MOST_PIECES)
    tf_notes_add (m->cautions, "not-one-bipole", "i", (int)m->pieces);
  if (!isnan (m->axis_bearing_deg) && isnan (m->axis_tilt_deg))
    tf_notes_add (m->cautions, "straddles-equator", "");
  if (m->leading_polarity != 0 && !m->leading_sure)
    tf_notes_add (m->cautions, "leader-unsure", "");
  if (m->leading_polarity != 0 && m->witnesses[1] == TF_WITNESS_ABSENT)
    tf_notes_add (m->cautions, "no-strong-field", "");
  if (m->positive.pinned || m->negative.pinned)
    tf_notes_add (m->cautions, "pole-pinned", "s", m->positive.pinned ? "+" : "-");
}

static void
caution_pixels (TfMeasure *m, const TfRegionSamples *samples)
{
  for (guint sign = 0; sign < 2; sign++)
    {
      const TfExtreme *extreme = &samples->extreme[sign];
      if (extreme->n >= SATURATED_PIXELS && extreme->value >= (float)SATURATED_GAUSS)
        tf_notes_add (m->cautions, "saturated-core", "id", (int)extreme->n, (double)extreme->value);
    }
  if (tf_mask_get_missing (samples->mask) > 0)
    tf_notes_add (m->cautions, "touches-missing-data", "i",
                  (int)tf_mask_get_missing (samples->mask));
  if (tf_mask_get_cut (samples->mask) > CUT_SHARE)
    tf_notes_add (m->cautions, "outline-cut", "d", 100.0 * tf_mask_get_cut (samples->mask));
}

/* What the region's place rests on. */
static void
caution_frame (TfMeasure *m, const TfRegionSamples *samples)
{
  const TfNote *by_hand
      = tf_notes_find (tf_frame_get_cautions (samples->frame), "geometry-by-hand");
  if (by_hand != NULL)
    tf_notes_add_copy (m->cautions, by_hand);
}

/* The floor as observed at the region's mean mu against the noise there. */
static void
caution_floor (TfMeasure *m, const TfRegionSamples *samples)
{
  gboolean falls = samples->params->floor_kind == TF_FLOOR_EVEN
                   && tf_region_divides (samples->frame, samples->params);
  double observed = falls ? m->floor_gauss * samples->mean_mu : m->floor_gauss;
  if (observed < FLOOR_SIGMAS * m->noise_gauss)
    tf_notes_add (m->cautions, "floor-below-noise", "dd", observed, m->noise_gauss);
}

void
tf_region_cautions (TfMeasure *measure, const TfRegionSamples *samples, const TfAxis *axis)
{
  caution_limb (measure);
  caution_balance (measure, axis);
  caution_shape (measure);
  caution_pixels (measure, samples);
  caution_floor (measure, samples);
  caution_frame (measure, samples);
}
