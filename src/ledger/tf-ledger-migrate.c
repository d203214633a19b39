/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Bringing an older ledger up to date: first a copy of it beside it, then all steps in one
 * transaction. */

#include "tf-ledger-private.h"

#include <string.h>
#include <sys/stat.h>
#include <sys/statvfs.h>
#include <glib/gi18n-lib.h>

/* Room for the copy and for what the migration may write: twice the file and a little. */
static gboolean
check_room (TfLedger *ledger, GError **error)
{
  struct stat file;
  g_autofree char *folder = g_path_get_dirname (ledger->path);
  struct statvfs room;
  if (stat (ledger->path, &file) != 0 || statvfs (folder, &room) != 0)
    return TRUE; /* cannot be told: VACUUM INTO will tell */
  guint64 need = 2 * (guint64)file.st_size + (1 << 20);
  guint64 free_bytes = (guint64)room.f_bavail * room.f_frsize;
  if (free_bytes >= need)
    return TRUE;
  g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_FULL,
               _ ("the ledger %s is of an older version; bringing it up to date needs %.0f MB for "
                  "a backup beside it and "
                  "there are %.0f MB. Make room and open it again; nothing was changed"),
               ledger->path, (double)need / 1e6, (double)free_bytes / 1e6);
  return FALSE;
}

static char *
backup_path (TfLedger *ledger, int from)
{
  const char *ending = g_str_has_suffix (ledger->path, ".ledger") ? ".ledger" : "";
  g_autofree char *stem = g_strndup (ledger->path, strlen (ledger->path) - strlen (ending));
  g_autoptr (GDateTime) now = g_date_time_new_from_unix_utc (ledger->now (ledger->now_data) / 1000);
  g_autofree char *date = g_date_time_format (now, "%Y-%m-%dT%H-%M-%SZ");
  char *path = g_strdup_printf ("%s.version-%d.%s%s", stem, from, date, ending);
  for (int k = 2; g_file_test (path, G_FILE_TEST_EXISTS); k++)
    {
      g_free (path);
      path = g_strdup_printf ("%s.version-%d.%s.%d%s", stem, from, date, k, ending);
    }
  return path;
}

static gboolean
back_up (TfLedger *ledger, int from, GError **error)
{
  if (!check_room (ledger, error))
    return FALSE;
  g_autofree char *path = backup_path (ledger, from);
  if (!tf_run (ledger, error, "VACUUM INTO ?1", "t", path))
    return FALSE;
  tf_notes_add (ledger->notices, "ledger-migrated", "siis", ledger->path, from, TF_LEDGER_VERSION,
                path);
  return TRUE;
}

static gboolean
run_migration (TfLedger *ledger, const TfMigration *migration, GError **error)
{
  g_autofree char *version = g_strdup_printf ("PRAGMA user_version = %d", migration->to);
  for (guint k = 0; migration->sql[k] != NULL; k++)
    if (!tf_run_script (ledger, migration->sql[k], error))
      return FALSE;
  return tf_run_script (ledger, version, error);
}

/* What is there already stays. */
static gboolean
stamp (TfLedger *ledger, GError **error)
{
  g_autofree char *id = tf_uuid7 (ledger->now (ledger->now_data));
  g_autofree char *application
      = g_strdup_printf ("PRAGMA application_id = %d", TF_LEDGER_APPLICATION);
  char letter[2] = { ledger->letter, '\0' };
  return tf_run_script (ledger, application, error)
         && tf_run (
             ledger, error,
             "INSERT OR IGNORE INTO setting (key, value) VALUES ('ledger', ?1), ('letter', ?2)",
             "tt", id, letter);
}

/* All steps in one transaction: an older ledger is brought up whole or not at all. Another process
 * may have done it meanwhile. */
gboolean
tf_ledger_migrate (TfLedger *ledger, int from, gboolean is_new, GError **error)
{
  if (!is_new && !back_up (ledger, from, error))
    return FALSE;
  if (!tf_run_script (ledger, "BEGIN IMMEDIATE", error))
    return FALSE;
  gint64 now_at = tf_value (ledger, NULL, from, "PRAGMA user_version", "");
  for (const TfMigration *m = tf_ledger_migrations; m->sql != NULL; m++)
    if (m->to > now_at && !run_migration (ledger, m, error))
      {
        tf_ledger_rollback (ledger);
        return FALSE;
      }
  if (!tf_pack_spoil_all (ledger, error) || !stamp (ledger, error))
    {
      tf_ledger_rollback (ledger);
      return FALSE;
    }
  return tf_ledger_commit (ledger, error);
}
