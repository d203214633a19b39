/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* From acts to what they say. The same functions serve the writing of an act and the making anew
 * by check: they read acts, machine rows and projections, and write projections only. What a
 * subject holds is always worked out from its acts. */

#include "tf-ledger-private.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-json.h"

/* The act that speaks for a subject: the last one that stands. */
#define CURRENT_SQL                                                                                \
  "SELECT a.replica, a.seq, a.clock, a.kind, CAST (a.body AS TEXT) FROM act a JOIN deed d ON "     \
  "d.replica = a.replica"                                                                          \
  " AND d.seq = a.seq AND d.undone = 0 JOIN replica r ON r.no = a.replica WHERE a.subject = ?1"    \
  " AND a.kind NOT IN ('undo', 'redo') ORDER BY a.clock DESC, r.id DESC, a.seq DESC LIMIT 1"

typedef struct
{
  gint64 replica, seq, clock;
  char *kind;
  JsonNode *root;
  JsonObject *body; /* NULL when nothing stands */
} Current;

static void
current_clear (Current *current)
{
  g_free (current->kind);
  g_clear_pointer (&current->root, json_node_unref);
}
G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (Current, current_clear)

static gboolean
damaged (TfLedger *ledger, const char *what, GError **error)
{
  g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_DAMAGED,
               _ ("the ledger %s: an act is incomplete or names what is not there (%s); run check, "
                  "or go back to a backup"),
               ledger->path, what);
  return FALSE;
}

static JsonNode *
parse_object (const char *text)
{
  JsonNode *root = text != NULL ? json_from_string (text, NULL) : NULL;
  if (root != NULL && !JSON_NODE_HOLDS_OBJECT (root))
    g_clear_pointer (&root, json_node_unref);
  return root;
}

static gboolean
find_current (TfLedger *ledger, const char *subject, Current *current, GError **error)
{
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, CURRENT_SQL, "h", subject);
  int more = query != NULL ? tf_query_step (ledger, query, error) : -1;
  if (more <= 0)
    return more == 0;
  current->replica = sqlite3_column_int64 (query, 0);
  current->seq = sqlite3_column_int64 (query, 1);
  current->clock = sqlite3_column_int64 (query, 2);
  current->kind = g_strdup (tf_column_text (query, 3));
  current->root = parse_object (tf_column_text (query, 4));
  if (current->root == NULL)
    return damaged (ledger, current->kind, error);
  current->body = json_node_get_object (current->root);
  return TRUE;
}

gboolean
tf_project_current (TfLedger *ledger, const char *subject, gint64 *replica, gint64 *seq,
                    GError **error)
{
  g_auto (Current) current = { 0 };
  if (!find_current (ledger, subject, &current, error))
    return FALSE;
  *replica = current.replica;
  *seq = current.seq;
  return TRUE;
}

/* An id that stands in a body: exactly @digits hex digits, else NULL. */
static const char *
body_id (JsonObject *body, const char *key, gsize digits)
{
  const char *id = tf_json_member_string (body, key);
  if (id == NULL || strlen (id) != digits)
    return NULL;
  for (const char *p = id; *p != '\0'; p++)
    if (!g_ascii_isxdigit (*p))
      return NULL;
  return id;
}

static gint64
key_of (TfLedger *ledger, const char *sql, JsonObject *body, const char *key, gsize digits)
{
  const char *id = body_id (body, key, digits);
  return id != NULL ? tf_value (ledger, NULL, 0, sql, "h", id) : 0;
}

static gint64
person_key (TfLedger *ledger, JsonObject *body)
{
  return key_of (ledger, "SELECT id FROM person WHERE uid = ?1", body, "person", TF_ID_HEX);
}

static gint64
frame_key (TfLedger *ledger, JsonObject *body)
{
  return key_of (ledger, "SELECT id FROM frame WHERE cid = ?1", body, "frame", TF_CID_HEX);
}

static gint64
region_key (TfLedger *ledger, JsonObject *body)
{
  return key_of (ledger, "SELECT id FROM region WHERE uid = ?1", body, "region", TF_ID_HEX);
}

