/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-intake.h"

#include <string.h>
#include <unistd.h>

#define COMPLEXITY_SUM_SQL                                                                         \
  "SELECT count (*) || ' ' || sum (given) || ' ' || printf ('%.17g', total (r_mx)) || ' ' || "     \
  "printf ('%.12g', total (strong_gradient_length_mm)) FROM complexity"

static void
params_init (TfIntakeParams *params, guint workers)
{
  tf_intake_params_init (params);
  params->workers = workers;
}

static void
test_list (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  g_autofree char *deep = g_build_filename (f->frames, "deep", NULL),
                  *one = g_build_filename (deep, "A.FTS", NULL);
  g_autofree char *text = g_build_filename (deep, "a.txt", NULL),
                  *ring = g_build_filename (deep, "ring", NULL);
  g_autofree char *hidden = g_build_filename (deep, ".b.fits", NULL),
                  *gone = g_build_filename (f->folder, "gone", NULL);
  g_mkdir (deep, 0755);
  g_file_set_contents (one, "x", 1, NULL);
  g_file_set_contents (text, "x", 1, NULL);
  g_file_set_contents (hidden, "x", 1, NULL);
  g_assert_cmpint (symlink (f->frames, ring), ==, 0);
  char *paths[] = { f->frames, text, f->frames, one, gone, NULL };
  g_auto (GStrv) files = tf_intake_list (paths, &error);
  g_assert_no_error (error);
  g_assert_cmpuint (g_strv_length (files), ==,
                    f->n + 3); /* a named file is taken whatever it is called, there or not */
  g_assert_true (g_strv_contains ((const char *const *)files, one));
  g_assert_true (g_strv_contains ((const char *const *)files, text));
  for (guint k = 1; files[k] != NULL; k++)
    g_assert_cmpint (strcmp (files[k - 1], files[k]), <, 0);
}

static void
test_fill_twice (Fixture *f, gconstpointer data)
{
  TfIntakeParams params;
  params_init (&params, 2);
  g_autoptr (TfLedger) ledger = open_ledger (f, f->path);
  g_auto (Tally) first = { 0 }, second = { 0 };
  fill (f, ledger, &params, &first);
  g_assert_cmpuint (first.count[TF_INTAKE_ADDED], ==, f->n);
  g_assert_cmpuint (first.hints, >=, f->n);
  g_autofree char *ids = machine_ids (f->path);
  fill (f, ledger, &params, &second);
  g_assert_cmpuint (second.count[TF_INTAKE_THERE], ==, f->n);
  g_autofree char *same = machine_ids (f->path);
  g_assert_cmpstr (ids, ==, same);
  g_autoptr (GPtrArray) rows = tf_ledger_rows (ledger, &(TfRowQuery){ .hints = TRUE }, NULL);
  g_assert_cmpuint (rows->len, ==, first.hints);
  for (guint k = 0; k < rows->len; k++)
    g_assert_cmpint (((TfRow *)g_ptr_array_index (rows, k))->measure.floor_kind, ==, TF_FLOOR_EVEN);
  check_clean (ledger);
}

/* One thread and many give the same rows; so does a file that was moved, and one that was only
 * touched. */
static void
test_same_rows (Fixture *f, gconstpointer data)
{
  g_autofree char *other = g_build_filename (f->folder, "other.ledger", NULL);
  TfIntakeParams one, many;
  params_init (&one, 1);
  params_init (&many, 4);
  g_autoptr (TfLedger) a = open_ledger (f, f->path);
  g_autoptr (TfLedger) b = open_ledger (f, other);
  g_auto (Tally) tally = { 0 }, again = { 0 }, moved = { 0 };
  fill (f, a, &one, &tally);
  fill (f, b, &many, &again);
  g_autofree char *ids = machine_ids (f->path), *others = machine_ids (other);
  g_assert_cmpstr (ids, ==, others);
  g_autofree char *from = g_build_filename (f->frames, "frame-00.fits", NULL);
  g_autofree char *to = g_build_filename (f->frames, "renamed.fits", NULL);
  g_assert_cmpint (g_rename (from, to), ==, 0);
  fill (f, a, &one, &moved);
  g_assert_cmpuint (moved.count[TF_INTAKE_THERE], ==, f->n);
  g_autofree char *same = machine_ids (f->path);
  g_assert_cmpstr (ids, ==, same);
  gint64 frame = tf_ledger_find_file (a, to);
  g_assert_cmpint (frame, !=, 0);
  g_autoptr (TfFrameRow) row = tf_ledger_frame (a, frame, NULL);
  g_assert_cmpstr (row->path, ==, to);
}

