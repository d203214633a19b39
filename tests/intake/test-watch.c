/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-intake.h"

#include <string.h>

#include "tf-watch.h"

/* -- whole files ----------------------------------------------------------------------------- */

/* Cut anywhere, to the last byte, a file is not whole; nor is what is no FITS file. */
static void
test_whole (Fixture *f, gconstpointer data)
{
  g_autofree char *path = g_build_filename (f->frames, "frame-00.fits", NULL), *bytes = NULL,
                  *cut = g_build_filename (f->frames, "cut.fits", NULL);
  gsize n = 0;
  g_assert_true (g_file_get_contents (path, &bytes, &n, NULL));
  g_assert_true (tf_fits_is_whole (path));
  static const double shares[] = { 0, 0.0001, 0.01, 0.3, 0.9, 0.99999 };
  for (guint k = 0; k < G_N_ELEMENTS (shares); k++)
    {
      g_assert_true (g_file_set_contents (cut, bytes, (gssize)(shares[k] * (double)n), NULL));
      g_assert_false (tf_fits_is_whole (cut));
    }
  g_assert_true (g_file_set_contents (cut, "SIMPLE  = no FITS file", -1, NULL));
  g_assert_false (tf_fits_is_whole (cut));
  g_assert_false (tf_fits_is_whole ("/no/such/file.fits"));
}

/* Two extensions, one a table with a heap (PCOUNT), packed and not; files of others. */
static void
test_whole_shared (void)
{
  const char *top = g_getenv ("TF_SHARED_DATA");
  g_autofree char *folder
      = top != NULL ? g_strdup (top) : g_build_filename (TF_SOURCE_ROOT, "..", "shared", "data", NULL);
  static const char *const whole[] = { "magnetograms/mdi.fd_m_96m_lev182.20101015_000000_TAI.data.fits",
                                       "magnetograms/sdo-hmi_2011-02-14_20-34-12.fits" };
  if (!g_file_test (folder, G_FILE_TEST_IS_DIR))
    {
      g_test_skip ("real data not there");
      return;
    }
  for (guint k = 0; k < G_N_ELEMENTS (whole); k++)
    {
      g_autofree char *path = g_build_filename (folder, whole[k], NULL);
      g_assert_true (tf_fits_is_whole (path));
    }
}

/* -- the watch ------------------------------------------------------------------------------- */

typedef struct
{
  GPtrArray *paths;
} Came;

static void
came (char *const *paths, gpointer data)
{
  Came *c = data;
  for (guint k = 0; paths[k] != NULL; k++)
    g_ptr_array_add (c->paths, g_path_get_basename (paths[k]));
}

static gboolean
too_late (gpointer data)
{
  *(gboolean *)data = TRUE;
  return G_SOURCE_REMOVE;
}

static void
wait_for (const Came *c, guint n)
{
  gboolean late = FALSE;
  guint timer = g_timeout_add_seconds (15, too_late, &late);
  while (c->paths->len < n && !late)
    g_main_context_iteration (NULL, TRUE);
  g_assert_false (late);
  g_source_remove (timer);
}

/* What lies there comes once; a file in the making comes when it is whole, and not before. */
static void
test_watch (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (GPtrArray) paths = g_ptr_array_new_with_free_func (g_free);
  Came c = { paths };
  g_autofree char *from = g_build_filename (f->frames, "frame-00.fits", NULL), *bytes = NULL,
                  *slow = g_build_filename (f->frames, "slow.fits", NULL),
                  *quick = g_build_filename (f->frames, "quick.fits", NULL);
  gsize n = 0;
  g_assert_true (g_file_get_contents (from, &bytes, &n, NULL));
  g_autoptr (TfWatch) watch = tf_watch_new (f->frames, came, &c, &error);
  g_assert_no_error (error);
  wait_for (&c, f->n);
  g_assert_true (g_file_set_contents (slow, bytes, (gssize)n / 2, NULL));
  g_assert_true (g_file_set_contents (quick, bytes, (gssize)n, NULL));
  wait_for (&c, f->n + 1); /* the half file rests as well, and is passed over */
  g_assert_cmpstr (g_ptr_array_index (paths, f->n), ==, "quick.fits");
  g_assert_cmpuint (tf_watch_get_n_waiting (watch), ==, 1);
  g_assert_true (g_file_set_contents (slow, bytes, (gssize)n, NULL));
  wait_for (&c, f->n + 2);
  g_assert_cmpstr (g_ptr_array_index (paths, f->n + 1), ==, "slow.fits");
  g_assert_null (tf_watch_new ("/no/such/folder", came, &c, &error));
  g_assert_nonnull (error);
}

/* -- moved files ----------------------------------------------------------------------------- */

static void
test_moved (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  TfIntakeParams params;
  tf_intake_params_init (&params);
  params.no_hints = TRUE;
  params.spec = (TfFrameSpec){ 0 };
  g_autoptr (TfLedger) ledger = open_ledger (f, f->path);
  g_auto (Tally) tally = { 0 };
  fill (f, ledger, &params, &tally);
  g_autofree char *from = g_build_filename (f->frames, "frame-01.fits", NULL),
                  *other = g_build_filename (f->folder, "other", NULL),
                  *to = g_build_filename (other, "renamed.fits", NULL),
                  *stranger = g_build_filename (other, "stranger.fits", NULL);
  g_mkdir (other, 0700);
  g_assert_cmpint (g_rename (from, to), ==, 0);
  write_frame (stranger, 77);
  char *folders[] = { other, NULL };
  guint missing = 0, found = 0;
  g_assert_true (tf_intake_find_moved (ledger, folders, NULL, &missing, &found, &error));
  g_assert_cmpuint (missing, ==, 1);
  g_assert_cmpuint (found, ==, 1);
  g_autoptr (TfFrameRow) row = tf_ledger_frame (ledger, tf_ledger_find_file (ledger, to), &error);
  g_assert_cmpstr (row->path, ==, to);
  g_autoptr (GPtrArray) all = tf_ledger_frames (ledger, NULL);
  g_assert_cmpuint (all->len, ==, f->n); /* nothing else was taken in */
  g_assert_true (tf_intake_find_moved (ledger, folders, NULL, &missing, &found, &error));
  g_assert_cmpuint (missing + found, ==, 0);
  g_remove (stranger);
  g_remove (to);
  g_rmdir (other);
}

void
add_watch_tests (void)
{
  FIXTURE_TEST ("/intake/watch/a-file-cut-short-is-not-whole", test_whole);
  g_test_add_func ("/intake/watch/real-files-are-whole", test_whole_shared);
  FIXTURE_TEST ("/intake/watch/a-file-comes-when-it-is-whole", test_watch);
  FIXTURE_TEST ("/intake/moved/a-moved-file-is-found-by-its-checksum", test_moved);
}
