/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Analytic bipoles: the truth is the closed form of the builder's poles. */

#include <math.h>

#include "region-builder.h"
#include "tf-constants.h"

/* Places from central meridian, deg; at B0 = -4.2 deg all have mu >= 0.34, the first 13 mu >=
 * 0.5. */
static const double places[][2] = {
  { 0, 0 },    { 0, 15 },   { 0, -15 },  { 20, 20 },  { -20, -20 }, { 35, 10 },
  { -35, 25 }, { -30, -8 }, { 12, -33 }, { -10, 38 }, { 45, -20 },  { -45, 5 },
  { 28, 28 },  { 67, 8 },   { -67, -8 }, { 60, -25 }, { -62, 22 },  { 66, -14 },
  { -66, 2 },  { 63, 18 },  { -47, 40 }, { 5, -52 },
};
static const double turns[] = { 0.0, 180.0, 37.0, -90.0, 121.0, 178.93 };

/* Worst departures seen in one run of cases. */
typedef struct
{
  double flux, place, tilt;
} Worst;

static void
note_worst (Worst *worst, const TfMeasure *m, const BuilderPole poles[2], double tilt)
{
  for (guint k = 0; k < 2; k++)
    {
      const TfPole *pole = poles[k].flux > 0.0 ? &m->positive : &m->negative;
      double off = tf_sphere_distance (pole->carrington_lon_deg, pole->lat_deg,
                                       BUILDER_L0 + poles[k].lon, poles[k].lat);
      worst->flux = fmax (worst->flux, fabs (pole->flux_mx / fabs (poles[k].flux) - 1.0));
      worst->place = fmax (worst->place, isnan (off) ? INFINITY : off);
    }
  worst->tilt = fmax (worst->tilt,
                      isnan (m->axis_bearing_deg) ? INFINITY : fabs (m->axis_bearing_deg - tilt));
}

static void
true_tilt (const BuilderPole poles[2], double *bearing, double *tilt)
{
  tf_tilt (poles[0].lon, poles[0].lat, poles[1].lon, poles[1].lat, FALSE, bearing, tilt);
}

static void
check_scale (double scale_arcsec)
{
  TfMeasureParams params;
  Worst worst = { 0 };
  double least_mu = 1.0;
  tf_measure_params_init (&params);
  params.floor_gauss = 0.0;
  params.outline_term = FALSE;
  for (guint k = 0; k < G_N_ELEMENTS (places); k++)
    {
      BuilderFrame how;
      BuilderPole poles[2];
      double bearing, tilt, lon = places[k][0], lat = places[k][1];
      builder_init (&how, lon, lat, scale_arcsec);
      how.turn_deg = turns[k % G_N_ELEMENTS (turns)];
      how.half_deg = 7.0;
      how.fine = scale_arcsec < 1.0 ? 1 : scale_arcsec < 3.0 ? 4 : 10;
      builder_bipole (poles, lon, lat, 4.0 + 0.07 * k, 3.0 * ((int)(k * 7 % 13) - 6),
                      1e22 + 2e21 * k, k % 2 ? 1 : -1);
      true_tilt (poles, &bearing, &tilt);
      g_autoptr (TfFrame) frame = builder_frame (&how, poles, 2);
      g_autoptr (TfOutline) outline = builder_cap (lon, lat, 6.5);
      g_auto (TfMeasure) m = { 0 };
      g_autoptr (GError) error = NULL;
      tf_measure_region (&m, frame, outline, &params, &error);
      g_assert_no_error (error);
      note_worst (&worst, &m, poles, bearing);
      least_mu = fmin (least_mu, m.mu);
      g_assert_cmpint (m.leading_polarity, ==, k % 2 ? 1 : -1);
    }
  g_test_message ("%g arcsec, floor 0, %u places, mu down to %.2f: worst flux %.3f %%, pole %.4f "
                  "deg, tilt %.3f deg",
                  scale_arcsec, (guint)G_N_ELEMENTS (places), least_mu, 100.0 * worst.flux,
                  worst.place, worst.tilt);
  tf_check_between ("least mu", least_mu, 0.34, 0.42);
  tf_check_between ("flux", worst.flux, 0.0, 0.01);
  tf_check_between ("pole", worst.place, 0.0, 0.01);
  tf_check_between ("tilt", worst.tilt, 0.0, 0.2);
}

static void
test_half_arcsec (void)
{
  check_scale (0.5);
}

static void
test_two_arcsec (void)
{
  check_scale (2.0);
}

static void
test_five_arcsec (void)
{
  check_scale (5.0);
}

/* -- default floors: truth is the noise-free frame at 0.5 arcsec under the same floor --------- */

static void
measure_quietly (TfMeasure *m, const TfFrame *frame, const TfOutline *outline,
                 const TfMeasureParams *params)
{
  g_autoptr (GError) error = NULL;
  tf_measure_region (m, frame, outline, params, &error);
  g_assert_no_error (error);
}

static void
compare (Worst *worst, const TfMeasure *m, const TfMeasure *truth)
{
  for (guint k = 0; k < 2; k++)
    {
      const TfPole *a = k == 0 ? &m->positive : &m->negative,
                   *b = k == 0 ? &truth->positive : &truth->negative;
      double off = tf_sphere_distance (a->carrington_lon_deg, a->lat_deg, b->carrington_lon_deg,
                                       b->lat_deg);
      worst->flux = fmax (worst->flux, fabs (a->flux_mx / b->flux_mx - 1.0));
      worst->place = fmax (worst->place, isnan (off) ? INFINITY : off);
    }
  worst->tilt = fmax (worst->tilt, fabs (m->axis_bearing_deg - truth->axis_bearing_deg));
}

