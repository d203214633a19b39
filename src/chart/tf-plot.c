/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-plot-private.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-number.h"

/* More points than one to so many square units are shown as cells. */
#define UNITS_A_POINT 18.0
#define CELL          3

TfPlot
tf_plot_within (const TfChartStyle *style, TfArea area, double left, double below)
{
  double text = style->text_pt, right = text * 1.2, above = text * 1.7;
  return (TfPlot){ .plot = { area.x + left * text, area.y + above,
                             MAX (area.width - left * text - right, 1),
                             MAX (area.height - above - below * text, 1) } };
}

double
tf_plot_x (const TfPlot *plot, double x)
{
  return plot->plot.x + (x - plot->x0) / (plot->x1 - plot->x0) * plot->plot.width;
}

double
tf_plot_y (const TfPlot *plot, double y)
{
  return plot->plot.y + (plot->y1 - y) / (plot->y1 - plot->y0) * plot->plot.height;
}

double
tf_plot_back_x (const TfPlot *plot, double px)
{
  return plot->x0 + (px - plot->plot.x) / plot->plot.width * (plot->x1 - plot->x0);
}

double
tf_plot_back_y (const TfPlot *plot, double py)
{
  return plot->y1 - (py - plot->plot.y) / plot->plot.height * (plot->y1 - plot->y0);
}

double
tf_plot_step (double from, double to, double length, double room)
{
  static const double rounds[] = { 1, 2, 5, 10 };
  double least = (to - from) * room / MAX (length, 1);
  if (!(least > 0) || !isfinite (least))
    return 1;
  double decade = pow (10, floor (log10 (least)));
  for (guint k = 0; k < G_N_ELEMENTS (rounds); k++)
    if (rounds[k] * decade >= least * 0.999)
      return rounds[k] * decade;
  return 10 * decade;
}

/* -- axes ------------------------------------------------------------------------------------ */

static double
first_tick (double from, double step)
{
  return ceil (from / step - 1e-6) * step;
}

void
tf_plot_draw_x (cairo_t *cr, const TfPlot *plot, const TfChartStyle *style, double step,
                TfTickForm form, const char *title)
{
  double foot = plot->plot.y + plot->plot.height, text = style->text_pt;
  tf_chart_set (cr, tf_chart_mix (style->line, style->ink, 0.35));
  cairo_set_line_width (cr, text * 0.09);
  cairo_move_to (cr, plot->plot.x, foot);
  cairo_line_to (cr, plot->plot.x + plot->plot.width, foot);
  cairo_stroke (cr);
  for (double x = first_tick (plot->x0, step); x <= plot->x1 + step * 1e-6; x += step)
    {
      double at = tf_plot_x (plot, x);
      g_autofree char *label = form (fabs (x) < step * 1e-6 ? 0 : x);
      tf_chart_set (cr, tf_chart_mix (style->line, style->ink, 0.35));
      cairo_set_line_width (cr, text * 0.09);
      cairo_move_to (cr, at, foot);
      cairo_line_to (cr, at, foot + text * 0.35);
      cairo_stroke (cr);
      tf_chart_text (cr, style, at, foot + text * 0.45, 0.5, 0, style->faint, label);
    }
  if (title != NULL)
    tf_chart_text (cr, style, plot->plot.x + plot->plot.width, foot + text * 1.85, 1, 0,
                   style->faint, title);
}

void
tf_plot_draw_y (cairo_t *cr, const TfPlot *plot, const TfChartStyle *style, double step,
                TfTickForm form, const char *title)
{
  double text = style->text_pt;
  for (double y = first_tick (plot->y0, step); y <= plot->y1 + step * 1e-6; y += step)
    {
      double at = tf_plot_y (plot, y);
      gboolean zero = fabs (y) < step * 1e-6;
      g_autofree char *label = form (zero ? 0 : y);
      tf_chart_set (cr, zero ? tf_chart_mix (style->line, style->ink, 0.35) : style->line);
      cairo_set_line_width (cr, text * (zero ? 0.11 : 0.07));
      cairo_move_to (cr, plot->plot.x, at);
      cairo_line_to (cr, plot->plot.x + plot->plot.width, at);
      cairo_stroke (cr);
      tf_chart_text (cr, style, plot->plot.x - text * 0.45, at, 1, 0.5, style->faint, label);
    }
  if (title != NULL)
    tf_chart_text (cr, style, plot->plot.x - text * 0.45, plot->plot.y - text * 0.5, 0, 1,
                   style->faint, title);
}

void
tf_plot_clip (cairo_t *cr, const TfPlot *plot)
{
  cairo_save (cr);
  cairo_rectangle (cr, plot->plot.x, plot->plot.y, plot->plot.width, plot->plot.height);
  cairo_clip (cr);
}

