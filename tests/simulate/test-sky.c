/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-simulate.h"

#include <math.h>

#include "tf-constants.h"
#include "tf-json.h"

/* Pole of Gaussian width sigma on a plane: flux = 2 pi sigma^2 R^2 B (reference page 9.1 (a):
 * pi d^2 R^2 B with d^2 = 2 sigma^2). */
static void
test_flux_closed_form (void)
{
  TfTime epoch = tf_time_read ("2013-10-12T06:00:00Z");
  g_autoptr (TfSun) sun = tf_sun_new (epoch, 1);
  TfBlob blob = { 20.0, 100.0, 0.5, 3e21 };
  double unit[3], sigma_cm = 0.5 * TF_DEG * TF_RADIUS_MM * 1e8;
  Moment moment[2];
  tf_sun_add_blob (sun, "one", "blob", &blob);
  tf_sphere_unit (100.0, 20.0, unit);
  double peak = 3e21 / (2 * TF_PI * sigma_cm * sigma_cm);
  tf_check_near ("peak / closed form", tf_sun_field (sun, epoch, unit) / peak, 1.0, 1e-3);
  integrate (sun, epoch, 100.0, 20.0, 3.5, 0.05, moment);
  tf_check_near ("flux / asked", moment[0].flux_mx / 3e21, 1.0, 1e-3);
  tf_check_near ("flux of the other sign", moment[1].flux_mx, 0.0, 1e10);
  tf_check_near ("lon", moment[0].lon_deg, 100.0, 1e-4);
  tf_check_near ("lat", moment[0].lat_deg, 20.0, 1e-4);
}

static void
test_balance (void)
{
  TfTime epoch = tf_time_read ("2013-10-12T06:00:00Z");
  g_autoptr (TfSun) sun = tf_sun_new (epoch, 1);
  TfBipole bipole = two_poles (50.0, -15.0);
  Moment moment[2];
  double positive, negative;
  tf_sun_add_bipole (sun, "one", "bipole", &bipole);
  g_assert_true (tf_sun_flux (sun, "one", epoch, &positive, &negative));
  tf_check_near ("positive", positive, 5e21, 1e6);
  tf_check_near ("net", positive - negative, 0.0, 1e6); /* sums of doubles near 1e22 */
  g_assert_false (tf_sun_flux (sun, "two", epoch, &positive, &negative));
  integrate (sun, epoch, 50.0, -15.0, 13.0, 0.1, moment);
  tf_check_near ("drawn net / flux", (moment[0].flux_mx - moment[1].flux_mx) / 5e21, 0.0, 1e-4);
  tf_check_near ("drawn flux / asked", moment[0].flux_mx / 5e21, 1.0,
                 2e-3); /* poles overlap a little */
}

static void
test_imbalance (void)
{
  TfTime epoch = tf_time_read ("2013-10-12T06:00:00Z");
  g_autoptr (TfSun) sun = tf_sun_new (epoch, 1);
  TfBipole bipole = two_poles (50.0, -15.0);
  double positive, negative;
  bipole.imbalance = 0.2;
  tf_sun_add_bipole (sun, "one", "bipole", &bipole);
  tf_sun_flux (sun, "one", epoch, &positive, &negative);
  tf_check_near ("following", positive / 4e21, 1.0, 1e-12);
  tf_check_near ("leading", negative / 5e21, 1.0, 1e-12);
}

static void
test_tilt_and_separation (void)
{
  static const double lats[] = { 15.0, -15.0, 33.0, -4.5 }, tilts[] = { 12.0, -30.0, 0.0, 65.0 };
  TfTime epoch = tf_time_read ("2013-10-12T06:00:00Z");
  for (guint k = 0; k < G_N_ELEMENTS (lats) * G_N_ELEMENTS (tilts); k++)
    {
      g_autoptr (TfSun) sun = tf_sun_new (epoch, 1);
      TfBipole bipole = two_poles (200.0, lats[k % 4]);
      Moment moment[2];
      bipole.axis_tilt_deg = tilts[k / 4];
      bipole.lead_radius_deg = bipole.follow_radius_deg = 0.6; /* far apart: nothing cancels */
      tf_sun_add_bipole (sun, "one", "bipole", &bipole);
      integrate (sun, epoch, 200.0, lats[k % 4], 10.0, 0.1, moment);
      if (fabs (lats[k % 4]) > 5.0)
        tf_check_near ("tilt", planar_tilt (&moment[1], &moment[0]), tilts[k / 4], 0.005);
      tf_check_near ("separation",
                     tf_sphere_distance (moment[0].lon_deg, moment[0].lat_deg, moment[1].lon_deg,
                                         moment[1].lat_deg),
                     8.0, 0.002);
      g_assert_cmpfloat (remainder (moment[1].lon_deg - moment[0].lon_deg, 360), >,
                         0.0); /* negative leads: western */
    }
}

