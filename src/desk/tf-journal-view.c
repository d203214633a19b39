/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The journal as people read it: who did what and when, the newest first; where another person took
 * over, it says so. */

#include "tf-window-private.h"

#include <glib/gi18n-lib.h>

#include "tf-deed.h"

enum
{
  WIDTH = 560,
  HEIGHT = 480
};

/* "kept 0412 on 2013-10-09 06:00" */
static char *
dup_sentence (const TfJournalEntry *e)
{
  GString *text = g_string_new (tf_deed_word (e->kind));
  if (e->of[0] != '\0')
    g_string_append_printf (text, ": %s", tf_deed_word (e->of));
  if (e->as[0] != '\0')
    g_string_append_printf (text, " (%s)", tf_deed_word (e->as));
  if (e->region[0] != '\0')
    g_string_append_printf (text, " · %s", e->region);
  if (e->text[0] != '\0')
    g_string_append_printf (text, " · %s", e->text);
  if (e->frame_time[0] != '\0')
    g_string_append_printf (text, _ (" · frame %.16s"), e->frame_time);
  if (e->undone)
    g_string_append (text, _ (" · undone"));
  return g_string_free (text, FALSE);
}

static void
append (GtkStringList *list, const TfJournalEntry *e, const TfJournalEntry *before)
{
  g_autofree char *sentence = dup_sentence (e), *wall = tf_time_dup_iso (e->wall, 0);
  const char *person = e->person != NULL && e->person[0] != '\0' ? e->person : "—";
  gboolean over = before != NULL && g_strcmp0 (before->person, e->person) != 0
                  && e->person != NULL && e->person[0] != '\0' && before->person[0] != '\0';
  g_autofree char *line = g_strdup_printf ("%s\n%s · %s%s", sentence, wall != NULL ? wall : "—", person,
                                           over ? _ (" (took over)") : "");
  gtk_string_list_append (list, line);
}

static void
setup (GtkSignalListItemFactory *factory, GtkListItem *item)
{
  GtkWidget *label = gtk_label_new (NULL);
  gtk_label_set_xalign (GTK_LABEL (label), 0);
  gtk_label_set_wrap (GTK_LABEL (label), TRUE);
  gtk_widget_set_margin_top (label, 4);
  gtk_widget_set_margin_bottom (label, 4);
  gtk_list_item_set_child (item, label);
}

static void
bind (GtkSignalListItemFactory *factory, GtkListItem *item)
{
  gtk_label_set_label (GTK_LABEL (gtk_list_item_get_child (item)),
                       gtk_string_object_get_string (gtk_list_item_get_item (item)));
}

static void
read_done (GObject *source, GAsyncResult *result, gpointer data)
{
  g_autoptr (GtkStringList) list = data;
  g_autoptr (GError) error = NULL;
  g_autoptr (GPtrArray) entries = tf_session_read_journal_finish (result, &error);
  if (entries == NULL)
    gtk_string_list_append (list, error->message);
  for (guint k = 0; entries != NULL && k < entries->len; k++)
    append (list, entries->pdata[k], k + 1 < entries->len ? entries->pdata[k + 1] : NULL);
  if (entries != NULL && entries->len == 0)
    gtk_string_list_append (list, _ ("Nothing was done yet."));
}

static GtkWidget *
list_new (GtkStringList *list)
{
  GtkListItemFactory *factory = gtk_signal_list_item_factory_new ();
  g_signal_connect (factory, "setup", G_CALLBACK (setup), NULL);
  g_signal_connect (factory, "bind", G_CALLBACK (bind), NULL);
  GtkSelectionModel *model
      = GTK_SELECTION_MODEL (gtk_no_selection_new (g_object_ref (G_LIST_MODEL (list))));
  GtkWidget *view = gtk_list_view_new (model, factory);
  gtk_accessible_update_property (GTK_ACCESSIBLE (view), GTK_ACCESSIBLE_PROPERTY_LABEL,
                                  _ ("Journal"), -1);
  GtkWidget *scroller = gtk_scrolled_window_new ();
  gtk_scrolled_window_set_child (GTK_SCROLLED_WINDOW (scroller), view);
  gtk_widget_set_vexpand (scroller, TRUE);
  return scroller;
}

void
tf_window_show_journal (TfWindow *self, TfRegionItem *region)
{
  const TfRow *row = region != NULL ? tf_region_item_get_row (region) : NULL;
  g_autoptr (GtkStringList) list = gtk_string_list_new (NULL);
  GtkWidget *window = adw_window_new (), *box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 0);
  g_autofree char *title
      = row != NULL ? g_strdup_printf (_ ("Journal of %s"), row->region) : g_strdup (_ ("Journal"));
  gtk_window_set_title (GTK_WINDOW (window), title);
  gtk_window_set_transient_for (GTK_WINDOW (window), GTK_WINDOW (self));
  gtk_window_set_default_size (GTK_WINDOW (window), WIDTH, HEIGHT);
  gtk_box_append (GTK_BOX (box), adw_header_bar_new ());
  gtk_box_append (GTK_BOX (box), list_new (list));
  adw_window_set_content (ADW_WINDOW (window), box);
  GtkEventController *keys = gtk_shortcut_controller_new ();
  gtk_shortcut_controller_add_shortcut (
      GTK_SHORTCUT_CONTROLLER (keys),
      gtk_shortcut_new (gtk_keyval_trigger_new (GDK_KEY_Escape, 0),
                        gtk_named_action_new ("window.close")));
  gtk_widget_add_controller (window, keys);
  tf_session_read_journal (tf_window_get_session (self), row != NULL ? row->region_key : 0,
                           read_done, g_object_ref (list));
  gtk_window_present (GTK_WINDOW (window));
}
