/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-cycles.h"

#include <math.h>
#include <glib/gi18n-lib.h>
#include <gsl/gsl_randist.h>

#include "tf-constants.h"

#define O(member) offsetof (TfCyclesParams, member)
const TfOption tf_cycles_options[] = {
  { "first-cycle", TF_OPTION_INT, "", 23, 2, 25, NULL, N_ ("number of the first cycle"),
    O (first) },
  { "cycles", TF_OPTION_INT, "", 3, 1, 24, NULL, N_ ("how many cycles"), O (n_cycles) },
  { "cycle-regions", TF_OPTION_INT, "", 800, 1, 1000000, NULL, N_ ("regions a cycle"),
    O (regions) },
  { "slope", TF_OPTION_NUMBER, "deg/deg", 0.4, -5, 5, NULL, N_ ("slope of Joy's law"), O (slope) },
  { "scatter", TF_OPTION_NUMBER, "", 1, 0, 5, NULL,
    N_ ("factor of the tilts' scatter by separation"), O (scatter_factor) },
  { "anti-hale", TF_OPTION_NUMBER, "", 0.05, 0, 1, NULL,
    N_ ("share of regions that break Hale's law"), O (anti_hale_share) },
  { "lat-scatter", TF_OPTION_NUMBER, "", 0.18, 0, 1, NULL,
    N_ ("scatter of latitudes as a share of them"), O (lat_scatter) },
  { "more-marks", TF_OPTION_NUMBER, "", 2, 0, 20, NULL,
    N_ ("marks of a region beyond the first, on average"), O (marks) },
  { "tilt-error", TF_OPTION_NUMBER, "deg", 1.5, 0, 30, NULL, N_ ("error of one mark's tilt"),
    O (tilt_error_deg) },
  { "strays", TF_OPTION_BOOL, "", 0, 0, 1, NULL,
    N_ ("regions may lie on the wrong side of a divide"), O (strays) },
  { "cycles-seed", TF_OPTION_INT, "", 1, 0, G_MAXINT32, NULL, N_ ("seed of the random numbers"),
    O (seed) },
  { NULL },
};
#undef O

#define MONTH_S      (365.25 / 12.0 * TF_DAY_S)
#define RISE_MONTHS  54.0 /* b, c and t0 of the shape */
#define SHAPE_C      0.8
#define START_MONTHS (-4.0)
#define SHAPE_END    2.6  /* x at which a cycle has died away */
#define SHAPE_PEAK   0.53 /* a little above the greatest value */
#define STEEPEST_DEG 85.0

static double
draw_months (gsl_rng *rng)
{
  for (;;)
    {
      double x = SHAPE_END * gsl_rng_uniform_pos (rng);
      if (SHAPE_PEAK * gsl_rng_uniform (rng) < x * x * x / (exp (x * x) - SHAPE_C))
        return START_MONTHS + RISE_MONTHS * x;
    }
}

static double
draw_tilt (const TfCyclesParams *p, double lat_deg, double separation_deg, gsl_rng *rng)
{
  double unused, scatter, tilt;
  tf_joy_expected (lat_deg, separation_deg, &unused, &scatter);
  do
    tilt = p->slope * fabs (lat_deg) + gsl_ran_gaussian (rng, p->scatter_factor * scatter);
  while (!(fabs (tilt) < STEEPEST_DEG));
  return tilt;
}

/* Time and latitude; again while it would lie on the wrong side of a divide. */
static void
draw_place (TfInventedRegion *region, const TfCyclesParams *p, const TfDivides *divides,
            gsl_rng *rng)
{
  TfTime minimum = tf_cycle_minimum (region->cycle);
  int side = gsl_rng_uniform (rng) < 0.5 ? 1 : -1;
  for (int tries = 0; tries < 1000; tries++)
    {
      double months = draw_months (rng), lat = tf_cycle_latitude (months);
      region->time = tf_time_add (minimum, months * MONTH_S);
      region->lat_deg = side * fabs (lat + gsl_ran_gaussian (rng, p->lat_scatter * lat));
      TfCycleCall call = tf_divides_call (divides, region->time, region->lat_deg);
      if (p->strays || !call.sure || call.number == region->cycle)
        return;
    }
}

