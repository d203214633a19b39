/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-geometry.h"

#include <math.h>

#include "tf-constants.h"

/* Rows. Along a row the vector w of the line of sight is start + i * step (tf-geometry.c says which
 * vector), so a pixel costs two square roots and no trigonometry. The kernels below take plain
 * numbers, hold no branches that keep them from being vectorised, and are compiled twice on x86-64.
 */

#if defined(__x86_64__) && defined(__GNUC__) && !defined(__clang__)                                \
    && !defined(__SANITIZE_ADDRESS__)
#define TF_HOT __attribute__ ((target_clones ("arch=x86-64-v3", "default")))
#else
#define TF_HOT
#endif

enum
{
  CHUNK = 256
};

/* w along a row. */
typedef struct
{
  double start[3], step[3];
} Sight;

static Sight
sight_of (const TfGeometry *g, double y, double x0)
{
  Sight s;
  double dx = x0 - g->crpix[0], dy = y - g->crpix[1];
  double xi = (g->cd[0][0] * dx + g->cd[0][1] * dy) * TF_DEG,
         eta = (g->cd[1][0] * dx + g->cd[1][1] * dy) * TF_DEG;
  double dxi = g->cd[0][0] * TF_DEG, deta = g->cd[1][0] * TF_DEG;
  for (int k = 0; k < 3; k++)
    {
      s.start[k] = -g->rotation[k][0] * eta + g->rotation[k][1] * xi + g->rotation[k][2];
      s.step[k] = -g->rotation[k][0] * deta + g->rotation[k][1] * dxi;
    }
  return s;
}

/* In units where the Sun's radius is the observer's distance: mu^2 = 1 - (D/R)^2 side^2 / length^2.
 * Floats hold the small sideways components to 1e-7 of the radius, which is 1e-7 / mu in mu. */
TF_HOT static void
mu_kernel (const Sight *s, double ratio, guint n, float *mu)
{
  float k = (float)(1.0 / (ratio * ratio));
  float a0 = (float)s->start[0], b0 = (float)s->step[0];
  float a1 = (float)(s->start[1] * ratio), b1 = (float)(s->step[1] * ratio);
  float a2 = (float)(s->start[2] * ratio), b2 = (float)(s->step[2] * ratio);
  for (int i = 0; i < (int)n; i++)
    {
      float f = (float)i, w0 = a0 + f * b0, w1 = a1 + f * b1, w2 = a2 + f * b2;
      float side2 = w1 * w1 + w2 * w2;
      float mu2 = 1.0f - side2 / (w0 * w0 + k * side2);
      mu[i] = w0 > 0.0f ? sqrtf (mu2) : NAN;
    }
}

void
tf_geometry_row_mu (const TfGeometry *g, double y, double x0, guint n, float *mu)
{
  if (g->projection != TF_PROJECTION_TAN)
    {
      for (guint i = 0; i < n; i++)
        mu[i] = NAN;
      return;
    }
  /* Pieces short enough for the float pixel number to be exact and the rounding small. */
  for (guint done = 0; done < n; done += 4096)
    {
      Sight s = sight_of (g, y, x0 + done);
      mu_kernel (&s, g->distance_mm / g->radius_mm, MIN (n - done, 4096), mu + done);
    }
}

/* -- places ---------------------------------------------------------------------------------- */

/* One row of one disk: unit vector = base + t * (along + i * along_step). */
typedef struct
{
  Sight sight;
  double distance, radius, solid; /* Mm, Mm, sr at the centre of the projection */
  double base[3], along[3], along_step[3];
} DiskRow;

/* From the line of sight to the Carrington frame, in solar radii. */
static void
carrington_matrix (const TfGeometry *g, double m[3][3])
{
  double lon = g->observer.carrington_lon_deg * TF_DEG, sl = sin (lon), cl = cos (lon),
         sb = g->sin_b0, cb = g->cos_b0;
  const double rows[3][3] = {
    { -cb * cl, -sl, -sb * cl }, /* columns: away from the observer, west, north */
    { -cb * sl, cl, -sb * sl },
    { -sb, 0.0, cb },
  };
  for (int i = 0; i < 3; i++)
    for (int j = 0; j < 3; j++)
      m[i][j] = rows[i][j] / g->radius_mm;
}

