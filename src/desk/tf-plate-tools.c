/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Pointer and keys on the plate. Without a tool a drag pans and a click chooses; with the
 * outline tool a drag draws; with the polygon tool each click is a corner. The middle button
 * always pans, the wheel zooms about the pointer, arrow keys pan. */

#include "tf-plate-private.h"

#include <math.h>

enum
{
  CLICK_SLACK = 4,
  CORNER_SLACK = 12, /* a quick hand sets corners while it moves */
  KEY_STEP = 40,
  KEY_POINTER = 8,
  KEY_FINE = 1
};
static const double wheel_factor = 1.18;

static const TfGeometry *
geometry_of (TfPlate *self)
{
  TfFrame *frame = self->session != NULL ? tf_session_get_frame (self->session) : NULL;
  return frame != NULL ? tf_frame_get_geometry (frame) : NULL;
}

static gboolean
measure_tick (GtkWidget *widget, GdkFrameClock *clock, gpointer data)
{
  TfPlate *self = TF_PLATE (widget);
  self->tick = 0;
  tf_session_measure_line (self->session);
  return G_SOURCE_REMOVE;
}

/* However many times the pointer moved, one measure a frame of animation. */
static void
measure_soon (TfPlate *self)
{
  if (self->tick == 0)
    self->tick = gtk_widget_add_tick_callback (GTK_WIDGET (self), measure_tick, NULL, NULL);
  gtk_widget_queue_draw (GTK_WIDGET (self));
}

static void
draw_to (TfPlate *self, double x, double y)
{
  TfPlace place;
  const TfGeometry *geometry = geometry_of (self);
  if (geometry == NULL
      || !tf_view_to_sun (tf_session_get_view (self->session), geometry, x, y, &place))
    return; /* off the Sun: the line goes on where it comes back */
  tf_session_draw_to (self->session, place.carrington_lon_deg, place.lat_deg);
  measure_soon (self);
}

/* -- drag and click -------------------------------------------------------------------------- */

static gboolean
is_drawing (TfPlate *self)
{
  return self->session != NULL && tf_session_get_tool (self->session) == TF_TOOL_OUTLINE;
}

static void
drag_begin (GtkGestureDrag *gesture, double x, double y, TfPlate *self)
{
  gtk_widget_grab_focus (GTK_WIDGET (self));
  self->moved = FALSE;
  self->last_x = x;
  self->last_y = y;
  if (is_drawing (self))
    draw_to (self, x, y);
}

static void
drag_to (TfPlate *self, double x, double y, gboolean pan)
{
  self->pointer_x = x;
  self->pointer_y = y;
  if (!pan)
    draw_to (self, x, y);
  else if (self->moved)
    tf_session_pan (self->session, x - self->last_x, y - self->last_y);
  self->last_x = x;
  self->last_y = y;
}

/* GTK gives one move a frame of animation; a hand is quicker. The moves between are in the
 * event's history, in places of the surface, and belong to the line. */
static void
draw_between (GtkGestureDrag *gesture, double x, double y, TfPlate *self)
{
  GdkEvent *event = gtk_event_controller_get_current_event (GTK_EVENT_CONTROLLER (gesture));
  double at_x, at_y;
  guint n = 0;
  if (event == NULL || !gdk_event_get_position (event, &at_x, &at_y))
    return;
  g_autofree GdkTimeCoord *past = gdk_event_get_history (event, &n);
  for (guint k = 0; past != NULL && k < n; k++)
    if ((past[k].flags & GDK_AXIS_FLAG_X) != 0 && (past[k].flags & GDK_AXIS_FLAG_Y) != 0)
      draw_to (self, past[k].axes[GDK_AXIS_X] - at_x + x, past[k].axes[GDK_AXIS_Y] - at_y + y);
}

static void
drag_update (GtkGestureDrag *gesture, double dx, double dy, TfPlate *self)
{
  double x, y;
  gtk_gesture_drag_get_start_point (gesture, &x, &y);
  gboolean corner = self->session != NULL && tf_session_get_tool (self->session) == TF_TOOL_POLYGON;
  if (!self->moved && hypot (dx, dy) < (corner ? CORNER_SLACK : CLICK_SLACK) && !is_drawing (self))
    return;
  self->moved = TRUE;
  gboolean middle
      = gtk_gesture_single_get_current_button (GTK_GESTURE_SINGLE (gesture)) == GDK_BUTTON_MIDDLE;
  if (!middle && is_drawing (self))
    draw_between (gesture, x + dx, y + dy, self);
  drag_to (self, x + dx, y + dy, middle || !is_drawing (self));
}

static void
click (TfPlate *self, double x, double y)
{
  if (tf_session_get_tool (self->session) == TF_TOOL_POLYGON)
    draw_to (self, x, y);
  else
    tf_session_choose_region (self->session, tf_plate_item_at (self, x, y));
}

static void
drag_end (GtkGestureDrag *gesture, double dx, double dy, TfPlate *self)
{
  double x, y;
  if (self->session == NULL
      || gtk_gesture_single_get_current_button (GTK_GESTURE_SINGLE (gesture)) == GDK_BUTTON_MIDDLE)
    return;
  gtk_gesture_drag_get_start_point (gesture, &x, &y);
  if (is_drawing (self))
    tf_session_finish_line (self->session);
  else if (!self->moved)
    click (self, x + dx, y + dy);
}

