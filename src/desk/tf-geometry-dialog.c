/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-geometry-dialog.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-slip-words.h"

enum
{
  N_VALUES = 4
};

struct _TfGeometryDialog
{
  AdwWindow parent;
  GtkSpinButton *values[N_VALUES];
  GtkLabel *headers[N_VALUES], *changes[N_VALUES];
  GtkLabel *effect;
  TfSession *session;
  TfFrameItem *item; /* of the frame it was opened for */
  gboolean setting;
};

G_DEFINE_FINAL_TYPE (TfGeometryDialog, tf_geometry_dialog, ADW_TYPE_WINDOW)

static void
to_numbers (const TfCorrection *c, double numbers[N_VALUES])
{
  numbers[0] = c->centre_x;
  numbers[1] = c->centre_y;
  numbers[2] = c->radius_px;
  numbers[3] = c->north_angle_deg;
}

static TfCorrection
header_of (TfGeometryDialog *self)
{
  return tf_correction_of (tf_session_get_header_geometry (self->session));
}

/* -- what it would change -------------------------------------------------------------------- */

/* How far a place on the equator, 60 degrees west of the central meridian, goes. NaN when it leaves
 * the disk. */
static double
place_moves (const TfGeometry *from, const TfCorrection *correction)
{
  TfGeometry to;
  TfPlace place;
  double x, y, lon = tf_geometry_central_carrington (from) + 60;
  if (!tf_correction_apply (correction, from, &to)
      || !tf_geometry_sun_to_pixel (from, lon, 0, &x, &y, NULL)
      || !tf_geometry_pixel_to_sun (&to, x, y, &place))
    return NAN;
  return tf_sphere_distance (lon, 0, place.carrington_lon_deg, place.lat_deg);
}

static void
show_effect (TfGeometryDialog *self, const TfCorrection *now)
{
  double moves = place_moves (tf_session_get_header_geometry (self->session), now);
  g_autofree char *degrees = tf_words_dup_number (moves, 2);
  g_autofree char *text
      = isfinite (moves)
            ? g_strdup_printf (_ ("A place 60° from the central meridian moves by %s°."), degrees)
            : g_strdup (_ ("A place 60° from the central meridian would leave the disk."));
  gtk_label_set_label (self->effect, text);
}

static void
show (TfGeometryDialog *self)
{
  double header[N_VALUES], now[N_VALUES];
  TfCorrection was = header_of (self), c = tf_session_get_preview (self->session);
  if (!tf_correction_is_set (&c) || !tf_correction_is_set (&was))
    return;
  to_numbers (&was, header);
  to_numbers (&c, now);
  self->setting = TRUE;
  for (guint k = 0; k < N_VALUES; k++)
    {
      g_autofree char *first = tf_words_dup_number (header[k], 2),
                      *change = tf_words_dup_signed (now[k] - header[k], 2);
      gtk_label_set_label (self->headers[k], first);
      gtk_label_set_label (self->changes[k], change);
      if (fabs (gtk_spin_button_get_value (self->values[k]) - now[k]) > 0.005)
        gtk_spin_button_set_value (self->values[k], now[k]);
    }
  self->setting = FALSE;
  show_effect (self, &c);
}

static void
value_changed (TfGeometryDialog *self)
{
  if (self->setting || self->session == NULL)
    return;
  TfCorrection c = { gtk_spin_button_get_value (self->values[0]),
                     gtk_spin_button_get_value (self->values[1]),
                     gtk_spin_button_get_value (self->values[2]),
                     gtk_spin_button_get_value (self->values[3]) };
  tf_session_set_preview (self->session, &c);
}

/* -- commands -------------------------------------------------------------------------------- */

static void
fit_limb (GtkWidget *widget, const char *name, GVariant *parameter)
{
  tf_session_fit_limb (TF_GEOMETRY_DIALOG (widget)->session);
}

static void
as_header (GtkWidget *widget, const char *name, GVariant *parameter)
{
  TfGeometryDialog *self = TF_GEOMETRY_DIALOG (widget);
  TfCorrection header = header_of (self);
  tf_session_set_preview (self->session, &header);
}

