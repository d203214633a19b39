/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-laws.h"

#include "tf-check.h"
#include "tf-constants.h"
#include "tf-joy.h"

static TfJoyParams
joy_params (int form, int estimator)
{
  TfJoyParams params = { 0 };
  tf_options_reset (tf_joy_options, &params);
  params.form = form;
  params.estimator = estimator;
  params.draws = 50;
  return params;
}

static TfJoyFit
fit_all (const TfSample *sample, const TfJoyParams *params)
{
  guint n = tf_sample_get_n (sample);
  g_autofree TfVerdict *verdicts = g_new0 (TfVerdict, n);
  return tf_joy_fit (sample, verdicts, 0, 0, params);
}

/* 400 regions between 2 and 38 deg of both hemispheres, whose tilt is a function of |lat| plus
 * scatter. */
static TfSample *
sample_of (double (*tilt) (double abs_lat), double scatter, guint32 seed)
{
  g_autoptr (GRand) rand = g_rand_new_with_seed (seed);
  TfSample *sample = tf_sample_new ();
  for (guint k = 0; k < 400; k++)
    {
      double lat = g_rand_double_range (rand, 2.0, 38.0);
      TfSampleRow row = test_laws_row (k % 2 == 0 ? lat : -lat, 0);
      row.axis_tilt_deg = tilt (lat) + scatter * (g_rand_double (rand) - 0.5);
      row.flux_mx = g_rand_double_range (rand, 1e21, 1e22);
      row.region = row.passage = k;
      tf_sample_add (sample, &row);
    }
  return sample;
}

static double
linear (double lat)
{
  return 0.41 * lat;
}

static double
linear_free (double lat)
{
  return 0.3 * lat + 1.7;
}

static double
sine (double lat)
{
  return 31.0 * sin (lat * TF_DEG);
}

static double
sine_of_tilt (double lat)
{
  return asin (0.48 * sin (lat * TF_DEG)) / TF_DEG;
}

static const struct
{
  double (*tilt) (double abs_lat);
  double slope, intercept;
} truths[] = {
  { linear, 0.41, NAN }, { linear_free, 0.3, 1.7 }, { sine, 31.0, NAN }, { sine_of_tilt, 0.48, NAN }
};

/* Every fit that is offered gives back an exact law exactly; bin medians of a curved form only
 * nearly. */
static void
test_exact_laws (void)
{
  for (int form = 0; form < 4; form++)
    for (int estimator = 0; estimator < 4; estimator++)
      {
        g_autoptr (TfSample) sample = sample_of (truths[form].tilt, 0.0, 21);
        TfJoyParams params = joy_params (form, estimator);
        TfJoyFit fit = fit_all (sample, &params);
        g_assert_true (tf_joy_offers (form, estimator));
        double tolerance = estimator == TF_JOY_BIN_MEDIANS ? 0.02 * truths[form].slope : 1e-9;
        tf_check_near (tf_joy_form_names[form], fit.slope, truths[form].slope, tolerance);
        if (form == TF_JOY_LINEAR_FREE)
          tf_check_near ("intercept", fit.intercept, 1.7,
                         estimator == TF_JOY_BIN_MEDIANS ? 0.1 : 1e-9);
        else
          tf_check_nan ("intercept of a line through the origin", fit.intercept);
        tf_check_near ("scatter", fit.scatter_deg, 0.0,
                       estimator == TF_JOY_BIN_MEDIANS ? 0.2 : 1e-9);
        g_assert_cmpuint (fit.n, ==, 400);
        g_assert_cmpuint (fit.no_polarity, ==, 400);
      }
}

/* With scatter the truth lies in the interval, which is no wider than a fifth of the slope. */
static void
test_scattered_laws (void)
{
  for (int form = 0; form < 4; form++)
    for (int estimator = 0; estimator < 4; estimator++)
      {
        g_autoptr (TfSample) sample = sample_of (truths[form].tilt, 20.0, 22);
        TfJoyParams params = joy_params (form, estimator);
        params.draws = 200;
        params.level = 0.999;
        TfJoyFit fit = fit_all (sample, &params);
        tf_check_between ("slope in its interval", fit.slope, fit.slope_ci.low, fit.slope_ci.high);
        tf_check_between ("truth in the interval", truths[form].slope, fit.slope_ci.low,
                          fit.slope_ci.high);
        tf_check_between ("scatter", fit.scatter_deg, 0.8 * 1.4826 * 5.0, 1.2 * 1.4826 * 5.0);
        if (form == TF_JOY_LINEAR_FREE)
          tf_check_between ("true intercept in its interval", 1.7, fit.intercept_ci.low,
                            fit.intercept_ci.high);
      }
}

