/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-info-private.h"

#include <math.h>
#include <string.h>

/* Habits of dates. All end as ISO text in UTC under DATE-OBS, DATE-AVG, DATE-END or T_OBS. */

/* Reads @pattern from @text: a digit d stands for one to d digits, read into the next of @out;
 * a blank for any blanks; all else for itself. Returns: where it ended, NULL when @text is not
 * like that. */
static const char *
scan (const char *text, const char *pattern, int *out)
{
  if (text == NULL)
    return NULL;
  for (; *pattern != '\0'; pattern++)
    {
      if (*pattern == ' ')
        text += strspn (text, " ");
      else if (!g_ascii_isdigit (*pattern))
        {
          if (*text++ != *pattern)
            return NULL;
        }
      else
        {
          int value = 0, n = 0;
          for (; n < *pattern - '0' && g_ascii_isdigit (*text); n++)
            value = value * 10 + (*text++ - '0');
          if (n == 0)
            return NULL;
          *out++ = value;
        }
    }
  return text;
}

static void
set_time (TfHeader *header, const char *keyword, TfTime time)
{
  g_autofree char *iso = tf_time_dup_iso (time, 3);
  if (iso != NULL)
    tf_header_set (header, keyword, iso);
}

/* "hh:mm", "hh:mm:ss", "hh:mm:ss.sss", blanks around allowed: seconds of the day, NaN when it
 * is not that. */
static double
read_clock (const char *text)
{
  int at[2];
  const char *rest = scan (text, " 2:2", at);
  if (rest == NULL || at[0] > 24 || at[1] > 59)
    return NAN;
  double second = *rest == ':' ? g_ascii_strtod (rest + 1, NULL) : 0;
  return second >= 0 && second < 61 ? at[0] * 3600.0 + at[1] * 60.0 + second : NAN;
}

/* DATE_OBS and the like; DATE-BEG where there is no DATE-OBS. */
gboolean
tf_dialect_underscore_date (TfHeader *header, TfNotes *repairs)
{
  static const char *const pairs[][2] = {
    { "DATE_OBS", "DATE-OBS" }, { "DATE-BEG", "DATE-OBS" }, { "DATE_BEG", "DATE-OBS" },
    { "DATE_END", "DATE-END" }, { "DATE_AVG", "DATE-AVG" }, { "DATE_AVE", "DATE-AVG" },
    { "TIME_OBS", "TIME-OBS" },
  };
  gboolean done = FALSE;
  for (guint k = 0; k < G_N_ELEMENTS (pairs); k++)
    {
      const char *text = tf_header_get (header, pairs[k][0]);
      if (text == NULL || tf_header_has (header, pairs[k][1]))
        continue;
      tf_notes_add (repairs, "keyword-read-as", "ss", pairs[k][0], pairs[k][1]);
      g_autofree char *kept = g_strdup (text);
      tf_header_set (header, pairs[k][1], kept);
      done = TRUE;
    }
  return done;
}

/* "2010.10.15_00:03:30.000_TAI", also _UTC, _UT and _TT: unknown when it is not that. */
static TfTime
read_dotted (const char *text)
{
  int at[5];
  char *rest = (char *)scan (text, "4.2.2_2:2", at);
  double second = 0;
  if (rest == NULL)
    return TF_TIME_UNKNOWN;
  if (*rest == ':')
    second = g_ascii_strtod (rest + 1, &rest);
  TfTimeScale scale = strcmp (rest, "_TAI") == 0  ? TF_SCALE_TAI
                      : strcmp (rest, "_TT") == 0 ? TF_SCALE_TT
                                                  : TF_SCALE_UTC;
  return tf_time_from_calendar (at[0], at[1], at[2], at[3], at[4], second, scale);
}

gboolean
tf_dialect_tai_text (TfHeader *header, TfNotes *repairs)
{
  static const char *const words[] = { "T_OBS", "DATE-OBS", "DATE-AVG", "DATE-END" };
  gboolean done = FALSE;
  for (guint k = 0; k < G_N_ELEMENTS (words); k++)
    {
      const char *text = tf_header_get (header, words[k]);
      TfTime time = text != NULL ? read_dotted (text) : TF_TIME_UNKNOWN;
      if (!tf_time_is_known (time))
        continue;
      g_autofree char *iso = tf_time_dup_iso (time, 3);
      tf_notes_add (repairs, "tai-text", "sss", words[k], text, iso);
      tf_header_set (header, words[k], iso);
      done = TRUE;
    }
  return done;
}

static gboolean
read_slashed (const char *text, int date[3])
{
  const char *rest = scan (text, " 4/2/2 ", date);
  return rest != NULL && *rest == '\0' && date[0] > 1000;
}

static TfTime
calendar_and_clock (const int date[3], double clock, TfTimeScale scale)
{
  double whole = floor (clock);
  int seconds = (int)whole;
  return tf_time_from_calendar (date[0], date[1], date[2], seconds / 3600, seconds / 60 % 60,
                                seconds % 60 + (clock - whole), scale);
}

