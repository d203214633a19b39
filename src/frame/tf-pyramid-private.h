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

/** tf_pyramid_make: levels 1, 2 ... until a side is 64 or less, into @levels (at most
 * TF_MAX_LEVELS).
 * Returns: how many; fewer when memory is short. */
guint tf_pyramid_make (const float *pixels, guint width, guint height, const TfWork *work,
                       TfLevel *levels);
