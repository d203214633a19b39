/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* The noise term of the uncertainty.
 *
 * Summing sigma^2 over the pixels above the floor forgets those that cross it. So for every
 * pixel in the outline and each polarity the variance of f (d) = d [d > floor] is taken, d
 * normal about the smoothed field B with the frame's sigma: z = (floor - B) / sigma, Q and q
 * the normal tail and density, E f = B Q + sigma q, E f^2 = (B^2 + sigma^2) Q + sigma (B +
 * floor) q (moments of a truncated normal: Johnson, Kotz & Balakrishnan, Continuous Univariate
 * Distributions 1, ch. 13; from memory). It is carried to a pole by the influence (position -
 * pole) * weight / flux, to the tilt with the covariance of west and north, and multiplied by
 * the frame's noise correlation. B itself keeps a share of the noise, sigma^2 times the sum of
 * the kernel's squares; the sigma that is laid over it is the rest, so that both together are
 * the pixel's own.
 *
 * Crossings also shift the mean: weak pixels come in above the floor more often than strong
 * ones drop out, E f > f (B). The shift grows with the number of pixels near the floor, the
 * scatter with its root, so on fine frames the shift rules. It is not taken off the flux
 * (noise_flux_mx tells what noise alone brings in); its square is added, each pixel's own and
 * that of the sum, so that the term is the root mean square departure from the measure without
 * noise.
 */

#include <math.h>
#include <string.h>

#include "tf-constants.h"
#include "tf-measure-private.h"

enum
{
  CHUNK = 256
};
static const float Z_MAX = 7.0f;

/* One chunk of pixels: the smoothed field, the floor, sigma and weight; and what comes out:
 * for both polarities the mean square departure and the shift, weighted, and what noise alone
 * brings in. */
typedef struct
{
  float field[CHUNK], floor[CHUNK], sigma[CHUNK], weight[CHUNK];
  float v[2][CHUNK], shift[2][CHUNK], noise[CHUNK];
} Chunk;

/* Weights are 1e16 Mx a gauss here, so that their squares stay within a float. */
static const float WEIGHT = 1e-16f;
static const double UNIT = 1e16;

/* Sums over one polarity: variance of flux, and its first and second moments in place; shift
 * of the flux and its first moment. */
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

/* Normal density for z in [0, Z_MAX]: 2^x by its exponent bits and a polynomial in the rest,
 * to 2e-7 of itself. */
static inline float
density (float z)
{
  union
  {
    guint32 bits;
    float value;
  } power;
  float x = -0.72134752f * z * z; /* z^2 / (2 ln 2) */
  int whole = (int)x;
  float g = (x - (float)whole + 0.5f) * 0.69314718f;
  float rest = 1.0f
               + g
                     * (1.0f
                        + g
                              * (0.5f
                                 + g
                                       * (0.16666667f
                                          + g
                                                * (0.041666667f
                                                   + g * (0.0083333333f + g * 0.0013888889f)))));
  power.bits = (guint32)(whole + 127) << 23;
  return 0.28209479f * rest * power.value; /* 1 / sqrt (2 pi) / sqrt (2) */
}

/* Normal tail from the density, to 7.5e-8: Zelen & Severo 1964, in Abramowitz & Stegun,
 * 26.2.17 (from memory). */
static inline float
tail_of (float z, float q)
{
  float t = 1.0f / (1.0f + 0.2316419f * z);
  return q * t
         * (0.31938153f
            + t * (-0.356563782f + t * (1.781477937f + t * (-1.821255978f + t * 1.330274429f))));
}

/* Mean square departure of f from f (b) and its mean, in units of sigma, for a field @b and a
 * floor @t, both in sigma. */
static inline void
departure (float b, float t, float *v, float *shift)
{
  /* Without a branch, so that the loop runs on vectors: each condition is a number, 1 or 0. */
  float z = t - b, size = fabsf (z);
  float near = (float)(size < Z_MAX), below = (float)(z > 0.0f), above = 1.0f - below;
  float held = near * size, q = density (held), side = tail_of (held, q);
  float tail = above + (below - above) * side, still = above * b;
  float mean = b * tail + q;
  float square = (b * b + 1.0f) * tail + (b + t) * q - still * (2.0f * mean - still);
  *v = near * fabsf (square) + (1.0f - near) * above;
  *shift = near * (mean - still);
}

/* @rest: what part of sigma is laid on. */
__attribute__ ((target_clones ("arch=x86-64-v3", "default"))) static void
depart (Chunk *chunk, float rest)
{
  for (guint k = 0; k < CHUNK; k++)
    {
      float laid = rest * chunk->sigma[k], over = 1.0f / laid, w = laid * chunk->weight[k];
      float b = chunk->field[k] * over, t = chunk->floor[k] * over, all = rest * t;
      float up, down, up_shift, down_shift, near = (float)(all < Z_MAX);
      departure (b, t, &up, &up_shift);
      departure (-b, t, &down, &down_shift);
      chunk->v[0][k] = up * w * w;
      chunk->v[1][k] = down * w * w;
      chunk->shift[0][k] = up_shift * w;
      chunk->shift[1][k] = down_shift * w;
      chunk->noise[k] = near * 2.0f * chunk->weight[k] * chunk->sigma[k] * density (near * all);
    }
}

