/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Commands of named studies and editions, with the questions they ask. A command that takes a name or a
 * path asks for it when it is empty. */

#include "tf-actions-laws.h"

#include <string.h>
#include <adwaita.h>
#include <glib/gi18n-lib.h>

#include "tf-session-studies.h"
#include "tf-study-task.h"
#include "tf-widget-style.h"
#include "tf-window-private.h"

static TfSession *
session_of (gpointer window)
{
  return tf_window_get_session (TF_WINDOW (window));
}

#define ACTION(name) static void name (GSimpleAction *action, GVariant *value, gpointer window)

/* A deed that needs a name asks for it; the command is then given again. */
static gboolean
has_person (gpointer window, GSimpleAction *action)
{
  gboolean simple = g_action_get_parameter_type (G_ACTION (action)) == NULL;
  if (tf_session_get_person (session_of (window)) != NULL)
    return TRUE;
  tf_window_ask_person (window, simple ? g_action_get_name (G_ACTION (action)) : NULL);
  return FALSE;
}

static void
say_refused (TfWindow *window)
{
  tf_window_say (window, _ ("That cannot be kept now: the ledger cannot be written to, a divide is in "
                            "hand, or there is a study of that name."));
}

/* -- asking for a name --------------------------------------------------------------------------- */

static void
name_changed (GtkEditable *entry, AdwMessageDialog *dialog)
{
  g_autofree char *name = g_strstrip (g_strdup (gtk_editable_get_text (entry)));
  adw_message_dialog_set_response_enabled (dialog, "yes", *name != '\0');
}

static void
name_answered (AdwMessageDialog *dialog, const char *answer, TfWindow *window)
{
  GtkEditable *entry = g_object_get_data (G_OBJECT (dialog), "entry");
  const char *action = g_object_get_data (G_OBJECT (dialog), "action");
  if (strcmp (answer, "yes") == 0)
    g_action_group_activate_action (G_ACTION_GROUP (window), action,
                                    g_variant_new_string (gtk_editable_get_text (entry)));
}

static void
ask_name (TfWindow *window, const char *action, const char *heading, const char *body,
          const char *yes, const char *begin)
{
  GtkWidget *dialog = adw_message_dialog_new (GTK_WINDOW (window), heading, body);
  AdwMessageDialog *message = ADW_MESSAGE_DIALOG (dialog);
  GtkWidget *entry = gtk_entry_new ();
  adw_message_dialog_add_responses (message, "cancel", _ ("_Cancel"), "yes", yes, NULL);
  adw_message_dialog_set_response_appearance (message, "yes", ADW_RESPONSE_SUGGESTED);
  adw_message_dialog_set_default_response (message, "yes");
  adw_message_dialog_set_close_response (message, "cancel");
  gtk_entry_set_activates_default (GTK_ENTRY (entry), TRUE);
  gtk_accessible_update_property (GTK_ACCESSIBLE (entry), GTK_ACCESSIBLE_PROPERTY_LABEL, _ ("Name"), -1);
  adw_message_dialog_set_extra_child (message, entry);
  g_object_set_data (G_OBJECT (dialog), "entry", entry);
  g_object_set_data_full (G_OBJECT (dialog), "action", g_strdup (action), g_free);
  g_signal_connect (entry, "changed", G_CALLBACK (name_changed), dialog);
  gtk_editable_set_text (GTK_EDITABLE (entry), begin);
  name_changed (GTK_EDITABLE (entry), message);
  g_signal_connect_object (dialog, "response", G_CALLBACK (name_answered), window, 0);
  gtk_window_present (GTK_WINDOW (dialog));
  gtk_widget_grab_focus (entry);
}

/* -- studies --------------------------------------------------------------------------------------- */

ACTION (choose_study) { tf_session_choose_study (session_of (window), g_variant_get_string (value, NULL)); }
ACTION (revert_study) { tf_session_revert_study (session_of (window)); }

ACTION (keep_study)
{
  if (has_person (window, action) && !tf_session_keep_study (session_of (window), NULL))
    say_refused (window);
}

