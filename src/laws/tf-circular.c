/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-circular.h"

#include <math.h>
#include <gsl/gsl_sf_bessel.h>

#include "tf-constants.h"

/* Below this the resultant of equal angles differs from 1 by rounding alone. */
#define ROUNDING 1e-14

/* The concentration at which I1 / I0 is @resultant (Mardia & Jupp, sec. 5.3.1), by halving. */
static double
find_concentration (double resultant)
{
  double low = 0.0, high = 1.0;
  if (!(resultant < 1.0 - ROUNDING))
    return isnan (resultant) ? NAN : INFINITY;
  while (gsl_sf_bessel_I1_scaled (high) / gsl_sf_bessel_I0_scaled (high) < resultant)
    high *= 2.0;
  while (high - low > 1e-13 * high)
    {
      double middle = 0.5 * (low + high);
      if (gsl_sf_bessel_I1_scaled (middle) / gsl_sf_bessel_I0_scaled (middle) < resultant)
        low = middle;
      else
        high = middle;
    }
  return 0.5 * (low + high);
}

TfCircular
tf_circular_from_sums (double cosines, double sines, guint n, gboolean axes)
{
  double length = hypot (cosines, sines), count = n;
  TfCircular c = { .n = n, .mean_deg = NAN, .resultant = n == 0 ? NAN : fmin (1.0, length / n) };
  double part = axes ? 0.5 : 1.0;
  double mean = part * atan2 (sines, cosines) / TF_DEG;
  if (n > 0 && length > ROUNDING * n)
    c.mean_deg = axes || mean >= 0.0 ? mean : mean + 360.0;
  c.sd_deg = part * sqrt (-2.0 * log (c.resultant)) / TF_DEG;
  c.deviation_deg = part * sqrt (2.0 * (1.0 - c.resultant)) / TF_DEG;
  c.concentration = find_concentration (c.resultant);
  c.rayleigh_z = count * c.resultant * c.resultant;
  double rest = count * count - length * length;
  c.rayleigh_p = n == 0 ? NAN : exp (sqrt (1.0 + 4.0 * count + 4.0 * rest) - (1.0 + 2.0 * count));
  return c;
}

TfCircular
tf_circular (const double *angles_deg, guint n, gboolean axes)
{
  double cosines = 0.0, sines = 0.0;
  guint known = 0;
  for (guint k = 0; k < n; k++)
    {
      double angle = (axes ? 2.0 : 1.0) * angles_deg[k] * TF_DEG;
      if (isnan (angle))
        continue;
      cosines += cos (angle);
      sines += sin (angle);
      known++;
    }
  return tf_circular_from_sums (cosines, sines, known, axes);
}

double
tf_circular_correlation (const double *first_deg, const double *second_deg, guint n, gboolean axes)
{
  /* T by the sums A to H of Fisher 1993, eq. 6.36, so that no pair of pairs is looked at */
  double a = 0, b = 0, c = 0, d = 0, e = 0, f = 0, g = 0, h = 0, factor = axes ? 2.0 : 1.0;
  guint known = 0;
  for (guint k = 0; k < n; k++)
    {
      double p = factor * first_deg[k] * TF_DEG, q = factor * second_deg[k] * TF_DEG;
      if (isnan (p) || isnan (q))
        continue;
      a += cos (p) * cos (q);
      b += sin (p) * sin (q);
      c += cos (p) * sin (q);
      d += sin (p) * cos (q);
      e += cos (2.0 * p);
      f += sin (2.0 * p);
      g += cos (2.0 * q);
      h += sin (2.0 * q);
      known++;
    }
  double count = (double)known * known;
  double spread = (count - e * e - f * f) * (count - g * g - h * h);
  if (known < 3 || !(spread > ROUNDING * count * count))
    return NAN;
  return 4.0 * (a * b - c * d) / sqrt (spread);
}
