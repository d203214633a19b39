/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* coverage-campaign: 400 seeds, 1 to 400, of three invented cycles with a slope of 0.4 deg/deg and 5 % of regions that break Hale's law:
 * how often the 95 % intervals hold these truths. Asked for: 92 to 98 % of the intervals clustered by region, at least 95 % of
 * Clopper and Pearson's. Exit 1 when it is otherwise. */

#include <stdio.h>

#include "coverage.h"

static void
say (guint done)
{
  if (done % 20 == 0)
    fprintf (stderr, "%u seeds\n", done);
}

int
main (void)
{
  TfCyclesParams params;
  tf_options_reset (tf_cycles_options, &params);
  Coverage c = coverage_run (&params, 1, 400, 1000, 0.95, say);
  printf ("%u seeds, %d regions a cycle: truth inside for the slope %.2f %%, the share by clusters %.2f %%, the share by "
          "Clopper-Pearson %.2f %%\n",
          c.seeds, params.regions, 100.0 * c.slope / c.seeds, 100.0 * c.share / c.seeds, 100.0 * c.exact / c.seeds);
  return c.slope >= 368 && c.slope <= 392 && c.share >= 368 && c.share <= 392 && c.exact >= 380 ? 0 : 1;
}
