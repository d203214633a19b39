/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-sun.h"

#include "tf-check.h"
#include "tf-constants.h"
#include "tf-geometry.h"

static TfObserver
observer (double au, double b0, double stonyhurst, double carrington)
{
  return (TfObserver){ au * TF_AU_M, b0, stonyhurst, carrington, TF_OBSERVER_HEADER };
}

/* Test vectors worked out with the sunpy library, 4.1.2, for a made-up observer (reference,
 * section 1.1). */
static const double places[5][6] = {
  /* theta_x, theta_y, then lon, lat with R = 695.7 Mm, lon, lat with R = 696 Mm */
  { 0.0, 0.0, 0.0, 4.979788, 0.0, 4.979788 },
  { 300.0, -250.0, 18.354260, -10.243009, 18.345612, -10.236131 },
  { -500.0, 400.0, -36.019972, 28.489203, -35.997879, 28.478990 },
  { 800.0, -300.0, 59.285138, -15.595100, 59.237655, -15.583324 },
  { -900.0, 100.0, -70.134961, 7.660545, -70.066882, 7.663485 },
};

static void
test_vectors (void)
{
  TfObserver o = observer (0.995050, 4.979788, 0.0, 0.0);
  for (int turn = -170; turn <= 180; turn += 35)
    for (int which = 0; which < 2; which++)
      {
        TfGeometry g;
        g_assert_true (tf_geometry_make_disk (&g, 4096, 4096, 2040.3, 2051.2, 0.504, turn, &o,
                                              which ? 696.0 : 695.7));
        tf_check_angle ("north angle", tf_geometry_north_angle (&g), turn, 1e-9);
        for (int k = 0; k < 5; k++)
          {
            double x, y, tx, ty;
            TfPlace p;
            g_assert_true (
                tf_geometry_projective_to_pixel (&g, places[k][0], places[k][1], &x, &y));
            tf_geometry_pixel_to_projective (&g, x, y, &tx, &ty);
            tf_check_near ("theta x", tx, places[k][0], 1e-8);
            tf_check_near ("theta y", ty, places[k][1], 1e-8);
            g_assert_true (tf_geometry_pixel_to_sun (&g, x, y, &p));
            tf_check_near ("longitude", p.stonyhurst_lon_deg, places[k][2 + 2 * which], 1e-6);
            tf_check_near ("latitude", p.lat_deg, places[k][3 + 2 * which], 1e-6);
            tf_check_near ("CMD", p.cmd_deg, p.stonyhurst_lon_deg, 1e-12);
          }
      }
}

/* Reference, section 1.2: exact mu at 1 au, 0.49650 at 60 deg and 0.33790 at 70 deg from the
 * centre. */
static void
test_mu (void)
{
  TfObserver o = observer (1.0, 0.0, 0.0, 100.0);
  const double degrees[] = { 0.0, 45.0, 60.0, 70.0 },
               expected[] = { 1.0, 0.7048, 0.49650, 0.33790 };
  TfGeometry g;
  g_assert_true (tf_geometry_make_disk (&g, 1024, 1024, 512.5, 512.5, 2.0, 30.0, &o, TF_RADIUS_MM));
  for (int k = 0; k < 4; k++)
    for (int side = -1; side < 2; side += 2)
      {
        double x, y, mu;
        TfPlace p;
        g_assert_true (tf_geometry_sun_to_pixel (&g, 100.0 + side * degrees[k], 0.0, &x, &y, &mu));
        tf_check_near ("mu from the place", mu, expected[k], 6e-5);
        tf_check_near ("mu from the pixel", tf_geometry_mu (&g, x, y), mu, 1e-12);
        g_assert_true (tf_geometry_pixel_to_sun (&g, x, y, &p));
        tf_check_near ("mu of the place", p.mu, mu, 1e-12);
      }
}

/* Reference, section 1.2: 0.5 arcsec pixels at the centre are 0.3609 Mm wide, 1.98 arcsec 1.429 Mm.
 */
