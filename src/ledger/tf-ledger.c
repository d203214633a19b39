/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Opening and closing. A ledger that cannot be written for whatever reason is opened for reading,
 * with a note that says why. */

#include "tf-ledger-private.h"

#include <errno.h>
#include <fcntl.h>
#include <string.h>
#include <unistd.h>
#include <glib/gi18n-lib.h>

enum
{
  BUSY_MS = 10000,
  LONGEST_VALUE = 64 << 20
};

static gint64
machine_now (gpointer data)
{
  return g_get_real_time () / 1000;
}

static TfLedger *
ledger_new (const char *path, const TfLedgerHow *how)
{
  TfLedger *ledger = g_new0 (TfLedger, 1);
  ledger->path = g_canonicalize_filename (path, NULL);
  ledger->state_dir = how->state_dir != NULL ? g_strdup (how->state_dir)
                                             : g_build_filename (g_get_user_state_dir (),
                                                                 "tiltfield", "replicas", NULL);
  ledger->busy_ms = how->busy_ms > 0 ? how->busy_ms : BUSY_MS;
  ledger->now = how->now != NULL ? how->now : machine_now;
  ledger->now_data = how->now_data;
  ledger->letter = how->letter != '\0' ? how->letter : 'T';
  ledger->notices = tf_notes_new ();
  ledger->statements = tf_statements_new ();
  return ledger;
}

void
tf_ledger_close (TfLedger *ledger)
{
  if (ledger == NULL)
    return;
  g_hash_table_unref (ledger->statements);
  sqlite3_close (ledger->db);
  g_free (ledger->path);
  g_free (ledger->uri);
  g_free (ledger->state_dir);
  g_free (ledger->replica_id);
  tf_note_free (ledger->read_only);
  g_ptr_array_unref (ledger->notices);
  g_free (ledger);
}

/* A file from elsewhere is data: no triggers, no functions from its schema, no oversized values. */
static void
guard (sqlite3 *db)
{
  sqlite3_db_config (db, SQLITE_DBCONFIG_DEFENSIVE, 1, NULL);
  sqlite3_db_config (db, SQLITE_DBCONFIG_TRUSTED_SCHEMA, 0, NULL);
  sqlite3_db_config (db, SQLITE_DBCONFIG_ENABLE_TRIGGER, 0, NULL);
  sqlite3_db_config (db, SQLITE_DBCONFIG_ENABLE_FKEY, 1, NULL);
  sqlite3_limit (db, SQLITE_LIMIT_LENGTH, LONGEST_VALUE);
}

static gboolean
connect_to (TfLedger *ledger, const char *query, gboolean writable, GError **error)
{
  g_autofree char *plain = g_filename_to_uri (ledger->path, NULL, error);
  if (plain == NULL)
    return FALSE;
  g_free (ledger->uri);
  ledger->uri = g_strconcat (plain, query, NULL);
  int flags = SQLITE_OPEN_URI | (writable ? SQLITE_OPEN_READWRITE : SQLITE_OPEN_READONLY);
  int rc = sqlite3_open_v2 (ledger->uri, &ledger->db, flags, NULL);
  if (rc != SQLITE_OK)
    {
      tf_ledger_set_error (error, ledger->db, rc, ledger->path);
      g_clear_pointer (&ledger->db, sqlite3_close);
      return FALSE;
    }
  sqlite3_extended_result_codes (ledger->db, 1);
  sqlite3_busy_timeout (ledger->db, ledger->busy_ms);
  guard (ledger->db);
  return TRUE;
}

static gboolean
can_write (const char *path)
{
  g_autofree char *folder = g_path_get_dirname (path);
  return access (path, W_OK) == 0 && access (folder, W_OK) == 0;
}

/* Reads the first page; this is where a file shows that it is no database. */
static gboolean
read_stamp (TfLedger *ledger, gint64 *application, gint64 *version, GError **error)
{
  GError *problem = NULL;
  *application = tf_value (ledger, &problem, 0, "PRAGMA application_id", "");
  *version = problem == NULL ? tf_value (ledger, &problem, 0, "PRAGMA user_version", "") : 0;
  if (problem == NULL)
    tf_value (ledger, &problem, 0, "SELECT count (*) FROM sqlite_schema", "");
  if (problem == NULL)
    return TRUE;
  g_propagate_error (error, problem);
  return FALSE;
}

