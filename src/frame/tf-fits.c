/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-fits-private.h"

#include <errno.h>
#include <fcntl.h>
#include <glib/gi18n-lib.h>
#include <math.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

enum
{
  MAX_HDUS = 200,
};
#define UNPACKED_LIMIT G_GINT64_CONSTANT (0x60000000) /* bytes of a gzip file unpacked in memory */

static void
fail (GError **error, const TfFits *fits, int status, const char *what)
{
  char reason[FLEN_STATUS] = "";
  if (tf_cfitsio_load (NULL))
    cfitsio ()->fits_get_errstatus (status, reason);
  g_set_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_READ, _ ("%s, HDU %d: %s (CFITSIO: %s)"),
               fits->path, MAX (1, fits->hdu), what, reason);
}

void
tf_fits_close (TfFits *fits)
{
  if (fits == NULL)
    return;
  int status = 0;
  if (fits->file != NULL)
    cfitsio ()->fits_close_file (fits->file, &status);
  if (fits->fd >= 0)
    close (fits->fd);
  g_clear_pointer (&fits->hdus, g_array_unref);
  tf_rows_clear (&fits->rows);
  tf_header_free (fits->header);
  g_free (fits->path);
  g_free (fits);
}

gboolean
tf_fits_read_bytes (const TfFits *fits, goffset at, void *bytes, gsize n)
{
  for (gsize done = 0; done < n;)
    {
      ssize_t more = pread (fits->fd, (char *)bytes + done, n - done, at + (goffset)done);
      if (more == 0 || (more < 0 && errno != EINTR))
        return FALSE;
      done += more > 0 ? (gsize)more : 0;
    }
  return TRUE;
}

/* Opens the file as bytes; @n of its first go to @head. */
static gboolean
open_bytes (TfFits *fits, guchar *head, gsize *n)
{
  struct stat about;
  fits->fd = open (fits->path, O_RDONLY | O_CLOEXEC);
  if (fits->fd < 0 || fstat (fits->fd, &about) != 0)
    return FALSE;
  ssize_t got = pread (fits->fd, head, *n, 0);
  fits->size = about.st_size;
  *n = (gsize)MAX (got, 0);
  return got >= 0;
}

