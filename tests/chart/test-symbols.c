/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-chart.h"

#include <math.h>

#include "tf-check.h"

/* Relative luminance and contrast ratio: WCAG 2.1, "relative luminance" and "contrast ratio" (W3C
 * Recommendation 2018). */
static double
channel (double c)
{
  return c <= 0.03928 ? c / 12.92 : pow ((c + 0.055) / 1.055, 2.4);
}

static double
luminance (TfColour c)
{
  return 0.2126 * channel (c.r) + 0.7152 * channel (c.g) + 0.0722 * channel (c.b);
}

static double
contrast (TfColour a, TfColour b)
{
  double one = luminance (a), two = luminance (b);
  return (MAX (one, two) + 0.05) / (MIN (one, two) + 0.05);
}

static void
the_ratio_is_that_of_the_standard (void)
{
  TfColour black = { 0, 0, 0, 1 }, white = { 1, 1, 1, 1 },
           grey = { 119 / 255.0, 119 / 255.0, 119 / 255.0, 1 };
  tf_check_near ("black on white", contrast (black, white), 21, 1e-9);
  tf_check_near ("#777 on white", contrast (grey, white), 4.48,
                 0.005); /* widely printed; from memory */
}

static void
text_and_symbols_stand_out (void)
{
  for (int k = 0; k < 4; k++)
    {
      TfChartStyle style = tf_chart_style (k & 1, k >> 1, 11);
      double text = style.contrast ? 7 : 4.5, symbol = style.contrast ? 4.5 : 3;
      tf_check_between ("ink", contrast (style.ink, style.ground), 7, 21);
      tf_check_between ("faint text", contrast (style.faint, style.ground), text, 21);
      tf_check_between ("faint text on a band", contrast (style.faint, style.band), 4.5, 21);
      tf_check_between ("negative", contrast (style.negative, style.ground), symbol, 21);
      tf_check_between ("breaks", contrast (style.breaks, style.ground), symbol, 21);
      tf_check_between ("teal", contrast (style.teal, style.ground), symbol, 21);
      tf_check_between ("slate", contrast (style.slate, style.ground), symbol, 21);
    }
}

/* The amber itself is light; on a light ground the line round the disc carries the contrast. */
static void
a_disc_stands_out_by_its_edge (void)
{
  for (int k = 0; k < 4; k++)
    {
      TfChartStyle style = tf_chart_style (k & 1, k >> 1, 11);
      g_auto (Picture) picture = picture_new (40, 40, style.ground);
      double best = 0;
      tf_chart_pole (picture.cr, &style, 20.5, 20.5, 9, 1);
      for (int x = 9; x < 15; x++)
        best = MAX (best, contrast (picture_at (&picture, x, 20), style.ground));
      tf_check_between ("edge of the disc", best, 3, 21);
    }
}

static void
palette_is_the_projects_own (void)
{
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  tf_check_near ("amber r", style.positive.r, 0xD9 / 255.0, 1e-9);
  tf_check_near ("amber g", style.positive.g, 0x8A / 255.0, 1e-9);
  tf_check_near ("indigo b", style.negative.b, 0xD6 / 255.0, 1e-9);
  tf_check_near ("breaks r", style.breaks.r, 0xC7 / 255.0, 1e-9);
  tf_check_near ("teal g", style.teal.g, 0x6B / 255.0, 1e-9);
}

static void
a_disc_is_filled_and_a_ring_is_hollow (void)
{
  for (int dark = 0; dark < 2; dark++)
    {
      TfChartStyle style = tf_chart_style (dark, FALSE, 11);
      g_auto (Picture) picture = picture_new (80, 40, style.ground);
      tf_chart_pole (picture.cr, &style, 20.5, 20.5, 8, 1);
      tf_chart_pole (picture.cr, &style, 60.5, 20.5, 8, -1);
      tf_check_near ("middle of the disc",
                     colour_distance (picture_at (&picture, 20, 20), style.positive), 0, 0.01);
      tf_check_near ("middle of the ring",
                     colour_distance (picture_at (&picture, 60, 20), style.ground), 0, 0.01);
      tf_check_near ("on the ring", colour_distance (picture_at (&picture, 67, 20), style.negative),
                     0, 0.05);
      tf_check_near ("outside", colour_distance (picture_at (&picture, 70, 20), style.ground), 0,
                     0.01);
    }
}

