/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <glib/gi18n-lib.h>
#include <math.h>
#include <string.h>

#include "tf-constants.h"
#include "tf-sun-private.h"

/* A Carrington map: longitude 0 to 360 from left to right, sine latitude from -1 to 1 upwards,
 * the radial field. Every column is drawn at its own time, when the Earth's central meridian
 * stood there: the right edge is the oldest.
 */

TfTime
tf_map_column_time (int rotation, double carrington_lon_deg)
{
  return tf_carrington_time (rotation + 1.0 - carrington_lon_deg / 360.0);
}

gboolean
tf_shot_map_geometry (guint width, guint height, TfGeometry *geometry, GError **error)
{
  *geometry = (TfGeometry){
    .projection = TF_PROJECTION_CEA,
    .width = width,
    .height = height,
    .crpix = { 0.5 * (width + 1.0), 0.5 * (height + 1.0) },
    .crval_deg = { 180.0, 0.0 },
    .cd = { { 360.0 / width, 0.0 }, { 0.0, 2.0 / height } },
    .lonpole_deg = 180.0,
    .observer = { .source = TF_OBSERVER_UNKNOWN },
    .radius_mm = TF_RADIUS_MM,
  };
  if (width >= 8 && height >= 8 && width <= 16384 && height <= 16384 && tf_geometry_make (geometry))
    return TRUE;
  g_set_error (error, TF_SIMULATE_ERROR, TF_SIMULATE_ERROR_OPTION,
               _ ("no map of %u by %u pixels can be drawn: each side must be 8 to 16384 pixels"),
               width, height);
  return FALSE;
}

/* Rows of one longitude; @sum in G. */
static void
add_column (const TfLit *lit, guint n, double lon_deg, guint height, guint s, double *sum)
{
  double east = cos (lon_deg * TF_DEG), west = sin (lon_deg * TF_DEG), step = 2.0 / height;
  for (guint k = 0; k < n; k++)
    {
      const double *u = lit[k].unit;
      double reach = acos (CLAMP (lit[k].cos_cut, -1.0, 1.0)), lat = asin (CLAMP (u[2], -1.0, 1.0));
      double low = lat - reach < -TF_PI / 2 ? -1.0 : sin (lat - reach);
      double high = lat + reach > TF_PI / 2 ? 1.0 : sin (lat + reach);
      int first = MAX (0, (int)floor ((low + 1.0) / step) - 1),
          last = MIN ((int)height - 1, (int)ceil ((high + 1.0) / step));
      double along = u[0] * east + u[1] * west;
      for (int row = first; row <= last; row++)
        for (guint j = 0; j < s; j++)
          {
            double sine = -1.0 + (row + (j + 0.5) / s) * step;
            double cosine = along * sqrt (1.0 - sine * sine) + u[2] * sine;
            if (cosine >= lit[k].cos_cut)
              sum[row] += lit[k].peak_gauss * exp ((cosine - 1.0) * lit[k].inverse);
          }
    }
}

/* Only elements that reach this longitude at all: |sin (lon - lon_e)| cos lat_e of the
 * meridian's great circle. */
static guint
keep_near (TfLit *lit, guint n, double lon_deg)
{
  double normal[2] = { -sin (lon_deg * TF_DEG), cos (lon_deg * TF_DEG) };
  guint kept = 0;
  for (guint k = 0; k < n; k++)
    {
      double off = lit[k].unit[0] * normal[0] + lit[k].unit[1] * normal[1];
      if (lit[k].cos_cut < 0.0 || off * off <= 1.0 - lit[k].cos_cut * lit[k].cos_cut)
        lit[kept++] = lit[k];
    }
  return kept;
}

float *
tf_shoot_map (const TfSun *sun, int rotation, const TfShot *shot, const TfGeometry *geometry,
              guint64 seed)
{
  guint width = geometry->width, height = geometry->height,
        s = shot->supersample == 0 ? 2 : shot->supersample;
  g_autofree TfLit *lit = g_new (TfLit, tf_sun_get_n_elements (sun) + 1);
  g_autofree double *sum = g_new (double, height);
  float *pixels = g_new (float, (gsize)width *height);
  for (guint x = 0; x < width; x++)
    {
      memset (sum, 0, height * sizeof *sum);
      for (guint i = 0; i < s; i++)
        {
          double lon = (x + (i + 0.5) / s) * 360.0 / width;
          guint n = tf_sun_light (sun, tf_map_column_time (rotation, lon), lit);
          add_column (lit, keep_near (lit, n, lon), lon, height, s, sum);
        }
      for (guint y = 0; y < height; y++)
        pixels[(gsize)y * width + x] = (float)(sum[y] / (s * s));
    }
  tf_detector_read (pixels, (gsize)width * height, shot->noise_gauss, shot->quantum_gauss, seed);
  return pixels;
}
