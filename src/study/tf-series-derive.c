/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* What follows from a series: the greatest flux, how fast it came and went, and the tilt at the
 * moments that studies ask about. Only marks that stand for their frame, away from the limb and with
 * the series' floor have a part in it. */

#include "tf-series-private.h"

#include <math.h>

#include "tf-held.h"
#include "tf-line.h"

static TfFigure
no_figure (const char *reason)
{
  return (TfFigure){ NAN, NAN, TF_TIME_UNKNOWN, TF_TIME_UNKNOWN, 0, reason };
}

static const TfSeriesPoint *
point (const GPtrArray *used, guint k)
{
  return g_ptr_array_index (used, k);
}

static GPtrArray *
list_used (const TfSeries *series)
{
  GPtrArray *used = g_ptr_array_new ();
  const guint out = TF_POINT_LIMB | TF_POINT_NEAR_LIMB | TF_POINT_OTHER_FLOOR | TF_POINT_SECOND;
  for (guint k = 0; k < series->points->len; k++)
    {
      TfSeriesPoint *p = &g_array_index (series->points, TfSeriesPoint, k);
      if ((p->flags & out) == 0 && tf_time_is_known (p->time))
        g_ptr_array_add (used, p);
    }
  return used;
}

/* -- flux ----------------------------------------------------------------------------------- */
static int
find_greatest (const GPtrArray *used)
{
  int best = -1;
  for (guint k = 0; k < used->len; k++)
    if (!isnan (point (used, k)->flux_mx)
        && (best < 0 || point (used, k)->flux_mx > point (used, (guint)best)->flux_mx))
      best = (int)k;
  return best;
}

/* Least squares on the flux of marks first..last, Mx/h. */
static TfFigure
slope (const GPtrArray *used, guint first, guint last)
{
  guint n = 0;
  g_autofree double *hours = g_new (double, last - first + 1);
  g_autofree double *flux = g_new (double, last - first + 1);
  for (guint k = first; k <= last; k++)
    {
      if (isnan (point (used, k)->flux_mx))
        continue;
      hours[n] = point (used, k)->days * 24.0;
      flux[n++] = point (used, k)->flux_mx;
    }
  TfLine line = tf_line_methods[0].fit (hours, flux, n);
  return (TfFigure){ line.slope, line.slope_sd, point (used, first)->time, point (used, last)->time,
                     n,          NULL };
}

/* From the last mark at or below the low share before the peak, else the first, to the first at or
 * above the high share: @way 1. Decay is the same read backwards: -1. */
static TfFigure
rate (const GPtrArray *used, int peak, int way, const TfSeriesParams *params, const char *reason)
{
  double greatest = peak >= 0 ? point (used, (guint)peak)->flux_mx : NAN;
  int end = way > 0 ? 0 : (int)used->len - 1, far = peak, high = peak;
  if (peak < 0)
    return no_figure (reason);
  for (int k = peak; k != end - way; k -= way)
    {
      double share = point (used, (guint)k)->flux_mx / greatest;
      far = k;
      if (share >= params->high)
        high = k;
      if (share <= params->low)
        break;
    }
  guint first = (guint)MIN (far, high), last = (guint)MAX (far, high);
  if (last - first < 2 || point (used, (guint)far)->flux_mx > (1.0 - params->change) * greatest)
    return no_figure (reason);
  return slope (used, first, last);
}

static void
derive_flux (TfDerived *d, const GPtrArray *used, int peak, const TfSeriesParams *params)
{
  d->greatest_flux = no_figure ("series-few-marks");
  d->emergence = rate (used, peak, 1, params, "series-no-rise");
  d->decay = rate (used, peak, -1, params, "series-no-decay");
  if (peak < 0)
    return;
  const TfSeriesPoint *p = point (used, (guint)peak);
  d->greatest_flux = (TfFigure){ p->flux_mx, p->flux_sigma_mx, p->time, p->time, 1, NULL };
  d->bracketed = peak > 0 && peak + 1 < (int)used->len;
}

