/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* The shift sheet as JSON: English keys and words, UTC, a value that does not exist is null. */

#include "tf-shift.h"

#include "tf-json.h"

static void
add_time (JsonBuilder *builder, const char *key, TfTime time)
{
  g_autofree char *iso = tf_time_dup_iso (time, 0);
  tf_json_string (builder, key, iso);
}

static const char *
or_null (const char *text)
{
  return text != NULL && *text != '\0' ? text : NULL;
}

static void
add_value (JsonBuilder *builder, const char *key, const TfShiftValue *value)
{
  json_builder_set_member_name (builder, key);
  json_builder_begin_object (builder);
  tf_json_number (builder, "now", value->now);
  add_time (builder, "now_time", value->now_time);
  tf_json_number (builder, "before", value->before);
  add_time (builder, "before_time", value->before_time);
  tf_json_number (builder, "change_share", tf_shift_share (value));
  json_builder_end_object (builder);
}

static void
add_note (JsonBuilder *builder, const TfRegionNote *note, TfTime since)
{
  static const char *const states[] = { "new", "carried over", "settled" };
  json_builder_begin_object (builder);
  tf_json_string (builder, "region", or_null (note->number));
  tf_json_string (builder, "text", note->text);
  tf_json_string (builder, "person", note->person);
  add_time (builder, "written", note->written);
  tf_json_string (builder, "state", states[tf_shift_note_state (note, since)]);
  tf_json_string (builder, "settled_by", note->resolver);
  json_builder_end_object (builder);
}

static void
add_notes (JsonBuilder *builder, const char *key, const GPtrArray *notes, TfTime since)
{
  json_builder_set_member_name (builder, key);
  json_builder_begin_array (builder);
  for (guint k = 0; k < notes->len; k++)
    add_note (builder, g_ptr_array_index (notes, k), since);
  json_builder_end_array (builder);
}

static void
build_others (JsonBuilder *builder, const TfOthers *others)
{
  if (others == NULL)
    {
      json_builder_add_null_value (builder);
      return;
    }
  json_builder_begin_object (builder);
  tf_json_string (builder, "number", others->number);
  tf_json_string (builder, "class", or_null (others->mw_class));
  tf_json_number (builder, "spot_area_msh", others->area_msh);
  add_time (builder, "time", others->time);
  tf_json_string (builder, "source", or_null (others->source));
  tf_json_number (builder, "apart_deg", others->apart_deg);
  tf_json_int (builder, "sharing", others->sharing);
  json_builder_end_object (builder);
}

static void
add_list (JsonBuilder *builder, const char *key, const GPtrArray *others)
{
  json_builder_set_member_name (builder, key);
  json_builder_begin_array (builder);
  for (guint k = 0; k < others->len; k++)
    build_others (builder, g_ptr_array_index (others, k));
  json_builder_end_array (builder);
}

static void
add_row (JsonBuilder *builder, const TfShiftRow *row, guint order, TfTime since)
{
  static const char *const seen[] = { "mark", "hint", "not found", "due back" };
  json_builder_begin_object (builder);
  tf_json_int (builder, "order", order);
  tf_json_string (builder, "group", tf_shift_group_name (row->group));
  tf_json_string (builder, "region", or_null (row->number));
  tf_json_string (builder, "external_number", or_null (row->external));
  tf_json_string (builder, "label", or_null (row->label));
  tf_json_string (builder, "seen", seen[row->seen]);
  tf_json_bool (builder, "new", row->is_new);
  add_time (builder, "first_seen", row->first);
  tf_json_number (builder, "lat_deg", row->lat_deg);
  tf_json_number (builder, "cmd_deg", row->cmd_deg);
  tf_json_number (builder, "carrington_lon_deg", row->carrington_lon_deg);
  tf_json_number (builder, "mu", row->mu);
  add_time (builder, "crosses_east_limb", row->crosses);
  tf_json_string (builder, "class", or_null (row->class_now));
  tf_json_string (builder, "class_before", or_null (row->class_before));
  tf_json_string (builder, "class_person", or_null (row->class_person));
  add_time (builder, "class_time", row->class_time);
  add_value (builder, "r_schrijver_mx", &row->r_mx);
  tf_json_bool (builder, "delta_candidate", row->delta_candidate);
  add_value (builder, "flux_unsigned_mx", &row->flux_mx);
  tf_json_number (builder, "flux_sigma_mx", row->flux_sigma_mx);
  add_value (builder, "magnetic_area_msh", &row->area_msh);
  tf_json_bool (builder, "floors_differ", row->floors_differ);
  json_builder_set_member_name (builder, "others");
  build_others (builder, row->others);
  add_list (builder, "proposed", row->proposed);
  add_notes (builder, "notes", row->notes, since);
  json_builder_end_object (builder);
}

void
tf_shift_build_json (const TfShift *shift, const char *who, JsonBuilder *builder)
{
  g_autofree char *file = shift->frame_path != NULL ? g_path_get_basename (shift->frame_path) : NULL;
  json_builder_begin_object (builder);
  tf_json_string (builder, "program", "Tiltfield " TF_VERSION);
  tf_json_string (builder, "frame", file);
  add_time (builder, "time", shift->time);
  tf_json_string (builder, "desk", or_null (who));
  add_time (builder, "since", shift->since);
  tf_json_string (builder, "since_desk", or_null (shift->since_person));
  tf_json_bool (builder, "compared", shift->compared);
  json_builder_set_member_name (builder, "regions");
  json_builder_begin_array (builder);
  for (guint k = 0; k < shift->rows->len; k++)
    add_row (builder, g_ptr_array_index (shift->rows, k), k + 1, shift->since);
  json_builder_end_array (builder);
  add_notes (builder, "notes_elsewhere", shift->loose, shift->since);
  add_list (builder, "unmatched", shift->unmatched);
  json_builder_set_member_name (builder, "cautions");
  tf_notes_build_json (shift->cautions, builder);
  json_builder_end_object (builder);
}
