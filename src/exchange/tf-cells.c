/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-cells.h"

#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-export.h"
#include "tf-cells-private.h"

enum
{
  LONGEST_ABOUT = 16384
};
#define LARGEST_FILE ((gsize)1 << 30)

static void
clear_column (gpointer data)
{
  g_free (((TfCellsColumn *)data)->name);
  g_free (((TfCellsColumn *)data)->unit);
}

static void
clear_fault (gpointer data)
{
  TfFault *fault = data;
  g_free (fault->column);
  g_free (fault->value);
  g_free (fault->reason);
}

GArray *
tf_faults_new (void)
{
  GArray *faults = g_array_new (FALSE, TRUE, sizeof (TfFault));
  g_array_set_clear_func (faults, clear_fault);
  return faults;
}

TfCells *
tf_cells_new (const char *format, gboolean by_line)
{
  TfCells *table = g_new0 (TfCells, 1);
  table->format = format;
  table->by_line = by_line;
  table->columns = g_array_new (FALSE, TRUE, sizeof (TfCellsColumn));
  g_array_set_clear_func (table->columns, clear_column);
  table->rows = g_ptr_array_new_with_free_func (g_free);
  table->places = g_array_new (FALSE, FALSE, sizeof (guint));
  table->faults = tf_faults_new ();
  table->not_read = g_ptr_array_new_with_free_func (g_free);
  table->about = g_string_new (NULL);
  table->texts = g_string_chunk_new (65536);
  return table;
}

void
tf_cells_free (TfCells *table)
{
  if (table == NULL)
    return;
  g_array_unref (table->columns);
  g_ptr_array_unref (table->rows);
  g_array_unref (table->places);
  g_array_unref (table->faults);
  g_ptr_array_unref (table->not_read);
  g_string_free (table->about, TRUE);
  g_string_chunk_free (table->texts);
  g_free (table);
}

void
tf_cells_add_column (TfCells *table, const char *name, const char *unit)
{
  TfCellsColumn column = { g_strstrip (g_strdup (name)),
                           g_strstrip (g_strdup (unit != NULL ? unit : "")) };
  g_array_append_val (table->columns, column);
}

void
tf_cells_add_row (TfCells *table, guint place, const char *const *cells)
{
  guint n = table->columns->len;
  char **row = g_new0 (char *, n + 1);
  for (guint k = 0; k < n; k++)
    if (cells[k] != NULL)
      row[k] = g_string_chunk_insert (table->texts, cells[k]);
  g_ptr_array_add (table->rows, row);
  g_array_append_val (table->places, place);
}

void
tf_cells_add_about (TfCells *table, const char *line)
{
  gsize room = table->about->len < LONGEST_ABOUT ? LONGEST_ABOUT - table->about->len : 0;
  g_autofree char *clean = g_utf8_make_valid (line, (gssize)MIN (strlen (line), room));
  g_strstrip (clean);
  if (*clean != '\0' && room > 1)
    g_string_append_printf (table->about, "%s\n", clean);
}

int
tf_cells_find (const TfCells *table, const char *name)
{
  for (guint k = 0; k < table->columns->len; k++)
    if (strcmp (g_array_index (table->columns, TfCellsColumn, k).name, name) == 0)
      return (int)k;
  return -1;
}

void
tf_fault_add (GArray *faults, guint place, const char *column, const char *value,
              const char *reason)
{
  TfFault fault = { place, g_strdup (column), g_utf8_make_valid (value, (gssize)MIN (strlen (value), 80)),
                    g_strdup (reason) };
  g_array_append_val (faults, fault);
}

void
tf_export_fail_read (GError **error, const char *name, const char *reason)
{
  /* One line of text, whatever names and cells of somebody's file stand in it. */
  g_autofree char *line = g_utf8_make_valid (reason, -1);
  for (char *p = line; *p != '\0'; p++)
    if ((guchar)*p < 0x20)
      *p = ' ';
  g_set_error (error, TF_EXCHANGE_ERROR, TF_EXCHANGE_ERROR_READ, "%s: %s", name, line);
}

gboolean
tf_cells_check_columns (const TfCells *table, const char *name, GError **error)
{
  g_autoptr (GHashTable) seen = g_hash_table_new (g_str_hash, g_str_equal);
  guint n = table->columns->len;
  if (n == 0 || n > TF_MOST_COLUMNS)
    {
      g_autofree char *reason = g_strdup_printf (
          _ ("a table has 1 to %d columns, and this one %u; see that the first line names them"),
          TF_MOST_COLUMNS, n);
      tf_export_fail_read (error, name, reason);
      return FALSE;
    }
  for (guint k = 0; k < n; k++)
    {
      char *column = g_array_index (table->columns, TfCellsColumn, k).name;
      if (g_hash_table_add (seen, column))
        continue;
      g_autofree char *reason = g_strdup_printf (
          _ ("column %u has the name “%s” of one before it; give it another"), k + 1, column);
      tf_export_fail_read (error, name, reason);
      return FALSE;
    }
  return TRUE;
}

TfCells *
tf_cells_read_text (const char *bytes, gsize n, const char *name, GError **error)
{
  if (n >= 3 && memcmp (bytes, "\xef\xbb\xbf", 3) == 0)
    {
      bytes += 3;
      n -= 3;
    }
  gsize at = 0;
  while (at < n && g_ascii_isspace (bytes[at]))
    at++;
  if (at == n)
    {
      tf_export_fail_read (error, name, _ ("the file is empty"));
      return NULL;
    }
  if (bytes[at] == '<')
    return tf_cells_read_votable (bytes + at, n - at, name, error);
  if (bytes[at] == '{' || bytes[at] == '[')
    return tf_cells_read_json (bytes, n, name, error);
  return tf_cells_read_csv (bytes, n, name, error);
}

TfCells *
tf_cells_read (const char *path, GError **error)
{
  g_return_val_if_fail (path != NULL, NULL);
  g_autoptr (GError) problem = NULL;
  g_autoptr (GMappedFile) file = g_mapped_file_new (path, FALSE, &problem);
  if (file == NULL)
    {
      tf_export_fail_read (error, path, problem->message);
      return NULL;
    }
  gsize n = g_mapped_file_get_length (file);
  const char *bytes = g_mapped_file_get_contents (file);
  if (n > LARGEST_FILE)
    {
      tf_export_fail_read (error, path, _ ("the file has more than 1 GiB; bring it in parts"));
      return NULL;
    }
  if (n >= 9 && memcmp (bytes, "SIMPLE  =", 9) == 0)
    return tf_cells_read_fits (path, error);
  return tf_cells_read_text (bytes != NULL ? bytes : "", n, path, error);
}
