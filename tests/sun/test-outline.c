/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-sun.h"

#include "tf-check.h"
#include "tf-constants.h"
#include "tf-outline.h"
#include "tf-rotation.h"

static TfTime
noon (void)
{
  return tf_time_read ("2013-10-12T12:00:00Z");
}

/* A box between two longitudes and latitudes; its sides in latitude are great circles all the same.
 */
static TfOutline *
box (double west, double east, double south, double north)
{
  const TfVertex ring[] = { { west, south }, { east, south }, { east, north }, { west, north } };
  g_autoptr (GError) error = NULL;
  TfOutline *outline = tf_outline_new (noon (), ring, 4, &error);
  g_assert_no_error (error);
  return outline;
}

static gboolean
contains (const TfOutline *outline, double lon, double lat)
{
  double unit[3];
  tf_sphere_unit (lon, lat, unit);
  return tf_outline_contains (outline, unit);
}

/* Even-odd by another way than the program's: the angles under which the edges are seen from the
 * point add up to a whole number of turns. Great-circle edges, no projection. */
static gboolean
winds (const TfVertex *ring, guint n, double lon, double lat)
{
  double p[3], west[3], north[3], sum = 0.0, before = 0.0;
  tf_sphere_unit (lon, lat, p);
  tf_sphere_unit (lon + 90.0, 0.0, west);
  tf_sphere_unit (lon, lat + 90.0, north);
  for (guint k = 0; k <= n; k++)
    {
      double q[3], w = 0.0, h = 0.0;
      tf_sphere_unit (ring[k % n].lon_deg, ring[k % n].lat_deg, q);
      for (int j = 0; j < 3; j++)
        {
          w += q[j] * west[j];
          h += q[j] * north[j];
        }
      double angle = atan2 (h, w);
      if (k > 0)
        sum += remainder (angle - before, 2.0 * TF_PI);
      before = angle;
    }
  return ((int)lround (fabs (sum) / (2.0 * TF_PI))) % 2 == 1;
}

/* -- inside ---------------------------------------------------------------------------------- */

static void
test_cap (void)
{
  const double centres[][2] = { { 100.0, 10.0 }, { 0.3, -5.0 },   { 359.9, 40.0 },
                                { 20.0, 88.0 },  { 20.0, -90.0 }, { 180.0, 60.0 } };
  for (guint c = 0; c < G_N_ELEMENTS (centres); c++)
    for (double radius = 2.0; radius < 80.0; radius *= 3.0)
      {
        double lon, lat, r;
        g_autoptr (TfOutline) cap
            = tf_outline_new_cap (noon (), centres[c][0], centres[c][1], radius, 720);
        tf_outline_get_cap (cap, &lon, &lat, &r);
        tf_check_near ("centre", tf_sphere_distance (lon, lat, centres[c][0], centres[c][1]), 0.0,
                       1e-6);
        tf_check_near ("radius", r, radius, 1e-6);
        /* 720 corners: the polygon falls short of the circle by less than 5e-5 of it. */
        tf_check_near ("area",
                       tf_outline_area (cap, 1.0) / (2.0 * TF_PI * (1.0 - cos (radius * TF_DEG))),
                       1.0, 1e-4);
        for (double along = -180.0; along < 540.0; along += 7.3)
          for (double across = -90.0; across <= 90.0; across += 3.7)
            {
              double d = tf_sphere_distance (along, across, centres[c][0], centres[c][1]);
              if (fabs (d - radius) > 1e-3 * radius)
                g_assert_cmpint (contains (cap, along, across), ==, d < radius);
            }
      }
}

