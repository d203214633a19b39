/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* What people do, and that it can all be undone. */

#include "test-ledger.h"

#include <string.h>

#include "tf-json.h"

static gint64
north (Fixture *f)
{
  g_autoptr (GError) error = NULL;
  gint64 person = tf_ledger_person (f->ledger, "north", &error);
  g_assert_no_error (error);
  return person;
}

static void
test_person_once (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  gint64 one = north (f);
  g_assert_cmpint (tf_ledger_person (f->ledger, " north ", NULL), ==, one);
  g_assert_cmpint (tf_ledger_person (f->ledger, "south", NULL), !=, one);
  g_auto (GStrv) names = tf_ledger_dup_persons (f->ledger);
  g_assert_cmpstr (names[0], ==, "north");
  g_assert_cmpstr (names[1], ==, "south");
  g_assert_null (names[2]);
  g_assert_cmpint (tf_ledger_person (f->ledger, "  ", &error), ==, 0);
  g_assert_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE);
  fixture_check (f->ledger, "");
}

static void
test_keep_new_region (Fixture *f, gconstpointer data)
{
  gint64 person = north (f), frame = fixture_frame (f->ledger, 0);
  gint64 mark = fixture_keep (f->ledger, frame, person, 0, 0, 1);
  fixture_count (f->ledger, 1, 0);
  g_autoptr (TfRow) row = tf_ledger_row (f->ledger, mark, FALSE, NULL);
  g_assert_cmpstr (row->region, ==, "T2013-0001");
  g_assert_cmpstr (row->origin, ==, "drawn new");
  g_assert_cmpstr (row->person, ==, "north");
  g_assert_cmpstr (row->label, ==, "one");
  g_assert_cmpstr (row->kind, ==, "disk");
  g_assert_cmpstr (row->vantage, ==, "earth");
  g_assert_cmpstr (row->method, ==, "flux-centroid/1 floor-kind=even");
  g_assert_cmpstr (row->time_source, ==, "T_OBS");
  g_assert_cmpstr (row->passage, ==, row->mark_id);
  g_assert_cmpuint (strlen (row->mark_id), ==, 32);
  g_assert_true (row->simulated);
  g_autoptr (TfOutline) outline = fixture_outline (1);
  g_assert_true (tf_outline_equal (row->outline, outline));
  gint64 next = fixture_keep (f->ledger, frame, person, 0, 0, 2);
  g_autoptr (TfRow) second = tf_ledger_row (f->ledger, next, FALSE, NULL);
  g_assert_cmpstr (second->region, ==, "T2013-0002");
  fixture_check (f->ledger, "");
}

/* Every member of the measure comes back as it went in, to the last bit. */
static void
test_measure_comes_back (Fixture *f, gconstpointer data)
{
  gint64 person = north (f), frame = fixture_frame (f->ledger, 0);
  gint64 mark = fixture_keep (f->ledger, frame, person, 0, 0, 3);
  g_auto (TfMeasure) given = { 0 };
  fixture_measure (&given, 3);
  g_autoptr (TfRow) row = tf_ledger_row (f->ledger, mark, FALSE, NULL);
  g_autoptr (JsonBuilder) a = json_builder_new (), b = json_builder_new ();
  json_builder_begin_object (a);
  tf_measure_build_members (&given, a);
  json_builder_end_object (a);
  json_builder_begin_object (b);
  tf_measure_build_members (&row->measure, b);
  json_builder_end_object (b);
  g_autofree char *before = tf_json_dup_text (a, FALSE), *after = tf_json_dup_text (b, FALSE);
  g_assert_cmpstr (before, ==, after);
  g_assert_cmpint (row->measure.witnesses[2], ==, TF_WITNESS_ABSENT);
  tf_check_nan ("scale", row->measure.scale);
  tf_check_near ("outline term", row->measure.tilt_terms.outline, 0.9, 0);
  tf_check_near ("flux noise", row->measure.positive.rms_radius_deg, 1.5, 0);
}

