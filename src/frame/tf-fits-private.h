/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The only place that reads FITS files. What a header claims is held against the file before
 * anybody asks for memory. CFITSIO's error stack is one for the whole process, so messages are
 * built from the status here.
 *
 * A picture whose rows are packed one by one with RICE_1 in a file that is not packed itself, which
 * is how archives give full disks, is read here (tf-fits-rows.c); CFITSIO reads everything else. */

#include <gio/gio.h>

#include "tf-cfitsio-private.h"
#include "tf-frame.h"

enum
{
  TF_FITS_AXES = 9,
  TF_FITS_MAX_SIDE = 1 << 17,
};

/** TfHdu: a header as it stands in the file, seen before CFITSIO is asked. */
typedef struct
{
  TfHeader *header;
  goffset data;       /* where its data begin */
  gboolean printable; /* every byte of it is printable ASCII */
} TfHdu;

/** TfRice: how the pixels of a picture with RICE_1 tiles are packed. */
typedef struct
{
  guint pixel_bytes, block;
  double scale, zero;
  gboolean has_blank;
  gint64 blank;
} TfRice;

/** TfRows: where the packed bytes of each row of all planes are, in the file. NULL: none. */
typedef struct
{
  goffset *at;
  guint32 *length;
  goffset end; /* of the data, filled up */
} TfRows;

typedef struct _TfFits TfFits;
/* Read-only outside tf-fits.c. */
struct _TfFits
{
  fitsfile *file; /* NULL while CFITSIO is not needed */
  int fd;
  goffset size; /* of the file */
  char *path;
  int hdu, n_sound;
  int bitpix, n_axes;
  LONGLONG axes[TF_FITS_AXES];
  gboolean compressed, packed, gzip;
  GArray *hdus; /* of TfHdu: the sound ones, as far as they were looked at */
  TfHeader *header;
  TfRice rice;
  TfRows rows; /* of the current picture, if it is read without CFITSIO */
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

/** tf_fits_open_by_cfitsio: as tf_fits_open, with nothing read here: what tests hold ours against. */
TfFits *tf_fits_open_by_cfitsio (const char *path, int hdu, GError **error);

/** tf_fits_read_bytes: FALSE when the file does not hold all @n of them. */
gboolean tf_fits_read_bytes (const TfFits *fits, goffset at, void *bytes, gsize n);
/** tf_fits_take_header: @header is that of the table a picture is packed in: as if it were the
 * picture's own. */
void tf_fits_take_header (TfFits *fits, TfHeader *take_header);

/** tf_fits_scan: fills @fits->hdus and n_sound, how many HDUs from the first may be shown to
 * CFITSIO. FALSE and READ when a compressed HDU's claims would make CFITSIO stumble; TRUE for all
 * else, also for no FITS. */
gboolean tf_fits_scan (TfFits *fits, GError **error);

/** TfHduKind: what an HDU is by its header as it stands. */
typedef enum
{
  TF_HDU_OTHER, /* CFITSIO must say */
  TF_HDU_NO_PICTURE,
  TF_HDU_ROWS, /* rows packed one by one */
} TfHduKind;

/** tf_rows_take: @hdu, 1-based; of TF_HDU_ROWS it becomes the current picture, of all else nothing
 * is changed. */
TfHduKind tf_rows_take (TfFits *fits, int hdu);
void tf_rows_clear (TfRows *rows);
/** tf_rows_read: as tf_fits_read_rows. FALSE: a row is damaged, or the file has become shorter. */
gboolean tf_rows_read (const TfFits *fits, guint plane, guint first, guint n, float *out);

/** tf_rice_look: what the header says of the packing. */
TfRice tf_rice_look (const TfHeader *header);
/** tf_rice_check: every tile can be decoded from its own bytes; else CFITSIO's decoder would read on
 * past a damaged tile's end (4.2.0). */
gboolean tf_rice_check (const TfFits *fits);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfFits, tf_fits_close)
