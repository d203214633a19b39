/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-ledger-scales.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-json.h"
#include "tf-ledger-private.h"

TfKeptScale *
tf_kept_scale_copy (const TfKeptScale *scale)
{
  TfKeptScale *copy = g_memdup2 (scale, sizeof *scale);
  copy->instrument = g_strdup (scale->instrument);
  copy->reference = g_strdup (scale->reference);
  copy->evidence = g_strdup (scale->evidence);
  copy->person = g_strdup (scale->person);
  return copy;
}

void
tf_kept_scale_free (TfKeptScale *scale)
{
  if (scale == NULL)
    return;
  g_free (scale->instrument);
  g_free (scale->reference);
  g_free (scale->evidence);
  g_free (scale->person);
  g_free (scale);
}

static gboolean
append (TfLedger *ledger, const TfKeptScale *scale, gint64 person, GError **error)
{
  g_autofree char *uid = tf_text_value (
      ledger, error, "SELECT lower (hex (uid)) FROM person WHERE id = ?1", "i", person);
  if (uid == NULL)
    return FALSE;
  g_autofree char *hash = tf_content_id ("tiltfield name 1", "instrument", scale->instrument, NULL);
  g_autofree char *name = g_strndup (hash, TF_ID_HEX);
  g_autofree char *subject = tf_subject ('s', name, NULL);
  g_autoptr (JsonBuilder) body = json_builder_new ();
  json_builder_begin_object (body);
  tf_json_string (body, "person", uid);
  tf_json_string (body, "instrument", scale->instrument);
  tf_json_string (body, "reference", scale->reference);
  tf_json_number (body, "factor", scale->factor);
  tf_json_number (body, "sigma", scale->sigma);
  tf_json_string (body, "evidence", scale->evidence != NULL ? scale->evidence : "");
  json_builder_end_object (body);
  return tf_act_append (ledger, "scale", subject, body, error);
}

static gboolean
is_good (const TfKeptScale *scale, GError **error)
{
  gboolean named = scale->instrument != NULL && *scale->instrument != '\0'
                   && scale->reference != NULL && *scale->reference != '\0'
                   && !g_str_equal (scale->instrument, scale->reference);
  if (named && (isnan (scale->factor) || (scale->factor > 0.0 && isfinite (scale->factor))))
    return TRUE;
  g_set_error_literal (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE,
                       _ ("a scale needs two different instruments and a factor above 0"));
  return FALSE;
}

gboolean
tf_ledger_set_scale (TfLedger *ledger, const TfKeptScale *scale, gint64 person, GError **error)
{
  g_return_val_if_fail (ledger != NULL && scale != NULL, FALSE);
  if (!is_good (scale, error) || !tf_ledger_begin (ledger, error))
    return FALSE;
  if (!append (ledger, scale, person, error))
    {
      tf_ledger_rollback (ledger);
      return FALSE;
    }
  if (!tf_ledger_commit (ledger, error))
    return FALSE;
  tf_replica_store_state (ledger);
  return TRUE;
}

GPtrArray *
tf_ledger_scales (TfLedger *ledger, GError **error)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  g_autoptr (GPtrArray) scales
      = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_kept_scale_free);
  g_autoptr (sqlite3_stmt) query
      = tf_query (ledger, error,
                  "SELECT s.instrument, s.reference, s.factor, s.sigma, s.evidence, p.name FROM "
                  "scale s JOIN person p ON p.id = s.person ORDER BY s.instrument",
                  "");
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      TfKeptScale *scale = g_new0 (TfKeptScale, 1);
      scale->instrument = g_strdup (tf_column_text (query, 0));
      scale->reference = g_strdup (tf_column_text (query, 1));
      scale->factor = sqlite3_column_double (query, 2);
      scale->sigma
          = sqlite3_column_type (query, 3) == SQLITE_NULL ? NAN : sqlite3_column_double (query, 3);
      scale->evidence = g_strdup (tf_column_text (query, 4));
      scale->person = g_strdup (tf_column_text (query, 5));
      g_ptr_array_add (scales, scale);
    }
  return more == 0 ? g_steal_pointer (&scales) : NULL;
}
