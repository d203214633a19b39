/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-json.h"

#include <math.h>

#include "tf-number.h"

void
tf_json_string (JsonBuilder *builder, const char *key, const char *value)
{
  json_builder_set_member_name (builder, key);
  if (value != NULL)
    json_builder_add_string_value (builder, value);
  else
    json_builder_add_null_value (builder);
}

void
tf_json_number (JsonBuilder *builder, const char *key, double value)
{
  json_builder_set_member_name (builder, key);
  json_builder_add_double_value (builder, value);
}

void
tf_json_int (JsonBuilder *builder, const char *key, gint64 value)
{
  json_builder_set_member_name (builder, key);
  json_builder_add_int_value (builder, value);
}

void
tf_json_bool (JsonBuilder *builder, const char *key, gboolean value)
{
  json_builder_set_member_name (builder, key);
  json_builder_add_boolean_value (builder, value);
}

void
tf_json_null (JsonBuilder *builder, const char *key)
{
  json_builder_set_member_name (builder, key);
  json_builder_add_null_value (builder);
}

void
tf_json_numbers (JsonBuilder *builder, const char *key, const double *values, guint n)
{
  if (key != NULL)
    json_builder_set_member_name (builder, key);
  json_builder_begin_array (builder);
  for (guint k = 0; k < n; k++)
    json_builder_add_double_value (builder, values[k]);
  json_builder_end_array (builder);
}

static void
print_string (GString *out, const char *text)
{
  g_string_append_c (out, '"');
  for (const char *p = text; *p != '\0'; p++)
    {
      guchar c = (guchar)*p;
      if (c == '"' || c == '\\')
        g_string_append_printf (out, "\\%c", c);
      else if (c == '\n')
        g_string_append (out, "\\n");
      else if (c == '\t')
        g_string_append (out, "\\t");
      else if (c < 0x20)
        g_string_append_printf (out, "\\u%04x", c);
      else
        g_string_append_c (out, (char)c);
    }
  g_string_append_c (out, '"');
}

static void
print_value (GString *out, JsonNode *node)
{
  GType type = json_node_get_value_type (node);
  if (type == G_TYPE_STRING)
    print_string (out, json_node_get_string (node));
  else if (type == G_TYPE_BOOLEAN)
    g_string_append (out, json_node_get_boolean (node) ? "true" : "false");
  else if (type == G_TYPE_INT64)
    g_string_append_printf (out, "%" G_GINT64_FORMAT, json_node_get_int (node));
  else
    {
      double value = json_node_get_double (node);
      g_autofree char *number = isfinite (value) ? tf_number_dup (value) : g_strdup ("null");
      g_string_append (out, number);
    }
}

static void
new_line (GString *out, int depth)
{
  if (depth < 0)
    return;
  g_string_append_c (out, '\n');
  for (int k = 0; k < depth; k++)
    g_string_append (out, "  ");
}

static gboolean
holds_container (JsonNode *node)
{
  return JSON_NODE_HOLDS_OBJECT (node) || JSON_NODE_HOLDS_ARRAY (node);
}

static void print_node (GString *out, JsonNode *node, int depth);

/* @depth is the indentation of what is inside, negative for compact. */
static void
print_array (GString *out, JsonArray *array, int depth)
{
  guint n = json_array_get_length (array);
  gboolean tall = depth >= 0 && n > 0 && holds_container (json_array_get_element (array, 0));
  g_string_append_c (out, '[');
  for (guint k = 0; k < n; k++)
    {
      if (k > 0)
        g_string_append (out, depth >= 0 && !tall ? ", " : ",");
      if (tall)
        new_line (out, depth + 1);
      print_node (out, json_array_get_element (array, k), depth >= 0 ? depth + 1 : -1);
    }
  if (tall)
    new_line (out, depth);
  g_string_append_c (out, ']');
}

