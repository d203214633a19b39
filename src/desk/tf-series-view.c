/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-series-view.h"

#include <math.h>
#include <adwaita.h>
#include <glib/gi18n-lib.h>

#include "tf-followed-private.h"
#include "tf-joy.h"
#include "tf-widget-style.h"

/* What the kept picture depends on. */
typedef struct
{
  const TfSeriesMoment *points; /* another passage has others: it is told, too */
  double joy_deg, text_pt, ink;
  int width, height, scale;
} Still;

struct _TfSeriesView
{
  GtkWidget parent;
  Still still;
  cairo_surface_t *picture; /* of what is still while one plays or brushes; NULL */
  TfFollowed *followed;
  double drag_x; /* NaN: no drag in hand */
};

G_DEFINE_FINAL_TYPE (TfSeriesView, tf_series_view, GTK_TYPE_WIDGET)

enum
{
  CLICK_SLACK = 4
};
static const double label_share = 0.8, limb_mu = 0.5, line_mu = 0.7;

/* -- what the chart shows -------------------------------------------------------------------- */

static const char *
taken_words (TfTake take)
{
  return take == TF_TAKE_FLUX ? _ ("taken: greatest flux") : _ ("taken: nearest central meridian");
}

static void
set_expected (TfSeriesChart *chart, const TfPassageContent *content, int row)
{
  const TfMeasure *m = &((const TfRow *)g_ptr_array_index (content->rows, row))->measure;
  tf_joy_expected (m->lat_deg, m->separation_deg, &chart->joy_deg, &chart->joy_scatter_deg);
  chart->joy_name = tf_joy_relations[0].name;
}

TfSeriesChart
tf_followed_chart (TfFollowed *followed)
{
  TfSeriesChart chart = { .joy_deg = NAN,
                          .joy_scatter_deg = NAN,
                          .limb_mu = limb_mu,
                          .line_mu = line_mu,
                          .now = -1,
                          .taken = -1,
                          .from = TF_TIME_UNKNOWN,
                          .to = TF_TIME_UNKNOWN };
  const TfPassageContent *content = tf_followed_get_content (followed);
  if (content == NULL || content->points->len == 0)
    return chart;
  chart.points = (const TfSeriesMoment *)(gconstpointer)content->points->data;
  chart.n = content->points->len;
  chart.cadence_s = tf_series_chart_cadence (chart.points, chart.n);
  chart.taken = tf_followed_get_taken (followed);
  chart.taken_words = taken_words (tf_followed_get_take (followed));
  int now = tf_followed_get_shown (followed);
  if (now >= 0)
    {
      g_autoptr (TfLookItem) item
          = g_list_model_get_item (tf_followed_get_looks (followed), (guint)now);
      chart.now = tf_look_item_get_spec (item)->point;
    }
  tf_followed_get_brush (followed, &chart.from, &chart.to);
  set_expected (&chart, content, chart.taken >= 0 ? chart.taken : (int)chart.n / 2);
  return chart;
}

/* -- the widget ------------------------------------------------------------------------------ */

static TfArea
area_of (TfSeriesView *self)
{
  return (TfArea){ 6, 2, gtk_widget_get_width (GTK_WIDGET (self)) - 12,
                   gtk_widget_get_height (GTK_WIDGET (self)) - 4 };
}

static TfChartStyle
style_of (TfSeriesView *self)
{
  return tf_widget_chart_style (GTK_WIDGET (self), label_share);
}

static gboolean
is_same (const Still *a, const Still *b)
{
  return a->points == b->points && a->width == b->width && a->height == b->height
         && a->scale == b->scale && fabs (a->text_pt - b->text_pt) < 0.01
         && fabs (a->ink - b->ink) < 1e-3
         && (fabs (a->joy_deg - b->joy_deg) < 1e-3 || (isnan (a->joy_deg) && isnan (b->joy_deg)));
}

/* Borrowed. Its dots take a while to draw, and stay where they are. */
static cairo_surface_t *
still_picture (TfSeriesView *self, const TfSeriesChart *chart, const TfChartStyle *style)
{
  GtkWidget *widget = GTK_WIDGET (self);
  Still still = { .points = chart->points,
                  .joy_deg = chart->joy_deg,
                  .text_pt = style->text_pt,
                  .ink = style->ink.r + style->ink.a + 10 * style->ground.r,
                  .width = gtk_widget_get_width (widget),
                  .height = gtk_widget_get_height (widget),
                  .scale = gtk_widget_get_scale_factor (widget) };
  if (self->picture != NULL && is_same (&still, &self->still))
    return self->picture;
  g_clear_pointer (&self->picture, cairo_surface_destroy);
  self->still = still;
  self->picture = cairo_image_surface_create (CAIRO_FORMAT_ARGB32, still.width * still.scale,
                                              still.height * still.scale);
  cairo_surface_set_device_scale (self->picture, still.scale, still.scale);
  cairo_t *cr = cairo_create (self->picture);
  tf_series_chart_draw_still (cr, chart, style, area_of (self));
  cairo_destroy (cr);
  return self->picture;
}

static void
snapshot (GtkWidget *widget, GtkSnapshot *snapshot)
{
  TfSeriesView *self = TF_SERIES_VIEW (widget);
  int width = gtk_widget_get_width (widget), height = gtk_widget_get_height (widget);
  if (self->followed == NULL || width < 1 || height < 1)
    return;
  graphene_rect_t all = GRAPHENE_RECT_INIT (0, 0, (float)width, (float)height);
  TfChartStyle style = style_of (self);
  TfSeriesChart chart = tf_followed_chart (self->followed);
  cairo_t *cr = gtk_snapshot_append_cairo (snapshot, &all);
  cairo_set_source_surface (cr, still_picture (self, &chart, &style), 0, 0);
  cairo_paint (cr);
  tf_series_chart_draw_over (cr, &chart, &style, area_of (self));
  cairo_destroy (cr);
}

