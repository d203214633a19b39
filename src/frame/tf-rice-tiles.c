/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-fits-private.h"

#include <math.h>
#include <string.h>

#include "tf-rice-private.h"

/* RICE_1 tiles: CFITSIO finds their bytes, tf_rice_decode unpacks them. */

static long
read_long (fitsfile *file, const char *keyword, long fallback)
{
  int status = 0;
  long value = fallback;
  fits_read_key (file, TLONG, keyword, &value, NULL, &status);
  return status == 0 ? value : fallback;
}

/* The parameter of that name among ZNAMEn, ZVALn. */
static guint
parameter (const TfHeader *header, const char *word, guint fallback)
{
  for (guint k = 1; k < 10; k++)
    {
      char name[12], value[12];
      g_snprintf (name, sizeof name, "ZNAME%u", k);
      g_snprintf (value, sizeof value, "ZVAL%u", k);
      const char *found = tf_header_get (header, name);
      if (found != NULL && strcmp (found, word) == 0)
        return (guint)CLAMP (tf_header_int (header, value, fallback), 1, 4096);
    }
  return fallback;
}

static gboolean
has_column (fitsfile *file, const char *name)
{
  int status = 0, column = 0;
  fits_get_colnum (file, CASEINSEN, (char *)name, &column, &status);
  return status == 0 && column > 0;
}

void
tf_rice_look (TfFits *fits)
{
  TfRice *r = &fits->rice;
  int status = 0;
  const char *kind = tf_header_get (fits->header, "ZCMPTYPE");
  *r = (TfRice){ .scale = 1 };
  if (!fits->compressed || kind == NULL || !g_str_has_prefix (kind, "RICE"))
    return;
  fits_get_colnum (fits->file, CASEINSEN, (char *)"COMPRESSED_DATA", &r->column, &status);
  r->compressed = status == 0;
  r->pixel_bytes = parameter (fits->header, "BYTEPIX", 4);
  r->block = parameter (fits->header, "BLOCKSIZE", 32);
  gboolean rows = TRUE;
  for (int k = 0; k < fits->n_axes; k++)
    {
      char keyword[12];
      g_snprintf (keyword, sizeof keyword, "ZTILE%d", k + 1);
      r->tile[k] = CLAMP (read_long (fits->file, keyword, k == 0 ? (long)fits->axes[0] : 1), 1,
                          (long)fits->axes[k]);
      rows &= r->tile[k] == (k == 0 ? (long)fits->axes[0] : 1);
    }
  double scale = tf_header_number (fits->header, "BSCALE"),
         zero = tf_header_number (fits->header, "BZERO");
  r->scale = isnan (scale) ? 1 : scale;
  r->zero = isnan (zero) ? 0 : zero;
  r->has_blank = !isnan (tf_header_number (fits->header, "BLANK"));
  r->blank = tf_header_int (fits->header, "BLANK", 0);
  r->by_rows = r->compressed && rows && (r->pixel_bytes == 2 || r->pixel_bytes == 4)
               && (fits->bitpix == 16 || fits->bitpix == 32)
               && fits->bitpix >= (int)r->pixel_bytes * 8 && !has_column (fits->file, "ZSCALE")
               && !has_column (fits->file, "ZBLANK");
  fits_clear_errmsg ();
}

/* The packed bytes of table row @row (1-based) into @bytes. FALSE: the descriptor points out of
 * the heap, or CFITSIO. */
