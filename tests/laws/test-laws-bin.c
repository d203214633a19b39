/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-laws.h"

#include <math.h>

#include "tf-bin.h"
#include "tf-check.h"

/* R 4.2: r <- 0; while (2 * pbinom (r, n, 0.5) <= 0.05) r <- r + 1 */
static void
test_ranks (void)
{
  static const struct
  {
    guint n, rank;
  } cases[] = { { 5, 0 }, { 6, 1 }, { 10, 2 }, { 37, 13 }, { 100, 40 }, { 1001, 470 }, { 20000, 9861 } };
  g_autofree double *values = g_new (double, 20000);
  for (guint k = 0; k < 20000; k++)
    values[k] = k + 1;
  for (guint c = 0; c < G_N_ELEMENTS (cases); c++)
    {
      TfInterval ci = tf_median_interval (values, cases[c].n, 0.95);
      if (cases[c].rank == 0)
        tf_check_nan ("too few", ci.low);
      else
        {
          tf_check_near ("low rank", ci.low, cases[c].rank, 1e-9);
          tf_check_near ("high rank", ci.high, cases[c].n + 1 - cases[c].rank, 1e-9);
        }
    }
  tf_check_nan ("none", tf_median_interval (values, 0, 0.95).low);
  tf_check_nan ("a bad level", tf_median_interval (values, 100, 1.0).low);
}

static void
test_bins (void)
{
  const double x[] = { 0.0, 4.9, 1, 5, 9.999, 10, -0.1, NAN, 7 };
  const double y[] = { 1, 3, 8, 10, 30, 99, 99, 99, NAN };
  g_autoptr (GArray) bins = tf_bins (x, y, G_N_ELEMENTS (x), 0, 10, 5, 0.95);
  g_assert_cmpuint (bins->len, ==, 2);
  const TfBin *bin = (const TfBin *)(gpointer)bins->data;
  g_assert_cmpuint (bin[0].n, ==, 3);
  g_assert_cmpuint (bin[1].n, ==, 2);
  tf_check_near ("median", bin[0].median, 3, 1e-12);
  tf_check_near ("mean of x", bin[0].x, 5.9 / 3, 1e-12);
  tf_check_near ("scatter", bin[0].scatter, 1.4826 * 2, 1e-12);
  tf_check_near ("median of two", bin[1].median, 20, 1e-12);
  tf_check_near ("edge", bin[1].from, 5, 1e-12);
  tf_check_nan ("too few for an interval", bin[1].median_ci.low);
  tf_check_nan ("too few for a scatter", bin[1].scatter);
  g_autoptr (GArray) none = tf_bins (x, y, 0, 0, 7, 5, 0.95);
  g_assert_cmpuint (none->len, ==, 2);
  tf_check_nan ("an empty bin", g_array_index (none, TfBin, 1).median);
}

void
test_laws_add_bin (void)
{
  g_test_add_func ("/laws/bin/ranks-of-a-median-as-in-r", test_ranks);
  g_test_add_func ("/laws/bin/medians-by-steps", test_bins);
}
