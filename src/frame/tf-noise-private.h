/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Noise of a frame from its own pixels: 1.4826 MAD of the weak pixels by rings of mu (by
 * latitude on maps). */

#include "tf-frame.h"

/* Pixels within this many sigma are weak. */
#define TF_NOISE_CLIP 2.5

enum
{
  TF_NOISE_RINGS = 10
};

typedef struct
{
  TfNoiseRing rings[TF_NOISE_RINGS];
  guint n;
  double correlation;
} TfNoise;

/** tf_noise_measure: n is 0 when too few pixels have a value. Deterministic; a picture without
 * noise gives 0. */
void tf_noise_measure (const float *pixels, const TfGeometry *geometry, const TfWork *work,
                       TfNoise *noise);
/** tf_noise_at: linear between rings, held at the ends; NaN without rings. */
double tf_noise_at (const TfNoise *noise, double mu);
/** tf_noise_correlation: tf_frame_noise_correlation, from pixels and rings. */
double tf_noise_correlation (const float *pixels, const TfGeometry *geometry, const TfWork *work,
                             const TfNoise *noise);
