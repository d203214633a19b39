/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-chart.h"

#include <cairo-pdf.h>
#include <math.h>
#include <string.h>

#include "tf-check.h"
#include "tf-option.h"
#include "tf-verdict.h"
#include "tf-wings.h"

#define WIDTH  900
#define HEIGHT 200

static const TfArea area = { 0, 0, WIDTH, HEIGHT };

static TfWings
wings_of (const TfWingsDot *dots, guint n)
{
  TfWings wings = { .dots = dots,
                    .n = n,
                    .lat_max_deg = 45,
                    .frame_year = NAN,
                    .pick_from = NAN,
                    .pick_to = NAN,
                    .pick_low = NAN,
                    .pick_high = NAN };
  tf_wings_fit (&wings, 2013);
  return wings;
}

static int
point (double year_or_lat)
{
  return (int)floor (year_or_lat);
}

static void
hit_and_drawing_agree (void)
{
  static const TfWingsDot dots[] = {
    { 2010, 20, 1e22f, 1, TF_VERDICT_KEEPS, 0, 11 },
    { 2012, -15, 4e22f, -1, TF_VERDICT_KEEPS, 0, 12 },
    { 2014, 10, 1e22f, 0, TF_VERDICT_CANNOT_SAY, 0, 13 },
  };
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  TfWings wings = wings_of (dots, 3);
  g_auto (Picture) picture = picture_new (WIDTH, HEIGHT, style.ground);
  tf_wings_draw (picture.cr, &wings, &style, area);
  for (int k = 0; k < 3; k++)
    {
      double x = tf_wings_x_of (&wings, &style, area, dots[k].year);
      double y = tf_wings_y_of (&wings, &style, area, (double)dots[k].lat_deg);
      g_assert_cmpint (tf_wings_hit (&wings, &style, area, x + 3, y - 3), ==, k);
      g_assert_cmpint (tf_wings_hit (&wings, &style, area, x + 7, y - 7), ==, -1);
      tf_check_near ("year there and back", tf_wings_year_at (&wings, &style, area, x),
                     dots[k].year, 1e-9);
      tf_check_near ("latitude there and back", tf_wings_lat_at (&wings, &style, area, y),
                     (double)dots[k].lat_deg, 1e-5);
      g_assert_cmpuint (picture_count_in (&picture, style.ground, 0.15, point (x) - 6,
                                          point (y) - 6, point (x) + 7, point (y) + 7),
                        <, 13 * 13);
    }
  double x = tf_wings_x_of (&wings, &style, area, 2010),
         y = tf_wings_y_of (&wings, &style, area, 20);
  g_assert_cmpuint (picture_count_in (&picture, style.positive, 0.12, point (x) - 4, point (y) - 4,
                                      point (x) + 5, point (y) + 5),
                    >=, 6);
  x = tf_wings_x_of (&wings, &style, area, 2012), y = tf_wings_y_of (&wings, &style, area, -15);
  tf_check_between ("a ring is open",
                    colour_distance (picture_at (&picture, point (x), point (y)), style.negative),
                    0.2, 1);
  g_assert_cmpuint (picture_count_in (&picture, style.negative, 0.15, point (x) - 6, point (y) - 6,
                                      point (x) + 7, point (y) + 7),
                    >=, 6);
}

static void
the_larger_flux_is_the_larger_dot (void)
{
  guint last = 0;
  for (double flux = 1e21; flux <= 1e23; flux *= 10)
    {
      TfWingsDot dot = { 2013, 20, (float)flux, 1, TF_VERDICT_KEEPS, 0, 1 };
      TfChartStyle style = tf_chart_style (TRUE, FALSE, 11);
      TfWings wings = wings_of (&dot, 1);
      g_auto (Picture) picture = picture_new (WIDTH, HEIGHT, style.ground);
      tf_wings_draw (picture.cr, &wings, &style, area);
      guint n = picture_count (&picture, style.positive, 0.12);
      g_assert_cmpuint (n, >, last);
      last = n;
    }
}

