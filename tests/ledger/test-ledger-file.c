/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Making, opening, migrating; copies noticed; two at once. */

#include "test-ledger.h"

#include <string.h>
#include <unistd.h>

static void
keep_one (Fixture *f, TfLedger *ledger, int n)
{
  fixture_keep (ledger, fixture_frame (ledger, 0), tf_ledger_person (ledger, "north", NULL), 0, 0,
                n);
}

static const char *
notice (TfLedger *ledger)
{
  const TfNotes *notices = tf_ledger_get_notices (ledger);
  return tf_notes_get_n (notices) > 0 ? tf_note_get_code (tf_notes_get (notices, 0)) : "";
}

static void
check_open_fails (const char *path, TfLedgerError code)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfLedger) ledger = tf_ledger_open (path, &error);
  g_assert_null (ledger);
  g_assert_error (error, TF_LEDGER_ERROR, (int)code);
  g_autofree char *name = g_path_get_basename (path);
  g_assert_nonnull (strstr (error->message, name));
}

static void
test_create (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  g_assert_null (tf_ledger_create (f->path, 'A', &error));
  g_assert_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_OPEN);
  g_clear_error (&error);
  g_autofree char *other = g_build_filename (f->folder, "a [b] ü%20?#.ledger", NULL);
  g_assert_null (tf_ledger_create (other, 'a', &error));
  g_assert_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE);
  g_clear_error (&error);
  g_assert_false (g_file_test (other, G_FILE_TEST_EXISTS));
  g_autoptr (TfLedger) ledger = tf_ledger_create (other, 'Q', &error);
  g_assert_no_error (error);
  g_assert_cmpstr (tf_ledger_get_path (ledger), ==, other);
  g_assert_null (tf_ledger_get_read_only (ledger));
  fixture_check (ledger, "");
  g_autofree char *modes = fixture_sql_text (
      other, "SELECT (SELECT journal_mode FROM pragma_journal_mode) || ' ' || (SELECT"
             " application_id FROM pragma_application_id) || ' ' || (SELECT user_version > 0"
             " FROM pragma_user_version)");
  g_assert_cmpstr (modes, ==, "wal 1413901412 1");
  g_autofree char *loose = fixture_sql_text (
      other, "SELECT count (*) FROM pragma_table_list WHERE schema = 'main' AND type ="
             " 'table' AND strict = 0 AND name NOT LIKE 'sqlite%'");
  g_assert_cmpstr (loose, ==, "0");
}

static void
test_not_a_ledger (Fixture *f, gconstpointer data)
{
  g_autofree char *text = g_build_filename (f->folder, "notes.txt", NULL),
                  *other = g_build_filename (f->folder, "x.db", NULL);
  g_autofree char *gone = g_build_filename (f->folder, "gone.ledger", NULL),
                  *empty = g_build_filename (f->folder, "e", NULL);
  g_autofree char *before = NULL, *after = NULL;
  gsize n, m;
  g_file_set_contents (
      text, "Not a database at all, but long enough to have the sixteen bytes of a header.", -1,
      NULL);
  g_file_set_contents (empty, "", 0, NULL);
  fixture_sql (other, "CREATE TABLE t (a)");
  g_file_get_contents (other, &before, &n, NULL);
  check_open_fails (text, TF_LEDGER_ERROR_OPEN);
  check_open_fails (gone, TF_LEDGER_ERROR_OPEN);
  check_open_fails (empty, TF_LEDGER_ERROR_OPEN);
  check_open_fails (other, TF_LEDGER_ERROR_OPEN);
  check_open_fails (f->folder, TF_LEDGER_ERROR_OPEN);
  g_file_get_contents (other, &after, &m, NULL);
  g_assert_cmpmem (before, n, after, m);
  g_assert_false (g_file_test (gone, G_FILE_TEST_EXISTS));
}

