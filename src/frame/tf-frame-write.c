/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-frame-write.h"

#include <errno.h>
#include <glib/gi18n-lib.h>
#include <glib/gstdio.h>
#include <math.h>
#include <string.h>

#include "tf-cfitsio-private.h"
#include "tf-frame.h"
#include "tf-header-private.h"

/* Written by this file or by CFITSIO, never copied from the caller's header. */
static const char *const structural[] = {
  "SIMPLE", "XTENSION", "BITPIX",  "NAXIS",   "NAXIS1", "NAXIS2",   "NAXIS3",
  "EXTEND", "PCOUNT",   "GCOUNT",  "TFIELDS", "BSCALE", "BZERO",    "BLANK",
  "THEAP",  "CHECKSUM", "DATASUM", "DATE",    "END",    "LONGSTRN", NULL,
};

static gboolean
is_structural (const char *keyword)
{
  return g_strv_contains (structural, keyword)
         || (keyword[0] == 'Z' && g_strv_contains (structural, keyword + 1))
         || g_str_has_prefix (keyword, "ZTILE") || g_str_has_prefix (keyword, "ZVAL")
         || g_str_has_prefix (keyword, "ZNAME") || g_str_has_prefix (keyword, "ZCMPTYP")
         || g_str_has_prefix (keyword, "TTYPE") || g_str_has_prefix (keyword, "TFORM");
}

static void
write_header (fitsfile *file, const TfHeader *header, int *status)
{
  char card[81];
  gboolean told_long = FALSE;
  for (guint k = 0; header != NULL && k < tf_header_get_n (header); k++)
    {
      const char *keyword = tf_header_get_keyword (header, k),
                 *text = tf_header_get (header, keyword);
      if (is_structural (keyword))
        continue;
      if (tf_header_is_quoted (header, k) && strlen (text) > 60)
        {
          if (!told_long)
            cfitsio ()->fits_write_key_longwarn (file, status);
          told_long = TRUE;
          cfitsio ()->fits_write_key_longstr (file, keyword, text, NULL, status);
          continue;
        }
      tf_header_format_card (header, k, card);
      cfitsio ()->fits_write_record (file, card, status);
    }
}

static void
write_scaling (fitsfile *file, const TfFrameWrite *how, int *status)
{
  double scale = how->bscale, zero = how->bzero;
  LONGLONG blank = how->blank;
  if (how->bitpix < 0)
    return;
  cfitsio ()->fits_write_key (file, TDOUBLE, "BSCALE", &scale,
                              "physical = stored * BSCALE + BZERO", status);
  cfitsio ()->fits_write_key (file, TDOUBLE, "BZERO", &zero, NULL, status);
  if (how->has_blank)
    cfitsio ()->fits_write_key (file, TLONGLONG, "BLANK", &blank,
                                "stored value of pixels without a value", status);
  cfitsio ()->fits_set_bscale (file, 1.0, 0.0, status);
}

static int
to_stored (float value, const TfFrameWrite *how)
{
  if (isnan (value))
    return how->has_blank ? (int)how->blank : 0;
  double top = how->bitpix == 16 ? 32767.0 : 2147483647.0;
  return (int)CLAMP (rint (((double)value - how->bzero) / how->bscale), -top - 1, top);
}

/* CFITSIO compresses a tile only from the type it is stored in. */
static void
write_integers (fitsfile *file, const float *line, LONGLONG first, guint width,
                const TfFrameWrite *how, int *status)
{
  g_autofree int *whole = g_new (int, width);
  g_autofree short *half = how->bitpix == 16 ? g_new (short, width) : NULL;
  for (guint x = 0; x < width; x++)
    {
      whole[x] = to_stored (line[x], how);
      if (half != NULL)
        half[x] = (short)whole[x];
    }
  if (half != NULL)
    cfitsio ()->fits_write_img (file, TSHORT, first, width, half, status);
  else
    cfitsio ()->fits_write_img (file, TINT, first, width, whole, status);
}

static void
write_pixels (fitsfile *file, const float *pixels, guint width, guint height,
              const TfFrameWrite *how, int *status)
{
  for (guint row = 0; row < height && *status == 0; row++)
    {
      const float *line = pixels + (gsize)row * width;
      LONGLONG first = (LONGLONG)row * width + 1;
      if (how->bitpix > 0)
        write_integers (file, line, first, width, how, status);
      else
        cfitsio ()->fits_write_img (file, TFLOAT, first, width, (float *)line, status);
    }
}