/* Stars with long arms, placed over the seam, at a pole and elsewhere. */
static void
test_stars (void)
{
  g_autoptr (GRand) rand = g_rand_new_with_seed (4711);
  for (int star = 0; star < 60; star++)
    {
      TfVertex ring[41];
      double lon0 = star % 3 == 0 ? 359.0 + 0.05 * star : g_rand_double_range (rand, 0.0, 360.0);
      double lat0 = star % 5 == 0 ? 86.0 : g_rand_double_range (rand, -85.0, 85.0);
      guint n = 3 + (guint)star % 38;
      g_autoptr (TfOutline) guide = tf_outline_new_cap (noon (), lon0, lat0, 1.0, 0);
      g_autoptr (TfOutline) round = tf_outline_new_cap (noon (), lon0, lat0, 12.0, n);
      guint count;
      const TfVertex *circle = tf_outline_get_ring (round, 0, FALSE, &count);
      for (guint k = 0; k < n; k++)
        {
          double c[3], p[3], f = g_rand_double_range (rand, 0.1, 1.0);
          tf_sphere_unit (lon0, lat0, c);
          tf_sphere_unit (circle[k].lon_deg, circle[k].lat_deg, p);
          for (int j = 0; j < 3; j++)
            p[j] = f * p[j] + (1.0 - f) * c[j];
          tf_sphere_lonlat (p, &ring[k].lon_deg, &ring[k].lat_deg);
        }
      g_autoptr (TfOutline) outline = tf_outline_new (noon (), ring, n, NULL);
      g_assert_nonnull (outline);
      for (int point = 0; point < 1000; point++)
        {
          double lat = CLAMP (lat0 + g_rand_double_range (rand, -14.0, 14.0), -90.0, 90.0);
          double lon
              = lon0 + g_rand_double_range (rand, -14.0, 14.0) / MAX (cos (lat * TF_DEG), 0.05);
          g_assert_cmpint (contains (outline, lon, lat), ==, winds (ring, n, lon, lat));
        }
    }
}

static void
test_great_circle_sides (void)
{
  /* The northern side from (-20, 40) to (20, 40) bulges north: at longitude 0 it passes
   * atan (tan 40 / cos 20) = 41.763 deg. */
  g_autoptr (TfOutline) outline = box (-20.0, 20.0, 10.0, 40.0);
  double top = atan (tan (40.0 * TF_DEG) / cos (20.0 * TF_DEG)) / TF_DEG;
  g_assert_true (contains (outline, 0.0, top - 1e-6));
  g_assert_false (contains (outline, 0.0, top + 1e-6));
  g_assert_false (contains (outline, 180.0, 20.0));
  g_assert_false (contains (outline, NAN, 20.0));
}

static void
test_holes_and_left_out (void)
{
  const TfVertex hole[] = { { 358.0, -2.0 }, { 2.0, -2.0 }, { 2.0, 2.0 }, { -2.0, 2.0 } };
  const TfVertex island[] = { { -0.5, -0.5 }, { 0.5, -0.5 }, { 0.5, 0.5 }, { -0.5, 0.5 } };
  const TfVertex out[] = { { 3.0, 3.0 }, { 9.0, 3.0 }, { 9.0, 9.0 }, { 3.0, 9.0 } };
  double unit[3];
  g_autoptr (TfOutline) plain = box (355.0, 365.0, -5.0, 5.0);
  g_autoptr (TfOutline) holed = tf_outline_with_ring (plain, hole, 4, FALSE, NULL);
  g_autoptr (TfOutline) island_in_hole = tf_outline_with_ring (holed, island, 4, FALSE, NULL);
  g_autoptr (TfOutline) all = tf_outline_with_ring (island_in_hole, out, 4, TRUE, NULL);
  g_assert_cmpuint (tf_outline_get_n_rings (all), ==, 3);
  g_assert_cmpuint (tf_outline_get_n_left_out (all), ==, 1);
  g_assert_cmpuint (tf_outline_get_n_rings (plain), ==, 1);
  g_assert_true (contains (all, 356.0, 0.0));
  g_assert_true (contains (all, 4.5, 0.0));
  g_assert_false (contains (all, 1.0, 1.0));
  g_assert_true (contains (all, 0.1, 0.1));
  g_assert_true (contains (plain, 4.0, 4.0));
  g_assert_false (contains (all, 4.0, 4.0));
  g_assert_false (contains (all, 6.0, 6.0));
  tf_sphere_unit (4.0, 4.0, unit);
  g_assert_true (tf_outline_contains_rings (all, unit));
  /* Areas by counting points on an even grid in sine latitude. */
  guint in = 0, total = 0;
  for (int i = 0; i < 600; i++)
    for (int k = 0; k < 600; k++, total++)
      in += contains (all, -6.0 + 12.0 * (i + 0.5) / 600.0,
                      asin (sin (6.0 * TF_DEG) * (-1.0 + 2.0 * (k + 0.5) / 600.0)) / TF_DEG);
  double window = 12.0 * TF_DEG * 2.0 * sin (6.0 * TF_DEG);
  tf_check_near ("area with hole, island and left-out area",
                 tf_outline_area (all, 1.0) / (window * in / total), 1.0, 0.002);
}

