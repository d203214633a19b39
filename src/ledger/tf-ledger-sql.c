/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Statements, transactions, and the one place where SQLite's codes become GErrors. */

#include "tf-ledger-private.h"

#include <errno.h>
#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

G_DEFINE_QUARK (tf - ledger - error - quark, tf_ledger_error)

/* A write that fails because the disk, a quota or a size limit is reached is "full" whatever
 * SQLite calls it. SQLite does not always pass the system's code on; errno still has it right
 * after the call. */
static gboolean
is_full (sqlite3 *db, int rc)
{
  int last = errno;
  if ((rc & 0xff) == SQLITE_FULL)
    return TRUE;
  if ((rc & 0xff) != SQLITE_IOERR || db == NULL)
    return FALSE;
  int code = sqlite3_system_errno (db);
  if (code == 0 && rc == SQLITE_IOERR_WRITE)
    code = last;
  return code == ENOSPC || code == EDQUOT || code == EFBIG;
}

void
tf_ledger_set_error (GError **error, sqlite3 *db, int rc, const char *path)
{
  int primary = rc & 0xff;
  if (is_full (db, rc))
    g_set_error (
        error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_FULL,
        _ ("there is no room left for the ledger %s; nothing was changed. Make room and try again"),
        path);
  else if (primary == SQLITE_BUSY || primary == SQLITE_LOCKED)
    g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_BUSY,
                 _ ("another program holds the ledger %s and did not let go of it in time; nothing "
                    "was changed. "
                    "Wait for it or close it, then try again"),
                 path);
  else if (primary == SQLITE_READONLY || primary == SQLITE_PERM)
    g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_READ_ONLY,
                 _ ("the ledger %s cannot be written here; copy it to a folder of your own"), path);
  else if (primary == SQLITE_CANTOPEN)
    g_set_error (
        error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_OPEN,
        _ ("the ledger %s cannot be opened; look whether the file is there and may be read"), path);
  else if (primary == SQLITE_NOTADB)
    g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_OPEN, _ ("%s is not a ledger"), path);
  else if (primary == SQLITE_CORRUPT)
    g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_DAMAGED,
                 _ ("the ledger %s is damaged (%s); go back to a backup of it"), path,
                 db != NULL ? sqlite3_errmsg (db) : sqlite3_errstr (rc));
  else
    g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_DATABASE,
                 _ ("the ledger %s: the database says: %s (code %d)"), path,
                 db != NULL ? sqlite3_errmsg (db) : sqlite3_errstr (rc), rc);
}

static void
set_error (TfLedger *ledger, GError **error)
{
  tf_ledger_set_error (error, ledger->db, sqlite3_extended_errcode (ledger->db), ledger->path);
}

static int
hex_digit (char c)
{
  return g_ascii_isxdigit (c) ? g_ascii_xdigit_value (c) : -1;
}

static int
bind_hex (sqlite3_stmt *query, int k, const char *hex)
{
  if (hex == NULL)
    return sqlite3_bind_null (query, k);
  gsize n = strlen (hex) / 2;
  guint8 *bytes = g_malloc (n + 1);
  for (gsize i = 0; i < n; i++)
    bytes[i] = (guint8)((hex_digit (hex[2 * i]) & 15) << 4 | (hex_digit (hex[2 * i + 1]) & 15));
  return sqlite3_bind_blob (query, k, bytes, (int)n, g_free);
}

static int
bind_one (sqlite3_stmt *query, int k, char type, va_list *ap)
{
  switch (type)
    {
    case 'i':
      return sqlite3_bind_int64 (query, k, va_arg (*ap, gint64));
    case 'k':
      {
        gint64 key = va_arg (*ap, gint64);
        return key != 0 ? sqlite3_bind_int64 (query, k, key) : sqlite3_bind_null (query, k);
      }
    case 'd':
      return sqlite3_bind_double (query, k, va_arg (*ap, double));
    case 't':
      return sqlite3_bind_text (query, k, va_arg (*ap, const char *), -1, SQLITE_TRANSIENT);
    case 'h':
      return bind_hex (query, k, va_arg (*ap, const char *));
    case 'b':
    default:
      {
        const void *bytes = va_arg (*ap, const void *);
        gsize n = va_arg (*ap, gsize);
        return sqlite3_bind_blob64 (query, k, bytes, n, SQLITE_TRANSIENT);
      }
    }
}

static void
finalize (gpointer query)
{
  sqlite3_finalize (query);
}

GHashTable *
tf_statements_new (void)
{
  return g_hash_table_new_full (g_str_hash, g_str_equal, g_free, finalize);
}

static sqlite3_stmt *
query_va (TfLedger *ledger, GError **error, const char *sql, const char *types, va_list *ap)
{
  sqlite3_stmt *query = g_hash_table_lookup (ledger->statements, sql);
  if (query == NULL)
    {
      if (sqlite3_prepare_v3 (ledger->db, sql, -1, SQLITE_PREPARE_PERSISTENT, &query, NULL)
          != SQLITE_OK)
        {
          set_error (ledger, error);
          return NULL;
        }
      g_hash_table_insert (ledger->statements, g_strdup (sql), query);
    }
  g_return_val_if_fail (!sqlite3_stmt_busy (query), NULL);
  for (int k = 0; types[k] != '\0'; k++)
    if (bind_one (query, k + 1, types[k], ap) != SQLITE_OK)
      {
        set_error (ledger, error);
        tf_query_done (query);
        return NULL;
      }
  return query;
}

