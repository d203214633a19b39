/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include "tf-group.h"
#include "tf-hale.h"

G_BEGIN_DECLS

/** TfHalePart: the rows that one row of a table is about. */
typedef struct
{
  const TfSample *sample;
  const TfVerdict *verdicts;
  const double *chances; /* tf_hale_chances() of them */
  TfGroup group;
  const guint8 *bins; /* NULL: whatever bin a row is in; else those in @bin */
  guint8 bin;
} TfHalePart;

/** tf_hale_chances: (transfer full): tf_hale_expected_false() of each row with a verdict. */
double *tf_hale_chances (const TfSample *sample, const TfVerdict *verdicts);
TfHaleRow tf_hale_row_of (const TfHalePart *part, const TfHaleParams *params);

G_END_DECLS
