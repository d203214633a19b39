/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* A connection of the test's own: what somebody with a database shell could do. */

#include <sqlite3.h>

#include "test-ledger.h"

static inline void
fixture_sql_all (sqlite3 *db, const char *sql)
{
  char *message = NULL;
  if (sqlite3_exec (db, sql, NULL, NULL, &message) != SQLITE_OK)
    g_error ("%s: %s", sql, message);
}