static char *
find_backup (Fixture *f)
{
  g_autoptr (GDir) dir = g_dir_open (f->folder, 0, NULL);
  const char *name;
  while ((name = g_dir_read_name (dir)) != NULL)
    if (g_str_has_prefix (name, "old.version-0.2013-10-12T06-00-00Z")
        && g_str_has_suffix (name, ".ledger"))
      return g_build_filename (f->folder, name, NULL);
  return NULL;
}

/* Version 0: the stamp and none of our tables yet. What is in it stays, and the file as it was
 * lies beside it. */
static void
test_migration (Fixture *f, gconstpointer data)
{
  static const char kept[]
      = "SELECT (SELECT a FROM keepsake) || ' ' || (SELECT user_version FROM pragma_user_version)";
  g_autoptr (GError) error = NULL;
  g_autofree char *path = g_build_filename (f->folder, "old.ledger", NULL);
  fixture_sql (path, "PRAGMA application_id = 1413901412; CREATE TABLE keepsake (a); INSERT INTO "
                     "keepsake VALUES (42)");
  g_autoptr (TfLedger) ledger = fixture_open (f, path, &error);
  g_assert_no_error (error);
  g_assert_cmpstr (notice (ledger), ==, "ledger-migrated");
  g_autofree char *backup = find_backup (f);
  g_assert_nonnull (backup);
  g_autofree char *said = tf_note_dup_text (tf_notes_get (tf_ledger_get_notices (ledger), 0), TRUE);
  g_assert_nonnull (strstr (said, backup));
  keep_one (f, ledger, 1);
  fixture_check (ledger, "check-schema"); /* a table of nobody's */
  g_autofree char *now = fixture_sql_text (path, kept), *then = fixture_sql_text (backup, kept);
  g_autofree char *newest
      = fixture_sql_text (f->path, "SELECT '42 ' || user_version FROM pragma_user_version");
  g_assert_cmpstr (now, ==, newest);
  g_assert_cmpstr (then, ==, "42 0");
  g_clear_pointer (&ledger, tf_ledger_close);
  ledger = fixture_open (f, path, &error);
  g_assert_cmpstr (notice (ledger), ==, "");
}

static void
test_newer (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  gint64 person = tf_ledger_person (f->ledger, "north", NULL), frame = fixture_frame (f->ledger, 0);
  fixture_keep (f->ledger, frame, person, 0, 0, 1);
  g_clear_pointer (&f->ledger, tf_ledger_close);
  fixture_sql (f->path, "PRAGMA user_version = 7000");
  fixture_reopen (f);
  g_assert_cmpstr (tf_note_get_code (tf_ledger_get_read_only (f->ledger)), ==,
                   "ledger-newer-version");
  fixture_count (f->ledger, 1, 0);
  g_assert_false (tf_ledger_undo (f->ledger, person, NULL, &error));
  g_assert_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_READ_ONLY);
  g_assert_false (tf_ledger_can_undo (f->ledger, person));
  g_clear_error (&error);
  g_assert_cmpint (tf_ledger_person (f->ledger, "south", &error), ==, 0);
  g_assert_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_READ_ONLY);
}

static void
copy_file (const char *from, const char *to)
{
  g_autofree char *bytes = NULL;
  gsize n;
  g_assert_true (g_file_get_contents (from, &bytes, &n, NULL));
  g_assert_true (g_file_set_contents (to, bytes, (gssize)n, NULL));
}

static char *
replicas (const char *path)
{
  return fixture_sql_text (path, "SELECT group_concat (upto, ' ') FROM have");
}

static void
check_replicas (Fixture *f, const char *expected)
{
  g_autofree char *counts = replicas (f->path);
  g_assert_cmpstr (counts, ==, expected);
}

static void
test_one_line (Fixture *f, gconstpointer data)
{
  for (int k = 0; k < 3; k++)
    {
      keep_one (f, f->ledger, k);
      fixture_reopen (f);
      g_assert_cmpstr (notice (f->ledger), ==, "");
    }
  check_replicas (f, "5");
}

