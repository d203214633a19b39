/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <gsl/gsl_randist.h>
#include <gsl/gsl_rng.h>
#include <math.h>
#include <string.h>

#include "tf-sun-private.h"

/* What telescope and detector do to a picture: blur, noise, steps. NaN is "off the disk" before
 * and after. */

static const double FWHM_IN_SIGMA = 2.3548200450309493; /* 2 sqrt (2 ln 2) */

enum
{
  REACH_MAX = 64 /* pixels */
};

/* Weights of a Gaussian integrated over pixels, of unit sum. Returns the reach on either side. */
static int
make_kernel (double sigma, double weights[REACH_MAX + 1])
{
  int reach = CLAMP ((int)ceil (4.0 * sigma + 0.5), 1, REACH_MAX);
  double sum = 0.0, width = sigma * G_SQRT2;
  for (int k = 0; k <= reach; k++)
    {
      weights[k] = 0.5 * (erf ((k + 0.5) / width) - erf ((k - 0.5) / width));
      sum += k == 0 ? weights[k] : 2.0 * weights[k];
    }
  for (int k = 0; k <= reach; k++)
    weights[k] /= sum;
  return reach;
}

/* One line of @n values @stride apart; @line has n + 2 reach places. */
static void
blur_line (float *pixels, guint n, gsize stride, const double *weights, int reach, double *line)
{
  memset (line, 0, sizeof *line * (n + 2 * (guint)reach));
  for (guint k = 0; k < n; k++)
    line[k + (guint)reach] = (double)pixels[k * stride];
  for (guint k = 0; k < n; k++)
    {
      const double *at = line + k + reach;
      double sum = weights[0] * at[0];
      for (int j = 1; j <= reach; j++)
        sum += weights[j] * (at[-j] + at[j]);
      pixels[k * stride] = (float)sum;
    }
}

void
tf_detector_blur (float *pixels, guint width, guint height, double fwhm_px)
{
  double weights[REACH_MAX + 1];
  if (!(fwhm_px > 0.0))
    return;
  int reach = make_kernel (fwhm_px / FWHM_IN_SIGMA, weights);
  gsize n = (gsize)width * height;
  g_autofree guint8 *off = g_new (guint8, n);
  g_autofree double *line = g_new (double, MAX (width, height) + 2 * (guint)reach);
  for (gsize k = 0; k < n; k++)
    {
      off[k] = (guint8)(isnan (pixels[k]) != 0);
      if (off[k])
        pixels[k] = 0.0f;
    }
  for (guint y = 0; y < height; y++)
    blur_line (pixels + (gsize)y * width, width, 1, weights, reach, line);
  for (guint x = 0; x < width; x++)
    blur_line (pixels + x, height, width, weights, reach, line);
  for (gsize k = 0; k < n; k++)
    if (off[k])
      pixels[k] = NAN;
}

void
tf_detector_read (float *pixels, gsize n, double noise, double quantum, guint64 seed)
{
  gsl_rng *rng = gsl_rng_alloc (gsl_rng_mt19937);
  gsl_rng_set (rng, (unsigned long)((seed ^ (seed >> 32)) & 0xffffffffu));
  for (gsize k = 0; k < n; k++)
    {
      if (isnan (pixels[k]))
        continue;
      double value = (double)pixels[k];
      if (noise > 0.0)
        value += gsl_ran_gaussian_ziggurat (rng, noise);
      if (quantum > 0.0)
        value = rint (value / quantum) * quantum;
      pixels[k] = (float)value;
    }
  gsl_rng_free (rng);
}
