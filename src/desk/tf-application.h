/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfApplication: tiltfield [LEDGER] [FRAME…]. One process a session bus; a window a ledger. */

#include <adwaita.h>

G_BEGIN_DECLS

#define TF_TYPE_APPLICATION (tf_application_get_type ())
G_DECLARE_FINAL_TYPE (TfApplication, tf_application, TF, APPLICATION, AdwApplication)

TfApplication *tf_application_new (void);

G_END_DECLS
