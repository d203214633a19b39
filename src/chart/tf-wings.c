/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-wings.h"
#include "tf-wings-private.h"

#include <glib/gi18n-lib.h>
#include <math.h>
#include <stdlib.h>

#include "tf-chart-private.h"
#include "tf-verdict.h"

#define HIT_UNITS 8.0
#define MONTH     (1.0 / 12)
/* A view is a density picture when it has less than so many square units for each dot. */
#define UNITS_A_DOT 36.0

TfArea
tf_wings_plot (const TfWings *wings, const TfChartStyle *style, TfArea area)
{
  double text = style->text_pt, left = text * 3.4, right = text * 0.9, above = text * 1.6,
         below = text * 1.8;
  return (TfArea){ area.x + left, area.y + above, MAX (area.width - left - right, 1),
                   MAX (area.height - above - below, 1) };
}

static double
span (const TfWings *wings)
{
  double years = wings->to_year - wings->from_year;
  return years > 0 ? years : MONTH;
}

static double
lat_max (const TfWings *wings)
{
  return wings->lat_max_deg > 0 ? wings->lat_max_deg : 45;
}

double
tf_wings_x (const TfWings *wings, TfArea plot, double year)
{
  return plot.x + (year - wings->from_year) / span (wings) * plot.width;
}

double
tf_wings_y (const TfWings *wings, TfArea plot, double lat_deg)
{
  return plot.y + (1 - lat_deg / lat_max (wings)) / 2 * plot.height;
}

double
tf_wings_year_at (const TfWings *wings, const TfChartStyle *style, TfArea area, double x)
{
  TfArea plot = tf_wings_plot (wings, style, area);
  return wings->from_year + (x - plot.x) / plot.width * span (wings);
}

double
tf_wings_lat_at (const TfWings *wings, const TfChartStyle *style, TfArea area, double y)
{
  TfArea plot = tf_wings_plot (wings, style, area);
  return lat_max (wings) * (1 - 2 * (y - plot.y) / plot.height);
}

double
tf_wings_x_of (const TfWings *wings, const TfChartStyle *style, TfArea area, double year)
{
  return tf_wings_x (wings, tf_wings_plot (wings, style, area), year);
}

double
tf_wings_y_of (const TfWings *wings, const TfChartStyle *style, TfArea area, double lat_deg)
{
  return tf_wings_y (wings, tf_wings_plot (wings, style, area), lat_deg);
}

guint
tf_wings_first (const TfWings *wings, double year)
{
  guint low = 0, high = wings->n;
  while (low < high)
    {
      guint middle = low + (high - low) / 2;
      if (wings->dots[middle].year < year)
        low = middle + 1;
      else
        high = middle;
    }
  return low;
}

double
tf_wings_radius (float flux_mx)
{
  if (!(flux_mx > 0))
    return 1.8;
  return CLAMP (1.4 + 1.9 * sqrt ((double)flux_mx / 1e22), 1.6, 7.0);
}

gboolean
tf_wings_is_dense (const TfWings *wings, const TfChartStyle *style, TfArea area)
{
  TfArea plot = tf_wings_plot (wings, style, area);
  guint n = tf_wings_first (wings, wings->to_year) - tf_wings_first (wings, wings->from_year);
  return n * UNITS_A_DOT > plot.width * plot.height;
}

int
tf_wings_hit (const TfWings *wings, const TfChartStyle *style, TfArea area, double x, double y)
{
  g_return_val_if_fail (wings != NULL && style != NULL, -1);
  TfArea plot = tf_wings_plot (wings, style, area);
  double reach = HIT_UNITS / plot.width * span (wings);
  double year = tf_wings_year_at (wings, style, area, x);
  double best = HIT_UNITS * HIT_UNITS;
  int found = -1;
  for (guint k = tf_wings_first (wings, year - reach);
       k < wings->n && wings->dots[k].year <= year + reach; k++)
    {
      double dx = tf_wings_x (wings, plot, wings->dots[k].year) - x;
      double dy = tf_wings_y (wings, plot, wings->dots[k].lat_deg) - y;
      double far = dx * dx + dy * dy;
      if (far <= best)
        {
          best = far;
          found = (int)k;
        }
    }
  return found;
}

