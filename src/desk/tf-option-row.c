/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-option-row.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-widget-style.h"

#include "tf-number.h"

struct _TfOptionRow
{
  GtkWidget parent;
  const TfOption *option;
  GtkWidget *control;
  gboolean showing; /* the value is set from outside */
};

G_DEFINE_FINAL_TYPE (TfOptionRow, tf_option_row, GTK_TYPE_WIDGET)

static void
changed (TfOptionRow *self)
{
  if (!self->showing)
    g_signal_emit_by_name (self, "changed");
}

/* -- controls -------------------------------------------------------------------------------- */

/* Numbers of many decades, and those that may be absent, are typed; the rest have steps. */
static gboolean
is_typed (const TfOption *option)
{
  return option->type == TF_OPTION_NUMBER && (isnan (option->fallback) || option->max > 1e6);
}

/* The two buttons of a number have no names of their own. */
static void
name_buttons (GtkWidget *spin)
{
  const char *names[] = { _ ("Less"), _ ("More") };
  guint n = 0;
  for (GtkWidget *child = gtk_widget_get_first_child (spin); child != NULL;
       child = gtk_widget_get_next_sibling (child))
    if (GTK_IS_BUTTON (child) && n < G_N_ELEMENTS (names))
      gtk_accessible_update_property (GTK_ACCESSIBLE (child), GTK_ACCESSIBLE_PROPERTY_LABEL,
                                      names[n++], -1);
}

static GtkWidget *
new_spin (TfOptionRow *self)
{
  const TfOption *o = self->option;
  double range = o->max - o->min;
  double step = o->type == TF_OPTION_INT ? 1 : range <= 1.5 ? 0.01 : range <= 20 ? 0.1 : 0.5;
  GtkWidget *spin = gtk_spin_button_new_with_range (o->min, o->max, step);
  gtk_spin_button_set_digits (GTK_SPIN_BUTTON (spin), step < 0.05 ? 2 : step < 1 ? 1 : 0);
  name_buttons (spin);
  g_signal_connect_swapped (spin, "value-changed", G_CALLBACK (changed), self);
  return spin;
}

static GtkWidget *
new_entry (TfOptionRow *self)
{
  GtkWidget *entry = gtk_entry_new ();
  GtkEventController *focus = gtk_event_controller_focus_new ();
  gtk_editable_set_width_chars (GTK_EDITABLE (entry), 9);
  gtk_editable_set_max_width_chars (GTK_EDITABLE (entry), 10);
  g_signal_connect_swapped (entry, "activate", G_CALLBACK (changed), self);
  g_signal_connect_swapped (focus, "leave", G_CALLBACK (changed), self);
  gtk_widget_add_controller (entry, focus);
  return entry;
}

static GtkWidget *
new_choice (TfOptionRow *self)
{
  GtkWidget *choice = gtk_drop_down_new_from_strings (self->option->choices);
  g_signal_connect_swapped (choice, "notify::selected", G_CALLBACK (changed), self);
  return choice;
}

static GtkWidget *
new_switch (TfOptionRow *self, const char *words)
{
  GtkWidget *check = gtk_check_button_new_with_label (words);
  GtkWidget *label = gtk_widget_get_last_child (check);
  gtk_label_set_wrap (GTK_LABEL (label), TRUE);
  gtk_label_set_xalign (GTK_LABEL (label), 0);
  g_signal_connect_swapped (check, "toggled", G_CALLBACK (changed), self);
  return check;
}

static GtkWidget *
new_label (const char *words)
{
  GtkWidget *label = gtk_label_new (words);
  gtk_label_set_wrap (GTK_LABEL (label), TRUE);
  gtk_label_set_xalign (GTK_LABEL (label), 0);
  gtk_widget_add_css_class (label, "caption");
  gtk_widget_add_css_class (label, "dim-label");
  return label;
}

static void
fill (TfOptionRow *self)
{
  const TfOption *o = self->option;
  g_autofree char *words = *o->unit != '\0' ? g_strdup_printf ("%s, %s", _ (o->sentence), o->unit)
                                            : g_strdup (_ (o->sentence));
  GtkWidget *box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 2);
  if (o->type == TF_OPTION_BOOL)
    self->control = new_switch (self, words);
  else
    {
      gtk_box_append (GTK_BOX (box), new_label (words));
      self->control = o->type == TF_OPTION_CHOICE ? new_choice (self)
                      : is_typed (o)              ? new_entry (self)
                                                  : new_spin (self);
      gtk_widget_set_halign (self->control, GTK_ALIGN_START);
    }
  gtk_accessible_update_property (GTK_ACCESSIBLE (self->control), GTK_ACCESSIBLE_PROPERTY_LABEL,
                                  words, -1);
  if (o->type == TF_OPTION_CHOICE)
    tf_widget_name_inside (self->control, words);
  gtk_box_append (GTK_BOX (box), self->control);
  gtk_widget_set_parent (box, GTK_WIDGET (self));
}

