/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Tables out: the flat columns of 6-commands as CSV, VOTable, FITS table and JSON, from one
 * const table of columns (name, unit in FITS and VOUnit spelling, UCD, description, how to get
 * it from a row). Files are written beside the target and renamed. */

#include <glib.h>

#include "tf-study.h"

G_BEGIN_DECLS

#define TF_EXCHANGE_ERROR (tf_exchange_error_quark ())
GQuark tf_exchange_error_quark (void);
typedef enum
{
  TF_EXCHANGE_ERROR_FORMAT, /* ending not known: names those that are */
  TF_EXCHANGE_ERROR_WRITE,
  TF_EXCHANGE_ERROR_READ,   /* not there, or no table: says what it is and what to do */
} TfExchangeError;

/** tf_export_fail_read: "@name: @reason" as TF_EXCHANGE_ERROR_READ. */
void tf_export_fail_read (GError **error, const char *name, const char *reason);

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
  double (*number) (const TfExportRow *row);           /* NUMBER, INT, BOOL: NaN missing */
  char *(*text) (const TfExportRow *row);              /* TEXT: (transfer full) "" missing */
} TfColumn;
extern const TfColumn tf_columns[]; /* ends with name NULL; order and names as 6-commands */

/** tf_export_rows: (element-type TfExportRow): marks (and hints) judged under the study. @rows
 * keeps the ledger rows alive. */
GArray *tf_export_rows (TfLedger *ledger, const TfStudy *study, gboolean with_hints,
                        GPtrArray **rows, GError **error);
/** tf_export_write: format by the ending of @path: .csv .vot .fits .json. */
gboolean tf_export_write (const char *path, const GArray *rows, const TfStudy *study,
                          const char *source, GError **error);

G_END_DECLS
