/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-simulate.h"

#include <string.h>
#include <glib/gstdio.h>

#include "coverage.h"
#include "tf-check.h"
#include "tf-drift.h"
#include "tf-power-run.h"

static TfCyclesParams
cycles_params (void)
{
  TfCyclesParams params;
  tf_options_reset (tf_cycles_options, &params);
  return params;
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

/* Every sure verdict is the truth; without strays every sure cycle too. */
static void
test_truth (void)
{
  TfCyclesParams params = cycles_params ();
  g_autoptr (TfInvented) invented = tf_cycles_invent (&params);
  g_autofree TfVerdict *verdicts = judge (invented->sample);
  guint wrong = 0, judged = 0, unsure = 0, breaks = 0;
  g_assert_cmpuint (invented->regions->len, ==, 2400);
  for (guint k = 0; k < tf_sample_get_n (invented->sample); k++)
    {
      const TfSampleRow *row = tf_sample_get (invented->sample, k);
      const TfInventedRegion *truth
          = &g_array_index (invented->regions, TfInventedRegion, row->region);
      unsure += !verdicts[k].cycle.sure;
      if (verdicts[k].kind == TF_VERDICT_CANNOT_SAY)
        continue;
      judged++;
      wrong += (verdicts[k].kind == TF_VERDICT_BREAKS) != (truth->breaks != FALSE);
    }
  for (guint k = 0; k < invented->regions->len; k++)
    breaks += g_array_index (invented->regions, TfInventedRegion, k).breaks != FALSE;
  tf_check_between ("share that breaks", breaks / 2400.0, 0.05 - 3.5 * 0.0045, 0.05 + 3.5 * 0.0045);
  /* a mark's latitude has an error, and its day is not the region's: a few lie over the line */
  tf_check_between ("wrong verdicts", (double)wrong / judged, 0.0, 0.0005);
  tf_check_between ("unsure", (double)unsure / tf_sample_get_n (invented->sample), 0.001,
                    0.10);
}

/* The drift of the invented regions is the law they were drawn from. */
static void
test_drift (void)
{
  TfCyclesParams params = cycles_params ();
  params.regions = 2000;
  params.first = 24;
  params.n_cycles = 1;
  g_autoptr (TfInvented) invented = tf_cycles_invent (&params);
  g_autofree TfVerdict *verdicts = judge (invented->sample);
  TfDriftParams drift = { 0 };
  tf_options_reset (tf_drift_options, &drift);
  drift.draws = 0;
  g_autoptr (GArray) drifts = tf_drifts (invented->sample, verdicts, &drift);
  for (guint k = 0; k < drifts->len; k++)
    {
      const TfDrift *found = &g_array_index (drifts, TfDrift, k);
      if (found->cycle != 24 || found->hemisphere != 0)
        continue;
      tf_check_near ("start", found->start_deg, 28.0, 1.0);
      tf_check_near ("tau", found->tau_months, 90.0, 6.0);
      return;
    }
  g_assert_not_reached ();
}

static void
test_repeats (void)
{
  TfCyclesParams params = cycles_params ();
  params.regions = 20;
  g_autoptr (TfInvented) one = tf_cycles_invent (&params), two = tf_cycles_invent (&params);
  params.seed = 2;
  g_autoptr (TfInvented) other = tf_cycles_invent (&params);
  const TfSampleRow *a = tf_sample_get (one->sample, 7), *b = tf_sample_get (two->sample, 7),
                    *c = tf_sample_get (other->sample, 7);
  g_assert_cmpint (memcmp (&a->axis_tilt_deg, &b->axis_tilt_deg, sizeof (double)), ==, 0);
  g_assert_true (fabs (a->axis_tilt_deg - c->axis_tilt_deg) > 1e-6);
}

static guint
count_lines (const char *folder, const char *name)
{
  g_autofree char *path = g_build_filename (folder, name, NULL), *text = NULL;
  g_assert_true (g_file_get_contents (path, &text, NULL, NULL));
  g_auto (GStrv) lines = g_strsplit (text, "\r\n", -1);
  g_remove (path);
  return g_strv_length (lines) - 1;
}

static void
test_files (void)
{
  TfCyclesParams params = cycles_params ();
  params.regions = 10;
  g_autoptr (GError) error = NULL;
  g_autofree char *folder = g_dir_make_tmp ("tiltfield-cycles-XXXXXX", &error);
  g_autoptr (TfInvented) invented = tf_cycles_invent (&params);
  g_assert_true (tf_cycles_write (folder, &params, &error));
  g_assert_cmpuint (count_lines (folder, "cycles.csv"), ==, 2 + tf_sample_get_n (invented->sample));
  g_assert_cmpuint (count_lines (folder, "cycles.truth.csv"), ==, 1 + 30);
  g_autofree char *truth = g_build_filename (folder, "cycles.truth.json", NULL);
  g_assert_cmpint (g_remove (truth), ==, 0);
  g_rmdir (folder);
  g_assert_false (tf_cycles_write ("/proc/nowhere", &params, &error));
  g_assert_error (error, TF_SIMULATE_ERROR, TF_SIMULATE_ERROR_WRITE);
}

/* 60 seeds, 1001 to 1060, fixed beforehand. Of 95 % intervals fewer than 51 hold the truth with a
 * chance of 0.2 % (binomial); of 85 % ones, with 50 %. Intervals that are too wide show at half the
 * level: 18 to 42 of 60 with a chance of 99.9 %, while those of twice the width would hold 49. The 400
 * seeds of tests/long tell it closer. */
static void
test_coverage (void)
{
  TfCyclesParams params = cycles_params ();
  params.regions = 120;
  Coverage found = coverage_run (&params, 1001, 60, 300, 0.95, NULL);
  g_test_message ("slope %u, share %u, exact %u of 60", found.slope, found.share, found.exact);
  tf_check_between ("slope", found.slope, 51, 60);
  tf_check_between ("share by clusters", found.share, 51, 60);
  tf_check_between ("share, exact", found.exact, 54, 60);
  Coverage half = coverage_run (&params, 1001, 60, 300, 0.5, NULL);
  g_test_message ("of half the level: slope %u, share %u, exact %u of 60", half.slope, half.share, half.exact);
  tf_check_between ("slope, half", half.slope, 18, 42);
  tf_check_between ("share by clusters, half", half.share, 18, 42);
  tf_check_between ("share, exact, half", half.exact, 18, 50);
}

/* More regions tell more; equal truths are told apart as often as the chance asked for. The formula:
 * the normal approximation of two shares of n each, z = (p2 - p1)/sqrt (2 p (1-p)/n). */
static void
test_power (void)
{
  TfPowerParams params;
  tf_options_reset (tf_power_options, &params);
  params.what = TF_POWER_SHARE;
  params.first = 0.05;
  params.second = 0.15;
  params.least = 50;
  params.most = 400;
  params.runs = 100;
  g_autoptr (GError) error = NULL;
  g_autoptr (TfPowerCurve) curve = tf_power_run (&params, NULL, &error);
  g_assert_cmpuint (curve->points->len, ==, 4);
  const TfPowerPoint *p = &g_array_index (curve->points, TfPowerPoint, 0);
  tf_check_between ("of 50", p[0].power, 0.05, 0.45);
  tf_check_between ("of 400", p[3].power, 0.95, 1.0);
  double needed = tf_power_needed (curve, 0.8);
  /* n = 2 p (1-p) (1.96 + 0.84)^2 / 0.1^2 = 141; Fisher's test asks for somewhat more, and some
   * regions have no verdict */
  tf_check_between ("needed", needed, 130, 230);
  tf_check_nan ("never reached", tf_power_needed (curve, 1.1));
  params.second = 0.05;
  params.least = params.most = 200;
  g_autoptr (TfPowerCurve) equal = tf_power_run (&params, NULL, &error);
  tf_check_between ("equal shares", g_array_index (equal->points, TfPowerPoint, 0).found, 0, 12);
}

static void
test_power_of_slopes (void)
{
  TfPowerParams params;
  tf_options_reset (tf_power_options, &params);
  params.first = 0.6;
  params.second = 0.2;
  params.least = 60;
  params.most = 480;
  params.runs = 30;
  params.draws = 60;
  g_autoptr (GError) error = NULL;
  g_autoptr (TfPowerCurve) curve = tf_power_run (&params, NULL, &error);
  const TfPowerPoint *p = &g_array_index (curve->points, TfPowerPoint, 0);
  g_assert_cmpuint (p[3].found, >, p[0].found);
  tf_check_between ("of 480", p[3].power, 0.8, 1.0);
  g_autoptr (TfWorkers) workers = tf_workers_new (2);
  const TfWork work = { .workers = workers };
  g_autoptr (TfPowerCurve) again = tf_power_run (&params, &work, &error);
  for (guint k = 0; k < 4; k++)
    g_assert_cmpuint (p[k].found, ==, g_array_index (again->points, TfPowerPoint, k).found);
}

void
test_simulate_add_cycles (void)
{
  g_test_add_func ("/simulate/cycles/verdicts-are-the-truth", test_truth);
  g_test_add_func ("/simulate/cycles/latitudes-drift-as-drawn", test_drift);
  g_test_add_func ("/simulate/cycles/a-seed-repeats", test_repeats);
  g_test_add_func ("/simulate/cycles/files-and-their-truth", test_files);
  g_test_add_func ("/simulate/cycles/intervals-hold-the-truth", test_coverage);
  g_test_add_func ("/simulate/power/shares", test_power);
  g_test_add_func ("/simulate/power/slopes-and-threads", test_power_of_slopes);
}
