/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include "tf-check.h"
#include "tf-simulate.h"

void add_sky_tests (void);
void add_shoot_tests (void);
void add_style_tests (void);
void test_simulate_add_cycles (void);
void add_scenario_tests (const char *demo_folder);

/** two_poles: a bipole of 8 deg, poles of 1 and 1.4 deg, 5e21 Mx. */
TfBipole two_poles (double lon_deg, double lat_deg);
/** Moment: flux of one sign and its mean direction, from an integral made here. */
typedef struct
{
  double flux_mx, lon_deg, lat_deg;
} Moment;
/** integrate: the field itself over a patch of longitude and sine latitude: [0] positive, [1]
 * negative. */
void integrate (const TfSun *sun, TfTime time, double lon_deg, double lat_deg, double half_deg,
                double step_deg, Moment moment[2]);
/** planar_tilt: by the definition of reference 3.2 (G), written here anew. */
double planar_tilt (const Moment *lead, const Moment *follow);
char *make_folder (void);
void remove_folder (char *folder);
