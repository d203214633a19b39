/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* What must not change when nothing on the Sun has changed, and what must change in one way
 * only. */

#include <math.h>

#include "region-builder.h"
#include "tf-constants.h"
#include "tf-hint.h"

static void
measure_with (TfMeasure *m, const TfFrame *frame, const TfOutline *outline,
              const TfMeasureParams *params)
{
  g_autoptr (GError) error = NULL;
  tf_measure_region (m, frame, outline, params, &error);
  g_assert_no_error (error);
}

static void
plain_params (TfMeasureParams *params)
{
  tf_measure_params_init (params);
  params->outline_term = FALSE;
  params->floor_gauss = 30.0;
}

static TfFrame *
ordinary (BuilderFrame *how, BuilderPole poles[2], TfGeometry *g, float **field)
{
  builder_init (how, 25.0, 18.0, 2.0);
  how->turn_deg = 31.0;
  builder_bipole (poles, 25.0, 18.0, 5.0, 9.0, 1e22, 1);
  *g = builder_geometry (how);
  *field = builder_field (g, how, poles, 2);
  builder_add_noise (*field, (gsize)g->width * g->height, 10.0, 5);
  return builder_frame_of (g, how, *field);
}

static void
check_same (const TfMeasure *a, const TfMeasure *b, double tolerance)
{
  tf_check_near ("positive flux", b->positive.flux_mx / a->positive.flux_mx, 1.0, tolerance);
  tf_check_near ("negative flux", b->negative.flux_mx / a->negative.flux_mx, 1.0, tolerance);
  tf_check_near ("bearing", b->axis_bearing_deg, a->axis_bearing_deg, 100.0 * tolerance);
  tf_check_near ("tilt", b->axis_tilt_deg, a->axis_tilt_deg, 100.0 * tolerance);
  tf_check_near ("separation", b->separation_deg, a->separation_deg, 100.0 * tolerance);
  tf_check_near ("latitude", b->lat_deg, a->lat_deg, 100.0 * tolerance);
  tf_check_angle ("longitude", b->carrington_lon_deg, a->carrington_lon_deg, 100.0 * tolerance);
  tf_check_near ("mu", b->mu, a->mu, tolerance);
  tf_check_near ("tilt's noise", b->tilt_terms.noise / a->tilt_terms.noise, 1.0, 2e-3);
  g_assert_cmpint (a->leading_polarity, ==, b->leading_polarity);
  g_assert_cmpuint (a->positive.pixels, ==, b->positive.pixels);
}

static void
test_turn (void)
{
  BuilderFrame how;
  BuilderPole poles[2];
  TfGeometry g, turned;
  TfMeasureParams params;
  g_autofree float *field = NULL;
  g_autoptr (TfFrame) frame = ordinary (&how, poles, &g, &field);
  gsize n = (gsize)g.width * g.height;
  g_autofree float *back = g_new (float, n);
  for (gsize k = 0; k < n; k++)
    back[k] = field[n - 1 - k];
  turned = g;
  for (guint k = 0; k < 2; k++)
    {
      turned.crpix[k] = (k == 0 ? g.width : g.height) + 1.0 - g.crpix[k];
      turned.cd[k][0] = -g.cd[k][0];
      turned.cd[k][1] = -g.cd[k][1];
    }
  g_assert_true (tf_geometry_make (&turned));
  g_autoptr (TfFrame) other = builder_frame_of (&turned, &how, back);
  g_autoptr (TfOutline) outline = builder_cap (25.0, 18.0, 5.0);
  g_auto (TfMeasure) a = { 0 };
  g_auto (TfMeasure) b = { 0 };
  plain_params (&params);
  measure_with (&a, frame, outline, &params);
  measure_with (&b, other, outline, &params);
  check_same (&a, &b, 1e-9);
}

