/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* The noise term of the uncertainty.
 *
 * Summing sigma^2 over the pixels above the floor forgets those that cross it. So for every pixel in the outline and each
 * polarity the variance of f (d) = d [d > floor] is taken, d normal about the smoothed field B with the frame's sigma:
 * z = (floor - B) / sigma, Q and q the normal tail and density, E f = B Q + sigma q,
 * E f^2 = (B^2 + sigma^2) Q + sigma (B + floor) q (moments of a truncated normal: Johnson, Kotz & Balakrishnan, Continuous
 * Univariate Distributions 1, ch. 13; from memory). It is carried to a pole by the influence (position - pole) * weight / flux, to the
 * tilt with the covariance of west and north, and multiplied by the frame's noise correlation.
 */

#include <math.h>
#include <string.h>

#include "tf-constants.h"
#include "tf-measure-private.h"

enum { STEPS = 256, Z_MAX = 7 };

/* Q and q for z in [0, Z_MAX], STEPS a unit. */
typedef struct
{
  float q[Z_MAX * STEPS + 2], tail[Z_MAX * STEPS + 2];
} Normal;

/* Sums over one polarity: variance of flux, and its first and second moments in place. */
typedef struct
{
  double v, vz;
  double vrr[6]; /* xx yy zz xy xz yz */
} Moments;

static void
fill_normal (Normal *normal)
{
  for (guint k = 0; k < G_N_ELEMENTS (normal->q); k++)
    {
      double z = (double)k / STEPS;
      normal->q[k] = (float)(exp (-0.5 * z * z) / sqrt (2.0 * TF_PI));
      normal->tail[k] = (float)(0.5 * erfc (z * G_SQRT2 / 2.0));
    }
}

/* Variance of f, in units of sigma^2, for a field @b and a floor @t, both in sigma. */
static inline double
variance (const Normal *normal, double b, double t)
{
  double z = t - b, size = fabs (z);
  if (size >= Z_MAX)
    return z > 0.0 ? 0.0 : 1.0;
  double at = size * STEPS;
  guint k = (guint)at;
  double part = at - k;
  double q = normal->q[k] + part * (normal->q[k + 1] - normal->q[k]);
  double tail = normal->tail[k] + part * (normal->tail[k + 1] - normal->tail[k]);
  if (z < 0.0)
    tail = 1.0 - tail;
  double mean = b * tail + q;
  return MAX (0.0, (b * b + 1.0) * tail + (b + t) * q - mean * mean);
}

static inline void
add_moment (Moments *m, double v, const double u[3])
{
  m->v += v;
  m->vz += v * u[2];
  m->vrr[0] += v * u[0] * u[0];
  m->vrr[1] += v * u[1] * u[1];
  m->vrr[2] += v * u[2] * u[2];
  m->vrr[3] += v * u[0] * u[1];
  m->vrr[4] += v * u[0] * u[2];
  m->vrr[5] += v * u[1] * u[2];
}

static void
add_up (const TfRegionSamples *samples, const float *smooth, const Normal *normal, Moments moments[2],
        double *noise_flux)
{
  double noise = 0.0;
  for (guint k = 0; k < samples->n; k++)
    {
      const TfSampled *s = &samples->samples[k];
      if (!(s->sigma > 0.0f))
        continue;
      double inverse = 1.0 / s->sigma, t = s->floor * inverse, b = smooth[k] * inverse;
      double w = s->weight * s->sigma;
      if (t < Z_MAX)
        noise += 2.0 * w * normal->q[(guint)(t * STEPS + 0.5)];
      double up = variance (normal, b, t), down = variance (normal, -b, t);
      if (up > 1e-9)
        add_moment (&moments[TF_POSITIVE], up * w * w, samples->pixels[k].unit);
      if (down > 1e-9)
        add_moment (&moments[TF_NEGATIVE], down * w * w, samples->pixels[k].unit);
    }
  *noise_flux = noise;
}

static double
project (const double m[6], const double a[3], const double b[3])
{
  return m[0] * a[0] * b[0] + m[1] * a[1] * b[1] + m[2] * a[2] * b[2] + m[3] * (a[0] * b[1] + a[1] * b[0])
         + m[4] * (a[0] * b[2] + a[2] * b[0]) + m[5] * (a[1] * b[2] + a[2] * b[1]);
}

/* Variances of a pole's place towards west and north and their covariance, deg^2. A pinned pole does not move. */
static void
pole_covariance (const TfAxis *axis, guint sign, const Moments *m, double c[3])
{
  double lon = axis->lon[sign] * TF_DEG, lat = axis->lat[sign] * TF_DEG;
  double west[3] = { -sin (lon), cos (lon), 0.0 };
  double north[3] = { -sin (lat) * cos (lon), -sin (lat) * sin (lon), cos (lat) };
  double flux = axis->flux[sign] * TF_DEG;
  c[0] = c[1] = c[2] = 0.0;
  if (axis->pinned[sign] || !(flux > 0.0))
    return;
  c[0] = project (m->vrr, west, west) / (flux * flux);
  c[1] = project (m->vrr, north, north) / (flux * flux);
  c[2] = project (m->vrr, west, north) / (flux * flux);
}

static void
axis_spread (const TfAxis *axis, double c[2][3], TfSpread *spread)
{
  double x = axis->dx, y = axis->dy, s2 = x * x + y * y;
  double west = c[0][0] + c[1][0], north = c[0][1] + c[1][1], both = c[0][2] + c[1][2];
  spread->dx = sqrt (west);
  spread->tilt = sqrt (MAX (0.0, x * x * north + y * y * west - 2.0 * x * y * both)) / s2 / TF_DEG;
  spread->separation = sqrt (MAX (0.0, (x * x * west + y * y * north + 2.0 * x * y * both) / s2));
}

void
tf_region_noise (const TfRegionSamples *samples, const TfAxis *axis, double sine_mean, TfSpread *spread,
                 double *noise_flux)
{
  Moments moments[2] = { 0 };
  double c[2][3], dipole = 0.0;
  double radius = tf_frame_get_geometry (samples->frame)->radius_mm;
  double correlation = tf_frame_noise_correlation (samples->frame);
  g_autofree Normal *normal = g_new (Normal, 1);
  g_autofree float *smooth = tf_region_smooth (samples);
  fill_normal (normal);
  add_up (samples, smooth, normal, moments, noise_flux);
  for (guint sign = 0; sign < 2; sign++)
    {
      Moments *m = &moments[sign];
      m->v *= correlation;
      m->vz *= correlation;
      for (guint k = 0; k < G_N_ELEMENTS (m->vrr); k++)
        m->vrr[k] *= correlation;
      pole_covariance (axis, sign, m, c[sign]);
      spread->flux[sign] = sqrt (m->v);
      spread->place[sign] = axis->has[sign] ? sqrt (c[sign][0] + c[sign][1]) : (double)NAN;
      dipole += m->vrr[2] - 2.0 * sine_mean * m->vz + sine_mean * sine_mean * m->v;
    }
  spread->dipole = 3.0 * sqrt (MAX (0.0, dipole)) / (4.0 * TF_PI * radius * radius * 1e16);
  axis_spread (axis, c, spread);
}
