/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Files chosen, dropped or made, and the few questions the window asks. */

#include "tf-window-private.h"

#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-preferences.h"

static void
add_filter (GtkFileChooserNative *chooser, const char *name, const char *const *endings)
{
  g_autoptr (GtkFileFilter) filter = gtk_file_filter_new ();
  gtk_file_filter_set_name (filter, name);
  for (guint k = 0; endings[k] != NULL; k++)
    gtk_file_filter_add_pattern (filter, endings[k]);
  gtk_file_chooser_add_filter (GTK_FILE_CHOOSER (chooser), filter);
}

static GtkFileChooserNative *
chooser_new (TfWindow *self, const char *title, GtkFileChooserAction action, const char *accept)
{
  GtkFileChooserNative *chooser
      = gtk_file_chooser_native_new (title, GTK_WINDOW (self), action, accept, _ ("_Cancel"));
  gtk_native_dialog_set_modal (GTK_NATIVE_DIALOG (chooser), TRUE);
  return chooser;
}

static char **
dup_chosen (GtkFileChooserNative *chooser)
{
  g_autoptr (GListModel) files = gtk_file_chooser_get_files (GTK_FILE_CHOOSER (chooser));
  GPtrArray *paths = g_ptr_array_new ();
  for (guint k = 0; k < g_list_model_get_n_items (files); k++)
    {
      g_autoptr (GFile) file = g_list_model_get_item (files, k);
      char *path = g_file_get_path (file);
      if (path != NULL)
        g_ptr_array_add (paths, path);
    }
  g_ptr_array_add (paths, NULL);
  return (char **)g_ptr_array_free (paths, FALSE);
}

/* -- ledgers --------------------------------------------------------------------------------- */

static const char *const ledger_endings[] = { "*.ledger", NULL };

static void
files_chosen (GtkNativeDialog *dialog, int response, TfWindow *self)
{
  g_auto (GStrv) paths = dup_chosen (GTK_FILE_CHOOSER_NATIVE (dialog));
  if (response == GTK_RESPONSE_ACCEPT && paths[0] != NULL)
    tf_window_open (self, paths);
  g_object_unref (dialog);
}

void
tf_window_choose_ledger (TfWindow *self)
{
  GtkFileChooserNative *chooser
      = chooser_new (self, _ ("Open a ledger"), GTK_FILE_CHOOSER_ACTION_OPEN, _ ("_Open"));
  add_filter (chooser, _ ("Ledgers"), ledger_endings);
  g_signal_connect_object (chooser, "response", G_CALLBACK (files_chosen), self, 0);
  gtk_native_dialog_show (GTK_NATIVE_DIALOG (chooser));
}

/* Only letters and one of them. */
static void
letter_changed (GtkEditable *entry, AdwMessageDialog *dialog)
{
  const char *text = gtk_editable_get_text (entry);
  gboolean good = g_ascii_isalpha (text[0]) && text[1] == '\0';
  adw_message_dialog_set_response_enabled (dialog, "make", good);
}

static void
letter_answered (AdwMessageDialog *dialog, const char *answer, TfWindow *self)
{
  const char *path = g_object_get_data (G_OBJECT (dialog), "path");
  GtkEditable *entry = g_object_get_data (G_OBJECT (dialog), "entry");
  if (strcmp (answer, "make") == 0)
    tf_session_open_ledger (tf_window_get_session (self), path,
                            g_ascii_toupper (gtk_editable_get_text (entry)[0]));
}

static GtkWidget *
question_new (TfWindow *self, const char *heading, const char *body, const char *yes_id,
              const char *yes, const char *entry_name, GtkWidget **entry)
{
  GtkWidget *dialog = adw_message_dialog_new (GTK_WINDOW (self), heading, body);
  AdwMessageDialog *message = ADW_MESSAGE_DIALOG (dialog);
  adw_message_dialog_add_responses (message, "cancel", _ ("_Cancel"), yes_id, yes, NULL);
  adw_message_dialog_set_response_appearance (message, yes_id, ADW_RESPONSE_SUGGESTED);
  adw_message_dialog_set_default_response (message, yes_id);
  adw_message_dialog_set_close_response (message, "cancel");
  *entry = gtk_entry_new ();
  gtk_entry_set_activates_default (GTK_ENTRY (*entry), TRUE);
  gtk_accessible_update_property (GTK_ACCESSIBLE (*entry), GTK_ACCESSIBLE_PROPERTY_LABEL,
                                  entry_name, -1);
  adw_message_dialog_set_extra_child (message, *entry);
  g_object_set_data (G_OBJECT (dialog), "entry", *entry);
  return dialog;
}

