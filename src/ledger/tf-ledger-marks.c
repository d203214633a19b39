/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* What people do with outlines, classes and notes: each call appends one act and projects it, in
 * one transaction. */

#include "tf-ledger-private.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-json.h"

/* Ids of what a deed is about, as they stand in bodies and subjects. */
typedef struct
{
  char *person, *frame, *region, *hint, *mark;
} Ids;

static void
ids_clear (Ids *ids)
{
  g_free (ids->person);
  g_free (ids->frame);
  g_free (ids->region);
  g_free (ids->hint);
  g_free (ids->mark);
}
G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (Ids, ids_clear)

static char *
find_id (TfLedger *ledger, const char *sql, gint64 key, const char *what, GError **error)
{
  GError *problem = NULL;
  char *id = tf_text_value (ledger, &problem, sql, "i", key);
  if (problem != NULL)
    g_propagate_error (error, problem);
  else if (id == NULL)
    g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE,
                 _ ("the ledger %s has no %s %" G_GINT64_FORMAT), ledger->path, what, key);
  return id;
}

static char *
person_id (TfLedger *ledger, gint64 key, GError **error)
{
  return find_id (ledger, "SELECT lower (hex (uid)) FROM person WHERE id = ?1", key, _ ("person"),
                  error);
}

static char *
frame_id (TfLedger *ledger, gint64 key, GError **error)
{
  return find_id (ledger, "SELECT lower (hex (cid)) FROM frame WHERE id = ?1", key, _ ("frame"),
                  error);
}

static char *
region_id (TfLedger *ledger, gint64 key, GError **error)
{
  return find_id (ledger, "SELECT lower (hex (uid)) FROM region WHERE id = ?1", key, _ ("region"),
                  error);
}

static char *
hint_id (TfLedger *ledger, gint64 key, GError **error)
{
  return find_id (ledger, "SELECT lower (hex (cid)) FROM hint WHERE id = ?1", key, _ ("hint"),
                  error);
}

static char *
mark_id (TfLedger *ledger, gint64 key, GError **error)
{
  return find_id (ledger, "SELECT lower (hex (uid)) FROM mark WHERE id = ?1", key, _ ("mark"),
                  error);
}

static gboolean
state_error (GError **error, const char *message)
{
  g_set_error_literal (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE, message);
  return FALSE;
}

static gboolean
end_deed (TfLedger *ledger, gboolean ok, GError **error)
{
  if (!ok)
    tf_ledger_rollback (ledger);
  else if ((ok = tf_ledger_commit (ledger, error)))
    tf_replica_store_state (ledger);
  return ok;
}

/* -- keep
 * ------------------------------------------------------------------------------------------- */
/* "T2013-0412": letter, year of the frame, one more than the highest there ever was in this
 * ledger. */
static char *
next_number (TfLedger *ledger, gint64 frame)
{
  double time = NAN;
  {
    g_autoptr (sqlite3_stmt) query
        = tf_query (ledger, NULL, "SELECT time FROM frame WHERE id = ?1", "i", frame);
    if (query != NULL && tf_query_step (ledger, query, NULL) > 0)
      time = tf_column_double (query, 0);
  }
  int year = 0; /* of a frame without a time */
  tf_time_calendar ((TfTime){ time }, &year, NULL, NULL, NULL, NULL, NULL);
  g_autofree char *head = g_strdup_printf ("%c%04d-", ledger->letter, year);
  gint64 last = tf_value (ledger, NULL, 0,
                          "SELECT max (CAST (substr (number, 7) AS INTEGER)) FROM region WHERE "
                          "substr (number, 1, 6) = ?1",
                          "t", head);
  return g_strdup_printf ("%s%04" G_GINT64_FORMAT, head, last + 1);
}

typedef struct
{
  Ids ids;
  char *number, *follows, *measure, *outline;
  gint64 hint;
} Keep;

static void
keep_clear (Keep *keep)
{
  ids_clear (&keep->ids);
  g_free (keep->number);
  g_free (keep->follows);
  g_free (keep->measure);
  g_free (keep->outline);
}
G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (Keep, keep_clear)

