/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-laws.h"

#include <string.h>

#include "tf-check.h"
#include "tf-constants.h"

/* Common practice, no source: a cycle lasts about 11 years, between 9 and 14. */
static void
test_table_in_order (void)
{
  double sum = 0.0;
  for (int n = 1; n <= 25; n++)
    {
      g_assert_nonnull (tf_cycle_find (n));
      double minimum = tf_cycle_minimum (n).s, maximum = tf_cycle_maximum (n).s;
      g_assert_true (minimum < maximum);
      if (n == 25)
        break;
      double years = (tf_cycle_minimum (n + 1).s - minimum) / (365.25 * TF_DAY_S);
      g_assert_true (maximum < tf_cycle_minimum (n + 1).s);
      tf_check_between ("length of a cycle in years", years, 9.0 - 0.01, 14.0);
      sum += years;
    }
  tf_check_near ("mean length of a cycle in years", sum / 24.0, 11.0, 0.1);
  g_assert_null (tf_cycle_find (0));
  g_assert_null (tf_cycle_find (26));
  g_assert_false (tf_time_is_known (tf_cycle_minimum (26)));
}

static void
test_minimum_is_the_middle_of_its_month (void)
{
  TfTime december = tf_time_read ("2008-12-16T12:00:00Z"); /* a leap second ends this month */
  tf_check_near ("2008-12", tf_cycle_minimum (24).s, december.s, 0.51);
  TfTime november = tf_time_read ("1989-11-16T00:00:00Z");
  tf_check_near ("1989-11", tf_cycle_maximum (22).s, november.s, 1e-3);
}

static void
test_cycle_by_date (void)
{
  g_assert_cmpint (tf_cycle_by_date (tf_time_from_year (1750.0)), ==, 0);
  g_assert_cmpint (tf_cycle_by_date (tf_time_from_year (1755.5)), ==, 1);
  g_assert_cmpint (tf_cycle_by_date (test_laws_month (24, -0.1)), ==, 23);
  g_assert_cmpint (tf_cycle_by_date (test_laws_month (24, 0.0)), ==, 24);
  g_assert_cmpint (tf_cycle_by_date (tf_time_from_year (2026.0)), ==, 25);
  g_assert_cmpint (tf_cycle_by_date (TF_TIME_UNKNOWN), ==, 0);
}

/* Hathaway 2011, Solar Phys. 273, 221: 28 deg exp(-t/90 months); values recomputed by hand. */
static void
test_expected_latitude (void)
{
  static const double table[][2]
      = { { 0, 28.0 },  { 12, 24.5 }, { 24, 21.4 }, { 36, 18.8 }, { 48, 16.4 },
          { 60, 14.4 }, { 84, 11.0 }, { 108, 8.4 }, { 132, 6.5 } };
  for (guint k = 0; k < G_N_ELEMENTS (table); k++)
    tf_check_near ("latitude expected", tf_cycle_latitude (table[k][0]), table[k][1], 0.051);
  tf_check_near ("latitude before the minimum", tf_cycle_latitude (-30.0), 28.0, 0.0);
  tf_check_nan ("latitude at no time", tf_cycle_latitude (NAN));
}

/* Hale & Nicholson 1925 as restated by Zhukova et al. 2020: even cycle, north: leader negative. */
static void
test_hale_expected (void)
{
  g_assert_cmpint (tf_hale_expected (24, 1), ==, -1);
  g_assert_cmpint (tf_hale_expected (24, -1), ==, 1);
  g_assert_cmpint (tf_hale_expected (25, 1), ==, 1);
  g_assert_cmpint (tf_hale_expected (23, -1), ==, -1);
  g_assert_cmpint (tf_hale_expected (0, 1), ==, 0);
  g_assert_cmpint (tf_hale_expected (24, 0), ==, 0);
}

/* Worked out apart from this program, from the two laws of latitude and the months of the minima:
 * the divider at dt months about the minimum. It acts from -24 to +18 months. */
