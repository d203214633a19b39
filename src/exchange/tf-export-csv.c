/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <string.h>

#include "tf-export-private.h"
#include "tf-number.h"

/* RFC 4180: fields parted by commas, lines ended by CR LF, quotes doubled. Before the header
 * line stand "# key: text" lines. A missing value is empty; yes and no are true and false.
 */

static void
put_text (GString *out, const char *text)
{
  gsize n = strlen (text);
  gboolean plain = strpbrk (text, ",\"\r\n") == NULL && text[0] != '#' && text[0] != ' '
                   && (n == 0 || text[n - 1] != ' ');
  if (plain)
    {
      g_string_append (out, text);
      return;
    }
  g_string_append_c (out, '"');
  for (const char *p = text; *p != '\0'; p++)
    {
      if (*p == '"')
        g_string_append_c (out, '"');
      g_string_append_c (out, *p);
    }
  g_string_append_c (out, '"');
}

static void
put_number (GString *out, const TfColumn *column, double value)
{
  if (isnan (value))
    return;
  if (column->type == TF_COLUMN_BOOL)
    g_string_append (out, value > 0.5 ? "true" : "false");
  else if (column->type == TF_COLUMN_INT)
    g_string_append_printf (out, "%d", (int)lrint (value));
  else
    {
      g_autofree char *text = tf_number_dup (value);
      g_string_append (out, text);
    }
}

static void
put_row (GString *out, const TfTableOut *table, guint row)
{
  for (guint k = 0; k < table->columns->len; k++)
    {
      const TfColumn *column = tf_table_out_column (table, k);
      if (k > 0)
        g_string_append_c (out, ',');
      if (column->type != TF_COLUMN_TEXT)
        {
          put_number (out, column, tf_table_out_number (table, column, row));
          continue;
        }
      g_autofree char *text = tf_table_out_dup_text (table, column, row);
      put_text (out, text);
    }
  g_string_append (out, "\r\n");
}

char *
tf_export_dup_csv (const TfTableOut *table)
{
  GString *out = g_string_new (NULL);
  for (guint k = 0; k < table->facts->len; k++)
    {
      const TfFact *fact = &g_array_index (table->facts, TfFact, k);
      g_string_append_printf (out, "# %s: %s\r\n", fact->key, fact->text);
    }
  for (guint k = 0; k < table->columns->len; k++)
    g_string_append_printf (out, "%s%s", k == 0 ? "" : ",", tf_table_out_column (table, k)->name);
  g_string_append (out, "\r\n");
  for (guint k = 0; k < table->rows->len; k++)
    put_row (out, table, k);
  return g_string_free (out, FALSE);
}

gboolean
tf_export_csv (const char *path, const TfTableOut *table, GError **error)
{
  g_autofree char *text = tf_export_dup_csv (table);
  return tf_export_save (path, text, -1, error);
}
