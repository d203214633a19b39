/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-chart-view.h"

#include <math.h>
#include <adwaita.h>
#include <glib/gi18n-lib.h>

#include "tf-widget-style.h"

struct _TfChartView
{
  GtkWidget parent;
  const TfLawsChart *chart;
  TfLawsCharts *charts;
  cairo_surface_t *picture; /* what was drawn last */
  int picture_scale;
  gboolean stale, drawing, fits;
  int last; /* row opened last; -1 */
  double x, y; /* of the sign that the keys are at; x NaN: none */
  int sign;
  char *said;          /* what it says */
  double *places;      /* of the signs, as the picture has them; NULL: to be asked for */
  guint n_places;
};

G_DEFINE_FINAL_TYPE (TfChartView, tf_chart_view, GTK_TYPE_WIDGET)

static const double label_share = 0.8;
enum
{
  FAR = 40, /* units at least, with Shift */
  NATURAL_WIDTH = 380
};

/* -- drawing, in a thread -------------------------------------------------------------------- */

typedef struct
{
  const TfLawsChart *chart;
  TfLawsCharts *charts;
  TfChartStyle style;
  int width, height, scale;
} Job;

static void
job_free (gpointer data)
{
  tf_laws_charts_unref (((Job *)data)->charts);
  g_free (data);
}

static void
draw (GTask *task, gpointer source, gpointer data, GCancellable *cancellable)
{
  const Job *job = data;
  cairo_surface_t *picture = cairo_image_surface_create (
      CAIRO_FORMAT_ARGB32, job->width * job->scale, job->height * job->scale);
  cairo_t *cr = cairo_create (picture);
  cairo_scale (cr, job->scale, job->scale);
  job->chart->draw (cr, job->charts, &job->style, (TfArea){ 0, 0, job->width, job->height });
  cairo_destroy (cr);
  g_task_return_pointer (task, picture, (GDestroyNotify)cairo_surface_destroy);
}

static void
drawn (GObject *source, GAsyncResult *result, gpointer data)
{
  TfChartView *self = TF_CHART_VIEW (source);
  cairo_surface_t *picture = g_task_propagate_pointer (G_TASK (result), NULL);
  const Job *job = g_task_get_task_data (G_TASK (result));
  self->drawing = FALSE;
  if (picture == NULL)
    return;
  g_clear_pointer (&self->picture, cairo_surface_destroy);
  self->picture = picture;
  self->picture_scale = job->scale;
  gtk_widget_queue_draw (GTK_WIDGET (self));
}

static void
start_drawing (TfChartView *self)
{
  GtkWidget *widget = GTK_WIDGET (self);
  Job *job = g_new0 (Job, 1);
  job->chart = self->chart;
  job->charts = tf_laws_charts_ref (self->charts);
  job->style = tf_widget_chart_style (widget, label_share);
  job->width = gtk_widget_get_width (widget);
  job->height = gtk_widget_get_height (widget);
  job->scale = gtk_widget_get_scale_factor (widget);
  self->stale = FALSE;
  self->drawing = TRUE;
  g_autoptr (GTask) task = g_task_new (self, NULL, drawn, NULL);
  g_task_set_task_data (task, job, job_free);
  g_task_run_in_thread (task, draw);
}

static void
redraw (TfChartView *self)
{
  self->stale = TRUE;
  gtk_widget_queue_draw (GTK_WIDGET (self));
}

