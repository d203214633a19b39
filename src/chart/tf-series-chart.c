/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-series-chart.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-plot-private.h"

static const double day_s = 86400, gap_steps = 2.2, head_text = 1.75;

typedef enum
{
  PANEL_TILT,
  PANEL_FLUX,
  PANEL_SEPARATION,
  PANEL_LINE,
  PANEL_MU,
  N_PANELS
} Panel;

static const struct
{
  const char *name, *unit;
  double height; /* share of a usual panel */
} panels[N_PANELS] = {
  { N_ ("axis tilt"), "", 1.15 },
  { N_ ("flux, each polarity"), N_ ("10²¹ Mx"), 1.1 },
  { N_ ("separation"), N_ ("Mm"), 0.9 },
  { N_ ("inversion line, strong"), N_ ("Mm"), 0.9 },
  { "μ", "", 0.75 },
};

/* What a panel shows of a point: up to two values, each with its uncertainty. */
typedef struct
{
  double value[2], sigma[2];
  int n;
  gboolean faint;
} Shown;

static Shown
shown_in (const TfSeriesChart *chart, const TfSeriesMoment *p, Panel panel)
{
  switch (panel)
    {
    case PANEL_TILT:
      return (Shown){ { p->tilt_deg }, { p->tilt_sigma_deg }, 1, FALSE };
    case PANEL_FLUX:
      return (Shown){ { p->positive_mx / 1e21, p->negative_mx / 1e21 },
                      { p->positive_sigma_mx / 1e21, p->negative_sigma_mx / 1e21 },
                      2,
                      FALSE };
    case PANEL_SEPARATION:
      return (Shown){ { p->separation_mm }, { p->separation_sigma_mm }, 1, FALSE };
    case PANEL_LINE:
      return (Shown){ { p->line_mm }, { NAN }, 1, !(p->mu >= chart->line_mu) };
    default:
      return (Shown){ { p->mu }, { NAN }, 1, FALSE };
    }
}

/* -- the axes -------------------------------------------------------------------------------- */

typedef struct
{
  TfPlot plots[N_PANELS];
  guint n; /* panels that there is room for */
} Layout;

/* From whole days to whole days, so that the axis begins and ends on a label. */
static void
time_span (const TfSeriesChart *chart, double *from, double *to)
{
  double first = chart->n > 0 ? chart->points[0].time.s : 0,
         last = chart->n > 0 ? chart->points[chart->n - 1].time.s : day_s;
  double margin = fmax ((last - first) * 0.03, day_s / 8);
  *from = first - margin;
  *to = last + margin;
}

static void
set_range (TfPlot *plot, const TfSeriesChart *chart, Panel panel)
{
  double low = INFINITY, high = -INFINITY;
  for (guint k = 0; k < chart->n; k++)
    {
      Shown s = shown_in (chart, &chart->points[k], panel);
      for (int j = 0; j < s.n; j++)
        {
          double sigma = isfinite (s.sigma[j]) ? s.sigma[j] : 0;
          if (isfinite (s.value[j]))
            {
              low = fmin (low, s.value[j] - sigma);
              high = fmax (high, s.value[j] + sigma);
            }
        }
    }
  if (panel == PANEL_TILT)
    {
      low = fmax (fmin (isfinite (low) ? low : -10, -10), -180);
      high = fmin (fmax (isfinite (high) ? high : 10, 10), 180);
    }
  else if (panel == PANEL_MU)
    low = 0, high = 1;
  else
    low = 0, high = high > 0 && isfinite (high) ? high : 1;
  double room = (high - low) * 0.06;
  plot->y0 = panel == PANEL_TILT ? low - room : low;
  plot->y1 = high + room;
}

