/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-fits-private.h"

#include <glib/gi18n-lib.h>
#include <math.h>
#include <string.h>

enum
{
  MAX_HDUS = 200,
  MAX_SIDE = 1 << 17,
};
#define UNPACKED_LIMIT G_GINT64_CONSTANT (0x60000000) /* bytes of a gzip file unpacked in memory */

static void
fail (GError **error, const TfFits *fits, int status, const char *what)
{
  char reason[FLEN_STATUS] = "";
  fits_get_errstatus (status, reason);
  g_set_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_READ, _ ("%s, HDU %d: %s (CFITSIO: %s)"),
               fits->path, fits->hdu, what, reason);
}

void
tf_fits_close (TfFits *fits)
{
  if (fits == NULL)
    return;
  int status = 0;
  if (fits->file != NULL)
    fits_close_file (fits->file, &status);
  tf_header_free (fits->header);
  g_free (fits->path);
  g_free (fits);
}

/* The first bytes: plain FITS, packed (gzip, compress, zip), or something else. */
static gboolean
check_start (TfFits *fits, GError **error)
{
  g_autoptr (GFile) file = g_file_new_for_path (fits->path);
  g_autoptr (GError) problem = NULL;
  g_autoptr (GFileInputStream) stream = g_file_read (file, NULL, &problem);
  guchar head[9] = { 0 };
  gsize n = 0;
  if (stream == NULL
      || !g_input_stream_read_all (G_INPUT_STREAM (stream), head, sizeof head, &n, NULL, &problem))
    {
      g_set_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_READ, _ ("%s cannot be read: %s"),
                   fits->path, problem->message);
      return FALSE;
    }
  fits->gzip = head[0] == 0x1f && head[1] == 0x8b;
  fits->packed = fits->gzip || (head[0] == 0x1f && head[1] == 0x9d);
  if (fits->packed || (n == sizeof head && memcmp (head, "SIMPLE  =", 9) == 0))
    {
      guchar tail[4] = { 0 };
      if (!fits->gzip || !g_seekable_seek (G_SEEKABLE (stream), -4, G_SEEK_END, NULL, NULL)
          || !g_input_stream_read_all (G_INPUT_STREAM (stream), tail, 4, &n, NULL, NULL))
        return TRUE;
      gint64 unpacked
          = tail[0] | tail[1] << 8 | tail[2] << 16 | (gint64)tail[3] << 24; /* RFC 1952, ISIZE */
      if (unpacked <= UNPACKED_LIMIT)
        return TRUE;
      g_set_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_READ,
                   _ ("%s unpacks to more than 1.5 GB: unpack it (gunzip) and open the plain file"),
                   fits->path);
      return FALSE;
    }
  g_set_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_READ,
               _ ("%s is not a FITS file: it does not begin with SIMPLE. Give a FITS file, plain "
                  "or packed with gzip"),
               fits->path);
  return FALSE;
}

/* The Z-keywords of a compressed HDU stand for the picture's own; the table's keywords are not
 * the picture's. */
static void
map_compressed (TfHeader *header)
{
  static const char *const table[]
      = { "XTENSION", "BITPIX",  "NAXIS", "NAXIS1", "NAXIS2",   "PCOUNT",
          "GCOUNT",   "TFIELDS", "THEAP", "EXTEND", "CHECKSUM", "DATASUM" };
  static const char *const from[]
      = { "ZBITPIX", "ZNAXIS", "ZNAXIS1", "ZNAXIS2", "ZNAXIS3", "ZBLANK" };
  for (guint k = 0; k < G_N_ELEMENTS (table); k++)
    tf_header_remove (header, table[k]);
  for (guint k = 0; k < G_N_ELEMENTS (from); k++)
    {
      double value = tf_header_number (header, from[k]);
      if (!isnan (value) && !tf_header_has (header, from[k] + 1))
        tf_header_set_number (header, from[k] + 1, value);
    }
}

