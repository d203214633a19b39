/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <string.h>

#include "tf-json.h"
#include "tf-study-private.h"

/* The `laws` document. */

static void
build_hale (JsonBuilder *builder, const TfHaleRow *r, double level)
{
  json_builder_begin_object (builder);
  tf_study_build_cell (builder, r->cycle, r->hemisphere);
  tf_json_int (builder, "n", r->n);
  tf_json_int (builder, "regions", r->regions);
  tf_json_int (builder, "keeps", r->keeps);
  tf_json_int (builder, "breaks", r->breaks);
  tf_json_int (builder, "cannot_say", r->cannot_say);
  tf_json_number (builder, "share_breaks", r->share);
  tf_study_build_interval (builder, "bounds", r->bounds);
  tf_json_number (builder, "expected_false", r->expected_false);
  tf_study_build_interval (builder, "wilson", r->wilson);
  tf_study_build_interval (builder, "clopper_pearson", r->clopper_pearson);
  tf_study_build_interval (builder, "cluster", r->cluster);
  tf_json_number (builder, "level", level);
  tf_json_int (builder, "on_provisional_minimum", r->leaning);
  json_builder_end_object (builder);
}

static void
build_joy (JsonBuilder *builder, const TfJoyFit *f, const TfJoyParams *params)
{
  json_builder_begin_object (builder);
  tf_study_build_cell (builder, f->cycle, f->hemisphere);
  tf_json_string (builder, "form", tf_joy_form_names[params->form]);
  tf_json_string (builder, "estimator", tf_joy_estimator_names[params->estimator]);
  tf_json_int (builder, "n", f->n);
  tf_json_int (builder, "regions", f->regions);
  tf_json_int (builder, "no_polarity", f->no_polarity);
  tf_json_number (builder, "slope", f->slope);
  tf_study_build_interval (builder, "slope_ci", f->slope_ci);
  tf_json_number (builder, "intercept", f->intercept);
  tf_study_build_interval (builder, "intercept_ci", f->intercept_ci);
  tf_json_number (builder, "scatter_deg", f->scatter_deg);
  tf_json_number (builder, "level", params->level);
  tf_json_string (builder, "unit", tf_joy_unit ((TfJoyForm)params->form));
  tf_json_number (builder, "mean_tilt_deg", f->mean_tilt_deg);
  tf_json_number (builder, "median_tilt_deg", f->median_tilt_deg);
  tf_json_number (builder, "axial_mean_deg", f->axial_mean_deg);
  tf_json_number (builder, "axial_resultant", f->axial_resultant);
  tf_json_number (builder, "axial_sd_deg", f->axial_sd_deg);
  tf_json_number (builder, "rayleigh_p", f->rayleigh_p);
  tf_json_int (builder, "on_provisional_minimum", f->leaning);
  json_builder_end_object (builder);
}

static int
compare_key (gconstpointer a, gconstpointer b)
{
  return strcmp (a, b);
}

static void
build_counts (JsonBuilder *builder, const char *name, GHashTable *counts)
{
  g_autoptr (GList) keys = g_list_sort (g_hash_table_get_keys (counts), compare_key);
  json_builder_set_member_name (builder, name);
  json_builder_begin_object (builder);
  for (GList *l = keys; l != NULL; l = l->next)
    tf_json_int (builder, l->data, GPOINTER_TO_UINT (g_hash_table_lookup (counts, l->data)));
  json_builder_end_object (builder);
}

static void
build_sample (JsonBuilder *builder, const TfFindings *findings, const TfStudy *study)
{
  json_builder_set_member_name (builder, "sample");
  json_builder_begin_object (builder);
  tf_json_string (builder, "rule", tf_sampling_names[study->sampling.rule]);
  tf_json_int (builder, "picks", tf_sample_get_n (findings->sample));
  tf_json_int (builder, "peak_not_bracketed", findings->sampling.not_bracketed);
  tf_json_int (builder, "regions", findings->regions);
  tf_json_int (builder, "passages", tf_sample_count_passages (findings->sample));
  tf_json_int (builder, "marks", findings->n_marks);
  tf_json_int (builder, "hints", findings->n_hints);
  tf_json_int (builder, "outside", findings->n_outside);
  build_counts (builder, "left_out", findings->left_out);
  build_counts (builder, "passed_without", findings->passed_without);
  build_counts (builder, "cannot_say", findings->cannot_say);
  tf_json_number (builder, "even_floor_gauss", findings->even_floor_gauss);
  tf_json_int (builder, "rows_with_other_floor", findings->n_other_floor);
  json_builder_end_object (builder);
}

static void
build_options (JsonBuilder *builder, const char *key, const TfOption *table, const void *params)
{
  json_builder_set_member_name (builder, key);
  tf_options_build_json (table, params, builder);
}

static void
build_study (JsonBuilder *builder, const TfStudy *study)
{
  json_builder_set_member_name (builder, "study");
  json_builder_begin_object (builder);
  tf_json_string (builder, "name", study->name);
  build_options (builder, "sieve", tf_sieve_options, &study->sieve);
  build_options (builder, "sampling", tf_sampling_options, &study->sampling);
  build_options (builder, "cycles", tf_divide_options, &study->divide);
  build_options (builder, "verdict", tf_verdict_options, &study->verdict);
  build_options (builder, "hale", tf_hale_options, &study->hale);
  build_options (builder, "joy", tf_joy_options, &study->joy);
  build_options (builder, "drift", tf_drift_options, &study->drift);
  build_options (builder, "emergence", tf_emergence_options, &study->emergence);
  json_builder_end_object (builder);
}

