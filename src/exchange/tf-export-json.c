/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>

#include "tf-export-private.h"
#include "tf-json.h"

/* One document: what the table says of itself, its columns, its rows as objects. A missing
 * value is null, a missing text too. */

static void
put_cell (JsonBuilder *builder, const TfTableOut *table, const TfColumn *column, guint row)
{
  if (column->type == TF_COLUMN_TEXT)
    {
      g_autofree char *text = tf_table_out_dup_text (table, column, row);
      tf_json_string (builder, column->name, *text != '\0' ? text : NULL);
      return;
    }
  double value = tf_table_out_number (table, column, row);
  if (isnan (value))
    tf_json_null (builder, column->name);
  else if (column->type == TF_COLUMN_BOOL)
    tf_json_bool (builder, column->name, value > 0.5);
  else if (column->type == TF_COLUMN_INT)
    tf_json_int (builder, column->name, lrint (value));
  else
    tf_json_number (builder, column->name, value);
}

static void
put_columns (JsonBuilder *builder, const TfTableOut *table)
{
  json_builder_set_member_name (builder, "columns");
  json_builder_begin_array (builder);
  for (guint k = 0; k < table->columns->len; k++)
    {
      const TfColumn *column = tf_table_out_column (table, k);
      json_builder_begin_object (builder);
      tf_json_string (builder, "name", column->name);
      tf_json_string (builder, "unit", *column->vo_unit != '\0' ? column->vo_unit : NULL);
      tf_json_string (builder, "description", column->description);
      json_builder_end_object (builder);
    }
  json_builder_end_array (builder);
}

gboolean
tf_export_json (const char *path, const TfTableOut *table, GError **error)
{
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  json_builder_begin_object (builder);
  json_builder_set_member_name (builder, "about");
  json_builder_begin_object (builder);
  for (guint k = 0; k < table->facts->len; k++)
    tf_json_string (builder, g_array_index (table->facts, TfFact, k).key,
                    g_array_index (table->facts, TfFact, k).text);
  json_builder_end_object (builder);
  put_columns (builder, table);
  json_builder_set_member_name (builder, "rows");
  json_builder_begin_array (builder);
  for (guint k = 0; k < table->rows->len; k++)
    {
      json_builder_begin_object (builder);
      for (guint c = 0; c < table->columns->len; c++)
        put_cell (builder, table, tf_table_out_column (table, c), k);
      json_builder_end_object (builder);
    }
  json_builder_end_array (builder);
  json_builder_end_object (builder);
  g_autofree char *text = tf_json_dup_text (builder, TRUE);
  return tf_export_save (path, text, -1, error);
}
