/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Figures of complexity: R of a known step, coarse against fine frames, when they are not given,
 * what stands with them. */

#include <string.h>

#include "inversion-builder.h"
#include "tf-constants.h"
#include "tf-json.h"

static const double SIGMA_MM = 3.0 / 2.3548200450309493;

/* -- R of a step ------------------------------------------------------------------------------- */

static double
step_west (const double unit[3], const double to_observer[3], gconstpointer data)
{
  double l = BUILDER_L0 * TF_DEG;
  double west = -sin (l) * unit[0] + cos (l) * unit[1];
  return west > 0.0 ? 500.0 : -500.0;
}

/* Node places of one grid inside the cap of @radius_mm in the equal-area plane. */
static gboolean
inside (double x, double y, double radius_mm)
{
  return hypot (x, y) < 2.0 * TF_RADIUS_MM * sin (0.5 * radius_mm / TF_RADIUS_MM);
}

/* R of B = 500 erf (x / (sqrt 2 sigma)) on the grid shifted by (sx, sy) steps, written down from
 * the definition: nodes within a step, in both coordinates, of a node above 150 G and of one below
 * -150 G; each spreads a Gaussian of unit area and FWHM 15 Mm over the flux. */
static double
plain_r (double sx, double sy, double step, double radius_mm)
{
  double sum = 0.0, s = 15.0 / 2.3548200450309493;
  int reach = (int)ceil (radius_mm / step) + 1;
  for (int j = -reach; j <= reach; j++)
    for (int i = -2; i <= 2; i++)
      {
        gboolean plus = FALSE, minus = FALSE;
        double x = (i + sx) * step, y = (j + sy) * step;
        for (int b = -1; b <= 1; b++)
          for (int a = -1; a <= 1; a++)
            {
              double field = 500.0 * erf ((x + a * step) / (sqrt (2.0) * SIGMA_MM));
              gboolean in = inside (x + a * step, y + b * step, radius_mm);
              plus |= in && field > 150.0;
              minus |= in && field < -150.0;
            }
        if (!plus || !minus || !inside (x, y, radius_mm))
          continue;
        for (int l = -reach; l <= reach; l++)
          for (int k = -reach; k <= reach; k++)
            {
              double px = (k + sx) * step, py = (l + sy) * step,
                     d2 = (px - x) * (px - x) + (py - y) * (py - y);
              if (inside (px, py, radius_mm))
                sum += fabs (500.0 * erf (px / (sqrt (2.0) * SIGMA_MM))) * step * step * 1e16
                       * exp (-0.5 * d2 / (s * s)) * step * step / (2.0 * TF_PI * s * s);
            }
      }
  return sum;
}

/* 500 G over a band of 30 Mm within the cap, less what the smoothing takes from the middle: sigma
 * sqrt (2 / pi) on each side. */
static double
band_flux (double radius_mm)
{
  double r = 2.0 * TF_RADIUS_MM * sin (0.5 * radius_mm / TF_RADIUS_MM), half = 15.0;
  double area = 2.0 * (half * sqrt (r * r - half * half) + r * r * asin (half / r));
  return 500.0 * 1e16 * (area - 2.0 * r * 2.0 * SIGMA_MM * sqrt (2.0 / TF_PI));
}

