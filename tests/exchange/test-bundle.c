/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <glib/gstdio.h>
#include <math.h>
#include <string.h>

#include "test-rows.h"
#include "tf-bring.h"
#include "tf-bundle.h"
#include "tf-check.h"
#include "tf-json.h"
#include "tf-zip.h"

/* A ledger with a brought table of two cycles, and bundles of a study of it; then every way to spoil
 * one. */

typedef struct
{
  char *folder, *ledger_path, *path;
  TfLedger *ledger;
  TfStudy *study;
  TfFindings *findings;
  TfStudyTaken *taken;
} Fixture;

/* Two hemispheres, one row in nine against Hale's law; a few cells missing, a text with commas. */
static char *
make_table (void)
{
  GString *text = g_string_new (
      "region,time,lat_deg,cmd_deg,axis_tilt_deg,leading_polarity,leading_sure,flux_unsigned_mx,"
      "separation_deg,compactness,label,size\r\n");
  for (int k = 0; k < 90; k++)
    {
      double lat = (k / 2 % 2 == 0 ? 1 : -1) * (8 + 0.31 * (k % 50));
      int keeps = k / 2 % 2 == 0 ? -1 : 1; /* even cycle */
      g_string_append_printf (text, "R%d,20%d-0%d-10T06:00:00.000Z,%g,%d,", k / 2, 12 + k / 45, 1 + k % 9, lat,
                              k % 80 - 40);
      if (k % 13 != 5)
        g_string_append_printf (text, "%g", 0.4 * fabs (lat) + 6 * sin (k));
      g_string_append_printf (text, ",%d,true,%g,%g,%s,\"a, \"\"%d\"\"\",%s\r\n", k / 2 % 9 == 4 ? -keeps : keeps,
                              1e21 * (1 + k % 7), 3 + 0.05 * k, k % 5 == 0 ? "" : "1.5", k,
                              k % 11 == 3 ? "ephemeral" : "region");
    }
  return g_string_free (text, FALSE);
}

static void
run (Fixture *f)
{
  g_autoptr (GError) error = NULL;
  g_clear_pointer (&f->findings, tf_findings_free);
  g_clear_pointer (&f->taken, tf_study_taken_unref);
  f->findings = tf_study_run (f->study, f->ledger, &error);
  g_assert_no_error (error);
  f->taken = tf_study_take_whole (f->study, f->ledger, &error);
  g_assert_no_error (error);
}

static void
set_up (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  g_autofree char *text = make_table ();
  f->folder = g_dir_make_tmp ("tf-bundle-XXXXXX", NULL);
  f->ledger_path = g_build_filename (f->folder, "test.ledger", NULL);
  f->path = g_build_filename (f->folder, "study.zip", NULL);
  f->ledger = tf_ledger_create (f->ledger_path, 'T', &error);
  g_assert_no_error (error);
  const TfBringParams params = { .source = "made here", .licence = "free" };
  g_autoptr (TfCells) table = tf_cells_read_text (text, strlen (text), "made.csv", &error);
  g_autoptr (TfBrought) brought = tf_bring (table, NULL, &params, "made.csv", "c0ffee", &error);
  g_assert_no_error (error);
  g_assert_cmpint (tf_ledger_add_outside (f->ledger, brought->table, brought->entries, &error), >, 0);
  f->study = tf_study_new_default ();
  f->study->hale.draws = f->study->joy.draws = 50;
  run (f);
}

static void
tear_down (Fixture *f, gconstpointer data)
{
  const char *name;
  tf_ledger_close (f->ledger);
  tf_study_free (f->study);
  tf_findings_free (f->findings);
  tf_study_taken_unref (f->taken);
  g_autoptr (GDir) dir = g_dir_open (f->folder, 0, NULL);
  while ((name = g_dir_read_name (dir)) != NULL)
    {
      g_autofree char *path = g_build_filename (f->folder, name, NULL);
      g_unlink (path);
    }
  g_rmdir (f->folder);
  g_free (f->folder);
  g_free (f->ledger_path);
  g_free (f->path);
}

static void
write_bundle (Fixture *f)
{
  g_autoptr (GError) error = NULL;
  gboolean good = tf_bundle_write (f->path, f->study, f->findings, f->taken, &error);
  g_assert_no_error (error);
  g_assert_true (good && tf_bundle_is (f->path));
}

static GBytes *
read_bytes (const char *path)
{
  char *bytes = NULL;
  gsize n = 0;
  g_assert_true (g_file_get_contents (path, &bytes, &n, NULL));
  return g_bytes_new_take (bytes, n);
}

/* What it reads back gives its own numbers, without the ledger; nothing is left uncompared but what
 * takes other measures or the hints. */
