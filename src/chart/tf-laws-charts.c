/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-laws-charts.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-constants.h"
#include "tf-laws-charts-private.h"

#define LAT_STEP        5.0
#define SEPARATION_STEP 1.0
#define TILT_STEP       5.0

const TfLawsChart tf_laws_chart_table[] = {
  { "hale", N_ ("Hale: share that breaks"), tf_hale_bars_draw, tf_hale_bars_hit,
    tf_hale_bars_dup_description, tf_hale_bars_height, tf_hale_bars_has },
  { "joy", N_ ("Joy: axis tilt against latitude"), tf_joy_plot_draw, tf_joy_plot_hit,
    tf_joy_plot_dup_description, tf_joy_plot_height, tf_joy_plot_has },
  { "tilts", N_ ("Axis tilts"), tf_tilt_bars_draw, tf_tilt_bars_hit, tf_tilt_bars_dup_description,
    tf_tilt_bars_height, tf_tilt_bars_has },
  { "separation", N_ ("Scatter about Joy’s law against separation"), tf_separation_plot_draw,
    tf_separation_plot_hit, tf_separation_plot_dup_description, tf_separation_plot_height,
    tf_separation_plot_has },
  { "emergence", N_ ("Since emergence"), tf_emergence_plot_draw, tf_emergence_plot_hit,
    tf_emergence_plot_dup_description, tf_emergence_plot_height, tf_emergence_plot_has },
  { "wings", N_ ("Wings of this study"), tf_wings_figure_draw, tf_wings_figure_hit,
    tf_wings_figure_dup_description, tf_wings_figure_height, tf_wings_figure_has },
  { NULL },
};

/* -- making ---------------------------------------------------------------------------------- */

static TfJoyFit
find_fit (const TfLawsFacts *facts)
{
  for (guint k = 0; facts->joy != NULL && k < facts->joy->len; k++)
    {
      const TfJoyFit *fit = &g_array_index (facts->joy, TfJoyFit, k);
      if (fit->cycle == 0 && fit->hemisphere == 0)
        return *fit;
    }
  TfJoyFit none = { .slope = NAN, .intercept = NAN, .scatter_deg = NAN };
  none.slope_ci = none.intercept_ci = (TfInterval){ NAN, NAN };
  return none;
}

double
tf_laws_fit_tilt (const TfLawsCharts *charts, double slope, double abs_lat_deg)
{
  double sine = sin (abs_lat_deg * TF_DEG);
  switch (charts->joy.form)
    {
    case TF_JOY_SINE:
      return slope * sine;
    case TF_JOY_SINE_OF_TILT:
      return asin (CLAMP (slope * sine, -1.0, 1.0)) / TF_DEG;
    case TF_JOY_LINEAR_FREE:
      return slope * abs_lat_deg + charts->fit.intercept;
    case TF_JOY_LINEAR:
    default:
      return slope * abs_lat_deg;
    }
}

/* Cycles by hemisphere, then all; a table of one cycle has no row over both. */
static void
take_hale (TfLawsCharts *charts, const TfLawsFacts *facts)
{
  charts->hale = g_array_new (FALSE, FALSE, sizeof (TfHaleRow));
  charts->all = (TfHaleRow){ .share = NAN };
  for (guint k = 0; facts->hale != NULL && k < facts->hale->len; k++)
    {
      const TfHaleRow *row = &g_array_index (facts->hale, TfHaleRow, k);
      if (row->cycle == 0 && row->hemisphere == 0)
        charts->all = *row;
      if ((row->hemisphere != 0 || row->cycle == 0) && row->n + row->cannot_say > 0)
        g_array_append_vals (charts->hale, row, 1);
    }
}

static void
points_init (TfChartPoints *points, guint n)
{
  points->n = 0;
  points->xy = g_new (double, 2 * n + 2);
  points->row = g_new (guint, n + 1);
}

static void
points_add (TfChartPoints *points, double x, double y, guint row)
{
  points->xy[2 * points->n] = x;
  points->xy[2 * points->n + 1] = y;
  points->row[points->n++] = row;
}

static void
take_row (TfLawsCharts *charts, const TfLawsFacts *facts, guint k, double *tilts)
{
  const TfSampleRow *row = tf_sample_get (facts->sample, k);
  const TfVerdict *verdict = &facts->verdicts[k];
  charts->rows[k] = (TfChartRow){ (gint8)verdict->kind, (gint8)verdict->cycle.number,
                                  row->lat_deg > 0 ? 1 : row->lat_deg < 0 ? -1 : 0 };
  double tilt = row->axis_tilt_deg;
  if (isfinite (tilt))
    {
      int bin = CLAMP ((int)floor ((tilt + 90) / TILT_STEP), 0, TF_TILT_BINS - 1);
      charts->tilt_counts[verdict->kind][bin]++;
      tilts[charts->n_tilts++] = tilt;
    }
  if (!tf_joy_uses (row, verdict, &facts->joy_params))
    return;
  double lat = fabs (row->lat_deg);
  points_add (&charts->tilts, lat, tilt, k);
  if (isfinite (row->separation_deg) && isfinite (charts->fit.slope))
    points_add (&charts->residuals, row->separation_deg,
                tilt - tf_laws_fit_tilt (charts, charts->fit.slope, lat), k);
}

