/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "inversion-builder.h"

#include <math.h>
#include <string.h>

#include "tf-constants.h"

void
builder_to_observer (const TfGeometry *g, const double unit[3], double to_observer[3])
{
  double length = 0.0;
  tf_sphere_unit (tf_geometry_central_carrington (g), g->observer.b0_deg, to_observer);
  for (guint k = 0; k < 3; k++)
    {
      to_observer[k] = g->distance_mm * to_observer[k] - g->radius_mm * unit[k];
      length += to_observer[k] * to_observer[k];
    }
  for (guint k = 0; k < 3; k++)
    to_observer[k] /= sqrt (length);
}

TfFrame *
builder_frame_func (const BuilderFrame *how, BuilderFunc func, gconstpointer data)
{
  TfGeometry g = builder_geometry (how);
  g_autofree float *field = g_new (float, (gsize)g.width *g.height);
  double (*unit)[3] = g_malloc_n (g.width, sizeof *unit);
  g_autofree double *row = g_new (double, g.width);
  guint fine = how->fine;
  for (guint y = 0; y < g.height; y++)
    {
      memset (row, 0, g.width * sizeof *row);
      for (guint k = 0; k < fine * fine; k++)
        {
          tf_geometry_row_sun (&g, y + 0.5 + (k / fine + 0.5) / fine, 0.5 + (k % fine + 0.5) / fine,
                               g.width, unit, NULL, NULL);
          for (guint x = 0; x < g.width; x++)
            {
              double to_observer[3];
              builder_to_observer (&g, unit[x], to_observer);
              row[x] += isnan (unit[x][0]) ? (double)NAN : func (unit[x], to_observer, data);
            }
        }
      for (guint x = 0; x < g.width; x++)
        field[(gsize)y * g.width + x] = (float)(row[x] / (fine * fine));
    }
  g_free (unit);
  if (how->noise > 0.0)
    builder_add_noise (field, (gsize)g.width * g.height, how->noise, how->seed);
  return builder_frame_of (&g, how, field);
}

void
builder_complexity (TfComplexity *c, const TfFrame *frame, const TfOutline *outline,
                    const TfComplexityParams *params)
{
  TfMeasureParams measure;
  tf_measure_params_init (&measure);
  tf_complexity_region (c, frame, outline, &measure, params);
}