static void
print_object (GString *out, JsonObject *object, int depth)
{
  JsonObjectIter iter;
  const char *key;
  JsonNode *value;
  gboolean first = TRUE;
  g_string_append_c (out, '{');
  json_object_iter_init_ordered (&iter, object);
  while (json_object_iter_next_ordered (&iter, &key, &value))
    {
      if (!first)
        g_string_append_c (out, ',');
      first = FALSE;
      new_line (out, depth >= 0 ? depth + 1 : -1);
      print_string (out, key);
      g_string_append (out, depth >= 0 ? ": " : ":");
      print_node (out, value, depth >= 0 ? depth + 1 : -1);
    }
  if (!first)
    new_line (out, depth);
  g_string_append_c (out, '}');
}

static void
print_node (GString *out, JsonNode *node, int depth)
{
  switch (json_node_get_node_type (node))
    {
    case JSON_NODE_OBJECT:
      print_object (out, json_node_get_object (node), depth);
      break;
    case JSON_NODE_ARRAY:
      print_array (out, json_node_get_array (node), depth);
      break;
    case JSON_NODE_VALUE:
      print_value (out, node);
      break;
    case JSON_NODE_NULL:
    default:
      g_string_append (out, "null");
      break;
    }
}

char *
tf_json_node_dup_text (JsonNode *node, gboolean pretty)
{
  g_return_val_if_fail (node != NULL, NULL);
  GString *out = g_string_new (NULL);
  print_node (out, node, pretty ? 0 : -1);
  return g_string_free (out, FALSE);
}

char *
tf_json_dup_text (JsonBuilder *builder, gboolean pretty)
{
  g_autoptr (JsonNode) root = json_builder_get_root (builder);
  return tf_json_node_dup_text (root, pretty);
}

static JsonNode *
member (JsonObject *object, const char *key)
{
  return object != NULL && json_object_has_member (object, key) ? json_object_get_member (object, key) : NULL;
}

static gboolean
is_number (JsonNode *node)
{
  return node != NULL && JSON_NODE_HOLDS_VALUE (node)
         && (json_node_get_value_type (node) == G_TYPE_DOUBLE || json_node_get_value_type (node) == G_TYPE_INT64);
}

static gboolean
is_string (JsonNode *node)
{
  return node != NULL && JSON_NODE_HOLDS_VALUE (node) && json_node_get_value_type (node) == G_TYPE_STRING;
}

double
tf_json_member_number (JsonObject *object, const char *key)
{
  JsonNode *node = member (object, key);
  return is_number (node) ? json_node_get_double (node) : NAN;
}

gint64
tf_json_member_int (JsonObject *object, const char *key, gint64 fallback)
{
  JsonNode *node = member (object, key);
  return is_number (node) ? json_node_get_int (node) : fallback;
}

gboolean
tf_json_member_bool (JsonObject *object, const char *key, gboolean fallback)
{
  JsonNode *node = member (object, key);
  return node != NULL && JSON_NODE_HOLDS_VALUE (node) && json_node_get_value_type (node) == G_TYPE_BOOLEAN
             ? json_node_get_boolean (node)
             : fallback;
}

const char *
tf_json_member_string (JsonObject *object, const char *key)
{
  JsonNode *node = member (object, key);
  return is_string (node) ? json_node_get_string (node) : NULL;
}

JsonArray *
tf_json_member_array (JsonObject *object, const char *key)
{
  JsonNode *node = member (object, key);
  return node != NULL && JSON_NODE_HOLDS_ARRAY (node) ? json_node_get_array (node) : NULL;
}

JsonObject *
tf_json_member_object (JsonObject *object, const char *key)
{
  JsonNode *node = member (object, key);
  return node != NULL && JSON_NODE_HOLDS_OBJECT (node) ? json_node_get_object (node) : NULL;
}

double
tf_json_element_number (JsonArray *array, guint k)
{
  JsonNode *node = k < json_array_get_length (array) ? json_array_get_element (array, k) : NULL;
  return is_number (node) ? json_node_get_double (node) : NAN;
}

const char *
tf_json_element_string (JsonArray *array, guint k)
{
  JsonNode *node = k < json_array_get_length (array) ? json_array_get_element (array, k) : NULL;
  return is_string (node) ? json_node_get_string (node) : NULL;
}
