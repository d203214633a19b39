/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include <glib.h>

void add_hint_built_tests (void);
void add_hint_real_tests (void);
void add_hint_simulated_tests (void);
