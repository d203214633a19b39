/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-desk.h"

#include <math.h>

#include "tf-slip-words.h"

static void
signs (void)
{
  g_autofree char *plus = tf_words_dup_signed (7.24, 1), *minus = tf_words_dup_signed (-24.06, 1);
  g_autofree char *zero = tf_words_dup_signed (-0.04, 1), *none = tf_words_dup_signed (NAN, 1);
  g_assert_cmpstr (plus, ==, "+7.2");
  g_assert_cmpstr (minus, ==, "−24.1");
  g_assert_cmpstr (zero, ==, "0.0");
  g_assert_cmpstr (none, ==, "—");
}

static void
ages (void)
{
  static const struct
  {
    double seconds;
    const char *words;
  } cases[] = { { 90, "2 min" },
                { 7200, "2 h" },
                { 47 * 3600.0, "47 h" },
                { 3 * 86400.0, "3 d" },
                { 13 * 365.25 * 86400, "13 y" } };
  for (guint k = 0; k < G_N_ELEMENTS (cases); k++)
    {
      g_autofree char *words = tf_words_dup_age (cases[k].seconds);
      g_assert_cmpstr (words, ==, cases[k].words);
    }
}

static void
split (void)
{
  g_autofree char *said = NULL, *why = NULL, *said2 = NULL, *why2 = NULL, *said3 = NULL,
                  *why3 = NULL;
  tf_words_split_verdict ("breaks Hale's law (cycle 24, sure: + should lead in the south)", &said,
                          &why);
  g_assert_cmpstr (said, ==, "breaks Hale's law");
  g_assert_cmpstr (why, ==, "cycle 24, sure: + should lead in the south");
  tf_words_split_verdict ("cannot say: near the limb", &said2, &why2);
  g_assert_cmpstr (said2, ==, "cannot say");
  g_assert_cmpstr (why2, ==, "near the limb");
  tf_words_split_verdict ("plain", &said3, &why3);
  g_assert_cmpstr (said3, ==, "plain");
  g_assert_null (why3);
}

static void
longitude (void)
{
  TfMeasure earth = { .cmd_deg = 21.4, .stonyhurst_lon_deg = 21.4 },
            off = { .cmd_deg = 21.4, .stonyhurst_lon_deg = -38.6 };
  TfMeasure map = { .cmd_deg = NAN, .stonyhurst_lon_deg = NAN };
  g_autofree char *none = tf_words_dup_longitude (&earth), *some = tf_words_dup_longitude (&off);
  g_autofree char *no_map = tf_words_dup_longitude (&map);
  g_assert_null (none);
  g_assert_null (no_map);
  g_assert_cmpstr (some, ==, "Stonyhurst −38.6°");
}

static void
every_line (void)
{
  TfMeasure measure = { 0 };
  TfVerdict verdict = { 0 };
  TfSampleRow row;
  tf_sample_row_init (&row);
  measure.axis_tilt_deg = measure.axis_bearing_deg = measure.separation_deg = measure.imbalance
      = measure.lat_deg = NAN;
  TfReading reading = { &measure, &verdict, &row, "flux-centroid/1 x=1", TRUE };
  for (guint k = 0; k < TF_N_LINES; k++)
    {
      g_autofree char *value = tf_line_dup_value (k, &reading),
                      *under = tf_line_dup_under (k, &reading);
      g_autofree char *how = tf_line_dup_how (k, &reading);
      g_assert_true (value[0] != '\0');
      g_assert_nonnull (strstr (how, "flux-centroid/1 x=1"));
      g_assert_null (strstr (value, "nan"));
      g_assert_true (under == NULL || strstr (under, "nan") == NULL);
    }
}

void
test_desk_add_words (void)
{
  g_test_add_func ("/desk/words/a-number-carries-its-sign-and-none-is-a-dash", signs);
  g_test_add_func ("/desk/words/an-age-has-one-unit", ages);
  g_test_add_func ("/desk/words/a-verdict-is-parted-into-what-and-why", split);
  g_test_add_func ("/desk/words/stonyhurst-is-told-off-the-earths-line-only", longitude);
  g_test_add_func ("/desk/words/every-line-says-how-it-was-got-also-with-no-value", every_line);
}