static gboolean
read_header (TfFits *fits)
{
  int status = 0, n_keys = 0;
  char *text = NULL;
  if (fits_hdr2str (fits->file, TRUE, NULL, 0, &text, &n_keys, &status) != 0)
    {
      fits_clear_errmsg ();
      return FALSE;
    }
  g_clear_pointer (&fits->header, tf_header_free);
  fits->header = tf_header_read (text, -1);
  fits_free_memory (text, &status);
  if (fits->compressed)
    map_compressed (fits->header);
  return TRUE;
}

/* TRUE when the current HDU is a picture of at least two axes with pixels. */
static gboolean
take_picture (TfFits *fits)
{
  int status = 0, type = 0;
  fits_get_hdu_type (fits->file, &type, &status);
  if (status != 0 || type != IMAGE_HDU)
    return FALSE;
  fits->compressed = fits_is_compressed_image (fits->file, &status);
  fits_get_img_paramll (fits->file, TF_FITS_AXES, &fits->bitpix, &fits->n_axes, fits->axes,
                        &status);
  fits_clear_errmsg ();
  if (status != 0 || fits->n_axes < 2 || fits->n_axes > TF_FITS_AXES)
    return FALSE;
  for (int k = 0; k < fits->n_axes; k++)
    if (fits->axes[k] < 1)
      return FALSE;
  if (fits->axes[0] > MAX_SIDE || fits->axes[1] > MAX_SIDE || !read_header (fits))
    return FALSE;
  tf_rice_look (fits);
  return TRUE;
}

static gboolean
move_to (TfFits *fits, int hdu)
{
  int status = 0, type = 0;
  if (hdu > fits->n_sound || fits_movabs_hdu (fits->file, hdu, &type, &status) != 0)
    {
      fits_clear_errmsg ();
      return FALSE;
    }
  fits->hdu = hdu;
  return TRUE;
}

gboolean
tf_fits_next (TfFits *fits)
{
  while (fits->hdu < MAX_HDUS && move_to (fits, fits->hdu + 1))
    if (take_picture (fits))
      return TRUE;
  return FALSE;
}

static TfFits *
open_file (const char *path, GError **error)
{
  g_autoptr (TfFits) fits = g_new0 (TfFits, 1);
  int status = 0;
  fits->path = g_strdup (path);
  fits->hdu = 1;
  if (!check_start (fits, error))
    return NULL;
  if (fits->packed && !fits->gzip)
    fits->n_sound = MAX_HDUS; /* old compress: only CFITSIO unpacks it */
  else if (!tf_fits_scan (path, fits->gzip, &fits->n_sound, error))
    return NULL;
  if (strlen (path) >= FLEN_FILENAME)
    {
      g_set_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_READ,
                   _ ("%s: the name is too long (1024 bytes at most)"), path);
      return NULL;
    }
  if (fits_open_diskfile (&fits->file, path, READONLY, &status) != 0)
    {
      fits->file = NULL;
      fits_clear_errmsg ();
      fail (error, fits, status,
            _ ("the file is cut short or damaged; get it again from its source"));
      return NULL;
    }
  return g_steal_pointer (&fits);
}

TfFits *
tf_fits_open (const char *path, int hdu, GError **error)
{
  g_return_val_if_fail (path != NULL, NULL);
  g_autoptr (TfFits) fits = open_file (path, error);
  if (fits == NULL)
    return NULL;
  gboolean found = hdu > 0 ? move_to (fits, hdu) && take_picture (fits)
                           : take_picture (fits) || tf_fits_next (fits);
  if (found)
    return g_steal_pointer (&fits);
  if (hdu > 0)
    g_set_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_READ,
                 _ ("%s: HDU %d is not there, damaged or not a picture; leave the HDU out to take "
                    "the first picture of the file"),
                 path, hdu);
  else
    g_set_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_READ,
                 _ ("%s holds no picture of two axes in any HDU; give a FITS image"), path);
  return NULL;
}

