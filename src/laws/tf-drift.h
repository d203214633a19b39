/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfDrift: Spörer's law: how the mean latitude of a cycle's regions falls as the cycle goes on.
 *
 * By year of the cycle, and as two curves through the regions themselves: a straight line, and
 * lambda = lambda0 exp (-t / tau) as Hathaway 2011 (Solar Phys. 273, 221) has it, with t from the
 * minimum that begins the cycle; his lambda0 = 28 deg and tau = 90 months (constants from memory) are
 * beside them. Only regions whose cycle is sure. About a minimum the divide decides by latitude which
 * cycle a region belongs to, so the first 18 months and the last 24 are partly of its making: they are
 * in the years but not in the curves.
 */

#include "tf-bands.h"
#include "tf-group.h"
#include "tf-proportion.h"

G_BEGIN_DECLS

typedef struct
{
  double level; /* 0.95 */
  int draws;    /* 1000 */
  int seed;
  int from_months, before_end_months; /* 18, 24: the curves leave out what lies outside */
  const TfCancel *cancel; /* as in TfJoyParams */
} TfDriftParams;
extern const TfOption tf_drift_options[];

typedef struct
{
  int year; /* of the cycle, 0 the first */
  guint n, regions;
  double mean_deg, sd_deg; /* of |lat| */
  double expected_deg;     /* Hathaway 2011, at the middle of the year */
} TfDriftYear;

typedef struct
{
  int cycle, hemisphere;     /* 0 both */
  GArray *years;             /* TfDriftYear, those that have a row */
  guint n, regions;          /* of the curves */
  double slope_deg_per_year; /* of the straight line; NaN for fewer than 10 rows or 24 months */
  TfInterval slope_ci;       /* bootstrap clustered by region */
  double start_deg,
      tau_months; /* of the exponential; NaN likewise, tau infinite when it does not fall */
} TfDrift;

void tf_drift_clear (TfDrift *drift);
/** tf_drifts: (element-type TfDrift) (transfer full): each cycle that is there: N, S, both. */
GArray *tf_drifts (const TfSample *sample, const TfVerdict *verdicts, const TfDriftParams *params);

G_END_DECLS
