/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-option.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-json.h"
#include "tf-number.h"

G_DEFINE_QUARK (tf-option-error-quark, tf_option_error)

static double *
number_at (const TfOption *option, const void *params)
{
  return (double *)((char *)params + option->offset);
}

static int *
int_at (const TfOption *option, const void *params)
{
  return (int *)((char *)params + option->offset);
}

static void
store (const TfOption *option, void *params, double value)
{
  if (option->type == TF_OPTION_NUMBER)
    *number_at (option, params) = value;
  else
    *int_at (option, params) = (int)value;
}

void
tf_options_reset (const TfOption *table, void *params)
{
  for (const TfOption *o = table; o->name != NULL; o++)
    store (o, params, o->fallback);
}

static const TfOption *
find (const TfOption *table, const char *name)
{
  for (const TfOption *o = table; o->name != NULL; o++)
    if (strcmp (o->name, name) == 0)
      return o;
  return NULL;
}

static gboolean
read_choice (const TfOption *option, const char *text, double *value, GError **error)
{
  for (int k = 0; option->choices[k] != NULL; k++)
    if (strcmp (option->choices[k], text) == 0)
      {
        *value = k;
        return TRUE;
      }
  g_autofree char *all = g_strjoinv (", ", (char **)option->choices);
  g_set_error (error, TF_OPTION_ERROR, TF_OPTION_ERROR_VALUE, _ ("--%s takes one of %s, not “%s”."), option->name, all,
               text);
  return FALSE;
}

static gboolean
read_value (const TfOption *option, const char *text, double *value, GError **error)
{
  if (option->type == TF_OPTION_CHOICE)
    return read_choice (option, text, value, error);
  if (option->type == TF_OPTION_BOOL)
    {
      gboolean yes = strcmp (text, "yes") == 0;
      *value = yes;
      if (yes || strcmp (text, "no") == 0)
        return TRUE;
      g_set_error (error, TF_OPTION_ERROR, TF_OPTION_ERROR_VALUE, _ ("--%s takes yes or no, not “%s”."), option->name, text);
      return FALSE;
    }
  if (*text == '\0' && isnan (option->fallback))
    {
      *value = NAN;
      return TRUE;
    }
  gint64 whole = 0;
  gboolean good = option->type == TF_OPTION_INT ? tf_number_read_int (text, &whole) : tf_number_read (text, value);
  if (option->type == TF_OPTION_INT)
    *value = (double)whole;
  if (good && *value >= option->min && *value <= option->max)
    return TRUE;
  g_set_error (error, TF_OPTION_ERROR, TF_OPTION_ERROR_VALUE, _ ("--%s takes a number from %g to %g%s%s, not “%s”."),
               option->name, option->min, option->max, *option->unit != '\0' ? " " : "", option->unit, text);
  return FALSE;
}

gboolean
tf_options_set (const TfOption *table, void *params, const char *name, const char *text, GError **error)
{
  g_return_val_if_fail (table != NULL && params != NULL && name != NULL && text != NULL, FALSE);
  const TfOption *option = find (table, name);
  if (option == NULL)
    {
      g_set_error (error, TF_OPTION_ERROR, TF_OPTION_ERROR_UNKNOWN, _ ("There is no option “%s” here."), name);
      return FALSE;
    }
  double value = NAN;
  if (!read_value (option, text, &value, error))
    return FALSE;
  store (option, params, value);
  return TRUE;
}

char *
tf_options_dup_value (const TfOption *option, const void *params)
{
  switch (option->type)
    {
    case TF_OPTION_CHOICE:
      return g_strdup (option->choices[*int_at (option, params)]);
    case TF_OPTION_BOOL:
      return g_strdup (*int_at (option, params) ? "yes" : "no");
    case TF_OPTION_INT:
      return g_strdup_printf ("%d", *int_at (option, params));
    case TF_OPTION_NUMBER:
    default:
      return isnan (*number_at (option, params)) ? g_strdup ("") : tf_number_dup (*number_at (option, params));
    }
}

char *
tf_options_dup_canonical (const TfOption *table, const void *params, const char *method)
{
  GString *out = g_string_new (method);
  for (const TfOption *o = table; o->name != NULL; o++)
    {
      g_autofree char *value = tf_options_dup_value (o, params);
      g_string_append_printf (out, " %s=%s", o->name, value);
    }
  return g_string_free (out, FALSE);
}

