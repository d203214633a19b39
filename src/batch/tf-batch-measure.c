/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-batch.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-intake.h"
#include "tf-json.h"

/* One measure, as JSON and as a few lines for a person. */

void
tf_batch_build_measure (JsonBuilder *builder, const char *path, const TfFrame *frame, const TfMeasure *measure, const char *method,
                        const TfStudy *study, const TfFigures *figures)
{
  const TfFrameInfo *info = tf_frame_get_info (frame);
  TfSampleRow row;
  TfVerdict verdict = tf_study_judge_measure (study, measure);
  tf_study_measure_row (measure, &row);
  json_builder_begin_object (builder);
  tf_json_string (builder, "file", path);
  tf_json_string (builder, "time_source", info->time_source);
  tf_json_string (builder, "method", method);
  tf_json_string (builder, "instrument", info->instrument);
  tf_measure_build_members (measure, builder);
  tf_complexity_build_members (figures->complexity, figures->complexity_params, builder);
  json_builder_set_member_name (builder, "frame_cautions");
  tf_notes_build_json (info->cautions, builder);
  json_builder_set_member_name (builder, "spots");
  tf_spots_build_json (figures->spots, figures->companion_params, builder);
  tf_verdict_build_members (&verdict, &row, builder);
  json_builder_end_object (builder);
}

static void
add_pole (GString *out, const char *sign, const TfPole *pole)
{
  if (pole->pixels == 0)
    g_string_append_printf (out, _ ("  %s none above the floor\n"), sign);
  else
    g_string_append_printf (out, _ ("  %s %.3g ± %.1g Mx at %+.2f° latitude, Carrington %.2f° (± %.2f°), %u pixels\n"), sign,
                            pole->flux_mx, pole->flux_sigma_mx, pole->lat_deg, pole->carrington_lon_deg, pole->place_sigma_deg,
                            pole->pixels);
}

/* A term that could not be worked out is a dash. */
static void
add_term (GString *out, const char *name, double term)
{
  if (isfinite (term))
    g_string_append_printf (out, "%s %.2f", name, term);
  else
    g_string_append_printf (out, "%s —", name);
}

char *
tf_batch_dup_measure_text (const TfMeasure *m, const TfStudy *study)
{
  TfSampleRow row;
  TfVerdict verdict = tf_study_judge_measure (study, m);
  tf_study_measure_row (m, &row);
  g_autofree char *says = tf_verdict_dup_text (&verdict, &row, FALSE);
  GString *out = g_string_new (NULL);
  if (isfinite (m->lat_deg)) /* something above the floor */
    g_string_append_printf (out, _ ("latitude %+.2f°, "), m->lat_deg);
  if (isfinite (m->cmd_deg)) /* not on a map */
    g_string_append_printf (out, _ ("CMD %+.2f°, μ %.2f, "), m->cmd_deg, m->mu);
  else if (isfinite (m->carrington_lon_deg))
    g_string_append_printf (out, _ ("Carrington %.2f°, "), m->carrington_lon_deg);
  g_string_append_printf (out, _ ("floor %.0f G (%s), noise %.1f G, field %s\n"), m->floor_gauss, tf_floor_kind_name (m->floor_kind), m->noise_gauss,
                          tf_field_used_name (m->field_used));
  add_pole (out, "+", &m->positive);
  add_pole (out, "−", &m->negative);
  if (m->leading_polarity != 0)
    g_string_append_printf (out, _ ("  leading %s (%s)\n"), m->leading_polarity > 0 ? "+" : "−",
                            m->leading_sure ? _ ("sure") : _ ("not sure"));
  if (isfinite (m->axis_bearing_deg) && !isfinite (m->axis_tilt_deg))
    g_string_append_printf (out, _ ("  axis bearing %+.2f°, no axis tilt: the poles lie on opposite sides of the equator\n"),
                            m->axis_bearing_deg);
  else if (isfinite (m->axis_bearing_deg))
    {
      g_string_append_printf (out, _ ("  axis bearing %+.2f°, axis tilt %+.2f° ± %.2f°"), m->axis_bearing_deg, m->axis_tilt_deg,
                              m->tilt_terms.total);
      add_term (out, _ (" (noise"), m->tilt_terms.noise);
      add_term (out, _ (", outline"), m->tilt_terms.outline);
      add_term (out, _ (", floor"), m->tilt_terms.floor);
      g_string_append (out, ")\n");
    }
  if (isfinite (m->separation_deg))
    g_string_append_printf (out, _ ("  separation %.2f° ± %.2f° (%.0f Mm), compactness %.2f, pieces %u\n"), m->separation_deg,
                            m->separation_sigma_deg, m->separation_mm, m->compactness, m->pieces);
  g_string_append_printf (out, "  %s\n", says);
  for (guint k = 0; k < tf_notes_get_n (m->cautions); k++)
    {
      g_autofree char *text = tf_note_dup_text (tf_notes_get (m->cautions, k), FALSE);
      g_string_append_printf (out, _ ("  caution: %s\n"), text);
    }
  return g_string_free (out, FALSE);
}

void
tf_batch_print_frame_cautions (const TfFrame *frame)
{
  const TfNotes *cautions = tf_frame_get_info (frame)->cautions;
  for (guint k = 0; k < tf_notes_get_n (cautions); k++)
    {
      g_autofree char *text = tf_note_dup_text (tf_notes_get (cautions, k), FALSE);
      g_autofree char *line = g_strdup_printf (_ ("caution about the frame: %s\n"), text);
      tf_batch_print (line);
    }
}

TfLedger *
tf_batch_open_measured (const char *path, const TfStudy *study, gboolean with_hints, GError **error)
{
  g_autoptr (TfLedger) ledger = tf_ledger_open (path, error);
  if (ledger == NULL)
    return NULL;
  const TfRowQuery query = { .marks = TRUE, .hints = with_hints };
  g_autoptr (TfWork) work = tf_batch_work_new (0);
  if (!tf_intake_measure_even (ledger, tf_study_floor (study, ledger), &query, work, error))
    return NULL;
  return g_steal_pointer (&ledger);
}
