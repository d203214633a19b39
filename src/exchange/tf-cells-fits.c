/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <fitsio.h>
#include <glib/gi18n-lib.h>
#include <glib/gstdio.h>
#include <math.h>
#include <string.h>

#include "tf-number.h"
#include "tf-export.h"
#include "tf-cells-private.h"

/* The first binary or ASCII table of a FITS file. NaN, TNULL and empty text are no value; logical
 * columns are true and false; a column of vectors is left aside. FITS standard 4.0, sections 7.2
 * and 7.3. */

typedef struct
{
  fitsfile *file;
  LONGLONG size; /* of the file */
  LONGLONG rows;
  int columns;
  int status;
} Source;

typedef struct
{
  int number;  /* in the file, from 1 */
  int type;    /* CFITSIO's */
  long width;  /* of a text */
  char **cells; /* one a row, NULL where there is no value */
  gsize n;      /* of them */
} Column;

static void
clear_column (gpointer data)
{
  Column *column = data;
  for (gsize k = 0; k < column->n; k++)
    g_free (column->cells[k]);
  g_free (column->cells);
}

static gboolean
find_table (Source *s)
{
  int n = 0, kind = IMAGE_HDU;
  fits_get_num_hdus (s->file, &n, &s->status);
  for (int k = 1; s->status == 0 && k <= n; k++)
    if (fits_movabs_hdu (s->file, k, &kind, &s->status) == 0 && kind != IMAGE_HDU)
      return TRUE;
  return FALSE;
}

static void
read_key (Source *s, const char *stem, int k, char text[FLEN_VALUE])
{
  char word[FLEN_KEYWORD];
  int status = 0;
  text[0] = '\0';
  fits_make_keyn (stem, k, word, &status);
  fits_read_key_str (s->file, word, text, NULL, &status);
  fits_clear_errmsg ();
}

static char *
dup_text (const char *cell)
{
  g_autofree char *clean = g_strchomp (g_utf8_make_valid (cell, -1));
  return *clean != '\0' ? g_steal_pointer (&clean) : NULL;
}

static void
read_texts (Source *s, Column *c)
{
  gsize width = (gsize)c->width;
  g_autofree char *buffer = g_malloc0 (width + 1);
  for (LONGLONG k = 0; s->status == 0 && k < s->rows; k++)
    {
      char *cell = buffer;
      int any = 0;
      memset (buffer, 0, width + 1);
      fits_read_col_str (s->file, c->number, k + 1, 1, 1, (char *)"", &cell, &any, &s->status);
      c->cells[k] = dup_text (buffer);
    }
}

static void
read_logicals (Source *s, Column *c)
{
  for (LONGLONG k = 0; s->status == 0 && k < s->rows; k++)
    {
      char value = 0, none = 0;
      int any = 0; /* CFITSIO wants it */
      fits_read_colnull (s->file, TLOGICAL, c->number, k + 1, 1, 1, &value, &none, &any, &s->status);
      c->cells[k] = none ? NULL : g_strdup (value ? "true" : "false");
    }
}

static gboolean
is_whole (int type)
{
  return type == TBYTE || type == TSBYTE || type == TSHORT || type == TUSHORT || type == TINT
         || type == TLONG || type == TULONG || type == TLONGLONG;
}

static void
read_wholes (Source *s, Column *c)
{
  for (LONGLONG k = 0; s->status == 0 && k < s->rows; k++)
    {
      LONGLONG value = 0;
      char none = 0;
      int any = 0;
      fits_read_colnull (s->file, TLONGLONG, c->number, k + 1, 1, 1, &value, &none, &any,
                         &s->status);
      c->cells[k] = none ? NULL : g_strdup_printf ("%" G_GINT64_FORMAT, (gint64)value);
    }
}

/* A float keeps the digits it has as a float. */
static char *
dup_number (double value, int type)
{
  if (type != TFLOAT)
    return tf_number_dup (value);
  for (int digits = 6; digits < 9; digits++)
    {
      g_autofree char *form = g_strdup_printf (".%dg", digits);
      g_autofree char *text = tf_number_dup_form (value, form, FALSE);
      double back = 0;
      if (tf_number_read (text, &back) && (float)back >= (float)value
          && (float)back <= (float)value)
        return g_steal_pointer (&text);
    }
  return tf_number_dup (value);
}

static void
read_numbers (Source *s, Column *c)
{
  for (LONGLONG k = 0; s->status == 0 && k < s->rows; k++)
    {
      double value = 0;
      char none = 0;
      int any = 0;
      fits_read_colnull (s->file, TDOUBLE, c->number, k + 1, 1, 1, &value, &none, &any, &s->status);
      c->cells[k] = none || !isfinite (value) ? NULL : dup_number (value, c->type);
    }
}

static void
read_column (Source *s, Column *c)
{
  c->n = (gsize)s->rows;
  c->cells = g_new0 (char *, c->n + 1);
  if (c->type == TSTRING)
    read_texts (s, c);
  else if (c->type == TLOGICAL)
    read_logicals (s, c);
  else if (is_whole (c->type))
    read_wholes (s, c);
  else
    read_numbers (s, c);
}

