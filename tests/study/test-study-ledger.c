/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-study.h"

#include <string.h>

#include "tf-check.h"
#include "tf-json.h"
#include "tf-ledger-divides.h"

static TfFindings *
run (const TestLedger *t, const TfStudy *study)
{
  g_autoptr (GError) error = NULL;
  TfFindings *findings = tf_study_run (study, t->ledger, &error);
  g_assert_no_error (error);
  g_assert_nonnull (findings);
  return findings;
}

static guint
count (GHashTable *counts, const char *key)
{
  return GPOINTER_TO_UINT (g_hash_table_lookup (counts, key));
}

static const TfHaleRow *
hale_row (const TfFindings *findings, int cycle, int hemisphere)
{
  for (guint k = 0; k < findings->hale->len; k++)
    {
      const TfHaleRow *row = &g_array_index (findings->hale, TfHaleRow, k);
      if (row->cycle == cycle && row->hemisphere == hemisphere)
        return row;
    }
  g_assert_not_reached ();
}

static const TfWhatIf *
what_if (const TfFindings *findings, const char *name)
{
  for (guint k = 0; k < findings->what_if->len; k++)
    if (strcmp (g_array_index (findings->what_if, TfWhatIf, k).name, name) == 0)
      return &g_array_index (findings->what_if, TfWhatIf, k);
  return NULL;
}

static void
test_empty_ledger (void)
{
  g_auto (TestLedger) t = { 0 };
  test_study_ledger_open (&t);
  g_autoptr (TfStudy) study = tf_study_new_default ();
  g_autoptr (GError) error = NULL;
  g_assert_null (tf_study_run (study, t.ledger, &error));
  g_assert_error (error, TF_STUDY_ERROR, TF_STUDY_ERROR_EMPTY);
  g_assert_nonnull (strstr (error->message, "--with-hints"));
}

/* Seven marks: two keep in the north, one of them twice on one region; one breaks; one is too far
 * from the centre, one ephemeral, one near the equator. */
static void
fill (TestLedger *t)
{
  gint64 frame = test_study_frame (t, "2013-06-01T00:00:00Z", "TEST-A", 20);
  gint64 next = test_study_frame (t, "2013-06-02T00:00:00Z", "TEST-A", 22);
  gint64 first = test_study_mark (t, frame, 0, test_study_measure (15, -1));
  g_autoptr (GError) error = NULL;
  g_autoptr (TfRow) row = tf_ledger_row (t->ledger, first, FALSE, &error);
  g_assert_no_error (error);
  TfMeasure again = test_study_measure (15.1, -1);
  again.time = tf_time_add (again.time, 86400);
  test_study_mark (t, next, row->region_key, again);
  test_study_mark (t, frame, 0, test_study_measure (-20, 1));
  TfMeasure breaks = test_study_measure (12, 1);
  breaks.axis_tilt_deg = -30;
  test_study_mark (t, frame, 0, breaks);
  TfMeasure far = test_study_measure (18, -1);
  far.cmd_deg = 60.1;
  test_study_mark (t, frame, 0, far);
  TfMeasure small = test_study_measure (19, 1);
  small.ephemeral = TRUE;
  test_study_mark (t, frame, 0, small);
  test_study_mark (t, frame, 0, test_study_measure (2, -1));
}

static void
test_default_study (void)
{
  g_auto (TestLedger) t = { 0 };
  test_study_ledger_open (&t);
  fill (&t);
  g_autoptr (TfStudy) study = tf_study_new_default ();
  g_autoptr (TfFindings) found = run (&t, study);
  g_assert_cmpuint (tf_sample_get_n (found->sample), ==, 5);
  g_assert_cmpuint (found->n_marks, ==, 5);
  g_assert_cmpuint (found->n_hints, ==, 0);
  g_assert_cmpuint (tf_sample_count_regions (found->sample), ==, 4);
  g_assert_cmpuint (tf_sample_count_passages (found->sample), ==, 5);
  g_assert_cmpuint (count (found->left_out, "cmd-beyond"), ==, 1);
  g_assert_cmpuint (count (found->left_out, "ephemeral"), ==, 1);
  g_assert_cmpuint (g_hash_table_size (found->left_out), ==, 2);
  g_assert_cmpuint (count (found->cannot_say, "hale-equator"), ==, 1);
  const TfHaleRow *all = hale_row (found, 0, 0);
  g_assert_cmpuint (all->n, ==, 4);
  g_assert_cmpuint (all->regions, ==, 3);
  g_assert_cmpuint (all->breaks, ==, 1);
  g_assert_cmpuint (all->cannot_say, ==, 1);
  g_assert_cmpuint (hale_row (found, 24, 1)->n, ==, 3);
  g_assert_cmpuint (hale_row (found, 24, -1)->keeps, ==, 1);
  g_assert_nonnull (tf_notes_find (found->cautions, "every-mark-is-its-own-passage"));
  g_assert_null (tf_notes_find (found->cautions, "instruments-unscaled-pooled"));
  for (guint k = 0; k < 5; k++)
    g_assert_cmpint (found->marks[k], >, 0);
}