ACTION (keep_study_as)
{
  const char *name = g_variant_get_string (value, NULL);
  if (!has_person (window, action))
    return;
  if (*name == '\0')
    ask_name (window, "keep-study-as", _ ("Keep under another name"),
              _ ("A copy, with conditions and divides of its own; this study stays as it was kept."),
              _ ("_Keep"), tf_session_get_study (session_of (window))->name);
  else if (!tf_session_keep_study (session_of (window), name))
    say_refused (window);
}

ACTION (rename_study)
{
  const char *name = g_variant_get_string (value, NULL);
  if (!has_person (window, action))
    return;
  if (*name == '\0')
    ask_name (window, "rename-study", _ ("Rename the study"),
              _ ("Editions that were kept of it keep the name it had."), _ ("_Rename"),
              tf_session_get_study (session_of (window))->name);
  else if (!tf_session_rename_study (session_of (window), name))
    say_refused (window);
}

ACTION (put_away_study)
{
  if (has_person (window, action) && !tf_session_put_away_study (session_of (window)))
    say_refused (window);
}

/* -- files ------------------------------------------------------------------------------------------ */

static void
file_chosen (GtkNativeDialog *dialog, int response, TfWindow *window)
{
  const char *action = g_object_get_data (G_OBJECT (dialog), "action");
  g_autoptr (GFile) file = gtk_file_chooser_get_file (GTK_FILE_CHOOSER (dialog));
  g_autofree char *path = file != NULL ? g_file_get_path (file) : NULL;
  if (response == GTK_RESPONSE_ACCEPT && path != NULL)
    g_action_group_activate_action (G_ACTION_GROUP (window), action, g_variant_new_string (path));
  g_object_unref (dialog);
}

void
tf_window_ask_study_file (TfWindow *window, const char *action, const char *title, const char *name,
                          const char *kind, const char *pattern)
{
  gboolean save = name != NULL;
  GtkFileChooserNative *chooser = gtk_file_chooser_native_new (
      title, GTK_WINDOW (window), save ? GTK_FILE_CHOOSER_ACTION_SAVE : GTK_FILE_CHOOSER_ACTION_OPEN,
      save ? _ ("_Save") : _ ("_Open"), _ ("_Cancel"));
  g_autoptr (GtkFileFilter) filter = gtk_file_filter_new ();
  gtk_file_filter_set_name (filter, kind);
  gtk_file_filter_add_pattern (filter, pattern);
  gtk_file_chooser_add_filter (GTK_FILE_CHOOSER (chooser), filter);
  if (save)
    gtk_file_chooser_set_current_name (GTK_FILE_CHOOSER (chooser), name);
  gtk_native_dialog_set_modal (GTK_NATIVE_DIALOG (chooser), TRUE);
  g_object_set_data_full (G_OBJECT (chooser), "action", g_strdup (action), g_free);
  g_signal_connect_object (chooser, "response", G_CALLBACK (file_chosen), window, 0);
  gtk_native_dialog_show (GTK_NATIVE_DIALOG (chooser));
}

ACTION (open_study)
{
  const char *path = g_variant_get_string (value, NULL);
  g_autoptr (GFile) file = g_file_new_for_path (path);
  if (!has_person (window, action))
    return;
  if (*path == '\0')
    tf_window_ask_study_file (window, "open-study", _ ("Open a study"), NULL, _ ("Studies (JSON)"), "*.json");
  else
    tf_session_open_study (session_of (window), file);
}

ACTION (save_study)
{
  const char *path = g_variant_get_string (value, NULL);
  g_autoptr (GFile) file = g_file_new_for_path (path);
  g_autofree char *name = g_strconcat (tf_session_get_study (session_of (window))->name, ".json", NULL);
  g_strdelimit (name, "/", '-');
  if (*path == '\0')
    tf_window_ask_study_file (window, "save-study", _ ("Save the study"), name, _ ("Studies (JSON)"), "*.json");
  else
    tf_session_save_study (session_of (window), file);
}

/* -- editions ---------------------------------------------------------------------------------------- */

ACTION (keep_edition)
{
  const char *name = g_variant_get_string (value, NULL);
  if (!has_person (window, action))
    return;
  if (*name == '\0')
    ask_name (window, "keep-edition", _ ("Keep an edition"),
              _ ("The study with its numbers and what each region says now, under a name of its own, "
                 "for good. It is of the whole study, whatever is picked on the wings."),
              _ ("_Keep"), "");
  else
    tf_session_keep_edition (session_of (window), name);
}