static gint64
hint_key (TfLedger *ledger, JsonObject *body)
{
  return key_of (ledger, "SELECT id FROM hint WHERE cid = ?1", body, "hint", TF_CID_HEX);
}

static const char *
body_text (JsonObject *body, const char *key)
{
  const char *text = tf_json_member_string (body, key);
  return text != NULL ? text : "";
}

/* -- person
 * ---------------------------------------------------------------------------------------- */
static gboolean
project_person (TfLedger *ledger, const TfAct *act, GError **error)
{
  const char *uid = body_id (act->body, "person", TF_ID_HEX);
  const char *name = tf_json_member_string (act->body, "name");
  if (uid == NULL || name == NULL)
    return damaged (ledger, "person", error);
  return tf_run (ledger, error, "INSERT OR IGNORE INTO person (uid, name) VALUES (?1, ?2)", "ht",
                 uid, name);
}

/* -- marks
 * ----------------------------------------------------------------------------------------- */
static gboolean
put_region (TfLedger *ledger, JsonObject *body, GError **error)
{
  const char *uid = body_id (body, "region", TF_ID_HEX);
  const char *number = tf_json_member_string (body, "number");
  if (uid == NULL || number == NULL)
    return damaged (ledger, "keep: region", error);
  return tf_run (ledger, error, "INSERT OR IGNORE INTO region (uid, number) VALUES (?1, ?2)", "ht",
                 uid, number);
}

#define MARK_SQL                                                                                   \
  "INSERT OR IGNORE INTO mark (uid, replica, seq, region, frame, person, origin, hint, follows, "  \
  "outline, measure, label, live)"                                                                 \
  " VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8, ?9, ?10, ?11, ?12, 0)"

static gboolean
put_mark (TfLedger *ledger, const TfAct *act, GError **error)
{
  JsonObject *body = act->body;
  const char *uid = body_id (body, "mark", TF_ID_HEX);
  JsonObject *outline = tf_json_member_object (body, "outline");
  gint64 region = region_key (ledger, body), frame = frame_key (ledger, body),
         person = person_key (ledger, body);
  gint64 measure
      = key_of (ledger, "SELECT id FROM measure WHERE cid = ?1", body, "measure", TF_CID_HEX);
  gint64 follows
      = key_of (ledger, "SELECT id FROM mark WHERE uid = ?1", body, "follows", TF_ID_HEX);
  if (uid == NULL || outline == NULL || region == 0 || frame == 0 || person == 0 || measure == 0)
    return damaged (ledger, "keep", error);
  g_autofree char *text = tf_json_node_dup_text (json_object_get_member (body, "outline"), FALSE);
  return tf_run (ledger, error, MARK_SQL, "hiiiiiikktit", uid, act->replica, act->seq, region,
                 frame, person, tf_json_member_int (body, "origin", TF_MARK_DRAWN),
                 hint_key (ledger, body), follows, text, measure, body_text (body, "label"));
}

static gboolean
refresh_mark_and_hint (TfLedger *ledger, gint64 mark, GError **error)
{
  gint64 hint = tf_value (ledger, NULL, 0, "SELECT hint FROM mark WHERE id = ?1", "i", mark);
  return tf_point_refresh_mark (ledger, mark, error)
         && (hint == 0 || tf_point_refresh_hint (ledger, hint, error));
}

/* Which marks the acts of one subject have put in, and whether each is live now. */
static GArray *
list_marks (TfLedger *ledger, const char *subject, gboolean live, GError **error)
{
  g_autoptr (GArray) marks = g_array_new (FALSE, FALSE, sizeof (gint64));
  g_autoptr (sqlite3_stmt) query
      = tf_query (ledger, error,
                  "SELECT m.id FROM act a JOIN mark m ON m.replica = a.replica AND m.seq = a.seq"
                  " WHERE a.subject = ?1 AND m.live = ?2",
                  "hi", subject, (gint64)live);
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      gint64 id = sqlite3_column_int64 (query, 0);
      g_array_append_val (marks, id);
    }
  return more == 0 ? g_steal_pointer (&marks) : NULL;
}

