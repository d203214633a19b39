/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-simulate.h"

#include <glib/gstdio.h>
#include <math.h>

#include "tf-constants.h"

TfBipole
two_poles (double lon_deg, double lat_deg)
{
  return (TfBipole){ .lat_deg = lat_deg,
                     .carrington_lon_deg = lon_deg,
                     .separation_deg = 8.0,
                     .axis_tilt_deg = 12.0,
                     .leading_polarity = -1,
                     .flux_mx = 5e21,
                     .lead_radius_deg = 1.0,
                     .follow_radius_deg = 1.4 };
}

void
integrate (const TfSun *sun, TfTime time, double lon_deg, double lat_deg, double half_deg,
           double step_deg, Moment moment[2])
{
  double radius_cm = TF_RADIUS_MM * 1e8, sum[2][3] = { { 0 } }, total[2] = { 0 };
  int n = (int)ceil (half_deg / step_deg);
  for (int j = -n; j < n; j++)
    for (int i = -n; i < n; i++)
      {
        double lat = lat_deg + (j + 0.5) * step_deg, lon = lon_deg + (i + 0.5) * step_deg, unit[3];
        tf_sphere_unit (lon, lat, unit);
        double field = tf_sun_field (sun, time, unit);
        double area
            = radius_cm * radius_cm * step_deg * TF_DEG
              * (sin ((lat + 0.5 * step_deg) * TF_DEG) - sin ((lat - 0.5 * step_deg) * TF_DEG));
        int sign = field > 0 ? 0 : 1;
        total[sign] += fabs (field) * area;
        for (int k = 0; k < 3; k++)
          sum[sign][k] += fabs (field) * area * unit[k];
      }
  for (int sign = 0; sign < 2; sign++)
    {
      moment[sign] = (Moment){ total[sign], NAN, NAN };
      if (total[sign] > 0)
        tf_sphere_lonlat (sum[sign], &moment[sign].lon_deg, &moment[sign].lat_deg);
    }
}

double
planar_tilt (const Moment *lead, const Moment *follow)
{
  double mean = 0.5 * (lead->lat_deg + follow->lat_deg), h = mean < 0 ? -1 : 1;
  double dlon = remainder (lead->lon_deg - follow->lon_deg, 360) * cos (mean * TF_DEG);
  return atan (-h * (lead->lat_deg - follow->lat_deg) / dlon) / TF_DEG;
}

char *
make_folder (void)
{
  g_autoptr (GError) error = NULL;
  char *folder = g_dir_make_tmp ("tf-simulate-XXXXXX", &error);
  g_assert_no_error (error);
  return folder;
}

void
remove_folder (char *folder)
{
  g_autoptr (GDir) dir = g_dir_open (folder, 0, NULL);
  const char *name;
  while (dir != NULL && (name = g_dir_read_name (dir)) != NULL)
    {
      g_autofree char *path = g_build_filename (folder, name, NULL);
      g_unlink (path);
    }
  g_rmdir (folder);
  g_free (folder);
}

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  add_sky_tests ();
  add_shoot_tests ();
  add_style_tests ();
  test_simulate_add_cycles ();
  add_scenario_tests (argc > 1 ? argv[1] : NULL);
  return g_test_run ();
}
