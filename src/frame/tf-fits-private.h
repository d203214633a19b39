/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The only place that reads FITS files. What a header claims is held against the file before anybody asks for
 * memory. CFITSIO's error stack is one for the whole process, so messages are built from the status here. */

#include <gio/gio.h>

#include "tf-frame.h"

typedef struct _TfFits TfFits;

/** tf_fits_open: @hdu: 1-based, or 0: the first with a picture. READ errors name file, HDU and what to do. */
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
/** tf_fits_may_share: the file may be opened once more by every thread (not when it is unpacked in memory). */
gboolean tf_fits_may_share (const TfFits *fits);
/** tf_fits_reopen: another handle on the same HDU. */
TfFits *tf_fits_reopen (const TfFits *fits, GError **error);
/** tf_fits_read_rows: @n rows from row @first (0-based) of @plane (1-based) as physical values; BLANK is NaN. */
gboolean tf_fits_read_rows (TfFits *fits, guint plane, guint first, guint n, float *out, GError **error);

/** tf_fits_scan: FALSE and READ when an HDU's claims would make CFITSIO stumble; TRUE for all else, also for no FITS. */
gboolean tf_fits_scan (const char *path, gboolean gzip, GError **error);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfFits, tf_fits_close)
