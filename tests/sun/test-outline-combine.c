/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Brushing and joining: point by point what the two shapes together say, and nothing moved that was
 * not touched. */

#include "test-sun.h"

#include <math.h>

#include "tf-check.h"
#include "tf-constants.h"
#include "tf-outline.h"

static const double edge = 0.012; /* share of the brush's radius that its 24 corners may lie inside */

static TfTime
noon (void)
{
  return tf_time_read ("2013-10-12T12:00:00Z");
}

static gboolean
contains (const TfOutline *outline, double lon, double lat)
{
  double unit[3];
  tf_sphere_unit (lon, lat, unit);
  return tf_outline_contains (outline, unit);
}

static TfOutline *
brush (const TfOutline *outline, double lon, double lat, double radius, gboolean in)
{
  g_autoptr (GError) error = NULL;
  TfVertex at = { lon, lat };
  TfOutline *brushed = tf_outline_brush (outline, at, at, radius, in, &error);
  g_assert_no_error (error);
  return brushed;
}

/* Every place of a lattice that is not on the brush's very edge. */
static void
check_stamp (const TfOutline *before, const TfOutline *after, double lon, double lat, double radius,
             gboolean in)
{
  for (double x = lon - 2 * radius; x <= lon + 2 * radius; x += radius / 7.3)
    for (double y = lat - 2 * radius; y <= lat + 2 * radius; y += radius / 7.3)
      {
        double away = tf_sphere_distance (x, y, lon, lat) / radius;
        if (fabs (away - 1.0) > edge)
          g_assert_true (contains (after, x, y)
                         == (away < 1.0 ? in : contains (before, x, y)));
      }
}

static gboolean
has_vertex (const TfOutline *outline, TfVertex vertex)
{
  for (guint k = 0; k < tf_outline_get_n_rings (outline); k++)
    {
      guint n;
      const TfVertex *ring = tf_outline_get_ring (outline, k, FALSE, &n);
      for (guint j = 0; j < n; j++)
        if (fabs (remainder (ring[j].lon_deg - vertex.lon_deg, 360.0)) < 1e-12
            && fabs (ring[j].lat_deg - vertex.lat_deg) <= 0.0)
          return TRUE;
    }
  return FALSE;
}

static void
check_untouched (const TfOutline *before, const TfOutline *after, double lon, double lat,
                 double radius)
{
  guint n;
  const TfVertex *ring = tf_outline_get_ring (before, 0, FALSE, &n);
  for (guint k = 0; k < n; k++)
    if (tf_sphere_distance (ring[k].lon_deg, ring[k].lat_deg, lon, lat) > radius)
      g_assert_true (has_vertex (after, ring[k]));
}

static void
test_edge (void)
{
  const double places[][2] = { { 5.9, 10.0 }, { 0.1, 15.7 }, { 359.0, 4.6 }, { 355.0, 7.0 } };
  g_autoptr (TfOutline) cap = tf_outline_new_cap (noon (), 0.0, 10.0, 6.0, 0);
  for (guint k = 0; k < G_N_ELEMENTS (places); k++)
    for (int in = 0; in < 2; in++)
      {
        double lon = places[k][0], lat = places[k][1];
        g_autoptr (TfOutline) brushed = brush (cap, lon, lat, 1.5, in);
        check_stamp (cap, brushed, lon, lat, 1.5, in);
        check_untouched (cap, brushed, lon, lat, 1.5);
        g_assert_cmpuint (tf_outline_get_n_rings (brushed), ==, 1);
      }
}

static void
test_hole_and_island (void)
{
  g_autoptr (TfOutline) cap = tf_outline_new_cap (noon (), 120.0, -20.0, 6.0, 0);
  g_autoptr (TfOutline) hole = brush (cap, 120.0, -20.0, 2.0, FALSE);
  g_assert_cmpuint (tf_outline_get_n_rings (hole), ==, 2);
  check_stamp (cap, hole, 120.0, -20.0, 2.0, FALSE);
  g_autoptr (TfOutline) closed = brush (hole, 120.3, -20.1, 3.0, TRUE);
  g_assert_cmpuint (tf_outline_get_n_rings (closed), ==, 1);
  g_autoptr (TfOutline) island = brush (cap, 135.0, -20.0, 1.0, TRUE);
  g_assert_cmpuint (tf_outline_get_n_rings (island), ==, 2);
  check_stamp (cap, island, 135.0, -20.0, 1.0, TRUE);
}

