/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <glib/gi18n-lib.h>

#include "tf-batch.h"
#include "tf-intake.h"

/* laws: Hale's and Joy's law on a ledger, under the default study. */

/* The measures that the what-ifs about the floor ask for. */
static gboolean
measure_floors (TfLedger *ledger, gboolean with_hints, GError **error)
{
  const TfRowQuery query = { .marks = TRUE, .hints = with_hints };
  double floor = tf_study_even_floor (ledger, NULL);
  g_autoptr (TfWork) work = tf_batch_work_new (0);
  return tf_intake_measure_even (ledger, TF_WHAT_IF_LOWER * floor, &query, work, error)
         && tf_intake_measure_even (ledger, TF_WHAT_IF_HIGHER * floor, &query, work, error);
}

int
tf_verb_laws (int argc, char **argv)
{
  gboolean json = FALSE, with_hints = FALSE, floors = FALSE;
  g_autofree char *figures = NULL;
  g_autoptr (TfStudy) study = tf_study_new_default ();
  const GOptionEntry entries[] = {
    { "json", 0, 0, G_OPTION_ARG_NONE, &json, N_ ("print one JSON document"), NULL },
    { "with-hints", 0, 0, G_OPTION_ARG_NONE, &with_hints, N_ ("take hints in, counted apart"), NULL },
    { "figures", 0, 0, G_OPTION_ARG_FILENAME, &figures, N_ ("write the charts into this folder as PDF"), "DIR" },
    { "measure-floors", 0, 0, G_OPTION_ARG_NONE, &floors,
      N_ ("measure with the floor a fifth lower and higher, too, for the what-ifs (opens the frames)"), NULL },
    { NULL },
  };
  GOptionContext *context = tf_batch_context ("laws");
  g_option_context_add_main_entries (context, entries, GETTEXT_PACKAGE);
  g_option_context_add_group (context, tf_options_new_group (tf_sieve_options, &study->sieve, "sieve", N_ ("the sieve")));
  g_option_context_add_group (context, tf_options_new_group (tf_sampling_options, &study->sampling, "sampling", N_ ("the sampling rule")));
  g_option_context_add_group (context, tf_options_new_group (tf_divide_options, &study->divide, "cycle", N_ ("the divides")));
  g_option_context_add_group (context, tf_options_new_group (tf_verdict_options, &study->verdict, "verdict", N_ ("the verdict")));
  g_option_context_add_group (context, tf_options_new_group (tf_hale_options, &study->hale, "hale", N_ ("Hale's law")));
  g_option_context_add_group (context, tf_options_new_group (tf_joy_options, &study->joy, "joy", N_ ("Joy's law")));
  g_option_context_add_group (context, tf_options_new_group (tf_drift_options, &study->drift, "drift", N_ ("the drift of latitude")));
  g_option_context_add_group (context, tf_options_new_group (tf_emergence_options, &study->emergence, "emergence", N_ ("ages since emergence")));
  if (!tf_batch_parse (context, &argc, &argv))
    return TF_EXIT_CALL;
  if (argc != 2)
    return tf_batch_usage ("laws", _ ("Name one ledger."));
  study->sieve.with_hints = with_hints;

  g_autoptr (GError) error = NULL;
  g_autoptr (TfLedger) ledger = tf_batch_open_measured (argv[1], with_hints, &error);
  gboolean measured = ledger != NULL && (!floors || measure_floors (ledger, with_hints, &error));
  gboolean ready = measured && tf_study_read_divides (study, ledger, &error);
  g_autoptr (TfFindings) findings = ready ? tf_study_run (study, ledger, &error) : NULL;
  if (findings == NULL || (figures != NULL && !tf_batch_write_figures (findings, study, figures, &error)))
    {
      tf_batch_say_error (error);
      return TF_EXIT_NOTHING;
    }
  if (!json)
    {
      tf_batch_print_findings (findings, study);
      return TF_EXIT_DONE;
    }
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  tf_findings_build_json (findings, study, builder);
  tf_batch_print_json (builder);
  return TF_EXIT_DONE;
}
