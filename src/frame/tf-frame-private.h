/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include "tf-frame.h"

/** tf_frame_new_take: @info and @pixels are taken; noise unless the role is INTENSITY. NULL: no
 * memory. */
TfFrame *tf_frame_new_take (TfFrameInfo *info, TfPixels *pixels, const char *path, int hdu,
                            const TfWork *work);
