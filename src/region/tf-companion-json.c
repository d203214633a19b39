/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>

#include <glib/gi18n-lib.h>

#include "tf-companion.h"
#include "tf-json.h"

static void
build_spot (const TfSpot *spot, JsonBuilder *builder)
{
  json_builder_begin_object (builder);
  tf_json_number (builder, "carrington_lon_deg", spot->lon_deg);
  tf_json_number (builder, "lat_deg", spot->lat_deg);
  tf_json_number (builder, "area_msh", spot->area_msh);
  tf_json_number (builder, "umbra_area_msh", spot->umbra_msh);
  tf_json_number (builder, "field_gauss", spot->field_gauss);
  tf_json_int (builder, "polarity", spot->polarity);
  tf_json_int (builder, "umbrae", spot->umbrae);
  tf_json_bool (builder, "delta", spot->delta);
  json_builder_end_object (builder);
}

static void
build_contours (const TfSpots *spots, gboolean umbra, const char *key, JsonBuilder *builder)
{
  json_builder_set_member_name (builder, key);
  json_builder_begin_array (builder);
  for (guint k = 0; k < spots->n_contours; k++)
    {
      const TfSpotContour *contour = &spots->contours[k];
      if (contour->umbra != umbra)
        continue;
      json_builder_begin_array (builder);
      for (guint i = 0; i < contour->n; i++)
        {
          const double place[2] = { contour->points[i].lon_deg, contour->points[i].lat_deg };
          tf_json_numbers (builder, NULL, place, 2);
        }
      json_builder_end_array (builder);
    }
  json_builder_end_array (builder);
}

static void
build_leader (const TfSpots *spots, JsonBuilder *builder)
{
  if (spots->leading_polarity == TF_WITNESS_ABSENT)
    tf_json_null (builder, "leading_polarity");
  else
    tf_json_int (builder, "leading_polarity", spots->leading_polarity);
}

void
tf_spots_build_json (const TfSpots *spots, const TfCompanionParams *params, JsonBuilder *builder)
{
  if (spots == NULL)
    {
      json_builder_add_null_value (builder);
      return;
    }
  json_builder_begin_object (builder);
  tf_json_bool (builder, "matched", spots->matched);
  json_builder_set_member_name (builder, "reason");
  tf_note_build_json (spots->refusal, builder);
  build_leader (spots, builder);
  tf_json_number (builder, "axis_bearing_deg", spots->axis_bearing_deg);
  tf_json_number (builder, "axis_tilt_deg", spots->axis_tilt_deg);
  tf_json_number (builder, "separation_deg", spots->separation_deg);
  tf_json_number (builder, "area_msh", spots->matched ? spots->area_msh : (double)NAN);
  tf_json_number (builder, "umbra_area_msh", spots->matched ? spots->umbra_msh : (double)NAN);
  tf_json_number (builder, "apart_min", spots->apart_min);
  tf_json_number (builder, "quiet_scatter", spots->quiet_scatter);
  tf_json_number (builder, "quiet_here", spots->quiet_here);
  tf_json_bool (builder, "delta", spots->delta);
  json_builder_set_member_name (builder, "spots");
  json_builder_begin_array (builder);
  for (guint k = 0; k < spots->n; k++)
    build_spot (&spots->spots[k], builder);
  json_builder_end_array (builder);
  build_contours (spots, TRUE, "umbra", builder);
  build_contours (spots, FALSE, "penumbra", builder);
  json_builder_set_member_name (builder, "parameters");
  tf_options_build_json (tf_companion_options, params, builder);
  json_builder_set_member_name (builder, "cautions");
  tf_notes_build_json (spots->notes, builder);
  json_builder_end_object (builder);
}

static void
add_note (GString *out, const TfNote *note)
{
  g_autofree char *text = tf_note_dup_text (note, FALSE);
  g_string_append_printf (out, "  %s\n", text);
}

char *
tf_spots_dup_text (const TfSpots *spots, const TfCompanionParams *params)
{
  GString *out = g_string_new (NULL);
  if (!spots->matched)
    {
      add_note (out, spots->refusal);
      return g_string_free (out, FALSE);
    }
  g_string_append_printf (
      out,
      _ ("  intensity frame %.0f min apart, limb darkening by %s; spots below %.3f, umbrae below "
         "%.3f of the quiet Sun\n"),
      spots->apart_min,
      spots->limb == TF_LIMB_OWN ? _ ("its own profile") : _ ("the published law"),
      params->penumbra, params->umbra);
  if (spots->n > 0)
    g_string_append_printf (
        out,
        ngettext ("  %u spot, %.0f millionths of the hemisphere (umbra %.0f)\n",
                  "  %u spots, %.0f millionths of the hemisphere (umbra %.0f)\n", spots->n),
        spots->n, spots->area_msh, spots->umbra_msh);
  if (spots->leading_polarity == 1 || spots->leading_polarity == -1)
    g_string_append_printf (out, _ ("  leading spot %s\n"),
                            spots->leading_polarity > 0 ? "+" : "−");
  if (isfinite (spots->axis_bearing_deg))
    g_string_append_printf (
        out, _ ("  spots by area: axis bearing %+.2f°, axis tilt %+.2f°, separation %.2f°\n"),
        spots->axis_bearing_deg, spots->axis_tilt_deg, spots->separation_deg);
  if (spots->delta)
    g_string_append (out, _ ("  delta: umbrae of both polarities in one penumbra\n"));
  for (guint k = 0; k < tf_notes_get_n (spots->notes); k++)
    add_note (out, tf_notes_get (spots->notes, k));
  return g_string_free (out, FALSE);
}
