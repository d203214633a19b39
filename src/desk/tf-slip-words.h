/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The slip's numbers in words: for each line a value, what stands under it, and how it was got.
 * Pure text, current language. */

#include "tf-frame-item.h"
#include "tf-judge.h"
#include "tf-units.h"

G_BEGIN_DECLS

typedef enum
{
  TF_LINE_TILT,
  TF_LINE_LEADING, /* with the witnesses of which polarity leads */
  TF_LINE_FOLLOWING,
  TF_LINE_SEPARATION,
  TF_LINE_SHAPE, /* imbalance, compactness, pieces */
  TF_LINE_FLOOR, /* floor, noise, mu */
  TF_N_LINES,
} TfLine;

/** TfReading: what the words are about. */
typedef struct
{
  const TfMeasure *measure;
  const TfVerdict *verdict;
  const TfSampleRow *row;
  const char *method; /* canonical text */
  gboolean at_rest;   /* the outline term is in */
  TfUnits units;
} TfReading;

const char *tf_line_name (TfLine line);
char *tf_line_dup_value (TfLine line, const TfReading *reading);
char *tf_line_dup_under (TfLine line, const TfReading *reading);
char *tf_line_dup_how (TfLine line, const TfReading *reading);

/** tf_words_dup_signed: "+7.2" or "−7.2" with @decimals, the user's decimal point; "—" for no
 * value. */
char *tf_words_dup_signed (double value, guint decimals);
/** tf_words_dup_number: the same without a plus */
char *tf_words_dup_number (double value, guint decimals);
/** tf_words_dup_place: "N17 W23"; on maps the Carrington longitude */
char *tf_words_dup_place (const TfMeasure *measure);
/** tf_words_dup_longitude: "Stonyhurst 21.4°" where it differs from CMD by more than 0.5 deg,
 * else NULL */
char *tf_words_dup_longitude (const TfMeasure *measure);
/** tf_words_split_verdict: the sentence parted into what is said and why: "breaks Hale's law" and
 * "cycle 24, sure: ..." */
void tf_words_split_verdict (const char *sentence, char **said, char **why);
/** tf_words_dup_short_source: "Stenflo & Kosovichev 2012" as "S & K 2012" */
char *tf_words_dup_short_source (const char *source);
/** tf_words_dup_age: "2 h", "3 d", "12 y" */
char *tf_words_dup_age (double seconds);

G_END_DECLS
