/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The commands of the window: one row each. Buttons, menus, keys and the session bus all go
 * through these. */

#include "tf-window-private.h"

#include <math.h>
#include <string.h>

#include "tf-preferences.h"
#include "tf-save-as.h"

static const double zoom_step = 1.4;
static const char *const look_names[] = { "disk", "unrolled", "close" };
static const char *const palette_names[] = { "grey", "amber-indigo" };

static TfSession *
session_of (gpointer window)
{
  return tf_window_get_session (TF_WINDOW (window));
}

static int
index_of (const char *const *names, guint n, const char *name)
{
  for (guint k = 0; k < n; k++)
    if (strcmp (names[k], name) == 0)
      return (int)k;
  return -1;
}

#define ACTION(name) static void name (GSimpleAction *action, GVariant *value, gpointer window)

/* -- ledger and frames */
ACTION (new_ledger) { tf_window_choose_new_ledger (window); }
ACTION (make_here) { tf_window_make_here (window); }
ACTION (open_ledger) { tf_window_choose_ledger (window); }
ACTION (open_demo) { tf_window_open_demo (window); }
ACTION (add_frames) { tf_window_choose_frames (window); }
ACTION (cancel_work) { tf_session_cancel (session_of (window)); }
ACTION (next_frame) { tf_session_step_frame (session_of (window), 1); }
ACTION (previous_frame) { tf_session_step_frame (session_of (window), -1); }
ACTION (refresh) { tf_session_refresh (session_of (window), TRUE); }

ACTION (open_path)
{
  const char *paths[] = { g_variant_get_string (value, NULL), NULL };
  tf_window_open (window, (char *const *)paths);
}

ACTION (make_ledger)
{
  const char *path, *letter;
  g_variant_get (value, "(&s&s)", &path, &letter);
  if (letter[0] >= 'A' && letter[0] <= 'Z' && letter[1] == '\0')
    tf_session_open_ledger (session_of (window), path, letter[0]);
}

/* -- the person */
ACTION (ask_person) { tf_window_ask_person (window, NULL); }
ACTION (set_person)
{
  tf_preferences_set ("person", g_variant_get_string (value, NULL));
  tf_session_set_person (session_of (window), g_variant_get_string (value, NULL));
}

/* -- choosing and judging */

/* When no hint waits on this frame: on to the next frame where one does. */
static void
step_hint (gpointer window, int step)
{
  TfSession *session = session_of (window);
  if (!tf_session_step_hint (session, step))
    tf_session_step_waiting_frame (session, step);
}

ACTION (next_hint) { step_hint (window, 1); }
ACTION (previous_hint) { step_hint (window, -1); }

/* A deed that needs a name asks for it and is then done. */
void
tf_window_judge (gpointer window, GSimpleAction *action, gboolean (*deed) (TfSession *))
{
  if (tf_session_get_person (tf_window_get_session (window)) == NULL)
    tf_window_ask_person (window, g_action_get_name (G_ACTION (action)));
  else
    deed (tf_window_get_session (window));
}

ACTION (keep) { tf_window_judge (window, action, tf_session_keep); }
ACTION (drop_hint) { tf_window_judge (window, action, tf_session_drop); }
ACTION (withdraw) { tf_window_judge (window, action, tf_session_withdraw); }
ACTION (undo) { tf_session_undo (session_of (window)); }
ACTION (redo) { tf_session_redo (session_of (window)); }
ACTION (set_class)
{
  tf_session_set_class (session_of (window), g_variant_get_string (value, NULL));
}
ACTION (set_note) { tf_session_set_note (session_of (window), g_variant_get_string (value, NULL)); }
ACTION (retry) { tf_session_retry (session_of (window)); }
ACTION (forget_trouble) { tf_session_forget_feed_trouble (session_of (window)); }
ACTION (give_up) { tf_session_give_up (session_of (window)); }

/* -- drawing */
static void
toggle_tool (gpointer window, TfTool tool)
{
  TfSession *session = session_of (window);
  tf_session_set_tool (session, tf_session_get_tool (session) == tool ? TF_TOOL_NONE : tool);
  if (tf_session_get_tool (session) != TF_TOOL_NONE)
    tf_window_focus_plate (window);
}

ACTION (draw) { toggle_tool (window, TF_TOOL_OUTLINE); }
ACTION (polygon) { toggle_tool (window, TF_TOOL_POLYGON); }
ACTION (finish_drawing) { tf_session_finish_line (session_of (window)); }

