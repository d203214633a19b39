/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Prints what the sun folder works out for seeded random cases, as CSV, for sun.py to compare with
 * other people's libraries. One argument: which of the tables below.
 */

#include <glib.h>
#include <math.h>
#include <stdio.h>

#include "tf-constants.h"
#include "tf-geometry.h"
#include "tf-rotation.h"

enum
{
  HEADERS = 600,
  PIXELS = 20,
  MAPS = 60,
  TIMES = 3000,
  PLACES = 300
};

/* A header as it would stand in a file; the program's geometry is made from it. */
typedef struct
{
  double crota_deg, cdelt[2], pc[2][2], crpix[2], crval[2], lonpole;
  TfTime time;
  TfObserver observer;
  double radius_mm;
} Header;

static double
between (GRand *rand, double low, double high)
{
  return g_rand_double_range (rand, low, high);
}

static void
random_observer (GRand *rand, Header *h)
{
  double au = between (rand, 0.2, 1.1);
  h->time = tf_time_add (tf_time_from_year (2000.0),
                         rint (between (rand, 0.0, 26.0 * 365.0 * TF_DAY_S)));
  h->observer.distance_m = au * TF_AU_M;
  h->observer.b0_deg
      = g_rand_boolean (rand) ? between (rand, -7.25, 7.25) : between (rand, -34.0, 34.0);
  h->observer.stonyhurst_lon_deg = g_rand_boolean (rand) ? 0.0 : between (rand, -180.0, 180.0);
  h->observer.carrington_lon_deg
      = tf_observer_carrington (h->time, h->observer.stonyhurst_lon_deg, h->observer.distance_m);
  h->observer.source = TF_OBSERVER_HEADER;
}

/* Plain scales with CROTA2 for one third, PC for the rest; one third with CRVAL away from the Sun's
 * centre, a sixth with a LONPOLE too; disks in the middle, off it, and cut-outs far from CRPIX. */
static Header
random_header (GRand *rand, int k)
{
  Header h = { .lonpole = 180.0 };
  random_observer (rand, &h);
  h.radius_mm = k % 4 == 0 ? 696.0 : 695.7;
  double angular = asin (h.radius_mm * 1e6 / h.observer.distance_m) / TF_DEG;
  double scale = angular / between (rand, 60.0, 1950.0);
  h.cdelt[0] = scale;
  h.cdelt[1] = k % 3 == 0 ? scale : scale * between (rand, 0.8, 1.25);
  double turn = (k % 5 == 0 ? 180.0 : between (rand, -180.0, 180.0)) * TF_DEG;
  h.crota_deg = k % 3 == 0 ? turn / TF_DEG : NAN;
  double ratio = h.cdelt[1] / h.cdelt[0];
  h.pc[0][0] = cos (turn);
  h.pc[0][1] = -ratio * sin (turn);
  h.pc[1][0] = sin (turn) / ratio;
  h.pc[1][1] = cos (turn);
  for (int i = 0; i < 2; i++)
    {
      h.crpix[i] = k % 2 == 0 ? between (rand, 400.0, 600.0) : between (rand, -4000.0, 5000.0);
      h.crval[i] = k % 3 == 1 ? between (rand, -1.2, 1.2) * angular : 0.0;
    }
  if (k % 6 == 1)
    h.lonpole = between (rand, -180.0, 180.0);
  return h;
}

static TfGeometry
geometry_of (const Header *h)
{
  TfGeometry g = {
    .projection = TF_PROJECTION_TAN,
    .width = 1024,
    .height = 1024,
    .crpix = { h->crpix[0], h->crpix[1] },
    .crval_deg = { h->crval[0], h->crval[1] },
    .lonpole_deg = h->lonpole,
    .observer = h->observer,
    .radius_mm = h->radius_mm,
  };
  for (int i = 0; i < 2; i++)
    for (int j = 0; j < 2; j++)
      g.cd[i][j] = h->cdelt[i] * h->pc[i][j];
  if (!tf_geometry_make (&g))
    g_error ("a random header was refused");
  return g;
}

