/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* The potential estimate of the radial field against fields that are potential and known at every
 * place: magnetic charges buried under the surface. Their sum is zero for a bipole. B = sum of q (r
 * - r0) / |r - r0|^3, q in G Mm2. */

#include "inversion-builder.h"
#include "tf-constants.h"
#include "tf-potential.h"

enum
{
  MOST_CHARGES = 4
};

typedef struct
{
  guint n;
  double place[MOST_CHARGES][3]; /* Mm */
  double q[MOST_CHARGES];
} Charges;

static void
add_charge (Charges *c, double lon, double lat, double depth_mm, double peak_gauss)
{
  double unit[3];
  tf_sphere_unit (BUILDER_L0 + lon, lat, unit);
  for (guint k = 0; k < 3; k++)
    c->place[c->n][k] = (TF_RADIUS_MM - depth_mm) * unit[k];
  c->q[c->n++] = peak_gauss * depth_mm * depth_mm;
}

static void
field_at (const Charges *c, const double unit[3], double field[3])
{
  field[0] = field[1] = field[2] = 0.0;
  for (guint i = 0; i < c->n; i++)
    {
      double d[3], r2 = 0.0;
      for (guint k = 0; k < 3; k++)
        {
          d[k] = TF_RADIUS_MM * unit[k] - c->place[i][k];
          r2 += d[k] * d[k];
        }
      for (guint k = 0; k < 3; k++)
        field[k] += c->q[i] * d[k] / (r2 * sqrt (r2));
    }
}

static double
seen (const double unit[3], const double to_observer[3], gconstpointer data)
{
  double field[3];
  field_at (data, unit, field);
  return field[0] * to_observer[0] + field[1] * to_observer[1] + field[2] * to_observer[2];
}

static double
upright (const double unit[3], const double to_observer[3], gconstpointer data)
{
  double field[3];
  field_at (data, unit, field);
  return field[0] * unit[0] + field[1] * unit[1] + field[2] * unit[2];
}

static void
make_bipole (Charges *c, double lon, double lat)
{
  *c = (Charges){ 0 };
  add_charge (c, lon + 2.4, lat - 0.6, 16.0, 1500.0);
  add_charge (c, lon - 2.4, lat + 0.6, 20.0, -1500.0 * 16.0 * 16.0 / 400.0);
}

/* rms over the pixels whose radial field is at least 50 G of both estimates' departures, as shares
 * of the rms field. */
static void
compare (const TfFrame *frame, const TfOutline *outline, const TfPotential *potential,
         const Charges *charges, double *of_potential, double *of_los)
{
  double all = 0.0, sum[2] = { 0.0 };
  g_autoptr (TfMask) mask = tf_mask_new (frame, outline, 0.17, 0);
  for (guint k = 0; k < tf_mask_get_n (mask); k++)
    {
      const TfMaskPixel *p = tf_mask_get (mask, k);
      double truth = upright (p->unit, NULL, charges);
      if (fabs (truth) < 50.0)
        continue;
      double a = tf_potential_radial (potential, p->unit, p->field, p->mu) - truth,
             b = p->field / p->mu - truth;
      all += truth * truth;
      sum[0] += a * a;
      sum[1] += b * b;
    }
  *of_potential = sqrt (sum[0] / all);
  *of_los = sqrt (sum[1] / all);
}

