/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-sun.h"

#include "tf-check.h"
#include "tf-constants.h"
#include "tf-observer.h"
#include "tf-rotation.h"

static TfTime
tt (int year, int month, double day)
{
  return tf_time_add (tf_time_from_calendar (year, month, 1, 0, 0, 0.0, TF_SCALE_TT),
                      (day - 1.0) * TF_DAY_S);
}

/* JPL Horizons, daily list at 0 h TT of 2013, as quoted in the test suite of the sunpy library. */
static const double horizons_b0[12]
    = { -3.034687, -6.031910, -7.219984, -6.543092, -4.168016, -0.663804,
        2.873030,  5.784693,  7.194559,  6.719875,  4.378979,  0.881068 };
static const double horizons_l0[12]
    = { 326.989970, 278.789894, 270.072186, 221.440599, 185.306476, 135.303097,
        98.221806,  48.035951,  358.289921, 322.226009, 273.315206, 237.836959 };
/* Astronomical Almanac 2013, section C, as quoted there. */
static const double almanac_l0[12] = { 326.98, 278.78, 270.07, 221.44, 185.30, 135.30,
                                       98.22,  48.03,  358.28, 322.22, 273.31, 237.83 };
static const double almanac_p[12]
    = { 1.98, -12.23, -21.55, -26.15, -24.11, -15.39, -2.64, 10.85, 21.08, 25.97, 24.47, 16.05 };

static void
test_horizons (void)
{
  for (int k = 0; k < 12; k++)
    {
      TfObserver earth = tf_observer_earth (tt (2013, k + 1, 1.0));
      tf_check_near ("B0", earth.b0_deg, horizons_b0[k], 2e-5);
      tf_check_angle ("L0", earth.carrington_lon_deg, horizons_l0[k], 2e-5);
      tf_check_near ("Stonyhurst longitude", earth.stonyhurst_lon_deg, 0.0, 0.0);
      g_assert_cmpint (earth.source, ==, TF_OBSERVER_EARTH);
    }
  tf_check_near ("R", tf_observer_earth (tt (2013, 4, 1.0)).distance_m / TF_AU_M, 0.9992311, 1e-7);
  tf_check_near ("R", tf_observer_earth (tt (2013, 12, 1.0)).distance_m / TF_AU_M, 0.9861362, 1e-7);
}

static void
test_almanac (void)
{
  for (int k = 0; k < 12; k++)
    {
      TfTime time = tt (2013, k + 1, 1.0);
      tf_check_angle ("L0", tf_earth_l0 (time, TF_L0_ALMANAC), almanac_l0[k], 0.01);
      tf_check_near ("P", tf_earth_p (time), almanac_p[k], 0.01);
    }
  tf_check_near ("the two conventions differ by the aberration and R/c",
                 tf_earth_l0 (tt (2013, 1, 1.0), TF_L0_IMAGE)
                     - tf_earth_l0 (tt (2013, 1, 1.0), TF_L0_ALMANAC),
                 0.0054, 2e-4);
}

/* Worked out with the sunpy library for two instants, UTC. */
static void
test_two_instants (void)
{
  TfTime a = tf_time_read ("2010-10-15T19:14:56Z"), b = tf_time_read ("2014-03-01T00:00:50Z");
  tf_check_near ("L0", tf_earth_l0 (a, TF_L0_IMAGE), 192.8099, 6e-5);
  tf_check_near ("B0", tf_observer_earth (a).b0_deg, 5.8294, 6e-5);
  tf_check_near ("L0", tf_earth_l0 (b, TF_L0_IMAGE), 132.4888, 6e-5);
  tf_check_near ("B0", tf_observer_earth (b).b0_deg, -7.2170, 6e-5);
}

/* Meeus, Astronomical Algorithms, 2nd ed., example 29.a, 1992 October 13.0 TD. */
static void
test_meeus (void)
{
  double p, b0, l0;
  TfTime time = tf_time_from_jd (2448908.5, 0.00068, TF_SCALE_TT);
  tf_observer_meeus (time, &p, &b0, &l0);
  tf_check_near ("P by Meeus's own steps", p, 26.27, 0.005);
  tf_check_near ("B0 by Meeus's own steps", b0, 5.99, 0.005);
  tf_check_near ("L0 by Meeus's own steps", l0, 238.63, 0.005);
  tf_check_near ("P", tf_earth_p (time), 26.27, 0.02);
  tf_check_near ("B0", tf_observer_earth (time).b0_deg, 5.99, 0.02);
  tf_check_near ("L0", tf_earth_l0 (time, TF_L0_IMAGE), 238.63, 0.02);
}

/* Astronomical Almanac 2013, table C4: starts of rotations, TT, as quoted in the test suite of the
 * sunpy library. */
