/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-time.h"

#include <erfa.h>
#include <math.h>
#include <string.h>

#include "tf-constants.h"

#define J2000     2451545.0
#define MJD_J2000 51544.5

static TfTime
known (double s)
{
  return isfinite (s) ? (TfTime){ s } : TF_TIME_UNKNOWN;
}

gboolean
tf_time_is_known (TfTime time)
{
  return !isnan (time.s);
}

/* TT minus @scale, s, for all scales that keep a fixed distance. */
static double
tt_minus (TfTimeScale scale)
{
  switch (scale)
    {
    case TF_SCALE_TAI:
      return TF_TT_MINUS_TAI_S;
    case TF_SCALE_GPS:
      return TF_TT_MINUS_TAI_S - TF_GPS_MINUS_TAI_S;
    case TF_SCALE_TT:
    case TF_SCALE_UTC:
    default:
      return 0.0;
    }
}

/* Seconds are counted from the day's own 0 h with the day's own TAI - UTC, so that 23:59:60.5 and
 * seconds beyond the day come out right without asking how long the day is. */
TfTime
tf_time_from_calendar (int year, int month, int day, int hour, int minute, double second,
                       TfTimeScale scale)
{
  double jd, mjd;
  if (eraCal2jd (year, month, day, &jd, &mjd) != 0 || hour < 0 || hour > 24 || minute < 0
      || minute > 59)
    return TF_TIME_UNKNOWN;
  double of_day = 3600.0 * hour + 60.0 * minute + second;
  double offset = tt_minus (scale);
  if (scale == TF_SCALE_UTC)
    {
      double tai_minus_utc = 0.0;
      if (!isfinite (of_day)
          || eraDat (year, month, day, CLAMP (of_day / TF_DAY_S, 0.0, 1.0), &tai_minus_utc) < 0)
        return TF_TIME_UNKNOWN;
      offset = tai_minus_utc + TF_TT_MINUS_TAI_S;
    }
  return known ((mjd - MJD_J2000) * TF_DAY_S + of_day + offset);
}

TfTime
tf_time_from_jd (double jd1, double jd2, TfTimeScale scale)
{
  double offset = tt_minus (scale);
  if (!(fabs (jd1 + jd2) < 1e8))
    return TF_TIME_UNKNOWN;
  if (scale == TF_SCALE_UTC)
    {
      double tai1, tai2;
      if (eraUtctai (jd1, jd2, &tai1, &tai2) < 0)
        return TF_TIME_UNKNOWN;
      jd1 = tai1;
      jd2 = tai2;
      offset = TF_TT_MINUS_TAI_S;
    }
  return known ((jd1 - J2000) * TF_DAY_S + jd2 * TF_DAY_S + offset);
}

/* January 1 of @year and the number of its days; FALSE where ERFA's calendar ends. */
static gboolean
year_start (int year, double *jd, double *days)
{
  double jd0, mjd, next;
  if (year < -4700 || year > 9999 || eraCal2jd (year, 1, 1, &jd0, &mjd) != 0
      || eraCal2jd (year + 1, 1, 1, &jd0, &next) != 0)
    return FALSE;
  *jd = jd0 + mjd;
  *days = next - mjd;
  return TRUE;
}

TfTime
tf_time_from_year (double year)
{
  double whole = floor (year), jd, days;
  if (!(fabs (whole) < 1e5) || !year_start ((int)whole, &jd, &days))
    return TF_TIME_UNKNOWN;
  double in_year = (year - whole) * days;
  return tf_time_from_jd (jd + floor (in_year), in_year - floor (in_year), TF_SCALE_UTC);
}

TfTime
tf_time_add (TfTime time, double seconds)
{
  return known (time.s + seconds);
}

void
tf_time_tt_jd (TfTime time, double *jd1, double *jd2)
{
  double days = floor (time.s / TF_DAY_S);
  *jd1 = J2000 + days;
  *jd2 = (time.s - days * TF_DAY_S) / TF_DAY_S;
}

/* UTC as ERFA's two-part quasi Julian date, in which a day with a leap second is still one long. */
static gboolean
utc_jd (TfTime time, double *jd1, double *jd2)
{
  double tt1, tt2, tai1, tai2;
  if (!tf_time_is_known (time))
    return FALSE;
  tf_time_tt_jd (time, &tt1, &tt2);
  return eraTttai (tt1, tt2, &tai1, &tai2) == 0 && eraTaiutc (tai1, tai2, jd1, jd2) >= 0;
}

double
tf_time_jd (TfTime time, TfTimeScale scale)
{
  double jd1, jd2;
  if (scale == TF_SCALE_UTC)
    return utc_jd (time, &jd1, &jd2) ? jd1 + jd2 : NAN;
  tf_time_tt_jd (tf_time_add (time, -tt_minus (scale)), &jd1, &jd2);
  return jd1 + jd2;
}

double
tf_time_year (TfTime time)
{
  double jd1, jd2, start, days, fraction;
  int year, month, day;
  if (!utc_jd (time, &jd1, &jd2) || eraJd2cal (jd1, jd2, &year, &month, &day, &fraction) != 0
      || !year_start (year, &start, &days))
    return NAN;
  return year + ((jd1 - start) + jd2) / days;
}

