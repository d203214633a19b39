/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfThumbs: small pictures of frames for the roll, made one after the other in a thread of low
 * hurry, the ones asked for last first. A picture once made is kept in the user's cache folder
 * by the frame's checksum. */

#include "tf-frame-item.h"

G_BEGIN_DECLS

typedef struct _TfThumbs TfThumbs;

enum
{
  TF_THUMB_SIZE = 56
};

TfThumbs *tf_thumbs_new (void);
/** tf_thumbs_ask: sets the item's thumbnail in the main loop, later; nothing when it has one or
 * was asked for. */
void tf_thumbs_ask (TfThumbs *thumbs, TfFrameItem *item);
void tf_thumbs_free (TfThumbs *thumbs);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfThumbs, tf_thumbs_free)

G_END_DECLS
