/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <glib/gi18n-lib.h>

#include "tf-json.h"
#include "tf-number.h"
#include "tf-export.h"
#include "tf-cells-private.h"

/* {"about": {…}, "columns": [{"name", "unit"}…], "rows": [{…}…]} as exported here, or an array of
 * objects alone, whose columns are the members of all of them. */

static void
read_about (TfCells *table, JsonObject *root)
{
  JsonObject *about = tf_json_member_object (root, "about");
  g_autoptr (GList) keys = about != NULL ? json_object_get_members (about) : NULL;
  for (GList *l = keys; l != NULL; l = l->next)
    {
      const char *text = tf_json_member_string (about, l->data);
      g_autofree char *line = g_strdup_printf ("%s: %s", (char *)l->data, text != NULL ? text : "");
      tf_cells_add_about (table, line);
    }
}

static void
read_columns (TfCells *table, JsonArray *columns)
{
  for (guint k = 0; k < json_array_get_length (columns); k++)
    {
      JsonNode *node = json_array_get_element (columns, k);
      JsonObject *column = JSON_NODE_HOLDS_OBJECT (node) ? json_node_get_object (node) : NULL;
      const char *name = column != NULL ? tf_json_member_string (column, "name") : NULL;
      if (name != NULL)
        tf_cells_add_column (table, name, tf_json_member_string (column, "unit"));
    }
}

static void
collect_columns (TfCells *table, JsonArray *rows)
{
  g_autoptr (GHashTable) seen = g_hash_table_new_full (g_str_hash, g_str_equal, g_free, NULL);
  for (guint k = 0; k < json_array_get_length (rows); k++)
    {
      JsonNode *node = json_array_get_element (rows, k);
      g_autoptr (GList) keys = JSON_NODE_HOLDS_OBJECT (node)
                                   ? json_object_get_members (json_node_get_object (node))
                                   : NULL;
      for (GList *l = keys; l != NULL && table->columns->len <= TF_MOST_COLUMNS; l = l->next)
        if (g_hash_table_add (seen, g_strdup (l->data)))
          tf_cells_add_column (table, l->data, "");
    }
}

static char *
dup_cell (JsonObject *row, const char *name)
{
  JsonNode *node = json_object_get_member (row, name);
  if (node == NULL || !JSON_NODE_HOLDS_VALUE (node))
    return NULL;
  GType type = json_node_get_value_type (node);
  if (type == G_TYPE_STRING)
    return *json_node_get_string (node) != '\0' ? g_strdup (json_node_get_string (node)) : NULL;
  if (type == G_TYPE_BOOLEAN)
    return g_strdup (json_node_get_boolean (node) ? "true" : "false");
  if (type == G_TYPE_INT64)
    return g_strdup_printf ("%" G_GINT64_FORMAT, json_node_get_int (node));
  return tf_number_dup (json_node_get_double (node));
}

static void
read_row (TfCells *table, guint place, JsonNode *node)
{
  if (!JSON_NODE_HOLDS_OBJECT (node))
    {
      tf_fault_add (table->faults, place, "", "", _ ("the row is no object"));
      return;
    }
  g_autoptr (GPtrArray) cells = g_ptr_array_new_with_free_func (g_free);
  for (guint k = 0; k < table->columns->len; k++)
    g_ptr_array_add (cells, dup_cell (json_node_get_object (node),
                                      g_array_index (table->columns, TfCellsColumn, k).name));
  tf_cells_add_row (table, place, (const char *const *)cells->pdata);
}

TfCells *
tf_cells_read_json (const char *bytes, gsize n, const char *name, GError **error)
{
  g_autoptr (TfCells) table = tf_cells_new ("json", FALSE);
  g_autoptr (JsonParser) parser = json_parser_new ();
  g_autoptr (GError) problem = NULL;
  if (!json_parser_load_from_data (parser, bytes, (gssize)n, &problem))
    {
      tf_export_fail_read (error, name, problem->message);
      return NULL;
    }
  JsonNode *root = json_parser_get_root (parser);
  JsonArray *rows = root != NULL && JSON_NODE_HOLDS_ARRAY (root) ? json_node_get_array (root) : NULL;
  JsonArray *columns = NULL;
  if (root != NULL && JSON_NODE_HOLDS_OBJECT (root))
    {
      rows = tf_json_member_array (json_node_get_object (root), "rows");
      columns = tf_json_member_array (json_node_get_object (root), "columns");
      read_about (table, json_node_get_object (root));
    }
  if (rows == NULL)
    {
      tf_export_fail_read (error, name,
                     _ ("JSON, but no table: an array of objects, or an object with “rows”, is"));
      return NULL;
    }
  if (columns != NULL)
    read_columns (table, columns);
  else
    collect_columns (table, rows);
  if (!tf_cells_check_columns (table, name, error))
    return NULL;
  for (guint k = 0; k < json_array_get_length (rows); k++)
    read_row (table, k + 1, json_array_get_element (rows, k));
  return g_steal_pointer (&table);
}
