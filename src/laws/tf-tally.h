/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfTally: the counts of Hale's table and the robust line of Joy's law, kept right while one divide
 * after the other moves. Rows are judged once; a move judges only the rows of that hemisphere in the
 * months about that minimum, and what they change is added and taken away. The line is exact: rows
 * stand in the order of tilt over latitude from the beginning, with sums over blocks of them.
 *
 * A million rows cost about half a second to begin with and some milliseconds a move. What needs all
 * rows anew (draws, scatter, medians, other estimators) is not here. */

#include <glib.h>

#include "tf-hale.h"
#include "tf-joy.h"

G_BEGIN_DECLS

typedef struct _TfTally TfTally;

/** tf_tally_new: @sample must live as long as it. @verdicts: (nullable): those of @sample under
 * @divides: a pick whose passage changes cannot be said under any of them (tf-held.h). NULL: each
 * row speaks for itself. */
TfTally *tf_tally_new (const TfSample *sample, const TfVerdict *verdicts, const TfDivides *divides,
                       const TfVerdictParams *verdict, const TfJoyParams *joy);
void tf_tally_free (TfTally *tally);
/** tf_tally_offers: whether the line of that form and estimator is kept. */
gboolean tf_tally_offers (const TfJoyParams *joy);
/** tf_tally_move: @divides: as before but for the divide of that minimum and hemisphere. Returns how
 * many verdicts changed. */
guint tf_tally_move (TfTally *tally, const TfDivides *divides, int cycle, int hemisphere);
/** tf_tally_hale: (element-type TfHaleRow) (transfer full): as tf_hale_table(), without draws; regions
 * is 0: they are not counted. */
GArray *tf_tally_hale (const TfTally *tally, double level);
/** tf_tally_joy: n, slope and those without polarity over all cycles; slope NaN when not offered. */
TfJoyFit tf_tally_joy (const TfTally *tally);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfTally, tf_tally_free)

G_END_DECLS