static void
test_area (void)
{
  TfObserver o = observer (1.0, 0.0, 0.0, 0.0);
  TfGeometry g;
  g_assert_true (
      tf_geometry_make_disk (&g, 4096, 4096, 2048.5, 2048.5, 0.5, 0.0, &o, TF_RADIUS_MM));
  tf_check_near ("0.5 arcsec at the centre", sqrt (tf_geometry_area (&g, 2048.5, 2048.5)), 0.3609,
                 1e-4);
  g_assert_true (
      tf_geometry_make_disk (&g, 1024, 1024, 512.5, 512.5, 1.98, 77.0, &o, TF_RADIUS_MM));
  tf_check_near ("1.98 arcsec at the centre", sqrt (tf_geometry_area (&g, 512.5, 512.5)), 1.429,
                 1e-3);
  /* All pixels together are the cap that is seen, 2 pi R^2 (1 - R/D), but for the ragged limb. */
  double sum = 0.0,
         seen = 2.0 * TF_PI * TF_RADIUS_MM * TF_RADIUS_MM * (1.0 - TF_RADIUS_MM / (TF_AU_M * 1e-6));
  double inner = 0.0, mu[1024], area[1024];
  for (int y = 1; y <= 1024; y++)
    {
      tf_geometry_row_sun (&g, y, 1.0, 1024, NULL, mu, area);
      for (int k = 0; k < 1024; k++)
        if (mu[k] >= 0.3)
          inner += area[k];
        else if (mu[k] > 0.0)
          sum += area[k];
    }
  tf_check_near ("area of the disk", (sum + inner) / seen, 1.0, 0.03);
  /* mu >= 0.3 is a cap of psi = acos (mu) - asin ((R/D) sin acos mu), Thompson 2006. */
  double psi = acos (0.3) - asin (TF_RADIUS_MM / (TF_AU_M * 1e-6) * sqrt (1.0 - 0.09));
  tf_check_near ("area within mu = 0.3",
                 inner / (2.0 * TF_PI * TF_RADIUS_MM * TF_RADIUS_MM * (1.0 - cos (psi))), 1.0,
                 2e-3);
}

static void
check_round_trip (const TfGeometry *g, double lon, double lat)
{
  double x, y, mu;
  TfPlace p;
  if (!tf_geometry_sun_to_pixel (g, lon, lat, &x, &y, &mu))
    {
      tf_check_nan ("x behind the limb", x);
      tf_check_nan ("y behind the limb", y);
      tf_check_nan ("mu behind the limb", mu);
      return;
    }
  if (mu < 0.02)
    return;
  g_assert_true (tf_geometry_pixel_to_sun (g, x, y, &p));
  tf_check_near ("distance between place and round trip",
                 tf_sphere_distance (lon, lat, p.carrington_lon_deg, p.lat_deg), 0.0, 1e-8);
  tf_check_between ("Carrington longitude", p.carrington_lon_deg, 0.0, 360.0);
  tf_check_between ("Stonyhurst longitude", p.stonyhurst_lon_deg, -180.0, 180.0);
  tf_check_angle ("Stonyhurst of Carrington", tf_geometry_stonyhurst_of (g, p.carrington_lon_deg),
                  p.stonyhurst_lon_deg, 1e-9);
  tf_check_angle ("CMD", p.cmd_deg, p.carrington_lon_deg - tf_geometry_central_carrington (g),
                  1e-9);
}

/* Near and far observers, off the Earth's line, seam and poles in view, every turn. */
static void
test_round_trips (void)
{
  for (int turn = 0; turn < 360; turn += 20)
    for (int k = 0; k < 4; k++)
      {
        TfObserver o
            = observer (0.2 + 0.3 * k, -7.0 + 20.0 * k, -179.0 + 90.0 * k, 359.5 - 45.0 * k);
        TfGeometry g;
        g_assert_true (
            tf_geometry_make_disk (&g, 512, 400, -300.0 * k, 200.0 + turn, 5.0, turn, &o, 696.0));
        for (double lat = -90.0; lat <= 90.0; lat += 15.0)
          for (double lon = -180.0; lon < 360.0; lon += 24.0)
            check_round_trip (&g, lon, lat);
      }
}

