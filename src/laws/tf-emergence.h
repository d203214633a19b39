/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfEmergence: tilt, separation and flux against the time since a region's flux reached a tenth of
 * its greatest, over all regions born on the disk.
 *
 * It reads every mark of a passage, not the pick. A region is born on the disk when its source says
 * so; where the source does not say, when it is first seen below that share of its greatest flux. In
 * each bin of age a region counts once, with the mean of its marks there (the axial mean of its
 * tilts), so n is a number of regions whatever the cadence. East and west halves of the disk stand
 * apart: what differs between them at one age is the limb's doing, not the Sun's.
 */

#include <glib.h>

#include "tf-option.h"
#include "tf-sample.h"

G_BEGIN_DECLS

typedef struct
{
  double rise_share;  /* 0.10 of the greatest flux: time zero */
  double bin_days;    /* 0.5 */
  double before_days; /* 1: how far back of time zero */
  double after_days;  /* 10 */
  double mu_min;      /* 0.5: marks nearer to the limb are left out */
} TfEmergenceParams;
extern const TfOption tf_emergence_options[];

/** TfSpread: median and quartiles; NaN for n = 0. */
typedef struct
{
  guint n; /* regions that have the quantity */
  double low, median, high;
} TfSpread;

typedef enum
{
  TF_EMERGENCE_WHOLE, /* both halves of the disk */
  TF_EMERGENCE_EAST,  /* CMD < 0 */
  TF_EMERGENCE_WEST,
  TF_EMERGENCE_SIDES,
} TfEmergenceSide;

typedef struct
{
  double age_days; /* middle of the bin; below 0: before the flux reached the share */
  guint regions;   /* seen at that age */
  TfSpread tilt_deg, separation_deg, flux_mx;
} TfEmergenceAge;

/** TfEmergenceSight: that a passage was seen at an age: who stands behind a median. */
typedef struct
{
  guint age; /* index into the ages */
  guint32 passage;
} TfEmergenceSight;

typedef struct
{
  TfEmergenceParams params;
  guint passages; /* born on the disk, in the ages below */
  guint
      late; /* of these: already above the share when first seen; time zero is then the first mark */
  guint elsewhere;                  /* passages not born on the disk, or not known to be */
  guint unmeasured;                 /* passages without a flux or a time */
  GArray *ages[TF_EMERGENCE_SIDES]; /* of TfEmergenceAge, all of one length, in order of age */
  GArray *sights;                   /* TfEmergenceSight, by passage */
} TfEmergence;

/** tf_emergence_new: @every: every mark, those of a passage in any order. */
TfEmergence *tf_emergence_new (const TfSample *every, const TfEmergenceParams *params);
void tf_emergence_free (TfEmergence *emergence);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfEmergence, tf_emergence_free)

G_END_DECLS
