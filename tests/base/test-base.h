/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Each file of this program adds the tests of one or two types. */

void add_bands_tests (void);
void add_notes_tests (void);
void add_options_tests (void);
void add_text_tests (void);
