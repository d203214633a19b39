/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>

#include "tf-bring.h"
#include "tf-constants.h"
#include "tf-rotation.h"

/* Rows of a table without names of regions, linked from day to day. The measure is the distance on
 * the sphere between a row and the place to which the earlier one was carried. */

#define LEAST_S   (0.4 * TF_DAY_S)
#define MOST_S    (1.6 * TF_DAY_S)
#define MOST_DEG  5.0
#define RADIAN    (G_PI / 180)
#define EARTH_DEG (360.0 / 365.25) /* a day: what the central meridian gains on the stars */

/* Distance of @later from where @earlier would have got, deg; infinite when too far in time. */
static double
distance (const TfTime *times, const double *lats, const double *lons, gboolean carrington,
          guint earlier, guint later)
{
  double s = times[later].s - times[earlier].s;
  if (!(s >= LEAST_S && s <= MOST_S))
    return HUGE_VAL;
  double moved = carrington
                     ? tf_rotation_carry (0, lats[earlier], s)
                     : (tf_rotation_rate (0, lats[earlier]) - EARTH_DEG) * s / TF_DAY_S;
  double east_west = remainder (lons[later] - lons[earlier] - moved, 360.0)
                     * cos (0.5 * (lats[later] + lats[earlier]) * RADIAN);
  double d = hypot (east_west, lats[later] - lats[earlier]);
  return isnan (d) ? HUGE_VAL : d;
}

/* The nearest row that comes @step (-1 before, +1 after) of @k; @n when none is near enough. */
static guint
nearest (guint n, const TfTime *times, const double *lats, const double *lons, gboolean carrington,
         guint k, int step)
{
  guint best = n;
  double least = MOST_DEG;
  for (gint64 j = (gint64)k + step; j >= 0 && j < n; j += step)
    {
      if (fabs (times[j].s - times[k].s) > MOST_S)
        break;
      double d = step < 0 ? distance (times, lats, lons, carrington, (guint)j, k)
                          : distance (times, lats, lons, carrington, k, (guint)j);
      if (d < least)
        {
          least = d;
          best = (guint)j;
        }
    }
  return best;
}

void
tf_bring_link (guint n, const TfTime *times, const double *lats, const double *lons,
               gboolean carrington, guint *groups)
{
  for (guint k = 0; k < n; k++)
    {
      guint before = nearest (n, times, lats, lons, carrington, k, -1);
      gboolean mutual
          = before < n && nearest (n, times, lats, lons, carrington, before, 1) == k;
      groups[k] = mutual ? groups[before] : k;
    }
}