/* -- wheel, motion, keys --------------------------------------------------------------------- */

static gboolean
scrolled (GtkEventControllerScroll *scroll, double dx, double dy, TfPlate *self)
{
  if (self->session == NULL)
    return FALSE;
  double x = self->pointer_in ? self->pointer_x : gtk_widget_get_width (GTK_WIDGET (self)) / 2.0;
  double y = self->pointer_in ? self->pointer_y : gtk_widget_get_height (GTK_WIDGET (self)) / 2.0;
  tf_session_zoom (self->session, pow (wheel_factor, -dy), x, y);
  return TRUE;
}

static void
motion (GtkEventControllerMotion *controller, double x, double y, TfPlate *self)
{
  if (self->by_keys && hypot (x - self->mouse_x, y - self->mouse_y) < 1)
    return; /* said again by the toolkit: the mouse itself did not move */
  self->mouse_x = x;
  self->mouse_y = y;
  self->pointer_in = TRUE;
  self->by_keys = FALSE;
  self->pointer_x = x;
  self->pointer_y = y;
  tf_plate_update_readout (self);
  if (self->session != NULL && tf_session_get_tool (self->session) == TF_TOOL_POLYGON)
    gtk_widget_queue_draw (GTK_WIDGET (self));
}

static void
leave (GtkEventControllerMotion *controller, TfPlate *self)
{
  if (self->by_keys)
    return;
  self->pointer_in = FALSE;
  tf_plate_update_readout (self);
  gtk_widget_queue_draw (GTK_WIDGET (self));
}

/* With the polygon tool the arrow keys move the pointer's place and the space bar sets a corner there, so
 * that an outline can be drawn by keyboard alone. */
static void
move_pointer (TfPlate *self, double dx, double dy)
{
  double width = gtk_widget_get_width (GTK_WIDGET (self));
  double height = gtk_widget_get_height (GTK_WIDGET (self));
  if (!self->pointer_in)
    {
      self->pointer_x = width / 2;
      self->pointer_y = height / 2;
    }
  self->pointer_in = self->by_keys = TRUE;
  self->pointer_x = CLAMP (self->pointer_x + dx, 0, width);
  self->pointer_y = CLAMP (self->pointer_y + dy, 0, height);
  tf_plate_update_readout (self);
  gtk_widget_queue_draw (GTK_WIDGET (self));
}

static gboolean
arrow (guint key, double *dx, double *dy)
{
  *dx = key == GDK_KEY_Left ? -1 : key == GDK_KEY_Right ? 1 : 0;
  *dy = key == GDK_KEY_Up ? -1 : key == GDK_KEY_Down ? 1 : 0;
  return key == GDK_KEY_Left || key == GDK_KEY_Right || key == GDK_KEY_Up || key == GDK_KEY_Down;
}

static gboolean
key_pressed (GtkEventControllerKey *controller, guint key, guint code, GdkModifierType state,
             TfPlate *self)
{
  double dx, dy;
  if (self->session == NULL || (state & (GDK_CONTROL_MASK | GDK_ALT_MASK)) != 0)
    return FALSE;
  gboolean polygon = tf_session_get_tool (self->session) == TF_TOOL_POLYGON;
  if (polygon && key == GDK_KEY_space && self->pointer_in)
    draw_to (self, self->pointer_x, self->pointer_y);
  else if (!arrow (key, &dx, &dy))
    return FALSE;
  else if (polygon)
    {
      double step = (state & GDK_SHIFT_MASK) != 0 ? KEY_FINE : KEY_POINTER;
      move_pointer (self, dx * step, dy * step);
    }
  else
    tf_session_pan (self->session, -dx * KEY_STEP, -dy * KEY_STEP);
  return TRUE;
}

static void
add_drag (TfPlate *self, guint button)
{
  GtkGesture *drag = gtk_gesture_drag_new ();
  gtk_gesture_single_set_button (GTK_GESTURE_SINGLE (drag), button);
  g_signal_connect (drag, "drag-begin", G_CALLBACK (drag_begin), self);
  g_signal_connect (drag, "drag-update", G_CALLBACK (drag_update), self);
  g_signal_connect (drag, "drag-end", G_CALLBACK (drag_end), self);
  gtk_widget_add_controller (GTK_WIDGET (self), GTK_EVENT_CONTROLLER (drag));
}

void
tf_plate_add_tools (TfPlate *self)
{
  add_drag (self, GDK_BUTTON_PRIMARY);
  add_drag (self, GDK_BUTTON_MIDDLE);
  GtkEventController *scroll
      = gtk_event_controller_scroll_new (GTK_EVENT_CONTROLLER_SCROLL_VERTICAL);
  g_signal_connect (scroll, "scroll", G_CALLBACK (scrolled), self);
  gtk_widget_add_controller (GTK_WIDGET (self), scroll);
  GtkEventController *pointer = gtk_event_controller_motion_new ();
  g_signal_connect (pointer, "enter", G_CALLBACK (motion), self);
  g_signal_connect (pointer, "motion", G_CALLBACK (motion), self);
  g_signal_connect (pointer, "leave", G_CALLBACK (leave), self);
  gtk_widget_add_controller (GTK_WIDGET (self), pointer);
  GtkEventController *keys = gtk_event_controller_key_new ();
  g_signal_connect (keys, "key-pressed", G_CALLBACK (key_pressed), self);
  gtk_widget_add_controller (GTK_WIDGET (self), keys);
}
