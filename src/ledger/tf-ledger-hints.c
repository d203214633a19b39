/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Hints of a rule on a frame, with their measures: machine rows, put in once. */

#include "tf-ledger-private.h"

#include <glib/gi18n-lib.h>

static gint64
put_hint (TfLedger *ledger, gint64 frame, const char *frame_cid, const char *rule, gint64 rule_key,
          guint ordinal, const TfHint *hint, const char *method,
          const TfComplexityRows *complexity, const char *program, GError **error)
{
  g_autofree char *number = g_strdup_printf ("%u", ordinal);
  g_autofree char *cid = tf_content_id ("tiltfield hint 1", frame_cid, rule, number, NULL);
  gint64 key = tf_value (ledger, NULL, 0, "SELECT id FROM hint WHERE cid = ?1", "h", cid);
  if (key != 0)
    return key;
  g_autofree char *outline = tf_outline_dup_text (hint->outline);
  g_autofree char *notes = tf_notes_dup_store (hint->cautions);
  gint64 measure = tf_measure_put (ledger, frame, frame_cid, method, outline, &hint->measure,
                                   program, NULL, error);
  if (measure == 0
      || (complexity != NULL && ordinal <= complexity->n
          && !tf_complexity_put (ledger, measure, complexity->method,
                                 &complexity->rows[ordinal - 1], program, error))
      || !tf_run (ledger, error,
                  "INSERT INTO hint (cid, frame, rule, ordinal, unipolar, outline, measure, notes)"
                  " VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8)",
                  "hiiiitit", cid, frame, rule_key, (gint64)ordinal, (gint64)hint->unipolar,
                  outline, measure, notes))
    return 0;
  key = sqlite3_last_insert_rowid (ledger->db);
  return tf_digest_store (ledger, "hint", key, error) ? key : 0;
}

gboolean
tf_hints_put (TfLedger *ledger, gint64 frame, const char *rule, const GPtrArray *hints,
              const char *method, const TfComplexityRows *complexity, const char *program,
              GError **error)
{
  gint64 rule_key = tf_method_key (ledger, rule, error);
  gint64 method_key = rule_key != 0 ? tf_method_key (ledger, method, error) : 0;
  g_autofree char *cid = tf_text_value (
      ledger, error, "SELECT lower (hex (cid)) FROM frame WHERE id = ?1", "i", frame);
  if (rule_key == 0 || method_key == 0)
    return FALSE;
  if (cid == NULL)
    {
      if (error != NULL && *error == NULL)
        g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE,
                     _ ("the ledger %s has no frame %" G_GINT64_FORMAT), ledger->path, frame);
      return FALSE;
    }
  if (tf_value (ledger, NULL, 0, "SELECT 1 FROM run WHERE frame = ?1 AND rule = ?2", "ii", frame,
                rule_key)
      != 0)
    return TRUE;
  for (guint k = 0; k < hints->len; k++)
    if (put_hint (ledger, frame, cid, rule, rule_key, k + 1, g_ptr_array_index (hints, k), method,
                  complexity, program, error)
        == 0)
      return FALSE;
  return tf_run (ledger, error, "INSERT INTO run (frame, rule, method, n) VALUES (?1, ?2, ?3, ?4)",
                 "iiii", frame, rule_key, method_key, (gint64)hints->len)
         && tf_point_refresh_frame (ledger, frame, error);
}

gboolean
tf_ledger_add_hints_with (TfLedger *ledger, gint64 frame, const char *rule, const GPtrArray *hints,
                          const char *method, const TfComplexityRows *complexity, GError **error)
{
  g_return_val_if_fail (ledger != NULL && rule != NULL && hints != NULL && method != NULL, FALSE);
  if (!tf_ledger_begin (ledger, error))
    return FALSE;
  if (!tf_hints_put (ledger, frame, rule, hints, method, complexity, TF_VERSION, error))
    {
      tf_ledger_rollback (ledger);
      return FALSE;
    }
  return tf_ledger_commit (ledger, error);
}

gboolean
tf_ledger_add_hints (TfLedger *ledger, gint64 frame, const char *rule, const GPtrArray *hints,
                     const char *method, GError **error)
{
  return tf_ledger_add_hints_with (ledger, frame, rule, hints, method, NULL, error);
}

gboolean
tf_ledger_has_hints (TfLedger *ledger, gint64 frame, const char *rule)
{
  g_return_val_if_fail (ledger != NULL && rule != NULL, FALSE);
  return tf_value (ledger, NULL, 0,
                   "SELECT 1 FROM run u JOIN method t ON t.id = u.rule WHERE u.frame = ?1 AND "
                   "t.text = ?2",
                   "it", frame, rule)
         != 0;
}
