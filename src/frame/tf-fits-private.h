/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The only place that reads FITS files. What a header claims is held against the file before
 * anybody asks for memory. CFITSIO's error stack is one for the whole process, so messages are
 * built from the status here. */

#include <fitsio.h>
#include <gio/gio.h>

#include "tf-frame.h"

enum
{
  TF_FITS_AXES = 9
};

/** TfRice: what is needed to read RICE_1 tiles without CFITSIO's decoder, which reads on past a
 * damaged tile's end (4.2.0). */
typedef struct
{
  gboolean compressed; /* there are RICE_1 tiles at all */
  gboolean by_rows;    /* a tile is a row of plain integers: unpacked here, else only checked */
  int column;          /* COMPRESSED_DATA */
  guint pixel_bytes, block;
  long tile[TF_FITS_AXES];
  double scale, zero;
  gboolean has_blank;
  gint64 blank;
} TfRice;

typedef struct _TfFits TfFits;
/* Read-only outside tf-fits.c. */
struct _TfFits
{
  fitsfile *file;
  char *path;
  int hdu, n_sound;
  int bitpix, n_axes;
  LONGLONG axes[TF_FITS_AXES];
  gboolean compressed, packed, gzip;
  TfHeader *header;
  TfRice rice;
};

/** tf_fits_open: @hdu: 1-based, or 0: the first with a picture. READ errors name file, HDU and
 * what to do. */
TfFits *tf_fits_open (const char *path, int hdu, GError **error);
/** tf_fits_next: moves to the next HDU with a picture; FALSE when there is none. */
gboolean tf_fits_next (TfFits *fits);
void tf_fits_close (TfFits *fits);

int tf_fits_get_hdu (const TfFits *fits);
guint tf_fits_get_width (const TfFits *fits);
guint tf_fits_get_height (const TfFits *fits);
guint tf_fits_get_planes (const TfFits *fits);
const TfHeader *tf_fits_get_header (const TfFits *fits);
/** tf_fits_check_size: the picture's claimed size fits in the file. */
gboolean tf_fits_check_size (const TfFits *fits, GError **error);
/** tf_fits_may_share: the file may be opened once more by every thread (not when it is unpacked
 * in memory). */
gboolean tf_fits_may_share (const TfFits *fits);
/** tf_fits_reopen: another handle on the same HDU. */
TfFits *tf_fits_reopen (const TfFits *fits, GError **error);
/** tf_fits_read_rows: @n rows from row @first (0-based) of @plane (1-based) as physical values;
 * BLANK is NaN. */
gboolean
tf_fits_read_rows (TfFits *fits, guint plane, guint first, guint n, float *out, GError **error);

/** tf_fits_scan: FALSE and READ when a compressed HDU's claims would make CFITSIO stumble; TRUE
 * for all else, also for no FITS.
 * @n_sound: (out): how many HDUs from the first may be shown to CFITSIO. */
gboolean tf_fits_scan (const char *path, gboolean gzip, int *n_sound, GError **error);

/** tf_rice_look: fills @fits->rice from the compressed HDU. */
void tf_rice_look (TfFits *fits);
/** tf_rice_read_rows: as tf_fits_read_rows, where rice.by_rows. @damaged: (out): the row that is
 * damaged, 0-based. CFITSIO's status otherwise. */
gboolean tf_rice_read_rows (TfFits *fits, guint plane, guint first, guint n, float *out,
                            gboolean *damaged, int *status);
/** tf_rice_check: every tile can be decoded from its own bytes. */
gboolean tf_rice_check (const TfFits *fits);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfFits, tf_fits_close)
