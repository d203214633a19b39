/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-sieve.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-json.h"
#include "tf-number.h"
#include "tf-study.h"

const char *const tf_is_names[]
    = { "at-least", "at-most", "within", "beyond", "equals", "not", "one-of", "none-of", NULL };

void
tf_condition_free (TfCondition *condition)
{
  if (condition == NULL)
    return;
  for (guint k = 0; k < condition->n; k++)
    g_free (condition->texts[k]);
  g_free (condition->texts);
  g_free (condition->numbers);
  g_free (condition);
}

static TfCondition *
condition_new (const TfColumn *column, TfIs is, guint n)
{
  TfCondition *condition = g_new0 (TfCondition, 1);
  condition->column = column;
  condition->is = is;
  condition->n = n;
  condition->numbers = g_new (double, n + 1);
  condition->texts = g_new0 (char *, n + 1);
  return condition;
}

TfCondition *
tf_condition_copy (const TfCondition *condition)
{
  TfCondition *copy = condition_new (condition->column, condition->is, condition->n);
  for (guint k = 0; k < condition->n; k++)
    {
      copy->numbers[k] = condition->numbers[k];
      copy->texts[k] = g_strdup (condition->texts[k]);
    }
  return copy;
}

TfCondition *
tf_condition_new (const char *column, TfIs is, double number, const char *text)
{
  const TfColumn *found = tf_column_find (column);
  if (found == NULL)
    return NULL;
  TfCondition *condition = condition_new (found, is, 1);
  condition->numbers[0] = number;
  condition->texts[0] = g_strdup (text);
  return condition;
}

/* -- reading ----------------------------------------------------------------------------------- */

static gboolean
fail (GError **error, const char *where, const char *reason)
{
  g_set_error (error, TF_STUDY_ERROR, TF_STUDY_ERROR_READ, "%s: %s", where, reason);
  return FALSE;
}

static gboolean
read_value (TfCondition *condition, guint k, JsonNode *node)
{
  if (node == NULL || !JSON_NODE_HOLDS_VALUE (node))
    return FALSE;
  GType type = json_node_get_value_type (node);
  condition->numbers[k] = NAN;
  if (type == G_TYPE_STRING)
    condition->texts[k] = json_node_dup_string (node);
  else if (type == G_TYPE_BOOLEAN)
    condition->numbers[k] = json_node_get_boolean (node);
  else
    condition->numbers[k] = json_node_get_double (node);
  return TRUE;
}

/* Text columns take texts, all others numbers. */
static gboolean
fits_column (const TfCondition *condition)
{
  for (guint k = 0; k < condition->n; k++)
    if ((condition->texts[k] != NULL) != (condition->column->type == TF_COLUMN_TEXT))
      return FALSE;
  gboolean size = condition->is == TF_IS_WITHIN || condition->is == TF_IS_BEYOND;
  return !size || condition->column->type != TF_COLUMN_TEXT;
}

static TfCondition *
read_values (const TfColumn *column, TfIs is, JsonNode *value, const char *where, GError **error)
{
  gboolean many = is == TF_IS_ONE_OF || is == TF_IS_NONE_OF;
  JsonArray *array = many && value != NULL && JSON_NODE_HOLDS_ARRAY (value)
                         ? json_node_get_array (value)
                         : NULL;
  g_autoptr (TfCondition) c = condition_new (
      column, is, array != NULL ? MIN (json_array_get_length (array), 10000) : 1);
  gboolean good = !many || array != NULL;
  for (guint k = 0; good && k < c->n; k++)
    good = read_value (c, k, array != NULL ? json_array_get_element (array, k) : value);
  if (good && fits_column (c))
    return g_steal_pointer (&c);
  g_autofree char *reason = g_strdup_printf (
      _ ("the value of “%s %s” should be %s"), column->name, tf_is_names[is],
      many                            ? _ ("an array of what the column holds")
      : column->type == TF_COLUMN_TEXT ? _ ("a text, and “is” one for texts")
                                       : _ ("a number, or true or false"));
  fail (error, where, reason);
  return NULL;
}

