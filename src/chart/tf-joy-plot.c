/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Joy's law: axis tilt against latitude: the regions fitted as dots, the median of each 5° with its
 * interval, the fit with its band, published relations as thin lines: whole for magnetograms, broken
 * for white light, each with the number that the legend has. */

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-laws-charts-private.h"

#define REACH 8.0

enum
{
  STEPS = 40 /* of a curve */
};

static gboolean
is_shown (const TfLawsCharts *charts, guint k)
{
  if (charts->all_relations)
    return TRUE;
  guint first = 0; /* the first of white light */
  while (tf_joy_relations[first].name != NULL && tf_joy_relations[first].magnetic)
    first++;
  return k == 0 || k == first;
}

static guint
count_relations (const TfLawsCharts *charts)
{
  guint n = 0;
  for (guint k = 0; tf_joy_relations[k].name != NULL; k++)
    n += is_shown (charts, k);
  return n;
}

static double
legend_height (const TfLawsCharts *charts, const TfChartStyle *style)
{
  return (2.6 + count_relations (charts)) * style->text_pt * 1.12;
}

static TfPlot
plot_of (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area)
{
  TfArea upper = area;
  upper.height = MAX (area.height - legend_height (charts, style), style->text_pt * 4);
  TfPlot plot = tf_plot_within (style, upper, 3.2, 2.2);
  plot.x0 = 0;
  plot.x1 = charts->lat_top;
  plot.y0 = -charts->tilt_top;
  plot.y1 = charts->tilt_top;
  return plot;
}

static void
draw_band (cairo_t *cr, const TfLawsCharts *charts, const TfPlot *plot, const TfChartStyle *style)
{
  const TfJoyFit *fit = &charts->fit;
  if (!isfinite (fit->slope_ci.low) || !isfinite (fit->slope_ci.high))
    return;
  /* a free line turns about the middle of the sample, where its height is known best */
  double pivot = isfinite (fit->intercept) ? plot->x1 / 2 : 0;
  double at = tf_laws_fit_tilt (charts, fit->slope, pivot);
  cairo_new_path (cr);
  for (int side = 0; side < 2; side++)
    for (int k = 0; k <= STEPS; k++)
      {
        double lat = plot->x1 * (side == 0 ? k : STEPS - k) / STEPS;
        double slope = side == 0 ? fit->slope_ci.low : fit->slope_ci.high;
        double tilt = isfinite (fit->intercept) ? at + slope * (lat - pivot)
                                                : tf_laws_fit_tilt (charts, slope, lat);
        cairo_line_to (cr, tf_plot_x (plot, lat), tf_plot_y (plot, tilt));
      }
  cairo_close_path (cr);
  tf_chart_set_alpha (cr, style->teal, style->contrast ? 0.35 : 0.25);
  cairo_fill (cr);
}

static void
draw_fit (cairo_t *cr, const TfLawsCharts *charts, const TfPlot *plot, const TfChartStyle *style)
{
  if (!isfinite (charts->fit.slope))
    return;
  cairo_new_path (cr);
  for (int step = 0; step <= STEPS; step++)
    {
      double lat = plot->x1 * step / STEPS;
      cairo_line_to (cr, tf_plot_x (plot, lat),
                     tf_plot_y (plot, tf_laws_fit_tilt (charts, charts->fit.slope, lat)));
    }
  tf_chart_set (cr, style->teal);
  cairo_set_line_width (cr, style->text_pt * 0.22);
  cairo_stroke (cr);
}

static void
set_line (cairo_t *cr, const TfChartStyle *style, gboolean magnetic)
{
  double dash = style->text_pt * 0.45;
  cairo_set_dash (cr, &dash, magnetic ? 0 : 1, 0);
  tf_chart_set (cr, style->faint);
  cairo_set_line_width (cr, style->text_pt * 0.09);
}

static void
draw_relations (cairo_t *cr, const TfLawsCharts *charts, const TfPlot *plot,
                const TfChartStyle *style)
{
  TfChartStyle small = *style;
  small.text_pt = style->text_pt * 0.8;
  guint number = 0;
  for (guint r = 0; tf_joy_relations[r].name != NULL; r++)
    {
      const TfJoyRelation *relation = &tf_joy_relations[r];
      if (!is_shown (charts, r))
        continue;
      cairo_new_path (cr);
      for (int step = 0; step <= STEPS; step++)
        {
          double lat = plot->x1 * step / STEPS;
          cairo_line_to (cr, tf_plot_x (plot, lat), tf_plot_y (plot, relation->tilt (lat)));
        }
      set_line (cr, style, relation->magnetic);
      cairo_stroke (cr);
      cairo_set_dash (cr, NULL, 0, 0);
      g_autofree char *label = g_strdup_printf ("%u", ++number);
      double lat = plot->x1 * (charts->all_relations ? 0.97 - 0.05 * (r % 5) : 0.97);
      tf_chart_text_on (cr, &small, tf_plot_x (plot, lat), tf_plot_y (plot, relation->tilt (lat)),
                        0.5, 0.5, style->ground, style->faint, label);
    }
}

static void
draw_bins (cairo_t *cr, const TfLawsCharts *charts, const TfPlot *plot, const TfChartStyle *style)
{
  for (guint b = 0; b < charts->lat_bins->len; b++)
    {
      const TfBin *bin = &g_array_index (charts->lat_bins, TfBin, b);
      if (bin->n < 3 || bin->from >= plot->x1)
        continue;
      tf_plot_whisker_y (cr, plot, style, bin->x, bin->median_ci.low, bin->median_ci.high,
                         style->text_pt * 0.22);
      tf_plot_median (cr, plot, style, bin->x, bin->median);
    }
}