/* The area that a round brush adds well outside is a cap's, 2 pi R2 (1 - cos r), less what its 24
 * corners leave out: 1 - sin (2 pi / 24) / (2 pi / 24) = 1.14 %. */
static void
test_area (void)
{
  g_autoptr (TfOutline) cap = tf_outline_new_cap (noon (), 40.0, 12.0, 4.0, 720);
  g_autoptr (TfOutline) more = brush (cap, 55.0, 12.0, 2.0, TRUE);
  double added = tf_outline_area (more, 695.7) - tf_outline_area (cap, 695.7);
  double whole = 2.0 * TF_PI * 695.7 * 695.7 * (1.0 - cos (2.0 * TF_DEG));
  tf_check_near ("share of the cap", added / whole, 0.98862, 2e-5);
}

static void
test_same_place_again (void)
{
  g_autoptr (TfOutline) cap = tf_outline_new_cap (noon (), 40.0, 12.0, 4.0, 0);
  g_autoptr (TfOutline) once = brush (cap, 44.0, 12.0, 1.5, TRUE);
  g_autoptr (TfOutline) twice = brush (once, 44.0, 12.0, 1.5, TRUE);
  g_autoptr (TfOutline) away = brush (twice, 44.0, 12.0, 1.5, FALSE);
  tf_check_near ("area", tf_outline_area (twice, 695.7) / tf_outline_area (once, 695.7), 1.0, 1e-6);
  check_stamp (twice, away, 44.0, 12.0, 1.5, FALSE);
}

static void
test_nothing_left (void)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfOutline) cap = tf_outline_new_cap (noon (), 40.0, 12.0, 1.0, 0);
  TfVertex at = { 40.0, 12.0 };
  g_assert_null (tf_outline_brush (cap, at, at, 3.0, FALSE, &error));
  g_assert_error (error, TF_OUTLINE_ERROR, TF_OUTLINE_ERROR_SHAPE);
}

static void
test_left_out_comes_back (void)
{
  const TfVertex out[] = { { 38, 10 }, { 42, 10 }, { 42, 14 }, { 38, 14 } };
  g_autoptr (TfOutline) cap = tf_outline_new_cap (noon (), 40.0, 12.0, 6.0, 0);
  g_autoptr (TfOutline) without = tf_outline_with_ring (cap, out, 4, TRUE, NULL);
  g_assert_false (contains (without, 41.0, 12.0));
  g_autoptr (TfOutline) back = brush (without, 42.0, 12.0, 1.5, TRUE);
  g_assert_true (contains (back, 41.0, 12.0));
  g_assert_false (contains (back, 39.0, 12.0));
  g_autoptr (TfOutline) all = brush (without, 40.0, 12.0, 4.0, TRUE);
  g_assert_cmpuint (tf_outline_get_n_left_out (all), ==, 0);
}

