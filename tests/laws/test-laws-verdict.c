/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-laws.h"

#include <string.h>

#include "tf-check.h"

static TfVerdict
judge (const TfSampleRow *row)
{
  g_autoptr (TfDivides) divides = test_laws_divides ();
  TfVerdictParams params = test_laws_verdict_params ();
  return tf_verdict_judge (row, divides, &params);
}

static void
check_reason (const TfSampleRow *row, const char *reason)
{
  TfVerdict verdict = judge (row);
  g_assert_cmpstr (verdict.reason, ==, reason);
  g_assert_true ((verdict.kind == TF_VERDICT_CANNOT_SAY) == (reason != NULL));
}

static void
test_keeps_and_breaks (void)
{
  TfSampleRow keeps = test_laws_row (15.0, -1), breaks = test_laws_row (-15.0, -1);
  g_assert_cmpint (judge (&keeps).kind, ==, TF_VERDICT_KEEPS);
  g_assert_cmpint (judge (&breaks).kind, ==, TF_VERDICT_BREAKS);
  g_assert_cmpint (judge (&keeps).expected, ==, -1);
  g_assert_cmpint (judge (&breaks).expected, ==, 1);
  g_assert_cmpint (judge (&keeps).cycle.number, ==, 24);
  g_assert_null (judge (&keeps).reason);
  g_assert_cmpstr (tf_verdict_name (TF_VERDICT_KEEPS), ==, "keeps");
  g_assert_cmpstr (tf_verdict_name (TF_VERDICT_BREAKS), ==, "breaks");
  g_assert_cmpstr (tf_verdict_name (TF_VERDICT_CANNOT_SAY), ==, "cannot say");
}

/* Each limit from both sides: "within" still gives a verdict. */
static void
test_limits (void)
{
  static const struct
  {
    const char *reason;
    gsize offset;
    double within, beyond;
  } limits[] = {
    { "hale-equator", offsetof (TfSampleRow, lat_deg), 3.0, 2.999 },
    { "hale-equator", offsetof (TfSampleRow, lat_deg), -3.0, -2.999 },
    { "hale-near-limb", offsetof (TfSampleRow, mu), 0.34, 0.3399 },
    { "hale-unipolar", offsetof (TfSampleRow, imbalance), 0.8, 0.8001 },
    { "hale-unipolar", offsetof (TfSampleRow, imbalance), -0.8, -0.8001 },
    { "hale-steep", offsetof (TfSampleRow, axis_tilt_deg), 75.0, 75.01 },
    { "hale-steep", offsetof (TfSampleRow, axis_tilt_deg), -75.0, -75.01 },
  };
  for (guint k = 0; k < G_N_ELEMENTS (limits); k++)
    {
      TfSampleRow row = test_laws_row (15.0, -1);
      double *value = (double *)((char *)&row + limits[k].offset);
      *value = limits[k].within;
      check_reason (&row, NULL);
      *value = limits[k].beyond;
      check_reason (&row, limits[k].reason);
    }
}

static void
test_other_reasons (void)
{
  TfSampleRow row = test_laws_row (15.0, 0);
  check_reason (&row, "hale-no-polarity");
  row.imbalance = -1.0; /* one pole leads nothing */
  check_reason (&row, "hale-unipolar");
  row = test_laws_row (15.0, -1);
  row.leading_sure = 0;
  check_reason (&row, "hale-leader-unsure");
  row = test_laws_row (15.0, -1);
  row.witnesses_differ = 1;
  check_reason (&row, "hale-witnesses-differ");
  row = test_laws_row (15.0, -1);
  row.straddles = 1;
  check_reason (&row, "hale-straddles");
  g_assert_cmpint (judge (&row).expected, ==, 0);
  row = test_laws_row (0.0, -1);
  check_reason (&row, "hale-equator");
  row = test_laws_row (15.0, -1);
  row.lat_deg = NAN;
  check_reason (&row, "hale-no-place");
  row = test_laws_row (15.0, -1);
  row.time = TF_TIME_UNKNOWN;
  check_reason (&row, "hale-no-cycle");
  row = test_laws_row (15.0, -1);
  row.time = tf_time_from_year (1740.0);
  check_reason (&row, "hale-no-cycle");
}

/* A straddling region is told from its poles where the source does not say, and steepness from the
 * bearing. */
static void
test_told_from_what_is_there (void)
{
  TfSampleRow row = test_laws_row (5.0, -1);
  row.straddles = -1;
  row.leading_lat_deg = -0.1;
  check_reason (&row, "hale-straddles");
  row.leading_lat_deg = 0.1;
  check_reason (&row, NULL);
  row.axis_tilt_deg = NAN;
  row.axis_bearing_deg = -76.0;
  check_reason (&row, "hale-steep");
}

