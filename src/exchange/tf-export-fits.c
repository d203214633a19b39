/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <errno.h>
#include <fitsio.h>
#include <glib/gstdio.h>
#include <math.h>
#include <string.h>

#include "tf-export-private.h"
#include "tf-frame-write.h"
#include "tf-mount-wilson.h"

/* A FITS binary table in HDU 1, with units, descriptions and UCDs, CHECKSUM and DATASUM. FITS
 * holds ASCII alone: classes are written with the names of their letters, other letters as
 * their nearest; the header says so. A missing number is NaN, a missing whole number or yes/no
 * (1, 0) the value of TNULL, a missing text empty.
 */

enum
{
  NULL_INT = G_MININT32,
  NULL_BOOL = G_MININT16,
};

static char *
dup_ascii_cell (const TfTableOut *table, const TfColumn *column, guint row)
{
  g_autofree char *text = tf_table_out_dup_text (table, column, row);
  char *ascii = strcmp (column->name, "class") == 0 ? tf_mount_wilson_dup_ascii (text)
                                                    : g_str_to_ascii (text, "C");
  for (char *p = ascii; *p != '\0'; p++)
    if (!g_ascii_isprint (*p))
      *p = ' ';
  return ascii;
}

static char **
dup_cells (const TfTableOut *table, const TfColumn *column, gsize *width)
{
  char **cells = g_new0 (char *, table->rows->len + 1);
  *width = 1;
  for (guint k = 0; k < table->rows->len; k++)
    {
      cells[k] = dup_ascii_cell (table, column, k);
      *width = MAX (*width, strlen (cells[k]));
    }
  return cells;
}

static char *
dup_form (const TfTableOut *table, const TfColumn *column)
{
  static const char *const forms[] = { NULL, "D", "J", "I" };
  gsize width;
  if (column->type != TF_COLUMN_TEXT)
    return g_strdup (forms[column->type]);
  g_auto (GStrv) cells = dup_cells (table, column, &width);
  return g_strdup_printf ("%" G_GSIZE_FORMAT "A", width);
}

/* As bytes, so that texts end in 0 and an empty one is null (FITS standard 4.0, 7.3.3.1);
 * CFITSIO's own strings end in blanks. */
static void
write_texts (fitsfile *file, int k, const TfTableOut *table, const TfColumn *column, int *status)
{
  gsize width;
  g_auto (GStrv) cells = dup_cells (table, column, &width);
  g_autofree guchar *bytes = g_malloc0 (width * table->rows->len + 1);
  for (guint j = 0; j < table->rows->len; j++)
    memcpy (bytes + width * j, cells[j], strlen (cells[j]));
  if (table->rows->len > 0)
    fits_write_col (file, TBYTE, k, 1, 1, (LONGLONG)(width * table->rows->len), bytes, status);
}

static void
write_numbers (fitsfile *file, int k, const TfTableOut *table, const TfColumn *column, int *status)
{
  g_autofree double *values = g_new (double, table->rows->len + 1);
  g_autofree int *whole = g_new (int, table->rows->len + 1);
  int none = column->type == TF_COLUMN_BOOL ? NULL_BOOL : NULL_INT;
  for (guint j = 0; j < table->rows->len; j++)
    {
      values[j] = tf_table_out_number (table, column, j);
      whole[j] = isnan (values[j])
                     ? none
                     : (int)lrint (column->type == TF_COLUMN_NUMBER ? 0.0 : values[j]);
    }
  if (table->rows->len == 0)
    return;
  if (column->type == TF_COLUMN_NUMBER)
    fits_write_col (file, TDOUBLE, k, 1, 1, table->rows->len, values, status);
  else
    fits_write_col (file, TINT, k, 1, 1, table->rows->len, whole, status);
}

static void
write_about_column (fitsfile *file, int k, const TfColumn *column, int *status)
{
  char word[FLEN_KEYWORD];
  g_snprintf (word, sizeof word, "TCOMM%d", k);
  fits_write_key_longstr (file, word, column->description, NULL, status);
  g_snprintf (word, sizeof word, "TUCD%d", k);
  fits_write_key_str (file, word, column->ucd, NULL, status);
  g_snprintf (word, sizeof word, "TNULL%d", k);
  if (column->type == TF_COLUMN_INT)
    fits_write_key_lng (file, word, NULL_INT, "no value", status);
  if (column->type == TF_COLUMN_BOOL)
    fits_write_key_lng (file, word, NULL_BOOL, "1 yes, 0 no; no value", status);
}

static void
write_facts (fitsfile *file, const GArray *facts, int *status)
{
  for (guint k = 0; k < facts->len; k++)
    {
      const TfFact *fact = &g_array_index (facts, TfFact, k);
      g_autofree char *ascii = g_str_to_ascii (fact->text, "C");
      g_autofree char *line = g_strdup_printf ("%s: %s", fact->key, ascii);
      fits_write_comment (file, line, status);
    }
  fits_write_comment (
      file,
      "FITS holds ASCII alone: Mount Wilson classes are written by the names of their letters "
      "(beta-gamma-delta), other letters as the nearest of the alphabet.",
      status);
}

static void
write_table (fitsfile *file, const TfTableOut *table, int *status)
{
  g_autoptr (GPtrArray) forms = g_ptr_array_new_with_free_func (g_free);
  g_autoptr (GPtrArray) names = g_ptr_array_new (), units = g_ptr_array_new ();
  for (guint k = 0; k < table->columns->len; k++)
    {
      const TfColumn *column = tf_table_out_column (table, k);
      g_ptr_array_add (names, (gpointer)column->name);
      g_ptr_array_add (units, (gpointer)column->fits_unit);
      g_ptr_array_add (forms, dup_form (table, column));
    }
  g_autofree char *name = g_ascii_strup (table->name, -1);
  fits_create_tbl (file, BINARY_TBL, table->rows->len, (int)names->len, (char **)names->pdata,
                   (char **)forms->pdata, (char **)units->pdata, name, status);
  fits_write_key_longwarn (file, status);
  for (guint k = 0; k < names->len; k++)
    write_about_column (file, (int)k + 1, tf_table_out_column (table, k), status);
  write_facts (file, table->facts, status);
  fits_set_hdustruc (file, status); /* TNULL was written by hand */
  for (guint k = 0; k < names->len; k++)
    {
      const TfColumn *column = tf_table_out_column (table, k);
      if (column->type == TF_COLUMN_TEXT)
        write_texts (file, (int)k + 1, table, column, status);
      else
        write_numbers (file, (int)k + 1, table, column, status);
    }
}

static int
write_file (const char *path, const TfTableOut *table)
{
  fitsfile *file = NULL;
  int status = 0, closing = 0;
  fits_create_diskfile (&file, path, &status);
  if (status != 0)
    return status;
  write_table (file, table, &status);
  fits_close_file (file, &closing);
  if (status == 0)
    status = closing != 0 ? closing : tf_fits_write_sums (path, 2);
  return status;
}

gboolean
tf_export_fits (const char *path, const TfTableOut *table, GError **error)
{
  g_autofree char *part
      = g_strdup_printf ("%s.%" G_GINT64_MODIFIER "x.part", path, g_get_monotonic_time ());
  char reason[FLEN_STATUS] = "";
  int status = write_file (part, table);
  if (status == 0 && g_rename (part, path) == 0)
    return TRUE;
  if (status != 0)
    fits_get_errstatus (status, reason);
  else
    g_strlcpy (reason, g_strerror (errno), sizeof reason);
  fits_clear_errmsg ();
  g_unlink (part);
  tf_export_set_error (error, path, reason);
  return FALSE;
}