static void
test_areas (void)
{
  /* The octant: an eighth of the sphere, too large for one plane about a corner but not about its
   * middle. */
  const TfVertex octant[] = { { 0.0, 0.0 }, { 90.0, 0.0 }, { 0.0, 90.0 } };
  g_autoptr (TfOutline) eighth = tf_outline_new (noon (), octant, 3, NULL);
  tf_check_near ("an octant", tf_outline_area (eighth, 695.7), 4.0 * TF_PI * 695.7 * 695.7 / 8.0,
                 1e-3);
  /* A bow tie: even-odd counts both wings once, whichever way they turn. */
  const TfVertex tie[] = { { 0.0, -5.0 }, { 10.0, 5.0 }, { 10.0, -5.0 }, { 0.0, 5.0 } };
  const TfVertex wing[] = { { 0.0, -5.0 }, { 5.0, 0.0 }, { 0.0, 5.0 } };
  g_autoptr (TfOutline) bow = tf_outline_new (noon (), tie, 4, NULL);
  g_autoptr (TfOutline) half = tf_outline_new (noon (), wing, 3, NULL);
  tf_check_near ("a bow tie", tf_outline_area (bow, 1.0) / (2.0 * tf_outline_area (half, 1.0)), 1.0,
                 1e-9);
  /* A left-out area that reaches over the edge takes away only what is inside. */
  const TfVertex east[] = { { 5.0, -20.0 }, { 30.0, -20.0 }, { 30.0, 20.0 }, { 5.0, 20.0 } };
  g_autoptr (TfOutline) whole = box (0.0, 10.0, -5.0, 5.0);
  g_autoptr (TfOutline) cut = tf_outline_with_ring (whole, east, 4, TRUE, NULL);
  tf_check_near ("half left out", tf_outline_area (cut, 1.0) / tf_outline_area (whole, 1.0), 0.5,
                 1e-9);
}

/* A saw of as many teeth as is allowed, every edge from bottom to top: the worst case of the slabs. */
static void
test_many_vertices (void)
{
  const guint most = TF_OUTLINE_MOST_VERTICES;
  g_autofree TfVertex *saw = g_new (TfVertex, most + 1);
  for (guint k = 0; k <= most; k++)
    saw[k] = (TfVertex){ 20.0 * k / most, k % 2 == 0 ? -5.0 : 5.0 };
  g_autoptr (GError) error = NULL;
  g_autoptr (TfOutline) outline = tf_outline_new (noon (), saw, most, &error);
  g_assert_no_error (error);
  /* Each tooth is a triangle of half the box; the closing edge runs along the bottom. */
  g_autoptr (TfOutline) whole = box (0.0, 20.0, -5.0, 5.0);
  tf_check_between ("area of a saw", tf_outline_area (outline, 1.0) / tf_outline_area (whole, 1.0),
                    0.2, 0.8);
  for (int point = 0; point < 50; point++)
    {
      double lon = 0.4 * point + 0.03, lat = -4.9 + 0.19 * point;
      g_assert_cmpint (contains (outline, lon, lat), ==, winds (saw, most, lon, lat));
    }
  g_assert_null (tf_outline_new (noon (), saw, most + 1, &error));
  g_assert_error (error, TF_OUTLINE_ERROR, TF_OUTLINE_ERROR_SHAPE);
}

/* The two ways of summing an area, by slabs and by lines, meet. */
static void
test_area_of_many (void)
{
  g_autoptr (TfOutline) few = tf_outline_new_cap (noon (), 50.0, 30.0, 20.0, 1990);
  g_autoptr (TfOutline) many = tf_outline_new_cap (noon (), 50.0, 30.0, 20.0, 2010);
  tf_check_near ("area", tf_outline_area (many, 1.0) / tf_outline_area (few, 1.0), 1.0, 1e-4);
}

/* -- edits ----------------------------------------------------------------------------------- */

static void
test_runs_on (void)
{
  const TfVertex ring[] = { { 359.0, 0.0 }, { 1.0, 0.0 }, { 363.0, 4.0 }, { -2.0, 4.0 } };
  guint n;
  g_autoptr (TfOutline) outline = tf_outline_new (noon (), ring, 4, NULL);
  const TfVertex *got = tf_outline_get_ring (outline, 0, FALSE, &n);
  const double expected[] = { 359.0, 361.0, 363.0, 358.0 };
  g_assert_cmpuint (n, ==, 4);
  for (guint k = 0; k < n; k++)
    tf_check_near ("longitude", got[k].lon_deg, expected[k], 1e-12);
}