/* A ring about the sign, and what it says, where there is room. */
static void
snapshot_sign (TfChartView *self, GtkSnapshot *snapshot, int width, int height)
{
  TfChartStyle style = tf_widget_chart_style (GTK_WIDGET (self), label_share);
  double text = style.text_pt;
  int w, h;
  graphene_rect_t all = GRAPHENE_RECT_INIT (0, 0, (float)width, (float)height);
  cairo_t *cr = gtk_snapshot_append_cairo (snapshot, &all);
  cairo_new_path (cr);
  cairo_arc (cr, self->x, self->y, text * 0.8, 0, 2 * G_PI);
  tf_chart_set (cr, style.ink);
  cairo_set_line_width (cr, text * 0.16);
  cairo_stroke (cr);
  if (self->said != NULL)
    {
      g_autoptr (PangoLayout) layout = gtk_widget_create_pango_layout (GTK_WIDGET (self), self->said);
      pango_layout_set_width (layout, (int)(width - text * 2) * PANGO_SCALE);
      pango_layout_get_pixel_size (layout, &w, &h);
      double x = CLAMP (self->x - w / 2.0, text * 0.5, MAX (width - w - text * 0.5, text * 0.5));
      double y = self->y > h + text * 2.4 ? self->y - h - text * 1.6 : self->y + text * 1.6;
      cairo_rectangle (cr, x - text * 0.4, y - text * 0.2, w + text * 0.8, h + text * 0.4);
      tf_chart_set (cr, style.ground);
      cairo_fill_preserve (cr);
      tf_chart_set (cr, style.slate);
      cairo_set_line_width (cr, 1);
      cairo_stroke (cr);
      tf_chart_set (cr, style.ink);
      cairo_move_to (cr, x, y);
      pango_cairo_show_layout (cr, layout);
    }
  cairo_destroy (cr);
}

static void
snapshot (GtkWidget *widget, GtkSnapshot *snapshot)
{
  TfChartView *self = TF_CHART_VIEW (widget);
  int width = gtk_widget_get_width (widget), height = gtk_widget_get_height (widget);
  if (width < 8 || height < 8)
    return;
  if (self->stale && !self->drawing && self->charts != NULL && self->chart != NULL)
    start_drawing (self);
  if (self->picture != NULL && self->charts != NULL)
    tf_surface_append (snapshot, widget, self->picture, 0, 0, self->picture_scale);
  if (gtk_widget_has_focus (widget) && self->sign >= 0)
    snapshot_sign (self, snapshot, width, height);
}

/* -- choosing -------------------------------------------------------------------------------- */

static TfArea
area_of (TfChartView *self)
{
  return (TfArea){ 0, 0, gtk_widget_get_width (GTK_WIDGET (self)),
                   gtk_widget_get_height (GTK_WIDGET (self)) };
}

static void describe (TfChartView *self);

/* The keys are at no sign any more: they stand elsewhere now, or are others. */
static void
leave_sign (TfChartView *self)
{
  g_clear_pointer (&self->places, g_free);
  g_clear_pointer (&self->said, g_free);
  self->x = self->y = NAN;
  self->sign = -1;
  self->last = -1;
}

static void
step (TfChartView *self, TfStep step, double least)
{
  TfChartStyle style = tf_widget_chart_style (GTK_WIDGET (self), label_share);
  if (self->places == NULL)
    self->places = self->chart->dup_places (self->charts, &style, area_of (self), &self->n_places);
  int found = tf_laws_step (self->places, self->n_places, step, self->x, self->y, least);
  if (found < 0)
    return;
  self->sign = found;
  self->x = self->places[2 * found];
  self->y = self->places[2 * found + 1];
  self->last = -1;
  g_free (self->said);
  self->said = self->chart->dup_sign (self->charts, (guint)found);
  describe (self);
  gtk_widget_queue_draw (GTK_WIDGET (self));
}

static gboolean
open_at (TfChartView *self, double x, double y)
{
  if (self->charts == NULL || self->chart == NULL)
    return FALSE;
  TfChartStyle style = tf_widget_chart_style (GTK_WIDGET (self), label_share);
  int row = self->chart->hit (self->charts, &style, area_of (self), x, y, self->last);
  if (row < 0)
    return FALSE;
  self->last = row;
  g_signal_emit_by_name (self, "row-chosen", row);
  return TRUE;
}

/* The keys go on from here. */
static void
start_at (TfChartView *self, double x, double y)
{
  leave_sign (self);
  self->x = x;
  self->y = y;
  describe (self);
  gtk_widget_queue_draw (GTK_WIDGET (self));
}