GtkWidget *
tf_option_row_new (const TfOption *option)
{
  TfOptionRow *self = g_object_new (TF_TYPE_OPTION_ROW, NULL);
  self->option = option;
  fill (self);
  return GTK_WIDGET (self);
}

/* -- values ---------------------------------------------------------------------------------- */

static gpointer
member (const TfOption *option, gconstpointer params)
{
  return (char *)params + option->offset;
}

static void
show_number (TfOptionRow *self, double value)
{
  if (!is_typed (self->option))
    {
      gtk_spin_button_set_value (GTK_SPIN_BUTTON (self->control), value);
      return;
    }
  g_autofree char *text = isnan (value) ? g_strdup ("") : tf_number_dup_form (value, ".6g", FALSE);
  gtk_editable_set_text (GTK_EDITABLE (self->control), text);
}

void
tf_option_row_show (TfOptionRow *self, gconstpointer params)
{
  g_return_if_fail (TF_IS_OPTION_ROW (self) && params != NULL);
  const TfOption *o = self->option;
  gpointer at = member (o, params);
  self->showing = TRUE;
  switch (o->type)
    {
    case TF_OPTION_NUMBER:
      show_number (self, *(double *)at);
      break;
    case TF_OPTION_INT:
      gtk_spin_button_set_value (GTK_SPIN_BUTTON (self->control), *(int *)at);
      break;
    case TF_OPTION_CHOICE:
      gtk_drop_down_set_selected (GTK_DROP_DOWN (self->control), (guint) * (int *)at);
      break;
    case TF_OPTION_BOOL:
    default:
      gtk_check_button_set_active (GTK_CHECK_BUTTON (self->control), *(gboolean *)at);
      break;
    }
  self->showing = FALSE;
}

/* What is no number, or out of range, is not taken. */
static void
store_typed (TfOptionRow *self, gpointer params)
{
  const char *text = gtk_editable_get_text (GTK_EDITABLE (self->control));
  g_autoptr (GError) error = NULL;
  if (*text == '\0')
    *(double *)member (self->option, params) = self->option->fallback;
  else
    tf_options_set (self->option, params, self->option->name, text, &error);
  if (error != NULL)
    gtk_widget_add_css_class (self->control, "error");
  else
    gtk_widget_remove_css_class (self->control, "error");
  gtk_widget_set_tooltip_text (self->control, error != NULL ? error->message : NULL);
}

void
tf_option_row_store (TfOptionRow *self, gpointer params)
{
  g_return_if_fail (TF_IS_OPTION_ROW (self) && params != NULL);
  const TfOption *o = self->option;
  gpointer at = member (o, params);
  switch (o->type)
    {
    case TF_OPTION_NUMBER:
      if (is_typed (o))
        store_typed (self, params);
      else
        *(double *)at = gtk_spin_button_get_value (GTK_SPIN_BUTTON (self->control));
      break;
    case TF_OPTION_INT:
      *(int *)at = gtk_spin_button_get_value_as_int (GTK_SPIN_BUTTON (self->control));
      break;
    case TF_OPTION_CHOICE:
      *(int *)at = (int)gtk_drop_down_get_selected (GTK_DROP_DOWN (self->control));
      break;
    case TF_OPTION_BOOL:
    default:
      *(gboolean *)at = gtk_check_button_get_active (GTK_CHECK_BUTTON (self->control));
      break;
    }
}

/* -- the widget ------------------------------------------------------------------------------ */

static void
dispose (GObject *object)
{
  GtkWidget *child = gtk_widget_get_first_child (GTK_WIDGET (object));
  g_clear_pointer (&child, gtk_widget_unparent);
  G_OBJECT_CLASS (tf_option_row_parent_class)->dispose (object);
}

static void
tf_option_row_class_init (TfOptionRowClass *klass)
{
  G_OBJECT_CLASS (klass)->dispose = dispose;
  gtk_widget_class_set_layout_manager_type (GTK_WIDGET_CLASS (klass), GTK_TYPE_BIN_LAYOUT);
  g_signal_new ("changed", TF_TYPE_OPTION_ROW, G_SIGNAL_RUN_LAST, 0, NULL, NULL, NULL, G_TYPE_NONE,
                0);
}

static void
tf_option_row_init (TfOptionRow *self)
{
}
