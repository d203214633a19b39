/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-wings-view.h"

#include <math.h>
#include <adwaita.h>
#include <glib/gi18n-lib.h>

#include "tf-band-hand.h"
#include "tf-session-laws.h"
#include "tf-widget-style.h"
#include "tf-wings.h"

struct _TfWingsView
{
  GtkWidget parent;
  TfSession *session;
  TfWings wings;
  TfDivides *divides; /* those of wings: kept alive, the session may change its own at any time */
  gboolean fitted, widened; /* to all dots; or was, before a minimum beyond them was taken in hand */
  cairo_surface_t *surface; /* the ground as it was drawn last */
  gboolean stale;
  double pointer_x;
  const char *cursor; /* static: of the pointer now; NULL: the usual one */
  double drag_from, drag_lat; /* where a drag began: year, latitude; NaN: none in hand */
  gboolean moves_divide;      /* the drag has a divide; drag_lat and drag_from are where it was seen last */
  enum
  {
    WAY_OPEN,
    IN_TIME,
    IN_LATITUDE
  } way;              /* of that drag: one at a time */
  TfBandHand band; /* chosen by keys */
  double divide_side; /* 1: a drag upwards moves it away from the equator, or widens its band */
};

G_DEFINE_FINAL_TYPE (TfWingsView, tf_wings_view, GTK_TYPE_WIDGET)

enum
{
  HEIGHT = 132,
  TALL_HEIGHT = 224, /* on the Laws bench */
  CLICK_SLACK = 4,
  BAND_SLACK = 14 /* a drag along time need not be straight */
};
static const double key_step_deg = 0.5;
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

/* What lies over the dots has changed. */
static void
redraw_over (TfWingsView *self)
{
  g_autofree char *shown = tf_wings_dup_description (&self->wings);
  tf_widget_describe (GTK_WIDGET (self),
                      self->band.on ? g_strconcat (shown,
                                                   _ (" The arrows move it, with Shift its later or upper "
                                                      "edge; Return takes it, Escape leaves it."),
                                                   NULL)
                                    : g_steal_pointer (&shown));
  gtk_widget_queue_draw (GTK_WIDGET (self));
}