static void
pressed (GtkGestureClick *gesture, int n, double x, double y, TfChartView *self)
{
  gtk_widget_grab_focus (GTK_WIDGET (self));
  if (!open_at (self, x, y))
    start_at (self, x, y);
}

/* What is under the pointer, without a click. */
static gboolean
query_tooltip (GtkWidget *widget, int x, int y, gboolean keyboard, GtkTooltip *tooltip)
{
  TfChartView *self = TF_CHART_VIEW (widget);
  if (keyboard || self->charts == NULL || self->chart == NULL || !self->chart->has (self->charts))
    return FALSE;
  TfChartStyle style = tf_widget_chart_style (widget, label_share);
  int row = self->chart->hit (self->charts, &style, area_of (self), x, y, -1);
  g_autofree char *words = row >= 0 ? tf_laws_charts_dup_row (self->charts, (guint)row) : NULL;
  g_autofree char *text
      = words != NULL ? g_strdup_printf (_ ("%s — a click opens it on Mark"), words) : NULL;
  gtk_tooltip_set_text (tooltip, text);
  return text != NULL;
}

static gboolean
key_pressed (GtkEventControllerKey *keys, guint key, guint code, GdkModifierType state,
             TfChartView *self)
{
  double least = (state & GDK_SHIFT_MASK) != 0 ? FAR : 0;
  if (self->charts == NULL || self->chart == NULL || !self->chart->has (self->charts))
    return FALSE;
  switch (key)
    {
    case GDK_KEY_Left:
      step (self, TF_STEP_LEFT, least);
      return TRUE;
    case GDK_KEY_Right:
      step (self, TF_STEP_RIGHT, least);
      return TRUE;
    case GDK_KEY_Up:
      step (self, TF_STEP_UP, least);
      return TRUE;
    case GDK_KEY_Down:
      step (self, TF_STEP_DOWN, least);
      return TRUE;
    case GDK_KEY_Return:
    case GDK_KEY_KP_Enter:
    case GDK_KEY_space:
      return self->sign >= 0 && open_at (self, self->x, self->y);
    default:
      return FALSE;
    }
}

/* -- the widget ------------------------------------------------------------------------------ */

const TfLawsChart *
tf_chart_view_get_chart (TfChartView *self)
{
  return self->chart;
}

static void
describe (TfChartView *self)
{
  if (self->chart == NULL)
    return;
  g_autofree char *enlarged = g_strdup_printf (_ ("%s, enlarged"), _ (self->chart->title));
  gtk_accessible_update_property (GTK_ACCESSIBLE (self), GTK_ACCESSIBLE_PROPERTY_LABEL,
                                  self->fits ? enlarged : _ (self->chart->title), -1);
  g_autofree char *all = self->charts != NULL ? self->chart->dup_description (self->charts)
                                              : g_strdup (_ ("Nothing is worked out yet."));
  tf_widget_describe (GTK_WIDGET (self), self->said != NULL
                                             ? g_strdup_printf (_ ("At %s. %s"), self->said, all)
                                             : g_strdup (all));
}

void
tf_chart_view_set_chart (TfChartView *self, const TfLawsChart *chart)
{
  g_return_if_fail (TF_IS_CHART_VIEW (self));
  if (self->chart == chart)
    return;
  self->chart = chart;
  leave_sign (self);
  g_clear_pointer (&self->picture, cairo_surface_destroy);
  describe (self);
  gtk_widget_queue_resize (GTK_WIDGET (self));
  redraw (self);
}

void
tf_chart_view_show (TfChartView *self, TfLawsCharts *charts)
{
  g_return_if_fail (TF_IS_CHART_VIEW (self));
  if (charts == self->charts)
    return;
  g_clear_pointer (&self->charts, tf_laws_charts_unref);
  self->charts = charts != NULL ? tf_laws_charts_ref (charts) : NULL;
  leave_sign (self);
  describe (self);
  gtk_widget_queue_resize (GTK_WIDGET (self));
  redraw (self);
}

