/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <string.h>
#include <stdio.h>
#include <glib/gi18n-lib.h>

#include "tf-tables.h"
#include "tf-export.h"
#include "tf-json.h"
#include "tf-ledger-studies.h"
#include "tf-study-again.h"
#include "tf-study-compare.h"

/* laws: the study it runs (from a file or the ledger), keeping it, editions and what differs. */

void
tf_laws_words_clear (TfLawsWords *words)
{
  g_free (words->study);
  g_free (words->name);
  g_free (words->person);
  g_free (words->save_study);
  g_free (words->keep_edition);
  g_free (words->against);
  g_free (words->figures);
  g_free (words->bundle);
}

void
tf_batch_laws_add_words (GOptionContext *context, TfLawsWords *words)
{
  const GOptionEntry entries[] = {
    { "study", 0, 0, G_OPTION_ARG_FILENAME, &words->study, N_ ("a study.json, or the name of a study kept in the ledger; other options then change it"), "FILE|NAME" },
    { "name", 0, 0, G_OPTION_ARG_STRING, &words->name, N_ ("name of the study from here on"), "NAME" },
    { "save-study", 0, 0, G_OPTION_ARG_FILENAME, &words->save_study, N_ ("write the study as a study.json"), "FILE" },
    { "keep-study", 0, 0, G_OPTION_ARG_NONE, &words->keep_study, N_ ("keep the study in the ledger under its name, as a new version"), NULL },
    { "keep-edition", 0, 0, G_OPTION_ARG_STRING, &words->keep_edition, N_ ("keep the study's state with its numbers under this name, for good"), "NAME" },
    { "against", 0, 0, G_OPTION_ARG_STRING, &words->against, N_ ("list what differs from an edition, and why"), "EDITION" },
    { "bundle", 0, 0, G_OPTION_ARG_FILENAME, &words->bundle, N_ ("write a study bundle: the study, its rows, numbers and charts in one zip"), "FILE" },
    { "person", 0, 0, G_OPTION_ARG_STRING, &words->person, N_ ("who keeps it"), "NAME" },
    { NULL },
  };
  g_option_context_add_main_entries (context, entries, GETTEXT_PACKAGE);
}

/* -- which study ------------------------------------------------------------------------------- */

/* The word after --study, looked for before the options are read, because they change that study. */
static const char *
find_word (int argc, char **argv)
{
  for (int k = 1; k < argc; k++)
    {
      if (g_str_has_prefix (argv[k], "--study="))
        return argv[k] + strlen ("--study=");
      if (strcmp (argv[k], "--study") == 0 && k + 1 < argc)
        return argv[k + 1];
    }
  return NULL;
}

static char *
list_names (TfLedger *ledger)
{
  g_autoptr (GPtrArray) kept = tf_ledger_studies (ledger, NULL);
  GString *names = g_string_new (NULL);
  for (guint k = 0; kept != NULL && k < kept->len; k++)
    g_string_append_printf (names, "%s%s", k > 0 ? ", " : "", ((TfNamed *)g_ptr_array_index (kept, k))->name);
  return g_string_free (names, FALSE);
}

static TfStudy *
read_kept (TfLedger *ledger, const char *name, GError **error)
{
  g_autoptr (TfNamed) named = tf_ledger_study (ledger, name, error);
  if (named == NULL)
    {
      g_autofree char *names = list_names (ledger);
      if (error != NULL && *error == NULL)
        g_set_error (error, TF_STUDY_ERROR, TF_STUDY_ERROR_READ,
                     _ ("“%s” is no file, and %s has no study of that name; it has: %s"), name,
                     tf_ledger_get_path (ledger), *names != '\0' ? names : _ ("none"));
      return NULL;
    }
  TfStudy *study = tf_study_read_text (named->text, name, error);
  if (study != NULL)
    study->version = named->version;
  return study;
}

/* The ledger is the first word that is a file and no study. */
static TfLedger *
open_ledger (int argc, char **argv, const char *word, GError **error)
{
  for (int k = 1; k < argc; k++)
    if (*argv[k] != '-' && strcmp (argv[k], word) != 0 && g_file_test (argv[k], G_FILE_TEST_IS_REGULAR))
      return tf_ledger_open (argv[k], error);
  g_set_error (error, TF_STUDY_ERROR, TF_STUDY_ERROR_READ,
               _ ("“%s” is no file; to take a study of that name from a ledger, name the ledger"), word);
  return NULL;
}

/* The first word that is a zip and no value of an option. */
static const char *
find_bundle (int argc, char **argv)
{
  static const char *const valued[] = { "--bundle", "--figures", "--save-study", "--study", NULL };
  for (int k = 1; k < argc; k++)
    if (*argv[k] != '-' && !g_strv_contains (valued, argv[k - 1]) && tf_bundle_is (argv[k]))
      return argv[k];
  return NULL;
}

TfStudy *
tf_batch_laws_study (int argc, char **argv, gboolean *from_file, TfBundle **bundle, GError **error)
{
  const char *word = find_word (argc, argv), *zip = find_bundle (argc, argv);
  *from_file = word != NULL && g_file_test (word, G_FILE_TEST_IS_REGULAR);
  if (zip != NULL && (*bundle = tf_bundle_read (zip, error)) == NULL)
    return NULL;
  if (word == NULL)
    return zip != NULL ? tf_study_copy ((*bundle)->study) : tf_study_new_default ();
  if (*from_file)
    {
      g_autofree char *text = NULL;
      return g_file_get_contents (word, &text, NULL, error) ? tf_study_read_text (text, word, error) : NULL;
    }
  g_autoptr (TfLedger) ledger = open_ledger (argc, argv, word, error);
  return ledger != NULL ? read_kept (ledger, word, error) : NULL;
}

