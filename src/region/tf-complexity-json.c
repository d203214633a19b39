/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>

#include <glib/gi18n-lib.h>

#include "tf-complexity.h"
#include "tf-json.h"

void
tf_complexity_build_json (const TfComplexity *c, const TfComplexityParams *params,
                          JsonBuilder *builder)
{
  if (!c->given)
    {
      json_builder_add_null_value (builder);
      return;
    }
  json_builder_begin_object (builder);
  tf_json_string (builder, "method", TF_COMPLEXITY_METHOD);
  tf_json_string (builder, "field_used", tf_field_used_name (c->field_used));
  tf_json_number (builder, "resolution_fwhm_mm", c->fwhm_mm);
  tf_json_number (builder, "resolution_step_mm", c->step_mm);
  tf_json_number (builder, "mu", c->mu);
  tf_json_number (builder, "line_length_mm", c->length_mm);
  tf_json_number (builder, "strong_field_length_mm", c->strong_field_length_mm);
  tf_json_number (builder, "strong_gradient_length_mm", c->strong_gradient_length_mm);
  tf_json_number (builder, "gradient_weighted_length_gauss", c->gradient_weighted_gauss);
  tf_json_number (builder, "max_gradient_gauss_mm", c->max_gradient_gauss_mm);
  tf_json_number (builder, "r_mx", c->r_mx);
  tf_json_number (builder, "r_log10", c->r_log10);
  tf_json_number (builder, "flux_near_line_mx", c->flux_near_mx);
  tf_json_int (builder, "pieces", c->pieces);
  tf_json_bool (builder, "delta_candidate", c->delta_candidate);
  json_builder_set_member_name (builder, "delta_reason");
  tf_note_build_json (c->delta_reason, builder);
  tf_json_number (builder, "delta_distance_mm", c->delta_distance_mm);
  json_builder_set_member_name (builder, "lines");
  tf_inversion_build_json (&c->inversion, builder);
  json_builder_set_member_name (builder, "parameters");
  tf_options_build_json (tf_complexity_options, params, builder);
  json_builder_set_member_name (builder, "cautions");
  tf_notes_build_json (c->notes, builder);
  json_builder_end_object (builder);
}

void
tf_complexity_build_members (const TfComplexity *c, const TfComplexityParams *params,
                             JsonBuilder *builder)
{
  json_builder_set_member_name (builder, "complexity");
  if (c != NULL)
    tf_complexity_build_json (c, params, builder);
  else
    json_builder_add_null_value (builder);
  json_builder_set_member_name (builder, "complexity_reason");
  tf_note_build_json (c != NULL ? c->refusal : NULL, builder);
}

static void
add_note (GString *out, const TfNote *note)
{
  g_autofree char *text = tf_note_dup_text (note, FALSE);
  g_string_append_printf (out, "  %s\n", text);
}

char *
tf_complexity_dup_text (const TfComplexity *c)
{
  GString *out = g_string_new (NULL);
  if (!c->given)
    {
      add_note (out, c->refusal);
      return g_string_free (out, FALSE);
    }
  g_string_append_printf (out,
                          _ ("  complexity at %.1f Mm (nodes %.1f Mm apart): inversion lines %.0f "
                             "Mm, strong field %.0f Mm, "
                             "strong gradient %.0f Mm, gradient-weighted %.3g G\n"),
                          c->fwhm_mm, c->step_mm, c->length_mm, c->strong_field_length_mm,
                          c->strong_gradient_length_mm, c->gradient_weighted_gauss);
  if (c->inversion.n > 0)
    g_string_append_printf (out, _ ("  steepest gradient %.0f G/Mm\n"), c->max_gradient_gauss_mm);
  if (c->r_mx > 0.0)
    g_string_append_printf (out,
                            _ ("  Schrijver's R %.3g Mx (log %.2f), flux near strong gradients "
                               "%.3g Mx, strong pieces %u\n"),
                            c->r_mx, c->r_log10, c->flux_near_mx, c->pieces);
  else
    g_string_append_printf (
        out, _ ("  Schrijver's R 0 Mx, flux near strong gradients %.3g Mx, strong pieces %u\n"),
        c->flux_near_mx, c->pieces);
  add_note (out, c->delta_reason);
  for (guint k = 0; k < tf_notes_get_n (c->notes); k++)
    add_note (out, tf_notes_get (c->notes, k));
  return g_string_free (out, FALSE);
}
