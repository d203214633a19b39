/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Frames: put in once by content (checksum, HDU, plane), wherever and however often the file is
 * seen. */

#include "tf-ledger-private.h"

#include <math.h>
#include <string.h>
#include <sys/stat.h>
#include <glib/gi18n-lib.h>

static char *
frame_cid (const char *checksum, int hdu, int plane)
{
  g_autofree char *hdu_text = g_strdup_printf ("%d", hdu);
  g_autofree char *plane_text = g_strdup_printf ("%d", plane);
  return tf_content_id ("tiltfield frame 1", checksum, hdu_text, plane_text, NULL);
}

static gboolean
stat_file (const char *path, gint64 *size, gint64 *mtime)
{
  struct stat info;
  if (stat (path, &info) != 0)
    return FALSE;
  *size = info.st_size;
  *mtime = (gint64)info.st_mtim.tv_sec * G_GINT64_CONSTANT (1000000000) + info.st_mtim.tv_nsec;
  return TRUE;
}

#define FRAME_SQL                                                                                  \
  "INSERT OR IGNORE INTO frame (cid, checksum, hdu, plane, kind, role, time, time_text, "          \
  "time_source, instrument, vantage,"                                                              \
  " simulated, noise_gauss, refusal, info, path) VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8, ?9, "     \
  "?10, ?11, ?12, ?13, ?14, ?15,"                                                                  \
  " ?16)"

static gboolean
insert_frame (TfLedger *ledger, const char *cid, const char *path, const char *checksum, int hdu,
              int plane, const TfFrameInfo *info, double noise_gauss, GError **error)
{
  g_autofree char *text = tf_info_dup_text (info);
  g_autofree char *time = tf_time_dup_iso (info->time, 0);
  g_autofree char *vantage = tf_observer_dup_vantage (&info->geometry.observer);
  g_autofree char *refusal = info->refusal != NULL ? tf_note_dup_text (info->refusal, TRUE) : NULL;
  const char *source = info->time_source != NULL ? info->time_source : "unknown";
  const char *instrument = info->instrument != NULL ? info->instrument : "unknown";
  return tf_run (ledger, error, FRAME_SQL, "htiittdttttidttt", cid, checksum, (gint64)hdu,
                 (gint64)plane, tf_kind_name (info->kind), tf_role_name (info->role), info->time.s,
                 time, source, instrument, vantage, (gint64)info->simulated, noise_gauss, refusal,
                 text, path);
}

/* What else was seen at that path is no longer there. */
gboolean
tf_place_put (TfLedger *ledger, gint64 frame, const char *path, gint64 size, gint64 mtime,
              GError **error)
{
  return tf_run (ledger, error, "UPDATE frame SET path = ?2 WHERE id = ?1 AND path <> ?2", "it",
                 frame, path)
         && tf_run (
             ledger, error,
             "DELETE FROM place WHERE path = ?1 AND frame IN"
             " (SELECT id FROM frame WHERE checksum <> (SELECT checksum FROM frame WHERE id = ?2))",
             "ti", path, frame)
         && tf_run (ledger, error,
                    "INSERT INTO place (path, frame, size, mtime) VALUES (?1, ?2, ?3, ?4)"
                    " ON CONFLICT (path, frame) DO UPDATE SET size = ?3, mtime = ?4",
                    "tiii", path, frame, size, mtime);
}

gint64
tf_frame_put (TfLedger *ledger, const char *path, const char *checksum, int hdu, int plane,
              const TfFrameInfo *info, double noise_gauss, GError **error)
{
  g_autofree char *cid = frame_cid (checksum, hdu, plane);
  gint64 id = tf_value (ledger, NULL, 0, "SELECT id FROM frame WHERE cid = ?1", "h", cid);
  if (id == 0)
    {
      if (!insert_frame (ledger, cid, path, checksum, hdu, plane, info, noise_gauss, error))
        return 0;
      id = sqlite3_last_insert_rowid (ledger->db);
      if (!tf_digest_store (ledger, "frame", id, error))
        return 0;
    }
  return id;
}

gint64
tf_ledger_add_frame (TfLedger *ledger, const char *path, const char *checksum, int hdu, int plane,
                     const TfFrameInfo *info, double noise_gauss, GError **error)
{
  g_return_val_if_fail (ledger != NULL && path != NULL && checksum != NULL && info != NULL, 0);
  g_autofree char *full = g_canonicalize_filename (path, NULL);
  if (!tf_ledger_begin (ledger, error))
    return 0;
  gint64 size, mtime,
      id = tf_frame_put (ledger, full, checksum, hdu, plane, info, noise_gauss, error);
  if (id == 0
      || (stat_file (full, &size, &mtime) && !tf_place_put (ledger, id, full, size, mtime, error)))
    {
      tf_ledger_rollback (ledger);
      return 0;
    }
  return tf_ledger_commit (ledger, error) ? id : 0;
}

