/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* The divides on the wings: line, unsure band, handles, and what is under the pointer. */

#include "tf-wings-private.h"

#include <math.h>

#include "tf-chart-private.h"
#include "tf-constants.h"

#define MONTH_S      (365.25 * TF_DAY_S / 12)
#define HANDLE_REACH 9.0
#define LINE_REACH   6.0

enum
{
  HANDLES = 3 /* on the line */
};

typedef struct
{
  double x, high, middle, low; /* the divide and the edges of its band */
} DividePoint;

static void
draw_divide_band (cairo_t *cr, const TfChartStyle *style, const DividePoint *points, guint n,
                  double line)
{
  for (guint k = 0; k < n; k++)
    cairo_line_to (cr, points[k].x, points[k].high);
  for (guint k = n; k > 0; k--)
    cairo_line_to (cr, points[k - 1].x, points[k - 1].low);
  cairo_close_path (cr);
  tf_chart_set_alpha (cr, style->teal, style->contrast ? 0.28 : 0.15);
  cairo_fill (cr);
  for (guint k = 0; k < n; k++)
    cairo_line_to (cr, points[k].x, points[k].middle);
  tf_chart_set (cr, style->teal);
  cairo_set_line_width (cr, line);
  cairo_stroke (cr);
}

/* The handles' places in the month scale of the divide. */
static double
handle_month (const TfDivideParams *params, int handle)
{
  return handle == 0 ? -params->before_months : handle == 1 ? 0 : params->after_months;
}

/* FALSE: the divide does not act there. */
static gboolean
point_at (const TfWings *wings, TfArea plot, int cycle, int side, double month, DividePoint *point)
{
  const TfDivideParams *params = tf_divides_get_params (wings->divides);
  TfTime time = tf_time_add (tf_divides_get_minimum (wings->divides, cycle),
                             month * MONTH_S * 0.9999); /* the ends themselves may lie a breath outside */
  double year = tf_time_year (time), lat = tf_divides_latitude (wings->divides, cycle, side, time);
  *point = (DividePoint){ .x = tf_wings_x (wings, plot, year),
                          .high = tf_wings_y (wings, plot, side * (lat + params->band_deg)),
                          .middle = tf_wings_y (wings, plot, side * lat),
                          .low = tf_wings_y (wings, plot, side * (lat - params->band_deg)) };
  return isfinite (lat);
}

static gboolean
in_view (const TfWings *wings, int cycle)
{
  const TfDivideParams *params = tf_divides_get_params (wings->divides);
  double minimum = tf_time_year (tf_divides_get_minimum (wings->divides, cycle));
  return minimum + params->after_months / 12.0 >= wings->from_year
         && minimum - params->before_months / 12.0 <= wings->to_year;
}

static GArray *
list_points (const TfWings *wings, TfArea plot, int cycle, int side)
{
  const TfDivideParams *params = tf_divides_get_params (wings->divides);
  GArray *points = g_array_new (FALSE, FALSE, sizeof (DividePoint));
  DividePoint point;
  for (int month = -params->before_months; month <= params->after_months; month++)
    if (point_at (wings, plot, cycle, side, month, &point))
      g_array_append_val (points, point);
  return points;
}

static void
draw_handle (cairo_t *cr, const TfChartStyle *style, const DividePoint *at, double radius,
             gboolean chosen)
{
  cairo_new_path (cr);
  cairo_arc (cr, at->x, at->middle, radius, 0, 2 * G_PI);
  tf_chart_set (cr, chosen ? style->teal : style->ground);
  cairo_fill_preserve (cr);
  tf_chart_set (cr, style->teal);
  cairo_set_line_width (cr, 1.5);
  cairo_stroke (cr);
}

/* Of the chosen divide: at its ends how far it reaches in time, between them the edges of its band. */
static void
draw_grips (cairo_t *cr, const TfChartStyle *style, const DividePoint *at, int handle, double radius,
            int chosen)
{
  gboolean end = handle != TF_WINGS_MINIMUM, taken = end ? chosen == handle : chosen == TF_WINGS_BAND;
  cairo_new_path (cr);
  if (end)
    {
      cairo_move_to (cr, at->x, at->high);
      cairo_line_to (cr, at->x, at->low);
    }
  else
    for (int k = 0; k < 2; k++)
      {
        double y = k == 0 ? at->high : at->low;
        cairo_move_to (cr, at->x - radius * 2.2, y);
        cairo_line_to (cr, at->x + radius * 2.2, y);
      }
  tf_chart_set (cr, style->teal);
  cairo_set_line_width (cr, taken ? radius * 0.9 : radius * 0.45);
  cairo_stroke (cr);
}

static gboolean
is_held (const TfWings *wings, int cycle, int side)
{
  return wings->hold_cycle == cycle && wings->hold_side == side;
}

