/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-votable-binary.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-number.h"
#include "tf-cells-private.h"

static const struct
{
  const char *name;
  char code;
  guint size;
} types[] = {
  { "boolean", 'B', 1 }, { "bit", 'b', 0 },   { "unsignedByte", 'u', 1 }, { "short", 'h', 2 },
  { "int", 'i', 4 },     { "long", 'l', 8 },  { "char", 'c', 1 },         { "unicodeChar", 'U', 2 },
  { "float", 'f', 4 },   { "double", 'd', 8 }, { "floatComplex", 'F', 8 }, { "doubleComplex", 'D', 16 },
};

/* "", "12", "*", "12*", "2x3": products of what stands there; the last may be open. */
static gboolean
read_size (TfVotableField *field, const char *text)
{
  guint64 count = 1;
  field->variable = FALSE;
  while (*text != '\0')
    {
      char *end;
      guint64 n = 1;
      if (g_ascii_isdigit (*text))
        n = g_ascii_strtoull (text, &end, 10);
      else
        end = (char *)text;
      if (*end == '*')
        {
          field->variable = TRUE;
          end++;
        }
      else if (end == text)
        return FALSE;
      count *= n;
      if (n > TF_LONGEST_CELL || count > TF_LONGEST_CELL)
        return FALSE;
      text = *end == 'x' ? end + 1 : end;
      if (*end != 'x' && *end != '\0')
        return FALSE;
    }
  field->count = (guint)count;
  return TRUE;
}

gboolean
tf_votable_field_read (TfVotableField *field, const char *datatype, const char *arraysize)
{
  for (guint k = 0; k < G_N_ELEMENTS (types); k++)
    if (strcmp (datatype, types[k].name) == 0)
      {
        field->code = types[k].code;
        field->size = types[k].size;
        return read_size (field, arraysize);
      }
  return FALSE;
}

gboolean
tf_votable_is_null (const TfVotableField *field, const char *cell)
{
  double null, value;
  if (strcmp (cell, "NaN") == 0)
    return TRUE;
  if (field->code == 'B' && (strcmp (cell, "?") == 0))
    return TRUE;
  if (field->null == NULL)
    return FALSE;
  if (strcmp (cell, field->null) == 0)
    return TRUE;
  return field->code != 'c' && field->code != 'U' && tf_number_read (cell, &value)
         && tf_number_read (field->null, &null) && value >= null && value <= null;
}

/* -- elements ---------------------------------------------------------------------------------- */

typedef struct
{
  const guchar *at;
  gsize left;
} Bytes;

static gboolean
take (Bytes *bytes, gsize n, const guchar **from)
{
  if (n > bytes->left)
    return FALSE;
  *from = bytes->at;
  bytes->at += n;
  bytes->left -= n;
  return TRUE;
}

static guint64
big_endian (const guchar *p, guint n)
{
  guint64 value = 0;
  for (guint k = 0; k < n; k++)
    value = value << 8 | p[k];
  return value;
}

static char *
dup_real (const guchar *p, char code)
{
  double value;
  if (code == 'd')
    {
      guint64 bits = big_endian (p, 8);
      memcpy (&value, &bits, sizeof value);
      return isfinite (value) ? tf_number_dup (value) : NULL;
    }
  guint32 bits = (guint32)big_endian (p, 4);
  float single;
  memcpy (&single, &bits, sizeof single);
  if (!isfinite (single))
    return NULL;
  for (int digits = 6; digits < 9; digits++)
    { /* the digits that it has as a float */
      g_autofree char *form = g_strdup_printf (".%dg", digits);
      char *text = tf_number_dup_form (single, form, FALSE);
      if (tf_number_read (text, &value) && (float)value >= single && (float)value <= single)
        return text;
      g_free (text);
    }
  return tf_number_dup (single);
}