/* The ground network's full disks: DATE-OBS with slashes and TIME-OBS, in GPS time. */
gboolean
tf_dialect_gps_time (TfHeader *header, TfNotes *repairs)
{
  int date[3];
  const char *type = tf_header_get (header, "CTYPE1");
  double clock = read_clock (tf_header_get (header, "TIME-OBS"));
  gboolean network
      = (type != NULL && g_str_has_prefix (type, "GONG")) || tf_header_has (header, "GPSSTAT");
  if (!network || !(clock < 86400) || !read_slashed (tf_header_get (header, "DATE-OBS"), date))
    return FALSE;
  TfTime time = calendar_and_clock (date, clock, TF_SCALE_GPS);
  if (!tf_time_is_known (time))
    return FALSE;
  TfTime as_utc = calendar_and_clock (date, clock, TF_SCALE_UTC);
  tf_notes_add (repairs, "gps-time", "sd", tf_header_get (header, "TIME-OBS"), as_utc.s - time.s);
  set_time (header, "DATE-OBS", time);
  tf_header_remove (header, "TIME-OBS");
  return TRUE;
}

static gboolean
set_date (TfHeader *header, TfNotes *repairs, const int date[3])
{
  if (!tf_time_is_known (tf_time_from_calendar (date[0], date[1], date[2], 0, 0, 0, TF_SCALE_UTC)))
    return FALSE;
  g_autofree char *iso = g_strdup_printf ("%04d-%02d-%02d", date[0], date[1], date[2]);
  tf_notes_add (repairs, "date-format", "ss", tf_header_get (header, "DATE-OBS"), iso);
  tf_header_set (header, "DATE-OBS", iso);
  return TRUE;
}

gboolean
tf_dialect_slash_date (TfHeader *header, TfNotes *repairs)
{
  int date[3];
  return read_slashed (tf_header_get (header, "DATE-OBS"), date)
         && set_date (header, repairs, date);
}

/* "mm-dd-yy" of old observatories, and "dd/mm/yy" of FITS before 1998; 50 to 99 are of the 20th
 * century. */
gboolean
tf_dialect_two_digit_year (TfHeader *header, TfNotes *repairs)
{
  const char *text = tf_header_get (header, "DATE-OBS");
  int at[3];
  if (text == NULL || strlen (text) != 8)
    return FALSE;
  gboolean dashed = scan (text, "2-2-2", at) != NULL;
  if (!dashed && scan (text, "2/2/2", at) == NULL)
    return FALSE;
  int date[3]
      = { at[2] + (at[2] < 50 ? 2000 : 1900), dashed ? at[0] : at[1], dashed ? at[1] : at[0] };
  return set_date (header, repairs, date);
}

static gboolean
date_only (const TfHeader *header, int date[3])
{
  const char *rest = scan (tf_header_get (header, "DATE-OBS"), "4-2-2", date);
  return rest != NULL && *rest == '\0' && date[0] > 1000;
}

gboolean
tf_dialect_date_and_time_apart (TfHeader *header, TfNotes *repairs)
{
  int date[3];
  double clock = read_clock (tf_header_get (header, "TIME-OBS"));
  if (!(clock < 86401) || !date_only (header, date))
    return FALSE;
  TfTime time = calendar_and_clock (date, clock, TF_SCALE_UTC);
  if (!tf_time_is_known (time))
    return FALSE;
  tf_notes_add (repairs, "date-and-time-apart", "ss", tf_header_get (header, "DATE-OBS"),
                tf_header_get (header, "TIME-OBS"));
  set_time (header, "DATE-OBS", time);
  return TRUE;
}

/* TAVG-UT: mean time of the exposure in hours of the day of DATE-OBS. */
gboolean
tf_dialect_mean_hours (TfHeader *header, TfNotes *repairs)
{
  int date[3];
  double hours = tf_header_number (header, "TAVG-UT");
  if (!(hours >= 0 && hours < 48) || tf_header_has (header, "DATE-AVG")
      || !date_only (header, date))
    return FALSE;
  TfTime day = tf_time_from_calendar (date[0], date[1], date[2], 0, 0, 0, TF_SCALE_UTC);
  if (!tf_time_is_known (day))
    return FALSE;
  set_time (header, "DATE-AVG", tf_time_add (day, hours * 3600));
  tf_header_set (header, "TFTIME", "TAVG-UT");
  tf_notes_add (repairs, "mean-hours", "ds", hours, tf_header_get (header, "DATE-AVG"));
  return TRUE;
}

/* TIMESYS other than UTC. */
gboolean
tf_dialect_time_system (TfHeader *header, TfNotes *repairs)
{
  static const char *const words[] = { "DATE-OBS", "DATE-AVG", "DATE-END" };
  const char *system = tf_header_get (header, "TIMESYS");
  if (system == NULL)
    return FALSE;
  TfTimeScale scale = TF_SCALE_UTC;
  if (g_ascii_strcasecmp (system, "TAI") == 0)
    scale = TF_SCALE_TAI;
  else if (g_ascii_strcasecmp (system, "TT") == 0)
    scale = TF_SCALE_TT;
  else if (g_ascii_strcasecmp (system, "GPS") == 0)
    scale = TF_SCALE_GPS;
  else
    return FALSE;
  tf_notes_add (repairs, "time-system", "s", system);
  for (guint k = 0; k < G_N_ELEMENTS (words); k++)
    {
      int y, mo, d, h, mi;
      double s;
      const char *text = tf_header_get (header, words[k]);
      if (text != NULL && !g_str_has_suffix (text, "Z")
          && tf_time_calendar (tf_time_read (text), &y, &mo, &d, &h, &mi, &s))
        set_time (header, words[k], tf_time_from_calendar (y, mo, d, h, mi, s, scale));
    }
  tf_header_set (header, "TIMESYS", "UTC");
  return TRUE;
}