static void
keep (GtkWidget *widget, const char *name, GVariant *parameter)
{
  TfGeometryDialog *self = TF_GEOMETRY_DIALOG (widget);
  if (tf_session_keep_geometry (self->session) || tf_session_get_person (self->session) != NULL)
    gtk_window_close (GTK_WINDOW (self));
}

static void
frame_changed (TfGeometryDialog *self)
{
  if (tf_session_get_frame_item (self->session) != self->item)
    gtk_window_close (GTK_WINDOW (self));
}

static void
dispose (GObject *object)
{
  TfGeometryDialog *self = TF_GEOMETRY_DIALOG (object);
  if (self->session != NULL)
    {
      g_signal_handlers_disconnect_by_data (self->session, self);
      tf_session_set_preview (self->session, NULL);
    }
  g_clear_object (&self->session);
  g_clear_object (&self->item);
  G_OBJECT_CLASS (tf_geometry_dialog_parent_class)->dispose (object);
}

static void
bind (GtkWidgetClass *widget, const char *name, gssize offset)
{
  gtk_widget_class_bind_template_child_full (widget, name, FALSE, offset);
}

static void
tf_geometry_dialog_class_init (TfGeometryDialogClass *klass)
{
  static const char *const names[N_VALUES] = { "centre_x", "centre_y", "radius", "north" };
  GtkWidgetClass *widget = GTK_WIDGET_CLASS (klass);
  G_OBJECT_CLASS (klass)->dispose = dispose;
  gtk_widget_class_set_template_from_resource (widget,
                                               "/io/tiltfield/Tiltfield/geometry-dialog.ui");
  for (gssize k = 0; k < N_VALUES; k++)
    {
      gssize step = k * (gssize)sizeof (gpointer);
      g_autofree char *header = g_strconcat (names[k], "_header", NULL),
                      *change = g_strconcat (names[k], "_change", NULL);
      bind (widget, names[k], G_STRUCT_OFFSET (TfGeometryDialog, values) + step);
      bind (widget, header, G_STRUCT_OFFSET (TfGeometryDialog, headers) + step);
      bind (widget, change, G_STRUCT_OFFSET (TfGeometryDialog, changes) + step);
    }
  gtk_widget_class_bind_template_child (widget, TfGeometryDialog, effect);
  gtk_widget_class_bind_template_callback (widget, value_changed);
  gtk_widget_class_install_action (widget, "geometry.fit-limb", NULL, fit_limb);
  gtk_widget_class_install_action (widget, "geometry.as-header", NULL, as_header);
  gtk_widget_class_install_action (widget, "geometry.keep", NULL, keep);
  gtk_widget_class_add_binding_action (widget, GDK_KEY_Escape, 0, "window.close", NULL);
}

static void
tf_geometry_dialog_init (TfGeometryDialog *self)
{
  gtk_widget_init_template (GTK_WIDGET (self));
}

GtkWidget *
tf_geometry_dialog_new (GtkWindow *parent, TfSession *session)
{
  g_return_val_if_fail (TF_IS_SESSION (session) && tf_session_can_correct (session), NULL);
  TfGeometryDialog *self
      = g_object_new (TF_TYPE_GEOMETRY_DIALOG, "transient-for", parent, NULL);
  self->session = g_object_ref (session);
  self->item = g_object_ref (tf_session_get_frame_item (session));
  TfCorrection now = tf_correction_of (tf_frame_get_geometry (tf_session_get_frame (session)));
  tf_session_set_preview (session, &now);
  g_signal_connect_object (session, "overlays-changed", G_CALLBACK (show), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "frame-changed", G_CALLBACK (frame_changed), self,
                           G_CONNECT_SWAPPED);
  gtk_widget_action_set_enabled (GTK_WIDGET (self), "geometry.keep",
                                 tf_session_is_writable (session));
  show (self);
  return GTK_WIDGET (self);
}
