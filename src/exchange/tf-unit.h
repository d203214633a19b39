/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Units of other people's tables: how many of one make one of another. A unit is an optional power
 * or number ("10**20", "10^20", "1e20"), then a name: angles, flux, field, length, shares. VOUnits
 * 1.0 and the FITS standard 4.0, section 4.3, have the spellings; Mx and G are the trade's. */

#include <glib.h>

G_BEGIN_DECLS

/** tf_unit_factor: value in @to = value in @from * factor; NaN when one is not known or they are of
 * different kinds. "" and "1" are plain numbers. */
double tf_unit_factor (const char *from, const char *to);

G_END_DECLS
