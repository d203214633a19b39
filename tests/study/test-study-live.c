/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-study.h"

#include <math.h>
#include <string.h>

#include "tf-check.h"
#include "tf-joy-slope.h"
#include "tf-study-live.h"
#include "tf-study-quick.h"

/* Regions about the minimum that began cycle 24, every fourth in two marks of which one leads otherwise. */
static TfSample *
about_a_minimum (void)
{
  TfSample *sample = tf_sample_new ();
  for (guint k = 0; k < 400; k++)
    for (guint mark = 0; mark < (k % 4 == 0 ? 2u : 1u); mark++)
      {
        double lat = (k % 2 == 0 ? 1.0 : -1.0) * (5.0 + (k * 7) % 30);
        TfMeasure m = test_study_measure (lat, (k % 3 == 0 ? 1 : -1) * (mark == 1 ? -1 : 1));
        TfSampleRow row;
        tf_study_measure_row (&m, &row);
        g_clear_pointer (&m.cautions, g_ptr_array_unref);
        row.time = tf_time_from_year (2007.0 + 3.5 * k / 400.0 + 1e-9 * mark);
        row.region = row.passage = k + 1;
        row.row = tf_sample_get_n (sample);
        row.axis_tilt_deg = 0.4 * lat + (k % 11) - 5.0;
        row.origin = TF_ORIGIN_DRAWN;
        tf_sample_add (sample, &row);
      }
  return sample;
}

static void
move (TfStudy *study, int hemisphere, double lat)
{
  TfTime times[] = { tf_time_from_year (2007.0), tf_time_from_year (2010.4) };
  const double lats[] = { lat, lat };
  g_autoptr (TfDivides) before = study->divides != NULL ? study->divides : tf_divides_new (&study->divide);
  study->divides = tf_divides_with (before, 24, hemisphere, times, lats, 2);
}

/* After any moves the numbers and the words are those of the whole study run again. */
static void
test_moves (void)
{
  g_autoptr (TfSample) sample = about_a_minimum ();
  g_autoptr (TfStudy) study = tf_study_new_default ();
  study->hale.draws = study->joy.draws = study->drift.draws = 0;
  g_autoptr (TfFindings) begun = tf_study_run_sample (study, sample);
  g_assert_cmpuint (g_hash_table_size (begun->changing), >, 10);
  g_autoptr (TfStudyLive) live = tf_study_live_new (study, begun);
  for (int k = 0; k < 4; k++)
    {
      move (study, k % 2 == 0 ? 1 : -1, 8.0 + 6.0 * k);
      g_assert_cmpuint (tf_study_live_move (live, study), >, 0);
      g_autoptr (TfFindings) again = tf_study_run_sample (study, sample);
      const GArray *hale = tf_study_live_hale (live), *joy = tf_study_live_joy (live);
      const TfHaleRow *a = &g_array_index (hale, TfHaleRow, hale->len - 1),
                      *b = &g_array_index (again->hale, TfHaleRow, again->hale->len - 1);
      g_assert_cmpuint (a->n, ==, b->n);
      g_assert_cmpuint (a->breaks, ==, b->breaks);
      g_assert_cmpuint (a->cannot_say, ==, b->cannot_say);
      tf_check_near ("slope", g_array_index (joy, TfJoyFit, 0).slope,
                     g_array_index (again->joy, TfJoyFit, again->joy->len - 1).slope, 1e-12);
      g_autofree char *words = tf_study_live_dup_words (live, study);
      g_assert_nonnull (strstr (words, k == 0 ? "24 N" : "24 N, 24 S"));
    }
  g_assert_cmpuint (tf_study_live_move (live, study), ==, 0);
}

static void
test_offers (void)
{
  g_autoptr (TfSample) sample = about_a_minimum ();
  g_autoptr (TfStudy) study = tf_study_new_default ();
  study->hale.draws = study->joy.draws = study->drift.draws = 0;
  study->joy.form = TF_JOY_LINEAR_FREE;
  g_autoptr (TfFindings) begun = tf_study_run_sample (study, sample);
  g_assert_null (tf_study_live_new (study, begun));
}

/* The same with rows that lack something, or of which something is against a verdict. */
static TfSample *
with_odd_rows (void)
{
  g_autoptr (TfSample) plain = about_a_minimum ();
  TfSample *odd = tf_sample_new ();
  for (guint k = 0; k < tf_sample_get_n (plain); k++)
    {
      TfSampleRow row = *tf_sample_get (plain, k);
      row.axis_bearing_deg = k % 26 == 0 ? 80.0 : 40.0;
      row.axis_tilt_deg = k % 13 == 0 ? NAN : row.axis_tilt_deg;
      row.lat_deg = k % 31 == 0 ? 0.0 : k % 37 == 0 ? NAN : row.lat_deg;
      row.leading_polarity = k % 41 == 0 ? 0 : row.leading_polarity;
      row.time = k % 43 == 0 ? TF_TIME_UNKNOWN : row.time;
      row.mu = k % 47 == 0 ? 0.2 : row.mu;
      row.witnesses_differ = k % 53 == 0;
      row.compactness = k % 59 == 0 ? 0.1 : row.compactness;
      tf_sample_add (odd, &row);
    }
  return odd;
}

