/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Commands of the plate: what lies over the picture, a position as text, the picture as a file. */

#include "tf-window-private.h"

#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-plate-shot.h"
#include "tf-preferences-dialog.h"
#include "tf-preferences.h"
#include "tf-save-as.h"

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

/* -- a position and the picture -------------------------------------------------------------- */

#define ACTION(name) static void name (GSimpleAction *action, GVariant *value, gpointer window)

/* Of the point under the pointer, else of the middle. */
ACTION (copy_position)
{
  TfSession *session = session_of (window);
  const TfView *view = tf_session_get_view (session);
  double x, y;
  if (!tf_session_get_pointer (session, &x, &y))
    {
      x = view->width / 2;
      y = view->height / 2;
    }
  g_autofree char *text = tf_plate_dup_position (session, x, y);
  if (text != NULL)
    gdk_clipboard_set_text (gtk_widget_get_clipboard (GTK_WIDGET (window)), text);
  tf_window_say (window, text != NULL ? text : _ ("That point is off the Sun."));
}

static void
save_picture_to (TfWindow *window, const char *what, const char *path)
{
  if (tf_session_get_frame (session_of (window)) != NULL)
    tf_plate_shot_save (session_of (window), path);
}

ACTION (save_picture)
{
  if (tf_session_get_frame (session_of (window)) == NULL)
    return;
  g_autofree char *name = tf_plate_shot_dup_name (session_of (window));
  tf_save_as_ask (window, _ ("Save the picture: PNG, SVG or PDF by its ending"), name, NULL,
                  save_picture_to);
}

ACTION (save_picture_as)
{
  save_picture_to (window, NULL, g_variant_get_string (value, NULL));
}

/* -- preferences */
ACTION (show_preferences)
{
  gtk_window_present (
      GTK_WINDOW (tf_preferences_dialog_new (GTK_WINDOW (window), session_of (window))));
}

ACTION (set_measure_option)
{
  const char *option, *text;
  g_autoptr (GError) error = NULL;
  g_variant_get (value, "(&s&s)", &option, &text);
  if (!tf_preferences_set_measure (session_of (window), option, text, &error))
    tf_window_say (window, error->message);
}

static const GActionEntry always[] = {
  { "preferences", show_preferences, NULL, NULL, NULL },
  { "set-measure-option", set_measure_option, "(ss)", NULL, NULL },
};

static const GActionEntry entries[] = {
  { "copy-position", copy_position, NULL, NULL, NULL },
  { "save-picture", save_picture, NULL, NULL, NULL },
  { "save-picture-as", save_picture_as, "s", NULL, NULL },
};

/* -- together -------------------------------------------------------------------------------- */

void
tf_window_add_plate_actions (TfWindow *self)
{
  add_overlays (self);
  g_action_map_add_action_entries (G_ACTION_MAP (self), entries, G_N_ELEMENTS (entries), self);
  g_action_map_add_action_entries (G_ACTION_MAP (self), always, G_N_ELEMENTS (always), self);
}

void
tf_window_update_plate_actions (TfWindow *self)
{
  TfSession *session = tf_window_get_session (self);
  for (guint k = 0; k < G_N_ELEMENTS (entries); k++)
    g_simple_action_set_enabled (
        G_SIMPLE_ACTION (g_action_map_lookup_action (G_ACTION_MAP (self), entries[k].name)),
        tf_session_get_frame (session) != NULL);
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
  tf_preferences_restore_measure (tf_window_get_session (self));
  tf_window_restore_units (self);
}
