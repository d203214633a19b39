/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* study.json and study bundles, mutated from a seed: a study that reads back the same, a bundle whose
 * numbers can be worked out, or one sentence. Usage: fuzz-studies [MUTATIONS [SEED]]. Half of the
 * bundles are changed inside and zipped again with their checksums put right. */

#include <glib/gstdio.h>
#include <math.h>
#include <stdio.h>

#include "tf-bring.h"
#include "tf-bundle.h"
#include "tf-fuzz.h"
#include "tf-json.h"
#include "tf-zip.h"

static const char study_text[]
    = "{ \"name\": \"n\", \"version\": 3, \"mark_conditions\": [ { \"column\": \"cmd_deg\", \"is\": \"within\", \"value\": 45 },\n"
      " { \"column\": \"instrument\", \"is\": \"one-of\", \"value\": [ \"A\", \"B\" ] } ],\n"
      " \"sampling\": { \"sampling\": \"mean\", \"sampling-mu\": 0.4 },\n"
      " \"region_conditions\": [ { \"column\": \"axis_tilt_deg\", \"is\": \"at-most\", \"value\": 60 } ],\n"
      " \"conventions\": { \"cycle\": { \"divide-band\": 3 }, \"even_floor_gauss\": 40, \"instrument_scales\": true },\n"
      " \"methods\": { \"joy\": { \"joy-form\": \"sine\", \"joy-estimator\": \"least-squares\" } },\n"
      " \"divides\": [ { \"minimum\": 25, \"hemisphere\": \"N\", \"points\": [ [ \"2018-01-01T00:00:00.000Z\", 30 ], "
      "[ \"2020-01-01T00:00:00.000Z\", 10 ] ], \"band_deg\": 3 } ] }\n";

static gboolean
judge_study (const char *text)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfStudy) study = tf_study_read_text (text, "fuzzed", &error);
  if (study == NULL)
    {
      fuzz_must (error != NULL && g_utf8_validate (error->message, -1, NULL), "a refusal is text");
      return FALSE;
    }
  g_autofree char *once = tf_study_dup_text (study);
  g_autoptr (TfStudy) again = tf_study_read_text (once, "again", &error);
  fuzz_must (again != NULL, "a study's own text is a study");
  g_autofree char *twice = tf_study_dup_text (again);
  fuzz_must (strcmp (once, twice) == 0, "it reads back the same");
  return TRUE;
}

/* -- bundles ----------------------------------------------------------------------------------- */

static gboolean
judge_bundle (const char *path)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfBundle) bundle = tf_bundle_read (path, &error);
  if (bundle == NULL)
    {
      fuzz_must (error != NULL && g_utf8_validate (error->message, -1, NULL), "a refusal is text");
      return FALSE;
    }
  bundle->study->hale.draws = MIN (bundle->study->hale.draws, 3);
  bundle->study->joy.draws = MIN (bundle->study->joy.draws, 3);
  bundle->study->drift.draws = MIN (bundle->study->drift.draws, 3);
  g_autoptr (TfFindings) findings = tf_study_run_taken (bundle->study, bundle->taken, NULL);
  g_autoptr (GPtrArray) left = NULL;
  g_autoptr (GPtrArray) differences = tf_bundle_differences (bundle, bundle->study, findings, &left);
  for (guint k = 0; k < differences->len; k++)
    fuzz_must (g_utf8_validate (g_ptr_array_index (differences, k), -1, NULL), "a difference is text");
  for (guint k = 0; k < findings->hale->len; k++)
    {
      const TfHaleRow *row = &g_array_index (findings->hale, TfHaleRow, k);
      fuzz_must (row->keeps + row->breaks == row->n && (row->n == 0 || (row->share >= 0 && row->share <= 1)), "a share is one");
    }
  return TRUE;
}

/* A ledger with a table of invented regions, and the bundle of a study of it. */
static GBytes *
make_bundle (const char *folder, const char *path)
{
  g_autofree char *ledger_path = g_build_filename (folder, "a.ledger", NULL);
  g_autoptr (GString) text = g_string_new ("region,time,lat_deg,cmd_deg,axis_tilt_deg,leading_polarity,flux_unsigned_mx,instrument\n");
  for (int k = 0; k < 24; k++)
    g_string_append_printf (text, "R%d,2013-0%d-1%dT06:00:00Z,%d,%d,%d,%d,%de21,%s\n", k / 3, 1 + k % 9, k % 10,
                            k / 3 % 2 == 0 ? 8 + k : -8 - k, 40 - 3 * k, k - 8, k % 7 == 0 ? 1 : -1, 1 + k % 5, k % 2 == 0 ? "A" : "B");
  const TfBringParams params = { .source = "made" };
  g_autoptr (TfCells) table = tf_cells_read_text (text->str, text->len, "made", NULL);
  g_autoptr (TfBrought) brought = tf_bring (table, NULL, &params, "made", "c0ffee", NULL);
  g_autoptr (TfLedger) ledger = tf_ledger_create (ledger_path, 'T', NULL);
  fuzz_must (brought != NULL && ledger != NULL
                 && tf_ledger_add_outside (ledger, brought->table, brought->entries, NULL) != 0,
             "the table is brought");
  g_autoptr (TfStudy) study = tf_study_new_default ();
  study->hale.draws = study->joy.draws = study->drift.draws = 3;
  g_autoptr (TfFindings) findings = tf_study_run (study, ledger, NULL);
  g_autoptr (TfStudyTaken) taken = tf_study_take_whole (study, ledger, NULL);
  fuzz_must (tf_bundle_write (path, study, findings, taken, NULL), "the bundle is written");
  g_clear_pointer (&ledger, tf_ledger_close);
  g_unlink (ledger_path);
  char *bytes = NULL;
  gsize n = 0;
  if (!g_file_get_contents (path, &bytes, &n, NULL))
    abort ();
  return g_bytes_new_take (bytes, n);
}

