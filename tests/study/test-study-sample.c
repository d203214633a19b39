/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-study.h"

#include <string.h>

#include "tf-check.h"
#include "tf-constants.h"
#include "tf-json.h"

/* A region of the north at @lat that crosses the disk in eleven marks from CMD -66; its flux is
 * greatest on day @peak. */
static void
add_passage (TfSample *sample, guint32 id, double year, double lat, int leading, double peak,
             double flux)
{
  for (int day = 0; day <= 10; day++)
    {
      TfMeasure m = test_study_measure (lat, leading);
      TfSampleRow row;
      tf_study_measure_row (&m, &row);
      g_clear_pointer (&m.cautions, g_ptr_array_unref);
      row.time = tf_time_add (tf_time_from_year (year), day * TF_DAY_S);
      row.region = row.passage = id;
      row.row = tf_sample_get_n (sample);
      row.cmd_deg = -66.0 + 13.2 * day;
      row.mu = cos (row.cmd_deg * TF_DEG);
      row.flux_mx = flux * (1.0 - 0.01 * (day - peak) * (day - peak));
      row.axis_tilt_deg = 0.4 * lat + 0.5 * (day - 5);
      row.born = day == 0 ? 0 : -1;
      row.origin = TF_ORIGIN_DRAWN;
      tf_sample_add (sample, &row);
    }
}

static TfSample *
two_cycles (void)
{
  TfSample *sample = tf_sample_new ();
  for (guint k = 0; k < 30; k++)
    {
      gboolean odd = k % 2 == 0;
      double lat = (k % 4 < 2 ? 1.0 : -1.0) * (10.0 + 0.5 * k);
      int keeps = (lat > 0 ? 1 : -1) * (odd ? 1 : -1);
      add_passage (sample, k, odd ? 2003.5 : 2013.5, lat, k % 10 == 3 ? -keeps : keeps, k % 11,
                   1e22);
    }
  return sample;
}

static const TfWhatIf *
what_if (const TfFindings *findings, const char *name)
{
  for (guint k = 0; k < findings->what_if->len; k++)
    if (strcmp (g_array_index (findings->what_if, TfWhatIf, k).name, name) == 0)
      return &g_array_index (findings->what_if, TfWhatIf, k);
  return NULL;
}

static TfStudy *
quick_study (void)
{
  TfStudy *study = tf_study_new_default ();
  study->hale.draws = study->joy.draws = study->drift.draws = 50;
  return study;
}

static void
test_one_pick_a_passage (void)
{
  g_autoptr (TfSample) sample = two_cycles ();
  g_autoptr (TfStudy) study = quick_study ();
  g_autoptr (TfFindings) found = tf_study_run_sample (study, sample);
  g_assert_cmpuint (tf_sample_get_n (found->sample), ==, 30);
  g_assert_cmpuint (tf_sample_get_n (found->every), ==, 30 * 9); /* two of eleven beyond 60 deg */
  g_assert_cmpuint (found->n_marks, ==, 30 * 9);
  g_assert_cmpuint (GPOINTER_TO_UINT (g_hash_table_lookup (found->left_out, "cmd-beyond")), ==, 60);
  const TfHaleRow *all = &g_array_index (found->hale, TfHaleRow, found->hale->len - 1);
  g_assert_cmpuint (all->n, ==, 30);
  g_assert_cmpuint (all->breaks, ==, 3);
  g_assert_null (tf_notes_find (found->cautions, "every-mark-is-its-own-passage"));
  const TfNote *peaks = tf_notes_find (found->cautions, "peak-not-bracketed");
  /* among the marks within 60 deg the peaks of days 0, 1, 9 and 10 lie at an end */
  guint at_end = 0;
  for (guint k = 0; k < 30; k++)
    at_end += k % 11 <= 1 || k % 11 >= 9;
  g_assert_cmpuint (found->sampling.not_bracketed, ==, at_end);
  tf_check_near ("said", tf_note_get_number (peaks, 0), at_end, 0);
  g_assert_cmpuint (what_if (found, "peak-bracketed")->n, ==, 30 - at_end);
  g_assert_cmpuint (what_if (found, "sampling-every-mark")->n, ==, 30 * 9);
  g_assert_cmpuint (what_if (found, "sampling-every-mark")->regions, ==, 30);
  g_assert_null (what_if (found, "sampling-greatest-flux"));
}

