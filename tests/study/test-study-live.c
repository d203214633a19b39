/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-study.h"

#include <string.h>

#include "tf-check.h"
#include "tf-study-live.h"

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

void
test_study_add_live (void)
{
  g_test_add_func ("/study/live/moves-as-if-run-again", test_moves);
  g_test_add_func ("/study/live/a-line-that-cannot-be-kept", test_offers);
}
