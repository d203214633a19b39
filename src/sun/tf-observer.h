/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfObserver: the place a frame was taken from.
 *
 * Stonyhurst longitude 0 is the Earth's. b0_deg is the heliographic latitude of the observer, which
 * is the tilt of the Sun's axis to the line of sight. A header's own observer is never replaced by
 * the Earth's (an L1 or inclined-orbit place differs by 0.1 deg and more).
 */

#include <glib.h>

#include "tf-time.h"

G_BEGIN_DECLS

typedef enum
{
  TF_OBSERVER_UNKNOWN,
  TF_OBSERVER_HEADER,       /* all from the header */
  TF_OBSERVER_HEADER_EARTH, /* part from the header, the rest the Earth's */
  TF_OBSERVER_EARTH,        /* ephemeris */
} TfObserverSource;

typedef struct
{
  double distance_m;         /* from the Sun's centre, m */
  double b0_deg;             /* heliographic latitude, deg */
  double stonyhurst_lon_deg; /* (-180, 180] */
  double carrington_lon_deg; /* [0, 360): L0 for the Earth */
  TfObserverSource source;
} TfObserver;

/** TfL0Kind: which small corrections L0 carries (they differ by 0.0054 deg). */
typedef enum
{
  TF_L0_IMAGE, /* light time from the nearest point of the surface, no aberration: aligns pictures;
                  default */
  TF_L0_ALMANAC, /* light time from the centre and aberration, as the Astronomical Almanac prints */
} TfL0Kind;

/** tf_observer_earth: the Earth's centre at @time, by ERFA epv00 and the IAU pole and rotation.
 * All NaN when the time is unknown. */
TfObserver tf_observer_earth (TfTime time);
/**
 * tf_observer_carrington: Carrington longitude of an observer whose Stonyhurst longitude is known.
 * @distance_m: from the Sun's centre, m: the light of a nearer Sun is younger (0.08 deg from 1 au to
 *   0.2 au)
 * Returns: deg in [0, 360), with the corrections of TF_L0_IMAGE; NaN when a number is not known.
 */
double tf_observer_carrington (TfTime time, double stonyhurst_lon_deg, double distance_m);
/** tf_earth_l0: Carrington longitude of the Earth's central meridian, deg in [0, 360). */
double tf_earth_l0 (TfTime time, TfL0Kind kind);
/** tf_earth_p: position angle of the Sun's north pole from celestial north of date, east positive,
 * deg. */
double tf_earth_p (TfTime time);
/** tf_carrington_rotation: rotation number and its elapsed part (2132.0 = the start of 2132), by
 * the Earth's L0. */
double tf_carrington_rotation (TfTime time);
/** tf_carrington_time: when the Earth's central meridian had that rotation number: inverse of the
 * above, to 1 s. */
TfTime tf_carrington_time (double rotation);
/** tf_observer_meeus: Meeus, Astronomical Algorithms 2nd ed., ch. 29; a cross-check only, never
 * used for results. */
void tf_observer_meeus (TfTime time, double *p_deg, double *b0_deg, double *l0_deg);
const char *tf_observer_source_name (TfObserverSource source);
/** tf_observer_dup_vantage: "earth" within 7.5 deg of Stonyhurst longitude 0, else "E022" or "W140"
 * from the longitude rounded to a degree; "unknown" when there is none. */
char *tf_observer_dup_vantage (const TfObserver *observer);

/** tf_wrap_180: deg to (-180, 180]; tf_wrap_360: deg to [0, 360). NaN stays. */
double tf_wrap_180 (double deg);
double tf_wrap_360 (double deg);

G_END_DECLS
