/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Pointer and keys on the plate. Without a tool a drag pans and a click chooses (with Ctrl or Shift:
 * too); with a tool that draws a drag draws, and with one that sets corners each click is one. The
 * middle button always pans, the wheel zooms about the pointer, arrow keys pan or move the cross. */

#include "tf-plate-private.h"

#include <math.h>

enum
{
  CLICK_SLACK = 4,
  CORNER_SLACK = 12, /* a quick hand sets corners while it moves */
  KEY_STEP = 40,
  KEY_POINTER = 8,
  KEY_FINE = 1,
  HOLD_US = 350000 /* a key held longer is no tap */
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

static TfTool
tool_of (TfPlate *self)
{
  return self->session != NULL ? tf_session_get_tool (self->session) : TF_TOOL_NONE;
}

/* A drag draws. */
static gboolean
is_drawing (TfPlate *self)
{
  TfTool tool = tool_of (self);
  return tool == TF_TOOL_OUTLINE || tool == TF_TOOL_LEAVE_OUT || tool == TF_TOOL_SPLIT;
}

static gboolean
is_brushing (TfPlate *self)
{
  TfTool tool = tool_of (self);
  return tool == TF_TOOL_BRUSH_IN || tool == TF_TOOL_BRUSH_OUT;
}

static void
brush_begin (TfPlate *self, double x, double y)
{
  TfVertex at;
  self->held_used = TRUE;
  if (tf_plate_to_sun (self, x, y, &at))
    tf_session_brush_begin (self->session, at.lon_deg, at.lat_deg);
  measure_soon (self);
}

static void
brush_to (TfPlate *self, double x, double y)
{
  TfVertex at;
  if (tf_plate_to_sun (self, x, y, &at))
    tf_session_brush_to (self->session, at.lon_deg, at.lat_deg);
  measure_soon (self);
}

static void
move_corner (TfPlate *self, double x, double y, gboolean done)
{
  TfVertex at;
  if (tf_plate_to_sun (self, x, y, &at))
    tf_session_move_corner (self->session, self->corner, at, tf_plate_handles_apart (self), done);
  measure_soon (self);
}

static gboolean
is_middle (GtkGestureDrag *gesture)
{
  return gtk_gesture_single_get_current_button (GTK_GESTURE_SINGLE (gesture)) == GDK_BUTTON_MIDDLE;
}

static void
drag_begin (GtkGestureDrag *gesture, double x, double y, TfPlate *self)
{
  gtk_widget_grab_focus (GTK_WIDGET (self));
  self->moved = self->holds_corner = FALSE;
  self->last_x = x;
  self->last_y = y;
  if (self->session == NULL || is_middle (gesture))
    return;
  if (is_drawing (self) && tool_of (self) != TF_TOOL_SPLIT)
    draw_to (self, x, y);
  else if (is_brushing (self))
    brush_begin (self, x, y);
  else if (tool_of (self) == TF_TOOL_CORNERS)
    self->has_corner = self->holds_corner = tf_plate_corner_at (self, x, y, &self->corner);
}

/* What the hand does at one place of its way. */
static void
hand_to (TfPlate *self, double x, double y)
{
  if (is_brushing (self))
    brush_to (self, x, y);
  else if (self->holds_corner)
    move_corner (self, x, y, FALSE);
  else if (is_drawing (self))
    draw_to (self, x, y);
}

/* GTK gives one move a frame of animation; a hand is quicker. The moves between are in the
 * event's history, in places of the surface, and belong to the line. */
static void
hand_between (GtkGestureDrag *gesture, double x, double y, TfPlate *self)
{
  GdkEvent *event = gtk_event_controller_get_current_event (GTK_EVENT_CONTROLLER (gesture));
  double at_x, at_y;
  guint n = 0;
  if (event == NULL || !gdk_event_get_position (event, &at_x, &at_y))
    return;
  g_autofree GdkTimeCoord *past = gdk_event_get_history (event, &n);
  for (guint k = 0; past != NULL && k < n; k++)
    if ((past[k].flags & GDK_AXIS_FLAG_X) != 0 && (past[k].flags & GDK_AXIS_FLAG_Y) != 0)
      hand_to (self, past[k].axes[GDK_AXIS_X] - at_x + x, past[k].axes[GDK_AXIS_Y] - at_y + y);
}

static void
drag_update (GtkGestureDrag *gesture, double dx, double dy, TfPlate *self)
{
  double x, y;
  gtk_gesture_drag_get_start_point (gesture, &x, &y);
  TfTool tool = tool_of (self);
  gboolean clicks = tool == TF_TOOL_POLYGON || tool == TF_TOOL_LEAVE_OUT || tool == TF_TOOL_SPLIT;
  gboolean at_once = tool == TF_TOOL_OUTLINE || is_brushing (self);
  if (!self->moved && hypot (dx, dy) < (clicks ? CORNER_SLACK : CLICK_SLACK) && !at_once)
    return;
  if (!self->moved && tool == TF_TOOL_SPLIT && !is_middle (gesture))
    draw_to (self, x, y);
  self->moved = TRUE;
  gboolean hand = !is_middle (gesture) && (is_drawing (self) || is_brushing (self) || self->holds_corner);
  self->pointer_x = x + dx;
  self->pointer_y = y + dy;
  if (hand && tool != TF_TOOL_SPLIT && !self->holds_corner)
    hand_between (gesture, x + dx, y + dy, self);
  if (hand)
    hand_to (self, x + dx, y + dy);
  else
    tf_session_pan (self->session, x + dx - self->last_x, y + dy - self->last_y);
  self->last_x = x + dx;
  self->last_y = y + dy;
}

static void
split_to (TfPlate *self, double x, double y)
{
  const TfVertex *line;
  guint n;
  draw_to (self, x, y);
  tf_session_get_line (self->session, &line, &n);
  if (n > 1)
    tf_session_finish_line (self->session);
}

static void
pin_at (TfPlate *self, double x, double y)
{
  TfVertex at;
  if (tf_plate_to_sun (self, x, y, &at))
    gtk_widget_activate_action (GTK_WIDGET (self), "win.pin-here", "(dd)", at.lon_deg, at.lat_deg);
}

/* On an edge a corner is put in; on a corner it is chosen. */
static void
corner_click (TfPlate *self, double x, double y)
{
  TfVertex at;
  if (tf_plate_corner_at (self, x, y, &self->corner))
    self->has_corner = TRUE;
  else if (tf_plate_to_sun (self, x, y, &at))
    self->has_corner = tf_session_insert_corner (self->session, at, tf_plate_hit_degrees (self),
                                                 &self->corner);
  gtk_widget_queue_draw (GTK_WIDGET (self));
}

static void
click (TfPlate *self, double x, double y, gboolean more)
{
  switch (tool_of (self))
    {
    case TF_TOOL_POLYGON:
      draw_to (self, x, y);
      break;
    case TF_TOOL_SPLIT:
      split_to (self, x, y);
      break;
    case TF_TOOL_PIN:
      pin_at (self, x, y);
      break;
    case TF_TOOL_CORNERS:
      corner_click (self, x, y);
      break;
    case TF_TOOL_LEAVE_OUT: /* the press has set a corner */
      break;
    case TF_TOOL_NONE:
    case TF_TOOL_OUTLINE:
    case TF_TOOL_BRUSH_IN:
    case TF_TOOL_BRUSH_OUT:
    case TF_TOOL_JOIN:
    default:
      if (more)
        tf_session_toggle_region (self->session, tf_plate_item_at (self, x, y));
      else
        tf_session_choose_region (self->session, tf_plate_item_at (self, x, y));
    }
}

static void
drag_end (GtkGestureDrag *gesture, double dx, double dy, TfPlate *self)
{
  double x, y;
  if (self->session == NULL || is_middle (gesture))
    return;
  GdkModifierType state
      = gtk_event_controller_get_current_event_state (GTK_EVENT_CONTROLLER (gesture));
  gtk_gesture_drag_get_start_point (gesture, &x, &y);
  if (is_brushing (self))
    tf_session_brush_end (self->session);
  else if (self->holds_corner && self->moved)
    move_corner (self, x + dx, y + dy, TRUE);
  else if (tool_of (self) == TF_TOOL_OUTLINE || (is_drawing (self) && self->moved))
    tf_session_finish_line (self->session);
  else if (!self->moved)
    click (self, x + dx, y + dy, (state & (GDK_CONTROL_MASK | GDK_SHIFT_MASK)) != 0);
  self->holds_corner = FALSE;
}

/* -- wheel, motion, keys --------------------------------------------------------------------- */

static gboolean
scrolled (GtkEventControllerScroll *scroll, double dx, double dy, TfPlate *self)
{
  if (self->session == NULL)
    return FALSE;
  GdkModifierType state
      = gtk_event_controller_get_current_event_state (GTK_EVENT_CONTROLLER (scroll));
  if (is_brushing (self) && (state & GDK_CONTROL_MASK) != 0)
    {
      tf_session_set_brush (self->session, tf_session_get_brush (self->session) * pow (wheel_factor, -dy));
      return TRUE;
    }
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
  if (tool_of (self) != TF_TOOL_NONE)
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

/* With most tools the arrow keys move the pointer's place and the space bar does there what a click
 * does, so that all can be done by keyboard alone. */
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

/* Which brush a key is; TF_TOOL_NONE: none. */
static TfTool
brush_of (guint key)
{
  switch (key)
    {
    case GDK_KEY_plus:
    case GDK_KEY_equal:
    case GDK_KEY_KP_Add:
      return TF_TOOL_BRUSH_IN;
    case GDK_KEY_minus:
    case GDK_KEY_KP_Subtract:
      return TF_TOOL_BRUSH_OUT;
    default:
      return TF_TOOL_NONE;
    }
}

/* Held, the brush is in hand as long as the key; tapped, until the next tap. */
static void
hold_brush (TfPlate *self, guint key)
{
  if (self->held_key == key)
    return; /* the keyboard repeats it */
  self->held_key = key;
  self->held_since = g_get_monotonic_time ();
  self->held_used = FALSE;
  self->held_again = tool_of (self) == brush_of (key);
  tf_session_set_tool (self->session, brush_of (key));
}

static void
key_released (GtkEventControllerKey *controller, guint key, guint code, GdkModifierType state,
              TfPlate *self)
{
  if (self->session == NULL || self->held_key == 0 || brush_of (key) != brush_of (self->held_key))
    return;
  gboolean long_held = g_get_monotonic_time () - self->held_since > HOLD_US;
  self->held_key = 0;
  if ((self->held_used || self->held_again || long_held) && is_brushing (self))
    tf_session_set_tool (self->session, TF_TOOL_NONE);
}

/* The space bar does at the cross what a click does at the pointer. */
static void
press_space (TfPlate *self)
{
  if (is_brushing (self))
    {
      brush_begin (self, self->pointer_x, self->pointer_y);
      tf_session_brush_end (self->session);
    }
  else if (tool_of (self) == TF_TOOL_LEAVE_OUT)
    draw_to (self, self->pointer_x, self->pointer_y);
  else
    click (self, self->pointer_x, self->pointer_y, FALSE);
}

static void
nudge_corner (TfPlate *self, double dx, double dy)
{
  double x, y;
  TfVertex corner = tf_session_get_corner (self->session, self->corner);
  if (isfinite (corner.lat_deg)
      && tf_view_from_sun (tf_session_get_view (self->session), geometry_of (self), corner.lon_deg,
                           corner.lat_deg, &x, &y))
    move_corner (self, x + dx, y + dy, TRUE);
}

/* Of the corner tool alone. */
static gboolean
corner_key (TfPlate *self, guint key)
{
  if (key == GDK_KEY_period || key == GDK_KEY_comma)
    tf_plate_step_corner (self, key == GDK_KEY_period ? 1 : -1);
  else if ((key == GDK_KEY_Delete || key == GDK_KEY_BackSpace) && self->has_corner)
    {
      if (tf_session_remove_corner (self->session, self->corner))
        self->has_corner = FALSE;
    }
  else
    return FALSE;
  return TRUE;
}

static gboolean
arrow_key (TfPlate *self, guint key, GdkModifierType state)
{
  double dx, dy;
  TfTool tool = tool_of (self);
  if (!arrow (key, &dx, &dy))
    return FALSE;
  double step = (state & GDK_SHIFT_MASK) != 0 ? KEY_FINE : KEY_POINTER;
  if (tool == TF_TOOL_CORNERS && self->has_corner)
    nudge_corner (self, dx * step / 2, dy * step / 2);
  else if (tool == TF_TOOL_NONE || tool == TF_TOOL_OUTLINE || tool == TF_TOOL_JOIN)
    tf_session_pan (self->session, -dx * KEY_STEP, -dy * KEY_STEP);
  else
    move_pointer (self, dx * step, dy * step);
  return TRUE;
}

static gboolean
key_pressed (GtkEventControllerKey *controller, guint key, guint code, GdkModifierType state,
             TfPlate *self)
{
  if (self->session == NULL || (state & (GDK_CONTROL_MASK | GDK_ALT_MASK)) != 0
      || tf_session_get_frame (self->session) == NULL)
    return FALSE;
  TfTool tool = tool_of (self);
  if (key == GDK_KEY_Escape) /* here, before a message in sight takes it for itself */
    return gtk_widget_activate_action (GTK_WIDGET (self), "win.cancel-drawing", NULL);
  if (brush_of (key) != TF_TOOL_NONE)
    hold_brush (self, key);
  else if (tool != TF_TOOL_NONE && tool != TF_TOOL_OUTLINE && key == GDK_KEY_space
           && self->pointer_in)
    press_space (self);
  else if (tool != TF_TOOL_CORNERS || !corner_key (self, key))
    return arrow_key (self, key, state);
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
  g_signal_connect (keys, "key-released", G_CALLBACK (key_released), self);
  gtk_widget_add_controller (GTK_WIDGET (self), keys);
}