static void
what_breaks_is_red_unless_a_divide_is_in_hand (void)
{
  TfWingsDot dot = { 2013, 20, 1e22f, 1, TF_VERDICT_BREAKS, 0, 1 };
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  TfWings wings = wings_of (&dot, 1);
  g_auto (Picture) picture = picture_new (WIDTH, HEIGHT, style.ground);
  tf_wings_draw (picture.cr, &wings, &style, area);
  g_assert_cmpuint (picture_count (&picture, style.breaks, 0.12), >=, 8);
  wings.plain = TRUE;
  g_auto (Picture) plain = picture_new (WIDTH, HEIGHT, style.ground);
  tf_wings_draw (plain.cr, &wings, &style, area);
  g_assert_cmpuint (picture_count (&plain, style.breaks, 0.2), ==, 0);
  g_assert_cmpuint (picture_count (&plain, style.positive, 0.2), ==, 0);
  g_assert_cmpuint (picture_count (&plain, style.slate, 0.12), >=, 6);
}

static void
a_hint_is_fainter_than_a_mark (void)
{
  TfWingsDot dots[] = { { 2012, 20, 4e22f, 1, TF_VERDICT_KEEPS, 0, 1 },
                        { 2014, 20, 4e22f, 1, TF_VERDICT_KEEPS, 1, 2 } };
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  TfWings wings = wings_of (dots, 2);
  g_auto (Picture) picture = picture_new (WIDTH, HEIGHT, style.ground);
  tf_wings_draw (picture.cr, &wings, &style, area);
  double far[2];
  for (int k = 0; k < 2; k++)
    far[k] = colour_distance (
        picture_at (&picture, point (tf_wings_x_of (&wings, &style, area, dots[k].year)),
                    point (tf_wings_y_of (&wings, &style, area, 20))),
        style.ground);
  tf_check_between ("hint against mark", far[1] / far[0], 0.3, 0.75);
}

static void
the_frame_the_choice_and_the_divide_are_drawn (void)
{
  TfDivideParams params;
  tf_options_reset (tf_divide_options, &params);
  g_autoptr (TfDivides) divides = tf_divides_new (&params);
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  TfWings wings = wings_of (NULL, 0);
  wings.from_year = 2006;
  wings.to_year = 2012;
  wings.divides = divides;
  g_auto (Picture) before = picture_new (WIDTH, HEIGHT, style.ground);
  tf_wings_draw (before.cr, &wings, &style, area);
  g_assert_cmpuint (picture_count (&before, style.teal, 0.1), >, 400);
  /* the divide of cycle 24 acts 24 months before to 18 after December 2008: in the middle of it the
   * line is where tf_divides_latitude says */
  double lat = tf_divides_latitude (divides, 24, 1, tf_time_from_year (2009.5));
  int x = point (tf_wings_x_of (&wings, &style, area, 2009.5)),
      y = point (tf_wings_y_of (&wings, &style, area, lat));
  g_assert_cmpuint (picture_count_in (&before, style.teal, 0.25, x, y - 2, x + 1, y + 3), >=, 1);
  wings.frame_year = 2008;
  wings.pick_from = 2010.5;
  wings.pick_to = 2011;
  g_auto (Picture) after = picture_new (WIDTH, HEIGHT, style.ground);
  tf_wings_draw (after.cr, &wings, &style, area);
  TfArea plot = tf_wings_plot (&wings, &style, area);
  x = point (tf_wings_x_of (&wings, &style, area, 2008));
  g_assert_cmpuint (picture_count_in (&after, style.ink, 0.35, x - 1, point (plot.y), x + 2,
                                      point (plot.y + plot.height)),
                    >, plot.height * 0.9);
  for (int side = 0; side < 2; side++)
    {
      x = point (tf_wings_x_of (&wings, &style, area, side == 0 ? 2010.5 : 2011));
      g_assert_cmpuint (picture_count_in (&after, style.teal, 0.5, x - 1, point (plot.y), x + 2,
                                          point (plot.y + plot.height)),
                        >, plot.height * 0.9);
    }
}

static void
the_chosen_dot_has_a_ring_of_ink (void)
{
  TfWingsDot dot = { 2013, 20, 1e22f, 1, TF_VERDICT_KEEPS, 0, 7 };
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  TfWings wings = wings_of (&dot, 1);
  g_auto (Picture) before = picture_new (WIDTH, HEIGHT, style.ground);
  tf_wings_draw (before.cr, &wings, &style, area);
  wings.chosen = 7;
  g_auto (Picture) after = picture_new (WIDTH, HEIGHT, style.ground);
  tf_wings_draw (after.cr, &wings, &style, area);
  g_assert_cmpuint (picture_count (&after, style.ink, 0.2), >,
                    picture_count (&before, style.ink, 0.2) + 20);
}

