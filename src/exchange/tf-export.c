/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <errno.h>
#include <glib/gi18n-lib.h>
#include <string.h>

#include "tf-export-private.h"

G_DEFINE_QUARK (tf - exchange - error - quark, tf_exchange_error)

static const TfFormat formats[] = {
  { ".csv", tf_export_csv },
  { ".vot", tf_export_votable },
  { ".fits", tf_export_fits },
  { ".json", tf_export_json },
};

void
tf_export_set_error (GError **error, const char *path, const char *reason)
{
  g_set_error (
      error, TF_EXCHANGE_ERROR, TF_EXCHANGE_ERROR_WRITE,
      _ ("%s cannot be written: %s. See that the folder is there, may be written to, and has room"),
      path, reason);
}

gboolean
tf_export_save (const char *path, const char *text, gssize length, GError **error)
{
  g_autoptr (GError) reason = NULL;
  if (g_file_set_contents_full (path, text, length, G_FILE_SET_CONTENTS_CONSISTENT, 0666, &reason))
    return TRUE;
  tf_export_set_error (error, path, reason->message);
  return FALSE;
}

GArray *
tf_export_rows (TfLedger *ledger, const TfStudy *study, gboolean with_hints, GPtrArray **rows,
                GError **error)
{
  TfRowQuery query = { .marks = TRUE, .hints = with_hints, .outside = TRUE, .complexity = TRUE };
  GPtrArray *found = tf_study_rows (ledger, &query, tf_study_even_floor (ledger, NULL), error);
  if (found == NULL)
    return NULL;
  g_autoptr (TfDivides) divides
      = study->divides != NULL ? tf_divides_ref (study->divides) : tf_divides_new (&study->divide);
  GArray *judged = g_array_sized_new (FALSE, TRUE, sizeof (TfExportRow), found->len);
  for (guint k = 0; k < found->len; k++)
    {
      TfExportRow row = { .row = g_ptr_array_index (found, k) };
      tf_study_row (row.row, &row.sample);
      row.verdict = tf_verdict_judge (&row.sample, divides, &study->verdict);
      g_array_append_val (judged, row);
    }
  *rows = found;
  return judged;
}

gboolean
tf_export_write_facts (const char *path, const GArray *rows, const GArray *facts, GError **error)
{
  for (guint k = 0; k < G_N_ELEMENTS (formats); k++)
    {
      gsize n = strlen (path), m = strlen (formats[k].ending);
      if (n > m && g_ascii_strcasecmp (path + n - m, formats[k].ending) == 0)
        return formats[k].write (path, rows, facts, error);
    }
  g_set_error (error, TF_EXCHANGE_ERROR, TF_EXCHANGE_ERROR_FORMAT,
               _ ("%s: the ending of the name says how a table is written, and this one is none of "
                  ".csv, .vot, .fits, .json"),
               path);
  return FALSE;
}

gboolean
tf_export_write (const char *path, const GArray *rows, const TfStudy *study, const char *source,
                 GError **error)
{
  g_autoptr (GArray) facts = tf_facts_new (rows, study, source);
  return tf_export_write_facts (path, rows, facts, error);
}
