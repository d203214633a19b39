/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* How the axis tilts are spread: counts of 5° with the error of a count, those that break Hale's law
 * struck through, mean and median as lines. */

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-laws-charts-private.h"

static guint
count_of (const TfLawsCharts *charts, guint bin)
{
  return charts->tilt_counts[TF_VERDICT_CANNOT_SAY][bin] + charts->tilt_counts[TF_VERDICT_KEEPS][bin]
         + charts->tilt_counts[TF_VERDICT_BREAKS][bin];
}

static guint
bin_of (float tilt)
{
  return (guint)CLAMP ((int)floor (((double)tilt + 90) * TF_TILT_BINS / 180.0), 0, TF_TILT_BINS - 1);
}

static TfPlot
plot_of (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area)
{
  TfArea upper = area;
  upper.height = MAX (area.height - style->text_pt * 3.6, style->text_pt * 4);
  TfPlot plot = tf_plot_within (style, upper, 4.2, 2.2);
  double most = 4;
  for (guint b = 0; b < TF_TILT_BINS; b++)
    most = fmax (most, count_of (charts, b) + sqrt (count_of (charts, b)));
  plot.x0 = -90;
  plot.x1 = 90;
  plot.y0 = 0;
  plot.y1 = most * 1.05;
  return plot;
}

/* Strokes across, so that what breaks is told from the rest in grey. */
static void
strike (cairo_t *cr, const TfChartStyle *style, double x, double y, double width, double height)
{
  double gap = style->text_pt * 0.45;
  cairo_save (cr);
  cairo_rectangle (cr, x, y, width, height);
  cairo_clip (cr);
  for (double d = -height; d < width; d += gap)
    {
      cairo_move_to (cr, x + d, y + height);
      cairo_line_to (cr, x + d + height, y);
    }
  tf_chart_set (cr, style->ground);
  cairo_set_line_width (cr, style->text_pt * 0.1);
  cairo_stroke (cr);
  cairo_restore (cr);
}

static void
draw_bin (cairo_t *cr, const TfLawsCharts *charts, const TfPlot *plot, const TfChartStyle *style,
          guint b)
{
  guint all = count_of (charts, b), breaks = charts->tilt_counts[TF_VERDICT_BREAKS][b];
  if (all == 0)
    return;
  double from = -90 + b * 180.0 / TF_TILT_BINS, to = from + 180.0 / TF_TILT_BINS;
  double x = tf_plot_x (plot, from), width = tf_plot_x (plot, to) - x - style->text_pt * 0.06;
  double foot = tf_plot_y (plot, 0), red = tf_plot_y (plot, breaks), top = tf_plot_y (plot, all);
  tf_chart_set_alpha (cr, style->slate, 0.55);
  cairo_rectangle (cr, x, top, width, red - top);
  cairo_fill (cr);
  if (breaks > 0)
    {
      tf_chart_set (cr, style->breaks);
      cairo_rectangle (cr, x, red, width, foot - red);
      cairo_fill (cr);
      strike (cr, style, x, red, width, foot - red);
    }
  tf_plot_whisker_y (cr, plot, style, (from + to) / 2, all - sqrt (all), all + sqrt (all),
                     style->text_pt * 0.12);
}

static void
draw_line (cairo_t *cr, const TfPlot *plot, const TfChartStyle *style, double x, gboolean broken)
{
  double dash = style->text_pt * 0.4;
  if (!isfinite (x))
    return;
  cairo_new_path (cr);
  cairo_set_dash (cr, &dash, broken, 0);
  cairo_move_to (cr, tf_plot_x (plot, x), plot->plot.y);
  cairo_line_to (cr, tf_plot_x (plot, x), plot->plot.y + plot->plot.height);
  tf_chart_set (cr, style->teal);
  cairo_set_line_width (cr, style->text_pt * 0.16);
  cairo_stroke (cr);
  cairo_set_dash (cr, NULL, 0, 0);
}