static inline void
add_moment (Moments *m, double v, double shift, const double u[3])
{
  double x = v * u[0], y = v * u[1], z = v * u[2];
  m->shift += shift;
  m->shift_r[0] += shift * u[0];
  m->shift_r[1] += shift * u[1];
  m->shift_r[2] += shift * u[2];
  m->v += v;
  m->vz += z;
  m->vrr[0] += x * u[0];
  m->vrr[1] += y * u[1];
  m->vrr[2] += z * u[2];
  m->vrr[3] += x * u[1];
  m->vrr[4] += x * u[2];
  m->vrr[5] += y * u[2];
}

/* The last chunk is filled up with pixels that add nothing. A pixel without noise has one so
 * small that it does not matter. */
static void
fill_chunk (Chunk *chunk, const TfSampled *samples, const float *smooth, guint n)
{
  for (guint k = 0; k < n; k++)
    {
      chunk->field[k] = smooth[k];
      chunk->floor[k] = samples[k].floor;
      chunk->sigma[k] = samples[k].sigma > 1e-6f ? samples[k].sigma : 1e-6f;
      chunk->weight[k] = samples[k].weight * WEIGHT;
    }
  for (guint k = n; k < CHUNK; k++)
    {
      chunk->field[k] = chunk->weight[k] = 0.0f;
      chunk->floor[k] = chunk->sigma[k] = 1.0f;
    }
}

static void
add_chunk (const Chunk *chunk, const TfMaskPixel *pixels, guint n, Moments moments[2],
           double *noise)
{
  for (guint k = 0; k < n; k++)
    {
      *noise += chunk->noise[k];
      for (guint sign = 0; sign < 2; sign++)
        if (chunk->v[sign][k] > 0.0f)
          add_moment (&moments[sign], chunk->v[sign][k], chunk->shift[sign][k], pixels[k].unit);
    }
}

static void
scale_moments (Moments *m)
{
  m->v *= UNIT * UNIT;
  m->vz *= UNIT * UNIT;
  m->shift *= UNIT;
  for (guint k = 0; k < G_N_ELEMENTS (m->vrr); k++)
    m->vrr[k] *= UNIT * UNIT;
  for (guint k = 0; k < G_N_ELEMENTS (m->shift_r); k++)
    m->shift_r[k] *= UNIT;
}

static void
add_up (const TfRegionSamples *samples, const float *smooth, double rest, Moments moments[2],
        double *noise_flux)
{
  g_autofree Chunk *chunk = g_new (Chunk, 1);
  double noise = 0.0;
  for (guint first = 0; first < samples->n; first += CHUNK)
    {
      guint n = MIN (CHUNK, samples->n - first);
      fill_chunk (chunk, samples->samples + first, smooth + first, n);
      depart (chunk, (float)rest);
      add_chunk (chunk, samples->pixels + first, n, moments, &noise);
    }
  scale_moments (&moments[0]);
  scale_moments (&moments[1]);
  *noise_flux = noise * UNIT;
}

static double
project (const double m[6], const double a[3], const double b[3])
{
  return m[0] * a[0] * b[0] + m[1] * a[1] * b[1] + m[2] * a[2] * b[2]
         + m[3] * (a[0] * b[1] + a[1] * b[0]) + m[4] * (a[0] * b[2] + a[2] * b[0])
         + m[5] * (a[1] * b[2] + a[2] * b[1]);
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
tf_region_noise (const TfRegionSamples *samples, const TfAxis *axis, double sine_mean,
                 TfSpread *spread, double *noise_flux)
{
  Moments moments[2] = { 0 };
  Place places[2];
  double rest, dipole = 0.0, dipole_shift = 0.0;
  double radius = tf_frame_get_geometry (samples->frame)->radius_mm;
  g_autofree float *smooth = tf_region_smooth (samples, &rest);
  add_up (samples, smooth, rest, moments, noise_flux);
  for (guint sign = 0; sign < 2; sign++)
    {
      Moments *m = &moments[sign];
      correlate (m, tf_frame_noise_correlation (samples->frame));
      places[sign] = pole_place (axis, sign, m);
      const double *c = places[sign].c, *shift = places[sign].shift;
      spread->flux[sign] = hypot (sqrt (m->v), m->shift);
      spread->place[sign] = axis->has[sign]
                                ? sqrt (c[0] + c[1] + shift[0] * shift[0] + shift[1] * shift[1])
                                : (double)NAN;
      dipole += m->vrr[2] - 2.0 * sine_mean * m->vz + sine_mean * sine_mean * m->v;
      dipole_shift += (sign == TF_POSITIVE ? 1.0 : -1.0) * (m->shift_r[2] - sine_mean * m->shift);
    }
  spread->dipole = 3.0 * hypot (sqrt (MAX (0.0, dipole)), dipole_shift)
                   / (4.0 * TF_PI * radius * radius * 1e16);
  axis_spread (axis, places, spread);
}