static void
test_hint_is_judged (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (GPtrArray) hints = fixture_hints (1);
  gint64 person = north (f), frame = fixture_frame (f->ledger, 1);
  g_assert_true (
      tf_ledger_add_hints (f->ledger, frame, "plain/1", hints, "flux-centroid/1", &error));
  fixture_count (f->ledger, 0, 3);
  gint64 first = fixture_hint (f->ledger, 0), second = fixture_hint (f->ledger, 1);
  gint64 mark = fixture_keep (f->ledger, frame, person, first, 0, 10);
  fixture_count (f->ledger, 1, 2);
  g_assert_true (tf_ledger_drop_hint (f->ledger, second, person, &error));
  fixture_count (f->ledger, 1, 1);
  g_assert_false (tf_ledger_drop_hint (f->ledger, second, person, &error));
  g_assert_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE);
  g_clear_error (&error);
  g_autoptr (TfFrameRow) row = tf_ledger_frame (f->ledger, frame, NULL);
  g_assert_cmpuint (row->n_hints, ==, 1);
  g_assert_cmpuint (row->n_marks, ==, 1);
  g_assert_false (row->done);
  g_autoptr (GPtrArray) all
      = tf_ledger_rows (f->ledger, &(TfRowQuery){ .hints = TRUE, .judged_hints = TRUE }, &error);
  g_assert_cmpuint (all->len, ==, 3);
  g_autoptr (GPtrArray) bare
      = tf_ledger_rows (f->ledger, &(TfRowQuery){ .marks = TRUE, .no_outlines = TRUE }, &error);
  g_assert_cmpuint (bare->len, ==, 1);
  g_assert_null (((TfRow *)g_ptr_array_index (bare, 0))->outline);
  g_assert_true (tf_ledger_withdraw (f->ledger, mark, person, &error));
  fixture_count (f->ledger, 0, 2);
  fixture_check (f->ledger, "");
}

static void
test_follow_takes_the_place (Fixture *f, gconstpointer data)
{
  gint64 person = north (f), other = tf_ledger_person (f->ledger, "south", NULL),
         frame = fixture_frame (f->ledger, 0);
  gint64 one = fixture_keep (f->ledger, frame, person, 0, 0, 1);
  gint64 two = fixture_keep (f->ledger, frame, person, 0, one, 2);
  fixture_count (f->ledger, 1, 0);
  g_assert_cmpint (fixture_region (f->ledger, two), ==, fixture_region (f->ledger, one));
  /* another person's mark of the same region stands beside it */
  gint64 three = fixture_keep (f->ledger, frame, other, 0, two, 3);
  fixture_count (f->ledger, 2, 0);
  g_assert_cmpint (fixture_region (f->ledger, three), ==, fixture_region (f->ledger, one));
  g_assert_true (tf_ledger_undo (f->ledger, person, NULL, NULL));
  fixture_count (f->ledger, 2, 0);
  g_autoptr (TfRow) row = tf_ledger_row (f->ledger, one, FALSE, NULL);
  g_assert_nonnull (row);
  fixture_check (f->ledger, "");
}

static void
test_refusals (Fixture *f, gconstpointer data)
{
  gint64 person = north (f), other = tf_ledger_person (f->ledger, "south", NULL),
         frame = fixture_frame (f->ledger, 0);
  gint64 mark = fixture_keep (f->ledger, frame, person, 0, 0, 1),
         far = fixture_frame (f->ledger, 1);
  GError *error = NULL;
  g_assert_false (tf_ledger_withdraw (f->ledger, mark, other, &error));
  g_assert_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE);
  g_clear_error (&error);
  g_assert_false (tf_ledger_withdraw (f->ledger, mark + 99, person, &error));
  g_assert_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE);
  g_clear_error (&error);
  g_autoptr (TfOutline) outline = fixture_outline (2);
  g_auto (TfMeasure) measure = { 0 };
  fixture_measure (&measure, 2);
  TfMarkDeed deed = { .frame = far,
                      .person = person,
                      .follows = mark,
                      .outline = outline,
                      .measure = &measure,
                      .method = "m" };
  g_assert_cmpint (tf_ledger_keep (f->ledger, &deed, &error), ==, 0);
  g_assert_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE);
  g_clear_error (&error);
  deed.follows = 0;
  deed.person = 77;
  g_assert_cmpint (tf_ledger_keep (f->ledger, &deed, &error), ==, 0);
  g_assert_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE);
  g_clear_error (&error);
  g_assert_true (tf_ledger_withdraw (f->ledger, mark, person, &error));
  g_assert_false (tf_ledger_withdraw (f->ledger, mark, person, &error));
  g_assert_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE);
  g_clear_error (&error);
  fixture_count (f->ledger, 0, 0);
  fixture_check (f->ledger, "");
}

static void
check_row_text (Fixture *f, gint64 mark, const char *note, const char *mw_class)
{
  g_autoptr (TfRow) row = tf_ledger_row (f->ledger, mark, FALSE, NULL);
  g_assert_cmpstr (row->note, ==, note);
  g_assert_cmpstr (row->mw_class, ==, mw_class);
}

