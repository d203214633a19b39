/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-simulate.h"

#include <math.h>
#include <string.h>

#include "tf-constants.h"
#include "tf-json.h"

/* The same places on the Sun must fall on the same pixels under the geometry read back from the
 * file. */
static void
check_geometry (const TfGeometry *want, const TfGeometry *got)
{
  double l0 = tf_geometry_is_map (want) ? 180.0 : tf_geometry_central_carrington (want);
  g_assert_cmpuint (got->width, ==, want->width);
  for (double cmd = -60; cmd <= 60; cmd += 30)
    for (double lat = -50; lat <= 50; lat += 25)
      {
        double x, y, u, v;
        if (!tf_geometry_sun_to_pixel (want, tf_wrap_360 (l0 + cmd), lat, &x, &y, NULL))
          continue;
        g_assert_true (tf_geometry_sun_to_pixel (got, tf_wrap_360 (l0 + cmd), lat, &u, &v, NULL));
        tf_check_near ("x", u, x, 0.01);
        tf_check_near ("y", v, y, 0.01);
      }
}

static void
check_style (TfHeaderStyle style, const char *time_text, double turn, const TfObserver *observer)
{
  TfTime time = tf_time_read (time_text);
  TfShot shot;
  char *folder = make_folder ();
  g_autofree char *path = g_build_filename (folder, "frame.fits", NULL);
  g_autoptr (GError) error = NULL;
  g_autoptr (TfSun) sun = tf_sun_new (time, 1);
  TfFrameSpec spec = { 0 };
  TfBipole bipole = two_poles (tf_earth_l0 (time, TF_L0_IMAGE), 12.0);
  tf_shot_init (&shot);
  shot.size = 300;
  shot.style = style;
  shot.north_angle_deg = turn;
  shot.centre_dx = 2.25;
  shot.centre_dy = -1.5;
  shot.desk = "night";
  if (observer != NULL)
    shot.observer = *observer;
  tf_sun_add_bipole (sun, "one", "bipole", &bipole);
  tf_sun_write (sun, path, time, &shot, 5, NULL, &error);
  g_assert_no_error (error);
  g_assert_no_error (error);
  g_autoptr (TfFrame) made = tf_sun_shoot (sun, time, &shot, 5, NULL, &error);
  g_autoptr (TfFrame) read = tf_frame_open (path, &spec, NULL, &error);
  g_assert_no_error (error);
  check_geometry (tf_frame_get_geometry (made), tf_frame_get_geometry (read));
  const TfFrameInfo *info = tf_frame_get_info (read);
  tf_check_near ("time, s", info->time.s - time.s, 0.0, 0.002);
  g_assert_true (info->simulated);
  g_assert_cmpint (info->kind, ==, TF_KIND_DISK);
  g_assert_nonnull (strstr (info->instrument, "BRINDLE"));
  for (gsize k = 0; k < 300 * 300; k++)
    {
      float a = tf_frame_get_pixels (made)[k], b = tf_frame_get_pixels (read)[k];
      if (isnan (a) != isnan (b) || fabsf (a - b) > 1e-3f)
        {
          g_test_message ("pixel %" G_GSIZE_FORMAT ": %g and %g", k, (double)a, (double)b);
          g_test_fail ();
          break;
        }
    }
  remove_folder (folder);
}

static void
test_standard (void)
{
  TfObserver far = { 0.45 * TF_AU_M, -6.0, 72.0, NAN, TF_OBSERVER_HEADER };
  check_style (TF_STYLE_STANDARD, "2013-10-12T06:00:00Z", 0.0, NULL);
  check_style (TF_STYLE_STANDARD, "2013-10-12T06:00:00Z", 121.0, NULL);
  check_style (TF_STYLE_STANDARD, "2013-03-12T23:59:45Z", -17.5, &far);
}

static void
test_turned (void)
{
  check_style (TF_STYLE_TURNED, "2016-12-31T23:59:40Z", 0.0, NULL);
}