/* A handle is found where the divide is, each of the three by itself, the line between them as the
 * whole; nothing is found when divides are not to be moved. */
static void
a_divide_is_found_by_its_handles_and_its_line (void)
{
  TfDivideParams params;
  tf_options_reset (tf_divide_options, &params);
  g_autoptr (TfDivides) divides = tf_divides_new (&params);
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  TfWings wings = wings_of (NULL, 0);
  wings.from_year = 2005;
  wings.to_year = 2013;
  wings.divides = divides;
  wings.movable = TRUE;
  double minimum = tf_time_year (tf_cycle_minimum (24));
  const double months[] = { -params.before_months, 0, params.after_months, -12 };
  for (int k = 0; k < 4; k++)
    for (int side = 1; side >= -1; side -= 2)
      {
        double year = minimum + months[k] * 0.999 / 12;
        double lat = tf_divides_latitude (divides, 24, side, tf_time_from_year (year));
        double x = tf_wings_x_of (&wings, &style, area, year),
               y = tf_wings_y_of (&wings, &style, area, side * lat);
        int cycle = 0, found = 0, handle = 9;
        g_assert_true (
            tf_wings_hit_divide (&wings, &style, area, x + 1, y + 1, &cycle, &found, &handle));
        g_assert_cmpint (cycle, ==, 24);
        g_assert_cmpint (found, ==, side);
        g_assert_cmpint (handle, ==, k < 3 ? k : -1);
        g_assert_false (tf_wings_hit_divide (&wings, &style, area, x, y + side * 12, &cycle, &found,
                                             &handle));
        for (int edge = 1; k == 3 && edge >= -1; edge -= 2) /* the edges of its band, once it is chosen */
          {
            wings.hold_cycle = 24;
            wings.hold_side = side;
            double at = tf_wings_y_of (&wings, &style, area, side * (lat + edge * params.band_deg));
            g_assert_true (tf_wings_hit_divide (&wings, &style, area, x, at - side * edge, &cycle,
                                                &found, &handle));
            g_assert_cmpint (handle, ==, TF_WINGS_BAND);
            wings.hold_cycle = 0;
          }
        wings.movable = FALSE;
        g_assert_false (
            tf_wings_hit_divide (&wings, &style, area, x, y, &cycle, &found, &handle));
        wings.movable = TRUE;
      }
}

/* A provisional minimum has its divide, to be seen and taken; the description says what it is. */
static void
a_provisional_minimum_has_its_divide (void)
{
  TfDivideParams params;
  tf_options_reset (tf_divide_options, &params);
  params.provisional_year = 2030.5;
  g_autoptr (TfDivides) divides = tf_divides_new (&params);
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  TfWings wings = wings_of (NULL, 0);
  wings.divides = divides;
  wings.from_year = 2020;
  wings.to_year = 2034;
  wings.movable = TRUE;
  int last = tf_divides_get_last (divides), cycle = 0, side = 0, handle = 9;
  double lat = tf_divides_latitude (divides, last, -1, tf_time_from_year (2030.5));
  g_assert_null (tf_cycle_find (last));
  g_assert_true (tf_wings_hit_divide (&wings, &style, area, tf_wings_x_of (&wings, &style, area, 2030.5),
                                      tf_wings_y_of (&wings, &style, area, -lat), &cycle, &side, &handle));
  g_assert_cmpint (cycle, ==, last);
  g_assert_cmpint (side, ==, -1);
  g_assert_cmpint (handle, ==, TF_WINGS_MINIMUM);
  wings.hold_cycle = cycle;
  wings.hold_side = side;
  wings.hold_handle = handle;
  g_autofree char *words = tf_wings_dup_description (&wings);
  g_assert_nonnull (strstr (words, "provisional: 2030.50"));
}