static void
test_sign (void)
{
  BuilderFrame how;
  BuilderPole poles[2];
  TfGeometry g;
  TfMeasureParams params;
  g_autofree float *field = NULL;
  g_autoptr (TfFrame) frame = ordinary (&how, poles, &g, &field);
  for (gsize k = 0; k < (gsize)g.width * g.height; k++)
    field[k] = -field[k];
  g_autoptr (TfFrame) other = builder_frame_of (&g, &how, field);
  g_autoptr (TfOutline) outline = builder_cap (25.0, 18.0, 5.0);
  g_auto (TfMeasure) a = { 0 };
  g_auto (TfMeasure) b = { 0 };
  plain_params (&params);
  measure_with (&a, frame, outline, &params);
  measure_with (&b, other, outline, &params);
  tf_check_near ("flux", b.negative.flux_mx, a.positive.flux_mx, 0.0);
  tf_check_near ("place", b.negative.lat_deg, a.positive.lat_deg, 0.0);
  tf_check_near ("bearing", b.axis_bearing_deg, a.axis_bearing_deg, 0.0);
  tf_check_near ("imbalance", b.imbalance, -a.imbalance, 1e-15);
  tf_check_near ("dipole", b.axial_dipole_gauss, -a.axial_dipole_gauss, 1e-15);
  g_assert_cmpint (b.leading_polarity, ==, -a.leading_polarity);
  for (guint k = 0; k < 3; k++)
    g_assert_cmpint (b.witnesses[k], ==, -a.witnesses[k]);
}

static void
test_hemisphere (void)
{
  TfMeasure m[2] = { 0 };
  TfMeasureParams params;
  plain_params (&params);
  for (guint k = 0; k < 2; k++)
    {
      BuilderFrame how;
      BuilderPole poles[2];
      double sign = k == 0 ? 1.0 : -1.0;
      builder_init (&how, -20.0, 22.0 * sign, 2.0);
      how.b0_deg = 3.0 * sign;
      how.dy *= sign;
      builder_bipole (poles, -20.0, 22.0 * sign, 5.0, 12.0, 1e22, 1);
      g_autoptr (TfFrame) frame = builder_frame (&how, poles, 2);
      g_autoptr (TfOutline) outline = builder_cap (-20.0, 22.0 * sign, 5.0);
      measure_with (&m[k], frame, outline, &params);
    }
  tf_check_near ("tilt", m[1].axis_tilt_deg, m[0].axis_tilt_deg, 1e-4);
  tf_check_near ("bearing", m[1].axis_bearing_deg, -m[0].axis_bearing_deg, 1e-4);
  tf_check_near ("flux", m[1].flux_unsigned_mx / m[0].flux_unsigned_mx, 1.0, 1e-3);
  tf_check_near ("dipole", m[1].axial_dipole_gauss, -m[0].axial_dipole_gauss,
                 1e-3 * fabs (m[0].axial_dipole_gauss));
  tf_measure_clear (&m[0]);
  tf_measure_clear (&m[1]);
}

static void
test_cut_in_two (void)
{
  BuilderFrame how;
  BuilderPole poles[2];
  TfGeometry g;
  TfMeasureParams params;
  g_autoptr (GError) error = NULL;
  g_autofree float *field = NULL;
  g_autoptr (TfFrame) frame = ordinary (&how, poles, &g, &field);
  g_autoptr (TfOutline) whole = builder_cap (25.0, 18.0, 5.0);
  g_autoptr (TfOutline) one = NULL;
  g_autoptr (TfOutline) other = NULL;
  TfVertex from = { BUILDER_L0 + 25.6, 10.0 }, to = { BUILDER_L0 + 24.1, 26.0 };
  tf_outline_split (whole, from, to, &one, &other, &error);
  g_assert_no_error (error);
  g_auto (TfMeasure) m = { 0 };
  g_auto (TfMeasure) a = { 0 };
  g_auto (TfMeasure) b = { 0 };
  plain_params (&params);
  measure_with (&m, frame, whole, &params);
  measure_with (&a, frame, one, &params);
  measure_with (&b, frame, other, &params);
  tf_check_near ("positive flux", (a.positive.flux_mx + b.positive.flux_mx) / m.positive.flux_mx,
                 1.0, 1e-12);
  tf_check_near ("negative flux", (a.negative.flux_mx + b.negative.flux_mx) / m.negative.flux_mx,
                 1.0, 1e-12);
  g_assert_cmpuint (a.positive.pixels + b.positive.pixels, ==, m.positive.pixels);
}

/* The mask's fast test against the outline's own, pixel by pixel, with a hole and a left-out
 * area. */