static gboolean
set_live (TfLedger *ledger, gint64 mark, gboolean live, GError **error)
{
  return tf_run (ledger, error, "UPDATE mark SET live = ?2 WHERE id = ?1", "ii", mark, (gint64)live)
         && refresh_mark_and_hint (ledger, mark, error);
}

static gboolean
project_marks (TfLedger *ledger, const char *subject, GError **error)
{
  g_auto (Current) current = { 0 };
  if (!find_current (ledger, subject, &current, error))
    return FALSE;
  gint64 live
      = g_strcmp0 (current.kind, "keep") == 0
            ? tf_value (ledger, NULL, 0, "SELECT id FROM mark WHERE replica = ?1 AND seq = ?2",
                        "ii", current.replica, current.seq)
            : 0;
  g_autoptr (GArray) others = list_marks (ledger, subject, TRUE, error);
  if (others == NULL)
    return FALSE;
  for (guint k = 0; k < others->len; k++)
    if (g_array_index (others, gint64, k) != live
        && !set_live (ledger, g_array_index (others, gint64, k), FALSE, error))
      return FALSE;
  return live == 0 || set_live (ledger, live, TRUE, error);
}

/* -- dropped hints, classes, notes
 * ------------------------------------------------------------------ */
static gboolean
project_dropped (TfLedger *ledger, const char *subject, JsonObject *body, GError **error)
{
  g_auto (Current) current = { 0 };
  gint64 hint = hint_key (ledger, body), person = person_key (ledger, body);
  if (hint == 0 || person == 0)
    return damaged (ledger, "drop", error);
  if (!find_current (ledger, subject, &current, error))
    return FALSE;
  const char *sql = current.body != NULL
                        ? "INSERT OR IGNORE INTO dropped (hint, person) VALUES (?1, ?2)"
                        : "DELETE FROM dropped WHERE hint = ?1 AND person = ?2";
  return tf_run (ledger, error, sql, "ii", hint, person)
         && tf_point_refresh_hint (ledger, hint, error);
}

static gboolean
project_class (TfLedger *ledger, const char *subject, JsonObject *body, GError **error)
{
  g_auto (Current) current = { 0 };
  gint64 region = region_key (ledger, body), frame = frame_key (ledger, body),
         person = person_key (ledger, body);
  if (region == 0 || frame == 0 || person == 0)
    return damaged (ledger, "class", error);
  if (!find_current (ledger, subject, &current, error)
      || !tf_run (ledger, error,
                  "DELETE FROM class WHERE region = ?1 AND frame = ?2 AND person = ?3", "iii",
                  region, frame, person))
    return FALSE;
  const char *text = current.body != NULL ? body_text (current.body, "class") : "";
  return *text == '\0'
         || tf_run (ledger, error,
                    "INSERT INTO class (region, frame, person, class, evidence, clock) VALUES (?1, "
                    "?2, ?3, ?4, ?5, ?6)",
                    "iiitti", region, frame, person, text, body_text (current.body, "evidence"),
                    current.clock);
}

static gboolean
project_note (TfLedger *ledger, const char *subject, JsonObject *body, GError **error)
{
  g_auto (Current) current = { 0 };
  gint64 region = region_key (ledger, body), person = person_key (ledger, body);
  if (region == 0 || person == 0)
    return damaged (ledger, "note", error);
  if (!find_current (ledger, subject, &current, error)
      || !tf_run (ledger, error, "DELETE FROM note WHERE region = ?1 AND person = ?2", "ii", region,
                  person))
    return FALSE;
  const char *text = current.body != NULL ? body_text (current.body, "text") : "";
  return *text == '\0'
         || tf_run (ledger, error,
                    "INSERT INTO note (region, person, text, clock) VALUES (?1, ?2, ?3, ?4)",
                    "iiti", region, person, text, current.clock);
}

