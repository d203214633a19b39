/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <string.h>

#include "tf-json.h"
#include "tf-study-private.h"

/* The `laws` document. */

static void
build_interval (JsonBuilder *builder, const char *key, TfInterval interval)
{
  tf_json_numbers (builder, key, (const double[]){ interval.low, interval.high }, 2);
}

static void
build_cell (JsonBuilder *builder, int cycle, int hemisphere)
{
  if (cycle != 0)
    tf_json_int (builder, "cycle", cycle);
  else
    tf_json_null (builder, "cycle");
  tf_json_string (builder, "hemisphere", hemisphere > 0 ? "N" : hemisphere < 0 ? "S" : "both");
}

static void
build_hale (JsonBuilder *builder, const TfHaleRow *r, double level)
{
  json_builder_begin_object (builder);
  build_cell (builder, r->cycle, r->hemisphere);
  tf_json_int (builder, "n", r->n);
  tf_json_int (builder, "regions", r->regions);
  tf_json_int (builder, "keeps", r->keeps);
  tf_json_int (builder, "breaks", r->breaks);
  tf_json_int (builder, "cannot_say", r->cannot_say);
  tf_json_number (builder, "share_breaks", r->share);
  build_interval (builder, "bounds", r->bounds);
  tf_json_number (builder, "expected_false", r->expected_false);
  build_interval (builder, "wilson", r->wilson);
  build_interval (builder, "clopper_pearson", r->clopper_pearson);
  build_interval (builder, "cluster", r->cluster);
  tf_json_number (builder, "level", level);
  json_builder_end_object (builder);
}

static void
build_joy (JsonBuilder *builder, const TfJoyFit *f, const TfJoyParams *params)
{
  json_builder_begin_object (builder);
  build_cell (builder, f->cycle, f->hemisphere);
  tf_json_string (builder, "form", tf_joy_form_names[params->form]);
  tf_json_string (builder, "estimator", tf_joy_estimator_names[params->estimator]);
  tf_json_int (builder, "n", f->n);
  tf_json_int (builder, "regions", f->regions);
  tf_json_int (builder, "no_polarity", f->no_polarity);
  tf_json_number (builder, "slope", f->slope);
  build_interval (builder, "slope_ci", f->slope_ci);
  tf_json_number (builder, "intercept", f->intercept);
  build_interval (builder, "intercept_ci", f->intercept_ci);
  tf_json_number (builder, "scatter_deg", f->scatter_deg);
  tf_json_number (builder, "level", params->level);
  tf_json_string (builder, "unit", tf_joy_unit ((TfJoyForm)params->form));
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
build_sample (JsonBuilder *builder, const TfFindings *findings)
{
  json_builder_set_member_name (builder, "sample");
  json_builder_begin_object (builder);
  tf_json_string (builder, "rule", "every-mark");
  tf_json_int (builder, "regions", tf_sample_count_regions (findings->sample));
  tf_json_int (builder, "passages", tf_sample_count_passages (findings->sample));
  tf_json_int (builder, "marks", findings->n_marks);
  tf_json_int (builder, "hints", findings->n_hints);
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
  build_options (builder, "cycles", tf_divide_options, &study->divide);
  build_options (builder, "verdict", tf_verdict_options, &study->verdict);
  build_options (builder, "hale", tf_hale_options, &study->hale);
  build_options (builder, "joy", tf_joy_options, &study->joy);
  json_builder_end_object (builder);
}

static void
build_what_if (JsonBuilder *builder, const TfWhatIf *row)
{
  json_builder_begin_object (builder);
  tf_json_string (builder, "choice", row->name);
  tf_json_int (builder, "n", row->n);
  tf_json_int (builder, "breaks", row->breaks);
  tf_json_number (builder, "share_breaks", row->share);
  tf_json_number (builder, "slope", row->slope);
  json_builder_end_object (builder);
}

/* The three cycle assignments always stand together. */
static void
build_cycle_choice (JsonBuilder *builder, const GArray *what_if)
{
  static const struct
  {
    const char *choice, *key;
  } three[] = { { "cycle-by-date-only", "date_only" },
                { "cycle-by-latitude-alone", "latitude" },
                { "as-chosen", "unsure_left_out" } };
  json_builder_set_member_name (builder, "cycle_choice");
  json_builder_begin_object (builder);
  for (guint t = 0; t < G_N_ELEMENTS (three); t++)
    for (guint k = 0; k < what_if->len; k++)
      if (strcmp (g_array_index (what_if, TfWhatIf, k).name, three[t].choice) == 0)
        {
          json_builder_set_member_name (builder, three[t].key);
          build_what_if (builder, &g_array_index (what_if, TfWhatIf, k));
        }
  json_builder_end_object (builder);
}

void
tf_findings_build_json (const TfFindings *findings, const TfStudy *study, JsonBuilder *builder)
{
  json_builder_begin_object (builder);
  build_study (builder, study);
  build_sample (builder, findings);
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
  build_cycle_choice (builder, findings->what_if);
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
