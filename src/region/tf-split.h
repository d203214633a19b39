/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* A proposal where to split a region that is not one bipole.
 *
 * It comes from the pieces alone: those that hold piece_share of the flux are parted into two groups so that opposite fluxes balance
 * within each and lie near each other; where one polarity has one piece only that may be shared. The line is the great circle that
 * parts the groups best. Nothing is expected of which polarity leads or of the tilt. "Common practice, no source".
 */

#include "tf-measure.h"

G_BEGIN_DECLS

typedef struct
{
  TfVertex a, b;    /* just outside the outline on either side; at the frame's time */
  double misplaced; /* share (0-1) of the pieces' flux that lies on the wrong side */
} TfSplitLine;

/**
 * tf_split_propose: @outline is one of @frame; @params as it was measured with.
 * Returns: FALSE when it has not more than two pieces, or no line parts them in two halves that each hold a twentieth of the pieces' flux.
 */
gboolean tf_split_propose (TfSplitLine *line, const TfFrame *frame, const TfOutline *outline, const TfMeasureParams *params);

G_END_DECLS
