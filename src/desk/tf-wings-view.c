/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-wings-view-private.h"

#include <math.h>
#include <adwaita.h>
#include <glib/gi18n-lib.h>

#include "tf-widget-style.h"

G_DEFINE_FINAL_TYPE (TfWingsView, tf_wings_view, GTK_TYPE_WIDGET)

enum
{
  HEIGHT = 132,
  TALL_HEIGHT = 224 /* on the Laws bench */
};
static const double label_share = 0.78, lat_max_deg = 45;

TfArea
tf_wings_view_area (TfWingsView *self)
{
  return (TfArea){ 0, 0, gtk_widget_get_width (GTK_WIDGET (self)),
                   gtk_widget_get_height (GTK_WIDGET (self)) };
}

TfChartStyle
tf_wings_view_style (TfWingsView *self)
{
  return tf_widget_chart_style (GTK_WIDGET (self), label_share);
}

/* What lies over the dots has changed. */
void
tf_wings_view_redraw_over (TfWingsView *self)
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

void
tf_wings_view_redraw (TfWingsView *self)
{
  self->stale = TRUE;
  tf_wings_view_redraw_over (self);
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

void
tf_wings_view_show_stretch (TfWingsView *self)
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
    tf_wings_view_show_stretch (self);
  if (self->fitted)
    tf_wings_fit (&self->wings,
                  isfinite (self->wings.frame_year) ? self->wings.frame_year : this_year ());
  tf_wings_view_redraw (self);
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
    tf_wings_view_redraw (self);
  else
    tf_wings_view_redraw_over (self);
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
    tf_wings_view_redraw (self);
  else
    tf_wings_view_redraw_over (self);
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

/* -- the widget ------------------------------------------------------------------------------ */

static void
draw (TfWingsView *self, int width, int height, int scale)
{
  TfChartStyle style = tf_wings_view_style (self);
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
  TfChartStyle style = tf_wings_view_style (self);
  graphene_rect_t all = GRAPHENE_RECT_INIT (0, 0, (float)width, (float)height);
  cairo_t *cr = gtk_snapshot_append_cairo (snapshot, &all);
  tf_wings_draw_over (cr, &self->wings, &style, tf_wings_view_area (self));
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
  tf_wings_view_redraw (self);
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
  tf_wings_view_add_hand (self);
  AdwStyleManager *manager = adw_style_manager_get_default ();
  g_signal_connect_object (manager, "notify::dark", G_CALLBACK (style_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (manager, "notify::high-contrast", G_CALLBACK (style_changed), self,
                           G_CONNECT_SWAPPED);
}
