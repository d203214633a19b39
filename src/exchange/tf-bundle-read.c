/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <stdio.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-bundle-private.h"
#include "tf-export.h"
#include "tf-json.h"
#include "tf-ledger-scales.h"
#include "tf-study-compare.h"
#include "tf-zip.h"

/* A bundle back, and against its own numbers. */

void
tf_bundle_free (TfBundle *bundle)
{
  if (bundle == NULL)
    return;
  g_clear_pointer (&bundle->study, tf_study_free);
  g_clear_pointer (&bundle->taken, tf_study_taken_unref);
  g_clear_pointer (&bundle->laws, json_node_unref);
  g_free (bundle->program);
  g_free (bundle);
}

gboolean
tf_bundle_is (const char *path)
{
  char head[4] = "";
  FILE *file = fopen (path, "rb");
  if (file == NULL)
    return FALSE;
  gsize n = fread (head, 1, sizeof head, file);
  fclose (file);
  return n == sizeof head && memcmp (head, "PK\003\004", sizeof head) == 0;
}

/* -- the files --------------------------------------------------------------------------------- */

/* A file inside as text that ends in 0. */
static char *
dup_file (const TfZip *zip, const char *name, const char *path, GError **error)
{
  GBytes *bytes = tf_zip_get (zip, name);
  if (bytes == NULL)
    {
      g_autofree char *reason = g_strdup_printf (
          _ ("there is no %s inside, so that it is no study bundle, or not all of one"), name);
      tf_export_fail_read (error, path, reason);
      return NULL;
    }
  gsize n;
  const char *data = g_bytes_get_data (bytes, &n);
  if (n == 0 || !g_utf8_validate (data, (gssize)n, NULL))
    {
      g_autofree char *reason = g_strdup_printf (_ ("%s inside is empty or no UTF-8 text"), name);
      tf_export_fail_read (error, path, reason);
      return NULL;
    }
  return g_strndup (data, n);
}

static JsonNode *
read_object (const TfZip *zip, const char *name, const char *path, GError **error)
{
  g_autofree char *text = dup_file (zip, name, path, error);
  g_autoptr (JsonNode) node = text != NULL ? json_from_string (text, NULL) : NULL;
  if (node != NULL && JSON_NODE_HOLDS_OBJECT (node))
    return g_steal_pointer (&node);
  g_autofree char *reason = g_strdup_printf (_ ("%s inside is no JSON object"), name);
  if (text != NULL)
    tf_export_fail_read (error, path, reason);
  return NULL;
}

/* Every file that the bundle names must be what it was. */
static gboolean
check_sums (const TfZip *zip, JsonObject *versions, const char *path, GError **error)
{
  JsonObject *sums = tf_json_member_object (versions, "sha256");
  const GArray *files = tf_zip_get_files (zip);
  for (guint k = 0; k < files->len; k++)
    {
      const TfZipFile *file = &g_array_index (files, TfZipFile, k);
      if (strcmp (file->name, TF_BUNDLE_VERSIONS) == 0)
        continue;
      const char *told = sums != NULL ? tf_json_member_string (sums, file->name) : NULL;
      g_autofree char *sum = g_compute_checksum_for_bytes (G_CHECKSUM_SHA256, file->bytes);
      if (g_strcmp0 (told, sum) == 0)
        continue;
      g_autofree char *shown = g_strescape (file->name, NULL);
      g_autofree char *reason = g_strdup_printf (
          _ ("%s inside is not what was put in: its checksum differs from the one in %s"), shown,
          TF_BUNDLE_VERSIONS);
      tf_export_fail_read (error, path, reason);
      return FALSE;
    }
  return TRUE;
}

