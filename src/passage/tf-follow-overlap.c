/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* How much of two outlines is the same place on the Sun. The points of one are carried one by one
 * by the rotation law, each at the rate of its own latitude, and counted in the other. */

#include "tf-follow-private.h"

#include <math.h>

#include "tf-constants.h"
#include "tf-rotation.h"

enum
{
  ACROSS = 16 /* points across an outline's circle: an overlap is good to a few hundredths */
};

/* Offsets of a few degrees from the middle of a circle, in the tangent plane, as a place. */
static TfVertex
place_at (const TfShape *shape, double west_deg, double north_deg)
{
  double centre[3], west[3], north[3], v[3], lon, lat;
  double l = shape->lon_deg * TF_DEG, b = shape->lat_deg * TF_DEG;
  double x = tan (west_deg * TF_DEG), y = tan (north_deg * TF_DEG);
  tf_sphere_unit (shape->lon_deg, shape->lat_deg, centre);
  west[0] = -sin (l), west[1] = cos (l), west[2] = 0.0;
  north[0] = -sin (b) * cos (l), north[1] = -sin (b) * sin (l), north[2] = cos (b);
  for (int k = 0; k < 3; k++)
    v[k] = centre[k] + x * west[k] + y * north[k];
  tf_sphere_lonlat (v, &lon, &lat);
  return (TfVertex){ lon, lat };
}

void
tf_shape_init (TfShape *shape, const TfOutline *outline)
{
  *shape = (TfShape){ .outline = outline, .points = g_array_new (FALSE, FALSE, sizeof (TfVertex)) };
  tf_outline_get_cap (outline, &shape->lon_deg, &shape->lat_deg, &shape->radius_deg);
  double step = 2.0 * shape->radius_deg / ACROSS;
  for (int row = 0; row < ACROSS; row++)
    for (int column = 0; column < ACROSS; column++)
      {
        TfVertex p = place_at (shape, (column + 0.5 - ACROSS / 2.0) * step,
                               (row + 0.5 - ACROSS / 2.0) * step);
        double unit[3];
        tf_sphere_unit (p.lon_deg, p.lat_deg, unit);
        if (tf_outline_contains_rings (outline, unit))
          g_array_append_val (shape->points, p);
      }
  if (shape->points->len == 0) /* a sliver between the points: its middle stands for it */
    g_array_append_val (shape->points, ((TfVertex){ shape->lon_deg, shape->lat_deg }));
  shape->area_deg2 = shape->points->len * step * step;
}

void
tf_shape_clear (TfShape *shape)
{
  g_clear_pointer (&shape->points, g_array_unref);
}

/* The points of the smaller are carried, so that enough of them tell, back in time where it is the
 * later one. */
double
tf_shape_common (const TfShape *a, const TfShape *b, double seconds, guint law)
{
  if (b->area_deg2 < a->area_deg2)
    return tf_shape_common (b, a, -seconds, law);
  double moved = tf_rotation_carry (law, a->lat_deg, seconds);
  double apart = tf_sphere_distance (a->lon_deg + moved, a->lat_deg, b->lon_deg, b->lat_deg);
  /* The rotation shears an outline a little: a tenth of its radius over three days. */
  if (!(apart <= 1.2 * a->radius_deg + b->radius_deg))
    return 0.0;
  guint inside = 0;
  for (guint k = 0; k < a->points->len; k++)
    {
      const TfVertex *p = &g_array_index (a->points, TfVertex, k);
      double unit[3];
      tf_sphere_unit (p->lon_deg + tf_rotation_carry (law, p->lat_deg, seconds), p->lat_deg, unit);
      inside += tf_outline_contains_rings (b->outline, unit) != FALSE;
    }
  return a->area_deg2 * inside / a->points->len;
}

double
tf_follow_overlap (const TfOutline *a, const TfOutline *b, double seconds,
                   const TfFollowParams *params)
{
  g_return_val_if_fail (a != NULL && b != NULL && params != NULL, NAN);
  TfShape p, q;
  tf_shape_init (&p, a);
  tf_shape_init (&q, b);
  double share
      = tf_shape_common (&p, &q, seconds, (guint)params->law) / MIN (p.area_deg2, q.area_deg2);
  tf_shape_clear (&p);
  tf_shape_clear (&q);
  return share;
}
