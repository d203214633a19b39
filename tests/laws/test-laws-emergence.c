/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-laws.h"

#include "tf-check.h"
#include "tf-constants.h"
#include "tf-dipole-sum.h"
#include "tf-emergence.h"

static TfEmergenceParams
emergence_params (void)
{
  TfEmergenceParams params;
  tf_options_reset (tf_emergence_options, &params);
  return params;
}

/* A region whose flux rises from nothing by 2e21 Mx a day for four days, then stays; its tilt is
 * @tilt at first and falls by 2 deg a day; it crosses the disk from @cmd. */
static void
add_region (TfSample *sample, guint32 id, double tilt, double cmd, double first_day, gint8 born)
{
  for (int k = 0; k < 40; k++)
    {
      double day = first_day + 0.25 * k;
      TfSampleRow row = test_laws_row (15.0, -1);
      row.time = tf_time_add (row.time, day * TF_DAY_S);
      row.region = row.passage = id;
      row.flux_mx = 2e21 * fmin (fmax (day, 0.01), 4.0);
      row.axis_tilt_deg = tilt - 2.0 * day;
      row.separation_deg = 2.0 + day;
      row.cmd_deg = cmd + 13.2 * day;
      row.mu = cos (row.cmd_deg * TF_DEG);
      row.born = born;
      tf_sample_add (sample, &row);
    }
}

static const TfEmergenceAge *
at_age (const TfEmergence *found, int side, double days)
{
  for (guint k = 0; k < found->ages[side]->len; k++)
    {
      const TfEmergenceAge *age = &g_array_index (found->ages[side], TfEmergenceAge, k);
      if (fabs (age->age_days - days) <= 0.5 * found->params.bin_days - 1e-9)
        return age;
    }
  g_assert_not_reached ();
}

/* Flux reaches a tenth of 8e21 at day 0.4: time zero. Marks at 2.5 and 2.75 days are of ages 2.1 and
 * 2.35, in the bin from 2 to 2.5. */
static void
test_ages (void)
{
  g_autoptr (TfSample) sample = tf_sample_new ();
  add_region (sample, 1, 20.0, -40.0, -1.0, 1);
  add_region (sample, 2, 30.0, -30.0, -1.0, -1);
  add_region (sample, 3, 40.0, 20.0, -1.0, 1);
  TfEmergenceParams params = emergence_params ();
  g_autoptr (TfEmergence) found = tf_emergence_new (sample, &params);
  g_assert_cmpuint (found->passages, ==, 3);
  g_assert_cmpuint (found->late, ==, 0);
  g_assert_cmpuint (found->elsewhere, ==, 0);
  const TfEmergenceAge *two = at_age (found, TF_EMERGENCE_WHOLE, 2.25);
  g_assert_cmpuint (two->regions, ==, 3);
  tf_check_near ("median tilt", two->tilt_deg.median, 30.0 - 2.0 * 2.625, 1e-9);
  tf_check_near ("lower quartile", two->tilt_deg.low, 25.0 - 2.0 * 2.625, 1e-9);
  tf_check_near ("separation", two->separation_deg.median, 2.0 + 2.625, 1e-9);
  tf_check_near ("flux", two->flux_mx.median, 2e21 * 2.625, 1e12);
  const TfEmergenceAge *east = at_age (found, TF_EMERGENCE_EAST, 2.25);
  g_assert_cmpuint (east->regions, ==, 1);
  tf_check_near ("east", east->tilt_deg.median, 20.0 - 2.0 * 2.625, 1e-9);
  const TfEmergenceAge *west = at_age (found, TF_EMERGENCE_WEST, 2.25);
  g_assert_cmpuint (west->regions, ==, 2);
  const TfEmergenceAge *none = at_age (found, TF_EMERGENCE_WHOLE, 9.25);
  g_assert_cmpuint (none->regions, ==, 0);
  tf_check_nan ("no region, no median", none->tilt_deg.median);
}

/* The beginning was not seen: born elsewhere, or not known to be born here. */
static void
test_birth (void)
{
  g_autoptr (TfSample) sample = tf_sample_new ();
  add_region (sample, 1, 20.0, -40.0, 2.0, 1);
  add_region (sample, 2, 20.0, -40.0, 2.0, 0);
  add_region (sample, 3, 20.0, -40.0, 2.0, -1);
  add_region (sample, 4, 20.0, -40.0, -1.0, 0);
  TfSampleRow bare = test_laws_row (10.0, 1);
  bare.flux_mx = NAN;
  bare.passage = 5;
  tf_sample_add (sample, &bare);
  TfEmergenceParams params = emergence_params ();
  g_autoptr (TfEmergence) found = tf_emergence_new (sample, &params);
  g_assert_cmpuint (found->passages, ==, 1);
  g_assert_cmpuint (found->late, ==, 1);
  g_assert_cmpuint (found->elsewhere, ==, 3);
  g_assert_cmpuint (found->unmeasured, ==, 1);
  tf_check_near ("its first mark is time zero",
                 at_age (found, TF_EMERGENCE_WHOLE, 0.25)->separation_deg.median, 4.125, 1e-9);
}