int
tf_fits_write_sums (const char *path, int hdu)
{
  g_return_val_if_fail (path != NULL && hdu > 0, FILE_NOT_OPENED);
  fitsfile *file = NULL;
  unsigned long data = 0, whole = 0;
  char text[24];
  int status = 0, closing = 0;
  if (!tf_cfitsio_load (NULL))
    return FILE_NOT_OPENED;
  if (cfitsio ()->fits_open_diskfile (&file, path, READWRITE, &status) != 0)
    return status;
  cfitsio ()->fits_movabs_hdu (file, hdu, NULL, &status);
  cfitsio ()->fits_update_key_str (file, "CHECKSUM", "0000000000000000", "HDU checksum", &status);
  cfitsio ()->fits_update_key_str (file, "DATASUM", "0", "data unit checksum", &status);
  cfitsio ()->fits_flush_file (file, &status);
  cfitsio ()->fits_get_chksum (file, &data, &whole, &status);
  g_snprintf (text, sizeof text, "%lu", data);
  cfitsio ()->fits_modify_key_str (file, "DATASUM", text, "&", &status);
  cfitsio ()->fits_flush_file (file, &status);
  cfitsio ()->fits_get_chksum (file, &data, &whole, &status);
  cfitsio ()->fits_encode_chksum (whole, TRUE, text);
  cfitsio ()->fits_modify_key_str (file, "CHECKSUM", text, "&", &status);
  cfitsio ()->fits_close_file (file, &closing);
  return status != 0 ? status : closing;
}

static int
write_file (const char *path, const TfHeader *header, const float *pixels, guint width,
            guint height, const TfFrameWrite *how)
{
  fitsfile *file = NULL;
  int status = 0, closing = 0;
  long axes[2] = { (long)width, (long)height };
  long tile[2] = { (long)width, 1 };
  if (!tf_cfitsio_load (NULL))
    return FILE_NOT_CREATED;
  cfitsio ()->fits_create_diskfile (&file, path, &status);
  if (status != 0)
    return status;
  if (how->compress)
    {
      cfitsio ()->fits_set_compression_type (file, RICE_1, &status);
      cfitsio ()->fits_set_tile_dim (file, 2, tile, &status);
    }
  cfitsio ()->fits_create_img (file, how->bitpix, 2, axes, &status);
  write_scaling (file, how, &status);
  write_header (file, header, &status);
  if (!how->no_date)
    cfitsio ()->fits_write_date (file, &status);
  write_pixels (file, pixels, width, height, how, &status);
  cfitsio ()->fits_close_file (file, &closing);
  if (status == 0)
    status = closing != 0 ? closing : tf_fits_write_sums (path, how->compress ? 2 : 1);
  return status;
}

static gboolean
check_how (const TfFrameWrite *how, GError **error)
{
  gboolean integer = how->bitpix == 16 || how->bitpix == 32;
  if ((integer && fabs (how->bscale) > 0 && isfinite (how->bzero))
      || (how->bitpix == -32 && !how->compress))
    return TRUE;
  g_set_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_WRITE,
               _ ("a frame is written as 16 or 32 bit integers with a scale, or as 32 bit floats "
                  "without compression; "
                  "asked was BITPIX %d"),
               how->bitpix);
  return FALSE;
}

gboolean
tf_frame_write (const char *path, const TfHeader *header, const float *pixels, guint width,
                guint height, const TfFrameWrite *how, GError **error)
{
  g_return_val_if_fail (path != NULL && pixels != NULL && how != NULL && width > 0 && height > 0,
                        FALSE);
  if (!check_how (how, error))
    return FALSE;
  g_autofree char *mark = g_uuid_string_random (),
                  *part = g_strdup_printf ("%s.%.8s.part", path, mark);
  int status = write_file (part, header, pixels, width, height, how);
  if (status == 0 && g_rename (part, path) == 0)
    return TRUE;
  const char *there = g_strerror (errno), *why;
  char reason[FLEN_STATUS] = "";
  if (status == 0 || !tf_cfitsio_load (&why))
    g_strlcpy (reason, status == 0 ? there : why, sizeof reason);
  else
    {
      cfitsio ()->fits_get_errstatus (status, reason);
      cfitsio ()->fits_clear_errmsg ();
    }
  g_unlink (part);
  g_set_error (
      error, TF_FRAME_ERROR, TF_FRAME_ERROR_WRITE,
      _ ("%s cannot be written: %s. See that the folder is there, may be written to, and has room"),
      path, reason);
  return FALSE;
}