static void
test_bad_and_refused (Fixture *f, gconstpointer data)
{
  g_autofree char *bad = g_build_filename (f->frames, "bad.fits", NULL);
  g_autofree char *velocity = g_build_filename (f->frames, "velocity.fits", NULL);
  g_file_set_contents (bad, "SIMPLE  = nonsense", -1, NULL);
  write_velocity (velocity);
  TfIntakeParams params;
  params_init (&params, 2);
  g_autoptr (TfLedger) ledger = open_ledger (f, f->path);
  g_auto (Tally) tally = { 0 }, again = { 0 };
  fill (f, ledger, &params, &tally);
  g_assert_cmpuint (tally.count[TF_INTAKE_ADDED], ==, f->n);
  g_assert_cmpuint (tally.count[TF_INTAKE_REFUSED], ==, 1);
  g_assert_cmpuint (tally.count[TF_INTAKE_FAILED], ==, 1);
  g_autoptr (GPtrArray) frames = tf_ledger_frames (ledger, NULL);
  g_assert_cmpuint (frames->len, ==, f->n + 1);
  gint64 id = tf_ledger_find_file (ledger, velocity);
  g_autoptr (TfFrameRow) row = tf_ledger_frame (ledger, id, NULL);
  g_assert_nonnull (row->refusal);
  tf_check_nan ("noise of a refused frame", row->noise_gauss);
  fill (f, ledger, &params, &again);
  g_assert_cmpuint (again.count[TF_INTAKE_THERE], ==, f->n);
  g_assert_cmpuint (again.count[TF_INTAKE_REFUSED], ==, 1); /* as it was the first time */
  g_assert_cmpuint (again.count[TF_INTAKE_FAILED], ==, 1);
  g_assert_nonnull (strstr (again.message, "bad.fits"));
  check_clean (ledger);
}

static void
test_stop_and_go_on (Fixture *f, gconstpointer data)
{
  TfIntakeParams params;
  params_init (&params, 1);
  g_autoptr (TfLedger) ledger = open_ledger (f, f->path);
  g_autoptr (TfCancel) cancel = tf_cancel_new ();
  g_auto (Tally) stopped = { .cancel_after_one = cancel }, rest = { 0 };
  fill (f, ledger, &params, &stopped);
  g_assert_cmpuint (stopped.count[TF_INTAKE_ADDED], >=, 1);
  g_assert_cmpuint (stopped.count[TF_INTAKE_ADDED], <, f->n);
  check_clean (ledger);
  fill (f, ledger, &params, &rest);
  g_assert_cmpuint (rest.count[TF_INTAKE_ADDED] + stopped.count[TF_INTAKE_ADDED], ==, f->n);
}

static void
test_frames_then_hints (Fixture *f, gconstpointer data)
{
  TfIntakeParams params;
  params_init (&params, 2);
  params.no_hints = TRUE;
  g_autoptr (TfLedger) ledger = open_ledger (f, f->path);
  g_auto (Tally) bare = { 0 }, full = { 0 };
  fill (f, ledger, &params, &bare);
  g_assert_cmpuint (bare.hints, ==, 0);
  params.no_hints = FALSE;
  fill (f, ledger, &params, &full);
  g_assert_cmpuint (full.hints, >=, f->n);
  check_clean (ledger);
}

/* Figures of every hint come with it; what an older ledger lacks is worked out later, and is the
 * same. */
