/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfRoll: the time-ordered list of frames at the left of the window. Choosing a row chooses the
 * session's frame. */

#include "tf-session.h"

G_BEGIN_DECLS

#define TF_TYPE_ROLL (tf_roll_get_type ())
G_DECLARE_FINAL_TYPE (TfRoll, tf_roll, TF, ROLL, GtkWidget)

void tf_roll_set_session (TfRoll *roll, TfSession *session);

G_END_DECLS