/* Mark conditions act before the pick, region conditions on it. */
static void
test_order_of_conditions (void)
{
  g_autoptr (TfSample) sample = tf_sample_new ();
  add_passage (sample, 1, 2013.5, 15.0, -1, 8.0, 1e22);
  g_autoptr (TfStudy) study = quick_study ();
  g_autoptr (TfFindings) wide = tf_study_run_sample (study, sample);
  tf_check_near ("the peak's own mark", tf_sample_get (wide->sample, 0)->flux_mx, 1e22, 1e10);
  study->sieve.cmd_max_deg = 20.0;
  g_autoptr (TfFindings) narrow = tf_study_run_sample (study, sample);
  tf_check_near ("the greatest of what passed", tf_sample_get (narrow->sample, 0)->flux_mx,
                 1e22 * (1.0 - 0.04), 1e10);
  study->sieve.flux_min_mx = 0.97e22;
  g_autoptr (TfFindings) none = tf_study_run_sample (study, sample);
  g_assert_cmpuint (tf_sample_get_n (none->sample), ==, 0);
  g_assert_cmpuint (GPOINTER_TO_UINT (g_hash_table_lookup (none->left_out, "flux-below")), ==, 1);
  g_assert_cmpuint (none->n_marks, ==, 0);
}

static void
test_every_rule (void)
{
  g_autoptr (TfSample) sample = two_cycles ();
  g_autoptr (TfStudy) study = quick_study ();
  study->sampling.rule = TF_SAMPLING_MEAN;
  g_autoptr (TfFindings) mean = tf_study_run_sample (study, sample);
  for (guint k = 0; k < tf_sample_get_n (mean->sample); k++)
    {
      const TfSampleRow *row = tf_sample_get (mean->sample, k);
      tf_check_near ("mean tilt", row->axis_tilt_deg, 0.4 * row->lat_deg, 1e-9);
    }
  study->sampling.rule = TF_SAMPLING_EVERY;
  g_autoptr (TfFindings) every = tf_study_run_sample (study, sample);
  g_assert_nonnull (tf_notes_find (every->cautions, "every-mark-is-a-pick"));
  const TfHaleRow *all = &g_array_index (every->hale, TfHaleRow, every->hale->len - 1);
  g_assert_cmpuint (all->n, ==, 270);
  g_assert_cmpuint (all->regions, ==, 30);
  tf_check_between ("clusters are wider than rows", all->cluster.high - all->cluster.low,
                    1.5 * (all->wilson.high - all->wilson.low), 1.0);
  /* Fisher's test counts regions whatever the rule */
  const TfComparison *sides = &g_array_index (every->comparisons->rows, TfComparison, 0);
  g_assert_cmpuint (sides->regions[0] + sides->regions[1], ==, 30);
}

