/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include <glib.h>

#include "made-sky.h"
#include "tf-check.h"

void add_ends_tests (void);
void add_links_tests (void);
void add_sky_tests (void);
