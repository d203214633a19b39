/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-plate.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-plate-private.h"
#include "tf-slip-words.h"
#include "tf-widget-style.h"

G_DEFINE_FINAL_TYPE (TfPlate, tf_plate, GTK_TYPE_WIDGET)

enum
{
  PROP_READOUT = 1
};
static const GdkRGBA ground = { 0.0902f, 0.098f, 0.1137f, 1 };

/* -- words ----------------------------------------------------------------------------------- */

static void
append_field (GString *text, double gauss, TfUnits units)
{
  if (!isfinite (gauss))
    {
      g_string_append (text, _ (" · no value here"));
      return;
    }
  g_autofree char *field = tf_units_dup_signed_field (units, gauss, 0);
  g_string_append_printf (text, " · %s", field);
}

static char *
dup_readout (TfPlate *self)
{
  TfFrame *frame = self->session != NULL ? tf_session_get_frame (self->session) : NULL;
  if (frame == NULL || !self->pointer_in)
    return g_strdup (_ ("point at the Sun for its place and field"));
  TfPlace place;
  double x, y;
  const TfView *view = tf_session_get_view (self->session);
  const TfGeometry *geometry = tf_frame_get_geometry (frame);
  if (!tf_view_to_sun (view, geometry, self->pointer_x, self->pointer_y, &place))
    return g_strdup (_ ("off the Sun"));
  GString *text = g_string_new (NULL);
  g_string_append_printf (text, "%s%.1f", place.lat_deg < 0 ? _ ("S") : _ ("N"),
                          fabs (place.lat_deg));
  if (isfinite (place.cmd_deg))
    {
      g_autofree char *lon = tf_words_dup_signed (place.stonyhurst_lon_deg, 1);
      g_string_append_printf (text, _ (" · CMD %s%.1f · Stonyhurst %s°"),
                              place.cmd_deg < 0 ? _ ("E") : _ ("W"), fabs (place.cmd_deg), lon);
    }
  g_string_append_printf (text, _ (" · Carrington %.1f°"), place.carrington_lon_deg);
  if (isfinite (place.mu))
    g_string_append_printf (text, " · μ %.2f", place.mu);
  if (tf_view_to_pixel (view, geometry, self->pointer_x, self->pointer_y, &x, &y))
    append_field (text, tf_frame_value (frame, x, y), tf_session_get_units (self->session));
  return g_string_free (text, FALSE);
}

void
tf_plate_update_readout (TfPlate *self)
{
  char *text = dup_readout (self);
  if (self->session != NULL && !self->menu_open)
    tf_session_set_pointer (self->session, self->pointer_in, self->pointer_x, self->pointer_y);
  if (g_strcmp0 (text, self->readout) == 0)
    {
      g_free (text);
      return;
    }
  g_free (self->readout);
  self->readout = text;
  g_object_notify (G_OBJECT (self), "readout");
}

const char *
tf_plate_get_readout (TfPlate *self)
{
  return self->readout;
}

static void
append_regions (TfPlate *self, GString *text)
{
  GListModel *list = tf_session_get_regions (self->session);
  guint n = g_list_model_get_n_items (list), hints = 0;
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfRegionItem) item = g_list_model_get_item (list, k);
      hints += tf_region_item_get_row (item)->is_hint ? 1 : 0;
    }
  g_string_append_printf (text, _ ("; %u marks and %u hints"), n - hints, hints);
  TfRegionItem *chosen = tf_session_get_region (self->session);
  if (tf_session_get_other_half (self->session) != NULL)
    g_string_append (text, _ ("; a draft in two halves not kept yet"));
  else if (tf_session_get_draft (self->session) != NULL)
    g_string_append (text, _ ("; a draft not kept yet"));
  else if (tf_session_get_n_chosen (self->session) > 1)
    g_string_append_printf (text, _ ("; %u chosen"), tf_session_get_n_chosen (self->session));
  else if (chosen != NULL)
    {
      const TfMeasure *m = &tf_region_item_get_row (chosen)->measure;
      g_autofree char *place = tf_chart_dup_place (
          m->lat_deg, isfinite (m->cmd_deg) ? m->cmd_deg : m->carrington_lon_deg);
      g_string_append_printf (text, _ ("; chosen: %s at %s"), tf_region_item_get_label (chosen),
                              place);
    }
  if (tf_session_get_proposal (self->session) != NULL)
    g_string_append (text, _ ("; a split is proposed"));
}

