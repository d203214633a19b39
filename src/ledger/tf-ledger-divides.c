/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-ledger-divides.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-json.h"
#include "tf-ledger-private.h"

void
tf_moved_divide_free (TfMovedDivide *divide)
{
  if (divide == NULL)
    return;
  g_free (divide->times);
  g_free (divide->lats);
  g_free (divide->person);
  g_free (divide);
}

TfMovedDivide *
tf_moved_divide_copy (const TfMovedDivide *divide)
{
  TfMovedDivide *copy = g_memdup2 (divide, sizeof *divide);
  copy->times = g_memdup2 (divide->times, divide->n * sizeof *divide->times);
  copy->lats = g_memdup2 (divide->lats, divide->n * sizeof *divide->lats);
  copy->person = g_strdup (divide->person);
  return copy;
}

/* The study by its name, so that two people who work apart move the same divide. */
static char *
subject_of (const char *study, const TfMovedDivide *divide)
{
  g_autofree char *hash = tf_content_id ("tiltfield name 1", "study", study, NULL);
  g_autofree char *uid = g_strndup (hash, TF_ID_HEX);
  g_autofree char *which
      = g_strdup_printf ("%02x%02x", (guint)divide->cycle & 255, divide->hemisphere < 0 ? 2u : 1u);
  return tf_subject ('v', uid, which, NULL);
}

static gboolean
is_good (const char *study, const TfMovedDivide *divide, GError **error)
{
  gboolean good = *study != '\0' && divide->cycle > 0 && divide->cycle < 256;
  for (guint k = 0; k < divide->n; k++)
    good = good && tf_time_is_known (divide->times[k]) && divide->lats[k] >= 0
           && divide->lats[k] <= 90 && (k == 0 || divide->times[k].s > divide->times[k - 1].s);
  if (!good)
    g_set_error_literal (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE,
                         _ ("a divide needs latitudes of 0° to 90° at times that rise"));
  return good;
}

static void
build_points (JsonBuilder *body, const TfMovedDivide *divide)
{
  json_builder_set_member_name (body, "points");
  json_builder_begin_array (body);
  for (guint k = 0; k < divide->n; k++)
    {
      g_autofree char *time = tf_time_dup_iso (divide->times[k], 0);
      json_builder_begin_array (body);
      json_builder_add_string_value (body, time);
      json_builder_add_double_value (body, divide->lats[k]);
      json_builder_end_array (body);
    }
  json_builder_end_array (body);
}

/* What was once drawn with polarity in sight stays so until the divide is computed again. */
static gboolean
was_shown (TfLedger *ledger, const char *study, const TfMovedDivide *divide)
{
  return tf_value (ledger, NULL, 0,
                   "SELECT shown FROM divide WHERE study = ?1 AND cycle = ?2 AND hemisphere = ?3",
                   "tii", study, (gint64)divide->cycle, (gint64)(divide->hemisphere < 0 ? -1 : 1))
         != 0;
}

static gboolean
append (TfLedger *ledger, const char *study, const TfMovedDivide *divide, gint64 person,
        GError **error)
{
  g_autofree char *uid = tf_text_value (
      ledger, error, "SELECT lower (hex (uid)) FROM person WHERE id = ?1", "i", person);
  if (uid == NULL)
    return FALSE;
  g_autofree char *subject = subject_of (study, divide);
  g_autoptr (JsonBuilder) body = json_builder_new ();
  json_builder_begin_object (body);
  tf_json_string (body, "person", uid);
  tf_json_string (body, "study", study);
  tf_json_int (body, "minimum", divide->cycle);
  tf_json_int (body, "hemisphere", divide->hemisphere < 0 ? -1 : 1);
  build_points (body, divide);
  tf_json_bool (body, "polarity_shown",
                divide->n > 0 && (divide->shown || was_shown (ledger, study, divide)));
  json_builder_end_object (body);
  return tf_act_append (ledger, "divide", subject, body, error);
}

gboolean
tf_ledger_set_divide (TfLedger *ledger, const char *study, const TfMovedDivide *divide,
                      gint64 person, GError **error)
{
  g_return_val_if_fail (ledger != NULL && study != NULL && divide != NULL, FALSE);
  if (!is_good (study, divide, error) || !tf_ledger_begin (ledger, error))
    return FALSE;
  if (!append (ledger, study, divide, person, error))
    {
      tf_ledger_rollback (ledger);
      return FALSE;
    }
  if (!tf_ledger_commit (ledger, error))
    return FALSE;
  tf_replica_store_state (ledger);
  return TRUE;
}

/* -- reading --------------------------------------------------------------------------------- */

static gboolean
read_points (TfMovedDivide *divide, const char *text)
{
  g_autoptr (JsonNode) root = json_from_string (text, NULL);
  if (root == NULL || !JSON_NODE_HOLDS_ARRAY (root))
    return FALSE;
  JsonArray *points = json_node_get_array (root);
  guint n = json_array_get_length (points);
  divide->times = g_new0 (TfTime, n + 1);
  divide->lats = g_new0 (double, n + 1);
  for (guint k = 0; k < n; k++)
    {
      JsonNode *node = json_array_get_element (points, k);
      if (!JSON_NODE_HOLDS_ARRAY (node))
        return FALSE;
      JsonArray *pair = json_node_get_array (node);
      const char *time = tf_json_element_string (pair, 0);
      divide->times[k] = time != NULL ? tf_time_read (time) : TF_TIME_UNKNOWN;
      divide->lats[k] = tf_json_element_number (pair, 1);
      if (!tf_time_is_known (divide->times[k]) || !isfinite (divide->lats[k]))
        return FALSE;
    }
  divide->n = n;
  return n > 0;
}

GPtrArray *
tf_ledger_divides (TfLedger *ledger, const char *study, GError **error)
{
  g_return_val_if_fail (ledger != NULL && study != NULL, NULL);
  g_autoptr (GPtrArray) divides = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_moved_divide_free);
  g_autoptr (sqlite3_stmt) query = tf_query (
      ledger, error,
      "SELECT d.cycle, d.hemisphere, d.points, d.shown, p.name FROM divide d JOIN person p ON p.id = "
      "d.person WHERE d.study = ?1 ORDER BY d.cycle, d.hemisphere DESC",
      "t", study);
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      g_autoptr (TfMovedDivide) divide = g_new0 (TfMovedDivide, 1);
      divide->cycle = sqlite3_column_int (query, 0);
      divide->hemisphere = sqlite3_column_int (query, 1);
      divide->shown = sqlite3_column_int (query, 3);
      divide->person = g_strdup (tf_column_text (query, 4));
      if (read_points (divide, tf_column_text (query, 2)))
        g_ptr_array_add (divides, g_steal_pointer (&divide));
    }
  return more == 0 ? g_steal_pointer (&divides) : NULL;
}
