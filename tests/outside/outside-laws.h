/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Tables of seeded random cases of the statistics, in long form: the case's own figures stand in
 * every row of it. */

void print_fisher (void);
void print_pairs (void);
void print_angles (void);
void print_opinions (void);
