/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-fits-private.h"

#include <math.h>
#include <string.h>

#include "tf-rice-private.h"

/* Integer pictures whose rows are packed one by one with RICE_1 (FITS Standard 4.0, 2018, sections
 * 7.3.5 and 10), in a file that is not packed itself. What is not exactly of this kind, or has a
 * row whose bytes lie out of the heap, is left to CFITSIO, which has the last word on what is a
 * damaged file. */

enum
{
  MAX_ROWS = 1 << 18, /* of all planes */
  MAX_GAP = 1 << 16,  /* bytes between rows that are read along with them */
};

/* A table's columns, as far as they can be here: packed bytes, each a descriptor of two numbers. */
typedef struct
{
  gint64 width;        /* bytes of a table row */
  gint64 rows, extra;  /* rows of the table; bytes of the gap and the heap */
  gint64 from;         /* where in a row the descriptor begins */
  gboolean wide;       /* 64-bit numbers */
} Table;

static const char *
indexed (const TfHeader *header, const char *stem, guint k)
{
  char keyword[12];
  g_snprintf (keyword, sizeof keyword, "%s%u", stem, k);
  return tf_header_get (header, keyword);
}

static gint64
indexed_int (const TfHeader *header, const char *stem, guint k, gint64 fallback)
{
  char keyword[12];
  g_snprintf (keyword, sizeof keyword, "%s%u", stem, k);
  return tf_header_int (header, keyword, fallback);
}

static gboolean
says (const TfHeader *header, const char *keyword, const char *word)
{
  return g_strcmp0 (tf_header_get (header, keyword), word) == 0;
}

/* 8 or 16, the width of a descriptor of bytes; 0: it is none. */
static gint64
descriptor_width (const char *form)
{
  if (form == NULL)
    return 0;
  form += form[0] == '1';
  return form[0] != '\0' && form[1] == 'B' ? form[0] == 'P' ? 8 : form[0] == 'Q' ? 16 : 0 : 0;
}

/* Every column holds packed bytes, one of them those of the picture. */
static gboolean
find_columns (const TfHeader *header, Table *table)
{
  gint64 n = tf_header_int (header, "TFIELDS", 0), width = 0;
  gboolean found = FALSE;
  for (guint k = 1; n <= 9 && k <= n; k++)
    {
      const char *name = indexed (header, "TTYPE", k);
      gint64 bytes = descriptor_width (indexed (header, "TFORM", k));
      gboolean picture = g_strcmp0 (name, "COMPRESSED_DATA") == 0;
      if (bytes == 0 || (picture && found)
          || (!picture && g_strcmp0 (name, "GZIP_COMPRESSED_DATA") != 0))
        return FALSE;
      if (picture)
        {
          table->from = width;
          table->wide = bytes == 16;
          found = TRUE;
        }
      width += bytes;
    }
  return found && width == table->width;
}

static gboolean
find_table (const TfHeader *header, Table *table)
{
  *table = (Table){ .width = tf_header_int (header, "NAXIS1", 0),
                    .rows = tf_header_int (header, "NAXIS2", 0),
                    .extra = tf_header_int (header, "PCOUNT", -1) };
  return says (header, "XTENSION", "BINTABLE") && tf_header_int (header, "BITPIX", 0) == 8
         && tf_header_int (header, "NAXIS", 0) == 2 && tf_header_int (header, "GCOUNT", 0) == 1
         && table->rows > 0 && table->rows <= MAX_ROWS && table->extra >= 0
         && find_columns (header, table) /* from here on the width is a sum of a few descriptors */
         && tf_header_int (header, "THEAP", table->width * table->rows) == table->width * table->rows;
}

