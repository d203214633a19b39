/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Locks, full disks, folders that cannot be written, two processes at once. Children are forked
 * before the test has made any thread. */

#include "test-ledger.h"

#include <errno.h>
#include <sched.h>
#include <signal.h>
#include <sqlite3.h>
#include <string.h>
#include <sys/mount.h>
#include <sys/resource.h>
#include <sys/stat.h>
#include <sys/wait.h>
#include <unistd.h>

static void
keep_one (TfLedger *ledger, int n)
{
  fixture_keep (ledger, fixture_frame (ledger, 0), tf_ledger_person (ledger, "north", NULL), 0, 0,
                n);
}

/* Runs @func in a child; its return is the exit code. 77 stands for "cannot be tried here". */
static int
in_child (int (*func) (Fixture *f), Fixture *f)
{
  g_clear_pointer (&f->ledger, tf_ledger_close);
  pid_t child = fork ();
  if (child == 0)
    _exit (func (f));
  int status = 0;
  g_assert_cmpint (waitpid (child, &status, 0), ==, child);
  g_assert_true (WIFEXITED (status));
  return WEXITSTATUS (status);
}

static gboolean
finish_child (int code, const char *why_not)
{
  if (code == 77)
    g_test_skip (why_not);
  else
    g_assert_cmpint (code, ==, 0);
  return code == 0;
}

/* -- read only
 * --------------------------------------------------------------------------------------- */
enum
{
  NOBODY = 65534
};

/* Root may write everywhere: the child becomes nobody. */
static int
open_as_nobody (Fixture *f)
{
  if (geteuid () == 0 && (setgid (NOBODY) != 0 || setuid (NOBODY) != 0))
    return 77;
  g_autoptr (GError) error = NULL;
  g_autoptr (TfLedger) ledger = fixture_open (f, f->path, &error);
  if (ledger == NULL)
    return 1;
  if (g_strcmp0 (tf_note_get_code (tf_ledger_get_read_only (ledger)), "ledger-not-writable") != 0)
    return 2;
  g_autoptr (GArray) points = tf_ledger_points (ledger, NULL);
  g_autoptr (TfNotes) findings = tf_notes_new ();
  if (points == NULL || points->len != 1)
    return 3;
  if (tf_ledger_person (ledger, "south", &error) != 0
      || !g_error_matches (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_READ_ONLY))
    return 4;
  g_clear_error (&error);
  if (!tf_ledger_check (ledger, findings, &error))
    return 5;
  return findings->len == 0 ? 0 : 6;
}

static void
test_unwritable (Fixture *f, int folder_mode, int file_mode)
{
  keep_one (f->ledger, 1);
  g_clear_pointer (&f->ledger, tf_ledger_close);
  g_assert_cmpint (g_chmod (f->path, (guint)file_mode), ==, 0);
  g_assert_cmpint (g_chmod (f->folder, (guint)folder_mode), ==, 0);
  int code = in_child (open_as_nobody, f);
  g_assert_cmpint (g_chmod (f->folder, 0700), ==, 0);
  finish_child (code, "the test cannot become another user");
}

static void
test_unwritable_folder (Fixture *f, gconstpointer data)
{
  test_unwritable (f, 0555, 0666);
}

static void
test_unwritable_file (Fixture *f, gconstpointer data)
{
  test_unwritable (f, 0777, 0444);
}

/* The state folder cannot be made: acts are recorded all the same, and it is said. */
static void
test_no_state (Fixture *f, gconstpointer data)
{
  g_clear_pointer (&f->ledger, tf_ledger_close);
  g_free (f->state);
  f->state = g_build_filename (f->path, "below-a-file", NULL);
  fixture_reopen (f);
  keep_one (f->ledger, 1);
  g_assert_nonnull (tf_notes_find (tf_ledger_get_notices (f->ledger), "replica-state-unwritten"));
  fixture_reopen (f);
  g_assert_nonnull (tf_notes_find (tf_ledger_get_notices (f->ledger), "ledger-from-elsewhere"));
  keep_one (f->ledger, 2);
  fixture_count (f->ledger, 2, 0);
  fixture_check (f->ledger, "");
}

/* -- locks
 * ------------------------------------------------------------------------------------------- */
static sqlite3 *
hold_lock (const char *path)
{
  sqlite3 *db = NULL;
  g_assert_cmpint (sqlite3_open (path, &db), ==, SQLITE_OK);
  g_assert_cmpint (sqlite3_exec (db, "BEGIN IMMEDIATE", NULL, NULL, NULL), ==, SQLITE_OK);
  return db;
}

