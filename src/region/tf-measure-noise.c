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
 * B itself keeps a share of the noise, sigma^2 times the sum of the kernel's squares; the sigma that is laid over it is the
 * rest, so that both together are the pixel's own.
 *
 * Crossings also shift the mean: weak pixels come in above the floor more often than strong ones drop out, E f > f (B). The
 * shift grows with the number of pixels near the floor, the scatter with its root, so on fine frames the shift rules. It is not
 * taken off the flux (noise_flux_mx tells what noise alone brings in); its square is added, each pixel's own and that of the sum, so
 * that the term is the root mean square departure from the measure without noise.
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

/* Sums over one polarity: variance of flux, and its first and second moments in place; shift of the flux and its first moment. */
typedef struct
{
  double v, vz;
  double vrr[6]; /* xx yy zz xy xz yz */
  double shift, shift_r[3];
} Moments;

/* Of a pole's place towards west and north: covariance (ww, nn, wn; deg^2) and shift (deg). */
typedef struct
{
  double c[3], shift[2];
} Place;

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

/* Mean square departure of f from f (b) and its mean, in units of sigma, for a field @b and a floor @t, both in sigma. */
static inline double
departure (const Normal *normal, double b, double t, double *shift)
{
  double z = t - b, size = fabs (z);
  *shift = 0.0;
  if (size >= Z_MAX)
    return z > 0.0 ? 0.0 : 1.0;
  double at = size * STEPS;
  guint k = (guint)at;
  double part = at - k;
  double q = normal->q[k] + part * (normal->q[k + 1] - normal->q[k]);
  double tail = normal->tail[k] + part * (normal->tail[k + 1] - normal->tail[k]);
  if (z < 0.0)
    tail = 1.0 - tail;
  double mean = b * tail + q, still = z > 0.0 ? 0.0 : b;
  *shift = mean - still;
  return MAX (0.0, (b * b + 1.0) * tail + (b + t) * q - still * (2.0 * mean - still));
}

static inline void
add_moment (Moments *m, double v, double shift, const double u[3])
{
  m->shift += shift;
  for (guint k = 0; k < 3; k++)
    m->shift_r[k] += shift * u[k];
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
add_up (const TfRegionSamples *samples, const float *smooth, double rest, const Normal *normal, Moments moments[2],
        double *noise_flux)
{
  double noise = 0.0;
  for (guint k = 0; k < samples->n; k++)
    {
      const TfSampled *s = &samples->samples[k];
      if (!(s->sigma > 0.0f))
        continue;
      double all = s->floor / s->sigma, sigma = rest * s->sigma, shift;
      double t = s->floor / sigma, b = smooth[k] / sigma, w = s->weight * sigma;
      if (all < Z_MAX)
        noise += 2.0 * s->weight * s->sigma * normal->q[(guint)(all * STEPS + 0.5)];
      double v = departure (normal, b, t, &shift);
      if (v > 1e-9)
        add_moment (&moments[TF_POSITIVE], v * w * w, shift * w, samples->pixels[k].unit);
      v = departure (normal, -b, t, &shift);
      if (v > 1e-9)
        add_moment (&moments[TF_NEGATIVE], v * w * w, shift * w, samples->pixels[k].unit);
    }
  *noise_flux = noise;
}

static double
project (const double m[6], const double a[3], const double b[3])
{
  return m[0] * a[0] * b[0] + m[1] * a[1] * b[1] + m[2] * a[2] * b[2] + m[3] * (a[0] * b[1] + a[1] * b[0])
         + m[4] * (a[0] * b[2] + a[2] * b[0]) + m[5] * (a[1] * b[2] + a[2] * b[1]);
}

static double
dot (const double a[3], const double b[3])
{
  return a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
}

/* A pinned pole does not move. */
static Place
pole_place (const TfAxis *axis, guint sign, const Moments *m)
{
  Place place = { 0 };
  double lon = axis->lon[sign] * TF_DEG, lat = axis->lat[sign] * TF_DEG;
  double west[3] = { -sin (lon), cos (lon), 0.0 };
  double north[3] = { -sin (lat) * cos (lon), -sin (lat) * sin (lon), cos (lat) };
  double flux = axis->flux[sign] * TF_DEG;
  if (axis->pinned[sign] || !(flux > 0.0))
    return place;
  place.c[0] = project (m->vrr, west, west) / (flux * flux);
  place.c[1] = project (m->vrr, north, north) / (flux * flux);
  place.c[2] = project (m->vrr, west, north) / (flux * flux);
  place.shift[0] = dot (m->shift_r, west) / flux;
  place.shift[1] = dot (m->shift_r, north) / flux;
  return place;
}

static void
axis_spread (const TfAxis *axis, const Place places[2], TfSpread *spread)
{
  double x = axis->dx, y = axis->dy, s2 = x * x + y * y;
  double dw = places[0].shift[0] - places[1].shift[0], dn = places[0].shift[1] - places[1].shift[1];
  double west = places[0].c[0] + places[1].c[0] + dw * dw;
  double north = places[0].c[1] + places[1].c[1] + dn * dn;
  double both = places[0].c[2] + places[1].c[2] + dw * dn;
  spread->dx = sqrt (west);
  spread->tilt = sqrt (MAX (0.0, x * x * north + y * y * west - 2.0 * x * y * both)) / s2 / TF_DEG;
  spread->separation = sqrt (MAX (0.0, (x * x * west + y * y * north + 2.0 * x * y * both) / s2));
}

static void
correlate (Moments *m, double correlation)
{
  m->v *= correlation;
  m->vz *= correlation;
  for (guint k = 0; k < G_N_ELEMENTS (m->vrr); k++)
    m->vrr[k] *= correlation;
}

void
tf_region_noise (const TfRegionSamples *samples, const TfAxis *axis, double sine_mean, TfSpread *spread,
                 double *noise_flux)
{
  Moments moments[2] = { 0 };
  Place places[2];
  double rest, dipole = 0.0, dipole_shift = 0.0;
  double radius = tf_frame_get_geometry (samples->frame)->radius_mm;
  g_autofree Normal *normal = g_new (Normal, 1);
  g_autofree float *smooth = tf_region_smooth (samples, &rest);
  fill_normal (normal);
  add_up (samples, smooth, rest, normal, moments, noise_flux);
  for (guint sign = 0; sign < 2; sign++)
    {
      Moments *m = &moments[sign];
      correlate (m, tf_frame_noise_correlation (samples->frame));
      places[sign] = pole_place (axis, sign, m);
      const double *c = places[sign].c, *shift = places[sign].shift;
      spread->flux[sign] = hypot (sqrt (m->v), m->shift);
      spread->place[sign] = axis->has[sign] ? sqrt (c[0] + c[1] + shift[0] * shift[0] + shift[1] * shift[1])
                                            : (double)NAN;
      dipole += m->vrr[2] - 2.0 * sine_mean * m->vz + sine_mean * sine_mean * m->v;
      dipole_shift += (sign == TF_POSITIVE ? 1.0 : -1.0) * (m->shift_r[2] - sine_mean * m->shift);
    }
  spread->dipole = 3.0 * hypot (sqrt (MAX (0.0, dipole)), dipole_shift) / (4.0 * TF_PI * radius * radius * 1e16);
  axis_spread (axis, places, spread);
}
