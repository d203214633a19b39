/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <stdio.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-batch.h"
#include "tf-intake.h"
#include "tf-json.h"

/* fill: frames into a ledger; can be stopped and started again at any point. */

typedef struct
{
  TfProgress progress;
  JsonBuilder *builder; /* NULL unless --json */
  guint count[4];       /* by TfIntakeOutcome */
  guint hints;
} Tally;

static void
on_report (const TfIntakeReport *report, gpointer data)
{
  static const char *const names[] = { "added", "there", "refused", "failed" };
  Tally *tally = data;
  tally->count[report->outcome]++;
  tally->hints += report->n_hints;
  if (report->message != NULL)
    {
      tf_progress_end (&tally->progress);
      tf_batch_say (report->message);
    }
  if (tally->builder != NULL)
    {
      json_builder_begin_object (tally->builder);
      tf_json_string (tally->builder, "file", report->path);
      tf_json_string (tally->builder, "outcome", names[report->outcome]);
      tf_json_int (tally->builder, "hints", report->n_hints);
      tf_json_string (tally->builder, "message", report->message);
      json_builder_end_object (tally->builder);
    }
  tf_progress_step (&tally->progress, report->done, report->total);
}

static gboolean
read_part (const char *text, TfIntakeParams *params)
{
  double pair[2];
  g_autofree char *comma = g_strdelimit (g_strdup (text), "/", ',');
  if (!tf_batch_read_numbers (comma, pair, 2) || !(pair[0] >= 1 && pair[1] >= pair[0] && pair[1] <= 100000))
    return FALSE;
  params->part = (guint)pair[0];
  params->parts = (guint)pair[1];
  return TRUE;
}

static void
say_notices (const TfLedger *ledger)
{
  const TfNotes *notices = tf_ledger_get_notices (ledger);
  for (guint k = 0; k < tf_notes_get_n (notices); k++)
    {
      g_autofree char *text = tf_note_dup_text (tf_notes_get (notices, k), FALSE);
      tf_batch_say (text);
    }
}

static int
outcome_exit (const Tally *tally)
{
  if (tally->count[TF_INTAKE_FAILED] == 0)
    return TF_EXIT_DONE;
  guint good = tally->count[TF_INTAKE_ADDED] + tally->count[TF_INTAKE_THERE] + tally->count[TF_INTAKE_REFUSED];
  return good > 0 ? TF_EXIT_PART : TF_EXIT_NOTHING;
}

/* A ledger is not made for frames of which none is there: most likely a name is mistyped. */
static gboolean
any_is_there (char *const *given, GError **error)
{
  for (guint k = 0; given[k] != NULL; k++)
    if (g_file_test (given[k], G_FILE_TEST_EXISTS))
      return TRUE;
  g_set_error (error, G_FILE_ERROR, G_FILE_ERROR_NOENT, _ ("%s is not there: name a FITS file or a folder of them"), given[0]);
  return FALSE;
}

/* What an older ledger or a stopped window left without figures. */
static gboolean
fill_complexity (TfLedger *ledger, const TfIntakeParams *params, const TfWork *work, GError **error)
{
  const TfRowQuery query = { .marks = TRUE, .hints = TRUE };
  guint n = 0;
  if (!tf_intake_complexity (ledger, &query, &params->complexity, work, &n, error))
    return FALSE;
  if (n == 0)
    return TRUE;
  g_autofree char *line
      = g_strdup_printf (ngettext ("complexity worked out for %u outline that had none",
                                   "complexity worked out for %u outlines that had none", n), n);
  tf_batch_say (line);
  return TRUE;
}

static int
fill (const char *path, char *const *given, const TfIntakeParams *params, gboolean json)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfWork) work = tf_batch_work_new (1);
  g_auto (GStrv) files = any_is_there (given, &error) ? tf_intake_list (given, &error) : NULL;
  g_autoptr (TfLedger) ledger = files != NULL ? tf_ledger_open_or_create (path, 'T', &error) : NULL;
  if (ledger == NULL)
    {
      tf_batch_say_error (error);
      return TF_EXIT_NOTHING;
    }
  say_notices (ledger);
  g_autoptr (JsonBuilder) builder = json ? json_builder_new () : NULL;
  Tally tally = { .builder = builder };
  tf_progress_begin (&tally.progress);
  if (json)
    json_builder_begin_array (builder);
  gboolean done = tf_intake_fill (ledger, files, params, work->cancel, on_report, &tally, &error);
  tf_progress_end (&tally.progress);
  if (json)
    {
      json_builder_end_array (builder);
      tf_batch_print_json (builder);
    }
  g_autofree char *sum
      = g_strdup_printf (_ ("%s: %u frames added with %u hints, %u there already, %u refused, %u could not be read"), path,
                         tally.count[TF_INTAKE_ADDED], tally.hints, tally.count[TF_INTAKE_THERE],
                         tally.count[TF_INTAKE_REFUSED], tally.count[TF_INTAKE_FAILED]);
  tf_batch_say (sum);
  if (done && !params->no_hints)
    done = fill_complexity (ledger, params, work, &error);
  if (done)
    return outcome_exit (&tally);
  tf_batch_say_error (error);
  return tally.count[TF_INTAKE_ADDED] > 0 ? TF_EXIT_PART : TF_EXIT_NOTHING;
}

int
tf_verb_fill (int argc, char **argv)
{
  gboolean json = FALSE, no_hints = FALSE;
  int workers = 0;
  g_autofree char *part = NULL;
  TfFrameWords frame;
  TfIntakeParams params;
  const GOptionEntry entries[] = {
    { "json", 0, 0, G_OPTION_ARG_NONE, &json, N_ ("print one JSON document, an object a file"), NULL },
    { "workers", 0, 0, G_OPTION_ARG_INT, &workers, N_ ("frames at a time (default: one a core)"), "N" },
    { "part", 0, 0, G_OPTION_ARG_STRING, &part, N_ ("take every N-th file from the I-th, I from 1"), "I/N" },
    { "no-hints", 0, 0, G_OPTION_ARG_NONE, &no_hints, N_ ("frames only"), NULL },
    { NULL },
  };
  tf_intake_params_init (&params);
  GOptionContext *context = tf_batch_context ("fill");
  g_option_context_add_main_entries (context, entries, GETTEXT_PACKAGE);
  tf_batch_add_frame_words (context, &frame);
  g_option_context_add_group (context, tf_options_new_group (tf_hint_options, &params.hint, "rule", N_ ("the rule")));
  g_option_context_add_group (context, tf_options_new_group (tf_measure_options, &params.measure, "method", N_ ("the method")));
  g_option_context_add_group (context, tf_options_new_group (tf_complexity_options, &params.complexity, "complexity",
                                                             N_ ("inversion lines and complexity")));
  if (!tf_batch_parse (context, &argc, &argv))
    return TF_EXIT_CALL;
  if (argc < 3)
    return tf_batch_usage ("fill", _ ("Name a ledger and at least one frame or folder."));
  if (part != NULL && !read_part (part, &params))
    return tf_batch_usage ("fill", _ ("--part takes I/N with I from 1 to N."));
  if (workers < 0 || workers > 1024)
    return tf_batch_usage ("fill", _ ("--workers takes a number from 1 to 1024."));
  params.workers = (guint)workers;
  params.no_hints = no_hints;
  params.spec = frame.spec;
  return fill (argv[1], argv + 2, &params, json);
}
