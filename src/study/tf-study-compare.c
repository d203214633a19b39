/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-json.h"
#include "tf-number.h"
#include "tf-study-compare.h"

/* Two JSON documents member by member, numbers to the digits that are printed. */

enum
{
  MOST_DIFFERENCES = 1000
};

/* Shares 0.01 %, slopes 0.001, tilts and other angles 0.01 degrees; all else to a part in a million
 * of its size. */
static double
tolerance_of (const char *key, double size)
{
  static const char *const shares[]
      = { "share_breaks", "bounds", "wilson", "clopper_pearson", "cluster", "expected_false", NULL };
  static const char *const slopes[] = { "slope", "slope_ci", NULL };
  if (g_strv_contains (shares, key))
    return 1e-4;
  if (g_strv_contains (slopes, key))
    return 1e-3;
  if (g_str_has_suffix (key, "_deg") || strcmp (key, "intercept") == 0
      || strcmp (key, "intercept_ci") == 0)
    return 1e-2;
  return 1e-6 * size;
}

static char *
dup_shown (JsonNode *node)
{
  g_autofree char *text = node != NULL ? tf_json_node_dup_text (node, FALSE) : g_strdup ("–");
  return g_utf8_strlen (text, -1) > 60 ? g_strdup_printf ("%.*s…", 57, text)
                                       : g_steal_pointer (&text);
}

static void
add (GPtrArray *differences, const char *path, JsonNode *before, JsonNode *now)
{
  g_autofree char *a = dup_shown (before), *b = dup_shown (now);
  g_autofree char *sound_a = g_utf8_make_valid (a, -1), *sound_b = g_utf8_make_valid (b, -1);
  if (differences->len < MOST_DIFFERENCES)
    g_ptr_array_add (differences, g_strdup_printf (_ ("%s: was %s, is %s"), path, sound_a, sound_b));
}

static gboolean
is_number (JsonNode *node)
{
  if (node == NULL || !JSON_NODE_HOLDS_VALUE (node))
    return FALSE;
  GType type = json_node_get_value_type (node);
  return type == G_TYPE_INT64 || type == G_TYPE_DOUBLE;
}

static gboolean
is_equal (JsonNode *before, JsonNode *now, const char *key)
{
  if (is_number (before) && is_number (now))
    {
      double a = json_node_get_double (before), b = json_node_get_double (now);
      /* Half a unit more, for a number that rounding brought to the edge. */
      return fabs (a - b) <= 1.000001 * tolerance_of (key, fmax (fabs (a), fabs (b)));
    }
  return json_node_equal (before, now);
}

static void
walk (JsonNode *before, JsonNode *now, const char *path, const char *key, GPtrArray *differences);

static void
walk_objects (JsonObject *before, JsonObject *now, const char *path, GPtrArray *differences)
{
  g_autoptr (GList) keys = json_object_get_members (before);
  for (GList *l = keys; l != NULL; l = l->next)
    {
      g_autofree char *inner = g_strdup_printf ("%s%s%s", path, *path != '\0' ? "." : "", (char *)l->data);
      walk (json_object_get_member (before, l->data), json_object_get_member (now, l->data), inner,
            l->data, differences);
    }
  g_autoptr (GList) others = json_object_get_members (now);
  for (GList *l = others; l != NULL; l = l->next)
    if (!json_object_has_member (before, l->data))
      {
        g_autofree char *inner = g_strdup_printf ("%s%s%s", path, *path != '\0' ? "." : "", (char *)l->data);
        add (differences, inner, NULL, json_object_get_member (now, l->data));
      }
}

static void
walk_arrays (JsonArray *before, JsonArray *now, const char *path, const char *key,
             GPtrArray *differences)
{
  guint n = json_array_get_length (before), m = json_array_get_length (now);
  for (guint k = 0; k < MAX (n, m); k++)
    {
      g_autofree char *inner = g_strdup_printf ("%s[%u]", path, k);
      walk (k < n ? json_array_get_element (before, k) : NULL,
            k < m ? json_array_get_element (now, k) : NULL, inner, key, differences);
    }
}

static void
walk (JsonNode *before, JsonNode *now, const char *path, const char *key, GPtrArray *differences)
{
  if (before == NULL || now == NULL)
    add (differences, path, before, now);
  else if (JSON_NODE_HOLDS_OBJECT (before) && JSON_NODE_HOLDS_OBJECT (now))
    walk_objects (json_node_get_object (before), json_node_get_object (now), path, differences);
  else if (JSON_NODE_HOLDS_ARRAY (before) && JSON_NODE_HOLDS_ARRAY (now))
    walk_arrays (json_node_get_array (before), json_node_get_array (now), path, key, differences);
  else if (!is_equal (before, now, key))
    add (differences, path, before, now);
}

GPtrArray *
tf_json_differences (JsonNode *before, JsonNode *now)
{
  GPtrArray *differences = g_ptr_array_new_with_free_func (g_free);
  walk (before, now, "", "", differences);
  return differences;
}
