/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-constants.h"
#include "tf-info-private.h"

#include <math.h>

/* The observer's place: the header's where given, the Earth's by ephemeris only for what it
 * leaves out. Then the rule of radius and distance: an angular radius that disagrees with the
 * distance by more than 0.1 % rules. */

#define DISAGREE 1e-3

double
tf_header_radius_m (const TfHeader *header)
{
  double radius = tf_header_number (header, "RSUN_REF");
  return radius > 6.9e8 && radius < 7.05e8 ? radius : TF_RADIUS_MM * 1e6;
}

/* A keyword's number if it can be true. */
static double
within (const TfHeader *header, const char *keyword, double low, double high)
{
  double value = tf_header_number (header, keyword);
  return value >= low && value <= high ? value : NAN;
}

/* The distance that rules, m: @given unless the angular radius disagrees with it by more than
 * 0.1 %. NaN without both. */
static double
ruling_distance (const TfHeader *header, double given)
{
  double derived
      = tf_header_radius_m (header) / sin (within (header, "RSUN_OBS", 100, 40000) * TF_ARCSEC);
  return isnan (given) || fabs (derived / given - 1) > DISAGREE ? derived : given;
}

double
tf_header_angular_radius (const TfHeader *header)
{
  double given = within (header, "DSUN_OBS", 1e9, 1e13), distance = ruling_distance (header, given);
  if (isnan (distance))
    distance = isnan (given) ? tf_observer_earth (tf_header_time (header)).distance_m : given;
  return asin (tf_header_radius_m (header) / distance);
}

static void
complete_longitudes (TfObserver *o, TfTime time, const TfObserver *earth, TfNotes *cautions)
{
  double l0
      = tf_observer_carrington (time, 0, isnan (o->distance_m) ? earth->distance_m : o->distance_m);
  if (isnan (o->stonyhurst_lon_deg))
    o->stonyhurst_lon_deg = tf_wrap_180 (o->carrington_lon_deg - l0);
  else if (isnan (o->carrington_lon_deg))
    o->carrington_lon_deg = tf_wrap_360 (o->stonyhurst_lon_deg + l0);
  double off = tf_wrap_180 (o->carrington_lon_deg - l0 - o->stonyhurst_lon_deg);
  if (fabs (off) > 0.5)
    tf_notes_add (cautions, "longitudes-differ", "d", off);
}

/* What the header leaves out, from the Earth. */
static void
complete_from_earth (TfObserver *o, const TfObserver *earth, guint given, TfFrameInfo *info)
{
  if (isnan (o->distance_m))
    o->distance_m = earth->distance_m;
  if (isnan (o->b0_deg))
    o->b0_deg = earth->b0_deg;
  if (isnan (o->carrington_lon_deg))
    {
      o->carrington_lon_deg = earth->carrington_lon_deg;
      o->stonyhurst_lon_deg = earth->stonyhurst_lon_deg;
    }
  o->source = given == 3  ? TF_OBSERVER_HEADER
              : given > 0 ? TF_OBSERVER_HEADER_EARTH
                          : TF_OBSERVER_EARTH;
  if (!tf_time_is_known (info->time))
    return;
  if (given == 0)
    tf_notes_add (info->repairs, "observer-earth", "");
  else if (given < 3)
    tf_notes_add (info->repairs, "observer-part-earth", "");
}

/* Distance by the rule, with the note that says so. */
static void
settle_distance (const TfHeader *header, TfFrameInfo *info, TfObserver *o)
{
  double angle = within (header, "RSUN_OBS", 100, 40000),
         ruling = ruling_distance (header, o->distance_m);
  if (isnan (angle) || isnan (ruling) || fabs (ruling / o->distance_m - 1) < 1e-15)
    return;
  if (isnan (o->distance_m))
    tf_notes_add (info->repairs, "distance-from-radius", "dd", angle, ruling / TF_AU_M);
  else
    tf_notes_add (info->cautions, "distance-disagrees", "ddd", o->distance_m / TF_AU_M, angle,
                  ruling / TF_AU_M);
  o->distance_m = ruling;
}

void
tf_info_read_observer (const TfHeader *header, TfFrameInfo *info)
{
  double hglt = within (header, "HGLT_OBS", -90, 90);
  TfObserver earth = tf_observer_earth (info->time);
  TfObserver o = {
    .distance_m = within (header, "DSUN_OBS", 1e9, 1e13),
    .b0_deg = isnan (hglt) ? within (header, "CRLT_OBS", -90, 90) : hglt,
    .stonyhurst_lon_deg = tf_wrap_180 (within (header, "HGLN_OBS", -360, 360)),
    .carrington_lon_deg = tf_wrap_360 (within (header, "CRLN_OBS", -1e6, 1e6)),
    .source = TF_OBSERVER_UNKNOWN,
  };
  info->geometry.radius_mm = tf_header_radius_m (header) / 1e6;
  info->distance_given_m = o.distance_m;
  if (tf_header_is_map (header))
    {
      info->geometry.observer = (TfObserver){ NAN, NAN, NAN, NAN, TF_OBSERVER_UNKNOWN };
      return;
    }
  settle_distance (header, info, &o);
  complete_longitudes (&o, info->time, &earth, info->cautions);
  guint given = !isnan (o.distance_m) + !isnan (o.b0_deg) + !isnan (o.carrington_lon_deg);
  complete_from_earth (&o, &earth, given, info);
  info->geometry.observer = o;
}
