/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-laws-charts.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-constants.h"
#include "tf-laws-charts-private.h"

#define LAT_STEP        5.0
#define SEPARATION_STEP 1.0
#define TILT_STEP       5.0

const TfLawsChart tf_laws_chart_table[] = {
  { "hale", N_ ("Hale: share that breaks"), tf_hale_bars_draw, tf_hale_bars_hit, tf_hale_bars_dup_places, tf_hale_bars_dup_sign,
    tf_hale_bars_dup_description, tf_hale_bars_height, tf_hale_bars_has, FALSE },
  { "joy", N_ ("Joy: axis tilt against latitude"), tf_joy_plot_draw, tf_joy_plot_hit, tf_joy_plot_dup_places, tf_joy_plot_dup_sign,
    tf_joy_plot_dup_description, tf_joy_plot_height, tf_joy_plot_has, TRUE },
  { "tilts", N_ ("Axis tilts"), tf_tilt_bars_draw, tf_tilt_bars_hit, tf_tilt_bars_dup_places, tf_tilt_bars_dup_sign,
    tf_tilt_bars_dup_description,
    tf_tilt_bars_height, tf_tilt_bars_has, TRUE },
  { "separation", N_ ("Scatter about Joy’s law against separation"), tf_separation_plot_draw,
    tf_separation_plot_hit, tf_separation_plot_dup_places, tf_separation_plot_dup_sign,
    tf_separation_plot_dup_description, tf_separation_plot_height,
    tf_separation_plot_has, TRUE },
  { "emergence", N_ ("Since emergence"), tf_emergence_plot_draw, tf_emergence_plot_hit, tf_emergence_plot_dup_places, tf_emergence_plot_dup_sign,
    tf_emergence_plot_dup_description, tf_emergence_plot_height, tf_emergence_plot_has, TRUE },
  { "wings", N_ ("Wings of this study"), tf_wings_figure_draw, tf_wings_figure_hit, tf_wings_figure_dup_places, tf_wings_figure_dup_sign,
    tf_wings_figure_dup_description, tf_wings_figure_height, tf_wings_figure_has, TRUE },
  { NULL },
};

const TfLawsChart *
tf_laws_chart_find (const char *name)
{
  for (const TfLawsChart *chart = tf_laws_chart_table; chart->name != NULL; chart++)
    if (strcmp (chart->name, name) == 0)
      return chart;
  return NULL;
}

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
  charts->rows[k] = (TfChartRow){ (gint8)verdict->kind,
                                  (gint8)verdict->cycle.number,
                                  row->lat_deg > 0 ? 1 : row->lat_deg < 0 ? -1 : 0,
                                  (float)row->lat_deg,
                                  (float)row->axis_tilt_deg,
                                  (float)row->separation_deg,
                                  (float)tf_time_year (row->time) };
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

/* The pick of each passage stands for it. */
static void
take_sights (TfLawsCharts *charts, const TfEmergence *emergence, const TfSample *sample)
{
  g_autoptr (GHashTable) picks = g_hash_table_new (NULL, NULL);
  for (guint k = 0; emergence->sights->len > 0 && k < charts->n; k++)
    g_hash_table_insert (picks, GUINT_TO_POINTER (tf_sample_get (sample, k)->passage),
                         GUINT_TO_POINTER (k + 1));
  for (guint k = 0; k < emergence->sights->len; k++)
    {
      const TfEmergenceSight *sight = &g_array_index (emergence->sights, TfEmergenceSight, k);
      guint row = GPOINTER_TO_UINT (
          g_hash_table_lookup (picks, GUINT_TO_POINTER (sight->passage)));
      const TfChartSight seen = { sight->age, row - 1 };
      if (row > 0)
        g_array_append_val (charts->seen, seen);
    }
}

static void
take_emergence (TfLawsCharts *charts, const TfEmergence *emergence, const TfSample *sample)
{
  charts->seen = g_array_new (FALSE, FALSE, sizeof (TfChartSight));
  for (int side = 0; side < TF_EMERGENCE_SIDES; side++)
    charts->ages[side] = emergence != NULL ? g_array_copy (emergence->ages[side])
                                           : g_array_new (FALSE, FALSE, sizeof (TfEmergenceAge));
  if (emergence == NULL)
    return;
  charts->emergence = emergence->params;
  charts->n_born = emergence->passages;
  take_sights (charts, emergence, sample);
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
  take_emergence (charts, facts->emergence, facts->sample);
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
  g_array_unref (charts->seen);
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

/* -- signs, one after the other ----------------------------------------------------------------- */

double *
tf_laws_place_points (const TfChartPoints *points, const TfPlot *plot, guint *n)
{
  double *xy = g_new (double, 2 * points->n + 2);
  for (guint k = 0; k < points->n; k++)
    {
      double x = points->xy[2 * k], y = points->xy[2 * k + 1];
      gboolean inside = x >= plot->x0 && x <= plot->x1 && y >= plot->y0 && y <= plot->y1;
      xy[2 * k] = inside ? tf_plot_x (plot, x) : NAN;
      xy[2 * k + 1] = tf_plot_y (plot, y);
    }
  *n = points->n;
  return xy;
}

/* How far along the direction, and across it: signs at one place along are taken in order across. */
static void
turn (TfStep step, double x, double y, double *along, double *across)
{
  gboolean flat = step == TF_STEP_LEFT || step == TF_STEP_RIGHT;
  double sign = step == TF_STEP_LEFT || step == TF_STEP_UP ? -1 : 1;
  *along = sign * (flat ? x : y);
  *across = sign * (flat ? y : x);
}

static gboolean
is_before (double along_a, double across_a, double along_b, double across_b)
{
  return along_a < along_b || (!(along_a > along_b) && across_a < across_b);
}

int
tf_laws_step (const double *xy, guint n, TfStep step, double x, double y, double least)
{
  double from_along = -INFINITY, from_across = -INFINITY, best_along = INFINITY, best_across = 0;
  int found = -1;
  if (isfinite (x))
    turn (step, x, y, &from_along, &from_across);
  from_along += least;
  for (guint k = 0; k < n; k++)
    {
      double along, across;
      turn (step, xy[2 * k], xy[2 * k + 1], &along, &across);
      if (isnan (xy[2 * k]) || !is_before (from_along, from_across, along, across)
          || !is_before (along, across, best_along, best_across))
        continue;
      best_along = along;
      best_across = across;
      found = (int)k;
    }
  return found;
}

char *
tf_laws_charts_dup_row (const TfLawsCharts *charts, guint row)
{
  static const char *const verdicts[]
      = { N_ ("cannot be said"), N_ ("keeps Hale’s law"), N_ ("breaks Hale’s law") };
  g_return_val_if_fail (charts != NULL && row < charts->n, NULL);
  const TfChartRow *r = &charts->rows[row];
  GString *text = g_string_new (NULL);
  g_string_append_printf (text, _ ("%.2f, latitude %+.1f°"), (double)r->year, (double)r->lat);
  if (isfinite (r->tilt))
    g_string_append_printf (text, _ (", tilt %+.1f°"), (double)r->tilt);
  if (isfinite (r->separation))
    g_string_append_printf (text, _ (", separation %.1f°"), (double)r->separation);
  if (r->cycle > 0 && !charts->wings.plain)
    g_string_append_printf (text, _ (", cycle %d, %s"), r->cycle, _ (verdicts[r->kind]));
  return g_string_free (text, FALSE);
}
