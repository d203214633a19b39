/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include "tf-pair.h"

G_BEGIN_DECLS

/** TfPairCell: the mean radial field of one cell on both frames, G, and the noise of the means. */
typedef struct
{
  double field[2], sigma[2]; /* instrument, reference */
  double mu;                 /* the smaller of the two means */
  guint32 block;             /* of 15 deg; one number a frame pair and block */
} TfPairCell;

/** tf_pair_cells: adds the cells (TfPairCell) that both frames cover; @pair numbers the frame pair. */
void tf_pair_cells (GArray *cells, const TfFrame *instrument, const TfFrame *reference,
                    guint32 pair, const TfPairParams *params);
/** tf_pair_fit: the line and the bins from the cells. */
void tf_pair_fit (TfPairScale *scale, const GArray *cells, const TfPairParams *params);

G_END_DECLS