static void
flip_bundle (GBytes *source, const char *path, GRand *chance)
{
  gsize n;
  const guint8 *data = g_bytes_get_data (source, &n);
  g_autoptr (GByteArray) bytes = g_byte_array_sized_new ((guint)n);
  g_byte_array_append (bytes, data, (guint)n);
  fuzz_flip (bytes, chance, 4);
  if (g_rand_int_range (chance, 0, 8) == 0)
    g_byte_array_set_size (bytes, (guint)g_rand_int_range (chance, 0, (gint)bytes->len));
  if (!g_file_set_contents (path, (const char *)bytes->data, bytes->len, NULL))
    abort ();
}

/* One of its texts changed; the checksums are those of what is now inside. */
static void
change_inside (const TfZip *whole, const char *path, GRand *chance)
{
  static const char *const texts[] = { "study.json", "sample.csv", "laws.json", "versions.json" };
  const char *victim = texts[g_rand_int_range (chance, 0, G_N_ELEMENTS (texts))];
  g_autoptr (TfZip) out = tf_zip_new ();
  g_autoptr (GString) sums = g_string_new (NULL);
  const GArray *files = tf_zip_get_files (whole);
  gboolean of_versions = strcmp (victim, "versions.json") == 0;
  for (guint k = 0; k < files->len; k++)
    {
      const TfZipFile *file = &g_array_index (files, TfZipFile, k);
      if (!g_strv_contains ((const char *const[]){ "study.json", "sample.csv", "laws.json", "versions.json", NULL }, file->name)
          || (strcmp (file->name, "versions.json") == 0 && !of_versions))
        continue;
      GBytes *bytes = strcmp (file->name, victim) == 0
                          ? g_byte_array_free_to_bytes (fuzz_mutate_cells (file->bytes, chance, ",:\n"))
                          : g_bytes_ref (file->bytes);
      g_autofree char *sum = g_compute_checksum_for_bytes (G_CHECKSUM_SHA256, bytes);
      g_string_append_printf (sums, "%s\"%s\": \"%s\"", sums->len > 0 ? "," : "", file->name, sum);
      tf_zip_add (out, file->name, bytes);
    }
  g_autofree char *versions = g_strdup_printf ("{ \"bundle_format\": 1, \"program\": \"x\", \"sha256\": { %s } }", sums->str);
  if (!of_versions)
    tf_zip_add_text (out, "versions.json", versions);
  fuzz_must (tf_zip_write (out, path, NULL), "the changed bundle is written");
}

int
main (int argc, char **argv)
{
  guint n = argc > 1 ? (guint)g_ascii_strtoull (argv[1], NULL, 10) : 300, studies = 0, bundles = 0;
  guint32 seed = argc > 2 ? (guint32)g_ascii_strtoull (argv[2], NULL, 10) : 20131012;
  g_autoptr (GRand) chance = g_rand_new_with_seed (seed);
  const char *top = g_file_test ("/dev/shm", G_FILE_TEST_IS_DIR) ? "/dev/shm" : g_get_tmp_dir ();
  g_autofree char *folder = g_mkdtemp (g_build_filename (top, "tf-fuzz-XXXXXX", NULL)),
                  *path = g_build_filename (folder, "a.zip", NULL), *state = g_build_filename (folder, "state", NULL);
  g_setenv ("XDG_STATE_HOME", state, TRUE);
  g_autoptr (GBytes) text = g_bytes_new_static (study_text, strlen (study_text));
  fuzz_must (judge_study (study_text), "the study itself is read");
  for (guint k = 0; k < 4 * n; k++)
    {
      g_autoptr (GByteArray) bytes = fuzz_mutate_cells (text, chance, k % 2 == 0 ? ",:\n" : " \n");
      g_byte_array_append (bytes, (const guint8 *)"", 1);
      studies += judge_study ((const char *)bytes->data);
    }
  printf ("ok 1 - %u studies from seed %u, %u of them read, read back the same or are a sentence\n", 4 * n, seed, studies);
  g_autoptr (GBytes) source = make_bundle (folder, path);
  g_autoptr (TfZip) whole = tf_zip_read (path, NULL);
  fuzz_must (judge_bundle (path), "the bundle itself is read");
  for (guint k = 0; k < n; k++)
    {
      if (k % 2 == 0)
        flip_bundle (source, path, chance);
      else
        change_inside (whole, path, chance);
      bundles += judge_bundle (path);
    }
  printf ("ok 2 - %u bundles, %u of them read, are worked out or a sentence\n", n, bundles);
  gboolean both = bundles > n / 20 && bundles < n;
  printf ("%s 3 - some are read and some are not\n1..3\n", both ? "ok" : "not ok");
  const char *remove[] = { "rm", "-rf", folder, NULL };
  g_spawn_sync (NULL, (char **)remove, NULL, G_SPAWN_SEARCH_PATH, NULL, NULL, NULL, NULL, NULL, NULL);
  return both ? 0 : 1;
}
