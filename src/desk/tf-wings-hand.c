/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The hand on the wings: time is zoomed and moved along, a stretch or a band is picked, a dot is
 * chosen, a divide is moved; by pointer and by keys. */

#include "tf-wings-view-private.h"

#include <math.h>
#include <adwaita.h>
#include <glib/gi18n-lib.h>

enum
{
  CLICK_SLACK = 4,
  BAND_SLACK = 14 /* a drag along time need not be straight */
};
static const double key_step_deg = 0.5, wheel_factor = 1.25;
static const double shortest_years = 0.01, longest_years = 400;

/* -- zoom, pick, choose ---------------------------------------------------------------------- */

static void
set_span (TfWingsView *self, double from, double to)
{
  if (to - from < shortest_years || to - from > longest_years)
    return;
  self->fitted = self->widened = FALSE;
  self->wings.from_year = from;
  self->wings.to_year = to;
  tf_wings_view_redraw (self);
}

static void
zoom_about (TfWingsView *self, double factor, double year)
{
  set_span (self, year - (year - self->wings.from_year) / factor,
            year + (self->wings.to_year - year) / factor);
}

static void
show_all (TfWingsView *self)
{
  self->fitted = TRUE;
  tf_session_pick (self->session, NAN, NAN); /* comes back by points_changed() */
}

static double
year_at (TfWingsView *self, double x)
{
  TfChartStyle style = tf_wings_view_style (self);
  return tf_wings_year_at (&self->wings, &style, tf_wings_view_area (self), x);
}

static double
lat_at (TfWingsView *self, double y)
{
  TfChartStyle style = tf_wings_view_style (self);
  return tf_wings_lat_at (&self->wings, &style, tf_wings_view_area (self), y);
}

static gboolean
scrolled (GtkEventControllerScroll *scroll, double dx, double dy, TfWingsView *self)
{
  if (self->session == NULL)
    return FALSE;
  zoom_about (self, pow (wheel_factor, -dy), year_at (self, self->pointer_x));
  return TRUE;
}

/* What a drag would take is told by the pointer. */
static void
motion (GtkEventControllerMotion *controller, double x, double y, TfWingsView *self)
{
  TfChartStyle style = tf_wings_view_style (self);
  int cycle, side, handle;
  self->pointer_x = x;
  const char *name = NULL;
  if (self->wings.movable
      && tf_wings_hit_divide (&self->wings, &style, tf_wings_view_area (self), x, y, &cycle, &side, &handle))
    name = handle == TF_WINGS_BEGIN || handle == TF_WINGS_END
                   || (handle != TF_WINGS_BAND && tf_cycle_find (cycle) == NULL)
               ? "move"
               : "ns-resize";
  if (g_strcmp0 (name, self->cursor) == 0)
    return;
  self->cursor = name;
  gtk_widget_set_cursor_from_name (GTK_WIDGET (self), name);
}

/* One that is in hand stays so; a provisional minimum is that of both hemispheres. */
static void
take_divide (TfWingsView *self, int cycle, int side, int handle)
{
  const TfDivideHold *hold = tf_session_get_divide (self->session);
  gboolean same = hold->cycle == cycle && (hold->hemisphere == side || tf_cycle_find (cycle) == NULL);
  if (hold->in_hand && same)
    tf_session_turn_divide (self->session, handle);
  else
    tf_session_choose_divide (self->session, cycle, side, handle);
}

static void
drag_begin (GtkGestureDrag *gesture, double x, double y, TfWingsView *self)
{
  TfChartStyle style = tf_wings_view_style (self);
  int cycle, side, handle;
  gtk_widget_grab_focus (GTK_WIDGET (self));
  self->drag_from = year_at (self, x);
  self->drag_lat = lat_at (self, y);
  self->moves_divide = self->session != NULL
                       && tf_wings_hit_divide (&self->wings, &style, tf_wings_view_area (self), x, y, &cycle,
                                               &side, &handle);
  if (!self->moves_divide)
    return;
  take_divide (self, cycle, side, handle);
  double line = tf_divides_latitude (self->divides, cycle, side, tf_time_from_year (self->drag_from));
  gboolean below = handle == TF_WINGS_BAND && side * self->drag_lat < line;
  self->way = WAY_OPEN;
  self->divide_side = below ? -side : side;
}

static void
move_divide (TfWingsView *self, double y)
{
  double lat = lat_at (self, y);
  tf_session_move_divide (self->session, self->divide_side * (lat - self->drag_lat));
  self->drag_lat = lat;
}

/* By whole months; what is left of a month waits for the next. */
static void
shift_divide (TfWingsView *self, double x)
{
  int months = (int)trunc ((year_at (self, x) - self->drag_from) * 12);
  tf_session_shift_divide (self->session, months);
  self->drag_from += months / 12.0;
}