/* What a person's provisional minimum decides is marked in every result. */
static void
test_provisional_minimum (void)
{
  g_autoptr (TfSample) sample = tf_sample_new ();
  add_passage (sample, 1, 2013.5, 15.0, -1, 5.0, 1e22);
  add_passage (sample, 2, 2029.5, 27.0, -1, 5.0, 1e22);
  add_passage (sample, 3, 2029.5, 28.0, -1, 5.0, 1e22);
  add_passage (sample, 4, 2029.5, 29.0, -1, 5.0, 1e22);
  g_autoptr (TfStudy) study = quick_study ();
  g_autoptr (TfFindings) without = tf_study_run_sample (study, sample);
  g_assert_cmpuint (what_if (without, "as-chosen")->n, ==, 1);
  study->divide.provisional_year = 2030.0;
  g_autoptr (TfFindings) with = tf_study_run_sample (study, sample);
  const TfHaleRow *all = &g_array_index (with->hale, TfHaleRow, with->hale->len - 1);
  const TfJoyFit *fit = &g_array_index (with->joy, TfJoyFit, with->joy->len - 1);
  g_assert_cmpuint (all->n, ==, 4);
  g_assert_cmpuint (all->leaning, ==, 3);
  g_assert_cmpuint (fit->leaning, ==, 3);
  g_assert_cmpuint (what_if (with, "as-chosen")->leaning, ==, 3);
  g_assert_cmpuint (what_if (with, "provisional-minimum-left-out")->n, ==, 1);
  g_autofree char *text
      = tf_note_dup_text (tf_notes_find (with->cautions, "minimum-provisional"), TRUE);
  g_assert_nonnull (strstr (text, "2030.0"));
  g_assert_nonnull (strstr (text, "3 of the picks"));
}

/* The three ways of telling a cycle stand together whichever is chosen. */
static void
test_cycle_choice (void)
{
  g_autoptr (TfSample) sample = two_cycles ();
  for (guint k = 0; k < 5; k++)
    add_passage (sample, 100 + k, 2008.5, 24.0 + k, -1, 5.0, 1e22); /* new cycle, old date */
  add_passage (sample, 200, 2008.5, 16.0, 1, 5.0, 1e22);            /* beside the divide */
  g_autoptr (TfStudy) study = quick_study ();
  for (int by_date = 0; by_date < 2; by_date++)
    {
      study->divide.by_date_only = by_date;
      g_autoptr (TfFindings) found = tf_study_run_sample (study, sample);
      g_assert_cmpuint (found->cycle_choice[0].n, ==, 36);
      g_assert_cmpuint (found->cycle_choice[0].breaks, ==, 3 + 5);
      g_assert_cmpuint (found->cycle_choice[1].n, ==, 36);
      g_assert_cmpuint (found->cycle_choice[1].breaks, ==, 3);
      g_assert_cmpuint (found->cycle_choice[2].n, ==, 35);
    }
}

static void
test_document (void)
{
  static const char *const keys[]
      = { "comparisons",        "share_against", "published_shares", "tilt_by_latitude",
          "tilt_by_separation", "drift",         "axial_dipole",     "since_emergence" };
  g_autoptr (TfSample) sample = two_cycles ();
  g_autoptr (TfStudy) study = quick_study ();
  g_autoptr (TfFindings) found = tf_study_run_sample (study, sample);
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  tf_findings_build_json (found, study, builder);
  g_autofree char *text = tf_json_dup_text (builder, TRUE);
  g_assert_null (strstr (text, "nan"));
  g_assert_null (strstr (text, "inf"));
  g_autoptr (JsonNode) node = json_from_string (text, NULL);
  JsonObject *laws = json_node_get_object (node);
  for (guint k = 0; k < G_N_ELEMENTS (keys); k++)
    g_assert_true (json_object_has_member (laws, keys[k]));
  JsonObject *part = tf_json_member_object (laws, "sample");
  g_assert_cmpstr (tf_json_member_string (part, "rule"), ==, "greatest-flux");
  g_assert_cmpint (tf_json_member_int (part, "picks", -1), ==, 30);
  JsonObject *comparisons = tf_json_member_object (laws, "comparisons");
  g_assert_cmpint (tf_json_member_int (comparisons, "n_shares", -1), ==,
                   found->comparisons->n_shares);
  JsonArray *dipoles = tf_json_member_array (laws, "axial_dipole");
  g_assert_cmpuint (json_array_get_length (dipoles), ==, 24);
}

