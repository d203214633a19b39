/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* The wings of a study's own rows, with its divides: the butterfly diagram as a chart among the
 * others, for the page and enlarged on the bench. */

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-laws-charts-private.h"
#include "tf-wings-private.h"

void
tf_wings_figure_make (TfLawsCharts *charts, const TfLawsFacts *facts)
{
  TfWings *wings = &charts->wings;
  charts->dots = g_new (TfWingsDot, charts->n + 1);
  charts->divides = facts->divides != NULL ? tf_divides_ref (facts->divides) : NULL;
  for (guint k = 0; k < charts->n; k++)
    {
      const TfSampleRow *row = tf_sample_get (facts->sample, k);
      TfWingsDot dot = { .year = tf_time_year (row->time),
                         .lat_deg = (float)row->lat_deg,
                         .flux_mx = (float)row->flux_mx,
                         .leading = (gint8)row->leading_polarity,
                         .verdict = (gint8)facts->verdicts[k].kind,
                         .hint = row->origin == TF_ORIGIN_HINT,
                         .id = (gint64)k + 1 };
      if (isfinite (dot.year) && isfinite (dot.lat_deg))
        charts->dots[wings->n++] = dot;
    }
  tf_wings_sort (charts->dots, wings->n);
  wings->dots = charts->dots;
  wings->lat_max_deg = 45;
  wings->frame_year = wings->pick_from = wings->pick_to = wings->pick_low = wings->pick_high = NAN;
  wings->divides = charts->divides;
  wings->plain = facts->plain;
  tf_wings_fit (wings, 2000);
}

void
tf_wings_figure_draw (cairo_t *cr, const TfLawsCharts *charts, const TfChartStyle *style,
                      TfArea area)
{
  TfChartStyle small = *style;
  small.text_pt = style->text_pt * 0.86;
  TfArea upper = area;
  upper.height = MAX (area.height - style->text_pt * 2.6, style->text_pt * 4);
  tf_wings_draw (cr, &charts->wings, style, upper);
  double y = upper.y + upper.height + style->text_pt * 0.1;
  y += tf_plot_note (cr, &small, area, y, _ ("disc: positive leads · ring: negative · struck: breaks Hale’s law"));
  tf_plot_note (cr, &small, area, y, _ ("lines: divides, with the band in which the cycle is unsure"));
}

int
tf_wings_figure_hit (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area, double x,
                     double y, int after)
{
  TfArea upper = area;
  upper.height = MAX (area.height - style->text_pt * 2.6, style->text_pt * 4);
  int at = tf_wings_hit (&charts->wings, style, upper, x, y);
  return at < 0 ? -1 : (int)charts->dots[at].id - 1;
}

double *
tf_wings_figure_dup_places (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area, guint *n)
{
  TfArea upper = area;
  upper.height = MAX (area.height - style->text_pt * 2.6, style->text_pt * 4);
  TfArea plot = tf_wings_plot (&charts->wings, style, upper);
  double *xy = g_new (double, 2 * charts->wings.n + 2);
  *n = charts->wings.n;
  for (guint k = 0; k < *n; k++)
    {
      xy[2 * k] = tf_wings_x (&charts->wings, plot, charts->dots[k].year);
      xy[2 * k + 1] = tf_wings_y (&charts->wings, plot, charts->dots[k].lat_deg);
    }
  return xy;
}

char *
tf_wings_figure_dup_sign (const TfLawsCharts *charts, guint k)
{
  return tf_laws_charts_dup_row (charts, (guint)charts->dots[k].id - 1);
}

char *
tf_wings_figure_dup_description (const TfLawsCharts *charts)
{
  return tf_wings_dup_description (&charts->wings);
}

double
tf_wings_figure_height (const TfLawsCharts *charts, const TfChartStyle *style, double width)
{
  return MIN (width * 0.6, style->text_pt * 30) + style->text_pt * 2.6;
}

gboolean
tf_wings_figure_has (const TfLawsCharts *charts)
{
  return charts->wings.n > 0;
}