/* -- signs ----------------------------------------------------------------------------------- */

static void
stroke_whisker (cairo_t *cr, const TfChartStyle *style)
{
  tf_chart_set (cr, style->ink);
  cairo_set_line_width (cr, style->text_pt * 0.13);
  cairo_stroke (cr);
}

/* A foot; @beyond: the interval goes on past the axis: the head of an arrow that points @outward. */
static void
whisker_end_x (cairo_t *cr, double at, double y_units, double foot, gboolean beyond, int outward)
{
  double back = beyond ? outward * foot : 0;
  cairo_move_to (cr, at - back, y_units - foot);
  cairo_line_to (cr, at, y_units);
  cairo_line_to (cr, at - back, y_units + foot);
}

void
tf_plot_whisker_x (cairo_t *cr, const TfPlot *plot, const TfChartStyle *style, double low,
                   double high, double y_units, double foot)
{
  if (!isfinite (low) || !isfinite (high))
    return;
  double a = tf_plot_x (plot, CLAMP (low, plot->x0, plot->x1)),
         b = tf_plot_x (plot, CLAMP (high, plot->x0, plot->x1));
  cairo_new_path (cr);
  cairo_move_to (cr, a, y_units);
  cairo_line_to (cr, b, y_units);
  if (low <= plot->x1) /* else only the arrow that points to where it is */
    whisker_end_x (cr, a, y_units, foot, low < plot->x0, -1);
  if (high >= plot->x0)
    whisker_end_x (cr, b, y_units, foot, high > plot->x1, 1);
  stroke_whisker (cr, style);
}

void
tf_plot_whisker_y (cairo_t *cr, const TfPlot *plot, const TfChartStyle *style, double x, double low,
                   double high, double foot)
{
  if (!isfinite (low) || !isfinite (high) || !isfinite (x))
    return;
  double at = tf_plot_x (plot, x), a = tf_plot_y (plot, low), b = tf_plot_y (plot, high);
  cairo_new_path (cr);
  cairo_move_to (cr, at, a);
  cairo_line_to (cr, at, b);
  cairo_move_to (cr, at - foot, a);
  cairo_line_to (cr, at + foot, a);
  cairo_move_to (cr, at - foot, b);
  cairo_line_to (cr, at + foot, b);
  stroke_whisker (cr, style);
}

void
tf_plot_median (cairo_t *cr, const TfPlot *plot, const TfChartStyle *style, double x, double y)
{
  if (!isfinite (x) || !isfinite (y))
    return;
  cairo_new_path (cr);
  cairo_arc (cr, tf_plot_x (plot, x), tf_plot_y (plot, y), style->text_pt * 0.32, 0, 2 * G_PI);
  tf_chart_set (cr, style->ground);
  cairo_fill_preserve (cr);
  stroke_whisker (cr, style);
}

double
tf_plot_note (cairo_t *cr, const TfChartStyle *style, TfArea area, double y, const char *text)
{
  tf_chart_text (cr, style, area.x + style->text_pt * 0.4, y, 0, 0, style->faint, text);
  return style->text_pt * 1.3;
}

/* -- clouds of points ------------------------------------------------------------------------ */

static gboolean
on_paper (cairo_t *cr)
{
  return cairo_surface_get_type (cairo_get_target (cr)) != CAIRO_SURFACE_TYPE_IMAGE;
}

static double
dot_radius (const TfChartStyle *style)
{
  return MAX (style->text_pt * 0.15, 0.5);
}

/* One dot as a mask that is laid at many places: a path of cairo's costs thirty times as much. */
static cairo_surface_t *
new_sprite (double radius, double scale, int *half)
{
  *half = (int)ceil (radius * scale) + 1;
  cairo_surface_t *sprite
      = cairo_image_surface_create (CAIRO_FORMAT_A8, 2 * *half + 1, 2 * *half + 1);
  cairo_t *cr = cairo_create (sprite);
  cairo_arc (cr, *half + 0.5, *half + 0.5, radius * scale, 0, 2 * G_PI);
  cairo_fill (cr);
  cairo_destroy (cr);
  return sprite;
}

static void
put_sprites (cairo_t *cr, const TfPlot *plot, const TfChartStyle *style, const double *xy, guint n)
{
  double one = 1, two = 0, sx, sy;
  cairo_user_to_device_distance (cr, &one, &two);
  cairo_surface_get_device_scale (cairo_get_target (cr), &sx, &sy);
  double scale = hypot (one, two) * sx;
  int half;
  cairo_surface_t *sprite = new_sprite (dot_radius (style), scale, &half);
  cairo_save (cr);
  cairo_scale (cr, 1 / scale, 1 / scale);
  for (guint k = 0; k < n; k++)
    if (isfinite (xy[2 * k]) && isfinite (xy[2 * k + 1]))
      cairo_mask_surface (cr, sprite, round (tf_plot_x (plot, xy[2 * k]) * scale) - half - 0.5,
                          round (tf_plot_y (plot, xy[2 * k + 1]) * scale) - half - 0.5);
  cairo_restore (cr);
  cairo_surface_destroy (sprite);
}