static void
test_limb (void)
{
  TfObserver o = observer (0.9889, 6.5, 0.0, 12.0);
  TfGeometry g;
  double cx, cy;
  g_assert_true (tf_geometry_make_disk (&g, 1024, 1024, 500.0, 530.0, 2.0, 15.0, &o, 696.0));
  /* Reference, section 1.1: asin (696e6 / 147904704539.75 m) = 970.6306 arcsec, as a header has it.
   */
  TfObserver header = observer (147904704539.75 / TF_AU_M, 0.0, 0.0, 0.0);
  TfGeometry h;
  g_assert_true (tf_geometry_make_disk (&h, 64, 64, 32.5, 32.5, 30.0, 0.0, &header, 696.0));
  tf_check_near ("angular radius", tf_geometry_radius_arcsec (&h), 970.6306, 1e-4);
  g_assert_true (tf_geometry_disk_centre (&g, &cx, &cy));
  tf_check_near ("centre x", cx, 500.0, 1e-9);
  tf_check_near ("centre y", cy, 530.0, 1e-9);
  double radius = tf_geometry_disk_radius (&g);
  tf_check_near ("radius, pixels", radius,
                 tan (tf_geometry_radius_arcsec (&g) * TF_ARCSEC) / (2.0 * TF_ARCSEC), 1e-6);
  for (double angle = 0.0; angle < 6.28; angle += 0.1)
    {
      double c = cos (angle), s = sin (angle), unit[1][3], mu, area;
      float short_mu;
      TfPlace p;
      g_assert_true (
          tf_geometry_pixel_to_sun (&g, cx + (radius - 1e-3) * c, cy + (radius - 1e-3) * s, &p));
      tf_check_between ("mu just inside", p.mu, 0.0, 0.01);
      double x = cx + (radius + 1e-3) * c, y = cy + (radius + 1e-3) * s;
      g_assert_false (tf_geometry_pixel_to_sun (&g, x, y, &p));
      tf_check_nan ("longitude off the disk", p.carrington_lon_deg);
      tf_check_nan ("Stonyhurst longitude off the disk", p.stonyhurst_lon_deg);
      tf_check_nan ("latitude off the disk", p.lat_deg);
      tf_check_nan ("CMD off the disk", p.cmd_deg);
      tf_check_nan ("mu off the disk", p.mu);
      tf_check_nan ("mu off the disk", tf_geometry_mu (&g, x, y));
      tf_check_nan ("area off the disk", tf_geometry_area (&g, x, y));
      tf_geometry_row_sun (&g, cy + 3.0 * radius * s, cx + 3.0 * radius * c, 1, unit, &mu, &area);
      tf_geometry_row_mu (&g, cy + 3.0 * radius * s, cx + 3.0 * radius * c, 1, &short_mu);
      tf_check_nan ("row: x off the disk", unit[0][0]);
      tf_check_nan ("row: z off the disk", unit[0][2]);
      tf_check_nan ("row: mu off the disk", mu);
      tf_check_nan ("row: area off the disk", area);
      tf_check_nan ("row: short mu off the disk", short_mu);
    }
}

/* -- rows ------------------------------------------------------------------------------------ */

static void
check_row (const TfGeometry *g, double y, double x0, guint n)
{
  g_autofree double (*unit)[3] = g_malloc_n (n, sizeof *unit);
  g_autofree double *mu = g_new (double, n), *area = g_new (double, n);
  g_autofree float *short_mu = g_new (float, n);
  tf_geometry_row_sun (g, y, x0, n, unit, mu, area);
  tf_geometry_row_mu (g, y, x0, n, short_mu);
  for (guint k = 0; k < n; k++)
    {
      TfPlace p;
      double expected[3];
      if (!tf_geometry_pixel_to_sun (g, x0 + k, y, &p))
        {
          /* A pixel on the very limb may fall on either side by rounding. */
          g_assert_true (isnan (mu[k]) || mu[k] < 1e-6);
          g_assert_true (isnan (short_mu[k]) || short_mu[k] < 2e-3f);
          continue;
        }
      tf_sphere_unit (p.carrington_lon_deg, p.lat_deg, expected);
      for (int j = 0; j < 3; j++)
        tf_check_near ("unit vector", unit[k][j], expected[j],
                       p.mu > 0.01 || isnan (p.mu) ? 1e-10 : 1e-6);
      tf_check_near ("area", area[k] / tf_geometry_area (g, x0 + k, y), 1.0, 1e-8);
      if (tf_geometry_is_map (g))
        {
          tf_check_nan ("mu on a map", mu[k]);
          tf_check_nan ("short mu on a map", short_mu[k]);
          continue;
        }
      tf_check_near ("mu", mu[k], p.mu, 1e-10 / p.mu);
      tf_check_near ("short mu", short_mu[k], p.mu, 5e-7 / MAX (p.mu, 1e-3));
    }
}

