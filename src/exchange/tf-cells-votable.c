/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <libxml/xmlreader.h>
#include <glib/gi18n-lib.h>
#include <string.h>

#include "tf-export.h"
#include "tf-cells-private.h"
#include "tf-votable-binary.h"

/* The first TABLE of a VOTable (IVOA recommendation 1.4; older ones have the same parts): FIELD,
 * and DATA as TABLEDATA, BINARY or BINARY2 with a base64 stream in the document. An empty cell, and
 * the value that a FIELD names as null, is no value. Nothing outside the document is fetched; names
 * are taken without their name space. */

typedef struct
{
  xmlTextReader *xml;
  TfCells *table;
  const char *name;
  GArray *fields;  /* TfVotableField */
  GString *text;   /* of the element in hand */
  GPtrArray *cells;
  guint tables, rows;
  gboolean in_table, done;
  char *reason; /* why the document is refused */
} Reader;

static gboolean
is (const Reader *r, const char *name)
{
  const char *local = (const char *)xmlTextReaderConstLocalName (r->xml);
  return g_strcmp0 (local, name) == 0;
}

static char *
dup_attribute (const Reader *r, const char *name)
{
  xmlChar *value = xmlTextReaderGetAttribute (r->xml, (const xmlChar *)name);
  char *text = g_strdup (value != NULL ? (const char *)value : "");
  xmlFree (value);
  return text;
}

static void
clear_field (gpointer data)
{
  g_free (((TfVotableField *)data)->null);
}

static void
begin_field (Reader *r)
{
  g_autofree char *name = dup_attribute (r, "name"), *id = dup_attribute (r, "ID"),
                  *unit = dup_attribute (r, "unit"), *type = dup_attribute (r, "datatype"),
                  *size = dup_attribute (r, "arraysize");
  TfVotableField field = { 0 };
  if (!tf_votable_field_read (&field, type, size))
    r->reason = g_strdup_printf (
        _ ("FIELD %u (%s) is of a type that is not known: %s[%s]"), r->fields->len + 1,
        *name != '\0' ? name : id, type, size);
  g_array_append_val (r->fields, field);
  tf_cells_add_column (r->table, *name != '\0' ? name : id, unit);
}

static void
begin_values (Reader *r)
{
  if (r->fields->len == 0)
    return;
  TfVotableField *field = &g_array_index (r->fields, TfVotableField, r->fields->len - 1);
  char *null = dup_attribute (r, "null");
  g_free (field->null);
  field->null = *null != '\0' ? null : (g_free (null), NULL);
}

static void
add_info (Reader *r)
{
  g_autofree char *name = dup_attribute (r, "name"), *value = dup_attribute (r, "value");
  g_autofree char *line = g_strdup_printf ("%s: %s", name, value);
  tf_cells_add_about (r->table, line);
}

/* -- TABLEDATA --------------------------------------------------------------------------------- */

static void
end_cell (Reader *r)
{
  g_autofree char *text = g_strndup (r->text->str, TF_LONGEST_CELL);
  g_strstrip (text);
  g_ptr_array_add (r->cells, *text != '\0' ? g_steal_pointer (&text) : NULL);
  g_string_truncate (r->text, 0);
}

static void
end_row (Reader *r)
{
  guint number = ++r->rows;
  if (r->cells->len != r->fields->len)
    {
      g_autofree char *reason = g_strdup_printf (_ ("%u cells where the table has %u fields"),
                                                 r->cells->len, r->fields->len);
      tf_fault_add (r->table->faults, number, "", "", reason);
    }
  else
    {
      for (guint k = 0; k < r->cells->len; k++)
        {
          const TfVotableField *field = &g_array_index (r->fields, TfVotableField, k);
          const char *cell = g_ptr_array_index (r->cells, k);
          if (cell != NULL && tf_votable_is_null (field, cell))
            g_free (g_steal_pointer (&g_ptr_array_index (r->cells, k)));
        }
      tf_cells_add_row (r->table, number, (const char *const *)r->cells->pdata);
    }
  g_ptr_array_set_size (r->cells, 0);
}

/* -- the document ------------------------------------------------------------------------------ */

static void
begin_stream (Reader *r)
{
  g_autofree char *href = dup_attribute (r, "href"), *encoding = dup_attribute (r, "encoding");
  if (*href != '\0' || g_ascii_strcasecmp (encoding, "base64") != 0)
    r->reason = g_strdup (_ ("its rows stand in another file or in an encoding other than base64; "
                             "convert it to TABLEDATA"));
}