/* A backup put back over the file: acts that were recorded here are gone. */
static void
test_restored (Fixture *f, gconstpointer data)
{
  g_autofree char *backup = g_build_filename (f->folder, "backup", NULL);
  keep_one (f, f->ledger, 1);
  g_clear_pointer (&f->ledger, tf_ledger_close);
  copy_file (f->path, backup);
  fixture_reopen (f);
  keep_one (f, f->ledger, 2);
  g_clear_pointer (&f->ledger, tf_ledger_close);
  copy_file (backup, f->path);
  fixture_reopen (f);
  g_assert_cmpstr (notice (f->ledger), ==, "ledger-older-copy");
  keep_one (f, f->ledger, 3);
  check_replicas (f, "3 2");
  fixture_check (f->ledger, "");
  fixture_reopen (f);
  g_assert_cmpstr (notice (f->ledger), ==, "");
  keep_one (f, f->ledger, 4);
  check_replicas (f, "3 3");
}

/* A copy beside the original; both are worked in, in turns. No act of one has the name of an act
 * of the other. */
static void
test_copied (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  g_autofree char *copy = g_build_filename (f->folder, "copy.ledger", NULL);
  keep_one (f, f->ledger, 1);
  g_clear_pointer (&f->ledger, tf_ledger_close);
  copy_file (f->path, copy);
  fixture_reopen (f);
  g_autoptr (TfLedger) second = fixture_open (f, copy, &error);
  g_assert_no_error (error);
  g_assert_cmpstr (notice (f->ledger), ==, "");
  g_assert_cmpstr (notice (second), ==, "ledger-copied");
  keep_one (f, f->ledger, 2);
  keep_one (f, second, 3);
  keep_one (f, f->ledger, 4);
  g_autofree char *a = replicas (f->path), *b = replicas (copy);
  g_assert_cmpstr (a, ==, "5");
  g_assert_cmpstr (b, ==, "3 2");
  fixture_check (second, "");
}

/* Moved, it goes on as what it was. */
static void
test_moved (Fixture *f, gconstpointer data)
{
  g_autofree char *elsewhere = g_build_filename (f->folder, "elsewhere.ledger", NULL);
  keep_one (f, f->ledger, 1);
  g_clear_pointer (&f->ledger, tf_ledger_close);
  copy_file (f->path, elsewhere);
  g_unlink (f->path);
  g_autoptr (TfLedger) ledger = fixture_open (f, elsewhere, NULL);
  g_assert_cmpstr (notice (ledger), ==, "");
  keep_one (f, ledger, 2);
  g_autofree char *counts = replicas (elsewhere);
  g_assert_cmpstr (counts, ==, "4");
}

/* Another user, or another machine: no state of this ledger's replicas here, or one that another
 * machine wrote. */
static void
test_elsewhere (Fixture *f, gconstpointer data)
{
  keep_one (f, f->ledger, 1);
  g_clear_pointer (&f->ledger, tf_ledger_close);
  g_autofree char *mine = g_strdup (f->state);
  g_free (f->state);
  f->state = g_build_filename (f->folder, "state-of-another", NULL);
  fixture_reopen (f);
  g_assert_cmpstr (notice (f->ledger), ==, "ledger-from-elsewhere");
  keep_one (f, f->ledger, 2);
  check_replicas (f, "3 2");
  g_free (f->state);
  f->state = g_steal_pointer (&mine);
  fixture_reopen (f);
  g_assert_cmpstr (notice (f->ledger), ==, "");
  keep_one (f, f->ledger, 3);
  check_replicas (f, "4 2");
  g_autoptr (GDir) dir = g_dir_open (f->state, 0, NULL);
  const char *name;
  while ((name = g_dir_read_name (dir)) != NULL)
    {
      g_autofree char *path = g_build_filename (f->state, name, NULL);
      g_autoptr (GKeyFile) state = g_key_file_new ();
      g_assert_true (g_key_file_load_from_file (state, path, G_KEY_FILE_NONE, NULL));
      g_key_file_set_string (state, "replica", "machine", "another");
      g_assert_true (g_key_file_save_to_file (state, path, NULL));
    }
  fixture_reopen (f);
  g_assert_cmpstr (notice (f->ledger), ==, "ledger-from-elsewhere");
}

