/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-compare.h"

#include <math.h>

#include "tf-distinct.h"
#include "tf-joy-slope.h"
#include "tf-many.h"
#include "tf-sort.h"

enum
{
  MIN_REGIONS = 5, /* fewer can tell nothing, and would count among the comparisons */
  CYCLES = 64      /* above every number of a cycle */
};

typedef struct
{
  const TfSample *sample;
  const TfVerdict *verdicts;
  const TfJoyParams *joy;
  TfComparisons *out;
} Work;

/* -- shares ------------------------------------------------------------------------------------- */

/* Rows of a region: breaks less keeps; the first row's verdict breaks ties. */
typedef struct
{
  int balance;
  int first;
} Votes;

static void
count_regions (const Work *work, const TfGroup *group, guint *regions, guint *breaks)
{
  g_autoptr (TfDistinct) numbers = tf_distinct_new (tf_sample_get_n (work->sample));
  g_autofree Votes *votes = tf_new0_many (Votes, tf_sample_get_n (work->sample) + 1);
  guint n = 0;
  for (guint k = 0; k < tf_sample_get_n (work->sample); k++)
    {
      const TfSampleRow *row = tf_sample_get (work->sample, k);
      const TfVerdict *verdict = &work->verdicts[k];
      if (verdict->kind == TF_VERDICT_CANNOT_SAY || !tf_group_holds (group, row, verdict, TRUE))
        continue;
      int vote = verdict->kind == TF_VERDICT_BREAKS ? 1 : -1;
      guint number = tf_distinct_add (numbers, row->region);
      if (number == n)
        votes[n++].first = vote;
      votes[number].balance += vote;
    }
  *regions = n;
  *breaks = 0;
  for (guint k = 0; k < n; k++)
    *breaks += votes[k].balance > 0 || (votes[k].balance == 0 && votes[k].first > 0);
}

/* -- slopes ------------------------------------------------------------------------------------- */

/* The two-sided chance that draws of the difference lie beyond 0; never below one in their number. */
static double
chance_beyond (const double *sorted, guint n)
{
  guint below = 0, above = 0;
  for (guint k = 0; k < n; k++)
    {
      below += !(sorted[k] > 0.0);
      above += !(sorted[k] < 0.0);
    }
  return fmin (1.0, 2.0 * (MIN (below, above) + 1.0) / (n + 1.0));
}

static void
compare_slopes (const Work *work, TfComparison *row)
{
  guint n = (guint)MAX (work->joy->draws, 0), good = 0;
  g_autofree double *first = g_new (double, n + 1), *second = g_new (double, n + 1);
  double *const draws[2] = { first, second };
  for (int side = 0; side < 2; side++)
    {
      TfJoyParams params = *work->joy;
      params.seed += side; /* draws apart from each other */
      TfJoyFit fit = n == 0 ? tf_joy_slope (work->sample, work->verdicts, &row->groups[side], &params)
                            : tf_joy_fit_group (work->sample, work->verdicts, &row->groups[side],
                                                &params, draws[side]);
      row->n_tilts[side] = fit.n;
      row->slope[side] = fit.slope;
    }
  row->difference = (TfInterval){ NAN, NAN };
  row->slope_p = row->slope_p_holm = NAN;
  for (guint k = 0; k < n; k++)
    {
      double difference = draws[0][k] - draws[1][k];
      if (!isnan (difference))
        draws[0][good++] = difference;
    }
  if (n == 0 || 2 * good < n || row->n_tilts[0] < MIN_REGIONS || row->n_tilts[1] < MIN_REGIONS)
    return;
  tf_sort_numbers (draws[0], good);
  row->difference = (TfInterval){ tf_quantile (draws[0], good, 0.5 * (1.0 - work->joy->level)),
                                  tf_quantile (draws[0], good, 0.5 * (1.0 + work->joy->level)) };
  row->slope_p = chance_beyond (draws[0], good);
}

/* -- the pairs ---------------------------------------------------------------------------------- */

static TfComparison
compare (const Work *work, const char *kind, TfGroup first, TfGroup second)
{
  TfComparison row = { .kind = kind, .groups = { first, second }, .share_p = NAN };
  for (int side = 0; side < 2; side++)
    {
      count_regions (work, &row.groups[side], &row.regions[side], &row.breaks[side]);
      row.share[side] = row.regions[side] == 0 ? NAN : (double)row.breaks[side] / row.regions[side];
    }
  if (row.regions[0] >= MIN_REGIONS && row.regions[1] >= MIN_REGIONS)
    row.share_p = tf_fisher_exact (row.breaks[0], row.regions[0] - row.breaks[0], row.breaks[1],
                                   row.regions[1] - row.breaks[1]);
  row.share_p_holm = NAN;
  compare_slopes (work, &row);
  return row;
}

