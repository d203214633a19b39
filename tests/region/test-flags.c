/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Regions that are no plain bipole are told so: each doubtful case has its caution, and
 * options do what they say. */

#include <math.h>

#include "region-builder.h"
#include "tf-constants.h"
#include "tf-json.h"

static void
measure_poles (TfMeasure *m, const BuilderFrame *how, const BuilderPole *poles, guint n,
               double radius, const TfMeasureParams *params)
{
  g_autoptr (GError) error = NULL;
  TfMeasureParams plain;
  tf_measure_params_init (&plain);
  g_autoptr (TfFrame) frame = builder_frame (how, poles, n);
  g_autoptr (TfOutline) outline = builder_cap (how->lon, how->lat, radius);
  tf_measure_region (m, frame, outline, params != NULL ? params : &plain, &error);
  g_assert_no_error (error);
}

static gboolean
has (const TfMeasure *m, const char *code)
{
  return tf_notes_find (m->cautions, code) != NULL;
}

static void
must_have (const TfMeasure *m, const char *code)
{
  g_autofree char *codes = tf_notes_dup_codes (m->cautions);
  if (!has (m, code))
    {
      g_test_message ("%s is missing among: %s", code, codes);
      g_test_fail ();
    }
}

static void
frame_at (BuilderFrame *how, double lon, double lat)
{
  builder_init (how, lon, lat, 2.0);
  how->noise = 10.0;
}

static void
test_plain (void)
{
  BuilderFrame how;
  BuilderPole poles[2];
  frame_at (&how, 10.0, 15.0);
  builder_bipole (poles, 10.0, 15.0, 5.0, 6.0, 1e22, -1);
  g_auto (TfMeasure) m = { 0 };
  measure_poles (&m, &how, poles, 2, 5.5, NULL);
  g_autofree char *codes = tf_notes_dup_codes (m.cautions);
  g_assert_cmpstr (codes, ==, "");
  g_assert_true (m.leading_sure);
  g_assert_cmpint (m.leading_polarity, ==, -1);
  g_assert_cmpuint (m.pieces, ==, 2);
  g_assert_false (m.ephemeral);
  for (guint k = 0; k < 3; k++)
    g_assert_cmpint (m.witnesses[k], ==, -1);
  tf_check_between ("compactness", m.compactness, 2.0, 4.0);
}

/* Two bipoles beside each other with signs in turn: + - over - +. */
static void
test_quadrupole (void)
{
  BuilderFrame how;
  BuilderPole poles[4];
  frame_at (&how, -12.0, -18.0);
  builder_bipole (poles, -12.0, -16.2, 4.0, 5.0, 8e21, 1);
  builder_bipole (poles + 2, -12.0, -19.8, 4.0, -5.0, 7e21, -1);
  g_auto (TfMeasure) m = { 0 };
  measure_poles (&m, &how, poles, 4, 6.0, NULL);
  must_have (&m, "not-one-bipole");
  must_have (&m, "poles-overlap");
  g_assert_false (m.leading_sure);
}

/* A young bipole, leader the other way round, born inside an old one. */
static void
test_nest (void)
{
  BuilderFrame how;
  BuilderPole poles[4];
  frame_at (&how, 15.0, 14.0);
  builder_bipole (poles, 15.0, 14.0, 7.0, 8.0, 8e21, -1);
  builder_bipole (poles + 2, 14.0, 13.6, 3.0, 3.0, 9e21, 1);
  g_auto (TfMeasure) m = { 0 };
  measure_poles (&m, &how, poles, 4, 7.0, NULL);
  must_have (&m, "not-one-bipole");
}

/* Opposite polarities on top of each other: a spot of one sign inside a ring of the other. */
static void
test_overlap (void)
{
  BuilderFrame how;
  BuilderPole poles[2] = { { 20.2, 12.1, 0.6, 5e21, 0.0 }, { 19.9, 12.0, 1.9, -5.5e21, 0.0 } };
  frame_at (&how, 20.0, 12.0);
  g_auto (TfMeasure) m = { 0 };
  measure_poles (&m, &how, poles, 2, 6.0, NULL);
  must_have (&m, "poles-overlap");
  must_have (&m, "tilt-unsure");
}

