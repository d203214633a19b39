/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-sun.h"

#include "tf-check.h"
#include "tf-time.h"

/* TAI - UTC, s: IERS Bulletin C; the table of leap seconds. */
static void
test_leap_seconds (void)
{
  const struct
  {
    int year, month;
    double tai_minus_utc;
  } rows[] = { { 1972, 1, 10 }, { 1972, 7, 11 }, { 1999, 1, 32 }, { 2006, 1, 33 },
               { 2009, 1, 34 }, { 2012, 7, 35 }, { 2015, 7, 36 }, { 2017, 1, 37 } };
  for (guint k = 0; k < G_N_ELEMENTS (rows); k++)
    {
      TfTime utc = tf_time_from_calendar (rows[k].year, rows[k].month, 1, 0, 0, 0.0, TF_SCALE_UTC);
      TfTime tai = tf_time_from_calendar (rows[k].year, rows[k].month, 1, 0, 0, 0.0, TF_SCALE_TAI);
      tf_check_near ("TAI - UTC", utc.s - tai.s, rows[k].tai_minus_utc, 1e-6);
      /* The second before began one second earlier on a day with a leap second: two labels apart.
       */
      TfTime before = tf_time_add (utc, -1.0);
      int second = (int)rows[k].tai_minus_utc == 10 ? 0 : 60;
      double got;
      g_assert_true (tf_time_calendar (before, NULL, NULL, NULL, NULL, NULL, &got));
      if (second == 60)
        tf_check_near ("the leap second is 60", got, 60.0, 1e-6);
    }
}

static void
test_scales (void)
{
  TfTime tt = tf_time_from_calendar (2000, 1, 1, 12, 0, 0.0, TF_SCALE_TT);
  tf_check_near ("J2000 is 0", tt.s, 0.0, 0.0);
  TfTime tai = tf_time_from_calendar (2000, 1, 1, 12, 0, 0.0, TF_SCALE_TAI);
  tf_check_near ("TT - TAI", tai.s, 32.184, 1e-9);
  TfTime gps = tf_time_from_calendar (2020, 5, 4, 3, 2, 18.0, TF_SCALE_GPS);
  TfTime utc = tf_time_from_calendar (2020, 5, 4, 3, 2, 0.0, TF_SCALE_UTC);
  tf_check_near ("GPS is 18 s ahead of UTC since 2017", gps.s, utc.s, 1e-6);
  const TfTimeScale scales[] = { TF_SCALE_UTC, TF_SCALE_TAI, TF_SCALE_TT, TF_SCALE_GPS };
  for (guint k = 0; k < G_N_ELEMENTS (scales); k++)
    {
      TfTime time = tf_time_from_calendar (2013, 10, 12, 6, 0, 0.0, scales[k]);
      tf_check_near ("Julian date", tf_time_jd (time, scales[k]), 2456577.75, 1e-9);
      tf_check_near ("and back", tf_time_from_jd (2456577.5, 0.25, scales[k]).s, time.s, 1e-6);
    }
}

static void
check_iso (const char *text, int decimals, const char *expected)
{
  g_autofree char *got = tf_time_dup_iso (tf_time_read (text), decimals);
  g_assert_cmpstr (got, ==, expected);
}

static void
test_iso (void)
{
  check_iso ("2013-10-12T06:00:00Z", 0, "2013-10-12T06:00:00Z");
  check_iso ("2013-10-12T06:00:00.25Z", 0, "2013-10-12T06:00:00Z");
  check_iso ("2013-10-12T06:00:00.625Z", 3, "2013-10-12T06:00:00.625Z");
  check_iso ("2013-10-12T06:00:00", 6, "2013-10-12T06:00:00.000000Z");
  check_iso ("2013-10-12T06:00", 0, "2013-10-12T06:00:00Z");
  check_iso ("2013-10-12", 0, "2013-10-12T00:00:00Z");
  check_iso (" 2013-10-12 06:00:01 ", 0, "2013-10-12T06:00:01Z");
  check_iso ("2013-10-12T24:00:00", 0, "2013-10-13T00:00:00Z");
  check_iso ("2016-12-31T23:59:60.25Z", 2, "2016-12-31T23:59:60.25Z");
  check_iso ("2016-12-31T23:59:60.999999Z", 3, "2017-01-01T00:00:00.000Z");
  check_iso ("1755-02-15T12:30:45Z", 0, "1755-02-15T12:30:45Z");
  check_iso ("1959-12-31T23:59:59Z", 0, "1959-12-31T23:59:59Z");
  check_iso ("1960-01-01T00:00:00Z", 0, "1960-01-01T00:00:00Z");
}