static Layout
lay_out (const TfSeriesChart *chart, const TfChartStyle *style, TfArea area)
{
  double text = style->text_pt, foot = text * 2.0, total = 0;
  Layout layout = { .n = N_PANELS };
  while (layout.n > 2 && (area.height - foot) / layout.n < text * 5.2)
    layout.n--;
  for (guint k = 0; k < layout.n; k++)
    total += panels[k].height;
  double y = area.y, from, to;
  time_span (chart, &from, &to);
  for (guint k = 0; k < layout.n; k++)
    {
      double height = (area.height - foot) * panels[k].height / total;
      TfPlot *plot = &layout.plots[k];
      plot->plot = (TfArea){ area.x + text * 3.4, y + text * head_text,
                             MAX (area.width - text * 4.6, 1),
                             MAX (height - text * (head_text + 0.5), 1) };
      plot->x0 = from;
      plot->x1 = to;
      set_range (plot, chart, (Panel)k);
      y += height;
    }
  return layout;
}

/* -- time along the foot --------------------------------------------------------------------- */

char *
tf_series_chart_dup_day (TfTime time)
{
  int year, month, day, hour, minute;
  if (!tf_time_calendar (tf_time_add (time, 30), &year, &month, &day, &hour, &minute, NULL))
    return g_strdup (_ ("time unknown"));
  g_autoptr (GDateTime) date = g_date_time_new_utc (year, month, day, hour, minute, 0);
  return g_date_time_format (date, _ ("%-d %b %H:%M"));
}

static TfTime
midnight_before (double seconds)
{
  int year, month, day;
  TfTime time = { seconds };
  if (!tf_time_calendar (time, &year, &month, &day, NULL, NULL, NULL))
    return TF_TIME_UNKNOWN;
  return tf_time_from_calendar (year, month, day, 0, 0, 0, TF_SCALE_UTC);
}

static void
draw_days (cairo_t *cr, const Layout *layout, const TfChartStyle *style, TfArea area)
{
  const TfPlot *last = &layout->plots[layout->n - 1];
  double text = style->text_pt, room = text * 4.2;
  double days = ceil (room * (last->x1 - last->x0) / day_s / last->plot.width);
  days = MAX (days, 1);
  TfTime tick = midnight_before (last->x0);
  if (!tf_time_is_known (tick))
    return;
  for (; tick.s <= last->x1; tick = tf_time_add (tick, days * day_s))
    {
      int year, month, day;
      double x = tf_plot_x (last, tick.s);
      if (tick.s < last->x0 || !tf_time_calendar (tf_time_add (tick, 30), &year, &month, &day, NULL, NULL, NULL))
        continue;
      g_autoptr (GDateTime) date = g_date_time_new_utc (year, month, day, 0, 0, 0);
      g_autofree char *label = g_date_time_format (date, _ ("%-d %b"));
      double half = text * 1.8;
      if (x - half < area.x || x + half > area.x + area.width)
        continue;
      tf_chart_text (cr, style, x, last->plot.y + last->plot.height + text * 0.6, 0.5, 0,
                     style->faint, label);
    }
}

/* -- one panel ------------------------------------------------------------------------------- */

static void
shade (cairo_t *cr, const TfPlot *plot, const TfChartStyle *style, double from, double to)
{
  double left = tf_plot_x (plot, from), right = tf_plot_x (plot, to);
  left = fmax (left, plot->plot.x);
  right = fmin (right, plot->plot.x + plot->plot.width);
  if (right <= left)
    return;
  tf_chart_set (cr, style->band);
  cairo_rectangle (cr, left, plot->plot.y, right - left, plot->plot.height);
  cairo_fill (cr);
}

/* Half way to the neighbour that is not near the limb. */
static void
shade_limb (cairo_t *cr, const TfSeriesChart *chart, const TfPlot *plot, const TfChartStyle *style)
{
  for (guint k = 0; k < chart->n;)
    {
      if (!(chart->points[k].mu < chart->limb_mu))
        {
          k++;
          continue;
        }
      guint last = k;
      while (last + 1 < chart->n && chart->points[last + 1].mu < chart->limb_mu)
        last++;
      double from = k == 0 ? plot->x0
                           : (chart->points[k].time.s + chart->points[k - 1].time.s) / 2,
             to = last + 1 == chart->n
                      ? plot->x1
                      : (chart->points[last].time.s + chart->points[last + 1].time.s) / 2;
      shade (cr, plot, style, from, to);
      k = last + 1;
    }
}

