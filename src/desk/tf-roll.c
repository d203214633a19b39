/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-roll.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-roll-row.h"
#include "tf-thumbs.h"

struct _TfRoll
{
  GtkWidget parent;
  GtkListView *list;
  GtkStack *stack;
  GtkLabel *empty, *narrowed_words;
  GtkWidget *narrowed; /* stands while the wings' stretch or the filter hides frames */
  GtkMenuButton *filter_button;
  GtkLabel *filter_words, *watch_words;
  GtkWidget *watch_box;
  char **instruments; /* of the filter's menu */
  TfSession *session;
  GtkSingleSelection *selection;
  TfThumbs *thumbs;
  gboolean following; /* the selection is being set from the session */
};

G_DEFINE_FINAL_TYPE (TfRoll, tf_roll, GTK_TYPE_WIDGET)

/* -- rows ------------------------------------------------------------------------------------ */

static void
setup_row (GtkSignalListItemFactory *factory, GtkListItem *item, TfRoll *self)
{
  gtk_list_item_set_child (item, g_object_new (TF_TYPE_ROLL_ROW, NULL));
}

static void
bind_row (GtkSignalListItemFactory *factory, GtkListItem *item, TfRoll *self)
{
  TfFrameItem *frame = gtk_list_item_get_item (item);
  tf_roll_row_set_item (TF_ROLL_ROW (gtk_list_item_get_child (item)), frame);
  tf_thumbs_ask (self->thumbs, frame);
}

static void
unbind_row (GtkSignalListItemFactory *factory, GtkListItem *item, TfRoll *self)
{
  tf_roll_row_set_item (TF_ROLL_ROW (gtk_list_item_get_child (item)), NULL);
}

/* -- selection, both ways -------------------------------------------------------------------- */

static void
selected (TfRoll *self)
{
  TfFrameItem *item = gtk_single_selection_get_selected_item (self->selection);
  if (!self->following && item != NULL)
    tf_session_choose_frame (self->session, item);
}

static void
frame_changed (TfRoll *self)
{
  TfFrameItem *item = tf_session_get_frame_item (self->session);
  if (gtk_single_selection_get_selected_item (self->selection) == (gpointer)item)
    return;
  GListModel *list = tf_session_get_frames (self->session);
  guint n = g_list_model_get_n_items (list), at = GTK_INVALID_LIST_POSITION;
  for (guint k = 0; k < n && item != NULL && at == GTK_INVALID_LIST_POSITION; k++)
    {
      g_autoptr (TfFrameItem) other = g_list_model_get_item (list, k);
      if (other == item)
        at = k;
    }
  self->following = TRUE;
  gtk_single_selection_set_selected (self->selection, at);
  self->following = FALSE;
  if (at != GTK_INVALID_LIST_POSITION)
    gtk_widget_activate_action (GTK_WIDGET (self->list), "list.scroll-to-item", "u", at);
}

static char *
dup_day_of (double at)
{
  int year, month, day;
  if (!tf_time_calendar (tf_time_from_year (at), &year, &month, &day, NULL, NULL, NULL))
    return g_strdup ("—");
  g_autoptr (GDateTime) date = g_date_time_new_utc (year, month, day, 0, 0, 0);
  return date != NULL ? g_date_time_format (date, _ ("%-d %b %Y")) : g_strdup ("—");
}

static void
show_narrowed (TfRoll *self, guint n)
{
  double from, to;
  guint all = tf_session_get_n_frames (self->session);
  tf_session_get_pick (self->session, &from, &to);
  gboolean picked = isfinite (from) && isfinite (to);
  gboolean filtered = tf_session_get_roll_filter (self->session) != TF_ROLL_ALL
                      || tf_session_get_roll_instrument (self->session) != NULL;
  gtk_widget_set_visible (self->narrowed, picked || filtered);
  gtk_label_set_label (self->narrowed_words, "");
  if (!picked && !filtered)
    return;
  g_autofree char *first = dup_day_of (from), *last = dup_day_of (to);
  g_autofree char *text = picked ? g_strdup_printf (_ ("%s to %s: %u of %u frames"), first, last, n, all)
                                 : g_strdup_printf (_ ("%u of %u frames"), n, all);
  gtk_label_set_label (self->narrowed_words, text);
}

/* -- the filter ------------------------------------------------------------------------------ */

static const char *const filter_labels[TF_N_ROLL_FILTERS]
    = { N_ ("all frames"), N_ ("untouched"), N_ ("hints waiting"), N_ ("done"), N_ ("refused") };

static GMenuModel *
filter_menu (char *const *instruments)
{
  GMenu *menu = g_menu_new ();
  g_autoptr (GMenu) states = g_menu_new (), origins = g_menu_new ();
  for (guint k = 0; k < TF_N_ROLL_FILTERS; k++)
    {
      g_autofree char *action
          = g_strconcat ("win.roll-state::", tf_roll_filter_name ((TfRollFilter)k), NULL);
      g_menu_append (states, _ (filter_labels[k]), action);
    }
  g_menu_append_section (menu, NULL, G_MENU_MODEL (states));
  for (guint k = 0; instruments[k] != NULL; k++)
    {
      g_autoptr (GMenuItem) item = g_menu_item_new (instruments[k], NULL);
      g_menu_item_set_action_and_target (item, "win.roll-instrument", "s", instruments[k]);
      g_menu_append_item (origins, item);
    }
  g_autoptr (GMenuItem) every = g_menu_item_new (_ ("all instruments"), NULL);
  g_menu_item_set_action_and_target (every, "win.roll-instrument", "s", "");
  g_menu_prepend_item (origins, every);
  g_menu_append_section (menu, _ ("Instrument"), G_MENU_MODEL (origins));
  return G_MENU_MODEL (menu);
}

