/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-daily-summary.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-constants.h"
#include "tf-export.h"
#include "tf-json.h"

enum
{
  LOOKED_AT = 4096,     /* bytes within which a summary says what it is */
  LONGEST = 1 << 20,    /* bytes of a file */
  MOST_FIELDS = 16,
  TEN_THOUSAND = 10000,
  REACHED_YEAR = 2002   /* number 10,000 was given in June 2002 */
};

gboolean
tf_daily_summary_is (const char *bytes, gsize n)
{
  g_autofree char *head = g_utf8_make_valid (bytes, (gssize)MIN (n, (gsize)LOOKED_AT));
  g_autofree char *low = g_ascii_strdown (head, -1);
  return strstr (low, "solar region summary") != NULL;
}

static void
region_clear (gpointer data)
{
  TfListedRegion *region = data;
  g_free (region->mw_class);
  g_free (region->z);
}

static void
fault_clear (gpointer data)
{
  TfListedFault *fault = data;
  g_free (fault->line);
}

void
tf_daily_summary_free (TfDailySummary *summary)
{
  if (summary == NULL)
    return;
  g_free (summary->about);
  g_array_unref (summary->regions);
  g_array_unref (summary->faults);
  g_free (summary);
}

/* -- one line ----------------------------------------------------------------------------------- */

/* Digits only, all of them. */
static gboolean
read_count (const char *text, int *value)
{
  gsize n = strlen (text);
  if (n == 0 || n > 6 || strspn (text, "0123456789") != n)
    return FALSE;
  *value = (int)g_ascii_strtoll (text, NULL, 10);
  return TRUE;
}

/* "N19W56", or of a region due to return "S08". */
static gboolean
read_place (const char *text, TfListedRegion *region)
{
  int lat, lon;
  g_autofree char *up = g_ascii_strup (text, -1);
  gsize n = strlen (up);
  if ((n != 3 && n != 6) || (up[0] != 'N' && up[0] != 'S') || (n == 6 && up[3] != 'E' && up[3] != 'W'))
    return FALSE;
  char digits[3] = { up[1], up[2], '\0' };
  if (!read_count (digits, &lat) || lat > 90 || (n == 6 && !read_count (up + 4, &lon)))
    return FALSE;
  region->lat_deg = up[0] == 'N' ? lat : -lat;
  if (n == 6)
    region->cmd_deg = up[3] == 'W' ? lon : -lon;
  return TRUE;
}

/* "Beta-Gamma-Delta" */
static char *
dup_class (const char *text)
{
  static const char *const parts[][2] = { { "alpha", "α" }, { "beta", "β" }, { "gamma", "γ" }, { "delta", "δ" } };
  g_autofree char *low = g_ascii_strdown (text, -1);
  GString *greek = g_string_new (NULL);
  for (guint k = 0; k < G_N_ELEMENTS (parts); k++)
    if (strstr (low, parts[k][0]) != NULL)
      g_string_append (greek, parts[k][1]);
  return g_string_free (greek, FALSE);
}

static gboolean
read_longitude (const char *text, TfListedRegion *region)
{
  int lon;
  if (!read_count (text, &lon) || lon > 360)
    return FALSE;
  region->carrington_lon_deg = lon % 360;
  return TRUE;
}

static gboolean
read_spots (char **fields, guint n, TfListedRegion *region)
{
  int area, extent;
  if (n < 8 || !read_count (fields[3], &area) || !read_count (fields[5], &extent)
      || !read_count (fields[6], &region->spots))
    return FALSE;
  region->spot_area_msh = area;
  region->extent_deg = extent;
  region->z = g_strdup (fields[4]);
  region->mw_class = dup_class (fields[7]);
  return TRUE;
}

/* FALSE: the line is none of its section. */
static gboolean
read_region (char **fields, guint n, TfListed listed, TfListedRegion *region)
{
  *region = (TfListedRegion){ .listed = listed, .lat_deg = NAN, .cmd_deg = NAN, .carrington_lon_deg = NAN,
                              .spot_area_msh = NAN, .extent_deg = NAN, .spots = -1 };
  if (n < 3 || !read_count (fields[0], &region->number) || !read_place (fields[1], region)
      || !read_longitude (fields[2], region) || (listed != TF_LISTED_DUE && isnan (region->cmd_deg))
      || (listed == TF_LISTED_SPOTS && !read_spots (fields, n, region)))
    return FALSE;
  if (region->z == NULL)
    region->z = g_strdup ("");
  if (region->mw_class == NULL)
    region->mw_class = g_strdup ("");
  return TRUE;
}

/* -- the whole ---------------------------------------------------------------------------------- */

typedef struct
{
  TfDailySummary *summary;
  GString *about;
  int section; /* TfListed; -1 */
  int year, month, day;   /* of issue; 0 */
  int valid_day;          /* "31/2400Z"; 0 */
} Reader;