gboolean
tf_time_calendar (TfTime time, int *year, int *month, int *day, int *hour, int *minute,
                  double *second)
{
  double jd1, jd2;
  int y, m, d, parts[4];
  if (!utc_jd (time, &jd1, &jd2) || eraD2dtf ("UTC", 6, jd1, jd2, &y, &m, &d, parts) < 0)
    return FALSE;
  if (year != NULL)
    *year = y;
  if (month != NULL)
    *month = m;
  if (day != NULL)
    *day = d;
  if (hour != NULL)
    *hour = parts[0];
  if (minute != NULL)
    *minute = parts[1];
  if (second != NULL)
    *second = parts[2] + parts[3] * 1e-6;
  return TRUE;
}

char *
tf_time_dup_iso (TfTime time, int decimals)
{
  double jd1, jd2;
  int y, m, d, parts[4];
  decimals = CLAMP (decimals, 0, 6);
  if (!utc_jd (time, &jd1, &jd2) || eraD2dtf ("UTC", decimals, jd1, jd2, &y, &m, &d, parts) < 0)
    return NULL;
  GString *text = g_string_new (NULL);
  g_string_printf (text, "%04d-%02d-%02dT%02d:%02d:%02d", y, m, d, parts[0], parts[1], parts[2]);
  if (decimals > 0)
    g_string_append_printf (text, ".%0*d", decimals, parts[3]);
  g_string_append_c (text, 'Z');
  return g_string_free (text, FALSE);
}

/* -- reading --------------------------------------------------------------------------------- */

/* Exactly @n digits at *p, which is moved past them; -1 when they are not there. */
static int
take_digits (const char **p, int n)
{
  int value = 0;
  for (int k = 0; k < n; k++, (*p)++)
    {
      if (!g_ascii_isdigit (**p))
        return -1;
      value = 10 * value + g_ascii_digit_value (**p);
    }
  return value;
}

static gboolean
take (const char **p, char c)
{
  if (**p != c)
    return FALSE;
  (*p)++;
  return TRUE;
}

/* ".5" and the like, or nothing; negative when there is a point without digits. */
static double
take_fraction (const char **p)
{
  double value = 0.0, unit = 0.1;
  if (!take (p, '.') && !take (p, ','))
    return 0.0;
  if (!g_ascii_isdigit (**p))
    return -1.0;
  for (; g_ascii_isdigit (**p); (*p)++, unit *= 0.1)
    value += unit * g_ascii_digit_value (**p);
  return value;
}

static gboolean
has_leap_second (int year, int month, int day)
{
  double jd, mjd, before = 0.0, after = 0.0, fraction;
  int y, m, d;
  if (eraCal2jd (year, month, day, &jd, &mjd) != 0
      || eraJd2cal (jd, mjd + 1.0, &y, &m, &d, &fraction) != 0)
    return FALSE;
  return eraDat (year, month, day, 1.0, &before) >= 0 && eraDat (y, m, d, 0.0, &after) >= 0
         && after - before > 0.5;
}

/* hh:mm[:ss[.s...]] */
static gboolean
take_clock (const char **p, int *hour, int *minute, double *second)
{
  *hour = take_digits (p, 2);
  if (*hour < 0 || !take (p, ':'))
    return FALSE;
  *minute = take_digits (p, 2);
  if (*minute < 0)
    return FALSE;
  if (!take (p, ':'))
    return TRUE;
  int whole = take_digits (p, 2);
  double fraction = take_fraction (p);
  *second = whole + fraction;
  return whole >= 0 && fraction >= 0.0;
}

static gboolean
clock_exists (int year, int month, int day, int hour, int minute, double second)
{
  if (hour == 24)
    return minute == 0 && second <= 0.0;
  if (second >= 60.0)
    return second < 61.0 && hour == 23 && minute == 59 && has_leap_second (year, month, day);
  return hour < 24 && minute < 60;
}

TfTime
tf_time_read (const char *text)
{
  int hour = 0, minute = 0;
  double second = 0.0;
  if (text == NULL)
    return TF_TIME_UNKNOWN;
  g_autofree char *trimmed = g_strstrip (g_strdup (text));
  const char *p = trimmed;
  int year = take_digits (&p, 4);
  int month = year >= 0 && take (&p, '-') ? take_digits (&p, 2) : -1;
  int day = month > 0 && take (&p, '-') ? take_digits (&p, 2) : -1;
  if (day < 1)
    return TF_TIME_UNKNOWN;
  if ((take (&p, 'T') || take (&p, ' ')) && !take_clock (&p, &hour, &minute, &second))
    return TF_TIME_UNKNOWN;
  take (&p, 'Z');
  if (*p != '\0' || !clock_exists (year, month, day, hour, minute, second))
    return TF_TIME_UNKNOWN;
  return tf_time_from_calendar (year, month, day, hour, minute, second, TF_SCALE_UTC);
}
