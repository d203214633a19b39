/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "region-builder.h"

#include <math.h>

#include "tf-constants.h"

TfTime
builder_time (void)
{
  return tf_time_read ("2014-02-03T04:05:06Z");
}

void
builder_init (BuilderFrame *how, double lon, double lat, double scale_arcsec)
{
  *how = (BuilderFrame){ .scale_arcsec = scale_arcsec,
                         .b0_deg = -4.2,
                         .distance_au = 0.991,
                         .lon = lon,
                         .lat = lat,
                         .half_deg = 8.0,
                         .fine = 4,
                         .seed = 1,
                         .dx = 0.31,
                         .dy = -0.17 };
}

TfGeometry
builder_geometry (const BuilderFrame *how)
{
  TfGeometry g = { 0 };
  double x, y, mu;
  TfObserver observer
      = { how->distance_au * TF_AU_M, how->b0_deg, 2.5, BUILDER_L0, TF_OBSERVER_HEADER };
  double degree_arcsec = TF_RADIUS_MM * TF_DEG / (how->distance_au * TF_AU_M * 1e-6) / TF_ARCSEC;
  guint side = 2 * (guint)ceil (how->half_deg * degree_arcsec / how->scale_arcsec) + 1;
  g_assert_true (tf_geometry_make_disk (&g, side, side, 0.0, 0.0, how->scale_arcsec, how->turn_deg,
                                        &observer, TF_RADIUS_MM));
  g_assert_true (tf_geometry_sun_to_pixel (&g, BUILDER_L0 + how->lon, how->lat, &x, &y, &mu));
  double middle = 0.5 * (side + 1);
  g_assert_true (tf_geometry_make_disk (&g, side, side, middle - x + how->dx, middle - y + how->dy,
                                        how->scale_arcsec, how->turn_deg, &observer, TF_RADIUS_MM));
  return g;
}

static void
add_row (const TfGeometry *g, const BuilderFrame *how, const BuilderPole *poles, guint n, double y,
         double x0, double (*unit)[3], double *mu, double *row)
{
  tf_geometry_row_sun (g, y, x0, g->width, unit, mu, NULL);
  for (guint p = 0; p < n; p++)
    {
      double power = poles[p].power;
      double centre[3], s = poles[p].sigma * TF_DEG, r = g->radius_mm * 1e8;
      double top = poles[p].flux / (2.0 * TF_PI * s * s * r * r * (1.0 - exp (-2.0 / (s * s))));
      tf_sphere_unit (BUILDER_L0 + poles[p].lon, poles[p].lat, centre);
      for (guint x = 0; x < g->width; x++)
        {
          double c = unit[x][0] * centre[0] + unit[x][1] * centre[1] + unit[x][2] * centre[2];
          double depth = (1.0 - c) / (s * s);
          if (power > 1.0)
            depth = pow (depth, power);
          if (depth < 60.0)
            row[x] += top * exp (-depth) * (how->radial ? 1.0 : mu[x]);
          else if (isnan (depth))
            row[x] = NAN;
        }
    }
}

float *
builder_field (const TfGeometry *g, const BuilderFrame *how, const BuilderPole *poles, guint n)
{
  float *field = g_new (float, (gsize)g->width * g->height);
  double (*unit)[3] = g_malloc_n (g->width, sizeof *unit);
  g_autofree double *mu = g_new (double, g->width), *row = g_new (double, g->width);
  guint fine = how->fine;
  for (guint y = 0; y < g->height; y++)
    {
      memset (row, 0, g->width * sizeof *row);
      for (guint j = 0; j < fine; j++)
        for (guint i = 0; i < fine; i++)
          add_row (g, how, poles, n, y + 0.5 + (j + 0.5) / fine, 0.5 + (i + 0.5) / fine, unit, mu,
                   row);
      for (guint x = 0; x < g->width; x++)
        field[(gsize)y * g->width + x] = (float)(row[x] / (fine * fine));
    }
  g_free (unit);
  return field;
}

/* Box and Muller 1958. */
void
builder_add_noise (float *field, gsize n, double sigma, guint32 seed)
{
  g_autoptr (GRand) rand = g_rand_new_with_seed (seed);
  for (gsize k = 0; k < n; k += 2)
    {
      double size = sigma * sqrt (-2.0 * log (1.0 - g_rand_double (rand)));
      double angle = 2.0 * TF_PI * g_rand_double (rand);
      field[k] += (float)(size * cos (angle));
      if (k + 1 < n)
        field[k + 1] += (float)(size * sin (angle));
    }
}

TfFrame *
builder_frame_of (const TfGeometry *g, const BuilderFrame *how, const float *field)
{
  g_autoptr (TfHeader) header = tf_header_new ();
  TfFrameInfo *info = tf_frame_info_read (header, g->width, g->height);
  info->kind = TF_KIND_CUT_OUT;
  info->role = TF_ROLE_FIELD;
  g_clear_pointer (&info->refusal, tf_note_free);
  info->time = builder_time ();
  info->geometry = *g;
  info->to_gauss = 1.0;
  info->field = how->radial ? TF_FIELD_RADIAL : TF_FIELD_LOS;
  return tf_frame_new (info, field, NULL);
}

TfFrame *
builder_frame (const BuilderFrame *how, const BuilderPole *poles, guint n)
{
  TfGeometry g = builder_geometry (how);
  g_autofree float *field = builder_field (&g, how, poles, n);
  if (how->noise > 0.0)
    builder_add_noise (field, (gsize)g.width * g.height, how->noise, how->seed);
  return builder_frame_of (&g, how, field);
}

TfOutline *
builder_cap (double lon, double lat, double radius_deg)
{
  return tf_outline_new_cap (builder_time (), BUILDER_L0 + lon, lat, radius_deg, 0);
}

void
builder_bipole (BuilderPole poles[2], double lon, double lat, double separation, double tilt,
                double flux, int leader)
{
  double h = lat < 0.0 ? -1.0 : 1.0;
  double dy = -h * separation * sin (tilt * TF_DEG),
         dx = separation * cos (tilt * TF_DEG) / cos (lat * TF_DEG);
  poles[0] = (BuilderPole){ lon + 0.5 * dx, lat + 0.5 * dy, 0.55, leader * flux };
  poles[1] = (BuilderPole){ lon - 0.5 * dx, lat - 0.5 * dy, 0.75, -leader * flux };
}

const char *
builder_real (const char *name)
{
  const char *given = g_getenv ("TF_SHARED_DATA");
  g_autofree char *base = given != NULL
                              ? g_strdup (given)
                              : g_build_filename (TF_SOURCE_DIR, "..", "shared", "data", NULL);
  g_autofree char *path = g_build_filename (base, "magnetograms", name, NULL);
  return g_file_test (path, G_FILE_TEST_EXISTS) ? g_intern_string (path) : NULL;
}