/* The first steps say whether an end goes in time or in latitude: one at a time. */
static void
drag_divide (TfWingsView *self, double x, double y, double dx, double dy)
{
  gboolean across = fabs (dx) > fabs (dy) && tf_session_can_shift_divide (self->session);
  if (self->way == WAY_OPEN && (across ? fabs (dx) : fabs (dy)) >= CLICK_SLACK)
    self->way = across ? IN_TIME : IN_LATITUDE;
  if (self->way == IN_TIME)
    shift_divide (self, x + dx);
  else if (self->way == IN_LATITUDE)
    move_divide (self, y + dy);
}

static void
drag_update (GtkGestureDrag *gesture, double dx, double dy, TfWingsView *self)
{
  double x, y;
  gtk_gesture_drag_get_start_point (gesture, &x, &y);
  if (self->moves_divide)
    {
      drag_divide (self, x, y, dx, dy);
      return;
    }
  if (fabs (dx) < CLICK_SLACK)
    return;
  gboolean band = fabs (dy) >= BAND_SLACK;
  double lat = lat_at (self, y + dy);
  self->wings.picking = TRUE;
  self->wings.pick_from = fmin (self->drag_from, year_at (self, x + dx));
  self->wings.pick_to = fmax (self->drag_from, year_at (self, x + dx));
  self->wings.pick_low = band ? fmin (self->drag_lat, lat) : NAN;
  self->wings.pick_high = band ? fmax (self->drag_lat, lat) : NAN;
  tf_wings_view_redraw_over (self);
}

static void
click (TfWingsView *self, double x, double y)
{
  TfChartStyle style = tf_wings_view_style (self);
  int hit = tf_wings_hit (&self->wings, &style, tf_wings_view_area (self), x, y);
  if (hit < 0)
    return;
  tf_session_choose_dot (self->session, self->wings.dots[hit].id);
  gtk_widget_activate_action (GTK_WIDGET (self), "win.bench", "s", "mark");
}

static void
drag_end (GtkGestureDrag *gesture, double dx, double dy, TfWingsView *self)
{
  double x, y;
  if (self->session == NULL || isnan (self->drag_from))
    return;
  gtk_gesture_drag_get_start_point (gesture, &x, &y);
  self->wings.picking = self->band.on = FALSE;
  if (self->moves_divide)
    gtk_widget_activate_action (GTK_WIDGET (self), "win.keep-divide", NULL);
  else if (fabs (dx) < CLICK_SLACK)
    click (self, x, y);
  else
    tf_session_pick_band (self->session, self->wings.pick_from, self->wings.pick_to,
                          self->wings.pick_low, self->wings.pick_high);
  self->drag_from = NAN;
  self->moves_divide = FALSE;
}

static void
pressed (GtkGestureClick *gesture, int n, double x, double y, TfWingsView *self)
{
  if (n == 2 && self->session != NULL)
    show_all (self);
}

/* Keys of the divides, on the Laws bench. */
static gboolean
divide_key (TfWingsView *self, guint key)
{
  GtkWidget *widget = GTK_WIDGET (self);
  gboolean chosen = self->wings.hold_cycle != 0,
           in_time = tf_session_can_shift_divide (self->session);
  switch (key)
    {
    case GDK_KEY_d:
      tf_session_step_divide (self->session, 1, self->wings.from_year, self->wings.to_year);
      return TRUE;
    case GDK_KEY_D:
      tf_session_step_divide (self->session, -1, self->wings.from_year, self->wings.to_year);
      return TRUE;
    case GDK_KEY_h:
      return chosen && gtk_widget_activate_action (widget, "win.next-handle", NULL);
    case GDK_KEY_Up:
      return chosen
             && gtk_widget_activate_action (widget, "win.move-divide", "d",
                                            self->wings.hold_side * key_step_deg);
    case GDK_KEY_Down:
      return chosen
             && gtk_widget_activate_action (widget, "win.move-divide", "d",
                                            -self->wings.hold_side * key_step_deg);
    case GDK_KEY_Left:
      return in_time && gtk_widget_activate_action (widget, "win.shift-divide", "i", -1);
    case GDK_KEY_Right:
      return in_time && gtk_widget_activate_action (widget, "win.shift-divide", "i", 1);
    case GDK_KEY_m:
      return gtk_widget_activate_action (widget, "win.next-minimum", NULL);
    case GDK_KEY_Return:
    case GDK_KEY_KP_Enter:
      return chosen && gtk_widget_activate_action (widget, "win.keep-divide", NULL);
    case GDK_KEY_Escape:
      return chosen && gtk_widget_activate_action (widget, "win.put-back-divide", NULL);
    case GDK_KEY_BackSpace:
    case GDK_KEY_Delete:
      return chosen && gtk_widget_activate_action (widget, "win.compute-divide", NULL);
    default:
      return FALSE;
    }
}