void
tf_tilt_bars_draw (cairo_t *cr, const TfLawsCharts *charts, const TfChartStyle *style, TfArea area)
{
  TfPlot plot = plot_of (charts, style, area);
  double text = style->text_pt;
  TfChartStyle small = *style;
  small.text_pt = text * 0.86;
  cairo_save (cr);
  tf_plot_draw_y (cr, &plot, style,
                  fmax (tf_plot_step (0, plot.y1, plot.plot.height, text * 2.4), 1), tf_tick_plain,
                  _ ("regions"));
  for (guint b = 0; b < TF_TILT_BINS; b++)
    draw_bin (cr, charts, &plot, style, b);
  draw_line (cr, &plot, style, charts->mean_tilt, TRUE);
  draw_line (cr, &plot, style, charts->median_tilt, FALSE);
  tf_plot_draw_x (cr, &plot, style, 30, tf_tick_degrees, NULL);
  double y = plot.plot.y + plot.plot.height + text * 2.0;
  g_autofree char *note = g_strdup_printf (_ ("n %u · median %.1f° (line) · mean %.1f° (broken)"),
                                           charts->n_tilts, charts->median_tilt, charts->mean_tilt);
  y += tf_plot_note (cr, &small, area, y, note);
  tf_plot_note (cr, &small, area, y, _ ("struck: break Hale’s law · whisker: ± √n"));
  cairo_restore (cr);
}

/* A bar holds many: one after the other, on its red those that break first. */
int
tf_tilt_bars_hit (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area, double x,
                  double y, int after)
{
  TfPlot plot = plot_of (charts, style, area);
  double tilt = tf_plot_back_x (&plot, x);
  if (!(tilt >= -90 && tilt < 90) || y < plot.plot.y || y > plot.plot.y + plot.plot.height)
    return -1;
  guint bin = (guint)((tilt + 90) / 180.0 * TF_TILT_BINS);
  gboolean red = y > tf_plot_y (&plot, charts->tilt_counts[TF_VERDICT_BREAKS][bin]);
  for (guint step = 1; step <= charts->n; step++)
    {
      guint k = (guint)((after < 0 ? -1 : after) + (int)step) % charts->n;
      const TfChartRow *row = &charts->rows[k];
      if (isfinite (row->tilt) && bin_of (row->tilt) == bin
          && (!red || row->kind == TF_VERDICT_BREAKS))
        return (int)k;
    }
  return -1;
}

double *
tf_tilt_bars_dup_places (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area, guint *n)
{
  TfPlot plot = plot_of (charts, style, area);
  double *xy = g_new (double, 2 * TF_TILT_BINS);
  *n = TF_TILT_BINS;
  for (guint k = 0; k < *n; k++)
    {
      guint count = count_of (charts, k);
      xy[2 * k] = count > 0 ? tf_plot_x (&plot, -90 + (k + 0.5) * 180.0 / TF_TILT_BINS) : NAN;
      xy[2 * k + 1] = fmax (tf_plot_y (&plot, count), plot.plot.y);
    }
  return xy;
}

char *
tf_tilt_bars_dup_sign (const TfLawsCharts *charts, guint k)
{
  double from = -90 + k * 180.0 / TF_TILT_BINS;
  return g_strdup_printf (_ ("tilts %.0f° to %.0f°: %u regions, of which %u break Hale’s law"), from,
                          from + 180.0 / TF_TILT_BINS, count_of (charts, k),
                          charts->tilt_counts[TF_VERDICT_BREAKS][k]);
}

char *
tf_tilt_bars_dup_description (const TfLawsCharts *charts)
{
  if (charts->n_tilts == 0)
    return g_strdup (_ ("No tilt to show."));
  guint positive = 0;
  for (guint b = TF_TILT_BINS / 2; b < TF_TILT_BINS; b++)
    positive += count_of (charts, b);
  return g_strdup_printf (
      _ ("%u axis tilts, median %.1f°, mean %.1f°; the leader is equatorward in %u."),
      charts->n_tilts, charts->median_tilt, charts->mean_tilt, positive);
}

double
tf_tilt_bars_height (const TfLawsCharts *charts, const TfChartStyle *style, double width)
{
  return MIN (width * 0.6, style->text_pt * 28) + style->text_pt * 3.6;
}

gboolean
tf_tilt_bars_has (const TfLawsCharts *charts)
{
  return charts->n_tilts > 0;
}