/* The long way. */
static TfWhatIf
count_slowly (const TfStudy *study, const TfFindings *findings, const TfSample *picks, double later_s)
{
  TfWhatIf row = { 0 };
  const TfGroup all = tf_group_of (0, 0);
  g_autofree TfVerdict *verdicts = tf_study_judge (study, picks, later_s);
  g_autoptr (GHashTable) regions = g_hash_table_new (NULL, NULL);
  if (study->sampling.rule != TF_SAMPLING_EVERY)
    tf_study_hold (findings, picks, verdicts);
  for (guint k = 0; k < tf_sample_get_n (picks); k++)
    if (verdicts[k].kind != TF_VERDICT_CANNOT_SAY)
      {
        row.n++;
        row.breaks += verdicts[k].kind == TF_VERDICT_BREAKS;
        row.leaning += g_strcmp0 (verdicts[k].cycle.reason, "cycle-provisional") == 0;
        g_hash_table_add (regions, GUINT_TO_POINTER (tf_sample_get (picks, k)->region));
      }
  TfJoyFit fit = tf_joy_slope (picks, verdicts, &all, &study->joy);
  row.slope = fit.slope;
  row.n_tilts = fit.n;
  row.regions = g_hash_table_size (regions);
  return row;
}

/* A choice told from a few bytes a row is what all of it worked out gives. */
static void
test_quick (void)
{
  g_autoptr (TfSample) sample = with_odd_rows ();
  g_autoptr (TfStudy) study = tf_study_new_default ();
  study->hale.draws = study->joy.draws = study->drift.draws = 0;
  study->joy.form = TF_JOY_SINE_OF_TILT;
  g_autoptr (TfFindings) findings = tf_study_run_sample (study, sample);
  g_assert_cmpuint (g_hash_table_size (findings->changing), >, 10);
  g_autoptr (TfStudyQuick) quick = tf_study_quick_new (study, findings, sample, NULL);
  g_assert_nonnull (quick);
  const TfStudyRows rows = { .all = sample };
  for (int k = 0; k < 10; k++)
    {
      TfStudy other = *study;
      double later_s = k == 7 ? 1.6e7 : k == 8 ? -1.6e7 : 0.0;
      other.divide.by_date_only = k == 1;
      other.divide.band_deg = k == 2 ? 0.0 : other.divide.band_deg;
      other.divide.provisional_year = k == 3 ? 2031.0 : NAN;
      other.verdict.equator_deg = k == 4 ? 0.0 : k == 5 ? 20.0 : other.verdict.equator_deg;
      other.verdict.steep_deg = other.joy.steep_max_deg = k == 6 ? 8.0 : 90.0;
      other.sampling.rule = k == 9 ? TF_SAMPLING_EVERY : TF_SAMPLING_FLUX;
      g_autoptr (TfSample) marks = tf_study_marks (&other, &rows, NULL);
      g_autoptr (TfSample) picks = tf_study_picks (&other, &rows, marks, NULL);
      TfWhatIf fast = { 0 }, slow = count_slowly (&other, findings, picks, later_s);
      g_assert_true (tf_study_quick_fill (quick, &other, picks, later_s, &fast));
      g_assert_cmpuint (fast.n, ==, slow.n);
      g_assert_cmpuint (fast.breaks, ==, slow.breaks);
      g_assert_cmpuint (fast.regions, ==, slow.regions);
      g_assert_cmpuint (fast.leaning, ==, slow.leaning);
      g_assert_cmpuint (fast.n_tilts, ==, slow.n_tilts);
      g_assert_cmpuint (fast.n, >, 50);
      tf_check_near ("slope", fast.slope, slow.slope, 0.0);
    }
  study->joy.estimator = TF_JOY_LEAST_SQUARES;
  g_assert_null (tf_study_quick_new (study, findings, sample, NULL));
}

void
test_study_add_live (void)
{
  g_test_add_func ("/study/live/moves-as-if-run-again", test_moves);
  g_test_add_func ("/study/live/a-line-that-cannot-be-kept", test_offers);
  g_test_add_func ("/study/quick/as-the-long-way", test_quick);
}
