/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Inversion lines of fields whose zero line is known: two flat half-planes, two poles of one size,
 * a ring. */

#include "inversion-builder.h"
#include "tf-constants.h"

static const double SIGMA_MM = 3.0 / 2.3548200450309493;

/* +field on the side of the great circle's pole, -field on the other. */
typedef struct
{
  double pole[3];
  double field;
} HalfPlanes;

static double
half_planes (const double unit[3], const double to_observer[3], gconstpointer data)
{
  const HalfPlanes *h = data;
  double side = unit[0] * h->pole[0] + unit[1] * h->pole[1] + unit[2] * h->pole[2];
  double mu = unit[0] * to_observer[0] + unit[1] * to_observer[1] + unit[2] * to_observer[2];
  return (side > 0.0 ? h->field : -h->field) * mu;
}

/* A great circle through (lon, lat) whose positive side lies at @angle_deg from west towards north.
 * */
static void
set_half_planes (HalfPlanes *h, double lon, double lat, double angle_deg, double field)
{
  double l = (BUILDER_L0 + lon) * TF_DEG, b = lat * TF_DEG, a = angle_deg * TF_DEG;
  const double west[3] = { -sin (l), cos (l), 0.0 },
               north[3] = { -sin (b) * cos (l), -sin (b) * sin (l), cos (b) };
  for (guint k = 0; k < 3; k++)
    h->pole[k] = cos (a) * west[k] + sin (a) * north[k];
  h->field = field;
}

static double
largest_departure (const TfInversionLine *line, const HalfPlanes *h)
{
  double worst = 0.0;
  for (guint i = 0; i < line->n; i++)
    {
      double unit[3];
      tf_sphere_unit (line->points[i].lon_deg, line->points[i].lat_deg, unit);
      double side = unit[0] * h->pole[0] + unit[1] * h->pole[1] + unit[2] * h->pole[2];
      worst = fmax (worst, fabs (asin (side)) * TF_RADIUS_MM);
    }
  return worst;
}

/* The step seen through the reference Gaussian has the gradient 2 B / (sqrt (2 pi) sigma). */
static void
check_half_planes (double scale_arcsec, double lon, double lat, double angle)
{
  BuilderFrame how;
  HalfPlanes h;
  TfComplexityParams params;
  g_auto (TfComplexity) c = { 0 };
  double field = 400.0, radius = 4.0;
  tf_complexity_params_init (&params);
  builder_init (&how, lon, lat, scale_arcsec);
  how.fine = scale_arcsec < 1.0 ? 2 : 6;
  how.half_deg = 7.5;
  how.turn_deg = 31.0;
  set_half_planes (&h, lon, lat, angle, field);
  g_autoptr (TfFrame) frame = builder_frame_func (&how, half_planes, &h);
  g_autoptr (TfOutline) outline = builder_cap (lon, lat, radius);
  builder_complexity (&c, frame, outline, &params);
  g_assert_true (c.given);
  g_assert_cmpuint (c.inversion.n, ==, 1);
  const TfInversionLine *line = &c.inversion.lines[0];
  double gradient = 2.0 * field / (sqrt (2.0 * TF_PI) * SIGMA_MM);
  g_test_message ("%.1f arcsec at (%.0f, %.0f), mu %.2f: length %.2f of %.2f Mm, off the circle by "
                  "%.3f Mm, gradient %.1f to %.1f of %.1f G/Mm",
                  scale_arcsec, lon, lat, c.mu, line->length_mm,
                  2.0 * radius * TF_DEG * TF_RADIUS_MM, largest_departure (line, &h),
                  line->mean_gradient_gauss_mm, line->max_gradient_gauss_mm, gradient);
  g_assert_false (line->closed);
  /* both ends are within one step of the outline */
  tf_check_between ("length", line->length_mm,
                    2.0 * radius * TF_DEG * TF_RADIUS_MM - 2.0 * params.step_mm,
                    2.0 * radius * TF_DEG * TF_RADIUS_MM + 1e-6);
  tf_check_near ("off the great circle, Mm", largest_departure (line, &h), 0.0, 0.15);
  tf_check_near ("mean gradient", line->mean_gradient_gauss_mm / gradient, 1.0, 0.03);
  tf_check_near ("steepest gradient", c.max_gradient_gauss_mm / gradient, 1.0, 0.06);
  tf_check_near ("all lines", c.length_mm, line->length_mm, 1e-9);
}

