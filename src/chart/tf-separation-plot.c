/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Scatter about Joy's law against the separation of the poles (Fisher, Fan & Howard 1995): what is
 * left of each tilt when the fit is taken away, its scatter in steps of one degree with an interval,
 * and the scatter that the dial expects. */

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-laws-charts-private.h"

#define REACH 8.0

static TfPlot
plot_of (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area)
{
  TfArea upper = area;
  upper.height = MAX (area.height - style->text_pt * 3.6, style->text_pt * 4);
  TfPlot plot = tf_plot_within (style, upper, 3.2, 2.2);
  plot.x0 = 0;
  plot.x1 = charts->separation_top;
  plot.y0 = -90;
  plot.y1 = 90;
  return plot;
}

static void
draw_expected (cairo_t *cr, const TfPlot *plot, const TfChartStyle *style)
{
  double dash = style->text_pt * 0.4;
  cairo_new_path (cr);
  for (int side = 1; side >= -1; side -= 2)
    {
      cairo_new_sub_path (cr);
      for (double s = 0.05; s <= plot->x1; s += 0.05)
        {
          double tilt, scatter;
          tf_joy_expected (15, s, &tilt, &scatter);
          if (isfinite (scatter))
            cairo_line_to (cr, tf_plot_x (plot, s), tf_plot_y (plot, side * scatter));
        }
    }
  cairo_set_dash (cr, &dash, 1, 0);
  tf_chart_set (cr, style->teal);
  cairo_set_line_width (cr, style->text_pt * 0.13);
  cairo_stroke (cr);
  cairo_set_dash (cr, NULL, 0, 0);
}

static void
draw_scatter (cairo_t *cr, const TfLawsCharts *charts, const TfPlot *plot,
              const TfChartStyle *style)
{
  for (guint b = 0; b < charts->separation_bins->len; b++)
    {
      const TfBin *bin = &g_array_index (charts->separation_bins, TfBin, b);
      for (int side = 1; side >= -1 && bin->n >= 5; side -= 2)
        {
          tf_plot_whisker_y (cr, plot, style, bin->x, side * bin->scatter_ci.low,
                             side * bin->scatter_ci.high, style->text_pt * 0.2);
          tf_plot_median (cr, plot, style, bin->x, side * bin->scatter);
        }
    }
}

void
tf_separation_plot_draw (cairo_t *cr, const TfLawsCharts *charts, const TfChartStyle *style,
                         TfArea area)
{
  if (!tf_separation_plot_has (charts))
    {
      tf_chart_text (cr, style, area.x + area.width / 2, area.y + area.height / 2, 0.5, 0.5,
                     style->faint, _ ("No fit, or no separations."));
      return;
    }
  TfPlot plot = plot_of (charts, style, area);
  double text = style->text_pt;
  TfChartStyle small = *style;
  small.text_pt = text * 0.86;
  cairo_save (cr);
  tf_plot_draw_y (cr, &plot, style, 30, tf_tick_degrees, _ ("tilt less the fit"));
  tf_plot_draw_x (cr, &plot, style, tf_plot_step (0, plot.x1, plot.plot.width, text * 3),
                  tf_tick_degrees, NULL);
  tf_plot_cloud (cr, &plot, style, charts->residuals.xy, charts->residuals.n);
  tf_plot_clip (cr, &plot);
  draw_expected (cr, &plot, style);
  draw_scatter (cr, charts, &plot, style);
  cairo_restore (cr);
  tf_chart_text (cr, style, plot.plot.x + plot.plot.width, plot.plot.y - text * 0.5, 1, 1,
                 style->faint, _ ("against separation"));
  double y = plot.plot.y + plot.plot.height + text * 2.0;
  g_autofree char *first
      = g_strdup_printf (_ ("n %u · rings: ± scatter (1.4826 MAD) of 1°, %.0f %%"),
                         charts->residuals.n, 100 * charts->joy.level);
  y += tf_plot_note (cr, &small, area, y, first);
  tf_plot_note (cr, &small, area, y, _ ("broken: what the dial expects (Mount Wilson)"));
  cairo_restore (cr);
}

int
tf_separation_plot_hit (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area,
                        double x, double y, int after)
{
  TfPlot plot = plot_of (charts, style, area);
  int at = tf_plot_nearest (&plot, charts->residuals.xy, charts->residuals.n, x, y, REACH);
  return at < 0 ? -1 : (int)charts->residuals.row[at];
}

double *
tf_separation_plot_dup_places (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area, guint *n)
{
  TfPlot plot = plot_of (charts, style, area);
  return tf_laws_place_points (&charts->residuals, &plot, n);
}

char *
tf_separation_plot_dup_sign (const TfLawsCharts *charts, guint k)
{
  return tf_laws_charts_dup_row (charts, charts->residuals.row[k]);
}

char *
tf_separation_plot_dup_description (const TfLawsCharts *charts)
{
  if (!tf_separation_plot_has (charts))
    return g_strdup (_ ("No fit, or no separations."));
  GString *text = g_string_new (_ ("Scatter about the fit: "));
  for (guint b = 0; b < charts->separation_bins->len; b++)
    {
      const TfBin *bin = &g_array_index (charts->separation_bins, TfBin, b);
      if (bin->n >= 5)
        g_string_append_printf (text, _ ("%.0f° to %.0f°: %.0f°, n %u. "), bin->from, bin->to,
                                bin->scatter, bin->n);
    }
  return g_string_free (text, FALSE);
}

double
tf_separation_plot_height (const TfLawsCharts *charts, const TfChartStyle *style, double width)
{
  return MIN (width * 0.7, style->text_pt * 32) + style->text_pt * 3.6;
}

gboolean
tf_separation_plot_has (const TfLawsCharts *charts)
{
  return charts->residuals.n > 0;
}
