/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include "tf-cells.h"

enum
{
  TF_MOST_COLUMNS = 4096,
  TF_LONGEST_CELL = 1 << 16, /* bytes */
};

TfCells *tf_cells_read_csv (const char *bytes, gsize n, const char *name, GError **error);
TfCells *tf_cells_read_json (const char *bytes, gsize n, const char *name, GError **error);
TfCells *tf_cells_read_votable (const char *bytes, gsize n, const char *name, GError **error);
TfCells *tf_cells_read_fits (const char *path, GError **error);
/* FALSE with the error set when there are none, too many, or two of one name. */
gboolean tf_cells_check_columns (const TfCells *table, const char *name, GError **error);
