/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Which files: those named, whatever they are called, and in folders those that are called like
 * frames. */

#include "tf-intake.h"

#include <string.h>
#include <sys/stat.h>
#include <glib/gi18n-lib.h>

typedef struct
{
  GHashTable *files;   /* set of absolute paths */
  GHashTable *folders; /* "device:inode" of those walked, against rings of links */
} List;

static gboolean
is_frame_name (const char *name)
{
  static const char *const endings[] = { ".fits", ".fit", ".fts", ".fits.gz", ".fz" };
  g_autofree char *lower = g_ascii_strdown (name, -1);
  for (guint k = 0; k < G_N_ELEMENTS (endings); k++)
    if (g_str_has_suffix (lower, endings[k]))
      return *name != '.';
  return FALSE;
}

static gboolean
is_new_folder (List *list, const char *path)
{
  struct stat info;
  if (stat (path, &info) != 0)
    return FALSE;
  return g_hash_table_add (list->folders,
                           g_strdup_printf ("%" G_GUINT64_FORMAT ":%" G_GUINT64_FORMAT,
                                            (guint64)info.st_dev, (guint64)info.st_ino));
}

static gboolean
add_folder (List *list, const char *folder, GError **error)
{
  if (!is_new_folder (list, folder))
    return TRUE;
  g_autoptr (GDir) dir = g_dir_open (folder, 0, error);
  if (dir == NULL)
    return FALSE;
  const char *name;
  while ((name = g_dir_read_name (dir)) != NULL)
    {
      g_autofree char *path = g_build_filename (folder, name, NULL);
      if (g_file_test (path, G_FILE_TEST_IS_DIR))
        {
          if (*name != '.' && !add_folder (list, path, error))
            return FALSE;
        }
      else if (is_frame_name (name))
        g_hash_table_add (list->files, g_steal_pointer (&path));
    }
  return TRUE;
}

static int
compare_names (gconstpointer a, gconstpointer b)
{
  return strcmp (*(char *const *)a, *(char *const *)b);
}

static char **
sorted (List *list)
{
  GPtrArray *names = g_ptr_array_new ();
  GHashTableIter iter;
  gpointer path;
  g_hash_table_iter_init (&iter, list->files);
  while (g_hash_table_iter_next (&iter, &path, NULL))
    g_ptr_array_add (names, g_strdup (path));
  g_ptr_array_sort (names, compare_names);
  g_ptr_array_add (names, NULL);
  return (char **)g_ptr_array_free (names, FALSE);
}

char **
tf_intake_list (char *const *paths, GError **error)
{
  g_return_val_if_fail (paths != NULL, NULL);
  g_autoptr (GHashTable) files = g_hash_table_new_full (g_str_hash, g_str_equal, g_free, NULL);
  g_autoptr (GHashTable) folders = g_hash_table_new_full (g_str_hash, g_str_equal, g_free, NULL);
  List list = { files, folders };
  for (guint k = 0; paths[k] != NULL; k++)
    {
      g_autofree char *full = g_canonicalize_filename (paths[k], NULL);
      if (!g_file_test (full, G_FILE_TEST_IS_DIR))
        g_hash_table_add (files, g_steal_pointer (&full));
      else if (!add_folder (&list, full, error))
        return NULL;
    }
  return sorted (&list);
}
