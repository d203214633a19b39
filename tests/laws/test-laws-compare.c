/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-laws.h"

#include <string.h>

#include "tf-check.h"
#include "tf-compare.h"
#include "tf-constants.h"
#include "tf-drift.h"
#include "tf-hale-bin.h"

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

static TfJoyParams
joy_params (int draws)
{
  TfJoyParams params = { 0 };
  tf_options_reset (tf_joy_options, &params);
  params.draws = draws;
  return params;
}

/* Regions of one hemisphere in one year: @n of them, of which @breaks break the law. */
static void
add_regions (TfSample *sample, double year, int side, guint n, guint breaks, double slope,
             double flux, GRand *rand)
{
  for (guint k = 0; k < n; k++)
    {
      double lat = g_rand_double_range (rand, 8.0, 30.0);
      gboolean even = year > 2010.0;
      int keeps = side * (even ? -1 : 1);
      TfSampleRow row = test_laws_row (side * lat, k < breaks ? -keeps : keeps);
      row.time = tf_time_from_year (year);
      row.region = row.passage = tf_sample_get_n (sample);
      row.axis_tilt_deg = slope * lat + g_rand_double_range (rand, -10.0, 10.0);
      row.flux_mx = flux;
      tf_sample_add (sample, &row);
    }
}

static const TfComparison *
find (const TfComparisons *found, const char *kind, int cycle)
{
  for (guint k = 0; k < found->rows->len; k++)
    {
      const TfComparison *row = &g_array_index (found->rows, TfComparison, k);
      if (strcmp (row->kind, kind) == 0 && row->groups[0].cycle == cycle)
        return row;
    }
  return NULL;
}

static void
test_pairs (void)
{
  g_autoptr (GRand) rand = g_rand_new_with_seed (31);
  g_autoptr (TfSample) sample = tf_sample_new ();
  add_regions (sample, 2003.5, 1, 120, 3, 0.6, 2e21, rand);
  add_regions (sample, 2003.5, -1, 120, 3, 0.6, 2e22, rand);
  add_regions (sample, 2013.5, 1, 120, 4, 0.2, 2e21, rand);
  add_regions (sample, 2013.5, -1, 120, 24, 0.2, 2e22, rand);
  TfSampleRow again = *tf_sample_get (sample, 0); /* another mark of the first, which breaks */
  again.leading_polarity = -again.leading_polarity;
  tf_sample_add (sample, &again);
  g_autofree TfVerdict *verdicts = judge (sample);
  TfJoyParams joy = joy_params (300);
  g_autoptr (TfComparisons) found = tf_compare (sample, verdicts, &joy);
  const TfComparison *sides = find (found, "hemispheres", 24), *cycles = find (found, "cycles", 23),
                     *parities = find (found, "odd-even", 0), *sizes = find (found, "sizes", 0);
  g_assert_nonnull (find (found, "hemispheres", 0));
  g_assert_nonnull (find (found, "hemispheres", 23));
  g_assert_null (find (found, "ephemeral", 0));
  g_assert_cmpuint (found->n_shares, ==, 6);
  g_assert_cmpuint (found->n_slopes, ==, 6);
  g_assert_cmpuint (sides->regions[0], ==, 120);
  g_assert_cmpuint (sides->breaks[1], ==, 24);
  tf_check_near ("chance", sides->share_p, tf_fisher_exact (4, 116, 24, 96), 1e-15);
  tf_check_near ("by Holm the least is six times itself", sides->share_p_holm, 6.0 * sides->share_p,
                 1e-12);
  g_assert_cmpuint (cycles->regions[0], ==, 240);
  g_assert_cmpuint (cycles->breaks[0], ==, 6); /* a tie goes to the first mark */
  tf_check_near ("first cycle's slope", cycles->slope[0], 0.6, 0.06);
  tf_check_near ("second's", cycles->slope[1], 0.2, 0.06);
  tf_check_between ("difference", 0.4, cycles->difference.low, cycles->difference.high);
  tf_check_between ("its chance", cycles->slope_p, 0.0, 0.01);
  tf_check_between ("hemispheres do not differ", sides->slope_p_holm, 0.05, 1.0);
  tf_check_near ("odd and even are these two cycles", parities->slope[0], cycles->slope[0], 1e-12);
  tf_check_near ("the median flux divides", found->divider_mx, 2e21, 1e12);
  g_assert_cmpuint (sizes->regions[1], ==, 240);
}

static void
test_no_pairs (void)
{
  g_autoptr (TfSample) sample = tf_sample_new ();
  g_autofree TfVerdict *verdicts = judge (sample);
  TfJoyParams joy = joy_params (50);
  g_autoptr (TfComparisons) none = tf_compare (sample, verdicts, &joy);
  g_assert_cmpuint (none->rows->len, ==, 0);
  tf_check_nan ("no flux", none->divider_mx);
  TfSampleRow row = test_laws_row (12.0, 1);
  tf_sample_add (sample, &row);
  g_autofree TfVerdict *one = judge (sample);
  g_autoptr (TfComparisons) alone = tf_compare (sample, one, &joy);
  g_assert_cmpuint (alone->n_shares, ==, 0);
}

