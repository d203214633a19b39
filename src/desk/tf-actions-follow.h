/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Commands of the Follow bench. */

#include "tf-followed.h"
#include "tf-window.h"

G_BEGIN_DECLS

/** tf_window_add_follow_actions: @followed lives as long as the window. */
void tf_window_add_follow_actions (TfWindow *window, TfFollowed *followed);

/* tf-follow-save.c */
/** tf_follow_save: "figure", "series" or "film" into @path, off the main thread; what came of it is said by the session. */
void tf_follow_save (TfFollowed *followed, const char *what, const char *path);
/** tf_follow_dup_file_name: a name to offer */
char *tf_follow_dup_file_name (TfFollowed *followed, const char *what);

G_END_DECLS