/* The fixture waits 300 ms. */
static void
test_lock_reported (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  keep_one (f->ledger, 1);
  gint64 person = tf_ledger_person (f->ledger, "north", NULL);
  sqlite3 *db = hold_lock (f->path);
  gint64 start = g_get_monotonic_time ();
  g_assert_false (tf_ledger_undo (f->ledger, person, NULL, &error));
  double waited = (double)(g_get_monotonic_time () - start) / 1e3;
  g_assert_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_BUSY);
  tf_check_between ("ms waited", waited, 250, 5000);
  fixture_count (f->ledger, 1, 0); /* reading goes on meanwhile */
  sqlite3_close (db);
  g_assert_true (tf_ledger_undo (f->ledger, person, NULL, NULL));
  fixture_check (f->ledger, "");
}

static gpointer
let_go (gpointer db)
{
  g_usleep (100000);
  sqlite3_close (db);
  return NULL;
}

static void
test_lock_waited_for (Fixture *f, gconstpointer data)
{
  gint64 person = tf_ledger_person (f->ledger, "north", NULL), frame = fixture_frame (f->ledger, 0);
  GThread *thread = g_thread_new ("let-go", let_go, hold_lock (f->path));
  fixture_keep (f->ledger, frame, person, 0, 0, 1);
  g_thread_join (thread);
  fixture_count (f->ledger, 1, 0);
}

/* -- two processes
 * ------------------------------------------------------------------------------------ */
enum
{
  EACH = 15
};

static int
keep_many (Fixture *f)
{
  TfLedgerHow how = { .create = TRUE, .letter = 'T', .state_dir = f->state };
  g_autoptr (GError) error = NULL;
  g_autoptr (TfLedger) ledger = tf_ledger_open_how (f->path, &how, &error);
  if (ledger == NULL)
    {
      g_printerr ("# %s\n", error->message);
      return 1;
    }
  for (int k = 0; k < EACH; k++)
    keep_one (ledger, k);
  return 0;
}

static void
test_two_processes (Fixture *f, gconstpointer data)
{
  g_clear_pointer (&f->ledger, tf_ledger_close);
  g_unlink (f->path); /* they also meet in making it */
  pid_t children[2];
  for (int k = 0; k < 2; k++)
    if ((children[k] = fork ()) == 0)
      _exit (keep_many (f));
  for (int k = 0; k < 2; k++)
    {
      int status = 0;
      waitpid (children[k], &status, 0);
      g_assert_cmpint (status, ==, 0);
    }
  fixture_reopen (f);
  fixture_count (f->ledger, 2 * EACH, 0);
  fixture_check (f->ledger, "");
  g_autofree char *numbers
      = fixture_sql_text (f->path, "SELECT count (DISTINCT number) FROM region");
  g_assert_cmpstr (numbers, ==, "30");
}

/* -- full disk
 * ---------------------------------------------------------------------------------------- */
static gint64
count_acts (const char *path)
{
  g_autofree char *text = fixture_sql_text (path, "SELECT count (*) FROM act");
  return g_ascii_strtoll (text, NULL, 10);
}

/* Keeps marks until there is no room: an error of the right kind, and the ledger as it was before
 * the last deed. */
static int
keep_until_full (Fixture *f)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfLedger) ledger = fixture_open (f, f->path, &error);
  if (ledger == NULL)
    return 1;
  gint64 person = tf_ledger_person (ledger, "north", NULL);
  g_autoptr (GPtrArray) frames = tf_ledger_frames (ledger, NULL);
  gint64 frame = ((TfFrameRow *)g_ptr_array_index (frames, 0))->id;
  guint kept = 0;
  for (int k = 0; error == NULL && k < 20000; k++)
    {
      g_autoptr (TfOutline) outline = fixture_outline (k);
      g_auto (TfMeasure) measure = { 0 };
      fixture_measure (&measure, k);
      TfMarkDeed deed = { .frame = frame,
                          .person = person,
                          .origin = TF_MARK_DRAWN,
                          .outline = outline,
                          .measure = &measure,
                          .method = "m" };
      kept += tf_ledger_keep (ledger, &deed, &error) != 0;
    }
  if (!g_error_matches (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_FULL))
    {
      g_printerr ("# not full but: %s\n", error != NULL ? error->message : "no error");
      return 2;
    }
  g_autoptr (GArray) points = tf_ledger_points (ledger, NULL);
  if (points == NULL || points->len != kept || kept == 0)
    return 3;
  return 0;
}

