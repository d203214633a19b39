/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <string.h>

#include "tf-batch.h"

/* Tables of text: columns as wide as their widest cell. */

struct _TfTable
{
  guint n_columns, n_left;
  GPtrArray *cells; /* row by row */
};

TfTable *
tf_table_new (guint n_left, const char *const *heads)
{
  TfTable *table = g_new0 (TfTable, 1);
  table->n_left = n_left;
  table->n_columns = g_strv_length ((char **)heads);
  table->cells = g_ptr_array_new_with_free_func (g_free);
  for (guint c = 0; c < table->n_columns; c++)
    g_ptr_array_add (table->cells, g_strdup (heads[c]));
  return table;
}

void
tf_table_free (TfTable *table)
{
  g_ptr_array_unref (table->cells);
  g_free (table);
}

void
tf_table_add (TfTable *table, const char *format, ...)
{
  va_list list;
  va_start (list, format);
  g_autofree char *line = g_strdup_vprintf (format, list);
  va_end (list);
  g_auto (GStrv) cells = g_strsplit (line, "\t", -1);
  g_return_if_fail (g_strv_length (cells) == table->n_columns);
  for (guint c = 0; c < table->n_columns; c++)
    g_ptr_array_add (table->cells, g_strdup (cells[c]));
}

static const char *
cell_at (const TfTable *table, guint row, guint column)
{
  return g_ptr_array_index (table->cells, row * table->n_columns + column);
}

static glong
width_of (const TfTable *table, guint column)
{
  glong width = 0;
  for (guint row = 0; row < table->cells->len / table->n_columns; row++)
    width = MAX (width, g_utf8_strlen (cell_at (table, row, column), -1));
  return width;
}

char *
tf_table_dup_text (const TfTable *table)
{
  GString *out = g_string_new (NULL);
  for (guint row = 0; row < table->cells->len / table->n_columns; row++)
    {
      for (guint c = 0; c < table->n_columns; c++)
        {
          const char *cell = cell_at (table, row, c);
          gboolean last = c + 1 == table->n_columns, left = c < table->n_left;
          int room = (int)(width_of (table, c) - g_utf8_strlen (cell, -1));
          g_string_append_printf (out, "%s%*s%s%*s", c == 0 ? "  " : "   ", left ? 0 : room, "",
                                  cell, left && !last ? room : 0, "");
        }
      g_string_append_c (out, '\n');
    }
  return g_string_free (out, FALSE);
}
