/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-bring-private.h"
#include "tf-json.h"
#include "tf-number.h"
#include "tf-unit.h"

/* One cell: missing, read, turned into our unit and convention, held against its range. */

static const struct
{
  const char *name; /* or, with a leading *, what a name ends with */
  double min, max;
} ranges[] = {
  { "*lat_deg", -90, 90 },           { "*lon_deg", -720, 720 },   { "cmd_deg", -180, 180 },
  { "mu", 0, 1 },                    { "axis_tilt_deg", -90, 90 }, { "axis_bearing_deg", -90, 90 },
  { "polarity_tilt_deg", -180, 180 }, { "*sigma_deg", 0, HUGE_VAL }, { "separation_deg", 0, 180 },
  { "*_mx", 0, HUGE_VAL },           { "imbalance", -1, 1 },      { "leading_polarity", -1, 1 },
  { "*area_msh", 0, 1e6 },           { "time_year", -5000, 5000 }, { "time_jd", 0, 1e7 },
};

gboolean
tf_brought_column_init (TfBroughtColumn *column, const char *given)
{
  const TfColumnRule *rule = column->rule;
  column->factor = 1;
  for (const TfColumn *c = tf_columns; c->name != NULL; c++)
    if (strcmp (c->name, rule->name) == 0)
      column->ours = c;
  const char *unit = rule->unit != NULL ? rule->unit : given;
  if (column->ours == NULL || column->ours->type == TF_COLUMN_TEXT)
    return rule->unit == NULL; /* a time or a text has none */
  if (*unit == '\0')
    return TRUE;
  column->factor = tf_unit_factor (unit, column->ours->vo_unit);
  return isfinite (column->factor);
}

char *
tf_brought_check_range (const char *name, double value)
{
  for (guint k = 0; k < G_N_ELEMENTS (ranges); k++)
    {
      gboolean meant = *ranges[k].name == '*' ? g_str_has_suffix (name, ranges[k].name + 1)
                                              : strcmp (name, ranges[k].name) == 0;
      if (!meant || (value >= ranges[k].min && value <= ranges[k].max))
        continue;
      return isfinite (ranges[k].max)
                 ? g_strdup_printf (_ ("%s lies from %g to %g"), name, ranges[k].min, ranges[k].max)
                 : g_strdup_printf (_ ("%s is not below %g"), name, ranges[k].min);
    }
  return NULL;
}

/* Longitudes into the range of their kind. */
static double
wrap (const char *name, double value)
{
  double turned = value;
  if (g_str_has_suffix (name, "carrington_lon_deg"))
    {
      turned = fmod (value, 360.0);
      return turned < 0 ? turned + 360.0 : turned;
    }
  if (strcmp (name, "stonyhurst_lon_deg") == 0 && !(value > -180 && value <= 180))
    turned = remainder (value, 360.0);
  return turned <= -180 ? turned + 360.0 : turned;
}

static gboolean
is_missing (const TfColumnRule *rule, const char *cell)
{
  double value, missing;
  if (cell == NULL || *cell == '\0' || g_ascii_strcasecmp (cell, "nan") == 0
      || g_ascii_strcasecmp (cell, "null") == 0)
    return TRUE;
  if (rule->missing == NULL)
    return FALSE;
  return strcmp (cell, rule->missing) == 0
         || (tf_number_read (cell, &value) && tf_number_read (rule->missing, &missing)
             && value >= missing && value <= missing);
}

static char *
take_time (const TfBroughtColumn *column, const char *cell, JsonObject *flat, TfTime *time)
{
  const char *name = column->rule->name;
  double value = NAN;
  if (strcmp (name, "time") == 0)
    *time = tf_time_read (cell);
  else
    {
      if (!tf_number_read (cell, &value))
        return g_strdup (_ ("not a number"));
      char *wrong = tf_brought_check_range (name, value);
      if (wrong != NULL)
        return wrong;
      *time = strcmp (name, "time_jd") == 0
                  ? tf_time_from_jd (floor (value), value - floor (value), TF_SCALE_UTC)
                  : tf_time_from_year (value);
    }
  if (!tf_time_is_known (*time))
    return g_strdup (_ ("not a time; ISO 8601 in UTC is read"));
  g_autofree char *iso = tf_time_dup_iso (*time, 3);
  json_object_set_string_member (flat, "time", iso);
  return NULL;
}

