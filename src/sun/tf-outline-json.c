/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-outline-private.h"

#include <glib/gi18n-lib.h>
#include <math.h>

#include "tf-json.h"

/* -- writing --------------------------------------------------------------------------------- */

static void
build_rings (const char *key, GPtrArray *rings, JsonBuilder *builder)
{
  json_builder_set_member_name (builder, key);
  json_builder_begin_array (builder);
  for (guint k = 0; k < rings->len; k++)
    {
      const TfRing *ring = g_ptr_array_index (rings, k);
      json_builder_begin_array (builder);
      for (guint j = 0; j < ring->n; j++)
        tf_json_numbers (builder, NULL,
                         (const double[2]){ ring->vertices[j].lon_deg, ring->vertices[j].lat_deg },
                         2);
      json_builder_end_array (builder);
    }
  json_builder_end_array (builder);
}

static void
build_pin (const TfPinnedPole *pin, JsonBuilder *builder)
{
  json_builder_begin_object (builder);
  tf_json_int (builder, "polarity", pin->polarity);
  tf_json_number (builder, "lon", pin->lon_deg);
  tf_json_number (builder, "lat", pin->lat_deg);
  tf_json_string (builder, "reason", pin->reason);
  tf_json_string (builder, "person", pin->person);
  json_builder_end_object (builder);
}

static void
build_pins (const TfOutline *outline, JsonBuilder *builder)
{
  json_builder_set_member_name (builder, "pinned");
  if (outline->n_pins == 0)
    json_builder_add_null_value (builder);
  else if (outline->n_pins == 1)
    build_pin (&outline->pins[0], builder);
  else
    {
      json_builder_begin_array (builder);
      for (guint k = 0; k < outline->n_pins; k++)
        build_pin (&outline->pins[k], builder);
      json_builder_end_array (builder);
    }
}

/* As few decimals of the second, of 0, 3 and 6, as read back the same to a microsecond. */
static char *
dup_time (TfTime time)
{
  for (int decimals = 0; decimals < 6; decimals += 3)
    {
      g_autofree char *text = tf_time_dup_iso (time, decimals);
      if (text == NULL || fabs (tf_time_read (text).s - time.s) < 1e-6)
        return g_steal_pointer (&text);
    }
  return tf_time_dup_iso (time, 6);
}

void
tf_outline_build_json (const TfOutline *outline, JsonBuilder *builder)
{
  g_autofree char *time = dup_time (outline->time);
  json_builder_begin_object (builder);
  tf_json_string (builder, "frame", "carrington");
  tf_json_string (builder, "time", time);
  build_rings ("rings", outline->rings, builder);
  build_rings ("left_out", outline->left_out, builder);
  build_pins (outline, builder);
  json_builder_end_object (builder);
}

char *
tf_outline_dup_text (const TfOutline *outline)
{
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  tf_outline_build_json (outline, builder);
  return tf_json_dup_text (builder, FALSE);
}

/* -- reading --------------------------------------------------------------------------------- */

static gboolean
form_error (GError **error, const char *text)
{
  g_set_error_literal (error, TF_OUTLINE_ERROR, TF_OUTLINE_ERROR_FORM, text);
  return FALSE;
}

/* One ring, an array of [lon, lat]. */
static gboolean
read_ring (TfOutline *outline, JsonNode *node, gboolean left_out, GError **error)
{
  if (!JSON_NODE_HOLDS_ARRAY (node))
    return form_error (error, _ ("A ring of the outline is not an array of [lon, lat]."));
  JsonArray *array = json_node_get_array (node);
  guint n = json_array_get_length (array);
  g_autofree TfVertex *vertices = g_new0 (TfVertex, MAX (n, 1));
  for (guint k = 0; k < n; k++)
    {
      JsonNode *element = json_array_get_element (array, k);
      JsonArray *pair = JSON_NODE_HOLDS_ARRAY (element) ? json_node_get_array (element) : NULL;
      if (pair == NULL || json_array_get_length (pair) != 2)
        return form_error (
            error, _ ("A vertex of the outline is not [lon, lat], two numbers in degrees."));
      vertices[k]
          = (TfVertex){ tf_json_element_number (pair, 0), tf_json_element_number (pair, 1) };
    }
  return tf_outline_fill (outline, vertices, n, left_out,
                          left_out ? _ ("left-out area") : _ ("ring"), error);
}