ACTION (cancel_edition) { tf_session_stop_study_task (session_of (window)); }

ACTION (apply_what_if)
{
  if (has_person (window, action)
      && !tf_session_apply_what_if (session_of (window), g_variant_get_string (value, NULL)))
    tf_window_say (window, _ ("No option of a study says that: it can be seen here, but not taken in."));
}

static gboolean
append_short (const GMatchInfo *match, GString *result, gpointer data)
{
  g_autofree char *number = g_match_info_fetch (match, 0);
  char text[G_ASCII_DTOSTR_BUF_SIZE];
  g_string_append (result, g_ascii_formatd (text, sizeof text, "%.6g", g_ascii_strtod (number, NULL)));
  return FALSE;
}

char *
tf_laws_dup_lines (const GPtrArray *lines)
{
  g_autoptr (GRegex) number = g_regex_new ("-?[0-9]+\\.[0-9]{5,}(e[-+]?[0-9]+)?", 0, 0, NULL);
  g_autoptr (GString) text = g_string_new (NULL);
  for (guint k = 0; k < lines->len; k++)
    g_string_append_printf (text, "%s%s", k > 0 ? "\n" : "", (char *)lines->pdata[k]);
  return g_regex_replace_eval (number, text->str, -1, 0, 0, append_short, NULL, NULL);
}

static char *
dup_differences (const GPtrArray *differences, const char *trouble)
{
  if (differences == NULL)
    return g_strdup (trouble);
  if (differences->len == 0)
    return g_strdup (_ ("They are the same."));
  return tf_laws_dup_lines (differences);
}

AdwMessageDialog *
tf_window_show_lines (TfWindow *window, const char *heading, const char *body, const char *lines)
{
  GtkWidget *dialog = adw_message_dialog_new (GTK_WINDOW (window), heading, body);
  GtkWidget *scrolled = gtk_scrolled_window_new (), *label = gtk_label_new (lines);
  gtk_label_set_wrap (GTK_LABEL (label), TRUE);
  gtk_label_set_wrap_mode (GTK_LABEL (label), PANGO_WRAP_WORD_CHAR);
  gtk_label_set_selectable (GTK_LABEL (label), TRUE);
  gtk_label_set_xalign (GTK_LABEL (label), 0);
  gtk_label_set_yalign (GTK_LABEL (label), 0);
  tf_window_set_lines (ADW_MESSAGE_DIALOG (dialog), scrolled, label);
  adw_message_dialog_add_response (ADW_MESSAGE_DIALOG (dialog), "close", _ ("_Close"));
  adw_message_dialog_set_close_response (ADW_MESSAGE_DIALOG (dialog), "close");
  gtk_window_present (GTK_WINDOW (dialog));
  return ADW_MESSAGE_DIALOG (dialog);
}

void
tf_window_set_lines (AdwMessageDialog *dialog, GtkWidget *scrolled, GtkWidget *child)
{
  gtk_scrolled_window_set_child (GTK_SCROLLED_WINDOW (scrolled), child);
  gtk_scrolled_window_set_policy (GTK_SCROLLED_WINDOW (scrolled), GTK_POLICY_NEVER, GTK_POLICY_AUTOMATIC);
  gtk_scrolled_window_set_propagate_natural_height (GTK_SCROLLED_WINDOW (scrolled), TRUE);
  gtk_scrolled_window_set_min_content_height (GTK_SCROLLED_WINDOW (scrolled), 60);
  gtk_scrolled_window_set_max_content_height (GTK_SCROLLED_WINDOW (scrolled), 300);
  gtk_widget_set_size_request (scrolled, 420, -1);
  adw_message_dialog_set_extra_child (dialog, scrolled);
}

static void
compared (const GPtrArray *differences, const char *trouble, gpointer window)
{
  g_autofree char *text = dup_differences (differences, trouble);
  tf_window_show_lines (window, _ ("What differs"), NULL, text);
}

static const char *
chosen_string (GtkDropDown *choice)
{
  GtkStringObject *object = gtk_drop_down_get_selected_item (choice);
  return object != NULL ? gtk_string_object_get_string (object) : NULL;
}

