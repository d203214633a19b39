/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include "tf-frame.h"

void add_conformance_tests (void);
void add_dialect_tests (void);
void add_header_tests (void);
void add_picture_tests (void);
void add_pixel_tests (void);
void add_real_tests (void);
void add_rice_tests (void);
void add_witness_tests (void);
void add_write_tests (void);

/** shared_data: (transfer full): path of a real file; NULL when the data are not there.
 * TF_SHARED_DATA overrides. */
char *shared_data (const char *name);
/** scratch_file: (transfer full): a name in the test's own folder, which goes away with the test.
 * */
char *scratch_file (const char *name);
/** normal: a normal deviate of unit sigma from a seeded generator. */
double normal (GRand *chance);
/** disk_info: of a made-up disk frame: Earth-like observer, B0 5 deg, the Sun's centre in the
 * middle. */
TfFrameInfo *disk_info (guint side, double radius_px, double north_angle_deg);
