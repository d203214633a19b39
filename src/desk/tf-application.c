/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-application.h"

#include <glib/gi18n-lib.h>
#include <stdio.h>

#include "tf-preferences.h"
#include "tf-window.h"

struct _TfApplication
{
  AdwApplication parent;
};

G_DEFINE_FINAL_TYPE (TfApplication, tf_application, ADW_TYPE_APPLICATION)

static const struct
{
  const char *action;
  const char *keys[3];
} accels[] = {
  { "win.new-ledger", { "<Control>n" } },
  { "win.open-ledger", { "<Control>o" } },
  { "win.add-frames", { "<Control>i" } },
  { "win.undo", { "<Control>z" } },
  { "win.redo", { "<Control><Shift>z", "<Control>y" } },
  { "win.zoom-in", { "<Control>plus", "<Control>equal" } },
  { "win.zoom-out", { "<Control>minus" } },
  { "win.fit", { "<Control>0" } },
  { "win.look::disk", { "<Alt>1" } },
  { "win.look::unrolled", { "<Alt>2" } },
  { "win.look::close", { "<Alt>3" } },
  { "win.preferences", { "<Control>comma" } },
  { "win.copy-position", { "<Control><Shift>c" } },
  { "win.save-picture", { "<Control><Shift>s" } },
  { "win.show-hints", { "<Control>h" } },
  { "win.refresh", { "F5" } },
  { "win.show-help-overlay", { "<Control>question", "F1" } },
  { "window.close", { "<Control>w" } },
  { "app.quit", { "<Control>q" } },
};

static void
quit (GSimpleAction *action, GVariant *value, gpointer data)
{
  GList *windows = g_list_copy (gtk_application_get_windows (GTK_APPLICATION (data)));
  for (GList *l = windows; l != NULL; l = l->next)
    gtk_window_close (l->data); /* may ask first */
  g_list_free (windows);
}

static void
startup (GApplication *application)
{
  static const GActionEntry entries[] = { { "quit", quit, NULL, NULL, NULL } };
  G_APPLICATION_CLASS (tf_application_parent_class)->startup (application);
  g_action_map_add_action_entries (G_ACTION_MAP (application), entries, G_N_ELEMENTS (entries),
                                   application);
  for (guint k = 0; k < G_N_ELEMENTS (accels); k++)
    gtk_application_set_accels_for_action (GTK_APPLICATION (application), accels[k].action,
                                           accels[k].keys);
  const char *theme = g_getenv ("GTK_THEME"); /* drawings and colours of our own go with it */
  if (theme != NULL && g_str_has_suffix (theme, "dark"))
    adw_style_manager_set_color_scheme (adw_style_manager_get_default (), ADW_COLOR_SCHEME_FORCE_DARK);
  gtk_window_set_default_icon_name ("io.tiltfield.Tiltfield");
}

/* A window that shows nothing yet is used before a new one is made. */
static TfWindow *
window_for (TfApplication *self, const char *ledger)
{
  for (GList *l = gtk_application_get_windows (GTK_APPLICATION (self)); l != NULL; l = l->next)
    {
      if (!TF_IS_WINDOW (l->data))
        continue;
      TfSession *session = tf_window_get_session (l->data);
      const char *path = tf_session_get_ledger_path (session);
      if ((path == NULL && tf_session_get_n_frames (session) == 0) || ledger == NULL
          || g_strcmp0 (path, ledger) == 0)
        return l->data;
    }
  return tf_window_new (GTK_APPLICATION (self));
}

static char **
dup_paths (GApplicationCommandLine *line)
{
  GVariantDict *options = g_application_command_line_get_options_dict (line);
  g_autofree const char **given = NULL;
  GPtrArray *paths = g_ptr_array_new ();
  g_variant_dict_lookup (options, G_OPTION_REMAINING, "^a&ay", &given);
  for (guint k = 0; given != NULL && given[k] != NULL; k++)
    {
      g_autoptr (GFile) file = g_application_command_line_create_file_for_arg (line, given[k]);
      char *path = g_file_get_path (file);
      g_ptr_array_add (paths, path != NULL ? path : g_strdup (given[k]));
    }
  g_ptr_array_add (paths, NULL);
  return (char **)g_ptr_array_free (paths, FALSE);
}

/* Called with nothing, yesterday's ledger is opened again. */
static void
open_last (TfWindow *window)
{
  TfSession *session = tf_window_get_session (window);
  g_autofree char *last = tf_preferences_dup ("ledger");
  if (last != NULL && tf_session_get_ledger_path (session) == NULL
      && g_file_test (last, G_FILE_TEST_EXISTS))
    tf_session_open_ledger (session, last, 0);
}

static int
command_line (GApplication *application, GApplicationCommandLine *line)
{
  GVariantDict *options = g_application_command_line_get_options_dict (line);
  g_auto (GStrv) paths = dup_paths (line);
  const char *ledger = NULL;
  for (guint k = 0; paths[k] != NULL; k++)
    if (tf_window_is_ledger (paths[k]))
      ledger = paths[k];
  TfWindow *window = window_for (TF_APPLICATION (application), ledger);
  gtk_window_present (GTK_WINDOW (window));
  if (g_variant_dict_contains (options, "show-hints"))
    tf_session_set_show_hints (tf_window_get_session (window), TRUE);
  if (paths[0] == NULL)
    open_last (window);
  else if (ledger == NULL
           || g_strcmp0 (tf_session_get_ledger_path (tf_window_get_session (window)), ledger) != 0
           || paths[1] != NULL)
    tf_window_open (window, paths);
  return 0;
}

static int
handle_local_options (GApplication *application, GVariantDict *options)
{
  if (!g_variant_dict_contains (options, "version"))
    return -1;
  puts ("Tiltfield " TF_VERSION);
  return 0;
}

static void
tf_application_class_init (TfApplicationClass *klass)
{
  GApplicationClass *application = G_APPLICATION_CLASS (klass);
  application->startup = startup;
  application->command_line = command_line;
  application->handle_local_options = handle_local_options;
}

static void
tf_application_init (TfApplication *self)
{
  static const GOptionEntry entries[] = {
    { "show-hints", 0, 0, G_OPTION_ARG_NONE, NULL, N_ ("Show the hints on the wings"), NULL },
    { "version", 0, 0, G_OPTION_ARG_NONE, NULL, N_ ("Print the version"), NULL },
    { G_OPTION_REMAINING, 0, 0, G_OPTION_ARG_FILENAME_ARRAY, NULL, NULL, N_ ("[LEDGER] [FRAME…]") },
    { NULL },
  };
  g_application_add_main_option_entries (G_APPLICATION (self), entries);
}

TfApplication *
tf_application_new (void)
{
  return g_object_new (TF_TYPE_APPLICATION, "application-id", "io.tiltfield.Tiltfield", "flags",
                       G_APPLICATION_HANDLES_COMMAND_LINE, "resource-base-path",
                       "/io/tiltfield/Tiltfield", NULL);
}
