/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfLimbShape: the quiet Sun's intensity in the frame's own units: a polynomial in mu times 1 + a
 * slope across the disk (real frames have some per cent of it, from their flat fields). Immutable,
 * a plain value. */

#include "tf-companion.h"

G_BEGIN_DECLS

enum
{
  /* of the own profile on a disk, as Neckel & Labs 1994, Solar Physics 153, 91 (from memory) */
  TF_LIMB_DEGREE = 5
};

typedef struct
{
  double c[TF_LIMB_DEGREE + 1]; /* of mu^0 ... */
  TfLimbMethod method;          /* the one that was used */
  double slope[2];              /* a solar radius of the picture, along x and y */
  double centre[2], radius;     /* of the disk, pixels */
  double mu_low, mu_high;       /* range it was fitted over */
  double scatter;               /* rms of the places taken for quiet, about 1 */
} TfLimbShape;

/** tf_limb_shape_fit: medians of rings of mu, spots and faculae thrown out, and a polynomial
 * through them; a narrow range of mu gets fewer terms, a very narrow one the published law. FALSE
 * when the frame has no values on the disk. */
gboolean tf_limb_shape_fit (TfLimbShape *shape, const TfFrame *intensity, TfLimbMethod method);
/** tf_limb_shape_at: of mu alone; tf_limb_shape_quiet: with the slope, at FITS pixel (x, y). */
double tf_limb_shape_at (const TfLimbShape *shape, double mu);
double tf_limb_shape_quiet (const TfLimbShape *shape, double mu, double x, double y);
/** tf_limb_published: 1 at mu = 1. */
double tf_limb_published (double mu);

G_END_DECLS
