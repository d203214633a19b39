/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-fits-private.h"

#include <glib/gi18n-lib.h>
#include <math.h>
#include <string.h>

#include "tf-number.h"

/* A walk over the headers of a file before CFITSIO sees it: it divides by the tile sizes that a
 * compressed HDU claims (4.2.0: ZTILE1 = 0 ends the program), so these are held against the
 * picture and the table here.
 * */

enum
{
  BLOCK = 2880,
  MAX_BLOCKS = 4000, /* of one header */
  MAX_HDUS = 200,
  MAX_TILE_AXES = 6, /* CFITSIO's MAX_COMPRESS_DIM */
  PACK_LIMIT = 2000, /* no tile compression makes a picture smaller than 1/2000 */
};

/* Where the headers are read from: the file, or what it is unpacked to. */
typedef struct
{
  const TfFits *fits;
  goffset at;
  GInputStream *unpacked; /* NULL: the file itself */
} Source;

static void
open_source (Source *source, const TfFits *fits)
{
  *source = (Source){ .fits = fits };
  if (!fits->gzip)
    return;
  g_autoptr (GFile) file = g_file_new_for_path (fits->path);
  g_autoptr (GFileInputStream) stream = g_file_read (file, NULL, NULL);
  g_autoptr (GZlibDecompressor) unpack = g_zlib_decompressor_new (G_ZLIB_COMPRESSOR_FORMAT_GZIP);
  if (stream != NULL)
    source->unpacked
        = g_converter_input_stream_new (G_INPUT_STREAM (stream), G_CONVERTER (unpack));
}

static gboolean
read_block (Source *source, char block[BLOCK])
{
  gsize n = 0;
  if (source->fits->gzip)
    return source->unpacked != NULL
           && g_input_stream_read_all (source->unpacked, block, BLOCK, &n, NULL, NULL)
           && n == BLOCK;
  source->at += BLOCK;
  return tf_fits_read_bytes (source->fits, source->at - BLOCK, block, BLOCK);
}

static gboolean
skip (Source *source, goffset bytes)
{
  source->at += bytes;
  for (gssize left = (gssize)bytes, done; source->unpacked != NULL && left > 0; left -= done)
    {
      done = g_input_stream_skip (source->unpacked, (gsize)left, NULL, NULL);
      if (done <= 0)
        return FALSE;
    }
  return TRUE;
}

/* TRUE when one of the block's cards is END. */
static gboolean
has_end (const char *block)
{
  for (guint at = 0; at < BLOCK; at += 80)
    if (memcmp (block + at, "END     ", 8) == 0)
      return TRUE;
  return FALSE;
}

static gboolean
is_printable (const GByteArray *bytes)
{
  for (guint k = 0; k < bytes->len; k++)
    if (!g_ascii_isprint ((char)bytes->data[k]))
      return FALSE;
  return TRUE;
}

/* The next header, its cards as they stand in @bytes; NULL at the end of the file or when it is
 * not one. */
static TfHeader *
next_header (Source *source, GByteArray *bytes, gboolean *printable)
{
  char block[BLOCK];
  g_byte_array_set_size (bytes, 0);
  for (guint k = 0; k < MAX_BLOCKS; k++)
    {
      if (!read_block (source, block))
        return NULL;
      if (k == 0 && memcmp (block, "SIMPLE  ", 8) != 0 && memcmp (block, "XTENSION", 8) != 0)
        return NULL;
      g_byte_array_append (bytes, (const guint8 *)block, BLOCK);
      if (has_end (block))
        {
          *printable = is_printable (bytes);
          for (guint at = 0; at < bytes->len; at++) /* a line end would make it a text */
            if (bytes->data[at] == '\n' || bytes->data[at] == '\r')
              bytes->data[at] = ' ';
          return tf_header_read ((const char *)bytes->data, bytes->len);
        }
    }
  return NULL;
}

static double
indexed (const TfHeader *header, const char *stem, guint k)
{
  g_autofree char *keyword = g_strdup_printf ("%s%u", stem, k);
  return tf_header_number (header, keyword);
}

/* Bytes of the data unit, not yet filled up to a block; NaN when the header does not say. */
static double
data_bytes (const TfHeader *header)
{
  double axes = tf_header_number (header, "NAXIS"), product = axes > 0 ? 1 : 0;
  const char *groups = tf_header_get (header, "GROUPS");
  double parameters = tf_header_number (header, "PCOUNT"),
         count = tf_header_number (header, "GCOUNT");
  for (guint k = 1; k <= axes && k < 1000; k++)
    if (!(k == 1 && groups != NULL && strcmp (groups, "T") == 0
          && indexed (header, "NAXIS", 1) < 1))
      product *= indexed (header, "NAXIS", k);
  return fabs (tf_header_number (header, "BITPIX")) / 8 * (isnan (count) ? 1 : count)
         * ((isnan (parameters) ? 0 : parameters) + product);
}

static gboolean
bad_tiles (const char *path, guint hdu, const char *what, double value, GError **error)
{
  g_set_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_READ,
               _ ("%s, HDU %u: the compressed picture is damaged (%s is %.0f); get the file again "
                  "from its source"),
               path, hdu, what, value);
  return FALSE;
}

