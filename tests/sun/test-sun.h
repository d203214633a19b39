/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Each file of this program adds the tests of one type. */

void add_time_tests (void);
void add_observer_tests (void);
void add_geometry_tests (void);
void add_outline_tests (void);
void add_outline_combine_tests (void);