/* Wide weak patches without any strong field: nothing tells which leads. */
static void
test_decayed (void)
{
  BuilderFrame how;
  BuilderPole poles[12];
  frame_at (&how, 0.0, 20.0);
  for (guint k = 0; k < G_N_ELEMENTS (poles); k++)
    {
      double sign = k % 2 ? -1.0 : 1.0;
      poles[k] = (BuilderPole){ -sign * 0.6 + 3.5 * cos (k * 2.4),
                                20.0 + 3.0 * sin (k * 2.4 + 0.3 * sign), 0.7, sign * 1.4e20, 0.0 };
    }
  g_auto (TfMeasure) m = { 0 };
  measure_poles (&m, &how, poles, G_N_ELEMENTS (poles), 6.0, NULL);
  must_have (&m, "no-strong-field");
  must_have (&m, "leader-unsure");
  g_assert_false (m.leading_sure);
}

static void
test_unipolar (void)
{
  BuilderFrame how;
  BuilderPole poles[2];
  frame_at (&how, 0.0, 20.0);
  builder_bipole (poles, 0.0, 20.0, 4.0, 5.0, 1e22, 1);
  poles[1].flux *= 0.05;
  g_auto (TfMeasure) m = { 0 };
  measure_poles (&m, &how, poles, 2, 6.0, NULL);
  must_have (&m, "unipolar");
  poles[1].flux *= 3.4;
  g_auto (TfMeasure) weak = { 0 };
  measure_poles (&weak, &how, poles, 2, 6.0, NULL);
  must_have (&weak, "weak-polarity");
  g_assert_false (has (&weak, "unipolar"));
}

static void
test_limb_and_equator (void)
{
  BuilderFrame how;
  BuilderPole poles[2];
  frame_at (&how, 62.0, 10.0);
  builder_bipole (poles, 62.0, 10.0, 4.0, 5.0, 1e22, 1);
  g_auto (TfMeasure) near_limb = { 0 };
  measure_poles (&near_limb, &how, poles, 2, 5.0, NULL);
  must_have (&near_limb, "near-limb");
  frame_at (&how, 72.0, 5.0);
  builder_bipole (poles, 72.0, 5.0, 4.0, 5.0, 1e22, 1);
  g_auto (TfMeasure) nearer = { 0 };
  measure_poles (&nearer, &how, poles, 2, 5.0, NULL);
  must_have (&nearer, "near-limb-strong");
  frame_at (&how, 3.0, 0.0);
  poles[0] = (BuilderPole){ 6.0, 0.5, 0.6, 5e21, 0.0 };
  poles[1] = (BuilderPole){ 0.0, -0.5, 0.6, -5e21, 0.0 };
  g_auto (TfMeasure) equator = { 0 };
  measure_poles (&equator, &how, poles, 2, 6.0, NULL);
  must_have (&equator, "straddles-equator");
  tf_check_near ("bearing", equator.axis_bearing_deg, 9.4623, 0.1);
  tf_check_nan ("axis tilt", equator.axis_tilt_deg);
}

static void
test_pixels (void)
{
  BuilderFrame how;
  BuilderPole poles[2];
  TfMeasureParams params;
  g_autoptr (GError) error = NULL;
  frame_at (&how, 5.0, 15.0);
  builder_bipole (poles, 5.0, 15.0, 5.0, 5.0, 2e22, 1);
  TfGeometry g = builder_geometry (&how);
  g_autofree float *field = builder_field (&g, &how, poles, 2);
  gsize n = (gsize)g.width * g.height;
  builder_add_noise (field, n, 10.0, 2);
  for (gsize k = 0; k < n; k++)
    field[k] = fminf (field[k], 1500.0f);
  for (guint k = 0; k < 12; k++)
    field[(gsize)(g.height / 2) * g.width + g.width / 2 + k] = NAN;
  g_autoptr (TfFrame) frame = builder_frame_of (&g, &how, field);
  g_autoptr (TfOutline) outline = builder_cap (5.0, 15.0, 5.5);
  g_auto (TfMeasure) m = { 0 };
  tf_measure_params_init (&params);
  params.floor_gauss = 15.0;
  tf_measure_region (&m, frame, outline, &params, &error);
  g_assert_no_error (error);
  must_have (&m, "saturated-core");
  must_have (&m, "touches-missing-data");
  must_have (&m, "floor-below-noise");
  tf_check_near ("missing pixels",
                 tf_note_get_number (tf_notes_find (m.cautions, "touches-missing-data"), 0), 12.0,
                 0.0);
  g_autoptr (TfOutline) over_edge = builder_cap (5.0, 21.0, 5.5);
  g_auto (TfMeasure) cut = { 0 };
  tf_measure_region (&cut, frame, over_edge, &params, &error);
  g_assert_no_error (error);
  must_have (&cut, "outline-cut");
}

