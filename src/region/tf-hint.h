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

#define TF_HINT_RULE "plain/1"

typedef struct
{
  double cell_mm;       /* 4: working grid, Lambert equal area */
  double smooth_mm;     /* 4 */
  double low_sigma;     /* 3.5 */
  double low_gauss;     /* 12 */
  double high_sigma;    /* 8 */
  double patch_mx;      /* 4e19 */
  double reach_mm;      /* 40: gap of a candidate pair */
  double score_min;     /* 0.14 */
  double bipole_mx;     /* 3e20 */
  double unipolar_mx;   /* 2e21 */
  double grow_mm;       /* 6 */
  double simplify_mm;   /* 3 */
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