static void
begin_element (Reader *r, gboolean *binary2)
{
  g_string_truncate (r->text, 0);
  if (is (r, "TABLE"))
    {
      r->tables++;
      r->in_table = r->tables == 1;
    }
  else if (is (r, "INFO"))
    add_info (r);
  else if (!r->in_table)
    return;
  else if (is (r, "FIELD"))
    begin_field (r);
  else if (is (r, "VALUES"))
    begin_values (r);
  else if (is (r, "BINARY2") || is (r, "BINARY"))
    *binary2 = is (r, "BINARY2");
  else if (is (r, "FITS"))
    r->reason = g_strdup (_ ("its rows are a FITS file inside; convert it to TABLEDATA"));
  else if (is (r, "STREAM"))
    begin_stream (r);
  else if (is (r, "TR"))
    g_ptr_array_set_size (r->cells, 0);
}

static void
end_element (Reader *r, gboolean binary2)
{
  if (!r->in_table)
    return;
  if (is (r, "TD"))
    end_cell (r);
  else if (is (r, "TR"))
    end_row (r);
  else if (is (r, "STREAM"))
    r->reason = tf_votable_take_stream (r->table, r->fields, r->text->str, binary2);
  else if (is (r, "TABLE"))
    r->in_table = FALSE;
}

static gboolean
read_nodes (Reader *r)
{
  gboolean binary2 = FALSE;
  int more = -1;
  while (r->reason == NULL && (more = xmlTextReaderRead (r->xml)) == 1)
    {
      int type = xmlTextReaderNodeType (r->xml);
      if (type == XML_READER_TYPE_ELEMENT)
        {
          gboolean empty = xmlTextReaderIsEmptyElement (r->xml) == 1;
          begin_element (r, &binary2);
          if (empty && r->reason == NULL)
            end_element (r, binary2);
        }
      else if (type == XML_READER_TYPE_END_ELEMENT)
        end_element (r, binary2);
      else if (r->in_table
               && (type == XML_READER_TYPE_TEXT || type == XML_READER_TYPE_CDATA))
        g_string_append (r->text, (const char *)xmlTextReaderConstValue (r->xml));
    }
  return r->reason == NULL && more == 0;
}

static void
complain (const Reader *r, GError **error)
{
  if (r->reason != NULL)
    {
      tf_export_fail_read (error, r->name, r->reason);
      return;
    }
  const xmlError *last = xmlGetLastError ();
  g_autofree char *what = g_strdup (last != NULL && last->message != NULL ? last->message : "");
  g_autofree char *reason = g_strdup_printf (
      _ ("the XML breaks off or is not sound at line %d: %s. Fetch it again, or convert it to CSV"),
      last != NULL ? last->line : xmlTextReaderGetParserLineNumber (r->xml), g_strstrip (what));
  tf_export_fail_read (error, r->name, reason);
}

static void
quiet (void *data, const char *message, xmlParserSeverities severity, xmlTextReaderLocatorPtr where)
{
}

static TfCells *
finish (Reader *r, GError **error)
{
  if (!read_nodes (r))
    {
      complain (r, error);
      return NULL;
    }
  if (r->tables == 0)
    {
      tf_export_fail_read (error, r->name, _ ("XML, but no VOTable: there is no TABLE in it"));
      return NULL;
    }
  if (!tf_cells_check_columns (r->table, r->name, error))
    return NULL;
  if (r->tables > 1)
    g_ptr_array_add (r->table->not_read,
                     g_strdup_printf (_ ("%u more tables of the document: the first is taken"),
                                      r->tables - 1));
  return g_steal_pointer (&r->table);
}

TfCells *
tf_cells_read_votable (const char *bytes, gsize n, const char *name, GError **error)
{
  Reader r = { .name = name };
  if (n > G_MAXINT32)
    {
      tf_export_fail_read (error, name, _ ("the file is too large; bring it in parts"));
      return NULL;
    }
  xmlResetLastError ();
  r.xml = xmlReaderForMemory (bytes, (int)n, NULL, NULL, XML_PARSE_NONET | XML_PARSE_COMPACT);
  if (r.xml == NULL)
    {
      tf_export_fail_read (error, name, _ ("the XML cannot be read"));
      return NULL;
    }
  xmlTextReaderSetErrorHandler (r.xml, quiet, NULL);
  r.table = tf_cells_new ("votable", FALSE);
  r.fields = g_array_new (FALSE, TRUE, sizeof (TfVotableField));
  g_array_set_clear_func (r.fields, clear_field);
  r.cells = g_ptr_array_new_with_free_func (g_free);
  r.text = g_string_new (NULL);
  TfCells *table = finish (&r, error);
  xmlFreeTextReader (r.xml);
  tf_cells_free (r.table);
  g_array_unref (r.fields);
  g_ptr_array_unref (r.cells);
  g_string_free (r.text, TRUE);
  g_free (r.reason);
  return table;
}