/* -- keeping ----------------------------------------------------------------------------------- */

static gboolean
keep_study (TfLedger *ledger, TfStudy *study, const TfLawsWords *words, GError **error)
{
  gint64 person = tf_ledger_person (ledger, words->person, error);
  guint before = study->version;
  study->version = 0; /* the ledger numbers versions; equal texts are one */
  g_autofree char *text = tf_study_dup_text (study);
  study->version = person != 0 ? tf_ledger_keep_study (ledger, study->name, text, person, error) : before;
  if (person == 0 || study->version == 0)
    return FALSE;
  g_autofree char *line = g_strdup_printf (_ ("study “%s”: version %u is kept"), study->name, study->version);
  tf_batch_say (line);
  return TRUE;
}

static char *
make_edition (TfLedger *ledger, const TfStudy *study, const TfFindings *findings, GError **error)
{
  g_autoptr (GPtrArray) keep = NULL;
  g_autoptr (GArray) rows = tf_export_rows (ledger, study, study->sieve.with_hints, &keep, error);
  return rows != NULL ? tf_edition_dup_text (study, findings, rows) : NULL;
}

static gboolean
keep_edition (TfLedger *ledger, TfStudy *study, const TfFindings *findings, const TfLawsWords *words,
              GError **error)
{
  if (!keep_study (ledger, study, words, error))
    return FALSE;
  g_autofree char *text = make_edition (ledger, study, findings, error);
  gint64 person = tf_ledger_person (ledger, words->person, error);
  if (text == NULL || person == 0
      || !tf_ledger_keep_edition (ledger, words->keep_edition, study->name, study->version, text, person, error))
    return FALSE;
  g_autoptr (TfNamed) named = tf_ledger_edition (ledger, words->keep_edition, NULL);
  g_autofree char *line = g_strdup_printf (_ ("edition “%s”: %u picks, checksum %s"), words->keep_edition,
                                           tf_sample_get_n (findings->sample), named != NULL ? named->checksum : "?");
  tf_batch_say (line);
  return TRUE;
}

static void
print_differences (const GPtrArray *differences, const char *edition, gboolean json)
{
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  json_builder_begin_object (builder);
  tf_json_string (builder, "edition", edition);
  tf_json_bool (builder, "same", differences->len == 0);
  json_builder_set_member_name (builder, "differences");
  json_builder_begin_array (builder);
  for (guint k = 0; k < differences->len; k++)
    json_builder_add_string_value (builder, g_ptr_array_index (differences, k));
  json_builder_end_array (builder);
  json_builder_end_object (builder);
  if (json)
    {
      tf_batch_print_json (builder);
      return;
    }
  if (differences->len == 0)
    printf (_ ("same as the edition “%s”\n"), edition);
  for (guint k = 0; k < differences->len; k++)
    printf ("%s\n", (char *)g_ptr_array_index (differences, k));
}

static gboolean
compare (TfLedger *ledger, const TfStudy *study, const TfFindings *findings, const char *edition, gboolean json,
         GError **error)
{
  g_autoptr (TfNamed) named = tf_ledger_edition (ledger, edition, error);
  if (named == NULL)
    {
      if (error != NULL && *error == NULL)
        g_set_error (error, TF_STUDY_ERROR, TF_STUDY_ERROR_READ, _ ("%s has no edition “%s”"),
                     tf_ledger_get_path (ledger), edition);
      return FALSE;
    }
  g_autofree char *now = make_edition (ledger, study, findings, error);
  g_autoptr (GPtrArray) differences = now != NULL ? tf_edition_differences (named->text, now, error) : NULL;
  if (differences != NULL)
    print_differences (differences, edition, json);
  return differences != NULL;
}

static gboolean
save (const TfStudy *study, const char *path, GError **error)
{
  g_autofree char *text = tf_study_dup_text (study);
  return g_file_set_contents (path, text, -1, error);
}

static gboolean
write_bundle (TfLedger *ledger, const TfStudy *study, const TfFindings *findings, const char *path,
              GError **error)
{
  g_autoptr (TfStudyTaken) taken = tf_study_take_whole (study, ledger, error);
  if (taken == NULL || !tf_bundle_write (path, study, findings, taken, error))
    return FALSE;
  g_autofree char *line = g_strdup_printf (
      _ ("%s: the study “%s” with %u rows, %u of them picks, its numbers and its charts; tiltfield-run laws %s works them out again"),
      path, study->name, tf_study_taken_get_n (taken), tf_sample_get_n (findings->sample), path);
  tf_batch_say (line);
  return TRUE;
}

int
tf_batch_laws_keep (TfLedger *ledger, TfStudy *study, const TfFindings *findings, gboolean json,
                    const TfLawsWords *words)
{
  g_autoptr (GError) error = NULL;
  gboolean good = words->save_study == NULL || save (study, words->save_study, &error);
  if (good && words->keep_edition != NULL)
    good = keep_edition (ledger, study, findings, words, &error);
  else if (good && words->keep_study)
    good = keep_study (ledger, study, words, &error);
  if (good && words->bundle != NULL)
    good = write_bundle (ledger, study, findings, words->bundle, &error);
  if (good && words->against != NULL)
    good = compare (ledger, study, findings, words->against, json, &error);
  if (good)
    return TF_EXIT_DONE;
  tf_batch_say_error (error);
  return TF_EXIT_NOTHING;
}
