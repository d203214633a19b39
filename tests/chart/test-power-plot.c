/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-chart.h"

#include <math.h>
#include <string.h>

#include "tf-check.h"
#include "tf-power-plot.h"

static const TfArea area = { 0, 0, 400, 300 };

static TfPowerCurve *
curve_new (void)
{
  TfPowerCurve *curve = g_new0 (TfPowerCurve, 1);
  const guint found[] = { 30, 80, 150, 196 };
  curve->what = TF_POWER_SHARE;
  curve->first = 0.05;
  curve->second = 0.08;
  curve->chance = 0.05;
  curve->points = g_array_new (FALSE, FALSE, sizeof (TfPowerPoint));
  for (guint k = 0; k < G_N_ELEMENTS (found); k++)
    {
      TfPowerPoint p = { .n = 100u << k, .runs = 200, .found = found[k], .power = found[k] / 200.0 };
      p.interval = tf_clopper_pearson (found[k], 200, 0.95);
      g_array_append_val (curve->points, p);
    }
  return curve;
}

/* Every point is found, and its whisker drawn, where the scale puts it. */
static void
points_are_where_the_scale_puts_them (void)
{
  g_autoptr (TfPowerCurve) curve = curve_new ();
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  g_auto (Picture) picture = picture_new (400, 300, style.ground);
  tf_power_plot_draw (picture.cr, curve, 0.8, &style, area);
  g_assert_cmpint (cairo_status (picture.cr), ==, CAIRO_STATUS_SUCCESS);
  int found[4] = { 0 };
  double last = -1;
  for (int x = 0; x < 400; x += 2)
    for (int y = 0; y < 300; y += 2)
      {
        int hit = tf_power_plot_hit (curve, &style, area, x, y);
        if (hit < 0)
          continue;
        found[hit]++;
        if (found[hit] == 1)
          {
            tf_check_between ("points run from left to right", x, last, 400);
            last = x;
          }
      }
  for (int k = 0; k < 4; k++)
    g_assert_cmpint (found[k], >, 20);
  g_assert_cmpuint (picture_count (&picture, style.teal, 0.2), >, 100); /* the power asked for */
  g_assert_cmpuint (picture_count (&picture, style.ink, 0.2), >, 60);   /* whiskers */
}

static void
the_number_needed_is_said (void)
{
  g_autoptr (TfPowerCurve) curve = curve_new ();
  g_autofree char *words = tf_power_plot_dup_description (curve, 0.75);
  g_assert_nonnull (strstr (words, "needs 400 regions"));
  g_autofree char *more = tf_power_plot_dup_description (curve, 0.999);
  g_assert_nonnull (strstr (more, "not reached"));
}

void
add_power_plot_tests (void)
{
  g_test_add_func ("/chart/power/points-are-where-the-scale-puts-them",
                   points_are_where_the_scale_puts_them);
  g_test_add_func ("/chart/power/the-number-needed-is-said", the_number_needed_is_said);
}