/* A divide that somebody moved in the ledger speaks in the study, and is told. */
static void
test_divide_of_the_ledger (void)
{
  g_auto (TestLedger) t = { 0 };
  test_study_ledger_open (&t);
  gint64 frame = test_study_frame (&t, "2008-06-01T00:00:00Z", "TEST-A", 20);
  TfMeasure young = test_study_measure (30, -1); /* above the divide: cycle 24 */
  young.time = tf_time_read ("2008-06-01T00:00:00Z");
  test_study_mark (&t, frame, 0, young);
  g_autoptr (TfStudy) study = tf_study_new_default ();
  g_assert_true (tf_study_read_divides (study, t.ledger, NULL));
  g_assert_null (study->divides);
  g_autoptr (TfFindings) before = run (&t, study);
  g_assert_cmpuint (hale_row (before, 24, 1)->keeps, ==, 1);
  TfTime times[] = { tf_time_read ("2007-01-01"), tf_time_read ("2010-01-01") };
  double lats[] = { 40, 38 };
  const TfMovedDivide divide = { 24, 1, 2, times, lats, TRUE };
  gint64 person = tf_ledger_person (t.ledger, "north", NULL);
  g_assert_true (tf_ledger_set_divide (t.ledger, "default", &divide, person, NULL));
  g_assert_true (tf_study_read_divides (study, t.ledger, NULL));
  g_autoptr (TfFindings) after = run (&t, study);
  g_assert_cmpuint (hale_row (after, 23, 1)->breaks, ==, 1);
  g_assert_nonnull (tf_notes_find (after->cautions, "divides-moved"));
  g_assert_nonnull (tf_notes_find (after->cautions, "divides-shown"));
  g_autofree char *words = tf_findings_dup_words (after, study);
  g_assert_nonnull (strstr (words, "24 N"));
}

/* The tilt that breaks the law is not in Joy's sample, and is in the plain mean. */
static void
test_joy_leaves_breaks_out (void)
{
  g_auto (TestLedger) t = { 0 };
  test_study_ledger_open (&t);
  fill (&t);
  g_autoptr (TfStudy) study = tf_study_new_default ();
  g_autoptr (TfFindings) found = run (&t, study);
  const TfJoyFit *all = &g_array_index (found->joy, TfJoyFit, found->joy->len - 1);
  g_assert_cmpint (all->cycle, ==, 0);
  g_assert_cmpuint (all->n, ==, 4);
  tf_check_near ("mean tilt", found->mean_tilt_deg, (4 * 8.5 - 30) / 5, 1e-9);
  tf_check_near ("median tilt", found->median_tilt_deg, 8.5, 1e-9);
}

