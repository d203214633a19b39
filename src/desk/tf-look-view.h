/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfLookView: one close look: on the strip with its time under it, or large beside the charts. */

#include "tf-look-item.h"

G_BEGIN_DECLS

#define TF_TYPE_LOOK_VIEW (tf_look_view_get_type ())
G_DECLARE_FINAL_TYPE (TfLookView, tf_look_view, TF, LOOK_VIEW, GtkWidget)

GtkWidget *tf_look_view_new (void);
/** tf_look_view_set_large: without the time under it */
void tf_look_view_set_large (TfLookView *view, gboolean large);
/** tf_look_view_set_item: (nullable) */
void tf_look_view_set_item (TfLookView *view, TfLookItem *item);

G_END_DECLS
