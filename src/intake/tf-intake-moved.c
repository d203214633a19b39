/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Frames whose file is not where it was last seen, found again by their checksum. */

#include "tf-intake.h"

/* checksum -> GPtrArray of TfFrameRow that have it */
static GHashTable *
find_missing (GPtrArray *rows)
{
  GHashTable *missing = g_hash_table_new_full (g_str_hash, g_str_equal, NULL,
                                               (GDestroyNotify)g_ptr_array_unref);
  for (guint k = 0; k < rows->len; k++)
    {
      TfFrameRow *row = g_ptr_array_index (rows, k);
      if (g_file_test (row->path, G_FILE_TEST_EXISTS))
        continue;
      GPtrArray *same = g_hash_table_lookup (missing, row->checksum);
      if (same == NULL)
        {
          same = g_ptr_array_new ();
          g_hash_table_insert (missing, row->checksum, same);
        }
      g_ptr_array_add (same, row);
    }
  return missing;
}

static gboolean
put_at (TfLedger *ledger, const GPtrArray *rows, const char *path, GError **error)
{
  for (guint k = 0; k < rows->len; k++)
    {
      const TfFrameRow *row = g_ptr_array_index (rows, k);
      if (tf_ledger_add_frame (ledger, path, row->checksum, row->hdu, row->plane, row->info,
                               row->noise_gauss, error)
          == 0)
        return FALSE;
    }
  return TRUE;
}

gboolean
tf_intake_find_moved (TfLedger *ledger, char *const *paths, TfCancel *cancel, guint *n_missing,
                      guint *n_found, GError **error)
{
  g_return_val_if_fail (ledger != NULL && paths != NULL && n_missing != NULL && n_found != NULL,
                        FALSE);
  *n_missing = *n_found = 0;
  g_autoptr (GPtrArray) rows = tf_ledger_frames (ledger, error);
  g_auto (GStrv) files = rows != NULL ? tf_intake_list (paths, error) : NULL;
  if (files == NULL)
    return FALSE;
  g_autoptr (GHashTable) missing = find_missing (rows);
  GHashTableIter each;
  gpointer same;
  g_hash_table_iter_init (&each, missing);
  while (g_hash_table_iter_next (&each, NULL, &same))
    *n_missing += ((GPtrArray *)same)->len;
  for (guint k = 0; files[k] != NULL && g_hash_table_size (missing) > 0; k++)
    {
      if (tf_cancel_is_raised (cancel))
        return TRUE;
      if (tf_ledger_find_file (ledger, files[k]) != 0)
        continue; /* known here */
      g_autofree char *checksum = tf_frame_file_checksum (files[k], cancel, NULL);
      same = checksum != NULL ? g_hash_table_lookup (missing, checksum) : NULL;
      if (same == NULL)
        continue;
      if (!put_at (ledger, same, files[k], error))
        return FALSE;
      *n_found += ((GPtrArray *)same)->len;
      g_hash_table_remove (missing, checksum);
    }
  return TRUE;
}
