/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include "tf-cycles.h"

/** How often intervals of a level hold the truth over seeds first, first + 1, ... */
typedef struct
{
  guint seeds;
  guint slope, share; /* the interval clustered by region, every mark a pick */
  guint exact;        /* Clopper-Pearson of the share, one pick a passage */
} Coverage;

Coverage coverage_run (const TfCyclesParams *params, int first, guint seeds, int draws,
                       double level, void (*say) (guint done));