static void
show_filter (TfRoll *self)
{
  g_auto (GStrv) now = tf_session_dup_instruments (self->session);
  if (self->instruments == NULL || !g_strv_equal ((const char *const *)now,
                                                  (const char *const *)self->instruments))
    {
      g_autoptr (GMenuModel) model = filter_menu (now);
      gtk_menu_button_set_menu_model (self->filter_button, model);
      g_strfreev (self->instruments);
      self->instruments = g_steal_pointer (&now);
    }
  const char *state = _ (filter_labels[tf_session_get_roll_filter (self->session)]),
             *instrument = tf_session_get_roll_instrument (self->session);
  g_autofree char *words = instrument != NULL ? g_strdup_printf ("%s · %s", state, instrument)
                                              : g_strdup (state);
  g_autofree char *name = g_strdup_printf (_ ("The roll shows: %s"), words);
  gtk_label_set_label (self->filter_words, words);
  gtk_accessible_update_property (GTK_ACCESSIBLE (self->filter_button),
                                  GTK_ACCESSIBLE_PROPERTY_LABEL, name, -1);
  gtk_widget_set_visible (GTK_WIDGET (self->filter_button),
                          tf_session_get_n_frames (self->session) > 1);
}

static void
show_watched (TfRoll *self)
{
  const char *folder = tf_session_get_watched (self->session);
  gtk_widget_set_visible (self->watch_box, folder != NULL);
  if (folder == NULL)
    return;
  g_autofree char *base = g_path_get_basename (folder),
                  *words = g_strdup_printf (_ ("watching %s"), base),
                  *tip = g_strdup_printf (_ ("New frames in %s are taken in as they arrive."), folder);
  gtk_label_set_label (self->watch_words, words);
  gtk_widget_set_tooltip_text (GTK_WIDGET (self->watch_words), tip);
}

static void
frames_changed (TfRoll *self)
{
  guint n = g_list_model_get_n_items (tf_session_get_frames (self->session));
  gboolean some = tf_session_get_n_frames (self->session) > 0;
  show_narrowed (self, n);
  show_filter (self);
  show_watched (self);
  gtk_stack_set_visible_child_name (self->stack, n > 0 ? "list" : "empty");
  gtk_label_set_label (
      self->empty,
      some ? _ ("No frame is like this. Press Show all for every frame.")
           : _ ("The roll is empty. Add frames, or drop them on the window."));
  frame_changed (self);
}

void
tf_roll_set_session (TfRoll *self, TfSession *session)
{
  g_return_if_fail (TF_IS_ROLL (self) && TF_IS_SESSION (session) && self->session == NULL);
  self->session = g_object_ref (session);
  self->selection = gtk_single_selection_new (g_object_ref (tf_session_get_frames (session)));
  gtk_single_selection_set_autoselect (self->selection, FALSE);
  gtk_single_selection_set_can_unselect (self->selection, TRUE);
  gtk_list_view_set_model (self->list, GTK_SELECTION_MODEL (self->selection));
  g_signal_connect_object (self->selection, "notify::selected-item", G_CALLBACK (selected), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "frame-changed", G_CALLBACK (frame_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "frames-changed", G_CALLBACK (frames_changed), self,
                           G_CONNECT_SWAPPED);
  frames_changed (self);
}

static void
dispose (GObject *object)
{
  TfRoll *self = TF_ROLL (object);
  GtkWidget *child = gtk_widget_get_first_child (GTK_WIDGET (self));
  g_clear_pointer (&child, gtk_widget_unparent);
  g_clear_object (&self->selection);
  g_clear_object (&self->session);
  g_clear_pointer (&self->thumbs, tf_thumbs_free);
  g_clear_pointer (&self->instruments, g_strfreev);
  G_OBJECT_CLASS (tf_roll_parent_class)->dispose (object);
}

static void
tf_roll_class_init (TfRollClass *klass)
{
  GtkWidgetClass *widget = GTK_WIDGET_CLASS (klass);
  G_OBJECT_CLASS (klass)->dispose = dispose;
  gtk_widget_class_set_layout_manager_type (widget, GTK_TYPE_BIN_LAYOUT);
  gtk_widget_class_set_css_name (widget, "roll");
  gtk_widget_class_set_template_from_resource (widget, "/io/tiltfield/Tiltfield/roll.ui");
  gtk_widget_class_bind_template_child (widget, TfRoll, stack);
  gtk_widget_class_bind_template_child (widget, TfRoll, list);
  gtk_widget_class_bind_template_child (widget, TfRoll, empty);
  gtk_widget_class_bind_template_child (widget, TfRoll, narrowed);
  gtk_widget_class_bind_template_child (widget, TfRoll, narrowed_words);
  gtk_widget_class_bind_template_child (widget, TfRoll, filter_button);
  gtk_widget_class_bind_template_child (widget, TfRoll, filter_words);
  gtk_widget_class_bind_template_child (widget, TfRoll, watch_box);
  gtk_widget_class_bind_template_child (widget, TfRoll, watch_words);
}

static void
tf_roll_init (TfRoll *self)
{
  self->thumbs = tf_thumbs_new ();
  gtk_widget_init_template (GTK_WIDGET (self));
  GtkListItemFactory *factory = gtk_signal_list_item_factory_new ();
  g_signal_connect (factory, "setup", G_CALLBACK (setup_row), self);
  g_signal_connect (factory, "bind", G_CALLBACK (bind_row), self);
  g_signal_connect (factory, "unbind", G_CALLBACK (unbind_row), self);
  gtk_list_view_set_factory (self->list, factory);
  g_object_unref (factory);
}