static void
build_what_if (JsonBuilder *builder, const TfWhatIf *row)
{
  json_builder_begin_object (builder);
  tf_json_string (builder, "choice", row->name);
  tf_json_string (builder, "missing", row->missing);
  if (row->missing != NULL)
    {
      tf_json_int (builder, "rows_lacking", row->n_missing);
      json_builder_end_object (builder);
      return;
    }
  tf_json_int (builder, "n", row->n);
  tf_json_int (builder, "regions", row->regions);
  tf_json_int (builder, "breaks", row->breaks);
  tf_json_number (builder, "share_breaks", row->share);
  tf_json_int (builder, "n_tilts", row->n_tilts);
  tf_json_number (builder, "slope", row->slope);
  tf_json_int (builder, "on_provisional_minimum", row->leaning);
  json_builder_end_object (builder);
}

/* The three cycle assignments always stand together. */
static void
build_cycle_choice (JsonBuilder *builder, const TfFindings *findings)
{
  static const char *const keys[] = { "date_only", "latitude", "unsure_left_out" };
  json_builder_set_member_name (builder, "cycle_choice");
  json_builder_begin_object (builder);
  for (guint k = 0; k < G_N_ELEMENTS (keys); k++)
    {
      json_builder_set_member_name (builder, keys[k]);
      build_what_if (builder, &findings->cycle_choice[k]);
    }
  json_builder_end_object (builder);
}

void
tf_findings_build_json (const TfFindings *findings, const TfStudy *study, JsonBuilder *builder)
{
  json_builder_begin_object (builder);
  build_study (builder, study);
  build_sample (builder, findings, study);
  json_builder_set_member_name (builder, "hale");
  json_builder_begin_array (builder);
  for (guint k = 0; k < findings->hale->len; k++)
    build_hale (builder, &g_array_index (findings->hale, TfHaleRow, k), study->hale.level);
  json_builder_end_array (builder);
  json_builder_set_member_name (builder, "joy");
  json_builder_begin_array (builder);
  for (guint k = 0; k < findings->joy->len; k++)
    build_joy (builder, &g_array_index (findings->joy, TfJoyFit, k), &study->joy);
  json_builder_end_array (builder);
  tf_json_number (builder, "mean_tilt_deg", findings->mean_tilt_deg);
  tf_json_number (builder, "median_tilt_deg", findings->median_tilt_deg);
  tf_study_build_parts (builder, findings);
  build_cycle_choice (builder, findings);
  json_builder_set_member_name (builder, "what_if");
  json_builder_begin_array (builder);
  for (guint k = 0; k < findings->what_if->len; k++)
    build_what_if (builder, &g_array_index (findings->what_if, TfWhatIf, k));
  json_builder_end_array (builder);
  json_builder_set_member_name (builder, "cautions");
  tf_notes_build_json (findings->cautions, builder);
  json_builder_end_object (builder);
}

static void
build_reason (JsonBuilder *builder, const char *code)
{
  g_autoptr (TfNote) note = code != NULL ? tf_note_new (code, "") : NULL;
  json_builder_set_member_name (builder, "reason");
  tf_note_build_json (note, builder);
}

/* Both readings of an unsure cycle, the older first. */
static void
build_readings (JsonBuilder *builder, const TfVerdict *verdict)
{
  json_builder_set_member_name (builder, "readings");
  if (verdict->as_number == TF_VERDICT_CANNOT_SAY || verdict->as_other == TF_VERDICT_CANNOT_SAY)
    {
      json_builder_add_null_value (builder);
      return;
    }
  gboolean number_first = verdict->cycle.number < verdict->cycle.other;
  json_builder_begin_array (builder);
  for (int k = 0; k < 2; k++)
    {
      gboolean number = (k == 0) == number_first;
      json_builder_begin_object (builder);
      tf_json_int (builder, "cycle", number ? verdict->cycle.number : verdict->cycle.other);
      tf_json_string (builder, "verdict",
                      tf_verdict_name (number ? verdict->as_number : verdict->as_other));
      json_builder_end_object (builder);
    }
  json_builder_end_array (builder);
}

void
tf_verdict_build_members (const TfVerdict *verdict, const TfSampleRow *row, JsonBuilder *builder)
{
  tf_json_number (builder, "polarity_tilt_deg", tf_verdict_polarity_tilt (row, verdict));
  json_builder_set_member_name (builder, "cycle");
  json_builder_begin_object (builder);
  if (verdict->cycle.number != 0)
    tf_json_int (builder, "number", verdict->cycle.number);
  else
    tf_json_null (builder, "number");
  tf_json_bool (builder, "sure", verdict->cycle.sure);
  build_reason (builder, verdict->cycle.reason);
  json_builder_end_object (builder);
  json_builder_set_member_name (builder, "hale");
  json_builder_begin_object (builder);
  tf_json_string (builder, "verdict", tf_verdict_name (verdict->kind));
  build_reason (builder, verdict->reason);
  tf_json_int (builder, "expected", verdict->expected);
  build_readings (builder, verdict);
  json_builder_end_object (builder);
}