static void
test_divide_table (void)
{
  static const int months[] = { -24, -12, 0, 12 };
  static const struct
  {
    int cycle;
    double lat[4];
  } table[] = { { 23, { 18.9, 18.3, 17.7, 15.5 } },
                { 24, { 17.5, 17.1, 16.7, 14.6 } },
                { 25, { 18.2, 17.7, 17.2, 15.1 } } };
  g_autoptr (TfDivides) divides = test_laws_divides ();
  for (guint c = 0; c < G_N_ELEMENTS (table); c++)
    for (guint k = 0; k < G_N_ELEMENTS (months); k++)
      for (int side = -1; side <= 1; side += 2)
        tf_check_near ("latitude of the divide",
                       tf_divides_latitude (
                           divides, table[c].cycle, side,
                           test_laws_month (table[c].cycle, months[k] + (k == 0 ? 1e-6 : 0.0))),
                       table[c].lat[k], 0.1);
  for (int c = 23; c <= 25; c++)
    {
      tf_check_nan ("divide at +24 months",
                    tf_divides_latitude (divides, c, 1, test_laws_month (c, 24.0)));
      tf_check_nan ("divide at +36 months",
                    tf_divides_latitude (divides, c, 1, test_laws_month (c, 36.0)));
      tf_check_nan ("divide at -25 months",
                    tf_divides_latitude (divides, c, 1, test_laws_month (c, -25.0)));
    }
  tf_check_nan ("divide before cycle 1",
                tf_divides_latitude (divides, 1, 1, test_laws_month (1, 0.0)));
  tf_check_nan ("divide of a cycle not listed",
                tf_divides_latitude (divides, 26, 1, tf_time_from_year (2030.0)));
}

/* The same table out to +36 months, with the divide made to act so long. */
static void
test_divide_table_made_longer (void)
{
  static const double lats[][2] = { { 13.6, 11.9 }, { 12.8, 11.2 }, { 13.2, 11.5 } };
  TfDivideParams params = test_laws_divide_params ();
  params.after_months = 36;
  g_autoptr (TfDivides) divides = tf_divides_new (&params);
  for (int c = 23; c <= 25; c++)
    for (int k = 0; k < 2; k++)
      tf_check_near ("latitude of the divide",
                     tf_divides_latitude (divides, c, 1, test_laws_month (c, 24.0 + 11.9999 * k)),
                     lats[c - 23][k], 0.1);
}

static void
check_call (const TfDivides *divides, TfTime time, double lat, int number, int other,
            const char *reason)
{
  TfCycleCall call = tf_divides_call (divides, time, lat);
  g_assert_cmpstr (call.reason, ==, reason);
  g_assert_cmpint (call.number, ==, number);
  g_assert_cmpint (call.other, ==, other);
  gboolean sure = strcmp (reason, "cycle-by-date") == 0 || strcmp (reason, "cycle-by-divide") == 0
                  || strcmp (reason, "cycle-provisional") == 0;
  g_assert_cmpint (call.sure, ==, sure);
}

static void
test_calls_about_a_minimum (void)
{
  g_autoptr (TfDivides) divides = test_laws_divides ();
  double divide = tf_divides_latitude (divides, 24, 1, test_laws_month (24, 0.0));
  for (int side = -1; side <= 1; side += 2)
    {
      check_call (divides, test_laws_month (24, 0.0), side * (divide + 4.01), 24, 0,
                  "cycle-by-divide");
      check_call (divides, test_laws_month (24, 0.0), side * (divide + 3.99), 24, 23,
                  "cycle-near-divide");
      check_call (divides, test_laws_month (24, 0.0), side * (divide - 3.99), 23, 24,
                  "cycle-near-divide");
      check_call (divides, test_laws_month (24, 0.0), side * (divide - 4.01), 23, 0,
                  "cycle-by-divide");
    }
  check_call (divides, test_laws_month (24, -23.9), 28.0, 24, 0, "cycle-by-divide");
  check_call (divides, test_laws_month (24, 17.9), 5.0, 23, 0, "cycle-by-divide");
}

static void
test_calls_in_the_wings (void)
{
  g_autoptr (TfDivides) divides = test_laws_divides ();
  check_call (divides, test_laws_month (24, -24.1), 22.0, 23, 24, "cycle-early-wing");
  check_call (divides, test_laws_month (24, -24.1), -21.99, 23, 0, "cycle-by-date");
  check_call (divides, test_laws_month (24, -35.9), -40.0, 23, 24, "cycle-early-wing");
  check_call (divides, test_laws_month (24, -36.1), 40.0, 23, 0, "cycle-by-date");
  check_call (divides, test_laws_month (24, 18.1), -5.99, 24, 23, "cycle-late-wing");
  check_call (divides, test_laws_month (24, 18.1), 6.0, 24, 0, "cycle-by-date");
  check_call (divides, test_laws_month (24, 29.9), 0.0, 24, 23, "cycle-late-wing");
  check_call (divides, test_laws_month (24, 30.1), 1.0, 24, 0, "cycle-by-date");
}

