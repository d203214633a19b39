/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* How what stands in the slip beside the numbers was got: place, verdict, class, cautions, the region
 * that is joined, the split that is proposed. Pure text, current language. */

#include "tf-session.h"
#include "tf-slip-words.h"

G_BEGIN_DECLS

char *tf_how_dup_place (const TfReading *reading, TfSession *session);
char *tf_how_dup_verdict (const TfReading *reading, const TfJudge *judge);
char *tf_how_dup_class (const TfRow *row);
char *tf_how_dup_cautions (const TfReading *reading);
char *tf_how_dup_joins (void);
char *tf_how_dup_proposal (const TfProposal *proposal, TfUnits units);
/** tf_words_dup_half: "tilt +7.2° ± 1.4°, + leads, 6.1·10²¹ Mx" */
char *tf_words_dup_half (const TfMeasure *measure, TfUnits units);

G_END_DECLS
