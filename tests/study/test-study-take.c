/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-study.h"

#include <math.h>
#include <string.h>

#include "tf-check.h"
#include "tf-ledger-outside.h"
#include "tf-ledger-scales.h"
#include "tf-sieve.h"
#include "tf-study-take.h"

/* The measure of a mark's own outline with that even floor, by the method that belongs to its own. */
static void
measure_even (TestLedger *t, gint64 frame, const TfOutline *outline, const char *method, double floor,
              TfMeasure measure)
{
  TfMeasureParams params;
  g_autofree char *even = tf_measure_dup_even_method (method, floor, &params);
  g_assert_nonnull (even);
  measure.floor_kind = TF_FLOOR_EVEN;
  measure.floor_gauss = floor;
  g_autoptr (GError) error = NULL;
  TfOutline *outlines[] = { (TfOutline *)outline };
  g_assert_true (tf_ledger_add_measures (t->ledger, 1, &frame, outlines, &even, &measure, &error));
  g_assert_no_error (error);
}

static gint64
keep (TestLedger *t, gint64 frame, const char *method, const TfMeasure *measure)
{
  g_autoptr (TfOutline) outline
      = tf_outline_new_cap (measure->time, measure->carrington_lon_deg, measure->lat_deg, 6, 24);
  const TfMarkDeed deed = { .frame = frame, .person = t->person, .origin = TF_MARK_CHANGED,
                            .outline = outline, .measure = measure, .method = method };
  gint64 mark = tf_ledger_keep (t->ledger, &deed, NULL);
  g_assert_cmpint (mark, >, 0);
  return mark;
}

/* Marks of two instruments, out of order in time, some measured with the study's floor, too; hints. */
static void
fill (TestLedger *t, const char *method, double floor)
{
  static const char *const times[]
      = { "2013-06-03T00:00:00Z", "2013-06-01T00:00:00Z", "2013-06-02T00:00:00Z" };
  for (guint k = 0; k < 3; k++)
    {
      gint64 frame = test_study_frame (t, times[k], k == 1 ? "TEST-B" : "TEST-A", 8);
      for (guint j = 0; j < 90; j++)
        {
          g_auto (TfMeasure) m = test_study_measure ((j % 2 == 0 ? 1 : -1) * (6.0 + j % 23), j % 3 == 0 ? 1 : -1);
          m.time = tf_time_read (times[k]);
          m.axis_tilt_deg = (double)(j % 40) - 15.0;
          m.flux_unsigned_mx = 1e22 + 1e20 * j;
          m.floor_gauss = 30;
          gint64 mark = keep (t, frame, method, &m);
          g_autoptr (TfRow) row = tf_ledger_row (t->ledger, mark, FALSE, NULL);
          TfMeasure other = m;
          other.cautions = NULL;
          other.flux_unsigned_mx *= 0.9;
          if (j % 2 == 0)
            measure_even (t, frame, row->outline, method, floor, other);
          if (j % 3 == 0)
            measure_even (t, frame, row->outline, method, 0.8 * floor, other);
          if (j % 5 == 0)
            g_assert_true (tf_ledger_withdraw (t->ledger, mark, t->person, NULL));
        }
      test_study_hint (t, frame, k == 1, test_study_measure (12, 1));
    }
}

/* "mu at-least 0" drops nothing but asks for whole rows. */
static TfFindings *
run_whole (TestLedger *t, gboolean with_hints)
{
  g_autoptr (TfStudy) study = tf_study_new_default ();
  study->hale.draws = study->joy.draws = study->drift.draws = 0;
  study->sieve.with_hints = with_hints;
  g_ptr_array_add (study->mark_conditions, tf_condition_new ("mu", TF_IS_AT_LEAST, 0, NULL));
  return tf_study_run (study, t->ledger, NULL);
}

