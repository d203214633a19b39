/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Commands of the Mark bench that judge: keeping as a new region, and the split that is proposed; and
 * the units in which the window shows numbers. */

#include "tf-window-private.h"

#include <string.h>

#include "tf-preferences.h"

static TfSession *
session_of (gpointer window)
{
  return tf_window_get_session (TF_WINDOW (window));
}

#define ACTION(name) static void name (GSimpleAction *action, GVariant *value, gpointer window)

ACTION (keep_new)
{
  if (tf_session_get_person (session_of (window)) == NULL)
    tf_window_ask_person (window, g_action_get_name (G_ACTION (action)));
  else
    tf_session_keep_new (session_of (window));
}
ACTION (split_proposed) { tf_session_split_proposed (session_of (window)); }

/* "units-flux", "units-field", "units-length": kept in the preferences under the same names. */
static void
set_unit (TfSession *session, const char *action, const char *wanted)
{
  const char *name = action + strlen ("units-");
  for (guint kind = 0; kind < TF_N_UNITS; kind++)
    for (guint k = 0; k < 2 && strcmp (name, tf_unit_name (kind)) == 0; k++)
      if (g_strcmp0 (wanted, tf_unit_choice (kind, k)) == 0)
        tf_session_set_unit (session, kind, k);
}

ACTION (change_unit)
{
  const char *name = g_action_get_name (G_ACTION (action));
  set_unit (session_of (window), name, g_variant_get_string (value, NULL));
  tf_preferences_set (name, g_variant_get_string (value, NULL));
}

static const GActionEntry entries[] = {
  { "keep-new", keep_new, NULL, NULL, NULL },
  { "split-proposed", split_proposed, NULL, NULL, NULL },
  { "units-flux", NULL, "s", "'Mx'", change_unit },
  { "units-field", NULL, "s", "'G'", change_unit },
  { "units-length", NULL, "s", "'degrees'", change_unit },
};

void
tf_window_add_mark_actions (TfWindow *self)
{
  g_action_map_add_action_entries (G_ACTION_MAP (self), entries, G_N_ELEMENTS (entries), self);
}

void
tf_window_restore_units (TfWindow *self)
{
  for (guint kind = 0; kind < TF_N_UNITS; kind++)
    {
      g_autofree char *name = g_strconcat ("units-", tf_unit_name (kind), NULL);
      g_autofree char *kept = tf_preferences_dup (name);
      if (kept != NULL)
        set_unit (tf_window_get_session (self), name, kept);
    }
}

static void
show_units (TfWindow *self, TfUnits units)
{
  for (guint kind = 0; kind < TF_N_UNITS; kind++)
    {
      g_autofree char *name = g_strconcat ("units-", tf_unit_name (kind), NULL);
      g_autoptr (GVariant) state
          = g_variant_ref_sink (g_variant_new_string (tf_unit_choice (kind, units.choice[kind])));
      GAction *action = g_action_map_lookup_action (G_ACTION_MAP (self), name);
      g_autoptr (GVariant) now = g_action_get_state (action);
      if (!g_variant_equal (now, state))
        g_simple_action_set_state (G_SIMPLE_ACTION (action), state);
    }
}

void
tf_window_update_mark_actions (TfWindow *self)
{
  TfSession *session = tf_window_get_session (self);
  show_units (self, tf_session_get_units (session));
  tf_window_enable (self, "keep-new", tf_session_can_keep_new (session));
  tf_window_enable (self, "split-proposed", tf_session_get_proposal (session) != NULL);
}
