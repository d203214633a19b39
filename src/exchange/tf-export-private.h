/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include "tf-export.h"

/** TfFact: what a table says of itself before its rows. */
typedef struct
{
  const char *key; /* static */
  char *text;
} TfFact;

/** tf_facts_new: (element-type TfFact): program, method, floor, convention, study, source,
 * rows. English. */
GArray *tf_facts_new (const GArray *rows, const TfStudy *study, const char *source);

/** tf_facts_new_plain: program, source and the number of rows alone. */
GArray *tf_facts_new_plain (const char *source, guint n_rows);

/** tf_facts_add: one line more; takes @text. */
void tf_facts_add (GArray *facts, const char *key, char *text);

/** TfTableOut: a table to be written: the flat columns first where its rows begin with a TfExportRow
 * (a mark, or the mark that stands for a passage or a region), then those of its own kind. */
typedef struct
{
  const char *name;     /* "marks", static; in capitals the name of the FITS table */
  GPtrArray *columns;   /* const TfColumn * */
  const GArray *rows;   /* structs of one kind, which the columns' getters take */
  const GArray *facts;  /* TfFact */
} TfTableOut;
/** tf_table_out_init: @flat: rows begin with a TfExportRow; @more: (nullable): ended by name NULL. */
void tf_table_out_init (TfTableOut *table, const char *name, gboolean flat, const TfColumn *more,
                        const GArray *rows, const GArray *facts);
void tf_table_out_clear (TfTableOut *table);
G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (TfTableOut, tf_table_out_clear)
const TfColumn *tf_table_out_column (const TfTableOut *table, guint k);
/** tf_table_out_number, tf_table_out_dup_text: as tf_column_number() and tf_column_dup_text(). */
double tf_table_out_number (const TfTableOut *table, const TfColumn *column, guint row);
char *tf_table_out_dup_text (const TfTableOut *table, const TfColumn *column, guint row);

/** tf_export_write_table: in the format that the ending of @path says. */
gboolean tf_export_write_table (const char *path, const TfTableOut *table, GError **error);

/** TfFormat: one way to write a table. */
typedef struct
{
  const char *ending; /* ".csv" */
  gboolean (*write) (const char *path, const TfTableOut *table, GError **error);
} TfFormat;

gboolean tf_export_csv (const char *path, const TfTableOut *table, GError **error);
gboolean tf_export_votable (const char *path, const TfTableOut *table, GError **error);
gboolean tf_export_fits (const char *path, const TfTableOut *table, GError **error);
gboolean tf_export_json (const char *path, const TfTableOut *table, GError **error);
/** tf_export_dup_csv: the whole file. */
char *tf_export_dup_csv (const TfTableOut *table);

/** tf_export_save: @text into @path, whole or not at all. */
gboolean tf_export_save (const char *path, const char *text, gssize length, GError **error);
void tf_export_set_error (GError **error, const char *path, const char *reason);
