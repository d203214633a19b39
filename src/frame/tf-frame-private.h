/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include "tf-frame.h"
#include "tf-pyramid-private.h"

/** tf_frame_new_take: @info, @pixels and what is in @pyramid are taken; noise unless the role is
 * INTENSITY. */
TfFrame *tf_frame_new_take (TfFrameInfo *info, TfPixels *pixels, TfPyramid *pyramid,
                            const char *path, int hdu, const TfWork *work);