static void
check_refused (const TfVertex *ring, guint n)
{
  g_autoptr (GError) error = NULL;
  g_assert_null (tf_outline_new (noon (), ring, n, &error));
  g_assert_error (error, TF_OUTLINE_ERROR, TF_OUTLINE_ERROR_SHAPE);
}

static void
test_refusals (void)
{
  const TfVertex two[] = { { 0.0, 0.0 }, { 1.0, 1.0 } };
  const TfVertex high[] = { { 0.0, 0.0 }, { 1.0, 1.0 }, { 1.0, 90.5 } };
  const TfVertex none[] = { { 0.0, 0.0 }, { NAN, 1.0 }, { 1.0, 9.5 } };
  const TfVertex girdle[] = { { 0.0, 1.0 }, { 120.0, -1.0 }, { 240.0, 1.0 } };
  check_refused (two, 2);
  check_refused (two, 0);
  check_refused (high, 3);
  check_refused (none, 3);
  check_refused (girdle, 3);
  g_assert_null (tf_outline_new_cap (noon (), 0.0, 0.0, 90.0, 0));
  g_assert_null (tf_outline_new_cap (noon (), NAN, 0.0, 9.0, 0));
  g_autoptr (TfOutline) good = box (0.0, 10.0, -5.0, 5.0);
  g_autoptr (GError) error = NULL;
  const TfVertex away[] = { { 180.0, 0.0 }, { 190.0, 0.0 }, { 185.0, 9.0 } };
  g_assert_null (tf_outline_with_ring (good, away, 3, TRUE, &error));
  g_assert_error (error, TF_OUTLINE_ERROR, TF_OUTLINE_ERROR_SHAPE);
  /* All vertices in one place: an outline without inside, not a crash. */
  const TfVertex point[] = { { 5.0, 5.0 }, { 5.0, 5.0 }, { 5.0, 5.0 } };
  g_autoptr (TfOutline) empty = tf_outline_new (noon (), point, 3, NULL);
  if (empty != NULL)
    {
      tf_check_near ("area of a point", tf_outline_area (empty, 1.0), 0.0, 1e-15);
      g_assert_false (contains (empty, 5.1, 5.0));
    }
}

static void
test_split (void)
{
  const TfVertex hole[] = { { 353.0, 4.0 }, { 354.0, 4.0 }, { 354.0, 5.0 }, { 353.0, 5.0 } };
  const TfVertex out[] = { { -1.0, -4.0 }, { 1.0, -4.0 }, { 1.0, -2.0 }, { -1.0, -2.0 } };
  const TfPinnedPole pin = { 1, 6.0, 0.0, "seen so", "A" };
  g_autoptr (GError) error = NULL;
  g_autoptr (TfOutline) plain = box (350.0, 370.0, -10.0, 10.0);
  g_autoptr (TfOutline) holed = tf_outline_with_ring (plain, hole, 4, FALSE, NULL);
  g_autoptr (TfOutline) left = tf_outline_with_ring (holed, out, 4, TRUE, NULL);
  g_autoptr (TfOutline) whole = tf_outline_with_pin (left, &pin);
  TfOutline *one = NULL, *other = NULL;
  g_assert_true (tf_outline_split (whole, (TfVertex){ 0.0, -15.0 }, (TfVertex){ 0.0, 15.0 }, &one,
                                   &other, &error));
  g_assert_no_error (error);
  double area = tf_outline_area (whole, 1.0), a = tf_outline_area (one, 1.0),
         b = tf_outline_area (other, 1.0);
  tf_check_near ("the two are the whole", (a + b) / area, 1.0, 1e-9);
  tf_check_near ("one differs from the other by the hole", b - a,
                 tf_outline_area (holed, 1.0) * -1.0 + tf_outline_area (plain, 1.0), 1e-9);
  /* The first is to the left of the line, east when it runs north. */
  g_assert_true (contains (one, 355.0, 0.0));
  g_assert_false (contains (one, 5.0, 0.0));
  g_assert_false (contains (one, 353.5, 4.5));
  g_assert_true (contains (other, 5.0, 0.0));
  g_assert_false (contains (other, 0.5, -3.0));
  g_assert_cmpuint (tf_outline_get_n_rings (one), ==, 2);
  g_assert_cmpuint (tf_outline_get_n_rings (other), ==, 1);
  g_assert_cmpuint (tf_outline_get_n_left_out (one), ==, 1);
  g_assert_cmpuint (tf_outline_get_n_left_out (other), ==, 1);
  g_assert_cmpuint (tf_outline_get_n_pins (one), ==, 0);
  g_assert_cmpuint (tf_outline_get_n_pins (other), ==, 1);
  tf_outline_unref (one);
  tf_outline_unref (other);
  g_assert_false (tf_outline_split (whole, (TfVertex){ 0.0, 0.0 }, (TfVertex){ 0.0, 15.0 }, &one,
                                    &other, &error));
  g_assert_error (error, TF_OUTLINE_ERROR, TF_OUTLINE_ERROR_SHAPE);
  g_assert_null (one);
  g_assert_null (other);
}

