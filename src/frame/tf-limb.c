/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <stdlib.h>

#include "tf-constants.h"
#include "tf-witness.h"

/* The limb as the circle where pixels with a value end. Along each of RAYS rays from the centre
 * the outermost such place is found; a circle is fitted to all of them, those far off left out,
 * and the rays are cast again from its centre. Where the sky is filled too, the place is where
 * the scatter of the values changes, sector by sector. */

enum
{
  RAYS = 360,
  SECTORS = 72,
  FEWEST = 60, /* degrees of limb that must be seen */
};

typedef struct
{
  double x, y;
} Point;

typedef struct
{
  const float *pixels;
  int width, height;
  float least; /* only what is above has a value: the sky of an intensity picture has none */
} Picture;

/* Where limbs are looked for, in radii of the header's disk: first near it; a header of another
 * size of the picture may be far off. */
typedef struct
{
  double from, to;
} Range;

static const Range ranges[] = { { 0.4, 1.5 }, { 0.15, 6.0 } };
/* The sky of an intensity picture is darker than this share of the disk. */
static const double DARK = 0.2;

/* 1 with a value, 0 without, -1 outside the picture. */
static int
look (const Picture *p, double x, double y)
{
  int column = (int)floor (x - 0.5), row = (int)floor (y - 0.5);
  if (column < 0 || row < 0 || column >= p->width || row >= p->height)
    return -1;
  return p->pixels[(gssize)row * p->width + column] > p->least ? 1 : 0;
}

/* Outermost end of the values on one ray, at least two pixels within the picture; NaN when
 * there is none. */
static double
ray_edge (const Picture *p, double cx, double cy, double angle, double radius, const Range *range)
{
  double c = cos (angle), s = sin (angle), r = range->to * radius, step = MAX (1, radius / 250),
         least = range->from * radius;
  while (r > least && look (p, cx + r * c, cy + r * s) < 0)
    r -= step;
  if (look (p, cx + r * c, cy + r * s) == 1)
    return NAN; /* the values run on to the picture's edge */
  while (r > least && look (p, cx + r * c, cy + r * s) == 0)
    r -= step;
  if (r <= least)
    return NAN;
  double low = r, high = r + step;
  for (guint k = 0; k < 12; k++)
    {
      double middle = 0.5 * (low + high);
      if (look (p, cx + middle * c, cy + middle * s) == 1)
        low = middle;
      else
        high = middle;
    }
  return 0.5 * (low + high);
}

static guint
cast_rays (const Picture *p, double cx, double cy, double radius, const Range *range,
           Point *points)
{
  guint n = 0;
  for (guint k = 0; k < RAYS; k++)
    {
      double angle = (k + 0.37) * 2 * TF_PI / RAYS,
             r = ray_edge (p, cx, cy, angle, radius, range);
      if (!isnan (r))
        points[n++] = (Point){ cx + r * cos (angle), cy + r * sin (angle) };
    }
  return n;
}

/* -- the sky is filled: where does the scatter change? ---------------------------------------- */

typedef struct
{
  double n, sum, squares;
} Moments;

static void
gather (const Picture *p, double cx, double cy, double radius, guint bins, Moments *moments)
{
  for (int y = 0; y < p->height; y++)
    for (int x = 0; x < p->width; x++)
      {
        double dx = x + 1 - cx, dy = y + 1 - cy, r = hypot (dx, dy);
        double v = (double)p->pixels[(gssize)y * p->width + x];
        int bin = (int)floor ((r / radius - 0.7) / 0.6 * bins);
        if (bin < 0 || bin >= (int)bins || isnan (v))
          continue;
        guint sector = (guint)((atan2 (dy, dx) / (2 * TF_PI) + 1) * SECTORS) % SECTORS;
        Moments *m = &moments[sector * bins + (guint)bin];
        v = CLAMP (v, -500, 500); /* spots near the limb must not rule */
        m->n++;
        m->sum += v;
        m->squares += v * v;
      }
}

static double
log_likelihood (double n, double sum, double squares)
{
  double variance = n > 2 ? squares / n - (sum / n) * (sum / n) : NAN;
  return variance > 1e-12 ? -0.5 * n * log (variance) : n > 2 ? 0.5 * n * 27.6 : -INFINITY;
}