static gboolean
check_format (JsonObject *versions, const char *path, GError **error)
{
  gint64 format = tf_json_member_int (versions, "bundle_format", 0);
  const char *program = tf_json_member_string (versions, "program");
  if (format >= 1 && format <= TF_BUNDLE_FORMAT)
    return TRUE;
  g_autofree char *reason
      = format > TF_BUNDLE_FORMAT
            ? g_strdup_printf (_ ("it was written by a newer program (%.80s), in a format that this one "
                                  "does not read; take that version or a newer one"),
                               program != NULL ? program : "?")
            : g_strdup_printf (_ ("%s inside does not tell the format of a study bundle"),
                               TF_BUNDLE_VERSIONS);
  tf_export_fail_read (error, path, reason);
  return FALSE;
}

static GPtrArray *
read_scales (JsonObject *versions)
{
  GPtrArray *scales = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_kept_scale_free);
  JsonArray *array = tf_json_member_array (versions, "instrument_scales");
  for (guint k = 0; array != NULL && k < json_array_get_length (array); k++)
    {
      JsonNode *node = json_array_get_element (array, k);
      JsonObject *from = JSON_NODE_HOLDS_OBJECT (node) ? json_node_get_object (node) : NULL;
      double factor = from != NULL ? tf_json_member_number (from, "factor") : NAN;
      if (!(factor > 0) || !isfinite (factor))
        continue;
      TfKeptScale *scale = g_new0 (TfKeptScale, 1);
      scale->instrument = g_strdup (tf_json_member_string (from, "instrument"));
      scale->reference = g_strdup (tf_json_member_string (from, "reference"));
      scale->factor = factor;
      scale->sigma = tf_json_member_number (from, "sigma");
      g_ptr_array_add (scales, scale);
    }
  return scales;
}

static gboolean
read_rows (TfStudyTaken *taken, const TfCells *table, const char *path, GError **error)
{
  const TfFault *fault
      = table->faults->len > 0 ? &g_array_index (table->faults, TfFault, 0) : NULL;
  g_autofree char *wrong = fault != NULL ? g_strdup (fault->reason) : NULL;
  guint place = fault != NULL ? fault->place : 0;
  for (guint k = 0; wrong == NULL && k < table->rows->len; k++)
    {
      wrong = tf_bundle_add_row (taken, table, k);
      place = g_array_index (table->places, guint, k);
    }
  if (wrong == NULL && table->rows->len == 0)
    wrong = g_strdup (_ ("there are no rows"));
  if (wrong == NULL)
    return TRUE;
  g_autofree char *reason
      = g_strdup_printf (_ ("line %u of %s inside: %s"), place, TF_BUNDLE_SAMPLE, wrong);
  tf_export_fail_read (error, path, reason);
  return FALSE;
}

static gboolean
read_sample (TfBundle *bundle, const TfZip *zip, const char *path, GError **error)
{
  g_autofree char *text = dup_file (zip, TF_BUNDLE_SAMPLE, path, error);
  g_autoptr (TfCells) table
      = text != NULL ? tf_cells_read_text (text, strlen (text), path, error) : NULL;
  if (table == NULL || !read_rows (bundle->taken, table, path, error))
    return FALSE;
  tf_study_taken_close (bundle->taken);
  return TRUE;
}

static gboolean
read_study (TfBundle *bundle, const TfZip *zip, const char *path, GError **error)
{
  g_autofree char *text = dup_file (zip, TF_BUNDLE_STUDY, path, error);
  g_autofree char *name = g_strdup_printf ("%s: %s", path, TF_BUNDLE_STUDY);
  bundle->study = text != NULL ? tf_study_read_text (text, name, error) : NULL;
  return bundle->study != NULL;
}

static gboolean
read_parts (TfBundle *bundle, const TfZip *zip, JsonObject *versions, const char *path,
            GError **error)
{
  if (!check_format (versions, path, error) || !check_sums (zip, versions, path, error)
      || !read_study (bundle, zip, path, error))
    return FALSE;
  bundle->program = g_strdup (tf_json_member_string (versions, "program"));
  bundle->taken = tf_study_taken_new (bundle->study->even_floor_gauss, read_scales (versions));
  bundle->laws = read_object (zip, TF_BUNDLE_LAWS, path, error);
  return bundle->laws != NULL && read_sample (bundle, zip, path, error);
}

