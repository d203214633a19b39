/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Since emergence: median tilt, separation and flux of the regions born on the disk against their
 * age. Rings and whiskers: median and quartiles of all; broken line: the east half of the disk alone,
 * dotted: the west, since what differs between them at one age is the limb's doing. Under each age
 * how many regions are seen there. */

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-laws-charts-private.h"
#include "tf-number.h"

enum
{
  PANELS = 3,
  LEAST = 3 /* regions: an age with fewer has no sign */
};
#define MX_UNIT 1e21

static const TfSpread *
spread_of (const TfEmergenceAge *age, int panel)
{
  return panel == 0 ? &age->tilt_deg : panel == 1 ? &age->separation_deg : &age->flux_mx;
}

static double
unit_of (int panel)
{
  return panel == 2 ? MX_UNIT : 1;
}

static double
foot_height (const TfChartStyle *style)
{
  return style->text_pt * 6.6;
}

/* The frame of a panel holds the quartiles of all ages. */
static void
span_of (const TfLawsCharts *charts, int panel, double *low, double *high)
{
  *low = panel == 0 ? INFINITY : 0;
  *high = -INFINITY;
  const GArray *ages = charts->ages[TF_EMERGENCE_WHOLE];
  for (guint k = 0; k < ages->len; k++)
    {
      const TfSpread *s = spread_of (&g_array_index (ages, TfEmergenceAge, k), panel);
      if (s->n < LEAST)
        continue;
      *low = fmin (*low, s->low / unit_of (panel));
      *high = fmax (*high, s->high / unit_of (panel));
    }
  if (!(*high > *low))
    {
      *low = 0;
      *high = 1;
    }
  double margin = 0.08 * (*high - *low);
  *high += margin;
  *low = panel == 0 ? fmin (*low - margin, 0) : 0;
}

static TfPlot
plot_of (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area, int panel)
{
  double text = style->text_pt,
         height = MAX ((area.height - foot_height (style)) / PANELS, text * 3);
  const GArray *ages = charts->ages[TF_EMERGENCE_WHOLE];
  TfPlot plot = { .plot = { area.x + 4 * text, area.y + panel * height + 1.7 * text,
                            MAX (area.width - 5.2 * text, 10), MAX (height - 2.2 * text, 4) } };
  double bin = charts->emergence.bin_days / 2;
  plot.x0 = ages->len > 0 ? g_array_index (ages, TfEmergenceAge, 0).age_days - bin : 0;
  plot.x1 = ages->len > 0 ? g_array_index (ages, TfEmergenceAge, ages->len - 1).age_days + bin : 1;
  span_of (charts, panel, &plot.y0, &plot.y1);
  return plot;
}

static void
draw_half (cairo_t *cr, const TfLawsCharts *charts, const TfPlot *plot, const TfChartStyle *style,
           int panel, TfEmergenceSide side)
{
  double text = style->text_pt;
  const double broken[] = { text * 0.55, text * 0.35 }, dotted[] = { text * 0.14, text * 0.28 };
  const GArray *ages = charts->ages[side];
  cairo_new_path (cr);
  for (guint k = 0; k < ages->len; k++)
    {
      const TfEmergenceAge *age = &g_array_index (ages, TfEmergenceAge, k);
      const TfSpread *s = spread_of (age, panel);
      if (s->n < LEAST)
        cairo_new_sub_path (cr);
      else
        cairo_line_to (cr, tf_plot_x (plot, age->age_days),
                       tf_plot_y (plot, s->median / unit_of (panel)));
    }
  cairo_set_dash (cr, side == TF_EMERGENCE_EAST ? broken : dotted, 2, 0);
  tf_chart_set (cr, style->teal);
  cairo_set_line_width (cr, text * 0.14);
  cairo_stroke (cr);
  cairo_set_dash (cr, NULL, 0, 0);
}

static void
draw_whole (cairo_t *cr, const TfLawsCharts *charts, const TfPlot *plot, const TfChartStyle *style,
            int panel)
{
  const GArray *ages = charts->ages[TF_EMERGENCE_WHOLE];
  for (guint k = 0; k < ages->len; k++)
    {
      const TfEmergenceAge *age = &g_array_index (ages, TfEmergenceAge, k);
      const TfSpread *s = spread_of (age, panel);
      if (s->n < LEAST)
        continue;
      tf_plot_whisker_y (cr, plot, style, age->age_days, s->low / unit_of (panel),
                         s->high / unit_of (panel), style->text_pt * 0.16);
      tf_plot_median (cr, plot, style, age->age_days, s->median / unit_of (panel));
    }
}