/* York 1966: Pearson's points: ordinary least squares of y on x -0.539577, 5.761185. */
static void
test_pearsons_points (void)
{
  static const double x[] = { 0, 0.9, 1.8, 2.6, 3.3, 4.4, 5.2, 6.1, 6.5, 7.4 };
  static const double y[] = { 5.9, 5.4, 4.4, 4.6, 3.5, 3.7, 2.8, 2.8, 2.4, 1.5 };
  g_autoptr (TfSample) sample = tf_sample_new ();
  for (guint k = 0; k < G_N_ELEMENTS (x); k++)
    {
      TfSampleRow row = test_laws_row (x[k], 0);
      row.axis_tilt_deg = y[k];
      tf_sample_add (sample, &row);
    }
  TfJoyParams params = joy_params (TF_JOY_LINEAR_FREE, TF_JOY_LEAST_SQUARES);
  TfJoyFit fit = fit_all (sample, &params);
  tf_check_near ("slope", fit.slope, -0.539577, 5.1e-7);
  tf_check_near ("intercept", fit.intercept, 5.761185, 5.1e-7);
}

/* Sen 1968, J. Am. Stat. Assoc. 63, 1379, his example: slope 4; with Conover's intercept 4. */
static void
test_sens_example (void)
{
  static const double x[] = { 1, 2, 3, 4, 10, 12, 18 }, y[] = { 9, 15, 19, 20, 45, 55, 78 };
  g_autoptr (TfSample) sample = tf_sample_new ();
  for (guint k = 0; k < G_N_ELEMENTS (x); k++)
    {
      TfSampleRow row = test_laws_row (x[k], 0);
      row.axis_tilt_deg = y[k];
      row.region = k;
      tf_sample_add (sample, &row);
    }
  TfJoyParams params = joy_params (TF_JOY_LINEAR_FREE, TF_JOY_ROBUST);
  TfJoyFit fit = fit_all (sample, &params);
  tf_check_near ("slope", fit.slope, 4.0, 1e-12);
  tf_check_near ("intercept", fit.intercept, 4.0, 1e-11);
  tf_check_between ("slope in its interval", fit.slope, fit.slope_ci.low, fit.slope_ci.high);
}

/* Against a look at every pair, with ties in x and in y, for even and odd numbers of pairs. */
static void
test_theil_sen_by_every_pair (void)
{
  g_autoptr (GRand) rand = g_rand_new_with_seed (27);
  for (guint n = 3; n < 40; n++)
    {
      g_autoptr (TfSample) sample = tf_sample_new ();
      g_autofree double *slopes = g_new (double, n *n);
      guint m = 0;
      for (guint k = 0; k < n; k++)
        {
          TfSampleRow row = test_laws_row (k == 0   ? 1
                                           : k == 1 ? 3
                                                    : g_rand_int_range (rand, 1, 20),
                                           0);
          row.axis_tilt_deg = g_rand_int_range (rand, -20, 20);
          tf_sample_add (sample, &row);
          for (guint j = 0; j < k; j++)
            {
              const TfSampleRow *other = tf_sample_get (sample, j);
              if (fabs (row.lat_deg - other->lat_deg) > 0.5)
                slopes[m++]
                    = (row.axis_tilt_deg - other->axis_tilt_deg) / (row.lat_deg - other->lat_deg);
            }
        }
      TfJoyParams params = joy_params (TF_JOY_LINEAR_FREE, TF_JOY_ROBUST);
      params.draws = 0;
      tf_check_near ("slope", fit_all (sample, &params).slope, tf_median (slopes, m), 1e-10);
    }
}

/* Four points in five on one line: most pairs have one and the same slope, which no closing in can part. */
static void
test_theil_sen_of_one_slope (void)
{
  for (int off = 0; off < 2; off++)
    {
      g_autoptr (TfSample) sample = tf_sample_new ();
      for (guint k = 0; k < 3000; k++)
        {
          TfSampleRow row = test_laws_row (1 + 0.01 * k, 0);
          row.axis_tilt_deg = 0.5 * (1 + 0.01 * k) + (off == 1 && k % 5 == 0 ? (k % 10 == 0 ? 20 : -20) : 0);
          tf_sample_add (sample, &row);
        }
      TfJoyParams params = joy_params (TF_JOY_LINEAR_FREE, TF_JOY_ROBUST);
      params.draws = 0;
      tf_check_near ("slope", fit_all (sample, &params).slope, 0.5, 1e-12);
    }
}