static void
draw_handles (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea plot, int cycle,
              int side)
{
  const TfDivideParams *params = tf_divides_get_params (wings->divides);
  double radius = wings->movable ? style->text_pt * 0.36 : MIN (3.2, plot.height * 0.04);
  gboolean held = is_held (wings, cycle, side);
  DividePoint point;
  for (int k = 0; held && wings->movable && k < HANDLES; k++)
    if (point_at (wings, plot, cycle, side, handle_month (params, k), &point))
      draw_grips (cr, style, &point, k, radius, wings->hold_handle);
  for (int k = 0; k < HANDLES; k++)
    if ((wings->movable || k != 1)
        && point_at (wings, plot, cycle, side, handle_month (params, k), &point))
      draw_handle (cr, style, &point, held ? radius * 1.35 : radius,
                   held && (wings->hold_handle == k || wings->hold_handle == TF_WINGS_WHOLE));
}

static void
draw_divide (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea plot, int cycle,
             int side)
{
  if (!in_view (wings, cycle))
    return;
  g_autoptr (GArray) points = list_points (wings, plot, cycle, side);
  if (points->len < 2)
    return;
  const DividePoint *first = &g_array_index (points, DividePoint, 0);
  double across = g_array_index (points, DividePoint, points->len - 1).x - first->x;
  draw_divide_band (cr, style, first, points->len, is_held (wings, cycle, side) ? 2.8 : 1.6);
  if (across > 24)
    draw_handles (cr, wings, style, plot, cycle, side);
}

void
tf_wings_draw_divides (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea plot)
{
  if (wings->divides == NULL)
    return;
  for (int cycle = 2; cycle <= tf_divides_get_last (wings->divides); cycle++)
    {
      draw_divide (cr, wings, style, plot, cycle, 1);
      draw_divide (cr, wings, style, plot, cycle, -1);
    }
}

/* -- what is under the pointer ----------------------------------------------------------------- */

static double
far_from_segment (double x0, double y0, double x1, double y1, double x, double y)
{
  double dx = x1 - x0, dy = y1 - y0, square = dx * dx + dy * dy;
  double part = square > 0 ? CLAMP (((x - x0) * dx + (y - y0) * dy) / square, 0, 1) : 0;
  return hypot (x0 + part * dx - x, y0 + part * dy - y);
}

/* The nearer of the line and, of a chosen divide, the edges of its band. */
static double
far_from_lines (const GArray *points, gboolean edges, double x, double y, int *handle)
{
  double best = INFINITY;
  *handle = TF_WINGS_WHOLE;
  for (guint k = 1; k < points->len; k++)
    {
      const DividePoint *a = &g_array_index (points, DividePoint, k - 1), *b = a + 1;
      double line = far_from_segment (a->x, a->middle, b->x, b->middle, x, y);
      double edge = fmin (far_from_segment (a->x, a->high, b->x, b->high, x, y),
                          far_from_segment (a->x, a->low, b->x, b->low, x, y));
      gboolean is_edge = edges && edge < line;
      if ((is_edge ? edge : line) < best)
        {
          best = is_edge ? edge : line;
          *handle = is_edge ? TF_WINGS_BAND : TF_WINGS_WHOLE;
        }
    }
  return best;
}

/* How far the divide is; @handle as it would be taken. */
static double
distance_of (const TfWings *wings, TfArea plot, int cycle, int side, double x, double y,
             int *handle)
{
  const TfDivideParams *params = tf_divides_get_params (wings->divides);
  double best = INFINITY;
  DividePoint point;
  for (int k = 0; k < HANDLES; k++)
    if (point_at (wings, plot, cycle, side, handle_month (params, k), &point))
      {
        double far = hypot (point.x - x, point.middle - y);
        if (far <= HANDLE_REACH && far < best)
          {
            best = far;
            *handle = k;
          }
      }
  if (isfinite (best))
    return best;
  g_autoptr (GArray) points = list_points (wings, plot, cycle, side);
  best = far_from_lines (points, is_held (wings, cycle, side), x, y, handle);
  return best <= LINE_REACH ? best + HANDLE_REACH : INFINITY; /* a handle goes before a line */
}

gboolean
tf_wings_hit_divide (const TfWings *wings, const TfChartStyle *style, TfArea area, double x,
                     double y, int *cycle, int *side, int *handle)
{
  g_return_val_if_fail (wings != NULL && style != NULL, FALSE);
  if (wings->divides == NULL || !wings->movable)
    return FALSE;
  TfArea plot = tf_wings_plot (wings, style, area);
  double best = INFINITY;
  for (int c = 2; c <= tf_divides_get_last (wings->divides); c++)
    for (int s = 1; s >= -1 && in_view (wings, c); s -= 2)
      {
        int h = TF_WINGS_WHOLE;
        double far = distance_of (wings, plot, c, s, x, y, &h);
        if (far < best)
          {
            best = far;
            *cycle = c;
            *side = s;
            *handle = h;
          }
      }
  return isfinite (best);
}