static void
test_notes_and_classes (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  gint64 person = north (f), other = tf_ledger_person (f->ledger, "south", NULL),
         frame = fixture_frame (f->ledger, 0);
  gint64 mark = fixture_keep (f->ledger, frame, person, 0, 0, 1),
         region = fixture_region (f->ledger, mark);
  g_assert_true (tf_ledger_set_note (f->ledger, region, person, "watch \"it\"\n", &error));
  g_assert_true (
      tf_ledger_set_class (f->ledger, region, frame, person, "βγ", "magnetogram", &error));
  check_row_text (f, mark, "watch \"it\"\n", "βγ");
  g_assert_true (tf_ledger_set_class (f->ledger, region, frame, other, "β", "magnetogram", &error));
  check_row_text (f, mark, "watch \"it\"\n", "βγ"); /* the mark's own person's */
  g_assert_true (tf_ledger_set_note (f->ledger, region, person, "quiet", &error));
  g_assert_true (tf_ledger_set_class (f->ledger, region, frame, person, "", NULL, &error));
  check_row_text (f, mark, "quiet", "β");
  g_assert_true (tf_ledger_undo (f->ledger, person, NULL, &error));
  check_row_text (f, mark, "quiet", "βγ");
  g_assert_true (tf_ledger_undo (f->ledger, person, NULL, &error));
  check_row_text (f, mark, "watch \"it\"\n", "βγ");
  g_assert_no_error (error);
  fixture_check (f->ledger, "");
}

enum
{
  DEEDS = 24
};

/* Deeds of all kinds, all undone, all done again; at every step what was there before is there. */
static void
test_undo_all_redo_all (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (GPtrArray) hints = fixture_hints (1);
  gint64 person = north (f), frame = fixture_frame (f->ledger, 1), mark = 0;
  g_assert_true (
      tf_ledger_add_hints (f->ledger, frame, "plain/1", hints, "flux-centroid/1", &error));
  guint marks[DEEDS + 1] = { 0 }, open[DEEDS + 1] = { 3 };
  gint64 first = fixture_hint (f->ledger, 0), second = fixture_hint (f->ledger, 1);
  for (int k = 0; k < DEEDS; k++)
    {
      marks[k + 1] = marks[k];
      open[k + 1] = open[k];
      if (k == 0)
        {
          mark = fixture_keep (f->ledger, frame, person, first, 0, k);
          marks[k + 1]++, open[k + 1]--;
        }
      else if (k == 1)
        {
          g_assert_true (tf_ledger_drop_hint (f->ledger, second, person, &error));
          open[k + 1]--;
        }
      else if (k % 5 == 2)
        g_assert_true (tf_ledger_set_note (f->ledger, fixture_region (f->ledger, mark), person,
                                           "note", &error));
      else if (k % 5 == 3)
        mark = fixture_keep (f->ledger, frame, person, 0, mark, k);
      else if (k % 5 == 4)
        {
          mark = fixture_keep (f->ledger, frame, person, 0, 0, k);
          marks[k + 1]++;
        }
      else if (k % 10 == 5)
        {
          g_assert_true (tf_ledger_withdraw (f->ledger, mark, person, &error));
          marks[k + 1]--;
          mark = fixture_keep (f->ledger, frame, person, 0, 0, k);
          k++;
          g_assert_cmpint (k, <, DEEDS);
          marks[k + 1] = marks[k] + 1;
          open[k + 1] = open[k];
        }
      else
        g_assert_true (tf_ledger_set_class (f->ledger, fixture_region (f->ledger, mark), frame,
                                            person, "β", "m", &error));
      fixture_count (f->ledger, marks[k + 1], open[k + 1]);
    }
  g_assert_false (tf_ledger_can_redo (f->ledger, person));
  for (int k = DEEDS - 1; k >= 0; k--)
    {
      g_auto (TfUndone) undone = { 0 };
      g_assert_true (tf_ledger_can_undo (f->ledger, person));
      g_assert_true (tf_ledger_undo (f->ledger, person, &undone, &error));
      g_assert_nonnull (undone.what);
      fixture_count (f->ledger, marks[k], open[k]);
    }
  g_assert_false (tf_ledger_can_undo (f->ledger, person));
  g_assert_false (tf_ledger_undo (f->ledger, person, NULL, &error));
  g_assert_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE);
  g_clear_error (&error);
  fixture_check (f->ledger, "");
  fixture_reopen (f);
  for (int k = 0; k < DEEDS; k++)
    {
      g_assert_true (tf_ledger_redo (f->ledger, person, NULL, &error));
      fixture_count (f->ledger, marks[k + 1], open[k + 1]);
    }
  g_assert_false (tf_ledger_redo (f->ledger, person, NULL, &error));
  g_assert_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE);
  fixture_check (f->ledger, "");
}