static void
draw_joy (cairo_t *cr, const TfSeriesChart *chart, const TfPlot *plot, const TfChartStyle *style)
{
  if (!isfinite (chart->joy_deg) || !isfinite (chart->joy_scatter_deg))
    return;
  double low = fmax (chart->joy_deg - chart->joy_scatter_deg, plot->y0),
         high = fmin (chart->joy_deg + chart->joy_scatter_deg, plot->y1);
  if (high <= low)
    return;
  double top = tf_plot_y (plot, high), foot = tf_plot_y (plot, low);
  tf_chart_set_alpha (cr, style->teal, 0.13);
  cairo_rectangle (cr, plot->plot.x, top, plot->plot.width, foot - top);
  cairo_fill (cr);
  if (chart->joy_deg > plot->y0 && chart->joy_deg < plot->y1)
    {
      double y = tf_plot_y (plot, chart->joy_deg), dash = style->text_pt * 0.4;
      tf_chart_set_alpha (cr, style->teal, 0.7);
      cairo_set_line_width (cr, style->text_pt * 0.09);
      cairo_set_dash (cr, &dash, 1, 0);
      cairo_move_to (cr, plot->plot.x, y);
      cairo_line_to (cr, plot->plot.x + plot->plot.width, y);
      cairo_stroke (cr);
      cairo_set_dash (cr, NULL, 0, 0);
    }
}

static void
draw_joins (cairo_t *cr, const TfSeriesChart *chart, const TfPlot *plot, const TfChartStyle *style,
            Panel panel, int value)
{
  tf_chart_set_alpha (cr, style->slate, 0.45);
  cairo_set_line_width (cr, style->text_pt * 0.08);
  for (guint k = 1; k < chart->n; k++)
    {
      const TfSeriesMoment *a = &chart->points[k - 1], *b = &chart->points[k];
      double ya = shown_in (chart, a, panel).value[value],
             yb = shown_in (chart, b, panel).value[value];
      if (!isfinite (ya) || !isfinite (yb)
          || b->time.s - a->time.s > gap_steps * chart->cadence_s)
        continue;
      cairo_move_to (cr, tf_plot_x (plot, a->time.s), tf_plot_y (plot, ya));
      cairo_line_to (cr, tf_plot_x (plot, b->time.s), tf_plot_y (plot, yb));
    }
  cairo_stroke (cr);
}

static void
draw_sign (cairo_t *cr, const TfChartStyle *style, double x, double y, Panel panel, int value,
           gboolean open)
{
  double radius = style->text_pt * 0.27;
  if (panel == PANEL_FLUX)
    {
      tf_chart_pole (cr, style, x, y, radius * 1.1, value == 0 ? 1 : -1);
      return;
    }
  cairo_new_sub_path (cr);
  cairo_arc (cr, x, y, radius, 0, 2 * G_PI);
  tf_chart_set (cr, open ? style->ground : style->ink);
  cairo_fill_preserve (cr);
  tf_chart_set (cr, style->ink);
  cairo_set_line_width (cr, style->text_pt * 0.1);
  cairo_stroke (cr);
}

static void
draw_point (cairo_t *cr, const TfSeriesMoment *p, const Shown *s, const TfPlot *plot,
            const TfChartStyle *style, Panel panel)
{
  for (int j = 0; j < s->n; j++)
    {
      if (!isfinite (s->value[j]))
        continue;
      tf_plot_whisker_y (cr, plot, style, p->time.s, s->value[j] - s->sigma[j],
                         s->value[j] + s->sigma[j], 0);
      draw_sign (cr, style, tf_plot_x (plot, p->time.s), tf_plot_y (plot, s->value[j]), panel, j,
                 p->hint);
    }
}