/* What a source lacks is no reason, polarity and latitude apart. */
static void
test_absent_quantities_pass (void)
{
  TfSampleRow row;
  tf_sample_row_init (&row);
  check_reason (&row, "hale-no-polarity");
  row.leading_polarity = 1;
  check_reason (&row, "hale-no-place");
  row.lat_deg = -20.0;
  check_reason (&row, "hale-no-cycle");
  row.time = tf_time_from_year (2013.5);
  check_reason (&row, NULL);
  g_assert_cmpint (judge (&row).kind, ==, TF_VERDICT_KEEPS);
}

/* The first reason of the documented order is given. */
static void
test_order_of_reasons (void)
{
  TfSampleRow row = test_laws_row (1.0, -1);
  row.time = test_laws_month (24, -12.0);
  row.witnesses_differ = 1;
  row.leading_sure = 0;
  row.axis_tilt_deg = 80.0;
  row.mu = 0.2;
  row.straddles = 1;
  row.imbalance = 0.95;
  check_reason (&row, "hale-unipolar");
  row.imbalance = 0.0;
  check_reason (&row, "hale-straddles");
  row.straddles = 0;
  check_reason (&row, "hale-equator");
  row.lat_deg = 15.0;
  check_reason (&row, "hale-near-limb");
  row.mu = 0.9;
  check_reason (&row, "hale-steep");
  row.axis_tilt_deg = 8.0;
  check_reason (&row, "hale-leader-unsure");
  row.leading_sure = 1;
  check_reason (&row, "hale-witnesses-differ");
  row.witnesses_differ = 0;
  check_reason (&row, "hale-cycle-unsure");
}

static void
check_text (const TfSampleRow *row, const char *text)
{
  TfVerdict verdict = judge (row);
  g_autofree char *got = tf_verdict_dup_text (&verdict, row, TRUE);
  g_assert_cmpstr (got, ==, text);
}

/* 2008-12, 17 deg north: cycle 23 expects a positive leader, 24 a negative one. */
static void
test_both_readings (void)
{
  TfSampleRow row = test_laws_row (17.0, -1);
  row.time = test_laws_month (24, 0.0);
  TfVerdict verdict = judge (&row);
  g_assert_cmpstr (verdict.reason, ==, "hale-cycle-unsure");
  g_assert_cmpint (verdict.cycle.number, ==, 24);
  g_assert_cmpint (verdict.cycle.other, ==, 23);
  g_assert_cmpint (verdict.as_number, ==, TF_VERDICT_KEEPS);
  g_assert_cmpint (verdict.as_other, ==, TF_VERDICT_BREAKS);
  check_text (&row, "cannot say: the cycle is unsure (as 23 breaks, as 24 keeps)");
  row.leading_polarity = 1;
  check_text (&row, "cannot say: the cycle is unsure (as 23 keeps, as 24 breaks)");
  row.lat_deg = 16.0; /* the likelier reading is now 23 */
  check_text (&row, "cannot say: the cycle is unsure (as 23 keeps, as 24 breaks)");
  row.leading_sure = 0; /* not the cycle alone */
  check_text (&row, "cannot say: which polarity leads is unsure");
  g_assert_cmpint (judge (&row).as_number, ==, TF_VERDICT_CANNOT_SAY);
}

static void
test_texts (void)
{
  TfSampleRow row = test_laws_row (-15.0, -1);
  check_text (&row, "breaks Hale's law (cycle 24, sure: + should lead in the south)");
  row.leading_polarity = 1;
  check_text (&row, "keeps Hale's law (cycle 24, sure: + leads in the south)");
  row = test_laws_row (15.0, 1);
  check_text (&row, "breaks Hale's law (cycle 24, sure: − should lead in the north)");
  row.leading_polarity = 0;
  check_text (&row, "cannot say: the source gives no polarity");
}

/* Other hemisphere and other sign: the same verdict. Other sign alone: keeps and breaks change
 * places. */
