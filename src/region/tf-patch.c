/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-patch-private.h"

#include <math.h>

#include "tf-constants.h"

/* The kernel is cut here, in its own sigmas. */
static const double REACH_SIGMAS = 3.6;
/* Least variance of the kernel, pixel^2: below it a sum over pixels is no longer a smooth function
 * of the place. */
static const double LEAST_VARIANCE = 0.2;
/* A node is seen when at least this share of its kernel has values. */
static const double LEAST_SHARE = 0.5;
/* Box means of the frame are used while their side is at most this share of the kernel's sigma. */
static const double LEVEL_SHARE = 0.6;
static const double FWHM_SIGMA = 2.3548200450309493; /* 2 sqrt (2 ln 2) */

/* The level of the frame's pyramid that is read. */
typedef struct
{
  const float *pixels;
  guint width, height, level;
} Level;

/* Symmetric 2 x 2. */
typedef struct
{
  double xx, xy, yy;
} Tensor;

void
tf_patch_unit (const TfPatch *p, double x, double y, double unit[3])
{
  double half = hypot (x, y) / (2.0 * p->radius_mm);
  half = MIN (half, 1.0);
  double c = 1.0 - 2.0 * half * half, s = sqrt (1.0 - half * half) / p->radius_mm;
  for (guint k = 0; k < 3; k++)
    unit[k] = c * p->centre[k] + s * (x * p->west[k] + y * p->north[k]);
}

static double
dot (const double a[3], const double b[3])
{
  return a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
}

gboolean
tf_patch_plane (const TfPatch *p, const double unit[3], double *x, double *y)
{
  double c = dot (unit, p->centre);
  double k = p->radius_mm * sqrt (2.0 / (1.0 + MAX (c, 0.0)));
  *x = k * dot (unit, p->west);
  *y = k * dot (unit, p->north);
  return c > 0.0;
}

void
tf_patch_node (const TfPatch *p, gsize k, double *x, double *y)
{
  *x = p->x0 + p->step_mm * (double)(k % p->width);
  *y = p->y0 + p->step_mm * (double)(k / p->width);
}

double
tf_patch_at (const TfPatch *p, const double *values, double x, double y)
{
  double u = (x - p->x0) / p->step_mm, v = (y - p->y0) / p->step_mm;
  if (!(u >= 0.0 && v >= 0.0 && u <= p->width - 1.0 && v <= p->height - 1.0))
    return NAN;
  guint i = MIN ((guint)u, p->width - 2), j = MIN ((guint)v, p->height - 2);
  double a = u - i, b = v - j;
  const double *at = values + (gsize)j * p->width + i;
  return (1.0 - b) * ((1.0 - a) * at[0] + a * at[1])
         + b * ((1.0 - a) * at[p->width] + a * at[p->width + 1]);
}

static void
set_axes (TfPatch *p, const TfPatchSpec *spec)
{
  double lon = spec->lon_deg * TF_DEG, lat = spec->lat_deg * TF_DEG;
  tf_sphere_unit (spec->lon_deg, spec->lat_deg, p->centre);
  p->west[0] = -sin (lon);
  p->west[1] = cos (lon);
  p->west[2] = 0.0;
  p->north[0] = -sin (lat) * cos (lon);
  p->north[1] = -sin (lat) * sin (lon);
  p->north[2] = cos (lat);
}

static guint
count_nodes (double half_mm, double step_mm, guint most)
{
  double half = ceil (half_mm / step_mm);
  return 2 * (guint)CLAMP (half, 2.0, 0.5 * most) + 1;
}

static void
choose_level (Level *level, const TfFrame *frame, double sigma_mm)
{
  const TfGeometry *g = tf_frame_get_geometry (frame);
  double pixel = tf_geometry_is_map (g)
                     ? (double)INFINITY
                     : tf_geometry_scale_arcsec (g) * TF_ARCSEC * (g->distance_mm - g->radius_mm);
  guint at = 0;
  while (pixel * (2 << at) <= LEVEL_SHARE * sigma_mm && at < tf_frame_get_n_levels (frame))
    at++;
  level->level = at;
  level->pixels = tf_frame_get_level (frame, at, &level->width, &level->height);
}

