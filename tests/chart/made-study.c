/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "made-study.h"

#include <math.h>

static double
normal (GRand *random)
{
  double u = g_rand_double_range (random, 1e-12, 1), v = g_rand_double (random);
  return sqrt (-2 * log (u)) * cos (2 * G_PI * v);
}

static void
add_row (TfSample *sample, GRand *random, guint k)
{
  TfSampleRow row;
  tf_sample_row_init (&row);
  int cycle = g_rand_boolean (random) ? 23 : 24, side = g_rand_boolean (random) ? 1 : -1;
  double months = g_rand_double_range (random, 24, 90);
  double lat = fabs (28 * exp (-months / 90) + 4 * normal (random)) + 1;
  double separation = 1.5 + 2.5 * fabs (normal (random));
  int leader = tf_hale_expected (cycle, side) * (g_rand_double (random) < 0.05 ? -1 : 1);
  row.time = tf_time_add (tf_cycle_minimum (cycle), months * 30.44 * 86400);
  row.region = row.passage = k + 1;
  row.lat_deg = side * lat;
  row.cmd_deg = g_rand_double_range (random, -60, 60);
  row.mu = 0.8;
  row.axis_tilt_deg = CLAMP (0.45 * lat + 18 * normal (random), -89, 89);
  row.tilt_sigma_deg = 6;
  row.separation_deg = separation;
  row.separation_sigma_deg = 0.4;
  row.flux_mx = 1e22 * exp (normal (random));
  row.imbalance = 0.1;
  row.compactness = 1;
  row.leading_polarity = leader;
  row.leading_sure = g_rand_double (random) > 0.03;
  row.witnesses_differ = 0;
  row.straddles = 0;
  row.size = 0;
  tf_sample_add (sample, &row);
}

static void
fit (MadeStudy *study)
{
  study->joy = g_array_new (FALSE, FALSE, sizeof (TfJoyFit));
  TfJoyFit all = tf_joy_fit (study->sample, study->verdicts, 0, 0, &study->facts.joy_params);
  g_array_append_val (study->joy, all);
}

MadeStudy
made_study_new (guint n, guint seed)
{
  MadeStudy study = { .sample = tf_sample_new (), .verdicts = g_new0 (TfVerdict, n + 1) };
  TfDivideParams divide;
  TfVerdictParams verdict;
  tf_options_reset (tf_divide_options, &divide);
  tf_options_reset (tf_verdict_options, &verdict);
  tf_options_reset (tf_hale_options, &study.facts.hale_params);
  tf_options_reset (tf_joy_options, &study.facts.joy_params);
  study.facts.hale_params.draws = study.facts.joy_params.draws = 200;
  g_autoptr (TfDivides) divides = tf_divides_new (&divide);
  GRand *random = g_rand_new_with_seed (seed);
  for (guint k = 0; k < n; k++)
    {
      add_row (study.sample, random, k);
      study.verdicts[k] = tf_verdict_judge (tf_sample_get (study.sample, k), divides, &verdict);
    }
  g_rand_free (random);
  study.hale = tf_hale_table (study.sample, study.verdicts, &study.facts.hale_params);
  fit (&study);
  study.facts.sample = study.sample;
  study.facts.verdicts = study.verdicts;
  study.facts.hale = study.hale;
  study.facts.joy = study.joy;
  return study;
}

void
made_study_clear (MadeStudy *study)
{
  tf_sample_free (study->sample);
  g_free (study->verdicts);
  g_array_unref (study->hale);
  g_array_unref (study->joy);
}
