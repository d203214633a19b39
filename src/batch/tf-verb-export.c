/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <stdio.h>
#include <glib/gi18n-lib.h>

#include "tf-batch.h"
#include "tf-export.h"
#include "tf-sheets.h"

/* export: the catalogue as a table, or a shift sheet. */

/* The frame named by its path or its file name; 0 the newest, when none is named. */
static gint64
find_frame (TfLedger *ledger, const char *name, GError **error)
{
  if (name == NULL)
    return 0;
  g_autoptr (GPtrArray) frames = tf_ledger_frames (ledger, error);
  for (guint k = 0; frames != NULL && k < frames->len; k++)
    {
      const TfFrameRow *row = g_ptr_array_index (frames, k);
      g_autofree char *base = g_path_get_basename (row->path);
      if (g_strcmp0 (name, row->path) == 0 || g_strcmp0 (name, base) == 0)
        return row->id;
    }
  if (frames != NULL)
    g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE, _ ("%s is not a frame of this ledger; name it as export --what marks does"),
                 name);
  return -1;
}

/* Reads only: a hand-over is recorded by the desk that hands over, in the window. */
static int
export_shift (const char *path, const char *out, const char *frame, const char *desk)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfLedger) ledger = tf_ledger_open (path, &error);
  gint64 key = ledger != NULL ? find_frame (ledger, frame, &error) : -1;
  g_autoptr (TfShift) shift = key >= 0 ? tf_shift_read (ledger, key, &error) : NULL;
  if (shift == NULL || !tf_shift_write (out, shift, desk, &error))
    {
      tf_batch_say_error (error);
      return g_error_matches (error, TF_CHART_ERROR, TF_CHART_ERROR_ENDING) ? TF_EXIT_CALL : TF_EXIT_NOTHING;
    }
  g_autofree char *line
      = g_strdup_printf (ngettext ("%s: %u region", "%s: %u regions", shift->rows->len), out, shift->rows->len);
  tf_batch_say (line);
  return TF_EXIT_DONE;
}

int
tf_verb_export (int argc, char **argv)
{
  gboolean with_hints = FALSE;
  g_autofree char *what = NULL;
  g_autofree char *source = NULL;
  g_autofree char *frame = NULL;
  g_autofree char *desk = NULL;
  g_autofree char *region = NULL;
  const GOptionEntry entries[] = {
    { "what", 0, 0, G_OPTION_ARG_STRING, &what, N_ ("marks, a table; series, one region through its passages; or shift, the shift sheet, to .pdf .svg .png or .json"), "WORD" },
    { "frame", 0, 0, G_OPTION_ARG_STRING, &frame, N_ ("shift: the disk of this frame of the ledger, not of the newest"), "FILE" },
    { "desk", 0, 0, G_OPTION_ARG_STRING, &desk, N_ ("shift: who hands over"), "NAME" },
    { "region", 0, 0, G_OPTION_ARG_STRING, &region, N_ ("series: number of the region, or first digits of a passage's id as follow prints it"), "WORD" },
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
  gboolean series = g_strcmp0 (what, "series") == 0;
  if (g_strcmp0 (what, "shift") == 0)
    return export_shift (argv[1], argv[2], frame, desk);
  if (what != NULL && !series && g_strcmp0 (what, "marks") != 0)
    return tf_batch_usage ("export", _ ("--what takes marks, series or shift."));
  if (series != (region != NULL))
    return tf_batch_usage ("export", _ ("--what series and --region belong together."));
  if (series)
    return tf_batch_export_series (argv[1], argv[2], region, source);

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
