/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-json.h"
#include "tf-measure.h"

static void
build_polarity (JsonBuilder *builder, const char *key, const TfPole *pole)
{
  json_builder_set_member_name (builder, key);
  json_builder_begin_object (builder);
  tf_json_number (builder, "flux_mx", pole->flux_mx);
  tf_json_number (builder, "flux_sigma_mx", pole->flux_sigma_mx);
  tf_json_number (builder, "flux_noise_mx", pole->flux_noise_mx);
  tf_json_number (builder, "lon_deg", pole->lon_deg);
  tf_json_number (builder, "carrington_lon_deg", pole->carrington_lon_deg);
  tf_json_number (builder, "lat_deg", pole->lat_deg);
  tf_json_number (builder, "place_sigma_deg", pole->place_sigma_deg);
  tf_json_number (builder, "place_noise_deg", pole->place_noise_deg);
  tf_json_number (builder, "rms_radius_deg", pole->rms_radius_deg);
  tf_json_int (builder, "pixels", pole->pixels);
  tf_json_number (builder, "magnetic_area_msh", pole->magnetic_area_msh);
  tf_json_bool (builder, "pinned", pole->pinned);
  json_builder_end_object (builder);
}

static void
build_place (JsonBuilder *builder, const TfPole *pole)
{
  tf_json_number (builder, "lon_deg", pole->lon_deg);
  tf_json_number (builder, "carrington_lon_deg", pole->carrington_lon_deg);
  tf_json_number (builder, "lat_deg", pole->lat_deg);
}

static void
build_witnesses (JsonBuilder *builder, const TfMeasure *measure)
{
  json_builder_set_member_name (builder, "witnesses");
  json_builder_begin_array (builder);
  for (guint k = 0; k < G_N_ELEMENTS (measure->witnesses); k++)
    if (measure->witnesses[k] == TF_WITNESS_ABSENT)
      json_builder_add_null_value (builder);
    else
      json_builder_add_int_value (builder, measure->witnesses[k]);
  json_builder_end_array (builder);
}

/* Without two poles there is no leader: its place is null. */
static void
build_leader (JsonBuilder *builder, const TfMeasure *measure)
{
  static const TfPole none = { .lon_deg = __builtin_nan (""),
                               .carrington_lon_deg = __builtin_nan (""),
                               .lat_deg = __builtin_nan ("") };
  const TfPole *lead = measure->leading_polarity > 0 ? &measure->positive : &measure->negative;
  const TfPole *follow = measure->leading_polarity > 0 ? &measure->negative : &measure->positive;
  gboolean has = measure->leading_polarity != 0;
  json_builder_set_member_name (builder, "leading");
  json_builder_begin_object (builder);
  tf_json_int (builder, "polarity", measure->leading_polarity);
  tf_json_bool (builder, "sure", measure->leading_sure);
  build_witnesses (builder, measure);
  build_place (builder, has ? lead : &none);
  json_builder_end_object (builder);
  json_builder_set_member_name (builder, "following");
  json_builder_begin_object (builder);
  tf_json_int (builder, "polarity", -measure->leading_polarity);
  build_place (builder, has ? follow : &none);
  json_builder_end_object (builder);
}

static void
build_tilt (JsonBuilder *builder, const TfMeasure *measure)
{
  tf_json_number (builder, "axis_bearing_deg", measure->axis_bearing_deg);
  tf_json_number (builder, "axis_tilt_deg", measure->axis_tilt_deg);
  tf_json_number (builder, "tilt_sigma_deg", measure->tilt_terms.total);
  json_builder_set_member_name (builder, "tilt_terms");
  json_builder_begin_object (builder);
  tf_json_number (builder, "noise", measure->tilt_terms.noise);
  tf_json_number (builder, "outline", measure->tilt_terms.outline);
  tf_json_number (builder, "floor", measure->tilt_terms.floor);
  json_builder_end_object (builder);
  tf_json_number (builder, "separation_deg", measure->separation_deg);
  tf_json_number (builder, "separation_sigma_deg", measure->separation_sigma_deg);
  tf_json_number (builder, "separation_mm", measure->separation_mm);
}

static void
build_method (JsonBuilder *builder, const TfMeasure *measure)
{
  tf_json_string (builder, "method", TF_MEASURE_METHOD);
  tf_json_number (builder, "scale", measure->scale);
  tf_json_number (builder, "floor_gauss", measure->floor_gauss);
  tf_json_string (builder, "floor_kind", tf_floor_kind_name (measure->floor_kind));
  tf_json_number (builder, "noise_gauss", measure->noise_gauss);
  tf_json_number (builder, "noise_flux_mx", measure->noise_flux_mx);
  tf_json_string (builder, "field_used", tf_field_used_name (measure->field_used));
}

void
tf_measure_build_members (const TfMeasure *measure, JsonBuilder *builder)
{
  g_autofree char *time = tf_time_dup_iso (measure->time, 0);
  tf_json_string (builder, "time", time);
  build_method (builder, measure);
  build_polarity (builder, "positive", &measure->positive);
  build_polarity (builder, "negative", &measure->negative);
  build_leader (builder, measure);
  build_tilt (builder, measure);
  tf_json_number (builder, "compactness", measure->compactness);
  tf_json_int (builder, "pieces", measure->pieces);
  tf_json_number (builder, "flux_unsigned_mx", measure->flux_unsigned_mx);
  tf_json_number (builder, "imbalance", measure->imbalance);
  tf_json_number (builder, "lat_deg", measure->lat_deg);
  tf_json_number (builder, "stonyhurst_lon_deg", measure->stonyhurst_lon_deg);
  tf_json_number (builder, "carrington_lon_deg", measure->carrington_lon_deg);
  tf_json_number (builder, "mu", measure->mu);
  tf_json_number (builder, "cmd_deg", measure->cmd_deg);
  tf_json_string (builder, "size", measure->ephemeral ? "ephemeral" : "region");
  tf_json_number (builder, "axial_dipole_gauss", measure->axial_dipole_gauss);
  tf_json_number (builder, "axial_dipole_sigma_gauss", measure->axial_dipole_sigma_gauss);
  tf_json_number (builder, "axial_dipole_poles_gauss", measure->axial_dipole_poles_gauss);
  json_builder_set_member_name (builder, "cautions");
  tf_notes_build_json (measure->cautions, builder);
}