static void
test_complexity (Fixture *f, gconstpointer data)
{
  TfIntakeParams params;
  guint n = 0, given = 0;
  params_init (&params, 2);
  g_autoptr (TfLedger) ledger = open_ledger (f, f->path);
  g_auto (Tally) tally = { 0 };
  fill (f, ledger, &params, &tally);
  const TfRowQuery query = { .hints = TRUE, .complexity = TRUE };
  g_autoptr (GPtrArray) rows = tf_ledger_rows (ledger, &query, NULL);
  for (guint k = 0; k < rows->len; k++)
    {
      const TfRow *row = g_ptr_array_index (rows, k);
      g_assert_nonnull (row->complexity_method);
      given += row->complexity.there;
      g_assert_true (row->complexity.there == (row->complexity.mu >= 0.7));
    }
  g_assert_cmpuint (given, >, 0);
  g_autofree char *kept = sql_text (f->path, COMPLEXITY_SUM_SQL);
  g_assert_true (tf_intake_complexity (ledger, &query, &params.complexity, NULL, &n, NULL));
  g_assert_cmpuint (n, ==, 0);
  g_autofree char *none = sql_text (f->path, "DELETE FROM complexity RETURNING id");
  g_assert_true (tf_intake_complexity (ledger, &query, &params.complexity, NULL, &n, NULL));
  g_assert_cmpuint (n, ==, rows->len);
  g_autofree char *again = sql_text (f->path, COMPLEXITY_SUM_SQL);
  g_assert_cmpstr (again, ==, kept);
  check_clean (ledger);
}

static void
check_remeasure (TfLedger *ledger, const char *expected)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfNotes) findings = tf_notes_new ();
  g_assert_true (tf_intake_remeasure (ledger, 50, findings, &error));
  g_assert_no_error (error);
  g_autofree char *codes = tf_notes_dup_codes (findings);
  g_assert_cmpstr (codes, ==, expected);
}

static void
test_remeasure (Fixture *f, gconstpointer data)
{
  TfIntakeParams params;
  params_init (&params, 2);
  g_autoptr (TfLedger) ledger = open_ledger (f, f->path);
  g_auto (Tally) tally = { 0 };
  fill (f, ledger, &params, &tally);
  check_remeasure (ledger, "");
  /* a mark whose measure is not what its outline holds */
  g_autoptr (GPtrArray) rows = tf_ledger_rows (ledger, &(TfRowQuery){ .hints = TRUE }, NULL);
  TfRow *row = g_ptr_array_index (rows, 0);
  g_autoptr (TfOutline) outline
      = tf_outline_deform (row->outline, 0.3, 0, 1.2, (double[3]){ 0 }, (double[3]){ 0 });
  TfMarkDeed deed = { .frame = row->frame,
                      .person = tf_ledger_person (ledger, "north", NULL),
                      .hint = row->mark,
                      .origin = TF_MARK_CHANGED,
                      .outline = outline,
                      .measure = &row->measure,
                      .method = row->method };
  deed.measure = &row->measure;
  row->measure.flux_unsigned_mx *= 1.001;
  g_assert_cmpint (tf_ledger_keep (ledger, &deed, NULL), !=, 0);
  check_remeasure (ledger, "measure-differs");
  g_assert_true (tf_ledger_undo (ledger, deed.person, NULL, NULL));
  check_remeasure (ledger, "");
  g_autofree char *path = g_build_filename (f->frames, "frame-00.fits", NULL);
  write_frame (path, 5000);
  check_remeasure (ledger, "frame-missing");
}

int
main (int argc, char **argv)
{
  if (argc == 4 && strcmp (argv[1], "--child") == 0)
    return run_child (argv[2], argv[3]);
  g_test_init (&argc, &argv, NULL);
  FIXTURE_TEST ("/intake/list/folders-deep-each-file-once-in-name-order", test_list);
  FIXTURE_TEST ("/intake/fill/filling-twice-adds-nothing", test_fill_twice);
  FIXTURE_TEST ("/intake/fill/threads-and-places-make-no-difference", test_same_rows);
  FIXTURE_TEST ("/intake/fill/bad-files-are-told-and-refused-frames-recorded",
                test_bad_and_refused);
  FIXTURE_TEST ("/intake/fill/stopped-it-goes-on-from-there", test_stop_and_go_on);
  FIXTURE_TEST ("/intake/fill/hints-may-come-later", test_frames_then_hints);
  FIXTURE_TEST ("/intake/fill/complexity-comes-with-every-hint-or-later", test_complexity);
  FIXTURE_TEST ("/intake/remeasure/what-was-changed-is-found", test_remeasure);
  add_watch_tests ();
  add_kill_tests ();
  return g_test_run ();
}
