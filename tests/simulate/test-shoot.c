/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-simulate.h"

#include <math.h>

#include "tf-constants.h"

static TfTime
noon (void)
{
  return tf_time_read ("2013-10-12T12:00:00Z");
}

static void
quiet_shot (TfShot *shot, guint size)
{
  tf_shot_init (shot);
  shot->size = size;
  shot->noise_gauss = 0.0;
  shot->quantum_gauss = 0.0;
}

static TfFrame *
shoot (const TfSun *sun, TfTime time, const TfShot *shot, const TfWork *work)
{
  g_autoptr (GError) error = NULL;
  TfFrame *frame = tf_sun_shoot (sun, time, shot, 5, work, &error);
  g_assert_no_error (error);
  g_assert_nonnull (frame);
  return frame;
}

/* B_los / mu times the area of the pixel, by the frame's own geometry: what a measurement does,
 * written here anew. */
static void
sum_frame (const TfFrame *frame, Moment moment[2])
{
  const TfGeometry *g = tf_frame_get_geometry (frame);
  double sum[2][3] = { { 0 } }, total[2] = { 0 };
  g_autofree double *mu = g_new (double, g->width), *area = g_new (double, g->width);
  double (*unit)[3] = g_malloc_n (g->width, sizeof *unit);
  for (guint y = 0; y < g->height; y++)
    {
      const float *row = tf_frame_get_pixels (frame) + (gsize)y * g->width;
      tf_geometry_row_sun (g, y + 1.0, 1.0, g->width, unit, mu, area);
      for (guint x = 0; x < g->width; x++)
        {
          if (!(mu[x] > 0.1) || isnan (row[x]))
            continue;
          double flux = (double)row[x] / mu[x] * area[x] * 1e16; /* cm2 in Mm2 */
          int sign = flux > 0 ? 0 : 1;
          total[sign] += fabs (flux);
          for (int k = 0; k < 3; k++)
            sum[sign][k] += fabs (flux) * unit[x][k];
        }
    }
  for (int sign = 0; sign < 2; sign++)
    {
      moment[sign].flux_mx = total[sign];
      tf_sphere_lonlat (sum[sign], &moment[sign].lon_deg, &moment[sign].lat_deg);
    }
  g_free (unit);
}

static void
check_frame (const TfSun *sun, TfTime time, const TfShot *shot, double lon_deg, double lat_deg)
{
  Moment truth[2], got[2];
  g_autoptr (TfFrame) frame = shoot (sun, time, shot, NULL);
  integrate (sun, time, lon_deg, lat_deg, 12.0, 0.1, truth);
  sum_frame (frame, got);
  for (int sign = 0; sign < 2; sign++)
    {
      tf_check_near ("flux / truth", got[sign].flux_mx / truth[sign].flux_mx, 1.0, 0.005);
      tf_check_near ("pole off, deg",
                     tf_sphere_distance (got[sign].lon_deg, got[sign].lat_deg, truth[sign].lon_deg,
                                         truth[sign].lat_deg),
                     0.0, 0.015);
    }
  tf_check_near ("tilt", planar_tilt (&got[1], &got[0]), planar_tilt (&truth[1], &truth[0]), 0.2);
}

static void
test_places_on_the_disk (void)
{
  static const double cmds[] = { 0, -35, 50 }, lats[] = { 14, -22, 8 };
  for (guint k = 0; k < G_N_ELEMENTS (cmds); k++)
    {
      double lon = tf_earth_l0 (noon (), TF_L0_IMAGE) + cmds[k];
      g_autoptr (TfSun) sun = tf_sun_new (noon (), 1);
      TfBipole bipole = two_poles (lon, lats[k]);
      TfShot shot;
      quiet_shot (&shot, 800);
      tf_sun_add_bipole (sun, "one", "bipole", &bipole);
      check_frame (sun, noon (), &shot, lon, lats[k]);
    }
}

