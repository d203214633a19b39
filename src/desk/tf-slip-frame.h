/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfSlipFrame: what the slip shows when no region is chosen: the frame itself, its cautions and
 * repairs, and what to do next. */

#include "tf-session.h"

G_BEGIN_DECLS

#define TF_TYPE_SLIP_FRAME (tf_slip_frame_get_type ())
G_DECLARE_FINAL_TYPE (TfSlipFrame, tf_slip_frame, TF, SLIP_FRAME, GtkWidget)

void tf_slip_frame_set_session (TfSlipFrame *page, TfSession *session);

G_END_DECLS
