/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Straight lines y = slope x (+ intercept) through points, for Joy's law. x is never negative:
 * |lat| or its sine.
 *
 * Points carry a count each, 1 at first; a bootstrap draw sets the counts to how often each point
 * was drawn. All orders that an estimator needs are made once, so that one draw costs time in
 * proportion to the number of points. A line that cannot be had is NaN; a line through the origin
 * has intercept NaN.
 */

#include <glib.h>

G_BEGIN_DECLS

typedef struct
{
  double slope, intercept;
} TfJoyLine;

typedef struct _TfJoyPoints TfJoyPoints;
typedef TfJoyLine (*TfJoyLineFunc) (TfJoyPoints *points);

/**
 * tf_joy_points_new: copies its columns.
 * @flux: weights of the flux-weighted lines, Mx; a value that is not above 0 weighs nothing
 * @lat: |lat|, deg, tells the 5 deg bin
 */
TfJoyPoints *tf_joy_points_new (guint n, const double *x, const double *y, const double *flux,
                                const double *lat);
void tf_joy_points_free (TfJoyPoints *points);
/** tf_joy_points_count: sets each point's count to how often it stands in @rows. */
void tf_joy_points_count (TfJoyPoints *points, const guint *rows, guint n);

/* Unweighted, and weighted by flux; through the origin, and free. */
TfJoyLine tf_joy_line_least_squares (TfJoyPoints *points);
TfJoyLine tf_joy_line_flux_weighted (TfJoyPoints *points);
TfJoyLine tf_joy_line_free_least_squares (TfJoyPoints *points);
TfJoyLine tf_joy_line_free_flux_weighted (TfJoyPoints *points);
/**
 * tf_joy_line_free_robust: Theil 1950, Sen 1968: the median of the slopes of all pairs of different
 * x, and median y - slope * median x (Conover). Of the whole sample exactly; of a draw to a
 * thousandth of the spread of draws. Cost n log n.
 */
TfJoyLine tf_joy_line_free_robust (TfJoyPoints *points);
/** tf_joy_line_robust: median of y / x weighted by x: the slope that makes the sum of |y - slope x|
 * least. */
TfJoyLine tf_joy_line_robust (TfJoyPoints *points);
/**
 * tf_joy_line_bin_medians: least squares through the medians of the 5 deg bins that hold 5 points
 * or more, each at its mean x, weighted by n / scatter^2, scatter = 1.4826 MAD of y in the bin over
 * the whole sample (never below a hundredth of the greatest bin's).
 */
TfJoyLine tf_joy_line_bin_medians (TfJoyPoints *points);
TfJoyLine tf_joy_line_free_bin_medians (TfJoyPoints *points);

G_END_DECLS