static int
compare_dots (gconstpointer a, gconstpointer b)
{
  const TfWingsDot *p = a, *q = b;
  int by_year = (p->year > q->year) - (p->year < q->year);
  return by_year != 0 ? by_year : (p->id > q->id) - (p->id < q->id);
}

void
tf_wings_sort (TfWingsDot *dots, guint n)
{
  guint k = 1;
  while (k < n && dots[k - 1].year <= dots[k].year)
    k++;
  if (k < n)
    qsort (dots, n, sizeof *dots, compare_dots);
}

void
tf_wings_fit (TfWings *wings, double year)
{
  g_return_if_fail (wings != NULL);
  double from = year, to = year;
  if (wings->n > 0)
    {
      from = wings->dots[0].year;
      to = wings->dots[wings->n - 1].year;
    }
  if (!isfinite (from) || !isfinite (to))
    from = to = 2000;
  double margin = MAX ((to - from) * 0.03, (MONTH - (to - from)) / 2);
  wings->from_year = from - margin;
  wings->to_year = to + margin;
}

/* -- in words -------------------------------------------------------------------------------- */

typedef struct
{
  guint marks, hints, positive, negative, keeps, breaks, cannot_say, seen;
} Count;

static Count
count (const TfWings *wings)
{
  Count c = { 0 };
  for (guint k = 0; k < wings->n; k++)
    {
      const TfWingsDot *dot = &wings->dots[k];
      c.marks += dot->hint == 0;
      c.hints += dot->hint != 0;
      c.positive += dot->leading > 0;
      c.negative += dot->leading < 0;
      c.keeps += dot->verdict == TF_VERDICT_KEEPS;
      c.breaks += dot->verdict == TF_VERDICT_BREAKS;
      c.cannot_say += dot->verdict == TF_VERDICT_CANNOT_SAY;
      c.seen += dot->year >= wings->from_year && dot->year <= wings->to_year;
    }
  return c;
}

static void
append_count (GString *text, guint n, const char *form)
{
  g_string_append (text, text->len > 0 ? " " : "");
  g_autofree char *number = g_strdup_printf ("%u", n);
  g_auto (GStrv) parts = g_strsplit (form, "{0}", 2);
  g_autofree char *joined = g_strjoinv (number, parts);
  g_string_append (text, joined);
}

static void
append_years (GString *text, const char *form, double from, double to)
{
  if (!isfinite (from) || !isfinite (to))
    return;
  g_autofree char *a = g_strdup_printf ("%.2f", from), *b = g_strdup_printf ("%.2f", to);
  g_auto (GStrv) parts = g_strsplit (form, "{0}", 2);
  g_autofree char *half = g_strjoinv (a, parts);
  g_auto (GStrv) rest = g_strsplit (half, "{1}", 2);
  g_autofree char *joined = g_strjoinv (b, rest);
  g_string_append_c (text, ' ');
  g_string_append (text, joined);
}

static gboolean
has_band (const TfWings *wings)
{
  return isfinite (wings->pick_low) && isfinite (wings->pick_high);
}

static guint
count_picked (const TfWings *wings)
{
  guint n = 0;
  for (guint k = tf_wings_first (wings, wings->pick_from);
       k < wings->n && wings->dots[k].year <= wings->pick_to; k++)
    n += !has_band (wings)
         || ((double)wings->dots[k].lat_deg >= wings->pick_low
             && (double)wings->dots[k].lat_deg <= wings->pick_high);
  return n;
}

