/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-laws.h"

#include "tf-check.h"
#include "tf-constants.h"
#include "tf-hale.h"

static TfHaleParams
hale_params (void)
{
  TfHaleParams params = { 0 };
  tf_options_reset (tf_hale_options, &params);
  return params;
}

static void
add (TfSample *sample, double lat, int leading, double year, guint32 region)
{
  TfSampleRow row = test_laws_row (lat, leading);
  row.time = tf_time_from_year (year);
  row.region = row.passage = region;
  tf_sample_add (sample, &row);
}

static GArray *
table_of (const TfSample *sample)
{
  g_autoptr (TfDivides) divides = test_laws_divides ();
  TfVerdictParams verdict = test_laws_verdict_params ();
  TfHaleParams params = hale_params ();
  guint n = tf_sample_get_n (sample);
  g_autofree TfVerdict *verdicts = g_new (TfVerdict, n);
  for (guint k = 0; k < n; k++)
    verdicts[k] = tf_verdict_judge (tf_sample_get (sample, k), divides, &verdict);
  return tf_hale_table (sample, verdicts, &params);
}

/* 2013, cycle 24: the north's leader is negative. 2003, cycle 23: positive. */
static void
test_counts (void)
{
  g_autoptr (TfSample) sample = tf_sample_new ();
  add (sample, 15.0, -1, 2013.5, 1);
  add (sample, 15.0, -1, 2013.5, 1);
  add (sample, 16.0, 1, 2013.5, 2);
  add (sample, 1.0, -1, 2013.5, 3);
  add (sample, -15.0, 1, 2013.5, 4);
  add (sample, 12.0, 1, 2003.5, 5);
  add (sample, 12.0, 1, 1740.0, 6);
  g_autoptr (GArray) table = table_of (sample);
  g_assert_cmpuint (table->len, ==, 7);
  static const struct
  {
    int cycle, hemisphere;
    guint n, regions, keeps, breaks, cannot_say;
  } expected[] = {
    { 23, 1, 1, 1, 1, 0, 0 }, { 23, -1, 0, 0, 0, 0, 0 }, { 23, 0, 1, 1, 1, 0, 0 },
    { 24, 1, 3, 2, 2, 1, 1 }, { 24, -1, 1, 1, 1, 0, 0 }, { 24, 0, 4, 3, 3, 1, 1 },
    { 0, 0, 5, 4, 4, 1, 2 },
  };
  for (guint k = 0; k < table->len; k++)
    {
      const TfHaleRow *row = &g_array_index (table, TfHaleRow, k);
      g_assert_cmpint (row->cycle, ==, expected[k].cycle);
      g_assert_cmpint (row->hemisphere, ==, expected[k].hemisphere);
      g_assert_cmpuint (row->n, ==, expected[k].n);
      g_assert_cmpuint (row->regions, ==, expected[k].regions);
      g_assert_cmpuint (row->keeps, ==, expected[k].keeps);
      g_assert_cmpuint (row->breaks, ==, expected[k].breaks);
      g_assert_cmpuint (row->cannot_say, ==, expected[k].cannot_say);
    }
  const TfHaleRow *north = &g_array_index (table, TfHaleRow, 3);
  tf_check_near ("share", north->share, 1.0 / 3.0, 1e-15);
  tf_check_near ("at least", north->bounds.low, 0.25, 1e-15);
  tf_check_near ("at most", north->bounds.high, 0.5, 1e-15);
  tf_check_between ("by clusters", north->cluster.low, 0.0, 1.0 / 3.0);
  tf_check_near ("Wilson", north->wilson.high, tf_wilson (1, 3, 0.95).high, 0.0);
  tf_check_nan ("share of no rows", g_array_index (table, TfHaleRow, 1).share);
  tf_check_nan ("bounds of no rows", g_array_index (table, TfHaleRow, 1).bounds.high);
  tf_check_nan ("expected of no rows", g_array_index (table, TfHaleRow, 1).expected_false);
}

static void
test_empty (void)
{
  g_autoptr (TfSample) sample = tf_sample_new ();
  g_autoptr (GArray) table = table_of (sample);
  g_assert_cmpuint (table->len, ==, 1);
  const TfHaleRow *row = &g_array_index (table, TfHaleRow, 0);
  g_assert_cmpuint (row->n + row->cannot_say, ==, 0);
  tf_check_nan ("share", row->share);
  tf_check_nan ("Wilson", row->wilson.low);
  tf_check_nan ("Clopper-Pearson", row->clopper_pearson.high);
  tf_check_nan ("by clusters", row->cluster.low);
}

