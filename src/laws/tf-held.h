/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Whether a passage holds to one verdict. A leader that is another on one day in four says nothing
 * about Hale's law, whichever day is picked.
 *
 * Of a passage's marks with mu >= 0.5 those count that say anything; one that cannot say neither holds
 * nor contradicts.
 */

#include <glib.h>

#include "tf-verdict.h"

G_BEGIN_DECLS

typedef struct
{
  guint held, of; /* marks that say what the pick says; marks that say anything */
} TfHeld;

#define TF_HELD_MU 0.5    /* the marks that are asked */
#define TF_HELD_SHARE 0.8 /* least share that must agree */

/**
 * tf_held:
 * @marks, @verdicts: every mark of the sample and its verdict, row by row, in any order
 * @picks, @pick_verdicts: the marks that stand for their passages; a verdict of one whose passage
 *   changes becomes TF_VERDICT_CANNOT_SAY with the reason "hale-changes"
 * Returns: (transfer full): one a pick; a pick that cannot say by itself holds 0 of n.
 */
TfHeld *tf_held (const TfSample *marks, const TfVerdict *verdicts, const TfSample *picks,
                 TfVerdict *pick_verdicts);

G_END_DECLS
