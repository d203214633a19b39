/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* What the regions of a study add to the axial dipole, by cycle, hemisphere and verdict, as a table;
 * the region that works most against its cycle can be opened from its row. */

#include <gtk/gtk.h>

#include "tf-study.h"

G_BEGIN_DECLS

/** tf_dipole_table_fill: @findings: (nullable) */
void tf_dipole_table_fill (GtkGrid *grid, const TfFindings *findings);

G_END_DECLS