/* "Issued at 0030Z on 01 Jan 2015", in any case, or ":Issued: 2015 Jan 01 0030 UTC". */
static void
look_for_date (Reader *reader, const char *low)
{
  static const char *const months[] = { "jan", "feb", "mar", "apr", "may", "jun", "jul", "aug", "sep", "oct", "nov", "dec" };
  const char *at = strstr (low, "issued");
  if (at == NULL || reader->year != 0)
    return;
  g_auto (GStrv) words = g_strsplit_set (at, " :\t\r", -1);
  int day = 0, month = 0, year = 0;
  for (guint k = 0; words[k] != NULL; k++)
    {
      int value;
      for (int m = 0; m < 12; m++)
        if (g_str_has_prefix (words[k], months[m]))
          month = m + 1;
      if (!read_count (words[k], &value))
        continue;
      if (strlen (words[k]) <= 2 && day == 0)
        day = value;
      else if (value > 1900 && value < 2200 && strlen (words[k]) == 4 && year == 0 && (month == 0 || day != 0 || reader->year == 0))
        year = value;
    }
  if (day == 0 || month == 0 || year == 0 || !g_date_valid_dmy ((GDateDay)day, (GDateMonth)month, (GDateYear)year))
    return;
  reader->day = day, reader->month = month, reader->year = year;
}

static void
look_for_valid_day (Reader *reader, const char *low)
{
  const char *at = strstr (low, "/2400z");
  if (at == NULL || at - low < 2 || reader->valid_day != 0)
    return;
  char digits[3] = { at[-2], at[-1], '\0' };
  int day;
  if (read_count (digits, &day) && day >= 1 && day <= 31)
    reader->valid_day = day;
}

static gboolean
take_heading (Reader *reader, const char *line, const char *low)
{
  static const struct
  {
    const char *words;
    int section;
  } headings[] = { { "regions with sunspots", TF_LISTED_SPOTS },
                   { "plages without spots", TF_LISTED_PLAGE },
                   { "due to return", TF_LISTED_DUE },
                   { "comment:", -1 } };
  look_for_date (reader, low);
  look_for_valid_day (reader, low);
  for (guint k = 0; k < G_N_ELEMENTS (headings); k++)
    if (strstr (low, headings[k].words) != NULL)
      {
        reader->section = headings[k].section;
        return TRUE;
      }
  if (line[0] != ':' && line[0] != '#' && !g_str_has_prefix (low, "nmbr") && reader->section >= 0)
    return FALSE;
  if (line[0] == '#' || strstr (low, "summary") != NULL || strstr (low, "issued") != NULL || strstr (low, "compiled") != NULL)
    g_string_append_printf (reader->about, "%s%s", reader->about->len > 0 ? "\n" : "", line);
  return TRUE;
}

static guint
split_fields (char *line, char **fields)
{
  guint n = 0;
  for (char *p = line; *p != '\0' && n < MOST_FIELDS;)
    {
      p += strspn (p, " \t");
      if (*p == '\0')
        break;
      fields[n++] = p;
      p += strcspn (p, " \t");
      if (*p != '\0')
        *p++ = '\0';
    }
  return n;
}

static void
take_line (Reader *reader, const char *raw, guint place)
{
  char *fields[MOST_FIELDS];
  g_autofree char *line = g_strstrip (g_strdup (raw));
  g_autofree char *low = g_ascii_strdown (line, -1);
  if (*line == '\0' || take_heading (reader, line, low) || strcmp (low, "none") == 0 || strcmp (low, "nnn") == 0)
    return;
  g_autofree char *cut = g_strdup (line);
  TfListedRegion region;
  if (read_region (fields, split_fields (cut, fields), (TfListed)reader->section, &region))
    {
      region.place = place;
      g_array_append_val (reader->summary->regions, region);
      return;
    }
  region_clear (&region);
  const TfListedFault fault = { place, g_strdup (line) };
  g_array_append_val (reader->summary->faults, fault);
}

/* 24:00 UT of the latest day before the issue that has the number in the headings. */
static gboolean
set_time (Reader *reader)
{
  if (reader->year == 0)
    return FALSE;
  g_autoptr (GDate) date = g_date_new_dmy ((GDateDay)reader->day, (GDateMonth)reader->month, (GDateYear)reader->year);
  g_date_subtract_days (date, 1);
  for (int back = 0; back < 31 && reader->valid_day != 0 && g_date_get_day (date) != reader->valid_day; back++)
    g_date_subtract_days (date, 1);
  g_date_add_days (date, 1);
  reader->summary->time = tf_time_from_calendar (g_date_get_year (date), (int)g_date_get_month (date), g_date_get_day (date), 0, 0, 0, TF_SCALE_UTC);
  return tf_time_is_known (reader->summary->time);
}

