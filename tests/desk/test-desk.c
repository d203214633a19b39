/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The window's own parts in one process: words, the writer, the session, the templates. Tests
 * that need a display are skipped without. */

#include "test-desk.h"

#include <adwaita.h>
#include <glib/gstdio.h>

#include "tf-desk-resources.h"

enum
{
  WAIT_SECONDS = 10
};

static gboolean
too_late (gpointer data)
{
  *(gboolean *)data = TRUE;
  return G_SOURCE_REMOVE;
}

void
test_desk_wait (const char *what, TestUntil test, gpointer data)
{
  gboolean late = FALSE;
  guint timer = g_timeout_add_seconds (WAIT_SECONDS, too_late, &late);
  while (!test (data) && !late)
    g_main_context_iteration (NULL, TRUE);
  if (late)
    g_error ("waited too long for: %s", what);
  g_source_remove (timer);
}

char *
test_desk_path (const char *name)
{
  g_autofree char *folder = g_build_filename (g_get_user_data_dir (), "test", NULL);
  g_mkdir_with_parents (folder, 0700);
  return g_build_filename (folder, name, NULL);
}

static gboolean
has_hints (gpointer data)
{
  return tf_session_get_frame (data) != NULL
         && g_list_model_get_n_items (tf_session_get_regions (data)) > 0
         && tf_session_get_progress (data, NULL) == NULL;
}

TfSession *
test_desk_session (const char *ledger_path)
{
  const char *frames[] = { TF_DEMO_FRAMES "/brindle-20131012-0600.fits", NULL };
  TfSession *session = tf_session_new ();
  tf_session_open_ledger (session, ledger_path, 'T');
  tf_session_set_person (session, "north desk");
  tf_session_set_view_size (session, 800, 500);
  tf_session_add_frames (session, (char *const *)frames);
  test_desk_wait ("the frame with its hints", has_hints, session);
  return session;
}

static gboolean display;

/* The user's folders are not touched. (GLib's own isolation takes the system's settings schemas
 * away too, which GTK needs.) */
static char *
own_folders (void)
{
  static const char *const names[] = { "HOME",           "XDG_DATA_HOME",  "XDG_CONFIG_HOME",
                                       "XDG_CACHE_HOME", "XDG_STATE_HOME", "XDG_RUNTIME_DIR" };
  g_autofree char *top = g_dir_make_tmp ("tiltfield-desk-XXXXXX", NULL);
  g_assert_nonnull (top);
  for (guint k = 0; k < G_N_ELEMENTS (names); k++)
    {
      g_autofree char *folder = g_build_filename (top, names[k], NULL);
      g_mkdir (folder, 0700);
      g_setenv (names[k], folder, TRUE);
    }
  return g_steal_pointer (&top);
}

static void
remove_all (const char *path)
{
  g_autoptr (GDir) folder
      = g_file_test (path, G_FILE_TEST_IS_SYMLINK) ? NULL : g_dir_open (path, 0, NULL);
  const char *name;
  while (folder != NULL && (name = g_dir_read_name (folder)) != NULL)
    {
      g_autofree char *child = g_build_filename (path, name, NULL);
      remove_all (child);
    }
  g_remove (path);
}

gboolean
test_desk_has_display (void)
{
  if (!display)
    g_test_skip ("no display is there");
  return display;
}

int
main (int argc, char **argv)
{
  g_autofree char *top = own_folders ();
  g_test_init (&argc, &argv, NULL);
  g_resources_register (tf_desk_get_resource ());
  display = gtk_init_check ();
  if (display)
    adw_init ();
  test_desk_add_words ();
  test_desk_add_session ();
  test_desk_add_mark ();
  test_desk_add_plate ();
  test_desk_add_roll ();
  test_desk_add_follow ();
  test_desk_add_gaps ();
  test_desk_add_geometry ();
  test_desk_add_list ();
  test_desk_add_window ();
  test_desk_add_hand ();
  test_desk_add_keys ();
  test_desk_add_laws ();
  test_desk_add_studies ();
  test_desk_add_bundles ();
  int result = g_test_run ();
  remove_all (top);
  return result;
}
