/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Rows made by hand, with what is hard for a table in them: missing values, quotes, line ends,
 * letters beyond ASCII. */

#include "tf-export.h"

/** made_rows_new: (element-type TfExportRow): [0] a mark with everything, [1] a hint with next
 * to nothing, [2] a mark with awkward texts, [3] a mark on a map. @keep: (out) (transfer full):
 * owns what the rows point to. */
GArray *made_rows_new (GPtrArray **keep);
