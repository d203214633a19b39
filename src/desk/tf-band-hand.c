/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-band-hand.h"

#include <math.h>

static const double steps_a_view = 40, lat_step_deg = 1;

static void
begin (TfBandHand *hand, const TfWings *wings)
{
  double span = wings->to_year - wings->from_year;
  gboolean picked = isfinite (wings->pick_from) && isfinite (wings->pick_to)
                    && wings->pick_to > wings->from_year && wings->pick_from < wings->to_year;
  hand->on = TRUE;
  hand->from = picked ? wings->pick_from : wings->from_year + span / 3;
  hand->to = picked ? wings->pick_to : wings->to_year - span / 3;
  hand->low = wings->pick_low;
  hand->high = wings->pick_high;
}

/* It stays within the view, so that it is always seen. */
static void
step_time (TfBandHand *hand, const TfWings *wings, double sign, gboolean edge)
{
  double step = (wings->to_year - wings->from_year) / steps_a_view * sign;
  if (edge)
    hand->to = fmax (hand->to + step, hand->from + fabs (step));
  else if (hand->from + step < wings->to_year && hand->to + step > wings->from_year)
    {
      hand->from += step;
      hand->to += step;
    }
}

/* All latitudes: the first step takes the north or the south. */
static void
step_latitude (TfBandHand *hand, const TfWings *wings, double sign, gboolean edge)
{
  double most = wings->lat_max_deg;
  if (isnan (hand->low) || isnan (hand->high))
    {
      hand->low = sign > 0 ? 0 : -most;
      hand->high = sign > 0 ? most : 0;
      return;
    }
  double step = lat_step_deg * sign;
  hand->high = fmin (fmax (hand->high + step, edge ? hand->low + lat_step_deg : -INFINITY), most);
  if (!edge)
    hand->low = fmax (fmin (hand->low + step, most - lat_step_deg), -most);
  hand->high = fmax (hand->high, hand->low + lat_step_deg);
}

TfBandStep
tf_band_hand_key (TfBandHand *hand, const TfWings *wings, guint key, gboolean shift)
{
  if (!hand->on)
    {
      if (key != GDK_KEY_b)
        return TF_BAND_NOT_HEARD;
      begin (hand, wings);
      return TF_BAND_MOVED;
    }
  switch (key)
    {
    case GDK_KEY_Left:
    case GDK_KEY_Right:
      step_time (hand, wings, key == GDK_KEY_Right ? 1 : -1, shift);
      return TF_BAND_MOVED;
    case GDK_KEY_Up:
    case GDK_KEY_Down:
      step_latitude (hand, wings, key == GDK_KEY_Up ? 1 : -1, shift);
      return TF_BAND_MOVED;
    case GDK_KEY_Return:
    case GDK_KEY_KP_Enter:
      hand->on = FALSE;
      return TF_BAND_TAKEN;
    case GDK_KEY_Escape:
    case GDK_KEY_b:
      hand->on = FALSE;
      return TF_BAND_LEFT;
    default:
      return TF_BAND_NOT_HEARD;
    }
}