/* A stretch and a band of its own, by keys; everything follows when it is taken. */
static gboolean
band_key (TfWingsView *self, guint key, gboolean shift)
{
  TfBandHand *band = &self->band;
  TfBandStep step = tf_band_hand_key (band, &self->wings, key, shift);
  if (step == TF_BAND_NOT_HEARD)
    return FALSE;
  self->wings.picking = band->on;
  self->wings.pick_from = band->from;
  self->wings.pick_to = band->to;
  self->wings.pick_low = band->low;
  self->wings.pick_high = band->high;
  if (step == TF_BAND_TAKEN)
    gtk_widget_activate_action (GTK_WIDGET (self), "win.pick", "(dddd)", band->from, band->to, band->low,
                                band->high);
  else if (step == TF_BAND_LEFT)
    tf_wings_view_show_stretch (self);
  tf_wings_view_redraw_over (self);
  return TRUE;
}

static gboolean
stretch_key (TfWingsView *self, guint key)
{
  static const struct
  {
    guint key;
    const char *name;
  } keys[] = { { GDK_KEY_t, "today" },    { GDK_KEY_3, "days" },  { GDK_KEY_p, "passage" },
               { GDK_KEY_r, "rotation" }, { GDK_KEY_c, "cycle" }, { GDK_KEY_a, "all" } };
  for (guint k = 0; k < G_N_ELEMENTS (keys); k++)
    if (keys[k].key == key)
      return gtk_widget_activate_action (GTK_WIDGET (self), "win.stretch", "s", keys[k].name);
  return FALSE;
}

static gboolean
time_key (TfWingsView *self, guint key)
{
  double span = self->wings.to_year - self->wings.from_year,
         middle = (self->wings.to_year + self->wings.from_year) / 2;
  switch (key)
    {
    case GDK_KEY_Left:
      set_span (self, self->wings.from_year - span / 8, self->wings.to_year - span / 8);
      return TRUE;
    case GDK_KEY_Right:
      set_span (self, self->wings.from_year + span / 8, self->wings.to_year + span / 8);
      return TRUE;
    case GDK_KEY_plus:
    case GDK_KEY_KP_Add:
      zoom_about (self, wheel_factor, middle);
      return TRUE;
    case GDK_KEY_minus:
    case GDK_KEY_KP_Subtract:
      zoom_about (self, 1 / wheel_factor, middle);
      return TRUE;
    case GDK_KEY_Home:
      show_all (self);
      return TRUE;
    default:
      return FALSE;
    }
}

static gboolean
key_pressed (GtkEventControllerKey *controller, guint key, guint code, GdkModifierType state,
             TfWingsView *self)
{
  if (self->session == NULL || (state & (GDK_CONTROL_MASK | GDK_ALT_MASK)) != 0)
    return FALSE;
  gboolean shift = (state & GDK_SHIFT_MASK) != 0;
  if (band_key (self, key, shift))
    return TRUE;
  /* with Shift the arrows go along time, whatever is chosen */
  gboolean along = shift && (key == GDK_KEY_Left || key == GDK_KEY_Right);
  return (self->wings.movable && !along && divide_key (self, key)) || stretch_key (self, key)
         || time_key (self, key);
}

void
tf_wings_view_add_hand (TfWingsView *self)
{
  GtkWidget *widget = GTK_WIDGET (self);
  GtkGesture *click_gesture = gtk_gesture_click_new ();
  g_signal_connect (click_gesture, "pressed", G_CALLBACK (pressed), self);
  gtk_widget_add_controller (widget, GTK_EVENT_CONTROLLER (click_gesture));
  GtkGesture *drag = gtk_gesture_drag_new ();
  g_signal_connect (drag, "drag-begin", G_CALLBACK (drag_begin), self);
  g_signal_connect (drag, "drag-update", G_CALLBACK (drag_update), self);
  g_signal_connect (drag, "drag-end", G_CALLBACK (drag_end), self);
  gtk_widget_add_controller (widget, GTK_EVENT_CONTROLLER (drag));
  GtkEventController *scroll
      = gtk_event_controller_scroll_new (GTK_EVENT_CONTROLLER_SCROLL_VERTICAL);
  g_signal_connect (scroll, "scroll", G_CALLBACK (scrolled), self);
  gtk_widget_add_controller (widget, scroll);
  GtkEventController *pointer = gtk_event_controller_motion_new ();
  g_signal_connect (pointer, "motion", G_CALLBACK (motion), self);
  gtk_widget_add_controller (widget, pointer);
  GtkEventController *keys = gtk_event_controller_key_new ();
  g_signal_connect (keys, "key-pressed", G_CALLBACK (key_pressed), self);
  gtk_widget_add_controller (widget, keys);
}