/* A hand that goes to and fro: after every move each place is as the strokes so far have it. */
static void
test_many_strokes (void)
{
  enum
  {
    PLACES = 300,
    STROKES = 120
  };
  g_autoptr (GRand) chance = g_rand_new_with_seed (20131012);
  g_autoptr (TfOutline) now = tf_outline_new_cap (noon (), 200.0, 15.0, 6.0, 0);
  double lon[PLACES], lat[PLACES];
  gboolean in[PLACES], unsure[PLACES];
  for (guint k = 0; k < PLACES; k++)
    {
      lon[k] = g_rand_double_range (chance, 190, 210);
      lat[k] = g_rand_double_range (chance, 5, 25);
      in[k] = contains (now, lon[k], lat[k]);
      unsure[k] = FALSE;
    }
  for (guint s = 0; s < STROKES; s++)
    {
      double x = g_rand_double_range (chance, 193, 207), y = g_rand_double_range (chance, 8, 22);
      double radius = g_rand_double_range (chance, 0.4, 2.5);
      gboolean add = g_rand_double (chance) < 0.55;
      TfOutline *next = brush (now, x, y, radius, add);
      for (guint k = 0; k < PLACES; k++)
        {
          double away = tf_sphere_distance (lon[k], lat[k], x, y) / radius;
          unsure[k] = (unsure[k] || fabs (away - 1.0) < edge) && !(away < 1.0 - edge);
          if (away < 1.0)
            in[k] = add;
          if (!unsure[k])
            g_assert_true (contains (next, lon[k], lat[k]) == in[k]);
        }
      tf_outline_unref (now);
      now = next;
    }
}

static void
test_simplify_new (void)
{
  g_autoptr (TfOutline) cap = tf_outline_new_cap (noon (), 40.0, 12.0, 4.0, 0);
  g_autoptr (TfOutline) now = tf_outline_ref (cap);
  for (guint k = 0; k < 60; k++) /* a slow hand */
    {
      TfOutline *next = brush (now, 44.0 + 0.02 * k, 12.0 + 0.01 * k, 1.0, TRUE);
      tf_outline_unref (now);
      now = next;
    }
  g_autoptr (TfOutline) simple = tf_outline_simplify_new (now, cap, 0.02);
  guint many, few;
  tf_outline_get_ring (now, 0, FALSE, &many);
  tf_outline_get_ring (simple, 0, FALSE, &few);
  g_assert_cmpuint (few, <, many);
  check_untouched (cap, simple, 44.6, 12.3, 1.8);
  tf_check_near ("area", tf_outline_area (simple, 695.7) / tf_outline_area (now, 695.7), 1.0, 2e-3);
}

static void
test_join (void)
{
  g_autoptr (TfOutline) one = tf_outline_new_cap (noon (), 358.0, 10.0, 4.0, 0);
  g_autoptr (TfOutline) two = tf_outline_new_cap (noon (), 3.0, 12.0, 3.0, 0);
  g_autoptr (TfOutline) far = tf_outline_new_cap (noon (), 20.0, 12.0, 3.0, 0);
  g_autoptr (TfOutline) joined = tf_outline_join (one, two, NULL);
  g_autoptr (TfOutline) apart = tf_outline_join (one, far, NULL);
  g_autoptr (TfOutline) same = tf_outline_join (one, one, NULL);
  g_assert_cmpuint (tf_outline_get_n_rings (joined), ==, 1);
  g_assert_cmpuint (tf_outline_get_n_rings (apart), ==, 2);
  for (double lon = -8; lon < 10; lon += 0.37)
    for (double lat = 2; lat < 20; lat += 0.37)
      g_assert_true (contains (joined, lon, lat)
                     == (contains (one, lon, lat) || contains (two, lon, lat)));
  tf_check_near ("with itself", tf_outline_area (same, 695.7) / tf_outline_area (one, 695.7), 1.0,
                 1e-5);
  g_assert_true (contains (apart, 20.0, 12.0));
}

void
add_outline_combine_tests (void)
{
  g_test_add_func ("/sun/outline/a-brush-at-the-edge", test_edge);
  g_test_add_func ("/sun/outline/a-brush-makes-a-hole-or-an-island", test_hole_and_island);
  g_test_add_func ("/sun/outline/a-brush-adds-a-cap", test_area);
  g_test_add_func ("/sun/outline/a-brush-twice-at-one-place", test_same_place_again);
  g_test_add_func ("/sun/outline/a-brush-leaves-something", test_nothing_left);
  g_test_add_func ("/sun/outline/a-brush-brings-left-out-areas-back", test_left_out_comes_back);
  g_test_add_func ("/sun/outline/many-strokes", test_many_strokes);
  g_test_add_func ("/sun/outline/only-new-vertices-are-thinned", test_simplify_new);
  g_test_add_func ("/sun/outline/joining", test_join);
}