static void
compare (const TfFindings *brief, const TfFindings *whole)
{
  g_assert_cmpuint (tf_sample_get_n (brief->every), ==, tf_sample_get_n (whole->every));
  for (guint k = 0; k < tf_sample_get_n (brief->every); k++)
    {
      const TfSampleRow *a = tf_sample_get (brief->every, k), *b = tf_sample_get (whole->every, k);
      const double pairs[][2] = { { a->time.s, b->time.s },
                                  { a->lat_deg, b->lat_deg },
                                  { a->leading_lat_deg, b->leading_lat_deg },
                                  { a->following_lat_deg, b->following_lat_deg },
                                  { a->cmd_deg, b->cmd_deg },
                                  { a->mu, b->mu },
                                  { a->axis_tilt_deg, b->axis_tilt_deg },
                                  { a->axis_bearing_deg, b->axis_bearing_deg },
                                  { a->tilt_sigma_deg, b->tilt_sigma_deg },
                                  { a->separation_deg, b->separation_deg },
                                  { a->separation_sigma_deg, b->separation_sigma_deg },
                                  { a->flux_mx, b->flux_mx },
                                  { a->imbalance, b->imbalance },
                                  { a->compactness, b->compactness },
                                  { a->axial_dipole_gauss, b->axial_dipole_gauss },
                                  { a->axial_dipole_sigma_gauss, b->axial_dipole_sigma_gauss } };
      for (guint p = 0; p < G_N_ELEMENTS (pairs); p++)
        g_assert_true ((isnan (pairs[p][0]) && isnan (pairs[p][1]))
                       || memcmp (&pairs[p][0], &pairs[p][1], sizeof (double)) == 0);
      g_assert_cmpuint (a->region, ==, b->region);
      g_assert_cmpuint (a->passage, ==, b->passage);
      g_assert_cmpint (a->leading_polarity, ==, b->leading_polarity);
      g_assert_cmpint (a->leading_sure, ==, b->leading_sure);
      g_assert_cmpint (a->witnesses_differ, ==, b->witnesses_differ);
      g_assert_cmpint (a->straddles, ==, b->straddles);
      g_assert_cmpint (a->size, ==, b->size);
      g_assert_cmpint (a->born, ==, b->born);
      g_assert_cmpint (a->origin, ==, b->origin);
    }
  g_assert_cmpuint (tf_sample_get_n (brief->sample), ==, tf_sample_get_n (whole->sample));
  for (guint k = 0; k < tf_sample_get_n (brief->sample); k++)
    g_assert_cmpint (brief->marks[k], ==, whole->marks[k]);
  g_assert_cmpuint (brief->n_other_floor, ==, whole->n_other_floor);
  g_assert_cmpuint (brief->n_hints, ==, whole->n_hints);
  g_assert_cmpuint (brief->what_if->len, ==, whole->what_if->len);
  for (guint k = 0; k < brief->what_if->len; k++)
    {
      const TfWhatIf *a = &g_array_index (brief->what_if, TfWhatIf, k),
                     *b = &g_array_index (whole->what_if, TfWhatIf, k);
      g_assert_cmpstr (a->name, ==, b->name);
      g_assert_cmpstr (a->missing, ==, b->missing);
      g_assert_cmpuint (a->n, ==, b->n);
      g_assert_cmpuint (a->breaks, ==, b->breaks);
      g_assert_cmpuint (a->n_missing, ==, b->n_missing);
      g_assert_true ((isnan (a->slope) && isnan (b->slope)) || fabs (a->slope - b->slope) < 1e-15);
    }
}

static void
test_briefs (void)
{
  for (int hints = 0; hints < 2; hints++)
    {
      g_auto (TestLedger) t = { 0 };
      test_study_ledger_open (&t);
      TfMeasureParams params;
      tf_options_reset (tf_measure_options, &params);
      const TfCorrection none = tf_correction_none ();
      g_autofree char *method = tf_measure_dup_method (&params, &none);
      fill (&t, method, 48); /* 3 x 8 / 0.5 */
      tf_check_near ("the study's floor", tf_study_even_floor (t.ledger, NULL), 48, 0);
      g_autoptr (TfStudy) study = tf_study_new_default ();
      study->hale.draws = study->joy.draws = study->drift.draws = 0;
      study->sieve.with_hints = hints;
      g_autoptr (TfFindings) brief = tf_study_run (study, t.ledger, NULL);
      g_autoptr (TfFindings) whole = run_whole (&t, hints);
      g_assert_cmpuint (brief->n_marks, ==, 3 * 72);
      compare (brief, whole);
      g_autoptr (TfNotes) wrong = tf_notes_new ();
      g_assert_true (tf_ledger_check (t.ledger, wrong, NULL));
      g_assert_cmpuint (tf_notes_get_n (wrong), ==, 0);
    }
}

/* Every mark measured with its own floor, the study's, one a fifth lower and one a fifth higher: of each
 * another tilt, exactly in proportion to latitude, and another number of regions that break. */
static const struct
{
  double gauss, slope; /* gauss 0: the mark's own */
  guint breaks;        /* of forty */
  const char *row;
} floors[] = { { 0, 0.4, 1, "floor-of-each-mark" },
               { 48, 0.3, 2, "as-chosen" },
               { 0.8 * 48, 0.2, 8, "floor-a-fifth-lower" },
               { 1.2 * 48, 0.6, 4, "floor-a-fifth-higher" } };

static TfMeasure
measured (guint k, guint floor)
{
  double lat = (k % 2 == 0 ? 1.0 : -1.0) * (6.0 + k % 20);
  gboolean breaks = k < floors[floor].breaks;
  TfMeasure m = test_study_measure (lat, (lat > 0 ? -1 : 1) * (breaks ? -1 : 1)); /* cycle 24 */
  m.axis_tilt_deg = floors[floor].slope * fabs (lat);
  return m;
}

