/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfLane: one thread that owns one connection to a ledger. Jobs run there one after the other,
 * in the order in which they were pushed; what they return comes back in the main loop as a
 * GTask. The window has two: one that reads and one that writes.
 *
 * The file is opened in the thread. When that fails every job fails with the same error, until
 * tf_lane_reopen(). */

#include <gio/gio.h>

#include "tf-ledger.h"

G_BEGIN_DECLS

typedef struct _TfLane TfLane;

/** TfLaneFunc: runs in the lane's thread. @data belongs to the job. */
typedef gpointer (*TfLaneFunc) (TfLedger *ledger, gpointer data, GError **error);

/** tf_lane_new: @letter: 0 opens @path, A-Z makes it when it is not there. */
TfLane *tf_lane_new (const char *path, char letter);
/** tf_lane_close: done with; jobs already pushed are still carried out, and waited for. */
void tf_lane_close (TfLane *lane);
/** tf_lane_reopen: the next job tries to open the file again. */
void tf_lane_reopen (TfLane *lane);

/**
 * tf_lane_push:
 * @source: (nullable): object kept alive until @done was called
 * @data: (transfer full): freed with @free_data in the thread
 * @done: called in the main loop; takes the result with tf_lane_finish()
 */
void tf_lane_push (TfLane *lane, gpointer source, GCancellable *cancellable, TfLaneFunc func,
                   gpointer data, GDestroyNotify free_data, GDestroyNotify free_result,
                   GAsyncReadyCallback done, gpointer user_data);
gpointer tf_lane_finish (GAsyncResult *result, GError **error);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfLane, tf_lane_close)

G_END_DECLS