static void
a_pole_without_polarity_is_neither (void)
{
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  g_auto (Picture) picture = picture_new (40, 40, style.ground);
  tf_chart_pole (picture.cr, &style, 20.5, 20.5, 8, 0);
  g_assert_cmpuint (picture_count (&picture, style.positive, 0.1), ==, 0);
  g_assert_cmpuint (picture_count (&picture, style.negative, 0.1), ==, 0);
  g_assert_cmpuint (picture_changed (&picture, style.ground), >, 10);
}

static void
only_the_struck_diamond_is_red (void)
{
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  g_auto (Picture) picture = picture_new (120, 40, style.ground);
  tf_chart_diamond (picture.cr, &style, 20, 20, 10, TF_DIAMOND_HOLLOW);
  tf_chart_diamond (picture.cr, &style, 60, 20, 10, TF_DIAMOND_PLAIN);
  tf_chart_diamond (picture.cr, &style, 100, 20, 10, TF_DIAMOND_STRUCK);
  g_assert_cmpuint (picture_count_in (&picture, style.breaks, 0.05, 0, 0, 80, 40), ==, 0);
  g_assert_cmpuint (picture_count_in (&picture, style.breaks, 0.05, 80, 0, 120, 40), >, 60);
  g_assert_cmpuint (picture_count_in (&picture, style.ink, 0.1, 80, 0, 120, 40), >,
                    10); /* the stroke */
  tf_check_near ("hollow", colour_distance (picture_at (&picture, 20, 20), style.ground), 0, 0.01);
  tf_check_near ("plain", colour_distance (picture_at (&picture, 60, 20), style.slate), 0, 0.01);
}

static void
text_is_aligned (void)
{
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 14);
  g_auto (Picture) picture = picture_new (200, 40, style.ground);
  double width = tf_chart_text (picture.cr, &style, 100, 20, 1, 0.5, style.ink, "N17 W23");
  tf_check_between ("width", width, 30, 95);
  g_assert_cmpuint (picture_count_in (&picture, style.ground, 0.01, 102, 0, 200, 40), ==, 98 * 40);
  g_assert_cmpuint (picture_count_in (&picture, style.ink, 0.3, 0, 0, 102, 40), >, 20);
  tf_check_near ("no text", tf_chart_text (picture.cr, &style, 0, 0, 0, 0, style.ink, ""), 0, 0);
  tf_check_near ("NaN place", tf_chart_text (picture.cr, &style, NAN, 0, 0, 0, style.ink, "a"), 0,
                 0);
}

static void
check_words (char *got, const char *expected)
{
  g_assert_cmpstr (got, ==, expected);
  g_free (got);
}

static void
places_and_fluxes_in_words (void)
{
  check_words (tf_chart_dup_place (17.2, 22.6), "N17 W23");
  check_words (tf_chart_dup_place (-5.4, -71.9), "S05 E72");
  check_words (tf_chart_dup_place (12, NAN), "N12");
  check_words (tf_chart_dup_place (NAN, 3), "—");
  check_words (tf_chart_dup_flux (6.1e21), "6.1·10²¹ Mx");
  check_words (tf_chart_dup_flux (-9.96e20), "−1.0·10²¹ Mx");
  check_words (tf_chart_dup_flux (0), "0 Mx");
  check_words (tf_chart_dup_flux (NAN), "—");
}

void
add_symbol_tests (void)
{
  g_test_add_func ("/chart/style/contrast-is-measured-as-in-the-standard",
                   the_ratio_is_that_of_the_standard);
  g_test_add_func ("/chart/style/text-and-symbols-stand-out-on-every-ground",
                   text_and_symbols_stand_out);
  g_test_add_func ("/chart/style/a-disc-stands-out-by-its-edge", a_disc_stands_out_by_its_edge);
  g_test_add_func ("/chart/style/the-palette-is-the-projects-own", palette_is_the_projects_own);
  g_test_add_func ("/chart/symbol/a-disc-is-filled-and-a-ring-is-hollow",
                   a_disc_is_filled_and_a_ring_is_hollow);
  g_test_add_func ("/chart/symbol/a-pole-without-polarity-is-neither",
                   a_pole_without_polarity_is_neither);
  g_test_add_func ("/chart/symbol/only-the-struck-diamond-is-red", only_the_struck_diamond_is_red);
  g_test_add_func ("/chart/text/is-aligned-and-bears-nothing", text_is_aligned);
  g_test_add_func ("/chart/text/places-and-fluxes-in-words", places_and_fluxes_in_words);
}