static void
the_chosen_handle_is_filled (void)
{
  TfDivideParams params;
  tf_options_reset (tf_divide_options, &params);
  g_autoptr (TfDivides) divides = tf_divides_new (&params);
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  TfWings wings = wings_of (NULL, 0);
  wings.from_year = 2006;
  wings.to_year = 2012;
  wings.divides = divides;
  wings.movable = TRUE;
  wings.hold_cycle = 24;
  wings.hold_side = -1;
  wings.hold_handle = 1;
  g_auto (Picture) picture = picture_new (WIDTH, HEIGHT, style.ground);
  tf_wings_draw (picture.cr, &wings, &style, area);
  double year = tf_time_year (tf_cycle_minimum (24));
  for (int side = 1; side >= -1; side -= 2)
    {
      double lat = tf_divides_latitude (divides, 24, side, tf_time_from_year (year));
      int x = point (tf_wings_x_of (&wings, &style, area, year)),
          y = point (tf_wings_y_of (&wings, &style, area, side * lat));
      double far = colour_distance (picture_at (&picture, x, y), style.teal);
      tf_check_between (side > 0 ? "an open handle" : "the chosen one", far, side > 0 ? 0.3 : 0,
                        side > 0 ? 1 : 0.1);
    }
  g_autofree char *words = tf_wings_dup_description (&wings);
  g_assert_nonnull (strstr (words, "cycle 24, south"));
  g_assert_nonnull (strstr (words, "at the minimum"));
}

/* -- many ------------------------------------------------------------------------------------ */

static TfWingsDot *
many (guint n)
{
  TfWingsDot *dots = g_new0 (TfWingsDot, n);
  GRand *random = g_rand_new_with_seed (24);
  for (guint k = 0; k < n; k++)
    {
      double year = 1998 + 22.0 * k / n;
      gboolean north = g_rand_boolean (random);
      dots[k] = (TfWingsDot){ .year = year,
                              .lat_deg
                              = (float)((north ? 1 : -1) * g_rand_double_range (random, 5, 35)),
                              .flux_mx = 1e22f,
                              .leading = north ? 1 : -1,
                              .verdict = TF_VERDICT_KEEPS,
                              .id = k + 1 };
    }
  g_rand_free (random);
  return dots;
}

static void
a_million_dots_are_a_density_picture (void)
{
  g_autofree TfWingsDot *dots = many (1000000);
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  TfWings wings = wings_of (dots, 1000000);
  g_auto (Picture) picture = picture_new (WIDTH, HEIGHT, style.ground);
  g_assert_true (tf_wings_is_dense (&wings, &style, area));
  gint64 began = g_get_monotonic_time ();
  tf_wings_draw (picture.cr, &wings, &style, area);
  double ms = (double)(g_get_monotonic_time () - began) / 1000;
  g_test_message ("1000000 dots drawn in %.1f ms", ms);
  /* the north is amber and filled, the south indigo and hollow: a cell in nine pixels has one that
   * shows the ground */
  TfArea plot = tf_wings_plot (&wings, &style, area);
  int middle = point (tf_wings_y_of (&wings, &style, area, 0)), left = point (plot.x) + 60,
      right = left + 600;
  int top = point (tf_wings_y_of (&wings, &style, area, 30)),
      foot = point (tf_wings_y_of (&wings, &style, area, -30));
  guint amber = picture_count_in (&picture, style.positive, 0.25, left, top, right, middle - 20);
  guint indigo = picture_count_in (&picture, style.negative, 0.25, left, middle + 20, right, foot);
  double share_north = amber / (600.0 * (middle - 20 - top)),
         share_south = indigo / (600.0 * (foot - middle - 20));
  tf_check_between ("the north is filled", share_north, 0.93, 1);
  tf_check_between ("the south is hollow", share_south, 0.80, 0.92);
  g_assert_cmpuint (picture_count_in (&picture, style.negative, 0.1, left, top, right, middle - 20),
                    ==, 0);
  int hit = tf_wings_hit (&wings, &style, area, left, top + 5);
  g_assert_cmpint (hit, >=, 0);
}

