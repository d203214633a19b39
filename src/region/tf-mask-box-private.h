/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The box of a frame that holds all of an outline that can be seen on it. */

#include <glib.h>

#include "tf-fill-private.h"
#include "tf-geometry.h"

G_BEGIN_DECLS

typedef struct
{
  guint x0, y0, width, height; /* 0-based; width 0: nothing to be seen */
  gboolean whole;              /* every point of the outline is on the frame and at mu >= mu_min */
} TfMaskBox;

TfMaskBox tf_mask_box (const TfGeometry *geometry, const TfOutline *outline, const TfFill *fill,
                       double mu_min);

G_END_DECLS
