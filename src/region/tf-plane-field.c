/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <string.h>

#include <fftw3.h>

#include "tf-constants.h"
#include "tf-plane-field-private.h"

/* Corrections for the changing direction end here. */
enum
{
  MOST_STEPS = 16
};
static const double LEFT_ENOUGH = 1e-3;
/* And where a step takes less than this away: very wide boxes, which no plane fits. */
static const double SLOW = 0.85;

typedef struct
{
  guint width, height; /* padded */
  guint half;          /* columns of the transform: width / 2 + 1 */
  double step;
  double *real;
  fftw_complex *spectrum;
  fftw_plan forward, backward;
} Box;

/* Next size that is a product of 2, 3 and 5, and even. */
static guint
good_size (guint n)
{
  for (n += n % 2;; n += 2)
    {
      guint m = n;
      for (guint p = 2; p <= 5; p++)
        while (m % p == 0)
          m /= p;
      if (m == 1)
        return n;
    }
}

static void
box_clear (Box *box)
{
  if (box->forward != NULL)
    fftw_destroy_plan (box->forward);
  if (box->backward != NULL)
    fftw_destroy_plan (box->backward);
  fftw_free (box->real);
  fftw_free (box->spectrum);
}

/* FFTW's planner is the only part of it that is not thread safe: its own lock is switched on (again
 * and again does no harm). */
static gboolean
box_open (Box *box, guint width, guint height, double step)
{
  fftw_make_planner_thread_safe ();
  box->width = good_size (2 * width);
  box->height = good_size (2 * height);
  box->half = box->width / 2 + 1;
  box->step = step;
  box->real = fftw_alloc_real ((gsize)box->width * box->height);
  box->spectrum = fftw_alloc_complex ((gsize)box->half * box->height);
  if (box->real == NULL || box->spectrum == NULL)
    return FALSE;
  int w = (int)box->width, h = (int)box->height;
  box->forward = fftw_plan_dft_r2c_2d (h, w, box->real, box->spectrum, FFTW_ESTIMATE);
  box->backward = fftw_plan_dft_c2r_2d (h, w, box->spectrum, box->real, FFTW_ESTIMATE);
  return box->forward != NULL && box->backward != NULL;
}

G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (Box, box_clear)

static void
wave (const Box *box, guint row, guint column, double *kx, double *ky)
{
  int j = row <= box->height / 2 ? (int)row : (int)row - (int)box->height;
  *kx = 2.0 * TF_PI * column / (box->width * box->step);
  *ky = 2.0 * TF_PI * j / (box->height * box->step);
}

/* A complex number as two reals: the language's own product and quotient look for infinities at
 * every step. */
typedef struct
{
  double re, im;
} Wave;

/* Adds to @phi (and at k = 0 to Bz itself) the potential of the field in box->real as seen along
 * @n: with a = nz |k| and b = nx kx + ny ky, seen / (a - i b) = seen (a + i b) / (a^2 + b^2). */
static void
add_potential (Box *box, const double n[3], Wave *phi)
{
  double count = (double)box->width * box->height;
  fftw_execute (box->forward);
  for (guint row = 0; row < box->height; row++)
    for (guint column = 0; column < box->half; column++)
      {
        gsize at = (gsize)row * box->half + column;
        double kx, ky;
        wave (box, row, column, &kx, &ky);
        double a = at == 0 ? n[2] : n[2] * sqrt (kx * kx + ky * ky), b = n[0] * kx + n[1] * ky;
        double re = box->spectrum[at][0] / count, im = box->spectrum[at][1] / count,
               size = a * a + b * b;
        phi[at].re += (re * a - im * b) / size;
        phi[at].im += (re * b + im * a) / size;
      }
}

typedef enum
{
  PART_X,
  PART_Y,
  PART_Z,
  PART_Z_DX,
  PART_Z_DY
} Part;

/* One component of the field over the whole box, into box->real: phi times a real or an imaginary
 * number. */
static void
make_part (Box *box, const Wave *phi, Part part)
{
  for (guint row = 0; row < box->height; row++)
    for (guint column = 0; column < box->half; column++)
      {
        gsize at = (gsize)row * box->half + column;
        double kx, ky;
        wave (box, row, column, &kx, &ky);
        double k = sqrt (kx * kx + ky * ky);
        double imaginary = part == PART_X      ? -kx
                           : part == PART_Y    ? -ky
                           : part == PART_Z_DX ? kx * k
                                               : ky * k;
        box->spectrum[at][0] = part == PART_Z ? k * phi[at].re : -imaginary * phi[at].im;
        box->spectrum[at][1] = part == PART_Z ? k * phi[at].im : imaginary * phi[at].re;
      }
  if (part == PART_Z)
    {
      box->spectrum[0][0] = phi[0].re;
      box->spectrum[0][1] = phi[0].im;
    }
  fftw_execute (box->backward);
}

