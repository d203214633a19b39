/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <stdio.h>
#include <glib/gi18n-lib.h>

#include "tf-batch.h"

/* laws: Hale's and Joy's law on a ledger, under the default study. */

static void
print_hale (const GArray *rows)
{
  printf (_ ("\nHale's law: share that breaks (95 %% Clopper–Pearson), n = keeps + breaks\n"));
  for (guint k = 0; k < rows->len; k++)
    {
      const TfHaleRow *r = &g_array_index (rows, TfHaleRow, k);
      g_autofree char *cycle = r->cycle != 0 ? g_strdup_printf (_ ("cycle %d"), r->cycle) : g_strdup (_ ("all cycles"));
      const char *side = r->hemisphere > 0 ? "N" : r->hemisphere < 0 ? "S" : _ ("both");
      if (r->n > 0)
        printf (_ ("  %-10s %-4s %5.1f %% (%.1f–%.1f)  n %u, breaks %u, cannot say %u; at least %.1f, at most %.1f\n"), cycle, side,
                100 * r->share, 100 * r->clopper_pearson.low, 100 * r->clopper_pearson.high, r->n, r->breaks, r->cannot_say,
                100 * r->bounds.low, 100 * r->bounds.high);
      else
        printf (_ ("  %-10s %-4s   no verdict; cannot say %u\n"), cycle, side, r->cannot_say);
    }
}

static void
print_joy (const GArray *fits, const TfStudy *study)
{
  printf (_ ("\nJoy's law: %s, %s; slope in %s with its interval clustered by region\n"), tf_joy_form_names[study->joy.form],
          tf_joy_estimator_names[study->joy.estimator], tf_joy_unit (study->joy.form));
  for (guint k = 0; k < fits->len; k++)
    {
      const TfJoyFit *f = &g_array_index (fits, TfJoyFit, k);
      g_autofree char *cycle = f->cycle != 0 ? g_strdup_printf (_ ("cycle %d"), f->cycle) : g_strdup (_ ("all cycles"));
      const char *side = f->hemisphere > 0 ? "N" : f->hemisphere < 0 ? "S" : _ ("both");
      if (f->n >= 3)
        printf (_ ("  %-10s %-4s %+.3f (%+.3f to %+.3f)  n %u, median tilt %+.1f°, scatter %.1f°\n"), cycle, side, f->slope,
                f->slope_ci.low, f->slope_ci.high, f->n, f->median_tilt_deg, f->scatter_deg);
      else
        printf (_ ("  %-10s %-4s too few: n %u\n"), cycle, side, f->n);
    }
}

static void
print_findings (const TfFindings *findings, const TfStudy *study)
{
  g_autofree char *words = tf_findings_dup_words (findings, study);
  printf ("%s\n", words);
  print_hale (findings->hale);
  print_joy (findings->joy, study);
  for (guint k = 0; k < tf_notes_get_n (findings->cautions); k++)
    {
      g_autofree char *text = tf_note_dup_text (tf_notes_get (findings->cautions, k), FALSE);
      printf (k == 0 ? "\n%s\n" : "%s\n", text);
    }
}

int
tf_verb_laws (int argc, char **argv)
{
  gboolean json = FALSE, with_hints = FALSE;
  g_autoptr (TfStudy) study = tf_study_new_default ();
  const GOptionEntry entries[] = {
    { "json", 0, 0, G_OPTION_ARG_NONE, &json, N_ ("print one JSON document"), NULL },
    { "with-hints", 0, 0, G_OPTION_ARG_NONE, &with_hints, N_ ("take hints in, counted apart"), NULL },
    { NULL },
  };
  GOptionContext *context = tf_batch_context ("laws");
  g_option_context_add_main_entries (context, entries, GETTEXT_PACKAGE);
  g_option_context_add_group (context, tf_options_new_group (tf_sieve_options, &study->sieve, "sieve", N_ ("the sieve")));
  g_option_context_add_group (context, tf_options_new_group (tf_divide_options, &study->divide, "cycle", N_ ("the divides")));
  g_option_context_add_group (context, tf_options_new_group (tf_verdict_options, &study->verdict, "verdict", N_ ("the verdict")));
  g_option_context_add_group (context, tf_options_new_group (tf_hale_options, &study->hale, "hale", N_ ("Hale's law")));
  g_option_context_add_group (context, tf_options_new_group (tf_joy_options, &study->joy, "joy", N_ ("Joy's law")));
  if (!tf_batch_parse (context, &argc, &argv))
    return TF_EXIT_CALL;
  if (argc != 2)
    return tf_batch_usage ("laws", _ ("Name one ledger."));
  study->sieve.with_hints = with_hints;

  g_autoptr (GError) error = NULL;
  g_autoptr (TfLedger) ledger = tf_batch_open_measured (argv[1], with_hints, &error);
  gboolean ready = ledger != NULL && tf_study_read_divides (study, ledger, &error);
  g_autoptr (TfFindings) findings = ready ? tf_study_run (study, ledger, &error) : NULL;
  if (findings == NULL)
    {
      tf_batch_say_error (error);
      return TF_EXIT_NOTHING;
    }
  if (!json)
    {
      print_findings (findings, study);
      return TF_EXIT_DONE;
    }
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  tf_findings_build_json (findings, study, builder);
  tf_batch_print_json (builder);
  return TF_EXIT_DONE;
}
