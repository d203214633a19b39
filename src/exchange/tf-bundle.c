/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-bundle.h"

#include <string.h>
#include <glib/gstdio.h>
#include <gsl/gsl_version.h>

#include "tf-bundle-private.h"
#include "tf-export-private.h"
#include "tf-findings-figures.h"
#include "tf-json.h"
#include "tf-ledger-scales.h"
#include "tf-zip.h"

/* The generator behind every interval by draws (tf-proportion.h). */
#define DRAWS "mt19937 of GSL, by the seeds in " TF_BUNDLE_STUDY

/* -- the rows ---------------------------------------------------------------------------------- */

static GArray *
collect_rows (const TfStudy *study, const TfFindings *findings, const TfStudyTaken *taken)
{
  const TfSample *all = tf_study_taken_get_sample (taken);
  guint n = tf_study_taken_get_n (taken);
  GArray *rows = g_array_sized_new (FALSE, TRUE, sizeof (TfBundleRow), n);
  g_autoptr (TfDivides) divides = study->divides != NULL ? tf_divides_ref (study->divides)
                                                         : tf_divides_new (&study->divide);
  for (guint k = 0; k < n; k++)
    {
      TfBundleRow row = { .flat = { .row = tf_study_taken_get_row (taken, k), .sample = *tf_sample_get (all, k) } };
      row.flat.verdict = tf_verdict_judge (&row.flat.sample, divides, &study->verdict);
      g_array_append_val (rows, row);
    }
  for (guint k = 0; k < tf_sample_get_n (findings->sample); k++)
    {
      guint at = tf_sample_get (findings->sample, k)->row;
      TfBundleRow *row = &g_array_index (rows, TfBundleRow, at);
      row->picked = TRUE;
      row->flat.verdict = findings->verdicts[k]; /* the passage's other marks have their say in it */
    }
  return rows;
}

static char *
dup_sample (const TfStudy *study, const TfFindings *findings, const TfStudyTaken *taken)
{
  g_autoptr (GArray) rows = collect_rows (study, findings, taken);
  g_autoptr (GArray) facts = tf_facts_new (rows, study, "the ledger that the study was run on");
  g_auto (TfTableOut) table = { 0 };
  tf_table_out_init (&table, "sample", TRUE, tf_bundle_columns, rows, facts);
  return tf_export_dup_csv (&table);
}

/* -- the other files --------------------------------------------------------------------------- */

static char *
dup_laws (const TfStudy *study, const TfFindings *findings)
{
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  tf_findings_build_json (findings, study, builder);
  return tf_json_dup_text (builder, TRUE);
}

/* By a folder of our own, since charts are written as files. */
static gboolean
add_figures (TfZip *zip, const TfStudy *study, const TfFindings *findings, GError **error)
{
  g_autofree char *folder = g_dir_make_tmp ("tiltfield-figures-XXXXXX", error);
  g_autoptr (GPtrArray) files
      = folder != NULL ? tf_findings_write_figures (findings, study, folder, error) : NULL;
  gboolean good = files != NULL;
  for (guint k = 0; files != NULL && k < files->len; k++)
    {
      const char *path = g_ptr_array_index (files, k);
      g_autofree char *base = g_path_get_basename (path), *bytes = NULL;
      g_autofree char *name = g_strconcat (TF_BUNDLE_FIGURES, base, NULL);
      gsize n = 0;
      good = good && g_file_get_contents (path, &bytes, &n, error);
      if (good)
        tf_zip_add (zip, name, g_bytes_new_take (g_steal_pointer (&bytes), n));
      g_unlink (path);
    }
  if (folder != NULL)
    g_rmdir (folder);
  return good;
}

static void
build_scales (JsonBuilder *builder, const GPtrArray *scales)
{
  json_builder_set_member_name (builder, "instrument_scales");
  json_builder_begin_array (builder);
  for (guint k = 0; k < scales->len; k++)
    {
      const TfKeptScale *scale = g_ptr_array_index (scales, k);
      json_builder_begin_object (builder);
      tf_json_string (builder, "instrument", scale->instrument);
      tf_json_string (builder, "reference", scale->reference);
      tf_json_number (builder, "factor", scale->factor);
      tf_json_number (builder, "sigma", scale->sigma);
      json_builder_end_object (builder);
    }
  json_builder_end_array (builder);
}

static char *
dup_versions (const TfZip *zip, const TfStudyTaken *taken)
{
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  const GArray *files = tf_zip_get_files (zip);
  json_builder_begin_object (builder);
  tf_json_int (builder, "bundle_format", TF_BUNDLE_FORMAT);
  tf_json_string (builder, "program", "Tiltfield " TF_VERSION);
  tf_json_string (builder, "statistics", "GSL " GSL_VERSION);
  tf_json_string (builder, "draws", DRAWS);
  build_scales (builder, tf_study_taken_get_scales (taken));
  json_builder_set_member_name (builder, "sha256");
  json_builder_begin_object (builder);
  for (guint k = 0; k < files->len; k++)
    {
      const TfZipFile *file = &g_array_index (files, TfZipFile, k);
      g_autofree char *sum = g_compute_checksum_for_bytes (G_CHECKSUM_SHA256, file->bytes);
      tf_json_string (builder, file->name, sum);
    }
  json_builder_end_object (builder);
  json_builder_end_object (builder);
  return tf_json_dup_text (builder, TRUE);
}

static void
take_text (TfZip *zip, const char *name, char *text)
{
  tf_zip_add (zip, name, g_bytes_new_take (text, strlen (text)));
}

gboolean
tf_bundle_write (const char *path, const TfStudy *study, const TfFindings *findings,
                 const TfStudyTaken *taken, GError **error)
{
  g_return_val_if_fail (path != NULL && study != NULL && findings != NULL && taken != NULL, FALSE);
  g_autoptr (TfZip) zip = tf_zip_new ();
  take_text (zip, TF_BUNDLE_STUDY, tf_study_dup_text (study));
  take_text (zip, TF_BUNDLE_SAMPLE, dup_sample (study, findings, taken));
  take_text (zip, TF_BUNDLE_LAWS, dup_laws (study, findings));
  if (!add_figures (zip, study, findings, error))
    return FALSE;
  take_text (zip, TF_BUNDLE_VERSIONS, dup_versions (zip, taken));
  return tf_zip_write (zip, path, error);
}