char *
tf_wings_dup_pick (const TfWings *wings)
{
  g_return_val_if_fail (wings != NULL, NULL);
  if (!isfinite (wings->pick_from) || !isfinite (wings->pick_to))
    return NULL;
  GString *text = g_string_new (NULL);
  guint n = count_picked (wings);
  gboolean near = wings->pick_to - wings->pick_from < 0.1;
  g_string_append_printf (text, near ? _ ("%.3f to %.3f") : _ ("%.2f to %.2f"), wings->pick_from,
                          wings->pick_to);
  if (has_band (wings))
    {
      g_autofree char *low = tf_chart_dup_degrees (wings->pick_low, TRUE);
      g_autofree char *high = tf_chart_dup_degrees (wings->pick_high, TRUE);
      g_string_append_printf (text, _ (", latitudes %s to %s"), low, high);
    }
  g_string_append_printf (text, g_dngettext (GETTEXT_PACKAGE, ", %u dot in it", ", %u dots in it", n), n);
  return g_string_free (text, FALSE);
}

static void
append_pick (GString *text, const TfWings *wings)
{
  g_autofree char *pick = tf_wings_dup_pick (wings);
  if (pick == NULL)
    return;
  g_string_append (text, text->len > 0 ? " " : "");
  g_string_append_printf (text, wings->picking ? _ ("Being chosen: %s.") : _ ("Chosen stretch: %s."), pick);
}

static void
append_hold (GString *text, const TfWings *wings)
{
  static const char *const handles[] = { N_ ("all of it"), N_ ("its beginning"), N_ ("at the minimum"),
                                         N_ ("its end"), N_ ("its unsure band") };
  if (wings->hold_cycle == 0 || wings->divides == NULL)
    return;
  const TfDivideParams *params = tf_divides_get_params (wings->divides);
  TfTime minimum = tf_divides_get_minimum (wings->divides, wings->hold_cycle);
  g_string_append_printf (
      text,
      wings->hold_side > 0 ? _ (" Divide before cycle %d, north, chosen: %s; at the minimum %.1f°.")
                           : _ (" Divide before cycle %d, south, chosen: %s; at the minimum %.1f°."),
      wings->hold_cycle, _ (handles[CLAMP (wings->hold_handle + 1, 0, 4)]),
      tf_divides_latitude (wings->divides, wings->hold_cycle, wings->hold_side, minimum));
  g_string_append_printf (text, _ (" It acts from %d months before to %d months after the minimum; within "
                                   "%.1f° of it the cycle is unsure."),
                          params->before_months, params->after_months, params->band_deg);
  if (tf_cycle_find (wings->hold_cycle) == NULL)
    append_years (text, _ ("The minimum is provisional: {0}."), tf_time_year (minimum), 0);
  if (wings->plain)
    g_string_append (text, _ (" It is in hand: polarity and verdicts are hidden."));
}

char *
tf_wings_dup_description (const TfWings *wings)
{
  g_return_val_if_fail (wings != NULL, NULL);
  GString *text = g_string_new (NULL);
  if (wings->picking)
    append_pick (text, wings);
  if (wings->n == 0)
    g_string_append (text, _ ("No marks or hints yet."));
  else
    {
      Count c = count (wings);
      append_count (text, c.marks,
                    g_dngettext (GETTEXT_PACKAGE, "{0} mark,", "{0} marks,", c.marks));
      append_count (text, c.hints,
                    g_dngettext (GETTEXT_PACKAGE, "{0} hint;", "{0} hints;", c.hints));
      append_count (text, c.seen, _ ("{0} in view."));
      if (!wings->plain)
        {
          append_count (text, c.positive, _ ("Positive leads in {0},"));
          append_count (text, c.negative, _ ("negative in {0}."));
          append_count (text, c.keeps, _ ("{0} keep Hale’s law,"));
          append_count (text, c.breaks, _ ("{0} break it,"));
          append_count (text, c.cannot_say, _ ("{0} cannot be said."));
        }
    }
  append_hold (text, wings);
  append_years (text, _ ("Shown: {0} to {1}."), wings->from_year, wings->to_year);
  append_years (text, _ ("The frame in view is at {0}."), wings->frame_year, wings->frame_year);
  if (!wings->picking)
    append_pick (text, wings);
  return g_string_free (text, FALSE);
}
