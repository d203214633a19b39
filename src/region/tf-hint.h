/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Hints: suggested outlines that no person has judged yet. A plain rule of general image processing; no Hale or Joy
 * expectation, no training: the leader is the western pole and nothing else.
 */

#include <glib.h>
#include <json-glib/json-glib.h>

#include "tf-measure.h"

G_BEGIN_DECLS

#define TF_HINT_RULE "plain/5"

/** TfHintParams: defaults, units, ranges and what each is for stand in tf_hint_options; no number of the rule is anywhere else. */
typedef struct
{
  /* the working grid and its levels */
  double cell_mm;
  double smooth_mm;
  double edge_mu;
  double low_sigma;
  double noise_sigma;
  double low_gauss;
  double high_sigma;
  double active_share;
  /* pieces of one sign */
  double hill_mm;
  double saddle;
  double patch_mx;
  /* joining */
  double reach_mm;
  double gap_mm;
  double gap_same_mm;
  double same_weight;
  double balance;
  double score_min;
  double length_mm;
  double length_mx;
  double length_least_mm;
  double length_most_mm;
  double centres_share;
  double nest_weaker;
  double nest_mx;
  double nest_small;
  /* parting */
  double part_gain;
  double part_compact;
  double part_gauss;
  double part_mx;
  /* left-overs */
  double single_weaker;
  double tidy_mm;
  double tidy_single;
  double tidy_weaker;
  double tidy_length;
  double plage_mm;
  double plage_centres_mm;
  /* what is offered */
  double bipole_mx;
  double unipolar_mx;
  double full_mu;
  double unipolar_mu;
  double small_mx;
  double small_weaker;
  double small_mm;
  /* the outline */
  double close_mm;
  double grow_mm;
  double soften_mm;
  double soften_mm2;
  double simplify_mm;
  /* cautions */
  double near_mm;
  double long_share;
  double one_sided;
} TfHintParams;
extern const TfOption tf_hint_options[];

typedef struct
{
  gboolean unipolar;
  TfOutline *outline;
  TfMeasure measure;   /* full pixels inside the outline, never the working grid */
  TfNotes *cautions;   /* of the hint itself: codes hint-... (the measure has its own) */
} TfHint;

void tf_hint_params_init (TfHintParams *params);
void tf_hint_free (TfHint *hint);
/**
 * tf_hints_find: (transfer full) (element-type TfHint): strongest first; empty on a quiet disk. NULL when cancelled, or on kinds it
 * refuses (the error says why).
 */
GPtrArray *tf_hints_find (const TfFrame *frame, const TfHintParams *params, const TfMeasureParams *measure,
                          const TfWork *work, GError **error);

G_END_DECLS