static void
print_pixel (int k, const Header *h, const TfGeometry *g, double x, double y)
{
  double tx, ty, back_x, back_y, unit[1][3], mu, area, row_lon, row_lat;
  double sun_x = NAN, sun_y = NAN;
  TfPlace p;
  g_autofree char *iso = tf_time_dup_iso (h->time, 0);
  tf_geometry_pixel_to_projective (g, x, y, &tx, &ty);
  tf_geometry_projective_to_pixel (g, tx, ty, &back_x, &back_y);
  if (tf_geometry_pixel_to_sun (g, x, y, &p))
    tf_geometry_sun_to_pixel (g, p.carrington_lon_deg, p.lat_deg, &sun_x, &sun_y, NULL);
  tf_geometry_row_sun (g, y, x, 1, unit, &mu, &area);
  tf_sphere_lonlat (unit[0], &row_lon, &row_lat);
  printf ("%d,%s,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,", k, iso,
          h->crota_deg, h->cdelt[0], h->cdelt[1], h->pc[0][0], h->pc[0][1], h->pc[1][0],
          h->pc[1][1], h->crpix[0], h->crpix[1], h->crval[0], h->crval[1], h->lonpole);
  printf ("%.17g,%.17g,%.17g,%.17g,%.17g,", h->observer.distance_m, h->observer.b0_deg,
          h->observer.stonyhurst_lon_deg, h->observer.carrington_lon_deg, h->radius_mm);
  printf ("%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,", x, y, tx, ty,
          back_x, back_y, p.stonyhurst_lon_deg, p.carrington_lon_deg, p.lat_deg, p.cmd_deg, p.mu,
          tf_geometry_mu (g, x, y));
  printf ("%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g\n", row_lon, row_lat, mu, area,
          tf_geometry_area (g, x, y), sun_x, sun_y);
}

static void
print_geometry (GRand *rand)
{
  printf ("case,time,crota,cdelt1,cdelt2,pc11,pc12,pc21,pc22,crpix1,crpix2,crval1,crval2,lonpole,"
          "distance_m,b0,"
          "stonyhurst_observer,carrington_observer,radius_mm,x,y,tx,ty,back_x,back_y,stonyhurst,"
          "carrington,lat,cmd,mu,"
          "mu_short,row_lon,row_lat,row_mu,row_area,area,sun_x,sun_y\n");
  for (int k = 0; k < HEADERS; k++)
    {
      Header h = random_header (rand, k);
      TfGeometry g = geometry_of (&h);
      double cx, cy, r = tf_geometry_disk_radius (&g);
      tf_geometry_disk_centre (&g, &cx, &cy);
      for (int j = 0; j < PIXELS; j++)
        {
          double rho = sqrt (between (rand, 0.0, 1.1)), angle = between (rand, 0.0, 2.0 * TF_PI);
          print_pixel (k, &h, &g, cx + rho * r * cos (angle), cy + rho * r * sin (angle));
        }
    }
}

/* Whole maps, some running to the left, some beginning anywhere. */
static void
print_maps (GRand *rand)
{
  printf ("case,kind,width,height,crpix1,crpix2,crval1,cdelt1,step2,x,y,carrington,lat,back_x,back_"
          "y\n");
  for (int k = 0; k < MAPS; k++)
    {
      double step = 360.0 / g_rand_int_range (rand, 90, 2000);
      guint width = (guint)lround (360.0 / step), height = (guint)g_rand_int_range (rand, 60, 1000);
      gboolean cea = k % 2 == 0;
      TfGeometry g = {
        .projection = cea ? TF_PROJECTION_CEA : TF_PROJECTION_CAR,
        .width = width,
        .height = height,
        .crpix = { rint (between (rand, 1.0, width)), (height + 1) / 2.0 },
        .crval_deg = { between (rand, 0.0, 360.0), 0.0 },
        .cd = { { k % 3 == 0 ? -step : step, 0.0 }, { 0.0, (cea ? 2.0 : 180.0) / height } },
        .radius_mm = 696.0,
      };
      if (!tf_geometry_make (&g))
        g_error ("a random map was refused");
      for (int j = 0; j < PIXELS; j++)
        {
          TfPlace p;
          double x = between (rand, 0.6, width + 0.4), y = between (rand, 0.6, height + 0.4), bx,
                 by;
          tf_geometry_pixel_to_sun (&g, x, y, &p);
          tf_geometry_sun_to_pixel (&g, p.carrington_lon_deg, p.lat_deg, &bx, &by, NULL);
          printf ("%d,%s,%u,%u,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g\n",
                  k, tf_projection_name (g.projection), width, height, g.crpix[0], g.crpix[1],
                  g.crval_deg[0], g.cd[0][0], g.cd[1][1], x, y, p.carrington_lon_deg, p.lat_deg, bx,
                  by);
        }
    }
}