char *
tf_plate_dup_description (TfPlate *self)
{
  TfFrame *frame = self->session != NULL ? tf_session_get_frame (self->session) : NULL;
  const char *problem = self->session != NULL ? tf_session_get_frame_problem (self->session) : NULL;
  if (frame == NULL)
    return problem != NULL ? g_strdup_printf (_ ("not shown: %s"), problem)
                           : g_strdup (_ ("no frame is open"));
  static const char *const looks[] = { N_ ("disk"), N_ ("unrolled"), N_ ("close") };
  const TfFrameInfo *info = tf_frame_get_info (frame);
  g_autofree char *time = tf_time_dup_iso (info->time, 0);
  g_autofree char *vantage = tf_observer_dup_vantage (&info->geometry.observer);
  GString *text = g_string_new (NULL);
  g_string_append_printf (text, _ ("frame of %s"), time != NULL ? time : _ ("unknown time"));
  if (vantage != NULL && !tf_geometry_is_map (&info->geometry))
    g_string_append_printf (text, _ (" seen from %s"), vantage);
  TfLook look = tf_session_get_view (self->session)->look;
  g_autofree char *range = tf_units_dup_field (tf_session_get_units (self->session),
                                               tf_session_get_range (self->session), 0);
  gboolean map = look == TF_LOOK_DISK && tf_geometry_is_map (&info->geometry);
  g_string_append_printf (text, _ ("; look: %s; field range ± %s"),
                          map ? _ ("map") : _ (looks[look]), range);
  append_regions (self, text);
  return g_string_free (text, FALSE);
}

/* -- following the session ------------------------------------------------------------------- */

static void
describe (TfPlate *self)
{
  tf_widget_describe (GTK_WIDGET (self), tf_plate_dup_description (self));
}

static void
picture_changed (TfPlate *self)
{
  self->picture_stale = TRUE;
  tf_plate_update_readout (self);
  describe (self);
  gtk_widget_queue_draw (GTK_WIDGET (self));
}

static void
frame_changed (TfPlate *self)
{
  self->overlay_stale = TRUE;
  picture_changed (self);
}

static void
regions_changed (TfPlate *self)
{
  self->overlay_stale = TRUE;
  describe (self);
  gtk_widget_queue_draw (GTK_WIDGET (self));
}

static void
choice_changed (TfPlate *self)
{
  TfTool tool = tf_session_get_tool (self->session);
  gtk_widget_set_cursor_from_name (GTK_WIDGET (self), tool == TF_TOOL_NONE ? NULL : "crosshair");
  self->has_corner = self->has_corner && tool == TF_TOOL_CORNERS;
  if (tf_session_get_draft (self->session) != NULL && !tf_session_has_stroke (self->session))
    self->overlay_stale = TRUE; /* its poles move when it is measured again */
  describe (self);
  gtk_widget_queue_draw (GTK_WIDGET (self));
}

