/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* What the verbs that read and write tables and drawings share. They are a module of their own,
 * loaded when one of them is called (tf-verb-load.c). */

#include "tf-batch.h"
#include "tf-bundle.h"

G_BEGIN_DECLS

/** tf_batch_bring_summary: a daily region summary; -1 when @file is none, else the exit code. @look: nothing is written. */
int tf_batch_bring_summary (const char *path, const char *file, const char *source, gboolean look, gboolean json);

/** TfLawsWords: which study laws runs, and what is kept of it. */
typedef struct
{
  char *study, *name, *person, *save_study, *keep_edition, *against, *figures, *bundle;
  gboolean keep_study;
} TfLawsWords;
void tf_laws_words_clear (TfLawsWords *words);
G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (TfLawsWords, tf_laws_words_clear)
void tf_batch_laws_add_words (GOptionContext *context, TfLawsWords *words);
/** tf_batch_laws_study: the study that --study names among the words, else that of a bundle, else the default one. @bundle: (out)
 * (transfer full) (nullable): when the words name one in a ledger's place. */
TfStudy *tf_batch_laws_study (int argc, char **argv, gboolean *from_file, TfBundle **bundle, GError **error);
/** tf_batch_laws_bundle: runs @study on a bundle's rows and says whether the numbers are the bundle's own. */
int tf_batch_laws_bundle (const char *path, const TfBundle *bundle, TfStudy *study, gboolean json, const TfLawsWords *words);
/** tf_batch_laws_keep: saves and keeps what was asked for; compares with an edition. */
int tf_batch_laws_keep (TfLedger *ledger, TfStudy *study, const TfFindings *findings, gboolean json,
                        const TfLawsWords *words);

/** tf_batch_print_findings: a study's findings for a person. */
void tf_batch_print_findings (const TfFindings *findings, const TfStudy *study);
/** tf_batch_export_series: one region through its passages into the table @out; returns the exit code. */
int tf_batch_export_series (const char *path, const char *out, const char *region, const char *source);

G_END_DECLS
