/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/** add_sheet_tests: @demo_folder: data-demo/frames. */
void add_sheet_tests (const char *demo_folder);
void add_daily_summary_tests (void);