/* -- shifts
 * ---------------------------------------------------------------------------------------- */
static gboolean
project_resolved (TfLedger *ledger, const char *subject, JsonObject *body, GError **error)
{
  g_auto (Current) current = { 0 };
  gint64 region = region_key (ledger, body);
  gint64 author
      = key_of (ledger, "SELECT id FROM person WHERE uid = ?1", body, "author", TF_ID_HEX);
  if (region == 0 || author == 0)
    return damaged (ledger, "resolve", error);
  if (!find_current (ledger, subject, &current, error)
      || !tf_run (ledger, error, "DELETE FROM resolved WHERE region = ?1 AND author = ?2", "ii",
                  region, author))
    return FALSE;
  const char *text = current.body != NULL ? body_text (current.body, "text") : "";
  return *text == '\0'
         || tf_run (ledger, error,
                    "INSERT INTO resolved (region, author, text, person, clock) VALUES (?1, ?2, "
                    "?3, ?4, ?5)",
                    "iitii", region, author, text, person_key (ledger, current.body),
                    current.clock);
}

static gboolean
project_shift (TfLedger *ledger, const TfAct *act, GError **error)
{
  const char *uid = body_id (act->body, "shift", TF_ID_HEX);
  gint64 person = person_key (ledger, act->body);
  if (uid == NULL || person == 0)
    return damaged (ledger, "shift", error);
  return tf_run (ledger, error,
                 "INSERT OR IGNORE INTO shift (uid, person, time, clock) VALUES (?1, ?2, ?3, ?4)",
                 "hidi", uid, person, tf_json_member_number (act->body, "time"), act->clock);
}

/* -- links and cuts
 * -------------------------------------------------------------------------------- */
static const char *
sight_id (JsonObject *body, const char *key)
{
  const char *mark = body_id (body, key, TF_ID_HEX);
  return mark != NULL ? mark : body_id (body, key, TF_CID_HEX);
}

static gboolean
project_tie (TfLedger *ledger, const char *subject, JsonObject *body, GError **error)
{
  g_auto (Current) current = { 0 };
  const char *a = sight_id (body, "a"), *b = sight_id (body, "b");
  if (a == NULL || b == NULL)
    return damaged (ledger, "link", error);
  if (!find_current (ledger, subject, &current, error)
      || !tf_run (ledger, error, "DELETE FROM tie WHERE a = ?1 AND b = ?2", "hh", a, b))
    return FALSE;
  if (current.body == NULL)
    return TRUE;
  gint64 cut = strcmp (current.kind, "cut") == 0, person = person_key (ledger, current.body);
  return tf_run (ledger, error,
                 "INSERT INTO tie (a, b, cut, person, reason, clock) VALUES (?1, ?2, ?3, ?4, ?5, ?6)",
                 "hhiiti", a, b, cut, person, body_text (current.body, "reason"), current.clock);
}

static gboolean
project_geometry (TfLedger *ledger, const char *subject, JsonObject *body, GError **error)
{
  g_auto (Current) current = { 0 };
  gint64 frame = frame_key (ledger, body), person = person_key (ledger, body);
  if (frame == 0 || person == 0)
    return damaged (ledger, "geometry", error);
  if (!find_current (ledger, subject, &current, error)
      || !tf_run (ledger, error, "DELETE FROM geometry WHERE frame = ?1 AND person = ?2", "ii",
                  frame, person))
    return FALSE;
  const char *text = current.body != NULL ? body_text (current.body, "geometry") : "";
  return *text == '\0'
         || tf_run (ledger, error,
                    "INSERT INTO geometry (frame, person, text, clock) VALUES (?1, ?2, ?3, ?4)",
                    "iiti", frame, person, text, current.clock);
}