/* A line drawn backwards or slanting keeps the meaning of left; every point goes to exactly one
 * side. */
static void
test_split_sides (void)
{
  g_autoptr (GRand) rand = g_rand_new_with_seed (99);
  for (int k = 0; k < 40; k++)
    {
      double turn = k * 9.0 * TF_DEG;
      TfVertex a = { 200.0 - 30.0 * cos (turn), 10.0 - 30.0 * sin (turn) };
      TfVertex b = { 200.0 + 30.0 * cos (turn), 10.0 + 30.0 * sin (turn) };
      g_autoptr (TfOutline) cap = tf_outline_new_cap (noon (), 200.0, 10.0, 12.0, 37);
      TfOutline *halves[2] = { NULL, NULL };
      g_assert_true (tf_outline_split (cap, a, b, &halves[0], &halves[1], NULL));
      double lon, lat, r;
      tf_outline_get_cap (halves[0], &lon, &lat, &r);
      g_assert_true (cos (turn) * (lat - 10.0) - sin (turn) * (lon - 200.0) > 1.0);
      for (int point = 0; point < 100; point++)
        {
          double x = g_rand_double_range (rand, 185.0, 215.0),
                 y = g_rand_double_range (rand, -5.0, 25.0);
          g_assert_cmpint (contains (halves[0], x, y) + contains (halves[1], x, y), ==,
                           contains (cap, x, y));
        }
      tf_outline_unref (halves[0]);
      tf_outline_unref (halves[1]);
    }
}

static void
test_deform (void)
{
  const double none[3] = { 0.0, 0.0, 0.0 }, phases[3] = { 0.3, 1.0, 2.0 },
               third[3] = { 0.0, 0.0, 1.5 };
  const double centres[][2] = { { 10.0, 20.0 }, { 359.9, -35.0 }, { 77.0, 89.0 } };
  for (guint c = 0; c < G_N_ELEMENTS (centres); c++)
    {
      g_autoptr (TfOutline) cap
          = tf_outline_new_cap (noon (), centres[c][0], centres[c][1], 6.0, 0);
      g_autoptr (TfOutline) same = tf_outline_deform (cap, 0.0, 0.0, 1.0, none, phases);
      g_autoptr (TfOutline) moved = tf_outline_deform (cap, 0.0, 2.0, 1.0, none, phases);
      g_autoptr (TfOutline) larger = tf_outline_deform (cap, 0.0, 0.0, 1.2, none, phases);
      g_autoptr (TfOutline) clover = tf_outline_deform (cap, 0.0, 0.0, 1.0, third, phases);
      double lon, lat, r;
      guint n;
      tf_check_near ("area of the same", tf_outline_area (same, 1.0) / tf_outline_area (cap, 1.0),
                     1.0, 1e-9);
      tf_outline_get_cap (moved, &lon, &lat, &r);
      tf_check_near ("moved by 2 deg", tf_sphere_distance (lon, lat, centres[c][0], centres[c][1]),
                     2.0, 2e-2);
      tf_outline_get_cap (larger, &lon, &lat, &r);
      tf_check_near ("larger by a fifth", r, 7.2, 1e-6);
      const TfVertex *ring = tf_outline_get_ring (clover, 0, FALSE, &n);
      double least = 99.0, most = 0.0;
      for (guint k = 0; k < n; k++)
        {
          double d
              = tf_sphere_distance (ring[k].lon_deg, ring[k].lat_deg, centres[c][0], centres[c][1]);
          least = MIN (least, d);
          most = MAX (most, d);
        }
      tf_check_near ("three lobes out", most, 7.5, 0.02);
      tf_check_near ("and in", least, 4.5, 0.02);
    }
  /* West is towards greater longitude. */
  g_autoptr (TfOutline) cap = tf_outline_new_cap (noon (), 10.0, 0.0, 6.0, 0);
  g_autoptr (TfOutline) west = tf_outline_deform (cap, 3.0, 0.0, 1.0, none, phases);
  double lon, lat, r;
  tf_outline_get_cap (west, &lon, &lat, &r);
  tf_check_near ("west", lon, 13.0, 0.01);
}