TfFits *
tf_fits_reopen (const TfFits *fits, GError **error)
{
  return tf_fits_open (fits->path, fits->hdu, error);
}

int
tf_fits_get_hdu (const TfFits *fits)
{
  return fits->hdu;
}

guint
tf_fits_get_width (const TfFits *fits)
{
  return (guint)fits->axes[0];
}

guint
tf_fits_get_height (const TfFits *fits)
{
  return (guint)fits->axes[1];
}

/* Pictures beyond the first two axes, all axes run together. */
static gint64
count_planes (const TfFits *fits)
{
  gint64 planes = 1;
  for (int k = 2; k < fits->n_axes; k++)
    planes = planes > G_MAXINT / fits->axes[k] ? G_MAXINT : planes * fits->axes[k];
  return planes;
}

guint
tf_fits_get_planes (const TfFits *fits)
{
  return (guint)count_planes (fits);
}

const TfHeader *
tf_fits_get_header (const TfFits *fits)
{
  return fits->header;
}

gboolean
tf_fits_may_share (const TfFits *fits)
{
  return !fits->packed && fits_is_reentrant ();
}

gboolean
tf_fits_check_size (const TfFits *fits, GError **error)
{
  int status = 0;
  LONGLONG head = 0, data = 0, end = 0;
  fits_get_hduaddrll (fits->file, &head, &data, &end, &status);
  gint64 file_size = fits->file->Fptr->filesize, held = file_size - data;
  double bytes = (double)fits->axes[0] * (double)fits->axes[1] * (double)count_planes (fits)
                 * ABS (fits->bitpix) / 8;
  gboolean whole
      = fits->compressed ? end - 2880 < file_size && bytes < 1e13 : bytes <= (double)held;
  if (status == 0 && whole && fits->rice.compressed && !fits->rice.by_rows && !tf_rice_check (fits))
    {
      fail (error, fits, DATA_DECOMPRESSION_ERR,
            _ ("a compressed tile is damaged; get the file again from its source"));
      return FALSE;
    }
  if (status == 0 && whole)
    return TRUE;
  g_autofree char *have = g_format_size ((guint64)MAX (held, 0)),
                  *want = g_format_size ((guint64)MIN (bytes, 1e18));
  g_set_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_READ,
               _ ("%s, HDU %d: the header claims %u × %u pixels (%s), the file holds %s of them: "
                  "it is cut short; get it "
                  "again from its source"),
               fits->path, fits->hdu, tf_fits_get_width (fits), tf_fits_get_height (fits), want,
               have);
  return FALSE;
}

gboolean
tf_fits_read_rows (TfFits *fits, guint plane, guint first, guint n, float *out, GError **error)
{
  int status = 0, any = 0;
  float none = __builtin_nanf ("");
  gboolean damaged = FALSE;
  LONGLONG at[TF_FITS_AXES] = { 1, (LONGLONG)first + 1, 1, 1, 1, 1, 1, 1, 1 };
  LONGLONG rest = (LONGLONG)plane - 1;
  for (int k = 2; k < fits->n_axes; k++)
    {
      at[k] = rest % fits->axes[k] + 1;
      rest /= fits->axes[k];
    }
  if (!fits->rice.by_rows)
    fits_read_pixll (fits->file, TFLOAT, at, fits->axes[0] * n, &none, out, &any, &status);
  else if (!tf_rice_read_rows (fits, plane, first, n, out, &damaged, &status) && damaged)
    status = DATA_DECOMPRESSION_ERR;
  if (status == 0)
    return TRUE;
  fits_clear_errmsg ();
  g_autofree char *what = g_strdup_printf (
      _ ("rows %u to %u cannot be read; get the file again from its source"), first + 1, first + n);
  fail (error, fits, status, what);
  return FALSE;
}
