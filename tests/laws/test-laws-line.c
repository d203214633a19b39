/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-laws.h"

#include "tf-check.h"
#include "tf-circular.h"
#include "tf-line.h"

/* Pearson's points with York's weights (York 1966; York et al. 2004). Of the two ways in which texts
 * evaluate the errors, that of 2004, at the adjusted points. */
static const double pearson_x[] = { 0, 0.9, 1.8, 2.6, 3.3, 4.4, 5.2, 6.1, 6.5, 7.4 };
static const double pearson_y[] = { 5.9, 5.4, 4.4, 4.6, 3.5, 3.7, 2.8, 2.8, 2.4, 1.5 };
static const double york_wx[] = { 1000, 1000, 500, 800, 200, 80, 60, 20, 1.8, 1 };
static const double york_wy[] = { 1, 1.8, 4, 8, 20, 20, 70, 70, 100, 500 };

static void
test_york (void)
{
  TfLine line = tf_line_york (pearson_x, pearson_y, york_wx, york_wy, 10);
  tf_check_near ("slope", line.slope, -0.480533, 5.1e-7);
  tf_check_near ("intercept", line.intercept, 5.479910, 5.1e-7);
  tf_check_near ("slope's deviation", line.slope_sd, 0.057985, 5.1e-7);
  tf_check_near ("intercept's deviation", line.intercept_sd, 0.294971, 5.1e-7);
  tf_check_near ("sum of squares", line.chi2, 11.86635, 5.1e-6);
  tf_check_near ("a degree of freedom", line.chi2 / (10 - 2), 1.48329, 5.1e-6);
  double bad[10] = { 0 };
  tf_check_nan ("without weights", tf_line_york (pearson_x, pearson_y, bad, york_wy, 10).slope);
  tf_check_nan ("two points", tf_line_york (pearson_x, pearson_y, york_wx, york_wy, 2).slope);
}

static void
test_methods (void)
{
  static const double slopes[] = { -0.539577, -0.565889, -0.552577, -0.545561 };
  for (guint m = 0; tf_line_methods[m].name != NULL; m++)
    tf_check_near (tf_line_methods[m].name, tf_line_methods[m].fit (pearson_x, pearson_y, 10).slope,
                   slopes[m], 5.1e-7);
  tf_check_near ("orthogonal intercept", tf_line_deming (pearson_x, pearson_y, 10, 1.0).intercept,
                 5.784044, 5.1e-7);
  tf_check_near ("least squares intercept",
                 tf_line_methods[0].fit (pearson_x, pearson_y, 10).intercept, 5.761185, 5.1e-7);
  /* with nearly all of the error in y, or in x, Deming's line is one of the two regressions */
  tf_check_near ("all in y", tf_line_deming (pearson_x, pearson_y, 10, 1e9).slope, -0.539577, 1e-6);
  tf_check_near ("all in x", tf_line_deming (pearson_x, pearson_y, 10, 1e-9).slope, -0.565889,
                 1e-6);
}

/* Sen 1968, his example: the 93 % limits 26/7 and 35/8; tau 1, exact p = 2/7!. */
static void
test_sen (void)
{
  static const double x[] = { 1, 2, 3, 4, 10, 12, 18 }, y[] = { 9, 15, 19, 20, 45, 55, 78 };
  TfInterval limits = tf_sen_interval (x, y, 7, 0.93);
  double p = NAN;
  tf_check_near ("low", limits.low, 26.0 / 7.0, 1e-12);
  tf_check_near ("high", limits.high, 35.0 / 8.0, 1e-12);
  tf_check_near ("tau", tf_kendall (x, y, 7, &p), 1.0, 1e-12);
  tf_check_near ("p", p, 3.97e-4, 5.1e-7);
  tf_check_nan ("too few for limits", tf_sen_interval (x, y, 3, 0.99).low);
  tf_check_nan ("no spread", tf_kendall (x, (const double[7]){ 0 }, 7, &p));
  tf_check_nan ("no chance either", p);
}

/* Mardia & Jupp's nine angles (from memory: mean 51 deg, resultant .711) and Zar's eight. */
static void
test_directions (void)
{
  static const double nine[] = { 43, 45, 52, 61, 75, 88, 88, 279, 357 };
  static const double eight[] = { 45, 55, 81, 96, 110, 117, 132, 154 };
  TfCircular c = tf_circular (nine, 9, FALSE);
  tf_check_near ("mean", c.mean_deg, 51.05, 0.0051);
  tf_check_near ("resultant", c.resultant, 0.7110, 5.1e-5);
  tf_check_near ("its length", 9 * c.resultant, 6.3989, 5.1e-5);
  tf_check_near ("sum of cosines", 9 * c.resultant * cos (c.mean_deg * G_PI / 180), 4.0226, 5.1e-5);
  tf_check_near ("sum of sines", 9 * c.resultant * sin (c.mean_deg * G_PI / 180), 4.9764, 5.1e-5);
  tf_check_near ("circular variance", 1 - c.resultant, 0.2890, 5.1e-5);
  tf_check_near ("circular deviation", c.sd_deg, 47.32, 0.0051);
  tf_check_near ("angular deviation", c.deviation_deg, 43.56, 0.0051);
  tf_check_near ("concentration", c.concentration, 2.0833, 5.1e-5);
  tf_check_near ("Rayleigh's z", c.rayleigh_z, 4.550, 5.1e-4);
  tf_check_near ("its chance", c.rayleigh_p, 0.0070, 5.1e-5);
  c = tf_circular (eight, 8, FALSE);
  tf_check_near ("mean", c.mean_deg, 98.99, 0.0051);
  tf_check_near ("resultant", c.resultant, 0.8252, 5.1e-5);
  tf_check_near ("concentration", c.concentration, 3.223, 5.1e-4);
  tf_check_near ("Rayleigh's z", c.rayleigh_z, 5.448, 5.1e-4);
  tf_check_near ("its chance", c.rayleigh_p, 0.0019, 5.1e-5);
}