/* The most likely change of variance over one sector's bins; NaN when it is not clear. */
static double
sector_edge (const Moments *m, guint bins, double radius)
{
  double n = 0, sum = 0, squares = 0, best = -INFINITY, edge = NAN;
  Moments all = { 0 };
  for (guint k = 0; k < bins; k++)
    all = (Moments){ all.n + m[k].n, all.sum + m[k].sum, all.squares + m[k].squares };
  for (guint k = 0; k + 3 < bins; k++)
    {
      n += m[k].n;
      sum += m[k].sum;
      squares += m[k].squares;
      double l = log_likelihood (n, sum, squares)
                 + log_likelihood (all.n - n, all.sum - sum, all.squares - squares);
      if (k >= 3 && l > best)
        {
          best = l;
          edge = radius * (0.7 + 0.6 * (k + 1) / bins);
        }
    }
  return best - log_likelihood (all.n, all.sum, all.squares) > 25 ? edge : NAN;
}

static guint
scan_sectors (const Picture *p, double cx, double cy, double radius, Point *points)
{
  guint bins = (guint)CLAMP (0.6 * radius, 12, 2000), n = 0;
  g_autofree Moments *moments = g_new0 (Moments, (gsize)bins * SECTORS);
  gather (p, cx, cy, radius, bins, moments);
  for (guint k = 0; k < SECTORS; k++)
    {
      double angle = (k + 0.5) * 2 * TF_PI / SECTORS,
             r = sector_edge (moments + (gsize)k * bins, bins, radius);
      if (!isnan (r))
        points[n++] = (Point){ cx + r * cos (angle), cy + r * sin (angle) };
    }
  return n;
}

/* -- the circle ------------------------------------------------------------------------------ */

static int
compare (const void *a, const void *b)
{
  double d = *(const double *)a - *(const double *)b;
  return (d > 0) - (d < 0);
}

static double
median (double *values, guint n)
{
  qsort (values, n, sizeof *values, compare);
  return n % 2 == 1 ? values[n / 2] : 0.5 * (values[n / 2 - 1] + values[n / 2]);
}

/* One Gauss-Newton step of geometric least squares over points nearer to the circle than
 * @reach. FALSE: singular. */
static gboolean
improve (const Point *points, guint n, double reach, TfLimbFit *fit)
{
  double a[3][4] = { { 0 } };
  for (guint k = 0; k < n; k++)
    {
      double dx = points[k].x - fit->centre_x, dy = points[k].y - fit->centre_y, d = hypot (dx, dy);
      double off = d - fit->radius_px, row[3] = { dx / d, dy / d, 1 };
      if (!(fabs (off) <= reach))
        continue;
      for (int i = 0; i < 3; i++)
        {
          for (int j = 0; j < 3; j++)
            a[i][j] += row[i] * row[j];
          a[i][3] += row[i] * off;
        }
    }
  for (int i = 0; i < 3; i++)
    {
      if (!(a[i][i] > 1e-9 * n))
        return FALSE;
      for (int r = 0; r < 3; r++)
        for (int c = 3; r != i && c >= i; c--)
          a[r][c] -= a[i][c] * a[r][i] / a[i][i];
    }
  fit->centre_x += a[0][3] / a[0][0];
  fit->centre_y += a[1][3] / a[1][1];
  fit->radius_px += a[2][3] / a[2][2];
  return isfinite (fit->centre_x + fit->centre_y + fit->radius_px);
}

/* Robust: the reach shrinks to three times the scatter. */
static gboolean
fit_circle (const Point *points, guint n, TfLimbFit *fit)
{
  g_autofree double *off = g_new (double, n);
  double reach = INFINITY;
  for (guint turn = 0; turn < 20; turn++)
    {
      if (!improve (points, n, reach, fit))
        return FALSE;
      for (guint k = 0; k < n; k++)
        off[k] = fabs (hypot (points[k].x - fit->centre_x, points[k].y - fit->centre_y)
                       - fit->radius_px);
      fit->sigma_px = 1.4826 * median (off, n);
      reach = MAX (3 * fit->sigma_px, 0.5);
    }
  return TRUE;
}

