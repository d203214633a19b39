/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-geometry.h"

#include <math.h>

#include "tf-constants.h"

void
tf_sphere_unit (double lon_deg, double lat_deg, double unit[3])
{
  double lon = lon_deg * TF_DEG, lat = lat_deg * TF_DEG;
  unit[0] = cos (lat) * cos (lon);
  unit[1] = cos (lat) * sin (lon);
  unit[2] = sin (lat);
}

void
tf_sphere_lonlat (const double vector[3], double *lon_deg, double *lat_deg)
{
  *lon_deg = tf_wrap_360 (atan2 (vector[1], vector[0]) / TF_DEG);
  *lat_deg = atan2 (vector[2], hypot (vector[0], vector[1])) / TF_DEG;
}

/* atan2 of |a x b| and a.b: good to rounding at any angle, where acos fails for small ones. */
double
tf_sphere_distance (double lon1_deg, double lat1_deg, double lon2_deg, double lat2_deg)
{
  double lat1 = lat1_deg * TF_DEG, lat2 = lat2_deg * TF_DEG;
  double dlon = tf_wrap_180 (lon2_deg - lon1_deg) * TF_DEG;
  double s1 = sin (lat1), c1 = cos (lat1), s2 = sin (lat2), c2 = cos (lat2);
  double half = sin (dlon / 2.0);
  double east = c2 * sin (dlon);
  double north = sin (lat2 - lat1) + 2.0 * s1 * c2 * half * half;
  return atan2 (hypot (east, north), s1 * s2 + c1 * c2 * cos (dlon)) / TF_DEG;
}
