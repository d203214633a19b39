/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Hale's law: one bar a cycle and hemisphere: the share that breaks, its interval as a whisker, a
 * heavy line under it from at least to at most (every "cannot say" keeps, or breaks), a tick where
 * errors of place alone would put it; n and how many cannot be said beside it. */

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-laws-charts-private.h"

static double
row_height (const TfChartStyle *style)
{
  return style->text_pt * 2.9;
}

/* Room at the right for the numbers, at the left for the name, below for axis and legend. */
static TfPlot
plot_of (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area)
{
  double text = style->text_pt, top = 0.05;
  for (guint k = 0; k < charts->hale->len; k++)
    {
      const TfHaleRow *row = &g_array_index (charts->hale, TfHaleRow, k);
      double high = fmax (row->bounds.high, fmax (row->clopper_pearson.high, row->share));
      if (row->n >= 20 || charts->hale->len == 1)
        top = fmax (top, high);
    }
  double step = tf_plot_step (0, top * 1.02, MAX (area.width - 14 * text, 20), text * 3);
  return (TfPlot){ .plot = { area.x + 4.6 * text, area.y + 0.4 * text,
                             MAX (area.width - 13.2 * text, 10),
                             MAX (area.height - 6.6 * text, 10) },
                   .x0 = 0,
                   .x1 = fmin (ceil (top * 1.02 / step) * step, 1),
                   .y0 = 0,
                   .y1 = 1 };
}

static double
middle_of (const TfLawsCharts *charts, const TfPlot *plot, guint k)
{
  return plot->plot.y + plot->plot.height * (k + 0.42) / MAX (charts->hale->len, 1);
}

static char *
dup_name (const TfHaleRow *row)
{
  if (row->cycle == 0)
    return g_strdup (_ ("all"));
  return g_strdup_printf ("%d %s", row->cycle,
                          row->hemisphere > 0 ? C_ ("north", "N") : C_ ("south", "S"));
}

static void
draw_bar (cairo_t *cr, const TfPlot *plot, const TfChartStyle *style, const TfHaleRow *row,
          double y, double height)
{
  double share = isfinite (row->share) ? fmin (row->share, plot->x1) : 0;
  double x = plot->plot.x, end = tf_plot_x (plot, share);
  tf_chart_set (cr, style->band);
  cairo_rectangle (cr, x, y - height / 2, plot->plot.width, height);
  cairo_fill (cr);
  tf_chart_set (cr, style->breaks);
  cairo_rectangle (cr, x, y - height / 2, end - x, height);
  cairo_fill (cr);
  if (isfinite (row->bounds.low) && row->bounds.low <= plot->x1)
    {
      double under = y + height / 2 + style->text_pt * 0.32;
      tf_chart_set (cr, style->slate);
      cairo_set_line_width (cr, style->text_pt * 0.28);
      cairo_move_to (cr, tf_plot_x (plot, row->bounds.low), under);
      cairo_line_to (cr, fmin (tf_plot_x (plot, row->bounds.high), x + plot->plot.width), under);
      cairo_stroke (cr);
    }
  if (isfinite (row->expected_false) && row->expected_false <= plot->x1)
    {
      double at = tf_plot_x (plot, row->expected_false);
      tf_chart_set (cr, style->teal);
      cairo_set_line_width (cr, style->text_pt * 0.2);
      cairo_move_to (cr, at, y - height / 2 - style->text_pt * 0.25);
      cairo_line_to (cr, at, y + height / 2);
      cairo_stroke (cr);
    }
  tf_plot_whisker_x (cr, plot, style, row->clopper_pearson.low, row->clopper_pearson.high, y,
                     height * 0.28);
}

static void
draw_row (cairo_t *cr, const TfLawsCharts *charts, const TfPlot *plot, const TfChartStyle *style,
          guint k)
{
  const TfHaleRow *row = &g_array_index (charts->hale, TfHaleRow, k);
  double text = style->text_pt, y = middle_of (charts, plot, k);
  double height = fmin (plot->plot.height / charts->hale->len * 0.45, text * 1.5);
  TfChartStyle small = *style;
  small.text_pt = text * 0.86;
  g_autofree char *name = dup_name (row), *share = tf_chart_dup_percent (row->share, 1);
  g_autofree char *counts = g_strdup_printf ("n %u · ? %u", row->n, row->cannot_say);
  draw_bar (cr, plot, style, row, y, height);
  tf_chart_text (cr, style, plot->plot.x - text * 0.6, y, 1, 0.5, style->ink, name);
  double right = plot->plot.x + plot->plot.width + text * 0.6;
  tf_chart_text (cr, style, right, y + text * 0.1, 0, 1, style->ink, share);
  tf_chart_text (cr, &small, right, y + text * 0.05, 0, 0, style->faint, counts);
}

