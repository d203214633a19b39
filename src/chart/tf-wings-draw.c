/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-wings-private.h"

#include <glib/gi18n-lib.h>
#include <math.h>

#include "tf-chart-private.h"

static void
draw_chosen (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea plot, guint first,
             guint end)
{
  for (guint k = first; wings->chosen != 0 && k < end; k++)
    if (wings->dots[k].id == wings->chosen && isfinite (wings->dots[k].lat_deg))
      {
        const TfWingsDot *dot = &wings->dots[k];
        cairo_new_path (cr);
        cairo_arc (cr, tf_wings_x (wings, plot, dot->year),
                   tf_wings_y (wings, plot, (double)dot->lat_deg),
                   tf_wings_radius (dot->flux_mx) + 4, 0, 2 * G_PI);
        tf_chart_set (cr, style->ground);
        cairo_set_line_width (cr, 4);
        cairo_stroke_preserve (cr);
        tf_chart_set (cr, style->ink);
        cairo_set_line_width (cr, 2);
        cairo_stroke (cr);
      }
}

static void
draw_pick (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea plot)
{
  if (!isfinite (wings->pick_from) || !isfinite (wings->pick_to))
    return;
  double left = tf_wings_x (wings, plot, MIN (wings->pick_from, wings->pick_to));
  double right = tf_wings_x (wings, plot, MAX (wings->pick_from, wings->pick_to));
  gboolean band = isfinite (wings->pick_low) && isfinite (wings->pick_high);
  double top = band ? tf_wings_y (wings, plot, MAX (wings->pick_low, wings->pick_high)) : plot.y;
  double foot = band ? tf_wings_y (wings, plot, MIN (wings->pick_low, wings->pick_high))
                     : plot.y + plot.height;
  cairo_rectangle (cr, left, top, right - left, foot - top);
  tf_chart_set_alpha (cr, style->teal, 0.12);
  cairo_fill_preserve (cr);
  tf_chart_set (cr, style->teal);
  cairo_set_line_width (cr, wings->picking ? 2.4 : 1.2);
  cairo_stroke (cr);
}

/* While a stretch is chosen its numbers stand over it. */
static void
draw_picking (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea plot)
{
  g_autofree char *text = wings->picking ? tf_wings_dup_pick (wings) : NULL;
  double width, height, pad = style->text_pt * 0.3;
  if (text == NULL)
    return;
  tf_chart_measure (cr, style, text, &width, &height);
  double middle = tf_wings_x (wings, plot, (wings->pick_from + wings->pick_to) / 2);
  double x = CLAMP (middle - width / 2, plot.x + pad, MAX (plot.x + plot.width - width - pad, plot.x + pad));
  double top = plot.y + pad * 2;
  cairo_rectangle (cr, x - pad, top - pad, width + 2 * pad, height + 2 * pad);
  tf_chart_set (cr, style->ground);
  cairo_fill_preserve (cr);
  tf_chart_set (cr, style->teal);
  cairo_set_line_width (cr, 1);
  cairo_stroke (cr);
  tf_chart_text (cr, style, x, top, 0, 0, style->ink, text);
}

static void
draw_frame_line (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea plot)
{
  if (!(wings->frame_year >= wings->from_year && wings->frame_year <= wings->to_year))
    return;
  double x = tf_wings_x (wings, plot, wings->frame_year), foot = plot.y + plot.height,
         size = style->text_pt * 0.4;
  tf_chart_set (cr, style->ink);
  cairo_set_line_width (cr, 1.6);
  cairo_move_to (cr, x, plot.y);
  cairo_line_to (cr, x, foot);
  cairo_stroke (cr);
  cairo_move_to (cr, x, foot - size);
  cairo_line_to (cr, x + size, foot + size * 0.5);
  cairo_line_to (cr, x - size, foot + size * 0.5);
  cairo_close_path (cr);
  cairo_fill (cr);
}

/* Symbols at the edge of the view may reach over it by their own size. */
static void
find_seen (const TfWings *wings, TfArea plot, guint *first, guint *end)
{
  double reach = 8 / plot.width * (wings->to_year - wings->from_year);
  *first = tf_wings_first (wings, wings->from_year - reach);
  *end = tf_wings_first (wings, wings->to_year + reach);
}

static void
clip (cairo_t *cr, TfArea area)
{
  cairo_save (cr);
  cairo_rectangle (cr, area.x, area.y, area.width, area.height);
  cairo_clip (cr);
}

static void
draw_empty (cairo_t *cr, const TfChartStyle *style, TfArea plot)
{
  const char *text = _ ("Marks and hints will stand here: time along, latitude up");
  double width, height, x = plot.x + plot.width / 2, y = plot.y + plot.height / 2;
  tf_chart_measure (cr, style, text, &width, &height);
  cairo_rectangle (cr, x - width / 2 - 6, y - height / 2 - 3, width + 12, height + 6);
  tf_chart_set (cr, style->ground);
  cairo_fill (cr);
  tf_chart_text (cr, style, x, y, 0.5, 0.5, style->faint, text);
}

static gboolean
is_large_enough (TfArea area)
{
  return area.width > 4 && area.height > 4;
}

void
tf_wings_draw_ground (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea area)
{
  g_return_if_fail (cr != NULL && wings != NULL && style != NULL);
  if (!is_large_enough (area))
    return;
  TfArea plot = tf_wings_plot (wings, style, area);
  guint first, end;
  find_seen (wings, plot, &first, &end);
  clip (cr, area);
  tf_wings_draw_cycles (cr, wings, style, plot);
  tf_wings_draw_scale (cr, wings, style, plot);
  clip (cr, plot);
  if (tf_wings_is_dense (wings, style, area))
    tf_wings_draw_density (cr, wings, style, plot, first, end);
  else
    tf_wings_draw_dots (cr, wings, style, plot, first, end);
  cairo_restore (cr);
  if (wings->n == 0)
    draw_empty (cr, style, plot);
  cairo_restore (cr);
}

void
tf_wings_draw_over (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea area)
{
  g_return_if_fail (cr != NULL && wings != NULL && style != NULL);
  if (!is_large_enough (area))
    return;
  TfArea plot = tf_wings_plot (wings, style, area);
  guint first, end;
  find_seen (wings, plot, &first, &end);
  clip (cr, area);
  clip (cr, plot);
  tf_wings_draw_divides (cr, wings, style, plot);
  draw_pick (cr, wings, style, plot);
  draw_chosen (cr, wings, style, plot, first, end);
  cairo_restore (cr);
  draw_frame_line (cr, wings, style, plot);
  draw_picking (cr, wings, style, plot);
  cairo_restore (cr);
}

void
tf_wings_draw (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea area)
{
  tf_wings_draw_ground (cr, wings, style, area);
  tf_wings_draw_over (cr, wings, style, area);
}
