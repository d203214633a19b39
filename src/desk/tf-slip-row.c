/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-slip-row.h"

#include <glib/gi18n-lib.h>

struct _TfSlipRow
{
  GtkWidget parent;
  GtkButton *button;
  GtkLabel *name, *value, *under, *how;
  GtkPopover *popover;
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
  set_label (self->how, how != NULL ? how : "");
  g_autofree char *label = g_strdup_printf (_ ("%s: %s. How it was got"), name, value);
  gtk_accessible_update_property (GTK_ACCESSIBLE (self->button), GTK_ACCESSIBLE_PROPERTY_LABEL,
                                  label, -1);
}

const char *
tf_slip_row_get_value (TfSlipRow *self)
{
  return gtk_label_get_label (self->value);
}

const char *
tf_slip_row_get_how (TfSlipRow *self)
{
  return gtk_label_get_label (self->how);
}

static void
clicked (TfSlipRow *self)
{
  gtk_popover_popup (self->popover);
}

static void
size_allocate (GtkWidget *widget, int width, int height, int baseline)
{
  TfSlipRow *self = TF_SLIP_ROW (widget);
  gtk_widget_size_allocate (GTK_WIDGET (self->button), &(GtkAllocation){ 0, 0, width, height },
                            baseline);
  gtk_popover_present (self->popover);
}

static void
measure (GtkWidget *widget, GtkOrientation orientation, int for_size, int *minimum, int *natural,
         int *minimum_baseline, int *natural_baseline)
{
  gtk_widget_measure (GTK_WIDGET (TF_SLIP_ROW (widget)->button), orientation, for_size, minimum,
                      natural, minimum_baseline, natural_baseline);
}

static GtkSizeRequestMode
get_request_mode (GtkWidget *widget)
{
  return GTK_SIZE_REQUEST_HEIGHT_FOR_WIDTH;
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
  widget->size_allocate = size_allocate;
  widget->measure = measure;
  widget->get_request_mode = get_request_mode;
  gtk_widget_class_set_template_from_resource (widget, "/io/tiltfield/Tiltfield/slip-row.ui");
  gtk_widget_class_bind_template_child (widget, TfSlipRow, button);
  gtk_widget_class_bind_template_child (widget, TfSlipRow, name);
  gtk_widget_class_bind_template_child (widget, TfSlipRow, value);
  gtk_widget_class_bind_template_child (widget, TfSlipRow, under);
  gtk_widget_class_bind_template_child (widget, TfSlipRow, popover);
  gtk_widget_class_bind_template_child (widget, TfSlipRow, how);
  gtk_widget_class_bind_template_callback (widget, clicked);
}

static void
tf_slip_row_init (TfSlipRow *self)
{
  gtk_widget_init_template (GTK_WIDGET (self));
}