static char *
dup_text (const guchar *p, guint count, char code)
{
  GString *text = g_string_new (NULL);
  for (guint k = 0; k < count; k++)
    {
      gunichar c = code == 'c' ? p[k] : (gunichar)big_endian (p + 2 * k, 2);
      if (c == 0)
        break;
      if (code == 'c')
        g_string_append_c (text, (char)c);
      else
        g_string_append_unichar (text, c >= 0xd800 && c < 0xe000 ? 0xfffd : c);
    }
  g_autofree char *clean = g_utf8_make_valid (text->str, (gssize)text->len);
  g_string_free (text, TRUE);
  g_strstrip (clean);
  return *clean != '\0' ? g_steal_pointer (&clean) : NULL;
}

static char *
dup_element (const TfVotableField *field, const guchar *p, guint count)
{
  switch (field->code)
    {
    case 'c':
    case 'U':
      return dup_text (p, count, field->code);
    case 'B':
      return strchr ("TtYy1", *p) != NULL && *p != 0 ? g_strdup ("true")
             : strchr ("FfNn0", *p) != NULL && *p != 0 ? g_strdup ("false")
                                                        : NULL;
    case 'u':
      return g_strdup_printf ("%u", *p);
    case 'h':
      return g_strdup_printf ("%d", (gint16)big_endian (p, 2));
    case 'i':
      return g_strdup_printf ("%d", (gint32)big_endian (p, 4));
    case 'l':
      return g_strdup_printf ("%" G_GINT64_FORMAT, (gint64)big_endian (p, 8));
    case 'f':
    case 'd':
      return dup_real (p, field->code);
    default:
      return NULL; /* bits and complex numbers: of no use here */
    }
}

/* One cell; FALSE when the stream ends inside. */
static gboolean
take_cell (Bytes *bytes, const TfVotableField *field, char **cell)
{
  const guchar *p;
  guint count = field->count;
  if (field->variable)
    {
      if (!take (bytes, 4, &p))
        return FALSE;
      count = (guint)big_endian (p, 4);
      if (count > TF_LONGEST_CELL)
        return FALSE;
    }
  gsize n = field->code == 'b' ? (count + 7) / 8 : (gsize)count * field->size;
  if (!take (bytes, n, &p))
    return FALSE;
  gboolean text = field->code == 'c' || field->code == 'U';
  *cell = count == 0 || (!text && count > 1) ? NULL : dup_element (field, p, count);
  if (*cell != NULL && tf_votable_is_null (field, *cell))
    g_clear_pointer (cell, g_free);
  return TRUE;
}

static gboolean
take_row (Bytes *bytes, const GArray *fields, gboolean binary2, GPtrArray *cells)
{
  const guchar *nulls = NULL;
  g_ptr_array_set_size (cells, 0);
  if (binary2 && !take (bytes, (fields->len + 7) / 8, &nulls))
    return FALSE;
  for (guint k = 0; k < fields->len; k++)
    {
      char *cell = NULL;
      if (!take_cell (bytes, &g_array_index (fields, TfVotableField, k), &cell))
        return FALSE;
      if (nulls != NULL && (nulls[k / 8] & (0x80 >> (k % 8))) != 0)
        g_clear_pointer (&cell, g_free);
      g_ptr_array_add (cells, cell);
    }
  return TRUE;
}

char *
tf_votable_take_stream (TfCells *table, const GArray *fields, const char *base64, gboolean binary2)
{
  gsize n = 0;
  g_autofree guchar *data = g_base64_decode (base64, &n);
  g_autoptr (GPtrArray) cells = g_ptr_array_new_with_free_func (g_free);
  Bytes bytes = { data, n };
  gsize before = 0;
  for (guint row = 1; bytes.left > 0; row++)
    {
      before = bytes.left;
      if (!take_row (&bytes, fields, binary2, cells))
        return g_strdup_printf (_ ("the rows break off inside row %u; fetch it again"), row);
      if (bytes.left == before)
        return g_strdup (_ ("its rows hold nothing"));
      tf_cells_add_row (table, row, (const char *const *)cells->pdata);
    }
  return NULL;
}
