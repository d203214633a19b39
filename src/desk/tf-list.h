/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfList: the disk's regions in a forecaster's order, beside the roll. A row chosen here is chosen
 * on the plate; a row activated (Enter, a double click) opens its close look. */

#include "tf-session.h"

G_BEGIN_DECLS

#define TF_TYPE_LIST (tf_list_get_type ())
G_DECLARE_FINAL_TYPE (TfList, tf_list, TF, LIST, GtkWidget)

/** tf_list_set_session: once */
void tf_list_set_session (TfList *list, TfSession *session);
/** tf_list_dup_row_text: the words of row @k, a line each, as they stand there. */
char *tf_list_dup_row_text (TfList *list, guint k);

G_END_DECLS
