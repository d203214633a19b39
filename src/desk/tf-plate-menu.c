/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The menu under the right button, or the menu key: what can be done at a point of the plate. While
 * it is open the pointer counts as where it was opened. */

#include "tf-plate-private.h"

#include <glib/gi18n-lib.h>

static void
add (GMenu *menu, const char *label, const char *action)
{
  g_menu_append (menu, label, action);
}

static GMenuModel *
menu_new (void)
{
  GMenu *menu = g_menu_new ();
  g_autoptr (GMenu) drawing = g_menu_new (), position = g_menu_new (), looks = g_menu_new ();
  add (drawing, _ ("_Finish the line (Return)"), "win.finish-drawing");
  add (position, _ ("_Copy the position"), "win.copy-position");
  add (position, _ ("_Save the picture…"), "win.save-picture");
  add (looks, _ ("As _observed"), "win.look::disk");
  add (looks, _ ("_Unrolled"), "win.look::unrolled");
  add (looks, _ ("C_lose"), "win.look::close");
  add (looks, _ ("Close look, and _back (V)"), "win.close-look");
  add (looks, _ ("Show the _whole Sun"), "win.fit");
  add (looks, _ ("Zoom _in"), "win.zoom-in");
  add (looks, _ ("_Zoom out"), "win.zoom-out");
  g_menu_append_section (menu, NULL, G_MENU_MODEL (drawing));
  g_menu_append_section (menu, NULL, G_MENU_MODEL (position));
  g_menu_append_section (menu, NULL, G_MENU_MODEL (looks));
  return G_MENU_MODEL (menu);
}

/* After the action, which runs in an idle of its own, the pointer is where it is again. */
static gboolean
menu_closed_idle (gpointer data)
{
  TfPlate *self = data;
  self->menu_open = FALSE;
  tf_plate_update_readout (self);
  return G_SOURCE_REMOVE;
}

static void
menu_closed (GtkPopover *menu, TfPlate *self)
{
  g_idle_add_full (G_PRIORITY_LOW, menu_closed_idle, g_object_ref (self), g_object_unref);
}

static void
open_menu (TfPlate *self, double x, double y)
{
  if (self->session == NULL || tf_session_get_frame (self->session) == NULL)
    return;
  if (self->menu == NULL)
    {
      g_autoptr (GMenuModel) model = menu_new ();
      self->menu = gtk_popover_menu_new_from_model (model);
      gtk_widget_set_parent (self->menu, GTK_WIDGET (self));
      gtk_popover_set_has_arrow (GTK_POPOVER (self->menu), FALSE);
      gtk_widget_set_halign (self->menu, GTK_ALIGN_START);
      g_signal_connect (self->menu, "closed", G_CALLBACK (menu_closed), self);
    }
  tf_session_set_pointer (self->session, TRUE, x, y);
  self->menu_open = TRUE;
  GdkRectangle at = { (int)x, (int)y, 1, 1 };
  gtk_popover_set_pointing_to (GTK_POPOVER (self->menu), &at);
  gtk_popover_popup (GTK_POPOVER (self->menu));
}

static void
pressed (GtkGestureClick *gesture, int n, double x, double y, TfPlate *self)
{
  open_menu (self, x, y);
}

static gboolean
by_key (GtkWidget *widget, GVariant *arguments, gpointer data)
{
  TfPlate *self = TF_PLATE (widget);
  double x = gtk_widget_get_width (widget) / 2.0, y = gtk_widget_get_height (widget) / 2.0;
  open_menu (self, self->pointer_in ? self->pointer_x : x, self->pointer_in ? self->pointer_y : y);
  return TRUE;
}

void
tf_plate_class_add_menu (GtkWidgetClass *klass)
{
  gtk_widget_class_add_binding (klass, GDK_KEY_F10, GDK_SHIFT_MASK, by_key, NULL);
  gtk_widget_class_add_binding (klass, GDK_KEY_Menu, 0, by_key, NULL);
}

void
tf_plate_add_menu (TfPlate *self)
{
  GtkGesture *press = gtk_gesture_click_new ();
  gtk_gesture_single_set_button (GTK_GESTURE_SINGLE (press), GDK_BUTTON_SECONDARY);
  g_signal_connect (press, "pressed", G_CALLBACK (pressed), self);
  gtk_widget_add_controller (GTK_WIDGET (self), GTK_EVENT_CONTROLLER (press));
}

void
tf_plate_place_menu (TfPlate *self)
{
  if (self->menu != NULL)
    gtk_popover_present (GTK_POPOVER (self->menu));
}