/* A header with everything that a TAN header can have: unequal scales, skew, CRVAL and LONPOLE. */
static TfGeometry
awkward (int seed)
{
  g_autoptr (GRand) rand = g_rand_new_with_seed ((guint32)seed);
  double turn = g_rand_double_range (rand, -TF_PI, TF_PI), s1 = 2.0 / 3600.0, s2 = 2.3 / 3600.0;
  TfGeometry g = {
    .projection = TF_PROJECTION_TAN,
    .width = 1000,
    .height = 800,
    .crpix
    = { g_rand_double_range (rand, -2000.0, 3000.0), g_rand_double_range (rand, -2000.0, 3000.0) },
    .crval_deg = { g_rand_double_range (rand, -0.4, 0.4), g_rand_double_range (rand, -0.4, 0.4) },
    .cd = { { s1 * cos (turn), -s2 * sin (turn) }, { s1 * sin (turn + 0.01), s2 * cos (turn) } },
    .lonpole_deg = g_rand_boolean (rand) ? 180.0 : g_rand_double_range (rand, -180.0, 180.0),
    .observer
    = observer (g_rand_double_range (rand, 0.2, 1.1), g_rand_double_range (rand, -40.0, 40.0),
                g_rand_double_range (rand, -180.0, 180.0), g_rand_double_range (rand, 0.0, 360.0)),
    .radius_mm = 695.7,
  };
  g_assert_true (tf_geometry_make (&g));
  return g;
}

static void
test_rows (void)
{
  for (int seed = 1; seed <= 40; seed++)
    {
      TfGeometry g = awkward (seed);
      double cx, cy;
      g_assert_true (tf_geometry_disk_centre (&g, &cx, &cy));
      double r = tf_geometry_disk_radius (&g);
      for (int k = -4; k <= 4; k++)
        check_row (&g, rint (cy + 0.24 * k * r), rint (cx - 1.1 * r), (guint)(2.2 * r));
    }
}

static void
test_long_row (void)
{
  TfObserver o = observer (0.2, 1.0, 5.0, 200.0);
  TfGeometry g;
  g_assert_true (tf_geometry_make_disk (&g, 12000, 4, 5900.0, -100.0, 0.9, 179.9, &o, 695.7));
  check_row (&g, 2.0, 1.0, 12000);
}

/* -- maps ------------------------------------------------------------------------------------ */

static TfGeometry
map (TfProjection projection, double first_lon, double step)
{
  TfGeometry g = {
    .projection = projection,
    .width = 720,
    .height = 360,
    .crpix = { 1.0, 180.5 },
    .crval_deg = { first_lon, 0.0 },
    .cd = { { step, 0.0 }, { 0.0, projection == TF_PROJECTION_CEA ? 2.0 / 360.0 : 0.5 } },
    .lonpole_deg = 0.0,
    .radius_mm = 696.0,
  };
  g_assert_true (tf_geometry_make (&g));
  return g;
}

static void
check_map (const TfGeometry *g)
{
  double sum = 0.0;
  g_assert_true (tf_geometry_is_map (g));
  for (int y = 1; y <= 360; y++)
    {
      double area = tf_geometry_area (g, 17.0, y);
      tf_check_between ("area", area, 0.0, 1e3);
      sum += 720.0 * area;
    }
  tf_check_near ("a whole map is the whole Sun", sum / (4.0 * TF_PI * 696.0 * 696.0), 1.0, 1e-12);
  for (double lat = -89.0; lat < 90.0; lat += 7.0)
    for (double lon = -360.0; lon < 720.0; lon += 31.3)
      {
        double x, y, mu;
        TfPlace p;
        g_assert_true (tf_geometry_sun_to_pixel (g, lon, lat, &x, &y, &mu));
        tf_check_nan ("mu on a map", mu);
        tf_check_between ("column within the map", x, 0.5, 720.5);
        g_assert_true (tf_geometry_pixel_to_sun (g, x, y, &p));
        tf_check_angle ("longitude", p.carrington_lon_deg, lon, 1e-9);
        tf_check_near ("latitude", p.lat_deg, lat, 1e-9);
        tf_check_nan ("Stonyhurst longitude on a map", p.stonyhurst_lon_deg);
        tf_check_nan ("CMD on a map", p.cmd_deg);
      }
  check_row (g, 77.0, 1.0, 720);
  check_row (g, 360.0, -20.0, 800);
}