static void
test_floors_move_the_rows (void)
{
  g_auto (TestLedger) t = { 0 };
  test_study_ledger_open (&t);
  TfMeasureParams params;
  tf_options_reset (tf_measure_options, &params);
  const TfCorrection none = tf_correction_none ();
  g_autofree char *method = tf_measure_dup_method (&params, &none);
  gint64 frame = test_study_frame (&t, "2013-06-01T00:00:00Z", "TEST-A", 8);
  g_autoptr (TfStudy) study = tf_study_new_default ();
  study->hale.draws = study->joy.draws = study->drift.draws = 0;
  for (guint k = 0; k < 40; k++)
    {
      g_auto (TfMeasure) own = measured (k, 0);
      own.carrington_lon_deg = 9.0 * k; /* each an outline of its own */
      g_autoptr (TfRow) row = tf_ledger_row (t.ledger, keep (&t, frame, method, &own), FALSE, NULL);
      for (guint f = 1; f < G_N_ELEMENTS (floors); f++)
        {
          g_auto (TfMeasure) other = measured (k, f);
          /* before the last one is there the rows are not: half a sample would be another sample */
          if (k == 39 && f == 2)
            {
              g_autoptr (TfFindings) found = tf_study_run (study, t.ledger, NULL);
              for (guint r = 0; r < found->what_if->len; r++)
                {
                  const TfWhatIf *w = &g_array_index (found->what_if, TfWhatIf, r);
                  if (strcmp (w->name, "floor-a-fifth-lower") == 0)
                    {
                      g_assert_cmpstr (w->missing, ==, "not-measured");
                      g_assert_cmpuint (w->n_missing, ==, 1);
                    }
                }
            }
          measure_even (&t, frame, row->outline, method, floors[f].gauss, other);
        }
    }
  g_autoptr (TfFindings) found = tf_study_run (study, t.ledger, NULL);
  guint seen = 0;
  for (guint r = 0; r < found->what_if->len; r++)
    for (guint f = 0; f < G_N_ELEMENTS (floors); f++)
      {
        const TfWhatIf *w = &g_array_index (found->what_if, TfWhatIf, r);
        if (strcmp (w->name, floors[f].row) != 0)
          continue;
        g_assert_null (w->missing);
        g_assert_cmpuint (w->n, ==, 40);
        g_assert_cmpuint (w->breaks, ==, floors[f].breaks);
        tf_check_near (w->name, w->share, floors[f].breaks / 40.0, 1e-12);
        tf_check_near (w->name, w->slope, floors[f].slope, 1e-12);
        seen++;
      }
  g_assert_cmpuint (seen, ==, G_N_ELEMENTS (floors));
  g_assert_cmpstr (tf_what_if_title ("floor-a-fifth-lower"), ==, "even floor a fifth lower");
  g_assert_cmpstr (tf_what_if_title ("of-a-newer-program"), ==, "of-a-newer-program");
  /* a study that keeps a floor has it however noisy the frames are that come later; the ledger's moves */
  g_autoptr (TfStudyTaken) by_ledger = tf_study_take (study, t.ledger, NULL);
  for (guint k = 0; k < 3; k++)
    test_study_frame (&t, "2014-06-01T00:00:00Z", "TEST-B", 20);
  study->even_floor_gauss = floors[2].gauss;
  g_assert_false (tf_study_taken_serves (by_ledger, study));
  g_autoptr (TfFindings) kept = tf_study_run (study, t.ledger, NULL);
  tf_check_near ("the ledger's", tf_study_even_floor (t.ledger, NULL), 120, 0);
  tf_check_near ("the study's own", kept->even_floor_gauss, floors[2].gauss, 0);
  tf_check_near ("its slope", g_array_index (kept->joy, TfJoyFit, kept->joy->len - 1).slope, floors[2].slope, 1e-12);
  g_assert_cmpuint (kept->n_other_floor, ==, 0);
}

/* However a file has them, they are taken by time and, at one moment, by latitude. */
static void
test_order (void)
{
  static const double times[] = { 30, 10, 20, 10, 10 }, lats[] = { 5, 7, 0, -2, NAN };
  static const guint expected[] = { 3, 1, 4, 2, 0 };
  g_autoptr (TfStudyTaken) taken
      = tf_study_taken_new (48, g_ptr_array_new_with_free_func ((GDestroyNotify)tf_kept_scale_free));
  for (guint k = 0; k < G_N_ELEMENTS (times); k++)
    {
      TfRow *row = g_new0 (TfRow, 1);
      row->mark = k;
      row->measure.time.s = times[k];
      row->measure.lat_deg = lats[k];
      tf_study_taken_add (taken, row, (TfSampleRow){ .time = { times[k] }, .region = k + 1 });
    }
  tf_study_taken_close (taken);
  for (guint k = 0; k < G_N_ELEMENTS (times); k++)
    {
      const TfSampleRow *row = tf_sample_get (tf_study_taken_get_sample (taken), k);
      g_assert_cmpint (tf_study_taken_get_row (taken, k)->mark, ==, expected[k]);
      g_assert_cmpuint (row->region, ==, expected[k] + 1);
      g_assert_cmpuint (row->row, ==, k);
    }
}

void
test_study_add_take (void)
{
  g_test_add_func ("/study/take/by-time-and-latitude", test_order);
  g_test_add_func ("/study/what-if/floors-move-the-rows", test_floors_move_the_rows);
  g_test_add_func ("/study/take/briefs-say-what-whole-rows-say", test_briefs);
}
