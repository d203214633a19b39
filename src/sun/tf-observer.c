/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-observer.h"

#include <erfa.h>
#include <math.h>

#include "tf-constants.h"

#define LIGHT_AU_DAY (TF_LIGHT_M_S * TF_DAY_S / TF_AU_M)

/* Carrington's elements: rotation 1 began 1853 November 9; mean synodic period (reference: Meeus,
 * Astronomical Algorithms, 2nd ed., ch. 29). First guesses only; L0 decides. */
#define ROTATION_1_JD 2398167.4
#define ROTATION_DAYS 27.2753

double
tf_wrap_180 (double deg)
{
  double r = remainder (deg, 360.0);
  return r <= -180.0 ? r + 360.0 : r;
}

double
tf_wrap_360 (double deg)
{
  double r = fmod (deg, 360.0);
  if (r < 0.0)
    r += 360.0;
  return r >= 360.0 ? 0.0 : r;
}

/* -- the Earth ------------------------------------------------------------------------------- */

/* The Sun's axis and its node on the ICRS equator: the frame in which W is counted. */
typedef struct
{
  double pole[3], node[3], quarter[3];
} SunAxes;

static SunAxes
sun_axes (void)
{
  double a = TF_POLE_RA_DEG * TF_DEG, d = TF_POLE_DEC_DEG * TF_DEG;
  SunAxes axes = { .pole = { cos (d) * cos (a), cos (d) * sin (a), sin (d) },
                   .node = { -sin (a), cos (a), 0.0 } };
  eraPxp (axes.pole, axes.node, axes.quarter);
  return axes;
}

/* Heliocentric and barycentric place and velocity of the Earth, au and au/day. ERFA's warning that
 * a date lies outside 1900-2100 is let pass: its error there stays far below what a frame can show.
 */
static gboolean
earth_place (TfTime time, double heliocentric[2][3], double barycentric[2][3])
{
  double jd1, jd2;
  if (!tf_time_is_known (time))
    return FALSE;
  tf_time_tt_jd (time, &jd1, &jd2);
  return eraEpv00 (jd1, jd2, heliocentric, barycentric) >= 0;
}

static double
l0_of (TfTime time, const double r[3], TfL0Kind kind)
{
  SunAxes axes = sun_axes ();
  double place[3] = { r[0], r[1], r[2] };
  double distance = eraPm (place);
  double lon = atan2 (eraPdp (place, axes.quarter), eraPdp (place, axes.node)) / TF_DEG;
  double radius_au = TF_RADIUS_MM * 1e6 / TF_AU_M;
  double path = kind == TF_L0_IMAGE ? distance - radius_au : distance;
  double days = time.s / TF_DAY_S - path / LIGHT_AU_DAY;
  double aberration = kind == TF_L0_IMAGE ? 0.0 : TF_ABERRATION_ARCSEC / 3600.0 / distance;
  return tf_wrap_360 (lon - TF_W0_DEG - TF_W1_DEG_DAY * days - aberration);
}

TfObserver
tf_observer_earth (TfTime time)
{
  TfObserver observer = { NAN, NAN, NAN, NAN, TF_OBSERVER_UNKNOWN };
  double helio[2][3], bary[2][3];
  if (!earth_place (time, helio, bary))
    return observer;
  SunAxes axes = sun_axes ();
  double distance = eraPm (helio[0]);
  observer.distance_m = distance * TF_AU_M;
  observer.b0_deg = asin (eraPdp (helio[0], axes.pole) / distance) / TF_DEG;
  observer.stonyhurst_lon_deg = 0.0;
  observer.carrington_lon_deg = l0_of (time, helio[0], TF_L0_IMAGE);
  observer.source = TF_OBSERVER_EARTH;
  return observer;
}

double
tf_earth_l0 (TfTime time, TfL0Kind kind)
{
  double helio[2][3], bary[2][3];
  return earth_place (time, helio, bary) ? l0_of (time, helio[0], kind) : NAN;
}

double
tf_observer_carrington (TfTime time, double stonyhurst_lon_deg, double distance_m)
{
  TfObserver earth = tf_observer_earth (time);
  double later = (distance_m - earth.distance_m) / TF_LIGHT_M_S;
  return tf_wrap_360 (earth.carrington_lon_deg + stonyhurst_lon_deg
                      + TF_W1_DEG_DAY * later / TF_DAY_S);
}

/* The Sun's apparent direction (the geometric one moved by the Earth's velocity over that of
 * light), and at right angles to it the directions of celestial north of date and of east. */
