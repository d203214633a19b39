/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-frame.h"

#include <math.h>

#include "tf-check.h"
#include "tf-constants.h"
#include "tf-rotation.h"
#include "tf-witness.h"

/* A disk of noise, NaN (or another noise) off it, whose true circle is not quite the header's. */
static TfLimbFit
fit_of (double cx, double cy, double r, gboolean sky, double damage, TfGeometry *geometry)
{
  enum
  {
    SIDE = 500
  };
  g_autoptr (GRand) chance = g_rand_new_with_seed (3);
  g_autoptr (TfFrameInfo) info = disk_info (SIDE, 220, 10);
  g_autofree float *pixels = g_new (float, SIDE *SIDE);
  for (int k = 0; k < SIDE * SIDE; k++)
    {
      double x = k % SIDE + 1, y = k / SIDE + 1;
      gboolean on = hypot (x - cx, y - cy) <= r;
      pixels[k] = on ? (float)(12 * normal (chance)) : sky ? (float)(60 * normal (chance)) : NAN;
      if (g_rand_double (chance) < damage)
        pixels[k] = NAN;
    }
  *geometry = info->geometry;
  return tf_limb_fit (pixels, geometry);
}

static void
test_limb (void)
{
  TfGeometry g;
  for (int k = 0; k < 6; k++)
    {
      double cx = 250.5 + 0.7 * k, cy = 250.5 - 0.45 * k, r = 220 + 0.4 * k;
      TfLimbFit fit = fit_of (cx, cy, r, FALSE, 0.01 * k, &g);
      g_assert_true (fit.found);
      tf_check_near ("limb centre x", fit.centre_x, cx, 0.1);
      tf_check_near ("limb centre y", fit.centre_y, cy, 0.1);
      tf_check_near ("limb radius", fit.radius_px, r, 0.1);
    }
  TfLimbFit filled = fit_of (252, 249, 221, TRUE, 0, &g);
  g_assert_true (filled.found);
  tf_check_near ("limb centre x, sky filled", filled.centre_x, 252, 0.5);
  tf_check_near ("limb centre y, sky filled", filled.centre_y, 249, 0.5);
  tf_check_near ("limb radius, sky filled", filled.radius_px, 221, 0.5);
}

/* A header of another size of the picture: the disk is found wherever it is, and the header is told to lie. */
static void
test_limb_far (void)
{
  static const struct
  {
    double centre, radius;
  } told[] = { { 125.5, 110 }, { 250.5, 280 }, { 300.5, 160 }, { 250.5, 60 } };
  for (guint k = 0; k < G_N_ELEMENTS (told); k++)
    {
      TfGeometry g, lies;
      g_autoptr (GPtrArray) cautions = tf_notes_new ();
      g_autofree float *pixels = g_new (float, 500 * 500);
      fit_of (250.5, 250.5, 220, FALSE, 0, &g);
      double scale = tf_geometry_scale_arcsec (&g) * tf_geometry_disk_radius (&g) / told[k].radius;
      g_assert_true (tf_geometry_make_disk (&lies, 500, 500, told[k].centre, told[k].centre, scale, 0, &g.observer,
                                            TF_RADIUS_MM));
      for (int at = 0; at < 500 * 500; at++)
        pixels[at] = hypot (at % 500 + 1 - 250.5, at / 500 + 1 - 250.5) <= 220 ? (float)(at % 7 - 3) : NAN;
      TfLimbFit fit = tf_limb_fit (pixels, &lies);
      g_assert_true (fit.found);
      tf_check_near ("limb centre x", fit.centre_x, 250.5, 0.2);
      tf_check_near ("limb radius", fit.radius_px, 220, 0.2);
      tf_limb_judge (&fit, &lies, cautions);
      g_assert_nonnull (tf_notes_find (cautions, "header-lies"));
    }
}

/* An intensity picture has values in its sky, too: stray light. */
static void
test_limb_bright (void)
{
  TfGeometry g;
  g_autoptr (GRand) chance = g_rand_new_with_seed (4);
  g_autofree float *pixels = g_new (float, 500 * 500);
  fit_of (250.5, 250.5, 220, FALSE, 0, &g);
  for (int at = 0; at < 500 * 500; at++)
    {
      double r = hypot (at % 500 + 1 - 253.0, at / 500 + 1 - 249.0) / 218.0, mu = r < 1.0 ? sqrt (1.0 - r * r) : 0.0;
      pixels[at] = (float)((r < 1.0 ? 40000 * (0.4 + 0.6 * mu) : 1500.0) + 100 * normal (chance));
    }
  TfLimbFit fit = tf_limb_fit_bright (pixels, &g);
  g_assert_true (fit.found);
  tf_check_near ("limb centre x", fit.centre_x, 253.0, 0.2);
  tf_check_near ("limb centre y", fit.centre_y, 249.0, 0.2);
  tf_check_near ("limb radius", fit.radius_px, 218.0, 0.2);
}

static void
test_limb_judged (void)
{
  TfGeometry g;
  static const struct
  {
    double shift, growth;
    const char *code;
  } cases[] = { { 0, 0, "" },
                { 0.3, 0.2, "" },
                { 0.9, 0, "limb-off" },
                { 0, -1.5, "limb-off" },
                { 6, 0, "header-lies" },
                { 0, 8, "header-lies" } };
  for (guint k = 0; k < G_N_ELEMENTS (cases); k++)
    {
      g_autoptr (GPtrArray) cautions = tf_notes_new ();
      TfLimbFit fit = fit_of (250.5 + cases[k].shift, 250.5, 220 + cases[k].growth, FALSE, 0, &g);
      tf_limb_judge (&fit, &g, cautions);
      g_autofree char *codes = tf_notes_dup_codes (cautions);
      g_assert_cmpstr (codes, ==, cases[k].code);
    }
  TfObserver earth = g.observer;
  g_autofree float *pixels = g_new0 (float, 100 * 100);
  TfGeometry cut;
  g_assert_true (tf_geometry_make_disk (&cut, 100, 100, 300, 50, 2, 0, &earth, TF_RADIUS_MM));
  g_assert_false (tf_limb_fit (pixels, &cut).found);
}