/* Rows without polarity leave everything open. */
static void
test_no_polarity (void)
{
  g_autoptr (TfSample) sample = tf_sample_new ();
  for (guint k = 0; k < 5; k++)
    add (sample, 15.0, 0, 2013.5, k);
  g_autoptr (GArray) table = table_of (sample);
  const TfHaleRow *row = &g_array_index (table, TfHaleRow, table->len - 1);
  g_assert_cmpuint (row->cannot_say, ==, 5);
  tf_check_near ("at least", row->bounds.low, 0.0, 0.0);
  tf_check_near ("at most", row->bounds.high, 1.0, 0.0);
}

/* Against draws: both components of the separation with their errors; how often the western pole
 * becomes the eastern. */
static void
test_expected_false_against_draws (void)
{
  static const double cases[][4] = { { 3.0, 0.5, 10.0, 20.0 },
                                     { 2.0, 1.0, 60.0, 15.0 },
                                     { 1.0, 0.8, -30.0, 10.0 },
                                     { 4.0, 0.2, 80.0, 8.0 } };
  g_autoptr (GRand) rand = g_rand_new_with_seed (9);
  for (guint c = 0; c < G_N_ELEMENTS (cases); c++)
    {
      TfSampleRow row = test_laws_row (15.0, -1);
      row.separation_deg = cases[c][0];
      row.separation_sigma_deg = cases[c][1];
      row.axis_tilt_deg = cases[c][2];
      row.tilt_sigma_deg = cases[c][3];
      guint turned = 0;
      const guint draws = 200000;
      for (guint k = 0; k < draws; k++)
        {
          double angle = 2.0 * TF_PI * g_rand_double (rand),
                 radius = sqrt (-2.0 * log (1.0 - g_rand_double (rand)));
          double along = row.separation_deg + row.separation_sigma_deg * radius * cos (angle);
          double across = row.separation_deg * row.tilt_sigma_deg * TF_DEG * radius * sin (angle);
          double tilt = row.axis_tilt_deg * TF_DEG;
          turned += along * cos (tilt) - across * sin (tilt) < 0.0;
        }
      tf_check_near ("chance of a turned axis", tf_hale_expected_false (&row),
                     (double)turned / draws, 0.004);
    }
}

static void
test_expected_false_edges (void)
{
  TfSampleRow row = test_laws_row (15.0, -1);
  row.separation_sigma_deg = row.tilt_sigma_deg = 0.0;
  tf_check_near ("without errors", tf_hale_expected_false (&row), 0.0, 0.0);
  row.tilt_sigma_deg = 5.0;
  row.axis_tilt_deg = 90.0;
  tf_check_near ("due north-south", tf_hale_expected_false (&row), 0.5, 1e-12);
  row.axis_tilt_deg = NAN;
  tf_check_nan ("without tilt and bearing", tf_hale_expected_false (&row));
  row.axis_bearing_deg = 10.0;
  tf_check_between ("by the bearing", tf_hale_expected_false (&row), 0.0, 1e-6);
  row.tilt_sigma_deg = NAN;
  tf_check_nan ("without an uncertainty", tf_hale_expected_false (&row));
}

static void
test_sample_counts (void)
{
  g_autoptr (TfSample) sample = tf_sample_new ();
  g_assert_cmpuint (tf_sample_count_regions (sample), ==, 0);
  static const guint32 ids[] = { 7, 3, 7, 4000000000u, 3, 7 };
  for (guint k = 0; k < G_N_ELEMENTS (ids); k++)
    {
      TfSampleRow row = test_laws_row (10.0, 1);
      row.region = ids[k];
      row.passage = k / 2;
      tf_sample_add (sample, &row);
    }
  g_assert_cmpuint (tf_sample_get_n (sample), ==, 6);
  g_assert_cmpuint (tf_sample_count_regions (sample), ==, 3);
  g_assert_cmpuint (tf_sample_count_passages (sample), ==, 3);
  g_assert_cmpuint (tf_sample_get (sample, 3)->region, ==, 4000000000u);
}

void
test_laws_add_hale (void)
{
  g_test_add_func ("/laws/sample/regions-and-passages-are-counted-once", test_sample_counts);
  g_test_add_func ("/laws/hale/rows-are-counted-where-they-belong", test_counts);
  g_test_add_func ("/laws/hale/an-empty-sample-has-one-empty-row", test_empty);
  g_test_add_func ("/laws/hale/without-polarity-everything-is-open", test_no_polarity);
  g_test_add_func ("/laws/hale/the-chance-of-a-turned-axis-is-that-of-draws",
                   test_expected_false_against_draws);
  g_test_add_func ("/laws/hale/that-chance-at-its-edges", test_expected_false_edges);
}