static void
test_simplify (void)
{
  guint n, before;
  g_autoptr (TfOutline) cap = tf_outline_new_cap (noon (), 355.0, 30.0, 8.0, 1000);
  g_autoptr (TfOutline) simple = tf_outline_simplify (cap, 0.05);
  tf_outline_get_ring (cap, 0, FALSE, &before);
  tf_outline_get_ring (simple, 0, FALSE, &n);
  g_assert_cmpuint (before, ==, 1000);
  g_assert_cmpuint (n, <, 60);
  tf_check_near ("area", tf_outline_area (simple, 1.0) / tf_outline_area (cap, 1.0), 1.0, 0.01);
  for (double tolerance = 0.0; tolerance < 100.0; tolerance = 3.0 * tolerance + 0.01)
    {
      g_autoptr (TfOutline) rough = tf_outline_simplify (cap, tolerance);
      tf_outline_get_ring (rough, 0, FALSE, &n);
      g_assert_cmpuint (n, >=, 3);
    }
}

static void
test_carry (void)
{
  const TfPinnedPole pin = { -1, 359.0, 30.0, NULL, NULL };
  g_autoptr (TfOutline) plain = box (355.0, 365.0, 0.0, 30.0);
  g_autoptr (TfOutline) outline = tf_outline_with_pin (plain, &pin);
  TfTime later = tf_time_add (noon (), 5.0 * TF_DAY_S);
  g_autoptr (TfOutline) moved = tf_outline_carry (outline, later, 0);
  g_autoptr (TfOutline) back = tf_outline_carry (moved, noon (), 0);
  guint n;
  const TfVertex *ring = tf_outline_get_ring (moved, 0, FALSE, &n);
  for (guint k = 0; k < n; k++)
    {
      const TfVertex *old = tf_outline_get_ring (outline, 0, FALSE, &n);
      tf_check_angle ("a vertex carried for 5 days", ring[k].lon_deg,
                      old[k].lon_deg + 5.0 * (tf_rotation_rate (0, old[k].lat_deg) - 14.1844),
                      1e-9);
      tf_check_near ("its latitude", ring[k].lat_deg, old[k].lat_deg, 0.0);
    }
  tf_check_angle ("the pin too", tf_outline_get_pin (moved, 0)->lon_deg,
                  359.0 + 5.0 * (tf_rotation_rate (0, 30.0) - 14.1844), 1e-9);
  tf_check_near ("time", tf_outline_get_time (moved).s, later.s, 0.0);
  const TfVertex *again = tf_outline_get_ring (back, 0, FALSE, &n);
  tf_check_angle ("and back", again[2].lon_deg, 365.0, 1e-9);
  g_assert_null (tf_outline_carry (outline, TF_TIME_UNKNOWN, 0));
}

static void
test_pins (void)
{
  const TfPinnedPole plus = { 1, 5.0, 1.0, "old", "A" }, minus = { -1, 3.0, 1.0, NULL, NULL };
  const TfPinnedPole moved = { 1, 7.0, 2.0, "new", "B" };
  g_autoptr (TfOutline) outline = box (0.0, 10.0, -5.0, 5.0);
  g_autoptr (TfOutline) one = tf_outline_with_pin (outline, &plus);
  g_autoptr (TfOutline) two = tf_outline_with_pin (one, &minus);
  g_autoptr (TfOutline) again = tf_outline_with_pin (two, &moved);
  g_autoptr (TfOutline) none = tf_outline_with_pin (again, NULL);
  g_assert_cmpuint (tf_outline_get_n_pins (outline), ==, 0);
  g_assert_cmpuint (tf_outline_get_n_pins (one), ==, 1);
  g_assert_cmpuint (tf_outline_get_n_pins (again), ==, 2);
  g_assert_cmpstr (tf_outline_get_pin (again, 0)->reason, ==, "new");
  g_assert_cmpstr (tf_outline_get_pin (two, 0)->person, ==, "A");
  tf_check_near ("moved", tf_outline_get_pin (again, 0)->lon_deg, 7.0, 0.0);
  g_assert_cmpuint (tf_outline_get_n_pins (none), ==, 0);
  g_assert_true (tf_outline_equal (none, outline));
  g_assert_false (tf_outline_equal (one, outline));
  g_assert_false (tf_outline_equal (again, two));
}