static void
draw_legend (cairo_t *cr, const TfLawsCharts *charts, const TfChartStyle *style, TfArea area,
             double y)
{
  TfChartStyle small = *style;
  small.text_pt = style->text_pt * 0.86;
  g_autofree char *level = g_strdup_printf ("%.0f", 100 * charts->level);
  g_autofree char *first
      = g_strdup_printf (_ ("whisker: Clopper–Pearson %s %%, → goes on · ? cannot say"), level);
  y += tf_plot_note (cr, &small, area, y, first);
  y += tf_plot_note (cr, &small, area, y, _ ("under the bar: at least, at most (every ? keeps, breaks)"));
  tf_plot_note (cr, &small, area, y, _ ("tick: what errors of place alone would give"));
}

void
tf_hale_bars_draw (cairo_t *cr, const TfLawsCharts *charts, const TfChartStyle *style, TfArea area)
{
  if (!tf_hale_bars_has (charts))
    {
      tf_chart_text (cr, style, area.x + area.width / 2, area.y + area.height / 2, 0.5, 0.5,
                     style->faint, _ ("No region has a verdict."));
      return;
    }
  TfPlot plot = plot_of (charts, style, area);
  double step = tf_plot_step (0, plot.x1, plot.plot.width, style->text_pt * 3.4);
  cairo_save (cr);
  for (guint k = 0; k < charts->hale->len; k++)
    draw_row (cr, charts, &plot, style, k);
  tf_plot_draw_x (cr, &plot, style, step, tf_tick_percent, NULL);
  draw_legend (cr, charts, style, area, plot.plot.y + plot.plot.height + style->text_pt * 2.1);
  cairo_restore (cr);
}

static gboolean
row_is_of (const TfChartRow *row, const TfHaleRow *bar)
{
  return (bar->cycle == 0 || row->cycle == bar->cycle)
         && (bar->hemisphere == 0 || row->side == bar->hemisphere);
}

/* Those that break; where none does, those that cannot be said; else those that keep. */
int
tf_hale_bars_hit (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area, double x,
                  double y, int after)
{
  TfPlot plot = plot_of (charts, style, area);
  double place = (y - plot.plot.y) / plot.plot.height * charts->hale->len;
  if (charts->hale->len == 0 || !(place >= 0 && place < charts->hale->len) || charts->n == 0)
    return -1;
  const TfHaleRow *bar = &g_array_index (charts->hale, TfHaleRow, (guint)place);
  gint8 wanted = bar->breaks > 0       ? TF_VERDICT_BREAKS
                 : bar->cannot_say > 0 ? TF_VERDICT_CANNOT_SAY
                                       : TF_VERDICT_KEEPS;
  for (guint step = 1; step <= charts->n; step++)
    {
      guint k = (guint)((after < 0 ? -1 : after) + (int)step) % charts->n;
      if (charts->rows[k].kind == wanted && row_is_of (&charts->rows[k], bar))
        return (int)k;
    }
  return -1;
}

static void
append_row (GString *text, const TfHaleRow *row)
{
  g_autofree char *name = dup_name (row), *share = tf_chart_dup_percent (row->share, 1);
  g_autofree char *low = tf_chart_dup_percent (row->clopper_pearson.low, 1);
  g_autofree char *high = tf_chart_dup_percent (row->clopper_pearson.high, 1);
  g_string_append_printf (text, _ ("%s: %s (%s to %s) of %u break, %u cannot be said. "), name,
                          share, low, high, row->n, row->cannot_say);
}

double *
tf_hale_bars_dup_places (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area, guint *n)
{
  TfPlot plot = plot_of (charts, style, area);
  double *xy = g_new (double, 2 * charts->hale->len + 2);
  *n = charts->hale->len;
  for (guint k = 0; k < *n; k++)
    {
      const TfHaleRow *row = &g_array_index (charts->hale, TfHaleRow, k);
      xy[2 * k] = tf_plot_x (&plot, isfinite (row->share) ? fmin (row->share, plot.x1) : 0);
      xy[2 * k + 1] = middle_of (charts, &plot, k);
    }
  return xy;
}

char *
tf_hale_bars_dup_sign (const TfLawsCharts *charts, guint k)
{
  GString *text = g_string_new (NULL);
  append_row (text, &g_array_index (charts->hale, TfHaleRow, k));
  return g_strchomp (g_string_free (text, FALSE));
}

char *
tf_hale_bars_dup_description (const TfLawsCharts *charts)
{
  if (!tf_hale_bars_has (charts))
    return g_strdup (_ ("No region has a verdict."));
  GString *text = g_string_new (NULL);
  for (guint k = 0; k < charts->hale->len; k++)
    append_row (text, &g_array_index (charts->hale, TfHaleRow, k));
  g_string_truncate (text, text->len - 1);
  return g_string_free (text, FALSE);
}

double
tf_hale_bars_height (const TfLawsCharts *charts, const TfChartStyle *style, double width)
{
  return MAX (charts->hale->len, 1) * row_height (style) + style->text_pt * 6.8;
}

gboolean
tf_hale_bars_has (const TfLawsCharts *charts)
{
  return charts->hale->len > 0;
}
