/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-intake.h"

#include <math.h>
#include <sqlite3.h>
#include <string.h>

#include "tf-frame-write.h"

enum
{
  SIZE = 256
};

static double
spot (double x, double y, double cx, double cy, double width)
{
  double r2 = (x - cx) * (x - cx) + (y - cy) * (y - cy);
  return exp (-r2 / (2 * width * width));
}

static void
make_pixels (float *pixels, int seed)
{
  g_autoptr (GRand) rand = g_rand_new_with_seed ((guint32)seed);
  double radius = 960.0 / 8;
  for (int y = 1; y <= SIZE; y++)
    for (int x = 1; x <= SIZE; x++)
      {
        double noise = 0, r = hypot (x - 128.5, y - 128.5);
        for (int k = 0; k < 12; k++)
          noise += g_rand_double (rand) - 0.5;
        double cx = 110 + 3 * (seed % 7),
               b = 900 * spot (x, y, cx, 160, 3) - 900 * spot (x, y, cx + 12, 157, 3);
        b += 700 * spot (x, y, 150, 90, 2.5) - 700 * spot (x, y, 139, 93, 2.5);
        pixels[(y - 1) * SIZE + x - 1] = (float)(r < radius ? b + 8 * noise : NAN);
      }
}

static void
write_picture (const char *path, int seed, const char *content, const char *unit)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfHeader) header = tf_header_new ();
  g_autofree float *pixels = g_new (float, SIZE *SIZE);
  const char *const words[][2] = { { "CTYPE1", "HPLN-TAN" },       { "CTYPE2", "HPLT-TAN" },
                                   { "CUNIT1", "arcsec" },         { "CUNIT2", "arcsec" },
                                   { "TELESCOP", "Brindle Head" }, { "INSTRUME", "magnetograph" },
                                   { "CONTENT", content },         { "BUNIT", unit } };
  const struct
  {
    const char *key;
    double value;
  } numbers[] = {
    { "CRPIX1", 128.5 }, { "CRPIX2", 128.5 }, { "CRVAL1", 0 },         { "CRVAL2", 0 },
    { "CDELT1", 8 },     { "CDELT2", 8 },     { "CROTA2", 0 },         { "DSUN_OBS", 1.49e11 },
    { "HGLN_OBS", 0 },   { "HGLT_OBS", 5.5 }, { "RSUN_REF", 6.957e8 },
  };
  g_autofree char *date = g_strdup_printf ("2013-10-%02dT06:00:00.000", 1 + seed % 28);
  for (guint k = 0; k < G_N_ELEMENTS (words); k++)
    tf_header_set (header, words[k][0], words[k][1]);
  for (guint k = 0; k < G_N_ELEMENTS (numbers); k++)
    tf_header_set_number (header, numbers[k].key, numbers[k].value);
  tf_header_set (header, "DATE-OBS", date);
  make_pixels (pixels, seed);
  gboolean ok = tf_frame_write (path, header, pixels, SIZE, SIZE,
                                &(TfFrameWrite){ .bitpix = -32, .no_date = TRUE }, &error);
  g_assert_no_error (error);
  g_assert_true (ok);
}

void
write_frame (const char *path, int seed)
{
  write_picture (path, seed, "MAGNETOGRAM", "Gauss");
}

void
write_velocity (const char *path)
{
  write_picture (path, 1, "DOPPLERGRAM", "m/s");
}

static void
remove_folder (const char *folder)
{
  g_autoptr (GDir) dir = g_dir_open (folder, 0, NULL);
  const char *name;
  while (dir != NULL && (name = g_dir_read_name (dir)) != NULL)
    {
      g_autofree char *path = g_build_filename (folder, name, NULL);
      if (g_file_test (path, G_FILE_TEST_IS_DIR) && !g_file_test (path, G_FILE_TEST_IS_SYMLINK))
        remove_folder (path);
      else
        g_unlink (path);
    }
  g_rmdir (folder);
}

void
fixture_set_up (Fixture *f, gconstpointer data)
{
  f->folder = g_dir_make_tmp ("tf-intake-XXXXXX", NULL);
  f->frames = g_build_filename (f->folder, "frames", NULL);
  f->state = g_build_filename (f->folder, "state", NULL);
  f->path = g_build_filename (f->folder, "one.ledger", NULL);
  f->n = N_FRAMES;
  g_mkdir (f->frames, 0755);
  for (guint k = 0; k < f->n; k++)
    {
      g_autofree char *name = g_strdup_printf ("frame-%02u.fits", k);
      g_autofree char *path = g_build_filename (f->frames, name, NULL);
      write_frame (path, (int)k);
    }
}

void
fixture_tear_down (Fixture *f, gconstpointer data)
{
  remove_folder (f->folder);
  g_free (f->folder);
  g_free (f->frames);
  g_free (f->state);
  g_free (f->path);
}

TfLedger *
open_ledger (Fixture *f, const char *path)
{
  g_autoptr (GError) error = NULL;
  TfLedger *ledger = tf_ledger_open_how (
      path, &(TfLedgerHow){ .create = TRUE, .letter = 'B', .state_dir = f->state }, &error);
  g_assert_no_error (error);
  return ledger;
}

void
tally_clear (Tally *tally)
{
  g_clear_pointer (&tally->message, g_free);
}

static void
on_report (const TfIntakeReport *report, gpointer data)
{
  Tally *tally = data;
  tally->count[report->outcome]++;
  tally->hints += report->n_hints;
  g_assert_cmpuint (report->done, <=, report->total);
  if (report->message != NULL)
    {
      g_free (tally->message);
      tally->message = g_strdup (report->message);
      g_assert_null (strchr (report->message, '\n'));
    }
  if (tally->cancel_after_one != NULL)
    tf_cancel_raise (tally->cancel_after_one);
}

void
fill (Fixture *f, TfLedger *ledger, const TfIntakeParams *params, Tally *tally)
{
  g_autoptr (GError) error = NULL;
  char *paths[] = { f->frames, NULL };
  g_auto (GStrv) files = tf_intake_list (paths, &error);
  g_assert_no_error (error);
  gboolean ok
      = tf_intake_fill (ledger, files, params, tally->cancel_after_one, on_report, tally, &error);
  if (tally->cancel_after_one == NULL)
    g_assert_no_error (error);
  g_assert_cmpint (ok, ==, error == NULL);
}

char *
sql_text (const char *path, const char *sql)
{
  sqlite3 *db = NULL;
  sqlite3_stmt *query = NULL;
  GString *ids = g_string_new (NULL);
  g_assert_cmpint (sqlite3_open (path, &db), ==, SQLITE_OK);
  g_assert_cmpint (sqlite3_prepare_v2 (db, sql, -1, &query, NULL), ==, SQLITE_OK);
  while (sqlite3_step (query) == SQLITE_ROW)
    g_string_append_printf (ids, "%s\n", (const char *)sqlite3_column_text (query, 0));
  sqlite3_finalize (query);
  sqlite3_close (db);
  return g_string_free (ids, FALSE);
}

char *
machine_ids (const char *path)
{
  return sql_text (path, "SELECT hex (cid) FROM (SELECT cid FROM frame UNION ALL SELECT cid FROM "
                         "measure UNION ALL SELECT cid FROM hint UNION ALL SELECT cid FROM "
                         "complexity) ORDER BY cid");
}

void
check_clean (TfLedger *ledger)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfNotes) findings = tf_notes_new ();
  g_assert_true (tf_ledger_check (ledger, findings, &error));
  g_assert_no_error (error);
  g_autofree char *codes = tf_notes_dup_codes (findings);
  g_assert_cmpstr (codes, ==, "");
}