static TfInventedRegion
draw_region (int cycle, const TfCyclesParams *p, const TfDivides *divides, gsl_rng *rng)
{
  TfInventedRegion region = { .cycle = cycle };
  draw_place (&region, p, divides, rng);
  region.separation_deg = fmax (0.5, gsl_ran_lognormal (rng, log (4.0), 0.45));
  region.flux_mx
      = 8e21 * pow (region.separation_deg / 4.0, 1.3) * gsl_ran_lognormal (rng, 0.0, 0.4);
  region.tilt_deg = draw_tilt (p, region.lat_deg, region.separation_deg, rng);
  region.breaks = gsl_rng_uniform (rng) < p->anti_hale_share;
  return region;
}

/* One mark: the region with errors of measurement; the leader is always seen right. */
static void
fill_row (TfSampleRow *row, const TfInventedRegion *region, const TfCyclesParams *p, guint number,
          double cmd_deg, gsl_rng *rng)
{
  int hemisphere = region->lat_deg < 0.0 ? -1 : 1;
  int expected = tf_hale_expected (region->cycle, hemisphere);
  double place_deg = 0.5 * region->separation_deg * p->tilt_error_deg * TF_DEG;
  tf_sample_row_init (row);
  row->time = tf_time_add (region->time, cmd_deg / 13.2 * TF_DAY_S);
  row->region = row->passage = number;
  row->lat_deg = region->lat_deg + gsl_ran_gaussian (rng, place_deg);
  row->cmd_deg = cmd_deg;
  row->mu = cos (cmd_deg * TF_DEG) * cos (region->lat_deg * TF_DEG);
  row->axis_tilt_deg = region->tilt_deg + gsl_ran_gaussian (rng, p->tilt_error_deg);
  row->axis_bearing_deg = -hemisphere * row->axis_tilt_deg;
  row->tilt_sigma_deg = p->tilt_error_deg;
  row->separation_deg = region->separation_deg;
  row->separation_sigma_deg = region->separation_deg * p->tilt_error_deg * TF_DEG;
  double half = 0.5 * region->separation_deg * sin (row->axis_tilt_deg * TF_DEG);
  row->leading_lat_deg = row->lat_deg - hemisphere * half;
  row->following_lat_deg = row->lat_deg + hemisphere * half;
  row->flux_mx = region->flux_mx * gsl_ran_lognormal (rng, 0.0, 0.05);
  row->imbalance = 0.0;
  row->compactness = 1.5;
  row->leading_polarity = region->breaks ? -expected : expected;
  row->leading_sure = 1;
  row->witnesses_differ = 0;
  row->size = 0;
}

static void
see_region (TfInvented *invented, const TfCyclesParams *p, guint number, gsl_rng *rng)
{
  const TfInventedRegion *region = &g_array_index (invented->regions, TfInventedRegion, number);
  guint marks = 1 + gsl_ran_poisson (rng, p->marks);
  for (guint k = 0; k < marks; k++)
    {
      TfSampleRow row;
      double cmd_deg = marks == 1 ? 0.0 : -50.0 + 100.0 * k / (marks - 1.0);
      fill_row (&row, region, p, number, cmd_deg, rng);
      row.row = tf_sample_get_n (invented->sample);
      tf_sample_add (invented->sample, &row);
    }
}

TfInvented *
tf_cycles_invent (const TfCyclesParams *params)
{
  TfInvented *invented = g_new0 (TfInvented, 1);
  invented->sample = tf_sample_new ();
  invented->regions = g_array_new (FALSE, FALSE, sizeof (TfInventedRegion));
  gsl_rng *rng = gsl_rng_alloc (gsl_rng_mt19937);
  gsl_rng_set (rng, (unsigned long)params->seed);
  TfDivideParams divide;
  tf_options_reset (tf_divide_options, &divide);
  g_autoptr (TfDivides) divides = tf_divides_new (&divide);
  for (int c = 0; c < params->n_cycles; c++)
    for (int k = 0; k < params->regions; k++)
      {
        if (tf_cycle_find (params->first + c) == NULL)
          continue;
        TfInventedRegion region = draw_region (params->first + c, params, divides, rng);
        g_array_append_val (invented->regions, region);
        see_region (invented, params, invented->regions->len - 1, rng);
      }
  gsl_rng_free (rng);
  return invented;
}

void
tf_invented_free (TfInvented *invented)
{
  if (invented == NULL)
    return;
  tf_sample_free (invented->sample);
  g_array_unref (invented->regions);
  g_free (invented);
}
