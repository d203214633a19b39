/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Links and cuts: what a person says of two sightings. They name marks and hints by ids that are the
 * same everywhere; a mark that has been replaced, or a hint that has been kept, is found again. */

#include "tf-ledger-follow-private.h"

#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-json.h"

static char *
sight_id (TfLedger *ledger, TfSight sight, GError **error)
{
  GError *problem = NULL;
  char *id = tf_text_value (ledger, &problem,
                            sight.is_hint ? "SELECT lower (hex (cid)) FROM hint WHERE id = ?1"
                                          : "SELECT lower (hex (uid)) FROM mark WHERE id = ?1",
                            "i", sight.mark);
  if (problem != NULL)
    g_propagate_error (error, problem);
  else if (id == NULL)
    g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE,
                 _ ("the ledger %s has no mark or hint %" G_GINT64_FORMAT), ledger->path,
                 sight.mark);
  return id;
}

static gboolean
tie (TfLedger *ledger, const char *kind, TfSight a, TfSight b, gint64 person, const char *reason,
     GError **error)
{
  g_autofree char *who = tf_text_value (
      ledger, error, "SELECT lower (hex (uid)) FROM person WHERE id = ?1", "i", person);
  g_autofree char *one = who != NULL ? sight_id (ledger, a, error) : NULL;
  g_autofree char *other = one != NULL ? sight_id (ledger, b, error) : NULL;
  if (other == NULL)
    {
      if (who == NULL && error != NULL && *error == NULL)
        g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE,
                     _ ("the ledger %s has no person %" G_GINT64_FORMAT), ledger->path, person);
      return FALSE;
    }
  if (strcmp (one, other) == 0)
    {
      g_set_error_literal (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE,
                           _ ("choose two different marks or hints to link or cut"));
      return FALSE;
    }
  gboolean in_order = strcmp (one, other) < 0;
  const char *first = in_order ? one : other, *second = in_order ? other : one;
  g_autoptr (JsonBuilder) body = json_builder_new ();
  json_builder_begin_object (body);
  tf_json_string (body, "person", who);
  tf_json_string (body, "a", first);
  tf_json_string (body, "b", second);
  tf_json_string (body, "reason", reason);
  json_builder_end_object (body);
  g_autofree char *subject = tf_subject ('t', first, second, NULL);
  return tf_act_append (ledger, kind, subject, body, error);
}

static gboolean
do_tie (TfLedger *ledger, const char *kind, TfSight a, TfSight b, gint64 person, const char *reason,
        GError **error)
{
  if (!tf_ledger_begin (ledger, error))
    return FALSE;
  gboolean ok = tie (ledger, kind, a, b, person, reason, error);
  if (!ok)
    tf_ledger_rollback (ledger);
  else if ((ok = tf_ledger_commit (ledger, error)))
    tf_replica_store_state (ledger);
  return ok;
}

gboolean
tf_ledger_link (TfLedger *ledger, TfSight a, TfSight b, gint64 person, const char *reason,
                GError **error)
{
  g_return_val_if_fail (ledger != NULL && reason != NULL, FALSE);
  return do_tie (ledger, "link", a, b, person, reason, error);
}

gboolean
tf_ledger_cut (TfLedger *ledger, TfSight a, TfSight b, gint64 person, const char *reason,
               GError **error)
{
  g_return_val_if_fail (ledger != NULL && reason != NULL, FALSE);
  return do_tie (ledger, "cut", a, b, person, reason, error);
}

/* -- finding again what a tie names ---------------------------------------------------------- */
/* A live mark of a hint, the least of them; else the hint while it is open. */
static gboolean
find_hint (TfLedger *ledger, gint64 hint, TfSight *sight)
{
  if (hint == 0)
    return FALSE;
  gint64 mark = tf_value (ledger, NULL, 0,
                          "SELECT id FROM mark WHERE hint = ?1 AND live = 1 ORDER BY uid LIMIT 1",
                          "i", hint);
  *sight = mark != 0 ? (TfSight){ mark, FALSE } : (TfSight){ hint, TRUE };
  return mark != 0
         || tf_value (ledger, NULL, 0, "SELECT 1 FROM point WHERE hint = 1 AND mark = ?1", "i",
                      hint)
                != 0;
}

gboolean
tf_tie_find (TfLedger *ledger, const char *id, TfSight *sight)
{
  if (strlen (id) == TF_CID_HEX)
    return find_hint (
        ledger, tf_value (ledger, NULL, 0, "SELECT id FROM hint WHERE cid = ?1", "h", id), sight);
  gint64 mark = tf_value (ledger, NULL, 0, "SELECT id FROM mark WHERE uid = ?1", "h", id);
  gint64 live = tf_value (ledger, NULL, 0,
                          "SELECT n.id FROM mark m JOIN mark n ON n.region = m.region AND n.live = "
                          "1 AND n.frame = m.frame "
                          "AND n.person = m.person WHERE m.id = ?1",
                          "i", mark);
  *sight = (TfSight){ live, FALSE };
  return live != 0
         || find_hint (ledger,
                       tf_value (ledger, NULL, 0, "SELECT hint FROM mark WHERE id = ?1", "i", mark),
                       sight);
}