static void
pair_answered (AdwMessageDialog *dialog, const char *answer, TfWindow *window)
{
  GtkDropDown *first = g_object_get_data (G_OBJECT (dialog), "first"),
              *second = g_object_get_data (G_OBJECT (dialog), "second");
  if (strcmp (answer, "yes") != 0 || chosen_string (first) == NULL)
    return;
  gboolean now = gtk_drop_down_get_selected (second) == 0;
  tf_session_compare_editions (session_of (window), chosen_string (first),
                               now ? NULL : chosen_string (second), compared, G_OBJECT (window));
}

static GtkWidget *
new_choice (const GPtrArray *editions, const char *before, const char *name)
{
  g_autoptr (GPtrArray) names = g_ptr_array_new ();
  if (before != NULL)
    g_ptr_array_add (names, (gpointer)before);
  for (guint k = 0; k < editions->len; k++)
    g_ptr_array_add (names, ((TfNamed *)g_ptr_array_index (editions, k))->name);
  g_ptr_array_add (names, NULL);
  GtkWidget *choice = gtk_drop_down_new_from_strings ((const char *const *)names->pdata);
  gtk_accessible_update_property (GTK_ACCESSIBLE (choice), GTK_ACCESSIBLE_PROPERTY_LABEL, name, -1);
  tf_widget_name_inside (choice, name);
  return choice;
}

static GtkWidget *
add_choice (GtkWidget *box, const GPtrArray *editions, const char *before, const char *name)
{
  GtkWidget *label = gtk_label_new (name), *choice = new_choice (editions, before, name);
  gtk_label_set_xalign (GTK_LABEL (label), 0);
  gtk_widget_add_css_class (label, "caption");
  gtk_box_append (GTK_BOX (box), label);
  gtk_box_append (GTK_BOX (box), choice);
  return choice;
}

ACTION (compare_editions)
{
  const GPtrArray *editions = tf_session_get_editions (session_of (window));
  if (editions == NULL || editions->len == 0)
    {
      tf_window_say (window, _ ("No edition is kept yet."));
      return;
    }
  GtkWidget *dialog
      = adw_message_dialog_new (GTK_WINDOW (window), _ ("Compare editions"),
                                _ ("What differs, and why: rows, choices, or the program."));
  AdwMessageDialog *message = ADW_MESSAGE_DIALOG (dialog);
  GtkWidget *box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 4);
  GtkWidget *first = add_choice (box, editions, NULL, _ ("This edition")),
            *second = add_choice (box, editions, _ ("the study as it is now"), _ ("Against"));
  adw_message_dialog_set_extra_child (message, box);
  adw_message_dialog_add_responses (message, "cancel", _ ("_Cancel"), "yes", _ ("C_ompare"), NULL);
  adw_message_dialog_set_default_response (message, "yes");
  adw_message_dialog_set_close_response (message, "cancel");
  g_object_set_data (G_OBJECT (dialog), "first", first);
  g_object_set_data (G_OBJECT (dialog), "second", second);
  g_signal_connect_object (dialog, "response", G_CALLBACK (pair_answered), window, 0);
  gtk_window_present (GTK_WINDOW (dialog));
  GtkWidget *compare = gtk_window_get_default_widget (GTK_WINDOW (dialog));
  if (compare != NULL)
    gtk_widget_grab_focus (compare); /* Return compares; a choice that has the keyboard opens on it */
}

/* -- the menu ----------------------------------------------------------------------------------------- */

static void
append_study (GMenu *menu, const char *name, guint version)
{
  g_autofree char *label = version > 0 ? g_strdup_printf (_ ("%s (version %u)"), name, version)
                                       : g_strdup (name);
  g_autoptr (GMenuItem) item = g_menu_item_new (label, NULL);
  g_menu_item_set_action_and_target (item, "win.choose-study", "s", name);
  g_menu_append_item (menu, item);
}