static void
test_half_planes (void)
{
  check_half_planes (0.5, 0.0, 0.0, 0.0);
  check_half_planes (2.0, 0.0, 0.0, 0.0);
  check_half_planes (0.5, 25.0, 12.0, 30.0);
  check_half_planes (2.0, 25.0, 12.0, 30.0);
  check_half_planes (2.0, -30.0, -20.0, 100.0);
}

/* Positive on the left: with the positive side in the west the line runs from south to north...
 * seen with west to the right that is to the south. */
static void
test_side (void)
{
  BuilderFrame how;
  HalfPlanes h;
  TfComplexityParams params;
  tf_complexity_params_init (&params);
  builder_init (&how, 5.0, 5.0, 2.0);
  for (int sign = -1; sign <= 1; sign += 2)
    {
      g_auto (TfComplexity) c = { 0 };
      set_half_planes (&h, 5.0, 5.0, 0.0, sign * 400.0);
      g_autoptr (TfFrame) frame = builder_frame_func (&how, half_planes, &h);
      g_autoptr (TfOutline) outline = builder_cap (5.0, 5.0, 4.0);
      builder_complexity (&c, frame, outline, &params);
      g_assert_cmpuint (c.inversion.n, ==, 1);
      const TfInversionLine *line = &c.inversion.lines[0];
      g_assert_true (sign * (line->points[0].lat_deg - line->points[line->n - 1].lat_deg) > 7.0);
    }
}

/* Two poles of one size and opposite sign cancel where they are equally far. */
static void
test_two_gaussians (void)
{
  const BuilderPole poles[2] = { { 12.0, 9.0, 1.0, 2e22 }, { 9.2, 10.3, 1.0, -2e22 } };
  const double scales[] = { 0.5, 2.0 };
  for (guint s = 0; s < G_N_ELEMENTS (scales); s++)
    {
      BuilderFrame how;
      TfComplexityParams params;
      g_auto (TfComplexity) c = { 0 };
      double worst = 0.0;
      tf_complexity_params_init (&params);
      builder_init (&how, 10.6, 9.6, scales[s]);
      g_autoptr (TfFrame) frame = builder_frame (&how, poles, 2);
      g_autoptr (TfOutline) outline = builder_cap (10.6, 9.6, 5.0);
      builder_complexity (&c, frame, outline, &params);
      g_assert_cmpuint (c.inversion.n, ==, 1);
      const TfInversionLine *line = &c.inversion.lines[0];
      for (guint i = 0; i < line->n; i++)
        {
          const TfInversionPoint *p = &line->points[i];
          double a = tf_sphere_distance (p->lon_deg, p->lat_deg, BUILDER_L0 + poles[0].lon,
                                         poles[0].lat);
          double b = tf_sphere_distance (p->lon_deg, p->lat_deg, BUILDER_L0 + poles[1].lon,
                                         poles[1].lat);
          worst = fmax (worst, fabs (a - b) * TF_DEG * TF_RADIUS_MM);
        }
      g_test_message ("%.1f arcsec: length %.1f Mm, difference of the distances at most %.3f Mm",
                      scales[s], line->length_mm, worst);
      tf_check_near ("difference of the distances to the poles, Mm", worst, 0.0, 0.15);
      tf_check_between ("length, Mm", line->length_mm, 30.0, 125.0);
    }
}

/* A pole inside a wide one of the other sign: B = A exp (-x / s^2) - A' exp (-x / S^2) is zero on a
 * circle, x = 1 - cos psi. */
