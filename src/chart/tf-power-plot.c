/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-power-plot.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-figure.h"
#include "tf-plot-private.h"

#define REACH 8.0

static const TfPowerPoint *
point_at (const TfPowerCurve *curve, guint k)
{
  return &g_array_index (curve->points, TfPowerPoint, k);
}

/* x counts doublings. */
static TfPlot
plot_of (const TfPowerCurve *curve, const TfChartStyle *style, TfArea area)
{
  TfArea upper = area;
  upper.height = MAX (area.height - style->text_pt * 4.8, style->text_pt * 4);
  TfPlot plot = tf_plot_within (style, upper, 4, 2.2);
  guint n = curve->points->len;
  plot.x0 = n > 0 ? log2 (point_at (curve, 0)->n) - 0.25 : 5;
  plot.x1 = n > 0 ? log2 (point_at (curve, n - 1)->n) + 0.25 : 12;
  plot.y0 = 0;
  plot.y1 = 1;
  return plot;
}

/* A label under every point, as far as they have room. */
static void
draw_numbers (cairo_t *cr, const TfPowerCurve *curve, const TfPlot *plot, const TfChartStyle *style)
{
  double foot = plot->plot.y + plot->plot.height, free_from = plot->plot.x - style->text_pt;
  for (guint k = 0; k < curve->points->len; k++)
    {
      double width, x = tf_plot_x (plot, log2 (point_at (curve, k)->n));
      g_autofree char *label = g_strdup_printf ("%u", point_at (curve, k)->n);
      tf_chart_measure (cr, style, label, &width, NULL);
      if (x - width / 2 < free_from)
        continue;
      tf_chart_text (cr, style, x, foot + style->text_pt * 0.45, 0.5, 0, style->faint, label);
      free_from = x + width / 2 + style->text_pt * 0.5;
    }
}

static void
draw_needed (cairo_t *cr, const TfPowerCurve *curve, double wanted, const TfPlot *plot,
             const TfChartStyle *style)
{
  double needed = tf_power_needed (curve, wanted), dash = style->text_pt * 0.4;
  double y = tf_plot_y (plot, wanted);
  cairo_new_path (cr);
  cairo_move_to (cr, plot->plot.x, y);
  cairo_line_to (cr, plot->plot.x + plot->plot.width, y);
  if (isfinite (needed))
    {
      double x = tf_plot_x (plot, log2 (needed));
      cairo_move_to (cr, x, y);
      cairo_line_to (cr, x, plot->plot.y + plot->plot.height);
    }
  cairo_set_dash (cr, &dash, 1, 0);
  tf_chart_set (cr, style->teal);
  cairo_set_line_width (cr, style->text_pt * 0.14);
  cairo_stroke (cr);
  cairo_set_dash (cr, NULL, 0, 0);
}

static void
draw_curve (cairo_t *cr, const TfPowerCurve *curve, const TfPlot *plot, const TfChartStyle *style)
{
  cairo_new_path (cr);
  for (guint k = 0; k < curve->points->len; k++)
    cairo_line_to (cr, tf_plot_x (plot, log2 (point_at (curve, k)->n)),
                   tf_plot_y (plot, point_at (curve, k)->power));
  tf_chart_set (cr, style->slate);
  cairo_set_line_width (cr, style->text_pt * 0.14);
  cairo_stroke (cr);
  for (guint k = 0; k < curve->points->len; k++)
    {
      const TfPowerPoint *p = point_at (curve, k);
      tf_plot_whisker_y (cr, plot, style, log2 (p->n), p->interval.low, p->interval.high,
                         style->text_pt * 0.22);
      tf_plot_median (cr, plot, style, log2 (p->n), p->power);
    }
}

static char *
dup_truths (const TfPowerCurve *curve)
{
  if (curve->what == TF_POWER_SLOPE)
    return g_strdup_printf (_ ("slopes %.3f and %.3f °/°, told apart at p ≤ %.3f"), curve->first,
                            curve->second, curve->chance);
  return g_strdup_printf (_ ("shares %.1f and %.1f %%, told apart at p ≤ %.3f"), 100 * curve->first,
                          100 * curve->second, curve->chance);
}