static gboolean
project_divide (TfLedger *ledger, const char *subject, JsonObject *body, GError **error)
{
  g_auto (Current) current = { 0 };
  const char *study = body_text (body, "study");
  gint64 cycle = tf_json_member_int (body, "minimum", 0),
         hemisphere = tf_json_member_int (body, "hemisphere", 0);
  if (*study == '\0' || cycle <= 0 || (hemisphere != 1 && hemisphere != -1))
    return damaged (ledger, "divide", error);
  if (!find_current (ledger, subject, &current, error)
      || !tf_run (ledger, error,
                  "DELETE FROM divide WHERE study = ?1 AND cycle = ?2 AND hemisphere = ?3", "tii",
                  study, cycle, hemisphere))
    return FALSE;
  JsonArray *points = current.body != NULL ? tf_json_member_array (current.body, "points") : NULL;
  if (points == NULL || json_array_get_length (points) == 0)
    return TRUE;
  g_autofree char *text
      = tf_json_node_dup_text (json_object_get_member (current.body, "points"), FALSE);
  return tf_run (ledger, error,
                 "INSERT INTO divide (study, cycle, hemisphere, points, shown, person, clock) "
                 "VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7)",
                 "tiitiii", study, cycle, hemisphere, text,
                 (gint64)tf_json_member_bool (current.body, "polarity_shown", FALSE),
                 person_key (ledger, current.body), current.clock);
}

static gboolean
project_scale (TfLedger *ledger, const char *subject, JsonObject *body, GError **error)
{
  g_auto (Current) current = { 0 };
  const char *instrument = body_text (body, "instrument");
  if (*instrument == '\0' || person_key (ledger, body) == 0)
    return damaged (ledger, "scale", error);
  if (!find_current (ledger, subject, &current, error)
      || !tf_run (ledger, error, "DELETE FROM scale WHERE instrument = ?1", "t", instrument))
    return FALSE;
  double factor
      = current.body != NULL ? tf_json_member_number (current.body, "factor") : NAN;
  return isnan (factor)
         || tf_run (ledger, error,
                    "INSERT INTO scale (instrument, reference, factor, sigma, evidence, person, "
                    "clock) VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7)",
                    "ttddtii", instrument, body_text (current.body, "reference"), factor,
                    tf_json_member_number (current.body, "sigma"),
                    body_text (current.body, "evidence"), person_key (ledger, current.body),
                    current.clock);
}

static gboolean
project_fact (TfLedger *ledger, const char *kind, const char *subject, JsonObject *body,
              GError **error)
{
  g_auto (Current) current = { 0 };
  gint64 region = region_key (ledger, body), person = person_key (ledger, body);
  if (region == 0 || person == 0)
    return damaged (ledger, kind, error);
  if (!find_current (ledger, subject, &current, error)
      || !tf_run (ledger, error,
                  "DELETE FROM fact WHERE region = ?1 AND person = ?2 AND what = ?3", "iit", region,
                  person, kind))
    return FALSE;
  const char *text = current.body != NULL ? body_text (current.body, "text") : "";
  return *text == '\0'
         || tf_run (ledger, error,
                    "INSERT INTO fact (region, person, what, text, clock) VALUES (?1, ?2, ?3, ?4, "
                    "?5)",
                    "iitti", region, person, kind, text, current.clock);
}

static gboolean
project_subject (TfLedger *ledger, const char *kind, const char *subject, JsonObject *body,
                 GError **error)
{
  if (strcmp (kind, "keep") == 0 || strcmp (kind, "withdraw") == 0)
    return project_marks (ledger, subject, error);
  if (strcmp (kind, "drop") == 0)
    return project_dropped (ledger, subject, body, error);
  if (strcmp (kind, "class") == 0)
    return project_class (ledger, subject, body, error);
  if (strcmp (kind, "resolve") == 0)
    return project_resolved (ledger, subject, body, error);
  if (strcmp (kind, "geometry") == 0)
    return project_geometry (ledger, subject, body, error);
  if (strcmp (kind, "divide") == 0)
    return project_divide (ledger, subject, body, error);
  if (strcmp (kind, "scale") == 0)
    return project_scale (ledger, subject, body, error);
  if (strcmp (kind, "study") == 0 || strcmp (kind, "edition") == 0)
    return tf_named_project (ledger, kind, subject, error);
  if (strcmp (kind, "link") == 0 || strcmp (kind, "cut") == 0)
    return project_tie (ledger, subject, body, error);
  if (strcmp (kind, "label") == 0 || strcmp (kind, "external") == 0)
    return project_fact (ledger, kind, subject, body, error);
  return project_note (ledger, subject, body, error);
}