/* FITS pixel -> index of the level's array. */
static double
to_level (const Level *level, double x)
{
  double side = 1 << level->level;
  return (x - 0.5 * (side + 1.0)) / side;
}

static void
set_line (const TfPatch *p, const TfGeometry *g, gsize k, double x, double y, const double unit[3])
{
  double eye[3], length = 0.0, ahead[3], east_west[3], north[3];
  double h = 0.01 * p->step_mm;
  tf_sphere_unit (tf_geometry_central_carrington (g), g->observer.b0_deg, eye);
  for (guint i = 0; i < 3; i++)
    {
      eye[i] = g->distance_mm * eye[i] - g->radius_mm * unit[i];
      length += eye[i] * eye[i];
    }
  length = sqrt (length);
  tf_patch_unit (p, x + h, y, ahead);
  double along = dot (ahead, unit), size = 0.0;
  for (guint i = 0; i < 3; i++)
    {
      east_west[i] = ahead[i] - along * unit[i];
      size += east_west[i] * east_west[i];
    }
  for (guint i = 0; i < 3; i++)
    east_west[i] /= sqrt (size);
  north[0] = unit[1] * east_west[2] - unit[2] * east_west[1];
  north[1] = unit[2] * east_west[0] - unit[0] * east_west[2];
  north[2] = unit[0] * east_west[1] - unit[1] * east_west[0];
  p->line[k][0] = dot (eye, east_west) / length;
  p->line[k][1] = dot (eye, north) / length;
  p->line[k][2] = dot (eye, unit) / length;
}

/* Where each node lies on the frame, and how the observer sees it. */
static void
place_nodes (TfPatch *p, const TfFrame *frame, const Level *level)
{
  const TfGeometry *g = tf_frame_get_geometry (frame);
  gboolean map = tf_geometry_is_map (g),
           radial = tf_frame_get_info (frame)->field == TF_FIELD_RADIAL;
  for (gsize k = 0; k < p->n; k++)
    {
      double x, y, unit[3], lon, lat, px, py, mu = 1.0;
      tf_patch_node (p, k, &x, &y);
      tf_patch_unit (p, x, y, unit);
      tf_sphere_lonlat (unit, &lon, &lat);
      gboolean there = tf_geometry_sun_to_pixel (g, lon, lat, &px, &py, &mu);
      p->u[k] = there ? to_level (level, px) : (double)NAN;
      p->v[k] = there ? to_level (level, py) : (double)NAN;
      p->mu[k] = !there ? (double)NAN : map ? 1.0 : mu;
      p->line[k][0] = p->line[k][1] = 0.0;
      p->line[k][2] = 1.0;
      if (!map && !radial)
        set_line (p, g, k, x, y, unit);
    }
}

/* Derivative along the row (@across = 1) or the column (@across = width), one-sided at the edges.
 * */
static double
difference (const double *values, gsize k, guint at, guint n, gsize across, double step)
{
  guint back = at > 0 ? 1 : 0, on = at + 1 < n ? 1 : 0;
  return (values[k + on * across] - values[k - back * across]) / ((back + on) * step);
}

/* Raises the smaller eigenvalues to @least; TRUE when one was. */
static gboolean
lift (Tensor *t, double least)
{
  double mean = 0.5 * (t->xx + t->yy), half = hypot (0.5 * (t->xx - t->yy), t->xy);
  double high = mean + half, low = mean - half;
  if (low >= least)
    return FALSE;
  double new_high = MAX (high, least), new_low = least;
  double c = half > 0.0 ? 0.5 * (t->xx - t->yy) / half : 1.0, s = half > 0.0 ? t->xy / half : 0.0;
  mean = 0.5 * (new_high + new_low);
  half = 0.5 * (new_high - new_low);
  *t = (Tensor){ mean + half * c, half * s, mean - half * c };
  return TRUE;
}