static void
test_same (Fixture *f, gconstpointer data)
{
  static const char *const ledger_alone[] = { "floor-a-fifth-lower", "floor-a-fifth-higher", "floor-of-each-mark", "hints-taken-in", NULL };
  g_autoptr (GError) error = NULL;
  write_bundle (f);
  g_autoptr (TfBundle) bundle = tf_bundle_read (f->path, &error);
  g_assert_no_error (error);
  g_assert_cmpuint (tf_study_taken_get_n (bundle->taken), ==, 90);
  g_autoptr (TfFindings) again = tf_study_run_taken (bundle->study, bundle->taken, NULL);
  g_autoptr (GPtrArray) left = NULL;
  g_autoptr (GPtrArray) differences = tf_bundle_differences (bundle, bundle->study, again, &left);
  for (guint k = 0; k < differences->len; k++)
    g_test_message ("%s", (char *)g_ptr_array_index (differences, k));
  g_assert_cmpuint (differences->len, ==, 0);
  for (guint k = 0; k < left->len; k++)
    g_assert_true (g_strv_contains (ledger_alone, g_ptr_array_index (left, k)));
  const TfHaleRow *all = NULL;
  for (guint k = 0; k < again->hale->len && (all == NULL || all->cycle != 0 || all->hemisphere != 0); k++)
    all = &g_array_index (again->hale, TfHaleRow, k);
  g_assert_cmpuint (all->breaks, >, 0);
  g_assert_cmpuint (all->keeps, >, 20);
}

static void
test_equal_bytes (Fixture *f, gconstpointer data)
{
  write_bundle (f);
  g_autoptr (GBytes) first = read_bytes (f->path);
  g_usleep (1100 * 1000); /* a time in seconds would differ */
  write_bundle (f);
  g_autoptr (GBytes) second = read_bytes (f->path);
  g_assert_true (g_bytes_equal (first, second));
}

/* Another choice is told, with what it does to the numbers. */
static void
test_other_choice (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  write_bundle (f);
  g_autoptr (TfBundle) bundle = tf_bundle_read (f->path, &error);
  g_assert_no_error (error);
  bundle->study->sieve.cmd_max_deg = 20;
  g_autoptr (TfFindings) again = tf_study_run_taken (bundle->study, bundle->taken, NULL);
  g_autoptr (GPtrArray) left = NULL;
  g_autoptr (GPtrArray) differences = tf_bundle_differences (bundle, bundle->study, again, &left);
  g_ptr_array_add (differences, NULL);
  g_autofree char *all = g_strjoinv ("\n", (char **)differences->pdata);
  g_assert_nonnull (strstr (all, "cmd-max"));
  g_assert_nonnull (strstr (all, "sample.picks"));
}

/* -- spoilt ones ------------------------------------------------------------------------------- */

/* The bundle anew without, or with another, file; its checksums are put right where @sums. */
static void
change_file (Fixture *f, const char *name, const char *text, gboolean sums)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfZip) zip = tf_zip_read (f->path, &error), out = tf_zip_new ();
  g_assert_no_error (error);
  const GArray *files = tf_zip_get_files (zip);
  g_autofree char *sum = text != NULL ? g_compute_checksum_for_string (G_CHECKSUM_SHA256, text, -1) : NULL;
  for (guint k = 0; k < files->len; k++)
    {
      const TfZipFile *file = &g_array_index (files, TfZipFile, k);
      if (strcmp (file->name, name) == 0)
        {
          if (text != NULL)
            tf_zip_add_text (out, name, text);
          continue;
        }
      gsize n;
      const char *bytes = g_bytes_get_data (file->bytes, &n);
      g_autofree char *own = g_strndup (bytes, n);
      char *at = sums && sum != NULL && strcmp (file->name, "versions.json") == 0 ? strstr (own, name) : NULL;
      if (at != NULL)
        memcpy (at + strlen (name) + 4, sum, 64); /* name": " */
      tf_zip_add (out, file->name, at != NULL ? g_bytes_new (own, n) : g_bytes_ref (file->bytes));
    }
  g_assert_true (tf_zip_write (out, f->path, &error));
}

static char *
dup_inside (Fixture *f, const char *name)
{
  g_autoptr (TfZip) zip = tf_zip_read (f->path, NULL);
  gsize n;
  const char *bytes = g_bytes_get_data (tf_zip_get (zip, name), &n);
  return g_strndup (bytes, n);
}

/* One line that names the file and says @word. */
static void
check_refused (Fixture *f, const char *word)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfBundle) bundle = tf_bundle_read (f->path, &error);
  g_assert_null (bundle);
  g_assert_nonnull (error);
  g_test_message ("%s", error->message);
  g_assert_true (g_str_has_prefix (error->message, f->path));
  g_assert_nonnull (strstr (error->message, word));
  g_assert_null (strchr (error->message, '\n'));
}

static char *
replace (const char *text, const char *what, const char *with)
{
  g_auto (GStrv) parts = g_strsplit (text, what, 2);
  g_assert_nonnull (parts[1]);
  return g_strjoinv (with, parts);
}

static void
test_members (Fixture *f, gconstpointer data)
{
  static const char *const names[] = { "study.json", "sample.csv", "laws.json", "versions.json" };
  for (guint k = 0; k < G_N_ELEMENTS (names); k++)
    {
      write_bundle (f);
      change_file (f, names[k], NULL, FALSE);
      check_refused (f, names[k]);
      write_bundle (f);
      change_file (f, names[k], "{ \"changed\": 1 }", FALSE);
      check_refused (f, names[k]);
    }
}

