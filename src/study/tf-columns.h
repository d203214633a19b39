/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The flat columns of 6-commands as one const table (name, unit in FITS and VOUnit spelling, UCD,
 * description, how to get it from a row): tables out and in, conditions of a sieve. */

#include "tf-ledger.h"
#include "tf-verdict.h"

G_BEGIN_DECLS

typedef enum
{
  TF_COLUMN_TEXT,
  TF_COLUMN_NUMBER,
  TF_COLUMN_INT, /* missing value allowed */
  TF_COLUMN_BOOL,
} TfColumnType;

/** TfExportRow: a ledger row with what is judged on reading. */
typedef struct
{
  const TfRow *row;
  TfSampleRow sample;
  TfVerdict verdict;
} TfExportRow;

typedef struct
{
  const char *name;
  TfColumnType type;
  const char *fits_unit, *vo_unit, *ucd, *description; /* units "" where none */
  double factor;                                       /* value in the unit = number * factor; 1 */
  /* of a row as the table's kind has it, for tf_columns a TfExportRow */
  double (*number) (gconstpointer row); /* NUMBER, INT, BOOL: NaN missing */
  char *(*text) (gconstpointer row);    /* TEXT: (transfer full) "" missing */
} TfColumn;
extern const TfColumn tf_columns[]; /* ends with name NULL; order and names as 6-commands */

/** tf_column_find: by name; NULL. */
const TfColumn *tf_column_find (const char *name);
/** tf_column_number: in the column's unit; NaN missing. */
double tf_column_number (const TfColumn *column, const TfExportRow *row);
/** tf_column_dup_text: of a text column; "" missing. */
char *tf_column_dup_text (const TfColumn *column, const TfExportRow *row);

G_END_DECLS