static void
changed (TfSeriesView *self)
{
  TfSeriesChart chart = tf_followed_chart (self->followed);
  tf_widget_describe (GTK_WIDGET (self), tf_series_chart_dup_description (&chart));
  gtk_widget_queue_draw (GTK_WIDGET (self));
}

static void
passage_changed (TfSeriesView *self)
{
  g_clear_pointer (&self->picture, cairo_surface_destroy);
  changed (self);
}

void
tf_series_view_set_followed (TfSeriesView *self, TfFollowed *followed)
{
  g_return_if_fail (TF_IS_SERIES_VIEW (self) && self->followed == NULL);
  self->followed = g_object_ref (followed);
  g_signal_connect_object (followed, "passage-changed", G_CALLBACK (passage_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (followed, "moment-changed", G_CALLBACK (changed), self,
                           G_CONNECT_SWAPPED);
  changed (self);
}

static int
nearest (TfSeriesView *self, double x)
{
  TfChartStyle style = style_of (self);
  TfSeriesChart chart = tf_followed_chart (self->followed);
  return tf_series_chart_nearest (&chart, &style, area_of (self), x);
}

static TfTime
time_at (TfSeriesView *self, double x)
{
  TfChartStyle style = style_of (self);
  TfSeriesChart chart = tf_followed_chart (self->followed);
  return tf_series_chart_time_at (&chart, &style, area_of (self), x);
}

static void
drag_begin (GtkGestureDrag *gesture, double x, double y, TfSeriesView *self)
{
  gtk_widget_grab_focus (GTK_WIDGET (self));
  self->drag_x = x;
}

static void
drag_update (GtkGestureDrag *gesture, double dx, double dy, TfSeriesView *self)
{
  if (fabs (dx) >= CLICK_SLACK && self->followed != NULL)
    tf_followed_brush (self->followed, time_at (self, self->drag_x),
                       time_at (self, self->drag_x + dx));
}

static void
drag_end (GtkGestureDrag *gesture, double dx, double dy, TfSeriesView *self)
{
  if (fabs (dx) < CLICK_SLACK && self->followed != NULL)
    tf_followed_set_now_point (self->followed, nearest (self, self->drag_x));
}

static void
pressed (GtkGestureClick *gesture, int n, double x, double y, TfSeriesView *self)
{
  if (n == 2 && self->followed != NULL)
    tf_followed_brush (self->followed, TF_TIME_UNKNOWN, TF_TIME_UNKNOWN);
}

static gboolean
query_tooltip (GtkWidget *widget, int x, int y, gboolean keyboard, GtkTooltip *tooltip)
{
  TfSeriesView *self = TF_SERIES_VIEW (widget);
  if (self->followed == NULL)
    return FALSE;
  TfSeriesChart chart = tf_followed_chart (self->followed);
  int at = keyboard ? chart.now : nearest (self, x);
  if (at < 0 || at >= (int)chart.n)
    return FALSE;
  g_autofree char *text = tf_series_chart_dup_point (&chart.points[at]);
  gtk_tooltip_set_text (tooltip, text);
  return TRUE;
}

static void
measure (GtkWidget *widget, GtkOrientation orientation, int for_size, int *minimum, int *natural,
         int *minimum_baseline, int *natural_baseline)
{
  *minimum = orientation == GTK_ORIENTATION_HORIZONTAL ? 320 : 150;
  *natural = orientation == GTK_ORIENTATION_HORIZONTAL ? 640 : 420;
}

static void
dispose (GObject *object)
{
  g_clear_pointer (&TF_SERIES_VIEW (object)->picture, cairo_surface_destroy);
  g_clear_object (&TF_SERIES_VIEW (object)->followed);
  G_OBJECT_CLASS (tf_series_view_parent_class)->dispose (object);
}

static void
tf_series_view_class_init (TfSeriesViewClass *klass)
{
  GtkWidgetClass *widget = GTK_WIDGET_CLASS (klass);
  G_OBJECT_CLASS (klass)->dispose = dispose;
  widget->snapshot = snapshot;
  widget->measure = measure;
  widget->query_tooltip = query_tooltip;
  gtk_widget_class_set_css_name (widget, "series");
  gtk_widget_class_set_accessible_role (widget, GTK_ACCESSIBLE_ROLE_IMG);
}

static void
tf_series_view_init (TfSeriesView *self)
{
  GtkWidget *widget = GTK_WIDGET (self);
  self->drag_x = NAN;
  gtk_widget_set_focusable (widget, TRUE);
  gtk_widget_set_has_tooltip (widget, TRUE);
  gtk_accessible_update_property (GTK_ACCESSIBLE (self), GTK_ACCESSIBLE_PROPERTY_LABEL,
                                  _ ("Charts of the passage"), -1);
  GtkGesture *click = gtk_gesture_click_new ();
  g_signal_connect (click, "pressed", G_CALLBACK (pressed), self);
  gtk_widget_add_controller (widget, GTK_EVENT_CONTROLLER (click));
  GtkGesture *drag = gtk_gesture_drag_new ();
  g_signal_connect (drag, "drag-begin", G_CALLBACK (drag_begin), self);
  g_signal_connect (drag, "drag-update", G_CALLBACK (drag_update), self);
  g_signal_connect (drag, "drag-end", G_CALLBACK (drag_end), self);
  gtk_widget_add_controller (widget, GTK_EVENT_CONTROLLER (drag));
  AdwStyleManager *manager = adw_style_manager_get_default ();
  g_signal_connect_object (manager, "notify::dark", G_CALLBACK (gtk_widget_queue_draw), self,
                           G_CONNECT_SWAPPED);
}