static void
put_arcs (cairo_t *cr, const TfPlot *plot, const TfChartStyle *style, const double *xy, guint n)
{
  for (guint k = 0; k < n; k++)
    if (isfinite (xy[2 * k]) && isfinite (xy[2 * k + 1]))
      {
        cairo_arc (cr, tf_plot_x (plot, xy[2 * k]), tf_plot_y (plot, xy[2 * k + 1]),
                   dot_radius (style), 0, 2 * G_PI);
        cairo_fill (cr);
      }
}

static void
put_cells (cairo_t *cr, const TfPlot *plot, const TfChartStyle *style, const double *xy, guint n)
{
  double side = MAX (style->text_pt * 0.25, 1);
  int columns = (int)ceil (plot->plot.width / side), rows = (int)ceil (plot->plot.height / side);
  g_autofree guint *cells = g_new0 (guint, (gsize)columns * (gsize)rows);
  guint most = 1;
  if (!on_paper (cr))
    cairo_set_antialias (cr, CAIRO_ANTIALIAS_NONE); /* no seams between cells */
  for (guint k = 0; k < n; k++)
    {
      double column = (tf_plot_x (plot, xy[2 * k]) - plot->plot.x) / side,
             row = (tf_plot_y (plot, xy[2 * k + 1]) - plot->plot.y) / side;
      if (column >= 0 && column < columns && row >= 0 && row < rows)
        most = MAX (most, ++cells[(int)row * columns + (int)column]);
    }
  for (int row = 0; row < rows; row++)
    for (int column = 0; column < columns; column++)
      {
        guint count = cells[row * columns + column];
        if (count == 0)
          continue;
        tf_chart_set_alpha (cr, style->slate, 0.10 + 0.65 * log1p (count) / log1p (most));
        cairo_rectangle (cr, plot->plot.x + column * side, plot->plot.y + row * side, side, side);
        cairo_fill (cr);
      }
}

void
tf_plot_cloud (cairo_t *cr, const TfPlot *plot, const TfChartStyle *style, const double *xy,
               guint n)
{
  double unit = style->text_pt / 11;
  tf_plot_clip (cr, plot);
  tf_chart_set_alpha (cr, style->slate, style->contrast ? 0.8 : 0.45);
  if (n * UNITS_A_POINT * unit * unit > plot->plot.width * plot->plot.height)
    put_cells (cr, plot, style, xy, n);
  else if (on_paper (cr))
    put_arcs (cr, plot, style, xy, n);
  else
    put_sprites (cr, plot, style, xy, n);
  cairo_restore (cr);
}

int
tf_plot_nearest (const TfPlot *plot, const double *xy, guint n, double px, double py, double reach)
{
  double best = reach * reach;
  int found = -1;
  for (guint k = 0; k < n; k++)
    {
      double dx = tf_plot_x (plot, xy[2 * k]) - px, dy = tf_plot_y (plot, xy[2 * k + 1]) - py;
      double far = dx * dx + dy * dy;
      if (far <= best)
        {
          best = far;
          found = (int)k;
        }
    }
  return found;
}

/* -- labels ---------------------------------------------------------------------------------- */

char *
tf_tick_degrees (double value)
{
  double off = fabs (value - round (value));
  if (off < 1e-6)
    return tf_chart_dup_degrees (value, FALSE);
  g_autofree char *number = tf_number_dup_form (fabs (value), ".1f", TRUE);
  return g_strdup_printf ("%s%s°", value < 0 ? "−" : "", number);
}

char *
tf_tick_plain (double value)
{
  g_autofree char *number = tf_number_dup_form (fabs (value), ".6g", TRUE);
  return g_strdup_printf ("%s%s", value < 0 ? "−" : "", number);
}

char *
tf_chart_dup_percent (double share, int decimals)
{
  if (!isfinite (share))
    return g_strdup ("—");
  g_autofree char *form = g_strdup_printf (".%df", decimals);
  g_autofree char *number = tf_number_dup_form (100 * share, form, TRUE);
  return g_strdup_printf (_ ("%s %%"), number);
}

char *
tf_tick_percent (double value)
{
  return tf_chart_dup_percent (value, fabs (100 * value - round (100 * value)) < 1e-6 ? 0 : 1);
}
