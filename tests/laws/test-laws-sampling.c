/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-laws.h"

#include "tf-check.h"
#include "tf-constants.h"
#include "tf-sampling.h"

/* Twelve days of one region from CMD -66 to +66; the flux is greatest on day @peak. */
static void
add_passage (TfSample *sample, guint32 passage, double peak)
{
  for (int day = 0; day <= 10; day++)
    {
      TfSampleRow row = test_laws_row (14.0, -1);
      row.time = tf_time_add (row.time, day * TF_DAY_S);
      row.passage = passage;
      row.region = passage;
      row.row = tf_sample_get_n (sample);
      row.cmd_deg = -66.0 + 13.2 * day;
      row.mu = cos (row.cmd_deg * TF_DEG);
      row.flux_mx = 1e22 - 1e20 * (day - peak) * (day - peak);
      row.axis_tilt_deg = 2.0 * day;
      tf_sample_add (sample, &row);
    }
}

static TfSamplingParams
rule (int which)
{
  TfSamplingParams params;
  tf_options_reset (tf_sampling_options, &params);
  params.rule = which;
  return params;
}

static void
test_greatest_flux (void)
{
  g_autoptr (TfSample) marks = tf_sample_new ();
  add_passage (marks, 7, 4.0);
  add_passage (marks, 8, 0.0);  /* at the limb: looked for among mu >= 0.5 */
  add_passage (marks, 9, 20.0); /* rises to the end */
  TfSamplingParams params = rule (TF_SAMPLING_FLUX);
  TfSamplingTally tally;
  g_autoptr (TfSample) picks = tf_sampling_pick (marks, &params, &tally);
  g_assert_cmpuint (tf_sample_get_n (picks), ==, 3);
  g_assert_cmpuint (tf_sample_get (picks, 0)->row, ==, 4);
  g_assert_cmpint (tf_sample_get_bracketed (picks, 0), ==, 1);
  g_assert_cmpuint (tf_sample_get (picks, 1)->row, ==, 11 + 1);
  g_assert_cmpuint (tf_sample_get (picks, 2)->row, ==, 22 + 9);
  g_assert_cmpuint (tally.passages, ==, 3);
  g_assert_cmpuint (tally.not_bracketed, ==, 0);
  params.mu_min = 0.0;
  g_autoptr (TfSample) all = tf_sampling_pick (marks, &params, &tally);
  g_assert_cmpuint (tf_sample_get (all, 1)->row, ==, 11);
  g_assert_cmpuint (tf_sample_get (all, 2)->row, ==, 22 + 10);
  g_assert_cmpint (tf_sample_get_bracketed (all, 1), ==, 0);
  g_assert_cmpint (tf_sample_get_bracketed (all, 2), ==, 0);
  g_assert_cmpuint (tally.not_bracketed, ==, 2);
}

static void
test_central_meridian (void)
{
  g_autoptr (TfSample) marks = tf_sample_new ();
  add_passage (marks, 7, 4.0);
  TfSamplingParams params = rule (TF_SAMPLING_MERIDIAN);
  g_autoptr (TfSample) picks = tf_sampling_pick (marks, &params, NULL);
  g_assert_cmpuint (tf_sample_get_n (picks), ==, 1);
  g_assert_cmpuint (tf_sample_get (picks, 0)->row, ==, 5);
  g_assert_cmpint (tf_sample_get_bracketed (picks, 0), ==, -1);
}

/* Days 2 to 8 lie within 45 deg: the mean tilt is 10; across +-90 the mean is axial. */
static void
test_mean (void)
{
  g_autoptr (TfSample) marks = tf_sample_new ();
  add_passage (marks, 7, 4.0);
  for (int k = 0; k < 2; k++)
    {
      TfSampleRow row = test_laws_row (14.0, k == 0 ? 1 : -1);
      row.passage = 8;
      row.cmd_deg = 10.0 + k;
      row.axis_tilt_deg = k == 0 ? 88.0 : -84.0;
      tf_sample_add (marks, &row);
    }
  TfSamplingParams params = rule (TF_SAMPLING_MEAN);
  g_autoptr (TfSample) picks = tf_sampling_pick (marks, &params, NULL);
  const TfSampleRow *first = tf_sample_get (picks, 0), *second = tf_sample_get (picks, 1);
  g_assert_cmpuint (tf_sample_get_n (picks), ==, 2);
  tf_check_near ("mean tilt", first->axis_tilt_deg, 10.0, 1e-9);
  tf_check_near ("mean CMD", first->cmd_deg, 0.0, 1e-9);
  tf_check_near ("mean flux", first->flux_mx, 1e22 - 1e20 * (4 + 1 + 0 + 1 + 4 + 9 + 16) / 7.0,
                 1e9);
  tf_check_near ("tilt's error is not divided", first->tilt_sigma_deg, 1.0, 1e-12);
  g_assert_cmpint (first->leading_sure, ==, 1);
  tf_check_near ("axial mean", fabs (second->axis_tilt_deg), 88.0, 1e-9);
  g_assert_true (second->axis_tilt_deg < 0.0);
  g_assert_cmpint (second->leading_sure, ==, 0);
}

