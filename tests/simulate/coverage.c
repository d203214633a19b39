/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "coverage.h"

#include "tf-hale.h"
#include "tf-sampling.h"

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

static gboolean
holds (TfInterval interval, double truth)
{
  return truth >= interval.low && truth <= interval.high;
}

/* The study's default methods: linear, robust, regions that break left out. */
static void
run_seed (const TfCyclesParams *params, int draws, double level, Coverage *coverage)
{
  TfHaleParams hale = { 0 };
  TfJoyParams joy = { 0 };
  TfSamplingParams sampling;
  tf_options_reset (tf_hale_options, &hale);
  tf_options_reset (tf_joy_options, &joy);
  tf_options_reset (tf_sampling_options, &sampling);
  hale.draws = joy.draws = draws;
  hale.level = joy.level = level;
  hale.seed = joy.seed = params->seed;
  g_autoptr (TfInvented) invented = tf_cycles_invent (params);
  g_autofree TfVerdict *verdicts = judge (invented->sample);
  TfJoyFit fit = tf_joy_fit (invented->sample, verdicts, 0, 0, &joy);
  TfHaleRow every = tf_hale_row (invented->sample, verdicts, 0, 0, &hale);
  g_autoptr (TfSample) picks = tf_sampling_pick (invented->sample, &sampling, NULL);
  g_autofree TfVerdict *of_picks = judge (picks);
  hale.draws = 0;
  TfHaleRow one = tf_hale_row (picks, of_picks, 0, 0, &hale);
  coverage->slope += holds (fit.slope_ci, params->slope);
  coverage->share += holds (every.cluster, params->anti_hale_share);
  coverage->exact += holds (one.clopper_pearson, params->anti_hale_share);
}

Coverage
coverage_run (const TfCyclesParams *params, int first, guint seeds, int draws,
              double level, void (*say) (guint done))
{
  Coverage coverage = { .seeds = seeds };
  for (guint k = 0; k < seeds; k++)
    {
      TfCyclesParams here = *params;
      here.seed = first + (int)k;
      run_seed (&here, draws, level, &coverage);
      if (say != NULL)
        say (k + 1);
    }
  return coverage;
}