TfComparison
tf_compare_groups (const TfSample *sample, const TfVerdict *verdicts, TfGroup first, TfGroup second,
                   const TfJoyParams *joy)
{
  const Work work = { sample, verdicts, joy, NULL };
  return compare (&work, NULL, first, second);
}

static void
add_pair (const Work *work, const char *kind, TfGroup first, TfGroup second)
{
  TfComparison row = compare (work, kind, first, second);
  if (!isnan (row.share_p) || (row.n_tilts[0] >= MIN_REGIONS && row.n_tilts[1] >= MIN_REGIONS))
    g_array_append_val (work->out->rows, row);
}

static void
add_hemispheres (const Work *work, int cycle)
{
  add_pair (work, "hemispheres", tf_group_of (cycle, 1), tf_group_of (cycle, -1));
}

static void
add_cycles (const Work *work)
{
  gboolean there[CYCLES] = { FALSE };
  int before = 0;
  for (guint k = 0; k < tf_sample_get_n (work->sample); k++)
    if (work->verdicts[k].cycle.sure)
      there[CLAMP (work->verdicts[k].cycle.number, 0, CYCLES - 1)] = TRUE;
  for (int cycle = 1; cycle < CYCLES; cycle++)
    {
      if (!there[cycle])
        continue;
      add_hemispheres (work, cycle);
      if (before != 0)
        add_pair (work, "cycles", tf_group_of (before, 0), tf_group_of (cycle, 0));
      before = cycle;
    }
  TfGroup odd = tf_group_of (0, 0), even = odd;
  odd.parity = TF_PARITY_ODD;
  even.parity = TF_PARITY_EVEN;
  add_pair (work, "odd-even", odd, even);
}

/* Of the rows with a verdict. */
static double
median_flux (const Work *work)
{
  guint n = 0;
  g_autofree double *fluxes = tf_new_many (double, tf_sample_get_n (work->sample) + 1);
  for (guint k = 0; k < tf_sample_get_n (work->sample); k++)
    {
      double flux = tf_sample_get (work->sample, k)->flux_mx;
      if (flux > 0.0 && work->verdicts[k].kind != TF_VERDICT_CANNOT_SAY)
        fluxes[n++] = flux;
    }
  return tf_median (fluxes, n);
}

static void
add_sizes (const Work *work)
{
  TfGroup low = tf_group_of (0, 0), high = low, region = low, ephemeral = low;
  region.size = 0;
  ephemeral.size = 1;
  add_pair (work, "ephemeral", ephemeral, region);
  work->out->divider_mx = median_flux (work);
  if (isnan (work->out->divider_mx))
    return;
  low.flux_to_mx = high.flux_from_mx = nextafter (work->out->divider_mx, HUGE_VAL);
  high.flux_to_mx = HUGE_VAL;
  add_pair (work, "sizes", low, high);
}

static void
adjust (TfComparisons *out)
{
  guint n = out->rows->len;
  g_autofree double *shares = g_new (double, n + 1), *slopes = g_new (double, n + 1);
  for (guint k = 0; k < n; k++)
    {
      shares[k] = g_array_index (out->rows, TfComparison, k).share_p;
      slopes[k] = g_array_index (out->rows, TfComparison, k).slope_p;
    }
  out->n_shares = tf_holm (shares, n, shares);
  out->n_slopes = tf_holm (slopes, n, slopes);
  for (guint k = 0; k < n; k++)
    {
      g_array_index (out->rows, TfComparison, k).share_p_holm = shares[k];
      g_array_index (out->rows, TfComparison, k).slope_p_holm = slopes[k];
    }
}

TfComparisons *
tf_compare (const TfSample *sample, const TfVerdict *verdicts, const TfJoyParams *joy)
{
  TfComparisons *out = g_new0 (TfComparisons, 1);
  out->rows = g_array_new (FALSE, FALSE, sizeof (TfComparison));
  const Work work = { sample, verdicts, joy, out };
  add_hemispheres (&work, 0);
  add_cycles (&work);
  add_sizes (&work);
  adjust (out);
  return out;
}

void
tf_comparisons_free (TfComparisons *comparisons)
{
  if (comparisons != NULL)
    g_array_unref (comparisons->rows);
  g_free (comparisons);
}
