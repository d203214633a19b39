/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include "tf-session-laws.h"

/** test_desk_laws_ledger: (transfer full): path of a ledger with four marks of 24 degrees in mid 2008
 * and ten nearer the equator in 2013, one of them the wrong way round. */
char *test_desk_laws_ledger (const char *name);
/** test_desk_laws_session: on it, with the findings complete. */
TfSession *test_desk_laws_session (const char *path);
