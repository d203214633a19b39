/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The journal, read aside. */

#include "tf-session-private.h"

enum
{
  MOST = 500
};

static gpointer
read_journal (TfLedger *ledger, gpointer data, GError **error)
{
  const gint64 *region = data;
  return tf_ledger_journal_of (ledger, *region, MOST, error);
}

void
tf_session_read_journal (TfSession *self, gint64 region, GAsyncReadyCallback done, gpointer data)
{
  g_return_if_fail (TF_IS_SESSION (self));
  if (self->reader != NULL)
    tf_lane_push (self->reader, self, self->reading, read_journal,
                  g_memdup2 (&region, sizeof region), g_free, (GDestroyNotify)g_ptr_array_unref,
                  done, data);
}

GPtrArray *
tf_session_read_journal_finish (GAsyncResult *result, GError **error)
{
  return tf_lane_finish (result, error);
}
