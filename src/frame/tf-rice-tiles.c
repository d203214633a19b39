/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-fits-private.h"

#include <math.h>
#include <string.h>

#include "tf-rice-private.h"

/* RICE_1 tiles of any shape that CFITSIO will unpack: are they sound? */

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

TfRice
tf_rice_look (const TfHeader *header)
{
  double scale = tf_header_number (header, "BSCALE"), zero = tf_header_number (header, "BZERO");
  return (TfRice){ .pixel_bytes = parameter (header, "BYTEPIX", 4),
                   .block = parameter (header, "BLOCKSIZE", 32),
                   .scale = isnan (scale) ? 1 : scale,
                   .zero = isnan (zero) ? 0 : zero,
                   .has_blank = !isnan (tf_header_number (header, "BLANK")),
                   .blank = tf_header_int (header, "BLANK", 0) };
}

static long
read_long (fitsfile *file, const char *keyword, long fallback)
{
  int status = 0;
  long value = fallback;
  cfitsio ()->fits_read_key (file, TLONG, keyword, &value, NULL, &status);
  return status == 0 ? value : fallback;
}

/* Pixels a side of a whole tile; their product. */
static gint64
find_tile (const TfFits *fits, gint64 tile[TF_FITS_AXES])
{
  gint64 most = 1;
  for (int k = 0; k < fits->n_axes; k++)
    {
      char keyword[12];
      g_snprintf (keyword, sizeof keyword, "ZTILE%d", k + 1);
      tile[k] = CLAMP (read_long (fits->file, keyword, k == 0 ? (long)fits->axes[0] : 1), 1,
                       (long)fits->axes[k]);
      if (most < G_MAXINT)
        most *= tile[k];
    }
  return most;
}

/* Pixels of tile number @index (0-based), those at the ends being smaller. */
static guint
tile_pixels (const TfFits *fits, const gint64 tile[TF_FITS_AXES], gint64 index)
{
  gint64 pixels = 1;
  for (int k = 0; k < fits->n_axes; k++)
    {
      gint64 along = (fits->axes[k] + tile[k] - 1) / tile[k], at = index % along;
      pixels *= MIN (tile[k], fits->axes[k] - at * tile[k]);
      index /= along;
    }
  return (guint)CLAMP (pixels, 0, G_MAXINT);
}

/* The packed bytes of table row @row (1-based) into @bytes. FALSE: the descriptor points out of
 * the heap, or CFITSIO. */
static gboolean
read_bytes (fitsfile *file, int column, LONGLONG row, GByteArray *bytes)
{
  LONGLONG left = file->Fptr->filesize - file->Fptr->datastart - file->Fptr->heapstart;
  LONGLONG length = 0, offset = 0;
  int status = 0;
  if (cfitsio ()->fits_read_descriptll (file, column, row, &length, &offset, &status) != 0
      || length < 0 || offset < 0 || length > left || offset > left - length)
    return FALSE;
  g_byte_array_set_size (bytes, (guint)length);
  if (length > 0)
    cfitsio ()->fits_read_col (file, TBYTE, column, row, 1, length, NULL, bytes->data, NULL,
                               &status);
  return status == 0;
}

static gboolean
check_tiles (const TfFits *fits, int column)
{
  const TfRice *r = &fits->rice;
  gint64 tile[TF_FITS_AXES], most = find_tile (fits, tile);
  long rows = read_long (fits->file, "NAXIS2", 0);
  g_autoptr (GByteArray) bytes = g_byte_array_new ();
  if ((r->pixel_bytes != 1 && r->pixel_bytes != 2 && r->pixel_bytes != 4) || most > G_MAXINT / 4)
    return FALSE;
  g_autofree gint32 *stored = g_try_new (gint32, (gsize)most);
  for (long k = 0; stored != NULL && k < rows; k++)
    if (!read_bytes (fits->file, column, k + 1, bytes)
        || (bytes->len > 0
            && !tf_rice_decode (bytes->data, bytes->len, r->pixel_bytes, r->block,
                                tile_pixels (fits, tile, k), stored)))
      return FALSE;
  return stored != NULL;
}

gboolean
tf_rice_check (const TfFits *fits)
{
  const char *kind = tf_header_get (fits->header, "ZCMPTYPE");
  int status = 0, column = 0;
  if (!fits->compressed || kind == NULL || !g_str_has_prefix (kind, "RICE"))
    return TRUE;
  cfitsio ()->fits_get_colnum (fits->file, CASEINSEN, (char *)"COMPRESSED_DATA", &column, &status);
  gboolean good = status != 0 || check_tiles (fits, column);
  cfitsio ()->fits_clear_errmsg ();
  return good;
}
