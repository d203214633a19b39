/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-column-map.h"

#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-export.h"

static void
clear_rule (gpointer data)
{
  TfColumnRule *rule = data;
  g_free (rule->name);
  g_free (rule->column);
  g_free (rule->unit);
  g_free (rule->missing);
}

static TfColumnMap *
map_new (void)
{
  TfColumnMap *map = g_new0 (TfColumnMap, 1);
  map->rules = g_array_new (FALSE, TRUE, sizeof (TfColumnRule));
  g_array_set_clear_func (map->rules, clear_rule);
  return map;
}

void
tf_column_map_free (TfColumnMap *map)
{
  if (map == NULL)
    return;
  g_array_unref (map->rules);
  g_free (map);
}

/* What is judged on reading, or follows from another column, is not brought in. */
static gboolean
is_judged (const char *name)
{
  static const char *const judged[] = { "cycle",     "cycle_sure", "hale", "hale_reason",
                                        "class_base", "class_delta", NULL };
  return g_strv_contains (judged, name);
}

gboolean
tf_column_is_brought (const char *name)
{
  if (strcmp (name, "time_jd") == 0 || strcmp (name, "time_year") == 0)
    return TRUE;
  for (const TfColumn *c = tf_columns; c->name != NULL; c++)
    if (strcmp (c->name, name) == 0)
      return !is_judged (name);
  return FALSE;
}

const TfColumnRule *
tf_column_map_find (const TfColumnMap *map, const char *name)
{
  for (guint k = 0; k < map->rules->len; k++)
    if (strcmp (g_array_index (map->rules, TfColumnRule, k).name, name) == 0)
      return &g_array_index (map->rules, TfColumnRule, k);
  return NULL;
}

/* polarity_tilt_deg is judged; it is only taken where a map says so. */
TfColumnMap *
tf_column_map_own (const TfCells *table)
{
  TfColumnMap *map = map_new ();
  for (guint k = 0; k < table->columns->len; k++)
    {
      const char *name = g_array_index (table->columns, TfCellsColumn, k).name;
      if (!tf_column_is_brought (name) || strcmp (name, "polarity_tilt_deg") == 0)
        continue;
      TfColumnRule rule = { .name = g_strdup (name), .column = g_strdup (name) };
      g_array_append_val (map->rules, rule);
    }
  return map;
}

/* -- reading ----------------------------------------------------------------------------------- */

static gboolean
is_longitude (const char *name)
{
  return g_str_has_suffix (name, "lon_deg") || strcmp (name, "cmd_deg") == 0;
}

static gboolean
is_tilt (const char *name)
{
  return strcmp (name, "axis_tilt_deg") == 0 || strcmp (name, "polarity_tilt_deg") == 0;
}

/* "positive X", "range R": NULL when it fits the column, else what is wrong. */
static const char *
read_sign (TfColumnRule *rule, const char *word)
{
  static const struct
  {
    const char *word;
    TfSignRule sign;
    gboolean longitude;
  } words[] = {
    { "west", TF_SIGN_OURS, TRUE },          { "east", TF_SIGN_OTHER, TRUE },
    { "equatorward", TF_SIGN_OURS, FALSE },  { "poleward", TF_SIGN_OTHER, FALSE },
    { "north", TF_SIGN_NORTH, FALSE },       { "south", TF_SIGN_SOUTH, FALSE },
  };
  gboolean longitude = is_longitude (rule->name), tilt = is_tilt (rule->name);
  for (guint k = 0; k < G_N_ELEMENTS (words); k++)
    if (strcmp (word, words[k].word) == 0 && (words[k].longitude ? longitude : tilt))
      {
        rule->sign = words[k].sign;
        return NULL;
      }
  return _ ("“positive” takes west or east with a longitude, equatorward, poleward, north or south "
            "with axis_tilt_deg or polarity_tilt_deg");
}

static const char *
read_saying (TfColumnRule *rule, char *saying)
{
  char *space = strchr (g_strstrip (saying), ' ');
  char *value = space != NULL ? g_strstrip (space + 1) : (char *)"";
  if (space != NULL)
    *space = '\0';
  if (*value != '\0' && strcmp (saying, "unit") == 0)
    rule->unit = g_strdup (value);
  else if (*value != '\0' && strcmp (saying, "missing") == 0)
    rule->missing = g_strdup (value);
  else if (strcmp (saying, "positive") == 0)
    return read_sign (rule, value);
  else if (strcmp (saying, "range") == 0)
    return (strcmp (value, "90") == 0 && strcmp (rule->name, "axis_tilt_deg") == 0)
                   || (strcmp (value, "180") == 0 && strcmp (rule->name, "polarity_tilt_deg") == 0)
               ? NULL
               : _ ("a tilt of range 90 is axis_tilt_deg, one of range 180 polarity_tilt_deg");
  else
    return _ ("of a column can be said: unit U, missing V, positive …, range …");
  return NULL;
}