static void
test_mask (void)
{
  BuilderFrame how;
  builder_init (&how, 58.0, -10.0, 2.0);
  TfGeometry g = builder_geometry (&how);
  g_autofree float *field = builder_field (&g, &how, NULL, 0);
  g_autoptr (TfFrame) frame = builder_frame_of (&g, &how, field);
  g_autoptr (TfOutline) cap = builder_cap (58.0, -10.0, 6.0);
  TfVertex hole[4], out[3];
  for (guint k = 0; k < 4; k++)
    hole[k] = (TfVertex){ BUILDER_L0 + 57.0 + 2.0 * cos (k * TF_PI / 2.0),
                          -9.0 + 2.0 * sin (k * TF_PI / 2.0) };
  for (guint k = 0; k < 3; k++)
    out[k] = (TfVertex){ BUILDER_L0 + 61.0 + 3.0 * cos (k * 2.0), -12.0 + 3.0 * sin (k * 2.0) };
  g_autoptr (TfOutline) with_hole = tf_outline_with_ring (cap, hole, 4, FALSE, NULL);
  g_autoptr (TfOutline) outline = tf_outline_with_ring (with_hole, out, 3, TRUE, NULL);
  g_autoptr (TfMask) mask = tf_mask_new (frame, outline, 0.17, 0);
  guint n = 0, next = 0;
  double (*unit)[3] = g_malloc_n (g.width, sizeof *unit);
  for (guint y = 0; y < g.height; y++)
    {
      tf_geometry_row_sun (&g, y + 1.0, 1.0, g.width, unit, NULL, NULL);
      for (guint x = 0; x < g.width; x++)
        {
          gboolean inside = isfinite (unit[x][0]) && tf_outline_contains (outline, unit[x]);
          const TfMaskPixel *pixel = next < tf_mask_get_n (mask) ? tf_mask_get (mask, next) : NULL;
          gboolean masked = pixel != NULL && pixel->x == x && pixel->y == y;
          n += inside;
          next += masked;
          g_assert_cmpint (inside, ==, masked);
        }
    }
  g_free (unit);
  g_assert_cmpuint (tf_mask_get_n (mask), ==, n);
  g_assert_cmpuint (n, >, 1000);
  tf_check_near ("nothing is cut", tf_mask_get_cut (mask), 0.0, 0.0);
}

/* The part of an outline that is behind the limb or off the frame is told; wholly hidden ones
 * give no pixels. */
static void
test_cut_share (void)
{
  BuilderFrame how;
  builder_init (&how, 70.0, 0.0, 2.0);
  how.b0_deg = 0.0;
  how.half_deg = 20.0;
  g_autoptr (TfFrame) frame = builder_frame (&how, NULL, 0);
  g_autoptr (TfOutline) half = builder_cap (80.0, 0.0, 5.0);
  g_autoptr (TfOutline) hidden = builder_cap (150.0, 0.0, 5.0);
  g_autoptr (TfMask) at_limb = tf_mask_new (frame, half, 0.17, 0);
  g_autoptr (TfMask) behind = tf_mask_new (frame, hidden, 0.17, 0);
  /* mu 0.17 lies 79.95 deg from the disk's centre for this observer: half the cap */
  tf_check_near ("cut share", tf_mask_get_cut (at_limb), 0.5, 0.03);
  g_assert_cmpuint (tf_mask_get_n (at_limb), >, 100);
  g_assert_cmpuint (tf_mask_get_n (behind), ==, 0);
  tf_check_near ("hidden", tf_mask_get_cut (behind), 1.0, 0.0);
  TfMeasureParams params;
  TfMeasure m;
  g_autoptr (GError) error = NULL;
  tf_measure_params_init (&params);
  g_assert_false (tf_measure_region (&m, frame, hidden, &params, &error));
  g_assert_error (error, TF_REGION_ERROR, TF_REGION_ERROR_EMPTY);
}

static void
check_hints_equal (GPtrArray *a, GPtrArray *b)
{
  g_assert_cmpuint (a->len, ==, b->len);
  for (guint k = 0; k < a->len; k++)
    {
      const TfHint *x = g_ptr_array_index (a, k), *y = g_ptr_array_index (b, k);
      g_assert_true (tf_outline_equal (x->outline, y->outline));
      g_assert_cmpmem (&x->measure.positive, sizeof (TfPole), &y->measure.positive,
                       sizeof (TfPole));
      g_assert_cmpmem (&x->measure.axis_bearing_deg, sizeof (double), &y->measure.axis_bearing_deg,
                       sizeof (double));
    }
}