static void
test_tai (void)
{
  check_style (TF_STYLE_TAI, "2016-12-31T23:59:40Z", 0.0, NULL);
  check_style (TF_STYLE_TAI, "2013-10-12T06:00:00.123Z", 5.0, NULL);
}

static void
test_old_pixels (void)
{
  check_style (TF_STYLE_OLD_PIXELS, "2008-05-04T06:00:00Z", 0.0, NULL);
  check_style (TF_STYLE_OLD_PIXELS, "2001-02-28T23:59:30Z", 0.0, NULL);
}

static void
test_ground (void)
{
  check_style (TF_STYLE_GROUND, "2013-10-14T06:00:00Z", 0.0, NULL);
  check_style (TF_STYLE_GROUND, "2019-12-31T23:59:50Z", 0.0,
               NULL); /* GPS time is in the next year already */
}

static void
test_map (void)
{
  TfShot shot;
  char *folder = make_folder ();
  g_autofree char *path = g_build_filename (folder, "map.fits", NULL);
  g_autoptr (GError) error = NULL;
  g_autoptr (TfSun) sun = tf_sun_new (tf_time_read ("2013-10-12"), 1);
  TfFrameSpec spec = { 0 };
  TfBipole bipole = two_poles (181.0, 12.0);
  tf_shot_init (&shot);
  tf_sun_add_bipole (sun, "one", "bipole", &bipole);
  tf_sun_write_map (sun, path, 2142, 360, 180, &shot, 5, &error);
  g_assert_no_error (error);
  g_autoptr (TfFrame) made = tf_sun_shoot_map (sun, 2142, 360, 180, &shot, 5, &error);
  g_autoptr (TfFrame) read = tf_frame_open (path, &spec, NULL, &error);
  g_assert_no_error (error);
  check_geometry (tf_frame_get_geometry (made), tf_frame_get_geometry (read));
  const TfFrameInfo *info = tf_frame_get_info (read);
  g_assert_cmpint (info->kind, ==, TF_KIND_MAP);
  g_assert_cmpint (info->field, ==, TF_FIELD_RADIAL);
  tf_check_near ("rotation", info->rotation_number, 2142.0, 0.0);
  remove_folder (folder);
}

static void
test_companion (void)
{
  TfTime time = tf_time_read ("2013-10-12T06:00:00Z");
  TfShot shot;
  char *folder = make_folder ();
  g_autofree char *path = g_build_filename (folder, "light.fits", NULL);
  g_autoptr (GError) error = NULL, refused = NULL;
  g_autoptr (TfSun) sun = tf_sun_new (time, 1);
  TfFrameSpec spec = { 0 };
  tf_shot_init (&shot);
  shot.intensity = TRUE;
  tf_sun_write (sun, path, time, &shot, 5, NULL, &error);
  g_assert_no_error (error);
  g_assert_null (tf_frame_open (path, &spec, NULL, &refused));
  g_assert_error (refused, TF_FRAME_ERROR, TF_FRAME_ERROR_REFUSED);
  g_autoptr (TfFrame) read = tf_frame_open_companion (path, &spec, NULL, &error);
  g_assert_no_error (error);
  tf_check_near ("middle of the disk, counts", tf_frame_value (read, 256, 256), 10000.0, 60.0);
  remove_folder (folder);
}

void
add_style_tests (void)
{
  g_test_add_func ("/simulate/style/standard-headers-open-as-intended", test_standard);
  g_test_add_func ("/simulate/style/turned-headers-open-as-intended", test_turned);
  g_test_add_func ("/simulate/style/tai-headers-open-as-intended", test_tai);
  g_test_add_func ("/simulate/style/old-pixel-headers-open-as-intended", test_old_pixels);
  g_test_add_func ("/simulate/style/ground-headers-open-as-intended", test_ground);
  g_test_add_func ("/simulate/style/maps-open-as-intended", test_map);
  g_test_add_func ("/simulate/style/a-continuum-picture-is-a-companion-and-no-field",
                   test_companion);
}
