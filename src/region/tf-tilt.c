/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>

#include "tf-constants.h"
#include "tf-measure.h"

static double
planar_bearing (double lead_lon, double lead_lat, double follow_lon, double follow_lat)
{
  double dx = tf_wrap_180 (lead_lon - follow_lon) * cos (0.5 * (lead_lat + follow_lat) * TF_DEG);
  return atan2 (lead_lat - follow_lat, dx) / TF_DEG;
}

/* The chord between two points of the sphere is the tangent of their great circle at its
 * midpoint. */
static double
circle_bearing (double lead_lon, double lead_lat, double follow_lon, double follow_lat)
{
  double lead[3], follow[3], chord[3], middle[3], lon, lat, west[3], north[3];
  double to_west = 0.0, to_north = 0.0;
  tf_sphere_unit (lead_lon, lead_lat, lead);
  tf_sphere_unit (follow_lon, follow_lat, follow);
  for (guint k = 0; k < 3; k++)
    {
      chord[k] = lead[k] - follow[k];
      middle[k] = lead[k] + follow[k];
    }
  tf_sphere_lonlat (middle, &lon, &lat);
  tf_sphere_unit (lon + 90.0, 0.0, west);
  north[0] = -sin (lat * TF_DEG) * cos (lon * TF_DEG);
  north[1] = -sin (lat * TF_DEG) * sin (lon * TF_DEG);
  north[2] = cos (lat * TF_DEG);
  for (guint k = 0; k < 3; k++)
    {
      to_west += chord[k] * west[k];
      to_north += chord[k] * north[k];
    }
  return atan2 (to_north, to_west) / TF_DEG;
}

/* An axis that stands upright has one value, +90. */
static double
upright (double deg)
{
  return deg <= -90.0 && deg > -90.0 - 1e-9 ? 90.0 : deg;
}

void
tf_tilt (double lead_lon_deg, double lead_lat_deg, double follow_lon_deg, double follow_lat_deg,
         gboolean great_circle, double *bearing_deg, double *axis_tilt_deg)
{
  double bearing
      = great_circle ? circle_bearing (lead_lon_deg, lead_lat_deg, follow_lon_deg, follow_lat_deg)
                     : planar_bearing (lead_lon_deg, lead_lat_deg, follow_lon_deg, follow_lat_deg);
  double middle = lead_lat_deg + follow_lat_deg;
  gboolean straddles = lead_lat_deg * follow_lat_deg < 0.0 || !(fabs (middle) > 0.0);
  *bearing_deg = upright (bearing);
  *axis_tilt_deg = straddles ? (double)NAN : upright (middle > 0.0 ? -bearing : bearing);
}