/* Tilts near +-90 average about the axis, not through zero. */
static void
test_axial_mean (void)
{
  g_autoptr (TfSample) sample = tf_sample_new ();
  for (int k = 0; k < 2; k++)
    {
      TfSampleRow row = test_laws_row (15.0, -1);
      row.time = tf_time_add (row.time, 0.1 * k * TF_DAY_S);
      row.axis_tilt_deg = k == 0 ? 88.0 : -86.0;
      row.born = 1;
      tf_sample_add (sample, &row);
    }
  TfEmergenceParams params = emergence_params ();
  g_autoptr (TfEmergence) found = tf_emergence_new (sample, &params);
  tf_check_near ("axial mean", fabs (at_age (found, TF_EMERGENCE_WHOLE, 0.25)->tilt_deg.median),
                 89.0, 1e-9);
}

static TfVerdict *
judge (const TfSample *sample)
{
  g_autoptr (TfDivides) divides = test_laws_divides ();
  TfVerdictParams params = test_laws_verdict_params ();
  TfVerdict *verdicts = g_new (TfVerdict, tf_sample_get_n (sample) + 1);
  for (guint k = 0; k < tf_sample_get_n (sample); k++)
    verdicts[k] = tf_verdict_judge (tf_sample_get (sample, k), divides, &params);
  return verdicts;
}

static void
add_dipole (TfSample *sample, guint32 region, double lat, int leading, double gauss)
{
  TfSampleRow row = test_laws_row (lat, leading);
  row.region = row.passage = region;
  row.axial_dipole_gauss = gauss;
  row.axial_dipole_sigma_gauss = 0.003;
  tf_sample_add (sample, &row);
}

static const TfDipoleSum *
sum_at (const GArray *sums, int hemisphere, int verdict)
{
  for (guint k = 0; k < sums->len; k++)
    {
      const TfDipoleSum *sum = &g_array_index (sums, TfDipoleSum, k);
      if (sum->hemisphere == hemisphere && sum->verdict == verdict)
        return sum;
    }
  g_assert_not_reached ();
}

static void
test_dipoles (void)
{
  g_autoptr (TfSample) sample = tf_sample_new ();
  add_dipole (sample, 1, 15.0, -1, -0.02);
  add_dipole (sample, 1, 15.0, -1, -0.04); /* once more: the region counts -0.03 */
  add_dipole (sample, 2, -15.0, 1, -0.05);
  add_dipole (sample, 3, 12.0, 1, 0.01);
  add_dipole (sample, 4, -12.0, -1, 0.015);
  add_dipole (sample, 5, 1.0, -1, -0.001);
  add_dipole (sample, 6, 20.0, -1, NAN);
  g_autofree TfVerdict *verdicts = judge (sample);
  g_autoptr (GArray) sums = tf_dipole_sums (sample, verdicts);
  g_assert_cmpuint (sums->len, ==, 12);
  const TfDipoleSum *all = sum_at (sums, 0, -1);
  g_assert_cmpint (all->cycle, ==, 24);
  g_assert_cmpuint (all->regions, ==, 5);
  g_assert_cmpuint (all->without, ==, 1);
  tf_check_near ("all", all->sum_gauss, -0.056, 1e-15);
  tf_check_near ("its error", all->sigma_gauss, 0.003 * sqrt (5.0), 1e-15);
  g_assert_cmpint (all->costliest, ==, 4);
  tf_check_near ("keeps", sum_at (sums, 0, TF_VERDICT_KEEPS)->sum_gauss, -0.08, 1e-15);
  tf_check_near ("north keeps", sum_at (sums, 1, TF_VERDICT_KEEPS)->sum_gauss, -0.03, 1e-15);
  const TfDipoleSum *breaks = sum_at (sums, 1, TF_VERDICT_BREAKS);
  tf_check_near ("north breaks", breaks->sum_gauss, 0.01, 1e-15);
  g_assert_cmpint (breaks->costliest, ==, 3);
  tf_check_near ("what it costs", breaks->costliest_gauss, 0.01, 1e-15);
  g_assert_cmpint (sum_at (sums, 0, TF_VERDICT_KEEPS)->costliest, ==, -1);
  tf_check_nan ("no error of nothing", sum_at (sums, -1, TF_VERDICT_CANNOT_SAY)->sigma_gauss);
}

void
test_laws_add_emergence (void)
{
  g_test_add_func ("/laws/emergence/ages-halves-and-counts", test_ages);
  g_test_add_func ("/laws/emergence/who-was-born-on-the-disk", test_birth);
  g_test_add_func ("/laws/emergence/tilts-average-as-axes", test_axial_mean);
  g_test_add_func ("/laws/dipole/sums-by-hemisphere-and-verdict", test_dipoles);
}
