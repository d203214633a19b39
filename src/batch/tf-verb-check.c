/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <stdio.h>
#include <glib/gi18n-lib.h>

#include "tf-batch.h"
#include "tf-intake.h"
#include "tf-json.h"

/* check: a ledger's file, schema, journal and projections, and a sample of its measurements made again. */

int
tf_verb_check (int argc, char **argv)
{
  gboolean json = FALSE;
  int again = 20;
  const GOptionEntry entries[] = {
    { "json", 0, 0, G_OPTION_ARG_NONE, &json, N_ ("print one JSON document"), NULL },
    { "again", 0, 0, G_OPTION_ARG_INT, &again, N_ ("how many measurements are made again (default 20)"), "N" },
    { NULL },
  };
  GOptionContext *context = tf_batch_context ("check");
  g_option_context_add_main_entries (context, entries, GETTEXT_PACKAGE);
  if (!tf_batch_parse (context, &argc, &argv))
    return TF_EXIT_CALL;
  if (argc != 2 || again < 0)
    return tf_batch_usage ("check", _ ("Name one ledger; --again takes 0 or more."));

  g_autoptr (GError) error = NULL;
  g_autoptr (TfNotes) findings = tf_notes_new ();
  g_autoptr (TfLedger) ledger = tf_ledger_open (argv[1], &error);
  if (ledger == NULL || !tf_ledger_check (ledger, findings, &error)
      || !tf_intake_remeasure (ledger, (guint)again, findings, &error))
    {
      tf_batch_say_error (error);
      return TF_EXIT_NOTHING;
    }
  guint wrong = tf_notes_get_n (findings);
  if (json)
    {
      g_autoptr (JsonBuilder) builder = json_builder_new ();
      json_builder_begin_object (builder);
      tf_json_string (builder, "ledger", argv[1]);
      tf_json_bool (builder, "ok", wrong == 0);
      json_builder_set_member_name (builder, "findings");
      tf_notes_build_json (findings, builder);
      json_builder_end_object (builder);
      tf_batch_print_json (builder);
      return wrong == 0 ? TF_EXIT_DONE : TF_EXIT_PART;
    }
  for (guint k = 0; k < wrong; k++)
    {
      g_autofree char *text = tf_note_dup_text (tf_notes_get (findings, k), FALSE);
      printf ("%s\n", text);
    }
  if (wrong == 0)
    printf (_ ("%s: nothing wrong\n"), argv[1]);
  return wrong == 0 ? TF_EXIT_DONE : TF_EXIT_PART;
}
