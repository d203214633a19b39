/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-chart.h"

#include <cairo-pdf.h>
#include <cairo-svg.h>
#include <math.h>
#include <string.h>

#include "tf-check.h"
#include "tf-dial.h"

static TfDial
plain_dial (double bearing)
{
  return (TfDial){ .bearing_deg = bearing,
                   .sigma_deg = NAN,
                   .lat_deg = NAN,
                   .joy_deg = NAN,
                   .joy_scatter_deg = NAN,
                   .leading_polarity = 1,
                   .witnesses = { 2, 2, 2 } };
}

/* Direction of the pixels of a colour, from west towards north, deg: the axial mean about the
 * middle of the picture. */
static double
bearing_of (const Picture *picture, TfColour colour, double x0, double y0)
{
  double c = 0, s = 0;
  for (int y = 0; y < picture->height; y++)
    for (int x = 0; x < picture->width; x++)
      if (colour_distance (picture_at (picture, x, y), colour) < 0.12)
        {
          double dx = x + 0.5 - x0, dy = y0 - y - 0.5, angle = atan2 (dy, dx),
                 weight = hypot (dx, dy);
          c += weight * cos (2 * angle);
          s += weight * sin (2 * angle);
        }
  return atan2 (s, c) / 2 * 180 / G_PI;
}

static void
the_bar_lies_at_its_bearing (void)
{
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 0); /* without words the bar alone is ink */
  for (double bearing = -85; bearing <= 90; bearing += 17.5)
    {
      g_auto (Picture) picture = picture_new (160, 160, style.ground);
      TfDial dial = plain_dial (bearing);
      tf_dial_draw (picture.cr, &dial, &style, (TfArea){ 0, 0, 160, 160 });
      double got = bearing_of (&picture, style.ink, 80, 80);
      tf_check_near ("bearing of the bar", remainder (got - bearing, 180), 0, 1.5);
    }
}

/* West end: where a pole of bearing zero has its symbol. */
static void
the_leader_stands_in_the_west (void)
{
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 0);
  for (int leader = -1; leader <= 1; leader += 2)
    {
      g_auto (Picture) picture = picture_new (160, 160, style.ground);
      TfDial dial = plain_dial (0);
      dial.leading_polarity = leader;
      tf_dial_draw (picture.cr, &dial, &style, (TfArea){ 0, 0, 160, 160 });
      guint west = picture_count_in (&picture, style.positive, 0.05, 80, 0, 160, 160);
      guint east = picture_count_in (&picture, style.positive, 0.05, 0, 0, 80, 160);
      guint ring = picture_count_in (&picture, style.negative, 0.05, leader > 0 ? 0 : 80, 0,
                                     leader > 0 ? 80 : 160, 160);
      g_assert_cmpuint (leader > 0 ? west : east, >, 60);
      g_assert_cmpuint (leader > 0 ? east : west, ==, 0);
      g_assert_cmpuint (ring, >, 20);
    }
}

/* Joy's law: the leader nearer the equator, so to the south of west in the north and to the north
 * of it in the south. */
static void
the_fan_opens_towards_the_equator (void)
{
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 0);
  for (int hemisphere = -1; hemisphere <= 1; hemisphere += 2)
    {
      g_auto (Picture) picture = picture_new (160, 160, style.ground);
      TfDial dial = plain_dial (NAN);
      dial.lat_deg = 17 * hemisphere;
      dial.joy_deg = 20;
      dial.joy_scatter_deg = 10;
      tf_dial_draw (picture.cr, &dial, &style, (TfArea){ 0, 0, 160, 160 });
      TfColour fan = picture_at (&picture, 80 + 50, 80 + hemisphere * 18);
      TfColour other = picture_at (&picture, 80 + 50, 80 - hemisphere * 18);
      tf_check_between ("fan where it should be", colour_distance (fan, style.ground), 0.08, 0.5);
      tf_check_near ("no fan on the other side", colour_distance (other, style.ground), 0, 0.01);
      double got = bearing_of (&picture, fan, 80, 80);
      tf_check_near ("middle of the fan", got, -20 * hemisphere, 1.5);
    }
}