/* One place at one scale under one kind of floor, against the same floor in gauss on the fine
 * frame without noise. */
static void
check_place (guint k, double scale_arcsec, TfFloorKind kind, const TfFrame *fine,
             const BuilderPole poles[2], Worst *worst)
{
  BuilderFrame how;
  TfMeasureParams params;
  double lon = places[k][0], lat = places[k][1];
  tf_measure_params_init (&params);
  params.outline_term = FALSE;
  params.floor_kind = kind;
  builder_init (&how, lon, lat, scale_arcsec);
  how.turn_deg = turns[(k + 2) % G_N_ELEMENTS (turns)];
  how.fine = scale_arcsec < 1.0 ? 1 : scale_arcsec < 3.0 ? 3 : 8;
  how.noise = 10.0;
  how.seed = 100 + k;
  g_autoptr (TfFrame) frame = builder_frame (&how, poles, 2);
  g_autoptr (TfOutline) outline = builder_cap (lon, lat, 5.0);
  g_auto (TfMeasure) m = { 0 };
  g_auto (TfMeasure) truth = { 0 };
  measure_quietly (&m, frame, outline, &params);
  params.floor_gauss = m.floor_gauss;
  measure_quietly (&truth, fine, outline, &params);
  compare (worst, &m, &truth);
}

static void
test_default_floors (void)
{
  const double scales[] = { 0.5, 2.0, 5.0 };
  Worst worst[3] = { { 0 } };
  for (guint k = 0; k < 13; k++)
    {
      BuilderFrame how;
      BuilderPole poles[2];
      double lon = places[k][0], lat = places[k][1];
      builder_init (&how, lon, lat, 0.5);
      how.fine = 1;
      builder_bipole (poles, lon, lat, 4.5, 4.0 * ((int)(k * 7 % 13) - 6), 2e22, k % 2 ? 1 : -1);
      g_autoptr (TfFrame) fine = builder_frame (&how, poles, 2);
      for (guint s = 0; s < G_N_ELEMENTS (scales); s++)
        check_place (k, scales[s], k % 2 ? TF_FLOOR_EVEN : TF_FLOOR_LOCAL, fine, poles, &worst[s]);
    }
  for (guint s = 0; s < G_N_ELEMENTS (scales); s++)
    g_test_message ("%g arcsec, default floors, noise 10 G, mu >= 0.5: worst flux %.3f %%, pole "
                    "%.4f deg, tilt %.3f deg",
                    scales[s], 100.0 * worst[s].flux, worst[s].place, worst[s].tilt);
  for (guint s = 0; s < 2; s++)
    {
      tf_check_between ("flux", worst[s].flux, 0.0, 0.01);
      tf_check_between ("pole", worst[s].place, 0.0, 0.01);
      tf_check_between ("tilt", worst[s].tilt, 0.0, 0.2);
    }
}

/* -- even floor -------------------------------------------------------------------------------- */

static double
kept_share (double lon, TfFloorKind kind)
{
  BuilderFrame how;
  BuilderPole poles[2];
  TfMeasureParams params;
  tf_measure_params_init (&params);
  params.outline_term = FALSE;
  params.floor_kind = kind;
  params.floor_gauss = kind == TF_FLOOR_EVEN ? 60.0 : 30.0;
  builder_init (&how, lon, 0.0, 0.5);
  how.b0_deg = 0.0;
  how.fine = 1;
  /* peak 300 G: a weak pole, where a floor matters most */
  double s = 0.8 * TF_DEG, r = TF_RADIUS_MM * 1e8, flux = 300.0 * 2.0 * TF_PI * s * s * r * r;
  poles[0] = (BuilderPole){ lon + 2.2, 0.0, 0.8, flux };
  poles[1] = (BuilderPole){ lon - 2.2, 0.0, 0.8, -flux };
  g_autoptr (TfFrame) frame = builder_frame (&how, poles, 2);
  g_autoptr (TfOutline) outline = builder_cap (lon, 0.0, 6.0);
  g_auto (TfMeasure) m = { 0 };
  measure_quietly (&m, frame, outline, &params);
  return m.flux_unsigned_mx / (2.0 * flux);
}

static void
test_even_floor (void)
{
  const double lons[] = { 0.0, 45.0, 60.0, 70.0 };
  double first = kept_share (0.0, TF_FLOOR_EVEN);
  tf_check_between ("share of the flux above an even floor of 60 of 300 G", first, 0.78, 0.82);
  for (guint k = 1; k < G_N_ELEMENTS (lons); k++)
    tf_check_near ("share kept by an even floor", kept_share (lons[k], TF_FLOOR_EVEN) / first, 1.0,
                   0.02);
  tf_check_between ("a local floor loses flux towards the limb",
                    kept_share (70.0, TF_FLOOR_LOCAL) / kept_share (0.0, TF_FLOOR_LOCAL), 0.3, 0.9);
}

void
add_bipole_tests (void)
{
  g_test_add_func ("/region/bipole/half-arcsec-pixels-give-flux-place-and-tilt", test_half_arcsec);
  g_test_add_func ("/region/bipole/two-arcsec-pixels-give-flux-place-and-tilt", test_two_arcsec);
  g_test_add_func ("/region/bipole/five-arcsec-pixels-give-flux-place-and-tilt", test_five_arcsec);
  g_test_add_func ("/region/bipole/default-floors-agree-with-the-noise-free-frame",
                   test_default_floors);
  g_test_add_func ("/region/bipole/an-even-floor-keeps-the-same-share-to-the-limb",
                   test_even_floor);
}
