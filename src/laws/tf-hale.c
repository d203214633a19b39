/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-hale-private.h"

#include <math.h>
#include <gsl/gsl_cdf.h>
#include <glib/gi18n-lib.h>

#include "tf-constants.h"
#include "tf-many.h"

#define O(member) offsetof (TfHaleParams, member)
const TfOption tf_hale_options[] = {
  { "hale-level", TF_OPTION_NUMBER, "", 0.95, 0.5, 0.999, NULL,
    N_ ("confidence level of the intervals of a share"), O (level) },
  { "hale-draws", TF_OPTION_INT, "", 1000, 0, 100000, NULL,
    N_ ("bootstrap draws of a share; 0: none"), O (draws) },
  { "hale-seed", TF_OPTION_INT, "", 1, 0, G_MAXINT32, NULL, N_ ("seed of those draws"), O (seed) },
  { NULL },
};
#undef O

double
tf_hale_expected_false (const TfSampleRow *row)
{
  double tilt = isnan (row->axis_tilt_deg) ? row->axis_bearing_deg : row->axis_tilt_deg;
  double along = row->separation_sigma_deg * cos (tilt * TF_DEG);
  double across = row->separation_deg * row->tilt_sigma_deg * TF_DEG * sin (tilt * TF_DEG);
  double east_west = row->separation_deg * cos (tilt * TF_DEG);
  double sigma = hypot (along, across);
  if (isnan (sigma) || isnan (east_west))
    return NAN;
  if (!(sigma > 0.0))
    return east_west > 0.0 ? 0.0 : 0.5;
  return gsl_cdf_ugaussian_Q (east_west / sigma);
}

double *
tf_hale_chances (const TfSample *sample, const TfVerdict *verdicts)
{
  guint n = tf_sample_get_n (sample);
  double *chances = tf_new_many (double, n + 1);
  for (guint k = 0; k < n; k++)
    chances[k] = verdicts[k].kind == TF_VERDICT_CANNOT_SAY
                     ? NAN
                     : tf_hale_expected_false (tf_sample_get (sample, k));
  return chances;
}

/* What the judged rows hold, in order; breaks[k] is 1 or 0. */
typedef struct
{
  guint32 *regions;
  guint8 *breaks;
  guint n;
} Judged;

/* Counts the part's rows, and gathers those that were judged. */
static void
gather (const TfHalePart *part, TfHaleRow *row, Judged *judged)
{
  double sum = 0.0;
  guint known = 0;
  for (guint k = 0; k < tf_sample_get_n (part->sample); k++)
    {
      if (part->bins != NULL && part->bins[k] != part->bin)
        continue;
      const TfSampleRow *pick = tf_sample_get (part->sample, k);
      const TfVerdict *verdict = &part->verdicts[k];
      if (!tf_group_holds (&part->group, pick, verdict, FALSE))
        continue;
      if (verdict->kind == TF_VERDICT_CANNOT_SAY)
        {
          row->cannot_say++;
          continue;
        }
      guint8 breaks = verdict->kind == TF_VERDICT_BREAKS;
      row->breaks += breaks;
      row->keeps += 1u - breaks;
      row->leaning += g_strcmp0 (verdict->cycle.reason, "cycle-provisional") == 0;
      judged->breaks[judged->n] = breaks;
      judged->regions[judged->n++] = pick->region;
      double chance = part->chances[k];
      if (!isnan (chance))
        {
          sum += chance;
          known++;
        }
    }
  row->expected_false = known == 0 ? NAN : sum / known;
}

TfHaleRow
tf_hale_row_of (const TfHalePart *part, const TfHaleParams *params)
{
  guint all = tf_sample_get_n (part->sample);
  TfHaleRow row = { .cycle = part->group.cycle, .hemisphere = part->group.hemisphere };
  g_autofree guint32 *regions = tf_new_many (guint32, all + 1);
  g_autofree guint8 *breaks = tf_new_many (guint8, all + 1);
  Judged judged = { regions, breaks, 0 };
  gather (part, &row, &judged);
  row.n = row.keeps + row.breaks;
  row.regions = tf_count_distinct (regions, row.n);
  row.share = row.n == 0 ? NAN : (double)row.breaks / row.n;
  guint asked = row.n + row.cannot_say;
  row.bounds.low = asked == 0 ? NAN : (double)row.breaks / asked;
  row.bounds.high = asked == 0 ? NAN : (double)(row.breaks + row.cannot_say) / asked;
  row.wilson = tf_wilson (row.breaks, row.n, params->level);
  row.clopper_pearson = tf_clopper_pearson (row.breaks, row.n, params->level);
  row.cluster = tf_bootstrap_share (regions, breaks, row.n, (guint)MAX (params->draws, 0),
                                    (guint64)params->seed, params->level, params->cancel);
  return row;
}

/* The cycles of the sample, each once, in order; 0 (unknown) is left out. */
static GArray *
list_cycles (const TfSample *sample, const TfVerdict *verdicts)
{
  GArray *cycles = g_array_new (FALSE, FALSE, sizeof (int));
  int last = 0; /* as rows come in time their cycles seldom change */
  for (guint k = 0; k < tf_sample_get_n (sample); k++)
    {
      int cycle = verdicts[k].cycle.number;
      guint at = 0;
      if (cycle == last)
        continue;
      last = cycle;
      while (at < cycles->len && g_array_index (cycles, int, at) < cycle)
        at++;
      if (cycle > 0 && (at == cycles->len || g_array_index (cycles, int, at) != cycle))
        g_array_insert_val (cycles, at, cycle);
    }
  return cycles;
}

GArray *
tf_hale_table (const TfSample *sample, const TfVerdict *verdicts, const TfHaleParams *params)
{
  static const int hemispheres[] = { 1, -1, 0 };
  GArray *table = g_array_new (FALSE, FALSE, sizeof (TfHaleRow));
  g_autoptr (GArray) cycles = list_cycles (sample, verdicts);
  g_autofree double *chances = tf_hale_chances (sample, verdicts);
  TfHalePart part = { .sample = sample, .verdicts = verdicts, .chances = chances };
  for (guint c = 0; c < cycles->len; c++)
    for (guint h = 0; h < G_N_ELEMENTS (hemispheres); h++)
      {
        part.group = tf_group_of (g_array_index (cycles, int, c), hemispheres[h]);
        TfHaleRow row = tf_hale_row_of (&part, params);
        g_array_append_val (table, row);
      }
  part.group = tf_group_of (0, 0);
  TfHaleRow row = tf_hale_row_of (&part, params);
  g_array_append_val (table, row);
  return table;
}

TfHaleRow
tf_hale_row (const TfSample *sample, const TfVerdict *verdicts, int cycle, int hemisphere,
             const TfHaleParams *params)
{
  g_autofree double *chances = tf_hale_chances (sample, verdicts);
  const TfHalePart part = { .sample = sample, .verdicts = verdicts, .chances = chances,
                            .group = tf_group_of (cycle, hemisphere) };
  return tf_hale_row_of (&part, params);
}