static void
test_conditions (void)
{
  g_auto (TestLedger) t = { 0 };
  test_study_ledger_open (&t);
  gint64 frame = test_study_frame (&t, "2013-06-01T00:00:00Z", "TEST-A", 20);
  TfMeasure dim = test_study_measure (15, -1), narrow = test_study_measure (16, -1),
            map = test_study_measure (17, -1);
  dim.flux_unsigned_mx = 4e21;
  narrow.separation_deg = 2;
  map.mu = map.cmd_deg = NAN;
  test_study_mark (&t, frame, 0, dim);
  test_study_mark (&t, frame, 0, narrow);
  test_study_mark (&t, frame, 0, map);
  g_autoptr (TfStudy) study = tf_study_new_default ();
  study->sieve.mu_min = 0.5;
  study->sieve.flux_min_mx = 5e21;
  study->sieve.separation_min_deg = 2.5;
  g_autoptr (TfFindings) found = run (&t, study);
  g_assert_cmpuint (tf_sample_get_n (found->sample), ==, 1);
  g_assert_cmpuint (count (found->left_out, "flux-below"), ==, 1);
  g_assert_cmpuint (count (found->left_out, "separation-below"), ==, 1);
  g_assert_cmpuint (count (found->passed_without, "mu-below"), ==, 1);
  g_assert_cmpuint (count (found->passed_without, "cmd-beyond"), ==, 1);
  g_assert_cmpuint (g_hash_table_size (found->passed_without), ==, 2);
  g_autofree char *words = tf_findings_dup_words (found, study);
  g_assert_nonnull (strstr (words, "too few tilts"));
  g_assert_nonnull (strstr (words, "Left out by unsigned flux (1); separation of the poles (1).\n"));
  g_assert_nonnull (strstr (words, "lacks what a condition asks about: distance from the central meridian (1); μ (1).\n"));
}

static void
test_hints_on_demand (void)
{
  g_auto (TestLedger) t = { 0 };
  test_study_ledger_open (&t);
  fill (&t);
  gint64 frame = test_study_frame (&t, "2013-07-01T00:00:00Z", "TEST-A", 20);
  gint64 other = test_study_frame (&t, "2013-07-02T00:00:00Z", "TEST-A", 20);
  test_study_hint (&t, frame, FALSE, test_study_measure (22, -1));
  test_study_hint (&t, other, TRUE, test_study_measure (25, 0));
  g_autoptr (TfStudy) study = tf_study_new_default ();
  g_autoptr (TfFindings) marks = run (&t, study);
  g_assert_cmpuint (marks->n_hints, ==, 0);
  g_assert_null (what_if (marks, "hints-left-out"));
  study->sieve.with_hints = TRUE;
  g_autoptr (TfFindings) both = run (&t, study);
  g_assert_cmpuint (both->n_marks, ==, 5);
  g_assert_cmpuint (both->n_hints, ==, 1);
  g_assert_cmpuint (count (both->left_out, "unipolar-hint"), ==, 1);
  g_assert_cmpuint (tf_sample_count_regions (both->sample), ==, 5);
  g_assert_nonnull (tf_notes_find (both->cautions, "hints-counted"));
  g_assert_cmpuint (what_if (both, "hints-left-out")->n, ==, hale_row (marks, 0, 0)->n);
  g_assert_cmpuint (what_if (both, "as-chosen")->n, ==, hale_row (both, 0, 0)->n);
}

/* The greatest, over instruments, of the median of 3 sigma / 0.5. */
static void
test_even_floor (void)
{
  g_auto (TestLedger) t = { 0 };
  test_study_ledger_open (&t);
  gint64 frame = test_study_frame (&t, "2013-06-01T00:00:00Z", "TEST-A", 10);
  test_study_frame (&t, "2013-06-02T00:00:00Z", "TEST-A", 90);
  test_study_frame (&t, "2013-06-03T00:00:00Z", "TEST-A", 20);
  gint64 second = test_study_frame (&t, "2013-06-01T01:00:00Z", "TEST-B", 5);
  TfMeasure even = test_study_measure (15, -1);
  even.floor_kind = TF_FLOOR_EVEN;
  even.floor_gauss = 120;
  test_study_mark (&t, frame, 0, even);
  test_study_mark (&t, second, 0, test_study_measure (16, -1));
  g_autoptr (TfStudy) study = tf_study_new_default ();
  g_autoptr (TfFindings) found = run (&t, study);
  tf_check_near ("even floor", found->even_floor_gauss, 120, 1e-9);
  g_assert_cmpuint (found->n_other_floor, ==, 1);
  const TfNote *floor = tf_notes_find (found->cautions, "rows-with-other-floor");
  tf_check_near ("rows in the caution", tf_note_get_number (floor, 0), 1, 0);
  g_autofree char *pooled
      = tf_note_dup_text (tf_notes_find (found->cautions, "instruments-unscaled-pooled"), TRUE);
  g_assert_nonnull (strstr (pooled, "TEST-A"));
  g_assert_nonnull (strstr (pooled, "TEST-B"));
}