static void
test_r_of_a_step (void)
{
  const double radius_deg = 3.5, radius_mm = radius_deg * TF_DEG * TF_RADIUS_MM, step = 1.5;
  double expected = 0.25
                    * (plain_r (0.0, 0.0, step, radius_mm) + plain_r (0.5, 0.0, step, radius_mm)
                       + plain_r (0.0, 0.5, step, radius_mm) + plain_r (0.5, 0.5, step, radius_mm));
  const double scales[] = { 0.5, 2.0 };
  for (guint s = 0; s < G_N_ELEMENTS (scales); s++)
    {
      BuilderFrame how;
      TfComplexityParams params;
      g_auto (TfComplexity) c = { 0 };
      g_auto (TfComplexity) peak = { 0 };
      tf_complexity_params_init (&params);
      builder_init (&how, 0.0, 0.0, scales[s]);
      how.b0_deg = 0.0;
      how.radial = TRUE;
      how.half_deg = 7.0;
      how.fine = scales[s] < 1.0 ? 2 : 6;
      g_autoptr (TfFrame) frame = builder_frame_func (&how, step_west, NULL);
      g_autoptr (TfOutline) outline
          = tf_outline_new_cap (builder_time (), BUILDER_L0, 0.0, radius_deg, 720);
      builder_complexity (&c, frame, outline, &params);
      params.r_weight = 1;
      builder_complexity (&peak, frame, outline, &params);
      g_test_message (
          "%.1f arcsec: R %.4g, by plain sums %.4g Mx; length %.1f Mm, flux near %.4g Mx",
          scales[s], c.r_mx, expected, c.length_mm, c.flux_near_mx);
      tf_check_near ("R over the plain sums", c.r_mx / expected, 1.0, 0.02);
      tf_check_near ("log10 of R", c.r_log10, log10 (c.r_mx), 1e-12);
      double in_steps = 15.0 / 2.3548200450309493 / step;
      tf_check_near ("unit peak over unit area", peak.r_mx / c.r_mx,
                     2.0 * TF_PI * in_steps * in_steps, 0.01);
      tf_check_near ("flux near the line", c.flux_near_mx / band_flux (radius_mm), 1.0, 0.01);
      g_assert_cmpuint (c.pieces, ==, 2);
    }
}

/* -- coarse and fine frames -------------------------------------------------------------------- */

enum
{
  TANGLES = 8,
  MOST_POLES = 6
};

/* Tangled regions by a seed: poles of both signs within a few degrees, all at mu >= 0.7. */
static void
tangle (GRand *rand, double *lon, double *lat, BuilderPole poles[MOST_POLES], guint *n)
{
  *lon = g_rand_double_range (rand, -40.0, 40.0);
  *lat = g_rand_double_range (rand, -15.0, 15.0);
  *n = (guint)g_rand_int_range (rand, 3, MOST_POLES + 1);
  for (guint k = 0; k < *n; k++)
    poles[k] = (BuilderPole){ *lon + g_rand_double_range (rand, -2.5, 2.5),
                              *lat + g_rand_double_range (rand, -1.5, 1.5),
                              g_rand_double_range (rand, 0.45, 1.0),
                              (k % 2 ? -1 : 1) * g_rand_double_range (rand, 3e21, 1.5e22) };
}

static void
look_at (TfComplexity *c, double lon, double lat, const BuilderPole *poles, guint n,
         double scale_arcsec, guint32 seed)
{
  BuilderFrame how;
  TfComplexityParams params;
  tf_complexity_params_init (&params);
  builder_init (&how, lon, lat, scale_arcsec);
  how.fine = scale_arcsec < 1.0 ? 1 : 4;
  how.noise = 10.0;
  how.seed = seed;
  how.turn_deg = scale_arcsec < 1.0 ? 180.1 : 3.0;
  g_autoptr (TfFrame) frame = builder_frame (&how, poles, n);
  g_autoptr (TfOutline) outline = builder_cap (lon, lat, 5.0);
  builder_complexity (c, frame, outline, &params);
  g_assert_true (c->given);
}

static double
unlike (double a, double b)
{
  return fabs (a - b) / MAX (a, b);
}