static void
near_by_a_million_are_dots_again (void)
{
  g_autofree TfWingsDot *dots = many (1000000);
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  TfWings wings = wings_of (dots, 1000000);
  wings.from_year = 2010;
  wings.to_year = 2010.02;
  g_assert_false (tf_wings_is_dense (&wings, &style, area));
  g_auto (Picture) picture = picture_new (WIDTH, HEIGHT, style.ground);
  tf_wings_draw (picture.cr, &wings, &style, area);
  g_assert_cmpuint (picture_count (&picture, style.positive, 0.12), >, 500);
}

static void
dots_look_alike_on_pixels_and_on_paper (void)
{
  g_autofree TfWingsDot *dots = many (400);
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  TfWings wings = wings_of (dots, 400);
  g_auto (Picture) picture = picture_new (WIDTH, HEIGHT, style.ground);
  tf_wings_draw (picture.cr, &wings, &style, area);
  guint amber = picture_count (&picture, style.positive, 0.2),
        indigo = picture_count (&picture, style.negative, 0.35);
  cairo_surface_t *page = cairo_pdf_surface_create (NULL, WIDTH, HEIGHT);
  cairo_t *cr = cairo_create (page);
  tf_wings_draw (cr, &wings, &style, area);
  g_assert_cmpint (cairo_status (cr), ==, CAIRO_STATUS_SUCCESS);
  cairo_destroy (cr);
  cairo_surface_destroy (page);
  g_assert_cmpuint (amber, >, 200 * 3);
  g_assert_cmpuint (indigo, >, 200 * 3);
}

/* -- odd input ------------------------------------------------------------------------------- */

static void
no_dots_say_what_will_stand_here (void)
{
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  TfWings wings = wings_of (NULL, 0);
  g_auto (Picture) picture = picture_new (WIDTH, HEIGHT, style.ground);
  tf_wings_draw (picture.cr, &wings, &style, area);
  g_assert_cmpuint (picture_count (&picture, style.faint, 0.2), >, 200);
  g_assert_cmpint (tf_wings_hit (&wings, &style, area, 100, 100), ==, -1);
  tf_check_between ("a month about the year", wings.to_year - wings.from_year, 1 / 12.0 - 1e-9,
                    0.2);
  tf_check_near ("middle", (wings.to_year + wings.from_year) / 2, 2013, 1e-9);
}

static void
numbers_that_are_not_there_do_no_harm (void)
{
  TfWingsDot dots[]
      = { { 2012, NAN, NAN, 1, TF_VERDICT_BREAKS, 0, 1 }, { 2013, 10, NAN, 0, 0, 1, 2 } };
  TfChartStyle style = tf_chart_style (TRUE, TRUE, 22);
  TfWings wings = wings_of (dots, 2);
  wings.chosen = 1;
  g_auto (Picture) picture = picture_new (WIDTH, HEIGHT, style.ground);
  tf_wings_draw (picture.cr, &wings, &style, area);
  wings.from_year = NAN;
  wings.to_year = NAN;
  tf_wings_draw (picture.cr, &wings, &style, area);
  tf_wings_draw (picture.cr, &wings, &style, (TfArea){ 0, 0, 1, 1 });
  tf_wings_draw (picture.cr, &wings, &style, (TfArea){ 0, 0, 30, 12 });
  g_assert_cmpint (cairo_status (picture.cr), ==, CAIRO_STATUS_SUCCESS);
}

static void
labels_of_time_never_overlap (void)
{
  static const double spans[] = { 0.02, 0.09, 0.4, 1.3, 5, 24, 80, 270 };
  for (guint k = 0; k < G_N_ELEMENTS (spans); k++)
    for (int size = 0; size < 2; size++)
      {
        TfChartStyle style = tf_chart_style (FALSE, FALSE, size ? 22 : 11);
        TfWings wings = wings_of (NULL, 0);
        TfWingsDot dot = { 0, 50, 0, 0, 0, 0, 1 };
        wings.dots = &dot, wings.n = 1; /* out of the view: the empty message is not wanted here */
        wings.from_year = 2013.3;
        wings.to_year = 2013.3 + spans[k];
        g_auto (Picture) picture = picture_new (WIDTH, HEIGHT, style.ground);
        tf_wings_draw (picture.cr, &wings, &style, area);
        TfArea plot = tf_wings_plot (&wings, &style, area);
        /* columns of the label row that hold ink; between two labels there must be a gap wider than
         * a letter */
        int gap = 0, gaps = 0, labels = 0;
        for (int x = 0; x < WIDTH; x++)
          {
            gboolean inked = picture_count_in (&picture, style.ground, 0.08, x,
                                               point (plot.y + plot.height) + 5, x + 1, HEIGHT)
                             < (guint)(HEIGHT - point (plot.y + plot.height) - 5);
            if (inked && (gap >= style.text_pt * 0.9 || labels == 0))
              labels++;
            gaps += inked && gap >= style.text_pt * 0.9;
            gap = inked ? 0 : gap + 1;
          }
        if (labels < 2)
          g_printerr ("# %g years, text %g: %d labels\n", spans[k], style.text_pt, labels);
        g_assert_cmpint (labels, >=, 2);
        g_assert_cmpint (gaps, >=, labels - 1);
      }
}