static void
test_calls_with_no_next_minimum (void)
{
  g_autoptr (TfDivides) divides = test_laws_divides ();
  TfTime maximum = tf_cycle_maximum (25);
  TfTime before = tf_time_add (maximum, 47.9 * 365.25 / 12.0 * TF_DAY_S);
  TfTime after = tf_time_add (maximum, 48.1 * 365.25 / 12.0 * TF_DAY_S);
  check_call (divides, before, 30.0, 25, 0, "cycle-by-date");
  check_call (divides, after, 18.01, 25, 26, "cycle-next-minimum-unknown");
  check_call (divides, after, -18.01, 25, 26, "cycle-next-minimum-unknown");
  check_call (divides, after, 18.0, 25, 0, "cycle-by-date");
}

static void
test_provisional_minimum (void)
{
  TfDivideParams params = test_laws_divide_params ();
  params.provisional_year = 2030.5;
  g_autoptr (TfDivides) divides = tf_divides_new (&params);
  check_call (divides, tf_time_from_year (2024.0), 15.0, 25, 0, "cycle-by-date");
  check_call (divides, tf_time_from_year (2030.5), 28.0, 26, 0, "cycle-provisional");
  check_call (divides, tf_time_from_year (2030.5), 5.0, 25, 0, "cycle-provisional");
  check_call (divides, tf_time_from_year (2030.5), 17.0, 25, 26, "cycle-near-divide");
  check_call (divides, tf_time_from_year (2034.0), 15.0, 26, 0, "cycle-provisional");
  params.provisional_year = 2010.0; /* not after the last listed maximum */
  g_autoptr (TfDivides) without = tf_divides_new (&params);
  check_call (without, tf_time_from_year (2034.0), 15.0, 25, 0, "cycle-by-date");
}

static void
test_calls_without_time_or_latitude (void)
{
  g_autoptr (TfDivides) divides = test_laws_divides ();
  check_call (divides, TF_TIME_UNKNOWN, 20.0, 0, 0, "cycle-no-time");
  check_call (divides, tf_time_from_year (1700.0), 20.0, 0, 0, "cycle-before-table");
  check_call (divides, test_laws_month (24, 0.0), NAN, 24, 0, "cycle-no-latitude");
  check_call (divides, test_laws_month (24, 60.0), NAN, 24, 0, "cycle-by-date");
}

static void
test_by_date_only (void)
{
  TfDivideParams params = test_laws_divide_params ();
  params.by_date_only = TRUE;
  g_autoptr (TfDivides) divides = tf_divides_new (&params);
  for (double months = -40.0; months < 40.0; months += 3.3)
    for (double lat = -40.0; lat <= 40.0; lat += 5.0)
      check_call (divides, test_laws_month (24, months), lat, months < 0.0 ? 23 : 24, 0,
                  "cycle-by-date");
}

/* A moved divide is one hemisphere's, linear between its points, its ends held, and can be set
 * back. */
static void
test_moved_divide (void)
{
  g_autoptr (TfDivides) computed = test_laws_divides ();
  TfTime times[] = { test_laws_month (24, -10.0), test_laws_month (24, 10.0) };
  double lats[] = { 20.0, 10.0 };
  g_autoptr (TfDivides) moved = tf_divides_with (computed, 24, 1, times, lats, 2);
  g_assert_true (tf_divides_is_moved (moved, 24, 1));
  g_assert_false (tf_divides_is_moved (moved, 24, -1));
  g_assert_false (tf_divides_is_moved (computed, 24, 1));
  tf_check_near ("between the points",
                 tf_divides_latitude (moved, 24, 1, test_laws_month (24, 5.0)), 12.5, 1e-9);
  tf_check_near ("before the first",
                 tf_divides_latitude (moved, 24, 1, test_laws_month (24, -20.0)), 20.0, 0.0);
  tf_check_near ("after the last", tf_divides_latitude (moved, 24, 1, test_laws_month (24, 17.0)),
                 10.0, 0.0);
  tf_check_nan ("where it does not act",
                tf_divides_latitude (moved, 24, 1, test_laws_month (24, 18.1)));
  tf_check_near ("the other hemisphere",
                 tf_divides_latitude (moved, 24, -1, test_laws_month (24, 0.0)),
                 tf_divides_latitude (computed, 24, -1, test_laws_month (24, 0.0)), 0.0);
  check_call (moved, test_laws_month (24, 10.0), 14.5, 24, 0, "cycle-by-divide");
  check_call (moved, test_laws_month (24, 10.0), -14.5, 23, 24, "cycle-near-divide");
  TfDivideParams params = test_laws_divide_params ();
  params.band_deg = 0.0;
  g_autoptr (TfDivides) bare = tf_divides_with_params (moved, &params);
  check_call (bare, test_laws_month (24, 10.0), 10.01, 24, 0, "cycle-by-divide");
  check_call (bare, test_laws_month (24, 10.0), -14.7, 23, 0, "cycle-by-divide");
  g_autoptr (TfDivides) back = tf_divides_with (moved, 24, 1, NULL, NULL, 0);
  g_assert_false (tf_divides_is_moved (back, 24, 1));
  g_autoptr (TfDivides) both = tf_divides_with (moved, 24, -1, times, lats, 1);
  g_assert_true (tf_divides_is_moved (both, 24, 1) && tf_divides_is_moved (both, 24, -1));
  tf_check_near ("a single point", tf_divides_latitude (both, 24, -1, test_laws_month (24, 7.0)),
                 20.0, 0.0);
}

