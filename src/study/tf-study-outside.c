/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>

#include "tf-ledger-outside.h"
#include "tf-study-private.h"

/* Rows of outside tables as the rows laws are tested on: what a source lacks is absent, and no
 * reason by itself to leave a row out. */

void
tf_study_outside_row (const TfRow *row, TfSampleRow *out)
{
  const TfOutsideRow *o = row->outside;
  out->origin = TF_ORIGIN_OUTSIDE;
  out->region = o->group;
  out->passage = o->passage;
  out->leading_lat_deg = o->leading_lat_deg;
  out->following_lat_deg = o->following_lat_deg;
  out->leading_sure = o->leading_sure;
  out->size = o->size;
  out->witnesses_differ = -1;
  double product = o->leading_lat_deg * o->following_lat_deg;
  out->straddles = isnan (product) ? -1 : product < 0;
}
