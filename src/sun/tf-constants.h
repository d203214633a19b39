/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Constants, each with unit and source. */

#define TF_PI     3.14159265358979323846
#define TF_DEG    (TF_PI / 180.0)   /* radians in a degree */
#define TF_ARCSEC (TF_DEG / 3600.0) /* radians in an arc second */

#define TF_AU_M              149597870700.0 /* m; IAU 2012 Resolution B2 */
#define TF_LIGHT_M_S         299792458.0    /* m/s; exact, SI */
#define TF_RADIUS_MM         695.7          /* Mm; nominal solar radius, IAU 2015 Resolution B3 */
#define TF_POLE_RA_DEG       286.13  /* deg, ICRS; Archinal et al. 2018, Celest. Mech. 130:22 */
#define TF_POLE_DEC_DEG      63.87   /* deg, ICRS; same */
#define TF_W0_DEG            84.176  /* deg; same; without light time */
#define TF_W1_DEG_DAY        14.1844 /* deg/day; same; the Carrington rate, 360/25.38 */
#define TF_ABERRATION_ARCSEC 20.496  /* arcsec; constant of aberration, IAU 1976 */
#define TF_GPS_MINUS_TAI_S   (-19.0) /* s; GPS time is TAI - 19 s; IS-GPS-200 */
#define TF_TT_MINUS_TAI_S    32.184  /* s; IAU 1991 */
#define TF_DAY_S             86400.0