/* A divide that a person moved rules the verdicts, stays in the what-ifs, and is said. */
static void
test_moved_divide (void)
{
  g_auto (TestLedger) t = { 0 };
  test_study_ledger_open (&t);
  gint64 frame = test_study_frame (&t, "2008-12-16T12:00:00Z", "TEST-A", 20);
  TfMeasure m = test_study_measure (17, -1);
  m.time = tf_cycle_minimum (24);
  test_study_mark (&t, frame, 0, m);
  g_autoptr (TfStudy) study = tf_study_new_default ();
  g_autoptr (TfFindings) computed = run (&t, study);
  g_assert_cmpuint (count (computed->cannot_say, "hale-cycle-unsure"), ==, 1);
  g_assert_null (tf_notes_find (computed->cautions, "divides-moved"));
  g_autoptr (TfDivides) none = tf_divides_new (&study->divide);
  const double lat = 24;
  study->divides = tf_divides_with (none, 24, 1, &m.time, &lat, 1);
  g_autoptr (TfFindings) moved = run (&t, study);
  g_assert_cmpuint (hale_row (moved, 23, 1)->breaks, ==, 1);
  g_assert_cmpuint (what_if (moved, "cycle-by-latitude-alone")->breaks, ==, 1);
  g_assert_cmpuint (what_if (moved, "cycle-by-date-only")->breaks, ==, 0);
  g_autofree char *words = tf_findings_dup_words (moved, study);
  g_assert_nonnull (strstr (words, "24 N"));
}

/* Half a year decides about a region at a minimum's side when the date rules. */
static void
test_what_ifs (void)
{
  g_auto (TestLedger) t = { 0 };
  test_study_ledger_open (&t);
  fill (&t);
  gint64 frame = test_study_frame (&t, "2009-03-01T00:00:00Z", "TEST-A", 20);
  TfMeasure m = test_study_measure (30, -1);
  m.time = tf_time_read ("2009-03-01T00:00:00Z");
  test_study_mark (&t, frame, 0, m);
  g_autoptr (TfStudy) study = tf_study_new_default ();
  study->divide.by_date_only = TRUE;
  g_autoptr (TfFindings) found = run (&t, study);
  g_assert_cmpuint (what_if (found, "as-chosen")->breaks, ==, 1);
  g_assert_cmpuint (what_if (found, "minima-half-a-year-later")->breaks, ==, 2);
  g_assert_cmpuint (what_if (found, "minima-half-a-year-earlier")->breaks, ==, 1);
  g_assert_cmpuint (what_if (found, "equator-zone-0")->n, ==, 6);
  g_assert_null (what_if (found, "equator-zone-3"));
  g_assert_null (what_if (found, "robust"));
  g_assert_nonnull (what_if (found, "least-squares"));
  g_assert_cmpuint (what_if (found, "cmd-within-45")->n, ==, 5);
}

static void
test_json (void)
{
  static const char *const keys[]
      = { "study",           "sample",       "hale",    "joy",     "mean_tilt_deg",
          "median_tilt_deg", "cycle_choice", "what_if", "cautions" };
  g_auto (TestLedger) t = { 0 };
  test_study_ledger_open (&t);
  fill (&t);
  g_autoptr (TfStudy) study = tf_study_new_default ();
  g_autoptr (TfFindings) found = run (&t, study);
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  tf_findings_build_json (found, study, builder);
  g_autofree char *text = tf_json_dup_text (builder, TRUE);
  g_assert_null (strstr (text, "nan"));
  g_autoptr (JsonNode) node = json_from_string (text, NULL);
  JsonObject *laws = json_node_get_object (node);
  for (guint k = 0; k < G_N_ELEMENTS (keys); k++)
    g_assert_true (json_object_has_member (laws, keys[k]));
  JsonObject *sample = tf_json_member_object (laws, "sample");
  g_assert_cmpint (tf_json_member_int (sample, "marks", -1), ==, 5);
  g_assert_cmpint (tf_json_member_int (sample, "regions", -1), ==, 4);
  g_assert_cmpint (tf_json_member_int (tf_json_member_object (sample, "left_out"), "ephemeral", -1),
                   ==, 1);
  JsonArray *hale = tf_json_member_array (laws, "hale");
  JsonObject *last = json_array_get_object_element (hale, json_array_get_length (hale) - 1);
  g_assert_true (json_object_get_null_member (last, "cycle"));
  g_assert_cmpstr (tf_json_member_string (last, "hemisphere"), ==, "both");
  g_assert_cmpint (tf_json_member_int (last, "breaks", -1), ==, 1);
  tf_check_near ("share", tf_json_member_number (last, "share_breaks"), 0.25, 1e-12);
  JsonArray *bounds = tf_json_member_array (last, "bounds");
  tf_check_near ("at least", tf_json_element_number (bounds, 0), 0.2, 1e-12);
  tf_check_near ("at most", tf_json_element_number (bounds, 1), 0.4, 1e-12);
  JsonObject *choice = tf_json_member_object (laws, "cycle_choice");
  g_assert_true (json_object_has_member (choice, "date_only")
                 && json_object_has_member (choice, "latitude")
                 && json_object_has_member (choice, "unsure_left_out"));
  JsonArray *joy = tf_json_member_array (laws, "joy");
  JsonObject *fit = json_array_get_object_element (joy, json_array_get_length (joy) - 1);
  g_assert_cmpstr (tf_json_member_string (fit, "estimator"), ==, "robust");
  g_assert_true (json_object_get_null_member (fit, "intercept"));
}

