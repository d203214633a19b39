/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-laws.h"

#include "tf-check.h"
#include "tf-proportion.h"

/* Newcombe 1998, Statist. Med. 17, 857, the cases of his table I: 95 %. */
static void
test_newcombe (void)
{
  static const struct
  {
    guint x, n;
    double wilson[2], exact[2];
  } cases[] = {
    { 81, 263, { 0.2553, 0.3662 }, { 0.2527, 0.3676 } },
    { 15, 148, { 0.0624, 0.1605 }, { 0.0578, 0.1617 } },
    { 0, 20, { 0.0, 0.1611 }, { 0.0, 0.1684 } },
    { 1, 29, { 0.0061, 0.1718 }, { 0.0009, 0.1776 } },
  };
  for (guint k = 0; k < G_N_ELEMENTS (cases); k++)
    {
      TfInterval wilson = tf_wilson (cases[k].x, cases[k].n, 0.95);
      TfInterval exact = tf_clopper_pearson (cases[k].x, cases[k].n, 0.95);
      tf_check_near ("Wilson low", wilson.low, cases[k].wilson[0], 5.1e-5);
      tf_check_near ("Wilson high", wilson.high, cases[k].wilson[1], 5.1e-5);
      tf_check_near ("Clopper-Pearson low", exact.low, cases[k].exact[0], 5.1e-5);
      tf_check_near ("Clopper-Pearson high", exact.high, cases[k].exact[1], 5.1e-5);
    }
}

/* Wilson intervals of published shares of regions that break Hale's law, worked out apart from this
 * program: Zhukova et al. 2020 and 2022, Richardson 1948. In percent. */
static void
test_published_shares (void)
{
  static const double cases[][4]
      = { { 275, 8606, 2.84, 3.59 }, { 367, 14838, 2.24, 2.74 }, { 180, 5814, 2.68, 3.57 } };
  for (guint k = 0; k < G_N_ELEMENTS (cases); k++)
    {
      TfInterval wilson = tf_wilson ((guint)cases[k][0], (guint)cases[k][1], 0.95);
      tf_check_near ("low", 100.0 * wilson.low, cases[k][2], 0.0051);
      tf_check_near ("high", 100.0 * wilson.high, cases[k][3], 0.0051);
    }
}

static void
test_interval_edges (void)
{
  for (guint k = 0; k < 2; k++)
    {
      TfInterval (*interval) (guint, guint, double) = k == 0 ? tf_wilson : tf_clopper_pearson;
      tf_check_nan ("of nothing", interval (0, 0, 0.95).low);
      tf_check_nan ("of more than all", interval (3, 2, 0.95).high);
      tf_check_nan ("at level 0", interval (1, 2, 0.0).low);
      tf_check_nan ("at level 1", interval (1, 2, 1.0).low);
      tf_check_nan ("at no level", interval (1, 2, NAN).low);
      tf_check_near ("none of one, low", interval (0, 1, 0.95).low, 0.0, 0.0);
      tf_check_near ("one of one, high", interval (1, 1, 0.95).high, 1.0, 0.0);
    }
  /* closed forms for x = 0 and x = n: 1 - (alpha/2)^(1/n) */
  tf_check_near ("none of 7, high", tf_clopper_pearson (0, 7, 0.9).high,
                 1.0 - pow (0.05, 1.0 / 7.0), 1e-14);
  tf_check_near ("7 of 7, low", tf_clopper_pearson (7, 7, 0.9).low, pow (0.05, 1.0 / 7.0), 1e-14);
}

/* Mirrored counts give mirrored limits; exact limits hold the share and are wider than nothing.
 * Small counts are where GSL's own inverse calls its error handler. */
static void
test_interval_invariants (void)
{
  for (guint n = 1; n < 120; n++)
    for (guint x = 0; x <= n; x++)
      {
        TfInterval exact = tf_clopper_pearson (x, n, 0.95),
                   mirror = tf_clopper_pearson (n - x, n, 0.95);
        tf_check_near ("mirror", exact.low, 1.0 - mirror.high, 1e-12);
        double share = (double)x / n;
        tf_check_between ("share in the exact interval", share, exact.low, exact.high);
        TfInterval wilson = tf_wilson (x, n, 0.95);
        tf_check_between ("share in Wilson's interval", share, wilson.low, wilson.high);
      }
}

static void
test_many (void)
{
  /* at n = 1e6 both agree with the normal limit p +- 1.96 sqrt(p(1-p)/n) to a part in 1e5 */
  double half = 1.959963984540054 * sqrt (0.03 * 0.97 / 1e6);
  tf_check_near ("Wilson", tf_wilson (30000, 1000000, 0.95).low, 0.03 - half, 3e-6);
  tf_check_near ("Clopper-Pearson low", tf_clopper_pearson (30000, 1000000, 0.95).low, 0.03 - half,
                 3e-6);
  tf_check_near ("Clopper-Pearson high", tf_clopper_pearson (30000, 1000000, 0.95).high,
                 0.03 + half, 3e-6);
}