void
tf_plate_set_session (TfPlate *self, TfSession *session)
{
  g_return_if_fail (TF_IS_PLATE (self) && TF_IS_SESSION (session) && self->session == NULL);
  self->session = g_object_ref (session);
  g_signal_connect_object (session, "frame-changed", G_CALLBACK (frame_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "view-changed", G_CALLBACK (picture_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "regions-changed", G_CALLBACK (regions_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "overlays-changed", G_CALLBACK (regions_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "choice-changed", G_CALLBACK (choice_changed), self,
                           G_CONNECT_SWAPPED);
  describe (self);
}

/* -- the widget ------------------------------------------------------------------------------ */

static void
snapshot (GtkWidget *widget, GtkSnapshot *snapshot)
{
  TfPlate *self = TF_PLATE (widget);
  int width = gtk_widget_get_width (widget), height = gtk_widget_get_height (widget);
  graphene_rect_t all = GRAPHENE_RECT_INIT (0, 0, (float)width, (float)height);
  gtk_snapshot_append_color (snapshot, &ground, &all);
  if (self->session == NULL || tf_session_get_frame (self->session) == NULL || width < 1
      || height < 1)
    return;
  double dx, dy, stretch;
  const TfVertex *line;
  guint line_n;
  int scale = gtk_widget_get_scale_factor (widget);
  tf_session_get_line (self->session, &line, &line_n);
  tf_plate_draw_picture (self, width, height);
  tf_plate_draw_overlay (self, width, height);
  tf_plate_place_overlay (self, &dx, &dy, &stretch);
  gtk_snapshot_push_clip (snapshot, &all);
  tf_surface_append (snapshot, widget, self->picture, 0, 0, scale);
  tf_surface_append (snapshot, widget, self->overlay, dx, dy, scale / stretch);
  if (line_n > 0 || tf_session_get_tool (self->session) != TF_TOOL_NONE
      || tf_session_has_stroke (self->session)
      || tf_session_get_proposal (self->session) != NULL || tf_plate_has_preview (self))
    {
      cairo_t *cr = gtk_snapshot_append_cairo (snapshot, &all);
      tf_plate_draw_line (self, cr, width, height);
      cairo_destroy (cr);
    }
  gtk_snapshot_pop (snapshot);
}

static void
size_allocate (GtkWidget *widget, int width, int height, int baseline)
{
  TfPlate *self = TF_PLATE (widget);
  self->overlay_stale = self->picture_stale = TRUE;
  tf_plate_place_menu (self);
  if (self->session != NULL)
    tf_session_set_view_size (self->session, width, height);
}

static void
get_property (GObject *object, guint prop, GValue *value, GParamSpec *spec)
{
  if (prop == PROP_READOUT)
    g_value_set_string (value, TF_PLATE (object)->readout);
  else
    G_OBJECT_WARN_INVALID_PROPERTY_ID (object, prop, spec);
}

static void
dispose (GObject *object)
{
  TfPlate *self = TF_PLATE (object);
  g_clear_handle_id (&self->settle, g_source_remove);
  g_clear_pointer (&self->menu, gtk_widget_unparent);
  g_clear_object (&self->session);
  g_clear_pointer (&self->picture, cairo_surface_destroy);
  g_clear_pointer (&self->overlay, cairo_surface_destroy);
  G_OBJECT_CLASS (tf_plate_parent_class)->dispose (object);
}

static void
finalize (GObject *object)
{
  g_free (TF_PLATE (object)->readout);
  G_OBJECT_CLASS (tf_plate_parent_class)->finalize (object);
}

static void
tf_plate_class_init (TfPlateClass *klass)
{
  GObjectClass *object = G_OBJECT_CLASS (klass);
  GtkWidgetClass *widget = GTK_WIDGET_CLASS (klass);
  object->get_property = get_property;
  object->dispose = dispose;
  object->finalize = finalize;
  widget->snapshot = snapshot;
  widget->size_allocate = size_allocate;
  g_object_class_install_property (
      object, PROP_READOUT,
      g_param_spec_string ("readout", NULL, NULL, NULL, G_PARAM_READABLE | G_PARAM_STATIC_STRINGS));
  tf_plate_class_add_menu (widget);
  gtk_widget_class_set_css_name (widget, "plate");
  gtk_widget_class_set_accessible_role (widget, GTK_ACCESSIBLE_ROLE_IMG);
}

static void
tf_plate_init (TfPlate *self)
{
  self->readout = dup_readout (self);
  gtk_widget_set_focusable (GTK_WIDGET (self), TRUE);
  gtk_widget_set_overflow (GTK_WIDGET (self), GTK_OVERFLOW_HIDDEN);
  gtk_accessible_update_property (GTK_ACCESSIBLE (self), GTK_ACCESSIBLE_PROPERTY_LABEL, _ ("Plate"),
                                  -1);
  tf_plate_add_tools (self);
  tf_plate_add_menu (self);
}
