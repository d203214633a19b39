/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-slip-row.h"

#include "tf-how.h"

struct _TfSlipRow
{
  GtkWidget parent;
  TfHow *button;
  GtkLabel *name, *value, *under;
};

G_DEFINE_FINAL_TYPE (TfSlipRow, tf_slip_row, GTK_TYPE_WIDGET)

static void
set_label (GtkLabel *label, const char *text)
{
  if (g_strcmp0 (gtk_label_get_label (label), text) != 0)
    gtk_label_set_label (label, text);
}

void
tf_slip_row_set (TfSlipRow *self, const char *name, const char *value, const char *under,
                 const char *how)
{
  g_return_if_fail (TF_IS_SLIP_ROW (self) && name != NULL && value != NULL);
  set_label (self->name, name);
  set_label (self->value, value);
  set_label (self->under, under != NULL ? under : "");
  gtk_widget_set_visible (GTK_WIDGET (self->under), under != NULL && under[0] != '\0');
  tf_how_set (self->button, name, value, how);
}

const char *
tf_slip_row_get_value (TfSlipRow *self)
{
  return gtk_label_get_label (self->value);
}

const char *
tf_slip_row_get_how (TfSlipRow *self)
{
  return tf_how_get_text (self->button);
}

static void
dispose (GObject *object)
{
  GtkWidget *child;
  while ((child = gtk_widget_get_first_child (GTK_WIDGET (object))) != NULL)
    gtk_widget_unparent (child);
  G_OBJECT_CLASS (tf_slip_row_parent_class)->dispose (object);
}

static void
tf_slip_row_class_init (TfSlipRowClass *klass)
{
  GtkWidgetClass *widget = GTK_WIDGET_CLASS (klass);
  G_OBJECT_CLASS (klass)->dispose = dispose;
  g_type_ensure (TF_TYPE_HOW);
  gtk_widget_class_set_layout_manager_type (widget, GTK_TYPE_BIN_LAYOUT);
  gtk_widget_class_set_template_from_resource (widget, "/io/tiltfield/Tiltfield/slip-row.ui");
  gtk_widget_class_bind_template_child (widget, TfSlipRow, button);
  gtk_widget_class_bind_template_child (widget, TfSlipRow, name);
  gtk_widget_class_bind_template_child (widget, TfSlipRow, value);
  gtk_widget_class_bind_template_child (widget, TfSlipRow, under);
}

static void
tf_slip_row_init (TfSlipRow *self)
{
  gtk_widget_init_template (GTK_WIDGET (self));
}