static void
ask_letter (TfWindow *self, const char *path)
{
  GtkWidget *entry;
  GtkWidget *dialog
      = question_new (self, _ ("Letter of its regions"),
                      _ ("Region numbers of this ledger begin with a letter, like T2013-0412, so "
                         "that they never read as official "
                         "ones. Two ledgers that will be merged are best given two letters."),
                      "make", _ ("_Make the ledger"), _ ("Letter"), &entry);
  gtk_entry_set_max_length (GTK_ENTRY (entry), 1);
  g_object_set_data_full (G_OBJECT (dialog), "path", g_strdup (path), g_free);
  g_signal_connect (entry, "changed", G_CALLBACK (letter_changed), dialog);
  gtk_editable_set_text (GTK_EDITABLE (entry), "T");
  g_signal_connect_object (dialog, "response", G_CALLBACK (letter_answered), self, 0);
  gtk_window_present (GTK_WINDOW (dialog));
}

void
tf_window_make_here (TfWindow *self)
{
  if (tf_window_can_make_here (self))
    ask_letter (self, tf_session_get_ledger_path (tf_window_get_session (self)));
}

static void
new_chosen (GtkNativeDialog *dialog, int response, TfWindow *self)
{
  g_auto (GStrv) paths = dup_chosen (GTK_FILE_CHOOSER_NATIVE (dialog));
  if (response == GTK_RESPONSE_ACCEPT && paths[0] != NULL)
    {
      g_autofree char *path = g_str_has_suffix (paths[0], ".ledger")
                                  ? g_strdup (paths[0])
                                  : g_strconcat (paths[0], ".ledger", NULL);
      ask_letter (self, path);
    }
  g_object_unref (dialog);
}

void
tf_window_choose_new_ledger (TfWindow *self)
{
  GtkFileChooserNative *chooser
      = chooser_new (self, _ ("New ledger"), GTK_FILE_CHOOSER_ACTION_SAVE, _ ("_Next"));
  gtk_file_chooser_set_current_name (GTK_FILE_CHOOSER (chooser), _ ("regions.ledger"));
  g_signal_connect_object (chooser, "response", G_CALLBACK (new_chosen), self, 0);
  gtk_native_dialog_show (GTK_NATIVE_DIALOG (chooser));
}

void
tf_window_open_demo (TfWindow *self)
{
  if (g_file_test (TF_DEMO_LEDGER, G_FILE_TEST_EXISTS))
    tf_session_open_ledger (tf_window_get_session (self), TF_DEMO_LEDGER, 0);
  else
    tf_window_say (self, _ ("The demo ledger is not made yet. Run data-demo/start once: it makes "
                            "it and opens it here."));
}

/* -- frames ---------------------------------------------------------------------------------- */

static void
begin_where_frames_lie (TfWindow *self, GtkFileChooser *chooser)
{
  TfFrameItem *item = tf_session_get_frame_item (tf_window_get_session (self));
  if (item == NULL)
    return;
  g_autofree char *folder = g_path_get_dirname (tf_frame_item_get_row (item)->path);
  g_autoptr (GFile) file = g_file_new_for_path (folder);
  gtk_file_chooser_set_current_folder (chooser, file, NULL);
}

void
tf_window_choose_frames (TfWindow *self)
{
  static const char *const endings[]
      = { "*.fits", "*.fit", "*.fts", "*.fits.gz", "*.fts.gz", "*.fz", NULL };
  GtkFileChooserNative *chooser
      = chooser_new (self, _ ("Add frames"), GTK_FILE_CHOOSER_ACTION_OPEN, _ ("_Add"));
  gtk_file_chooser_set_select_multiple (GTK_FILE_CHOOSER (chooser), TRUE);
  add_filter (chooser, _ ("FITS frames"), endings);
  begin_where_frames_lie (self, GTK_FILE_CHOOSER (chooser));
  g_signal_connect_object (chooser, "response", G_CALLBACK (files_chosen), self, 0);
  gtk_native_dialog_show (GTK_NATIVE_DIALOG (chooser));
}

static gboolean
dropped (GtkDropTarget *target, const GValue *value, double x, double y, TfWindow *self)
{
  g_autoptr (GPtrArray) paths = g_ptr_array_new_with_free_func (g_free);
  GSList *files = g_value_get_boxed (value);
  for (GSList *l = files; l != NULL; l = l->next)
    {
      char *path = g_file_get_path (l->data);
      if (path != NULL)
        g_ptr_array_add (paths, path);
    }
  if (paths->len == 0)
    {
      tf_window_say (self, _ ("What was dropped is no file of this computer."));
      return FALSE;
    }
  g_ptr_array_add (paths, NULL);
  tf_window_open (self, (char *const *)paths->pdata);
  return TRUE;
}