static void
test_symmetries (void)
{
  g_autoptr (TfDivides) divides = test_laws_divides ();
  TfVerdictParams params = test_laws_verdict_params ();
  g_autoptr (GRand) rand = g_rand_new_with_seed (5);
  guint judged = 0;
  for (int k = 0; k < 3000; k++)
    {
      TfSampleRow row
          = test_laws_row (g_rand_double_range (rand, -40.0, 40.0), g_rand_boolean (rand) ? 1 : -1);
      row.time = tf_time_from_year (g_rand_double_range (rand, 1980.0, 2024.0));
      TfSampleRow mirrored = row, flipped = row;
      mirrored.lat_deg = -row.lat_deg;
      mirrored.leading_lat_deg = -row.leading_lat_deg;
      mirrored.following_lat_deg = -row.following_lat_deg;
      mirrored.leading_polarity = flipped.leading_polarity = -row.leading_polarity;
      TfVerdict own = tf_verdict_judge (&row, divides, &params);
      TfVerdict other = tf_verdict_judge (&mirrored, divides, &params);
      TfVerdict turned = tf_verdict_judge (&flipped, divides, &params);
      g_assert_cmpint (own.kind, ==, other.kind);
      g_assert_cmpstr (own.reason, ==, other.reason);
      g_assert_cmpstr (own.reason, ==, turned.reason);
      g_assert_cmpint (own.expected, ==, -other.expected);
      if (own.kind == TF_VERDICT_CANNOT_SAY)
        continue;
      judged++;
      g_assert_cmpint (turned.kind, ==,
                       own.kind == TF_VERDICT_KEEPS ? TF_VERDICT_BREAKS : TF_VERDICT_KEEPS);
    }
  g_assert_cmpuint (judged, >, 2000);
}

/* A Hale region's polarity tilt is its axis tilt; one that breaks the law is half a turn away.
 * Vector: poles (-10, 8) leading by polarity and (-2, 10): planar 165.7958, axis tilt -14.2042. */
static void
test_polarity_tilt (void)
{
  TfSampleRow row = test_laws_row (9.0, 1);
  row.axis_tilt_deg = 165.7958 - 180.0;
  TfVerdict breaks = judge (&row);
  g_assert_cmpint (breaks.kind, ==, TF_VERDICT_BREAKS);
  tf_check_near ("polarity tilt of a breaking region", tf_verdict_polarity_tilt (&row, &breaks),
                 165.7958, 1e-9);
  row.axis_tilt_deg = 14.0;
  tf_check_near ("and with the other tilt", tf_verdict_polarity_tilt (&row, &breaks), -166.0, 1e-9);
  row.axis_tilt_deg = 0.0;
  tf_check_near ("and with none", tf_verdict_polarity_tilt (&row, &breaks), 180.0, 1e-9);
  row.leading_polarity = -1;
  row.axis_tilt_deg = 14.0;
  TfVerdict keeps = judge (&row);
  tf_check_near ("polarity tilt of a keeping region", tf_verdict_polarity_tilt (&row, &keeps), 14.0,
                 0.0);
  row.leading_sure = 0;
  tf_check_nan ("with an unsure leader", tf_verdict_polarity_tilt (&row, &keeps));
  row.leading_sure = 1;
  row.time = test_laws_month (24, 0.0);
  row.lat_deg = 17.0;
  TfVerdict unsure = judge (&row);
  tf_check_nan ("with an unsure cycle", tf_verdict_polarity_tilt (&row, &unsure));
  row.axis_tilt_deg = NAN;
  tf_check_nan ("without a tilt", tf_verdict_polarity_tilt (&row, &keeps));
}

static void
test_reasons_have_sentences (void)
{
  static const char *const codes[]
      = { "hale-cycle-unsure",  "hale-equator",          "hale-straddles",
          "hale-leader-unsure", "hale-witnesses-differ", "hale-no-place",
          "hale-near-limb",     "hale-unipolar",         "hale-steep",
          "hale-no-polarity",   "hale-no-cycle" };
  for (guint k = 0; k < G_N_ELEMENTS (codes); k++)
    {
      g_autoptr (TfNote) note = tf_note_new (codes[k], "");
      g_autofree char *text = tf_note_dup_text (note, TRUE);
      g_assert_true (g_str_has_prefix (text, "cannot say: "));
      g_assert_cmpint (tf_note_get_level (note), ==, TF_NOTE_REASON);
    }
}

void
test_laws_add_verdict (void)
{
  g_test_add_func ("/laws/verdict/keeps-and-breaks", test_keeps_and_breaks);
  g_test_add_func ("/laws/verdict/every-limit-from-both-sides", test_limits);
  g_test_add_func ("/laws/verdict/every-other-reason", test_other_reasons);
  g_test_add_func ("/laws/verdict/straddling-and-steepness-from-what-is-there",
                   test_told_from_what_is_there);
  g_test_add_func ("/laws/verdict/absent-quantities-are-no-reason", test_absent_quantities_pass);
  g_test_add_func ("/laws/verdict/the-first-reason-is-given", test_order_of_reasons);
  g_test_add_func ("/laws/verdict/an-unsure-cycle-gives-both-readings", test_both_readings);
  g_test_add_func ("/laws/verdict/it-says-itself-in-one-line", test_texts);
  g_test_add_func ("/laws/verdict/mirror-and-sign-change-it-as-they-must", test_symmetries);
  g_test_add_func ("/laws/verdict/the-polarity-tilt-turns-by-half-a-turn", test_polarity_tilt);
  g_test_add_func ("/laws/verdict/every-reason-has-a-sentence", test_reasons_have_sentences);
}