/* One line without its remark; NULL when it is sound, else what is wrong. */
static const char *
read_line (TfColumnMap *map, char *line, guint number)
{
  char *equals = strchr (line, '=');
  if (equals == NULL)
    return _ ("a line reads: our column = their column");
  *equals = '\0';
  g_auto (GStrv) parts = g_strsplit (equals + 1, ";", -1);
  TfColumnRule rule = { .name = g_strdup (g_strstrip (line)),
                        .column = g_strstrip (g_strdup (parts[0] != NULL ? parts[0] : "")),
                        .line = number };
  const char *wrong = NULL;
  if (!tf_column_is_brought (rule.name))
    wrong = is_judged (rule.name) ? _ ("that column is judged here and not brought in")
                                  : _ ("that is no column of ours; tables made by export have them all");
  else if (tf_column_map_find (map, rule.name) != NULL)
    wrong = _ ("that column of ours was named before");
  else if (*rule.column == '\0')
    wrong = _ ("the name of their column is missing");
  for (guint k = 1; wrong == NULL && k < g_strv_length (parts); k++)
    wrong = read_saying (&rule, parts[k]);
  gboolean none = strcmp (rule.name, "region") == 0 && strcmp (rule.column, "none") == 0;
  map->no_region |= none;
  if (wrong == NULL && !none)
    g_array_append_val (map->rules, rule);
  else
    clear_rule (&rule);
  return wrong;
}

TfColumnMap *
tf_column_map_read (const char *text, const char *name, GError **error)
{
  g_autoptr (TfColumnMap) map = map_new ();
  if (!g_utf8_validate (text, -1, NULL))
    {
      tf_export_fail_read (error, name, _ ("a column map is UTF-8 text"));
      return NULL;
    }
  g_auto (GStrv) lines = g_strsplit (text, "\n", -1);
  for (guint k = 0; lines[k] != NULL; k++)
    {
      char *remark = strchr (lines[k], '#');
      if (remark != NULL)
        *remark = '\0';
      if (*g_strstrip (lines[k]) == '\0')
        continue;
      g_autofree char *whole = g_strdup (lines[k]);
      const char *wrong = read_line (map, lines[k], k + 1);
      if (wrong == NULL)
        continue;
      g_autofree char *reason = g_strdup_printf (_ ("line %u, “%.80s”: %s"), k + 1, whole, wrong);
      tf_export_fail_read (error, name, reason);
      return NULL;
    }
  return g_steal_pointer (&map);
}

/* -- writing ----------------------------------------------------------------------------------- */

static int
compare_rules (gconstpointer a, gconstpointer b)
{
  return strcmp (((const TfColumnRule *)a)->name, ((const TfColumnRule *)b)->name);
}

static void
put_sign (GString *text, const TfColumnRule *rule)
{
  static const char *const tilts[] = { NULL, "poleward", "north", "south" };
  if (rule->sign != TF_SIGN_OURS)
    g_string_append_printf (text, " ; positive %s",
                            is_longitude (rule->name) ? "east" : tilts[rule->sign]);
}

char *
tf_column_map_dup_text (const TfColumnMap *map)
{
  GString *text = g_string_new (NULL);
  g_autofree TfColumnRule *rules = g_memdup2 (map->rules->data, map->rules->len * sizeof *rules);
  if (map->rules->len > 0)
    qsort (rules, map->rules->len, sizeof *rules, compare_rules);
  for (guint k = 0; k < map->rules->len; k++)
    {
      g_string_append_printf (text, "%s = %s", rules[k].name, rules[k].column);
      if (rules[k].unit != NULL)
        g_string_append_printf (text, " ; unit %s", rules[k].unit);
      put_sign (text, &rules[k]);
      if (rules[k].missing != NULL)
        g_string_append_printf (text, " ; missing %s", rules[k].missing);
      g_string_append_c (text, '\n');
    }
  if (map->no_region)
    g_string_append (text, "region = none\n");
  return g_string_free (text, FALSE);
}
