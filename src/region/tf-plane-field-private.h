/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* A potential field above a flat plane whose component towards the observer is given at the plane's
 * nodes.
 *
 * Above the plane z = 0 the field is B = -grad phi with phi = sum over k of phi_k exp (i k.r - |k|
 * z), so that
 *   Bx_k = -i kx phi_k,   By_k = -i ky phi_k,   Bz_k = |k| phi_k,
 * and for one direction n to the observer the component seen is
 *   Bn_k = (nz |k| - i (nx kx + ny ky)) phi_k,
 * which gives phi_k; |Bz_k / Bn_k| is at most 1 / nz. The mean over the box (k = 0) is taken to be
 * radial. The relation is that of Alissandrakis 1981, A&A 100, 197 (force-free parameter 0; from
 * memory), derived anew here; that the estimate betters Blos / mu: Leka, Barnes & Wagner 2017,
 * Solar Physics 292, 36. The direction changes over the plane by as much as the Sun curves: what
 * the mean direction leaves unexplained at each node is solved for again until it is below a share
 * of the whole (our own step). The box is padded by zeros to twice its size, since the transform is
 * periodic.
 */

#include <glib.h>

G_BEGIN_DECLS

typedef struct
{
  guint width, height;
  double *bx, *by, *bz;  /* G at the plane: along x, along y, up */
  double *bz_dx, *bz_dy; /* derivatives of bz, G a unit of length */
  guint steps;           /* solved so often */
  double left;           /* rms of what is unexplained, as a share of the rms given */
} TfPlaneField;

/**
 * tf_plane_field_new:
 * @seen_field: width*height, G, component towards the observer, row-major, x along a row; 0 where
 *   unknown
 * @line: unit vector to the observer at each node (x, y, up); NULL: straight up, and @seen_field is
 *   bz itself
 * @use: 1 where @line is to be honoured
 * Returns: (transfer full) (nullable): NULL without memory or when the plane is not seen from
 *   above.
 */
TfPlaneField *tf_plane_field_new (guint width, guint height, double step, const double *seen_field,
                                  const double (*line)[3], const guint8 *use);
void tf_plane_field_free (TfPlaneField *field);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfPlaneField, tf_plane_field_free)

G_END_DECLS
