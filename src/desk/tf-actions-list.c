/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Commands of the forecaster's list: what it shows, sheets, hand-over, matches. */

#include "tf-window-private.h"

#include <glib/gi18n-lib.h>

static TfSession *
session_of (gpointer window)
{
  return tf_window_get_session (TF_WINDOW (window));
}

#define ACTION(name) static void name (GSimpleAction *action, GVariant *value, gpointer window)

/* -- looking */
ACTION (change_list)
{
  tf_window_show_list (window, g_variant_get_boolean (value));
  g_simple_action_set_state (action, value);
}
ACTION (next_listed) { tf_session_step_listed (session_of (window), 1); }
ACTION (previous_listed) { tf_session_step_listed (session_of (window), -1); }
ACTION (newest_frame) { tf_session_choose_newest (session_of (window)); }

/* Once more: back to the disk. */
ACTION (close_look)
{
  TfSession *session = session_of (window);
  gboolean close = tf_session_get_view (session)->look == TF_LOOK_CLOSE;
  tf_session_set_look (session, close ? TF_LOOK_DISK : TF_LOOK_CLOSE);
}

/* -- sheets */
typedef gboolean (*SaveFunc) (TfSession *session, const char *path);

static void
file_chosen (GtkNativeDialog *dialog, int response, gpointer window)
{
  SaveFunc save = (SaveFunc)g_object_get_data (G_OBJECT (dialog), "tf-then");
  g_autoptr (GFile) file = gtk_file_chooser_get_file (GTK_FILE_CHOOSER (dialog));
  g_autofree char *path = file != NULL ? g_file_get_path (file) : NULL;
  if (response == GTK_RESPONSE_ACCEPT && path != NULL)
    save (session_of (window), path);
  g_object_unref (dialog);
}

static void
choose_file (gpointer window, const char *title, GtkFileChooserAction what, const char *name, SaveFunc then)
{
  GtkFileChooserNative *chooser
      = gtk_file_chooser_native_new (title, GTK_WINDOW (window), what,
                                     what == GTK_FILE_CHOOSER_ACTION_SAVE ? _ ("_Save") : _ ("_Bring in"), _ ("_Cancel"));
  gtk_native_dialog_set_modal (GTK_NATIVE_DIALOG (chooser), TRUE);
  if (name != NULL)
    gtk_file_chooser_set_current_name (GTK_FILE_CHOOSER (chooser), name);
  g_object_set_data (G_OBJECT (chooser), "tf-then", (gpointer)then);
  g_signal_connect_object (chooser, "response", G_CALLBACK (file_chosen), window, 0);
  gtk_native_dialog_show (GTK_NATIVE_DIALOG (chooser));
}

ACTION (shift_sheet)
{
  choose_file (window, _ ("Save the shift sheet: PDF, SVG, PNG or JSON by its ending"), GTK_FILE_CHOOSER_ACTION_SAVE, "shift.pdf",
               tf_session_write_shift);
}
ACTION (shift_sheet_as) { tf_session_write_shift (session_of (window), g_variant_get_string (value, NULL)); }

ACTION (region_sheet)
{
  TfRegionItem *region = tf_session_get_region (session_of (window));
  const char *number = region != NULL ? tf_region_item_get_row (region)->region : "";
  g_autofree char *name = g_strdup_printf ("%s.pdf", *number != '\0' ? number : "region");
  choose_file (window, _ ("Save the sheet of the region: PDF, SVG or PNG by its ending"), GTK_FILE_CHOOSER_ACTION_SAVE, name,
               tf_session_write_region);
}
ACTION (region_sheet_as) { tf_session_write_region (session_of (window), g_variant_get_string (value, NULL)); }

/* -- deeds */
ACTION (settle_note) { tf_window_judge (window, action, tf_session_settle); }
ACTION (hand_over) { tf_window_judge (window, action, tf_session_hand_over); }
ACTION (confirm_match) { tf_window_judge (window, action, tf_session_confirm); }

ACTION (bring)
{
  choose_file (window, _ ("Bring in a daily region summary"), GTK_FILE_CHOOSER_ACTION_OPEN, NULL, tf_session_bring);
}
ACTION (bring_file) { tf_session_bring (session_of (window), g_variant_get_string (value, NULL)); }

static const GActionEntry entries[] = {
  { "list", NULL, NULL, "false", change_list },
  { "next-listed", next_listed, NULL, NULL, NULL },
  { "previous-listed", previous_listed, NULL, NULL, NULL },
  { "newest-frame", newest_frame, NULL, NULL, NULL },
  { "close-look", close_look, NULL, NULL, NULL },
  { "shift-sheet", shift_sheet, NULL, NULL, NULL },
  { "shift-sheet-as", shift_sheet_as, "s", NULL, NULL },
  { "region-sheet", region_sheet, NULL, NULL, NULL },
  { "region-sheet-as", region_sheet_as, "s", NULL, NULL },
  { "settle-note", settle_note, NULL, NULL, NULL },
  { "hand-over", hand_over, NULL, NULL, NULL },
  { "confirm-match", confirm_match, NULL, NULL, NULL },
  { "bring", bring, NULL, NULL, NULL },
  { "bring-file", bring_file, "s", NULL, NULL },
};

void
tf_window_add_list_actions (TfWindow *self)
{
  g_action_map_add_action_entries (G_ACTION_MAP (self), entries, G_N_ELEMENTS (entries), self);
}

void
tf_window_update_list_actions (TfWindow *self)
{
  TfSession *session = tf_window_get_session (self);
  gboolean writable = tf_session_is_writable (session), frame = tf_session_get_frame_item (session) != NULL;
  gboolean ledger = tf_session_has_ledger (session);
  tf_window_enable (self, "next-listed", tf_session_get_shift (session) != NULL);
  tf_window_enable (self, "previous-listed", tf_session_get_shift (session) != NULL);
  tf_window_enable (self, "newest-frame", frame);
  tf_window_enable (self, "close-look", tf_session_get_frame (session) != NULL);
  tf_window_enable (self, "shift-sheet", ledger && frame);
  tf_window_enable (self, "shift-sheet-as", ledger && frame);
  tf_window_enable (self, "region-sheet", tf_session_can_write_region (session));
  tf_window_enable (self, "region-sheet-as", tf_session_can_write_region (session));
  tf_window_enable (self, "settle-note", tf_session_can_settle (session));
  tf_window_enable (self, "hand-over", writable && frame);
  tf_window_enable (self, "confirm-match", tf_session_can_confirm (session));
  tf_window_enable (self, "bring", writable);
  tf_window_enable (self, "bring-file", writable);
}
