/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include <json-glib/json-glib.h>

#include "tf-column-map.h"
#include "tf-export.h"

/* How the cells of one of their columns become values of one of ours. */
typedef struct
{
  const TfColumnRule *rule;
  guint at; /* their column */
  const TfColumn *ours; /* NULL: time_jd, time_year */
  double factor;
} TfBroughtColumn;

/* rule and at are set; FALSE when the unit (rule's, else @given, else ours) cannot be turned. */
gboolean tf_brought_column_init (TfBroughtColumn *column, const char *given);
/* NULL, or (transfer full) why the value is bad. */
char *tf_brought_column_take (const TfBroughtColumn *column, const char *cell, JsonObject *flat,
                              TfTime *time);
/* NULL, or (transfer full) the range of that column which @value is out of. */
char *tf_brought_check_range (const char *name, double value);
/* Sign rules that need the latitude, and the fold of polarity_tilt_deg. */
void tf_brought_fold_tilt (JsonObject *flat);
