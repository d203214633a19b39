/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfRegionItem: one hint or mark of the frame on the plate, with its verdict under the divides
 * of the moment. */

#include <glib-object.h>

#include "tf-ledger.h"
#include "tf-verdict.h"

G_BEGIN_DECLS

#define TF_TYPE_REGION_ITEM (tf_region_item_get_type ())
G_DECLARE_FINAL_TYPE (TfRegionItem, tf_region_item, TF, REGION_ITEM, GObject)

/** tf_region_item_new: (transfer full) @row */
TfRegionItem *tf_region_item_new (TfRow *row, TfVerdict verdict);
const TfRow *tf_region_item_get_row (TfRegionItem *item);
TfVerdict tf_region_item_get_verdict (TfRegionItem *item);
/** tf_region_item_get_label: "0412" or "hint". */
const char *tf_region_item_get_label (TfRegionItem *item);
/** tf_region_item_is_carried: not in the ledger: an outline carried from another frame; its row is a hint's with a key below 0
 * and its region. */
gboolean tf_region_item_is_carried (TfRegionItem *item);
/** tf_region_item_is: the same hint or mark. */
gboolean tf_region_item_is (TfRegionItem *item, gint64 mark, gboolean is_hint);

G_END_DECLS