static void
the_uncertainty_is_a_darker_fan (void)
{
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 0);
  TfDial dial = plain_dial (0);
  guint before, after;
  {
    g_auto (Picture) picture = picture_new (160, 160, style.ground);
    tf_dial_draw (picture.cr, &dial, &style, (TfArea){ 0, 0, 160, 160 });
    before = picture_changed (&picture, style.ground);
  }
  g_auto (Picture) picture = picture_new (160, 160, style.ground);
  dial.sigma_deg = 15;
  tf_dial_draw (picture.cr, &dial, &style, (TfArea){ 0, 0, 160, 160 });
  after = picture_changed (&picture, style.ground);
  /* two wedges of 30 deg in a circle of radius 75: 2945 square pixels */
  tf_check_between ("pixels of the fan", (double)after - before, 2000, 3000);
  tf_check_between ("dark", colour_distance (picture_at (&picture, 120, 86), style.ground), 0.2,
                    0.6);
}

static void
an_empty_dial_has_a_circle_alone (void)
{
  TfChartStyle style = tf_chart_style (TRUE, FALSE, 0);
  g_auto (Picture) picture = picture_new (160, 160, style.ground);
  TfDial dial = plain_dial (NAN);
  tf_dial_draw (picture.cr, &dial, &style, (TfArea){ 0, 0, 160, 160 });
  g_assert_cmpuint (picture_count (&picture, style.ink, 0.1), ==, 0);
  g_assert_cmpuint (picture_count (&picture, style.positive, 0.1), ==, 0);
  tf_check_between ("circle and horizon", picture_changed (&picture, style.ground), 400, 2000);
}

/* Nothing may be cut off: the outermost pixels of the area stay ground. */
static void
nothing_is_cut_off (void)
{
  static const double sizes[][2] = { { 300, 190 }, { 200, 230 }, { 160, 160 }, { 48, 48 },
                                     { 20, 20 },   { 340, 340 }, { 405, 228 }, { 272, 152 } };
  static const double texts[] = { 9, 11, 14, 22 };
  for (guint k = 0; k < G_N_ELEMENTS (sizes); k++)
    for (guint t = 0; t < G_N_ELEMENTS (texts); t++)
      {
        TfChartStyle style = tf_chart_style (FALSE, FALSE, texts[t]);
        int w = (int)sizes[k][0], h = (int)sizes[k][1];
        g_auto (Picture) picture = picture_new (w, h, style.ground);
        TfDial dial = { -24, 4, -17, 9, 11, "S & K 2012", -1, 1, { 1, -1, 0 } };
        tf_dial_draw (picture.cr, &dial, &style, (TfArea){ 0, 0, w, h });
        guint edge = picture_count_in (&picture, style.ground, 0.02, 0, 0, w, 1)
                     + picture_count_in (&picture, style.ground, 0.02, 0, h - 1, w, h)
                     + picture_count_in (&picture, style.ground, 0.02, 0, 0, 1, h)
                     + picture_count_in (&picture, style.ground, 0.02, w - 1, 0, w, h);
        if (edge != (guint)(2 * w + 2 * h))
          g_printerr ("# %d x %d, text %g: something touches the edge\n", w, h, texts[t]);
        g_assert_cmpuint (edge, ==, 2 * w + 2 * h);
      }
}

/* The name under the dial lies on nothing else. */
static void
the_name_stands_free (void)
{
  static const double sizes[][2]
      = { { 272, 152 }, { 300, 190 }, { 200, 230 }, { 400, 160 }, { 270, 130 }, { 240, 120 } };
  static const double texts[] = { 9, 11, 14 };
  for (guint k = 0; k < G_N_ELEMENTS (sizes) * G_N_ELEMENTS (texts); k++)
    {
      TfChartStyle style = tf_chart_style (FALSE, FALSE, texts[k / G_N_ELEMENTS (sizes)]);
      int w = (int)sizes[k % G_N_ELEMENTS (sizes)][0], h = (int)sizes[k % G_N_ELEMENTS (sizes)][1];
      g_auto (Picture) with = picture_new (w, h, style.ground);
      g_auto (Picture) without = picture_new (w, h, style.ground);
      TfDial dial = { -24, 4, -17, 9, 11, "Stenflo & Kosovichev 2012", -1, 1, { 1, -1, 0 } };
      tf_dial_draw (with.cr, &dial, &style, (TfArea){ 0, 0, w, h });
      dial.joy_name = " ";
      tf_dial_draw (without.cr, &dial, &style, (TfArea){ 0, 0, w, h });
      guint name = 0, upon = 0;
      for (int y = 0; y < h; y++)
        for (int x = 0; x < w; x++)
          if (colour_distance (picture_at (&with, x, y), picture_at (&without, x, y)) > 0.05)
            {
              name++;
              upon += colour_distance (picture_at (&without, x, y), style.ground) > 0.05;
            }
      g_assert_cmpuint (name, >, 200);
      g_assert_cmpuint (upon, ==, 0);
    }
}