static void
check_place (double lon, double lat, double scale_arcsec, double most)
{
  BuilderFrame how;
  Charges charges;
  double of_potential, of_los, x, y, mu;
  make_bipole (&charges, lon, lat);
  builder_init (&how, lon, lat, scale_arcsec);
  how.half_deg = 13.0;
  how.fine = 2;
  how.b0_deg = 0.0;
  g_autoptr (TfFrame) frame = builder_frame_func (&how, seen, &charges);
  g_autoptr (TfOutline) outline = builder_cap (lon, lat, 7.0);
  g_autoptr (TfPotential) potential = tf_potential_new (frame, outline, 1.0, 60.0);
  g_assert_nonnull (potential);
  compare (frame, outline, potential, &charges, &of_potential, &of_los);
  tf_geometry_sun_to_pixel (tf_frame_get_geometry (frame), BUILDER_L0 + lon, lat, &x, &y, &mu);
  g_test_message ("%.1f arcsec, mu %.2f: departure of the potential estimate %.3f, of Blos / mu "
                  "%.3f of the rms field; left %.4f",
                  scale_arcsec, mu, of_potential, of_los, tf_potential_get_left (potential));
  tf_check_between ("departure of the potential estimate", of_potential, 0.0, most);
  if (mu < 0.95)
    tf_check_between ("potential over Blos / mu", of_potential / of_los, 0.0, 0.05);
}

static void
test_bipoles (void)
{
  check_place (0.0, 2.0, 2.0, 0.01);
  check_place (26.0, 8.0, 2.0, 0.01);
  check_place (-40.0, 12.0, 2.0, 0.02);
  check_place (45.0, -5.0, 2.0, 0.02);
  check_place (56.0, 10.0, 2.0, 0.03);
  check_place (-65.0, 8.0, 2.0, 0.05);
  check_place (45.0, -5.0, 0.7, 0.02);
}

/* -- as the field of a measurement ------------------------------------------------------------- */

static void
measure_as (TfMeasure *m, const BuilderFrame *how, const Charges *charges, int field_used,
            gboolean product)
{
  TfMeasureParams params;
  BuilderFrame seen_how = *how;
  g_autoptr (GError) error = NULL;
  tf_measure_params_init (&params);
  params.field_used = field_used;
  params.floor_kind = TF_FLOOR_EVEN;
  params.floor_gauss = 60.0;
  seen_how.radial = product;
  g_autoptr (TfFrame) frame = builder_frame_func (&seen_how, product ? upright : seen, charges);
  g_autoptr (TfOutline) outline = builder_cap (how->lon, how->lat, 7.0);
  tf_measure_region (m, frame, outline, &params, &error);
  g_assert_no_error (error);
}

static double
pole_off (const TfMeasure *m, const TfMeasure *truth)
{
  return fmax (tf_sphere_distance (m->positive.carrington_lon_deg, m->positive.lat_deg,
                                   truth->positive.carrington_lon_deg, truth->positive.lat_deg),
               tf_sphere_distance (m->negative.carrington_lon_deg, m->negative.lat_deg,
                                   truth->negative.carrington_lon_deg, truth->negative.lat_deg));
}

/* The truth is the same measurement of the radial field itself. */
static void
test_measured (void)
{
  static const double places[][2]
      = { { 30.0, 8.0 }, { -45.0, 12.0 }, { 56.0, -10.0 }, { -64.0, 5.0 } };
  for (guint k = 0; k < G_N_ELEMENTS (places); k++)
    {
      BuilderFrame how;
      Charges charges;
      g_auto (TfMeasure) truth = { 0 };
      g_auto (TfMeasure) potential = { 0 };
      g_auto (TfMeasure) radial = { 0 };
      make_bipole (&charges, places[k][0], places[k][1]);
      builder_init (&how, places[k][0], places[k][1], 2.0);
      how.half_deg = 13.0;
      how.fine = 2;
      how.b0_deg = 0.0;
      measure_as (&truth, &how, &charges, TF_FIELD_USED_RADIAL, TRUE);
      measure_as (&potential, &how, &charges, TF_FIELD_USED_POTENTIAL, FALSE);
      measure_as (&radial, &how, &charges, TF_FIELD_USED_RADIAL, FALSE);
      g_test_message ("mu %.2f: unsigned flux %.3f (Blos / mu %.3f) of the truth, poles off by "
                      "%.3f (%.3f) deg, bearing by %.2f (%.2f) deg, noise "
                      "terms %.3f and %.3f deg",
                      truth.mu, potential.flux_unsigned_mx / truth.flux_unsigned_mx,
                      radial.flux_unsigned_mx / truth.flux_unsigned_mx,
                      pole_off (&potential, &truth), pole_off (&radial, &truth),
                      potential.axis_bearing_deg - truth.axis_bearing_deg,
                      radial.axis_bearing_deg - truth.axis_bearing_deg, potential.tilt_terms.noise,
                      radial.tilt_terms.noise);
      g_assert_cmpint (potential.field_used, ==, TF_FIELD_USED_POTENTIAL);
      g_assert_cmpint (potential.leading_polarity, ==, 1);
      tf_check_near ("unsigned flux over the truth",
                     potential.flux_unsigned_mx / truth.flux_unsigned_mx, 1.0, 0.03);
      tf_check_between ("poles off, deg", pole_off (&potential, &truth), 0.0, 0.05);
      tf_check_near ("bearing, deg", potential.axis_bearing_deg, truth.axis_bearing_deg, 0.3);
      tf_check_between ("poles off over those of Blos / mu",
                        pole_off (&potential, &truth) / pole_off (&radial, &truth), 0.0, 0.2);
    }
}

