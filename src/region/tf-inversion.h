/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfInversion: the polarity inversion lines inside one outline, as polylines on the Sun.
 *
 * Places are Carrington longitude and latitude, deg, at the frame's time; points are joined by
 * great circles; a closed line's first point is repeated at its end; longitudes run on over 0/360
 * within a line. The positive polarity lies on the left of a line as it runs, seen from outside
 * with north up (west is right). Lengths in Mm along great circles, gradients in G/Mm. A plain
 * struct.
 */

#include <glib.h>
#include <json-glib/json-glib.h>

G_BEGIN_DECLS

typedef struct
{
  double lon_deg, lat_deg;
  double gradient_gauss_mm; /* of the field across the line */
  double transverse_gauss;  /* of the potential field along the surface */
} TfInversionPoint;

typedef struct
{
  guint n;
  TfInversionPoint *points; /* owned */
  gboolean closed;
  double length_mm;
  double mean_gradient_gauss_mm, max_gradient_gauss_mm; /* the mean is along the length */
} TfInversionLine;

typedef struct
{
  guint n;
  TfInversionLine *lines; /* owned; longest first */
} TfInversion;

void tf_inversion_clear (TfInversion *inversion);
void tf_inversion_copy (TfInversion *to, const TfInversion *from);
/** tf_inversion_length: of all lines, Mm. */
double tf_inversion_length (const TfInversion *inversion);
/**
 * tf_inversion_sum: along all stretches between neighbouring points whose mean gradient and mean
 * transverse field reach the two levels: their length, Mm (@length_mm, nullable), and the gradient
 * summed along it, G (@weighted_gauss, nullable).
 */
void tf_inversion_sum (const TfInversion *inversion, double radius_mm, double least_gradient,
                       double least_transverse, double *length_mm, double *weighted_gauss);
/** tf_inversion_build_json: an array of {length_mm, mean_gradient_gauss_mm, max_gradient_gauss_mm,
 * closed, points:[[lon, lat]...], gradients_gauss_mm:[...]} as the builder's next value. */
void tf_inversion_build_json (const TfInversion *inversion, JsonBuilder *builder);

G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (TfInversion, tf_inversion_clear)

G_END_DECLS
