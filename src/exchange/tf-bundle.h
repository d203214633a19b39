/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Study bundle: what a paper's archive keeps, from which anybody can work the numbers out again with
 * no ledger and no frame. A zip of
 *
 *   study.json     the study, its moved divides and its even floor
 *   sample.csv     the rows that it read: the flat columns, then what else the laws ask of a row
 *   laws.json      its numbers, as `laws --json` prints them
 *   figures/       its charts, PDF
 *   versions.json  of the format, the program and its libraries; the generator of the draws; the
 *                  instruments' kept scales; SHA-256 of the other files
 *
 * Equal input gives equal bytes: no time of writing stands in it.
 */

#include "tf-study-take.h"

G_BEGIN_DECLS

/** tf_bundle_is: whether a file begins as a zip does. */
gboolean tf_bundle_is (const char *path);

/** tf_bundle_write: all of the file or none of it. @findings: of @study, run on the rows of @taken. */
gboolean tf_bundle_write (const char *path, const TfStudy *study, const TfFindings *findings,
                          const TfStudyTaken *taken, GError **error);

typedef struct
{
  TfStudy *study;
  TfStudyTaken *taken;
  JsonNode *laws;  /* the bundle's own numbers */
  char *program;   /* version that wrote it */
} TfBundle;
void tf_bundle_free (TfBundle *bundle);
/** tf_bundle_read: a file that is damaged, newer, or none of ours is an error of one sentence; nothing
 * is unpacked to disk. */
TfBundle *tf_bundle_read (const char *path, GError **error);

/**
 * tf_bundle_differences: what @findings, of @study run on the bundle's rows, say otherwise than the
 * bundle's own numbers, to the digits that are printed.
 * @not_compared: (out) (transfer full): other choices that need the ledger, which a bundle has not
 * Returns: (transfer full) (element-type utf8): "joy[3].slope: was 0.41, is 0.43"; empty: the same
 */
GPtrArray *tf_bundle_differences (const TfBundle *bundle, const TfStudy *study,
                                  const TfFindings *findings, GPtrArray **not_compared);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfBundle, tf_bundle_free)

G_END_DECLS