static void
test_nothing (void)
{
  BuilderFrame how;
  frame_at (&how, 0.0, 0.0);
  TfMeasureParams params;
  tf_measure_params_init (&params);
  params.floor_gauss = 200.0;
  g_auto (TfMeasure) m = { 0 };
  measure_poles (&m, &how, NULL, 0, 4.0, &params);
  must_have (&m, "nothing-above-floor");
  g_assert_cmpint (m.leading_polarity, ==, 0);
  tf_check_nan ("bearing", m.axis_bearing_deg);
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  json_builder_begin_object (builder);
  tf_measure_build_members (&m, builder);
  json_builder_end_object (builder);
  g_autofree char *text = tf_json_dup_text (builder, FALSE);
  g_assert_null (strstr (text, "nan"));
  g_assert_nonnull (strstr (text, "\"axis_bearing_deg\":null"));
  g_assert_nonnull (strstr (text, "\"witnesses\":[null,null,null]"));
}

/* -- options ----------------------------------------------------------------------------------- */

static void
test_fields (void)
{
  BuilderFrame how;
  BuilderPole poles[2];
  TfMeasureParams params;
  builder_init (&how, 45.0, 12.0, 2.0);
  builder_bipole (poles, 45.0, 12.0, 4.5, 5.0, 1e22, 1);
  tf_measure_params_init (&params);
  params.floor_gauss = 0.0;
  g_auto (TfMeasure) radial = { 0 };
  g_auto (TfMeasure) observed = { 0 };
  g_auto (TfMeasure) scaled = { 0 };
  g_auto (TfMeasure) product = { 0 };
  measure_poles (&radial, &how, poles, 2, 6.0, &params);
  params.field_used = TF_FIELD_USED_OBSERVED;
  measure_poles (&observed, &how, poles, 2, 6.0, &params);
  tf_check_near ("as observed: once mu", observed.flux_unsigned_mx / radial.flux_unsigned_mx,
                 radial.mu, 0.02);
  params.field_used = TF_FIELD_USED_RADIAL;
  params.scale = 1.4;
  measure_poles (&scaled, &how, poles, 2, 6.0, &params);
  tf_check_near ("scaled", scaled.flux_unsigned_mx / radial.flux_unsigned_mx, 1.4, 1e-6);
  tf_check_near ("scale is kept", scaled.scale, 1.4, 0.0);
  params.scale = NAN;
  how.radial = TRUE;
  measure_poles (&product, &how, poles, 2, 6.0, &params);
  tf_check_near ("a radial product is not divided", product.flux_unsigned_mx / 2e22, 1.0, 0.01);
}

static void
test_pins (void)
{
  BuilderFrame how;
  BuilderPole poles[2];
  TfMeasureParams params;
  g_autoptr (GError) error = NULL;
  frame_at (&how, 5.0, 15.0);
  builder_bipole (poles, 5.0, 15.0, 5.0, 5.0, 2e22, 1);
  g_autoptr (TfFrame) frame = builder_frame (&how, poles, 2);
  g_autoptr (TfOutline) cap = builder_cap (5.0, 15.0, 5.5);
  TfPinnedPole pin = { 1, BUILDER_L0 + 9.0, 14.0, "penumbra", "A" };
  g_autoptr (TfOutline) pinned = tf_outline_with_pin (cap, &pin);
  g_auto (TfMeasure) m = { 0 };
  double bearing, tilt;
  tf_measure_params_init (&params);
  tf_measure_region (&m, frame, pinned, &params, &error);
  g_assert_no_error (error);
  must_have (&m, "pole-pinned");
  g_assert_true (m.positive.pinned);
  g_assert_false (m.negative.pinned);
  tf_check_near ("place", m.positive.lat_deg, 14.0, 1e-9);
  tf_check_near ("place's uncertainty", m.positive.place_sigma_deg, 0.0, 0.0);
  tf_check_near ("flux stays", m.positive.flux_mx / 2e22, 1.0, 0.02);
  tf_tilt (9.0, 14.0, poles[1].lon, poles[1].lat, FALSE, &bearing, &tilt);
  tf_check_near ("tilt", m.axis_tilt_deg, tilt, 0.05);
}