/* The mark a deed follows gives its region and, when the deed names none, its hint. */
static gint64
region_of_followed (TfLedger *ledger, const TfMarkDeed *deed, Keep *keep, GError **error)
{
  keep->follows = mark_id (ledger, deed->follows, error);
  if (keep->follows == NULL)
    return 0;
  if (tf_value (ledger, NULL, 0, "SELECT frame FROM mark WHERE id = ?1", "i", deed->follows)
      != deed->frame)
    {
      state_error (error, _ ("a mark can only take the place of a mark on the same frame; keep it "
                             "as a mark of the region"));
      return 0;
    }
  if (keep->hint == 0)
    keep->hint
        = tf_value (ledger, NULL, 0, "SELECT hint FROM mark WHERE id = ?1", "i", deed->follows);
  return tf_value (ledger, error, 0, "SELECT region FROM mark WHERE id = ?1", "i", deed->follows);
}

static gboolean
find_region (TfLedger *ledger, const TfMarkDeed *deed, Keep *keep, GError **error)
{
  gint64 region
      = deed->follows != 0 ? region_of_followed (ledger, deed, keep, error) : deed->region;
  if (deed->follows != 0 && region == 0)
    return FALSE;
  if (region == 0)
    {
      keep->ids.region = tf_uuid7 (ledger->now (ledger->now_data));
      keep->number = next_number (ledger, deed->frame);
      return TRUE;
    }
  keep->ids.region = region_id (ledger, region, error);
  keep->number
      = tf_text_value (ledger, NULL, "SELECT number FROM region WHERE id = ?1", "i", region);
  return keep->ids.region != NULL && keep->number != NULL;
}

static gboolean
find_ids (TfLedger *ledger, const TfMarkDeed *deed, Keep *keep, GError **error)
{
  keep->hint = deed->hint;
  keep->ids.person = person_id (ledger, deed->person, error);
  keep->ids.frame = keep->ids.person != NULL ? frame_id (ledger, deed->frame, error) : NULL;
  if (keep->ids.frame == NULL || !find_region (ledger, deed, keep, error))
    return FALSE;
  if (keep->hint != 0 && (keep->ids.hint = hint_id (ledger, keep->hint, error)) == NULL)
    return FALSE;
  keep->ids.mark = tf_uuid7 (ledger->now (ledger->now_data));
  keep->outline = tf_outline_dup_text (deed->outline);
  return tf_measure_put (ledger, deed->frame, keep->ids.frame, deed->method, keep->outline,
                         deed->measure, TF_VERSION, &keep->measure, error)
         != 0;
}

static JsonBuilder *
keep_body (const TfMarkDeed *deed, const Keep *keep)
{
  JsonBuilder *body = json_builder_new ();
  json_builder_begin_object (body);
  tf_json_string (body, "person", keep->ids.person);
  tf_json_string (body, "region", keep->ids.region);
  tf_json_string (body, "number", keep->number);
  tf_json_string (body, "frame", keep->ids.frame);
  tf_json_string (body, "mark", keep->ids.mark);
  tf_json_int (body, "origin", deed->origin);
  tf_json_string (body, "hint", keep->ids.hint);
  tf_json_string (body, "follows", keep->follows);
  tf_json_string (body, "label", deed->label);
  tf_json_string (body, "method", deed->method);
  tf_json_string (body, "measure", keep->measure);
  json_builder_set_member_name (body, "outline");
  tf_outline_build_json (deed->outline, body);
  json_builder_end_object (body);
  return body;
}

/* Until follow has run again a new mark stands where its hint or the mark before it stood. */
static gboolean
keep_passage (TfLedger *ledger, gint64 mark, GError **error)
{
  return tf_run (ledger, error,
                 "INSERT OR IGNORE INTO member (hint, mark, passage, time) SELECT 0, m.id, b.passage, b.time FROM mark m JOIN member b ON "
                 "b.hint = 0 AND b.mark = m.follows OR b.hint = 1 AND b.mark = m.hint WHERE m.id = ?1 ORDER BY b.hint LIMIT 1",
                 "i", mark);
}

static gint64
keep (TfLedger *ledger, const TfMarkDeed *deed, GError **error)
{
  g_auto (Keep) k = { 0 };
  if (!find_ids (ledger, deed, &k, error))
    return 0;
  g_autoptr (JsonBuilder) body = keep_body (deed, &k);
  g_autofree char *subject = tf_subject ('m', k.ids.region, k.ids.frame, k.ids.person, NULL);
  if (!tf_act_append (ledger, "keep", subject, body, error))
    return 0;
  gint64 mark = tf_value (ledger, error, 0, "SELECT id FROM mark WHERE uid = ?1", "h", k.ids.mark);
  return mark != 0 && keep_passage (ledger, mark, error) ? mark : 0;
}