/* Which columns hold one value a row; the rest is named in not_read. */
static void
list_columns (Source *s, TfCells *table, GArray *columns)
{
  for (int k = 1; s->status == 0 && k <= s->columns; k++)
    {
      char name[FLEN_VALUE], unit[FLEN_VALUE];
      int type = 0;
      long repeat = 0, width = 0;
      read_key (s, "TTYPE", k, name);
      read_key (s, "TUNIT", k, unit);
      if (fits_get_eqcoltype (s->file, k, &type, &repeat, &width, &s->status) != 0)
        return;
      gboolean one = type == TSTRING
                         ? repeat >= 1 && repeat <= TF_LONGEST_CELL && width == repeat
                         : repeat == 1 && type > 0 && type != TCOMPLEX && type != TDBLCOMPLEX
                               && type != TBIT;
      if (type == TSTRING && width != repeat && width > 0 && width <= TF_LONGEST_CELL)
        one = repeat == 1; /* a field of an ASCII table */
      if (!one)
        {
          g_ptr_array_add (table->not_read,
                           g_strdup_printf (_ ("%s: more than one value a row"), name));
          continue;
        }
      Column column = { .number = k, .type = type, .width = MAX (width, repeat) };
      g_array_append_val (columns, column);
      g_autofree char *made = *name == '\0' ? g_strdup_printf ("col%d", k) : g_strdup (name);
      g_autofree char *clean = g_utf8_make_valid (made, -1), *clean_unit = g_utf8_make_valid (unit, -1);
      tf_cells_add_column (table, clean, clean_unit);
    }
}

static void
read_comments (Source *s, TfCells *table)
{
  int n = 0, status = 0;
  fits_get_hdrspace (s->file, &n, NULL, &status);
  g_autoptr (GString) line = g_string_new (NULL);
  for (int k = 1; status == 0 && k <= n && k < 2000; k++)
    {
      char card[FLEN_CARD];
      if (fits_read_record (s->file, k, card, &status) == 0
          && g_str_has_prefix (card, "COMMENT "))
        tf_cells_add_about (table, card + 8);
    }
  fits_clear_errmsg ();
}

static void
take_rows (Source *s, TfCells *table, GArray *columns)
{
  g_autoptr (GPtrArray) cells = g_ptr_array_new ();
  g_ptr_array_set_size (cells, (gint)columns->len);
  for (LONGLONG k = 0; k < s->rows; k++)
    {
      for (guint c = 0; c < columns->len; c++)
        cells->pdata[c] = g_array_index (columns, Column, c).cells[k];
      tf_cells_add_row (table, (guint)k + 1, (const char *const *)cells->pdata);
    }
}

/* A header that declares more rows than the file can hold is not believed. */
static gboolean
is_there (Source *s)
{
  LONGLONG from = 0, to = 0;
  long width = 0;
  int status = 0;
  fits_read_key_lng (s->file, "NAXIS1", &width, NULL, &status);
  fits_get_hduaddrll (s->file, NULL, &from, &to, &status);
  return status == 0 && s->rows >= 0 && s->rows < G_MAXINT32 && width > 0
         && s->rows <= (s->size - from) / width;
}

static gboolean
read_table (Source *s, TfCells *table, const char *name, GError **error)
{
  if (!find_table (s))
    {
      tf_export_fail_read (error, name, _ ("a FITS file, but no table is in it"));
      return FALSE;
    }
  fits_get_num_rowsll (s->file, &s->rows, &s->status);
  fits_get_num_cols (s->file, &s->columns, &s->status);
  if (s->status == 0 && !is_there (s))
    {
      tf_export_fail_read (error, name,
                     _ ("the table is cut short: its header tells of more rows than the file "
                        "holds; fetch it again"));
      return FALSE;
    }
  g_autoptr (GArray) columns = g_array_new (FALSE, TRUE, sizeof (Column));
  g_array_set_clear_func (columns, clear_column);
  list_columns (s, table, columns);
  if (s->status == 0 && !tf_cells_check_columns (table, name, error))
    return FALSE;
  for (guint k = 0; s->status == 0 && k < columns->len; k++)
    read_column (s, &g_array_index (columns, Column, k));
  if (s->status != 0)
    return TRUE; /* told by the caller */
  read_comments (s, table);
  take_rows (s, table, columns);
  return TRUE;
}

TfCells *
tf_cells_read_fits (const char *path, GError **error)
{
  g_autoptr (TfCells) table = tf_cells_new ("fits", FALSE);
  GStatBuf info;
  Source s = { .size = g_stat (path, &info) == 0 ? info.st_size : 0 };
  int closing = 0;
  char reason[FLEN_STATUS] = "";
  gboolean told = FALSE;
  if (fits_open_diskfile (&s.file, path, READONLY, &s.status) == 0)
    told = !read_table (&s, table, path, error);
  if (s.file != NULL)
    fits_close_file (s.file, &closing);
  fits_clear_errmsg ();
  if (told)
    return NULL;
  if (s.status == 0)
    return g_steal_pointer (&table);
  fits_get_errstatus (s.status, reason);
  g_autofree char *text
      = g_strdup_printf (_ ("the FITS table cannot be read (%s); fetch it again, or convert it"), reason);
  tf_export_fail_read (error, path, text);
  return NULL;
}