static void
test_rotation_starts (void)
{
  const struct
  {
    int number, year, month;
    double day;
  } rows[] = { { 2132, 2012, 12, 29.49 }, { 2133, 2013, 1, 25.83 },  { 2134, 2013, 2, 22.17 },
               { 2135, 2013, 3, 21.49 },  { 2136, 2013, 4, 17.78 },  { 2137, 2013, 5, 15.02 },
               { 2138, 2013, 6, 11.22 },  { 2139, 2013, 7, 8.42 },   { 2140, 2013, 8, 4.63 },
               { 2141, 2013, 8, 31.87 },  { 2142, 2013, 9, 28.14 },  { 2143, 2013, 10, 25.43 },
               { 2144, 2013, 11, 21.73 }, { 2145, 2013, 12, 19.05 }, { 2146, 2014, 1, 15.38 },
               { 2147, 2014, 2, 11.73 } };
  for (guint k = 0; k < G_N_ELEMENTS (rows); k++)
    {
      TfTime start = tf_carrington_time (rows[k].number),
             printed = tt (rows[k].year, rows[k].month, rows[k].day);
      tf_check_near ("start of a rotation, days", (start.s - printed.s) / TF_DAY_S, 0.0, 0.01);
      tf_check_near ("its number", tf_carrington_rotation (start), rows[k].number, 1e-6);
      tf_check_near ("L0 there", tf_wrap_180 (tf_earth_l0 (start, TF_L0_IMAGE)), 0.0, 1e-5);
    }
}

static void
test_rotation_runs_on (void)
{
  double before = tf_carrington_rotation (tt (1850, 1, 1.0));
  for (int day = 1; day < 100000; day += 13)
    {
      double now = tf_carrington_rotation (tf_time_add (tt (1850, 1, 1.0), day * TF_DAY_S));
      double days = day == 1 ? 1.0 : 13.0;
      tf_check_near ("rotations gained", now - before, days / 27.2753, 0.012 * days / 13.0 + 0.002);
      before = now;
    }
  for (double rotation = 1.0; rotation < 2600.0; rotation += 111.37)
    tf_check_near ("there and back", tf_carrington_rotation (tf_carrington_time (rotation)),
                   rotation, 4e-7);
}

/* At the Earth it is L0; nearer the Sun the picture is younger, and the Sun has turned on by
 * 14.1844 deg/day for the light time saved. */
static void
test_other_observers (void)
{
  TfTime time = tt (2013, 10, 12.25);
  TfObserver earth = tf_observer_earth (time);
  tf_check_near ("at the Earth", tf_observer_carrington (time, 0.0, earth.distance_m),
                 earth.carrington_lon_deg, 1e-12);
  tf_check_angle ("west of it", tf_observer_carrington (time, -120.0, earth.distance_m),
                  earth.carrington_lon_deg - 120.0, 1e-9);
  double saved = 0.8 * TF_AU_M / TF_LIGHT_M_S / TF_DAY_S;
  tf_check_angle ("nearer", tf_observer_carrington (time, 0.0, earth.distance_m - 0.8 * TF_AU_M),
                  earth.carrington_lon_deg - 14.1844 * saved, 1e-9);
  tf_check_nan ("nowhere", tf_observer_carrington (time, NAN, earth.distance_m));
  tf_check_nan ("no time", tf_observer_carrington (TF_TIME_UNKNOWN, 0.0, earth.distance_m));
}

static void
test_unknown_time (void)
{
  TfObserver earth = tf_observer_earth (TF_TIME_UNKNOWN);
  tf_check_nan ("distance", earth.distance_m);
  tf_check_nan ("B0", earth.b0_deg);
  tf_check_nan ("L0", earth.carrington_lon_deg);
  g_assert_cmpint (earth.source, ==, TF_OBSERVER_UNKNOWN);
  tf_check_nan ("L0", tf_earth_l0 (TF_TIME_UNKNOWN, TF_L0_IMAGE));
  tf_check_nan ("P", tf_earth_p (TF_TIME_UNKNOWN));
  tf_check_nan ("rotation", tf_carrington_rotation (TF_TIME_UNKNOWN));
  g_assert_false (tf_time_is_known (tf_carrington_time (NAN)));
}

static void
test_wraps (void)
{
  const double in[] = { 0.0, 180.0, -180.0, 181.0, 539.0, -179.0, 360.0, -1e-20, 720.25 };
  const double half[] = { 0.0, 180.0, 180.0, -179.0, 179.0, -179.0, 0.0, 0.0, 0.25 };
  const double full[] = { 0.0, 180.0, 180.0, 181.0, 179.0, 181.0, 0.0, 0.0, 0.25 };
  for (guint k = 0; k < G_N_ELEMENTS (in); k++)
    {
      tf_check_near ("to (-180, 180]", tf_wrap_180 (in[k]), half[k], 1e-12);
      tf_check_near ("to [0, 360)", tf_wrap_360 (in[k]), full[k], 1e-12);
    }
  tf_check_nan ("wrap 180", tf_wrap_180 (NAN));
  tf_check_nan ("wrap 360", tf_wrap_360 (NAN));
}