static void
test_words (void)
{
  g_auto (TestLedger) t = { 0 };
  test_study_ledger_open (&t);
  fill (&t);
  g_autoptr (TfStudy) study = tf_study_new_default ();
  g_autoptr (TfFindings) found = run (&t, study);
  g_autofree char *words = tf_findings_dup_words (found, study);
  static const char *const parts[] = { "5 picks, the mark of greatest flux of each passage, from 5 marks and 0 hints of 4",
                                       "Of 4 picks (3 regions)",
                                       "1 (25.0 %",
                                       "at least 20.0, at most 40.0 %",
                                       "linear, robust, all separations, 4 picks",
                                       "even floor 126.0 G" };
  for (guint k = 0; k < G_N_ELEMENTS (parts); k++)
    if (strstr (words, parts[k]) == NULL)
      {
        g_test_message ("%s", words);
        g_test_fail_printf ("“%s” is not among the words", parts[k]);
      }
  study->joy.separation_min_deg = 2.5;
  g_autoptr (TfFindings) wide = run (&t, study);
  g_autofree char *cut = tf_findings_dup_words (wide, study);
  g_assert_nonnull (strstr (cut, "separation from 2.5°"));
}

/* The same ledger twice: the same to the last digit. */
static void
test_repeats (void)
{
  g_auto (TestLedger) t = { 0 };
  test_study_ledger_open (&t);
  fill (&t);
  g_autoptr (TfStudy) study = tf_study_new_default ();
  char *texts[2];
  for (int k = 0; k < 2; k++)
    {
      g_autoptr (TfFindings) found = run (&t, study);
      g_autoptr (JsonBuilder) builder = json_builder_new ();
      tf_findings_build_json (found, study, builder);
      texts[k] = tf_json_dup_text (builder, FALSE);
    }
  g_assert_cmpstr (texts[0], ==, texts[1]);
  g_free (texts[0]);
  g_free (texts[1]);
}

void
test_study_add_ledger (void)
{
  g_test_add_func ("/study/run/an-empty-ledger-is-said", test_empty_ledger);
  g_test_add_func ("/study/run/the-default-study-counts-what-it-takes-and-leaves",
                   test_default_study);
  g_test_add_func ("/study/run/joys-sample-has-no-region-that-breaks", test_joy_leaves_breaks_out);
  g_test_add_func ("/study/sieve/each-condition-and-rows-that-lack-it", test_conditions);
  g_test_add_func ("/study/sieve/hints-come-on-demand-and-apart", test_hints_on_demand);
  g_test_add_func ("/study/floor/the-greatest-median-over-instruments", test_even_floor);
  g_test_add_func ("/study/divide/a-moved-one-rules-and-is-said", test_moved_divide);
  g_test_add_func ("/study/what-if/other-choices-each-alone", test_what_ifs);
  g_test_add_func ("/study/json/the-document-has-its-keys-and-numbers", test_json);
  g_test_add_func ("/study/words/the-numbers-as-in-a-paper", test_words);
  g_test_add_func ("/study/ledger/a-moved-divide-speaks-and-is-told", test_divide_of_the_ledger);
  g_test_add_func ("/study/run/the-same-ledger-gives-the-same-digits", test_repeats);
}