static void
test_coarse_and_fine (void)
{
  g_autoptr (GRand) rand = g_rand_new_with_seed (7);
  double worst[6] = { 0.0 };
  static const char *const names[]
      = { "line length", "strong-gradient length", "gradient-weighted length", "steepest gradient",
          "R",           "flux near the line" };
  for (guint k = 0; k < TANGLES; k++)
    {
      BuilderPole poles[MOST_POLES];
      double lon, lat;
      guint n;
      g_auto (TfComplexity) fine = { 0 };
      g_auto (TfComplexity) coarse = { 0 };
      tangle (rand, &lon, &lat, poles, &n);
      look_at (&fine, lon, lat, poles, n, 0.5, 50 + k);
      look_at (&coarse, lon, lat, poles, n, 2.0, 150 + k);
      const double off[]
          = { unlike (fine.length_mm, coarse.length_mm),
              unlike (fine.strong_gradient_length_mm, coarse.strong_gradient_length_mm),
              unlike (fine.gradient_weighted_gauss, coarse.gradient_weighted_gauss),
              unlike (fine.max_gradient_gauss_mm, coarse.max_gradient_gauss_mm),
              unlike (fine.r_mx, coarse.r_mx),
              unlike (fine.flux_near_mx, coarse.flux_near_mx) };
      g_test_message ("mu %.2f: line %.0f and %.0f Mm, strong %.1f and %.1f Mm, weighted %.0f and "
                      "%.0f G, R %.3g and %.3g Mx",
                      fine.mu, fine.length_mm, coarse.length_mm, fine.strong_gradient_length_mm,
                      coarse.strong_gradient_length_mm, fine.gradient_weighted_gauss,
                      coarse.gradient_weighted_gauss, fine.r_mx, coarse.r_mx);
      g_assert_cmpuint (fine.pieces, ==, coarse.pieces);
      g_assert_true (fine.delta_candidate == coarse.delta_candidate);
      for (guint i = 0; i < G_N_ELEMENTS (worst); i++)
        {
          if (fine.strong_gradient_length_mm < 5.0 && (i == 1 || i == 5))
            continue; /* a stretch of a few Mm at the level itself */
          worst[i] = fmax (worst[i], off[i]);
          tf_check_between (names[i], off[i], 0.0, 0.15);
        }
    }
  for (guint i = 0; i < G_N_ELEMENTS (worst); i++)
    g_test_message ("0.5 against 2 arcsec: %s differs by at most %.1f %%", names[i],
                    100.0 * worst[i]);
}

/* -- given or not ------------------------------------------------------------------------------ */

static void
test_near_the_limb (void)
{
  BuilderFrame how;
  BuilderPole poles[2];
  TfComplexityParams params;
  g_auto (TfComplexity) c = { 0 };
  g_auto (TfComplexity) asked = { 0 };
  tf_complexity_params_init (&params);
  builder_init (&how, 55.0, 5.0, 2.0);
  builder_bipole (poles, 55.0, 5.0, 2.5, 5.0, 1e22, 1);
  g_autoptr (TfFrame) frame = builder_frame (&how, poles, 2);
  g_autoptr (TfOutline) outline = builder_cap (55.0, 5.0, 5.0);
  builder_complexity (&c, frame, outline, &params);
  g_assert_false (c.given);
  g_assert_cmpstr (tf_note_get_code (c.refusal), ==, "complexity-near-limb");
  tf_check_near ("mu of the reason", tf_note_get_number (c.refusal, 0), c.mu, 1e-9);
  tf_check_nan ("R", c.r_mx);
  params.anyway = TRUE;
  builder_complexity (&asked, frame, outline, &params);
  g_assert_true (asked.given);
  g_assert_nonnull (tf_notes_find (asked.notes, "complexity-limb-asked"));
  tf_check_between ("R when asked for", asked.r_mx, 1e19, 1e22);
}

static char *
json_of (const TfComplexity *c, const TfComplexityParams *params)
{
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  json_builder_begin_object (builder);
  tf_complexity_build_members (c, params, builder);
  json_builder_end_object (builder);
  return tf_json_dup_text (builder, FALSE);
}

