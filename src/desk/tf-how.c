/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-how.h"

#include <glib/gi18n-lib.h>

struct _TfHow
{
  GtkButton parent;
  char *text;
  GtkWidget *popover; /* made when it is first opened */
  GtkLabel *label;    /* in it */
};

G_DEFINE_FINAL_TYPE (TfHow, tf_how, GTK_TYPE_BUTTON)

enum
{
  WIDTH = 44, /* characters */
  HEIGHT = 440
};

void
tf_how_set (TfHow *self, const char *name, const char *value, const char *text)
{
  g_return_if_fail (TF_IS_HOW (self) && name != NULL && value != NULL);
  g_autofree char *label = g_strdup_printf (_ ("%s: %s. How it was got"), name, value);
  gtk_accessible_update_property (GTK_ACCESSIBLE (self), GTK_ACCESSIBLE_PROPERTY_LABEL, label, -1);
  if (g_strcmp0 (self->text, text) == 0)
    return;
  g_free (self->text);
  self->text = g_strdup (text != NULL ? text : "");
  if (self->label != NULL)
    gtk_label_set_label (self->label, self->text);
}

const char *
tf_how_get_text (TfHow *self)
{
  return self->text;
}

static GtkWidget *
label_new (const char *text, int width)
{
  GtkWidget *label = gtk_label_new (text);
  gtk_label_set_xalign (GTK_LABEL (label), 0);
  gtk_label_set_wrap (GTK_LABEL (label), TRUE);
  gtk_label_set_wrap_mode (GTK_LABEL (label), PANGO_WRAP_WORD_CHAR);
  gtk_label_set_width_chars (GTK_LABEL (label), width);
  gtk_label_set_max_width_chars (GTK_LABEL (label), width);
  gtk_widget_set_valign (label, GTK_ALIGN_START);
  return label;
}

static void
make_popover (TfHow *self)
{
  GtkWidget *box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 6);
  GtkWidget *head = label_new (_ ("How it was got"), -1), *scrolled = gtk_scrolled_window_new ();
  self->label = GTK_LABEL (label_new (self->text, WIDTH));
  gtk_widget_add_css_class (head, "heading");
  gtk_scrolled_window_set_policy (GTK_SCROLLED_WINDOW (scrolled), GTK_POLICY_NEVER,
                                  GTK_POLICY_AUTOMATIC);
  gtk_scrolled_window_set_propagate_natural_height (GTK_SCROLLED_WINDOW (scrolled), TRUE);
  gtk_scrolled_window_set_max_content_height (GTK_SCROLLED_WINDOW (scrolled), HEIGHT);
  gtk_scrolled_window_set_child (GTK_SCROLLED_WINDOW (scrolled), GTK_WIDGET (self->label));
  gtk_accessible_update_property (GTK_ACCESSIBLE (scrolled), GTK_ACCESSIBLE_PROPERTY_LABEL,
                                  _ ("How it was got"), -1);
  gtk_box_append (GTK_BOX (box), head);
  gtk_box_append (GTK_BOX (box), scrolled);
  gtk_widget_add_css_class (box, "how");
  self->popover = gtk_popover_new ();
  gtk_popover_set_child (GTK_POPOVER (self->popover), box);
  gtk_popover_set_position (GTK_POPOVER (self->popover), GTK_POS_LEFT);
  gtk_widget_set_parent (self->popover, GTK_WIDGET (self));
}

static void
clicked (GtkButton *button)
{
  TfHow *self = TF_HOW (button);
  if (self->popover == NULL)
    make_popover (self);
  gtk_popover_popup (GTK_POPOVER (self->popover));
}

static void
size_allocate (GtkWidget *widget, int width, int height, int baseline)
{
  TfHow *self = TF_HOW (widget);
  GTK_WIDGET_CLASS (tf_how_parent_class)->size_allocate (widget, width, height, baseline);
  if (self->popover != NULL)
    gtk_popover_present (GTK_POPOVER (self->popover));
}

static void
dispose (GObject *object)
{
  g_clear_pointer (&TF_HOW (object)->popover, gtk_widget_unparent);
  TF_HOW (object)->label = NULL;
  G_OBJECT_CLASS (tf_how_parent_class)->dispose (object);
}

static void
finalize (GObject *object)
{
  g_free (TF_HOW (object)->text);
  G_OBJECT_CLASS (tf_how_parent_class)->finalize (object);
}

static void
tf_how_class_init (TfHowClass *klass)
{
  G_OBJECT_CLASS (klass)->dispose = dispose;
  G_OBJECT_CLASS (klass)->finalize = finalize;
  GTK_WIDGET_CLASS (klass)->size_allocate = size_allocate;
  GTK_BUTTON_CLASS (klass)->clicked = clicked;
}

static void
tf_how_init (TfHow *self)
{
  self->text = g_strdup ("");
  gtk_button_set_has_frame (GTK_BUTTON (self), FALSE);
  gtk_widget_add_css_class (GTK_WIDGET (self), "slip-row");
  gtk_widget_set_tooltip_text (GTK_WIDGET (self), _ ("How it was got"));
  gtk_accessible_update_property (GTK_ACCESSIBLE (self), GTK_ACCESSIBLE_PROPERTY_LABEL,
                                  _ ("How it was got"), -1);
}
