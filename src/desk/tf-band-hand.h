/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfBandHand: a stretch of time and a band of latitude chosen on the wings by keys. b begins; the arrows
 * move it, with Shift its later or upper edge; Return takes it, Escape leaves it. */

#include <gtk/gtk.h>

#include "tf-wings.h"

G_BEGIN_DECLS

typedef struct
{
  gboolean on;
  double from, to;  /* years */
  double low, high; /* deg; NaN: all latitudes */
} TfBandHand;

typedef enum
{
  TF_BAND_NOT_HEARD,
  TF_BAND_MOVED,
  TF_BAND_TAKEN,
  TF_BAND_LEFT,
} TfBandStep;

/** tf_band_hand_key: @wings: what is shown: a band begins with the stretch picked there, or the middle
 * third of the view; a step is a fortieth of the view, or a degree. */
TfBandStep tf_band_hand_key (TfBandHand *hand, const TfWings *wings, guint key, gboolean shift);

G_END_DECLS
