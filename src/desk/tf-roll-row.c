/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-roll-row.h"

#include <glib/gi18n-lib.h>

#include "tf-thumbs.h"

struct _TfRollRow
{
  GtkWidget parent;
  GtkWidget *box;
  GtkLabel *day, *time, *counts;
  GtkWidget *stripe, *card;
  GtkPicture *picture;
  TfFrameItem *item;
};

G_DEFINE_FINAL_TYPE (TfRollRow, tf_roll_row, GTK_TYPE_WIDGET)

static const char *const state_classes[] = {
  [TF_FRAME_UNTOUCHED] = "untouched",
  [TF_FRAME_WAITING] = "waiting",
  [TF_FRAME_DONE] = "done",
  [TF_FRAME_REFUSED] = "refused",
};

char *
tf_roll_row_dup_name (TfFrameItem *item)
{
  g_autofree char *day = tf_frame_item_dup_day (item), *time = tf_frame_item_dup_time (item);
  g_autofree char *counts = tf_frame_item_dup_counts (item);
  const char *refusal = tf_frame_item_get_row (item)->refusal;
  return g_strdup_printf ("%s %s, %s, %s", day, time, refusal != NULL ? refusal : counts,
                          tf_frame_item_get_state_words (item));
}

static void
show_state (TfRollRow *self)
{
  TfFrameState state = tf_frame_item_get_state (self->item);
  for (guint k = 0; k < G_N_ELEMENTS (state_classes); k++)
    gtk_widget_remove_css_class (self->stripe, state_classes[k]);
  gtk_widget_add_css_class (self->stripe, state_classes[state]);
  const char *refusal = tf_frame_item_get_row (self->item)->refusal;
  gtk_widget_set_tooltip_text (
      GTK_WIDGET (self), refusal != NULL ? refusal : tf_frame_item_get_state_words (self->item));
}

static void
show (TfRollRow *self)
{
  const char *day = tf_frame_item_get_day (self->item);
  g_autofree char *time = tf_frame_item_dup_time (self->item),
                  *counts = tf_frame_item_dup_counts (self->item);
  gtk_widget_set_visible (GTK_WIDGET (self->day), day != NULL);
  gtk_label_set_label (self->day, day != NULL ? day : "");
  gtk_label_set_label (self->time, time);
  const TfFrameRow *row = tf_frame_item_get_row (self->item);
  const char *refusal
      = row->info->role == TF_ROLE_INTENSITY ? _ ("intensity picture") : row->refusal;
  gtk_label_set_label (self->counts, refusal != NULL ? refusal : counts);
  gtk_picture_set_paintable (self->picture,
                             GDK_PAINTABLE (tf_frame_item_get_thumbnail (self->item)));
  show_state (self);
  g_autofree char *name = tf_roll_row_dup_name (self->item);
  GtkWidget *parent = gtk_widget_get_parent (GTK_WIDGET (self));
  if (parent != NULL) /* the list's own row: nothing names it otherwise */
    gtk_accessible_update_property (GTK_ACCESSIBLE (parent), GTK_ACCESSIBLE_PROPERTY_LABEL, name,
                                    -1);
}

void
tf_roll_row_set_item (TfRollRow *self, TfFrameItem *item)
{
  g_return_if_fail (TF_IS_ROLL_ROW (self));
  if (self->item != NULL)
    g_signal_handlers_disconnect_by_data (self->item, self);
  g_set_object (&self->item, item);
  if (item == NULL)
    return;
  g_signal_connect_swapped (item, "changed", G_CALLBACK (show), self);
  show (self);
}

static void
dispose (GObject *object)
{
  TfRollRow *self = TF_ROLL_ROW (object);
  tf_roll_row_set_item (self, NULL);
  g_clear_pointer (&self->box, gtk_widget_unparent);
  G_OBJECT_CLASS (tf_roll_row_parent_class)->dispose (object);
}

static void
tf_roll_row_class_init (TfRollRowClass *klass)
{
  GtkWidgetClass *widget = GTK_WIDGET_CLASS (klass);
  G_OBJECT_CLASS (klass)->dispose = dispose;
  gtk_widget_class_set_layout_manager_type (widget, GTK_TYPE_BIN_LAYOUT);
  gtk_widget_class_set_template_from_resource (widget, "/io/tiltfield/Tiltfield/roll-row.ui");
  gtk_widget_class_bind_template_child (widget, TfRollRow, box);
  gtk_widget_class_bind_template_child (widget, TfRollRow, day);
  gtk_widget_class_bind_template_child (widget, TfRollRow, card);
  gtk_widget_class_bind_template_child (widget, TfRollRow, stripe);
  gtk_widget_class_bind_template_child (widget, TfRollRow, picture);
  gtk_widget_class_bind_template_child (widget, TfRollRow, time);
  gtk_widget_class_bind_template_child (widget, TfRollRow, counts);
}

static void
tf_roll_row_init (TfRollRow *self)
{
  gtk_widget_init_template (GTK_WIDGET (self));
}
