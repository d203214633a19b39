/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Differential rotation laws: omega = A + B sin^2 lat + C sin^4 lat, deg/day, sidereal.
 * A const table of name, coefficients and source; one law is chosen by its index.
 */

#include <glib.h>

#include "tf-time.h"

G_BEGIN_DECLS

typedef struct
{
  const char *name;   /* as in options: "snodgrass-ulrich-1990-magnetic" */
  double a, b, c;     /* deg/day, sidereal */
  const char *source; /* paper; "from memory" where nobody read it */
} TfRotationLaw;

/** tf_rotation_laws: ends with name NULL; index 0 is the default, Snodgrass & Ulrich 1990 magnetic.
 */
extern const TfRotationLaw tf_rotation_laws[];
/** tf_rotation_names: the names, NULL-ended, for an option table. */
extern const char *const tf_rotation_names[];

/** tf_rotation_rate: sidereal, deg/day, at latitude deg. */
double tf_rotation_rate (guint law, double lat_deg);
/** tf_rotation_carry: how far a point moves in Carrington longitude in @seconds, deg, west
 * positive. */
double tf_rotation_carry (guint law, double lat_deg, double seconds);

G_END_DECLS
