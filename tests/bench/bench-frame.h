/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The frame that is measured on: an active Sun from the simulator in steps of 0.1 G, so in 32-bit integers. */

#include <glib.h>

/** bench_frame_make: Returns: exit code. */
int bench_frame_make (const char *path, guint size);