static void
split (const TfChartPoints *points, double **x, double **y)
{
  *x = g_new (double, points->n + 1);
  *y = g_new (double, points->n + 1);
  for (guint k = 0; k < points->n; k++)
    {
      (*x)[k] = points->xy[2 * k];
      (*y)[k] = points->xy[2 * k + 1];
    }
}

static GArray *
bin_points (const TfChartPoints *points, double to, double step, double level)
{
  g_autofree double *x = NULL, *y = NULL;
  split (points, &x, &y);
  return tf_bins (x, y, points->n, 0, to, step, level);
}

/* The frame of tilts: the smallest that leaves one in a hundred outside. */
static void
frame_tilts (TfLawsCharts *charts)
{
  static const double tops[] = { 45, 60, 90 };
  double highest = 0;
  for (guint k = 0; k < charts->tilts.n; k++)
    highest = MAX (highest, charts->tilts.xy[2 * k]);
  charts->lat_top = CLAMP (ceil ((highest + 0.01) / 10) * 10, 30, 90);
  for (guint t = 0; t < G_N_ELEMENTS (tops); t++)
    {
      charts->tilt_top = tops[t];
      charts->beyond = 0;
      for (guint k = 0; k < charts->tilts.n; k++)
        charts->beyond += fabs (charts->tilts.xy[2 * k + 1]) > tops[t];
      if (charts->beyond * 100 <= charts->tilts.n)
        return;
    }
}

static void
frame_separations (TfLawsCharts *charts)
{
  g_autofree double *x = NULL, *y = NULL;
  split (&charts->residuals, &x, &y);
  double top = tf_median (x, charts->residuals.n) * 2.5;
  charts->separation_top = isfinite (top) ? CLAMP (ceil (top), 6, 20) : 12;
}

static void
take_emergence (TfLawsCharts *charts, const TfEmergence *emergence)
{
  for (int side = 0; side < TF_EMERGENCE_SIDES; side++)
    charts->ages[side] = emergence != NULL ? g_array_copy (emergence->ages[side])
                                           : g_array_new (FALSE, FALSE, sizeof (TfEmergenceAge));
  if (emergence == NULL)
    return;
  charts->emergence = emergence->params;
  charts->n_born = emergence->passages;
}

static double
mean_of (const double *values, guint n)
{
  double sum = 0;
  for (guint k = 0; k < n; k++)
    sum += values[k];
  return n > 0 ? sum / n : NAN;
}

TfLawsCharts *
tf_laws_charts_new (const TfLawsFacts *facts)
{
  g_return_val_if_fail (facts != NULL && facts->sample != NULL && facts->verdicts != NULL, NULL);
  TfLawsCharts *charts = g_atomic_rc_box_new0 (TfLawsCharts);
  charts->n = tf_sample_get_n (facts->sample);
  charts->rows = g_new (TfChartRow, charts->n + 1);
  charts->level = facts->hale_params.level;
  charts->joy = facts->joy_params;
  charts->all_relations = facts->all_relations;
  charts->fit = find_fit (facts);
  take_hale (charts, facts);
  take_emergence (charts, facts->emergence);
  tf_wings_figure_make (charts, facts);
  points_init (&charts->tilts, charts->n);
  points_init (&charts->residuals, charts->n);
  g_autofree double *tilts = g_new (double, charts->n + 1);
  for (guint k = 0; k < charts->n; k++)
    take_row (charts, facts, k, tilts);
  charts->mean_tilt = mean_of (tilts, charts->n_tilts);
  charts->median_tilt = tf_median (tilts, charts->n_tilts);
  frame_tilts (charts);
  frame_separations (charts);
  charts->lat_bins = bin_points (&charts->tilts, 90, LAT_STEP, charts->joy.level);
  charts->separation_bins = bin_points (&charts->residuals, charts->separation_top, SEPARATION_STEP,
                                        charts->joy.level);
  return charts;
}

TfLawsCharts *
tf_laws_charts_moved (TfLawsCharts *charts, const TfLawsFacts *facts)
{
  g_return_val_if_fail (charts != NULL && facts != NULL, NULL);
  TfLawsCharts *moved = g_atomic_rc_box_new0 (TfLawsCharts);
  *moved = *charts;
  moved->before = tf_laws_charts_ref (charts);
  moved->fit = find_fit (facts);
  take_hale (moved, facts);
  moved->divides = facts->divides != NULL ? tf_divides_ref (facts->divides) : NULL;
  moved->wings.divides = moved->divides;
  moved->wings.plain = facts->plain;
  return moved;
}

TfLawsCharts *
tf_laws_charts_ref (TfLawsCharts *charts)
{
  return g_atomic_rc_box_acquire (charts);
}

static void
charts_clear (gpointer data)
{
  TfLawsCharts *charts = data;
  if (charts->divides != NULL)
    tf_divides_unref (charts->divides);
  g_array_unref (charts->hale);
  if (charts->before != NULL)
    {
      tf_laws_charts_unref (charts->before);
      return;
    }
  g_free (charts->rows);
  g_free (charts->dots);
  for (int side = 0; side < TF_EMERGENCE_SIDES; side++)
    g_array_unref (charts->ages[side]);
  g_array_unref (charts->lat_bins);
  g_array_unref (charts->separation_bins);
  g_free (charts->tilts.xy);
  g_free (charts->tilts.row);
  g_free (charts->residuals.xy);
  g_free (charts->residuals.row);
}

void
tf_laws_charts_unref (TfLawsCharts *charts)
{
  if (charts != NULL)
    g_atomic_rc_box_release_full (charts, charts_clear);
}
