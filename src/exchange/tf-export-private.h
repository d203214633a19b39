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

/** tf_facts_add: one line more; takes @text. */
void tf_facts_add (GArray *facts, const char *key, char *text);
/** tf_export_write_facts: in the format that the ending of @path says. */
gboolean
tf_export_write_facts (const char *path, const GArray *rows, const GArray *facts, GError **error);

/** TfFormat: one way to write a table. */
typedef struct
{
  const char *ending; /* ".csv" */
  gboolean (*write) (const char *path, const GArray *rows, const GArray *facts, GError **error);
} TfFormat;

gboolean tf_export_csv (const char *path, const GArray *rows, const GArray *facts, GError **error);
gboolean
tf_export_votable (const char *path, const GArray *rows, const GArray *facts, GError **error);
gboolean tf_export_fits (const char *path, const GArray *rows, const GArray *facts, GError **error);
gboolean tf_export_json (const char *path, const GArray *rows, const GArray *facts, GError **error);

/** tf_export_save: @text into @path, whole or not at all. */
gboolean tf_export_save (const char *path, const char *text, gssize length, GError **error);
void tf_export_set_error (GError **error, const char *path, const char *reason);
