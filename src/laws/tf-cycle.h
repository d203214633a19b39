/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfCycle: the sunspot cycles, their minima and maxima as data, and the latitudes expected in them.
 *
 * Epochs are facts (month precision, kept as the middle of the month) and are never recomputed. Two
 * calibrations of the sunspot number give different maxima; each row says which it is from. A next
 * minimum not yet listed is unknown, unless a person gives a provisional one.
 */

#include <glib.h>

#include "tf-time.h"

G_BEGIN_DECLS

typedef struct
{
  int number;
  int min_year, min_month;   /* official epoch of the minimum that begins the cycle */
  int max_year, max_month;   /* 13-month smoothed maximum, calibration V2 */
  int max1_year, max1_month; /* the same by the old calibration V1; 0 where not given */
  const char *remark;        /* "" or why the month is not the plain argmin */
} TfCycle;

/** tf_cycles: cycles 1 to 25 in order; ends with number 0. The source is named in the
 * .c file. */
extern const TfCycle tf_cycles[];

/** tf_cycle_find: (nullable): the row of a number. */
const TfCycle *tf_cycle_find (int number);
/** tf_cycle_minimum: time of the minimum that begins cycle @number; unknown when not listed. */
TfTime tf_cycle_minimum (int number);
TfTime tf_cycle_maximum (int number);
/** tf_cycle_by_date: the cycle whose minima hold @time; 0 before cycle 1. After the last listed
 * minimum: that cycle. */
int tf_cycle_by_date (TfTime time);
/** tf_cycle_latitude: latitude expected @months after a minimum: 28 exp (-t/90), 28 before it
 * (Hathaway 2011). deg */
double tf_cycle_latitude (double months);
/** tf_hale_expected: sign of the leading polarity: h (-1)^(n+1), h = +1 north. */
int tf_hale_expected (int cycle, int hemisphere);

G_END_DECLS