static void
test_turned_off_centre_near_and_far (void)
{
  static const struct
  {
    double turn, dx, dy, lon, b0, au;
    TfHeaderStyle style;
  } rows[] = {
    { 33, 21.5, -14.25, 0, 0, 0, TF_STYLE_STANDARD },
    { -120, 0, 0, -60, 5, 0.3, TF_STYLE_STANDARD },
    { 0, 5, 7, 130, -30, 1.1, TF_STYLE_STANDARD },
    { 0, -3, 2, 0, 0, 0, TF_STYLE_TURNED },
  };
  for (guint k = 0; k < G_N_ELEMENTS (rows); k++)
    {
      TfShot shot;
      double lon = tf_earth_l0 (noon (), TF_L0_IMAGE) + rows[k].lon + 20.0;
      g_autoptr (TfSun) sun = tf_sun_new (noon (), 1);
      TfBipole bipole = two_poles (lon, 11.0);
      quiet_shot (&shot, 800);
      shot.north_angle_deg = rows[k].turn;
      shot.centre_dx = rows[k].dx;
      shot.centre_dy = rows[k].dy;
      shot.style = rows[k].style;
      if (rows[k].au > 0)
        shot.observer = (TfObserver){ rows[k].au * TF_AU_M, rows[k].b0, rows[k].lon, NAN,
                                      TF_OBSERVER_HEADER };
      tf_sun_add_bipole (sun, "one", "bipole", &bipole);
      check_frame (sun, noon (), &shot, lon, 11.0);
    }
}

static void
test_pixel_is_the_field_times_mu (void)
{
  TfShot shot;
  double lon = tf_earth_l0 (noon (), TF_L0_IMAGE) + 40.0, unit[3];
  g_autoptr (TfSun) sun = tf_sun_new (noon (), 1);
  TfBlob blob = { 10.0, lon, 3.0, 2e22 };
  TfPlace place;
  quiet_shot (&shot, 512);
  tf_sun_add_blob (sun, "one", "blob", &blob);
  g_autoptr (TfFrame) frame = shoot (sun, noon (), &shot, NULL);
  const TfGeometry *g = tf_frame_get_geometry (frame);
  for (int x = 380; x < 470; x += 10)
    {
      g_assert_true (tf_geometry_pixel_to_sun (g, x, 280, &place));
      tf_sphere_unit (place.carrington_lon_deg, place.lat_deg, unit);
      tf_check_near ("B mu", tf_frame_value (frame, x, 280),
                     tf_sun_field (sun, noon (), unit) * place.mu, 0.5);
    }
  tf_check_nan ("off the disk", tf_frame_value (frame, 3, 3));
}

static void
test_far_side_is_not_seen (void)
{
  TfShot shot;
  g_autoptr (TfSun) sun = tf_sun_new (noon (), 1);
  TfBlob blob = { 10.0, tf_earth_l0 (noon (), TF_L0_IMAGE) + 150.0, 3.0, 2e22 };
  Moment moment[2];
  quiet_shot (&shot, 256);
  tf_sun_add_blob (sun, "one", "blob", &blob);
  g_autoptr (TfFrame) frame = shoot (sun, noon (), &shot, NULL);
  sum_frame (frame, moment);
  tf_check_near ("flux seen", moment[0].flux_mx + moment[1].flux_mx, 0.0, 1.0);
}

static void
test_blur (void)
{
  TfShot shot;
  double lon = tf_earth_l0 (noon (), TF_L0_IMAGE);
  g_autoptr (TfSun) sun = tf_sun_new (noon (), 1);
  TfBlob blob = { 5.0, lon, 0.5, 1e21 };
  Moment sharp[2], soft[2];
  quiet_shot (&shot, 512);
  tf_sun_add_blob (sun, "one", "blob", &blob);
  g_autoptr (TfFrame) first = shoot (sun, noon (), &shot, NULL);
  double scale = tf_geometry_scale_arcsec (tf_frame_get_geometry (first)), x, y;
  shot.psf_arcsec = 4.0 * scale;
  g_autoptr (TfFrame) second = shoot (sun, noon (), &shot, NULL);
  sum_frame (first, sharp);
  sum_frame (second, soft);
  tf_check_near ("flux kept", soft[0].flux_mx / sharp[0].flux_mx, 1.0, 2e-3);
  /* widths add in squares; a degree at the middle is R (d is D - R) deg / scale pixels */
  const TfGeometry *g = tf_frame_get_geometry (first);
  double sigma = 0.5 * TF_DEG * g->radius_mm / (g->distance_mm - g->radius_mm) / TF_ARCSEC / scale,
         blur = 4.0 / 2.354820;
  g_assert_true (tf_geometry_sun_to_pixel (g, lon, 5.0, &x, &y, NULL));
  double ratio = tf_frame_value (second, x, y) / tf_frame_value (first, x, y);
  tf_check_near ("peak", ratio, sigma * sigma / (sigma * sigma + blur * blur), 0.02);
}

