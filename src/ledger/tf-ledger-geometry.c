/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* A person's corrections of where a frame's disk is. */

#include "tf-ledger-private.h"

#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-json.h"

static void
geometry_free (gpointer data)
{
  TfPersonGeometry *geometry = data;
  g_free (geometry->person);
  g_free (geometry);
}

static TfPersonGeometry *
geometry_from (JsonArray *pair)
{
  if (pair == NULL || json_array_get_length (pair) != 2)
    return NULL;
  TfCorrection correction;
  const char *person = json_array_get_string_element (pair, 0),
             *text = json_array_get_string_element (pair, 1);
  if (person == NULL || text == NULL || !tf_correction_from_text (&correction, text))
    return NULL;
  TfPersonGeometry *geometry = g_new0 (TfPersonGeometry, 1);
  geometry->person = g_strdup (person);
  geometry->correction = correction;
  return geometry;
}

GPtrArray *
tf_geometries_from_store (const char *text)
{
  if (text == NULL || *text == '\0' || strcmp (text, "[]") == 0)
    return NULL;
  g_autoptr (JsonNode) root = json_from_string (text, NULL);
  if (root == NULL || !JSON_NODE_HOLDS_ARRAY (root))
    return NULL;
  JsonArray *all = json_node_get_array (root);
  GPtrArray *list = g_ptr_array_new_with_free_func (geometry_free);
  for (guint k = 0; k < json_array_get_length (all); k++)
    {
      TfPersonGeometry *geometry = geometry_from (json_array_get_array_element (all, k));
      if (geometry != NULL)
        g_ptr_array_add (list, geometry);
    }
  return list;
}

TfCorrection
tf_frame_row_get_correction (const TfFrameRow *row, const char *person)
{
  for (guint k = 0; row->geometries != NULL && person != NULL && k < row->geometries->len; k++)
    {
      const TfPersonGeometry *geometry = g_ptr_array_index (row->geometries, k);
      if (strcmp (geometry->person, person) == 0)
        return geometry->correction;
    }
  return tf_correction_none ();
}

static gboolean
append (TfLedger *ledger, gint64 frame, gint64 person, const char *text, GError **error)
{
  g_autofree char *person_id
      = tf_text_value (ledger, error, "SELECT lower (hex (uid)) FROM person WHERE id = ?1", "i",
                       person),
      *frame_id = tf_text_value (ledger, error, "SELECT lower (hex (cid)) FROM frame WHERE id = ?1",
                                 "i", frame);
  if (person_id == NULL || frame_id == NULL)
    {
      if (error != NULL && *error == NULL)
        g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE,
                     _ ("the ledger %s has no such frame or person"), ledger->path);
      return FALSE;
    }
  g_autoptr (JsonBuilder) body = json_builder_new ();
  json_builder_begin_object (body);
  tf_json_string (body, "person", person_id);
  tf_json_string (body, "frame", frame_id);
  tf_json_string (body, "geometry", text);
  json_builder_end_object (body);
  g_autofree char *subject = tf_subject ('g', frame_id, person_id, NULL);
  return tf_act_append (ledger, "geometry", subject, body, error);
}

gboolean
tf_ledger_set_geometry (TfLedger *ledger, gint64 frame, gint64 person,
                        const TfCorrection *correction, GError **error)
{
  g_return_val_if_fail (ledger != NULL && correction != NULL, FALSE);
  g_autofree char *text = tf_correction_dup_text (correction);
  if (!tf_ledger_begin (ledger, error))
    return FALSE;
  if (!append (ledger, frame, person, text, error))
    {
      tf_ledger_rollback (ledger);
      return FALSE;
    }
  if (!tf_ledger_commit (ledger, error))
    return FALSE;
  tf_replica_store_state (ledger);
  return TRUE;
}