static void
redraw (TfWingsView *self)
{
  self->stale = TRUE;
  redraw_over (self);
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

static double
provisional_of (const TfDivides *divides)
{
  return divides != NULL ? tf_divides_get_params (divides)->provisional_year : NAN;
}

/* TRUE: the bands of the cycles are others, too. */
static gboolean
take_divides (TfWingsView *self)
{
  const TfDivides *now = tf_session_get_divides (self->session);
  if (now == self->divides)
    return FALSE;
  double before = provisional_of (self->divides), after = provisional_of (now);
  g_clear_pointer (&self->divides, tf_divides_unref);
  self->divides = now != NULL ? tf_divides_ref ((TfDivides *)now) : NULL;
  self->wings.divides = self->divides;
  return before < after || before > after || isnan (before) != isnan (after);
}

/* What is in hand may lie beyond what is shown: an end, or a provisional minimum with its divide. */
static gboolean
show_hold (TfWingsView *self, const TfDivideHold *hold)
{
  gboolean provisional = tf_cycle_find (hold->cycle) == NULL;
  int handle = provisional ? TF_WINGS_END : hold->handle;
  if (!hold->in_hand || handle == TF_WINGS_WHOLE || handle == TF_WINGS_BAND)
    return FALSE;
  double year = tf_time_year (hold->times[handle]), margin = 0.5;
  if (year >= self->wings.from_year && year <= self->wings.to_year)
    return FALSE;
  self->widened |= self->fitted;
  self->fitted = FALSE;
  self->wings.from_year = fmin (self->wings.from_year, year - margin);
  self->wings.to_year = fmax (self->wings.to_year, year + margin);
  return TRUE;
}

/* It is put back: all that there is, as before. */
static gboolean
show_as_before (TfWingsView *self, const TfDivideHold *hold)
{
  if (!self->widened || hold->cycle != 0)
    return FALSE;
  self->widened = FALSE;
  self->fitted = TRUE;
  tf_wings_fit (&self->wings, isfinite (self->wings.frame_year) ? self->wings.frame_year : this_year ());
  return TRUE;
}

static void
show_stretch (TfWingsView *self)
{
  TfStretch stretch = tf_session_get_stretch (self->session);
  self->wings.pick_from = stretch.from_year;
  self->wings.pick_to = stretch.to_year;
  self->wings.pick_low = stretch.low_deg;
  self->wings.pick_high = stretch.high_deg;
}

static void
points_changed (TfWingsView *self)
{
  GArray *dots = tf_session_get_dots (self->session, NULL);
  self->wings.dots = (const TfWingsDot *)(gconstpointer)dots->data;
  self->wings.n = dots->len;
  take_divides (self);
  self->wings.frame_year = frame_year (self);
  self->wings.chosen = tf_session_get_chosen_dot (self->session);
  if (!self->wings.picking)
    show_stretch (self);
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
  gboolean moves = self->fitted && self->wings.n == 0;
  if (moves)
    tf_wings_fit (&self->wings, isfinite (year) ? year : this_year ());
  if (moves)
    redraw (self);
  else
    redraw_over (self);
}

static void
laws_changed (TfWingsView *self)
{
  const TfDivideHold *hold = tf_session_get_divide (self->session);
  gboolean plain = tf_session_is_plain (self->session),
           movable = tf_session_shows_laws (self->session);
  gboolean dots = plain != self->wings.plain
                  || (hold->in_hand && tf_session_get_show_polarity (self->session));
  if (movable != self->wings.movable)
    gtk_widget_queue_resize (GTK_WIDGET (self));
  dots |= take_divides (self);
  dots |= show_hold (self, hold) || show_as_before (self, hold);
  self->wings.plain = plain;
  self->wings.movable = movable;
  self->wings.hold_cycle = hold->cycle;
  self->wings.hold_side = hold->hemisphere;
  self->wings.hold_handle = hold->handle;
  if (dots)
    redraw (self);
  else
    redraw_over (self);
}

void
tf_wings_view_get_span (TfWingsView *self, double *from, double *to)
{
  *from = self->wings.from_year;
  *to = self->wings.to_year;
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
  g_signal_connect_object (session, "laws-changed", G_CALLBACK (laws_changed), self,
                           G_CONNECT_SWAPPED);
  points_changed (self);
  laws_changed (self);
}

/* -- zoom, pick, choose ---------------------------------------------------------------------- */

static void
set_span (TfWingsView *self, double from, double to)
{
  if (to - from < shortest_years || to - from > longest_years)
    return;
  self->fitted = self->widened = FALSE;
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

static double
lat_at (TfWingsView *self, double y)
{
  TfChartStyle style = style_of (self);
  return tf_wings_lat_at (&self->wings, &style, area_of (self), y);
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
  TfChartStyle style = style_of (self);
  int cycle, side, handle;
  self->pointer_x = x;
  const char *name = NULL;
  if (self->wings.movable
      && tf_wings_hit_divide (&self->wings, &style, area_of (self), x, y, &cycle, &side, &handle))
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
  TfChartStyle style = style_of (self);
  int cycle, side, handle;
  gtk_widget_grab_focus (GTK_WIDGET (self));
  self->drag_from = year_at (self, x);
  self->drag_lat = lat_at (self, y);
  self->moves_divide = self->session != NULL
                       && tf_wings_hit_divide (&self->wings, &style, area_of (self), x, y, &cycle,
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
  redraw_over (self);
}

static void
click (TfWingsView *self, double x, double y)
{
  TfChartStyle style = style_of (self);
  int hit = tf_wings_hit (&self->wings, &style, area_of (self), x, y);
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
    show_stretch (self);
  redraw_over (self);
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

/* -- the widget ------------------------------------------------------------------------------ */

static void
draw (TfWingsView *self, int width, int height, int scale)
{
  TfChartStyle style = style_of (self);
  g_clear_pointer (&self->surface, cairo_surface_destroy);
  self->surface = cairo_image_surface_create (CAIRO_FORMAT_ARGB32, width * scale, height * scale);
  cairo_t *cr = cairo_create (self->surface);
  cairo_scale (cr, scale, scale);
  tf_wings_draw_ground (cr, &self->wings, &style, (TfArea){ 0, 0, width, height });
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
  TfChartStyle style = style_of (self);
  graphene_rect_t all = GRAPHENE_RECT_INIT (0, 0, (float)width, (float)height);
  cairo_t *cr = gtk_snapshot_append_cairo (snapshot, &all);
  tf_wings_draw_over (cr, &self->wings, &style, area_of (self));
  cairo_destroy (cr);
}

static void
measure (GtkWidget *widget, GtkOrientation orientation, int for_size, int *minimum, int *natural,
         int *minimum_baseline, int *natural_baseline)
{
  double text = tf_widget_text_size (widget) / 14.0;
  *minimum
      = orientation == GTK_ORIENTATION_VERTICAL
            ? (int)((TF_WINGS_VIEW (widget)->wings.movable ? TALL_HEIGHT : HEIGHT)
                    * fmax (1, 0.6 + 0.4 * text))
            : 200;
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
  self->wings.divides = NULL;
  g_clear_pointer (&self->divides, tf_divides_unref);
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