/* The two hemispheres are told alike. */
static void
test_calls_mirror (void)
{
  g_autoptr (TfDivides) divides = test_laws_divides ();
  g_autoptr (GRand) rand = g_rand_new_with_seed (11);
  for (int k = 0; k < 2000; k++)
    {
      TfTime time = tf_time_from_year (g_rand_double_range (rand, 1990.0, 2030.0));
      double lat = g_rand_double_range (rand, 0.001, 45.0);
      TfCycleCall north = tf_divides_call (divides, time, lat),
                  south = tf_divides_call (divides, time, -lat);
      g_assert_cmpint (north.number, ==, south.number);
      g_assert_cmpint (north.other, ==, south.other);
      g_assert_cmpstr (north.reason, ==, south.reason);
      g_assert_true (north.sure == (north.other == 0));
    }
}

/* Every code has a sentence. */
static void
test_reasons_have_sentences (void)
{
  static const char *const codes[]
      = { "cycle-by-date",   "cycle-by-divide",   "cycle-near-divide",          "cycle-early-wing",
          "cycle-late-wing", "cycle-no-latitude", "cycle-next-minimum-unknown", "cycle-provisional",
          "cycle-no-time",   "cycle-before-table" };
  for (guint k = 0; k < G_N_ELEMENTS (codes); k++)
    {
      g_autoptr (TfNote) note = tf_note_new (codes[k], "");
      g_autofree char *text = tf_note_dup_text (note, TRUE);
      g_assert_cmpuint (strlen (text), >, 20);
      g_assert_null (strchr (text, '{'));
    }
  for (const TfNoteKind *k = tf_note_kinds_laws; k[0].code != NULL && k[1].code != NULL; k++)
    g_assert_cmpint (strcmp (k[0].code, k[1].code), <, 0);
}

void
test_laws_add_cycle (void)
{
  g_test_add_func ("/laws/cycle/the-table-is-in-order", test_table_in_order);
  g_test_add_func ("/laws/cycle/an-epoch-is-the-middle-of-its-month",
                   test_minimum_is_the_middle_of_its_month);
  g_test_add_func ("/laws/cycle/the-date-tells-the-cycle", test_cycle_by_date);
  g_test_add_func ("/laws/cycle/latitudes-sink-through-a-cycle", test_expected_latitude);
  g_test_add_func ("/laws/cycle/the-leaders-sign-alternates", test_hale_expected);
  g_test_add_func ("/laws/divide/its-latitudes-are-those-of-the-table", test_divide_table);
  g_test_add_func ("/laws/divide/it-can-act-longer", test_divide_table_made_longer);
  g_test_add_func ("/laws/divide/it-tells-old-from-new-about-a-minimum",
                   test_calls_about_a_minimum);
  g_test_add_func ("/laws/divide/the-years-beside-it-are-partly-unsure", test_calls_in_the_wings);
  g_test_add_func ("/laws/divide/an-unknown-next-minimum-makes-high-latitudes-unsure",
                   test_calls_with_no_next_minimum);
  g_test_add_func ("/laws/divide/a-provisional-minimum-is-said", test_provisional_minimum);
  g_test_add_func ("/laws/divide/nothing-is-told-without-time-or-latitude",
                   test_calls_without_time_or_latitude);
  g_test_add_func ("/laws/divide/the-date-alone-can-rule", test_by_date_only);
  g_test_add_func ("/laws/divide/a-person-can-move-it-and-set-it-back", test_moved_divide);
  g_test_add_func ("/laws/divide/hemispheres-are-told-alike", test_calls_mirror);
  g_test_add_func ("/laws/cycle/every-reason-has-a-sentence", test_reasons_have_sentences);
}
