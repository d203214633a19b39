/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfPlatePane: the plate with its foot (read-out, looks, field range, north), its drawing tools
 * at the top, and what stands over it while a frame opens or when there is none. */

#include "tf-plate.h"

G_BEGIN_DECLS

#define TF_TYPE_PLATE_PANE (tf_plate_pane_get_type ())
G_DECLARE_FINAL_TYPE (TfPlatePane, tf_plate_pane, TF, PLATE_PANE, GtkWidget)

void tf_plate_pane_set_session (TfPlatePane *pane, TfSession *session);
TfPlate *tf_plate_pane_get_plate (TfPlatePane *pane);

G_END_DECLS