/* A passage seen at the limb alone has no pick under (a); a map's mark has, and a table's without
 * flux too. */
static void
test_limits (void)
{
  g_autoptr (TfSample) marks = tf_sample_new ();
  TfSampleRow limb = test_laws_row (10.0, 1), map = limb, table = limb;
  limb.passage = 1;
  limb.mu = 0.4;
  limb.cmd_deg = 66.0;
  map.passage = 2;
  map.mu = map.cmd_deg = NAN;
  table.passage = 3;
  table.flux_mx = NAN;
  table.cmd_deg = 20.0;
  tf_sample_add (marks, &limb);
  tf_sample_add (marks, &map);
  tf_sample_add (marks, &table);
  table.cmd_deg = -5.0;
  table.row = 77;
  tf_sample_add (marks, &table);
  TfSamplingParams params = rule (TF_SAMPLING_FLUX);
  TfSamplingTally tally;
  g_autoptr (TfSample) picks = tf_sampling_pick (marks, &params, &tally);
  g_assert_cmpuint (tf_sample_get_n (picks), ==, 2);
  g_assert_cmpuint (tally.without, ==, 1);
  g_assert_cmpuint (tf_sample_get (picks, 0)->passage, ==, 2);
  g_assert_cmpuint (tf_sample_get (picks, 1)->row, ==, 77);
  params.rule = TF_SAMPLING_EVERY;
  g_autoptr (TfSample) every = tf_sampling_pick (marks, &params, &tally);
  g_assert_cmpuint (tf_sample_get_n (every), ==, 4);
  g_assert_cmpuint (tally.passages, ==, 3);
}

/* What is picked does not depend on the order of the marks. */
static void
test_order (void)
{
  g_autoptr (TfSample) marks = tf_sample_new (), turned = tf_sample_new ();
  add_passage (marks, 7, 4.5); /* days 4 and 5 are equal: the earlier */
  for (guint k = tf_sample_get_n (marks); k > 0; k--)
    tf_sample_add (turned, tf_sample_get (marks, k - 1));
  for (int which = 0; which < 3; which++)
    {
      TfSamplingParams params = rule (which);
      g_autoptr (TfSample) one = tf_sampling_pick (marks, &params, NULL);
      g_autoptr (TfSample) other = tf_sampling_pick (turned, &params, NULL);
      g_assert_cmpuint (tf_sample_get (one, 0)->row, ==, tf_sample_get (other, 0)->row);
    }
  TfSamplingParams params = rule (TF_SAMPLING_FLUX);
  g_autoptr (TfSample) picks = tf_sampling_pick (marks, &params, NULL);
  g_assert_cmpuint (tf_sample_get (picks, 0)->row, ==, 4);
}

/* Places of a part of a part are those of the whole; what it was picked by stays. */
static void
test_parts (void)
{
  g_autoptr (TfSample) marks = tf_sample_new ();
  for (guint32 passage = 1; passage <= 3; passage++)
    add_passage (marks, passage, 3.0);
  TfSamplingParams params = rule (TF_SAMPLING_FLUX);
  TfSample *picks = tf_sampling_pick (marks, &params, NULL);
  g_autoptr (TfSample) last = tf_sample_new_part (picks);
  tf_sample_add_place (last, 2);
  guint place = tf_sample_get_places (picks)[2];
  int bracketed = tf_sample_get_bracketed (picks, 2);
  tf_sample_take_whole (last, picks);
  g_assert_true (tf_sample_get_root (last) == marks);
  g_assert_cmpuint (tf_sample_get_places (last)[0], ==, place);
  g_assert_cmpint (tf_sample_get_bracketed (last, 0), ==, bracketed);
  g_assert_cmpuint (tf_sample_get (last, 0)->passage, ==, 3);
  g_autoptr (TfSample) copy = tf_sample_copy (last);
  g_assert_null (tf_sample_get_root (copy));
  g_assert_cmpint (tf_sample_get_bracketed (copy, 0), ==, bracketed);
}

void
test_laws_add_sampling (void)
{
  g_test_add_func ("/laws/sampling/parts", test_parts);
  g_test_add_func ("/laws/sampling/greatest-flux-and-its-bracket", test_greatest_flux);
  g_test_add_func ("/laws/sampling/nearest-the-central-meridian", test_central_meridian);
  g_test_add_func ("/laws/sampling/the-mean-is-axial", test_mean);
  g_test_add_func ("/laws/sampling/limb-maps-and-tables", test_limits);
  g_test_add_func ("/laws/sampling/the-order-of-marks-does-not-matter", test_order);
}