static gboolean
read_rings (TfOutline *outline, JsonObject *object, const char *key, gboolean left_out,
            GError **error)
{
  JsonArray *rings = tf_json_member_array (object, key);
  JsonNode *node = json_object_get_member (object, key);
  if (rings == NULL && node != NULL && !JSON_NODE_HOLDS_NULL (node))
    return form_error (error,
                       _ ("The outline's \"left_out\" is not an array of rings of [lon, lat]."));
  for (guint k = 0; rings != NULL && k < json_array_get_length (rings); k++)
    if (!read_ring (outline, json_array_get_element (rings, k), left_out, error))
      return FALSE;
  return TRUE;
}

static gboolean
read_pin (TfOutline *outline, JsonNode *node, GError **error)
{
  JsonObject *object = JSON_NODE_HOLDS_OBJECT (node) ? json_node_get_object (node) : NULL;
  gint64 polarity = tf_json_member_int (object, "polarity", 0);
  TfPinnedPole pin = {
    .polarity = polarity < 0 ? -1 : 1,
    .lon_deg = tf_json_member_number (object, "lon"),
    .lat_deg = tf_json_member_number (object, "lat"),
    .reason = tf_json_member_string (object, "reason"),
    .person = tf_json_member_string (object, "person"),
  };
  if ((polarity != 1 && polarity != -1) || !(fabs (pin.lon_deg) < 1e6)
      || !(fabs (pin.lat_deg) <= 90.0))
    return form_error (error, _ ("The outline's \"pinned\" needs polarity 1 or -1, lon and lat in "
                                 "degrees, or must be null."));
  tf_outline_fill_pin (outline, &pin);
  return TRUE;
}

static gboolean
read_pins (TfOutline *outline, JsonObject *object, GError **error)
{
  JsonNode *node = json_object_get_member (object, "pinned");
  if (node == NULL || JSON_NODE_HOLDS_NULL (node))
    return TRUE;
  if (!JSON_NODE_HOLDS_ARRAY (node))
    return read_pin (outline, node, error);
  JsonArray *pins = json_node_get_array (node);
  for (guint k = 0; k < json_array_get_length (pins); k++)
    if (!read_pin (outline, json_array_get_element (pins, k), error))
      return FALSE;
  return TRUE;
}

static gboolean
read_time (JsonObject *object, TfTime *time, GError **error)
{
  JsonNode *node = json_object_get_member (object, "time");
  *time = TF_TIME_UNKNOWN;
  if (node == NULL || JSON_NODE_HOLDS_NULL (node))
    return TRUE;
  *time = tf_time_read (tf_json_member_string (object, "time"));
  return tf_time_is_known (*time)
         || form_error (
             error,
             _ ("The outline's \"time\" is not ISO 8601 UTC, such as 2013-10-12T06:00:00Z."));
}

TfOutline *
tf_outline_read_json (JsonNode *node, GError **error)
{
  TfTime time;
  JsonObject *object
      = node != NULL && JSON_NODE_HOLDS_OBJECT (node) ? json_node_get_object (node) : NULL;
  if (g_strcmp0 (tf_json_member_string (object, "frame"), "carrington") != 0)
    {
      form_error (
          error,
          _ ("This is not an outline: it must be an object with \"frame\": \"carrington\"."));
      return NULL;
    }
  if (tf_json_member_array (object, "rings") == NULL)
    {
      form_error (error, _ ("The outline has no \"rings\", an array of rings of [lon, lat]."));
      return NULL;
    }
  if (!read_time (object, &time, error))
    return NULL;
  g_autoptr (TfOutline) outline = tf_outline_start (time);
  if (!read_rings (outline, object, "rings", FALSE, error)
      || !read_rings (outline, object, "left_out", TRUE, error)
      || !read_pins (outline, object, error))
    return NULL;
  return tf_outline_finish (g_steal_pointer (&outline), error);
}

TfOutline *
tf_outline_from_text (const char *json, GError **error)
{
  g_autoptr (GError) parse = NULL;
  g_autoptr (JsonNode) root = json_from_string (json != NULL ? json : "", &parse);
  if (parse != NULL)
    {
      g_set_error (error, TF_OUTLINE_ERROR, TF_OUTLINE_ERROR_FORM,
                   _ ("The outline is not JSON: %s"), parse->message);
      return NULL;
    }
  return tf_outline_read_json (root, error);
}
