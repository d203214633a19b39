/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include <glib.h>

/**
 * tf_rice_decode: one tile of RICE_1, FITS Standard 4.0 (2018), section 10.4.1.
 * @bytes: @n_bytes of them; never read beyond
 * @pixel_bytes: 1, 2 or 4: how wide the packed integers are
 * @block: pixels in a block, > 0
 * @out: @n integers
 * Returns: FALSE when the bytes end before the pixels do.
 */
gboolean tf_rice_decode (const guint8 *bytes, gsize n_bytes, guint pixel_bytes, guint block,
                         guint n, gint32 *out);

/** tf_rice_decode_two: two tiles of the same shape at once, which is faster than one after the
 * other.
 * Returns: FALSE when either ends before its pixels do; what was written then is undefined. */
gboolean tf_rice_decode_two (const guint8 *const bytes[2], const gsize n_bytes[2],
                             guint pixel_bytes, guint block, guint n, gint32 *const out[2]);
