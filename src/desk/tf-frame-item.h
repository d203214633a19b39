/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfFrameItem: one frame of the roll, as a list shows it. Follows what the ledger says of it;
 * the thumbnail comes later. */

#include <gtk/gtk.h>

#include "tf-ledger.h"

G_BEGIN_DECLS

typedef enum
{
  TF_FRAME_UNTOUCHED, /* no hints known, nobody has judged */
  TF_FRAME_WAITING,   /* hints wait */
  TF_FRAME_DONE,      /* somebody has judged and nothing waits */
  TF_FRAME_REFUSED,   /* could not be used */
} TfFrameState;

#define TF_TYPE_FRAME_ITEM (tf_frame_item_get_type ())
G_DECLARE_FINAL_TYPE (TfFrameItem, tf_frame_item, TF, FRAME_ITEM, GObject)

/** tf_frame_item_new: (transfer full) @row */
TfFrameItem *tf_frame_item_new (TfFrameRow *row);
/** tf_frame_item_set_row: (transfer full) @row: what the ledger says now */
void tf_frame_item_set_row (TfFrameItem *item, TfFrameRow *row);
const TfFrameRow *tf_frame_item_get_row (TfFrameItem *item);
TfFrameState tf_frame_item_get_state (TfFrameItem *item);
/** tf_frame_item_get_day: (nullable): "12 October 2013" when it is the first of its day in the
 * list. */
const char *tf_frame_item_get_day (TfFrameItem *item);
void tf_frame_item_set_day (TfFrameItem *item, const char *day);
GdkTexture *tf_frame_item_get_thumbnail (TfFrameItem *item);
void tf_frame_item_set_thumbnail (TfFrameItem *item, GdkTexture *texture);

/* words, in the current language */
char *tf_frame_item_dup_day (TfFrameItem *item);
char *tf_frame_item_dup_time (TfFrameItem *item);
char *tf_frame_item_dup_counts (TfFrameItem *item);
const char *tf_frame_item_get_state_words (TfFrameItem *item);

G_END_DECLS