static void
draw_legend (cairo_t *cr, const TfLawsCharts *charts, const TfChartStyle *style, TfArea area,
             double y)
{
  TfChartStyle small = *style;
  small.text_pt = style->text_pt * 0.86;
  g_autofree char *beyond
      = charts->beyond > 0 ? g_strdup_printf (_ (" · %u beyond the frame"), charts->beyond) : NULL;
  g_autofree char *first = g_strdup_printf (_ ("n %u%s · line, band: the fit, %.0f %%"), charts->tilts.n,
                                            beyond != NULL ? beyond : "", 100 * charts->joy.level);
  y += tf_plot_note (cr, &small, area, y, first);
  g_autofree char *second
      = g_strdup_printf (_ ("rings: medians of 5°, %.0f %%"), 100 * charts->joy.level);
  y += tf_plot_note (cr, &small, area, y, second);
  guint number = 0;
  for (guint r = 0; tf_joy_relations[r].name != NULL; r++)
    if (is_shown (charts, r))
      {
        double text = style->text_pt, middle = y + text * 0.62;
        cairo_new_path (cr);
        cairo_move_to (cr, area.x + text * 1.6, middle);
        cairo_line_to (cr, area.x + text * 4.2, middle);
        set_line (cr, style, tf_joy_relations[r].magnetic);
        cairo_stroke (cr);
        cairo_set_dash (cr, NULL, 0, 0);
        g_autofree char *label = g_strdup_printf ("%u", ++number);
        g_autofree char *name = g_strdup_printf (
            tf_joy_relations[r].magnetic ? _ ("%s, magnetic") : _ ("%s, white light"),
            tf_joy_relations[r].name);
        tf_chart_text (cr, &small, area.x + text * 0.4, y, 0, 0, style->faint, label);
        tf_chart_text (cr, &small, area.x + text * 4.8, y, 0, 0, style->faint, name);
        y += small.text_pt * 1.3;
      }
}

void
tf_joy_plot_draw (cairo_t *cr, const TfLawsCharts *charts, const TfChartStyle *style, TfArea area)
{
  TfPlot plot = plot_of (charts, style, area);
  double text = style->text_pt;
  cairo_save (cr);
  tf_plot_draw_y (cr, &plot, style, tf_plot_step (plot.y0, plot.y1, plot.plot.height, text * 3.2),
                  tf_tick_degrees, _ ("axis tilt, + leader equatorward"));
  tf_plot_draw_x (cr, &plot, style, tf_plot_step (plot.x0, plot.x1, plot.plot.width, text * 3.4),
                  tf_tick_degrees, NULL);
  tf_plot_cloud (cr, &plot, style, charts->tilts.xy, charts->tilts.n);
  tf_plot_clip (cr, &plot);
  draw_band (cr, charts, &plot, style);
  draw_relations (cr, charts, &plot, style);
  draw_fit (cr, charts, &plot, style);
  draw_bins (cr, charts, &plot, style);
  cairo_restore (cr);
  tf_chart_text (cr, style, plot.plot.x + plot.plot.width, plot.plot.y - text * 0.5, 1, 1,
                 style->faint, _ ("against |latitude|"));
  draw_legend (cr, charts, style, area, plot.plot.y + plot.plot.height + text * 2.0);
  cairo_restore (cr);
}

int
tf_joy_plot_hit (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area, double x,
                 double y, int after)
{
  TfPlot plot = plot_of (charts, style, area);
  int at = tf_plot_nearest (&plot, charts->tilts.xy, charts->tilts.n, x, y, REACH);
  return at < 0 ? -1 : (int)charts->tilts.row[at];
}

double *
tf_joy_plot_dup_places (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area, guint *n)
{
  TfPlot plot = plot_of (charts, style, area);
  return tf_laws_place_points (&charts->tilts, &plot, n);
}

char *
tf_joy_plot_dup_sign (const TfLawsCharts *charts, guint k)
{
  return tf_laws_charts_dup_row (charts, charts->tilts.row[k]);
}

char *
tf_joy_plot_dup_description (const TfLawsCharts *charts)
{
  const TfJoyFit *fit = &charts->fit;
  if (charts->tilts.n == 0)
    return g_strdup (_ ("No tilt to show."));
  GString *text = g_string_new (NULL);
  g_string_append_printf (text, _ ("%u tilts, median %.1f°. "), charts->tilts.n, fit->median_tilt_deg);
  if (isfinite (fit->slope))
    g_string_append_printf (text, _ ("Fit: slope %.3f %s, from %.3f to %.3f. "), fit->slope,
                            tf_joy_unit ((TfJoyForm)charts->joy.form), fit->slope_ci.low,
                            fit->slope_ci.high);
  for (guint b = 0; b < charts->lat_bins->len; b++)
    {
      const TfBin *bin = &g_array_index (charts->lat_bins, TfBin, b);
      if (bin->n >= 3)
        g_string_append_printf (text, _ ("%.0f° to %.0f°: median %.1f°, n %u. "), bin->from,
                                bin->to, bin->median, bin->n);
    }
  g_string_truncate (text, text->len - 1);
  return g_string_free (text, FALSE);
}

double
tf_joy_plot_height (const TfLawsCharts *charts, const TfChartStyle *style, double width)
{
  return MIN (width * 0.78, style->text_pt * 34) + legend_height (charts, style);
}

gboolean
tf_joy_plot_has (const TfLawsCharts *charts)
{
  return charts->tilts.n > 0;
}
