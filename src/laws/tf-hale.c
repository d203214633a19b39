/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-hale.h"

#include <math.h>
#include <gsl/gsl_cdf.h>
#include <glib/gi18n-lib.h>

#include "tf-constants.h"
#include "tf-group.h"

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

/* The rows that one table row is about. */
typedef struct
{
  const TfSample *sample;
  const TfVerdict *verdicts;
  TfGroup group;
} Group;

/* What the judged rows of a group hold, in order; breaks[k] is 1 or 0. */
typedef struct
{
  GArray *regions; /* guint32 */
  GArray *breaks;  /* guint8 */
} Judged;

/* Counts a group's rows, and gathers those that were judged. */
static void
gather (const Group *group, TfHaleRow *row, Judged *judged)
{
  double sum = 0.0;
  guint known = 0;
  for (guint k = 0; k < tf_sample_get_n (group->sample); k++)
    {
      const TfSampleRow *pick = tf_sample_get (group->sample, k);
      if (!tf_group_holds (&group->group, pick, &group->verdicts[k], FALSE))
        continue;
      if (group->verdicts[k].kind == TF_VERDICT_CANNOT_SAY)
        {
          row->cannot_say++;
          continue;
        }
      guint8 breaks = group->verdicts[k].kind == TF_VERDICT_BREAKS;
      row->breaks += breaks;
      row->keeps += 1u - breaks;
      row->leaning += g_strcmp0 (group->verdicts[k].cycle.reason, "cycle-provisional") == 0;
      g_array_append_val (judged->breaks, breaks);
      g_array_append_val (judged->regions, pick->region);
      double chance = tf_hale_expected_false (pick);
      if (!isnan (chance))
        {
          sum += chance;
          known++;
        }
    }
  row->expected_false = known == 0 ? NAN : sum / known;
}

static TfHaleRow
fill_row (const Group *group, const TfHaleParams *params)
{
  TfHaleRow row = { .cycle = group->group.cycle, .hemisphere = group->group.hemisphere };
  g_autoptr (GArray) regions = g_array_new (FALSE, FALSE, sizeof (guint32));
  g_autoptr (GArray) breaks = g_array_new (FALSE, FALSE, sizeof (guint8));
  Judged judged = { regions, breaks };
  gather (group, &row, &judged);
  row.n = row.keeps + row.breaks;
  row.regions = tf_count_distinct ((const guint32 *)regions->data, row.n);
  row.share = row.n == 0 ? NAN : (double)row.breaks / row.n;
  guint all = row.n + row.cannot_say;
  row.bounds.low = all == 0 ? NAN : (double)row.breaks / all;
  row.bounds.high = all == 0 ? NAN : (double)(row.breaks + row.cannot_say) / all;
  row.wilson = tf_wilson (row.breaks, row.n, params->level);
  row.clopper_pearson = tf_clopper_pearson (row.breaks, row.n, params->level);
  row.cluster
      = tf_bootstrap_share ((const guint32 *)regions->data, (const guint8 *)breaks->data, row.n,
                            (guint)MAX (params->draws, 0), (guint64)params->seed, params->level);
  return row;
}

/* The cycles of the sample, each once, in order; 0 (unknown) is left out. */
static GArray *
list_cycles (const TfSample *sample, const TfVerdict *verdicts)
{
  GArray *cycles = g_array_new (FALSE, FALSE, sizeof (int));
  for (guint k = 0; k < tf_sample_get_n (sample); k++)
    {
      int cycle = verdicts[k].cycle.number;
      guint at = 0;
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
  for (guint c = 0; c < cycles->len; c++)
    for (guint h = 0; h < G_N_ELEMENTS (hemispheres); h++)
      {
        Group group
            = { sample, verdicts, tf_group_of (g_array_index (cycles, int, c), hemispheres[h]) };
        TfHaleRow row = fill_row (&group, params);
        g_array_append_val (table, row);
      }
  Group all = { sample, verdicts, tf_group_of (0, 0) };
  TfHaleRow row = fill_row (&all, params);
  g_array_append_val (table, row);
  return table;
}

TfHaleRow
tf_hale_row (const TfSample *sample, const TfVerdict *verdicts, int cycle, int hemisphere,
             const TfHaleParams *params)
{
  Group group = { sample, verdicts, tf_group_of (cycle, hemisphere) };
  return fill_row (&group, params);
}
