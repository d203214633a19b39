/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfConditionList: conditions on marks, or on picks, one under the other; added and removed. What is
 * being typed stays while the study follows it. */

#include <gtk/gtk.h>

#include "tf-study.h"

G_BEGIN_DECLS

#define TF_TYPE_CONDITION_LIST (tf_condition_list_get_type ())
G_DECLARE_FINAL_TYPE (TfConditionList, tf_condition_list, TF, CONDITION_LIST, GtkWidget)

/* signal: "changed": by a hand */

/** tf_condition_list_new: @title: shown over them; @add: on the button. */
GtkWidget *tf_condition_list_new (const char *title, const char *add);
/** tf_condition_list_show: (element-type TfCondition): rows that say so already are left alone.
 * @findings: (nullable): what came of each. */
void tf_condition_list_show (TfConditionList *list, const GPtrArray *conditions,
                             const TfFindings *findings);
/** tf_condition_list_dup: (transfer full) (element-type TfCondition): those that are whole. */
GPtrArray *tf_condition_list_dup (TfConditionList *list);
/** tf_condition_list_add: one more, to be filled in. */
void tf_condition_list_add (TfConditionList *list);

G_END_DECLS
