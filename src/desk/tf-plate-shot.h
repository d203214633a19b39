/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The plate as it is now, as a file: PNG, SVG or PDF by the file's ending, made off the main
 * thread. And a position of it as a line of text. */

#include "tf-session.h"

G_BEGIN_DECLS

/** tf_plate_shot_save: what is seen later does not change it; what came of it is said by the session. */
void tf_plate_shot_save (TfSession *session, const char *path);
/** tf_plate_shot_dup_name: "brindle-20131012T0600.png": a name to begin with */
char *tf_plate_shot_dup_name (TfSession *session);

/** tf_plate_dup_position: time, place in all longitudes, μ, field, pixel and file of a view point,
 * in the C locale, fields parted by two spaces; NULL off the Sun. */
char *tf_plate_dup_position (TfSession *session, double vx, double vy);

G_END_DECLS
