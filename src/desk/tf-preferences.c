/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-preferences.h"

#include <glib/gstdio.h>

static const char group[] = "desk";

static char *
dup_path (void)
{
  return g_build_filename (g_get_user_config_dir (), "tiltfield", "desk.conf", NULL);
}

static GKeyFile *
load (void)
{
  g_autofree char *path = dup_path ();
  GKeyFile *file = g_key_file_new ();
  g_key_file_load_from_file (file, path, G_KEY_FILE_KEEP_COMMENTS, NULL);
  return file;
}

char *
tf_preferences_dup (const char *key)
{
  g_return_val_if_fail (key != NULL, NULL);
  g_autoptr (GKeyFile) file = load ();
  return g_key_file_get_string (file, group, key, NULL);
}

void
tf_preferences_set (const char *key, const char *value)
{
  g_return_if_fail (key != NULL);
  g_autoptr (GKeyFile) file = load ();
  g_autofree char *path = dup_path (), *folder = g_path_get_dirname (path);
  if (value != NULL)
    g_key_file_set_string (file, group, key, value);
  else
    g_key_file_remove_key (file, group, key, NULL);
  g_mkdir_with_parents (folder, 0700);
  g_key_file_save_to_file (file, path, NULL);
}
