/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-power-run.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-compare.h"

#define O(member) offsetof (TfPowerParams, member)
const TfOption tf_power_options[] = {
  { "what", TF_OPTION_CHOICE, "", TF_POWER_SLOPE, 0, 1, tf_power_names,
    N_ ("what is to be told apart"), O (what) },
  { "first", TF_OPTION_NUMBER, "", NAN, -5, 5, NULL,
    N_ ("the first slope (deg/deg, 0.4) or share (0.05)"), O (first) },
  { "second", TF_OPTION_NUMBER, "", NAN, -5, 5, NULL, N_ ("the second slope (0.3) or share (0.08)"),
    O (second) },
  { "chance", TF_OPTION_NUMBER, "", 0.05, 0.0001, 0.5, NULL,
    N_ ("a difference counts when its p is not above this"), O (chance) },
  { "power", TF_OPTION_NUMBER, "", 0.8, 0.05, 0.999, NULL, N_ ("how often it should be found"),
    O (power) },
  { "least", TF_OPTION_INT, "", 50, 5, 1000000, NULL, N_ ("fewest regions in each group"),
    O (least) },
  { "most", TF_OPTION_INT, "", 6400, 5, 1000000, NULL, N_ ("most regions in each group"),
    O (most) },
  { "runs", TF_OPTION_INT, "", 200, 10, 100000, NULL, N_ ("pairs of groups at each number"),
    O (runs) },
  { "power-draws", TF_OPTION_INT, "", 200, 50, 10000, NULL,
    N_ ("bootstrap draws of a difference of slopes"), O (draws) },
  { "power-seed", TF_OPTION_INT, "", 1, 0, G_MAXINT32, NULL, N_ ("seed of the random numbers"),
    O (seed) },
  { NULL },
};
#undef O

typedef struct
{
  const TfPowerParams *params;
  double truth[2];
  guint n;       /* regions in each group */
  guint8 *found; /* one a run */
} Runs;

/* Odd cycles are the first group, even ones the second: two cycles with truths of their own. */
static void
add_group (TfSample *sample, const Runs *runs, int side, guint run)
{
  TfCyclesParams params;
  tf_options_reset (tf_cycles_options, &params);
  params.first = 23 + side;
  params.n_cycles = 1;
  params.regions = (int)runs->n;
  params.marks = 0.0;
  params.seed = (int)(((guint64)runs->params->seed * 1000003u + (guint64)runs->n * 4001u + run) * 2
                      + (guint64)side)
                & G_MAXINT32;
  if (runs->params->what == TF_POWER_SLOPE)
    params.slope = runs->truth[side];
  else
    params.anti_hale_share = runs->truth[side];
  g_autoptr (TfInvented) invented = tf_cycles_invent (&params);
  for (guint k = 0; k < tf_sample_get_n (invented->sample); k++)
    {
      TfSampleRow row = *tf_sample_get (invented->sample, k);
      row.region = row.passage = row.row = tf_sample_get_n (sample);
      tf_sample_add (sample, &row);
    }
}

static TfVerdict *
judge (const TfSample *sample)
{
  TfDivideParams divide;
  TfVerdictParams verdict;
  tf_options_reset (tf_divide_options, &divide);
  tf_options_reset (tf_verdict_options, &verdict);
  g_autoptr (TfDivides) divides = tf_divides_new (&divide);
  TfVerdict *verdicts = g_new (TfVerdict, tf_sample_get_n (sample) + 1);
  for (guint k = 0; k < tf_sample_get_n (sample); k++)
    verdicts[k] = tf_verdict_judge (tf_sample_get (sample, k), divides, &verdict);
  return verdicts;
}

static void
run_pair (guint band, guint first, guint n, guint worker, gpointer data)
{
  Runs *runs = data;
  g_autoptr (TfSample) sample = tf_sample_new ();
  add_group (sample, runs, 0, band);
  add_group (sample, runs, 1, band);
  g_autofree TfVerdict *verdicts = judge (sample);
  TfJoyParams joy = { 0 };
  tf_options_reset (tf_joy_options, &joy);
  joy.draws = runs->params->what == TF_POWER_SLOPE ? runs->params->draws : 0;
  TfComparison row
      = tf_compare_groups (sample, verdicts, tf_group_of (23, 0), tf_group_of (24, 0), &joy);
  double p = runs->params->what == TF_POWER_SLOPE ? row.slope_p : row.share_p;
  runs->found[band] = p <= runs->params->chance;
}

static TfPowerPoint
count (const Runs *runs)
{
  TfPowerPoint point = { .n = runs->n, .runs = (guint)runs->params->runs };
  for (guint k = 0; k < point.runs; k++)
    point.found += runs->found[k];
  point.power = (double)point.found / point.runs;
  point.interval = tf_clopper_pearson (point.found, point.runs, 0.95);
  return point;
}

TfPowerCurve *
tf_power_run (const TfPowerParams *params, const TfWork *work, GError **error)
{
  static const double fallbacks[2][2] = { { 0.4, 0.3 }, { 0.05, 0.08 } };
  g_autofree guint8 *found = g_new0 (guint8, params->runs + 1);
  Runs runs = { params, { params->first, params->second }, 0, found };
  for (int side = 0; side < 2; side++)
    if (isnan (runs.truth[side]))
      runs.truth[side] = fallbacks[params->what][side];
  g_autoptr (TfPowerCurve) curve = g_new0 (TfPowerCurve, 1);
  *curve = (TfPowerCurve){ (TfPowerWhat)params->what, runs.truth[0], runs.truth[1], params->chance,
                           g_array_new (FALSE, FALSE, sizeof (TfPowerPoint)) };
  for (runs.n = (guint)params->least; runs.n <= (guint)params->most; runs.n *= 2)
    {
      if (!tf_bands_run (work, (guint)params->runs * TF_BAND_ROWS, run_pair, &runs))
        {
          g_set_error (error, TF_SIMULATE_ERROR, TF_SIMULATE_ERROR_CANCELLED, _ ("Stopped."));
          return NULL;
        }
      TfPowerPoint point = count (&runs);
      g_array_append_val (curve->points, point);
    }
  return g_steal_pointer (&curve);
}
