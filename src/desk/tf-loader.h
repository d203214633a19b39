/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfLoader: opens frames off the main thread. One frame at a time: a newer request cancels the
 * older one, and what comes late is dropped. The last few frames stay open, so that going back
 * and forth is at once. Main thread only. */

#include <gio/gio.h>

#include "tf-correction.h"

G_BEGIN_DECLS

typedef struct _TfLoader TfLoader;

/** TfLoadFunc: exactly one of @frame (borrowed) and @error. Not called for what was overtaken or
 * cancelled. */
typedef void (*TfLoadFunc) (TfFrame *frame, const GError *error, gpointer data);

TfLoader *tf_loader_new (TfPool *pool);
void tf_loader_free (TfLoader *loader);
/** tf_loader_open: @func may be called before this returns, when the frame is still open.
 * @correction: of its geometry; none: as the header has it */
void tf_loader_open (TfLoader *loader, const char *path, const TfFrameSpec *spec,
                     const TfCorrection *correction, TfLoadFunc func, gpointer data);
void tf_loader_cancel (TfLoader *loader);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfLoader, tf_loader_free)

G_END_DECLS
