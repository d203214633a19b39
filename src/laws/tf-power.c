/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-power.h"

#include <math.h>

const char *const tf_power_names[] = { "slope", "share", NULL };

double
tf_power_needed (const TfPowerCurve *curve, double power)
{
  for (guint k = 0; k < curve->points->len; k++)
    {
      const TfPowerPoint *here = &g_array_index (curve->points, TfPowerPoint, k);
      if (here->power < power)
        continue;
      if (k == 0)
        return here->n;
      const TfPowerPoint *before = here - 1;
      double part = (power - before->power) / (here->power - before->power);
      return exp (log (before->n) + part * (log (here->n) - log (before->n)));
    }
  return NAN;
}

void
tf_power_curve_free (TfPowerCurve *curve)
{
  if (curve != NULL)
    g_array_unref (curve->points);
  g_free (curve);
}