static void
test_bins (void)
{
  g_autoptr (GRand) rand = g_rand_new_with_seed (32);
  g_autoptr (TfSample) sample = tf_sample_new ();
  add_regions (sample, 2013.5, 1, 50, 10, 0.3, 5e20, rand);
  add_regions (sample, 2013.5, 1, 70, 2, 0.3, 5e22, rand);
  add_regions (sample, 2013.5, 1, 5, 0, 0.3, NAN, rand);
  g_autofree TfVerdict *verdicts = judge (sample);
  TfHaleParams params = { 0 };
  tf_options_reset (tf_hale_options, &params);
  params.draws = 100;
  guint lacking = 0;
  g_autoptr (GArray) bins
      = tf_hale_bins (sample, verdicts, &tf_hale_quantities[0], &params, &lacking);
  g_assert_cmpuint (bins->len, ==, 7);
  g_assert_cmpuint (lacking, ==, 5);
  const TfHaleBin *low = &g_array_index (bins, TfHaleBin, 1),
                  *high = &g_array_index (bins, TfHaleBin, 5);
  g_assert_cmpuint (low->row.n, ==, 50);
  tf_check_near ("share of the small", low->row.share, 0.2, 1e-12);
  g_assert_cmpuint (high->row.n, ==, 70);
  tf_check_near ("share of the large", high->row.share, 2.0 / 70.0, 1e-12);
  g_assert_cmpuint (g_array_index (bins, TfHaleBin, 3).row.n, ==, 0);
  for (const TfHaleQuantity *q = tf_hale_quantities; q->name != NULL; q++)
    for (guint e = 1; e < q->n_edges; e++)
      g_assert_true (q->edges[e] > q->edges[e - 1]);
}

/* Richardson 1948: 180 of 5814; where counts are given they make the share given. */
static void
test_published (void)
{
  guint n = 0;
  for (const TfHalePublished *p = tf_hale_published; p->name != NULL; p++, n++)
    {
      g_assert_true (p->low <= p->high && p->low >= 0.024 - 1e-9 && p->high <= 0.092 + 1e-9);
      if (p->n > 0)
        tf_check_near (p->name, (double)p->breaks / p->n, p->low, 6e-4);
    }
  g_assert_cmpuint (n, ==, 10);
}

/* Regions on Hathaway's path give it back; a year's mean is that of the path. */
static void
test_drift (void)
{
  g_autoptr (GRand) rand = g_rand_new_with_seed (33);
  g_autoptr (TfSample) sample = tf_sample_new ();
  for (guint k = 0; k < 3000; k++)
    {
      double months = g_rand_double_range (rand, 0.0, 132.0);
      double lat = 28.0 * exp (-months / 90.0) + g_rand_double_range (rand, -4.0, 4.0);
      TfSampleRow row = test_laws_row (k % 2 == 0 ? lat : -lat, 1);
      row.time = test_laws_month (24, months);
      row.region = row.passage = k;
      tf_sample_add (sample, &row);
    }
  g_autofree TfVerdict *verdicts = judge (sample);
  TfDriftParams params = { 0 };
  tf_options_reset (tf_drift_options, &params);
  params.draws = 200;
  g_autoptr (GArray) drifts = tf_drifts (sample, verdicts, &params);
  const TfDrift *both = NULL;
  for (guint k = 0; k < drifts->len; k++)
    if (g_array_index (drifts, TfDrift, k).cycle == 24
        && g_array_index (drifts, TfDrift, k).hemisphere == 0)
      both = &g_array_index (drifts, TfDrift, k);
  tf_check_near ("start", both->start_deg, 28.0, 0.7);
  tf_check_near ("tau", both->tau_months, 90.0, 4.0);
  tf_check_between ("slope", both->slope_deg_per_year, both->slope_ci.low, both->slope_ci.high);
  tf_check_between ("it falls", both->slope_ci.high, -3.0, -1.0);
  const TfDriftYear *fifth = &g_array_index (both->years, TfDriftYear, 4);
  g_assert_cmpint (fifth->year, ==, 4);
  tf_check_near ("mean of the fifth year", fifth->mean_deg, fifth->expected_deg, 0.5);
  tf_check_near ("its scatter", fifth->sd_deg, 8.0 / sqrt (12.0), 0.3);
  g_assert_cmpuint (fifth->n, ==, fifth->regions);
}

void
test_laws_add_compare (void)
{
  g_test_add_func ("/laws/compare/hemispheres-cycles-and-sizes", test_pairs);
  g_test_add_func ("/laws/compare/what-cannot-be-compared", test_no_pairs);
  g_test_add_func ("/laws/hale/share-against-flux", test_bins);
  g_test_add_func ("/laws/hale/published-shares", test_published);
  g_test_add_func ("/laws/drift/hathaways-path-comes-back", test_drift);
}
