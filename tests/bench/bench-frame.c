/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "bench-frame.h"

#include <math.h>
#include <stdio.h>

#include "tf-simulate.h"

enum
{
  REGIONS = 12,
  NETWORK = 2000,
};

static void
add_region (TfSun *sun, double l0_deg, guint k)
{
  gboolean north = k % 2 == 0;
  g_autofree char *name = g_strdup_printf ("region-%02u", k + 1);
  TfBipole bipole = {
    .lat_deg = (north ? 1 : -1) * (11.0 + 5.0 * (k / 2 % 3)),
    .carrington_lon_deg = fmod (l0_deg + 360.0 - 62.0 + 24.5 * (k / 2) + (north ? 0 : 11), 360.0),
    .separation_deg = 4.0 + 0.5 * (k % 5),
    .axis_tilt_deg = 4.0 + k,
    .leading_polarity = north ? -1 : 1,
    .flux_mx = 3e21 * (1 + k % 4),
    .lead_radius_deg = 1.0,
    .follow_radius_deg = 1.5,
    .fragments = 4 + k % 4,
  };
  tf_sun_add_bipole (sun, name, "bipole", &bipole);
}

int
bench_frame_make (const char *path, guint size)
{
  g_autoptr (GError) error = NULL;
  TfTime time = tf_time_from_calendar (2013, 10, 12, 6, 0, 0, TF_SCALE_UTC);
  g_autoptr (TfSun) sun = tf_sun_new (time, 5);
  g_autoptr (TfWorkers) workers = tf_workers_new (0);
  TfWork work = { .workers = workers };
  TfShot shot;
  tf_shot_init (&shot);
  shot.size = size;
  shot.noise_gauss = 8;
  shot.quantum_gauss = 0.1;
  for (guint k = 0; k < REGIONS; k++)
    add_region (sun, tf_earth_l0 (time, TF_L0_IMAGE), k);
  tf_sun_add_network (sun, NETWORK, 4e19);
  if (tf_sun_write (sun, path, time, &shot, 11, &work, &error))
    return 0;
  fprintf (stderr, "%s\n", error->message);
  return 1;
}