/* A crash between the commit and the state: the file is ahead, and goes on. */
static void
test_state_behind (Fixture *f, gconstpointer data)
{
  keep_one (f, f->ledger, 1);
  g_autoptr (GDir) dir = g_dir_open (f->state, 0, NULL);
  g_autofree char *path = g_build_filename (f->state, g_dir_read_name (dir), NULL);
  g_autofree char *aside = g_build_filename (f->folder, "aside", NULL);
  copy_file (path, aside);
  keep_one (f, f->ledger, 2);
  g_clear_pointer (&f->ledger, tf_ledger_close);
  copy_file (aside, path);
  fixture_reopen (f);
  g_assert_cmpstr (notice (f->ledger), ==, "");
  keep_one (f, f->ledger, 3);
  check_replicas (f, "5");
}

static void
test_clock_back (Fixture *f, gconstpointer data)
{
  keep_one (f, f->ledger, 1);
  f->now -= 3 * 3600 * 1000;
  fixture_reopen (f);
  g_assert_cmpstr (notice (f->ledger), ==, "clock-set-back");
  keep_one (f, f->ledger, 2);
  g_autoptr (GPtrArray) entries = tf_ledger_journal (f->ledger, 2, NULL);
  const TfJournalEntry *newest = g_ptr_array_index (entries, 0),
                       *older = g_ptr_array_index (entries, 1);
  g_assert_cmpint (newest->seq, >, older->seq); /* order is by clock of acts, not of the machine */
  tf_check_near ("hours back", (older->wall.s - newest->wall.s) / 3600, 3, 1e-6);
  fixture_check (f->ledger, "");
}

/* Two handles: what one writes the other sees, and its version says so; both write in turns. */
static void
test_two_handles (Fixture *f, gconstpointer data)
{
  g_autoptr (TfLedger) second = fixture_open (f, f->path, NULL);
  gint64 version = tf_ledger_get_version (second);
  keep_one (f, f->ledger, 1);
  g_assert_cmpint (tf_ledger_get_version (second), !=, version);
  fixture_count (second, 1, 0);
  keep_one (f, second, 2);
  keep_one (f, f->ledger, 3);
  fixture_count (f->ledger, 3, 0);
  check_replicas (f, "5");
  fixture_check (second, "");
}

void
add_file_tests (void)
{
  FIXTURE_TEST ("/ledger/file/made-once-strict-and-stamped", test_create);
  FIXTURE_TEST ("/ledger/file/what-is-no-ledger-is-said-and-left-alone", test_not_a_ledger);
  FIXTURE_TEST ("/ledger/file/an-older-version-is-brought-up-with-a-backup", test_migration);
  FIXTURE_TEST ("/ledger/file/a-newer-version-is-read-only", test_newer);
  FIXTURE_TEST ("/ledger/replica/one-line-of-acts-over-many-openings", test_one_line);
  FIXTURE_TEST ("/ledger/replica/an-older-copy-put-back-is-noticed", test_restored);
  FIXTURE_TEST ("/ledger/replica/a-copy-begins-a-line-of-its-own", test_copied);
  FIXTURE_TEST ("/ledger/replica/a-moved-file-goes-on", test_moved);
  FIXTURE_TEST ("/ledger/replica/another-user-or-machine-has-its-own-line", test_elsewhere);
  FIXTURE_TEST ("/ledger/replica/a-file-ahead-of-its-state-goes-on", test_state_behind);
  FIXTURE_TEST ("/ledger/file/a-clock-set-back-changes-no-order", test_clock_back);
  FIXTURE_TEST ("/ledger/file/two-handles-see-each-other", test_two_handles);
}