static void
test_noise_and_steps (void)
{
  TfShot shot;
  g_autoptr (TfSun) sun = tf_sun_new (noon (), 1);
  double sum = 0, square = 0;
  guint n = 0;
  tf_shot_init (&shot);
  shot.noise_gauss = 12.0;
  shot.quantum_gauss = 0.5;
  g_autoptr (TfFrame) frame = shoot (sun, noon (), &shot, NULL);
  const float *pixels = tf_frame_get_pixels (frame);
  for (guint k = 0; k < 512 * 512; k++)
    if (!isnan (pixels[k]))
      {
        double v = (double)pixels[k];
        g_assert_cmpfloat (fabs (v * 2.0 - rint (v * 2.0)), <=, 0.0);
        sum += v;
        square += v * v;
        n++;
      }
  tf_check_between ("pixels on the disk / pi r^2", n / (TF_PI * pow (0.46 * 512, 2)), 0.99, 1.01);
  tf_check_near ("mean", sum / n, 0.0, 0.15);
  tf_check_near ("sigma", sqrt (square / n), sqrt (144.0 + 0.25 / 12), 0.1);
}

static void
test_threads_agree (void)
{
  TfShot shot;
  g_autoptr (TfSun) sun = tf_sun_new (noon (), 1);
  TfBipole bipole = two_poles (tf_earth_l0 (noon (), TF_L0_IMAGE) - 20.0, 14.0);
  g_autoptr (TfWorkers) workers = tf_workers_new (4);
  TfWork work = { .workers = workers };
  bipole.fragments = 5;
  tf_shot_init (&shot);
  tf_sun_add_bipole (sun, "one", "bipole", &bipole);
  tf_sun_add_network (sun, 100, 5e19);
  g_autoptr (TfFrame) one = shoot (sun, noon (), &shot, NULL);
  g_autoptr (TfFrame) many = shoot (sun, noon (), &shot, &work);
  g_assert_cmpmem (tf_frame_get_pixels (one), 512 * 512 * sizeof (float),
                   tf_frame_get_pixels (many), 512 * 512 * sizeof (float));
}

static void
test_map_columns (void)
{
  /* Rotation 2142 began 2013-09-28.14 (reference page 1.5, Almanac C4): longitude 180 passed
   * half a rotation later. */
  TfTime epoch = tf_time_read ("2013-09-28T03:21:36Z");
  TfShot shot;
  g_autoptr (TfSun) sun = tf_sun_new (epoch, 1);
  g_autoptr (GError) error = NULL;
  TfBlob blob = { 20.0, 180.0, 1.5, 4e21 };
  Moment moment = { 0 };
  double sum[3] = { 0 };
  quiet_shot (&shot, 0);
  tf_sun_add_blob (sun, "one", "blob", &blob);
  g_autoptr (TfFrame) map = tf_sun_shoot_map (sun, 2142, 720, 360, &shot, 5, &error);
  g_assert_no_error (error);
  const TfGeometry *g = tf_frame_get_geometry (map);
  g_assert_true (tf_geometry_is_map (g));
  double area = 4 * TF_PI * pow (TF_RADIUS_MM * 1e8, 2) / (720.0 * 360.0);
  for (int y = 1; y <= 360; y++)
    for (int x = 1; x <= 720; x++)
      {
        double flux = tf_frame_value (map, x, y) * area, lon, sine, unit[3];
        lon = (x - 0.5) * 0.5;
        sine = -1 + (y - 0.5) / 180.0;
        tf_sphere_unit (lon, asin (sine) / TF_DEG, unit);
        moment.flux_mx += flux;
        for (int k = 0; k < 3; k++)
          sum[k] += flux * unit[k];
      }
  tf_sphere_lonlat (sum, &moment.lon_deg, &moment.lat_deg);
  /* 13.64 days at 14.0228 - 14.1844 deg/day; the flux is as much wider as columns pass faster:
   * 1 + 0.16/14 of a day's turn */
  tf_check_near ("longitude", moment.lon_deg, 180.0 + 13.64 * (14.0228 - 14.1844), 0.1);
  tf_check_near ("latitude", moment.lat_deg, 20.0, 0.01);
  tf_check_near ("flux / asked", moment.flux_mx / 4e21, 1.0, 0.02);
}

