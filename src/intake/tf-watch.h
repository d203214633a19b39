/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfWatch: a folder in which frames arrive. A file is handed on once it has come to rest: its size
 * has not changed between two looks and it holds all that its own headers promise. What lay there
 * when the watch began is handed on as well, so that nothing is missed while nobody watched; the
 * ledger knows what it has. Runs in the main context in which it was made; looks in a thread. */

#include <gio/gio.h>

G_BEGIN_DECLS

typedef struct _TfWatch TfWatch;

/** TfWatchFunc: files that have come to rest, NULL-ended, borrowed for the call. */
typedef void (*TfWatchFunc) (char *const *paths, gpointer data);

/** tf_watch_new: NULL with an error when @folder is no folder that can be read. */
TfWatch *tf_watch_new (const char *folder, TfWatchFunc func, gpointer data, GError **error);
/** tf_watch_free: no call of the function after this. */
void tf_watch_free (TfWatch *watch);
const char *tf_watch_get_folder (const TfWatch *watch);
/** tf_watch_get_n_waiting: files that were seen and are not at rest yet */
guint tf_watch_get_n_waiting (const TfWatch *watch);

/** tf_fits_is_whole: whether the file is as long as its FITS headers promise; packed with gzip: its
 * content, to the end of the stream. FALSE for what is no FITS file. */
gboolean tf_fits_is_whole (const char *path);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfWatch, tf_watch_free)

G_END_DECLS