/* -- undo and redo
 * ---------------------------------------------------------------------------------- */
static gboolean
project_undo (TfLedger *ledger, const TfAct *act, GError **error)
{
  gint64 undone = strcmp (act->kind, "undo") == 0;
  gint64 seq = tf_json_member_int (act->body, "act", 0);
  gint64 replica
      = key_of (ledger, "SELECT no FROM replica WHERE id = ?1", act->body, "replica", TF_ID_HEX);
  g_autofree char *kind = tf_text_value (
      ledger, error, "SELECT kind FROM act WHERE replica = ?1 AND seq = ?2", "ii", replica, seq);
  g_autofree char *text = tf_text_value (
      ledger, error, "SELECT CAST (body AS TEXT) FROM act WHERE replica = ?1 AND seq = ?2", "ii",
      replica, seq);
  g_autoptr (JsonNode) root = parse_object (text);
  if (kind == NULL || root == NULL || !tf_act_is_deed (kind))
    return damaged (ledger, act->kind, error);
  return tf_run (ledger, error, "UPDATE deed SET undone = ?3 WHERE replica = ?1 AND seq = ?2",
                 "iii", replica, seq, undone)
         && project_subject (ledger, kind, act->subject, json_node_get_object (root), error);
}

/* Every act of a person is a deed row (the journal's "who"); a new deed ends what could be redone. */
static gboolean
put_deed (TfLedger *ledger, const TfAct *act, GError **error)
{
  gint64 person = person_key (ledger, act->body);
  if (person == 0)
    return damaged (ledger, act->kind, error);
  if (tf_act_is_deed (act->kind)
      && !tf_run (ledger, error,
                  "UPDATE deed SET undone = 2 WHERE person = ?1 AND replica = ?2 AND undone = 1",
                  "ii", person, act->replica))
    return FALSE;
  gint64 bundle = tf_json_member_int (act->body, "bundle", act->seq);
  if (bundle <= 0 || bundle > act->seq)
    return damaged (ledger, "bundle", error);
  return tf_run (ledger, error,
                 "INSERT INTO deed (replica, seq, person, undone, bundle) VALUES (?1, ?2, ?3, 0, "
                 "?4)",
                 "iiii", act->replica, act->seq, person, bundle);
}

gboolean
tf_act_is_deed (const char *kind)
{
  static const char *const kinds[] = { "keep",    "withdraw", "drop",   "class", "note",
                                       "resolve", "geometry", "divide", "study", "edition",
                                       "link",    "cut",      "label",  "external", "scale", NULL };
  return g_strv_contains (kinds, kind);
}

gboolean
tf_project_act (TfLedger *ledger, const TfAct *act, GError **error)
{
  if (strcmp (act->kind, "begin") == 0)
    return TRUE;
  if (strcmp (act->kind, "person") == 0 && !project_person (ledger, act, error))
    return FALSE;
  if (!put_deed (ledger, act, error))
    return FALSE;
  if (strcmp (act->kind, "keep") == 0
      && !(put_region (ledger, act->body, error) && put_mark (ledger, act, error)))
    return FALSE;
  if (strcmp (act->kind, "shift") == 0)
    return project_shift (ledger, act, error);
  if ((strcmp (act->kind, "study") == 0 || strcmp (act->kind, "edition") == 0)
      && !tf_named_put (ledger, act, error))
    return FALSE;
  if (strcmp (act->kind, "undo") == 0 || strcmp (act->kind, "redo") == 0)
    return project_undo (ledger, act, error);
  return !tf_act_is_deed (act->kind)
         || project_subject (ledger, act->kind, act->subject, act->body, error);
}