static void
test_maps (void)
{
  const TfProjection kinds[] = { TF_PROJECTION_CEA, TF_PROJECTION_CAR };
  for (int k = 0; k < 2; k++)
    {
      TfGeometry g = map (kinds[k], 0.25, 0.5);
      check_map (&g);
      g = map (kinds[k], 359.75, -0.5); /* longitude runs to the left */
      check_map (&g);
      g = map (kinds[k], 123.0, 0.5); /* the seam lies inside */
      check_map (&g);
    }
}

static void
test_map_edges (void)
{
  TfGeometry g = map (TF_PROJECTION_CEA, 0.5, 0.5);
  TfPlace p;
  double x, y;
  g_assert_false (tf_geometry_pixel_to_sun (&g, 0.4, 100.0, &p));
  tf_check_nan ("longitude off the map", p.carrington_lon_deg);
  g_assert_false (tf_geometry_pixel_to_sun (&g, 100.0, 360.6, &p));
  tf_check_nan ("area off the map", tf_geometry_area (&g, 100.0, 360.6));
  tf_check_nan ("mu", tf_geometry_mu (&g, 100.0, 100.0));
  tf_check_nan ("angular radius", tf_geometry_radius_arcsec (&g));
  tf_check_nan ("scale", tf_geometry_scale_arcsec (&g));
  tf_check_nan ("disk radius", tf_geometry_disk_radius (&g));
  tf_check_nan ("central meridian", tf_geometry_central_carrington (&g));
  tf_check_nan ("Stonyhurst", tf_geometry_stonyhurst_of (&g, 10.0));
  g_assert_false (tf_geometry_disk_centre (&g, &x, &y));
  g_assert_false (tf_geometry_projective_to_pixel (&g, 0.0, 0.0, &x, &y));
  /* A map of half the Sun: a longitude that it lacks comes back outside, on the nearer side. */
  g.width = 360;
  g_assert_true (tf_geometry_make (&g));
  g_assert_true (tf_geometry_sun_to_pixel (&g, 350.0, 0.0, &x, &y, NULL));
  tf_check_near ("column", x, 1.0 + (350.0 - 360.0 - 0.5) / 0.5, 1e-9);
  g.cd[0][1] = 0.1; /* turned maps are no maps */
  g_assert_false (tf_geometry_make (&g));
  g_assert_cmpint (g.projection, ==, TF_PROJECTION_NONE);
}

static void
test_refusals (void)
{
  TfObserver o = observer (1.0, 0.0, 0.0, 0.0);
  TfGeometry good, g;
  TfPlace p;
  double tx, ty;
  g_assert_true (tf_geometry_make_disk (&good, 10, 10, 5.0, 5.0, 400.0, 0.0, &o, 695.7));
  g = good;
  g.cd[0][0] = g.cd[0][1] = 0.0;
  g_assert_false (tf_geometry_make (&g));
  tf_check_nan ("mu", tf_geometry_mu (&g, 5.0, 5.0));
  g_assert_false (tf_geometry_pixel_to_sun (&g, 5.0, 5.0, &p));
  tf_geometry_pixel_to_projective (&g, 5.0, 5.0, &tx, &ty);
  tf_check_nan ("theta x", tx);
  tf_check_nan ("north angle", tf_geometry_north_angle (&g));
  float mu[3] = { 1.0f, 1.0f, 1.0f };
  double unit[3][3], area[3];
  tf_geometry_row_mu (&g, 5.0, 4.0, 3, mu);
  tf_geometry_row_sun (&g, 5.0, 4.0, 3, unit, NULL, area);
  for (int k = 0; k < 3; k++)
    {
      tf_check_nan ("row mu", mu[k]);
      tf_check_nan ("row unit", unit[k][1]);
      tf_check_nan ("row area", area[k]);
    }
  g = good;
  g.crpix[1] = NAN;
  g_assert_false (tf_geometry_make (&g));
  g = good;
  g.observer.distance_m = 1e8; /* inside the Sun */
  g_assert_false (tf_geometry_make (&g));
  g = good;
  g.observer.b0_deg = NAN;
  g_assert_false (tf_geometry_make (&g));
  g = good;
  g.projection = TF_PROJECTION_NONE;
  g_assert_false (tf_geometry_make (&g));
  double x, y;
  g_assert_false (tf_geometry_sun_to_pixel (&good, NAN, 0.0, &x, &y, NULL));
  g_assert_false (tf_geometry_sun_to_pixel (&good, 0.0, 91.0, &x, &y, NULL));
  g_assert_false (tf_geometry_sun_to_pixel (&good, 180.0, 0.0, &x, &y, NULL));
}

