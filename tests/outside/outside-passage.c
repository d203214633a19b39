/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Prints, for passage.py, outlines carried by the rotation laws and how much of them covers others, as CSV: what is drawn by lot is
 * printed with it.
 *
 * Usage: outside-passage carried|overlap
 */

#include <stdio.h>

#include "tf-follow.h"
#include "tf-rotation.h"

#define EPOCH "2013-10-12T06:00:00Z"
#define DAY_S 86400.0

static void
print_carried (GRand *lot)
{
  printf ("law,days,lon,lat,carried_lon,carried_lat\n");
  for (guint law = 0; tf_rotation_names[law] != NULL; law++)
    for (int k = 0; k < 6; k++)
      {
        double lat = g_rand_double_range (lot, -45.0, 45.0),
               days = g_rand_double_range (lot, -14.0, 14.0);
        g_autoptr (TfOutline) a
            = tf_outline_new_cap (tf_time_read (EPOCH), g_rand_double_range (lot, 0.0, 360.0), lat,
                                  g_rand_double_range (lot, 1.0, 8.0), 12);
        g_autoptr (TfOutline) b
            = tf_outline_carry (a, tf_time_add (tf_time_read (EPOCH), days * DAY_S), law);
        guint n, m;
        const TfVertex *p = tf_outline_get_ring (a, 0, FALSE, &n),
                       *q = tf_outline_get_ring (b, 0, FALSE, &m);
        for (guint v = 0; v < n; v++)
          printf ("%s,%.17g,%.17g,%.17g,%.17g,%.17g\n", tf_rotation_names[law], days, p[v].lon_deg,
                  p[v].lat_deg, q[v].lon_deg, q[v].lat_deg);
      }
}

static void
print_overlap (GRand *lot)
{
  TfFollowParams params;
  tf_follow_params_init (&params);
  printf ("law,days,lon_a,lat_a,radius_a,lon_b,lat_b,radius_b,share\n");
  for (guint law = 0; tf_rotation_names[law] != NULL; law++)
    for (int k = 0; k < 12; k++)
      {
        double lat = g_rand_double_range (lot, -35.0, 35.0),
               lon = g_rand_double_range (lot, 0.0, 360.0),
               days = g_rand_double_range (lot, 0.0, 3.0);
        double ra = g_rand_double_range (lot, 2.0, 6.0), rb = g_rand_double_range (lot, 2.0, 6.0);
        double lat_b = lat + g_rand_double_range (lot, -3.0, 3.0);
        double lon_b = lon + tf_rotation_carry (law, lat, days * DAY_S)
                       + g_rand_double_range (lot, -5.0, 5.0);
        params.law = (int)law;
        g_autoptr (TfOutline) a = tf_outline_new_cap (tf_time_read (EPOCH), lon, lat, ra, 180);
        g_autoptr (TfOutline) b
            = tf_outline_new_cap (tf_time_read (EPOCH), tf_wrap_360 (lon_b), lat_b, rb, 180);
        printf ("%s,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g\n", tf_rotation_names[law],
                days, lon, lat, ra, lon_b, lat_b, rb,
                tf_follow_overlap (a, b, days * DAY_S, &params));
      }
}

int
main (int argc, char **argv)
{
  g_autoptr (GRand) lot = g_rand_new_with_seed (20131012);
  if (argc == 2 && g_str_equal (argv[1], "carried"))
    print_carried (lot);
  else if (argc == 2 && g_str_equal (argv[1], "overlap"))
    print_overlap (lot);
  else
    return 2;
  return 0;
}
