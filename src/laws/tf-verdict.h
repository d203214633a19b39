/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfVerdict: what Hale's law test says of one region: keeps, breaks, or cannot say with the reason. Judged on reading;
 * never stored, so that a moved divide rewrites nothing. */

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
  const char *reason; /* note code when CANNOT_SAY: "hale-cycle-unsure", "hale-equator", "hale-straddles", "hale-leader-unsure",
                         "hale-witnesses-differ", "hale-near-limb", "hale-unipolar", "hale-steep", "hale-no-polarity",
                         "hale-no-cycle"; else NULL */
  TfCycleCall cycle;
  int expected;       /* sign the leader should have; 0 unknown. When the cycle is unsure: of cycle.number */
  TfVerdictKind as_number, as_other; /* when the cycle alone is unsure: both readings; else CANNOT_SAY */
} TfVerdict;

TfVerdict tf_verdict_judge (const TfSampleRow *row, const TfDivides *divides, const TfVerdictParams *params);
const char *tf_verdict_name (TfVerdictKind kind); /* "keeps" "breaks" "cannot say" */
/** tf_verdict_polarity_tilt: gamma_M in (-180, 180] from the axis tilt; NaN without a sure cycle, a sure leader or a tilt. */
double tf_verdict_polarity_tilt (const TfSampleRow *row, const TfVerdict *verdict);
/** tf_verdict_dup_text: one line for a person: "breaks Hale's law (cycle 24, sure: + should lead in the south)". */
char *tf_verdict_dup_text (const TfVerdict *verdict, const TfSampleRow *row, gboolean english);

G_END_DECLS