static void
test_axes (void)
{
  static const double axes[] = { 80, -80, NAN, 90, 86, -86 }, alike[] = { 30, 30, 30 },
                      cross[] = { 0, 90 };
  double directions[6];
  for (guint k = 0; k < 6; k++)
    directions[k] = 2.0 * axes[k];
  TfCircular c = tf_circular (axes, 6, TRUE), d = tf_circular (directions, 6, FALSE);
  g_assert_cmpuint (c.n, ==, 5);
  tf_check_near ("mean about the axis", fabs (c.mean_deg), 90.0, 1e-9);
  tf_check_near ("half of the doubled deviation", c.sd_deg, 0.5 * d.sd_deg, 1e-12);
  tf_check_near ("resultant of the doubled", c.resultant, d.resultant, 1e-12);
  TfCircular same = tf_circular (alike, 3, TRUE);
  tf_check_near ("alike", same.mean_deg, 30.0, 1e-12);
  g_assert_true (isinf (same.concentration));
  tf_check_nan ("crossed axes have no mean", tf_circular (cross, 2, TRUE).mean_deg);
  tf_check_nan ("nothing has none", tf_circular (NULL, 0, TRUE).resultant);
}

static void
test_circular_correlation (void)
{
  double first[40], turned[40], mirrored[40];
  for (guint k = 0; k < 40; k++)
    {
      first[k] = fmod (k * 37.0, 180.0) - 90.0;
      turned[k] = remainder (first[k] + 70.0, 180.0);
      mirrored[k] = remainder (20.0 - first[k], 180.0);
    }
  tf_check_near ("turned by a fixed angle", tf_circular_correlation (first, turned, 40, TRUE), 1.0,
                 1e-12);
  tf_check_near ("mirrored", tf_circular_correlation (first, mirrored, 40, TRUE), -1.0, 1e-12);
  tf_check_nan ("two pairs", tf_circular_correlation (first, turned, 2, TRUE));
  tf_check_nan ("no spread", tf_circular_correlation (first, (const double[40]){ 0 }, 40, TRUE));
}

/* Fisher's lady tasting tea, 3 of 4 right: 0.4857 (Fisher 1935); Agresti's Job-free 2 x 2 tables by
 * hand: C(4,k)C(4,4-k)/70. */
static void
test_fisher (void)
{
  tf_check_near ("tea", tf_fisher_exact (3, 1, 1, 3), 34.0 / 70.0, 1e-12);
  tf_check_near ("tea, all right", tf_fisher_exact (4, 0, 0, 4), 2.0 / 70.0, 1e-12);
  tf_check_near ("equal", tf_fisher_exact (2, 2, 2, 2), 1.0, 1e-12);
  tf_check_near ("an empty row", tf_fisher_exact (0, 0, 5, 7), 1.0, 1e-12);
  tf_check_near ("nothing", tf_fisher_exact (0, 0, 0, 0), 1.0, 1e-12);
  tf_check_near ("mirror", tf_fisher_exact (3, 97, 11, 89), tf_fisher_exact (89, 11, 97, 3), 1e-12);
  /* with a million rows it is the two-sided normal chance within a few parts in a hundred */
  double p = tf_fisher_exact (30000, 470000, 30500, 469500);
  double z = (30500.0 - 30000.0) / sqrt (2.0 * 30250.0 * (1.0 - 0.0605));
  tf_check_near ("a million rows", p, erfc (fabs (z) / sqrt (2.0)), 0.02 * p);
}

/* Holm 1979: by hand. */
static void
test_holm (void)
{
  static const double p[] = { 0.04, 0.01, NAN, 0.03, 0.5 };
  double adjusted[5];
  g_assert_cmpuint (tf_holm (p, 5, adjusted), ==, 4);
  tf_check_near ("second least but one", adjusted[0], 0.09, 1e-15);
  tf_check_near ("least", adjusted[1], 0.04, 1e-15);
  tf_check_nan ("no chance", adjusted[2]);
  tf_check_near ("second", adjusted[3], 0.09, 1e-15);
  tf_check_near ("greatest", adjusted[4], 0.5, 1e-15);
}

void
test_laws_add_line (void)
{
  g_test_add_func ("/laws/line/yorks-example", test_york);
  g_test_add_func ("/laws/line/each-method-on-pearsons-points", test_methods);
  g_test_add_func ("/laws/line/sens-example", test_sen);
  g_test_add_func ("/laws/circular/nine-and-eight-angles", test_directions);
  g_test_add_func ("/laws/circular/axes-are-doubled-and-halved", test_axes);
  g_test_add_func ("/laws/circular/correlation-of-turned-axes", test_circular_correlation);
  g_test_add_func ("/laws/compare/fishers-tea", test_fisher);
  g_test_add_func ("/laws/compare/holm-by-hand", test_holm);
}