sqlite3_stmt *
tf_query (TfLedger *ledger, GError **error, const char *sql, const char *types, ...)
{
  va_list ap;
  va_start (ap, types);
  sqlite3_stmt *query = query_va (ledger, error, sql, types, &ap);
  va_end (ap);
  return query;
}

int
tf_query_step (TfLedger *ledger, sqlite3_stmt *query, GError **error)
{
  int rc = sqlite3_step (query);
  if (rc == SQLITE_ROW)
    return 1;
  if (rc == SQLITE_DONE)
    return 0;
  set_error (ledger, error);
  return -1;
}

void
tf_query_done (sqlite3_stmt *query)
{
  sqlite3_reset (query);
  sqlite3_clear_bindings (query);
}

gboolean
tf_run (TfLedger *ledger, GError **error, const char *sql, const char *types, ...)
{
  va_list ap;
  va_start (ap, types);
  g_autoptr (sqlite3_stmt) query = query_va (ledger, error, sql, types, &ap);
  va_end (ap);
  if (query == NULL)
    return FALSE;
  int more;
  while ((more = tf_query_step (ledger, query, error)) > 0)
    ;
  return more == 0;
}

gint64
tf_value (TfLedger *ledger, GError **error, gint64 fallback, const char *sql, const char *types,
          ...)
{
  va_list ap;
  va_start (ap, types);
  g_autoptr (sqlite3_stmt) query = query_va (ledger, error, sql, types, &ap);
  va_end (ap);
  if (query == NULL || tf_query_step (ledger, query, error) <= 0
      || sqlite3_column_type (query, 0) == SQLITE_NULL)
    return fallback;
  return sqlite3_column_int64 (query, 0);
}

char *
tf_text_value (TfLedger *ledger, GError **error, const char *sql, const char *types, ...)
{
  va_list ap;
  va_start (ap, types);
  g_autoptr (sqlite3_stmt) query = query_va (ledger, error, sql, types, &ap);
  va_end (ap);
  if (query == NULL || tf_query_step (ledger, query, error) <= 0)
    return NULL;
  return g_strdup ((const char *)sqlite3_column_text (query, 0));
}

gboolean
tf_run_script (TfLedger *ledger, const char *sql, GError **error)
{
  if (sqlite3_exec (ledger->db, sql, NULL, NULL, NULL) == SQLITE_OK)
    return TRUE;
  set_error (ledger, error);
  return FALSE;
}

double
tf_column_double (sqlite3_stmt *query, int column)
{
  return sqlite3_column_type (query, column) == SQLITE_NULL ? NAN
                                                            : sqlite3_column_double (query, column);
}

const char *
tf_column_text (sqlite3_stmt *query, int column)
{
  const char *text = (const char *)sqlite3_column_text (query, column);
  return text != NULL ? text : "";
}

char *
tf_column_dup_hex (sqlite3_stmt *query, int column)
{
  const guint8 *bytes = sqlite3_column_blob (query, column);
  int n = bytes != NULL ? sqlite3_column_bytes (query, column) : 0;
  GString *hex = g_string_sized_new ((gsize)n * 2);
  for (int k = 0; k < n; k++)
    g_string_append_printf (hex, "%02x", bytes[k]);
  return g_string_free (hex, FALSE);
}

gboolean
tf_ledger_begin (TfLedger *ledger, GError **error)
{
  if (ledger->read_only != NULL)
    {
      g_autofree char *why = tf_note_dup_text (ledger->read_only, FALSE);
      g_set_error_literal (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_READ_ONLY, why);
      return FALSE;
    }
  if (ledger->bundle_as == NULL)
    return tf_run (ledger, error, "BEGIN IMMEDIATE", "");
  if (!sqlite3_get_autocommit (ledger->db))
    return TRUE;
  g_set_error_literal (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE,
                       _ ("what was to be done as one has failed already"));
  return FALSE;
}

gboolean
tf_ledger_commit (TfLedger *ledger, GError **error)
{
  if (ledger->bundle_as != NULL
      || ((!tf_pack_is_there (ledger, TF_PACK_BRIEF) || tf_pack_fill (ledger, error))
          && tf_run (ledger, error, "COMMIT", "")))
    {
      ledger->replica_is_new = ledger->replica_is_new && ledger->bundle_as != NULL;
      return TRUE;
    }
  tf_ledger_rollback (ledger);
  return FALSE;
}

void
tf_ledger_rollback (TfLedger *ledger)
{
  /* SQLite may have rolled back already (disk full); an error here says no more than the one being
   * reported. */
  if (!sqlite3_get_autocommit (ledger->db))
    tf_run (ledger, NULL, "ROLLBACK", "");
  if (ledger->replica_is_new)
    ledger->replica = 0;
  ledger->replica_is_new = FALSE;
}