static void
test_newer (Fixture *f, gconstpointer data)
{
  write_bundle (f);
  g_autofree char *versions = dup_inside (f, "versions.json");
  g_autofree char *newer = replace (versions, "\"bundle_format\": 1", "\"bundle_format\": 7");
  change_file (f, "versions.json", newer, FALSE);
  check_refused (f, "newer");
}

static void
test_rows (Fixture *f, gconstpointer data)
{
  static const struct
  {
    const char *what, *with, *word;
  } rows[] = { { ",outside,", ",overheard,", "origin" },
               { "2012-01-10T06:00:00.000Z", "", "" },
               { "\r\nR1,", "\r\nR1,\"", "quote" } };
  write_bundle (f);
  g_autofree char *sample = dup_inside (f, "sample.csv");
  for (guint k = 0; k < G_N_ELEMENTS (rows); k++)
    {
      g_autofree char *text = replace (sample, rows[k].what, rows[k].with);
      write_bundle (f);
      change_file (f, "sample.csv", text, TRUE);
      if (*rows[k].word != '\0')
        check_refused (f, rows[k].word);
    }
  /* A row without a time is read; its cycle cannot be told any more, which the comparison says. */
  g_autofree char *timeless = replace (sample, rows[1].what, rows[1].with);
  write_bundle (f);
  change_file (f, "sample.csv", timeless, TRUE);
  g_autoptr (GError) error = NULL;
  g_autoptr (TfBundle) bundle = tf_bundle_read (f->path, &error);
  g_assert_no_error (error);
  g_autoptr (TfFindings) again = tf_study_run_taken (bundle->study, bundle->taken, NULL);
  g_autoptr (GPtrArray) left = NULL;
  g_autoptr (GPtrArray) differences = tf_bundle_differences (bundle, bundle->study, again, &left);
  g_assert_cmpuint (differences->len, >, 0);
}

/* Names that lead out, two of one name, a file that unpacks to more than there may be, no zip. */
static void
test_hostile (Fixture *f, gconstpointer data)
{
  static const char *const names[] = { "../study.json", "/etc/study.json", "figures/../../x", "c:x", "./study.json", "a//b" };
  g_autoptr (GError) error = NULL;
  for (guint k = 0; k < G_N_ELEMENTS (names); k++)
    {
      g_autoptr (TfZip) zip = tf_zip_new ();
      tf_zip_add_text (zip, names[k], "{}");
      g_assert_true (tf_zip_write (zip, f->path, &error));
      check_refused (f, "leads out");
    }
  g_autoptr (TfZip) twice = tf_zip_new ();
  tf_zip_add_text (twice, "study.json", "{}");
  tf_zip_add_text (twice, "study.json", "[]");
  g_assert_true (tf_zip_write (twice, f->path, &error));
  check_refused (f, "second one");
  g_autofree char *zeros = g_malloc0 ((gsize)64 << 20);
  g_autoptr (GBytes) block = g_bytes_new_static (zeros, (gsize)64 << 20);
  g_autoptr (TfZip) huge = tf_zip_new ();
  for (guint k = 0; k < 3; k++)
    {
      g_autofree char *name = g_strdup_printf ("huge-%u", k);
      tf_zip_add (huge, name, g_bytes_ref (block));
    }
  g_assert_true (tf_zip_write (huge, f->path, &error));
  g_autoptr (TfZip) read = tf_zip_read_most (f->path, (gsize)100 << 20, &error);
  g_assert_null (read);
  g_assert_nonnull (strstr (error->message, "unpacks"));
  g_assert_true (g_file_set_contents (f->path, "no zip at all", -1, NULL));
  check_refused (f, "zip");
}

/* Cut short anywhere it is one sentence. */
static void
test_cut (Fixture *f, gconstpointer data)
{
  write_bundle (f);
  g_autoptr (GBytes) whole = read_bytes (f->path);
  gsize n;
  const char *bytes = g_bytes_get_data (whole, &n);
  for (gsize k = 1; k < 20; k++)
    {
      g_assert_true (g_file_set_contents (f->path, bytes, (gssize)(n * k / 20), NULL));
      check_refused (f, "");
    }
}

void
add_bundle_tests (void)
{
#define ADD(name, function) g_test_add ("/exchange/bundle/" name, Fixture, NULL, set_up, function, tear_down)
  ADD ("read-back-it-gives-its-own-numbers", test_same);
  ADD ("equal-input-gives-equal-bytes", test_equal_bytes);
  ADD ("another-choice-is-told", test_other_choice);
  ADD ("a-missing-or-changed-file-is-named", test_members);
  ADD ("a-newer-format-is-said", test_newer);
  ADD ("a-bad-row-is-named", test_rows);
  ADD ("hostile-zips-are-refused", test_hostile);
  ADD ("a-cut-one-is-one-sentence", test_cut);
#undef ADD
}