static void
draw_zero (cairo_t *cr, const TfPlot *plot, const TfChartStyle *style)
{
  double x = tf_plot_x (plot, 0);
  if (plot->x0 > 0 || plot->x1 < 0)
    return;
  cairo_new_path (cr);
  cairo_move_to (cr, x, plot->plot.y);
  cairo_line_to (cr, x, plot->plot.y + plot->plot.height);
  tf_chart_set (cr, tf_chart_mix (style->line, style->ink, 0.35));
  cairo_set_line_width (cr, style->text_pt * 0.09);
  cairo_stroke (cr);
}

/* How many regions at each age, as far as the numbers have room. */
static void
draw_counts (cairo_t *cr, const TfLawsCharts *charts, const TfPlot *plot, const TfChartStyle *style,
             double y)
{
  TfChartStyle small = *style;
  small.text_pt = style->text_pt * 0.78;
  const GArray *ages = charts->ages[TF_EMERGENCE_WHOLE];
  double free_from = plot->plot.x - 1;
  tf_chart_text (cr, &small, plot->plot.x - style->text_pt * 0.45, y, 1, 0, style->faint, "n");
  for (guint k = 0; k < ages->len; k++)
    {
      const TfEmergenceAge *age = &g_array_index (ages, TfEmergenceAge, k);
      double width, at = tf_plot_x (plot, age->age_days);
      g_autofree char *number = g_strdup_printf ("%u", age->regions);
      tf_chart_measure (cr, &small, number, &width, NULL);
      if (at - width / 2 < free_from)
        continue;
      tf_chart_text (cr, &small, at, y, 0.5, 0, style->faint, number);
      free_from = at + width / 2 + style->text_pt * 0.3;
    }
}

static void
draw_panel (cairo_t *cr, const TfLawsCharts *charts, const TfChartStyle *style, TfArea area,
            int panel)
{
  static const char *const titles[] = { N_ ("axis tilt"), N_ ("separation"), N_ ("flux, 10²¹ Mx") };
  TfPlot plot = plot_of (charts, style, area, panel);
  double text = style->text_pt;
  tf_plot_draw_y (cr, &plot, style, tf_plot_step (plot.y0, plot.y1, plot.plot.height, text * 1.9),
                  panel < 2 ? tf_tick_degrees : tf_tick_plain, _ (titles[panel]));
  draw_zero (cr, &plot, style);
  tf_plot_clip (cr, &plot);
  draw_half (cr, charts, &plot, style, panel, TF_EMERGENCE_EAST);
  draw_half (cr, charts, &plot, style, panel, TF_EMERGENCE_WEST);
  draw_whole (cr, charts, &plot, style, panel);
  cairo_restore (cr);
  if (panel < PANELS - 1)
    return;
  tf_plot_draw_x (cr, &plot, style, tf_plot_step (plot.x0, plot.x1, plot.plot.width, text * 2.6),
                  tf_tick_plain, NULL);
  draw_counts (cr, charts, &plot, style, plot.plot.y + plot.plot.height + text * 1.9);
}

static gboolean
has_signs (const TfLawsCharts *charts)
{
  const GArray *ages = charts->ages[TF_EMERGENCE_WHOLE];
  for (guint k = 0; k < ages->len; k++)
    for (int panel = 0; panel < PANELS; panel++)
      if (spread_of (&g_array_index (ages, TfEmergenceAge, k), panel)->n >= LEAST)
        return TRUE;
  return FALSE;
}

/* Why there is nothing to see; NULL: there is. */
static char *
dup_missing (const TfLawsCharts *charts)
{
  if (!tf_emergence_plot_has (charts))
    return g_strdup (_ ("No region is known to be born on the disk."));
  if (has_signs (charts))
    return NULL;
  return g_strdup_printf (g_dngettext (GETTEXT_PACKAGE,
                                       "%u passage born on the disk: no age has the %d that a median takes.",
                                       "%u passages born on the disk: no age has the %d that a median takes.",
                                       charts->n_born),
                          charts->n_born, LEAST);
}

void
tf_emergence_plot_draw (cairo_t *cr, const TfLawsCharts *charts, const TfChartStyle *style,
                        TfArea area)
{
  double text = style->text_pt, y = area.y + area.height - foot_height (style) + text * 2.6;
  TfChartStyle small = *style;
  small.text_pt = text * 0.86;
  g_autofree char *missing = dup_missing (charts);
  if (missing != NULL)
    {
      tf_plot_note (cr, &small, area, area.y + area.height / 2, missing);
      return;
    }
  cairo_save (cr);
  for (int panel = 0; panel < PANELS; panel++)
    draw_panel (cr, charts, style, area, panel);
  g_autofree char *first
      = g_strdup_printf (_ ("days since the flux reached %.0f %% of its greatest · %u passages"),
                         100 * charts->emergence.rise_share, charts->n_born);
  y += tf_plot_note (cr, &small, area, y, first);
  y += tf_plot_note (cr, &small, area, y, _ ("rings, whiskers: medians, quartiles"));
  tf_plot_note (cr, &small, area, y, _ ("broken: east half of the disk alone, dotted: west"));
  cairo_restore (cr);
}