static GtkSizeRequestMode
request_mode (GtkWidget *widget)
{
  return GTK_SIZE_REQUEST_HEIGHT_FOR_WIDTH;
}

static void
measure (GtkWidget *widget, GtkOrientation orientation, int for_size, int *minimum, int *natural,
         int *minimum_baseline, int *natural_baseline)
{
  TfChartView *self = TF_CHART_VIEW (widget);
  *minimum = 160;
  *natural = NATURAL_WIDTH;
  if (orientation == GTK_ORIENTATION_HORIZONTAL)
    return;
  TfChartStyle style = tf_widget_chart_style (widget, label_share);
  double width = for_size > 0 ? for_size : NATURAL_WIDTH;
  double height = self->charts != NULL && self->chart != NULL
                      ? self->chart->height (self->charts, &style, width)
                      : width * 0.7;
  *minimum = *natural = (int)MAX (height, 120);
  if (self->fits && self->chart != NULL && self->chart->elastic)
    *minimum = (int)MIN (*natural, style.text_pt * 26);
}

void
tf_chart_view_set_fits (TfChartView *self, gboolean fits)
{
  g_return_if_fail (TF_IS_CHART_VIEW (self));
  self->fits = fits;
  describe (self);
  gtk_widget_queue_resize (GTK_WIDGET (self));
}

static void
size_allocate (GtkWidget *widget, int width, int height, int baseline)
{
  TF_CHART_VIEW (widget)->stale = TRUE;
  leave_sign (TF_CHART_VIEW (widget));
}

static void
style_changed (TfChartView *self)
{
  redraw (self);
}

static void
dispose (GObject *object)
{
  TfChartView *self = TF_CHART_VIEW (object);
  g_clear_pointer (&self->picture, cairo_surface_destroy);
  g_clear_pointer (&self->charts, tf_laws_charts_unref);
  leave_sign (self);
  G_OBJECT_CLASS (tf_chart_view_parent_class)->dispose (object);
}

static void
tf_chart_view_class_init (TfChartViewClass *klass)
{
  GtkWidgetClass *widget = GTK_WIDGET_CLASS (klass);
  G_OBJECT_CLASS (klass)->dispose = dispose;
  widget->snapshot = snapshot;
  widget->measure = measure;
  widget->get_request_mode = request_mode;
  widget->size_allocate = size_allocate;
  widget->query_tooltip = query_tooltip;
  gtk_widget_class_set_css_name (widget, "chart");
  gtk_widget_class_set_accessible_role (widget, GTK_ACCESSIBLE_ROLE_IMG);
  g_signal_new ("row-chosen", TF_TYPE_CHART_VIEW, G_SIGNAL_RUN_LAST, 0, NULL, NULL, NULL,
                G_TYPE_NONE, 1, G_TYPE_INT);
}

static void
tf_chart_view_init (TfChartView *self)
{
  leave_sign (self);
  gtk_widget_set_has_tooltip (GTK_WIDGET (self), TRUE);
  gtk_widget_set_focusable (GTK_WIDGET (self), TRUE);
  GtkGesture *click = gtk_gesture_click_new ();
  g_signal_connect (click, "pressed", G_CALLBACK (pressed), self);
  gtk_widget_add_controller (GTK_WIDGET (self), GTK_EVENT_CONTROLLER (click));
  GtkEventController *keys = gtk_event_controller_key_new ();
  g_signal_connect (keys, "key-pressed", G_CALLBACK (key_pressed), self);
  gtk_widget_add_controller (GTK_WIDGET (self), keys);
  AdwStyleManager *manager = adw_style_manager_get_default ();
  g_signal_connect_object (manager, "notify::dark", G_CALLBACK (style_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (manager, "notify::high-contrast", G_CALLBACK (style_changed), self,
                           G_CONNECT_SWAPPED);
}

GtkWidget *
tf_chart_view_new (const TfLawsChart *chart)
{
  TfChartView *self = g_object_new (TF_TYPE_CHART_VIEW, NULL);
  tf_chart_view_set_chart (self, chart);
  return GTK_WIDGET (self);
}
