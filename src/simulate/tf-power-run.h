/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* How many regions are needed to tell two slopes of Joy's law, or two shares that break Hale's law,
 * apart: pairs of invented groups, each compared as a study compares its groups (tf-compare.h). */

#include "tf-bands.h"
#include "tf-cycles.h"
#include "tf-power.h"

G_BEGIN_DECLS

typedef struct
{
  int what;             /* TfPowerWhat */
  double first, second; /* slopes (deg/deg) or shares; NaN: 0.4 and 0.3, or 0.05 and 0.08 */
  double chance;        /* 0.05 */
  double power;         /* 0.8: what is asked for */
  int least, most;      /* 50, 6400: regions in each group, doubling */
  int runs;             /* 200 pairs at each number */
  int draws;            /* 200 of the bootstrap, slopes alone */
  int seed;
} TfPowerParams;
extern const TfOption tf_power_options[];

/** tf_power_run: every pair has a seed of its own, so that any number of threads gives the same. NULL
 * with an error when cancelled. */
TfPowerCurve *tf_power_run (const TfPowerParams *params, const TfWork *work, GError **error);

G_END_DECLS
