/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Complexity beside a measure; notes that are settled; the hand-over of a shift. */

#include "test-ledger.h"

#include <math.h>

static const TfComplexityRow figures = { TRUE, 0.93, 3.2e21, 41.5, 2.1e4, 5e21, 4, TRUE };

static TfRow *
first_row (TfLedger *ledger, gboolean hints, GPtrArray **rows)
{
  const TfRowQuery query = { .marks = !hints, .hints = hints, .complexity = TRUE };
  *rows = tf_ledger_rows (ledger, &query, NULL);
  g_assert_nonnull (*rows);
  return g_ptr_array_index (*rows, 0);
}

static void
check_figures (const TfRow *row)
{
  g_assert_cmpstr (row->complexity_method, ==, "inversion-lines/1");
  g_assert_true (row->complexity.there);
  tf_check_near ("mu", row->complexity.mu, 0.93, 0);
  tf_check_near ("R", row->complexity.r_mx, 3.2e21, 0);
  tf_check_near ("length", row->complexity.strong_gradient_length_mm, 41.5, 0);
  tf_check_near ("weighted", row->complexity.gradient_weighted_gauss, 2.1e4, 0);
  tf_check_near ("near", row->complexity.flux_near_mx, 5e21, 0);
  g_assert_cmpuint (row->complexity.pieces, ==, 4);
  g_assert_true (row->complexity.delta_candidate);
}

static void
fill (TfLedger *ledger)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (GPtrArray) hints = fixture_hints (1);
  const TfComplexityRow none = { .there = FALSE, .mu = 0.4, .r_mx = NAN };
  const TfComplexityRow rows[] = { figures, none, none };
  const TfComplexityRows all = { "inversion-lines/1", rows, 3 };
  gint64 frame = fixture_frame (ledger, 1);
  g_assert_true (tf_ledger_add_hints_with (ledger, frame, "plain/1", hints, "flux-centroid/1", &all,
                                           &error));
  g_assert_no_error (error);
}

/* A hint kept as it was hinted has its measure, and with it its figures. */
static void
test_hint_and_mark (Fixture *f, gconstpointer data)
{
  g_autoptr (GPtrArray) hints = NULL, marks = NULL, again = NULL;
  g_autoptr (GError) error = NULL;
  fill (f->ledger);
  TfRow *row = first_row (f->ledger, TRUE, &hints);
  check_figures (row);
  TfRow *second = g_ptr_array_index (hints, 1);
  g_assert_nonnull (second->complexity_method);
  g_assert_false (second->complexity.there);
  tf_check_near ("mu of one near the limb", second->complexity.mu, 0.4, 0);
  TfMarkDeed deed = { .frame = row->frame,
                      .person = tf_ledger_person (f->ledger, "north", NULL),
                      .hint = row->mark,
                      .outline = row->outline,
                      .measure = &row->measure,
                      .method = row->method };
  g_assert_cmpint (tf_ledger_keep (f->ledger, &deed, &error), !=, 0);
  check_figures (first_row (f->ledger, FALSE, &marks));
  g_autofree char *view
      = fixture_sql_text (f->path, "SELECT r_schrijver_mx || ' ' || strong_pieces || ' ' || "
                                   "coalesce ((SELECT max (strong_pieces) FROM hints), 'none') "
                                   "FROM marks");
  g_assert_cmpstr (view, ==, "3.2e+21 4 none");
  fixture_check (f->ledger, "");
}

static void
test_added_once (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (GPtrArray) rows = NULL, again = NULL;
  gint64 person = tf_ledger_person (f->ledger, "north", NULL);
  gint64 mark = fixture_keep (f->ledger, fixture_frame (f->ledger, 1), person, 0, 0, 3);
  g_assert_null (first_row (f->ledger, FALSE, &rows)->complexity_method);
  const gboolean hint = FALSE;
  TfComplexityRow other = figures;
  other.r_mx = 1;
  g_assert_true (tf_ledger_add_complexity (f->ledger, 1, &mark, &hint, "inversion-lines/1", &figures,
                                           &error));
  g_assert_true (tf_ledger_add_complexity (f->ledger, 1, &mark, &hint, "inversion-lines/1", &other,
                                           &error));
  check_figures (first_row (f->ledger, FALSE, &again));
  gint64 nobody = 999;
  g_assert_false (tf_ledger_add_complexity (f->ledger, 1, &nobody, &hint, "inversion-lines/1",
                                            &figures, &error));
  g_assert_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE);
  fixture_check (f->ledger, "");
}