TfCondition *
tf_condition_read (JsonNode *node, const char *where, GError **error)
{
  JsonObject *object = JSON_NODE_HOLDS_OBJECT (node) ? json_node_get_object (node) : NULL;
  const char *name = object != NULL ? tf_json_member_string (object, "column") : NULL;
  const char *is = object != NULL ? tf_json_member_string (object, "is") : NULL;
  const TfColumn *column = name != NULL ? tf_column_find (name) : NULL;
  g_autofree char *words = g_strjoinv (", ", (char **)tf_is_names);
  g_autofree char *reason = NULL;
  if (name == NULL || is == NULL)
    reason = g_strdup (_ ("a condition is {\"column\": …, \"is\": …, \"value\": …}"));
  else if (column == NULL)
    reason = g_strdup_printf (_ ("there is no column “%s”; the tables of export name them all"), name);
  for (int k = 0; reason == NULL && tf_is_names[k] != NULL; k++)
    if (strcmp (tf_is_names[k], is) == 0)
      return read_values (column, (TfIs)k, json_object_get_member (object, "value"), where, error);
  if (reason == NULL)
    reason = g_strdup_printf (_ ("“is” takes %s, and not “%s”"), words, is);
  fail (error, where, reason);
  return NULL;
}

/* -- writing ----------------------------------------------------------------------------------- */

static void
build_value (const TfCondition *c, guint k, JsonBuilder *builder)
{
  if (c->texts[k] != NULL)
    json_builder_add_string_value (builder, c->texts[k]);
  else if (c->column->type == TF_COLUMN_BOOL)
    json_builder_add_boolean_value (builder, c->numbers[k] > 0.5);
  else if (c->column->type == TF_COLUMN_INT)
    json_builder_add_int_value (builder, lrint (c->numbers[k]));
  else
    json_builder_add_double_value (builder, c->numbers[k]);
}

void
tf_condition_build_json (const TfCondition *c, JsonBuilder *builder)
{
  gboolean many = c->is == TF_IS_ONE_OF || c->is == TF_IS_NONE_OF;
  json_builder_begin_object (builder);
  tf_json_string (builder, "column", c->column->name);
  tf_json_string (builder, "is", tf_is_names[c->is]);
  json_builder_set_member_name (builder, "value");
  if (many)
    json_builder_begin_array (builder);
  for (guint k = 0; k < c->n; k++)
    build_value (c, k, builder);
  if (many)
    json_builder_end_array (builder);
  json_builder_end_object (builder);
}

char *
tf_condition_dup_text (const TfCondition *c)
{
  GString *text = g_string_new (NULL);
  g_string_append_printf (text, "%s %s", c->column->name, tf_is_names[c->is]);
  for (guint k = 0; k < c->n; k++)
    {
      g_autofree char *number = c->texts[k] == NULL ? tf_number_dup (c->numbers[k]) : NULL;
      g_string_append_printf (text, "%s %s", k > 0 ? "," : "",
                              number != NULL ? number : c->texts[k]);
    }
  return g_string_free (text, FALSE);
}

/* -- asking ------------------------------------------------------------------------------------ */

static gboolean
equals (const TfCondition *c, guint k, double number, const char *text)
{
  if (text != NULL)
    return strcmp (text, c->texts[k]) == 0;
  return number >= c->numbers[k] && number <= c->numbers[k];
}

static gboolean
is_any (const TfCondition *c, double number, const char *text)
{
  for (guint k = 0; k < c->n; k++)
    if (equals (c, k, number, text))
      return TRUE;
  return FALSE;
}

/* Below, equal, above: -1, 0, 1. Times are compared as times, other texts as bytes. */
static int
compare (const TfCondition *c, double number, const char *text)
{
  double limit = c->numbers[0];
  if (text != NULL && strcmp (c->column->name, "time") == 0)
    {
      number = tf_time_read (text).s;
      limit = tf_time_read (c->texts[0]).s;
    }
  else if (text != NULL)
    return strcmp (text, c->texts[0]);
  return (number > limit) - (number < limit);
}

int
tf_condition_holds (const TfCondition *c, const TfExportRow *row)
{
  gboolean is_text = c->column->type == TF_COLUMN_TEXT;
  g_autofree char *text = is_text ? tf_column_dup_text (c->column, row) : NULL;
  double number = is_text ? NAN : tf_column_number (c->column, row);
  if (is_text ? *text == '\0' : isnan (number))
    return -1;
  switch (c->is)
    {
    case TF_IS_AT_LEAST:
      return compare (c, number, text) >= 0;
    case TF_IS_AT_MOST:
      return compare (c, number, text) <= 0;
    case TF_IS_WITHIN:
      return fabs (number) <= c->numbers[0];
    case TF_IS_BEYOND:
      return fabs (number) >= c->numbers[0];
    case TF_IS_EQUALS:
    case TF_IS_ONE_OF:
      return is_any (c, number, text);
    default:
      return !is_any (c, number, text);
    }
}