static void
test_quantiles (void)
{
  static const double values[] = { 1.0, 2.0, 4.0, 8.0 };
  tf_check_near ("0 %", tf_quantile (values, 4, 0.0), 1.0, 0.0);
  tf_check_near ("25 %", tf_quantile (values, 4, 0.25), 1.75, 1e-15);
  tf_check_near ("50 %", tf_quantile (values, 4, 0.5), 3.0, 1e-15);
  tf_check_near ("100 %", tf_quantile (values, 4, 1.0), 8.0, 0.0);
  tf_check_near ("of one", tf_quantile (values, 1, 0.3), 1.0, 0.0);
  tf_check_nan ("of none", tf_quantile (NULL, 0, 0.5));
  tf_check_nan ("beyond 100 %", tf_quantile (values, 4, 1.1));
}

static void
test_medians (void)
{
  static const double odd[] = { 9.0, 1.0, 5.0 }, even[] = { 4.0, 1.0, 3.0, 2.0 },
                      bad[] = { 1.0, NAN, 2.0 };
  tf_check_near ("of three", tf_median (odd, 3), 5.0, 0.0);
  tf_check_near ("of four", tf_median (even, 4), 2.5, 0.0);
  tf_check_nan ("of none", tf_median (NULL, 0));
  tf_check_nan ("with a NaN", tf_median (bad, 3));
}

static void
test_weighted_median (void)
{
  static const double values[] = { 3.0, 1.0, 2.0, 4.0 };
  static const double equal[] = { 1, 1, 1, 1 }, heavy[] = { 0.1, 10.0, 0.1, 0.1 },
                      some[] = { 1, 0, -1, NAN };
  tf_check_near ("equal weights are the plain median", tf_weighted_median (values, equal, 4), 2.5,
                 0.0);
  tf_check_near ("one heavy value", tf_weighted_median (values, heavy, 4), 1.0, 0.0);
  tf_check_near ("weights that are none", tf_weighted_median (values, some, 4), 3.0, 0.0);
  tf_check_nan ("of none", tf_weighted_median (NULL, NULL, 0));
  static const double nothing[] = { 0, 0, 0, 0 }, lost[] = { NAN, NAN, INFINITY, NAN };
  tf_check_nan ("with no weight", tf_weighted_median (values, nothing, 4));
  tf_check_nan ("with no value", tf_weighted_median (lost, equal, 4));
}

static double
mean_of (const guint *rows, guint n, gpointer data)
{
  const double *values = data;
  double sum = 0.0;
  for (guint k = 0; k < n; k++)
    sum += values[rows[k]];
  return sum / n;
}

static double
nothing_of (const guint *rows, guint n, gpointer data)
{
  return NAN;
}

enum
{
  N = 400
};

static void
test_bootstrap_repeats (void)
{
  double values[N];
  guint32 own[N], renamed[N];
  g_autoptr (GRand) rand = g_rand_new_with_seed (3);
  for (guint k = 0; k < N; k++)
    {
      values[k] = g_rand_double (rand);
      own[k] = k / 2;
      renamed[k] = 4000000000u - 7 * (k / 2);
    }
  TfInterval one = tf_bootstrap_clusters (own, N, 300, 7, 0.95, NULL, mean_of, values);
  TfInterval again = tf_bootstrap_clusters (own, N, 300, 7, 0.95, NULL, mean_of, values);
  TfInterval named = tf_bootstrap_clusters (renamed, N, 300, 7, 0.95, NULL, mean_of, values);
  TfInterval other = tf_bootstrap_clusters (own, N, 300, 8, 0.95, NULL, mean_of, values);
  tf_check_near ("the same seed", again.low, one.low, 0.0);
  tf_check_near ("other names of clusters", named.high, one.high, 0.0);
  g_assert_true (other.low < one.low || other.low > one.low);
}

/* Mean of uniform numbers: half width 1.96 sqrt(1/12/n). Rows doubled into pairs of one cluster add
 * nothing: the interval stays. */
static void
test_bootstrap_width (void)
{
  double values[2 * N];
  guint32 alone[2 * N], paired[2 * N];
  g_autoptr (GRand) rand = g_rand_new_with_seed (4);
  for (guint k = 0; k < N; k++)
    {
      values[2 * k] = values[2 * k + 1] = g_rand_double (rand);
      alone[2 * k] = 2 * k;
      alone[2 * k + 1] = 2 * k + 1;
      paired[2 * k] = paired[2 * k + 1] = k;
    }
  TfInterval pairs = tf_bootstrap_clusters (paired, 2 * N, 2000, 1, 0.95, NULL, mean_of, values);
  TfInterval rows = tf_bootstrap_clusters (alone, 2 * N, 2000, 1, 0.95, NULL, mean_of, values);
  double half = 1.96 * sqrt (1.0 / 12.0 / N);
  tf_check_near ("width by clusters", pairs.high - pairs.low, 2.0 * half, 0.15 * half);
  tf_check_near ("width by rows is too small", rows.high - rows.low, 2.0 * half / sqrt (2.0),
                 0.15 * half);
}