static void
test_the_caution_stands_with_the_figures (void)
{
  BuilderFrame how;
  BuilderPole poles[2];
  TfComplexityParams params;
  g_auto (TfComplexity) c = { 0 };
  const char *caution = "Complexity figures are a description of the field, not a flare forecast.";
  tf_complexity_params_init (&params);
  builder_init (&how, 5.0, 5.0, 2.0);
  builder_bipole (poles, 5.0, 5.0, 2.5, 5.0, 1e22, 1);
  g_autoptr (TfFrame) frame = builder_frame (&how, poles, 2);
  g_autoptr (TfOutline) outline = builder_cap (5.0, 5.0, 5.0);
  builder_complexity (&c, frame, outline, &params);
  g_autofree char *json = json_of (&c, &params), *text = tf_complexity_dup_text (&c),
                  *nothing = json_of (NULL, &params);
  g_assert_nonnull (strstr (json, caution));
  g_assert_nonnull (strstr (json, "\"reference-fwhm\""));
  g_assert_nonnull (strstr (json, "\"points\""));
  g_assert_nonnull (strstr (text, caution));
  g_assert_nonnull (strstr (nothing, "\"complexity\""));
  g_auto (TfComplexity) copy = { 0 };
  tf_complexity_copy (&copy, &c);
  g_autofree char *again = json_of (&copy, &params);
  g_assert_cmpstr (json, ==, again);
}

/* -- delta candidate --------------------------------------------------------------------------- */

static void
check_delta (double separation, double sigma, double flux, gboolean expected, const char *reason)
{
  BuilderFrame how;
  BuilderPole poles[2];
  TfComplexityParams params;
  g_auto (TfComplexity) c = { 0 };
  tf_complexity_params_init (&params);
  builder_init (&how, 5.0, 5.0, 1.0);
  builder_bipole (poles, 5.0, 5.0, separation, 5.0, flux, 1);
  poles[0].sigma = poles[1].sigma = sigma;
  g_autoptr (TfFrame) frame = builder_frame (&how, poles, 2);
  g_autoptr (TfOutline) outline = builder_cap (5.0, 5.0, 5.0);
  builder_complexity (&c, frame, outline, &params);
  g_assert_true (c.delta_candidate == expected);
  g_assert_cmpstr (tf_note_get_code (c.delta_reason), ==, reason);
}

static void
test_delta (void)
{
  /* peak of a pole: flux / (2 pi sigma^2); 1 deg is 12.14 Mm */
  check_delta (1.5, 0.5, 1e22, TRUE, "delta-candidate");
  check_delta (5.5, 0.5, 1e22, FALSE, "delta-apart");
  check_delta (1.5, 0.5, 1e21, FALSE, "delta-no-cores");
}

/* -- invariants -------------------------------------------------------------------------------- */

static void
test_sign_and_turn (void)
{
  BuilderPole poles[2];
  TfComplexityParams params;
  double figure[3][4];
  tf_complexity_params_init (&params);
  for (guint k = 0; k < 3; k++)
    {
      BuilderFrame how;
      g_auto (TfComplexity) c = { 0 };
      builder_init (&how, -12.0, 14.0, 2.0);
      how.turn_deg = k == 2 ? 180.0 : 0.0;
      builder_bipole (poles, -12.0, 14.0, 2.2, 25.0, 1e22, k == 1 ? -1 : 1);
      g_autoptr (TfFrame) frame = builder_frame (&how, poles, 2);
      g_autoptr (TfOutline) outline = builder_cap (-12.0, 14.0, 5.0);
      builder_complexity (&c, frame, outline, &params);
      const double got[4] = { c.r_mx, c.length_mm, c.gradient_weighted_gauss, c.flux_near_mx };
      for (guint i = 0; i < 4; i++)
        figure[k][i] = got[i];
    }
  for (guint i = 0; i < 4; i++)
    {
      tf_check_near ("with the signs changed", figure[1][i] / figure[0][i], 1.0, 1e-6);
      tf_check_near ("turned by 180 deg", figure[2][i] / figure[0][i], 1.0, 0.02);
    }
}

