/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Writing frames: what the simulator and the stamps need. Headers carry DATE, CHECKSUM and
 * DATASUM; files are written beside the target and renamed. */

#include <glib.h>

#include "tf-header.h"

G_BEGIN_DECLS

typedef struct
{
  int bitpix;           /* 16, 32 or -32 */
  double bscale, bzero; /* for integers */
  gint64 blank;         /* integer value of NaN pixels */
  gboolean has_blank;
  gboolean compress; /* RICE tile compression, rows as tiles (integers only) */
  gboolean no_date;  /* leave DATE out: equal input gives equal bytes */
} TfFrameWrite;

/** tf_frame_write: @header: cards to write besides the structural ones; @pixels: width*height
 * floats, physical values. */
gboolean tf_frame_write (const char *path, const TfHeader *header, const float *pixels, guint width,
                         guint height, const TfFrameWrite *how, GError **error);

/** tf_fits_write_sums: CHECKSUM and DATASUM of HDU @hdu (1 = primary) of the FITS file @path, without
 * the times in their comments that CFITSIO would add: equal input, equal bytes. Returns: CFITSIO's
 * status, 0 when done. */
int tf_fits_write_sums (const char *path, int hdu);

G_END_DECLS