/* An age holds many regions: one after the other, those that break Hale's law or not alike. */
int
tf_emergence_plot_hit (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area, double x,
                       double y, int after)
{
  TfPlot plot = plot_of (charts, style, area, 0);
  double age = tf_plot_back_x (&plot, x);
  guint n = charts->ages[TF_EMERGENCE_WHOLE]->len;
  if (n == 0 || !(age >= plot.x0 && age < plot.x1))
    return -1;
  guint bin = MIN ((guint)((age - plot.x0) / charts->emergence.bin_days), n - 1);
  int first = -1, next = -1; /* by row: the least of all, and the least above @after */
  for (guint k = 0; k < charts->seen->len; k++)
    {
      const TfChartSight *seen = &g_array_index (charts->seen, TfChartSight, k);
      int row = (int)seen->row;
      if (seen->age != bin)
        continue;
      first = first < 0 || row < first ? row : first;
      if (row > after && (next < 0 || row < next))
        next = row;
    }
  return next >= 0 ? next : first;
}

double *
tf_emergence_plot_dup_places (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area, guint *n)
{
  const GArray *ages = charts->ages[TF_EMERGENCE_WHOLE];
  double *xy = g_new (double, 2 * PANELS * ages->len + 2);
  *n = PANELS * ages->len;
  for (guint k = 0; k < *n; k++)
    {
      int panel = (int)(k / ages->len);
      TfPlot plot = plot_of (charts, style, area, panel);
      const TfEmergenceAge *age = &g_array_index (ages, TfEmergenceAge, k % ages->len);
      const TfSpread *s = spread_of (age, panel);
      xy[2 * k] = s->n >= LEAST ? tf_plot_x (&plot, age->age_days) : NAN;
      xy[2 * k + 1] = tf_plot_y (&plot, s->median / unit_of (panel));
    }
  return xy;
}

char *
tf_emergence_plot_dup_sign (const TfLawsCharts *charts, guint k)
{
  const GArray *ages = charts->ages[TF_EMERGENCE_WHOLE];
  int panel = (int)(k / ages->len);
  const TfEmergenceAge *age = &g_array_index (ages, TfEmergenceAge, k % ages->len);
  const TfSpread *s = spread_of (age, panel);
  double unit = unit_of (panel);
  switch (panel)
    {
    case 0:
      return g_strdup_printf (_ ("day %.1f: median tilt %.1f°, quartiles %.1f° to %.1f°, n %u"), age->age_days, s->median, s->low, s->high, s->n);
    case 1:
      return g_strdup_printf (_ ("day %.1f: median separation %.1f°, quartiles %.1f° to %.1f°, n %u"), age->age_days, s->median, s->low, s->high, s->n);
    default:
      return g_strdup_printf (_ ("day %.1f: median flux %.2f·10²¹ Mx, quartiles %.2f to %.2f, n %u"), age->age_days, s->median / unit, s->low / unit,
                              s->high / unit, s->n);
    }
}

char *
tf_emergence_plot_dup_description (const TfLawsCharts *charts)
{
  char *missing = dup_missing (charts);
  if (missing != NULL)
    return missing;
  GString *text = g_string_new (NULL);
  const GArray *ages = charts->ages[TF_EMERGENCE_WHOLE];
  g_string_append_printf (text, _ ("%u passages born on the disk. "), charts->n_born);
  for (guint k = 0; k < ages->len; k++)
    {
      const TfEmergenceAge *age = &g_array_index (ages, TfEmergenceAge, k);
      if (age->tilt_deg.n >= LEAST)
        g_string_append_printf (text, _ ("Day %.1f: tilt %.1f°, separation %.1f°, n %u. "),
                                age->age_days, age->tilt_deg.median, age->separation_deg.median,
                                age->regions);
    }
  g_string_truncate (text, text->len - 1);
  return g_string_free (text, FALSE);
}

double
tf_emergence_plot_height (const TfLawsCharts *charts, const TfChartStyle *style, double width)
{
  return MIN (width * 0.95, style->text_pt * 46) + foot_height (style);
}

gboolean
tf_emergence_plot_has (const TfLawsCharts *charts)
{
  return charts->n_born > 0;
}