/* Those of one faintness together: a group a point takes a second for a hundred of them. */
static void
draw_points (cairo_t *cr, const TfSeriesChart *chart, const TfPlot *plot, const TfChartStyle *style,
             Panel panel)
{
  static const double strengths[] = { 0.35, 0.6, 1 };
  for (guint way = 0; way < G_N_ELEMENTS (strengths); way++)
    {
      guint drawn = 0;
      for (guint k = 0; k < chart->n; k++)
        {
          const TfSeriesMoment *p = &chart->points[k];
          Shown s = shown_in (chart, p, panel);
          if (way != (s.faint ? 0 : p->hint ? 1 : 2))
            continue;
          if (drawn++ == 0)
            cairo_push_group (cr);
          draw_point (cr, p, &s, plot, style, panel);
        }
      if (drawn == 0)
        continue;
      cairo_pop_group_to_source (cr);
      cairo_paint_with_alpha (cr, strengths[way]);
    }
}

static void
draw_moment (cairo_t *cr, const Layout *layout, const TfChartStyle *style, TfTime time,
             TfColour colour, double width)
{
  const TfPlot *first = &layout->plots[0], *last = &layout->plots[layout->n - 1];
  double x = tf_plot_x (first, time.s);
  tf_chart_set (cr, colour);
  cairo_set_line_width (cr, style->text_pt * width);
  cairo_move_to (cr, x, first->plot.y);
  cairo_line_to (cr, x, last->plot.y + last->plot.height);
  cairo_stroke (cr);
}

static void
draw_head (cairo_t *cr, const TfPlot *plot, const TfChartStyle *style, Panel panel)
{
  double text = style->text_pt, y = plot->plot.y - text * 0.35;
  double width = tf_chart_text (cr, style, plot->plot.x, y, 0, 1, style->ink, _ (panels[panel].name));
  if (*panels[panel].unit != '\0')
    tf_chart_text (cr, style, plot->plot.x + width + text * 0.7, y, 0, 1, style->faint,
                   _ (panels[panel].unit));
}

static void
draw_panel (cairo_t *cr, const TfSeriesChart *chart, const TfPlot *plot, const TfChartStyle *style,
            Panel panel)
{
  double text = style->text_pt;
  draw_head (cr, plot, style, panel);
  shade_limb (cr, chart, plot, style);
  tf_plot_draw_y (cr, plot, style,
                  panel == PANEL_MU ? 0.5
                                    : tf_plot_step (plot->y0, plot->y1, plot->plot.height, text * 1.7),
                  panel == PANEL_TILT ? tf_tick_degrees : tf_tick_plain, NULL);
  if (panel == PANEL_TILT)
    draw_joy (cr, chart, plot, style);
  for (int j = 0; j < (panel == PANEL_FLUX ? 2 : 1); j++)
    draw_joins (cr, chart, plot, style, panel, j);
  draw_points (cr, chart, plot, style, panel);
}

static double
measure_words (cairo_t *cr, const TfChartStyle *style, const char *words)
{
  double width, height;
  tf_chart_measure (cr, style, words, &width, &height);
  return width + style->text_pt * 1.2;
}

/* At the right of the panel's head, one after the other from the right; those that have no room are
 * left out, what the rule takes last. */