static void
print_time (int year, int month, int day, int hour, int minute, double second)
{
  const TfTimeScale scales[] = { TF_SCALE_UTC, TF_SCALE_TAI, TF_SCALE_TT, TF_SCALE_GPS };
  printf ("%04d-%02d-%02dT%02d:%02d:%09.6f", year, month, day, hour, minute, second);
  for (int k = 0; k < 4; k++)
    {
      TfTime time = tf_time_from_calendar (year, month, day, hour, minute, second, scales[k]);
      g_autofree char *iso = tf_time_dup_iso (time, 6);
      printf (",%.17g,%s", time.s, iso);
      if (k == 0)
        printf (",%.17g", tf_time_year (time));
    }
  printf ("\n");
}

/* 2 s about the end of every month that ERFA's table could hold, then random instants from 1700. */
static void
print_times (GRand *rand)
{
  printf ("text,utc_s,utc_iso,utc_year,tai_s,tai_iso,tt_s,tt_iso,gps_s,gps_iso\n");
  for (int year = 1972; year <= 2026; year++)
    for (int half = 0; half < 2; half++)
      {
        print_time (year, half ? 12 : 6, half ? 31 : 30, 23, 59, 59.0);
        print_time (year, half ? 12 : 6, half ? 31 : 30, 23, 59, 59.75);
        print_time (half ? year + 1 : year, half ? 1 : 7, 1, 0, 0, 0.25);
      }
  const int leaps[][2] = { { 1972, 6 },  { 1972, 12 }, { 1990, 12 }, { 1998, 12 }, { 2005, 12 },
                           { 2008, 12 }, { 2012, 6 },  { 2015, 6 },  { 2016, 12 } };
  for (guint k = 0; k < G_N_ELEMENTS (leaps); k++)
    print_time (leaps[k][0], leaps[k][1], leaps[k][1] == 6 ? 30 : 31, 23, 59, 60.5);
  for (int k = 0; k < TIMES; k++)
    print_time (g_rand_int_range (rand, k % 3 == 0 ? 1700 : 1972, 2027),
                g_rand_int_range (rand, 1, 13), g_rand_int_range (rand, 1, 29),
                g_rand_int_range (rand, 0, 24), g_rand_int_range (rand, 0, 60),
                floor (between (rand, 0.0, 60e6)) * 1e-6);
}

static void
print_earth_at (const char *what, TfTime time)
{
  double p, b0, l0;
  TfObserver earth = tf_observer_earth (time);
  tf_observer_meeus (time, &p, &b0, &l0);
  printf ("%s,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g\n", what,
          tf_time_jd (time, TF_SCALE_TT), earth.b0_deg, earth.carrington_lon_deg,
          tf_earth_l0 (time, TF_L0_ALMANAC), earth.distance_m / TF_AU_M, tf_earth_p (time),
          tf_carrington_rotation (time), p, b0, l0);
}

static void
print_earth (GRand *rand)
{
  printf ("what,tt_jd,b0,l0,l0_almanac,r_au,p,rotation,meeus_p,meeus_b0,meeus_l0\n");
  for (int month = 1; month <= 12; month++)
    print_earth_at ("2013", tf_time_from_calendar (2013, month, 1, 0, 0, 0.0, TF_SCALE_TT));
  print_earth_at ("meeus", tf_time_from_jd (2448908.5, 0.00068, TF_SCALE_TT));
  for (int rotation = 2132; rotation <= 2147; rotation++)
    print_earth_at ("start", tf_carrington_time (rotation));
  for (int k = 0; k < PLACES; k++)
    print_earth_at ("random", tf_time_from_jd (rint (between (rand, 2433282.0, 2466154.0)),
                                               between (rand, 0.0, 1.0), TF_SCALE_TT));
}

static void
print_rotation (void)
{
  printf ("law,lat,rate,carried_10_days\n");
  for (guint k = 0; tf_rotation_laws[k].name != NULL; k++)
    for (int lat = -85; lat <= 85; lat += 5)
      printf ("%s,%d,%.17g,%.17g\n", tf_rotation_laws[k].name, lat, tf_rotation_rate (k, lat),
              tf_rotation_carry (k, lat, 10.0 * TF_DAY_S));
}

int
main (int argc, char **argv)
{
  const char *table = argc > 1 ? argv[1] : "";
  g_autoptr (GRand) rand = g_rand_new_with_seed (20131012);
  if (g_str_equal (table, "geometry"))
    print_geometry (rand);
  else if (g_str_equal (table, "maps"))
    print_maps (rand);
  else if (g_str_equal (table, "times"))
    print_times (rand);
  else if (g_str_equal (table, "earth"))
    print_earth (rand);
  else if (g_str_equal (table, "rotation"))
    print_rotation ();
  else
    {
      fprintf (stderr, "outside-sun: give one of geometry, maps, times, earth, rotation\n");
      return 2;
    }
  return 0;
}
