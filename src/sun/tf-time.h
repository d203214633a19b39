/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfTime: an instant, as seconds of Terrestrial Time since J2000.0 (JD 2451545.0 TT).
 *
 * A plain value: copy it, compare members. s is NaN for "unknown"; near the year 2000 its step is
 * below a microsecond, in 1750 too. All conversions of scale go through ERFA. UTC before 1960 is
 * taken as UT1 with TT - UTC from ERFA's own "dubious" values, good enough for a sunspot table.
 */

#include <glib.h>

G_BEGIN_DECLS

typedef struct
{
  double s; /* s of TT since J2000.0; NaN: unknown */
} TfTime;

typedef enum
{
  TF_SCALE_UTC,
  TF_SCALE_TAI,
  TF_SCALE_TT,
  TF_SCALE_GPS,
} TfTimeScale;

#define TF_TIME_UNKNOWN ((TfTime){ __builtin_nan ("") })

gboolean tf_time_is_known (TfTime time);
/** tf_time_from_calendar: Gregorian date in @scale; @second may be 60.x in a leap second and may
 * run past its range by arithmetic; unknown when the date does not exist. */
TfTime tf_time_from_calendar (int year, int month, int day, int hour, int minute, double second,
                              TfTimeScale scale);
/** tf_time_from_jd: Julian date in two parts in @scale. */
TfTime tf_time_from_jd (double jd1, double jd2, TfTimeScale scale);
/** tf_time_from_year: decimal year, 2000.0 = 2000 January 1 0 h UTC, within the year linear in
 * days. */
TfTime tf_time_from_year (double year);
/** tf_time_read: ISO 8601 text, "2013-10-12T06:00:00.5Z", the Z, fraction, seconds or the whole
 * time optional; read as UTC. unknown when it is not that. */
TfTime tf_time_read (const char *text);

TfTime tf_time_add (TfTime time, double seconds);
/** tf_time_tt_jd: Julian date in TT, as jd1 (whole and half days) and jd2. */
void tf_time_tt_jd (TfTime time, double *jd1, double *jd2);
/** tf_time_jd: one-number Julian date in @scale; NaN when unknown. */
double tf_time_jd (TfTime time, TfTimeScale scale);
/** tf_time_year: decimal year of UTC, the inverse of tf_time_from_year. */
double tf_time_year (TfTime time);
/** tf_time_calendar: UTC; FALSE when unknown. Any out pointer may be NULL. */
gboolean tf_time_calendar (TfTime time, int *year, int *month, int *day, int *hour, int *minute,
                           double *second);
/** tf_time_dup_iso: "2013-10-12T06:00:00Z" in UTC with @decimals of the second (0-6); NULL when
 * unknown. */
char *tf_time_dup_iso (TfTime time, int decimals);

G_END_DECLS