static void
draw_words (cairo_t *cr, const TfSeriesChart *chart, const Layout *layout,
            const TfChartStyle *style)
{
  const TfPlot *plot = &layout->plots[PANEL_TILT];
  gboolean limb = FALSE,
           taken = chart->taken >= 0 && chart->taken < (int)chart->n && chart->taken_words != NULL;
  for (guint k = 0; k < chart->n; k++)
    limb = limb || chart->points[k].mu < chart->limb_mu;
  g_autofree char *joy = isfinite (chart->joy_deg) && chart->joy_name != NULL
                             ? g_strdup_printf (_ ("Joy's law, %s"), chart->joy_name)
                             : NULL,
                  *near = limb ? g_strdup_printf (_ ("shaded: μ < %.1f"), chart->limb_mu) : NULL;
  double text = style->text_pt, y = plot->plot.y - text * 0.35,
         right = plot->plot.x + plot->plot.width,
         left = plot->plot.x + measure_words (cr, style, _ (panels[PANEL_TILT].name)),
         room = right - left - (taken ? measure_words (cr, style, chart->taken_words) : 0);
  const char *const words[] = { joy, near };
  for (guint k = 0; k < G_N_ELEMENTS (words); k++)
    {
      double width = words[k] != NULL ? measure_words (cr, style, words[k]) : 0;
      if (words[k] == NULL || width > room)
        continue;
      tf_chart_text (cr, style, right, y, 1, 1, k == 0 ? style->teal : style->faint, words[k]);
      right -= width;
      room -= width;
    }
  if (!taken || room < 0)
    return;
  double x = tf_plot_x (plot, chart->points[chart->taken].time.s) + text * 0.4;
  tf_chart_text (cr, style, CLAMP (x, left, right - measure_words (cr, style, chart->taken_words)), y,
                 0, 1, style->ink, chart->taken_words);
}

static void
draw_stretch (cairo_t *cr, const TfSeriesChart *chart, const Layout *layout,
              const TfChartStyle *style)
{
  if (!tf_time_is_known (chart->from) || !tf_time_is_known (chart->to))
    return;
  tf_chart_set_alpha (cr, style->teal, 0.1);
  for (guint k = 0; k < layout->n; k++)
    {
      const TfPlot *plot = &layout->plots[k];
      double left = tf_plot_x (plot, chart->from.s), right = tf_plot_x (plot, chart->to.s);
      cairo_rectangle (cr, left, plot->plot.y, right - left, plot->plot.height);
    }
  cairo_fill (cr);
}

void
tf_series_chart_draw_still (cairo_t *cr, const TfSeriesChart *chart, const TfChartStyle *style,
                            TfArea area)
{
  cairo_save (cr);
  Layout layout = lay_out (chart, style, area);
  for (guint k = 0; k < layout.n && chart->n > 0; k++)
    draw_panel (cr, chart, &layout.plots[k], style, (Panel)k);
  if (chart->n > 0)
    draw_days (cr, &layout, style, area);
  else
    tf_chart_text (cr, style, area.x + area.width / 2, area.y + area.height / 2, 0.5, 0.5,
                   style->faint, _ ("No passage is chosen."));
  cairo_restore (cr);
}

void
tf_series_chart_draw_over (cairo_t *cr, const TfSeriesChart *chart, const TfChartStyle *style,
                           TfArea area)
{
  if (chart->n == 0)
    return;
  cairo_save (cr);
  Layout layout = lay_out (chart, style, area);
  draw_stretch (cr, chart, &layout, style);
  if (chart->taken >= 0 && chart->taken < (int)chart->n)
    draw_moment (cr, &layout, style, chart->points[chart->taken].time, style->slate, 0.12);
  if (chart->now >= 0 && chart->now < (int)chart->n)
    draw_moment (cr, &layout, style, chart->points[chart->now].time, style->positive, 0.16);
  draw_words (cr, chart, &layout, style);
  cairo_restore (cr);
}

void
tf_series_chart_draw (cairo_t *cr, const TfSeriesChart *chart, const TfChartStyle *style,
                      TfArea area)
{
  tf_series_chart_draw_still (cr, chart, style, area);
  tf_series_chart_draw_over (cr, chart, style, area);
}

/* -- hits ------------------------------------------------------------------------------------ */

TfTime
tf_series_chart_time_at (const TfSeriesChart *chart, const TfChartStyle *style, TfArea area,
                         double x)
{
  Layout layout = lay_out (chart, style, area);
  const TfPlot *plot = &layout.plots[0];
  double s = tf_plot_back_x (plot, x);
  return (TfTime){ CLAMP (s, plot->x0, plot->x1) };
}