/* The first bytes: plain FITS, packed (gzip, compress, zip), or something else. */
static gboolean
check_start (TfFits *fits, GError **error)
{
  guchar head[9] = { 0 }, tail[4] = { 0 };
  gsize n = sizeof head;
  if (!open_bytes (fits, head, &n))
    {
      g_set_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_READ, _ ("%s cannot be read: %s"),
                   fits->path, g_strerror (errno));
      return FALSE;
    }
  fits->gzip = head[0] == 0x1f && head[1] == 0x8b;
  fits->packed = fits->gzip || (head[0] == 0x1f && head[1] == 0x9d);
  if (fits->packed || (n == sizeof head && memcmp (head, "SIMPLE  =", 9) == 0))
    {
      if (!fits->gzip || !tf_fits_read_bytes (fits, fits->size - 4, tail, 4))
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

void
tf_fits_take_header (TfFits *fits, TfHeader *take_header)
{
  g_clear_pointer (&fits->header, tf_header_free);
  fits->header = take_header;
  if (fits->compressed)
    map_compressed (fits->header);
}

static gboolean
read_header (TfFits *fits)
{
  int status = 0, n_keys = 0;
  char *text = NULL;
  if (cfitsio ()->fits_hdr2str (fits->file, TRUE, NULL, 0, &text, &n_keys, &status) != 0)
    {
      cfitsio ()->fits_clear_errmsg ();
      return FALSE;
    }
  tf_fits_take_header (fits, tf_header_read (text, -1));
  cfitsio ()->fits_free_memory (text, &status);
  return TRUE;
}

/* TRUE when the current HDU is a picture of at least two axes with pixels. */
static gboolean
take_picture (TfFits *fits)
{
  int status = 0, type = 0;
  cfitsio ()->fits_get_hdu_type (fits->file, &type, &status);
  if (status != 0 || type != IMAGE_HDU)
    return FALSE;
  fits->compressed = cfitsio ()->fits_is_compressed_image (fits->file, &status);
  cfitsio ()->fits_get_img_paramll (fits->file, TF_FITS_AXES, &fits->bitpix, &fits->n_axes,
                                    fits->axes, &status);
  cfitsio ()->fits_clear_errmsg ();
  if (status != 0 || fits->n_axes < 2 || fits->n_axes > TF_FITS_AXES)
    return FALSE;
  for (int k = 0; k < fits->n_axes; k++)
    if (fits->axes[k] < 1)
      return FALSE;
  if (fits->axes[0] > TF_FITS_MAX_SIDE || fits->axes[1] > TF_FITS_MAX_SIDE || !read_header (fits))
    return FALSE;
  fits->rice = tf_rice_look (fits->header);
  return TRUE;
}

/* Once; nothing that is read here is changed. */
static gboolean
open_cfitsio (TfFits *fits, GError **error)
{
  int status = 0;
  const char *why;
  if (fits->file != NULL)
    return TRUE;
  if (!tf_cfitsio_load (&why))
    {
      g_set_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_READ,
                   _ ("%s cannot be read: the library CFITSIO is not there (%s)"), fits->path, why);
      return FALSE;
    }
  if (cfitsio ()->fits_open_diskfile (&fits->file, fits->path, READONLY, &status) == 0)
    return TRUE;
  fits->file = NULL;
  cfitsio ()->fits_clear_errmsg ();
  fail (error, fits, status,
        _ ("the file is cut short or damaged; get it again from its source"));
  return FALSE;
}

static gboolean
move_to (TfFits *fits, int hdu)
{
  int status = 0, type = 0;
  if (hdu > fits->n_sound || cfitsio ()->fits_movabs_hdu (fits->file, hdu, &type, &status) != 0)
    {
      cfitsio ()->fits_clear_errmsg ();
      return FALSE;
    }
  fits->hdu = hdu;
  tf_rows_clear (&fits->rows);
  return TRUE;
}

/* The first picture behind the current HDU. FALSE and no error: there is none. */
static gboolean
find_next (TfFits *fits, GError **error)
{
  while (fits->hdu < MAX_HDUS)
    switch (tf_rows_take (fits, fits->hdu + 1))
      {
      case TF_HDU_ROWS:
        return TRUE;
      case TF_HDU_NO_PICTURE:
        fits->hdu++;
        break;
      case TF_HDU_OTHER:
        if (!open_cfitsio (fits, error) || !move_to (fits, fits->hdu + 1))
          return FALSE;
        if (take_picture (fits))
          return TRUE;
      }
  return FALSE;
}

gboolean
tf_fits_next (TfFits *fits)
{
  return find_next (fits, NULL);
}

static TfFits *
open_file (const char *path, GError **error)
{
  g_autoptr (TfFits) fits = g_new0 (TfFits, 1);
  fits->path = g_strdup (path);
  fits->fd = -1;
  if (!check_start (fits, error))
    return NULL;
  fits->n_sound = MAX_HDUS; /* old compress: only CFITSIO unpacks it */
  if ((!fits->packed || fits->gzip) && !tf_fits_scan (fits, error))
    return NULL;
  if (strlen (path) < FLEN_FILENAME)
    return g_steal_pointer (&fits);
  g_set_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_READ,
               _ ("%s: the name is too long (1024 bytes at most)"), path);
  return NULL;
}