/* The figures of complexity as well: the false line on the limbward side is not there. */
static void
test_complexity_of_it (void)
{
  BuilderFrame how;
  Charges charges = { 0 };
  TfComplexityParams params;
  TfMeasureParams measure;
  tf_complexity_params_init (&params);
  tf_measure_params_init (&measure);
  params.anyway = TRUE;
  /* one spot: no polarity inversion near it at all */
  add_charge (&charges, 52.0, 8.0, 12.0, 2500.0);
  builder_init (&how, 52.0, 8.0, 2.0);
  how.half_deg = 13.0;
  g_autoptr (TfFrame) frame = builder_frame_func (&how, seen, &charges);
  g_autoptr (TfOutline) outline = builder_cap (52.0, 8.0, 5.0);
  g_auto (TfComplexity) radial = { 0 };
  g_auto (TfComplexity) potential = { 0 };
  tf_complexity_region (&radial, frame, outline, &measure, &params);
  measure.field_used = TF_FIELD_USED_POTENTIAL;
  tf_complexity_region (&potential, frame, outline, &measure, &params);
  g_test_message (
      "one spot at mu %.2f: inversion line %.0f Mm by Blos / mu, %.0f Mm by the potential estimate",
      radial.mu, radial.length_mm, potential.length_mm);
  tf_check_between ("false line by Blos / mu, Mm", radial.length_mm, 10.0, 200.0);
  tf_check_near ("false line by the potential estimate, Mm", potential.length_mm, 0.0, 0.0);
}

static void
test_not_on_radial_products (void)
{
  BuilderFrame how;
  Charges charges;
  make_bipole (&charges, 10.0, 5.0);
  builder_init (&how, 10.0, 5.0, 4.0);
  how.radial = TRUE;
  g_autoptr (TfFrame) frame = builder_frame_func (&how, upright, &charges);
  g_autoptr (TfOutline) outline = builder_cap (10.0, 5.0, 6.0);
  g_assert_null (tf_potential_new (frame, outline, 1.0, 60.0));
}

static double
nothing (const double unit[3], const double to_observer[3], gconstpointer data)
{
  return 0.0;
}

/* |Bz / Blos| is at most 1 / mu at every wave number, so noise grows no more than it does in Blos /
 * mu. */
static void
test_noise (void)
{
  BuilderFrame how;
  double sum = 0.0, plain = 0.0;
  builder_init (&how, 50.0, 5.0, 2.0);
  how.noise = 10.0;
  g_autoptr (TfFrame) frame = builder_frame_func (&how, nothing, NULL);
  g_autoptr (TfOutline) outline = builder_cap (50.0, 5.0, 5.0);
  g_autoptr (TfPotential) potential = tf_potential_new (frame, outline, 1.0, 40.0);
  g_autoptr (TfMask) mask = tf_mask_new (frame, outline, 0.17, 0);
  for (guint k = 0; k < tf_mask_get_n (mask); k++)
    {
      const TfMaskPixel *p = tf_mask_get (mask, k);
      double a = tf_potential_radial (potential, p->unit, p->field, p->mu);
      sum += a * a;
      plain += p->field / p->mu * p->field / p->mu;
    }
  g_test_message ("noise of the potential estimate over that of Blos / mu: %.3f",
                  sqrt (sum / plain));
  tf_check_between ("noise of the potential estimate over that of Blos / mu", sqrt (sum / plain),
                    0.4, 1.02);
}

