/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfPassageItem: one passage in a list of them. */

#include <glib-object.h>

#include "tf-ledger-follow.h"

G_BEGIN_DECLS

#define TF_TYPE_PASSAGE_ITEM (tf_passage_item_get_type ())
G_DECLARE_FINAL_TYPE (TfPassageItem, tf_passage_item, TF, PASSAGE_ITEM, GObject)

/** tf_passage_item_new: (transfer full) @row */
TfPassageItem *tf_passage_item_new (TfPassageRow *row);
const TfPassageRow *tf_passage_item_get_row (TfPassageItem *item);
/** tf_passage_item_get_words: "T2013-0409 · 10 Oct – 16 Oct · 26 marks"; also the property
 * "words", for lists that search. */
const char *tf_passage_item_get_words (TfPassageItem *item);
/** tf_passage_dup_name: its region's number, else "hints" with the first digits of its id. */
char *tf_passage_dup_name (const TfPassageRow *row);

G_END_DECLS