static void
test_fragments (void)
{
  TfTime epoch = tf_time_read ("2013-10-12T06:00:00Z");
  for (guint n = 2; n < 12; n += 3)
    {
      g_autoptr (TfSun) whole = tf_sun_new (epoch, 7), broken = tf_sun_new (epoch, 7);
      TfBipole bipole = two_poles (10.0, 18.0);
      Moment a[2], b[2];
      double positive, negative;
      bipole.separation_deg = 14.0; /* so that pieces do not reach the other pole */
      tf_sun_add_bipole (whole, "one", "bipole", &bipole);
      bipole.fragments = n;
      tf_sun_add_bipole (broken, "one", "bipole", &bipole);
      integrate (whole, epoch, 10.0, 18.0, 15.0, 0.1, a);
      integrate (broken, epoch, 10.0, 18.0, 15.0, 0.1, b);
      tf_sun_flux (broken, "one", epoch, &positive, &negative);
      tf_check_near ("total kept", positive / 5e21, 1.0, 1e-14);
      for (int sign = 0; sign < 2; sign++)
        {
          tf_check_near ("flux", b[sign].flux_mx / a[sign].flux_mx, 1.0, 2e-4);
          tf_check_near ("centroid",
                         tf_sphere_distance (a[sign].lon_deg, a[sign].lat_deg, b[sign].lon_deg,
                                             b[sign].lat_deg),
                         0.0, 1e-3);
        }
    }
}

/* What overlap takes away and how far apart the centroids then stand: reference page 9.1 (a),
 * [calc] there on a plane. */
static void
test_overlap_against_reference (void)
{
  static const struct
  {
    double width, share, apart; /* d / Db; net flux over pi d^2 B; centroid separation over Db */
  } rows[] = { { 0.4, 0.4639 / 0.5027, 1.0836 }, { 0.25, 0.1954 / 0.1963, 1.0047 } };
  TfTime epoch = tf_time_read ("2013-10-12T06:00:00Z");
  for (guint k = 0; k < G_N_ELEMENTS (rows); k++)
    {
      g_autoptr (TfSun) sun = tf_sun_new (epoch, 1);
      TfBipole bipole = two_poles (10.0, 12.0);
      TfShot shot;
      bipole.separation_deg = 3.0;
      bipole.lead_radius_deg = bipole.follow_radius_deg = rows[k].width * 3.0 / G_SQRT2;
      tf_sun_add_bipole (sun, "one", "bipole", &bipole);
      tf_shot_init (&shot);
      g_autoptr (JsonBuilder) builder = json_builder_new ();
      tf_sun_build_truth (sun, epoch, &shot, builder);
      g_autoptr (JsonNode) root = json_builder_get_root (builder);
      JsonArray *sources = tf_json_member_array (json_node_get_object (root), "sources");
      JsonObject *drawn
          = tf_json_member_object (json_array_get_object_element (sources, 0), "drawn");
      JsonObject *positive = tf_json_member_object (drawn, "positive");
      tf_check_near ("flux left", tf_json_member_number (positive, "flux_mx") / 5e21, rows[k].share,
                     2e-3);
      tf_check_near ("centroids apart", tf_json_member_number (drawn, "separation_deg") / 3.0,
                     rows[k].apart, 2e-3);
    }
}

/* The rate at 20 deg of Snodgrass & Ulrich 1990 (magnetic), reference page 2: 14.023 deg/day;
 * Carrington 14.1844. */
