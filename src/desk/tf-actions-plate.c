/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Commands of the plate: what lies over the picture. */

#include "tf-window-private.h"

#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-preferences.h"

static TfSession *
session_of (gpointer window)
{
  return tf_window_get_session (TF_WINDOW (window));
}

/* -- what lies over the picture -------------------------------------------------------------- */

static const char overlay_head[] = "overlay-";

static void
keep_overlays (TfSession *session)
{
  GString *text = g_string_new (NULL);
  for (guint part = 0; part < TF_N_OVERLAYS; part++)
    if (tf_session_get_overlay (session, (TfOverlayPart)part))
      g_string_append_printf (text, "%s%s", text->len > 0 ? " " : "",
                              tf_overlay_name ((TfOverlayPart)part));
  tf_preferences_set ("overlays", text->str);
  g_string_free (text, TRUE);
}

static void
change_overlay (GSimpleAction *action, GVariant *value, gpointer window)
{
  const char *name = g_action_get_name (G_ACTION (action)) + strlen (overlay_head);
  for (guint part = 0; part < TF_N_OVERLAYS; part++)
    if (strcmp (name, tf_overlay_name ((TfOverlayPart)part)) == 0)
      tf_session_set_overlay (session_of (window), (TfOverlayPart)part,
                              g_variant_get_boolean (value));
  keep_overlays (session_of (window));
}

static void
restore_overlays (TfSession *session)
{
  g_autofree char *text = tf_preferences_dup ("overlays");
  if (text == NULL)
    return;
  g_auto (GStrv) on = g_strsplit (text, " ", -1);
  for (guint part = 0; part < TF_N_OVERLAYS; part++)
    tf_session_set_overlay (
        session, (TfOverlayPart)part,
        g_strv_contains ((const char *const *)on, tf_overlay_name ((TfOverlayPart)part)));
}

static void
add_overlays (TfWindow *self)
{
  for (guint part = 0; part < TF_N_OVERLAYS; part++)
    {
      g_autofree char *name
          = g_strconcat (overlay_head, tf_overlay_name ((TfOverlayPart)part), NULL);
      g_autoptr (GSimpleAction) action
          = g_simple_action_new_stateful (name, NULL, g_variant_new_boolean (FALSE));
      g_signal_connect (action, "change-state", G_CALLBACK (change_overlay), self);
      g_action_map_add_action (G_ACTION_MAP (self), G_ACTION (action));
    }
}

/* -- together -------------------------------------------------------------------------------- */

void
tf_window_add_plate_actions (TfWindow *self)
{
  add_overlays (self);
}

void
tf_window_update_plate_actions (TfWindow *self)
{
  TfSession *session = tf_window_get_session (self);
  for (guint part = 0; part < TF_N_OVERLAYS; part++)
    {
      g_autofree char *name
          = g_strconcat (overlay_head, tf_overlay_name ((TfOverlayPart)part), NULL);
      GAction *action = g_action_map_lookup_action (G_ACTION_MAP (self), name);
      g_simple_action_set_state (
          G_SIMPLE_ACTION (action),
          g_variant_new_boolean (tf_session_get_overlay (session, (TfOverlayPart)part)));
    }
}

void
tf_window_restore_plate (TfWindow *self)
{
  restore_overlays (tf_window_get_session (self));
}
