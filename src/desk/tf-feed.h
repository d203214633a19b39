/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfFeed: frames into the ledger off the main thread, over a connection of its own (all it
 * writes are machine rows, so that a person's deeds need not wait behind a long fill). Reports
 * come to the main loop at most ten times a second. */

#include <gio/gio.h>

#include "tf-intake.h"

G_BEGIN_DECLS

typedef struct _TfFeed TfFeed;

/** TfFeedState: what has been done so far. */
typedef struct
{
  guint done, total, added, there, refused, failed, hints;
  gboolean listing; /* still looking for files */
  gboolean finished, cancelled;
  GPtrArray *messages; /* char *: one a file that could not be read */
  char *error;         /* nothing could be done */
} TfFeedState;

typedef void (*TfFeedFunc) (const TfFeedState *state, gpointer data);

/** tf_feed_new: starts at once. @func: in the main loop; last with finished TRUE. */
TfFeed *tf_feed_new (const char *ledger_path, char *const *paths, TfFeedFunc func, gpointer data);
void tf_feed_cancel (TfFeed *feed);
/** tf_feed_free: cancels; no call of the function after this. */
void tf_feed_free (TfFeed *feed);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfFeed, tf_feed_free)

G_END_DECLS