/* The default estimator is the weighted median of tilt / |lat|. */
static void
test_default_is_a_weighted_median (void)
{
  g_autoptr (TfSample) sample = sample_of (linear, 40.0, 23);
  double ratio[400], weight[400];
  for (guint k = 0; k < 400; k++)
    {
      const TfSampleRow *row = tf_sample_get (sample, k);
      weight[k] = fabs (row->lat_deg);
      ratio[k] = row->axis_tilt_deg / weight[k];
    }
  TfJoyParams params = { 0 };
  tf_options_reset (tf_joy_options, &params);
  g_assert_cmpint (params.form, ==, TF_JOY_LINEAR);
  g_assert_cmpint (params.estimator, ==, TF_JOY_ROBUST);
  params.draws = 20;
  TfJoyFit fit = fit_all (sample, &params);
  tf_check_near ("slope", fit.slope, tf_weighted_median (ratio, weight, 400), 1e-12);
}

/* A tenth of wild tilts moves least squares and leaves the robust slope. */
static void
test_robust_is_robust (void)
{
  g_autoptr (TfSample) sample = sample_of (linear, 4.0, 24);
  for (guint k = 0; k < 40; k++)
    {
      TfSampleRow row = test_laws_row (30.0, 0);
      row.axis_tilt_deg = -85.0;
      tf_sample_add (sample, &row);
    }
  TfJoyParams robust = joy_params (TF_JOY_LINEAR, TF_JOY_ROBUST),
              squares = joy_params (TF_JOY_LINEAR, TF_JOY_LEAST_SQUARES);
  tf_check_near ("robust", fit_all (sample, &robust).slope, 0.41, 0.03);
  g_assert_cmpfloat (fit_all (sample, &squares).slope, <, 0.1);
}

/* Each row twice, with one region number: the slope and its interval stay as they are. */
static void
test_clusters (void)
{
  g_autoptr (TfSample) once = sample_of (linear, 30.0, 25);
  g_autoptr (TfSample) twice = tf_sample_new ();
  for (guint k = 0; k < tf_sample_get_n (once); k++)
    for (int copy = 0; copy < 2; copy++)
      tf_sample_add (twice, tf_sample_get (once, k));
  TfJoyParams params = joy_params (TF_JOY_LINEAR, TF_JOY_LEAST_SQUARES);
  TfJoyFit one = fit_all (once, &params), two = fit_all (twice, &params),
           again = fit_all (once, &params);
  g_assert_cmpuint (two.n, ==, 800);
  g_assert_cmpuint (two.regions, ==, 400);
  tf_check_near ("slope", two.slope, one.slope, 1e-12);
  tf_check_near ("interval, low", two.slope_ci.low, one.slope_ci.low, 1e-12);
  tf_check_near ("interval, high", two.slope_ci.high, one.slope_ci.high, 1e-12);
  tf_check_near ("the same seed", again.slope_ci.low, one.slope_ci.low, 0.0);
}

static void
test_which_rows (void)
{
  TfJoyParams params = joy_params (TF_JOY_LINEAR, TF_JOY_ROBUST);
  TfVerdict keeps = { .kind = TF_VERDICT_KEEPS }, breaks = { .kind = TF_VERDICT_BREAKS },
            open = { .kind = TF_VERDICT_CANNOT_SAY };
  TfSampleRow row = test_laws_row (15.0, -1);
  g_assert_true (tf_joy_uses (&row, &keeps, &params));
  g_assert_true (tf_joy_uses (&row, &open, &params));
  g_assert_false (tf_joy_uses (&row, &breaks, &params));
  params.with_breaks = TRUE;
  g_assert_true (tf_joy_uses (&row, &breaks, &params));
  row.compactness = 0.49;
  g_assert_false (tf_joy_uses (&row, &keeps, &params));
  row.compactness = NAN;
  g_assert_true (tf_joy_uses (&row, &keeps, &params));
  params.separation_min_deg = 5.01;
  g_assert_false (tf_joy_uses (&row, &keeps, &params));
  row.separation_deg = NAN;
  g_assert_true (tf_joy_uses (&row, &keeps, &params));
  params.steep_max_deg = 75.0;
  row.axis_tilt_deg = -75.0;
  g_assert_true (tf_joy_uses (&row, &keeps, &params));
  row.axis_tilt_deg = -75.1;
  g_assert_false (tf_joy_uses (&row, &keeps, &params));
  row.axis_tilt_deg = NAN;
  g_assert_false (tf_joy_uses (&row, &keeps, &params));
  row = test_laws_row (NAN, -1);
  g_assert_false (tf_joy_uses (&row, &keeps, &params));
  row = test_laws_row (15.0, -1);
  params.separation_min_deg = 5.0;
  row.flux_mx = NAN;
  g_assert_true (tf_joy_uses (&row, &keeps, &params));
  params.estimator = TF_JOY_FLUX_WEIGHTED;
  g_assert_false (tf_joy_uses (&row, &keeps, &params));
}