gint64
tf_ledger_find_frame (TfLedger *ledger, const char *checksum, int hdu, int plane)
{
  g_return_val_if_fail (ledger != NULL && checksum != NULL, 0);
  g_autofree char *cid = frame_cid (checksum, hdu, plane);
  return tf_value (ledger, NULL, 0, "SELECT id FROM frame WHERE cid = ?1", "h", cid);
}

gint64
tf_ledger_find_file (TfLedger *ledger, const char *path)
{
  g_return_val_if_fail (ledger != NULL && path != NULL, 0);
  g_autofree char *full = g_canonicalize_filename (path, NULL);
  gint64 size, mtime;
  if (!stat_file (full, &size, &mtime))
    return 0;
  return tf_value (
      ledger, NULL, 0,
      "SELECT frame FROM place WHERE path = ?1 AND size = ?2 AND mtime = ?3 ORDER BY frame LIMIT 1",
      "tii", full, size, mtime);
}

#define ROW_SQL                                                                                    \
  "SELECT f.id, lower (hex (f.cid)), f.path, f.checksum, f.hdu, f.plane, f.info, f.noise_gauss, "  \
  "f.refusal,"                                                                                     \
  " (SELECT count (*) FROM point q WHERE q.frame = f.id AND q.hint = 1),"                          \
  " (SELECT count (*) FROM point q WHERE q.frame = f.id AND q.hint = 0),"                          \
  " EXISTS (SELECT 1 FROM dropped d JOIN hint h ON h.id = d.hint WHERE h.frame = f.id),"            \
  " (SELECT json_group_array (json_array (name, text)) FROM (SELECT p.name, g.text FROM geometry " \
  "g JOIN person p ON p.id = g.person WHERE g.frame = f.id ORDER BY g.clock DESC)) FROM frame f "

static TfFrameRow *
read_row (sqlite3_stmt *query, GError **error)
{
  TfFrameInfo *info = tf_info_from_text (tf_column_text (query, 6), error);
  if (info == NULL)
    return NULL;
  TfFrameRow *row = g_new0 (TfFrameRow, 1);
  row->id = sqlite3_column_int64 (query, 0);
  row->content_id = g_strdup (tf_column_text (query, 1));
  row->path = g_strdup (tf_column_text (query, 2));
  row->checksum = g_strdup (tf_column_text (query, 3));
  row->hdu = sqlite3_column_int (query, 4);
  row->plane = sqlite3_column_int (query, 5);
  row->info = info;
  row->noise_gauss = tf_column_double (query, 7);
  row->refusal = g_strdup ((const char *)sqlite3_column_text (query, 8));
  row->n_hints = (guint)sqlite3_column_int (query, 9);
  row->n_marks = (guint)sqlite3_column_int (query, 10);
  row->done = row->n_hints == 0 && (row->n_marks > 0 || sqlite3_column_int (query, 11) != 0);
  row->geometries = tf_geometries_from_store (tf_column_text (query, 12));
  return row;
}

void
tf_frame_row_free (TfFrameRow *row)
{
  if (row == NULL)
    return;
  g_free (row->content_id);
  g_free (row->path);
  g_free (row->checksum);
  g_free (row->refusal);
  tf_frame_info_free (row->info);
  g_clear_pointer (&row->geometries, g_ptr_array_unref);
  g_free (row);
}

static GPtrArray *
read_all (TfLedger *ledger, sqlite3_stmt *query, GError **error)
{
  g_autoptr (GPtrArray) rows = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_frame_row_free);
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      TfFrameRow *row = read_row (query, error);
      if (row == NULL)
        return NULL;
      g_ptr_array_add (rows, row);
    }
  return more == 0 ? g_steal_pointer (&rows) : NULL;
}

GPtrArray *
tf_ledger_frames (TfLedger *ledger, GError **error)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  g_autoptr (sqlite3_stmt) query
      = tf_query (ledger, error, ROW_SQL "ORDER BY f.time IS NULL, f.time, f.id", "");
  return read_all (ledger, query, error);
}

GPtrArray *
tf_ledger_frames_between (TfLedger *ledger, TfTime from, TfTime to, GError **error)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  g_autoptr (sqlite3_stmt) query
      = tf_query (ledger, error, ROW_SQL "WHERE f.time BETWEEN ?1 AND ?2 ORDER BY f.time, f.id",
                  "dd", from.s, to.s);
  return read_all (ledger, query, error);
}

TfFrameRow *
tf_ledger_frame (TfLedger *ledger, gint64 id, GError **error)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, ROW_SQL "WHERE f.id = ?1", "i", id);
  int more = query != NULL ? tf_query_step (ledger, query, error) : -1;
  if (more == 0)
    g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE,
                 _ ("the ledger %s has no frame %" G_GINT64_FORMAT), ledger->path, id);
  return more > 0 ? read_row (query, error) : NULL;
}