static gboolean
read_truth (const char *cell, double *value)
{
  static const char *const yes[] = { "true", "yes", "t", "1", NULL },
                           *const no[] = { "false", "no", "f", "0", NULL };
  g_autofree char *lower = g_ascii_strdown (cell, -1);
  *value = g_strv_contains (yes, lower);
  return *value > 0 || g_strv_contains (no, lower);
}

static gboolean
read_value (const TfBroughtColumn *column, const char *cell, double *value)
{
  if (column->ours->type == TF_COLUMN_BOOL)
    return read_truth (cell, value);
  if (strcmp (column->rule->name, "leading_polarity") == 0 && cell[0] != '\0' && cell[1] == '\0'
      && strchr ("+-", *cell) != NULL)
    {
      *value = *cell == '+' ? 1 : -1;
      return TRUE;
    }
  return tf_number_read (cell, value)
         && (column->ours->type != TF_COLUMN_INT
             || (*value >= rint (*value) && *value <= rint (*value)));
}

/* A member for the time until the row's latitude is known. */
static char *
dup_sign_name (const char *name)
{
  return g_strconcat (name, " sign", NULL);
}

static char *
take_number (const TfBroughtColumn *column, const char *cell, JsonObject *flat)
{
  const TfColumnRule *rule = column->rule;
  double value;
  if (!read_value (column, cell, &value))
    return g_strdup (column->ours->type == TF_COLUMN_BOOL  ? _ ("neither true nor false")
                     : column->ours->type == TF_COLUMN_INT ? _ ("not a whole number")
                                                           : _ ("not a number"));
  if (column->factor < 1 || column->factor > 1)
    value *= column->factor;
  if (rule->sign == TF_SIGN_OTHER)
    value = -value;
  char *wrong = tf_brought_check_range (rule->name, value);
  if (wrong != NULL)
    return wrong;
  value = wrap (rule->name, value);
  json_object_set_double_member (flat, rule->name, value);
  if (rule->sign == TF_SIGN_NORTH || rule->sign == TF_SIGN_SOUTH)
    {
      g_autofree char *of_row = dup_sign_name (rule->name);
      json_object_set_double_member (flat, of_row, rule->sign == TF_SIGN_NORTH ? -1 : 1);
    }
  return NULL;
}

char *
tf_brought_column_take (const TfBroughtColumn *column, const char *cell, JsonObject *flat,
                        TfTime *time)
{
  const char *name = column->rule->name;
  gboolean is_time = g_str_has_prefix (name, "time") && strcmp (name, "time_source") != 0;
  if (is_missing (column->rule, cell))
    return is_time || strcmp (name, "lat_deg") == 0 ? g_strdup (_ ("not there, and it must be"))
                                                    : NULL;
  if (is_time)
    return take_time (column, cell, flat, time);
  if (column->ours->type != TF_COLUMN_TEXT)
    return take_number (column, cell, flat);
  json_object_set_string_member (flat, name, cell);
  return NULL;
}

/* Takes a tilt out, its sign turned to ours: "north" is positive where the leader is north of the follower,
 * which is poleward in the north. NaN when it is not there. */
static double
steal_tilt (JsonObject *flat, const char *name)
{
  g_autofree char *of_row = dup_sign_name (name);
  double tilt = tf_json_member_number (flat, name), sign = tf_json_member_number (flat, of_row);
  json_object_remove_member (flat, name);
  json_object_remove_member (flat, of_row);
  if (isnan (sign))
    return tilt;
  return json_object_get_double_member (flat, "lat_deg") >= 0 ? sign * tilt : -sign * tilt;
}

/* gamma_M in (-180, 180] is the axis tilt gamma_G in (-90, 90] or its opposite direction (reference:
 * both have one axis). */
void
tf_brought_fold_tilt (JsonObject *flat)
{
  double axis = steal_tilt (flat, "axis_tilt_deg"), polarity = steal_tilt (flat, "polarity_tilt_deg");
  if (isnan (axis))
    axis = polarity > 90 ? polarity - 180 : polarity <= -90 ? polarity + 180 : polarity;
  if (!isnan (axis))
    json_object_set_double_member (flat, "axis_tilt_deg", axis <= -90 ? axis + 180 : axis);
}