static void
copy_out (const Box *box, double *out, guint width, guint height)
{
  for (guint y = 0; y < height; y++)
    memcpy (out + (gsize)y * width, box->real + (gsize)y * box->width, width * sizeof *out);
}

static void
copy_in (Box *box, const double *in, guint width, guint height)
{
  memset (box->real, 0, (gsize)box->width * box->height * sizeof *box->real);
  for (guint y = 0; y < height; y++)
    memcpy (box->real + (gsize)y * box->width, in + (gsize)y * width, width * sizeof *in);
}

static void
make_field (TfPlaneField *field, Box *box, const Wave *phi)
{
  make_part (box, phi, PART_X);
  copy_out (box, field->bx, field->width, field->height);
  make_part (box, phi, PART_Y);
  copy_out (box, field->by, field->width, field->height);
  make_part (box, phi, PART_Z);
  copy_out (box, field->bz, field->width, field->height);
}

/* What is still unexplained at each node; its rms as a share of the field's. */
static double
find_rest (const TfPlaneField *field, const double *seen, const double (*line)[3],
           const guint8 *use, const double n[3], double *rest)
{
  double left = 0.0, all = 0.0;
  for (gsize k = 0; k < (gsize)field->width * field->height; k++)
    {
      const double *l = use[k] ? line[k] : n;
      rest[k] = seen[k] - (l[0] * field->bx[k] + l[1] * field->by[k] + l[2] * field->bz[k]);
      left += rest[k] * rest[k];
      all += seen[k] * seen[k];
    }
  return all > 0.0 ? sqrt (left / all) : 0.0;
}

static gboolean
mean_line (guint width, guint height, const double (*line)[3], const guint8 *use, double n[3])
{
  double length = 0.0;
  memset (n, 0, 3 * sizeof *n);
  for (gsize k = 0; k < (gsize)width * height; k++)
    for (guint i = 0; i < 3 && use[k]; i++)
      n[i] += line[k][i];
  for (guint i = 0; i < 3; i++)
    length += n[i] * n[i];
  for (guint i = 0; i < 3; i++)
    n[i] /= sqrt (length);
  return length > 0.0 && n[2] > 0.01;
}

/* Newest corrections are kept only while they help. */
static void
correct (TfPlaneField *field, Box *box, const double *seen, const double (*line)[3],
         const guint8 *use, const double n[3], Wave *phi)
{
  gsize size = (gsize)box->half * box->height;
  g_autofree double *rest = g_new (double, (gsize)field->width * field->height);
  g_autofree Wave *before = g_malloc_n (size, sizeof *before);
  field->left = find_rest (field, seen, line, use, n, rest);
  while (field->left > LEFT_ENOUGH && field->steps < MOST_STEPS)
    {
      memcpy (before, phi, size * sizeof *phi);
      copy_in (box, rest, field->width, field->height);
      add_potential (box, n, phi);
      make_field (field, box, phi);
      field->steps++;
      double left = find_rest (field, seen, line, use, n, rest);
      if (left >= field->left)
        {
          memcpy (phi, before, size * sizeof *phi);
          make_field (field, box, phi);
          return;
        }
      gboolean slow = left > SLOW * field->left;
      field->left = left;
      if (slow)
        return;
    }
}

TfPlaneField *
tf_plane_field_new (guint width, guint height, double step, const double *seen,
                    const double (*line)[3], const guint8 *use)
{
  g_return_val_if_fail (width > 0 && height > 0 && step > 0.0, NULL);
  g_auto (Box) box = { 0 };
  double n[3] = { 0.0, 0.0, 1.0 };
  gsize count = (gsize)width * height;
  if ((line != NULL && !mean_line (width, height, line, use, n))
      || !box_open (&box, width, height, step))
    return NULL;
  TfPlaneField *field = g_new0 (TfPlaneField, 1);
  field->width = width;
  field->height = height;
  field->bx = g_new (double, count);
  field->by = g_new (double, count);
  field->bz = g_new (double, count);
  field->bz_dx = g_new (double, count);
  field->bz_dy = g_new (double, count);
  g_autofree Wave *phi = g_malloc0_n ((gsize)box.half * box.height, sizeof *phi);
  copy_in (&box, seen, width, height);
  add_potential (&box, n, phi);
  make_field (field, &box, phi);
  field->steps = 1;
  if (line != NULL)
    correct (field, &box, seen, line, use, n, phi);
  make_part (&box, phi, PART_Z_DX);
  copy_out (&box, field->bz_dx, width, height);
  make_part (&box, phi, PART_Z_DY);
  copy_out (&box, field->bz_dy, width, height);
  return field;
}

void
tf_plane_field_free (TfPlaneField *field)
{
  if (field == NULL)
    return;
  g_free (field->bx);
  g_free (field->by);
  g_free (field->bz);
  g_free (field->bz_dx);
  g_free (field->bz_dy);
  g_free (field);
}
