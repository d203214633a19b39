/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>

#include "tf-constants.h"
#include "tf-sun-private.h"

/* Where opposite polarities of one source overlap they cancel, and the centroids of what is
 * left stand farther apart than the middles that were asked for. What is left is found here by
 * adding up the source's own field on an equal-area grid (Lambert's azimuthal projection about
 * the source), far finer than any pixel. Midpoint sums of Gaussians at a quarter of their sigma
 * are good to 1e-6 and better.
 */

typedef struct
{
  double middle[3], west[3], north[3];
  double extent; /* half a side, radii */
} Sheet;

static void
sheet_place (Sheet *sheet, const TfElement *elements, guint n)
{
  double lon, lat, sum[3] = { 0.0, 0.0, 0.0 };
  for (guint k = 0; k < n; k++)
    for (int j = 0; j < 3; j++)
      sum[j] += elements[k].unit[j];
  tf_sphere_lonlat (sum, &lon, &lat);
  tf_sphere_unit (lon, lat, sheet->middle);
  tf_tangents (sheet->middle, sheet->west, sheet->north);
  sheet->extent = 0.0;
  for (guint k = 0; k < n; k++)
    {
      const double *u = elements[k].unit, *m = sheet->middle;
      double angle = acos (CLAMP (u[0] * m[0] + u[1] * m[1] + u[2] * m[2], -1.0, 1.0));
      double reach = fmin (TF_PI, angle + sqrt (2.0 * TF_ELEMENT_CUT) * elements[k].sigma * 1.02);
      sheet->extent = fmax (sheet->extent, 2.0 * sin (0.5 * reach));
    }
}

static gboolean
sheet_point (const Sheet *sheet, double x, double y, double unit[3])
{
  double r2 = x * x + y * y;
  if (r2 > 4.0)
    return FALSE;
  double up = 1.0 - 0.5 * r2, along = sqrt (1.0 - 0.25 * r2);
  for (int j = 0; j < 3; j++)
    unit[j] = up * sheet->middle[j] + along * (x * sheet->west[j] + y * sheet->north[j]);
  return TRUE;
}

static double
finest (const TfElement *elements, guint n)
{
  double sigma = elements[0].sigma;
  for (guint k = 1; k < n; k++)
    sigma = fmin (sigma, elements[k].sigma);
  return sigma;
}

static void
light (TfLit *lit, const TfElement *elements, guint n)
{
  for (guint k = 0; k < n; k++)
    {
      const TfElement *e = &elements[k];
      lit[k] = (TfLit){
        .unit = { e->unit[0], e->unit[1], e->unit[2] },
        .peak_gauss = tf_element_peak (e->flux_mx, e->sigma),
        .cos_cut = 1.0 - fmin (2.0, TF_ELEMENT_CUT * e->sigma * e->sigma),
        .inverse = 1.0 / (e->sigma * e->sigma),
      };
    }
}

void
tf_source_draw (TfSource *source, const TfElement *elements)
{
  Sheet sheet;
  double flux[2] = { 0.0, 0.0 }, sum[2][3] = { { 0.0 }, { 0.0 } };
  sheet_place (&sheet, elements, source->n);
  int half = (int)CLAMP (ceil (sheet.extent / (0.25 * finest (elements, source->n))), 8.0, 300.0);
  double step = sheet.extent / half, area_cm2 = pow (step * TF_RADIUS_MM * 1e8, 2.0);
  g_autofree TfLit *lit = g_new (TfLit, source->n);
  light (lit, elements, source->n);
  for (int row = -half; row < half; row++)
    for (int column = -half; column < half; column++)
      {
        double unit[3];
        if (!sheet_point (&sheet, (column + 0.5) * step, (row + 0.5) * step, unit))
          continue;
        double field = tf_lit_field (lit, source->n, unit), w = fabs (field) * area_cm2;
        int sign = field > 0.0 ? 0 : 1;
        flux[sign] += w;
        for (int j = 0; j < 3; j++)
          sum[sign][j] += w * unit[j];
      }
  for (int sign = 0; sign < 2; sign++)
    {
      TfDrawn *drawn = &source->drawn;
      drawn->flux_mx[sign] = flux[sign];
      drawn->lon_deg[sign] = drawn->lat_deg[sign] = NAN;
      if (flux[sign] > 0.0)
        tf_sphere_lonlat (sum[sign], &drawn->lon_deg[sign], &drawn->lat_deg[sign]);
    }
}