/* Weighted sums about one place of the level. */
typedef struct
{
  double weight, value;
  double first[2], moment[2]; /* of weight and of weight * value, times the distance */
} Sums;

static void
sum_kernel (Sums *sums, const Level *level, double u, double v, const Tensor *inverse,
            double reach_x, double reach_y)
{
  int first_x = MAX (0, (int)ceil (u - reach_x)),
      last_x = MIN ((int)level->width - 1, (int)floor (u + reach_x));
  int first_y = MAX (0, (int)ceil (v - reach_y)),
      last_y = MIN ((int)level->height - 1, (int)floor (v + reach_y));
  for (int y = first_y; y <= last_y; y++)
    for (int x = first_x; x <= last_x; x++)
      {
        double f = level->pixels[(gsize)y * level->width + (gsize)x];
        double a = x - u, b = y - v;
        double depth
            = 0.5 * (inverse->xx * a * a + 2.0 * inverse->xy * a * b + inverse->yy * b * b);
        if (!isfinite (f) || depth > 0.5 * REACH_SIGMAS * REACH_SIGMAS)
          continue;
        double w = exp (-depth);
        sums->weight += w;
        sums->value += w * f;
        sums->first[0] += w * a;
        sums->first[1] += w * b;
        sums->moment[0] += w * f * a;
        sums->moment[1] += w * f * b;
      }
}

/* One place of the level, seen through the kernel. */
typedef struct
{
  double value, du, dv; /* and its derivatives along the level's axes */
  gboolean coarse;
} Seen;

/* J: derivative of the level's place by the plane's. The kernel's variance in pixels is J sigma^2
 * J^T less the 1/12 that the pixels have already. The value's derivative is exact: that of the
 * weighted mean. */
static gboolean
look (Seen *seen, const Level *level, double u, double v, const double j[2][2], double sigma)
{
  double s2 = sigma * sigma;
  Tensor c = { s2 * (j[0][0] * j[0][0] + j[0][1] * j[0][1]) - 1.0 / 12.0,
               s2 * (j[0][0] * j[1][0] + j[0][1] * j[1][1]),
               s2 * (j[1][0] * j[1][0] + j[1][1] * j[1][1]) - 1.0 / 12.0 };
  seen->coarse = lift (&c, LEAST_VARIANCE);
  double det = c.xx * c.yy - c.xy * c.xy;
  Tensor q = { c.yy / det, -c.xy / det, c.xx / det };
  Sums sums = { 0 };
  sum_kernel (&sums, level, u, v, &q, REACH_SIGMAS * sqrt (c.xx), REACH_SIGMAS * sqrt (c.yy));
  if (!(sums.weight >= LEAST_SHARE * 2.0 * TF_PI * sqrt (det)))
    return FALSE;
  seen->value = sums.value / sums.weight;
  double a = (sums.moment[0] - seen->value * sums.first[0]) / sums.weight;
  double b = (sums.moment[1] - seen->value * sums.first[1]) / sums.weight;
  seen->du = q.xx * a + q.xy * b;
  seen->dv = q.xy * a + q.yy * b;
  return TRUE;
}

static void
find_jacobian (const TfPatch *p, gsize k, double j[2][2])
{
  guint i = (guint)(k % p->width), at = (guint)(k / p->width);
  j[0][0] = difference (p->u, k, i, p->width, 1, p->step_mm);
  j[0][1] = difference (p->u, k, at, p->height, p->width, p->step_mm);
  j[1][0] = difference (p->v, k, i, p->width, 1, p->step_mm);
  j[1][1] = difference (p->v, k, at, p->height, p->width, p->step_mm);
}

static gboolean
is_whole (const double j[2][2], double u, double v)
{
  return isfinite (j[0][0] + j[0][1] + j[1][0] + j[1][1] + u + v);
}

