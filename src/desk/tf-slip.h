/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfSlip: the panel at the right: everything known of the chosen region or of the drawing in
 * hand; without either, what is known of the frame. What it changes it changes through window
 * actions and the session. */

#include "tf-session.h"

G_BEGIN_DECLS

#define TF_TYPE_SLIP (tf_slip_get_type ())
G_DECLARE_FINAL_TYPE (TfSlip, tf_slip, TF, SLIP, GtkWidget)

void tf_slip_set_session (TfSlip *slip, TfSession *session);

G_END_DECLS