double
tf_earth_p (TfTime time)
{
  double helio[2][3], bary[2][3], npb[3][3], sun[3], east[3], north[3], jd1, jd2;
  if (!earth_place (time, helio, bary))
    return NAN;
  tf_time_tt_jd (time, &jd1, &jd2);
  eraPnm06a (jd1, jd2, npb);
  double distance = eraPm (helio[0]);
  for (int k = 0; k < 3; k++)
    sun[k] = -helio[0][k] / distance + bary[1][k] / LIGHT_AU_DAY;
  SunAxes axes = sun_axes ();
  eraPxp (npb[2], sun, east);
  eraPxp (sun, east, north);
  return atan2 (eraPdp (axes.pole, east) * eraPm (north), eraPdp (axes.pole, north) * eraPm (east))
         / TF_DEG;
}

/* -- Carrington rotations -------------------------------------------------------------------- */

double
tf_carrington_rotation (TfTime time)
{
  double l0 = tf_earth_l0 (time, TF_L0_IMAGE);
  double guess = (tf_time_jd (time, TF_SCALE_TT) - ROTATION_1_JD) / ROTATION_DAYS + 1.0;
  double elapsed = tf_wrap_360 (-l0) / 360.0;
  return round (guess - elapsed) + elapsed;
}

TfTime
tf_carrington_time (double rotation)
{
  TfTime time = tf_time_from_jd (ROTATION_1_JD, (rotation - 1.0) * ROTATION_DAYS, TF_SCALE_TT);
  for (int step = 0; step < 12; step++)
    {
      double change = (rotation - tf_carrington_rotation (time)) * ROTATION_DAYS * TF_DAY_S;
      time = tf_time_add (time, change);
      if (!(fabs (change) > 1e-3))
        break;
    }
  return time;
}

/* -- the cross-check ------------------------------------------------------------------------- */

/* Meeus, Astronomical Algorithms, 2nd ed., ch. 25, "low accuracy": true longitude (deg) and radius
 * vector (au) of the Sun. */
static void
meeus_sun (double t, double *longitude, double *radius)
{
  double l = 280.46646 + 36000.76983 * t + 0.0003032 * t * t;
  double m = (357.52911 + 35999.05029 * t - 0.0001537 * t * t) * TF_DEG;
  double e = 0.016708634 - 0.000042037 * t - 0.0000001267 * t * t;
  double c = (1.914602 - 0.004817 * t - 0.000014 * t * t) * sin (m)
             + (0.019993 - 0.000101 * t) * sin (2.0 * m) + 0.000289 * sin (3.0 * m);
  *longitude = l + c;
  *radius = 1.000001018 * (1.0 - e * e) / (1.0 + e * cos (m + c * TF_DEG));
}

void
tf_observer_meeus (TfTime time, double *p_deg, double *b0_deg, double *l0_deg)
{
  double jd = tf_time_jd (time, TF_SCALE_TT), t = (jd - 2451545.0) / 36525.0;
  double longitude, radius, dpsi = NAN, deps = NAN;
  meeus_sun (t, &longitude, &radius);
  if (tf_time_is_known (time))
    eraNut00b (jd, 0.0, &dpsi, &deps);
  double theta = (jd - 2398220.0) * 360.0 / 25.38;
  double tilt = 7.25 * TF_DEG;
  double node = 73.6667 + 1.3958333 * (jd - 2396758.0) / 36525.0;
  double apparent = (longitude - 20.4898 / 3600.0 / radius) * TF_DEG;
  double eps = (23.0 + 26.0 / 60.0
                + (21.448 - 46.8150 * t - 0.00059 * t * t + 0.001813 * t * t * t) / 3600.0)
                   * TF_DEG
               + deps;
  double from_node = apparent - node * TF_DEG;
  double x = atan (-cos (apparent + dpsi) * tan (eps)), y = atan (-cos (from_node) * tan (tilt));
  double eta = atan2 (-sin (from_node) * cos (tilt), -cos (from_node)) / TF_DEG;
  *p_deg = (x + y) / TF_DEG;
  *b0_deg = asin (sin (from_node) * sin (tilt)) / TF_DEG;
  *l0_deg = tf_wrap_360 (eta - theta);
}

/* -- words ----------------------------------------------------------------------------------- */

const char *
tf_observer_source_name (TfObserverSource source)
{
  switch (source)
    {
    case TF_OBSERVER_HEADER:
      return "header";
    case TF_OBSERVER_HEADER_EARTH:
      return "header and ephemeris";
    case TF_OBSERVER_EARTH:
      return "ephemeris";
    case TF_OBSERVER_UNKNOWN:
    default:
      return "unknown";
    }
}

char *
tf_observer_dup_vantage (const TfObserver *observer)
{
  if (observer == NULL || !isfinite (observer->stonyhurst_lon_deg))
    return g_strdup ("unknown");
  double lon = tf_wrap_180 (observer->stonyhurst_lon_deg);
  if (fabs (lon) <= 7.5)
    return g_strdup ("earth");
  return g_strdup_printf ("%c%03d", lon < 0.0 ? 'E' : 'W', (int)lround (fabs (lon)));
}