static void
check_vantage (double lon, const char *expected)
{
  TfObserver observer = { .stonyhurst_lon_deg = lon };
  g_autofree char *got = tf_observer_dup_vantage (&observer);
  g_assert_cmpstr (got, ==, expected);
}

static void
test_vantage (void)
{
  check_vantage (0.0, "earth");
  check_vantage (7.5, "earth");
  check_vantage (-7.6, "E008");
  check_vantage (-22.3, "E022");
  check_vantage (140.4, "W140");
  check_vantage (-180.0, "W180");
  check_vantage (NAN, "unknown");
}

/* -- rotation laws --------------------------------------------------------------------------- */

static guint
law (const char *name)
{
  for (guint k = 0; tf_rotation_laws[k].name != NULL; k++)
    if (g_str_equal (tf_rotation_laws[k].name, name))
      return k;
  g_assert_not_reached ();
}

static void
test_laws_table (void)
{
  guint n = 0;
  for (; tf_rotation_laws[n].name != NULL; n++)
    {
      g_assert_cmpstr (tf_rotation_laws[n].name, ==, tf_rotation_names[n]);
      g_assert_nonnull (tf_rotation_laws[n].source);
      /* common practice, no source: about 25 days at the equator, about 30 towards the pole */
      tf_check_between ("days a turn at the equator", 360.0 / tf_rotation_rate (n, 0.0), 24.3,
                        26.5);
      if (n != law ("rigid-carrington"))
        tf_check_between ("days a turn at 60 deg", 360.0 / tf_rotation_rate (n, 60.0), 28.0, 33.0);
    }
  g_assert_null (tf_rotation_names[n]);
  g_assert_cmpstr (tf_rotation_names[0], ==, "snodgrass-ulrich-1990-magnetic");
}

/* The rates worked out from the published coefficients in the design's reference, section 2. */
static void
test_law_rates (void)
{
  const double lats[] = { 0.0, 10.0, 20.0, 30.0, 40.0 };
  const double magnetic[] = { 14.252, 14.199, 14.023, 13.682, 13.149 };
  const double hhf[] = { 14.326, 14.260, 14.053, 13.682, 13.138 };
  const double groups[] = { 14.393, 14.304, 14.048, 13.657, 13.176 };
  for (guint k = 0; k < G_N_ELEMENTS (lats); k++)
    for (int south = -1; south < 2; south += 2)
      {
        tf_check_near ("Snodgrass & Ulrich", tf_rotation_rate (0, south * lats[k]), magnetic[k],
                       6e-4);
        tf_check_near ("Howard, Harvey & Forgach",
                       tf_rotation_rate (law ("howard-harvey-forgach-1990"), south * lats[k]),
                       hhf[k], 6e-4);
        tf_check_near ("Howard, Gilman & Gilman",
                       tf_rotation_rate (law ("howard-gilman-gilman-1984-groups"), south * lats[k]),
                       groups[k], 6e-4);
      }
  tf_check_near ("carried in Carrington longitude in 10 days",
                 tf_rotation_carry (0, 20.0, 10.0 * TF_DAY_S), 140.23 - 141.844, 0.01);
  tf_check_near ("a point of the rigid law stays",
                 tf_rotation_carry (law ("rigid-carrington"), 33.0, 1e7), 0.0, 1e-9);
}

void
add_observer_tests (void)
{
  g_test_add_func ("/sun/observer/agrees-with-horizons", test_horizons);
  g_test_add_func ("/sun/observer/agrees-with-the-almanac", test_almanac);
  g_test_add_func ("/sun/observer/agrees-with-the-two-instants-of-the-reference",
                   test_two_instants);
  g_test_add_func ("/sun/observer/agrees-with-meeus-example-29a", test_meeus);
  g_test_add_func ("/sun/observer/rotations-start-when-the-almanac-says", test_rotation_starts);
  g_test_add_func ("/sun/observer/rotation-number-runs-on-evenly", test_rotation_runs_on);
  g_test_add_func ("/sun/observer/other-observers-see-the-sun-at-their-own-light-time",
                   test_other_observers);
  g_test_add_func ("/sun/observer/unknown-time-gives-no-number", test_unknown_time);
  g_test_add_func ("/sun/observer/angles-wrap-at-the-right-end", test_wraps);
  g_test_add_func ("/sun/observer/vantages-are-named-by-side-and-degree", test_vantage);
  g_test_add_func ("/sun/rotation/every-law-has-name-source-and-sane-periods", test_laws_table);
  g_test_add_func ("/sun/rotation/rates-follow-the-published-coefficients", test_law_rates);
}
