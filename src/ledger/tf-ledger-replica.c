/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Under which replica this copy of the file writes.
 *
 * A replica is one line of deeds that nobody else continues. A file can be copied, restored from a
 * backup, or opened by somebody else, and two lines under one name could never be merged. So each
 * person on each machine has lines of their own: the state folder
 * ($XDG_STATE_HOME/tiltfield/replicas) holds, a file a replica, the last seq and hash written
 * here, the machine, and the path and inode of the ledger. A replica in the file is ours to
 * continue when all of this holds:
 *   - there is a state for it, written on this machine (else: another machine, another user, a
 *     lost state folder);
 *   - the act at the state's seq is in the file with the state's hash (else: an older copy was put
 *     back, or another copy went on; a file that is ahead of its state is well: a crash between
 *     the commit and the state, or another process);
 *   - the file is the one the state tells of: the same inode, or the file it tells of is gone
 *     (moved). Else it is a copy, and the original may go on. If none is ours the next deed begins
 *     a new replica, which costs a row. Not seen here: a machine cloned with its state folder and
 *     the ledger. Two acts with one (replica, seq) and different hashes then meet when parcels do,
 *     and are named there. */

#include "tf-ledger-private.h"

#include <string.h>
#include <sys/stat.h>

#include "tf-json.h"

#define GROUP "replica"

static char *
machine_id (void)
{
  g_autofree char *text = NULL;
  if (!g_file_get_contents ("/etc/machine-id", &text, NULL, NULL))
    return g_strdup (g_get_host_name ());
  g_autofree char *id = tf_content_id ("tiltfield machine 1", g_strstrip (text), NULL);
  return g_strndup (id, TF_ID_HEX);
}

static char *
state_path (TfLedger *ledger, const char *replica)
{
  return g_build_filename (ledger->state_dir, replica, NULL);
}

static guint64
inode_of (const char *path)
{
  struct stat info;
  return stat (path, &info) == 0 ? (guint64)info.st_ino : 0;
}

typedef enum
{
  STATE_OURS,
  STATE_NONE,   /* not known here */
  STATE_COPY,   /* a copy of a file that is still there */
  STATE_BEHIND, /* acts that were written here are not in the file, or others stand in their place */
} State;

static State
judge_state (TfLedger *ledger, GKeyFile *state, gint64 replica)
{
  g_autofree char *machine = machine_id ();
  g_autofree char *its_machine = g_key_file_get_string (state, GROUP, "machine", NULL);
  if (g_strcmp0 (machine, its_machine) != 0)
    return STATE_NONE;
  gint64 seq = g_key_file_get_int64 (state, GROUP, "seq", NULL);
  g_autofree char *hash = g_key_file_get_string (state, GROUP, "hash", NULL);
  g_autofree char *here = tf_text_value (
      ledger, NULL, "SELECT lower (hex (hash)) FROM act WHERE replica = ?1 AND seq = ?2", "ii",
      replica, seq);
  if (here == NULL || g_strcmp0 (here, hash) != 0)
    return STATE_BEHIND;
  g_autofree char *path = g_key_file_get_string (state, GROUP, "path", NULL);
  guint64 inode = g_key_file_get_uint64 (state, GROUP, "inode", NULL);
  if (inode == inode_of (ledger->path))
    return STATE_OURS;
  return path != NULL && inode_of (path) == inode ? STATE_COPY : STATE_OURS;
}

static State
look_at (TfLedger *ledger, const char *id, gint64 no)
{
  g_autoptr (GKeyFile) state = g_key_file_new ();
  g_autofree char *path = state_path (ledger, id);
  if (!g_key_file_load_from_file (state, path, G_KEY_FILE_NONE, NULL))
    return STATE_NONE;
  return judge_state (ledger, state, no);
}

static void
say_why (TfLedger *ledger, gboolean behind, gboolean copy, gint64 n)
{
  if (behind)
    tf_notes_add (ledger->notices, "ledger-older-copy", "s", ledger->path);
  else if (copy)
    tf_notes_add (ledger->notices, "ledger-copied", "s", ledger->path);
  else if (n > 0)
    tf_notes_add (ledger->notices, "ledger-from-elsewhere", "s", ledger->path);
}

static GPtrArray *
list_replicas (TfLedger *ledger, GError **error)
{
  g_autoptr (GPtrArray) ids = g_ptr_array_new_with_free_func (g_free);
  g_autoptr (sqlite3_stmt) query
      = tf_query (ledger, error, "SELECT id FROM replica ORDER BY no", "");
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    g_ptr_array_add (ids, tf_column_dup_hex (query, 0));
  return more == 0 ? g_steal_pointer (&ids) : NULL;
}