gboolean
tf_patch_look (const TfPatch *p, double x, double y, double *value, double *dx, double *dy)
{
  double u = tf_patch_at (p, p->u, x, y), v = tf_patch_at (p, p->v, x, y), j[2][2];
  Level level = { .level = p->level };
  Seen seen;
  if (isnan (u) || isnan (v))
    return FALSE;
  guint column = (guint)((x - p->x0) / p->step_mm + 0.5),
        row = (guint)((y - p->y0) / p->step_mm + 0.5);
  find_jacobian (p, (gsize)row * p->width + column, j);
  level.pixels = tf_frame_get_level (p->frame, p->level, &level.width, &level.height);
  if (!is_whole ((const double (*)[2])j, u, v)
      || !look (&seen, &level, u, v, (const double (*)[2])j, p->sigma_mm))
    return FALSE;
  *value = seen.value;
  *dx = j[0][0] * seen.du + j[1][0] * seen.dv;
  *dy = j[0][1] * seen.du + j[1][1] * seen.dv;
  return TRUE;
}

static gboolean
is_wanted (const TfPatch *p, const TfFill *only, gsize k)
{
  double x, y, unit[3];
  if (only == NULL)
    return TRUE;
  tf_patch_node (p, k, &x, &y);
  tf_patch_unit (p, x, y, unit);
  return tf_fill_contains (only, unit);
}

static void
fill (TfPatch *p, const TfFill *only)
{
  gsize coarse = 0, n_seen = 0;
  Level level;
  choose_level (&level, p->frame, p->sigma_mm);
  p->level = level.level;
  place_nodes (p, p->frame, &level);
  for (gsize k = 0; k < p->n; k++)
    {
      double j[2][2];
      Seen seen;
      find_jacobian (p, k, j);
      if (!is_whole ((const double (*)[2])j, p->u[k], p->v[k]) || !is_wanted (p, only, k)
          || !look (&seen, &level, p->u[k], p->v[k], (const double (*)[2])j, p->sigma_mm))
        continue;
      p->seen[k] = 1;
      p->value[k] = seen.value;
      p->dx[k] = j[0][0] * seen.du + j[1][0] * seen.dv;
      p->dy[k] = j[0][1] * seen.du + j[1][1] * seen.dv;
      coarse += seen.coarse;
      n_seen++;
    }
  p->coarse = n_seen > 0 ? (double)coarse / (double)n_seen : 0.0;
}

TfPatch *
tf_patch_new (const TfFrame *frame, const TfPatchSpec *spec)
{
  g_return_val_if_fail (frame != NULL && spec->step_mm > 0.0, NULL);
  TfPatch *p = g_new0 (TfPatch, 1);
  set_axes (p, spec);
  p->radius_mm = tf_frame_get_geometry (frame)->radius_mm;
  p->step_mm = spec->step_mm;
  p->width = count_nodes (spec->half_x_mm, spec->step_mm, spec->most_nodes);
  p->height = count_nodes (spec->half_y_mm, spec->step_mm, spec->most_nodes);
  p->x0 = spec->step_mm * (spec->shift_x - 0.5 * (p->width - 1));
  p->y0 = spec->step_mm * (spec->shift_y - 0.5 * (p->height - 1));
  p->n = (gsize)p->width * p->height;
  p->value = g_new0 (double, p->n);
  p->dx = g_new0 (double, p->n);
  p->dy = g_new0 (double, p->n);
  p->mu = g_new (double, p->n);
  p->line = g_malloc_n (p->n, sizeof *p->line);
  p->seen = g_new0 (guint8, p->n);
  p->u = g_new (double, p->n);
  p->v = g_new (double, p->n);
  p->frame = tf_frame_ref ((TfFrame *)frame);
  p->sigma_mm = spec->fwhm_mm / FWHM_SIGMA;
  fill (p, spec->only);
  return p;
}

void
tf_patch_free (TfPatch *p)
{
  if (p == NULL)
    return;
  g_free (p->value);
  g_free (p->dx);
  g_free (p->dy);
  g_free (p->mu);
  g_free (p->line);
  g_free (p->seen);
  g_free (p->u);
  g_free (p->v);
  tf_frame_unref (p->frame);
  g_free (p);
}