int
tf_series_chart_nearest (const TfSeriesChart *chart, const TfChartStyle *style, TfArea area,
                         double x)
{
  double at = tf_series_chart_time_at (chart, style, area, x).s;
  int best = -1;
  for (guint k = 0; k < chart->n; k++)
    if (best < 0
        || fabs (chart->points[k].time.s - at) < fabs (chart->points[best].time.s - at))
      best = (int)k;
  return best;
}

static int
compare_steps (gconstpointer a, gconstpointer b)
{
  double x = *(const double *)a, y = *(const double *)b;
  return (x > y) - (x < y);
}

double
tf_series_chart_cadence (const TfSeriesMoment *points, guint n)
{
  g_autoptr (GArray) steps = g_array_new (FALSE, FALSE, sizeof (double));
  for (guint k = 1; k < n; k++)
    {
      double step = points[k].time.s - points[k - 1].time.s;
      if (step > 0)
        g_array_append_val (steps, step);
    }
  if (steps->len == 0)
    return NAN;
  g_array_sort (steps, compare_steps);
  return g_array_index (steps, double, (steps->len - 1) / 2);
}

/* -- words ----------------------------------------------------------------------------------- */

static void
add_number (GString *text, const char *name, double value, double sigma, const char *unit)
{
  if (!isfinite (value))
    return;
  g_string_append_printf (text, "; %s %.1f", name, value);
  if (isfinite (sigma))
    g_string_append_printf (text, " ± %.1f", sigma);
  g_string_append_printf (text, "%s%s", *unit == '\0' || *unit == '\xc2' ? "" : " ", unit);
}

char *
tf_series_chart_dup_point (const TfSeriesMoment *p)
{
  g_autofree char *day = tf_series_chart_dup_day (p->time);
  GString *text = g_string_new (day);
  if (p->hint)
    g_string_append_printf (text, " (%s)", _ ("hint"));
  add_number (text, _ ("tilt"), p->tilt_deg, p->tilt_sigma_deg, "°");
  add_number (text, _ ("positive"), p->positive_mx / 1e21, p->positive_sigma_mx / 1e21,
              _ ("10²¹ Mx"));
  add_number (text, _ ("negative"), p->negative_mx / 1e21, p->negative_sigma_mx / 1e21,
              _ ("10²¹ Mx"));
  add_number (text, _ ("separation"), p->separation_mm, p->separation_sigma_mm, _ ("Mm"));
  add_number (text, _ ("inversion line"), p->line_mm, NAN, _ ("Mm"));
  if (isfinite (p->mu))
    g_string_append_printf (text, "; μ %.2f", p->mu);
  return g_string_free (text, FALSE);
}

char *
tf_series_chart_dup_description (const TfSeriesChart *chart)
{
  if (chart->n == 0)
    return g_strdup (_ ("No passage is chosen."));
  g_autofree char *first = tf_series_chart_dup_day (chart->points[0].time),
                  *last = tf_series_chart_dup_day (chart->points[chart->n - 1].time);
  GString *text = g_string_new (NULL);
  g_string_append_printf (text, ngettext ("%u moment, %s to %s.", "%u moments, %s to %s.", chart->n),
                          chart->n, first, last);
  if (chart->now >= 0 && chart->now < (int)chart->n)
    {
      g_autofree char *now = tf_series_chart_dup_point (&chart->points[chart->now]);
      g_string_append_printf (text, _ (" Now: %s."), now);
    }
  if (chart->taken >= 0 && chart->taken < (int)chart->n && chart->taken_words != NULL)
    {
      g_autofree char *day = tf_series_chart_dup_day (chart->points[chart->taken].time);
      g_string_append_printf (text, " %s: %s.", chart->taken_words, day);
    }
  return g_string_free (text, FALSE);
}
