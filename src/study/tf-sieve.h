/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Conditions of a sieve on any flat column: {column, is, value} in study.json. `is` is one of
 *
 *   at-least, at-most   numbers, and times as ISO text
 *   within, beyond      the size of a number: at most, at least
 *   equals, not         a number, a text, true or false
 *   one-of, none-of     an array of them
 *
 * A row that lacks the quantity is not dropped by the condition; how many passed so is counted.
 */

#include <json-glib/json-glib.h>

#include "tf-columns.h"

G_BEGIN_DECLS

typedef enum
{
  TF_IS_AT_LEAST,
  TF_IS_AT_MOST,
  TF_IS_WITHIN,
  TF_IS_BEYOND,
  TF_IS_EQUALS,
  TF_IS_NOT,
  TF_IS_ONE_OF,
  TF_IS_NONE_OF,
} TfIs;
/** tf_is_names: in the order of TfIs, NULL-ended. */
extern const char *const tf_is_names[];

typedef struct
{
  const TfColumn *column;
  TfIs is;
  guint n;         /* values */
  double *numbers; /* NaN for a text */
  char **texts;    /* NULL for a number */
} TfCondition;
void tf_condition_free (TfCondition *condition);
TfCondition *tf_condition_copy (const TfCondition *condition);

/** tf_condition_new: with one number or text (the other NaN or NULL); NULL for a column that is not
 * there. */
TfCondition *tf_condition_new (const char *column, TfIs is, double number, const char *text);
/** tf_condition_read: one element of an array; @where ("mark_conditions[2]") for messages. */
TfCondition *tf_condition_read (JsonNode *node, const char *where, GError **error);
void tf_condition_build_json (const TfCondition *condition, JsonBuilder *builder);
/** tf_condition_dup_text: "axis_tilt_deg at-most 20": the key of counts. */
char *tf_condition_dup_text (const TfCondition *condition);
/** tf_condition_holds: 1 the row passes, 0 it does not, -1 it lacks the quantity. */
int tf_condition_holds (const TfCondition *condition, const TfExportRow *row);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfCondition, tf_condition_free)

G_END_DECLS
