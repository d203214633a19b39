/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <string.h>

#include "tf-follow.h"
#include "tf-study-private.h"

/* Ledger rows, measures and points as the rows laws are tested on. */

enum
{
  HINT_CLUSTER = 1u << 31,   /* a hint in no passage is a region of its own, apart from all numbered ones */
  PASSAGE_CLUSTER = 1u << 29 /* regions and passages as follow has them, apart from keys of regions and marks */
};

static gint8
witnesses_differ (const int witnesses[3])
{
  int seen = 0;
  for (int k = 0; k < 3; k++)
    {
      if (witnesses[k] == TF_WITNESS_ABSENT || witnesses[k] == 0)
        continue;
      if (seen != 0 && witnesses[k] != seen)
        return 1;
      seen = witnesses[k];
    }
  return 0;
}

void
tf_study_measure_row (const TfMeasure *m, TfSampleRow *out)
{
  gboolean plus = m->leading_polarity > 0;
  const TfPole *lead = plus ? &m->positive : &m->negative,
               *follow = plus ? &m->negative : &m->positive;
  gboolean two = m->leading_polarity != 0;
  tf_sample_row_init (out);
  out->time = m->time;
  out->lat_deg = m->lat_deg;
  out->leading_lat_deg = two ? lead->lat_deg : NAN;
  out->following_lat_deg = two ? follow->lat_deg : NAN;
  out->cmd_deg = m->cmd_deg;
  out->mu = m->mu;
  out->axis_tilt_deg = m->axis_tilt_deg;
  out->axis_bearing_deg = m->axis_bearing_deg;
  out->tilt_sigma_deg = m->tilt_terms.total;
  out->separation_deg = m->separation_deg;
  out->separation_sigma_deg = m->separation_sigma_deg;
  out->flux_mx = m->flux_unsigned_mx;
  out->imbalance = m->imbalance;
  out->compactness = m->compactness;
  out->axial_dipole_gauss = m->axial_dipole_gauss;
  out->axial_dipole_sigma_gauss = m->axial_dipole_sigma_gauss;
  out->leading_polarity = m->leading_polarity;
  out->leading_sure = m->leading_sure != 0;
  out->witnesses_differ = witnesses_differ (m->witnesses);
  out->straddles = two && lead->lat_deg * follow->lat_deg < 0;
  out->size = m->ephemeral != 0;
}

static TfOrigin
origin_of (const TfRow *row)
{
  static const struct
  {
    const char *name;
    TfOrigin origin;
  } names[] = { { "kept as hinted", TF_ORIGIN_KEPT },
                { "changed", TF_ORIGIN_CHANGED },
                { "drawn new", TF_ORIGIN_DRAWN },
                { "outside", TF_ORIGIN_OUTSIDE } };
  for (guint k = 0; k < G_N_ELEMENTS (names); k++)
    if (g_strcmp0 (row->origin, names[k].name) == 0)
      return names[k].origin;
  return TF_ORIGIN_HINT;
}

void
tf_study_place_row (TfSampleRow *row, const TfStudyPlace *place)
{
  guint32 alone = place->is_hint ? HINT_CLUSTER + (guint32)place->mark : (guint32)place->mark;
  guint32 region = place->is_hint ? alone : (guint32)place->region;
  row->region = place->same != 0 ? PASSAGE_CLUSTER + (guint32)place->same : region;
  row->passage = place->passage != 0 ? PASSAGE_CLUSTER + (guint32)place->passage : alone;
  row->born = place->born == TF_END_UNKNOWN ? -1 : place->born == TF_END_ON_DISK;
}

void
tf_study_row (const TfRow *row, TfSampleRow *out)
{
  tf_study_measure_row (&row->measure, out);
  if (row->outside != NULL)
    {
      tf_study_outside_row (row, out);
      return;
    }
  out->origin = origin_of (row);
  tf_study_place_row (out, &(TfStudyPlace){ row->is_hint, row->mark, row->region_key,
                                            row->passage_key, row->same, row->born });
}

void
tf_study_point (const TfPoint *point, TfSampleRow *out)
{
  tf_sample_row_init (out);
  out->time = point->time;
  out->lat_deg = point->lat_deg;
  out->cmd_deg = point->cmd_deg;
  out->mu = point->mu;
  out->axis_tilt_deg = point->tilt_deg;
  out->separation_deg = point->separation_deg;
  out->flux_mx = point->flux_mx;
  out->imbalance = point->imbalance;
  out->leading_polarity = point->leading;
  out->leading_sure = point->leading_sure;
  out->witnesses_differ = point->witnesses_differ;
  out->straddles = point->straddles;
  out->origin = point->outside ? TF_ORIGIN_OUTSIDE : point->hint ? TF_ORIGIN_HINT : TF_ORIGIN_KEPT;
  out->region = point->hint ? HINT_CLUSTER + (guint32)point->mark : point->region;
  out->passage = point->hint || point->outside ? out->region : (guint32)point->mark;
}

TfVerdict
tf_study_judge_measure (const TfStudy *study, const TfMeasure *measure)
{
  g_autoptr (TfDivides) divides = tf_study_dup_divides (study);
  TfSampleRow row;
  tf_study_measure_row (measure, &row);
  return tf_verdict_judge (&row, divides, &study->verdict);
}