/* -- the sphere ------------------------------------------------------------------------------ */

/* Great-circle separations of the reference, section 3.2, deg. */
static void
test_separations (void)
{
  const double rows[][5]
      = { { 24, 15, 16, 17, 7.9450 },  { 24, -15, 16, -17, 7.9450 }, { 24, 17, 16, 15, 7.9450 },
          { 40, 28, 25, 33, 13.8412 }, { 5, 20, 5, 24, 4.0 },        { -10, 8, -2, 10, 8.1501 },
          { 3, 0.5, -3, -0.5, 6.0827 } };
  for (guint k = 0; k < G_N_ELEMENTS (rows); k++)
    tf_check_near ("separation",
                   tf_sphere_distance (rows[k][0], rows[k][1], rows[k][2], rows[k][3]), rows[k][4],
                   5e-5);
  tf_check_near ("over the seam", tf_sphere_distance (359.5, 0.0, 0.5, 0.0), 1.0, 1e-12);
  tf_check_near ("opposite", tf_sphere_distance (10.0, 20.0, 190.0, -20.0), 180.0, 1e-6);
  tf_check_near ("tiny", tf_sphere_distance (10.0, 20.0, 10.0, 20.0 + 1e-10), 1e-10, 1e-14);
  tf_check_near ("over the pole", tf_sphere_distance (10.0, 89.0, 190.0, 89.0), 2.0, 1e-12);
  tf_check_nan ("no place", tf_sphere_distance (NAN, 0.0, 0.0, 0.0));
}

static void
test_units (void)
{
  for (double lat = -90.0; lat <= 90.0; lat += 10.0)
    for (double lon = 0.0; lon < 360.0; lon += 36.0)
      {
        double unit[3], lon2, lat2;
        tf_sphere_unit (lon, lat, unit);
        tf_sphere_lonlat (unit, &lon2, &lat2);
        tf_check_near ("latitude", lat2, lat, 1e-12);
        if (fabs (lat) < 90.0)
          tf_check_angle ("longitude", lon2, lon, 1e-12);
      }
}

void
add_geometry_tests (void)
{
  g_test_add_func ("/sun/geometry/agrees-with-the-vectors-at-every-turn", test_vectors);
  g_test_add_func ("/sun/geometry/mu-is-the-exact-one", test_mu);
  g_test_add_func ("/sun/geometry/areas-add-up-to-the-disk", test_area);
  g_test_add_func ("/sun/geometry/places-come-back-from-their-pixels", test_round_trips);
  g_test_add_func ("/sun/geometry/nothing-is-given-off-the-limb", test_limb);
  g_test_add_func ("/sun/geometry/rows-equal-the-general-path", test_rows);
  g_test_add_func ("/sun/geometry/a-long-row-stays-exact", test_long_row);
  g_test_add_func ("/sun/geometry/maps-go-both-ways-over-the-seam", test_maps);
  g_test_add_func ("/sun/geometry/maps-end-at-their-edges", test_map_edges);
  g_test_add_func ("/sun/geometry/what-cannot-be-a-geometry-is-refused", test_refusals);
  g_test_add_func ("/sun/sphere/separations-agree-with-the-vectors", test_separations);
  g_test_add_func ("/sun/sphere/unit-vectors-go-both-ways", test_units);
}