static void
test_ring (void)
{
  const BuilderPole poles[2] = { { 3.0, -6.0, 0.9, 3e22 }, { 3.0, -6.0, 1.8, -4.5e22 } };
  BuilderFrame how;
  TfComplexityParams params;
  g_auto (TfComplexity) c = { 0 };
  tf_complexity_params_init (&params);
  params.fwhm_mm = 1.5;
  builder_init (&how, 3.0, -6.0, 0.5);
  how.fine = 1;
  g_autoptr (TfFrame) frame = builder_frame (&how, poles, 2);
  g_autoptr (TfOutline) outline = builder_cap (3.0, -6.0, 6.0);
  builder_complexity (&c, frame, outline, &params);
  double s2 = 0.81 * TF_DEG * TF_DEG, big2 = 3.24 * TF_DEG * TF_DEG;
  double psi = acos (1.0 - log ((3.0 / 4.5) * (big2 / s2)) / (1.0 / s2 - 1.0 / big2));
  g_assert_cmpuint (c.inversion.n, ==, 1);
  const TfInversionLine *line = &c.inversion.lines[0];
  g_assert_true (line->closed);
  tf_check_near ("length of the ring over the circle's",
                 line->length_mm / (2.0 * TF_PI * sin (psi) * TF_RADIUS_MM), 1.0, 0.01);
}

static void
test_outline_cuts (void)
{
  BuilderFrame how;
  HalfPlanes h;
  TfComplexityParams params;
  g_auto (TfComplexity) c = { 0 };
  g_autoptr (GError) error = NULL;
  const TfVertex hole[4] = { { BUILDER_L0 - 1.0, -1.0 },
                             { BUILDER_L0 + 1.0, -1.0 },
                             { BUILDER_L0 + 1.0, 1.0 },
                             { BUILDER_L0 - 1.0, 1.0 } };
  tf_complexity_params_init (&params);
  builder_init (&how, 0.0, 0.0, 2.0);
  set_half_planes (&h, 0.0, 0.0, 0.0, 400.0);
  g_autoptr (TfFrame) frame = builder_frame_func (&how, half_planes, &h);
  g_autoptr (TfOutline) cap = builder_cap (0.0, 0.0, 4.0);
  g_autoptr (TfOutline) outline = tf_outline_with_ring (cap, hole, 4, TRUE, &error);
  g_assert_no_error (error);
  builder_complexity (&c, frame, outline, &params);
  g_assert_cmpuint (c.inversion.n, ==, 2);
  tf_check_between ("length without the left-out area, Mm", c.length_mm,
                    6.0 * TF_DEG * TF_RADIUS_MM - 4.0 * params.step_mm,
                    6.0 * TF_DEG * TF_RADIUS_MM + 1e-6);
}

static void
test_weak_lines_are_not_drawn (void)
{
  BuilderFrame how;
  HalfPlanes h;
  TfComplexityParams params;
  g_auto (TfComplexity) c = { 0 };
  tf_complexity_params_init (&params);
  builder_init (&how, 0.0, 0.0, 2.0);
  how.noise = 10.0;
  set_half_planes (&h, 0.0, 0.0, 0.0, 140.0);
  g_autoptr (TfFrame) frame = builder_frame_func (&how, half_planes, &h);
  g_autoptr (TfOutline) outline = builder_cap (0.0, 0.0, 4.0);
  params.strong_gauss = 200.0;
  builder_complexity (&c, frame, outline, &params);
  g_assert_true (c.given);
  g_assert_cmpuint (c.inversion.n, ==, 0);
  tf_check_near ("length", c.length_mm, 0.0, 0.0);
  tf_check_nan ("steepest gradient", c.max_gradient_gauss_mm);
}

void
add_inversion_tests (void)
{
  g_test_add_func ("/region/inversion/"
                   "two-flat-half-planes-have-the-great-circles-length-and-the-gaussians-gradient",
                   test_half_planes);
  g_test_add_func ("/region/inversion/positive-lies-on-the-left", test_side);
  g_test_add_func ("/region/inversion/two-equal-poles-cancel-where-they-are-equally-far",
                   test_two_gaussians);
  g_test_add_func ("/region/inversion/a-pole-inside-another-has-a-closed-line", test_ring);
  g_test_add_func ("/region/inversion/a-left-out-area-cuts-the-line", test_outline_cuts);
  g_test_add_func ("/region/inversion/no-line-between-weak-fields", test_weak_lines_are_not_drawn);
}