gboolean
tf_options_read_canonical (const TfOption *table, void *params, const char *method, const char *text)
{
  g_auto (GStrv) words = g_strsplit (text, " ", -1);
  tf_options_reset (table, params);
  if (words[0] == NULL || strcmp (words[0], method) != 0)
    return FALSE;
  for (guint k = 1; words[k] != NULL; k++)
    {
      char *equals = strchr (words[k], '=');
      if (equals == NULL)
        return FALSE;
      *equals = '\0';
      const char *name = words[k];
      g_autoptr (GString) value = g_string_new (equals + 1);
      for (; words[k + 1] != NULL && strchr (words[k + 1], '=') == NULL; k++)
        g_string_append_printf (value, " %s", words[k + 1]); /* a choice of two words */
      if (!tf_options_set (table, params, name, value->str, NULL))
        return FALSE;
    }
  return TRUE;
}

void
tf_options_build_json (const TfOption *table, const void *params, JsonBuilder *builder)
{
  json_builder_begin_object (builder);
  for (const TfOption *o = table; o->name != NULL; o++)
    {
      if (o->type == TF_OPTION_NUMBER)
        tf_json_number (builder, o->name, *number_at (o, params));
      else if (o->type == TF_OPTION_INT)
        tf_json_int (builder, o->name, *int_at (o, params));
      else if (o->type == TF_OPTION_BOOL)
        tf_json_bool (builder, o->name, *int_at (o, params));
      else
        tf_json_string (builder, o->name, o->choices[*int_at (o, params)]);
    }
  json_builder_end_object (builder);
}

/* The text tf_options_set would take for a JSON value; NULL for a container. */
static char *
value_text (JsonNode *node)
{
  if (JSON_NODE_HOLDS_NULL (node))
    return g_strdup ("");
  if (!JSON_NODE_HOLDS_VALUE (node))
    return NULL;
  if (json_node_get_value_type (node) == G_TYPE_STRING)
    return g_strdup (json_node_get_string (node));
  if (json_node_get_value_type (node) == G_TYPE_BOOLEAN)
    return g_strdup (json_node_get_boolean (node) ? "yes" : "no");
  return tf_number_dup (json_node_get_double (node));
}

gboolean
tf_options_read_json (const TfOption *table, void *params, JsonObject *object, GError **error)
{
  JsonObjectIter iter;
  const char *name;
  JsonNode *node;
  json_object_iter_init_ordered (&iter, object);
  while (json_object_iter_next_ordered (&iter, &name, &node))
    {
      g_autofree char *text = value_text (node);
      if (text == NULL)
        {
          g_set_error (error, TF_OPTION_ERROR, TF_OPTION_ERROR_VALUE, _ ("“%s” takes one value, not a list."), name);
          return FALSE;
        }
      if (!tf_options_set (table, params, name, text, error))
        return FALSE;
    }
  return TRUE;
}

typedef struct
{
  const TfOption *table;
  void *params;
} Group;

static gboolean
group_set (const char *given, const char *text, gpointer data, GError **error)
{
  Group *group = data;
  return tf_options_set (group->table, group->params, given + strspn (given, "-"), text, error);
}

GOptionGroup *
tf_options_new_group (const TfOption *table, void *params, const char *name, const char *title)
{
  Group *group = g_new (Group, 1);
  *group = (Group){ table, params };
  g_autofree char *help = g_strdup_printf (_ ("Show the options for %s"), _ (title));
  GOptionGroup *result = g_option_group_new (name, _ (title), help, group, g_free);
  g_autoptr (GArray) entries = g_array_new (TRUE, TRUE, sizeof (GOptionEntry));
  for (const TfOption *o = table; o->name != NULL; o++)
    {
      const char *unit = o->type == TF_OPTION_CHOICE ? "WORD" : o->type == TF_OPTION_BOOL ? "yes|no" : *o->unit != '\0' ? o->unit : "N";
      GOptionEntry entry = { .long_name = o->name, .arg = G_OPTION_ARG_CALLBACK,
                             .arg_data = (gpointer)group_set, .description = o->sentence, .arg_description = unit };
      g_array_append_val (entries, entry);
    }
  g_option_group_add_entries (result, (GOptionEntry *)entries->data);
  g_option_group_set_translation_domain (result, GETTEXT_PACKAGE);
  return result;
}
