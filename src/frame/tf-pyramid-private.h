/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Box means of 2, 4, 8 ... pixels a side. A box's mean is that of its finite pixels, NaN when
 * it has none; boxes at the right and top edges hold what there is. Pixel (X, Y) of level L,
 * counted from 0, has its centre at FITS pixel (X + 0.5) 2^L + 0.5. */

#include "tf-bands.h"

enum
{
  TF_MAX_LEVELS = 16
};

typedef struct
{
  TfPixels *pixels;
  guint width, height;
} TfLevel;

/** TfPyramid: made band by band, while a band's pixels are still in the processor's cache. Level 1, as large as all others
 * three times over, is only passed through; who wants it fills it. */
typedef struct
{
  TfLevel levels[TF_MAX_LEVELS]; /* [0] is level 1 */
  guint n;                       /* until a side is 64 or less; fewer when memory is short */
  guint width, height;           /* of level 0 */
  guint n_workers;
  float *room; /* a worker's weights, while the pyramid is made */
  gsize room_size;
  float *weight; /* of the last level that bands make */
} TfPyramid;

/** tf_pyramid_open: memory for all of it, and room for the workers of @work. */
void tf_pyramid_open (TfPyramid *pyramid, guint width, guint height, const TfWork *work);
/** tf_pyramid_add_band: a TfBandFunc's rows; @pixels: of the whole level 0. Threads: a @worker
 * each. */
void tf_pyramid_add_band (TfPyramid *pyramid, const float *pixels, guint first, guint n,
                          guint worker);
/** tf_pyramid_close: what lies above the bands, once all were added; the room is given back. */
void tf_pyramid_close (TfPyramid *pyramid);
/** tf_pyramid_fill_first: level 1, from the same pixels. */
void tf_pyramid_fill_first (const TfPyramid *pyramid, const float *pixels);
/** tf_pyramid_make: open, all bands, close. */
void tf_pyramid_make (TfPyramid *pyramid, const float *pixels, guint width, guint height,
                      const TfWork *work);
void tf_pyramid_clear (TfPyramid *pyramid);

G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (TfPyramid, tf_pyramid_clear)
