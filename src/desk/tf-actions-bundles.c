/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Commands of study bundles. One that takes a path asks for it when it is empty. */

#include "tf-actions-laws.h"

#include <string.h>
#include <adwaita.h>
#include <glib/gi18n-lib.h>

#include "tf-save-as.h"
#include "tf-session-bundles.h"
#include "tf-session-studies.h"
#include "tf-window-private.h"

static TfSession *
session_of (gpointer window)
{
  return tf_window_get_session (TF_WINDOW (window));
}

#define ACTION(name) static void name (GSimpleAction *action, GVariant *value, gpointer window)

static void
save_chosen (TfWindow *window, const char *what, const char *path)
{
  tf_session_save_bundle (session_of (window), path);
}

ACTION (save_bundle)
{
  const char *path = g_variant_get_string (value, NULL);
  g_autofree char *name = g_strconcat (tf_session_get_study (session_of (window))->name, ".zip", NULL);
  g_strdelimit (name, "/", '-');
  if (*path == '\0')
    tf_save_as_ask (window, _ ("Save a study bundle"), name, "", save_chosen);
  else
    save_chosen (window, "", path);
}

/* -- what one says ------------------------------------------------------------------------------------ */

static char *
dup_list (const TfBundleLook *look)
{
  g_autofree char *differ = tf_laws_dup_lines (look->differences);
  GString *text = g_string_new (look->differences->len > 0
                                    ? differ
                                    : _ ("Every number is the same, to the digits that are printed."));
  if (look->not_compared == NULL || look->not_compared->len == 0)
    return g_string_free (text, FALSE);
  g_string_append (text, _ ("\n\nNot compared, because these choices need the ledger:"));
  for (guint k = 0; k < look->not_compared->len; k++)
    g_string_append_printf (text, "\n%s", tf_what_if_title (look->not_compared->pdata[k]));
  return g_string_free (text, FALSE);
}

static void
study_wanted (AdwMessageDialog *dialog, const char *answer, TfWindow *window)
{
  if (strcmp (answer, "keep") == 0)
    tf_session_take_study_of (session_of (window), g_object_get_data (G_OBJECT (dialog), "study"));
}

static void
told (const TfBundleLook *look, const char *trouble, gpointer window)
{
  if (look == NULL)
    {
      tf_window_show_lines (window, _ ("The bundle cannot be read"), NULL, trouble);
      return;
    }
  g_autofree char *list = dup_list (look);
  g_autofree char *heading
      = look->differences->len == 0
            ? g_strdup_printf (_ ("%s: same"), look->name)
            : g_strdup_printf (g_dngettext (GETTEXT_PACKAGE, "%s: %u number differs", "%s: %u numbers differ",
                                            look->differences->len),
                               look->name, look->differences->len);
  g_autofree char *body
      = g_strdup_printf (_ ("The study “%s”, worked out again from its %u rows, %u of them picks. Written by "
                            "%s."),
                         look->study->name, look->n_rows, look->n_picks, look->program);
  AdwMessageDialog *dialog = tf_window_show_lines (window, heading, body, list);
  adw_message_dialog_add_response (dialog, "keep", _ ("_Keep its study in this ledger"));
  adw_message_dialog_set_response_enabled (dialog, "keep", tf_session_is_writable (session_of (window)));
  g_object_set_data_full (G_OBJECT (dialog), "study", tf_study_copy (look->study),
                          (GDestroyNotify)tf_study_free);
  g_signal_connect_object (dialog, "response", G_CALLBACK (study_wanted), window, 0);
}

ACTION (open_bundle)
{
  const char *path = g_variant_get_string (value, NULL);
  if (*path == '\0')
    tf_window_ask_study_file (window, "open-bundle", _ ("Open a study bundle"), NULL,
                              _ ("Study bundles (zip)"), "*.zip");
  else
    tf_session_look_at_bundle (session_of (window), path, told, G_OBJECT (window));
}

void
tf_window_add_bundle_actions (TfWindow *self)
{
  static const GActionEntry entries[] = {
    { "save-bundle", save_bundle, "s", NULL, NULL },
    { "open-bundle", open_bundle, "s", NULL, NULL },
  };
  g_action_map_add_action_entries (G_ACTION_MAP (self), entries, G_N_ELEMENTS (entries), self);
}

void
tf_window_update_bundle_actions (TfWindow *self)
{
  gboolean shown = tf_session_shows_laws (session_of (self)),
           busy = tf_session_makes_edition (session_of (self));
  GAction *save = g_action_map_lookup_action (G_ACTION_MAP (self), "save-bundle"),
          *open = g_action_map_lookup_action (G_ACTION_MAP (self), "open-bundle");
  g_simple_action_set_enabled (G_SIMPLE_ACTION (save), shown);
  g_simple_action_set_enabled (G_SIMPLE_ACTION (open), shown && !busy);
}