static void
test_dipole (void)
{
  BuilderFrame how;
  BuilderPole poles[2];
  TfMeasureParams params;
  builder_init (&how, 0.0, 18.0, 1.0);
  how.fine = 2;
  builder_bipole (poles, 0.0, 18.0, 5.0, 10.0, 1e22, 1);
  tf_measure_params_init (&params);
  params.floor_gauss = 0.0;
  g_auto (TfMeasure) m = { 0 };
  measure_poles (&m, &how, poles, 2, 6.5, &params);
  /* 3 flux (sin leading - sin following) / (4 pi R^2), by the definition */
  double r = TF_RADIUS_MM * 1e8;
  double expected = 3.0 * 1e22 * (sin (poles[0].lat * TF_DEG) - sin (poles[1].lat * TF_DEG))
                    / (4.0 * TF_PI * r * r);
  tf_check_near ("axial dipole", m.axial_dipole_gauss / expected, 1.0, 0.02);
  tf_check_near ("from the poles", m.axial_dipole_poles_gauss / expected, 1.0, 0.02);
  tf_check_between ("its sigma", m.axial_dipole_sigma_gauss, 0.0, 0.2 * fabs (expected));
}

static void
test_realisations (void)
{
  BuilderFrame how;
  BuilderPole poles[2];
  TfMeasureParams params;
  frame_at (&how, 5.0, 15.0);
  how.noise = 20.0;
  builder_bipole (poles, 5.0, 15.0, 5.0, 5.0, 6e21, 1);
  tf_measure_params_init (&params);
  params.outline_term = FALSE;
  params.floor_gauss = 100.0;
  g_auto (TfMeasure) formula = { 0 };
  g_auto (TfMeasure) trials = { 0 };
  g_auto (TfMeasure) again = { 0 };
  measure_poles (&formula, &how, poles, 2, 5.0, &params);
  params.realisations = 500;
  measure_poles (&trials, &how, poles, 2, 5.0, &params);
  measure_poles (&again, &how, poles, 2, 5.0, &params);
  g_test_message ("noise term of the tilt: formula %.4f, 500 realisations %.4f deg",
                  formula.tilt_terms.noise, trials.tilt_terms.noise);
  tf_check_between ("tilt", trials.tilt_terms.noise / formula.tilt_terms.noise, 0.8, 1.2);
  tf_check_between ("separation", trials.separation_noise_deg / formula.separation_noise_deg, 0.75,
                    1.25);
  tf_check_between ("flux", trials.positive.flux_noise_mx / formula.positive.flux_noise_mx, 0.7,
                    1.3);
  tf_check_near ("equal seeds", again.tilt_terms.noise, trials.tilt_terms.noise, 0.0);
}

/* -- maps -------------------------------------------------------------------------------------- */

