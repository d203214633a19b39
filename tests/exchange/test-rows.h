/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/** add_row_tests: @demo_folder: data-demo/frames. */
void add_row_tests (const char *demo_folder);

void add_bring_tests (void);
void add_bundle_tests (void);
