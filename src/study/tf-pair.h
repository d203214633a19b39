/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfPairScale: how the fields of two instruments compare, from frames taken nearly at once.
 *
 * Frames of two instruments are paired by time, each once. Their radial field (B_los / mu, or a radial
 * product as it is) is averaged over cells of equal size on the Sun, turned to the middle of the two
 * times by the rotation law: one time and one resolution, far coarser than the pixels of either. The
 * line through the cells is York's (2004), each cell with the noise of both means and, because the Sun
 * changes and frames do not lie quite alike, a share of its field. reference = factor x instrument +
 * offset. Its interval is by the bootstrap over blocks of 15 deg. Factors by mu and by field strength
 * stand beside it: one number is right only where they agree.
 *
 * A scale is offered. It is kept by a person's deed (tf-ledger-scales.h), and never applied silently.
 */

#include "tf-bands.h"
#include "tf-ledger.h"
#include "tf-option.h"
#include "tf-proportion.h"

G_BEGIN_DECLS

typedef struct
{
  double within_hours; /* 3 */
  double cell_deg;     /* 2 */
  double mu_min;       /* 0.4, of both frames */
  double change_share; /* 0.15 of a cell's field */
  int law;             /* rotation law */
  int most;            /* 40: frame pairs of two instruments */
  double level;        /* 0.95 */
  int draws, seed;     /* 200 */
} TfPairParams;
extern const TfOption tf_pair_options[];

typedef struct
{
  double from, to; /* of mu, or of the mean of both |field|, G */
  guint n;         /* cells */
  double factor;   /* NaN for fewer than 10 */
  TfInterval interval;
} TfPairBin;

enum
{
  TF_PAIR_MU_BINS = 4,
  TF_PAIR_FIELD_BINS = 4
};

typedef struct
{
  char *instrument, *reference;
  guint frame_pairs, cells;
  double hours;  /* median time apart */
  double factor; /* multiplies the instrument's field */
  double sigma;  /* York's, times the root of chi2 a degree of freedom where that is above 1 */
  TfInterval interval;
  double offset_gauss, offset_sigma;
  double chi2; /* a degree of freedom */
  TfPairBin by_mu[TF_PAIR_MU_BINS], by_field[TF_PAIR_FIELD_BINS];
} TfPairScale;
void tf_pair_scale_free (TfPairScale *scale);

/** tf_pair_scales: (element-type TfPairScale) every two instruments of the ledger that have frames near
 * each other in time; empty when none have. The reference is the instrument with more frames, by name
 * when they have as many. Frames whose file is gone or another are left out. */
GPtrArray *
tf_pair_scales (TfLedger *ledger, const TfPairParams *params, const TfWork *work, GError **error);
/** tf_pair_frames: two open frames alone. NULL when fewer than 20 cells are common. */
TfPairScale *
tf_pair_frames (const TfFrame *instrument, const TfFrame *reference, const TfPairParams *params);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfPairScale, tf_pair_scale_free)

G_END_DECLS