typedef struct
{
  const TfFrame *frame;
  const TfOutline *outline;
  double figure[2];
} Share;

static gpointer
work_out (gpointer data)
{
  Share *share = data;
  TfComplexityParams params;
  TfMeasureParams measure;
  g_auto (TfComplexity) c = { 0 };
  tf_complexity_params_init (&params);
  tf_measure_params_init (&measure);
  measure.field_used = TF_FIELD_USED_POTENTIAL;
  tf_complexity_region (&c, share->frame, share->outline, &measure, &params);
  share->figure[0] = c.r_mx;
  share->figure[1] = c.gradient_weighted_gauss;
  return NULL;
}

/* FFTW's planner is shared by all threads. */
static void
test_threads (void)
{
  enum
  {
    THREADS = 6
  };
  BuilderFrame how;
  BuilderPole poles[2];
  GThread *threads[THREADS];
  Share shares[THREADS];
  builder_init (&how, 10.0, 5.0, 3.0);
  builder_bipole (poles, 10.0, 5.0, 2.5, 5.0, 1e22, 1);
  g_autoptr (TfFrame) frame = builder_frame (&how, poles, 2);
  g_autoptr (TfOutline) outline = builder_cap (10.0, 5.0, 5.0);
  for (guint k = 0; k < THREADS; k++)
    {
      shares[k] = (Share){ frame, outline, { 0.0 } };
      threads[k] = g_thread_new ("complexity", work_out, &shares[k]);
    }
  for (guint k = 0; k < THREADS; k++)
    g_thread_join (threads[k]);
  tf_check_between ("R", shares[0].figure[0], 1e18, 1e23);
  for (guint k = 1; k < THREADS; k++)
    for (guint i = 0; i < 2; i++)
      tf_check_near ("the same in every thread", shares[k].figure[i], shares[0].figure[i], 0.0);
}

static void
test_a_map_is_refused (void)
{
  TfGeometry g = { .projection = TF_PROJECTION_CEA,
                   .width = 360,
                   .height = 180,
                   .crpix = { 180.5, 90.5 },
                   .crval_deg = { 180.0, 0.0 },
                   .cd = { { 1.0, 0.0 }, { 0.0, 2.0 / 180.0 } },
                   .radius_mm = TF_RADIUS_MM };
  BuilderFrame how = { .radial = TRUE };
  TfComplexityParams params;
  g_auto (TfComplexity) c = { 0 };
  tf_complexity_params_init (&params);
  g_assert_true (tf_geometry_make (&g));
  g_autofree float *field = g_new0 (float, 360 * 180);
  g_autoptr (TfFrame) frame = builder_frame_of (&g, &how, field);
  g_autoptr (TfOutline) outline = tf_outline_new_cap (builder_time (), 100.0, 10.0, 5.0, 0);
  builder_complexity (&c, frame, outline, &params);
  g_assert_false (c.given);
  g_assert_cmpstr (tf_note_get_code (c.refusal), ==, "complexity-map");
}

void
add_complexity_tests (void)
{
  g_test_add_func ("/region/complexity/r-of-a-step-is-the-definitions-sum", test_r_of_a_step);
  g_test_add_func ("/region/complexity/coarse-and-fine-frames-agree", test_coarse_and_fine);
  g_test_add_func ("/region/complexity/near-the-limb-it-is-given-only-when-asked",
                   test_near_the_limb);
  g_test_add_func ("/region/complexity/the-caution-stands-with-the-figures",
                   test_the_caution_stands_with_the_figures);
  g_test_add_func ("/region/complexity/two-near-strong-cores-are-a-delta-candidate", test_delta);
  g_test_add_func ("/region/complexity/signs-and-turns-change-nothing", test_sign_and_turn);
  g_test_add_func ("/region/complexity/threads-agree-bit-for-bit", test_threads);
  g_test_add_func ("/region/complexity/a-map-is-refused", test_a_map_is_refused);
}