gint64
tf_ledger_keep (TfLedger *ledger, const TfMarkDeed *deed, GError **error)
{
  g_return_val_if_fail (
      ledger != NULL && deed != NULL && deed->outline != NULL && deed->measure != NULL, 0);
  g_return_val_if_fail (deed->method != NULL, 0);
  if (!tf_ledger_begin (ledger, error))
    return 0;
  gint64 id = keep (ledger, deed, error);
  gboolean done = id != 0
                  && (!deed->ends_draft
                      || tf_draft_remove (ledger, deed->frame, deed->person, error));
  return end_deed (ledger, done, error) ? id : 0;
}

/* -- withdraw, drop
 * --------------------------------------------------------------------------------- */
static gboolean
withdraw (TfLedger *ledger, gint64 mark, gint64 person, GError **error)
{
  g_auto (Ids) ids = { .person = person_id (ledger, person, error) };
  if (ids.person == NULL || (ids.mark = mark_id (ledger, mark, error)) == NULL)
    return FALSE;
  if (tf_value (ledger, NULL, 0, "SELECT live FROM mark WHERE id = ?1", "i", mark) == 0)
    return state_error (error, _ ("that mark has been taken back or replaced already; open the "
                                  "ledger again to see it as it is"));
  if (tf_value (ledger, NULL, 0, "SELECT person FROM mark WHERE id = ?1", "i", mark) != person)
    return state_error (
        error, _ ("that mark is another person's; only whoever made a mark takes it back"));
  ids.region = tf_text_value (
      ledger, error,
      "SELECT lower (hex (g.uid)) FROM mark m JOIN region g ON g.id = m.region WHERE m.id = ?1",
      "i", mark);
  ids.frame = tf_text_value (
      ledger, error,
      "SELECT lower (hex (f.cid)) FROM mark m JOIN frame f ON f.id = m.frame WHERE m.id = ?1", "i",
      mark);
  g_autoptr (JsonBuilder) body = json_builder_new ();
  json_builder_begin_object (body);
  tf_json_string (body, "person", ids.person);
  tf_json_string (body, "mark", ids.mark);
  tf_json_string (body, "region", ids.region);
  tf_json_string (body, "frame", ids.frame);
  json_builder_end_object (body);
  g_autofree char *subject = tf_subject ('m', ids.region, ids.frame, ids.person, NULL);
  return tf_act_append (ledger, "withdraw", subject, body, error);
}

gboolean
tf_ledger_withdraw (TfLedger *ledger, gint64 mark, gint64 person, GError **error)
{
  g_return_val_if_fail (ledger != NULL, FALSE);
  return tf_ledger_begin (ledger, error)
         && end_deed (ledger, withdraw (ledger, mark, person, error), error);
}

static gboolean
drop (TfLedger *ledger, gint64 hint, gint64 person, GError **error)
{
  g_auto (Ids) ids = { .person = person_id (ledger, person, error) };
  if (ids.person == NULL || (ids.hint = hint_id (ledger, hint, error)) == NULL)
    return FALSE;
  if (tf_value (ledger, NULL, 0, "SELECT 1 FROM dropped WHERE hint = ?1 AND person = ?2", "ii",
                hint, person)
      != 0)
    return state_error (error, _ ("that hint has been dropped already"));
  g_autoptr (JsonBuilder) body = json_builder_new ();
  json_builder_begin_object (body);
  tf_json_string (body, "person", ids.person);
  tf_json_string (body, "hint", ids.hint);
  json_builder_end_object (body);
  g_autofree char *subject = tf_subject ('d', ids.hint, ids.person, NULL);
  return tf_act_append (ledger, "drop", subject, body, error);
}

gboolean
tf_ledger_drop_hint (TfLedger *ledger, gint64 hint, gint64 person, GError **error)
{
  g_return_val_if_fail (ledger != NULL, FALSE);
  return tf_ledger_begin (ledger, error)
         && end_deed (ledger, drop (ledger, hint, person, error), error);
}

/* -- notes and classes
 * ------------------------------------------------------------------------------ */