static TfFrame *
two_regions (gboolean mirrored)
{
  BuilderFrame how;
  BuilderPole poles[4];
  builder_init (&how, 10.0, 0.0, 2.0);
  how.half_deg = 40.0;
  how.noise = 8.0;
  how.fine = 1;
  builder_bipole (poles, 25.0, 18.0, 5.0, 9.0, 1e22, 1);
  builder_bipole (poles + 2, -5.0, -16.0, 4.0, -7.0, 5e21, -1);
  TfGeometry g = builder_geometry (&how);
  g_autofree float *field = builder_field (&g, &how, poles, 4);
  builder_add_noise (field, (gsize)g.width * g.height, 8.0, 3);
  for (gsize k = 0; k < (gsize)g.width * g.height && mirrored; k++)
    field[k] = -field[k];
  return builder_frame_of (&g, &how, field);
}

static GPtrArray *
hints_of (const TfFrame *frame, TfWorkers *workers)
{
  TfHintParams params;
  TfMeasureParams measure;
  TfWork work = { NULL, workers, NULL };
  g_autoptr (GError) error = NULL;
  tf_hint_params_init (&params);
  tf_measure_params_init (&measure);
  GPtrArray *hints = tf_hints_find (frame, &params, &measure, &work, &error);
  g_assert_no_error (error);
  return hints;
}

static void
test_threads (void)
{
  g_autoptr (TfFrame) frame = two_regions (FALSE);
  g_autoptr (TfWorkers) four = tf_workers_new (4);
  g_autoptr (GPtrArray) one = hints_of (frame, NULL);
  g_autoptr (GPtrArray) many = hints_of (frame, four);
  g_assert_cmpuint (one->len, ==, 2);
  check_hints_equal (one, many);
}

static void
test_mirrored_hints (void)
{
  g_autoptr (TfFrame) frame = two_regions (FALSE);
  g_autoptr (TfFrame) turned = two_regions (TRUE);
  g_autoptr (GPtrArray) a = hints_of (frame, NULL);
  g_autoptr (GPtrArray) b = hints_of (turned, NULL);
  g_assert_cmpuint (a->len, ==, b->len);
  for (guint k = 0; k < a->len; k++)
    {
      const TfHint *x = g_ptr_array_index (a, k), *y = g_ptr_array_index (b, k);
      g_assert_cmpint (x->measure.leading_polarity, ==, -y->measure.leading_polarity);
      tf_check_near ("flux", y->measure.flux_unsigned_mx / x->measure.flux_unsigned_mx, 1.0, 0.02);
      tf_check_near ("bearing", y->measure.axis_bearing_deg, x->measure.axis_bearing_deg, 0.5);
    }
}

static void
test_quiet_disk (void)
{
  BuilderFrame how;
  builder_init (&how, 0.0, 0.0, 4.0);
  how.half_deg = 60.0;
  how.noise = 20.0;
  how.fine = 1;
  g_autoptr (TfFrame) frame = builder_frame (&how, NULL, 0);
  g_autoptr (GPtrArray) hints = hints_of (frame, NULL);
  g_assert_cmpuint (hints->len, ==, 0);
}

void
add_invariant_tests (void)
{
  g_test_add_func ("/region/invariant/a-frame-turned-by-180-degrees-gives-the-same-sun", test_turn);
  g_test_add_func ("/region/invariant/turned-signs-swap-the-poles", test_sign);
  g_test_add_func ("/region/invariant/swapped-hemispheres-keep-the-tilt", test_hemisphere);
  g_test_add_func ("/region/invariant/a-region-cut-in-two-keeps-its-flux", test_cut_in_two);
  g_test_add_func ("/region/mask/the-fast-inside-test-is-the-outline's", test_mask);
  g_test_add_func ("/region/mask/what-is-cut-is-told", test_cut_share);
  g_test_add_func ("/region/hint/one-and-four-threads-agree-bit-for-bit", test_threads);
  g_test_add_func ("/region/hint/turned-signs-give-the-same-hints", test_mirrored_hints);
  g_test_add_func ("/region/hint/a-quiet-disk-has-none", test_quiet_disk);
}
