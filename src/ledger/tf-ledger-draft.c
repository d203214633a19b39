/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Strokes between keeps: one row a frame and person, durable, local. Not an act: a morning would
 * make thousands. */

#include "tf-ledger-private.h"

gboolean
tf_draft_remove (TfLedger *ledger, gint64 frame, gint64 person, GError **error)
{
  return tf_run (ledger, error, "DELETE FROM draft WHERE frame = ?1 AND person = ?2", "ii", frame,
                 person);
}

gboolean
tf_ledger_set_draft (TfLedger *ledger, gint64 frame, gint64 person, const char *text,
                     GError **error)
{
  g_return_val_if_fail (ledger != NULL, FALSE);
  if (!tf_ledger_begin (ledger, error))
    return FALSE;
  gint64 now = ledger->now (ledger->now_data);
  gboolean ok
      = text != NULL
            ? tf_run (ledger, error,
                      "INSERT INTO draft (frame, person, text, saved) VALUES (?1, ?2, ?3, ?4)"
                      " ON CONFLICT (frame, person) DO UPDATE SET text = ?3, saved = ?4",
                      "iiti", frame, person, text, now)
            : tf_draft_remove (ledger, frame, person, error);
  if (!ok)
    {
      tf_ledger_rollback (ledger);
      return FALSE;
    }
  return tf_ledger_commit (ledger, error);
}

char *
tf_ledger_dup_draft (TfLedger *ledger, gint64 frame, gint64 person)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  return tf_text_value (ledger, NULL, "SELECT text FROM draft WHERE frame = ?1 AND person = ?2",
                        "ii", frame, person);
}
