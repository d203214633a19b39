/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-limb-shape-private.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

enum
{
  RINGS = 60,
  ROUNDS = 5,
  MOST_SIDE = 700,  /* a level of the pyramid no larger than this is read */
  LEAST_PIXELS = 12 /* of a ring */
};
/* Pixels nearer the limb are left out. */
static const double LEAST_MU = 0.12;
/* After the first round places farther than this from the profile are not quiet. */
static const double QUIET = 0.08;
/* Ranges of mu from which a profile of degree 5, and of degree 2, is fitted. */
static const double WIDE = 0.5, NARROW = 0.15;

typedef struct
{
  GArray *rings[RINGS]; /* float: values without the slope */
  guint n;
  double square;             /* mean square of what is left, about 1 */
  double xx, xy, yy, xr, yr; /* sums for the slope: places and what is left */
} Profile;

double
tf_limb_shape_at (const TfLimbShape *shape, double mu)
{
  double sum = 0.0;
  for (int k = TF_LIMB_DEGREE; k >= 0; k--)
    sum = sum * mu + shape->c[k];
  return sum;
}

double
tf_limb_shape_quiet (const TfLimbShape *shape, double mu, double x, double y)
{
  return tf_limb_shape_at (shape, mu)
         * (1.0
            + (shape->slope[0] * (x - shape->centre[0]) + shape->slope[1] * (y - shape->centre[1]))
                  / shape->radius);
}

/* I(mu) / I(1) = 1 - u - v + u mu + v mu^2 with u = 0.93, v = -0.23 at 550 nm: Cox 2000, Allen's
 * Astrophysical Quantities, section 14.7 (from memory). */
double
tf_limb_published (double mu)
{
  return 1.0 - 0.93 + 0.23 + 0.93 * mu - 0.23 * mu * mu;
}

static int
by_value (const void *a, const void *b)
{
  float fa = *(const float *)a, fb = *(const float *)b;
  return (fa > fb) - (fa < fb);
}

static double
median (GArray *values)
{
  qsort (values->data, values->len, sizeof (float), by_value);
  guint half = values->len / 2;
  double upper = g_array_index (values, float, half);
  return values->len % 2 == 1 ? upper : 0.5 * (upper + g_array_index (values, float, half - 1));
}

static guint
ring_of (double mu)
{
  return MIN ((guint)(mu * RINGS), RINGS - 1);
}

static void
profile_empty (Profile *profile)
{
  for (guint k = 0; k < RINGS; k++)
    g_array_set_size (profile->rings[k], 0);
  profile->n = 0;
  profile->square = profile->xx = profile->xy = profile->yy = profile->xr = profile->yr = 0.0;
}

/* A value at a pixel; after the first round only when it is near the shape. */
static void
profile_add (Profile *p, const TfLimbShape *shape, gboolean first, double mu, double x, double y,
             double value)
{
  double u = (x - shape->centre[0]) / shape->radius, v = (y - shape->centre[1]) / shape->radius;
  double slope = 1.0 + shape->slope[0] * u + shape->slope[1] * v;
  double left = first ? 0.0 : value / (tf_limb_shape_at (shape, mu) * slope) - 1.0;
  float upright = (float)(value / slope);
  if (!(fabs (left) <= QUIET))
    return;
  g_array_append_val (p->rings[ring_of (mu)], upright);
  p->square += left * left;
  p->xx += u * u;
  p->xy += u * v;
  p->yy += v * v;
  p->xr += u * left;
  p->yr += v * left;
  p->n++;
}

static void
collect (Profile *profile, const TfFrame *frame, const TfLimbShape *shape, gboolean first)
{
  const TfGeometry *g = tf_frame_get_geometry (frame);
  guint level = 0, w, h;
  const float *pixels = tf_frame_get_level (frame, 0, &w, &h);
  while (MAX (w, h) > MOST_SIDE)
    {
      guint next_w, next_h;
      const float *next = tf_frame_get_level (frame, level + 1, &next_w, &next_h);
      if (next == NULL)
        break;
      pixels = next;
      w = next_w;
      h = next_h;
      level++;
    }
  double side = 1 << level;
  profile_empty (profile);
  for (guint y = 0; y < h; y++)
    for (guint x = 0; x < w; x++)
      {
        float value = pixels[(gsize)y * w + x];
        double px = x * side + 0.5 * (side + 1.0), py = y * side + 0.5 * (side + 1.0),
               mu = tf_geometry_mu (g, px, py);
        if (mu >= LEAST_MU && isfinite (value) && value > 0.0f)
          profile_add (profile, shape, first, mu, px, py, value);
      }
}

/* Normal equations of sum c_k mu^k = value, weighted, by elimination with pivots; FALSE when
 * singular. */
