/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Straight lines y = slope x + intercept through points whose x is uncertain too, and rank
 * statistics of pairs. What Joy's law is fitted with (x exact) is in tf-joy-line.h.
 */

#include <glib.h>

#include "tf-proportion.h"

G_BEGIN_DECLS

typedef struct
{
  double slope, intercept;
  double slope_sd, intercept_sd; /* NaN where the method gives none */
  double chi2;                   /* weighted sum of squares of the distances; NaN likewise */
} TfLine;

/** TfLineMethod: how the line is chosen; all are symmetric in nothing but what they say. */
typedef struct
{
  const char *name; /* "least-squares", "inverse", "reduced-major-axis", "orthogonal" */
  const char *source;
  TfLine (*fit) (const double *x, const double *y, guint n);
} TfLineMethod;
/** tf_line_methods: ends with name NULL. */
extern const TfLineMethod tf_line_methods[];

/** tf_line_deming: @ratio: variance of the errors of y over that of x; 1: orthogonal (Adcock 1878;
 * Deming 1943, Statistical Adjustment of Data). */
TfLine tf_line_deming (const double *x, const double *y, guint n, double ratio);
/** tf_line_york: each point with its own weights 1/sigma^2 in x and in y, uncorrelated (York 1966,
 * Can. J. Phys. 44, 1079; solved and its errors given as in York et al. 2004, Am. J. Phys. 72, 367,
 * eq. 13). NaN for fewer than 3 points, a weight that is not above 0, or no convergence. */
TfLine tf_line_york (const double *x, const double *y, const double *weight_x,
                     const double *weight_y, guint n);

/** tf_kendall: rank correlation tau-b of Kendall 1945. @p: (out) (nullable): two-sided; exact for
 * n <= 60 without ties (Kendall 1938), else by the normal law with ties allowed for. NaN for n < 2
 * or no spread. Cost n^2. */
double tf_kendall (const double *x, const double *y, guint n, double *p);
/** tf_sen_interval: interval of the median slope of all pairs of different x (Sen 1968, J. Am. Stat.
 * Assoc. 63, 1379, by the normal law). At @level; cost n^2 log n: for small samples. */
TfInterval tf_sen_interval (const double *x, const double *y, guint n, double level);

G_END_DECLS
