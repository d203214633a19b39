/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-wings-view.h"

#include <math.h>
#include <adwaita.h>
#include <glib/gi18n-lib.h>

#include "tf-widget-style.h"
#include "tf-wings.h"

struct _TfWingsView
{
  GtkWidget parent;
  TfSession *session;
  TfWings wings;
  gboolean fitted;
  cairo_surface_t *surface; /* what was drawn last */
  gboolean stale;
  double pointer_x;
  double drag_from; /* year; NaN: no drag in hand */
};

G_DEFINE_FINAL_TYPE (TfWingsView, tf_wings_view, GTK_TYPE_WIDGET)

enum
{
  HEIGHT = 132,
  CLICK_SLACK = 4
};
static const double label_share = 0.78, lat_max_deg = 45, wheel_factor = 1.25;
static const double shortest_years = 0.01, longest_years = 400;

static TfArea
area_of (TfWingsView *self)
{
  return (TfArea){ 0, 0, gtk_widget_get_width (GTK_WIDGET (self)),
                   gtk_widget_get_height (GTK_WIDGET (self)) };
}

static TfChartStyle
style_of (TfWingsView *self)
{
  return tf_widget_chart_style (GTK_WIDGET (self), label_share);
}

static void
redraw (TfWingsView *self)
{
  self->stale = TRUE;
  tf_widget_describe (GTK_WIDGET (self), tf_wings_dup_description (&self->wings));
  gtk_widget_queue_draw (GTK_WIDGET (self));
}

/* -- following the session ------------------------------------------------------------------- */

static double
frame_year (TfWingsView *self)
{
  TfFrameItem *item = tf_session_get_frame_item (self->session);
  return item != NULL ? tf_time_year (tf_frame_item_get_row (item)->info->time) : NAN;
}

static double
this_year (void)
{
  g_autoptr (GDateTime) now = g_date_time_new_now_utc ();
  return g_date_time_get_year (now) + g_date_time_get_day_of_year (now) / 365.25;
}

static void
points_changed (TfWingsView *self)
{
  GArray *dots = tf_session_get_dots (self->session, NULL);
  self->wings.dots = (const TfWingsDot *)(gconstpointer)dots->data;
  self->wings.n = dots->len;
  self->wings.divides = tf_session_get_divides (self->session);
  self->wings.frame_year = frame_year (self);
  self->wings.chosen = tf_session_get_chosen_dot (self->session);
  tf_session_get_pick (self->session, &self->wings.pick_from, &self->wings.pick_to);
  if (self->fitted)
    tf_wings_fit (&self->wings,
                  isfinite (self->wings.frame_year) ? self->wings.frame_year : this_year ());
  redraw (self);
}

static void
place_changed (TfWingsView *self)
{
  double year = frame_year (self);
  gint64 chosen = tf_session_get_chosen_dot (self->session);
  gboolean same_year = year >= self->wings.frame_year && year <= self->wings.frame_year;
  if ((same_year || (isnan (year) && isnan (self->wings.frame_year)))
      && chosen == self->wings.chosen)
    return;
  self->wings.frame_year = year;
  self->wings.chosen = chosen;
  if (self->fitted && self->wings.n == 0)
    tf_wings_fit (&self->wings, isfinite (year) ? year : this_year ());
  redraw (self);
}