static DiskRow
disk_row (const TfGeometry *g, double y, double x0)
{
  DiskRow row
      = { .sight = sight_of (g, y, x0), .distance = g->distance_mm, .radius = g->radius_mm };
  double m[3][3];
  carrington_matrix (g, m);
  row.solid = fabs (g->cd[0][0] * g->cd[1][1] - g->cd[0][1] * g->cd[1][0]) * TF_DEG * TF_DEG;
  for (int k = 0; k < 3; k++)
    {
      row.base[k] = -m[k][0] * g->distance_mm;
      for (int j = 0; j < 3; j++)
        {
          row.along[k] += m[k][j] * row.sight.start[j];
          row.along_step[k] += m[k][j] * row.sight.step[j];
        }
    }
  return row;
}

/* Planes of one chunk; @x, @y, @z: the unit vector. Off the disk the root of a negative number
 * makes everything NaN. */
typedef struct
{
  double x[CHUNK], y[CHUNK], z[CHUNK], mu[CHUNK], area[CHUNK];
} Planes;

TF_HOT static void
disk_kernel (const DiskRow *row, guint first, guint n, Planes *p)
{
  const Sight *s = &row->sight;
  double d = row->distance, r = row->radius, d2 = d * d, r2 = r * r;
  for (int k = 0; k < (int)n; k++)
    {
      double i = (double)(int)first + (double)k;
      double w0 = s->start[0] + i * s->step[0], w1 = s->start[1] + i * s->step[1],
             w2 = s->start[2] + i * s->step[2];
      double side2 = w1 * w1 + w2 * w2, length2 = w0 * w0 + side2;
      double inside = r2 * length2 - d2 * side2;
      double root = w0 > 0.0 ? sqrt (inside) : NAN;
      double length = sqrt (length2);
      double t = (d * w0 - root) / length2, mu = root / (length * r);
      p->x[k] = row->base[0] + t * (row->along[0] + i * row->along_step[0]);
      p->y[k] = row->base[1] + t * (row->along[1] + i * row->along_step[1]);
      p->z[k] = row->base[2] + t * (row->along[2] + i * row->along_step[2]);
      p->mu[k] = mu;
      p->area[k] = t * t * row->solid / (mu * length);
    }
}

/* Longitudes of a map's row are turned on by one multiplication a pixel, begun anew each chunk. */
static void
map_kernel (const TfGeometry *g, double y, double x0, guint n, Planes *p)
{
  TfPlace place;
  double area = tf_geometry_area (g, CLAMP (x0, 0.5, g->width + 0.5), y);
  gboolean there = tf_geometry_pixel_to_sun (g, 0.5, y, &place);
  double lon = (g->crval_deg[0] + g->cd[0][0] * (x0 - g->crpix[0])) * TF_DEG,
         step = g->cd[0][0] * TF_DEG;
  double c = cos (lon), s = sin (lon), dc = cos (step), ds = sin (step);
  double lat = there ? place.lat_deg * TF_DEG : NAN, cl = cos (lat), sl = sin (lat);
  for (guint k = 0; k < n; k++)
    {
      double x = x0 + k, next = c * dc - s * ds;
      gboolean on = x >= 0.5 && x <= g->width + 0.5;
      p->x[k] = on ? cl * c : NAN;
      p->y[k] = on ? cl * s : NAN;
      p->z[k] = on ? sl : NAN;
      p->mu[k] = NAN;
      p->area[k] = on ? area : NAN;
      s = s * dc + c * ds;
      c = next;
    }
}

static void
give (const Planes *p, guint n, double (*unit)[3], double *mu, double *area)
{
  for (guint k = 0; unit != NULL && k < n; k++)
    {
      unit[k][0] = p->x[k];
      unit[k][1] = p->y[k];
      unit[k][2] = p->z[k];
    }
  for (guint k = 0; mu != NULL && k < n; k++)
    mu[k] = p->mu[k];
  for (guint k = 0; area != NULL && k < n; k++)
    area[k] = p->area[k];
}

void
tf_geometry_row_sun (const TfGeometry *g, double y, double x0, guint n, double (*unit)[3],
                     double *mu, double *area)
{
  Planes planes;
  gboolean map = tf_geometry_is_map (g);
  DiskRow row = { 0 };
  if (!map)
    row = disk_row (g, y, x0); /* all NaN without a projection */
  for (guint first = 0; first < n; first += CHUNK)
    {
      guint count = MIN (n - first, (guint)CHUNK);
      if (map)
        map_kernel (g, y, x0 + first, count, &planes);
      else
        disk_kernel (&row, first, count, &planes);
      give (&planes, count, unit != NULL ? unit + first : NULL, mu != NULL ? mu + first : NULL,
            area != NULL ? area + first : NULL);
    }
}
