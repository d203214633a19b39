/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Deeds done as one, and a person's facts about a region: label and external number. */

#include "test-ledger.h"

#include <string.h>

static gint64
north (Fixture *f)
{
  g_autoptr (GError) error = NULL;
  gint64 person = tf_ledger_person (f->ledger, "north", &error);
  g_assert_no_error (error);
  return person;
}

/* One mark in two: the old one's place is taken by the first half, the second is a new region. */
static gint64
split (Fixture *f, gint64 person, gint64 mark, gboolean ok)
{
  g_autoptr (GError) error = NULL;
  g_assert_true (tf_ledger_begin_bundle (f->ledger, "split", &error));
  fixture_keep (f->ledger, 1, person, 0, mark, 2);
  gint64 other = fixture_keep (f->ledger, 1, person, 0, 0, 3);
  g_assert_true (tf_ledger_end_bundle (f->ledger, ok, &error) == ok);
  return other;
}

static void
test_undone_as_one (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  g_auto (TfUndone) undone = { 0 };
  gint64 person = north (f), frame = fixture_frame (f->ledger, 1);
  gint64 mark = fixture_keep (f->ledger, frame, person, 0, 0, 1);
  split (f, person, mark, TRUE);
  fixture_count (f->ledger, 2, 0);
  g_assert_true (tf_ledger_undo (f->ledger, person, &undone, &error));
  g_assert_cmpstr (undone.what, ==, "split");
  g_assert_cmpint (undone.frame, ==, frame);
  fixture_count (f->ledger, 1, 0);
  fixture_check (f->ledger, "");
  fixture_reopen (f);
  g_assert_true (tf_ledger_redo (f->ledger, person, NULL, &error));
  fixture_count (f->ledger, 2, 0);
  g_assert_true (tf_ledger_undo (f->ledger, person, NULL, &error));
  g_assert_true (tf_ledger_undo (f->ledger, person, NULL, &error));
  g_assert_false (tf_ledger_can_undo (f->ledger, person));
  fixture_count (f->ledger, 0, 0);
  fixture_check (f->ledger, "");
}

static void
test_all_or_none (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  gint64 person = north (f), frame = fixture_frame (f->ledger, 1);
  gint64 mark = fixture_keep (f->ledger, frame, person, 0, 0, 1);
  split (f, person, mark, FALSE);
  fixture_count (f->ledger, 1, 0);
  g_assert_true (tf_ledger_begin_bundle (f->ledger, "several", &error));
  g_assert_true (tf_ledger_withdraw (f->ledger, mark, person, &error));
  g_assert_false (tf_ledger_withdraw (f->ledger, mark, person, &error)); /* it is gone already */
  g_clear_error (&error);
  g_assert_false (tf_ledger_withdraw (f->ledger, mark, person, &error)); /* all of it failed */
  g_assert_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE);
  g_assert_false (tf_ledger_end_bundle (f->ledger, FALSE, NULL));
  fixture_count (f->ledger, 1, 0);
  fixture_reopen (f); /* the replica's own state did not run ahead: no fork */
  g_assert_cmpuint (tf_notes_get_n (tf_ledger_get_notices (f->ledger)), ==, 0);
  fixture_check (f->ledger, "");
}

static TfRow *
row_of (Fixture *f, gint64 mark)
{
  g_autoptr (GError) error = NULL;
  TfRow *row = tf_ledger_row (f->ledger, mark, FALSE, &error);
  g_assert_no_error (error);
  return row;
}