static gboolean
read_bytes (fitsfile *file, int column, LONGLONG row, LONGLONG length, LONGLONG offset,
            GByteArray *bytes, int *status)
{
  LONGLONG left = file->Fptr->filesize - file->Fptr->datastart - file->Fptr->heapstart;
  if (length < 0 || offset < 0 || length > left || offset > left - length)
    return FALSE;
  g_byte_array_set_size (bytes, (guint)length);
  fits_read_col (file, TBYTE, column, row, 1, length, NULL, bytes->data, NULL, status);
  return *status == 0;
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

/* Rows being read, two at a time. */
typedef struct
{
  TfFits *fits;
  LONGLONG row; /* of the table, 1-based, of the first */
  LONGLONG *lengths, *offsets;
  GByteArray *bytes[2];
  gint32 *stored[2];
} Rows;

/* A row that is packed in another way, in another column. */
static gboolean
read_other (const Rows *rows, guint k, float *line, int *status)
{
  const TfFits *fits = rows->fits;
  LONGLONG pixel = (rows->row + k - 1) * fits->axes[0] + 1;
  float none = NAN;
  int any = 0;
  return fits_read_img (fits->file, TFLOAT, pixel, fits->axes[0], &none, line, &any, status) == 0;
}

static gboolean
fetch (const Rows *rows, guint k, guint into, int *status)
{
  const TfFits *fits = rows->fits;
  return rows->lengths[k] <= fits->axes[0] * 8 + 1024
         && read_bytes (fits->file, fits->rice.column, rows->row + k, rows->lengths[k],
                        rows->offsets[k], rows->bytes[into], status);
}

/* Rows @k and, of two, the next. */
static gboolean
unpack (const Rows *rows, guint k, guint n, float *out, int *status)
{
  const TfRice *r = &rows->fits->rice;
  guint width = (guint)rows->fits->axes[0];
  GByteArray *const *b = rows->bytes;
  gboolean in_range = r->blank >= G_MININT32 && r->blank <= G_MAXINT32;
  for (guint i = 0; i < n; i++)
    if (!fetch (rows, k + i, i, status))
      return FALSE;
  if (n == 2)
    {
      const guint8 *const bytes[2] = { b[0]->data, b[1]->data };
      const gsize lengths[2] = { b[0]->len, b[1]->len };
      if (!tf_rice_decode_two (bytes, lengths, r->pixel_bytes, r->block, width, rows->stored))
        return FALSE;
    }
  else if (!tf_rice_decode (b[0]->data, b[0]->len, r->pixel_bytes, r->block, width, rows->stored[0]))
    return FALSE;
  for (guint i = 0; i < n; i++)
    to_floats (rows->stored[i], width, r->scale, r->zero, r->has_blank && in_range,
               (gint32)r->blank, out + (gsize)i * width);
  return TRUE;
}

gboolean
tf_rice_read_rows (TfFits *fits, guint plane, guint first, guint n, float *out, gboolean *damaged,
                   int *status)
{
  gsize width = (gsize)fits->axes[0];
  g_autofree LONGLONG *lengths = g_new0 (LONGLONG, n), *offsets = g_new0 (LONGLONG, n);
  g_autofree gint32 *stored = g_new (gint32, 2 * width);
  g_autoptr (GByteArray) one = g_byte_array_new (), two = g_byte_array_new ();
  Rows rows = { fits,    (LONGLONG)(plane - 1) * fits->axes[1] + first + 1,
                lengths, offsets,
                { one, two }, { stored, stored + width } };
  if (fits_read_descriptsll (fits->file, fits->rice.column, rows.row, n, lengths, offsets, status)
      != 0)
    return FALSE;
  for (guint k = 0, step; k < n; k += step)
    {
      float *line = out + k * width;
      step = k + 1 < n && lengths[k] != 0 && lengths[k + 1] != 0 ? 2 : 1;
      if (lengths[k] == 0)
        {
          if (!read_other (&rows, k, line, status))
            return FALSE;
          continue;
        }
      *damaged = !unpack (&rows, k, step, line, status);
      if (*damaged)
        return FALSE;
    }
  return TRUE;
}

/* Pixels of tile number @index (0-based), those at the ends being smaller. */
static guint
tile_pixels (const TfFits *fits, gint64 index)
{
  gint64 pixels = 1;
  for (int k = 0; k < fits->n_axes; k++)
    {
      gint64 tile = fits->rice.tile[k], along = (fits->axes[k] + tile - 1) / tile,
             at = index % along;
      pixels *= MIN (tile, fits->axes[k] - at * tile);
      index /= along;
    }
  return (guint)CLAMP (pixels, 0, G_MAXINT);
}

gboolean
tf_rice_check (const TfFits *fits)
{
  const TfRice *r = &fits->rice;
  int status = 0;
  long rows = read_long (fits->file, "NAXIS2", 0);
  gint64 most = 1;
  g_autoptr (GByteArray) bytes = g_byte_array_new ();
  if (r->pixel_bytes != 1 && r->pixel_bytes != 2 && r->pixel_bytes != 4)
    return FALSE;
  for (int k = 0; k < fits->n_axes && most < G_MAXINT; k++)
    most *= r->tile[k];
  if (most > G_MAXINT / 4)
    return FALSE;
  g_autofree gint32 *stored = g_try_new (gint32, (gsize)most);
  for (long k = 0; stored != NULL && k < rows; k++)
    {
      LONGLONG length = 0, offset = 0;
      if (fits_read_descriptll (fits->file, r->column, k + 1, &length, &offset, &status) != 0)
        return FALSE;
      if (length == 0)
        continue;
      if (!read_bytes (fits->file, r->column, k + 1, length, offset, bytes, &status)
          || !tf_rice_decode (bytes->data, bytes->len, r->pixel_bytes, r->block,
                              tile_pixels (fits, k), stored))
        return FALSE;
    }
  return stored != NULL;
}
