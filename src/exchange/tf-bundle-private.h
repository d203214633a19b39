/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include "tf-bundle.h"
#include "tf-cells.h"
#include "tf-columns.h"

#define TF_BUNDLE_STUDY    "study.json"
#define TF_BUNDLE_SAMPLE   "sample.csv"
#define TF_BUNDLE_LAWS     "laws.json"
#define TF_BUNDLE_FIGURES  "figures/"
#define TF_BUNDLE_VERSIONS "versions.json"

enum
{
  TF_BUNDLE_FORMAT = 1 /* rises when an older program could not read it rightly */
};

/* A row of sample.csv. */
typedef struct
{
  TfExportRow flat; /* first: the flat columns are got from it */
  gboolean picked;
} TfBundleRow;
/* What stands behind the flat columns; ends with name NULL. */
extern const TfColumn tf_bundle_columns[];

/** tf_bundle_add_row: row @k of a table read from sample.csv; NULL, or (transfer full) what is wrong
 * with it. */
char *tf_bundle_add_row (TfStudyTaken *taken, const TfCells *table, guint k);