static void
test_carried (void)
{
  TfTime epoch = tf_time_read ("2013-10-12T06:00:00Z"), later = tf_time_add (epoch, 5 * TF_DAY_S);
  g_autoptr (TfSun) sun = tf_sun_new (epoch, 1);
  TfBipole bipole = two_poles (2.0, -20.0);
  Moment before[2], after[2];
  tf_sun_add_bipole (sun, "one", "bipole", &bipole);
  integrate (sun, epoch, 2.0, -20.0, 12.0, 0.1, before);
  integrate (sun, later, 1.2, -20.0, 12.0, 0.1, after);
  for (int sign = 0; sign < 2; sign++)
    {
      tf_check_angle ("moved", remainder (after[sign].lon_deg - before[sign].lon_deg, 360),
                      5 * (14.023 - 14.1844), 0.004);
      tf_check_near ("latitude", after[sign].lat_deg, before[sign].lat_deg, 1e-3);
    }
}

static void
test_growth (void)
{
  TfTime epoch = tf_time_read ("2013-10-12T06:00:00Z");
  g_autoptr (TfSun) sun = tf_sun_new (epoch, 1);
  TfBipole bipole = two_poles (2.0, 20.0);
  static const struct
  {
    double days, share;
  } rows[] = { { -3, 0 }, { -2, 0 }, { 0, 0.5 }, { 2, 1 }, { 5, 0.36787944117144233 } };
  bipole.born_s = -2 * TF_DAY_S;
  bipole.grow_s = 4 * TF_DAY_S;
  bipole.decay_s = 3 * TF_DAY_S;
  tf_sun_add_bipole (sun, "one", "bipole", &bipole);
  for (guint k = 0; k < G_N_ELEMENTS (rows); k++)
    {
      double positive, negative;
      TfTime time = tf_time_add (epoch, rows[k].days * TF_DAY_S);
      tf_sun_flux (sun, "one", time, &positive, &negative);
      tf_check_near ("share", positive / 5e21, rows[k].share, 1e-12);
      tf_check_near ("balance", positive - negative, 0.0, 1e6);
    }
}

static void
test_network (void)
{
  TfTime epoch = tf_time_read ("2013-10-12T06:00:00Z");
  g_autoptr (TfSun) sun = tf_sun_new (epoch, 3), same = tf_sun_new (epoch, 3),
                    other = tf_sun_new (epoch, 4);
  double unit[3], sum = 0, size = 0, differ = 0;
  tf_sun_add_network (sun, 301, 5e19);
  tf_sun_add_network (same, 301, 5e19);
  tf_sun_add_network (other, 301, 5e19);
  for (double lat = -89.5; lat < 90;
       lat += 1.0) /* sigma is 0.4: coarse, so balance is loose; in mean by cosine */
    for (double lon = 0; lon < 360; lon += 1.0)
      {
        tf_sphere_unit (lon, lat, unit);
        double field = tf_sun_field (sun, epoch, unit);
        sum += field * cos (lat * TF_DEG);
        size += fabs (field) * cos (lat * TF_DEG);
        differ += fabs (field - tf_sun_field (other, epoch, unit));
      }
  tf_check_between ("net share", sum / size, -0.05, 0.05);
  tf_check_between ("two seeds differ", differ, 100.0, 1e9);
  tf_sphere_unit (33, 44, unit);
  tf_check_near ("same seed", tf_sun_field (sun, epoch, unit), tf_sun_field (same, epoch, unit),
                 0.0);
}

void
add_sky_tests (void)
{
  g_test_add_func ("/simulate/sun/one-pole-has-the-flux-and-peak-of-the-closed-form",
                   test_flux_closed_form);
  g_test_add_func ("/simulate/sun/the-poles-of-a-bipole-balance", test_balance);
  g_test_add_func ("/simulate/sun/an-imbalance-is-taken-from-the-following-pole", test_imbalance);
  g_test_add_func ("/simulate/sun/tilt-and-separation-are-those-asked-for",
                   test_tilt_and_separation);
  g_test_add_func ("/simulate/sun/fragments-keep-flux-and-centroid", test_fragments);
  g_test_add_func ("/simulate/sun/what-overlap-leaves-agrees-with-the-reference",
                   test_overlap_against_reference);
  g_test_add_func ("/simulate/sun/regions-are-carried-by-the-rotation-law", test_carried);
  g_test_add_func ("/simulate/sun/flux-grows-linearly-and-decays-by-its-e-time", test_growth);
  g_test_add_func ("/simulate/sun/the-network-is-balanced-and-seeded", test_network);
}