/* Names stand in files: this list may grow, and nothing in it changes. */
static void
test_names (void)
{
  static const char *const kept[] = { "as-chosen",
                                      "cycle-by-date-only",
                                      "cycle-by-latitude-alone",
                                      "minima-half-a-year-earlier",
                                      "minima-half-a-year-later",
                                      "equator-zone-0",
                                      "equator-zone-3",
                                      "equator-zone-5",
                                      "equator-zone-8",
                                      "floor-a-fifth-lower",
                                      "floor-a-fifth-higher",
                                      "floor-of-each-mark",
                                      "least-squares",
                                      "flux-weighted",
                                      "robust",
                                      "bin-medians",
                                      "steep-left-out",
                                      "steep-taken-in",
                                      "separation-above-2.5",
                                      "sampling-greatest-flux",
                                      "sampling-central-meridian",
                                      "sampling-mean",
                                      "sampling-every-mark",
                                      "peak-bracketed",
                                      "cmd-within-30",
                                      "cmd-within-45",
                                      "limb-taken-in",
                                      "hints-left-out",
                                      "hints-taken-in",
                                      "ephemeral-alone" };
  g_autofree const char **names = tf_what_if_names ();
  for (guint k = 0; k < G_N_ELEMENTS (kept); k++)
    g_assert_true (g_strv_contains (names, kept[k]));
}

/* Passages whose leader is another on some days: the pick stands while four of five marks say what it
 * says; under "every mark" each speaks for itself. */
static void
test_held (void)
{
  g_autoptr (TfSample) steady = two_cycles ();
  g_autoptr (TfSample) sample = tf_sample_new ();
  for (guint k = 0; k < tf_sample_get_n (steady); k++)
    {
      TfSampleRow row = *tf_sample_get (steady, k);
      guint day = k % 11;
      if ((row.passage == 0 && day >= 6) || (row.passage == 1 && day == 8))
        row.leading_polarity = -row.leading_polarity;
      tf_sample_add (sample, &row);
    }
  g_autoptr (TfStudy) study = quick_study ();
  g_autoptr (TfFindings) found = tf_study_run_sample (study, sample);
  g_assert_cmpuint (GPOINTER_TO_UINT (g_hash_table_lookup (found->cannot_say, "hale-changes")), ==, 1);
  for (guint k = 0; k < tf_sample_get_n (found->sample); k++)
    {
      guint32 passage = tf_sample_get (found->sample, k)->passage;
      g_assert_cmpint (found->verdicts[k].kind == TF_VERDICT_CANNOT_SAY, ==, passage == 0);
      g_assert_cmpuint (found->held[k].of, ==, 9);
      g_assert_cmpuint (found->held[k].held, ==, passage == 0 ? 5 : passage == 1 ? 8 : 9);
    }
  const TfHaleRow *all = &g_array_index (found->hale, TfHaleRow, found->hale->len - 1);
  g_assert_cmpuint (all->n, ==, 29);
  g_assert_cmpuint (what_if (found, "as-chosen")->n, ==, 29);
  study->sampling.rule = TF_SAMPLING_EVERY;
  g_autoptr (TfFindings) every = tf_study_run_sample (study, sample);
  g_assert_null (every->held);
  g_assert_null (g_hash_table_lookup (every->cannot_say, "hale-changes"));
}

void
test_study_add_sample (void)
{
  g_test_add_func ("/study/sample/a-passage-holds-to-its-verdict", test_held);
  g_test_add_func ("/study/sampling/one-pick-a-passage", test_one_pick_a_passage);
  g_test_add_func ("/study/sampling/mark-conditions-rule-region-conditions",
                   test_order_of_conditions);
  g_test_add_func ("/study/sampling/means-and-every-mark", test_every_rule);
  g_test_add_func ("/study/cycle/a-provisional-minimum-is-marked", test_provisional_minimum);
  g_test_add_func ("/study/cycle/three-ways-stand-together", test_cycle_choice);
  g_test_add_func ("/study/json/comparisons-bins-drift-and-dipole", test_document);
  g_test_add_func ("/study/what-if/names-stay", test_names);
}
