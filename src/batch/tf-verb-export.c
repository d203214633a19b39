/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <stdio.h>
#include <glib/gi18n-lib.h>

#include "tf-batch.h"
#include "tf-export.h"

/* export: the catalogue as a table. */

int
tf_verb_export (int argc, char **argv)
{
  gboolean with_hints = FALSE;
  g_autofree char *what = NULL;
  g_autofree char *source = NULL;
  const GOptionEntry entries[] = {
    { "what", 0, 0, G_OPTION_ARG_STRING, &what, N_ ("marks (the only one so far)"), "WORD" },
    { "with-hints", 0, 0, G_OPTION_ARG_NONE, &with_hints, N_ ("hints too; their origin is “hint”"), NULL },
    { "source", 0, 0, G_OPTION_ARG_STRING, &source, N_ ("a line about the source, kept in the file"), "TEXT" },
    { NULL },
  };
  GOptionContext *context = tf_batch_context ("export");
  g_option_context_add_main_entries (context, entries, GETTEXT_PACKAGE);
  if (!tf_batch_parse (context, &argc, &argv))
    return TF_EXIT_CALL;
  if (argc != 3)
    return tf_batch_usage ("export", _ ("Name a ledger and the file to write."));
  if (what != NULL && g_strcmp0 (what, "marks") != 0)
    return tf_batch_usage ("export", _ ("--what takes marks."));

  g_autoptr (GError) error = NULL;
  g_autoptr (GPtrArray) keep = NULL;
  g_autoptr (TfStudy) study = tf_study_new_default ();
  g_autoptr (TfLedger) ledger = tf_batch_open_measured (argv[1], with_hints, &error);
  gboolean ready = ledger != NULL && tf_study_read_divides (study, ledger, &error);
  g_autoptr (GArray) rows = ready ? tf_export_rows (ledger, study, with_hints, &keep, &error) : NULL;
  if (rows == NULL || !tf_export_write (argv[2], rows, study, source != NULL ? source : argv[1], &error))
    {
      tf_batch_say_error (error);
      return g_error_matches (error, TF_EXCHANGE_ERROR, TF_EXCHANGE_ERROR_FORMAT) ? TF_EXIT_CALL : TF_EXIT_NOTHING;
    }
  g_autofree char *line = g_strdup_printf (ngettext ("%s: %u row", "%s: %u rows", rows->len), argv[2], rows->len);
  tf_batch_say (line);
  if (rows->len == 0 && !with_hints)
    tf_batch_say (_ ("Nobody has marked a region in this ledger yet; --with-hints writes the hints."));
  return TF_EXIT_DONE;
}
