/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-tables.h"
#include "tf-findings-figures.h"
#include "tf-intake.h"

/* laws: Hale's and Joy's law on a ledger or on a study bundle. */

/* The measures that the what-ifs about the floor ask for. */
static gboolean
measure_floors (TfLedger *ledger, const TfStudy *study, GError **error)
{
  const TfRowQuery query = { .marks = TRUE, .hints = study->sieve.with_hints };
  double floor = tf_study_floor (study, ledger);
  g_autoptr (TfWork) work = tf_batch_work_new (0);
  return tf_intake_measure_even (ledger, TF_WHAT_IF_LOWER * floor, &query, work, error)
         && tf_intake_measure_even (ledger, TF_WHAT_IF_HIGHER * floor, &query, work, error);
}

static void
add_groups (GOptionContext *context, TfStudy *study)
{
  g_option_context_add_group (context, tf_options_new_group (tf_sieve_options, &study->sieve, "sieve", N_ ("the sieve")));
  g_option_context_add_group (context, tf_options_new_group (tf_sampling_options, &study->sampling, "sampling", N_ ("the sampling rule")));
  g_option_context_add_group (context, tf_options_new_group (tf_divide_options, &study->divide, "cycle", N_ ("the divides")));
  g_option_context_add_group (context, tf_options_new_group (tf_verdict_options, &study->verdict, "verdict", N_ ("the verdict")));
  g_option_context_add_group (context, tf_options_new_group (tf_hale_options, &study->hale, "hale", N_ ("Hale's law")));
  g_option_context_add_group (context, tf_options_new_group (tf_joy_options, &study->joy, "joy", N_ ("Joy's law")));
  g_option_context_add_group (context, tf_options_new_group (tf_drift_options, &study->drift, "drift", N_ ("the drift of latitude")));
  g_option_context_add_group (context, tf_options_new_group (tf_emergence_options, &study->emergence, "emergence", N_ ("ages since emergence")));
}

static int
fail (const GError *error)
{
  tf_batch_say_error (error);
  return TF_EXIT_NOTHING;
}

static void
print (const TfFindings *findings, const TfStudy *study, gboolean json)
{
  if (!json)
    {
      tf_batch_print_findings (findings, study);
      return;
    }
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  tf_findings_build_json (findings, study, builder);
  tf_batch_print_json (builder);
}

/* A study of a file brings its own divides; others take those moved in the ledger. */
static int
laws (const char *path, TfStudy *study, gboolean from_file, gboolean floors, gboolean json,
      const TfLawsWords *words)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfLedger) ledger = tf_batch_open_measured (path, study, study->sieve.with_hints, &error);
  if (ledger == NULL || (floors && !measure_floors (ledger, study, &error))
      || (!from_file && !tf_study_read_divides (study, ledger, &error)))
    return fail (error);
  g_autoptr (TfFindings) findings = tf_study_run (study, ledger, &error);
  if (findings == NULL)
    return fail (error);
  study->even_floor_gauss = findings->even_floor_gauss;
  g_autoptr (GPtrArray) figures
      = words->figures != NULL ? tf_findings_write_figures (findings, study, words->figures, &error) : NULL;
  if (words->figures != NULL && figures == NULL)
    return fail (error);
  if (words->against == NULL)
    print (findings, study, json);
  return tf_batch_laws_keep (ledger, study, findings, json, words);
}

int
tf_verb_laws (int argc, char **argv)
{
  gboolean json = FALSE, with_hints = FALSE, floors = FALSE, from_file = FALSE;
  double even_floor = NAN;
  g_auto (TfLawsWords) words = { 0 };
  g_autoptr (GError) error = NULL;
  g_autoptr (TfBundle) bundle = NULL;
  g_autoptr (TfStudy) study = tf_batch_laws_study (argc, argv, &from_file, &bundle, &error);
  if (study == NULL)
    return fail (error);
  const GOptionEntry entries[] = {
    { "json", 0, 0, G_OPTION_ARG_NONE, &json, N_ ("print one JSON document"), NULL },
    { "with-hints", 0, 0, G_OPTION_ARG_NONE, &with_hints, N_ ("take hints in, counted apart"), NULL },
    { "figures", 0, 0, G_OPTION_ARG_FILENAME, &words.figures, N_ ("write the charts into this folder as PDF"), "DIR" },
    { "even-floor", 0, 0, G_OPTION_ARG_DOUBLE, &even_floor,
      N_ ("the study's even floor; 0: the one that the ledger's frames ask for now"), "G" },
    { "measure-floors", 0, 0, G_OPTION_ARG_NONE, &floors,
      N_ ("measure with the floor a fifth lower and higher, too, for the what-ifs (opens the frames)"), NULL },
    { NULL },
  };
  GOptionContext *context = tf_batch_context ("laws");
  g_option_context_add_main_entries (context, entries, GETTEXT_PACKAGE);
  tf_batch_laws_add_words (context, &words);
  add_groups (context, study);
  if (!tf_batch_parse (context, &argc, &argv))
    return TF_EXIT_CALL;
  if (argc != 2)
    return tf_batch_usage ("laws", _ ("Name one ledger, or one study bundle."));
  if ((words.keep_study || words.keep_edition != NULL) && words.person == NULL)
    return tf_batch_usage ("laws", _ ("Keeping a study or an edition is a person's deed: say whose with --person."));
  if (even_floor < 0 || even_floor > 1e4)
    return tf_batch_usage ("laws", _ ("An even floor lies from 0 to 10000 G."));
  if (!isnan (even_floor))
    study->even_floor_gauss = even_floor > 0 ? even_floor : NAN;
  if (with_hints)
    study->sieve.with_hints = TRUE;
  if (words.name != NULL)
    {
      g_free (study->name);
      study->name = g_strdup (words.name);
    }
  if (bundle != NULL && (floors || !isnan (even_floor) || words.save_study != NULL || words.keep_study || words.keep_edition != NULL || words.against != NULL || words.bundle != NULL))
    return tf_batch_usage ("laws", _ ("A study bundle has no ledger: nothing can be kept, measured or compared with an edition there."));
  if (bundle != NULL)
    return tf_batch_laws_bundle (argv[1], bundle, study, json, &words);
  return laws (argv[1], study, from_file, floors, json, &words);
}
