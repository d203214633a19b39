/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-export.h"
#include "tf-cells-private.h"

/* RFC 4180: fields parted by commas, quoted by ", a quote inside doubled, lines ended by CR LF (LF
 * and CR alone are taken too). An empty field is no value. A row that has another number of fields
 * than the header, or is not UTF-8, is a fault. */

typedef struct
{
  const char *at, *end;
  guint line;        /* of @at, from 1 */
  GPtrArray *fields; /* of the record in hand */
  GString *field;
  const char *trouble; /* NULL: the record is sound */
} Reader;

static void
end_field (Reader *r, gboolean quoted)
{
  if (r->field->len > TF_LONGEST_CELL)
    r->trouble = _ ("a field is longer than 64 KiB");
  else if (memchr (r->field->str, '\0', r->field->len) != NULL
           || !g_utf8_validate (r->field->str, (gssize)r->field->len, NULL))
    r->trouble = _ ("a field is not UTF-8 text");
  if (!quoted)
    g_strstrip (r->field->str);
  g_ptr_array_add (r->fields, g_strdup (r->field->str));
  g_string_truncate (r->field, 0);
}

/* Behind the opening quote; FALSE when the file ends inside. */
static gboolean
read_quoted (Reader *r)
{
  for (; r->at < r->end; r->at++)
    {
      if (*r->at == '"' && r->at + 1 < r->end && r->at[1] == '"')
        r->at++;
      else if (*r->at == '"')
        {
          r->at++;
          return TRUE;
        }
      if (*r->at == '\n')
        r->line++;
      g_string_append_c (r->field, *r->at);
    }
  return FALSE;
}

static gboolean
at_line_end (const Reader *r)
{
  return r->at >= r->end || *r->at == '\n' || *r->at == '\r';
}

static void
skip_line_end (Reader *r)
{
  if (r->at < r->end && *r->at == '\r')
    r->at++;
  if (r->at < r->end && *r->at == '\n')
    r->at++;
  r->line++;
}

/* One field; FALSE when its quotes never close. */
static gboolean
read_field (Reader *r)
{
  gboolean quoted = r->at < r->end && *r->at == '"';
  if (quoted)
    {
      r->at++;
      if (!read_quoted (r))
        return FALSE;
    }
  while (!at_line_end (r) && *r->at != ',')
    {
      if (quoted)
        r->trouble = _ ("something stands between a closing quote and the next comma");
      g_string_append_c (r->field, *r->at++);
    }
  end_field (r, quoted);
  return TRUE;
}

static gboolean
read_record (Reader *r)
{
  g_ptr_array_set_size (r->fields, 0);
  r->trouble = NULL;
  for (;;)
    {
      if (!read_field (r))
        return FALSE;
      if (at_line_end (r))
        break;
      r->at++; /* the comma */
    }
  skip_line_end (r);
  return TRUE;
}

static void
read_about (Reader *r, TfCells *table)
{
  while (r->at < r->end && (*r->at == '#' || at_line_end (r)))
    {
      const char *from = r->at;
      while (!at_line_end (r))
        r->at++;
      g_autofree char *line = g_strndup (from, (gsize)(r->at - from));
      tf_cells_add_about (table, *line == '#' ? line + 1 : line);
      skip_line_end (r);
    }
}

static gboolean
read_header (Reader *r, TfCells *table, const char *name, GError **error)
{
  guint line = r->line;
  if (!read_record (r) || r->trouble != NULL)
    {
      g_autofree char *reason = g_strdup_printf (
          _ ("line %u, which should name the columns, cannot be read: %s. See that it is a CSV "
             "table in UTF-8"),
          line, r->trouble != NULL ? r->trouble : _ ("a quote is never closed"));
      tf_export_fail_read (error, name, reason);
      return FALSE;
    }
  if (r->fields->len == 1 && strpbrk (g_ptr_array_index (r->fields, 0), ";\t|") != NULL)
    {
      tf_export_fail_read (error, name,
                     _ ("the columns seem to be parted by something else than commas; save the "
                        "table with commas"));
      return FALSE;
    }
  for (guint k = 0; k < r->fields->len; k++)
    tf_cells_add_column (table, g_ptr_array_index (r->fields, k), "");
  return tf_cells_check_columns (table, name, error);
}

static void
take_record (Reader *r, TfCells *table, guint line)
{
  if (r->fields->len == 1 && *(char *)g_ptr_array_index (r->fields, 0) == '\0')
    return; /* an empty line */
  if (r->trouble == NULL && r->fields->len != table->columns->len)
    {
      g_autofree char *reason = g_strdup_printf (_ ("%u fields where the header has %u columns"),
                                                 r->fields->len, table->columns->len);
      tf_fault_add (table->faults, line, "", g_ptr_array_index (r->fields, 0), reason);
      return;
    }
  if (r->trouble != NULL)
    {
      tf_fault_add (table->faults, line, "", "", r->trouble);
      return;
    }
  for (guint k = 0; k < r->fields->len; k++)
    if (*(char *)g_ptr_array_index (r->fields, k) == '\0')
      g_free (g_steal_pointer (&g_ptr_array_index (r->fields, k)));
  tf_cells_add_row (table, line, (const char *const *)r->fields->pdata);
}

TfCells *
tf_cells_read_csv (const char *bytes, gsize n, const char *name, GError **error)
{
  g_autoptr (TfCells) table = tf_cells_new ("csv", TRUE);
  g_autoptr (GPtrArray) fields = g_ptr_array_new_with_free_func (g_free);
  g_autoptr (GString) field = g_string_new (NULL);
  Reader r = { .at = bytes, .end = bytes + n, .line = 1, .fields = fields, .field = field };
  read_about (&r, table);
  if (!read_header (&r, table, name, error))
    return NULL;
  while (r.at < r.end)
    {
      guint line = r.line;
      if (!read_record (&r))
        {
          tf_fault_add (table->faults, line, "", "",
                        _ ("a quote that begins here is never closed; the rest of the file was "
                           "not read"));
          break;
        }
      take_record (&r, table, line);
    }
  return g_steal_pointer (&table);
}