static void
test_new_deed_ends_redo (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  gint64 person = north (f), frame = fixture_frame (f->ledger, 0);
  fixture_keep (f->ledger, frame, person, 0, 0, 1);
  fixture_keep (f->ledger, frame, person, 0, 0, 2);
  g_assert_true (tf_ledger_undo (f->ledger, person, NULL, &error));
  g_assert_true (tf_ledger_can_redo (f->ledger, person));
  gint64 mark = fixture_keep (f->ledger, frame, person, 0, 0, 3);
  g_assert_false (tf_ledger_can_redo (f->ledger, person));
  g_autoptr (TfRow) row = tf_ledger_row (f->ledger, mark, FALSE, NULL);
  g_assert_cmpstr (row->region, ==, "T2013-0003"); /* a number is not given twice */
  g_assert_true (tf_ledger_undo (f->ledger, person, NULL, &error));
  g_assert_true (tf_ledger_undo (f->ledger, person, NULL, &error));
  fixture_count (f->ledger, 0, 0);
  g_assert_true (tf_ledger_redo (f->ledger, person, NULL, &error));
  g_assert_true (tf_ledger_redo (f->ledger, person, NULL, &error));
  g_assert_false (tf_ledger_can_redo (f->ledger, person)); /* not the one a new deed buried */
  fixture_count (f->ledger, 2, 0);
  fixture_check (f->ledger, "");
}

static void
test_undo_is_one_persons (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  gint64 person = north (f), other = tf_ledger_person (f->ledger, "south", NULL),
         frame = fixture_frame (f->ledger, 0);
  gint64 mine = fixture_keep (f->ledger, frame, person, 0, 0, 1);
  fixture_keep (f->ledger, frame, other, 0, 0, 2);
  g_assert_true (tf_ledger_undo (f->ledger, other, NULL, &error));
  g_assert_false (tf_ledger_can_undo (f->ledger, other));
  fixture_count (f->ledger, 1, 0);
  g_assert_cmpint (fixture_region (f->ledger, mine), !=, 0);
}

static void
test_journal (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  gint64 person = north (f), frame = fixture_frame (f->ledger, 0);
  fixture_keep (f->ledger, frame, person, 0, 0, 1);
  f->now += 5000;
  g_assert_true (tf_ledger_undo (f->ledger, person, NULL, &error));
  g_autoptr (GPtrArray) entries = tf_ledger_journal (f->ledger, 3, &error);
  g_assert_no_error (error);
  g_assert_cmpuint (entries->len, ==, 3);
  const TfJournalEntry *undo = g_ptr_array_index (entries, 0),
                       *keep = g_ptr_array_index (entries, 1);
  g_assert_cmpstr (undo->kind, ==, "undo");
  g_assert_cmpstr (keep->kind, ==, "keep");
  g_assert_cmpstr (keep->person, ==, "north");
  g_assert_true (keep->undone);
  g_assert_false (undo->undone);
  g_autofree char *wall = tf_time_dup_iso (undo->wall, 0);
  g_assert_cmpstr (wall, ==, "2013-10-12T06:00:05Z");
}

static void
test_draft (Fixture *f, gconstpointer data)
{
  gint64 person = north (f), frame = fixture_frame (f->ledger, 0);
  g_assert_null (tf_ledger_dup_draft (f->ledger, frame, person));
  g_assert_true (tf_ledger_set_draft (f->ledger, frame, person, "stroke", NULL));
  g_assert_true (tf_ledger_set_draft (f->ledger, frame, person, "strokes", NULL));
  fixture_reopen (f);
  g_autofree char *draft = tf_ledger_dup_draft (f->ledger, frame, person);
  g_assert_cmpstr (draft, ==, "strokes");
  g_assert_true (tf_ledger_set_draft (f->ledger, frame, person, NULL, NULL));
  g_assert_null (tf_ledger_dup_draft (f->ledger, frame, person));
}

