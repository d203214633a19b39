/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Commands of frames: the geometry of the one on the plate, which of them the roll shows, the folder
 * that is watched, files that have moved. */

#include "tf-window-private.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-geometry-dialog.h"
#include "tf-preferences.h"

static TfSession *
session_of (gpointer window)
{
  return tf_window_get_session (TF_WINDOW (window));
}

#define ACTION(name) static void name (GSimpleAction *action, GVariant *value, gpointer window)

/* -- its geometry */

/* One dialog a window: asked for again it comes to the front. */
ACTION (correct_geometry)
{
  GtkWindow *open = g_object_get_data (window, "tf-geometry");
  if (open == NULL)
    {
      open = GTK_WINDOW (tf_geometry_dialog_new (GTK_WINDOW (window), session_of (window)));
      g_object_set_data (window, "tf-geometry", open);
      g_signal_connect_object (open, "destroy", G_CALLBACK (tf_window_forget_geometry), window,
                               G_CONNECT_SWAPPED);
    }
  gtk_window_present (open);
}

void
tf_window_forget_geometry (TfWindow *self)
{
  g_object_set_data (G_OBJECT (self), "tf-geometry", NULL);
}

ACTION (try_geometry)
{
  TfCorrection c;
  g_variant_get (value, "(dddd)", &c.centre_x, &c.centre_y, &c.radius_px, &c.north_angle_deg);
  tf_session_set_preview (session_of (window), &c);
}

ACTION (fit_limb) { tf_session_fit_limb (session_of (window)); }
ACTION (keep_geometry) { tf_session_keep_geometry (session_of (window)); }
ACTION (measure_again) { tf_session_measure_again (session_of (window)); }

/* -- the roll */
ACTION (change_roll_state)
{
  const char *name = g_variant_get_string (value, NULL);
  for (guint k = 0; k < TF_N_ROLL_FILTERS; k++)
    if (strcmp (name, tf_roll_filter_name ((TfRollFilter)k)) == 0)
      tf_session_set_roll_filter (session_of (window), (TfRollFilter)k);
}

ACTION (change_roll_instrument)
{
  tf_session_set_roll_instrument (session_of (window), g_variant_get_string (value, NULL));
}

ACTION (show_all_frames)
{
  TfSession *session = session_of (window);
  tf_session_set_roll_filter (session, TF_ROLL_ALL);
  tf_session_set_roll_instrument (session, NULL);
  tf_session_pick (session, NAN, NAN);
}

/* -- the watched folder: remembered for each ledger */
static char *
dup_watch_key (TfSession *session)
{
  const char *path = tf_session_get_ledger_path (session);
  g_autofree char *sum
      = path != NULL ? g_compute_checksum_for_string (G_CHECKSUM_SHA256, path, -1) : NULL;
  return sum != NULL ? g_strdup_printf ("watch-%.16s", sum) : NULL;
}

static void
watch (TfSession *session, const char *folder)
{
  g_autofree char *key = dup_watch_key (session);
  if (key != NULL && tf_session_set_watched (session, folder))
    tf_preferences_set (key, folder);
}

void
tf_window_restore_watch (TfWindow *self)
{
  TfSession *session = tf_window_get_session (self);
  g_autofree char *key = dup_watch_key (session);
  g_autofree char *folder = key != NULL ? tf_preferences_dup (key) : NULL;
  if (folder != NULL && tf_session_get_watched (session) == NULL
      && tf_session_is_writable (session))
    tf_session_set_watched (session, folder);
}

typedef void (*FolderFunc) (TfSession *session, const char *folder);

static void
folder_chosen (GtkNativeDialog *dialog, int response, gpointer window)
{
  g_autoptr (GFile) file = gtk_file_chooser_get_file (GTK_FILE_CHOOSER (dialog));
  g_autofree char *path = file != NULL ? g_file_get_path (file) : NULL;
  FolderFunc func = (FolderFunc)g_object_get_data (G_OBJECT (dialog), "then");
  if (response == GTK_RESPONSE_ACCEPT && path != NULL)
    func (session_of (window), path);
  g_object_unref (dialog);
}

