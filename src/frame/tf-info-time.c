/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-info-private.h"

#include <math.h>
#include <string.h>

/* Time = middle of the exposure: DATE-AVG, else T_OBS, else DATE-OBS and half of the exposure,
 * else DATE-OBS with "start or middle unknown". */

static TfTime
read_word (const TfHeader *header, const char *word)
{
  const char *text = tf_header_get (header, word);
  return text != NULL ? tf_time_read (text) : TF_TIME_UNKNOWN;
}

/* Length of the exposure, s, and the word that says it; NaN. */
static double
read_span (const TfHeader *header, const char **word)
{
  static const char *const words[]
      = { "TELAPSE", "INTERVAL", "TIMESPAN", "XPOSURE", "EXPTIME", "EXPOSURE" };
  TfTime start = read_word (header, "DATE-OBS"), end = read_word (header, "DATE-END");
  if (end.s > start.s && end.s - start.s < 86400)
    {
      *word = "DATE-END";
      return end.s - start.s;
    }
  for (guint k = 0; k < G_N_ELEMENTS (words); k++)
    {
      double span = tf_header_number (header, words[k]);
      if (span > 0 && span < 86400)
        {
          *word = words[k];
          return span;
        }
    }
  return NAN;
}

/* The whole rule: time, the word it came from, and the word and length of the exposure of which
 * half was added. */
static TfTime
find_time (const TfHeader *header, const char **source, const char **span_word, double *span)
{
  static const char *const middles[] = { "DATE-AVG", "T_OBS", "MAPTIME" };
  *span_word = NULL;
  *span = read_span (header, span_word);
  for (guint k = 0; k < G_N_ELEMENTS (middles); k++)
    {
      TfTime time = read_word (header, middles[k]);
      if (!tf_time_is_known (time))
        continue;
      const char *told = tf_header_get (header, "TFTIME"); /* left by a repair that made DATE-AVG */
      *source = k == 0 && told != NULL ? told : middles[k];
      *span_word = NULL;
      return time;
    }
  TfTime start = read_word (header, "DATE-OBS");
  *source = tf_time_is_known (start) ? "DATE-OBS" : "unknown";
  if (tf_header_is_map (header))
    *span_word = NULL;
  return *span_word != NULL ? tf_time_add (start, *span / 2) : start;
}

TfTime
tf_header_time (const TfHeader *header)
{
  const char *source, *word;
  double span;
  return find_time (header, &source, &word, &span);
}

void
tf_info_read_time (const TfHeader *header, TfFrameInfo *info)
{
  const char *source, *word;
  info->time = find_time (header, &source, &word, &info->time_span_s);
  info->time_source = g_intern_string (source);
  const char *text = tf_header_get (header, "DATE-OBS");
  if (!tf_time_is_known (info->time))
    tf_notes_add (info->cautions, "time-unknown", "s", text != NULL ? text : "");
  else if (word != NULL)
    tf_notes_add (info->repairs, "half-exposure", "ds", info->time_span_s / 2, word);
  else if (strcmp (source, "DATE-OBS") == 0 && !tf_header_is_map (header))
    tf_notes_add (info->cautions, strlen (text) == 10 ? "time-of-day-unknown" : "start-or-middle",
                  "s", text);
}
