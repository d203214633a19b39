/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* TfFrameInfo as JSON text and back: the plain members only; what a geometry derives from them is
 * made again. */

#include "tf-ledger-private.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-json.h"

static void
build_geometry (const TfGeometry *g, JsonBuilder *builder)
{
  const TfObserver *o = &g->observer;
  json_builder_set_member_name (builder, "geometry");
  json_builder_begin_object (builder);
  tf_json_int (builder, "projection", g->projection);
  tf_json_int (builder, "width", g->width);
  tf_json_int (builder, "height", g->height);
  tf_json_numbers (builder, "crpix", g->crpix, 2);
  tf_json_numbers (builder, "crval_deg", g->crval_deg, 2);
  tf_json_numbers (builder, "cd", &g->cd[0][0], 4);
  tf_json_number (builder, "lonpole_deg", g->lonpole_deg);
  tf_json_number (builder, "radius_mm", g->radius_mm);
  tf_json_number (builder, "distance_m", o->distance_m);
  tf_json_number (builder, "b0_deg", o->b0_deg);
  tf_json_number (builder, "stonyhurst_lon_deg", o->stonyhurst_lon_deg);
  tf_json_number (builder, "carrington_lon_deg", o->carrington_lon_deg);
  tf_json_int (builder, "observer_source", o->source);
  json_builder_end_object (builder);
}

static void
add_notes (JsonBuilder *builder, const char *key, const TfNotes *notes)
{
  g_autofree char *text = tf_notes_dup_store (notes);
  tf_json_string (builder, key, text);
}

char *
tf_info_dup_text (const TfFrameInfo *info)
{
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  g_autoptr (GPtrArray) refusal = g_ptr_array_new ();
  if (info->refusal != NULL)
    g_ptr_array_add (refusal, info->refusal);
  json_builder_begin_object (builder);
  tf_json_string (builder, "kind", tf_kind_name (info->kind));
  tf_json_int (builder, "role", info->role);
  add_notes (builder, "refusal", refusal);
  tf_json_number (builder, "time", info->time.s);
  tf_json_string (builder, "time_source", info->time_source);
  tf_json_number (builder, "time_span_s", info->time_span_s);
  build_geometry (&info->geometry, builder);
  tf_json_string (builder, "instrument", info->instrument);
  tf_json_string (builder, "unit", info->unit);
  tf_json_number (builder, "to_gauss", info->to_gauss);
  tf_json_int (builder, "field", info->field);
  tf_json_number (builder, "distance_given_m", info->distance_given_m);
  tf_json_number (builder, "rotation_number", info->rotation_number);
  tf_json_number (builder, "fill_value", info->fill_value);
  tf_json_int (builder, "n_planes", info->n_planes);
  tf_json_bool (builder, "simulated", info->simulated);
  add_notes (builder, "repairs", info->repairs);
  add_notes (builder, "cautions", info->cautions);
  json_builder_end_object (builder);
  return tf_json_dup_text (builder, FALSE);
}

static void
read_numbers (JsonObject *object, const char *key, double *values, guint n)
{
  JsonArray *array = tf_json_member_array (object, key);
  for (guint k = 0; k < n; k++)
    values[k] = array != NULL ? tf_json_element_number (array, k) : NAN;
}

static gint64
within (gint64 value, gint64 max)
{
  return value >= 0 && value <= max ? value : 0;
}

static void
read_geometry (TfGeometry *g, JsonObject *object)
{
  *g = (TfGeometry){ 0 };
  g->projection
      = (TfProjection)within (tf_json_member_int (object, "projection", 0), TF_PROJECTION_CAR);
  g->width = (guint)within (tf_json_member_int (object, "width", 0), G_MAXINT32);
  g->height = (guint)within (tf_json_member_int (object, "height", 0), G_MAXINT32);
  read_numbers (object, "crpix", g->crpix, 2);
  read_numbers (object, "crval_deg", g->crval_deg, 2);
  read_numbers (object, "cd", &g->cd[0][0], 4);
  g->lonpole_deg = tf_json_member_number (object, "lonpole_deg");
  g->radius_mm = tf_json_member_number (object, "radius_mm");
  g->observer = (TfObserver){
    .distance_m = tf_json_member_number (object, "distance_m"),
    .b0_deg = tf_json_member_number (object, "b0_deg"),
    .stonyhurst_lon_deg = tf_json_member_number (object, "stonyhurst_lon_deg"),
    .carrington_lon_deg = tf_json_member_number (object, "carrington_lon_deg"),
    .source = (TfObserverSource)within (tf_json_member_int (object, "observer_source", 0),
                                        TF_OBSERVER_EARTH),
  };
  TfProjection projection = g->projection;
  TfGeometry plain = *g;
  if (projection != TF_PROJECTION_NONE && !tf_geometry_make (g))
    {
      *g = plain;
      g->projection = TF_PROJECTION_NONE;
    }
}

static const char *
text_or (JsonObject *object, const char *key, const char *fallback)
{
  const char *text = tf_json_member_string (object, key);
  return text != NULL ? text : fallback;
}

/* The texts stay in @object; tf_frame_info_copy takes its own. */
static void
read_members (TfFrameInfo *info, JsonObject *object)
{
  const char *kind = tf_json_member_string (object, "kind");
  info->kind = kind != NULL ? tf_kind_from_name (kind) : TF_KIND_UNKNOWN;
  info->role = (TfRole)within (tf_json_member_int (object, "role", 0), TF_ROLE_INTENSITY);
  info->time.s = tf_json_member_number (object, "time");
  info->time_source = g_intern_string (text_or (object, "time_source", "unknown"));
  info->time_span_s = tf_json_member_number (object, "time_span_s");
  read_geometry (&info->geometry, tf_json_member_object (object, "geometry"));
  info->instrument = (char *)text_or (object, "instrument", "unknown");
  info->unit = (char *)text_or (object, "unit", "");
  info->to_gauss = tf_json_member_number (object, "to_gauss");
  info->field = (TfFieldKind)within (tf_json_member_int (object, "field", 0), TF_FIELD_RADIAL);
  info->distance_given_m = tf_json_member_number (object, "distance_given_m");
  info->rotation_number = tf_json_member_number (object, "rotation_number");
  info->fill_value = tf_json_member_number (object, "fill_value");
  info->n_planes = (guint)MAX (1, within (tf_json_member_int (object, "n_planes", 1), G_MAXINT32));
  info->simulated = tf_json_member_bool (object, "simulated", FALSE);
}

TfFrameInfo *
tf_info_from_text (const char *text, GError **error)
{
  g_autoptr (JsonNode) root = json_from_string (text, NULL);
  if (root == NULL || !JSON_NODE_HOLDS_OBJECT (root))
    {
      g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_DAMAGED,
                   _ ("what the ledger holds of a frame cannot be read; run check, or fill the "
                      "frame into a new ledger"));
      return NULL;
    }
  JsonObject *object = json_node_get_object (root);
  TfFrameInfo info = { 0 };
  read_members (&info, object);
  g_autoptr (TfNotes) refusal
      = tf_notes_from_store (tf_json_member_string (object, "refusal"), NULL);
  g_autoptr (TfNotes) repairs
      = tf_notes_from_store (tf_json_member_string (object, "repairs"), NULL);
  g_autoptr (TfNotes) cautions
      = tf_notes_from_store (tf_json_member_string (object, "cautions"), NULL);
  info.refusal = (TfNote *)(tf_notes_get_n (refusal) > 0 ? tf_notes_get (refusal, 0) : NULL);
  info.repairs = repairs;
  info.cautions = cautions;
  return tf_frame_info_copy (&info);
}