TfBundle *
tf_bundle_read (const char *path, GError **error)
{
  g_return_val_if_fail (path != NULL, NULL);
  g_autoptr (TfZip) zip = tf_zip_read (path, error);
  g_autoptr (JsonNode) versions
      = zip != NULL ? read_object (zip, TF_BUNDLE_VERSIONS, path, error) : NULL;
  g_autoptr (TfBundle) bundle = g_new0 (TfBundle, 1);
  if (versions == NULL
      || !read_parts (bundle, zip, json_node_get_object (versions), path, error))
    return NULL;
  return g_steal_pointer (&bundle);
}

/* -- comparing --------------------------------------------------------------------------------- */

static gboolean
is_not_measured (JsonNode *row)
{
  JsonObject *object = JSON_NODE_HOLDS_OBJECT (row) ? json_node_get_object (row) : NULL;
  return object != NULL
         && g_strcmp0 (tf_json_member_string (object, "missing"), "not-measured") == 0;
}

static gboolean
has_choice (const GPtrArray *names, JsonNode *row)
{
  const char *name = JSON_NODE_HOLDS_OBJECT (row)
                         ? tf_json_member_string (json_node_get_object (row), "choice")
                         : NULL;
  return name != NULL && g_ptr_array_find_with_equal_func ((GPtrArray *)names, name, g_str_equal, NULL);
}

/* The other choices without those of @names. */
static void
leave_out (JsonObject *laws, const GPtrArray *names)
{
  JsonArray *all = tf_json_member_array (laws, "what_if");
  JsonArray *rest = json_array_new ();
  for (guint k = 0; all != NULL && k < json_array_get_length (all); k++)
    if (!has_choice (names, json_array_get_element (all, k)))
      json_array_add_element (rest, json_node_copy (json_array_get_element (all, k)));
  json_object_set_array_member (laws, "what_if", rest);
}

/* Keys of the ledger's own, which mean nothing elsewhere. */
static void
leave_out_keys (JsonObject *laws)
{
  JsonArray *sums = tf_json_member_array (laws, "axial_dipole");
  for (guint k = 0; sums != NULL && k < json_array_get_length (sums); k++)
    {
      JsonNode *sum = json_array_get_element (sums, k);
      if (JSON_NODE_HOLDS_OBJECT (sum))
        json_object_remove_member (json_node_get_object (sum), "costliest_mark");
    }
}

static GPtrArray *
list_not_measured (JsonObject *laws)
{
  GPtrArray *names = g_ptr_array_new_with_free_func (g_free);
  JsonArray *all = tf_json_member_array (laws, "what_if");
  for (guint k = 0; all != NULL && k < json_array_get_length (all); k++)
    {
      JsonNode *row = json_array_get_element (all, k);
      if (is_not_measured (row))
        g_ptr_array_add (names,
                         g_strdup (tf_json_member_string (json_node_get_object (row), "choice")));
    }
  return names;
}

GPtrArray *
tf_bundle_differences (const TfBundle *bundle, const TfStudy *study, const TfFindings *findings,
                       GPtrArray **not_compared)
{
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  tf_findings_build_json (findings, study, builder);
  /* Both by way of text, where what does not exist is null. */
  g_autofree char *before_text = tf_json_node_dup_text (bundle->laws, FALSE),
                  *now_text = tf_json_dup_text (builder, FALSE);
  g_autoptr (JsonNode) before = json_from_string (before_text, NULL),
                       now = json_from_string (now_text, NULL);
  *not_compared = list_not_measured (json_node_get_object (now));
  JsonNode *both[] = { before, now };
  for (guint k = 0; k < G_N_ELEMENTS (both); k++)
    {
      leave_out (json_node_get_object (both[k]), *not_compared);
      leave_out_keys (json_node_get_object (both[k]));
    }
  return tf_json_differences (before, now);
}