/* Hemispheres swapped: the same fit, the halves exchanged. An unsure cycle is in no cycle's fit. */
static void
test_groups (void)
{
  g_autoptr (TfSample) sample = sample_of (linear, 10.0, 26);
  g_autoptr (TfSample) swapped = tf_sample_new ();
  TfVerdict verdicts[400] = { 0 };
  for (guint k = 0; k < 400; k++)
    {
      TfSampleRow row = *tf_sample_get (sample, k);
      row.lat_deg = -row.lat_deg;
      tf_sample_add (swapped, &row);
      verdicts[k].cycle = (TfCycleCall){ k < 300 ? 24 : 23, 0, k < 350, "cycle-by-date" };
    }
  TfJoyParams params = joy_params (TF_JOY_LINEAR, TF_JOY_ROBUST);
  TfJoyFit north = tf_joy_fit (sample, verdicts, 24, 1, &params),
           south = tf_joy_fit (swapped, verdicts, 24, -1, &params);
  g_assert_cmpuint (north.n, ==, 150);
  tf_check_near ("slope", south.slope, north.slope, 0.0);
  tf_check_near ("interval", south.slope_ci.high, north.slope_ci.high, 0.0);
  g_assert_cmpuint (tf_joy_fit (sample, verdicts, 23, 0, &params).n, ==, 50);
  g_assert_cmpuint (tf_joy_fit (sample, verdicts, 0, 0, &params).n, ==, 400);
}

static void
test_few_rows (void)
{
  g_autoptr (TfSample) sample = tf_sample_new ();
  TfJoyParams params = joy_params (TF_JOY_LINEAR, TF_JOY_ROBUST);
  TfJoyFit none = fit_all (sample, &params);
  g_assert_cmpuint (none.n, ==, 0);
  tf_check_nan ("slope of none", none.slope);
  tf_check_nan ("mean of none", none.mean_tilt_deg);
  tf_check_nan ("median of none", none.median_tilt_deg);
  for (guint k = 0; k < 2; k++)
    {
      TfSampleRow row = test_laws_row (10.0 + k, 0);
      tf_sample_add (sample, &row);
    }
  TfJoyFit two = fit_all (sample, &params);
  tf_check_nan ("slope of two", two.slope);
  tf_check_nan ("interval of two", two.slope_ci.low);
  tf_check_near ("mean of two", two.mean_tilt_deg, 6.0, 1e-12);
  TfSampleRow lost = test_laws_row (NAN, 0);
  tf_sample_add (sample, &lost);
  g_assert_cmpuint (fit_all (sample, &params).n, ==, 2);
}

/* All at the equator: no slope can be had, and nothing breaks. */
static void
test_all_at_the_equator (void)
{
  g_autoptr (TfSample) sample = tf_sample_new ();
  for (guint k = 0; k < 6; k++)
    {
      TfSampleRow row = test_laws_row (0.0, 0);
      tf_sample_add (sample, &row);
    }
  for (int form = 0; form < 4; form++)
    for (int estimator = 0; estimator < 4; estimator++)
      {
        TfJoyParams params = joy_params (form, estimator);
        tf_check_nan ("slope", fit_all (sample, &params).slope);
      }
}

/* Tilts +80 and -80 have their axial mean at 90, their plain mean at 0. */
static void
test_axial_mean (void)
{
  g_autoptr (TfSample) sample = tf_sample_new ();
  for (int k = 0; k < 4; k++)
    {
      TfSampleRow row = test_laws_row (10.0, 0);
      row.axis_tilt_deg = k % 2 == 0 ? 80.0 : -80.0;
      tf_sample_add (sample, &row);
    }
  TfJoyParams params = joy_params (TF_JOY_LINEAR, TF_JOY_ROBUST);
  TfJoyFit fit = fit_all (sample, &params);
  tf_check_near ("axial mean", fabs (fit.axial_mean_deg), 90.0, 1e-9);
  tf_check_near ("resultant", fit.axial_resultant, cos (20.0 * TF_DEG), 1e-12);
  tf_check_near ("plain mean", fit.mean_tilt_deg, 0.0, 1e-12);
}