/* Axes and tiles: a tile is a row, and there are as many as the table has rows. */
static gboolean
find_axes (const TfHeader *header, gint64 rows, TfFits *to)
{
  gint64 planes = 1;
  to->bitpix = (int)tf_header_int (header, "ZBITPIX", 0);
  to->n_axes = (int)tf_header_int (header, "ZNAXIS", 0);
  if (to->n_axes < 2 || to->n_axes > TF_FITS_AXES)
    return FALSE;
  for (int k = 0; k < to->n_axes; k++)
    {
      to->axes[k] = indexed_int (header, "ZNAXIS", (guint)k + 1, 0);
      if (to->axes[k] < 1 || to->axes[k] > (k < 2 ? TF_FITS_MAX_SIDE : MAX_ROWS))
        return FALSE;
      gint64 tile = indexed_int (header, "ZTILE", (guint)k + 1, k == 0 ? to->axes[0] : 1);
      if (tile != (k == 0 ? to->axes[0] : 1) || (k > 0 && (planes *= to->axes[k]) > MAX_ROWS))
        return FALSE;
    }
  return planes == rows;
}

/* Plain integers: without a scale of their own beside BSCALE. */
static gboolean
is_plain (const TfHeader *header, const TfFits *fits)
{
  guint bytes = fits->rice.pixel_bytes;
  return says (header, "ZIMAGE", "T") && says (header, "ZCMPTYPE", "RICE_1")
         && (bytes == 2 || bytes == 4) && (fits->bitpix == 16 || fits->bitpix == 32)
         && fits->bitpix >= (int)bytes * 8 && !tf_header_has (header, "ZSCALE")
         && !tf_header_has (header, "ZZERO") && !tf_header_has (header, "ZMASKCMP");
}

static guint64
read_number (const guint8 *bytes, gboolean wide)
{
  guint64 value = 0;
  for (guint k = 0; k < (wide ? 8 : 4); k++)
    value = value << 8 | bytes[k];
  return value;
}

/* Where each row's bytes are; FALSE when one has none, or they cannot be where it says. */
static gboolean
find_rows (const TfFits *fits, const Table *table, goffset data, gint64 row_pixels, TfRows *rows)
{
  gsize n = (gsize)table->rows, half = table->wide ? 8 : 4;
  goffset heap = data + table->width * table->rows;
  gint64 left = fits->size - heap;
  g_autofree guint8 *cells = g_try_malloc_n (n, (gsize)table->width);
  if (left < 0 || cells == NULL
      || !tf_fits_read_bytes (fits, data, cells, n * (gsize)table->width))
    return FALSE;
  rows->end = data + (table->width * table->rows + table->extra + 2879) / 2880 * 2880;
  rows->at = g_new (goffset, n);
  rows->length = g_new (guint32, n);
  for (gsize k = 0; k < n; k++)
    {
      const guint8 *cell = cells + k * (gsize)table->width + table->from;
      guint64 length = read_number (cell, table->wide), at = read_number (cell + half, table->wide);
      if (length == 0 || length > (guint64)row_pixels * 8 + 1024 || length > (guint64)left
          || at > (guint64)left - length)
        return FALSE;
      rows->length[k] = (guint32)length;
      rows->at[k] = heap + (goffset)at;
    }
  return TRUE;
}

void
tf_rows_clear (TfRows *rows)
{
  g_free (rows->at);
  g_free (rows->length);
  *rows = (TfRows){ 0 };
}

/* The first HDU without data, as it must begin. */
static gboolean
is_empty_first (const TfHeader *header)
{
  static const char *const words[] = { "SIMPLE", "BITPIX", "NAXIS" };
  gint64 bits = ABS (tf_header_int (header, "BITPIX", 0));
  for (guint k = 0; k < G_N_ELEMENTS (words); k++)
    if (g_strcmp0 (tf_header_get_keyword (header, k), words[k]) != 0)
      return FALSE;
  return says (header, "SIMPLE", "T") && says (header, "NAXIS", "0")
         && (bits == 8 || bits == 16 || bits == 32 || bits == 64);
}