static void
disconnect (TfLedger *ledger)
{
  g_hash_table_remove_all (ledger->statements);
  g_clear_pointer (&ledger->db, sqlite3_close);
}

/* In a folder that cannot be written the files beside a WAL ledger cannot be made: then the file
 * is read as one that does not change, which holds as long as nobody else can write it either. */
static gboolean
connect_reading (TfLedger *ledger, gint64 *application, gint64 *version, GError **error)
{
  ledger->read_only = tf_note_new ("ledger-not-writable", "s", ledger->path);
  if (connect_to (ledger, "?mode=ro", FALSE, NULL)
      && read_stamp (ledger, application, version, NULL))
    return TRUE;
  disconnect (ledger);
  return connect_to (ledger, "?mode=ro&immutable=1", FALSE, error)
         && read_stamp (ledger, application, version, error);
}

static gboolean
find_stamp (TfLedger *ledger, gint64 *application, gint64 *version, GError **error)
{
  if (!can_write (ledger->path))
    return connect_reading (ledger, application, version, error);
  GError *problem = NULL;
  if (connect_to (ledger, "", TRUE, &problem)
      && read_stamp (ledger, application, version, &problem))
    return TRUE;
  if (!g_error_matches (problem, TF_LEDGER_ERROR, TF_LEDGER_ERROR_READ_ONLY))
    {
      g_propagate_error (error, problem);
      return FALSE;
    }
  g_error_free (problem);
  disconnect (ledger);
  return connect_reading (ledger, application, version, error);
}

static gboolean
is_empty (TfLedger *ledger)
{
  return tf_value (ledger, NULL, 1, "SELECT count (*) FROM sqlite_schema", "") == 0;
}

static gboolean
fail (GError **error, TfLedgerError code, const char *form, const char *path)
{
  g_autoptr (GString) text = g_string_new (form);
  g_string_replace (text, "%s", path, 1);
  g_set_error_literal (error, TF_LEDGER_ERROR, code, text->str);
  return FALSE;
}

/* SQLite does not wait for the lock that this needs once, when two make a ledger together. */
static char *
dup_wal_mode (TfLedger *ledger, GError **error)
{
  gint64 until = g_get_monotonic_time () + 1000 * (gint64)ledger->busy_ms;
  for (;;)
    {
      GError *problem = NULL;
      char *mode = tf_text_value (ledger, &problem, "PRAGMA journal_mode = WAL", "");
      if (!g_error_matches (problem, TF_LEDGER_ERROR, TF_LEDGER_ERROR_BUSY)
          || g_get_monotonic_time () > until)
        {
          if (problem != NULL)
            g_propagate_error (error, problem);
          return mode;
        }
      g_error_free (problem);
      g_free (mode);
      g_usleep (5000);
    }
}

static gboolean
set_pragmas (TfLedger *ledger, GError **error)
{
  g_autofree char *mode = dup_wal_mode (ledger, error);
  return mode != NULL && tf_run (ledger, error, "PRAGMA synchronous = FULL", "");
}

static gboolean
read_letter (TfLedger *ledger)
{
  g_autofree char *letter
      = tf_text_value (ledger, NULL, "SELECT value FROM setting WHERE key = 'letter'", "");
  if (letter == NULL || !g_ascii_isupper (*letter))
    return FALSE;
  ledger->letter = *letter;
  return TRUE;
}

/* From a connection to a ledger of this version, or one that is only read. */
static gboolean
bring_up (TfLedger *ledger, gint64 application, gint64 version, gboolean create, GError **error)
{
  gboolean is_new = create && application == 0 && version == 0 && is_empty (ledger);
  if (create && application == 0 && !is_new)
    { /* another process may have made it since the stamp was read */
      application = tf_value (ledger, NULL, 0, "PRAGMA application_id", "");
      version = tf_value (ledger, NULL, 0, "PRAGMA user_version", "");
    }
  if (application != TF_LEDGER_APPLICATION && !is_new)
    return fail (error, TF_LEDGER_ERROR_OPEN, _ ("%s is not a ledger; nothing was changed"),
                 ledger->path);
  if (version > TF_LEDGER_VERSION)
    {
      tf_note_free (ledger->read_only);
      ledger->read_only = tf_note_new ("ledger-newer-version", "sii", ledger->path, (int)version,
                                       TF_LEDGER_VERSION);
      return tf_run (ledger, error, "PRAGMA query_only = 1", "");
    }
  if (version < TF_LEDGER_VERSION && ledger->read_only != NULL)
    return fail (error, TF_LEDGER_ERROR_READ_ONLY,
                 _ ("the ledger %s is of an older version and cannot be brought up to date here, "
                    "because it cannot be written; copy "
                    "it to a folder of your own and open it there"),
                 ledger->path);
  if (ledger->read_only != NULL)
    return TRUE;
  if (!set_pragmas (ledger, error))
    return FALSE;
  return version == TF_LEDGER_VERSION || tf_ledger_migrate (ledger, (int)version, is_new, error);
}

