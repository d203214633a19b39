/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "region-builder.h"

/* Worked by hand formula and by an independent spherical program for this project's design
 * notes: leading lon, lat, following lon, lat, planar tilt, great-circle tilt at the midpoint,
 * separation. NaN: straddles the equator. */
static const double vectors[][7] = {
  { 24, 15, 16, 17, 14.5782, 14.5939, 7.9450 },
  { 24, -15, 16, -17, 14.5782, 14.5939, 7.9450 },
  { 24, 17, 16, 15, -14.5782, -14.5939, 7.9450 },
  { 40, 28, 25, 33, 21.1497, 21.2731, 13.8412 },
  { 5, 20, 5, 24, 90.0, 90.0, 4.0 },
  { -10, 8, -2, 10, 165.7958, 165.7825, 8.1501 },
};

static void
test_vectors (void)
{
  for (guint k = 0; k < G_N_ELEMENTS (vectors); k++)
    {
      const double *v = vectors[k];
      double bearing, tilt;
      tf_tilt (v[0], v[1], v[2], v[3], FALSE, &bearing, &tilt);
      tf_check_near ("planar tilt", tilt, v[4], 6e-5);
      tf_tilt (v[0], v[1], v[2], v[3], TRUE, &bearing, &tilt);
      tf_check_near ("great-circle tilt", tilt, v[5], 6e-5);
      tf_check_near ("separation", tf_sphere_distance (v[0], v[1], v[2], v[3]), v[6], 6e-5);
    }
}

static void
test_straddling (void)
{
  double bearing, tilt;
  tf_tilt (3, 0.5, -3, -0.5, FALSE, &bearing, &tilt);
  tf_check_near ("bearing", bearing, 9.4623, 6e-5);
  tf_check_nan ("axis tilt", tilt);
  tf_tilt (3, 0.5, -3, -0.5, TRUE, &bearing, &tilt);
  tf_check_near ("bearing by great circle", bearing, 9.4668, 6e-5);
  tf_check_nan ("axis tilt by great circle", tilt);
  tf_check_near ("separation", tf_sphere_distance (3, 0.5, -3, -0.5), 6.0827, 6e-5);
}

/* The same pole pair told by longitudes on both sides of 0. */
static void
test_seam (void)
{
  double bearing, tilt, across, tilt_across;
  tf_tilt (24, 15, 16, 17, FALSE, &bearing, &tilt);
  tf_tilt (4, 15, 356, 17, FALSE, &across, &tilt_across);
  tf_check_near ("bearing", across, bearing, 1e-12);
  tf_check_near ("tilt", tilt_across, tilt, 1e-12);
}

void
add_tilt_tests (void)
{
  g_test_add_func ("/region/tilt/vectors-come-out-planar-and-on-the-sphere", test_vectors);
  g_test_add_func ("/region/tilt/straddling-poles-have-a-bearing-and-no-tilt", test_straddling);
  g_test_add_func ("/region/tilt/the-seam-of-longitude-does-not-show", test_seam);
}
