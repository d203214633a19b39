/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The yardstick: CFITSIO's own reading of a picture into floats, NaN for blanks, into memory touched before; one handle a
 * thread, opened before, and an equal share of the rows each. */

#include <glib.h>

typedef struct _Bare Bare;

/** bench_bare_new: (nullable): NULL when CFITSIO finds no picture in the first two HDUs. */
Bare *bench_bare_new (const char *path, guint threads);
void bench_bare_free (Bare *bare);
/** bench_bare_read: Returns: pixels read, 0 when it failed. */
guint bench_bare_read (Bare *bare);