/* A draft that is kept is no draft any more, at whatever moment the program ends; another's stays. */
static void
test_draft_kept (Fixture *f, gconstpointer data)
{
  gint64 person = north (f), frame = fixture_frame (f->ledger, 0),
         other = tf_ledger_person (f->ledger, "south", NULL);
  g_autoptr (TfOutline) outline = fixture_outline (1);
  g_auto (TfMeasure) measure = { 0 };
  fixture_measure (&measure, 1);
  TfMarkDeed deed = { .frame = frame,
                      .person = person,
                      .origin = TF_MARK_DRAWN,
                      .outline = outline,
                      .measure = &measure,
                      .method = "m" };
  g_assert_true (tf_ledger_set_draft (f->ledger, frame, person, "stroke", NULL));
  g_assert_true (tf_ledger_set_draft (f->ledger, frame, other, "another", NULL));
  g_assert_cmpint (tf_ledger_keep (f->ledger, &deed, NULL), !=, 0);
  g_autofree char *beside = tf_ledger_dup_draft (f->ledger, frame, person);
  g_assert_cmpstr (beside, ==, "stroke"); /* a hint was kept beside it */
  deed.ends_draft = TRUE;
  g_assert_cmpint (tf_ledger_keep (f->ledger, &deed, NULL), !=, 0);
  g_assert_null (tf_ledger_dup_draft (f->ledger, frame, person));
  g_autofree char *others = tf_ledger_dup_draft (f->ledger, frame, other);
  g_assert_cmpstr (others, ==, "another");
}

/* The disk as a person puts it: kept, replaced, undone, taken back to the header; nobody else's. */
static void
test_geometry (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  gint64 person = north (f), frame = fixture_frame (f->ledger, 0);
  TfCorrection one = { 511.5, 512.25, 480.125, -12.5 }, two = { 510, 512, 481, 0 },
               none = tf_correction_none ();
  const TfCorrection *steps[] = { &one, &two, &none };
  for (guint k = 0; k < G_N_ELEMENTS (steps); k++)
    {
      g_assert_true (tf_ledger_set_geometry (f->ledger, frame, person, steps[k], &error));
      g_autoptr (TfFrameRow) row = tf_ledger_frame (f->ledger, frame, &error);
      TfCorrection now = tf_frame_row_get_correction (row, "north");
      g_assert_true (tf_correction_equal (&now, steps[k]));
      TfCorrection other = tf_frame_row_get_correction (row, "south");
      g_assert_false (tf_correction_is_set (&other));
      fixture_check (f->ledger, "");
    }
  g_auto (TfUndone) undone = { 0 };
  g_assert_true (tf_ledger_undo (f->ledger, person, &undone, &error));
  g_assert_cmpstr (undone.what, ==, "geometry");
  g_autoptr (TfFrameRow) row = tf_ledger_frame (f->ledger, frame, &error);
  TfCorrection now = tf_frame_row_get_correction (row, "north");
  g_assert_true (tf_correction_equal (&now, &two));
  fixture_check (f->ledger, "");
}

void
add_acts_tests (void)
{
  FIXTURE_TEST ("/ledger/acts/a-person-is-recorded-once", test_person_once);
  FIXTURE_TEST ("/ledger/acts/a-kept-outline-is-a-region-with-a-number", test_keep_new_region);
  FIXTURE_TEST ("/ledger/acts/a-measure-comes-back-bit-for-bit", test_measure_comes_back);
  FIXTURE_TEST ("/ledger/acts/a-judged-hint-is-no-longer-open", test_hint_is_judged);
  FIXTURE_TEST ("/ledger/acts/a-mark-that-follows-takes-the-place-of-ones-own",
                test_follow_takes_the_place);
  FIXTURE_TEST ("/ledger/acts/deeds-that-do-not-fit-are-refused-whole", test_refusals);
  FIXTURE_TEST ("/ledger/acts/notes-and-classes-are-the-last-one-that-stands",
                test_notes_and_classes);
  FIXTURE_TEST ("/ledger/acts/all-deeds-are-undone-and-done-again", test_undo_all_redo_all);
  FIXTURE_TEST ("/ledger/acts/a-new-deed-ends-what-could-be-redone", test_new_deed_ends_redo);
  FIXTURE_TEST ("/ledger/acts/a-geometry-is-one-persons-own", test_geometry);
  FIXTURE_TEST ("/ledger/acts/undo-is-one-persons-own", test_undo_is_one_persons);
  FIXTURE_TEST ("/ledger/acts/the-journal-says-who-did-what-and-when", test_journal);
  FIXTURE_TEST ("/ledger/acts/a-draft-lives-until-it-is-taken-away", test_draft);
  FIXTURE_TEST ("/ledger/acts/a-draft-ends-with-its-keep", test_draft_kept);
}