/* First the tool or the line in hand, then the split proposed, then the draft, then the choice. */
ACTION (cancel_drawing)
{
  TfSession *session = session_of (window);
  if (tf_session_get_tool (session) != TF_TOOL_NONE)
    tf_session_set_tool (session, TF_TOOL_NONE);
  else if (tf_session_leave_proposal (session))
    return;
  else if (tf_session_get_draft (session) != NULL)
    tf_session_discard_draft (session);
  else
    tf_session_choose_region (session, NULL);
}

/* -- the view */
ACTION (fit) { tf_session_fit (session_of (window)); }

static void
zoom (gpointer window, double factor)
{
  const TfView *view = tf_session_get_view (session_of (window));
  tf_session_zoom (session_of (window), factor, view->width / 2, view->height / 2);
}

ACTION (zoom_in) { zoom (window, zoom_step); }
ACTION (zoom_out) { zoom (window, 1 / zoom_step); }

ACTION (change_look)
{
  int look = index_of (look_names, G_N_ELEMENTS (look_names), g_variant_get_string (value, NULL));
  if (look >= 0)
    tf_session_set_look (session_of (window), (TfLook)look);
}

ACTION (change_palette)
{
  int palette
      = index_of (palette_names, G_N_ELEMENTS (palette_names), g_variant_get_string (value, NULL));
  if (palette < 0)
    return;
  tf_preferences_set ("palette", palette_names[palette]);
  tf_session_set_palette (session_of (window), (TfPalette)palette);
}

ACTION (change_north_up)
{
  tf_session_set_north_up (session_of (window), g_variant_get_boolean (value));
}
ACTION (change_show_hints)
{
  tf_session_set_show_hints (session_of (window), g_variant_get_boolean (value));
}
ACTION (change_range)
{
  if (isfinite (g_variant_get_double (value)))
    tf_session_set_range (session_of (window), g_variant_get_double (value));
}
ACTION (show_all_times) { tf_session_pick (session_of (window), NAN, NAN); }

/* -- the rest */
ACTION (press) { tf_window_press (window, g_variant_get_string (value, NULL)); }
ACTION (focus_plate) { tf_window_focus_plate (window); }
ACTION (about) { tf_window_show_about (window); }
ACTION (cautions) { tf_window_show_cautions (window); }

static const GActionEntry entries[] = {
  { "new-ledger", new_ledger, NULL, NULL, NULL },
  { "make-here", make_here, NULL, NULL, NULL },
  { "open-ledger", open_ledger, NULL, NULL, NULL },
  { "open-demo", open_demo, NULL, NULL, NULL },
  { "open-path", open_path, "s", NULL, NULL },
  { "make-ledger", make_ledger, "(ss)", NULL, NULL },
  { "add-frames", add_frames, NULL, NULL, NULL },
  { "cancel-work", cancel_work, NULL, NULL, NULL },
  { "refresh", refresh, NULL, NULL, NULL },
  { "next-frame", next_frame, NULL, NULL, NULL },
  { "previous-frame", previous_frame, NULL, NULL, NULL },
  { "ask-person", ask_person, NULL, NULL, NULL },
  { "set-person", set_person, "s", NULL, NULL },
  { "next-hint", next_hint, NULL, NULL, NULL },
  { "previous-hint", previous_hint, NULL, NULL, NULL },
  { "keep", keep, NULL, NULL, NULL },
  { "drop-hint", drop_hint, NULL, NULL, NULL },
  { "withdraw", withdraw, NULL, NULL, NULL },
  { "undo", undo, NULL, NULL, NULL },
  { "redo", redo, NULL, NULL, NULL },
  { "class", set_class, "s", NULL, NULL },
  { "note", set_note, "s", NULL, NULL },
  { "retry", retry, NULL, NULL, NULL },
  { "forget-trouble", forget_trouble, NULL, NULL, NULL },
  { "give-up", give_up, NULL, NULL, NULL },
  { "draw", draw, NULL, "false", NULL },
  { "polygon", polygon, NULL, "false", NULL },
  { "finish-drawing", finish_drawing, NULL, NULL, NULL },
  { "cancel-drawing", cancel_drawing, NULL, NULL, NULL },
  { "fit", fit, NULL, NULL, NULL },
  { "zoom-in", zoom_in, NULL, NULL, NULL },
  { "zoom-out", zoom_out, NULL, NULL, NULL },
  { "look", NULL, "s", "'disk'", change_look },
  { "palette", NULL, "s", "'grey'", change_palette },
  { "north-up", NULL, NULL, "true", change_north_up },
  { "range", NULL, "d", "200.0", change_range },
  { "show-hints", NULL, NULL, "false", change_show_hints },
  { "show-all-times", show_all_times, NULL, NULL, NULL },
  { "press", press, "s", NULL, NULL },
  { "focus-plate", focus_plate, NULL, NULL, NULL },
  { "about", about, NULL, NULL, NULL },
  { "cautions", cautions, NULL, NULL, NULL },
};

