/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* study.json: read back as it was written; what is wrong is told by member; conditions and what
 * differs between two states. */

#include <string.h>

#include "tf-check.h"
#include "tf-sieve.h"
#include "tf-study-again.h"
#include "tf-study-compare.h"
#include "test-study.h"

static TfStudy *
read_sound (const char *text)
{
  g_autoptr (GError) error = NULL;
  TfStudy *study = tf_study_read_text (text, "made.json", &error);
  g_assert_no_error (error);
  return study;
}

static void
assert_same_again (const TfStudy *study)
{
  g_autofree char *text = tf_study_dup_text (study);
  g_autoptr (TfStudy) again = read_sound (text);
  g_autofree char *text_again = tf_study_dup_text (again);
  g_assert_cmpstr (text, ==, text_again);
}

/* Every option away from its default, moved divides, conditions of all kinds. */
static void
test_round_trip (void)
{
  g_autoptr (TfStudy) study = tf_study_new_default ();
  const TfTime times[] = { tf_time_from_year (2008.25), tf_time_from_year (2009.5) };
  const double lats[] = { 15.5, 12.25 };
  assert_same_again (study);
  study->sieve = (TfSieveParams){ TRUE, 45, 0.4, 1e21, 2.5, TF_EPHEMERAL_ALONE, TRUE };
  study->divide.band_deg = 3;
  study->joy.estimator = TF_JOY_LEAST_SQUARES;
  study->version = 7;
  study->even_floor_gauss = 49;
  g_autoptr (TfDivides) none = tf_divides_new (&study->divide);
  study->divides = tf_divides_with (none, 24, -1, times, lats, 2);
  g_ptr_array_add (study->mark_conditions, tf_condition_new ("instrument", TF_IS_EQUALS, NAN, "x"));
  g_ptr_array_add (study->mark_conditions,
                   tf_condition_new ("time", TF_IS_AT_LEAST, NAN, "2010-01-01T00:00:00Z"));
  g_ptr_array_add (study->region_conditions, tf_condition_new ("lat_deg", TF_IS_BEYOND, 10, NULL));
  g_ptr_array_add (study->region_conditions, tf_condition_new ("cycle", TF_IS_NOT, 23, NULL));
  assert_same_again (study);
  g_autofree char *text = tf_study_dup_text (study);
  g_autoptr (TfStudy) again = read_sound (text);
  tf_check_near ("cmd", again->sieve.cmd_max_deg, 45, 0);
  g_assert_cmpint (again->sieve.ephemeral, ==, TF_EPHEMERAL_ALONE);
  g_assert_true (again->sieve.with_hints && again->sieve.with_models);
  g_assert_cmpuint (again->mark_conditions->len, ==, 2);
  g_assert_cmpuint (again->region_conditions->len, ==, 2);
  tf_check_near ("divide", tf_divides_latitude (again->divides, 24, -1, times[1]), 12.25, 1e-9);
  g_autoptr (TfStudy) copy = tf_study_copy (study); /* shares nothing: both are freed */
  g_autofree char *copied = tf_study_dup_text (copy);
  g_assert_cmpstr (copied, ==, text);
  g_ptr_array_set_size (copy->mark_conditions, 0);
  g_assert_cmpuint (study->mark_conditions->len, ==, 2);
}

static const struct
{
  const char *text, *words;
} not_studies[] = {
  { "", "made.json" },
  { "[1]", "object" },
  { "{\"name\": \"a\", \"colour\": 1}", "colour" },
  { "{}", "name" },
  { "{\"name\": \"a\", \"mark_conditions\": 5}", "mark_conditions" },
  { "{\"name\": \"a\", \"mark_conditions\": [{\"column\": \"lat\", \"is\": \"not\", \"value\": 1}]}",
    "mark_conditions[0]" },
  { "{\"name\": \"a\", \"mark_conditions\": [{\"column\": \"mu\", \"is\": \"about\", \"value\": 1}]}",
    "at-least" },
  { "{\"name\": \"a\", \"mark_conditions\": [{\"column\": \"mu\", \"is\": \"at-least\", \"value\": \"x\"}]}",
    "a number" },
  { "{\"name\": \"a\", \"region_conditions\": [{\"column\": \"hale\", \"is\": \"one-of\", \"value\": \"x\"}]}",
    "array" },
  { "{\"name\": \"a\", \"sampling\": {\"sampling\": \"none\"}}", "sampling" },
  { "{\"name\": \"a\", \"methods\": {\"joy\": {\"joy-draws\": -5}}}", "joy" },
  { "{\"name\": \"a\", \"divides\": [{\"minimum\": 24, \"hemisphere\": \"E\", \"points\": []}]}",
    "divides[0]" },
};

static void
test_not_studies (void)
{
  for (guint k = 0; k < G_N_ELEMENTS (not_studies); k++)
    {
      g_autoptr (GError) error = NULL;
      g_autoptr (TfStudy) study = tf_study_read_text (not_studies[k].text, "made.json", &error);
      g_assert_null (study);
      g_assert_error (error, TF_STUDY_ERROR, TF_STUDY_ERROR_READ);
      g_assert_nonnull (strstr (error->message, not_studies[k].words));
    }
}

