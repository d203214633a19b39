/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-study.h"

#include "tf-follow.h"

#include "tf-check.h"
#include "tf-json.h"

static void
test_measure_becomes_a_row (void)
{
  g_auto (TfMeasure) m = test_study_measure (15, -1);
  TfSampleRow row;
  tf_study_measure_row (&m, &row);
  tf_check_near ("latitude", row.lat_deg, 15, 0);
  tf_check_near ("leading pole is the negative one", row.leading_lat_deg, m.negative.lat_deg, 0);
  tf_check_near ("following pole", row.following_lat_deg, m.positive.lat_deg, 0);
  tf_check_near ("tilt's uncertainty is the whole", row.tilt_sigma_deg, 0.71, 0);
  tf_check_near ("flux", row.flux_mx, 1e22, 0);
  g_assert_cmpint (row.leading_polarity, ==, -1);
  g_assert_cmpint (row.leading_sure, ==, 1);
  g_assert_cmpint (row.witnesses_differ, ==, 0);
  g_assert_cmpint (row.straddles, ==, 0);
  g_assert_cmpint (row.size, ==, 0);
}

static void
test_witnesses (void)
{
  static const struct
  {
    int said[3];
    int differ;
  } cases[] = { { { 1, 1, 1 }, 0 },
                { { 1, -1, 1 }, 1 },
                { { 1, 0, TF_WITNESS_ABSENT }, 0 },
                { { TF_WITNESS_ABSENT, 1, -1 }, 1 },
                { { 0, 0, -1 }, 0 } };
  g_auto (TfMeasure) m = test_study_measure (15, 1);
  for (guint k = 0; k < G_N_ELEMENTS (cases); k++)
    {
      TfSampleRow row;
      for (int w = 0; w < 3; w++)
        m.witnesses[w] = cases[k].said[w];
      tf_study_measure_row (&m, &row);
      g_assert_cmpint (row.witnesses_differ, ==, cases[k].differ);
    }
}

static void
test_unipolar_and_straddling (void)
{
  g_auto (TfMeasure) m = test_study_measure (0.1, 1);
  TfSampleRow row;
  tf_study_measure_row (&m, &row);
  g_assert_cmpint (row.straddles, ==, 1);
  m.leading_polarity = 0;
  tf_study_measure_row (&m, &row);
  tf_check_nan ("a leading pole where there is none", row.leading_lat_deg);
  g_assert_cmpint (row.straddles, ==, 0);
}

/* The narrow point of the wings and the whole measure are judged alike. */
static void
test_a_point_is_judged_as_its_measure (void)
{
  g_autoptr (TfStudy) study = tf_study_new_default ();
  g_autoptr (TfDivides) divides = tf_divides_new (&study->divide);
  for (int lat = -30; lat <= 30; lat += 5)
    for (int leading = -1; leading <= 1; leading++)
      {
        g_auto (TfMeasure) m = test_study_measure (lat, leading);
        TfPoint point = { .mark = 3,
                          .time = m.time,
                          .lat_deg = (float)lat,
                          .flux_mx = 1e22f,
                          .tilt_deg = 8.5f,
                          .mu = 0.9f,
                          .cmd_deg = 10,
                          .separation_deg = 4,
                          .leading = (gint8)leading,
                          .leading_sure = 1,
                          .imbalance = 0.1f,
                          .straddles = lat == 0,
                          .region = 7 };
        TfSampleRow row;
        tf_study_point (&point, &row);
        TfVerdict by_point = tf_verdict_judge (&row, divides, &study->verdict);
        TfVerdict by_measure = tf_study_judge_measure (study, &m);
        g_assert_cmpint (by_point.kind, ==, by_measure.kind);
        g_assert_cmpstr (by_point.reason, ==, by_measure.reason);
        g_assert_cmpuint (row.region, ==, 7);
      }
}

/* A hint's row never shares a region number with a mark's. */
static void
test_hints_are_regions_of_their_own (void)
{
  TfPoint point = { .mark = 7, .hint = 1, .region = 0 };
  TfSampleRow row;
  tf_study_point (&point, &row);
  g_assert_cmpuint (row.region, >, 1u << 30);
  g_assert_cmpint (row.origin, ==, TF_ORIGIN_HINT);
}