void
tf_window_add_actions (TfWindow *self)
{
  g_action_map_add_action_entries (G_ACTION_MAP (self), entries, G_N_ELEMENTS (entries), self);
  tf_window_add_plate_actions (self);
  tf_save_as_add_actions (self);
  tf_window_add_frame_actions (self);
  tf_window_add_list_actions (self);
  tf_window_add_tool_actions (self);
  tf_window_add_mark_actions (self);
}

void
tf_window_enable (TfWindow *self, const char *name, gboolean enabled)
{
  GAction *action = g_action_map_lookup_action (G_ACTION_MAP (self), name);
  g_simple_action_set_enabled (G_SIMPLE_ACTION (action), enabled);
}

static void
set_state (TfWindow *self, const char *name, GVariant *floating)
{
  g_autoptr (GVariant) state = g_variant_ref_sink (floating);
  GAction *action = g_action_map_lookup_action (G_ACTION_MAP (self), name);
  g_autoptr (GVariant) now = g_action_get_state (action);
  if (!g_variant_equal (now, state))
    g_simple_action_set_state (G_SIMPLE_ACTION (action), state);
}

static gboolean
has_hint (TfSession *session)
{
  GListModel *regions = tf_session_get_regions (session);
  guint n = g_list_model_get_n_items (regions);
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfRegionItem) item = g_list_model_get_item (regions, k);
      if (tf_region_item_get_row (item)->is_hint)
        return TRUE;
    }
  return FALSE;
}

static void
update_states (TfWindow *self, TfSession *session)
{
  TfTool tool = tf_session_get_tool (session);
  set_state (self, "draw", g_variant_new_boolean (tool == TF_TOOL_OUTLINE));
  set_state (self, "polygon", g_variant_new_boolean (tool == TF_TOOL_POLYGON));
  set_state (self, "look", g_variant_new_string (look_names[tf_session_get_view (session)->look]));
  set_state (self, "palette",
             g_variant_new_string (palette_names[tf_session_get_palette (session)]));
  set_state (self, "north-up", g_variant_new_boolean (tf_session_get_north_up (session)));
  set_state (self, "range", g_variant_new_double (tf_session_get_range (session)));
  set_state (self, "show-hints", g_variant_new_boolean (tf_session_get_show_hints (session)));
}

void
tf_window_update_actions (TfWindow *self)
{
  TfSession *session = tf_window_get_session (self);
  if (session == NULL)
    return;
  const TfVertex *line;
  guint n;
  tf_session_get_line (session, &line, &n);
  gboolean frame = tf_session_get_frame (session) != NULL, hint = has_hint (session);
  gboolean drawing
      = tf_session_get_tool (session) != TF_TOOL_NONE || tf_session_get_draft (session) != NULL;
  static const char *const on_frame[] = { "draw", "polygon", "fit", "zoom-in", "zoom-out" };
  for (guint k = 0; k < G_N_ELEMENTS (on_frame); k++)
    tf_window_enable (self, on_frame[k], frame);
  tf_window_enable (self, "make-here", tf_window_can_make_here (self));
  gboolean waiting = hint || tf_session_has_waiting_frame (session);
  tf_window_enable (self, "next-hint", waiting);
  tf_window_enable (self, "previous-hint", waiting);
  tf_window_enable (self, "keep", tf_session_can_keep (session));
  tf_window_enable (self, "drop-hint", tf_session_can_drop (session));
  tf_window_enable (self, "withdraw", tf_session_can_withdraw (session));
  tf_window_enable (self, "class", tf_session_can_describe (session));
  tf_window_enable (self, "note", tf_session_can_describe (session));
  tf_window_enable (self, "undo", tf_session_can_undo (session));
  tf_window_enable (self, "redo", tf_session_can_redo (session));
  tf_window_enable (self, "finish-drawing",
          n >= (tf_session_get_tool (session) == TF_TOOL_SPLIT ? 2 : 3));
  tf_window_enable (self, "cancel-drawing", drawing || tf_session_get_region (session) != NULL);
  tf_window_enable (self, "cancel-work", tf_session_get_progress (session, NULL) != NULL);
  tf_window_enable (self, "retry", tf_session_get_problem (session) != NULL);
  tf_window_enable (self, "give-up", tf_session_get_problem (session) != NULL);
  update_states (self, session);
  tf_window_update_plate_actions (self);
  tf_window_update_frame_actions (self);
  tf_window_update_list_actions (self);
  tf_window_update_tool_actions (self);
  tf_window_update_mark_actions (self);
}