/* Spots on the sphere, carried by the Sun's rotation, drawn under a true orientation that the
 * header may not tell. */
static TfFrame *
spotted (double hours, int reading, gboolean far_from_equator)
{
  enum
  {
    SIDE = 160
  };
  static const double sign[4][2] = { { 1, 1 }, { -1, -1 }, { -1, 1 }, { 1, -1 } };
  TfFrameInfo *info = disk_info (SIDE, 75, 0);
  g_autoptr (GRand) chance = g_rand_new_with_seed (21), spots = g_rand_new_with_seed (8);
  double lon[30], lat[30];
  double b0 = far_from_equator ? 7 : 0.5;
  info->geometry.observer.b0_deg = b0;
  info->geometry.observer.carrington_lon_deg = tf_wrap_360 (120 - 13.2 / 24 * hours);
  info->time = tf_time_add (info->time, hours * 3600);
  g_assert_true (tf_geometry_make (&info->geometry));
  for (int k = 0; k < 30; k++)
    {
      lat[k] = g_rand_double_range (spots, -45, 45);
      lon[k] = g_rand_double_range (spots, 40, 190) + tf_rotation_carry (0, lat[k], hours * 3600);
    }
  g_autofree float *pixels = g_new (float, SIDE *SIDE);
  for (int k = 0; k < SIDE * SIDE; k++)
    {
      double tx, ty, x, y;
      TfPlace p;
      tf_geometry_pixel_to_projective (&info->geometry, k % SIDE + 1, k / SIDE + 1, &tx, &ty);
      tf_geometry_projective_to_pixel (&info->geometry, sign[reading][0] * tx,
                                       sign[reading][1] * ty, &x, &y);
      if (!tf_geometry_pixel_to_sun (&info->geometry, x, y, &p))
        {
          pixels[k] = NAN;
          continue;
        }
      double field = 10 * normal (chance);
      for (int s = 0; s < 30; s++)
        {
          double d = tf_sphere_distance (p.carrington_lon_deg, p.lat_deg, lon[s], lat[s]);
          field += (s % 2 ? 1 : -1) * 300 * exp (-d * d / 5);
        }
      pixels[k] = (float)field;
    }
  return tf_frame_new (info, pixels, NULL);
}

static void
test_orientation (void)
{
  static const TfOrientation expected[4]
      = { TF_WITNESS_AGREES, TF_WITNESS_TURNED, TF_WITNESS_MIRRORED, TF_WITNESS_MIRRORED };
  for (int reading = 0; reading < 4; reading++)
    for (double hours = reading < 2 ? 6 : 18; hours < 40;
         hours += 20) /* row order needs longer paths */
      {
        double score[4];
        g_autoptr (TfFrame) a = spotted (0, reading, TRUE), b = spotted (hours, reading, TRUE);
        g_autoptr (TfNote) reason = NULL;
        TfOrientation got = tf_orientation_witness (a, b, score, &reason);
        g_test_message ("reading %d, %g h: %.2f %.2f %.2f %.2f", reading, hours, score[0], score[1],
                        score[2], score[3]);
        g_assert_cmpint (got, ==, expected[reading]);
        g_assert_null (reason);
      }
  g_autoptr (TfFrame) a = spotted (0, 1, FALSE), b = spotted (12, 1, FALSE);
  g_assert_cmpint (tf_orientation_witness (a, b, NULL, NULL), ==, TF_WITNESS_TURNED);
}

static void
test_orientation_unsaid (void)
{
  g_autoptr (TfFrame) a = spotted (0, 0, TRUE), b = spotted (1, 0, TRUE);
  TfNote *reason = NULL;
  g_assert_cmpint (tf_orientation_witness (a, b, NULL, &reason), ==, TF_WITNESS_CANNOT_SAY);
  g_assert_cmpstr (tf_note_get_code (reason), ==, "witness-time");
  g_clear_pointer (&reason, tf_note_free);
  TfFrameInfo *one = disk_info (256, 120, 0), *two = disk_info (256, 120, 0);
  two->time = tf_time_add (two->time, 36000);
  g_autofree float *flat = g_new0 (float, 256 * 256);
  g_autoptr (TfFrame) c = tf_frame_new (one, flat, NULL), d = tf_frame_new (two, flat, NULL);
  g_assert_cmpint (tf_orientation_witness (c, d, NULL, &reason), ==, TF_WITNESS_CANNOT_SAY);
  g_assert_cmpstr (tf_note_get_code (reason), ==, "witness-empty");
  g_clear_pointer (&reason, tf_note_free);
}

void
add_witness_tests (void)
{
  g_test_add_func ("/frame/limb/found-to-a-tenth-of-a-pixel", test_limb);
  g_test_add_func ("/frame/limb/found-far-from-where-the-header-puts-it", test_limb_far);
  g_test_add_func ("/frame/limb/of-an-intensity-picture-with-stray-light", test_limb_bright);
  g_test_add_func ("/frame/limb/the-header-is-judged", test_limb_judged);
  g_test_add_func ("/frame/orientation/each-reading-is-told", test_orientation);
  g_test_add_func ("/frame/orientation/says-why-it-cannot", test_orientation_unsaid);
}
