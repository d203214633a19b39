/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Commands of the hand on an outline, of several outlines chosen at once, and of carrying. */

#include "tf-window-private.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

static const double size_step = 1.25;

static TfSession *
session_of (gpointer window)
{
  return tf_window_get_session (TF_WINDOW (window));
}

#define ACTION(name) static void name (GSimpleAction *action, GVariant *value, gpointer window)

/* -- tools: one row each, the action's state is whether it is in hand */
static const struct
{
  const char *action;
  TfTool tool;
} tools[] = {
  { "brush-in", TF_TOOL_BRUSH_IN },   { "brush-out", TF_TOOL_BRUSH_OUT },
  { "split", TF_TOOL_SPLIT },         { "leave-out", TF_TOOL_LEAVE_OUT },
  { "corners", TF_TOOL_CORNERS },     { "pin", TF_TOOL_PIN },
};

static void
toggle_tool (GSimpleAction *action, GVariant *value, gpointer window)
{
  TfSession *session = session_of (window);
  for (guint k = 0; k < G_N_ELEMENTS (tools); k++)
    if (strcmp (tools[k].action, g_action_get_name (G_ACTION (action))) == 0)
      {
        TfTool now = tf_session_get_tool (session);
        tf_session_set_tool (session, now == tools[k].tool ? TF_TOOL_NONE : tools[k].tool);
      }
  tf_window_focus_plate (window);
}

ACTION (brush_larger)
{
  tf_session_set_brush (session_of (window), tf_session_get_brush (session_of (window)) * size_step);
}
ACTION (brush_smaller)
{
  tf_session_set_brush (session_of (window), tf_session_get_brush (session_of (window)) / size_step);
}

/* -- several, joining, carrying */
ACTION (join)
{
  TfSession *session = session_of (window);
  if (tf_session_get_n_chosen (session) > 1)
    tf_session_join (session);
  else
    tf_session_set_tool (session, tf_session_get_tool (session) == TF_TOOL_JOIN ? TF_TOOL_NONE
                                                                                : TF_TOOL_JOIN);
}
ACTION (extend_next) { tf_session_extend_hint (session_of (window), 1); }
ACTION (extend_previous) { tf_session_extend_hint (session_of (window), -1); }
ACTION (choose_all) { tf_session_choose_all (session_of (window)); }
ACTION (next_mark) { tf_session_step_mark (session_of (window), 1); }
ACTION (previous_mark) { tf_session_step_mark (session_of (window), -1); }
ACTION (carry) { tf_session_carry (session_of (window)); }
ACTION (carry_on) { tf_session_carry_on (session_of (window)); }

/* -- a pinned pole */
ACTION (pin_at)
{
  const char *reason;
  double lon, lat;
  gint32 polarity;
  g_variant_get (value, "(idd&s)", &polarity, &lon, &lat, &reason);
  tf_session_pin_pole (session_of (window), polarity, lon, lat, reason);
}
ACTION (pin_here)
{
  double lon, lat;
  g_variant_get (value, "(dd)", &lon, &lat);
  tf_window_ask_pin (window, lon, lat);
}
ACTION (unpin) { tf_session_pin_pole (session_of (window), 0, 0, 0, NULL); }

/* -- facts of the chosen region, the journal */
ACTION (set_label)
{
  TfRegionItem *region = tf_session_get_region (session_of (window));
  if (region != NULL)
    tf_session_set_label_of (session_of (window), region, g_variant_get_string (value, NULL));
}
ACTION (set_external)
{
  TfRegionItem *region = tf_session_get_region (session_of (window));
  if (region != NULL)
    tf_session_set_external_of (session_of (window), region, g_variant_get_string (value, NULL));
}
ACTION (journal) { tf_window_show_journal (window, NULL); }
ACTION (journal_of)
{
  tf_window_show_journal (window, tf_session_get_region (session_of (window)));
}

static const GActionEntry entries[] = {
  { "brush-in", toggle_tool, NULL, "false", NULL },
  { "brush-out", toggle_tool, NULL, "false", NULL },
  { "split", toggle_tool, NULL, "false", NULL },
  { "leave-out", toggle_tool, NULL, "false", NULL },
  { "corners", toggle_tool, NULL, "false", NULL },
  { "pin", toggle_tool, NULL, "false", NULL },
  { "brush-larger", brush_larger, NULL, NULL, NULL },
  { "brush-smaller", brush_smaller, NULL, NULL, NULL },
  { "join", join, NULL, NULL, NULL },
  { "extend-next", extend_next, NULL, NULL, NULL },
  { "extend-previous", extend_previous, NULL, NULL, NULL },
  { "choose-all", choose_all, NULL, NULL, NULL },
  { "next-mark", next_mark, NULL, NULL, NULL },
  { "previous-mark", previous_mark, NULL, NULL, NULL },
  { "carry", carry, NULL, NULL, NULL },
  { "carry-on", carry_on, NULL, NULL, NULL },
  { "pin-at", pin_at, "(idds)", NULL, NULL },
  { "pin-here", pin_here, "(dd)", NULL, NULL },
  { "unpin", unpin, NULL, NULL, NULL },
  { "label", set_label, "s", NULL, NULL },
  { "external-number", set_external, "s", NULL, NULL },
  { "journal", journal, NULL, NULL, NULL },
  { "journal-of-region", journal_of, NULL, NULL, NULL },
};

void
tf_window_add_tool_actions (TfWindow *self)
{
  g_action_map_add_action_entries (G_ACTION_MAP (self), entries, G_N_ELEMENTS (entries), self);
}

void
tf_window_update_tool_actions (TfWindow *self)
{
  TfSession *session = tf_window_get_session (self);
  gboolean frame = tf_session_get_frame (session) != NULL;
  TfOutline *base = frame ? tf_session_get_base (session) : NULL;
  guint regions = g_list_model_get_n_items (tf_session_get_regions (session));
  for (guint k = 0; k < G_N_ELEMENTS (tools); k++)
    {
      GAction *action = g_action_map_lookup_action (G_ACTION_MAP (self), tools[k].action);
      gboolean in_hand = tf_session_get_tool (session) == tools[k].tool;
      tf_window_enable (self, tools[k].action, base != NULL || in_hand);
      g_simple_action_set_state (G_SIMPLE_ACTION (action), g_variant_new_boolean (in_hand));
    }
  static const char *const of_base[] = { "pin-at", "pin-here" };
  for (guint k = 0; k < G_N_ELEMENTS (of_base); k++)
    tf_window_enable (self, of_base[k], base != NULL);
  tf_window_enable (self, "unpin", base != NULL && tf_outline_get_n_pins (base) > 0);
  tf_window_enable (self, "join", tf_session_can_join (session));
  static const char *const of_regions[]
      = { "extend-next", "extend-previous", "choose-all", "next-mark", "previous-mark" };
  for (guint k = 0; k < G_N_ELEMENTS (of_regions); k++)
    tf_window_enable (self, of_regions[k], regions > 0);
  tf_window_enable (self, "carry", tf_session_can_carry (session));
  tf_window_enable (self, "carry-on", tf_session_can_carry_on (session));
  gboolean describe = tf_session_can_describe (session);
  static const char *const of_mark[] = { "label", "external-number", "journal-of-region" };
  for (guint k = 0; k < G_N_ELEMENTS (of_mark); k++)
    tf_window_enable (self, of_mark[k], describe);
  tf_window_enable (self, "journal", tf_session_has_ledger (session));
}
