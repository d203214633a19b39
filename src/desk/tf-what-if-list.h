/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The rows of "what if" as a list: the choice in words, the share that breaks, the slope, and
 * how far it moves both, as bars from a middle; those that move most first. */

#include <gtk/gtk.h>

#include "tf-study.h"

G_BEGIN_DECLS

#define TF_TYPE_WHAT_IF_ITEM (tf_what_if_item_get_type ())
G_DECLARE_FINAL_TYPE (TfWhatIfItem, tf_what_if_item, TF, WHAT_IF_ITEM, GObject)

const char *tf_what_if_item_get_name (TfWhatIfItem *item);
/** tf_what_if_list_fill: @rows: TfWhatIf, of which the first is as chosen */
void tf_what_if_list_fill (GListStore *store, const GArray *rows);
GtkListItemFactory *tf_what_if_factory_new (void);
G_END_DECLS