static gboolean
set_note (TfLedger *ledger, gint64 region, gint64 person, const char *text, GError **error)
{
  g_auto (Ids) ids = { .person = person_id (ledger, person, error) };
  if (ids.person == NULL || (ids.region = region_id (ledger, region, error)) == NULL)
    return FALSE;
  g_autoptr (JsonBuilder) body = json_builder_new ();
  json_builder_begin_object (body);
  tf_json_string (body, "person", ids.person);
  tf_json_string (body, "region", ids.region);
  tf_json_string (body, "text", text);
  json_builder_end_object (body);
  g_autofree char *subject = tf_subject ('n', ids.region, ids.person, NULL);
  return tf_act_append (ledger, "note", subject, body, error);
}

gboolean
tf_ledger_set_note (TfLedger *ledger, gint64 region, gint64 person, const char *text,
                    GError **error)
{
  g_return_val_if_fail (ledger != NULL && text != NULL, FALSE);
  return tf_ledger_begin (ledger, error)
         && end_deed (ledger, set_note (ledger, region, person, text, error), error);
}

/* A label or an external number: @kind is the act's. */
static gboolean
set_fact (TfLedger *ledger, const char *kind, gint64 region, gint64 person, const char *text,
          GError **error)
{
  g_auto (Ids) ids = { .person = person_id (ledger, person, error) };
  if (ids.person == NULL || (ids.region = region_id (ledger, region, error)) == NULL)
    return FALSE;
  g_autoptr (JsonBuilder) body = json_builder_new ();
  json_builder_begin_object (body);
  tf_json_string (body, "person", ids.person);
  tf_json_string (body, "region", ids.region);
  tf_json_string (body, "text", text);
  json_builder_end_object (body);
  g_autofree char *subject = tf_subject (kind[0], ids.region, ids.person, NULL);
  return tf_act_append (ledger, kind, subject, body, error);
}

gboolean
tf_ledger_set_label (TfLedger *ledger, gint64 region, gint64 person, const char *text,
                     GError **error)
{
  g_return_val_if_fail (ledger != NULL && text != NULL, FALSE);
  return tf_ledger_begin (ledger, error)
         && end_deed (ledger, set_fact (ledger, "label", region, person, text, error), error);
}

gboolean
tf_ledger_set_external (TfLedger *ledger, gint64 region, gint64 person, const char *text,
                        GError **error)
{
  g_return_val_if_fail (ledger != NULL && text != NULL, FALSE);
  return tf_ledger_begin (ledger, error)
         && end_deed (ledger, set_fact (ledger, "external", region, person, text, error), error);
}

/* -- several as one
 * --------------------------------------------------------------------------------- */
gboolean
tf_ledger_begin_bundle (TfLedger *ledger, const char *as, GError **error)
{
  g_return_val_if_fail (ledger != NULL && as != NULL && ledger->bundle_as == NULL, FALSE);
  if (!tf_ledger_begin (ledger, error))
    return FALSE;
  ledger->bundle_as = as;
  ledger->bundle = 0;
  return TRUE;
}

gboolean
tf_ledger_end_bundle (TfLedger *ledger, gboolean ok, GError **error)
{
  g_return_val_if_fail (ledger != NULL && ledger->bundle_as != NULL, FALSE);
  ledger->bundle_as = NULL;
  return end_deed (ledger, ok, error);
}

static gboolean
set_class (TfLedger *ledger, gint64 region, gint64 frame, gint64 person, const char *class_text,
           const char *evidence, GError **error)
{
  g_auto (Ids) ids = { .person = person_id (ledger, person, error) };
  if (ids.person == NULL || (ids.region = region_id (ledger, region, error)) == NULL
      || (ids.frame = frame_id (ledger, frame, error)) == NULL)
    return FALSE;
  g_autoptr (JsonBuilder) body = json_builder_new ();
  json_builder_begin_object (body);
  tf_json_string (body, "person", ids.person);
  tf_json_string (body, "region", ids.region);
  tf_json_string (body, "frame", ids.frame);
  tf_json_string (body, "class", class_text);
  tf_json_string (body, "evidence", evidence);
  json_builder_end_object (body);
  g_autofree char *subject = tf_subject ('c', ids.region, ids.frame, ids.person, NULL);
  return tf_act_append (ledger, "class", subject, body, error);
}

gboolean
tf_ledger_set_class (TfLedger *ledger, gint64 region, gint64 frame, gint64 person,
                     const char *class_text, const char *evidence, GError **error)
{
  g_return_val_if_fail (ledger != NULL && class_text != NULL, FALSE);
  return tf_ledger_begin (ledger, error)
         && end_deed (
             ledger, set_class (ledger, region, frame, person, class_text, evidence, error), error);
}