static void
test_map (void)
{
  TfGeometry g = { .projection = TF_PROJECTION_CEA,
                   .width = 720,
                   .height = 360,
                   .crpix = { 360.5, 180.5 },
                   .crval_deg = { 0.0, 0.0 },
                   .lonpole_deg = 0.0,
                   .radius_mm = TF_RADIUS_MM };
  BuilderFrame how = { .radial = TRUE, .fine = 6 };
  BuilderPole poles[2];
  TfMeasureParams params;
  g_autoptr (GError) error = NULL;
  g.cd[0][0] = 0.5;
  g.cd[1][1] = 2.0 / 360.0;
  g_assert_true (tf_geometry_make (&g));
  builder_bipole (poles, -BUILDER_L0 + 0.3, 20.0, 8.0, 8.0, 1e22, 1);
  poles[0].sigma = poles[1].sigma = 1.1;
  float *field = builder_field (&g, &how, poles, 2);
  g_autoptr (TfHeader) header = tf_header_new ();
  TfFrameInfo *info = tf_frame_info_read (header, g.width, g.height);
  g_clear_pointer (&info->refusal, tf_note_free);
  info->kind = TF_KIND_MAP;
  info->role = TF_ROLE_FIELD;
  info->field = TF_FIELD_RADIAL;
  info->geometry = g;
  info->rotation_number = 2142;
  g_autoptr (TfFrame) frame = tf_frame_new (info, field, NULL);
  g_free (field);
  g_autoptr (TfOutline) outline = tf_outline_new_cap (builder_time (), 0.3, 20.0, 9.5, 0);
  g_auto (TfMeasure) m = { 0 };
  tf_measure_params_init (&params);
  params.floor_gauss = 0.0;
  tf_measure_region (&m, frame, outline, &params, &error);
  g_assert_no_error (error);
  tf_check_near ("flux", m.positive.flux_mx / 1e22, 1.0, 0.01);
  tf_check_near ("separation", m.separation_deg,
                 tf_sphere_distance (poles[0].lon, poles[0].lat, poles[1].lon, poles[1].lat), 0.02);
  tf_check_near ("tilt", m.axis_tilt_deg, 8.0, 0.3);
  g_assert_cmpint (m.leading_polarity, ==, 1);
  /* Longitude 0 passes the central meridian as rotation 2143 begins; a day is 13.2 degrees. */
  tf_check_near ("time of its column", m.time.s,
                 tf_carrington_time (2143.0 - m.carrington_lon_deg / 360.0).s, 60.0);
  tf_check_nan ("mu", m.mu);
  tf_check_nan ("Stonyhurst longitude", m.stonyhurst_lon_deg);
  tf_check_nan ("distance from central meridian", m.cmd_deg);
  g_assert_false (has (&m, "near-limb"));
}

/* A correction of the frame's geometry is part of what a measure was made by. */
static void
test_method_with_geometry (void)
{
  TfMeasureParams params, back;
  TfCorrection none = tf_correction_none (), c = { 512.5, 511.25, 480, -12.5 }, read;
  tf_measure_params_init (&params);
  params.floor_gauss = 60;
  params.field_used = TF_FIELD_USED_OBSERVED; /* a name of two words */
  g_autofree char *plain = tf_measure_dup_method (&params, &none),
                  *by_hand = tf_measure_dup_method (&params, &c);
  g_assert_cmpstr (plain, !=, by_hand);
  g_assert_true (tf_measure_read_method (plain, &back, &read));
  g_assert_false (tf_correction_is_set (&read));
  g_assert_true (tf_measure_read_method (by_hand, &back, &read));
  g_assert_true (tf_correction_equal (&read, &c));
  tf_check_near ("floor", back.floor_gauss, 60, 0);
  g_assert_cmpint (back.field_used, ==, TF_FIELD_USED_OBSERVED);
  g_autofree char *even = tf_measure_dup_even_method (by_hand, 80, &back);
  g_assert_true (tf_measure_read_method (even, &back, &read));
  g_assert_true (tf_correction_equal (&read, &c));
  tf_check_near ("even floor", back.floor_gauss, 80, 0);
  g_assert_false (tf_measure_read_method ("flux-centroid/1 geometry=1,2", &back, &read));
}

void
add_flag_tests (void)
{
  g_test_add_func ("/region/caution/a-plain-bipole-has-none", test_plain);
  g_test_add_func ("/region/caution/a-quadrupole-is-told", test_quadrupole);
  g_test_add_func ("/region/caution/a-nest-is-told", test_nest);
  g_test_add_func ("/region/caution/overlapping-polarities-are-told", test_overlap);
  g_test_add_func ("/region/caution/a-decayed-field-without-a-leader-is-told", test_decayed);
  g_test_add_func ("/region/caution/one-sidedness-is-told", test_unipolar);
  g_test_add_func ("/region/caution/limb-and-equator-are-told", test_limb_and_equator);
  g_test_add_func ("/region/caution/missing-saturated-and-cut-pixels-are-told", test_pixels);
  g_test_add_func ("/region/caution/nothing-above-the-floor-is-told", test_nothing);
  g_test_add_func ("/region/option/field-and-scale-do-what-they-say", test_fields);
  g_test_add_func ("/region/option/a-pinned-pole-is-taken-as-it-is", test_pins);
  g_test_add_func ("/region/dipole/two-poles-give-the-closed-form", test_dipole);
  g_test_add_func ("/region/noise/realisations-agree-with-the-formula", test_realisations);
  g_test_add_func ("/region/map/a-region-across-longitude-zero-is-whole", test_map);
  g_test_add_func ("/region/method/with-a-geometry-corrected-by-hand", test_method_with_geometry);
}