/* @scan: also where the scatter changes. */
static gboolean
fit_limb (TfLimbFit *fit, const Picture *picture, double radius, const Range *range, gboolean scan)
{
  Point points[RAYS];
  fit->radius_px = radius;
  for (guint turn = 0; turn < 3; turn++)
    {
      double per_point = 360.0 / RAYS;
      fit->n_points
          = cast_rays (picture, fit->centre_x, fit->centre_y, fit->radius_px, range, points);
      if (scan && fit->n_points < FEWEST)
        {
          per_point = 360.0 / SECTORS;
          fit->n_points
              = scan_sectors (picture, fit->centre_x, fit->centre_y, fit->radius_px, points);
        }
      fit->seen_deg = fit->n_points * per_point;
      if (fit->seen_deg < FEWEST || !fit_circle (points, fit->n_points, fit)
          || !(fit->radius_px > range->from * radius && fit->radius_px < range->to / 0.6 * radius)
          || fit->sigma_px > 0.03 * fit->radius_px)
        return FALSE;
    }
  fit->found = TRUE;
  return TRUE;
}

static TfLimbFit
look_for_limb (const Picture *picture, const TfGeometry *geometry, gboolean scan)
{
  const TfLimbFit none = { .centre_x = NAN, .centre_y = NAN, .radius_px = NAN, .sigma_px = NAN };
  double cx, cy, radius = tf_geometry_disk_radius (geometry);
  if (geometry->projection != TF_PROJECTION_TAN || !tf_geometry_disk_centre (geometry, &cx, &cy)
      || !(radius > 4) || !(radius < 1e6))
    return none;
  if (cx < 0.5 * radius || cy < 0.5 * radius || cx > geometry->width - 0.5 * radius
      || cy > geometry->height - 0.5 * radius)
    scan = FALSE; /* a cut-out by its header: a change of scatter there is no limb */
  for (guint k = 0; k < G_N_ELEMENTS (ranges); k++)
    {
      TfLimbFit fit = { .centre_x = cx, .centre_y = cy };
      if (fit_limb (&fit, picture, radius, &ranges[k], scan && k == 0))
        return fit;
    }
  return none;
}

TfLimbFit
tf_limb_fit (const float *pixels, const TfGeometry *geometry)
{
  const Picture picture
      = { pixels, (int)geometry->width, (int)geometry->height, -(float)INFINITY };
  return look_for_limb (&picture, geometry, TRUE);
}

/* The median of some hundred pixels of the middle of the picture. */
static double
middle_value (const float *pixels, const TfGeometry *g)
{
  double values[400];
  guint n = 0;
  for (guint k = 0; k < G_N_ELEMENTS (values); k++)
    {
      guint x = (guint)(g->width * (0.25 + 0.5 * (k % 20 + 0.5) / 20)),
            y = (guint)(g->height * (0.25 + 0.5 * (k / 20 + 0.5) / 20));
      float v = pixels[(gsize)y * g->width + x];
      if (isfinite (v))
        values[n++] = (double)v;
    }
  return n > 0 ? median (values, n) : (double)NAN;
}

TfLimbFit
tf_limb_fit_bright (const float *pixels, const TfGeometry *geometry)
{
  double middle = middle_value (pixels, geometry);
  const Picture picture = { pixels, (int)geometry->width, (int)geometry->height,
                            middle > 0.0 ? (float)(DARK * middle) : -(float)INFINITY };
  return look_for_limb (&picture, geometry, FALSE);
}

void
tf_limb_judge (const TfLimbFit *fit, const TfGeometry *geometry, TfNotes *cautions)
{
  double cx, cy, radius = tf_geometry_disk_radius (geometry);
  if (!fit->found || !tf_geometry_disk_centre (geometry, &cx, &cy))
    return;
  double shift = hypot (fit->centre_x - cx, fit->centre_y - cy), growth = fit->radius_px - radius;
  double off = MAX (shift, fabs (growth)), limit = MAX (0.002 * radius, 0.5);
  if (off > MAX (0.01 * radius, 2 * limit))
    tf_notes_add (cautions, "header-lies", "dddddd", fit->centre_x, fit->centre_y, fit->radius_px,
                  cx, cy, radius);
  else if (off > limit)
    tf_notes_add (cautions, "limb-off", "dd", shift, growth);
}
