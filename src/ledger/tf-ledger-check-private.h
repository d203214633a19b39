/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The parts of check that work on a second database beside the ledger. */

#include "tf-ledger-private.h"

enum
{
  TF_MOST_FINDINGS = 50 /* of one part of check: a file damaged all over need not be listed row by row */
};

/* Whether tables, indexes and views are those this version makes. */
gboolean tf_check_schema (TfLedger *ledger, TfNotes *findings, GError **error);
/* Replays all acts into empty projections and compares, by ids that are the same everywhere. */
gboolean tf_check_projections (TfLedger *ledger, TfNotes *findings, GError **error);