static void
the_description_counts (void)
{
  TfWingsDot dots[] = { { 2012, 20, 1e22f, 1, TF_VERDICT_BREAKS, 0, 1 },
                        { 2013, -20, 1e22f, -1, TF_VERDICT_KEEPS, 0, 2 },
                        { 2014, 10, 1e22f, -1, TF_VERDICT_CANNOT_SAY, 1, 3 } };
  TfWings wings = wings_of (dots, 3);
  wings.frame_year = 2013.5;
  g_autofree char *text = tf_wings_dup_description (&wings);
  g_assert_cmpstr (text, ==,
                   "2 marks, 1 hint; 3 in view. Positive leads in 1, negative in 2. 1 keep Hale’s "
                   "law, 1 break it, 1 "
                   "cannot be said. Shown: 2011.94 to 2014.06. The frame in view is at 2013.50.");
  wings.plain = TRUE;
  g_autofree char *plain = tf_wings_dup_description (&wings);
  g_assert_null (strstr (plain, "Hale"));
  TfWings none = wings_of (NULL, 0);
  g_autofree char *empty = tf_wings_dup_description (&none);
  g_assert_true (g_str_has_prefix (empty, "No marks or hints yet."));
}

void
add_wings_tests (void)
{
  g_test_add_func ("/chart/wings/hit-testing-and-drawing-agree", hit_and_drawing_agree);
  g_test_add_func ("/chart/wings/the-larger-flux-is-the-larger-dot",
                   the_larger_flux_is_the_larger_dot);
  g_test_add_func ("/chart/wings/what-breaks-is-red-unless-a-divide-is-in-hand",
                   what_breaks_is_red_unless_a_divide_is_in_hand);
  g_test_add_func ("/chart/wings/a-hint-is-fainter-than-a-mark", a_hint_is_fainter_than_a_mark);
  g_test_add_func ("/chart/wings/the-frame-the-choice-and-the-divides-are-drawn",
                   the_frame_the_choice_and_the_divide_are_drawn);
  g_test_add_func ("/chart/wings/the-chosen-dot-has-a-ring-of-ink",
                   the_chosen_dot_has_a_ring_of_ink);
  g_test_add_func ("/chart/wings/a-million-dots-are-a-density-picture",
                   a_million_dots_are_a_density_picture);
  g_test_add_func ("/chart/wings/near-by-a-million-are-dots-again",
                   near_by_a_million_are_dots_again);
  g_test_add_func ("/chart/wings/dots-are-drawn-on-pixels-and-on-paper",
                   dots_look_alike_on_pixels_and_on_paper);
  g_test_add_func ("/chart/wings/no-dots-say-what-will-stand-here",
                   no_dots_say_what_will_stand_here);
  g_test_add_func ("/chart/wings/numbers-that-are-not-there-do-no-harm",
                   numbers_that_are_not_there_do_no_harm);
  g_test_add_func ("/chart/wings/labels-of-time-never-overlap", labels_of_time_never_overlap);
  g_test_add_func ("/chart/wings/a-divide-is-found-by-its-handles-and-its-line",
                   a_divide_is_found_by_its_handles_and_its_line);
  g_test_add_func ("/chart/wings/a-provisional-minimum-has-its-divide",
                   a_provisional_minimum_has_its_divide);
  g_test_add_func ("/chart/wings/the-chosen-handle-is-filled", the_chosen_handle_is_filled);
  g_test_add_func ("/chart/wings/the-description-counts", the_description_counts);
}
