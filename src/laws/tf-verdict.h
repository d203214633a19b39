/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfVerdict: what Hale's law test says of one region: keeps, breaks, or cannot say with the reason.
 * Judged on reading; never stored, so that a moved divide rewrites nothing. */

#include <glib.h>

#include "tf-divide.h"
#include "tf-sample.h"

G_BEGIN_DECLS

typedef enum
{
  TF_VERDICT_CANNOT_SAY,
  TF_VERDICT_KEEPS,
  TF_VERDICT_BREAKS,
} TfVerdictKind;

typedef struct
{
  double equator_deg;  /* 3: |lat| below this cannot be said */
  double mu_min;       /* 0.34 */
  double weaker_share; /* 0.10 of the flux */
  double steep_deg;    /* 75: |axis tilt| above this */
} TfVerdictParams;
extern const TfOption tf_verdict_options[];

typedef struct
{
  TfVerdictKind kind;
  const char *reason; /* note code when CANNOT_SAY, else NULL; see tf_verdict_judge() */
  TfCycleCall cycle;
  int expected; /* sign the leader should have, of cycle.number when unsure; 0 unknown */
  /* when the cycle alone is unsure: both readings; else CANNOT_SAY */
  TfVerdictKind as_number, as_other;
} TfVerdict;

/**
 * tf_verdict_judge: keeps, breaks, or cannot say. The first reason in this order is given:
 *
 * - what is no bipole: "hale-unipolar" (weaker polarity below weaker_share of the flux);
 * - what the source does not hold: "hale-no-polarity", "hale-no-place";
 * - where the law has no sign: "hale-straddles", "hale-equator" (|lat| < equator_deg);
 * - what cannot be seen well: "hale-near-limb" (mu < mu_min), "hale-steep" (|axis tilt| >
 *   steep_deg), "hale-leader-unsure", "hale-witnesses-differ";
 * - last the cycle: "hale-no-cycle", "hale-cycle-unsure", so that both readings are given only
 *   when the cycle alone is unsure.
 *
 * A quantity that the source lacks gives no reason by itself, except polarity and latitude.
 */
TfVerdict
tf_verdict_judge (const TfSampleRow *row, const TfDivides *divides, const TfVerdictParams *params);
/** tf_verdict_weaker_share: the weaker polarity's share of the flux, from the imbalance; NaN when
 * not known. */
double tf_verdict_weaker_share (const TfSampleRow *row);
const char *tf_verdict_name (TfVerdictKind kind); /* "keeps" "breaks" "cannot say" */
/** tf_verdict_polarity_tilt: gamma_M in (-180, 180] from the axis tilt; NaN without a sure cycle, a
 * sure leader or a tilt. */
double tf_verdict_polarity_tilt (const TfSampleRow *row, const TfVerdict *verdict);
/** tf_verdict_dup_text: one line for a person: "breaks Hale's law (cycle 24, sure: + should lead in
 * the south)". */
char *tf_verdict_dup_text (const TfVerdict *verdict, const TfSampleRow *row, gboolean english);

G_END_DECLS
