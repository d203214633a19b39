/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-laws.h"

#include <math.h>
#include <stdlib.h>

#include "tf-check.h"
#include "tf-distinct.h"
#include "tf-joy-slope.h"
#include "tf-sort.h"

static double
draw (GRand *random)
{
  switch (g_rand_int_range (random, 0, 6))
    {
    case 0:
      return floor (g_rand_double_range (random, -3, 3)); /* many of them equal */
    case 1:
      return -0.0;
    case 2:
      return NAN;
    case 3:
      return g_rand_double_range (random, -1e300, 1e300);
    case 4:
      return INFINITY * (g_rand_boolean (random) ? 1 : -1);
    default:
      return g_rand_double_range (random, -1, 1);
    }
}

/* NaN last, equal ones as they stood. */
static void
test_order (void)
{
  static const guint sizes[] = { 0, 1, 2, 63, 64, 65, 5000 };
  GRand *random = g_rand_new_with_seed (3);
  for (guint s = 0; s < G_N_ELEMENTS (sizes); s++)
    {
      guint n = sizes[s];
      g_autofree double *keys = g_new (double, n + 1), *values = g_new (double, n + 1);
      for (guint k = 0; k < n; k++)
        values[k] = keys[k] = draw (random);
      g_autofree guint *order = tf_sort_order (keys, n);
      g_autofree guint8 *seen = g_new0 (guint8, n + 1);
      tf_sort_numbers (values, n);
      for (guint k = 0; k < n; k++)
        {
          g_assert_false (seen[order[k]]);
          seen[order[k]] = 1;
          g_assert_true (isnan (values[k]) ? isnan (keys[order[k]]) : values[k] <= keys[order[k]] && values[k] >= keys[order[k]]);
          if (k == 0)
            continue;
          double before = keys[order[k - 1]], now = keys[order[k]];
          g_assert_true (isnan (now) || before <= now);
          if ((isnan (before) && isnan (now)) || (before <= now && before >= now))
            g_assert_cmpuint (order[k - 1], <, order[k]);
        }
    }
  g_rand_free (random);
}

static void
test_distinct (void)
{
  GRand *random = g_rand_new_with_seed (5);
  g_autoptr (TfDistinct) distinct = tf_distinct_new (2);
  g_autoptr (GHashTable) known = g_hash_table_new (NULL, NULL);
  for (guint k = 0; k < 20000; k++)
    {
      guint32 id = g_rand_boolean (random) ? (guint32)g_rand_int_range (random, 0, 3000)
                                           : g_rand_int (random) & 0xfff00000u;
      gpointer number = NULL;
      if (!g_hash_table_lookup_extended (known, GUINT_TO_POINTER (id), NULL, &number))
        {
          g_assert_cmpuint (tf_distinct_find (distinct, id), ==, G_MAXUINT);
          number = GUINT_TO_POINTER (g_hash_table_size (known));
          g_hash_table_insert (known, GUINT_TO_POINTER (id), number);
        }
      g_assert_cmpuint (tf_distinct_add (distinct, id), ==, GPOINTER_TO_UINT (number));
      g_assert_cmpuint (tf_distinct_find (distinct, id), ==, GPOINTER_TO_UINT (number));
    }
  g_assert_cmpuint (tf_distinct_get_n (distinct), ==, g_hash_table_size (known));
  g_rand_free (random);
}

/* The slope alone, found without an order of all, is that of the ordered ratios: as the weighted median
 * of another function has it; ties and an exact half among them. */
static void
test_slope (void)
{
  GRand *random = g_rand_new_with_seed (7);
  TfJoyParams params = { 0 };
  tf_options_reset (tf_joy_options, &params);
  const TfGroup all = tf_group_of (0, 0);
  for (guint turn = 0; turn < 300; turn++)
    {
      guint n = 3 + (guint)g_rand_int_range (random, 0, turn < 200 ? 12 : 2000);
      gboolean coarse = turn % 2 == 0;
      g_autoptr (TfSample) sample = tf_sample_new ();
      g_autofree TfVerdict *verdicts = g_new0 (TfVerdict, n);
      g_autofree double *ratios = g_new (double, n), *weights = g_new (double, n);
      for (guint k = 0; k < n; k++)
        {
          TfSampleRow row = test_laws_row (coarse ? g_rand_int_range (random, 1, 5) * 4.0
                                                  : g_rand_double_range (random, 1, 35), 1);
          row.axis_tilt_deg = coarse ? g_rand_int_range (random, -4, 5) * 4.0 : g_rand_double_range (random, -60, 70);
          row.region = k;
          tf_sample_add (sample, &row);
          ratios[k] = row.axis_tilt_deg / row.lat_deg;
          weights[k] = row.lat_deg;
        }
      TfJoyFit fit = tf_joy_slope (sample, verdicts, &all, &params);
      g_assert_cmpuint (fit.n, ==, n);
      tf_check_near ("slope", fit.slope, tf_weighted_median (ratios, weights, n), 1e-15);
      tf_check_nan ("no intercept", fit.intercept);
    }
  g_rand_free (random);
}

void
test_laws_add_sort (void)
{
  g_test_add_func ("/laws/sort/numbers-and-order", test_order);
  g_test_add_func ("/laws/sort/distinct-numbers", test_distinct);
  g_test_add_func ("/laws/joy/the-slope-alone", test_slope);
}