static JsonObject *
members_of (const TfVerdict *verdict, const TfSampleRow *row)
{
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  json_builder_begin_object (builder);
  tf_verdict_build_members (verdict, row, builder);
  json_builder_end_object (builder);
  g_autofree char *text = tf_json_dup_text (builder, FALSE);
  g_autoptr (JsonNode) node = json_from_string (text, NULL);
  g_assert_nonnull (node);
  return json_object_ref (json_node_get_object (node));
}

static void
test_json_of_a_verdict (void)
{
  g_autoptr (TfStudy) study = tf_study_new_default ();
  g_auto (TfMeasure) m = test_study_measure (-15, -1);
  TfSampleRow row;
  tf_study_measure_row (&m, &row);
  TfVerdict breaks = tf_study_judge_measure (study, &m);
  g_autoptr (JsonObject) sure = members_of (&breaks, &row);
  JsonObject *hale = tf_json_member_object (sure, "hale"),
             *cycle = tf_json_member_object (sure, "cycle");
  g_assert_cmpstr (tf_json_member_string (hale, "verdict"), ==, "breaks");
  g_assert_cmpint (tf_json_member_int (hale, "expected", 0), ==, 1);
  g_assert_true (json_object_get_null_member (hale, "reason"));
  g_assert_true (json_object_get_null_member (hale, "readings"));
  g_assert_cmpint (tf_json_member_int (cycle, "number", 0), ==, 24);
  g_assert_true (tf_json_member_bool (cycle, "sure", FALSE));
  tf_check_near ("polarity tilt", tf_json_member_number (sure, "polarity_tilt_deg"), 8.5 - 180,
                 1e-9);

  m.time = tf_cycle_minimum (24);
  m.lat_deg = 17;
  tf_study_measure_row (&m, &row);
  TfVerdict open = tf_study_judge_measure (study, &m);
  g_autoptr (JsonObject) unsure = members_of (&open, &row);
  hale = tf_json_member_object (unsure, "hale");
  g_assert_cmpstr (tf_json_member_string (hale, "verdict"), ==, "cannot say");
  g_assert_cmpstr (tf_json_member_string (tf_json_member_object (hale, "reason"), "code"), ==,
                   "hale-cycle-unsure");
  JsonArray *readings = tf_json_member_array (hale, "readings");
  g_assert_cmpuint (json_array_get_length (readings), ==, 2);
  JsonObject *older = json_array_get_object_element (readings, 0);
  g_assert_cmpint (tf_json_member_int (older, "cycle", 0), ==, 23);
  g_assert_cmpstr (tf_json_member_string (older, "verdict"), ==, "breaks");
  g_assert_true (json_object_get_null_member (unsure, "polarity_tilt_deg"));
}

/* Where it was born as its passage has it: on the disk, elsewhere, not known. */
static void
test_born (void)
{
  static const struct
  {
    int born;
    gint8 told;
  } ends[] = { { TF_END_UNKNOWN, -1 }, { TF_END_ON_DISK, 1 }, { TF_END_LIMB, 0 }, { TF_END_FAR_SIDE, 0 } };
  for (guint k = 0; k < G_N_ELEMENTS (ends); k++)
    {
      TfRow row = { .mark = 5, .region_key = 3, .passage_key = 2, .origin = "changed", .born = ends[k].born };
      row.measure = test_study_measure (12, 1);
      TfSampleRow sample;
      tf_study_row (&row, &sample);
      g_assert_cmpint (sample.born, ==, ends[k].told);
      g_clear_pointer (&row.measure.cautions, g_ptr_array_unref);
    }
}

void
test_study_add_row (void)
{
  g_test_add_func ("/study/row/born-as-its-passage-was", test_born);
  g_test_add_func ("/study/row/a-measure-becomes-a-row", test_measure_becomes_a_row);
  g_test_add_func ("/study/row/witnesses-differ-when-two-that-spoke-do", test_witnesses);
  g_test_add_func ("/study/row/one-pole-and-poles-astride-the-equator",
                   test_unipolar_and_straddling);
  g_test_add_func ("/study/row/a-point-of-the-wings-is-judged-as-its-measure",
                   test_a_point_is_judged_as_its_measure);
  g_test_add_func ("/study/row/hints-are-regions-of-their-own",
                   test_hints_are_regions_of_their_own);
  g_test_add_func ("/study/json/a-verdict-with-its-reason-and-readings", test_json_of_a_verdict);
}