void
tf_wings_view_set_session (TfWingsView *self, TfSession *session)
{
  g_return_if_fail (TF_IS_WINGS_VIEW (self) && TF_IS_SESSION (session) && self->session == NULL);
  self->session = g_object_ref (session);
  g_signal_connect_object (session, "points-changed", G_CALLBACK (points_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "frame-changed", G_CALLBACK (place_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "choice-changed", G_CALLBACK (place_changed), self,
                           G_CONNECT_SWAPPED);
  points_changed (self);
}

/* -- zoom, pick, choose ---------------------------------------------------------------------- */

static void
set_span (TfWingsView *self, double from, double to)
{
  if (to - from < shortest_years || to - from > longest_years)
    return;
  self->fitted = FALSE;
  self->wings.from_year = from;
  self->wings.to_year = to;
  redraw (self);
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
  TfChartStyle style = style_of (self);
  return tf_wings_year_at (&self->wings, &style, area_of (self), x);
}

static gboolean
scrolled (GtkEventControllerScroll *scroll, double dx, double dy, TfWingsView *self)
{
  if (self->session == NULL)
    return FALSE;
  zoom_about (self, pow (wheel_factor, -dy), year_at (self, self->pointer_x));
  return TRUE;
}

static void
motion (GtkEventControllerMotion *controller, double x, double y, TfWingsView *self)
{
  self->pointer_x = x;
}

static void
drag_begin (GtkGestureDrag *gesture, double x, double y, TfWingsView *self)
{
  gtk_widget_grab_focus (GTK_WIDGET (self));
  self->drag_from = year_at (self, x);
}

static void
drag_update (GtkGestureDrag *gesture, double dx, double dy, TfWingsView *self)
{
  double x, y;
  if (fabs (dx) < CLICK_SLACK)
    return;
  gtk_gesture_drag_get_start_point (gesture, &x, &y);
  self->wings.pick_from = fmin (self->drag_from, year_at (self, x + dx));
  self->wings.pick_to = fmax (self->drag_from, year_at (self, x + dx));
  redraw (self);
}

static void
click (TfWingsView *self, double x, double y)
{
  TfChartStyle style = style_of (self);
  int hit = tf_wings_hit (&self->wings, &style, area_of (self), x, y);
  if (hit >= 0)
    tf_session_choose_dot (self->session, self->wings.dots[hit].id);
}

static void
drag_end (GtkGestureDrag *gesture, double dx, double dy, TfWingsView *self)
{
  double x, y;
  if (self->session == NULL || isnan (self->drag_from))
    return;
  gtk_gesture_drag_get_start_point (gesture, &x, &y);
  if (fabs (dx) < CLICK_SLACK)
    click (self, x, y);
  else
    tf_session_pick (self->session, self->drag_from, year_at (self, x + dx));
  self->drag_from = NAN;
}

static void
pressed (GtkGestureClick *gesture, int n, double x, double y, TfWingsView *self)
{
  if (n == 2 && self->session != NULL)
    show_all (self);
}

static gboolean
key_pressed (GtkEventControllerKey *controller, guint key, guint code, GdkModifierType state,
             TfWingsView *self)
{
  double span = self->wings.to_year - self->wings.from_year,
         middle = (self->wings.to_year + self->wings.from_year) / 2;
  if (self->session == NULL || (state & (GDK_CONTROL_MASK | GDK_ALT_MASK)) != 0)
    return FALSE;
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

/* -- the widget ------------------------------------------------------------------------------ */

static void
draw (TfWingsView *self, int width, int height, int scale)
{
  TfChartStyle style = style_of (self);
  g_clear_pointer (&self->surface, cairo_surface_destroy);
  self->surface = cairo_image_surface_create (CAIRO_FORMAT_ARGB32, width * scale, height * scale);
  cairo_t *cr = cairo_create (self->surface);
  cairo_scale (cr, scale, scale);
  tf_wings_draw (cr, &self->wings, &style, (TfArea){ 0, 0, width, height });
  cairo_destroy (cr);
  self->stale = FALSE;
}

static void
snapshot (GtkWidget *widget, GtkSnapshot *snapshot)
{
  TfWingsView *self = TF_WINGS_VIEW (widget);
  int width = gtk_widget_get_width (widget), height = gtk_widget_get_height (widget);
  int scale = gtk_widget_get_scale_factor (widget);
  if (width < 1 || height < 1)
    return;
  if (self->surface == NULL || self->stale)
    draw (self, width, height, scale);
  tf_surface_append (snapshot, widget, self->surface, 0, 0, scale);
}

static void
measure (GtkWidget *widget, GtkOrientation orientation, int for_size, int *minimum, int *natural,
         int *minimum_baseline, int *natural_baseline)
{
  double text = tf_widget_text_size (widget) / 14.0;
  *minimum
      = orientation == GTK_ORIENTATION_VERTICAL ? (int)(HEIGHT * fmax (1, 0.6 + 0.4 * text)) : 200;
  *natural = *minimum;
}

static void
size_allocate (GtkWidget *widget, int width, int height, int baseline)
{
  TF_WINGS_VIEW (widget)->stale = TRUE;
}

static void
style_changed (TfWingsView *self)
{
  redraw (self);
}

static void
dispose (GObject *object)
{
  TfWingsView *self = TF_WINGS_VIEW (object);
  g_clear_pointer (&self->surface, cairo_surface_destroy);
  g_clear_object (&self->session);
  G_OBJECT_CLASS (tf_wings_view_parent_class)->dispose (object);
}

static void
tf_wings_view_class_init (TfWingsViewClass *klass)
{
  GtkWidgetClass *widget = GTK_WIDGET_CLASS (klass);
  G_OBJECT_CLASS (klass)->dispose = dispose;
  widget->snapshot = snapshot;
  widget->measure = measure;
  widget->size_allocate = size_allocate;
  gtk_widget_class_set_css_name (widget, "wings");
  gtk_widget_class_set_accessible_role (widget, GTK_ACCESSIBLE_ROLE_IMG);
}

static void
add_controllers (TfWingsView *self)
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

static void
tf_wings_view_init (TfWingsView *self)
{
  self->fitted = TRUE;
  self->drag_from = NAN;
  self->wings.lat_max_deg = lat_max_deg;
  self->wings.frame_year = NAN;
  self->wings.pick_from = self->wings.pick_to = self->wings.pick_low = self->wings.pick_high = NAN;
  tf_wings_fit (&self->wings, this_year ());
  gtk_widget_set_focusable (GTK_WIDGET (self), TRUE);
  gtk_accessible_update_property (GTK_ACCESSIBLE (self), GTK_ACCESSIBLE_PROPERTY_LABEL, _ ("Wings"),
                                  -1);
  add_controllers (self);
  AdwStyleManager *manager = adw_style_manager_get_default ();
  g_signal_connect_object (manager, "notify::dark", G_CALLBACK (style_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (manager, "notify::high-contrast", G_CALLBACK (style_changed), self,
                           G_CONNECT_SWAPPED);
}