static void
test_not_iso (void)
{
  const char *const texts[] = { "",
                                "2013",
                                "2013-10",
                                "2013-1-2",
                                "2013/10/12",
                                "2013-13-01",
                                "2013-02-29",
                                "2013-10-12T",
                                "2013-10-12T25:00:00",
                                "2013-10-12T06:60:00",
                                "2013-10-12T06:00:60",
                                "2015-12-31T23:59:60",
                                "2016-12-31T23:59:61",
                                "2013-10-12T06:00:00.",
                                "2013-10-12T06:00:00+01:00",
                                "2013-10-12T06:00:00ZZ",
                                "2013-10-12T24:00:01",
                                "2014.03.01_00:01:25_TAI",
                                "nan" };
  for (guint k = 0; k < G_N_ELEMENTS (texts); k++)
    if (tf_time_is_known (tf_time_read (texts[k])))
      {
        g_printerr ("# \"%s\" was read as a time\n", texts[k]);
        g_test_fail ();
      }
  g_assert_false (tf_time_is_known (tf_time_read (NULL)));
}

static void
test_years (void)
{
  TfTime start = tf_time_from_calendar (2013, 1, 1, 0, 0, 0.0, TF_SCALE_UTC);
  tf_check_near ("a year begins on January 1", tf_time_from_year (2013.0).s, start.s, 1e-5);
  TfTime middle = tf_time_from_calendar (2013, 7, 2, 12, 0, 0.0, TF_SCALE_UTC);
  tf_check_near ("half a common year is July 2, 12 h", tf_time_from_year (2013.5).s, middle.s,
                 1e-4);
  for (double year = 1749.123; year < 2100.0; year += 7.77)
    tf_check_near ("decimal year and back", tf_time_year (tf_time_from_year (year)), year, 1e-9);
  g_assert_false (tf_time_is_known (tf_time_from_year (NAN)));
  g_assert_false (tf_time_is_known (tf_time_from_year (1e300)));
}

/* Before 1960 there is no UTC: TAI - UTC is taken as 0, as ERFA does with its "dubious year". */
static void
test_before_1960 (void)
{
  TfTime time = tf_time_read ("1853-11-09T21:36:00Z");
  tf_check_near ("JD in TT", tf_time_jd (time, TF_SCALE_TT), 2398167.4 + 32.184 / 86400.0, 1e-8);
  tf_check_near ("JD in UTC", tf_time_jd (time, TF_SCALE_UTC), 2398167.4, 1e-8);
}

static void
test_unknown (void)
{
  TfTime unknown = TF_TIME_UNKNOWN;
  double jd1, jd2;
  g_assert_false (tf_time_is_known (unknown));
  g_assert_false (tf_time_is_known (tf_time_add (unknown, 5.0)));
  g_assert_false (tf_time_is_known (tf_time_from_calendar (2013, 2, 30, 0, 0, 0.0, TF_SCALE_UTC)));
  g_assert_false (tf_time_is_known (tf_time_from_calendar (2013, 2, 3, 0, 0, NAN, TF_SCALE_UTC)));
  g_assert_false (tf_time_is_known (tf_time_from_calendar (2013, 2, 3, 0, 0, NAN, TF_SCALE_TAI)));
  g_assert_false (
      tf_time_is_known (tf_time_from_calendar (G_MAXINT, 1, 1, 0, 0, 0.0, TF_SCALE_UTC)));
  g_assert_false (tf_time_is_known (tf_time_from_jd (INFINITY, 0.0, TF_SCALE_UTC)));
  g_assert_false (tf_time_calendar (unknown, NULL, NULL, NULL, NULL, NULL, NULL));
  g_assert_null (tf_time_dup_iso (unknown, 0));
  tf_check_nan ("Julian date", tf_time_jd (unknown, TF_SCALE_UTC));
  tf_check_nan ("Julian date in TT", tf_time_jd (unknown, TF_SCALE_TT));
  tf_check_nan ("year", tf_time_year (unknown));
  tf_time_tt_jd (unknown, &jd1, &jd2);
  tf_check_nan ("two parts", jd1 + jd2);
}

/* Seconds may run past the day; the calendar parts come back with the date turned. */
static void
test_seconds_run_on (void)
{
  int year, month, day, hour, minute;
  double second;
  TfTime time = tf_time_from_calendar (2013, 2, 28, 23, 59, 60.0 + 3661.5, TF_SCALE_UTC);
  g_assert_true (tf_time_calendar (time, &year, &month, &day, &hour, &minute, &second));
  g_assert_cmpint (year, ==, 2013);
  g_assert_cmpint (month, ==, 3);
  g_assert_cmpint (day, ==, 1);
  g_assert_cmpint (hour, ==, 1);
  g_assert_cmpint (minute, ==, 1);
  tf_check_near ("second", second, 1.5, 1e-6);
}

void
add_time_tests (void)
{
  g_test_add_func ("/sun/time/leap-seconds-come-in-at-the-right-dates", test_leap_seconds);
  g_test_add_func ("/sun/time/scales-keep-their-distances", test_scales);
  g_test_add_func ("/sun/time/iso-text-is-read-and-written", test_iso);
  g_test_add_func ("/sun/time/what-is-not-iso-is-unknown", test_not_iso);
  g_test_add_func ("/sun/time/decimal-years-go-both-ways", test_years);
  g_test_add_func ("/sun/time/years-before-1960-are-taken-as-they-stand", test_before_1960);
  g_test_add_func ("/sun/time/unknown-stays-unknown", test_unknown);
  g_test_add_func ("/sun/time/seconds-may-run-past-the-day", test_seconds_run_on);
}
