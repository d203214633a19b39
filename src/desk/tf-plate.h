/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfPlate: the large picture. It shows the session's frame through the session's view, outlines
 * over it, and turns pointer and keys into calls of the session. The picture is made at the size
 * of the widget from the frame's pyramid; the overlay is a second surface that is shifted while
 * panning and made anew only when scale or outlines change; the line in hand alone is live. */

#include "tf-session.h"

G_BEGIN_DECLS

#define TF_TYPE_PLATE (tf_plate_get_type ())
G_DECLARE_FINAL_TYPE (TfPlate, tf_plate, TF, PLATE, GtkWidget)

/* property "readout" (string): place and field under the pointer, in words */

void tf_plate_set_session (TfPlate *plate, TfSession *session);
const char *tf_plate_get_readout (TfPlate *plate);

G_END_DECLS