/* Mean tilts of the published relations at 10, 15, 20, 25, 30 deg, worked out apart from this
 * program. */
static void
test_published_relations (void)
{
  static const double lats[] = { 10.0, 15.0, 20.0, 25.0, 30.0 };
  static const struct
  {
    const char *name;
    double tilt[5];
    gboolean magnetic;
  } expected[] = {
    { "Wang & Sheeley 1991", { 6.51, 8.87, 11.20, 13.47, 15.66 }, TRUE },
    { "Stenflo & Kosovichev 2012", { 5.57, 8.31, 10.98, 13.57, 16.05 }, TRUE },
    { "Li & Ulrich 2012", { 5.00, 7.50, 10.00, 12.50, 15.00 }, TRUE },
    { "Tlatova et al. 2018", { 5.38, 7.67, 9.50, 10.77, 11.40 }, TRUE },
    { "Li 2018", { 4.13, 6.16, 8.14, 10.06, 11.90 }, TRUE },
    { "Dasi-Espuig et al. 2010, Mount Wilson", { 2.60, 3.90, 5.20, 6.50, 7.80 }, FALSE },
  };
  g_assert_cmpstr (tf_joy_relations[0].name, ==, "Stenflo & Kosovichev 2012");
  guint found = 0;
  for (const TfJoyRelation *r = tf_joy_relations; r->name != NULL; r++)
    for (guint k = 0; k < G_N_ELEMENTS (expected); k++)
      if (g_strcmp0 (r->name, expected[k].name) == 0)
        {
          found++;
          g_assert_cmpint (r->magnetic, ==, expected[k].magnetic);
          for (guint j = 0; j < 5; j++)
            tf_check_near (r->name, r->tilt (lats[j]), expected[k].tilt[j], 0.0051);
        }
  g_assert_cmpuint (found, ==, G_N_ELEMENTS (expected));
}

static void
test_expected_tilt (void)
{
  static const double table[][2] = { { 1.0, 40.0 }, { 1.5, 32.0 }, { 3.0, 25.0 }, { 4.0, 18.0 },
                                     { 6.0, 14.0 }, { 7.0, 11.0 }, { 20.0, 11.0 } };
  double tilt = 0.0, scatter = 0.0;
  for (guint k = 0; k < G_N_ELEMENTS (table); k++)
    {
      tf_joy_expected (-20.0, table[k][0], &tilt, &scatter);
      tf_check_near ("scatter", scatter, table[k][1], 0.0);
      tf_check_near ("tilt, south as north", tilt, 32.1 * sin (20.0 * TF_DEG), 1e-12);
    }
  tf_joy_expected (20.0, NAN, &tilt, &scatter);
  tf_check_nan ("scatter at no separation", scatter);
  g_assert_cmpstr (tf_joy_unit (TF_JOY_LINEAR), ==, "deg/deg");
  g_assert_cmpstr (tf_joy_unit (TF_JOY_SINE), ==, "deg");
}

void
test_laws_add_joy (void)
{
  g_test_add_func ("/laws/joy/every-fit-gives-back-an-exact-law", test_exact_laws);
  g_test_add_func ("/laws/joy/with-scatter-the-truth-is-in-the-interval", test_scattered_laws);
  g_test_add_func ("/laws/joy/pearsons-points", test_pearsons_points);
  g_test_add_func ("/laws/joy/sens-example", test_sens_example);
  g_test_add_func ("/laws/joy/theil-sen-is-the-median-of-every-pair", test_theil_sen_by_every_pair);
  g_test_add_func ("/laws/joy/theil-sen-of-one-slope", test_theil_sen_of_one_slope);
  g_test_add_func ("/laws/joy/the-default-is-a-weighted-median", test_default_is_a_weighted_median);
  g_test_add_func ("/laws/joy/the-robust-slope-bears-wild-tilts", test_robust_is_robust);
  g_test_add_func ("/laws/joy/a-region-twice-is-still-one", test_clusters);
  g_test_add_func ("/laws/joy/rows-that-enter", test_which_rows);
  g_test_add_func ("/laws/joy/cycles-and-hemispheres-apart", test_groups);
  g_test_add_func ("/laws/joy/fewer-than-three-rows-have-no-slope", test_few_rows);
  g_test_add_func ("/laws/joy/all-at-the-equator-have-no-slope", test_all_at_the_equator);
  g_test_add_func ("/laws/joy/the-axial-mean-knows-no-direction", test_axial_mean);
  g_test_add_func ("/laws/joy/published-relations", test_published_relations);
  g_test_add_func ("/laws/joy/expected-tilt-and-scatter", test_expected_tilt);
}
