/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Sheets for a desk as files: the shift sheet and the sheet of one region, a page each. */

#include "tf-figure.h"
#include "tf-shift.h"
#include "tf-study.h"

G_BEGIN_DECLS

/** tf_shift_write: by the ending of @path: .pdf, .svg, .png, in the current language, or .json, in English. @who: (nullable): the desk
 * that hands over. TF_EXCHANGE_ERROR or TF_CHART_ERROR. */
gboolean tf_shift_write (const char *path, const TfShift *shift, const char *who, GError **error);

/** TfRegionPage: what the sheet of a region is made from; all borrowed. */
typedef struct
{
  TfFrame *frame;
  const TfRow *row;           /* a mark or hint of that frame */
  const TfShiftRow *shift;    /* nullable: change, class, notes, others */
  TfTime since;               /* of the last hand-over */
  const TfStudy *study;
  TfMeasureParams measure;    /* for the inversion lines */
  double range_gauss;         /* of the picture; 0: 500 */
  const char *who;            /* nullable */
} TfRegionPage;
/** tf_region_page_write: .pdf, .svg or .png. Works out the inversion lines: a tenth of a second. */
gboolean tf_region_page_write (const char *path, const TfRegionPage *page, GError **error);

G_END_DECLS
