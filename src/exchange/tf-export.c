/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <errno.h>
#include <glib/gi18n-lib.h>
#include <string.h>

#include "tf-export-private.h"
#include "tf-json.h"
#include "tf-ledger-outside.h"

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

/* Of a row that came in a table, what is judged or says which row it is is worked out here; all
 * else stands as it was brought. */
static JsonObject *
find_flat (const TfColumn *column, const TfExportRow *row)
{
  static const char *const here[]
      = { "region", "passage", "mark",        "origin",     "time",        "polarity_tilt_deg",
          "cycle",  "cycle_sure", "hale",     "hale_reason", "class_base", "class_delta",
          "source", "licence", "source_row", NULL };
  if (row->row->outside == NULL || g_strv_contains (here, column->name))
    return NULL;
  return tf_outside_row_get_flat (row->row->outside);
}

double
tf_column_number (const TfColumn *column, const TfExportRow *row)
{
  JsonObject *flat = find_flat (column, row);
  double value = flat != NULL ? tf_json_member_number (flat, column->name) : column->number (row);
  return value * column->factor;
}

char *
tf_column_dup_text (const TfColumn *column, const TfExportRow *row)
{
  JsonObject *flat = find_flat (column, row);
  if (flat == NULL)
    return column->text (row);
  const char *text = tf_json_member_string (flat, column->name);
  return g_strdup (text != NULL ? text : "");
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