static gboolean
find_picture (TfFits *fits, int hdu, GError **error)
{
  GError *problem = NULL;
  if (hdu > 0 && tf_rows_take (fits, hdu) == TF_HDU_ROWS)
    return TRUE;
  if (hdu > 0 ? open_cfitsio (fits, &problem) && move_to (fits, hdu) && take_picture (fits)
              : find_next (fits, &problem))
    return TRUE;
  if (problem != NULL)
    g_propagate_error (error, problem);
  else if (hdu > 0)
    g_set_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_READ,
                 _ ("%s: HDU %d is not there, damaged or not a picture; leave the HDU out to take "
                    "the first picture of the file"),
                 fits->path, hdu);
  else
    g_set_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_READ,
                 _ ("%s holds no picture of two axes in any HDU; give a FITS image"), fits->path);
  return FALSE;
}

TfFits *
tf_fits_open (const char *path, int hdu, GError **error)
{
  g_return_val_if_fail (path != NULL, NULL);
  g_autoptr (TfFits) fits = open_file (path, error);
  if (fits == NULL || !find_picture (fits, hdu, error))
    return NULL;
  return g_steal_pointer (&fits);
}

TfFits *
tf_fits_open_by_cfitsio (const char *path, int hdu, GError **error)
{
  g_return_val_if_fail (path != NULL, NULL);
  g_autoptr (TfFits) fits = open_file (path, error);
  if (fits == NULL)
    return NULL;
  g_clear_pointer (&fits->hdus, g_array_unref); /* nothing is seen before CFITSIO */
  if (!find_picture (fits, hdu, error))
    return NULL;
  return g_steal_pointer (&fits);
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
  return fits->rows.at != NULL || (!fits->packed && cfitsio ()->fits_is_reentrant ());
}

/* Where the picture's data begin and, filled up, end. */
static gboolean
find_extent (const TfFits *fits, LONGLONG *data, LONGLONG *end)
{
  int status = 0;
  LONGLONG head = 0;
  if (fits->rows.at == NULL)
    return cfitsio ()->fits_get_hduaddrll (fits->file, &head, data, end, &status) == 0;
  *data = g_array_index (fits->hdus, TfHdu, fits->hdu - 1).data;
  *end = fits->rows.end;
  return TRUE;
}

gboolean
tf_fits_check_size (const TfFits *fits, GError **error)
{
  LONGLONG data = 0, end = 0;
  gboolean known = find_extent (fits, &data, &end);
  gint64 file_size = fits->file != NULL ? fits->file->Fptr->filesize : fits->size,
         held = file_size - data;
  double bytes = (double)fits->axes[0] * (double)fits->axes[1] * (double)count_planes (fits)
                 * ABS (fits->bitpix) / 8;
  gboolean whole = known
                   && (fits->compressed ? end - 2880 < file_size && bytes < 1e13
                                        : bytes <= (double)held);
  if (whole && fits->rows.at == NULL && !tf_rice_check (fits))
    {
      fail (error, fits, DATA_DECOMPRESSION_ERR,
            _ ("a compressed tile is damaged; get the file again from its source"));
      return FALSE;
    }
  if (whole)
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
  LONGLONG at[TF_FITS_AXES] = { 1, (LONGLONG)first + 1, 1, 1, 1, 1, 1, 1, 1 };
  LONGLONG rest = (LONGLONG)plane - 1;
  for (int k = 2; k < fits->n_axes; k++)
    {
      at[k] = rest % fits->axes[k] + 1;
      rest /= fits->axes[k];
    }
  if (fits->rows.at == NULL)
    cfitsio ()->fits_read_pixll (fits->file, TFLOAT, at, fits->axes[0] * n, &none, out, &any,
                                 &status);
  else if (!tf_rows_read (fits, plane, first, n, out))
    status = DATA_DECOMPRESSION_ERR;
  if (status == 0)
    return TRUE;
  if (fits->file != NULL)
    cfitsio ()->fits_clear_errmsg ();
  g_autofree char *what = g_strdup_printf (
      _ ("rows %u to %u cannot be read; get the file again from its source"), first + 1, first + n);
  fail (error, fits, status, what);
  return FALSE;
}