void
tf_window_add_drop (TfWindow *self)
{
  GtkDropTarget *target = gtk_drop_target_new (GDK_TYPE_FILE_LIST, GDK_ACTION_COPY);
  g_signal_connect (target, "drop", G_CALLBACK (dropped), self);
  gtk_widget_add_controller (GTK_WIDGET (self), GTK_EVENT_CONTROLLER (target));
}

/* -- the person ------------------------------------------------------------------------------ */

static void
name_changed (GtkEditable *entry, AdwMessageDialog *dialog)
{
  g_autofree char *name = g_strstrip (g_strdup (gtk_editable_get_text (entry)));
  adw_message_dialog_set_response_enabled (dialog, "take", name[0] != '\0');
}

static void
name_answered (AdwMessageDialog *dialog, const char *answer, TfWindow *self)
{
  GtkEditable *entry = g_object_get_data (G_OBJECT (dialog), "entry");
  const char *then = g_object_get_data (G_OBJECT (dialog), "then");
  if (strcmp (answer, "take") != 0)
    return;
  const char *name = gtk_editable_get_text (entry);
  g_action_group_activate_action (G_ACTION_GROUP (self), "set-person", g_variant_new_string (name));
  if (then != NULL)
    g_action_group_activate_action (G_ACTION_GROUP (self), then, NULL);
}

void
tf_window_ask_person (TfWindow *self, const char *then)
{
  GtkWidget *entry;
  GtkWidget *dialog
      = question_new (self, _ ("Who is marking?"),
                      _ ("Your name, or your desk’s, stands beside every mark you make."), "take",
                      _ ("_Take this name"), _ ("Name"), &entry);
  g_object_set_data_full (G_OBJECT (dialog), "then", g_strdup (then), g_free);
  adw_message_dialog_set_response_enabled (ADW_MESSAGE_DIALOG (dialog), "take", FALSE);
  g_signal_connect (entry, "changed", G_CALLBACK (name_changed), dialog);
  const char *person = tf_session_get_person (tf_window_get_session (self));
  if (person != NULL)
    gtk_editable_set_text (GTK_EDITABLE (entry), person);
  g_signal_connect_object (dialog, "response", G_CALLBACK (name_answered), self, 0);
  gtk_window_present (GTK_WINDOW (dialog));
  gtk_widget_grab_focus (entry);
}

/* -- about ----------------------------------------------------------------------------------- */

static const char *
cautions_text (void)
{
  return _ ("Complexity figures (tiltfield-run measure gives them) describe the field and are no "
            "flare forecast: "
            "operational decisions (aviation, power grid, crewed flight, satellites) rest with the "
            "responsible national "
            "space-weather service and licensed staff.\n\n"
            "Line-of-sight fields mislead towards the limb: below μ = 0.5 every number carries a "
            "caution, below 0.34 no verdict is "
            "given.\n\n"
            "A hint is a suggestion of a plain rule; nobody has judged it.");
}

void
tf_window_show_about (TfWindow *self)
{
  GtkWidget *about = adw_about_window_new ();
  gtk_window_set_transient_for (GTK_WINDOW (about), GTK_WINDOW (self));
  adw_about_window_set_application_name (ADW_ABOUT_WINDOW (about), "Tiltfield");
  adw_about_window_set_application_icon (ADW_ABOUT_WINDOW (about), "io.tiltfield.Tiltfield");
  adw_about_window_set_version (ADW_ABOUT_WINDOW (about), TF_VERSION);
  adw_about_window_set_developer_name (ADW_ABOUT_WINDOW (about), _ ("The Tiltfield developers"));
  adw_about_window_set_license_type (ADW_ABOUT_WINDOW (about), GTK_LICENSE_GPL_3_0);
  adw_about_window_set_comments (ADW_ABOUT_WINDOW (about), cautions_text ());
  gtk_window_present (GTK_WINDOW (about));
}

void
tf_window_show_cautions (TfWindow *self)
{
  GtkWidget *dialog
      = adw_message_dialog_new (GTK_WINDOW (self), _ ("What to keep in mind"), cautions_text ());
  adw_message_dialog_add_response (ADW_MESSAGE_DIALOG (dialog), "close", _ ("_Close"));
  gtk_window_present (GTK_WINDOW (dialog));
}
