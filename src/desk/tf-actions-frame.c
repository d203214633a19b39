/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Commands of the frame on the plate: its geometry. */

#include "tf-window-private.h"

#include <glib/gi18n-lib.h>

#include "tf-geometry-dialog.h"

static TfSession *
session_of (gpointer window)
{
  return tf_window_get_session (TF_WINDOW (window));
}

#define ACTION(name) static void name (GSimpleAction *action, GVariant *value, gpointer window)

/* -- its geometry */

/* One dialog a window: asked for again it comes to the front. */
ACTION (correct_geometry)
{
  GtkWindow *open = g_object_get_data (window, "tf-geometry");
  if (open == NULL)
    {
      open = GTK_WINDOW (tf_geometry_dialog_new (GTK_WINDOW (window), session_of (window)));
      g_object_set_data (window, "tf-geometry", open);
      g_signal_connect_object (open, "destroy", G_CALLBACK (tf_window_forget_geometry), window,
                               G_CONNECT_SWAPPED);
    }
  gtk_window_present (open);
}

void
tf_window_forget_geometry (TfWindow *self)
{
  g_object_set_data (G_OBJECT (self), "tf-geometry", NULL);
}

ACTION (try_geometry)
{
  TfCorrection c;
  g_variant_get (value, "(dddd)", &c.centre_x, &c.centre_y, &c.radius_px, &c.north_angle_deg);
  tf_session_set_preview (session_of (window), &c);
}

ACTION (fit_limb) { tf_session_fit_limb (session_of (window)); }
ACTION (keep_geometry) { tf_session_keep_geometry (session_of (window)); }
ACTION (measure_again) { tf_session_measure_again (session_of (window)); }

static const GActionEntry entries[] = {
  { "correct-geometry", correct_geometry, NULL, NULL, NULL },
  { "try-geometry", try_geometry, "(dddd)", NULL, NULL },
  { "fit-limb", fit_limb, NULL, NULL, NULL },
  { "keep-geometry", keep_geometry, NULL, NULL, NULL },
  { "measure-again", measure_again, NULL, NULL, NULL },
};

void
tf_window_add_frame_actions (TfWindow *self)
{
  g_action_map_add_action_entries (G_ACTION_MAP (self), entries, G_N_ELEMENTS (entries), self);
}

static void
enable (TfWindow *self, const char *name, gboolean enabled)
{
  GAction *action = g_action_map_lookup_action (G_ACTION_MAP (self), name);
  g_simple_action_set_enabled (G_SIMPLE_ACTION (action), enabled);
}

void
tf_window_update_frame_actions (TfWindow *self)
{
  TfSession *session = tf_window_get_session (self);
  TfCorrection preview = tf_session_get_preview (session);
  gboolean can = tf_session_can_correct (session), writable = tf_session_is_writable (session);
  enable (self, "correct-geometry", can);
  enable (self, "try-geometry", can);
  enable (self, "fit-limb", can);
  enable (self, "keep-geometry", can && writable && tf_correction_is_set (&preview));
  enable (self, "measure-again", writable && tf_session_count_elsewhere (session) > 0);
}