static gboolean
open_file (TfLedger *ledger, gboolean create, GError **error)
{
  gint64 application = 0, version = 0;
  if (!find_stamp (ledger, &application, &version, error)
      || !bring_up (ledger, application, version, create, error))
    return FALSE;
  if (!read_letter (ledger) && ledger->read_only == NULL)
    return fail (
        error, TF_LEDGER_ERROR_DAMAGED,
        _ ("the ledger %s is damaged: its settings are missing; go back to a backup of it"),
        ledger->path);
  return ledger->read_only != NULL || tf_replica_choose (ledger, error);
}

/* An empty file, so that SQLite never makes one where none was asked for. */
static gboolean
make_file (const char *path, const TfLedgerHow *how, GError **error)
{
  int fd = open (path, O_RDWR | O_CREAT | O_CLOEXEC | (how->must_be_new ? O_EXCL : 0), 0666);
  if (fd >= 0)
    {
      close (fd);
      return TRUE;
    }
  int why = errno; /* the look at the file sets errno anew */
  if (why == EEXIST)
    return fail (error, TF_LEDGER_ERROR_OPEN,
                 _ ("%s is there already; open it, or choose another name"), path);
  if (why == EACCES && g_file_test (path, G_FILE_TEST_EXISTS))
    return TRUE; /* opens for reading */
  g_set_error (error, TF_LEDGER_ERROR,
               why == ENOSPC ? TF_LEDGER_ERROR_FULL : TF_LEDGER_ERROR_OPEN,
               _ ("the ledger %s cannot be made: %s. Choose a folder that is there, may be "
                  "written to and has room"),
               path, g_strerror (why));
  return FALSE;
}

TfLedger *
tf_ledger_open_how (const char *path, const TfLedgerHow *how, GError **error)
{
  g_return_val_if_fail (path != NULL && how != NULL, NULL);
  if (sodium_init () < 0)
    {
      g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_DATABASE,
                   _ ("the hashing library cannot be started"));
      return NULL;
    }
  if (how->letter != '\0' && !g_ascii_isupper (how->letter))
    {
      fail (error, TF_LEDGER_ERROR_STATE, _ ("a ledger's letter is one of A to Z"), path);
      return NULL;
    }
  gboolean there = g_file_test (path, G_FILE_TEST_IS_REGULAR);
  if (!there && !how->create)
    {
      fail (error, TF_LEDGER_ERROR_OPEN, _ ("there is no ledger %s"), path);
      return NULL;
    }
  if ((!there || how->must_be_new) && !make_file (path, how, error))
    return NULL;
  g_autoptr (TfLedger) ledger = ledger_new (path, how);
  return open_file (ledger, how->create, error) ? g_steal_pointer (&ledger) : NULL;
}

TfLedger *
tf_ledger_create (const char *path, char letter, GError **error)
{
  return tf_ledger_open_how (
      path, &(TfLedgerHow){ .create = TRUE, .must_be_new = TRUE, .letter = letter }, error);
}

TfLedger *
tf_ledger_open (const char *path, GError **error)
{
  return tf_ledger_open_how (path, &(TfLedgerHow){ 0 }, error);
}

TfLedger *
tf_ledger_open_or_create (const char *path, char letter, GError **error)
{
  return tf_ledger_open_how (path, &(TfLedgerHow){ .create = TRUE, .letter = letter }, error);
}

const char *
tf_ledger_get_path (const TfLedger *ledger)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  return ledger->path;
}

const TfNote *
tf_ledger_get_read_only (const TfLedger *ledger)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  return ledger->read_only;
}

const TfNotes *
tf_ledger_get_notices (const TfLedger *ledger)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  return ledger->notices;
}

gint64
tf_ledger_get_version (TfLedger *ledger)
{
  g_return_val_if_fail (ledger != NULL, 0);
  return tf_value (ledger, NULL, 0, "PRAGMA data_version", "");
}