static void
test_gathered (Fixture *f, gconstpointer data)
{
  g_autoptr (GPtrArray) rows = NULL;
  g_autofree char *path = g_build_filename (f->folder, "part.ledger", NULL);
  g_autoptr (TfLedger) part = fixture_open (f, path, NULL);
  fill (part);
  g_assert_true (tf_ledger_gather (f->ledger, part, NULL, NULL, NULL, NULL));
  check_figures (first_row (f->ledger, TRUE, &rows));
  fixture_check (f->ledger, "");
}

/* -- notes ----------------------------------------------------------------------------------- */

static const TfRegionNote *
first_note (GPtrArray *notes, guint n)
{
  g_assert_cmpuint (notes->len, ==, n);
  return g_ptr_array_index (notes, 0);
}

static void
test_resolve (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  gint64 north = tf_ledger_person (f->ledger, "north", NULL),
         south = tf_ledger_person (f->ledger, "south", NULL);
  gint64 mark = fixture_keep (f->ledger, fixture_frame (f->ledger, 1), north, 0, 0, 3);
  gint64 region = fixture_region (f->ledger, mark);
  g_assert_false (tf_ledger_resolve (f->ledger, region, north, south, TRUE, &error));
  g_assert_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE);
  g_assert_true (tf_ledger_set_note (f->ledger, region, north, "watch it", NULL));
  g_assert_true (tf_ledger_resolve (f->ledger, region, north, south, TRUE, NULL));
  {
    g_autoptr (GPtrArray) notes = tf_ledger_notes (f->ledger, NULL);
    const TfRegionNote *note = first_note (notes, 1);
    g_assert_cmpstr (note->text, ==, "watch it");
    g_assert_cmpstr (note->person, ==, "north");
    g_assert_cmpstr (note->resolver, ==, "south");
    g_assert_true (note->resolved);
    tf_check_near ("written by the clock", note->written.s,
                   tf_time_read ("2013-10-12T06:00:00Z").s, 1e-3);
  }
  g_assert_true (tf_ledger_undo (f->ledger, south, NULL, NULL));
  {
    g_autoptr (GPtrArray) notes = tf_ledger_notes (f->ledger, NULL);
    g_assert_false (first_note (notes, 1)->resolved);
  }
  g_assert_true (tf_ledger_redo (f->ledger, south, NULL, NULL));
  g_assert_true (tf_ledger_set_note (f->ledger, region, north, "it grew", NULL));
  g_autoptr (GPtrArray) notes = tf_ledger_notes (f->ledger, NULL);
  g_assert_false (first_note (notes, 1)->resolved); /* another text is open again */
  fixture_check (f->ledger, "");
}

static void
test_hand_over (Fixture *f, gconstpointer data)
{
  g_autofree char *who = NULL;
  gint64 north = tf_ledger_person (f->ledger, "north", NULL);
  tf_check_nan ("without one", tf_ledger_last_shift (f->ledger, NULL).s);
  g_assert_true (tf_ledger_hand_over (f->ledger, north, TF_TIME_UNKNOWN, NULL));
  f->now += 3600000;
  g_assert_true (
      tf_ledger_hand_over (f->ledger, north, tf_time_read ("2013-10-12T05:00:00Z"), NULL));
  tf_check_near ("the newer", tf_ledger_last_shift (f->ledger, &who).s,
                 tf_time_read ("2013-10-12T07:00:00Z").s, 1e-3);
  g_assert_cmpstr (who, ==, "north");
  g_assert_false (tf_ledger_undo (f->ledger, north, NULL, NULL));
  fixture_check (f->ledger, "");
}

void
add_shift_tests (void)
{
  FIXTURE_TEST ("/ledger/complexity/a-hint's-figures-stay-with-the-mark-kept-of-it",
                test_hint_and_mark);
  FIXTURE_TEST ("/ledger/complexity/figures-are-put-in-once", test_added_once);
  FIXTURE_TEST ("/ledger/complexity/figures-come-with-a-part-gathered", test_gathered);
  FIXTURE_TEST ("/ledger/shift/a-note-is-settled-until-its-text-changes", test_resolve);
  FIXTURE_TEST ("/ledger/shift/the-last-hand-over-is-told-and-stays", test_hand_over);
}