static void
test_facts (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  gint64 person = north (f), other = tf_ledger_person (f->ledger, "south", NULL),
         frame = fixture_frame (f->ledger, 1);
  gint64 mark = fixture_keep (f->ledger, frame, person, 0, 0, 1),
         region = fixture_region (f->ledger, mark);
  g_assert_true (tf_ledger_set_label (f->ledger, region, person, "the old one", &error));
  g_assert_true (tf_ledger_set_external (f->ledger, region, other, "11861", &error));
  g_autoptr (TfRow) row = row_of (f, mark);
  g_assert_cmpstr (row->label, ==, "the old one");
  g_assert_cmpstr (row->external, ==, "11861"); /* nobody else has said one */
  g_autofree char *seen
      = fixture_sql_text (f->path, "SELECT label || '/' || external_number FROM marks");
  g_assert_cmpstr (seen, ==, "the old one/11861");
  fixture_check (f->ledger, "");
  g_assert_true (tf_ledger_undo (f->ledger, person, NULL, &error));
  g_assert_true (tf_ledger_set_external (f->ledger, region, other, "", &error));
  g_autoptr (TfRow) bare = row_of (f, mark);
  g_assert_cmpstr (bare->label, !=, "the old one");
  g_assert_cmpstr (bare->external, ==, "");
  fixture_check (f->ledger, "");
}

static void
test_journal_of_region (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  gint64 person = north (f), frame = fixture_frame (f->ledger, 1);
  gint64 mark = fixture_keep (f->ledger, frame, person, 0, 0, 1);
  fixture_keep (f->ledger, frame, person, 0, 0, 2);
  split (f, person, mark, TRUE);
  gint64 region = fixture_region (f->ledger, mark);
  g_assert_true (tf_ledger_set_label (f->ledger, region, person, "mine", &error));
  g_assert_true (tf_ledger_undo (f->ledger, person, NULL, &error));
  g_autoptr (GPtrArray) list = tf_ledger_journal_of (f->ledger, region, 20, &error);
  g_assert_cmpuint (list->len, ==, 4); /* keep, keep in the split, label, undo */
  const TfJournalEntry *undo = list->pdata[0], *label = list->pdata[1], *part = list->pdata[2];
  g_assert_cmpstr (undo->of, ==, "label");
  g_assert_cmpstr (undo->text, ==, "mine");
  g_assert_cmpstr (label->text, ==, "mine");
  g_assert_true (label->undone);
  g_assert_cmpstr (part->as, ==, "split");
  g_assert_true (g_str_has_prefix (part->region, "T2013-"));
  g_assert_cmpstr (part->frame_time, !=, "");
}

/* A ledger as the version before this one made it. */
static void
test_older (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  gint64 person = north (f), frame = fixture_frame (f->ledger, 1);
  fixture_keep (f->ledger, frame, person, 0, 0, 1);
  g_clear_pointer (&f->ledger, tf_ledger_close);
  fixture_sql (f->path,
               "DROP VIEW marks; DROP VIEW hints; CREATE VIEW marks AS SELECT 1; CREATE VIEW hints "
               "AS SELECT 1; DROP TABLE scale; DROP TABLE fact; DROP TABLE pack; DROP TABLE brief; DROP INDEX frame_brief; ALTER TABLE deed DROP COLUMN "
               "bundle; PRAGMA user_version = 6");
  fixture_reopen (f);
  g_assert_cmpstr (tf_note_get_code (tf_notes_get (tf_ledger_get_notices (f->ledger), 0)), ==,
                   "ledger-migrated");
  fixture_check (f->ledger, "");
  g_assert_true (tf_ledger_undo (f->ledger, person, NULL, &error));
  fixture_count (f->ledger, 0, 0);
  fixture_check (f->ledger, "");
}

void
add_together_tests (void)
{
  FIXTURE_TEST ("/ledger/together/undone-and-done-again-as-one", test_undone_as_one);
  FIXTURE_TEST ("/ledger/together/all-of-it-or-none", test_all_or_none);
  FIXTURE_TEST ("/ledger/together/label-and-external-number", test_facts);
  FIXTURE_TEST ("/ledger/together/the-journal-of-a-region", test_journal_of_region);
  FIXTURE_TEST ("/ledger/together/a-ledger-made-before", test_older);
}
