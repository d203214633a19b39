/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-wings-private.h"

#include <glib/gi18n-lib.h>
#include <math.h>

#include "tf-chart-private.h"
#include "tf-cycle.h"

/* -- time ------------------------------------------------------------------------------------ */

/* Steps of the time scale, finest first. Days are counted within a month. */
typedef struct
{
  int days, months;   /* one of them is 0 */
  const char *form;   /* for g_date_time_format */
  const char *coarse; /* of the first label, and of the day that begins a year; where months are counted
                         January is the year alone */
} Step;

static const Step steps[] = {
  { 1, 0, "%-d %b", "%-d %b %Y" }, { 2, 0, "%-d %b", "%-d %b %Y" },
  { 5, 0, "%-d %b", "%-d %b %Y" }, { 10, 0, "%-d %b", "%-d %b %Y" },
  { 0, 1, "%b", "%b %Y" },         { 0, 3, "%b", "%b %Y" },
  { 0, 6, "%b", "%b %Y" },         { 0, 12, "%Y", "%Y" },
  { 0, 24, "%Y", "%Y" },           { 0, 60, "%Y", "%Y" },
  { 0, 120, "%Y", "%Y" },          { 0, 240, "%Y", "%Y" },
  { 0, 600, "%Y", "%Y" },          { 0, 1200, "%Y", "%Y" },
};

static double
step_years (const Step *step)
{
  return step->days / 365.25 + step->months / 12.0;
}

static double
year_of (int year, int month, int day)
{
  GDate date;
  g_date_set_dmy (&date, (GDateDay)day, (GDateMonth)month, (GDateYear)year);
  int days = g_date_is_leap_year ((GDateYear)year) ? 366 : 365;
  return year + (g_date_get_day_of_year (&date) - 1.0) / days;
}

static char *
dup_label (const char *form, int year, int month, int day)
{
  g_autoptr (GDateTime) date = g_date_time_new_utc (year, month, day, 0, 0, 0);
  return date != NULL ? g_date_time_format (date, form) : g_strdup ("");
}

static const Step *
choose_step (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea plot)
{
  double span = wings->to_year - wings->from_year;
  for (guint k = 0; k < G_N_ELEMENTS (steps); k++)
    {
      double width;
      g_autofree char *label = dup_label (steps[k].coarse, 2026, 12, 28);
      tf_chart_measure (cr, style, label, &width, NULL);
      if (step_years (&steps[k]) / span * plot.width >= width + style->text_pt * 1.5)
        return &steps[k];
    }
  return &steps[G_N_ELEMENTS (steps) - 1];
}

static void
draw_tick (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea plot,
           const Step *step, int year, int month, int day, gboolean *begun)
{
  double x = tf_wings_x (wings, plot, year_of (year, month, day)), width;
  if (x < plot.x - 0.5 || x > plot.x + plot.width + 0.5)
    return;
  double foot = plot.y + plot.height;
  tf_chart_set (cr, style->line);
  cairo_set_line_width (cr, 1);
  cairo_move_to (cr, floor (x) + 0.5, foot);
  cairo_line_to (cr, floor (x) + 0.5, foot + style->text_pt * 0.3);
  cairo_stroke (cr);
  gboolean new_year = month == 1 && day == 1, coarse = !*begun || new_year;
  const char *form = new_year && step->months > 0 ? "%Y" : coarse ? step->coarse : step->form;
  g_autofree char *label = dup_label (form, year, month, day);
  *begun = TRUE;
  tf_chart_measure (cr, style, label, &width, NULL);
  double right = plot.x + plot.width + style->text_pt * 0.9;
  tf_chart_text (cr, style, MIN (x - width / 2, right - width), foot + style->text_pt * 0.35, 0, 0,
                 style->faint, label);
}

static void
draw_month (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea plot,
            const Step *step, int year, int month, gboolean *begun)
{
  if (step->months > 0)
    {
      if ((year * 12 + month - 1) % step->months == 0)
        draw_tick (cr, wings, style, plot, step, year, month, 1, begun);
      return;
    }
  for (int day = 1; day <= 28 || step->days < 5; day += step->days)
    {
      if (day > g_date_get_days_in_month ((GDateMonth)month, (GDateYear)year))
        break;
      if (step->days < 2 || day < 31 - step->days / 2)
        draw_tick (cr, wings, style, plot, step, year, month, day, begun);
    }
}

