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
  GPtrArray *found = tf_study_rows (ledger, &query, tf_study_floor (study, ledger), error);
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

/* -- a table to be written ---------------------------------------------------------------------- */

void
tf_table_out_init (TfTableOut *table, const char *name, gboolean flat, const TfColumn *more,
                   const GArray *rows, const GArray *facts)
{
  *table = (TfTableOut){ name, g_ptr_array_new (), rows, facts };
  for (const TfColumn *column = tf_columns; flat && column->name != NULL; column++)
    g_ptr_array_add (table->columns, (gpointer)column);
  for (const TfColumn *column = more; column != NULL && column->name != NULL; column++)
    g_ptr_array_add (table->columns, (gpointer)column);
}

void
tf_table_out_clear (TfTableOut *table)
{
  g_clear_pointer (&table->columns, g_ptr_array_unref);
}

const TfColumn *
tf_table_out_column (const TfTableOut *table, guint k)
{
  return g_ptr_array_index (table->columns, k);
}

static gconstpointer
row_at (const TfTableOut *table, guint row)
{
  return table->rows->data + (gsize)row * g_array_get_element_size ((GArray *)table->rows);
}

static gboolean
is_flat (const TfColumn *column)
{
  return tf_column_find (column->name) == column;
}

double
tf_table_out_number (const TfTableOut *table, const TfColumn *column, guint row)
{
  gconstpointer data = row_at (table, row);
  return is_flat (column) ? tf_column_number (column, data) : column->number (data) * column->factor;
}

char *
tf_table_out_dup_text (const TfTableOut *table, const TfColumn *column, guint row)
{
  gconstpointer data = row_at (table, row);
  return is_flat (column) ? tf_column_dup_text (column, data) : column->text (data);
}

gboolean
tf_export_write_table (const char *path, const TfTableOut *table, GError **error)
{
  for (guint k = 0; k < G_N_ELEMENTS (formats); k++)
    {
      gsize n = strlen (path), m = strlen (formats[k].ending);
      if (n > m && g_ascii_strcasecmp (path + n - m, formats[k].ending) == 0)
        return formats[k].write (path, table, error);
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
  g_auto (TfTableOut) table = { 0 };
  tf_table_out_init (&table, "marks", TRUE, NULL, rows, facts);
  return tf_export_write_table (path, &table, error);
}