static cairo_status_t
swallow (void *closure, const unsigned char *data, unsigned int length)
{
  g_byte_array_append (closure, data, length);
  return CAIRO_STATUS_SUCCESS;
}

static void
svg_and_pdf_take_the_same_drawing (void)
{
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  TfDial dial = { -24, 4, -17, 9, 11, "S & K 2012", -1, 1, { 1, -1, 0 } };
  for (int pdf = 0; pdf < 2; pdf++)
    {
      g_autoptr (GByteArray) bytes = g_byte_array_new ();
      cairo_surface_t *surface
          = pdf ? cairo_pdf_surface_create_for_stream (swallow, bytes, 300, 190)
                : cairo_svg_surface_create_for_stream (swallow, bytes, 300, 190);
      cairo_t *cr = cairo_create (surface);
      tf_dial_draw (cr, &dial, &style, (TfArea){ 0, 0, 300, 190 });
      g_assert_cmpint (cairo_status (cr), ==, CAIRO_STATUS_SUCCESS);
      cairo_destroy (cr);
      cairo_surface_finish (surface);
      g_assert_cmpint (cairo_surface_status (surface), ==, CAIRO_STATUS_SUCCESS);
      cairo_surface_destroy (surface);
      g_assert_cmpuint (bytes->len, >, 1000);
      g_assert_true (memcmp (bytes->data, pdf ? "%PDF" : "<?xm", 4) == 0);
    }
}

static void
the_description_says_what_is_shown (void)
{
  TfDial dial = { -24.1, 4.2, -17, 9, 11, "S & K 2012", -1, 1, { -1, 0, 2 } };
  g_autofree char *text = tf_dial_dup_description (&dial);
  g_assert_cmpstr (text, ==,
                   "Axis at −24° ± 4° from west towards north. Leading polarity negative. Hale’s "
                   "law expects positive "
                   "to lead. Joy’s law (S & K 2012) expects a tilt of +9° ± 11°. Witnesses: "
                   "negative, undecided, absent.");
  TfDial empty = plain_dial (NAN);
  empty.leading_polarity = 0;
  g_autofree char *none = tf_dial_dup_description (&empty);
  g_assert_cmpstr (none, ==,
                   "No axis. Leading polarity unknown. What Hale’s law expects is unknown. "
                   "Witnesses: absent, absent, "
                   "absent.");
}

void
add_dial_tests (void)
{
  g_test_add_func ("/chart/dial/the-bar-lies-at-its-bearing", the_bar_lies_at_its_bearing);
  g_test_add_func ("/chart/dial/the-leader-stands-in-the-west", the_leader_stands_in_the_west);
  g_test_add_func ("/chart/dial/the-fan-opens-towards-the-equator",
                   the_fan_opens_towards_the_equator);
  g_test_add_func ("/chart/dial/the-uncertainty-is-a-darker-fan", the_uncertainty_is_a_darker_fan);
  g_test_add_func ("/chart/dial/an-empty-dial-has-a-circle-alone",
                   an_empty_dial_has_a_circle_alone);
  g_test_add_func ("/chart/dial/nothing-is-cut-off-at-any-size", nothing_is_cut_off);
  g_test_add_func ("/chart/dial/the-name-stands-free", the_name_stands_free);
  g_test_add_func ("/chart/dial/svg-and-pdf-take-the-same-drawing",
                   svg_and_pdf_take_the_same_drawing);
  g_test_add_func ("/chart/dial/the-description-says-what-is-shown",
                   the_description_says_what_is_shown);
}