static gboolean
solve (double a[TF_LIMB_DEGREE + 1][TF_LIMB_DEGREE + 2], guint n)
{
  for (guint i = 0; i < n; i++)
    {
      guint best = i;
      for (guint r = i + 1; r < n; r++)
        if (fabs (a[r][i]) > fabs (a[best][i]))
          best = r;
      if (!(fabs (a[best][i]) > 1e-14))
        return FALSE;
      for (guint k = 0; k <= n; k++)
        {
          double keep = a[i][k];
          a[i][k] = a[best][k];
          a[best][k] = keep;
        }
      for (guint r = 0; r < n; r++)
        {
          double factor = a[r][i] / a[i][i];
          for (guint k = i; k <= n && r != i; k++)
            a[r][k] -= factor * a[i][k];
        }
    }
  for (guint i = 0; i < n; i++)
    a[i][n] /= a[i][i];
  return TRUE;
}

typedef struct
{
  double mu[RINGS], value[RINGS], weight[RINGS];
  guint n;
} Medians;

static void
find_medians (Medians *m, Profile *profile)
{
  m->n = 0;
  for (guint k = 0; k < RINGS; k++)
    if (profile->rings[k]->len >= LEAST_PIXELS)
      {
        m->mu[m->n] = (k + 0.5) / RINGS;
        m->weight[m->n] = sqrt ((double)profile->rings[k]->len);
        m->value[m->n++] = median (profile->rings[k]);
      }
}

static gboolean
fit_polynomial (TfLimbShape *shape, const Medians *m, guint degree)
{
  double a[TF_LIMB_DEGREE + 1][TF_LIMB_DEGREE + 2] = { { 0.0 } };
  double unit = m->value[m->n - 1];
  for (guint k = 0; k < m->n; k++)
    {
      double power[TF_LIMB_DEGREE + 1] = { 1.0 };
      for (guint i = 1; i <= degree; i++)
        power[i] = power[i - 1] * m->mu[k];
      for (guint i = 0; i <= degree; i++)
        {
          for (guint j = 0; j <= degree; j++)
            a[i][j] += m->weight[k] * power[i] * power[j];
          a[i][degree + 1] += m->weight[k] * power[i] * m->value[k] / unit;
        }
    }
  if (!solve (a, degree + 1))
    return FALSE;
  memset (shape->c, 0, sizeof shape->c);
  for (guint i = 0; i <= degree; i++)
    shape->c[i] = a[i][degree + 1] * unit;
  return TRUE;
}

static void
fit_published (TfLimbShape *shape, const Medians *m)
{
  double sum = 0.0, weight = 0.0;
  for (guint k = 0; k < m->n; k++)
    {
      sum += m->weight[k] * m->value[k] / tf_limb_published (m->mu[k]);
      weight += m->weight[k];
    }
  double one = sum / weight;
  memset (shape->c, 0, sizeof shape->c);
  shape->c[0] = one * tf_limb_published (0.0);
  shape->c[1] = one * 0.93;
  shape->c[2] = one * -0.23;
}

static void
fit (TfLimbShape *shape, const Medians *m, TfLimbMethod method)
{
  double range = m->mu[m->n - 1] - m->mu[0];
  guint degree = range >= WIDE && m->n > 2 * TF_LIMB_DEGREE ? TF_LIMB_DEGREE
                 : range >= NARROW && m->n > 5              ? 2
                                                            : 0;
  shape->mu_low = m->mu[0];
  shape->mu_high = m->mu[m->n - 1];
  shape->method = method == TF_LIMB_OWN && degree > 0 && fit_polynomial (shape, m, degree)
                      ? TF_LIMB_OWN
                      : TF_LIMB_PUBLISHED;
  if (shape->method == TF_LIMB_PUBLISHED)
    fit_published (shape, m);
}

/* On a disk what is left after the profile may lie aslant. */
static void
add_slope (TfLimbShape *shape, const Profile *p)
{
  double det = p->xx * p->yy - p->xy * p->xy;
  if (shape->mu_high - shape->mu_low < WIDE || !(det > 1e-6 * p->xx * p->yy))
    return;
  shape->slope[0] += (p->xr * p->yy - p->yr * p->xy) / det;
  shape->slope[1] += (p->yr * p->xx - p->xr * p->xy) / det;
}

gboolean
tf_limb_shape_fit (TfLimbShape *shape, const TfFrame *intensity, TfLimbMethod method)
{
  Medians medians;
  Profile profile;
  gboolean good = TRUE;
  memset (shape, 0, sizeof *shape);
  for (guint k = 0; k < RINGS; k++)
    profile.rings[k] = g_array_new (FALSE, FALSE, sizeof (float));
  const TfGeometry *g = tf_frame_get_geometry (intensity);
  good = tf_geometry_disk_centre (g, &shape->centre[0], &shape->centre[1]);
  shape->radius = tf_geometry_disk_radius (g);
  for (guint round = 0; round < ROUNDS && good; round++)
    {
      collect (&profile, intensity, shape, round == 0);
      find_medians (&medians, &profile);
      good = medians.n > 0;
      if (good)
        fit (shape, &medians, method);
      if (good && round > 0)
        add_slope (shape, &profile);
      shape->scatter = sqrt (profile.square / profile.n);
    }
  for (guint k = 0; k < RINGS; k++)
    g_array_unref (profile.rings[k]);
  return good;
}
