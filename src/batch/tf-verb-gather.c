/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <glib/gi18n-lib.h>

#include "tf-batch.h"
#include "tf-json.h"

/* gather: part ledgers into one. What is there already is not put in twice, so that it can be
 * stopped and begun again. */

typedef struct
{
  guint parts, frames, hints, failed;
} Tally;

static gboolean
gather_one (TfLedger *ledger, const char *path, Tally *tally)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfNotes) said = tf_notes_new ();
  guint frames = 0, hints = 0;
  g_autoptr (TfLedger) part = tf_ledger_open (path, &error);
  gboolean done = part != NULL && tf_ledger_gather (ledger, part, &frames, &hints, said, &error);
  if (!done)
    tf_batch_say_error (error);
  for (guint k = 0; k < tf_notes_get_n (said); k++)
    {
      g_autofree char *text = tf_note_dup_text (tf_notes_get (said, k), FALSE);
      tf_batch_say (text);
    }
  tally->frames += frames;
  tally->hints += hints;
  tally->parts += done != FALSE;
  tally->failed += !done;
  return done;
}

static void
print_sum (const char *path, const Tally *tally, gboolean json)
{
  if (json)
    {
      g_autoptr (JsonBuilder) builder = json_builder_new ();
      json_builder_begin_object (builder);
      tf_json_string (builder, "ledger", path);
      tf_json_int (builder, "parts", tally->parts);
      tf_json_int (builder, "failed", tally->failed);
      tf_json_int (builder, "frames", tally->frames);
      tf_json_int (builder, "hints", tally->hints);
      json_builder_end_object (builder);
      tf_batch_print_json (builder);
    }
  g_autofree char *line = g_strdup_printf (
      _ ("%s: %u parts gathered, %u frames and %u hints were new, %u parts could not be read"),
      path, tally->parts, tally->frames, tally->hints, tally->failed);
  tf_batch_say (line);
}

int
tf_verb_gather (int argc, char **argv)
{
  gboolean json = FALSE;
  const GOptionEntry entries[] = {
    { "json", 0, 0, G_OPTION_ARG_NONE, &json, N_ ("print one JSON document"), NULL },
    { NULL },
  };
  GOptionContext *context = tf_batch_context ("gather");
  g_option_context_add_main_entries (context, entries, GETTEXT_PACKAGE);
  if (!tf_batch_parse (context, &argc, &argv))
    return TF_EXIT_CALL;
  if (argc < 3)
    return tf_batch_usage ("gather", _ ("Name a ledger and at least one part."));
  for (int k = 2; k < argc; k++)
    if (!g_file_test (argv[k], G_FILE_TEST_EXISTS))
      {
        g_autofree char *line = g_strdup_printf (
            _ ("%s is not there: name the ledgers that fill --part wrote"), argv[k]);
        tf_batch_say (line);
        return TF_EXIT_NOTHING;
      }
  g_autoptr (GError) error = NULL;
  g_autoptr (TfLedger) ledger = tf_ledger_open_or_create (argv[1], 'T', &error);
  if (ledger == NULL)
    {
      tf_batch_say_error (error);
      return TF_EXIT_NOTHING;
    }
  Tally tally = { 0 };
  for (int k = 2; k < argc; k++)
    gather_one (ledger, argv[k], &tally);
  print_sum (argv[1], &tally, json);
  return tally.failed == 0 ? TF_EXIT_DONE : tally.parts > 0 ? TF_EXIT_PART : TF_EXIT_NOTHING;
}
