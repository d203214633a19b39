/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The share that breaks Hale's law against another quantity, and shares that others have published.
 *
 * A row that lacks the quantity is in no bin and counted apart. n, regions and the intervals are as
 * in TfHaleRow; the cluster interval is by region.
 */

#include "tf-hale.h"

G_BEGIN_DECLS

/** TfHaleQuantity: against what. Edges ascend; from <= value < to. */
typedef struct
{
  const char *name, *title; /* "flux_unsigned_mx"; msgid */
  const char *unit;
  guint n_edges;
  double edges[12];
  double (*get) (const TfSampleRow *row); /* NaN: not known */
} TfHaleQuantity;
/** tf_hale_quantities: flux, separation, |lat|; ends with name NULL. */
extern const TfHaleQuantity tf_hale_quantities[];

typedef struct
{
  double from, to; /* the last bin's end may be infinite */
  TfHaleRow row;   /* cycle 0, both hemispheres */
} TfHaleBin;

/** tf_hale_bins: (element-type TfHaleBin) (transfer full): every bin, empty ones too. @lacking: (out)
 * (nullable): rows in no bin. */
GArray *tf_hale_bins (const TfSample *sample, const TfVerdict *verdicts,
                      const TfHaleQuantity *quantity, const TfHaleParams *params, guint *lacking);

/** TfHalePublished: a share that was published, with what was selected: they differ by far more than
 * chance, so none is the true one. */
typedef struct
{
  const char *name, *selection; /* msgid */
  guint breaks, n;              /* 0: only the share was given */
  double low, high;             /* the share as given, or its range */
} TfHalePublished;
/** tf_hale_published: in order of year; ends with name NULL. */
extern const TfHalePublished tf_hale_published[];

G_END_DECLS
