/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfWriter: the queue of a person's deeds. One lane owns the write connection; deeds go through
 * it one by one, in order.
 * "saved" is emitted after the commit and not before. When a deed fails it stays at the head of
 * the queue, "problem" holds the sentence, and nothing behind it is tried until
 * tf_writer_retry() or tf_writer_give_up(). A deed that can never fit (nothing to undo) is said
 * and taken off.
 *
 * Main thread only. */

#include <gio/gio.h>

#include "tf-deed.h"

G_BEGIN_DECLS

#define TF_TYPE_WRITER (tf_writer_get_type ())
G_DECLARE_FINAL_TYPE (TfWriter, tf_writer, TF, WRITER, GObject)

/* signals: "saved" (TfDeed *deed), borrowed for the call; "refused" (TfDeed *deed, const char
 * *message). Properties: "problem" (string or NULL), "pending" (uint). */

/** tf_writer_new: @letter as in tf_lane_new(). */
TfWriter *tf_writer_new (const char *path, char letter);
/** tf_writer_push: (transfer full) */
void tf_writer_push (TfWriter *writer, TfDeed *deed);
void tf_writer_retry (TfWriter *writer);
/** tf_writer_give_up: forgets the deed at the head that could not be saved. */
void tf_writer_give_up (TfWriter *writer);
const char *tf_writer_get_problem (TfWriter *writer);
guint tf_writer_get_pending (TfWriter *writer);
/** tf_writer_close: waits for the deed in hand. Called by dispose too. */
void tf_writer_close (TfWriter *writer);

G_END_DECLS