/* Own deeds are told apart from a clock that was set back by their clock alone; the wall time is
 * only shown. */
static void
look_at_clock (TfLedger *ledger)
{
  gint64 last = tf_value (ledger, NULL, 0, "SELECT max (wall) FROM act WHERE replica = ?1", "i",
                          ledger->replica);
  gint64 back = last - ledger->now (ledger->now_data);
  if (ledger->replica != 0 && back > 60 * 1000)
    tf_notes_add (ledger->notices, "clock-set-back", "sd", ledger->path, (double)back / 3.6e6);
}

gboolean
tf_replica_choose (TfLedger *ledger, GError **error)
{
  g_autoptr (GPtrArray) ids = list_replicas (ledger, error);
  if (ids == NULL)
    return FALSE;
  gboolean behind = FALSE, copy = FALSE;
  ledger->replica = 0;
  g_clear_pointer (&ledger->replica_id, g_free);
  for (guint k = 0; k < ids->len; k++)
    {
      const char *id = g_ptr_array_index (ids, k);
      gint64 no = tf_value (ledger, NULL, 0, "SELECT no FROM replica WHERE id = ?1", "h", id);
      State state = strlen (id) == TF_ID_HEX ? look_at (ledger, id, no) : STATE_NONE;
      behind = behind || state == STATE_BEHIND;
      copy = copy || state == STATE_COPY;
      if (state != STATE_OURS)
        continue;
      ledger->replica = no;
      g_free (ledger->replica_id);
      ledger->replica_id = g_strdup (id);
    }
  if (ledger->replica == 0)
    say_why (ledger, behind, copy, ids->len);
  look_at_clock (ledger);
  return TRUE;
}

gboolean
tf_replica_begin (TfLedger *ledger, GError **error)
{
  gint64 now = ledger->now (ledger->now_data);
  g_autofree char *id = tf_uuid7 (now);
  char letter[2] = { ledger->letter, '\0' };
  if (!tf_run (ledger, error, "INSERT INTO replica (id, letter, born) VALUES (?1, ?2, ?3)", "hti",
               id, letter, now))
    return FALSE;
  ledger->replica = sqlite3_last_insert_rowid (ledger->db);
  ledger->replica_is_new = TRUE;
  g_free (ledger->replica_id);
  ledger->replica_id = g_strdup (id);
  g_autofree char *ledger_id
      = tf_text_value (ledger, NULL, "SELECT value FROM setting WHERE key = 'ledger'", "");
  g_autoptr (JsonBuilder) body = json_builder_new ();
  json_builder_begin_object (body);
  tf_json_string (body, "ledger", ledger_id);
  tf_json_string (body, "letter", letter);
  tf_json_string (body, "program", TF_VERSION);
  json_builder_end_object (body);
  g_autofree char *subject = tf_subject ('b', id, NULL);
  return tf_act_append (ledger, "begin", subject, body, error);
}

void
tf_replica_store_state (TfLedger *ledger)
{
  if (ledger->replica == 0 || ledger->bundle_as != NULL) /* nothing is committed in a bundle */
    return;
  gint64 seq = tf_value (ledger, NULL, 0, "SELECT upto FROM have WHERE replica = ?1", "i",
                         ledger->replica);
  g_autofree char *hash = tf_text_value (
      ledger, NULL, "SELECT lower (hex (hash)) FROM act WHERE replica = ?1 AND seq = ?2", "ii",
      ledger->replica, seq);
  g_autofree char *machine = machine_id ();
  g_autoptr (GKeyFile) state = g_key_file_new ();
  g_key_file_set_int64 (state, GROUP, "seq", seq);
  g_key_file_set_string (state, GROUP, "hash", hash != NULL ? hash : "");
  g_key_file_set_string (state, GROUP, "machine", machine);
  g_key_file_set_string (state, GROUP, "path", ledger->path);
  g_key_file_set_uint64 (state, GROUP, "inode", inode_of (ledger->path));
  g_autofree char *path = state_path (ledger, ledger->replica_id);
  /* Without a state the next opening begins a new replica, which is safe: said once, not an error. */
  g_mkdir_with_parents (ledger->state_dir, 0700);
  if (!g_key_file_save_to_file (state, path, NULL))
    tf_notes_add (ledger->notices, "replica-state-unwritten", "s", ledger->state_dir);
}