/* -- JSON ------------------------------------------------------------------------------------ */

static void
check_json (const TfOutline *outline)
{
  g_autoptr (GError) error = NULL;
  g_autofree char *text = tf_outline_dup_text (outline);
  g_autoptr (TfOutline) read = tf_outline_from_text (text, &error);
  g_assert_no_error (error);
  g_autofree char *again = tf_outline_dup_text (read);
  g_assert_true (tf_outline_equal (outline, read));
  g_assert_cmpstr (text, ==, again);
}

static void
test_json (void)
{
  const TfPinnedPole plus = { 1, 355.123456789, 1.0, "he said \"here\"", "Ann" },
                     minus = { -1, 3.0, 1.0, NULL, NULL };
  const TfVertex out[] = { { 359.0, 0.1 }, { 1.0, 0.2 }, { 0.0, 1.0 / 3.0 } };
  g_autoptr (TfOutline) plain
      = tf_outline_new_cap (tf_time_read ("2013-10-12T06:00:00.123456Z"), 359.0, 12.0, 5.0, 0);
  g_autoptr (TfOutline) left = tf_outline_with_ring (plain, out, 3, TRUE, NULL);
  g_autoptr (TfOutline) one = tf_outline_with_pin (left, &plus);
  g_autoptr (TfOutline) two = tf_outline_with_pin (one, &minus);
  g_autoptr (TfOutline) timeless = tf_outline_new (TF_TIME_UNKNOWN, out, 3, NULL);
  g_autoptr (TfOutline) polar = tf_outline_new_cap (noon (), 10.0, -89.0, 5.0, 0);
  check_json (plain);
  check_json (left);
  check_json (one);
  check_json (two);
  check_json (timeless);
  check_json (polar);
  const TfVertex square[] = { { 10.0, 1.0 }, { 11.5, 1.0 }, { 11.0, 2.0 } };
  g_autoptr (TfOutline) small = tf_outline_new (noon (), square, 3, NULL);
  g_autofree char *text = tf_outline_dup_text (small);
  g_assert_cmpstr (text, ==,
                   "{\"frame\":\"carrington\",\"time\":\"2013-10-12T12:00:00Z\",\"rings\":[[[10,1],"
                   "[11.5,1],[11,2]]],"
                   "\"left_out\":[],\"pinned\":null}");
}

