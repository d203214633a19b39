/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfGeometryDialog: centre, radius and north angle of the frame on the plate, as its header has
 * them and as they are being tried; what is tried is drawn on the plate as well. It goes away with
 * its frame. */

#include <adwaita.h>

#include "tf-session.h"

G_BEGIN_DECLS

#define TF_TYPE_GEOMETRY_DIALOG (tf_geometry_dialog_get_type ())
G_DECLARE_FINAL_TYPE (TfGeometryDialog, tf_geometry_dialog, TF, GEOMETRY_DIALOG, AdwWindow)

GtkWidget *tf_geometry_dialog_new (GtkWindow *parent, TfSession *session);

G_END_DECLS
