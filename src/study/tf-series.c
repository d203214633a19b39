/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-series.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-ledger-brief.h"
#include "tf-ledger-follow.h"
#include "tf-series-private.h"

#define NEAR_LIMB_MU 0.34
#define AT(member)   offsetof (TfSeriesParams, member)

const TfOption tf_series_options[] = {
  { "series-mu-min", TF_OPTION_NUMBER, "", 0.5, 0, 1, NULL,
    N_ ("marks nearer the limb than this mu have no part in what is derived"), AT (mu_min) },
  { "mean-cmd", TF_OPTION_NUMBER, "deg", 45, 0, 90, NULL,
    N_ ("marks of the mean tilt lie no farther from the central meridian"), AT (mean_cmd_deg) },
  { "rise-low", TF_OPTION_NUMBER, "", 0.1, 0, 1, NULL,
    N_ ("share of the greatest flux at which a rise begins and a decay ends"), AT (low) },
  { "rise-high", TF_OPTION_NUMBER, "", 0.9, 0, 1, NULL,
    N_ ("share of the greatest flux at which a rise ends and a decay begins"), AT (high) },
  { "rise-change", TF_OPTION_NUMBER, "", 0.2, 0, 1, NULL,
    N_ ("least change of the flux, as a share of the greatest, that is a rise or a decay"),
    AT (change) },
  { "meridian", TF_OPTION_NUMBER, "deg", 15, 0, 90, NULL,
    N_ ("a mark farther from the central meridian does not stand for it"), AT (meridian_deg) },
  { NULL },
};

void
tf_series_params_init (TfSeriesParams *params)
{
  tf_options_reset (tf_series_options, params);
}

/* -- points --------------------------------------------------------------------------------- */
static guint
flags_of (const TfRow *row, double floor_gauss, const TfSeriesParams *params)
{
  const TfMeasure *m = &row->measure;
  guint flags = 0;
  if (m->mu < params->mu_min)
    flags |= TF_POINT_LIMB;
  if (m->mu < NEAR_LIMB_MU)
    flags |= TF_POINT_NEAR_LIMB;
  const TfStudyFact fact = tf_study_fact_of_row (row);
  if (!tf_study_fact_has_floor (&fact, floor_gauss))
    flags |= TF_POINT_OTHER_FLOOR;
  if (row->is_hint)
    flags |= TF_POINT_HINT;
  return flags;
}

static void
fill_point (TfSeriesPoint *p, const TfRow *row, const TfStudy *study, const TfDivides *divides)
{
  const TfMeasure *m = &row->measure;
  TfSampleRow sample;
  tf_study_row (row, &sample);
  p->row = row;
  p->time = m->time;
  p->cmd_deg = m->cmd_deg;
  p->mu = m->mu;
  p->flux_positive_mx = m->positive.flux_mx;
  p->flux_positive_sigma_mx = m->positive.flux_sigma_mx;
  p->flux_negative_mx = m->negative.flux_mx;
  p->flux_negative_sigma_mx = m->negative.flux_sigma_mx;
  p->flux_mx = m->flux_unsigned_mx;
  p->flux_sigma_mx = hypot (m->positive.flux_sigma_mx, m->negative.flux_sigma_mx);
  p->separation_deg = m->separation_deg;
  p->separation_sigma_deg = m->separation_sigma_deg;
  p->separation_mm = m->separation_mm;
  p->axis_tilt_deg = m->axis_tilt_deg;
  p->tilt_sigma_deg = m->tilt_terms.total;
  p->complexity = row->complexity;
  p->verdict = tf_verdict_judge (&sample, divides, &study->verdict);
  p->polarity_tilt_deg = tf_verdict_polarity_tilt (&sample, &p->verdict);
}

/* A person's outline stands before a hint's, then the one that comes first. */
static void
choose_standing (TfSeries *series)
{
  g_autoptr (GHashTable) standing = g_hash_table_new (g_direct_hash, g_direct_equal);
  for (int hints = 0; hints < 2; hints++)
    for (guint k = 0; k < series->points->len; k++)
      {
        TfSeriesPoint *p = &g_array_index (series->points, TfSeriesPoint, k);
        if (((p->flags & TF_POINT_HINT) != 0) != (hints != 0))
          continue;
        if (!g_hash_table_add (standing, GSIZE_TO_POINTER (p->row->frame)))
          p->flags |= TF_POINT_SECOND;
      }
}

TfSeries *
tf_series_new (GPtrArray *rows, const TfStudy *study, double floor_gauss,
               const TfSeriesParams *params)
{
  g_return_val_if_fail (rows != NULL && study != NULL && params != NULL, NULL);
  g_autoptr (TfDivides) divides = tf_study_dup_divides (study);
  TfSeries *series = g_new0 (TfSeries, 1);
  series->rows = rows;
  series->points = g_array_sized_new (FALSE, TRUE, sizeof (TfSeriesPoint), rows->len);
  series->floor_gauss = floor_gauss;
  series->params = *params;
  for (guint k = 0; k < rows->len; k++)
    {
      const TfRow *row = g_ptr_array_index (rows, k);
      TfSeriesPoint point = { .flags = flags_of (row, floor_gauss, params) };
      fill_point (&point, row, study, divides);
      const TfSeriesPoint *first
          = k > 0 ? &g_array_index (series->points, TfSeriesPoint, 0) : &point;
      point.days = (point.time.s - first->time.s) / 86400.0;
      series->n_other_floor += (point.flags & TF_POINT_OTHER_FLOOR) != 0;
      g_array_append_val (series->points, point);
    }
  choose_standing (series);
  tf_series_derive (series);
  return series;
}

void
tf_series_free (TfSeries *series)
{
  if (series == NULL)
    return;
  g_ptr_array_unref (series->rows);
  g_array_unref (series->points);
  g_free (series);
}

/* -- from a ledger -------------------------------------------------------------------------- */
double
tf_series_floor (TfLedger *ledger, gint64 passage, GError **error)
{
  g_return_val_if_fail (ledger != NULL, NAN);
  g_autoptr (GPtrArray) rows = tf_ledger_passage_rows (ledger, passage, FALSE, FALSE, error);
  g_autoptr (GArray) noises = g_array_new (FALSE, FALSE, sizeof (TfFrameNoise));
  g_autoptr (GHashTable) seen = g_hash_table_new (g_direct_hash, g_direct_equal);
  for (guint k = 0; rows != NULL && k < rows->len; k++)
    {
      gint64 id = ((TfRow *)g_ptr_array_index (rows, k))->frame;
      g_autoptr (TfFrameRow) frame = g_hash_table_add (seen, GSIZE_TO_POINTER (id))
                                         ? tf_ledger_frame (ledger, id, NULL)
                                         : NULL;
      if (frame == NULL)
        continue;
      TfFrameNoise noise = tf_frame_noise (frame);
      g_array_append_val (noises, noise);
    }
  return tf_study_floor_of_noises (noises);
}

TfSeries *
tf_series_read (TfLedger *ledger, gint64 passage, double floor_gauss, const TfStudy *study,
                const TfSeriesParams *params, GError **error)
{
  g_return_val_if_fail (ledger != NULL && passage != 0, NULL);
  const TfRowQuery query = { .marks = TRUE, .hints = TRUE, .passage = passage, .complexity = TRUE };
  GPtrArray *rows = tf_study_rows (ledger, &query, floor_gauss, error);
  return rows != NULL ? tf_series_new (rows, study, floor_gauss, params) : NULL;
}
