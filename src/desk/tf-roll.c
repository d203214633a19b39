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
  GtkWidget *narrowed; /* stands while the wings' stretch hides frames */
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
  tf_session_get_pick (self->session, &from, &to);
  gtk_widget_set_visible (self->narrowed, isfinite (from) && isfinite (to));
  if (!isfinite (from) || !isfinite (to))
    return;
  g_autofree char *first = dup_day_of (from), *last = dup_day_of (to);
  g_autofree char *text = g_strdup_printf (_ ("%s to %s: %u of %u frames"), first, last, n,
                                           tf_session_get_n_frames (self->session));
  gtk_label_set_label (self->narrowed_words, text);
}

static void
frames_changed (TfRoll *self)
{
  guint n = g_list_model_get_n_items (tf_session_get_frames (self->session));
  gboolean some = tf_session_get_n_frames (self->session) > 0;
  show_narrowed (self, n);
  gtk_stack_set_visible_child_name (self->stack, n > 0 ? "list" : "empty");
  gtk_label_set_label (
      self->empty,
      some ? _ ("No frame in the stretch chosen on the wings. Double-click the wings for all.")
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
