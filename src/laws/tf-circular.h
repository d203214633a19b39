/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Statistics of directions and of axes (Mardia & Jupp 2000, Directional Statistics; Fisher 1993,
 * Statistical Analysis of Circular Data; Zar 2010, Biostatistical Analysis, ch. 26).
 *
 * A tilt in (-90, 90] is an axis: -89 and +89 deg are 2 deg apart. Axes are doubled, treated as
 * directions, and the mean and the two deviations halved; resultant, concentration and Rayleigh's
 * test are those of the doubled angles. Angles in deg. NaN angles are left out.
 */

#include <glib.h>

G_BEGIN_DECLS

typedef struct
{
  guint n;
  double mean_deg;      /* of directions in [0, 360), of axes in (-90, 90]; NaN without one */
  double resultant;     /* mean resultant length, 0 to 1; NaN for n = 0 */
  double sd_deg;        /* circular standard deviation sqrt (-2 ln R) */
  double deviation_deg; /* angular deviation sqrt (2 (1 - R)): the two differ, so both are named */
  double concentration; /* kappa of von Mises, greatest likelihood; infinite for R = 1 */
  double rayleigh_z;    /* n R^2 */
  double
      rayleigh_p; /* chance of so long a resultant without any preferred direction (Zar, eq. 27.4, from memory) */
} TfCircular;

TfCircular tf_circular (const double *angles_deg, guint n, gboolean axes);
/** tf_circular_from_sums: the same from the sums of cosines and sines (of the doubled angles for
 * axes). */
TfCircular tf_circular_from_sums (double cosines, double sines, guint n, gboolean axes);
/** tf_circular_correlation: T of Fisher & Lee 1983 (Biometrika 70, 327): -1 to 1; pairs with a NaN
 * are left out; NaN for fewer than 3 pairs or no spread. */
double
tf_circular_correlation (const double *first_deg, const double *second_deg, guint n, gboolean axes);

G_END_DECLS
