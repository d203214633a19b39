/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfCells: somebody's table as it stands in a file: named columns with units, rows of cells. A cell
 * is UTF-8 text, or NULL where the source has no value; numbers of binary formats have the fewest
 * digits that read back the same. What cannot be read of single rows is a fault and the rest goes
 * on; only a file that is no such table is an error.
 */

#include <glib.h>

G_BEGIN_DECLS

typedef struct
{
  char *name, *unit; /* unit "" where none is given */
} TfCellsColumn;

/** TfFault: what is wrong with one row. */
typedef struct
{
  guint place;  /* line of a text file, row number elsewhere, from 1 */
  char *column; /* "" for the row as a whole */
  char *value;  /* as it stands there */
  char *reason; /* a sentence's part, in the current language */
} TfFault;
/** tf_faults_new: (element-type TfFault) */
GArray *tf_faults_new (void);
void tf_fault_add (GArray *faults, guint place, const char *column, const char *value,
                   const char *reason);

typedef struct
{
  const char *format;  /* "csv" "votable" "fits" "json" ..., static */
  gboolean by_line;    /* places are lines */
  GArray *columns;     /* TfCellsColumn */
  GPtrArray *rows;     /* char **, one cell a column, in order */
  GArray *places;      /* guint, one a row */
  GArray *faults;      /* TfFault: rows that could not be read */
  GPtrArray *not_read; /* char *: columns left aside, with the reason */
  GString *about;      /* what the table says of itself, at most 16 KiB */
  GStringChunk *texts;
} TfCells;

TfCells *tf_cells_new (const char *format, gboolean by_line);
void tf_cells_free (TfCells *table);
void tf_cells_add_column (TfCells *table, const char *name, const char *unit);
/** tf_cells_add_row: @cells: one a column, NULL missing; copied. */
void tf_cells_add_row (TfCells *table, guint place, const char *const *cells);
void tf_cells_add_about (TfCells *table, const char *line);
/** tf_cells_find: number of the column of exactly that name; -1. */
int tf_cells_find (const TfCells *table, const char *name);

/**
 * tf_cells_read: the format is told from what the file begins with: FITS (first binary or ASCII
 * table), VOTable (first TABLE; TABLEDATA, BINARY, BINARY2), JSON (as exported here, or an array of
 * objects), else CSV (RFC 4180, lines that begin with # before the header line taken as about).
 */
TfCells *tf_cells_read (const char *path, GError **error);
/** tf_cells_read_text: @bytes of one of the text formats; @name for messages. */
TfCells *tf_cells_read_text (const char *bytes, gsize n, const char *name, GError **error);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfCells, tf_cells_free)

G_END_DECLS
