/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfPowerCurve: how often a difference is found, against the number of regions in each of two groups.
 * Filled by simulation; this is what a chart draws. */

#include <glib.h>

#include "tf-proportion.h"

G_BEGIN_DECLS

typedef enum
{
  TF_POWER_SLOPE, /* two slopes of Joy's law, by the bootstrap of their difference */
  TF_POWER_SHARE, /* two shares that break Hale's law, by Fisher's exact test */
} TfPowerWhat;
extern const char *const tf_power_names[]; /* "slope" "share" */

typedef struct
{
  guint n; /* regions in each group */
  guint runs,
      found;    /* pairs of groups, and those in which the two differ at the chance asked for */
  double power; /* found / runs */
  TfInterval interval; /* Clopper-Pearson, 95 % */
} TfPowerPoint;

typedef struct
{
  TfPowerWhat what;
  double first, second; /* the two truths */
  double chance;        /* 0.05: a difference counts when its p is not above this */
  GArray *points;       /* TfPowerPoint, by n */
} TfPowerCurve;

/** tf_power_needed: regions in each group for that power, linear in log n between points; NaN when no
 * point reaches it, the first point's n when all do. */
double tf_power_needed (const TfPowerCurve *curve, double power);
void tf_power_curve_free (TfPowerCurve *curve);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfPowerCurve, tf_power_curve_free)

G_END_DECLS
