/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <stdio.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-tables.h"
#include "tf-export.h"
#include "tf-export-kinds.h"
#include "tf-sheets.h"
#include "tf-stamp.h"

/* export: tables of what a ledger holds, stamps, or a shift sheet. */

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

/* -- tables ------------------------------------------------------------------------------------ */

typedef struct
{
  gboolean with_hints;
  char *what, *source, *frame, *desk, *region;
} Words;

static int
fail (const GError *error)
{
  tf_batch_say_error (error);
  return g_error_matches (error, TF_EXCHANGE_ERROR, TF_EXCHANGE_ERROR_FORMAT) ? TF_EXIT_CALL : TF_EXIT_NOTHING;
}

static gboolean
write_marks (const char *out, TfLedger *ledger, const TfStudy *study, const Words *words, const char *source, guint *n,
             GError **error)
{
  g_autoptr (GPtrArray) keep = NULL;
  g_autoptr (GArray) rows = tf_export_rows (ledger, study, words->with_hints, &keep, error);
  *n = rows != NULL ? rows->len : 0;
  return rows != NULL && tf_export_write (out, rows, study, source, error);
}

static gboolean
write_table (const char *out, TfLedger *ledger, const TfStudy *study, const Words *words, const char *source, guint *n,
             GError **error)
{
  if (g_strcmp0 (words->what, "frames") == 0)
    return tf_export_frames (out, ledger, source, n, error);
  if (g_strcmp0 (words->what, "passages") == 0)
    return tf_export_passages (out, ledger, study, words->with_hints, source, n, error);
  if (g_strcmp0 (words->what, "regions") == 0)
    return tf_export_regions (out, ledger, study, words->with_hints, source, n, error);
  return write_marks (out, ledger, study, words, source, n, error);
}

static int
export_table (const char *path, const char *out, const Words *words)
{
  g_autoptr (GError) error = NULL;
  guint n = 0;
  gboolean frames = g_strcmp0 (words->what, "frames") == 0;
  g_autoptr (TfStudy) study = tf_study_new_default ();
  g_autoptr (TfLedger) ledger = frames ? tf_ledger_open (path, &error) : tf_batch_open_measured (path, study, words->with_hints, &error);
  if (ledger == NULL || !tf_study_read_divides (study, ledger, &error)
      || !write_table (out, ledger, study, words, words->source != NULL ? words->source : path, &n, &error))
    return fail (error);
  g_autofree char *line = g_strdup_printf (ngettext ("%s: %u row", "%s: %u rows", n), out, n);
  tf_batch_say (line);
  if (n == 0 && !words->with_hints && !frames)
    tf_batch_say (_ ("Nobody has marked a region in this ledger yet; --with-hints writes the hints."));
  return TF_EXIT_DONE;
}

/* -- stamps ------------------------------------------------------------------------------------ */

static int
export_stamps (const char *path, const char *folder, const Words *words)
{
  g_autoptr (GError) error = NULL;
  g_auto (TfStampsSum) sum = { 0 };
  g_autoptr (TfStudy) study = tf_study_new_default ();
  study->sieve.with_hints = words->with_hints;
  g_autoptr (TfLedger) ledger = tf_batch_open_measured (path, study, words->with_hints, &error);
  if (ledger == NULL || !tf_study_read_divides (study, ledger, &error)
      || !tf_stamps_write (folder, ledger, study, &sum, &error))
    return fail (error);
  for (guint k = 0; k < sum.failed->len; k++)
    tf_batch_say (g_ptr_array_index (sum.failed, k));
  g_autofree char *line = g_strdup_printf (ngettext ("%s: %u stamp", "%s: %u stamps", sum.n_written), folder, sum.n_written);
  g_autofree char *outside
      = g_strdup_printf (ngettext ("%u outside row has no frame to be cut out of.", "%u outside rows have no frame to be cut out of.", sum.n_outside),
                         sum.n_outside);
  tf_batch_say (line);
  if (sum.n_outside > 0)
    tf_batch_say (outside);
  return sum.n_written == 0 ? TF_EXIT_NOTHING : sum.failed->len > 0 ? TF_EXIT_PART : TF_EXIT_DONE;
}

/* -- the verb ---------------------------------------------------------------------------------- */

static int
export_cases (const char *path)
{
  g_autofree char *line = g_strdup_printf (
      _ ("%s holds no cases: this version does not put regions before reviewers. What breaks Hale's law stands in --what marks (hale, hale_reason)."),
      path);
  tf_batch_say (line);
  return TF_EXIT_NOTHING;
}

static int
run (const char *path, const char *out, const Words *words)
{
  static const char *const tables[] = { "marks", "passages", "regions", "frames", NULL };
  const char *what = words->what != NULL ? words->what : "marks";
  if ((strcmp (what, "series") == 0) != (words->region != NULL))
    return tf_batch_usage ("export", _ ("--what series and --region belong together."));
  if ((words->frame != NULL || words->desk != NULL) && strcmp (what, "shift") != 0)
    return tf_batch_usage ("export", _ ("--frame and --desk belong to --what shift."));
  if (strcmp (what, "shift") == 0)
    return export_shift (path, out, words->frame, words->desk);
  if (strcmp (what, "series") == 0)
    return tf_batch_export_series (path, out, words->region, words->source);
  if (strcmp (what, "stamps") == 0)
    return export_stamps (path, out, words);
  if (strcmp (what, "cases") == 0)
    return export_cases (path);
  return g_strv_contains (tables, what)
             ? export_table (path, out, words)
             : tf_batch_usage ("export", _ ("--what takes marks, passages, regions, frames, series, stamps or shift."));
}

static void
words_clear (Words *words)
{
  g_free (words->what);
  g_free (words->source);
  g_free (words->frame);
  g_free (words->desk);
  g_free (words->region);
}
G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (Words, words_clear)

int
tf_verb_export (int argc, char **argv)
{
  g_auto (Words) words = { 0 };
  const GOptionEntry entries[] = {
    { "what", 0, 0, G_OPTION_ARG_STRING, &words.what, N_ ("marks, passages, regions or frames, a table by OUT's ending (.csv .vot .fits .json); series, one region through its passages, likewise; stamps, a FITS file of each sampled region in the folder OUT; or shift, the shift sheet, to .pdf .svg .png or .json"), "WORD" },
    { "frame", 0, 0, G_OPTION_ARG_STRING, &words.frame, N_ ("shift: the disk of this frame of the ledger, not of the newest"), "FILE" },
    { "desk", 0, 0, G_OPTION_ARG_STRING, &words.desk, N_ ("shift: who hands over"), "NAME" },
    { "region", 0, 0, G_OPTION_ARG_STRING, &words.region, N_ ("series: number of the region, or first digits of a passage's id as follow prints it"), "WORD" },
    { "with-hints", 0, 0, G_OPTION_ARG_NONE, &words.with_hints, N_ ("hints too; their origin is “hint”"), NULL },
    { "source", 0, 0, G_OPTION_ARG_STRING, &words.source, N_ ("a line about the source, kept in the file"), "TEXT" },
    { NULL },
  };
  GOptionContext *context = tf_batch_context ("export");
  g_option_context_add_main_entries (context, entries, GETTEXT_PACKAGE);
  if (!tf_batch_parse (context, &argc, &argv))
    return TF_EXIT_CALL;
  if (argc != 3)
    return tf_batch_usage ("export", _ ("Name a ledger and what to write."));
  return run (argv[1], argv[2], &words);
}