static int
limited (Fixture *f)
{
  struct rlimit limit = { 600000, 600000 };
  signal (SIGXFSZ, SIG_IGN);
  return setrlimit (RLIMIT_FSIZE, &limit) == 0 ? keep_until_full (f) : 77;
}

static void
test_size_limit (Fixture *f, gconstpointer data)
{
  fixture_frame (f->ledger, 0);
  if (!finish_child (in_child (limited, f), "the size of files cannot be limited here"))
    return;
  fixture_reopen (f);
  fixture_check (f->ledger, "");
  gint64 acts = count_acts (f->path);
  keep_one (f->ledger, 1); /* with room again it goes on */
  g_assert_cmpint (count_acts (f->path), ==, acts + 1);
  fixture_check (f->ledger, "");
}

/* A file system of one megabyte of the child's own. */
static int
small_disk (Fixture *f)
{
  g_autofree char *disk = g_build_filename (f->folder, "disk", NULL);
  g_mkdir (disk, 0755);
  if (unshare (CLONE_NEWNS) != 0 || mount (NULL, "/", NULL, MS_REC | MS_PRIVATE, NULL) != 0
      || mount ("tmpfs", disk, "tmpfs", 0, "size=1m") != 0)
    return 77;
  g_free (f->path);
  f->path = g_build_filename (disk, "small.ledger", NULL);
  {
    g_autoptr (TfLedger) ledger = fixture_open (f, f->path, NULL);
    if (ledger == NULL)
      return 10;
    fixture_frame (ledger, 0);
  }
  int code = keep_until_full (f);
  if (code != 0)
    return code;
  g_autoptr (TfLedger) ledger = fixture_open (f, f->path, NULL);
  g_autoptr (TfNotes) findings = tf_notes_new ();
  if (ledger == NULL || !tf_ledger_check (ledger, findings, NULL))
    return 11;
  return findings->len == 0 ? 0 : 12;
}

static void
test_full_disk (Fixture *f, gconstpointer data)
{
  finish_child (in_child (small_disk, f), "no small file system can be mounted here");
}

/* An older ledger on a disk without room for its backup stays as it is. */
static int
no_room_for_backup (Fixture *f)
{
  g_autofree char *disk = g_build_filename (f->folder, "disk", NULL),
                  *path = g_build_filename (disk, "old.ledger", NULL);
  g_mkdir (disk, 0755);
  if (unshare (CLONE_NEWNS) != 0 || mount (NULL, "/", NULL, MS_REC | MS_PRIVATE, NULL) != 0
      || mount ("tmpfs", disk, "tmpfs", 0, "size=1m") != 0)
    return 77;
  fixture_sql (path, "PRAGMA application_id = 1413901412; CREATE TABLE keepsake (a);"
                     "INSERT INTO keepsake VALUES (zeroblob (300000))");
  g_autofree char *before = NULL, *after = NULL;
  gsize n, m;
  g_file_get_contents (path, &before, &n, NULL);
  g_autoptr (GError) error = NULL;
  g_autoptr (TfLedger) ledger = fixture_open (f, path, &error);
  if (ledger != NULL || !g_error_matches (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_FULL))
    return 1;
  g_autofree char *version = fixture_sql_text (path, "PRAGMA user_version");
  g_file_get_contents (path, &after, &m, NULL);
  return strcmp (version, "0") == 0 && n == m ? 0 : 2;
}

static void
test_no_room_for_backup (Fixture *f, gconstpointer data)
{
  finish_child (in_child (no_room_for_backup, f), "no small file system can be mounted here");
}

void
add_faults_tests (void)
{
  FIXTURE_TEST ("/ledger/faults/a-folder-that-cannot-be-written-is-read", test_unwritable_folder);
  FIXTURE_TEST ("/ledger/faults/a-file-that-cannot-be-written-is-read", test_unwritable_file);
  FIXTURE_TEST ("/ledger/faults/two-processes-write-at-once", test_two_processes);
  FIXTURE_TEST ("/ledger/faults/a-size-limit-loses-nothing", test_size_limit);
  FIXTURE_TEST ("/ledger/faults/a-full-disk-loses-nothing", test_full_disk);
  FIXTURE_TEST ("/ledger/faults/no-room-for-a-backup-no-migration", test_no_room_for_backup);
  FIXTURE_TEST ("/ledger/faults/without-a-state-folder-acts-are-recorded", test_no_state);
  FIXTURE_TEST ("/ledger/faults/a-lock-held-too-long-is-reported", test_lock_reported);
  FIXTURE_TEST ("/ledger/faults/a-lock-let-go-in-time-is-waited-for", test_lock_waited_for);
}
