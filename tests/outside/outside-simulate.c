/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>

#include "tf-constants.h"
#include "tf-simulate.h"

/* outside-simulate FOLDER: frames of one bipole each, at random places, observers, turns and
 * styles, without noise; three maps. simulate.py compares them with other people's reading of
 * the same files. */

static double
between (GRand *rand, double low, double high)
{
  return g_rand_double_range (rand, low, high);
}

static TfSun *
make_sun (GRand *rand, TfTime time, double lon_deg)
{
  TfSun *sun = tf_sun_new (tf_time_add (time, between (rand, -5, 5) * TF_DAY_S), g_rand_int (rand));
  double lat = between (rand, -35, 35), radius = between (rand, 1.0, 1.6);
  TfBipole bipole = { .lat_deg = lat,
                      .carrington_lon_deg = tf_wrap_360 (lon_deg),
                      .separation_deg = between (rand, 6, 9),
                      .axis_tilt_deg = between (rand, -40, 40),
                      .leading_polarity = g_rand_boolean (rand) ? 1 : -1,
                      .flux_mx = between (rand, 3e21, 9e21),
                      .lead_radius_deg = radius,
                      .follow_radius_deg = 1.3 * radius,
                      .fragments = (guint)g_rand_int_range (rand, 0, 7) };
  tf_sun_add_bipole (sun, "one", "bipole", &bipole);
  return sun;
}

static gboolean
make_frame (GRand *rand, const char *folder, int k, GError **error)
{
  TfTime time = tf_time_from_year (between (rand, 1996, 2024));
  TfShot shot;
  tf_shot_init (&shot);
  shot.size = 640;
  shot.noise_gauss = 0;
  shot.quantum_gauss = k % 2 == 0 ? 0.05 : 0; /* packed, and as floats */
  shot.supersample = 3;
  shot.style = (TfHeaderStyle)(k % 5);
  shot.centre_dx = between (rand, -15, 15);
  shot.centre_dy = between (rand, -15, 15);
  double seen_from = 0;
  if (shot.style != TF_STYLE_OLD_PIXELS && shot.style != TF_STYLE_GROUND)
    shot.north_angle_deg = between (rand, -180, 180);
  if (shot.style == TF_STYLE_STANDARD || shot.style == TF_STYLE_TURNED)
    {
      seen_from = between (rand, -170, 170);
      shot.observer = (TfObserver){ between (rand, 0.3, 1.1) * TF_AU_M, between (rand, -30, 30),
                                    seen_from, NAN, TF_OBSERVER_HEADER };
    }
  double cmd = between (rand, -45, 45);
  g_autoptr (TfSun) sun = make_sun (rand, time, tf_earth_l0 (time, TF_L0_IMAGE) + seen_from + cmd);
  g_autofree char *name = g_strdup_printf ("frame-%02d.fits", k),
                  *path = g_build_filename (folder, name, NULL);
  return tf_sun_write (sun, path, time, &shot, 1, NULL, error);
}

static gboolean
make_map (GRand *rand, const char *folder, int k, GError **error)
{
  int rotation = g_rand_int_range (rand, 1910, 2280);
  TfShot shot;
  tf_shot_init (&shot);
  shot.noise_gauss = 0;
  shot.quantum_gauss = 0.05;
  double lon = between (rand, 20, 340);
  g_autoptr (TfSun) sun = make_sun (rand, tf_carrington_time (rotation + 1 - lon / 360), lon);
  g_autofree char *name = g_strdup_printf ("map-%02d.fits", k),
                  *path = g_build_filename (folder, name, NULL);
  return tf_sun_write_map (sun, path, rotation, 720, 360, &shot, 1, error);
}

int
main (int argc, char **argv)
{
  g_autoptr (GError) error = NULL;
  GRand *rand = g_rand_new_with_seed (20131012);
  gboolean good = argc == 2;
  for (int k = 0; good && k < 20; k++)
    good = make_frame (rand, argv[1], k, &error);
  for (int k = 0; good && k < 3; k++)
    good = make_map (rand, argv[1], k, &error);
  if (error != NULL)
    g_printerr ("%s\n", error->message);
  g_rand_free (rand);
  return good ? 0 : 1;
}