/* Far from the box the estimate is Blos / mu. */
static void
test_outside_the_box (void)
{
  BuilderFrame how;
  Charges charges;
  double unit[3];
  make_bipole (&charges, 10.0, 5.0);
  builder_init (&how, 10.0, 5.0, 4.0);
  g_autoptr (TfFrame) frame = builder_frame_func (&how, seen, &charges);
  g_autoptr (TfOutline) outline = builder_cap (10.0, 5.0, 6.0);
  g_autoptr (TfPotential) potential = tf_potential_new (frame, outline, 1.0, 30.0);
  tf_sphere_unit (BUILDER_L0 + 60.0, 5.0, unit);
  tf_check_near ("far away", tf_potential_radial (potential, unit, 30.0, 0.5), 60.0, 1e-12);
  tf_sphere_unit (BUILDER_L0 + 200.0, 5.0, unit);
  tf_check_near ("on the far side", tf_potential_radial (potential, unit, 30.0, 0.5), 60.0, 1e-12);
}

static void
test_maps_and_products (void)
{
  TfGeometry g = { .projection = TF_PROJECTION_CEA,
                   .width = 360,
                   .height = 180,
                   .crpix = { 180.5, 90.5 },
                   .crval_deg = { 180.0, 0.0 },
                   .cd = { { 1.0, 0.0 }, { 0.0, 2.0 / 180.0 } },
                   .radius_mm = TF_RADIUS_MM };
  BuilderFrame how = { 0 };
  TfMeasureParams params;
  g_auto (TfMeasure) m = { 0 };
  g_auto (TfMeasure) product = { 0 };
  g_autoptr (GError) error = NULL;
  tf_measure_params_init (&params);
  tf_options_set (tf_measure_options, &params, "field", "potential", &error);
  g_assert_no_error (error);
  g_assert_cmpint (params.field_used, ==, TF_FIELD_USED_POTENTIAL);
  g_assert_true (tf_geometry_make (&g));
  g_autofree float *field = g_new0 (float, 360 * 180);
  g_autoptr (TfFrame) los = builder_frame_of (&g, &how, field);
  g_autoptr (TfOutline) outline = tf_outline_new_cap (builder_time (), 100.0, 10.0, 5.0, 0);
  g_assert_false (tf_measure_region (&m, los, outline, &params, &error));
  g_assert_error (error, TF_REGION_ERROR, TF_REGION_ERROR_KIND);
  g_clear_error (&error);
  how.radial = TRUE;
  g_autoptr (TfFrame) radial = builder_frame_of (&g, &how, field);
  g_assert_true (tf_measure_region (&product, radial, outline, &params, &error));
  g_assert_cmpint (product.field_used, ==, TF_FIELD_USED_RADIAL);
}

void
add_potential_tests (void)
{
  g_test_add_func ("/region/potential/buried-charges-are-met-better-than-by-blos-over-mu",
                   test_bipoles);
  g_test_add_func ("/region/potential/a-measurement-of-it-is-that-of-the-radial-field",
                   test_measured);
  g_test_add_func ("/region/potential/it-shows-no-false-line-beside-a-spot", test_complexity_of_it);
  g_test_add_func ("/region/potential/a-map-is-refused-and-a-radial-product-taken-as-it-is",
                   test_maps_and_products);
  g_test_add_func ("/region/potential/noise-grows-no-more-than-in-blos-over-mu", test_noise);
  g_test_add_func ("/region/potential/radial-products-have-none", test_not_on_radial_products);
  g_test_add_func ("/region/potential/outside-the-box-it-is-blos-over-mu", test_outside_the_box);
}