static void
make_numbers_whole (TfDailySummary *summary, int year, int month)
{
  if (year < REACHED_YEAR || (year == REACHED_YEAR && month < 6))
    return;
  for (guint k = 0; k < summary->regions->len; k++)
    {
      TfListedRegion *region = &g_array_index (summary->regions, TfListedRegion, k);
      gboolean before = year == REACHED_YEAR && region->number > TEN_THOUSAND / 2;
      if (region->number < TEN_THOUSAND && !before)
        region->number += TEN_THOUSAND;
    }
}

TfDailySummary *
tf_daily_summary_read (const char *bytes, gsize n, const char *name, GError **error)
{
  g_return_val_if_fail (bytes != NULL || n == 0, NULL);
  g_autoptr (TfDailySummary) summary = g_new0 (TfDailySummary, 1);
  summary->regions = g_array_new (FALSE, FALSE, sizeof (TfListedRegion));
  g_array_set_clear_func (summary->regions, region_clear);
  summary->faults = g_array_new (FALSE, FALSE, sizeof (TfListedFault));
  g_array_set_clear_func (summary->faults, fault_clear);
  Reader reader = { .summary = summary, .about = g_string_new (NULL), .section = -1 };
  g_autofree char *text = n <= LONGEST ? g_utf8_make_valid (bytes, (gssize)n) : g_strdup ("");
  g_auto (GStrv) lines = g_strsplit (text, "\n", -1);
  for (guint k = 0; lines[k] != NULL; k++)
    take_line (&reader, lines[k], k + 1);
  summary->about = g_string_free (reader.about, FALSE);
  if (!tf_daily_summary_is (text, strlen (text)) || !set_time (&reader))
    {
      g_set_error (error, TF_EXCHANGE_ERROR, TF_EXCHANGE_ERROR_FORMAT,
                   _ ("%s: not a daily region summary, or without the day it was issued on"), name);
      return NULL;
    }
  make_numbers_whole (summary, reader.year, reader.month);
  return g_steal_pointer (&summary);
}

/* -- into a ledger ------------------------------------------------------------------------------ */

static void
add_number (JsonBuilder *builder, const char *key, double value)
{
  if (isfinite (value))
    tf_json_number (builder, key, value);
}

static void
add_text (JsonBuilder *builder, const char *key, const char *value)
{
  if (*value != '\0')
    tf_json_string (builder, key, value);
}

static char *
dup_flat (const TfListedRegion *region)
{
  static const char *const listed[] = { "spots", "plage", "due" };
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  json_builder_begin_object (builder);
  add_number (builder, "lat_deg", region->lat_deg);
  add_number (builder, "cmd_deg", region->cmd_deg);
  add_number (builder, "stonyhurst_lon_deg", region->cmd_deg);
  add_number (builder, "carrington_lon_deg", region->carrington_lon_deg);
  add_text (builder, "class", region->mw_class);
  tf_json_string (builder, "listed", listed[region->listed]);
  add_number (builder, "spot_area_msh", region->spot_area_msh);
  add_number (builder, "extent_deg", region->extent_deg);
  if (region->spots >= 0)
    tf_json_int (builder, "spots", region->spots);
  add_text (builder, "z", region->z);
  json_builder_end_object (builder);
  return tf_json_dup_text (builder, FALSE);
}

gint64
tf_daily_summary_bring (const TfDailySummary *summary, TfLedger *ledger, const char *name, const char *checksum,
                        const char *source, GError **error)
{
  g_return_val_if_fail (summary != NULL && ledger != NULL && name != NULL && checksum != NULL, 0);
  g_autoptr (GArray) entries = g_array_new (FALSE, FALSE, sizeof (TfOutsideEntry));
  g_array_set_clear_func (entries, (GDestroyNotify)tf_outside_entry_clear);
  for (guint k = 0; k < summary->regions->len; k++)
    {
      const TfListedRegion *region = &g_array_index (summary->regions, TfListedRegion, k);
      TfOutsideEntry entry = { .place = region->place, .group = k, .time = summary->time };
      entry.region = g_strdup_printf ("%d", region->number);
      entry.passage = g_strdup (entry.region);
      entry.flat = dup_flat (region);
      g_array_append_val (entries, entry);
    }
  TfOutsideTable table = { .name = (char *)name,
                           .checksum = (char *)checksum,
                           .format = (char *)TF_DAILY_SUMMARY_FORMAT,
                           .source = (char *)(source != NULL ? source : name),
                           .licence = (char *)"",
                           .about = summary->about,
                           .columns = (char *)TF_DAILY_SUMMARY_FORMAT "/1",
                           .linking = (char *)"column",
                           .n_rows = summary->regions->len + summary->faults->len,
                           .n_left = summary->faults->len };
  return tf_ledger_add_outside (ledger, &table, entries, error);
}