/* Without conditions of its own a file has the default ones; an empty list is none. */
static void
test_default_sieve (void)
{
  g_autoptr (TfStudy) plain = tf_study_read_text ("{\"name\": \"a\"}", "made.json", NULL);
  g_autoptr (TfStudy) open = tf_study_read_text (
      "{\"name\": \"a\", \"mark_conditions\": [], \"region_conditions\": []}", "made.json", NULL);
  g_assert_false (plain->sieve.with_hints || plain->sieve.with_models);
  tf_check_near ("within", plain->sieve.cmd_max_deg, 60, 0);
  g_assert_cmpint (plain->sieve.ephemeral, ==, TF_EPHEMERAL_OUT);
  g_assert_true (open->sieve.with_hints && open->sieve.with_models);
  tf_check_near ("to the limb", open->sieve.cmd_max_deg, 90, 0);
  g_assert_cmpint (open->sieve.ephemeral, ==, TF_EPHEMERAL_IN);
}

static void
test_conditions (void)
{
  static const struct
  {
    const char *column;
    TfIs is;
    double number;
    const char *text;
    int holds;
  } rows[] = {
    { "lat_deg", TF_IS_AT_LEAST, -12, NULL, 1 }, { "lat_deg", TF_IS_AT_LEAST, -11, NULL, 0 },
    { "lat_deg", TF_IS_AT_MOST, -12, NULL, 1 },  { "lat_deg", TF_IS_WITHIN, 12, NULL, 1 },
    { "lat_deg", TF_IS_BEYOND, 13, NULL, 0 },    { "lat_deg", TF_IS_EQUALS, -12, NULL, 1 },
    { "lat_deg", TF_IS_NOT, -12, NULL, 0 },      { "mu", TF_IS_AT_LEAST, 0, NULL, -1 },
    { "origin", TF_IS_EQUALS, NAN, "hint", 0 },  { "origin", TF_IS_NOT, NAN, "hint", 1 },
    { "class", TF_IS_NOT, NAN, "x", -1 },
    { "time", TF_IS_AT_MOST, NAN, "2000-01-01T12:00:01Z", 1 },
    { "time", TF_IS_AT_MOST, NAN, "2000-01-01T11:00:00.000Z", 0 },
  };
  TfRow row = { .origin = "changed" };
  row.measure.lat_deg = -12;
  row.measure.mu = NAN;
  row.measure.time = tf_time_from_calendar (2000, 1, 1, 12, 0, 0, TF_SCALE_UTC);
  const TfExportRow export = { .row = &row };
  for (guint k = 0; k < G_N_ELEMENTS (rows); k++)
    {
      g_autoptr (TfCondition) c
          = tf_condition_new (rows[k].column, rows[k].is, rows[k].number, rows[k].text);
      g_assert_cmpint (tf_condition_holds (c, &export), ==, rows[k].holds);
    }
  g_assert_null (tf_condition_new ("latitude", TF_IS_NOT, 1, NULL));
}

/* Numbers that agree to the digits printed are the same. */
static void
test_differences (void)
{
  static const struct
  {
    const char *before, *now;
    guint n;
  } rows[] = {
    { "{\"share_breaks\": 0.05}", "{\"share_breaks\": 0.05009}", 0 },
    { "{\"share_breaks\": 0.05}", "{\"share_breaks\": 0.0502}", 1 },
    { "{\"slope\": 0.4}", "{\"slope\": 0.4009}", 0 },
    { "{\"slope_ci\": [0.4, 1]}", "{\"slope_ci\": [0.402, 1.002]}", 2 },
    { "{\"mean_tilt_deg\": 4.24}", "{\"mean_tilt_deg\": 4.249}", 0 },
    { "{\"n\": 5, \"x\": {\"y\": null}}", "{\"n\": 6, \"x\": {\"y\": 1}}", 2 },
    { "{\"a\": [1, 2]}", "{\"a\": [1, 2, 3], \"b\": 1}", 2 },
  };
  for (guint k = 0; k < G_N_ELEMENTS (rows); k++)
    {
      g_autoptr (JsonNode) before = json_from_string (rows[k].before, NULL);
      g_autoptr (JsonNode) now = json_from_string (rows[k].now, NULL);
      g_autoptr (GPtrArray) differences = tf_json_differences (before, now);
      g_assert_cmpuint (differences->len, ==, rows[k].n);
    }
}

void
test_study_add_file (void)
{
  g_test_add_func ("/study/file/a-study-is-read-back-as-it-was-written", test_round_trip);
  g_test_add_func ("/study/file/what-is-no-study-is-told-by-its-member", test_not_studies);
  g_test_add_func ("/study/file/without-conditions-it-has-the-default-ones", test_default_sieve);
  g_test_add_func ("/study/file/conditions-hold-fail-or-have-nothing-to-say", test_conditions);
  g_test_add_func ("/study/file/numbers-are-compared-to-the-digits-printed", test_differences);
}