static char *
dup_needed (const TfPowerCurve *curve, double wanted)
{
  double needed = tf_power_needed (curve, wanted);
  if (!isfinite (wanted))
    return g_strdup ("");
  if (!isfinite (needed))
    return g_strdup_printf (_ ("a power of %.2f is not reached"), wanted);
  return g_strdup_printf (_ ("a power of %.2f needs %.0f regions in each group"), wanted,
                          ceil (needed));
}

void
tf_power_plot_draw (cairo_t *cr, const TfPowerCurve *curve, double wanted,
                    const TfChartStyle *style, TfArea area)
{
  g_return_if_fail (cr != NULL && curve != NULL && style != NULL);
  TfPlot plot = plot_of (curve, style, area);
  TfChartStyle small = *style;
  small.text_pt = style->text_pt * 0.86;
  g_autofree char *truths = dup_truths (curve), *needed = dup_needed (curve, wanted);
  cairo_save (cr);
  tf_plot_draw_y (cr, &plot, style, 0.2, tf_tick_plain, _ ("power"));
  draw_numbers (cr, curve, &plot, style);
  if (isfinite (wanted))
    draw_needed (cr, curve, wanted, &plot, style);
  draw_curve (cr, curve, &plot, style);
  double y = plot.plot.y + plot.plot.height + style->text_pt * 2;
  y += tf_plot_note (cr, &small, area, y, _ ("regions in each group · whisker: Clopper–Pearson 95 %"));
  y += tf_plot_note (cr, &small, area, y, truths);
  tf_plot_note (cr, &small, area, y, needed);
  cairo_restore (cr);
}

int
tf_power_plot_hit (const TfPowerCurve *curve, const TfChartStyle *style, TfArea area, double x,
                   double y)
{
  g_return_val_if_fail (curve != NULL && style != NULL, -1);
  TfPlot plot = plot_of (curve, style, area);
  g_autofree double *xy = g_new (double, 2 * curve->points->len + 2);
  for (guint k = 0; k < curve->points->len; k++)
    {
      xy[2 * k] = log2 (point_at (curve, k)->n);
      xy[2 * k + 1] = point_at (curve, k)->power;
    }
  return tf_plot_nearest (&plot, xy, curve->points->len, x, y, REACH);
}

char *
tf_power_plot_dup_description (const TfPowerCurve *curve, double wanted)
{
  g_return_val_if_fail (curve != NULL, NULL);
  g_autofree char *truths = dup_truths (curve), *needed = dup_needed (curve, wanted);
  GString *text = g_string_new (truths);
  for (guint k = 0; k < curve->points->len; k++)
    g_string_append_printf (text, _ (" %u regions: power %.2f, from %.2f to %.2f."),
                            point_at (curve, k)->n, point_at (curve, k)->power,
                            point_at (curve, k)->interval.low, point_at (curve, k)->interval.high);
  g_string_append_printf (text, " %s", needed);
  return g_string_free (text, FALSE);
}

typedef struct
{
  const TfPowerCurve *curve;
  double wanted;
} One;

static void
draw_one (cairo_t *cr, const TfChartStyle *style, TfArea area, gpointer data)
{
  const One *one = data;
  tf_power_plot_draw (cr, one->curve, one->wanted, style, area);
}

gboolean
tf_power_plot_write (const TfPowerCurve *curve, double wanted, const char *path, GError **error)
{
  g_return_val_if_fail (curve != NULL && path != NULL, FALSE);
  g_autofree char *truths = dup_truths (curve);
  const TfFigurePage page = { .width_mm = 88,
                              .height_mm = 70,
                              .text_mm = 2.3,
                              .title = _ ("Power"),
                              .subject = truths };
  One one = { curve, wanted };
  return tf_figure_write (path, &page, draw_one, &one, error);
}