/* The compressed picture's axes, tiles, rows and size agree with each other. */
static gboolean
check_tiles (const TfHeader *header, const char *path, guint hdu, GError **error)
{
  double axes = tf_header_number (header, "ZNAXIS"),
         bits = fabs (tf_header_number (header, "ZBITPIX"));
  double tiles = 1, pixels = 1, rows = tf_header_number (header, "NAXIS2");
  if (!(axes >= 1 && axes <= MAX_TILE_AXES))
    return bad_tiles (path, hdu, "ZNAXIS", axes, error);
  if (!(bits >= 8 && bits <= 64))
    return bad_tiles (path, hdu, "ZBITPIX", bits, error);
  for (guint k = 1; k <= axes; k++)
    {
      double side = indexed (header, "ZNAXIS", k), tile = indexed (header, "ZTILE", k);
      if (isnan (tile))
        tile = k == 1 ? side : 1;
      if (!(side >= 1 && side < 1e6))
        return bad_tiles (path, hdu, "ZNAXISn", side, error);
      if (!(tile >= 1 && tile < 1e6))
        return bad_tiles (path, hdu, "ZTILEn", tile, error);
      tiles *= ceil (side / tile);
      pixels *= side;
    }
  for (guint k = 1; k < 10; k++)
    {
      g_autofree char *name = g_strdup_printf ("ZNAME%u", k);
      const char *word = tf_header_get (header, name);
      double value = indexed (header, "ZVAL", k);
      gboolean block = word != NULL && strcmp (word, "BLOCKSIZE") == 0;
      if ((block || (word != NULL && strcmp (word, "BYTEPIX") == 0))
          && !(value >= 1 && value <= (block ? 4096 : 8)))
        return bad_tiles (path, hdu, word, value, error);
    }
  if (!(tiles <= rows))
    return bad_tiles (path, hdu, "NAXIS2", rows, error);
  if (!(pixels * bits / 8 / PACK_LIMIT <= data_bytes (header) + BLOCK))
    return bad_tiles (path, hdu, "ZNAXISn", pixels, error);
  return TRUE;
}

/* Card @k is @keyword with a whole number from 0 to @most. */
static gboolean
is_count (const GByteArray *bytes, guint k, const char *keyword, double most, double *value)
{
  char card[81] = "", name[12];
  gint64 number;
  if ((k + 1) * 80 > bytes->len)
    return FALSE;
  memcpy (card, bytes->data + (gsize)k * 80, 80);
  g_snprintf (name, sizeof name, "%-8s= ", keyword);
  if (strncmp (card, name, 10) != 0)
    return FALSE;
  char *slash = strchr (card, '/');
  if (slash != NULL)
    *slash = '\0';
  *value = tf_number_read_int (card + 10, &number) ? (double)number : NAN;
  return *value >= 0 && *value <= most;
}

/* The words that CFITSIO sizes an extension by stand in their order and are counts (4.2.0 goes
 * on with what was in memory where one is not). */
static gboolean
is_sound (const GByteArray *bytes)
{
  double axes, value;
  guint k = 3;
  if (memcmp (bytes->data, "XTENSION", 8) != 0)
    return TRUE; /* the first: CFITSIO refuses it properly */
  gboolean table = memmem (bytes->data + 10, 20, "TABLE", 5) != NULL;
  if (!is_count (bytes, 2, "NAXIS", 999, &axes))
    return FALSE;
  for (guint axis = 1; axis <= axes; axis++)
    {
      char keyword[12];
      g_snprintf (keyword, sizeof keyword, "NAXIS%u", axis);
      if (!is_count (bytes, k++, keyword, 1e15, &value))
        return FALSE;
    }
  return is_count (bytes, k, "PCOUNT", 1e15, &value)
         && is_count (bytes, k + 1, "GCOUNT", 1e9, &value)
         && (!table || is_count (bytes, k + 2, "TFIELDS", 999, &value));
}

static void
clear_hdu (gpointer data)
{
  tf_header_free (((TfHdu *)data)->header);
}

/* All headers up to the first that is not sound. */
static gboolean
walk (Source *source, const char *path, GArray *hdus, GError **error)
{
  g_autoptr (GByteArray) cards = g_byte_array_new ();
  for (guint hdu = 1; hdu <= MAX_HDUS; hdu++)
    {
      TfHdu found = { 0 };
      g_autoptr (TfHeader) header = next_header (source, cards, &found.printable);
      const char *packed = header != NULL ? tf_header_get (header, "ZIMAGE") : NULL;
      if (header == NULL || !is_sound (cards))
        return TRUE;
      if (packed != NULL && strcmp (packed, "T") == 0 && !check_tiles (header, path, hdu, error))
        return FALSE;
      double bytes = ceil (data_bytes (header) / BLOCK) * BLOCK;
      found.data = source->at;
      found.header = g_steal_pointer (&header);
      g_array_append_val (hdus, found);
      if (!(bytes >= 0 && bytes < 1e12) || !skip (source, (goffset)bytes))
        return TRUE;
    }
  return TRUE;
}

gboolean
tf_fits_scan (TfFits *fits, GError **error)
{
  Source source;
  fits->hdus = g_array_new (FALSE, FALSE, sizeof (TfHdu));
  g_array_set_clear_func (fits->hdus, clear_hdu);
  open_source (&source, fits);
  gboolean good = walk (&source, fits->path, fits->hdus, error);
  g_clear_object (&source.unpacked);
  fits->n_sound = MAX (1, (int)fits->hdus->len);
  return good;
}