static void
test_bad_json (void)
{
  const struct
  {
    const char *text;
    TfOutlineError code;
  } rows[] = {
    { "", TF_OUTLINE_ERROR_FORM },
    { "null", TF_OUTLINE_ERROR_FORM },
    { "{", TF_OUTLINE_ERROR_FORM },
    { "[1, 2]", TF_OUTLINE_ERROR_FORM },
    { "{\"frame\":\"stonyhurst\",\"rings\":[[[0,0],[1,0],[1,1]]]}", TF_OUTLINE_ERROR_FORM },
    { "{\"frame\":\"carrington\"}", TF_OUTLINE_ERROR_FORM },
    { "{\"frame\":\"carrington\",\"rings\":7}", TF_OUTLINE_ERROR_FORM },
    { "{\"frame\":\"carrington\",\"rings\":[]}", TF_OUTLINE_ERROR_SHAPE },
    { "{\"frame\":\"carrington\",\"rings\":[[]]}", TF_OUTLINE_ERROR_SHAPE },
    { "{\"frame\":\"carrington\",\"rings\":[[[0,0],[1,0]]]}", TF_OUTLINE_ERROR_SHAPE },
    { "{\"frame\":\"carrington\",\"rings\":[[0,0],[1,0],[1,1]]}", TF_OUTLINE_ERROR_FORM },
    { "{\"frame\":\"carrington\",\"rings\":[[[0,0,0],[1,0],[1,1]]]}", TF_OUTLINE_ERROR_FORM },
    { "{\"frame\":\"carrington\",\"rings\":[[[0,null],[1,0],[1,1]]]}", TF_OUTLINE_ERROR_SHAPE },
    { "{\"frame\":\"carrington\",\"rings\":[[[0,\"a\"],[1,0],[1,1]]]}", TF_OUTLINE_ERROR_SHAPE },
    { "{\"frame\":\"carrington\",\"rings\":[[[0,0],[1,0],[1,91]]]}", TF_OUTLINE_ERROR_SHAPE },
    { "{\"frame\":\"carrington\",\"rings\":[[[0,0],[1,0],[1e300,1]]]}", TF_OUTLINE_ERROR_SHAPE },
    { "{\"frame\":\"carrington\",\"rings\":[[[0,0],[120,0],[240,0]]]}", TF_OUTLINE_ERROR_SHAPE },
    { "{\"frame\":\"carrington\",\"rings\":[[[0,0],[1,0],[1,1]]],\"left_out\":\"x\"}",
      TF_OUTLINE_ERROR_FORM },
    { "{\"frame\":\"carrington\",\"rings\":[[[0,0],[1,0],[1,1]]],\"left_out\":[[1]]}",
      TF_OUTLINE_ERROR_FORM },
    { "{\"frame\":\"carrington\",\"time\":\"soon\",\"rings\":[[[0,0],[1,0],[1,1]]]}",
      TF_OUTLINE_ERROR_FORM },
    { "{\"frame\":\"carrington\",\"time\":7,\"rings\":[[[0,0],[1,0],[1,1]]]}",
      TF_OUTLINE_ERROR_FORM },
    { "{\"frame\":\"carrington\",\"rings\":[[[0,0],[1,0],[1,1]]],\"pinned\":3}",
      TF_OUTLINE_ERROR_FORM },
    { "{\"frame\":\"carrington\",\"rings\":[[[0,0],[1,0],[1,1]]],\"pinned\":{}}",
      TF_OUTLINE_ERROR_FORM },
    { "{\"frame\":\"carrington\",\"rings\":[[[0,0],[1,0],[1,1]]],\"pinned\":{\"polarity\":2,"
      "\"lon\":1,\"lat\":1}}",
      TF_OUTLINE_ERROR_FORM },
  };
  for (guint k = 0; k < G_N_ELEMENTS (rows); k++)
    {
      g_autoptr (GError) error = NULL;
      g_autoptr (TfOutline) outline = tf_outline_from_text (rows[k].text, &error);
      g_test_message ("%s: %s", rows[k].text, error != NULL ? error->message : "read");
      g_assert_null (outline);
      g_assert_error (error, TF_OUTLINE_ERROR, (int)rows[k].code);
    }
}

void
add_outline_tests (void)
{
  g_test_add_func ("/sun/outline/a-cap-holds-what-is-within-its-radius", test_cap);
  g_test_add_func ("/sun/outline/stars-agree-with-the-winding-of-their-edges", test_stars);
  g_test_add_func ("/sun/outline/sides-are-great-circles", test_great_circle_sides);
  g_test_add_func ("/sun/outline/holes-and-left-out-areas-are-outside", test_holes_and_left_out);
  g_test_add_func ("/sun/outline/areas-count-what-is-inside", test_areas);
  g_test_add_func ("/sun/outline/a-saw-of-twenty-thousand-teeth-is-borne", test_many_vertices);
  g_test_add_func ("/sun/outline/areas-of-few-and-many-vertices-meet", test_area_of_many);
  g_test_add_func ("/sun/outline/longitudes-run-on-over-the-seam", test_runs_on);
  g_test_add_func ("/sun/outline/what-is-no-outline-is-refused", test_refusals);
  g_test_add_func ("/sun/outline/a-split-shares-everything-out", test_split);
  g_test_add_func ("/sun/outline/the-first-half-lies-to-the-left", test_split_sides);
  g_test_add_func ("/sun/outline/deforming-moves-scales-and-waves", test_deform);
  g_test_add_func ("/sun/outline/simplifying-keeps-the-shape", test_simplify);
  g_test_add_func ("/sun/outline/carrying-follows-the-law-at-each-vertex", test_carry);
  g_test_add_func ("/sun/outline/pins-replace-one-of-the-same-polarity", test_pins);
  g_test_add_func ("/sun/outline/json-comes-back-the-same", test_json);
  g_test_add_func ("/sun/outline/bad-json-is-told-what-is-wrong", test_bad_json);
}
