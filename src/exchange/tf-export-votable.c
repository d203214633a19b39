/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <errno.h>
#include <libxml/xmlwriter.h>
#include <math.h>
#include <string.h>

#include "tf-export-private.h"
#include "tf-number.h"

/* VOTable 1.4, TABLEDATA. Texts are unicodeChar; a missing text or double is an empty cell, a
 * missing whole number the value that its FIELD names as null, a missing yes/no an empty cell.
 * Units are VOUnits.
 */

#define NULL_INT "-2147483648"
#define WORD(s)  ((const xmlChar *)(s))

static void
put_attribute (xmlTextWriter *writer, const char *name, const char *value)
{
  if (*value != '\0')
    xmlTextWriterWriteAttribute (writer, WORD (name), WORD (value));
}

static void
put_field (xmlTextWriter *writer, const TfColumn *column)
{
  static const char *const types[] = { "unicodeChar", "double", "int", "boolean" };
  /* which must be char */
  gboolean timestamp = strcmp (column->name, "time") == 0 || g_str_has_suffix (column->name, "_time");
  xmlTextWriterStartElement (writer, WORD ("FIELD"));
  put_attribute (writer, "name", column->name);
  put_attribute (writer, "ID", column->name);
  put_attribute (writer, "datatype", timestamp ? "char" : types[column->type]);
  put_attribute (writer, "arraysize", column->type == TF_COLUMN_TEXT ? "*" : "");
  put_attribute (writer, "unit", column->vo_unit);
  put_attribute (writer, "ucd", column->ucd);
  put_attribute (writer, "xtype", timestamp ? "timestamp" : "");
  xmlTextWriterWriteElement (writer, WORD ("DESCRIPTION"), WORD (column->description));
  if (column->type == TF_COLUMN_INT)
    {
      xmlTextWriterStartElement (writer, WORD ("VALUES"));
      put_attribute (writer, "null", NULL_INT);
      xmlTextWriterEndElement (writer);
    }
  xmlTextWriterEndElement (writer);
}

static char *
dup_cell (const TfTableOut *table, const TfColumn *column, guint row)
{
  if (column->type == TF_COLUMN_TEXT)
    return tf_table_out_dup_text (table, column, row);
  double value = tf_table_out_number (table, column, row);
  if (isnan (value))
    return g_strdup (column->type == TF_COLUMN_INT ? NULL_INT : "");
  if (column->type == TF_COLUMN_BOOL)
    return g_strdup (value > 0.5 ? "true" : "false");
  if (column->type == TF_COLUMN_INT)
    return g_strdup_printf ("%d", (int)lrint (value));
  return tf_number_dup (value);
}

/* Characters that XML 1.0 cannot hold become blanks. */
static void
make_holdable (char *text)
{
  for (char *p = text; *p != '\0'; p++)
    if ((guchar)*p < 0x20 && *p != '\t' && *p != '\n' && *p != '\r')
      *p = ' ';
}

static void
put_row (xmlTextWriter *writer, const TfTableOut *table, guint row)
{
  xmlTextWriterStartElement (writer, WORD ("TR"));
  for (guint k = 0; k < table->columns->len; k++)
    {
      g_autofree char *cell = dup_cell (table, tf_table_out_column (table, k), row);
      make_holdable (cell);
      xmlTextWriterWriteElement (writer, WORD ("TD"), WORD (cell));
    }
  xmlTextWriterEndElement (writer);
}

static void
put_facts (xmlTextWriter *writer, const GArray *facts)
{
  for (guint k = 0; k < facts->len; k++)
    {
      const TfFact *fact = &g_array_index (facts, TfFact, k);
      g_autofree char *text = g_strdup (fact->text);
      make_holdable (text);
      xmlTextWriterStartElement (writer, WORD ("INFO"));
      put_attribute (writer, "name", fact->key);
      xmlTextWriterWriteAttribute (writer, WORD ("value"), WORD (text));
      xmlTextWriterEndElement (writer);
    }
}

static void
put_table (xmlTextWriter *writer, const TfTableOut *table)
{
  g_autofree char *n = g_strdup_printf ("%u", table->rows->len);
  xmlTextWriterStartElement (writer, WORD ("TABLE"));
  put_attribute (writer, "name", table->name);
  put_attribute (writer, "nrows", n);
  for (guint k = 0; k < table->columns->len; k++)
    put_field (writer, tf_table_out_column (table, k));
  xmlTextWriterStartElement (writer, WORD ("DATA"));
  xmlTextWriterStartElement (writer, WORD ("TABLEDATA"));
  for (guint k = 0; k < table->rows->len; k++)
    put_row (writer, table, k);
  xmlTextWriterEndElement (writer);
  xmlTextWriterEndElement (writer);
  xmlTextWriterEndElement (writer);
}

static void
put_document (xmlTextWriter *writer, const TfTableOut *table)
{
  xmlTextWriterSetIndent (writer, 1);
  xmlTextWriterStartDocument (writer, NULL, "UTF-8", NULL);
  xmlTextWriterStartElement (writer, WORD ("VOTABLE"));
  put_attribute (writer, "version", "1.4");
  put_attribute (writer, "xmlns",
                 "http://www.ivoa.net/xml/VOTable/v1.3"); /* the name space of 1.4 too */
  xmlTextWriterStartElement (writer, WORD ("RESOURCE"));
  put_attribute (writer, "type", "results");
  put_facts (writer, table->facts);
  put_table (writer, table);
  xmlTextWriterEndElement (writer);
  xmlTextWriterEndElement (writer);
  xmlTextWriterEndDocument (writer);
}

gboolean
tf_export_votable (const char *path, const TfTableOut *table, GError **error)
{
  xmlBuffer *buffer = xmlBufferCreate ();
  xmlTextWriter *writer = buffer != NULL ? xmlNewTextWriterMemory (buffer, 0) : NULL;
  gboolean good = writer != NULL;
  if (good)
    {
      put_document (writer, table);
      xmlFreeTextWriter (writer);
      good = tf_export_save (path, (const char *)xmlBufferContent (buffer),
                             xmlBufferLength (buffer), error);
    }
  else
    tf_export_set_error (error, path, g_strerror (ENOMEM));
  xmlBufferFree (buffer);
  return good;
}
