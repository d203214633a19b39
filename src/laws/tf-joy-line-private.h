/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include "tf-joy-line.h"

G_BEGIN_DECLS

enum
{
  TF_JOY_BINS = 18 /* of 5 deg, |lat| 0 to 90 */
};

struct _TfJoyPoints
{
  guint n;
  double *x, *y, *flux, *count;
  int *bin;
  guint *by_ratio, n_ratio;        /* points with x > 0, by y / x; NULL at first */
  guint *by_x, *by_y;              /* all points, by x and then y; by y; NULL at first */
  double bin_scatter[TF_JOY_BINS]; /* of y; over the whole sample; 0 before it is measured */
  gboolean drawn;                  /* counts are a draw's */
  double sen_slope, sen_step;      /* the whole sample's slope, and how far draws go from it */
  gboolean sen_known;              /* the slope is; the step is 0 before the first draw */
};

/** tf_joy_points_order: makes by_ratio, or by_x and by_y, if they are not there yet. */
void tf_joy_points_order (TfJoyPoints *points, gboolean by_ratio);

/** TfJoyRatio: y / x of a point with x > 0, and its weight x. */
typedef struct
{
  double value, weight;
} TfJoyRatio;
/** tf_joy_ratio_median: the value at which half of the weight is passed, without an order of all; NaN
 * where rounding might decide, or there is none. @ratios are put into another order. */
double tf_joy_ratio_median (TfJoyRatio *ratios, guint n);

/** TfJoyRunning: a weighted median as values come in order: the first at which half of the weight
 * is passed, midway to the next when it is met within rounding. Begin with half and value NaN set.
 */
typedef struct
{
  double half, sum, value;
  gboolean met, done;
} TfJoyRunning;
void tf_joy_running_add (TfJoyRunning *median, double value, double weight);

G_END_DECLS