static double
share_of (const guint *rows, guint n, gpointer data)
{
  const guint8 *is = data;
  guint sum = 0;
  for (guint k = 0; k < n; k++)
    sum += is[rows[k]];
  return (double)sum / n;
}

/* The quick way for shares gives the very digits of the plain one. */
static void
test_bootstrap_share (void)
{
  guint8 is[N];
  guint32 cluster[N];
  g_autoptr (GRand) rand = g_rand_new_with_seed (6);
  for (guint k = 0; k < N; k++)
    {
      is[k] = g_rand_double (rand) < 0.07;
      cluster[k] = (guint32)g_rand_int_range (rand, 0, 90);
    }
  TfInterval plain = tf_bootstrap_clusters (cluster, N, 500, 3, 0.95, NULL, share_of, is);
  TfInterval quick = tf_bootstrap_share (cluster, is, N, 500, 3, 0.95, NULL);
  tf_check_near ("low", quick.low, plain.low, 0.0);
  tf_check_near ("high", quick.high, plain.high, 0.0);
  tf_check_nan ("of no rows", tf_bootstrap_share (cluster, is, 0, 500, 3, 0.95, NULL).low);
}

static void
test_bootstrap_edges (void)
{
  double values[] = { 1.0, 2.0, 3.0 };
  guint32 one[] = { 5, 5, 5 }, three[] = { 1, 2, 3 };
  tf_check_nan ("one cluster", tf_bootstrap_clusters (one, 3, 100, 1, 0.95, NULL, mean_of, values).low);
  tf_check_nan ("no rows", tf_bootstrap_clusters (one, 0, 100, 1, 0.95, NULL, mean_of, values).low);
  tf_check_nan ("no draws", tf_bootstrap_clusters (three, 3, 0, 1, 0.95, NULL, mean_of, values).low);
  tf_check_nan ("a bad level", tf_bootstrap_clusters (three, 3, 100, 1, 1.0, NULL, mean_of, values).low);
  tf_check_nan ("no statistic",
                tf_bootstrap_clusters (three, 3, 100, 1, 0.95, NULL, nothing_of, values).low);
  tf_check_between ("three clusters",
                    tf_bootstrap_clusters (three, 3, 100, 1, 0.95, NULL, mean_of, values).low, 1.0, 2.0);
}

typedef struct
{
  TfCancel *cancel;
  guint calls, until;
} Counted;

static double
count_call (const guint *rows, guint n, gpointer data)
{
  Counted *counted = data;
  if (++counted->calls == counted->until)
    tf_cancel_raise (counted->cancel);
  return counted->calls;
}

/* The draw in hand is the last, and there is no interval. */
static void
test_cancelled (void)
{
  const guint32 cluster[] = { 1, 2, 3 };
  g_autoptr (TfCancel) cancel = tf_cancel_new ();
  Counted counted = { cancel, 0, 7 };
  TfInterval none = tf_bootstrap_clusters (cluster, 3, 1000, 1, 0.95, cancel, count_call, &counted);
  g_assert_cmpuint (counted.calls, ==, 7);
  tf_check_nan ("cancelled", none.low);
  const guint8 is[] = { 1, 0, 1 };
  tf_check_nan ("cancelled before", tf_bootstrap_share (cluster, is, 3, 100, 1, 0.95, cancel).low);
}

void
test_laws_add_proportion (void)
{
  g_test_add_func ("/laws/proportion/newcombes-cases-to-four-decimals", test_newcombe);
  g_test_add_func ("/laws/proportion/published-shares", test_published_shares);
  g_test_add_func ("/laws/proportion/edges-have-an-answer", test_interval_edges);
  g_test_add_func ("/laws/proportion/mirrored-counts-mirror-the-limits", test_interval_invariants);
  g_test_add_func ("/laws/proportion/a-million-rows", test_many);
  g_test_add_func ("/laws/quantile/type-seven", test_quantiles);
  g_test_add_func ("/laws/quantile/medians", test_medians);
  g_test_add_func ("/laws/quantile/weighted-medians", test_weighted_median);
  g_test_add_func ("/laws/bootstrap/one-seed-one-result", test_bootstrap_repeats);
  g_test_add_func ("/laws/bootstrap/clusters-are-drawn-whole", test_bootstrap_width);
  g_test_add_func ("/laws/bootstrap/shares-the-quick-way", test_bootstrap_share);
  g_test_add_func ("/laws/bootstrap/edges-have-an-answer", test_bootstrap_edges);
  g_test_add_func ("/laws/bootstrap/cancelled-at-the-next-draw", test_cancelled);
}
