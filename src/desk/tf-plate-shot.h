/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The plate as it is now, as a file: PNG, SVG or PDF by the file's ending, made off the main
 * thread. And a position of it as a line of text. */

#include <gio/gio.h>

#include "tf-session.h"

G_BEGIN_DECLS

/** tf_plate_shot_save: @done: GTask of a boolean; what is seen later does not change it. */
void tf_plate_shot_save (TfSession *session, const char *path, GAsyncReadyCallback done,
                         gpointer data);
gboolean tf_plate_shot_save_finish (GAsyncResult *result, GError **error);
/** tf_plate_shot_dup_name: "brindle-20131012T0600.png": a name to begin with */
char *tf_plate_shot_dup_name (TfSession *session);

/** tf_plate_dup_position: time, place in all longitudes, μ, field, pixel and file of a view point,
 * in the C locale, fields parted by two spaces; NULL off the Sun. */
char *tf_plate_dup_position (TfSession *session, double vx, double vy);

G_END_DECLS
