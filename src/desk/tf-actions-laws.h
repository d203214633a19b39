/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include "tf-window.h"

G_BEGIN_DECLS

/** tf_window_add_laws_actions: commands of the Laws bench and of the stretches on the wings. */
void tf_window_add_laws_actions (TfWindow *window);
void tf_window_update_laws_actions (TfWindow *window);

G_END_DECLS