TfHduKind
tf_rows_take (TfFits *fits, int hdu)
{
  Table table;
  TfFits found = { 0 };
  if (fits->hdus == NULL || fits->packed || hdu < 1 || hdu > (int)fits->hdus->len)
    return TF_HDU_OTHER;
  const TfHdu *seen = &g_array_index (fits->hdus, TfHdu, hdu - 1);
  if (!seen->printable)
    return TF_HDU_OTHER;
  if (hdu == 1)
    return is_empty_first (seen->header) ? TF_HDU_NO_PICTURE : TF_HDU_OTHER;
  found.rice = tf_rice_look (seen->header);
  if (!find_table (seen->header, &table) || !find_axes (seen->header, table.rows, &found)
      || !is_plain (seen->header, &found)
      || !find_rows (fits, &table, seen->data, found.axes[0], &found.rows))
    {
      tf_rows_clear (&found.rows);
      return TF_HDU_OTHER;
    }
  tf_rows_clear (&fits->rows);
  fits->rows = found.rows;
  fits->hdu = hdu;
  fits->bitpix = found.bitpix;
  fits->n_axes = found.n_axes;
  memcpy (fits->axes, found.axes, sizeof fits->axes);
  fits->compressed = TRUE;
  tf_fits_take_header (fits, tf_header_copy (seen->header));
  fits->rice = tf_rice_look (fits->header);
  return TF_HDU_ROWS;
}

__attribute__ ((target_clones ("arch=x86-64-v3", "default"))) static void
to_floats (const gint32 *stored, guint n, double scale, double zero, gboolean has_blank,
           gint32 blank, float *out)
{
  for (guint x = 0; x < n; x++)
    {
      float value = (float)(stored[x] * scale + zero);
      out[x] = has_blank && stored[x] == blank ? NAN : value;
    }
}

/* Packed bytes of some rows: of all with one reading, where they lie close together, as they do in
 * most files; @bytes: (out): where each row's begin in @room. */
static gboolean
fetch (const TfFits *fits, gsize row, guint n, GByteArray *room, const guint8 **bytes)
{
  const goffset *at = fits->rows.at + row;
  const guint32 *length = fits->rows.length + row;
  goffset from = at[0], to = at[0], sum = 0;
  for (guint k = 0; k < n; k++)
    {
      from = MIN (from, at[k]);
      to = MAX (to, at[k] + length[k]);
      sum += length[k];
    }
  gboolean close = to - from <= sum + MAX_GAP;
  g_byte_array_set_size (room, (guint)(close ? to - from : sum));
  if (close && !tf_fits_read_bytes (fits, from, room->data, room->len))
    return FALSE;
  gsize used = 0;
  for (guint k = 0; k < n; k++)
    {
      bytes[k] = room->data + (close ? (gsize)(at[k] - from) : used);
      if (!close && !tf_fits_read_bytes (fits, at[k], room->data + used, length[k]))
        return FALSE;
      used += length[k];
    }
  return TRUE;
}

/* @n: 1 or 2 rows from the packed @bytes. */
static gboolean
unpack (const TfFits *fits, const guint8 *const *bytes, const guint32 *length, guint n,
        gint32 *stored, float *out)
{
  const TfRice *r = &fits->rice;
  guint width = (guint)fits->axes[0];
  gint32 *const lines[2] = { stored, stored + width };
  const gsize lengths[2] = { length[0], n == 2 ? length[1] : 0 };
  gboolean in_range = r->blank >= G_MININT32 && r->blank <= G_MAXINT32;
  gboolean good = n == 2 ? tf_rice_decode_two (bytes, lengths, r->pixel_bytes, r->block, width, lines)
                         : tf_rice_decode (bytes[0], lengths[0], r->pixel_bytes, r->block, width,
                                           stored);
  for (guint i = 0; good && i < n; i++)
    to_floats (lines[i], width, r->scale, r->zero, r->has_blank && in_range, (gint32)r->blank,
               out + (gsize)i * width);
  return good;
}

gboolean
tf_rows_read (const TfFits *fits, guint plane, guint first, guint n, float *out)
{
  gsize width = (gsize)fits->axes[0], row = (gsize)(plane - 1) * (gsize)fits->axes[1] + first;
  g_autofree gint32 *stored = g_new (gint32, 2 * width);
  g_autofree const guint8 **bytes = g_new (const guint8 *, MAX (n, 1));
  g_autoptr (GByteArray) room = g_byte_array_new ();
  if (n > 0 && !fetch (fits, row, n, room, bytes))
    return FALSE;
  for (guint k = 0, some; k < n; k += some)
    {
      some = MIN (2, n - k);
      if (!unpack (fits, bytes + k, fits->rows.length + row + k, some, stored, out + k * width))
        return FALSE;
    }
  return TRUE;
}