static void
test_speed (void)
{
  TfShot shot;
  g_autoptr (TfSun) sun = tf_sun_new (noon (), 1);
  g_autoptr (GError) error = NULL;
  double l0 = tf_earth_l0 (noon (), TF_L0_IMAGE);
  tf_shot_init (&shot);
  for (int k = 0; k < 20; k++)
    {
      g_autofree char *name = g_strdup_printf ("region-%d", k);
      TfBipole bipole = two_poles (l0 - 60 + 6 * k, k % 2 ? 15 : -20);
      bipole.fragments = 6;
      tf_sun_add_bipole (sun, name, "bipole", &bipole);
    }
  gint64 start = g_get_monotonic_time ();
  g_autoptr (TfFrame) frame = shoot (sun, noon (), &shot, NULL);
  g_test_message ("512 x 512 pixels, 20 regions: %.0f ms",
                  (double)(g_get_monotonic_time () - start) / 1000.0);
}

static void
test_bad_shots (void)
{
  TfShot shot;
  g_autoptr (TfSun) sun = tf_sun_new (noon (), 1);
  g_autoptr (GError) error = NULL, style = NULL, cancelled = NULL;
  tf_shot_init (&shot);
  shot.size = 1;
  g_assert_null (tf_sun_shoot (sun, noon (), &shot, 1, NULL, &error));
  g_assert_error (error, TF_SIMULATE_ERROR, TF_SIMULATE_ERROR_OPTION);
  tf_shot_init (&shot);
  shot.style = TF_STYLE_GROUND;
  shot.north_angle_deg = 10.0;
  g_assert_null (tf_sun_shoot (sun, noon (), &shot, 1, NULL, &style));
  g_assert_error (style, TF_SIMULATE_ERROR, TF_SIMULATE_ERROR_OPTION);
  tf_shot_init (&shot);
  g_autoptr (TfCancel) cancel = tf_cancel_new ();
  TfWork work = { .cancel = cancel };
  tf_cancel_raise (cancel);
  g_assert_null (tf_sun_shoot (sun, noon (), &shot, 1, &work, &cancelled));
  g_assert_error (cancelled, TF_SIMULATE_ERROR, TF_SIMULATE_ERROR_CANCELLED);
}

void
add_shoot_tests (void)
{
  g_test_add_func ("/simulate/shot/flux-poles-and-tilt-are-the-suns-own", test_places_on_the_disk);
  g_test_add_func ("/simulate/shot/turned-off-centre-near-and-far-observers-place-regions-right",
                   test_turned_off_centre_near_and_far);
  g_test_add_func ("/simulate/shot/a-pixel-is-the-field-times-mu",
                   test_pixel_is_the_field_times_mu);
  g_test_add_func ("/simulate/shot/the-far-side-is-not-seen", test_far_side_is_not_seen);
  g_test_add_func ("/simulate/shot/blur-keeps-flux-and-widens-by-squares", test_blur);
  g_test_add_func ("/simulate/shot/noise-and-steps-are-those-asked-for", test_noise_and_steps);
  g_test_add_func ("/simulate/shot/one-thread-and-four-agree-bit-for-bit", test_threads_agree);
  g_test_add_func ("/simulate/shot/each-column-of-a-map-is-drawn-at-its-own-time",
                   test_map_columns);
  g_test_add_func ("/simulate/shot/twenty-regions-are-drawn-and-the-time-is-told", test_speed);
  g_test_add_func ("/simulate/shot/what-cannot-be-drawn-is-refused", test_bad_shots);
}
