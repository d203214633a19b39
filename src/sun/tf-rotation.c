/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-rotation.h"

#include <math.h>

#include "tf-constants.h"

/* Laws printed in microradians a second are turned into deg/day with 4.950355 (86400e-6 * 180/pi).
 * tf_rotation_names has the same order. */
const TfRotationLaw tf_rotation_laws[] = {
  { "snodgrass-ulrich-1990-magnetic", 14.252, -1.678, -2.401,
    "Snodgrass & Ulrich 1990, ApJ 351, 309: magnetic features" },
  { "snodgrass-ulrich-1990-doppler", 14.713, -2.396, -1.787,
    "Snodgrass & Ulrich 1990, ApJ 351, 309: Doppler features" },
  { "snodgrass-ulrich-1990-spectroscopic", 14.113, -1.698, -2.346,
    "Snodgrass & Ulrich 1990, ApJ 351, 309: spectroscopic" },
  { "snodgrass-1983-magnetic", 14.366, -2.297, -1.624,
    "Snodgrass 1983, ApJ 270, 288: magnetic, 2.902 - 0.464 - 0.328 microrad/s (from memory)" },
  { "howard-harvey-forgach-1990", 14.326, -2.119, -1.832,
    "Howard, Harvey & Forgach 1990, Solar Phys. 130, 295: small magnetic features, 2.894 - 0.428 - "
    "0.370 microrad/s" },
  { "howard-gilman-gilman-1984-groups", 14.393, -2.946, 0.0,
    "Howard, Gilman & Gilman 1984, ApJ 283, 373: sunspot groups (from memory)" },
  { "howard-gilman-gilman-1984-spots", 14.522, -2.840, 0.0,
    "Howard, Gilman & Gilman 1984, ApJ 283, 373: single sunspots (from memory)" },
  { "komm-howard-harvey-1993", 14.42, -2.00, -2.09,
    "Komm, Howard & Harvey 1993, Solar Phys. 145, 1: magnetic features (from memory)" },
  { "lamb-2017", 14.296, -1.847, -2.615,
    "Lamb 2017, ApJ 836, 10: magnetic features followed for a month" },
  { "allen", 14.44, -3.0, 0.0, "Allen, Astrophysical Quantities: sunspots" },
  { "howard-harvey-1970-spectroscopic", 13.76, -1.74, -2.19,
    "Howard & Harvey 1970, Solar Phys. 12, 23: spectroscopic, 2.78 - 0.351 - 0.443 microrad/s" },
  { "rigid-carrington", TF_W1_DEG_DAY, 0.0, 0.0, "the Carrington rate, 360 deg in 25.38 days" },
  { NULL, 0.0, 0.0, 0.0, NULL },
};

const char *const tf_rotation_names[] = {
  "snodgrass-ulrich-1990-magnetic",
  "snodgrass-ulrich-1990-doppler",
  "snodgrass-ulrich-1990-spectroscopic",
  "snodgrass-1983-magnetic",
  "howard-harvey-forgach-1990",
  "howard-gilman-gilman-1984-groups",
  "howard-gilman-gilman-1984-spots",
  "komm-howard-harvey-1993",
  "lamb-2017",
  "allen",
  "howard-harvey-1970-spectroscopic",
  "rigid-carrington",
  NULL,
};

double
tf_rotation_rate (guint law, double lat_deg)
{
  g_return_val_if_fail (law + 1 < G_N_ELEMENTS (tf_rotation_laws), NAN);
  const TfRotationLaw *l = &tf_rotation_laws[law];
  double s = sin (lat_deg * TF_DEG), s2 = s * s;
  return l->a + l->b * s2 + l->c * s2 * s2;
}

double
tf_rotation_carry (guint law, double lat_deg, double seconds)
{
  return (tf_rotation_rate (law, lat_deg) - TF_W1_DEG_DAY) * seconds / TF_DAY_S;
}
