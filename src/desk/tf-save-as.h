/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* A file that a person asks for: its name from one dialog, made in one thread, with words that count
 * and a way to stop it, and a word at the end ("message"). One at a time a session. What takes less than
 * half a second says nothing before that. */

#include "tf-bands.h"
#include "tf-window.h"

G_BEGIN_DECLS

/** TfSaveChosen: @what: as it was given with the question. */
typedef void (*TfSaveChosen) (TfWindow *window, const char *what, const char *path);

/** tf_save_as_ask: where to. @name: to begin with; @what: handed on to @chosen; nothing comes of a "no". */
void tf_save_as_ask (TfWindow *window, const char *title, const char *name, const char *what,
                     TfSaveChosen chosen);

/** TfSaving: one file being made. */
typedef struct _TfSaving TfSaving;
/** tf_saving_tell: from the thread: @done of @total parts are there. */
void tf_saving_tell (TfSaving *saving, guint done, guint total);
/** tf_saving_is_stopped, tf_saving_get_cancel: whether a person stopped it; leave nothing half made. */
gboolean tf_saving_is_stopped (TfSaving *saving);
TfCancel *tf_saving_get_cancel (TfSaving *saving);

/** TfSaveFunc: in a thread. Returns what is said in the end; NULL with an error. */
typedef char *(*TfSaveFunc) (TfSaving *saving, gpointer job, const char *path, GError **error);

/**
 * tf_save_as:
 * @job: (transfer full): freed in the main thread with @free_job
 * A second one while the first is under way is refused in words.
 */
void tf_save_as (TfSession *session, const char *path, TfSaveFunc func, gpointer job,
                 GDestroyNotify free_job);
/** tf_save_as_get_words: (nullable): of what is under way; @share: 0-1 or negative (not known). NULL: nothing is, or not for
 * long yet. tf_save_as_is_busy: whether anything is. Both change with "status-changed". */
const char *tf_save_as_get_words (TfSession *session, double *share);
gboolean tf_save_as_is_busy (TfSession *session);
/** tf_save_as_stop: a person does not want it any more. */
void tf_save_as_stop (TfSession *session);
/** tf_save_as_close: before the session goes: what is under way is stopped and says nothing more. */
void tf_save_as_close (TfSession *session);
/** tf_save_as_add_actions: cancel-saving */
void tf_save_as_add_actions (TfWindow *window);

G_END_DECLS
