/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Tables out: the flat columns of 6-commands as CSV, VOTable, FITS table and JSON, from one
 * const table of columns (name, unit in FITS and VOUnit spelling, UCD, description, how to get
 * it from a row). Files are written beside the target and renamed. */

#include <glib.h>

#include "tf-columns.h"
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

/** tf_export_rows: (element-type TfExportRow): marks (and hints) judged under the study. @rows
 * keeps the ledger rows alive. */
GArray *tf_export_rows (TfLedger *ledger, const TfStudy *study, gboolean with_hints,
                        GPtrArray **rows, GError **error);
/** tf_export_write: format by the ending of @path: .csv .vot .fits .json. */
gboolean tf_export_write (const char *path, const GArray *rows, const TfStudy *study,
                          const char *source, GError **error);

G_END_DECLS
