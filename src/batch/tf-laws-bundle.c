/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <stdio.h>
#include <glib/gi18n-lib.h>

#include "tf-tables.h"
#include "tf-findings-figures.h"
#include "tf-json.h"

/* laws on a study bundle: worked out again, and held against the bundle's own numbers. */

static JsonNode *
build_said (const char *path, const TfBundle *bundle, const GPtrArray *differences,
            const GPtrArray *not_compared)
{
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  json_builder_begin_object (builder);
  tf_json_string (builder, "file", path);
  tf_json_string (builder, "written_by", bundle->program);
  tf_json_bool (builder, "same", differences->len == 0);
  tf_batch_build_texts (builder, "differences", differences);
  tf_batch_build_texts (builder, "not_compared", not_compared);
  json_builder_end_object (builder);
  return json_builder_get_root (builder);
}

/* The document of laws, with what became of the comparison. */
static void
print_json (const TfFindings *findings, const TfStudy *study, JsonNode *said)
{
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  tf_findings_build_json (findings, study, builder);
  g_autoptr (JsonNode) root = json_builder_get_root (builder);
  json_object_set_member (json_node_get_object (root), "bundle", said);
  g_autofree char *text = tf_json_node_dup_text (root, TRUE);
  printf ("%s\n", text);
}

static void
print_text (const TfFindings *findings, const TfStudy *study, const GPtrArray *differences,
            const GPtrArray *not_compared)
{
  tf_batch_print_findings (findings, study);
  if (differences->len == 0)
    printf (_ ("\nsame: these are the bundle's own numbers\n"));
  else
    printf (_ ("\nnot the bundle's own numbers; what differs:\n"));
  for (guint k = 0; k < differences->len; k++)
    printf ("  %s\n", (char *)g_ptr_array_index (differences, k));
  if (not_compared->len == 0)
    return;
  g_autoptr (GString) titles = g_string_new (NULL);
  for (guint k = 0; k < not_compared->len; k++)
    g_string_append_printf (titles, "%s%s", k > 0 ? "; " : "", tf_what_if_title (g_ptr_array_index (not_compared, k)));
  printf (_ ("Not compared, since it takes the ledger: %s\n"), titles->str);
}

int
tf_batch_laws_bundle (const char *path, const TfBundle *bundle, TfStudy *study, gboolean json,
                      const TfLawsWords *words)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfFindings) findings = tf_study_run_taken (study, bundle->taken, NULL);
  g_autoptr (GPtrArray) figures
      = words->figures != NULL ? tf_findings_write_figures (findings, study, words->figures, &error)
                               : NULL;
  if (words->figures != NULL && figures == NULL)
    {
      tf_batch_say_error (error);
      return TF_EXIT_NOTHING;
    }
  g_autoptr (GPtrArray) not_compared = NULL;
  g_autoptr (GPtrArray) differences
      = tf_bundle_differences (bundle, study, findings, &not_compared);
  gboolean same = differences->len == 0;
  if (json)
    print_json (findings, study, build_said (path, bundle, differences, not_compared));
  else
    print_text (findings, study, differences, not_compared);
  return same ? TF_EXIT_DONE : TF_EXIT_PART;
}