GMenuModel *
tf_study_menu_new (TfSession *session)
{
  const GPtrArray *studies = tf_session_get_studies (session);
  const char *now = tf_session_get_study (session)->name;
  GMenu *menu = g_menu_new ();
  g_autoptr (GMenu) names = g_menu_new (), keep = g_menu_new (), files = g_menu_new (),
                    editions = g_menu_new (), bundles = g_menu_new ();
  gboolean has_default = FALSE, has_now = strcmp (now, "default") == 0;
  for (guint k = 0; studies != NULL && k < studies->len; k++)
    {
      const TfNamed *named = g_ptr_array_index (studies, k);
      has_default |= strcmp (named->name, "default") == 0;
      has_now |= strcmp (named->name, now) == 0;
      append_study (names, named->name, named->version);
    }
  if (!has_default)
    append_study (names, "default", 0);
  if (!has_now)
    append_study (names, now, 0);
  g_menu_append (keep, _ ("Keep under another name…"), "win.keep-study-as::");
  g_menu_append (keep, _ ("Rename…"), "win.rename-study::");
  g_menu_append (keep, _ ("Put away"), "win.put-away-study");
  g_menu_append (editions, _ ("Keep an edition…"), "win.keep-edition::");
  g_menu_append (editions, _ ("Compare editions…"), "win.compare-editions");
  g_menu_append (files, _ ("Open a study…"), "win.open-study::");
  g_menu_append (files, _ ("Save the study…"), "win.save-study::");
  g_menu_append (bundles, _ ("Save a study bundle…"), "win.save-bundle::");
  g_menu_append (bundles, _ ("Open a study bundle…"), "win.open-bundle::");
  g_menu_append_section (menu, _ ("Studies"), G_MENU_MODEL (names));
  g_menu_append_section (menu, NULL, G_MENU_MODEL (keep));
  g_menu_append_section (menu, NULL, G_MENU_MODEL (editions));
  g_menu_append_section (menu, NULL, G_MENU_MODEL (files));
  g_menu_append_section (menu, NULL, G_MENU_MODEL (bundles));
  return G_MENU_MODEL (menu);
}

/* -- the table ------------------------------------------------------------------------------------------ */

static const GActionEntry entries[] = {
  { "choose-study", NULL, "s", "'default'", choose_study },
  { "keep-study", keep_study, NULL, NULL, NULL },
  { "keep-study-as", keep_study_as, "s", NULL, NULL },
  { "rename-study", rename_study, "s", NULL, NULL },
  { "put-away-study", put_away_study, NULL, NULL, NULL },
  { "revert-study", revert_study, NULL, NULL, NULL },
  { "open-study", open_study, "s", NULL, NULL },
  { "save-study", save_study, "s", NULL, NULL },
  { "keep-edition", keep_edition, "s", NULL, NULL },
  { "cancel-edition", cancel_edition, NULL, NULL, NULL },
  { "compare-editions", compare_editions, NULL, NULL, NULL },
  { "apply-what-if", apply_what_if, "s", NULL, NULL },
};

void
tf_window_add_study_actions (TfWindow *self)
{
  g_action_map_add_action_entries (G_ACTION_MAP (self), entries, G_N_ELEMENTS (entries), self);
}

void
tf_window_update_study_actions (TfWindow *self)
{
  TfSession *session = session_of (self);
  const char *name = tf_session_get_study (session)->name;
  gboolean shown = tf_session_shows_laws (session),
           writes = shown && tf_session_is_writable (session)
                    && !tf_session_get_divide (session)->in_hand,
           making = tf_session_makes_edition (session),
           changed = shown && tf_session_is_study_changed (session);
  guint version = tf_session_get_kept_version (session);
  GAction *choose = g_action_map_lookup_action (G_ACTION_MAP (self), "choose-study");
  g_simple_action_set_state (G_SIMPLE_ACTION (choose), g_variant_new_string (name));
  tf_window_enable (self, "choose-study", shown);
  tf_window_enable (self, "keep-study", writes && (changed || version == 0));
  tf_window_enable (self, "keep-study-as", writes);
  tf_window_enable (self, "rename-study", writes && version > 0);
  tf_window_enable (self, "put-away-study", writes && version > 0);
  tf_window_enable (self, "revert-study", changed && (version > 0 || strcmp (name, "default") == 0));
  tf_window_enable (self, "open-study", writes);
  tf_window_enable (self, "save-study", shown);
  tf_window_enable (self, "keep-edition", writes && !making);
  tf_window_enable (self, "apply-what-if", writes && !making);
  tf_window_enable (self, "cancel-edition", making);
  tf_window_enable (self, "compare-editions", shown && !making);
  tf_window_update_bundle_actions (self);
}
