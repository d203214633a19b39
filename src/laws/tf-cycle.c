/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-cycle.h"

#include <math.h>

/* Months of the minima and of the maxima by calibration V2 (2015): 13-month smoothed monthly total
 * sunspot number, version 2.0, of the World Data Center SILSO, Royal Observatory of Belgium; where
 * the smoothed series has a tie, the month of the official table, as the remark says. Old maxima
 * (V1) of cycles 21 to 23: the same smoothing of R's datasets::sunspot.month of R 4.2.2. Dates of
 * extrema only: the series itself is not part of the program.
 */
const TfCycle tf_cycles[] = {
  { 1, 1755, 2, 1761, 6, 0, 0, "minimum: tie at one decimal, the official month" },
  { 2, 1766, 6, 1769, 9, 0, 0, "" },
  { 3, 1775, 6, 1778, 5, 0, 0, "" },
  { 4, 1784, 9, 1788, 2, 0, 0, "" },
  { 5, 1798, 4, 1805, 2, 0, 0, "" },
  { 6, 1810, 7, 1816, 5, 0, 0,
    "minimum: zero from 1810-03 to 1810-12; 1810-07 or 1810-08 in different lists" },
  { 7, 1823, 5, 1829, 11, 0, 0, "minimum: tie from 1823-03 to 1823-05, the official month" },
  { 8, 1833, 11, 1837, 3, 0, 0, "" },
  { 9, 1843, 7, 1848, 2, 0, 0, "" },
  { 10, 1855, 12, 1860, 2, 0, 0, "" },
  { 11, 1867, 3, 1870, 8, 0, 0, "" },
  { 12, 1878, 12, 1883, 12, 0, 0, "" },
  { 13, 1890, 3, 1894, 1, 0, 0, "" },
  { 14, 1902, 1, 1906, 2, 0, 0, "" },
  { 15, 1913, 7, 1917, 8, 0, 0, "minimum: tie of 1913-07 and 1913-08" },
  { 16, 1923, 8, 1928, 4, 0, 0, "minimum: tie of 1923-07 and 1923-08" },
  { 17, 1933, 9, 1937, 4, 0, 0, "" },
  { 18, 1944, 2, 1947, 5, 0, 0, "" },
  { 19, 1954, 4, 1958, 3, 0, 0, "" },
  { 20, 1964, 10, 1968, 11, 0, 0, "" },
  { 21, 1976, 3, 1979, 12, 1979, 12, "" },
  { 22, 1986, 9, 1989, 11, 1989, 7, "" },
  { 23, 1996, 8, 2001, 11, 2000, 4, "minimum: tie from 1996-05 to 1996-08, the official month" },
  { 24, 2008, 12, 2014, 4, 0, 0, "" },
  { 25, 2019, 12, 2024, 10, 0, 0, "maximum: provisional" },
  { 0, 0, 0, 0, 0, 0, 0, "" },
};

const TfCycle *
tf_cycle_find (int number)
{
  for (const TfCycle *c = tf_cycles; c->number != 0; c++)
    if (c->number == number)
      return c;
  return NULL;
}

/* The middle of a month, from the first instants of it and of the next. */
static TfTime
middle_of_month (int year, int month)
{
  TfTime first = tf_time_from_calendar (year, month, 1, 0, 0, 0.0, TF_SCALE_UTC);
  TfTime next = month == 12 ? tf_time_from_calendar (year + 1, 1, 1, 0, 0, 0.0, TF_SCALE_UTC)
                            : tf_time_from_calendar (year, month + 1, 1, 0, 0, 0.0, TF_SCALE_UTC);
  return tf_time_add (first, 0.5 * (next.s - first.s));
}

TfTime
tf_cycle_minimum (int number)
{
  const TfCycle *cycle = tf_cycle_find (number);
  return cycle == NULL ? TF_TIME_UNKNOWN : middle_of_month (cycle->min_year, cycle->min_month);
}

TfTime
tf_cycle_maximum (int number)
{
  const TfCycle *cycle = tf_cycle_find (number);
  return cycle == NULL ? TF_TIME_UNKNOWN : middle_of_month (cycle->max_year, cycle->max_month);
}

int
tf_cycle_by_date (TfTime time)
{
  int number = 0;
  for (const TfCycle *c = tf_cycles; c->number != 0; c++)
    {
      if (!(tf_cycle_minimum (c->number).s <= time.s))
        break;
      number = c->number;
    }
  return number;
}

double
tf_cycle_latitude (double months)
{
  return months > 0.0 ? 28.0 * exp (-months / 90.0) : isnan (months) ? NAN : 28.0;
}

int
tf_hale_expected (int cycle, int hemisphere)
{
  if (cycle <= 0 || hemisphere == 0)
    return 0;
  int north = cycle % 2 == 0 ? -1 : 1;
  return hemisphere > 0 ? north : -north;
}