/* -- tilt ----------------------------------------------------------------------------------- */
static TfFigure
tilt_at (const TfSeriesPoint *p)
{
  if (isnan (p->axis_tilt_deg))
    return no_figure ("series-no-tilt");
  return (TfFigure){ p->axis_tilt_deg, p->tilt_sigma_deg, p->time, p->time, 1, NULL };
}

static void
derive_meridian (TfDerived *d, const GPtrArray *used, const TfSeriesParams *params)
{
  const TfSeriesPoint *nearest = NULL;
  for (guint k = 0; k < used->len; k++)
    {
      const TfSeriesPoint *p = point (used, k);
      if (fabs (p->cmd_deg) <= params->meridian_deg && !isnan (p->axis_tilt_deg)
          && (nearest == NULL || fabs (p->cmd_deg) < fabs (nearest->cmd_deg)))
        nearest = p;
    }
  d->meridian_cmd_deg = nearest != NULL ? nearest->cmd_deg : NAN;
  d->tilt_at_meridian = nearest != NULL ? tilt_at (nearest) : no_figure ("series-no-meridian");
}

static void
derive_mean (TfDerived *d, const GPtrArray *used, const TfSeriesParams *params)
{
  guint n = 0;
  g_autofree double *tilts = g_new (double, used->len + 1);
  g_autofree double *days = g_new (double, used->len + 1);
  g_autofree double *floors = g_new (double, used->len + 1);
  d->tilt_mean = no_figure ("series-no-tilt");
  d->tilt_scatter_deg = d->n_effective = d->persistence_days = d->tilt_floor_deg = NAN;
  for (guint k = 0; k < used->len; k++)
    {
      const TfSeriesPoint *p = point (used, k);
      if (isnan (p->axis_tilt_deg) || fabs (p->cmd_deg) > params->mean_cmd_deg)
        continue;
      if (n == 0)
        d->tilt_mean.from = p->time;
      d->tilt_mean.to = p->time;
      tilts[n] = p->axis_tilt_deg;
      floors[n] = p->row->measure.tilt_terms.floor;
      days[n++] = p->days;
    }
  if (n == 0)
    return;
  d->tilt_mean.n = n;
  d->tilt_mean.reason = NULL;
  d->tilt_mean.value = tf_series_mean (tilts, days, n, &d->tilt_mean.sigma, &d->tilt_scatter_deg,
                                       &d->n_effective, &d->persistence_days);
  d->tilt_floor_deg = tf_median (floors, n);
}

/* -- verdict -------------------------------------------------------------------------------- */
static void
derive_verdict (TfDerived *d, const GPtrArray *used, int peak)
{
  g_autoptr (TfSample) marks = tf_sample_new ();
  g_autoptr (TfSample) pick = tf_sample_new ();
  g_autofree TfVerdict *verdicts = g_new0 (TfVerdict, used->len + 1);
  d->verdict = (TfVerdict){ .kind = TF_VERDICT_CANNOT_SAY, .reason = "hale-no-place" };
  if (peak < 0)
    return;
  for (guint k = 0; k < used->len; k++)
    {
      TfSampleRow row;
      tf_study_row (point (used, k)->row, &row);
      row.passage = 1;
      tf_sample_add (marks, &row);
      verdicts[k] = point (used, k)->verdict;
      if ((int)k == peak)
        tf_sample_add (pick, &row);
    }
  d->verdict = verdicts[peak];
  g_autofree TfHeld *held = tf_held (marks, verdicts, pick, &d->verdict);
  d->held = held[0].held;
  d->of = held[0].of;
}

void
tf_series_derive (TfSeries *series)
{
  TfDerived *d = &series->derived;
  g_autoptr (GPtrArray) used = list_used (series);
  int peak = find_greatest (used);
  derive_flux (d, used, peak, &series->params);
  d->tilt_at_greatest
      = peak >= 0 ? tilt_at (point (used, (guint)peak)) : no_figure ("series-few-marks");
  derive_meridian (d, used, &series->params);
  derive_mean (d, used, &series->params);
  derive_verdict (d, used, peak);
}
