/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Which mark of a passage stands for it. Mark conditions have acted before; region conditions act on
 * the pick.
 *
 * A mark without a mu, or a map's (which has no CMD: it was seen as it crossed the central meridian),
 * passes the rules' own limits. Of marks that are equal the earlier is taken. Where a source gives no
 * flux the greatest is looked for among those that have one, and without any the mark nearest the
 * central meridian is taken.
 */

#include <glib.h>

#include "tf-option.h"
#include "tf-sample.h"

G_BEGIN_DECLS

typedef enum
{
  TF_SAMPLING_FLUX,     /* (a) the greatest flux among mu >= mu_min */
  TF_SAMPLING_MERIDIAN, /* (b) nearest the central meridian */
  TF_SAMPLING_MEAN,     /* (c) the mean over |CMD| <= mean_cmd_deg; of tilts the axial mean */
  TF_SAMPLING_EVERY,    /* (d) every mark; intervals cluster by region all the same */
} TfSamplingRule;
/** tf_sampling_names: "greatest-flux" "central-meridian" "mean" "every-mark". */
extern const char *const tf_sampling_names[];

typedef struct
{
  int rule;
  double mu_min;       /* 0.5 */
  double mean_cmd_deg; /* 45 */
} TfSamplingParams;
extern const TfOption tf_sampling_options[];

typedef struct
{
  guint passages;      /* with any mark */
  guint without;       /* marks of passages that have none within the rule's limits */
  guint not_bracketed; /* picks at the greatest flux that are the first or the last mark */
} TfSamplingTally;

/**
 * tf_sampling_pick:
 * @marks: every mark that passed the mark conditions, in any order
 * @tally: (out) (nullable)
 * Returns: (transfer full): the picks (but for means a part of @marks), in the order in which their passages first come; under (d) all
 * marks. A pick's row number is its mark's; of a mean, that of the mark nearest the central meridian,
 * and a leader on which its marks differ is unsure.
 */
TfSample *
tf_sampling_pick (const TfSample *marks, const TfSamplingParams *params, TfSamplingTally *tally);

G_END_DECLS