static void
draw_times (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea plot)
{
  const Step *step = choose_step (cr, wings, style, plot);
  gboolean begun = FALSE;
  int from = (int)floor (CLAMP (wings->from_year, 1.0, 9000.0)),
      to = (int)floor (CLAMP (wings->to_year, 1.0, 9000.0));
  for (int year = from; year <= to; year++)
    if (step->months < 12 || year % (step->months / 12) == 0)
      for (int month = 1; month <= (step->months >= 12 ? 1 : 12); month++)
        {
          double at = year_of (year, month, 1);
          if (at > wings->from_year - 0.1 && at <= wings->to_year)
            draw_month (cr, wings, style, plot, step, year, month, &begun);
        }
}

/* -- latitude -------------------------------------------------------------------------------- */

static double
lat_step (const TfWings *wings, const TfChartStyle *style, TfArea plot)
{
  static const double lats[] = { 10, 20, 40 };
  double unit = (plot.y - tf_wings_y (wings, plot, 1)) - (plot.y - tf_wings_y (wings, plot, 0));
  for (guint k = 0; k < G_N_ELEMENTS (lats); k++)
    if (lats[k] * unit >= style->text_pt * (k == 0 ? 2.4 : 1.4))
      return lats[k];
  return 80;
}

static void
draw_latitudes (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea plot)
{
  double step = lat_step (wings, style, plot),
         top = wings->lat_max_deg > 0 ? wings->lat_max_deg : 45;
  for (double lat = -floor (top / step) * step; lat <= top; lat += step)
    {
      double y = floor (tf_wings_y (wings, plot, lat)) + 0.5;
      gboolean equator = fabs (lat) < 1e-9;
      g_autofree char *label = tf_chart_dup_degrees (lat, TRUE);
      tf_chart_set (cr, equator ? tf_chart_mix (style->line, style->ink, 0.35) : style->line);
      cairo_set_line_width (cr, equator ? 1.4 : 1);
      cairo_move_to (cr, plot.x, y);
      cairo_line_to (cr, plot.x + plot.width, y);
      cairo_stroke (cr);
      tf_chart_text (cr, style, plot.x - style->text_pt * 0.45, y, 1, 0.5, style->faint, label);
    }
}

void
tf_wings_draw_scale (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea plot)
{
  draw_latitudes (cr, wings, style, plot);
  if (isfinite (wings->from_year) && wings->to_year > wings->from_year)
    draw_times (cr, wings, style, plot);
}

/* -- cycles and divides ---------------------------------------------------------------------- */

/* By the table, or the provisional minimum; NaN: not known. */
static double
minimum_year (const TfWings *wings, int cycle)
{
  return tf_time_year (wings->divides != NULL ? tf_divides_get_minimum (wings->divides, cycle)
                                              : tf_cycle_minimum (cycle));
}

/* A minimum that a person entered is a dashed line. */
static void
draw_provisional (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea plot, double year)
{
  static const double dashes[] = { 5, 4 };
  double x = floor (tf_wings_x (wings, plot, year)) + 0.5;
  tf_chart_set (cr, style->teal);
  cairo_set_line_width (cr, 1.2);
  cairo_set_dash (cr, dashes, G_N_ELEMENTS (dashes), 0);
  cairo_move_to (cr, x, plot.y);
  cairo_line_to (cr, x, plot.y + plot.height);
  cairo_stroke (cr);
  cairo_set_dash (cr, NULL, 0, 0);
}

static void
draw_cycle (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea plot, int number)
{
  double begin = minimum_year (wings, number), end = minimum_year (wings, number + 1), width;
  gboolean provisional = tf_cycle_find (number) == NULL;
  double from = MAX (begin, wings->from_year),
         to = isfinite (end) ? MIN (end, wings->to_year) : wings->to_year;
  if (!(to > from))
    return;
  double left = tf_wings_x (wings, plot, from), right = tf_wings_x (wings, plot, to);
  if (number % 2 != 0)
    {
      tf_chart_set (cr, style->band);
      cairo_rectangle (cr, left, plot.y, right - left, plot.height);
      cairo_fill (cr);
    }
  if (provisional && begin >= wings->from_year)
    draw_provisional (cr, wings, style, plot, begin);
  g_autofree char *full
      = g_strdup_printf (provisional ? _ ("cycle %d, provisional") : _ ("cycle %d"), number);
  g_autofree char *brief = g_strdup_printf ("%d", number);
  tf_chart_measure (cr, style, full, &width, NULL);
  const char *label = width + 4 <= right - left ? full : brief;
  tf_chart_measure (cr, style, label, &width, NULL);
  if (width + 4 <= right - left)
    tf_chart_text (cr, style, (left + right) / 2, plot.y - style->text_pt * 0.2, 0.5, 1,
                   style->faint, label);
}

void
tf_wings_draw_cycles (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea plot)
{
  for (int number = 1; isfinite (minimum_year (wings, number)); number++)
    draw_cycle (cr, wings, style, plot, number);
}
