/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* kill -9 at moments drawn by lot, while filling and while marking. Afterwards the file is whole,
 * what was told as saved is there, and filling again ends in the same rows as a run that nobody
 * disturbed. */

#include "test-intake.h"

#include <signal.h>
#include <string.h>
#include <sys/wait.h>
#include <unistd.h>

enum
{
  KILLS = 20
};

/* Children are this program run anew (a forked child of a threaded parent has none of its
 * threads): "--child fill|marks FOLDER". */
static void
child_fill (Fixture *f)
{
  TfIntakeParams params;
  tf_intake_params_init (&params);
  params.workers = 2;
  g_autoptr (TfLedger) ledger = open_ledger (f, f->path);
  g_auto (Tally) tally = { 0 };
  fill (f, ledger, &params, &tally);
}

static pid_t
start_child (Fixture *f, const char *what, int told)
{
  pid_t child = fork ();
  if (child != 0)
    return child;
  if (told >= 0)
    dup2 (told, STDOUT_FILENO);
  execl ("/proc/self/exe", "test-intake", "--child", what, f->folder, (char *)NULL);
  _exit (127);
}

static void
kill_after (pid_t child, int us)
{
  g_usleep ((gulong)us);
  kill (child, SIGKILL);
  int status;
  waitpid (child, &status, 0);
}

static void
fill_whole (Fixture *f, const char *path)
{
  TfIntakeParams params;
  tf_intake_params_init (&params);
  g_autoptr (TfLedger) ledger = open_ledger (f, path);
  g_auto (Tally) tally = { 0 };
  fill (f, ledger, &params, &tally);
  check_clean (ledger);
}

static void
test_kill_fill (Fixture *f, gconstpointer data)
{
  g_autofree char *other = g_build_filename (f->folder, "other.ledger", NULL);
  gint64 start = g_get_monotonic_time ();
  fill_whole (f, other);
  gint64 whole = g_get_monotonic_time () - start;
  g_autofree char *expected = machine_ids (other);
  guint cut_short = 0;
  for (int k = 0; k < KILLS; k++)
    {
      if (k % 5 == 0)
        {
          g_unlink (f->path); /* begin anew now and then, so that all stages of a fill are hit */
          g_autofree char *wal = g_strconcat (f->path, "-wal", NULL),
                          *shm = g_strconcat (f->path, "-shm", NULL);
          g_unlink (wal);
          g_unlink (shm);
        }
      pid_t child = start_child (f, "fill", -1);
      kill_after (child, g_test_rand_int_range (0, (int)(whole * (k % 5 == 0 ? 1.0 : 0.5)) + 1));
      g_autoptr (TfLedger) ledger = open_ledger (f, f->path);
      check_clean (ledger);
      g_autoptr (GPtrArray) frames = tf_ledger_frames (ledger, NULL);
      cut_short += frames->len < f->n;
    }
  g_test_message ("%u of %d kills came before all frames were in", cut_short, (int)KILLS);
  g_assert_cmpuint (cut_short, >, 0);
  fill_whole (f, f->path);
  g_autofree char *got = machine_ids (f->path);
  g_assert_cmpstr (got, ==, expected);
}

/* The child keeps one mark after another and tells each through a pipe once it is saved. */
static void
child_marks (Fixture *f)
{
  g_autoptr (TfLedger) ledger = open_ledger (f, f->path);
  gint64 person = tf_ledger_person (ledger, "north", NULL);
  g_autoptr (GPtrArray) rows
      = tf_ledger_rows (ledger, &(TfRowQuery){ .hints = TRUE, .judged_hints = TRUE }, NULL);
  const TfRow *row = g_ptr_array_index (rows, 0);
  for (;;)
    {
      TfMarkDeed deed = { .frame = row->frame,
                          .person = person,
                          .origin = TF_MARK_CHANGED,
                          .hint = row->mark,
                          .outline = row->outline,
                          .measure = &row->measure,
                          .method = row->method };
      gint64 mark = tf_ledger_keep (ledger, &deed, NULL);
      if (mark == 0 || write (STDOUT_FILENO, &mark, sizeof mark) != sizeof mark)
        _exit (1);
    }
}

/* The last mark that was told, when the pipe is at its end; what was told first is waited for by
 * the caller. */
static gint64
last_told (int fd, gint64 first, guint *n)
{
  gint64 mark = 0, last = first;
  while (read (fd, &mark, sizeof mark) == sizeof mark)
    {
      last = mark;
      (*n)++;
    }
  return last;
}

static void
test_kill_marks (Fixture *f, gconstpointer data)
{
  fill_whole (f, f->path);
  guint all = 0;
  for (int k = 0; k < KILLS / 2; k++)
    {
      int ends[2];
      g_assert_cmpint (pipe (ends), ==, 0);
      pid_t child = start_child (f, "marks", ends[1]);
      close (ends[1]);
      gint64 first = 0;
      g_assert_cmpint (read (ends[0], &first, sizeof first), ==, sizeof first);
      kill_after (child, g_test_rand_int_range (0, 20000));
      guint n = 1;
      gint64 last = last_told (ends[0], first, &n);
      close (ends[0]);
      all += n;
      g_autoptr (TfLedger) ledger = open_ledger (f, f->path);
      check_clean (ledger);
      g_autoptr (GArray) points = tf_ledger_points (ledger, NULL);
      gboolean found = FALSE;
      for (guint p = 0; p < points->len; p++)
        found = found
                || (g_array_index (points, TfPoint, p).mark == last
                    && !g_array_index (points, TfPoint, p).hint);
      g_assert_true (found);
    }
  g_test_message ("%u marks were told as saved", all);
  g_assert_cmpuint (all, >, 0);
}

int
run_child (const char *what, const char *folder)
{
  Fixture f = { 0 };
  f.folder = g_strdup (folder);
  f.frames = g_build_filename (folder, "frames", NULL);
  f.state = g_build_filename (folder, "state", NULL);
  f.path = g_build_filename (folder, "one.ledger", NULL);
  if (strcmp (what, "fill") == 0)
    child_fill (&f);
  else
    child_marks (&f);
  return 0;
}

void
add_kill_tests (void)
{
  FIXTURE_TEST ("/intake/kill/a-killed-fill-leaves-a-whole-ledger-and-goes-on", test_kill_fill);
  FIXTURE_TEST ("/intake/kill/a-mark-told-as-saved-is-there-after-a-kill", test_kill_marks);
}
