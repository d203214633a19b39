/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* The divides on the wings: line, unsure band, handles, and what is under the pointer. */

#include "tf-wings-private.h"

#include <math.h>

#include "tf-chart-private.h"
#include "tf-cycle.h"

#define HANDLE_REACH 9.0
#define LINE_REACH   6.0

enum
{
  HANDLES = 3
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
  double year = tf_time_year (tf_cycle_minimum (cycle))
                + month * 0.999 / 12; /* the ends themselves may lie a breath outside */
  double lat = tf_divides_latitude (wings->divides, cycle, side, tf_time_from_year (year));
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
  double minimum = tf_time_year (tf_cycle_minimum (cycle));
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
  for (int k = 0; k < HANDLES; k++)
    if ((wings->movable || k != 1)
        && point_at (wings, plot, cycle, side, handle_month (params, k), &point))
      draw_handle (cr, style, &point, held ? radius * 1.35 : radius,
                   held && (wings->hold_handle == k || wings->hold_handle < 0));
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
  for (const TfCycle *cycle = tf_cycles; cycle->number > 0; cycle++)
    {
      draw_divide (cr, wings, style, plot, cycle->number, 1);
      draw_divide (cr, wings, style, plot, cycle->number, -1);
    }
}

/* -- what is under the pointer ----------------------------------------------------------------- */

static double
far_from_segment (const DividePoint *a, const DividePoint *b, double x, double y)
{
  double dx = b->x - a->x, dy = b->middle - a->middle, square = dx * dx + dy * dy;
  double part = square > 0 ? CLAMP (((x - a->x) * dx + (y - a->middle) * dy) / square, 0, 1) : 0;
  return hypot (a->x + part * dx - x, a->middle + part * dy - y);
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
  *handle = -1;
  for (guint k = 1; k < points->len; k++)
    best = MIN (best, far_from_segment (&g_array_index (points, DividePoint, k - 1),
                                        &g_array_index (points, DividePoint, k), x, y));
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
  for (const TfCycle *c = tf_cycles; c->number > 0; c++)
    for (int s = 1; s >= -1 && in_view (wings, c->number); s -= 2)
      {
        int h = -1;
        double far = distance_of (wings, plot, c->number, s, x, y, &h);
        if (far < best)
          {
            best = far;
            *cycle = c->number;
            *side = s;
            *handle = h;
          }
      }
  return isfinite (best);
}
