/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Pixel memory. Fresh 4 KB pages make every pass over a large frame three to five times slower, so
 * large buffers are 2 MiB-aligned, ask for huge pages, and are handed round again by a pool.
 *
 * A pool may be used from any thread. A buffer outlives its pool safely.
 */

#include <glib.h>

G_BEGIN_DECLS

typedef struct _TfPool TfPool;
typedef struct _TfPixels TfPixels;

TfPool *tf_pool_new (void);
TfPool *tf_pool_ref (TfPool *pool);
/** tf_pool_unref: idle buffers are given back at once, busy ones when their last owner lets go. */
void tf_pool_unref (TfPool *pool);

/**
 * tf_pixels_new:
 * @pool: (nullable): where to take from and give back to; NULL: plain memory
 * @n: number of floats, > 0; contents are undefined
 * Returns: (transfer full) (nullable): NULL when there is no memory.
 */
TfPixels *tf_pixels_new (TfPool *pool, gsize n);
TfPixels *tf_pixels_ref (TfPixels *pixels);
void tf_pixels_unref (TfPixels *pixels);
float *tf_pixels_get (const TfPixels *pixels);
gsize tf_pixels_get_n (const TfPixels *pixels);

/** tf_heap_keep: once, as a program begins: smaller room that is given back stays with the process and is handed out again, as a fresh
 * page costs more than most of what is done with it; and it is asked for in huge pages. Frames are not among it. */
void tf_heap_keep (void);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfPool, tf_pool_unref)
G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfPixels, tf_pixels_unref)

G_END_DECLS