static void
choose_folder (gpointer window, const char *title, const char *accept, FolderFunc then)
{
  GtkFileChooserNative *chooser
      = gtk_file_chooser_native_new (title, GTK_WINDOW (window),
                                     GTK_FILE_CHOOSER_ACTION_SELECT_FOLDER, accept, _ ("_Cancel"));
  gtk_native_dialog_set_modal (GTK_NATIVE_DIALOG (chooser), TRUE);
  g_object_set_data (G_OBJECT (chooser), "then", (gpointer)then);
  g_signal_connect_object (chooser, "response", G_CALLBACK (folder_chosen), window, 0);
  gtk_native_dialog_show (GTK_NATIVE_DIALOG (chooser));
}

ACTION (watch_folder) { choose_folder (window, _ ("Watch a folder"), _ ("_Watch"), watch); }
ACTION (watch_path) { watch (session_of (window), g_variant_get_string (value, NULL)); }
ACTION (stop_watching) { watch (session_of (window), NULL); }
ACTION (find_moved)
{
  choose_folder (window, _ ("Look for moved files in a folder"), _ ("_Look"),
                 tf_session_find_moved);
}
ACTION (find_moved_in)
{
  tf_session_find_moved (session_of (window), g_variant_get_string (value, NULL));
}

static const GActionEntry entries[] = {
  { "correct-geometry", correct_geometry, NULL, NULL, NULL },
  { "try-geometry", try_geometry, "(dddd)", NULL, NULL },
  { "fit-limb", fit_limb, NULL, NULL, NULL },
  { "keep-geometry", keep_geometry, NULL, NULL, NULL },
  { "measure-again", measure_again, NULL, NULL, NULL },
  { "roll-state", NULL, "s", "'all'", change_roll_state },
  { "roll-instrument", NULL, "s", "''", change_roll_instrument },
  { "show-all-frames", show_all_frames, NULL, NULL, NULL },
  { "watch-folder", watch_folder, NULL, NULL, NULL },
  { "watch-path", watch_path, "s", NULL, NULL },
  { "stop-watching", stop_watching, NULL, NULL, NULL },
  { "find-moved", find_moved, NULL, NULL, NULL },
  { "find-moved-in", find_moved_in, "s", NULL, NULL },
};

void
tf_window_add_frame_actions (TfWindow *self)
{
  g_action_map_add_action_entries (G_ACTION_MAP (self), entries, G_N_ELEMENTS (entries), self);
}

static void
set_state (TfWindow *self, const char *name, const char *state)
{
  GAction *action = g_action_map_lookup_action (G_ACTION_MAP (self), name);
  g_simple_action_set_state (G_SIMPLE_ACTION (action), g_variant_new_string (state));
}

void
tf_window_update_frame_actions (TfWindow *self)
{
  TfSession *session = tf_window_get_session (self);
  TfCorrection preview = tf_session_get_preview (session);
  gboolean can = tf_session_can_correct (session), writable = tf_session_is_writable (session);
  static const char *const of_ledger[]
      = { "watch-folder", "watch-path", "find-moved", "find-moved-in" };
  for (guint k = 0; k < G_N_ELEMENTS (of_ledger); k++)
    tf_window_enable (self, of_ledger[k], writable);
  tf_window_enable (self, "stop-watching", tf_session_get_watched (session) != NULL);
  const char *instrument = tf_session_get_roll_instrument (session);
  set_state (self, "roll-state", tf_roll_filter_name (tf_session_get_roll_filter (session)));
  set_state (self, "roll-instrument", instrument != NULL ? instrument : "");
  tf_window_enable (self, "correct-geometry", can);
  tf_window_enable (self, "try-geometry", can);
  tf_window_enable (self, "fit-limb", can);
  tf_window_enable (self, "keep-geometry", can && writable && tf_correction_is_set (&preview));
  tf_window_enable (self, "measure-again", writable && tf_session_count_elsewhere (session) > 0);
}
