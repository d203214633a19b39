/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Commands of the Laws bench, of divides, and of the stretches on the wings. */

#include "tf-actions-laws.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-session-laws.h"
#include "tf-window-private.h"

static TfSession *
session_of (gpointer window)
{
  return tf_window_get_session (TF_WINDOW (window));
}

#define ACTION(name) static void name (GSimpleAction *action, GVariant *value, gpointer window)

/* -- benches and charts */
ACTION (change_bench)
{
  if (tf_window_show_bench (TF_WINDOW (window), g_variant_get_string (value, NULL)))
    g_simple_action_set_state (action, value);
}

ACTION (enlarge) { tf_window_enlarge_chart (TF_WINDOW (window), g_variant_get_string (value, NULL)); }

ACTION (open_mark)
{
  gint64 mark;
  gboolean hint;
  g_variant_get (value, "(xb)", &mark, &hint);
  tf_session_choose_sighting (session_of (window), 0, (TfSight){ mark, hint });
  g_action_group_activate_action (G_ACTION_GROUP (window), "bench", g_variant_new_string ("mark"));
}

ACTION (count_hints)
{
  g_autoptr (TfStudy) study = tf_study_copy (tf_session_get_study (session_of (window)));
  study->sieve.with_hints = TRUE;
  tf_session_set_study (session_of (window), study);
  tf_session_set_show_hints (session_of (window), TRUE);
}

ACTION (change_relations)
{
  tf_session_set_all_relations (session_of (window), g_variant_get_boolean (value));
}

/* -- stretches */
ACTION (stretch)
{
  if (!tf_session_pick_named (session_of (window), g_variant_get_string (value, NULL)))
    tf_window_say (window, _ ("Choose a frame with a known time first."));
}

ACTION (pick)
{
  double from, to, low, high;
  g_variant_get (value, "(dddd)", &from, &to, &low, &high);
  tf_session_pick_band (session_of (window), from, to, low, high);
}

/* -- divides */
ACTION (next_divide)
{
  double from, to;
  tf_window_get_wings_span (window, &from, &to);
  tf_session_step_divide (session_of (window), 1, from, to);
}

ACTION (choose_divide)
{
  int cycle, side;
  g_variant_get (value, "(ii)", &cycle, &side);
  tf_session_choose_divide (session_of (window), cycle, side, TF_WINGS_WHOLE);
}

ACTION (next_handle)
{
  const TfDivideHold hold = *tf_session_get_divide (session_of (window));
  int handle = hold.handle < TF_WINGS_BAND ? hold.handle + 1 : TF_WINGS_WHOLE;
  if (hold.in_hand)
    tf_session_turn_divide (session_of (window), handle);
  else
    tf_session_choose_divide (session_of (window), hold.cycle, hold.hemisphere, handle);
}

ACTION (move_divide) { tf_session_move_divide (session_of (window), g_variant_get_double (value)); }

ACTION (shift_divide) { tf_session_shift_divide (session_of (window), g_variant_get_int32 (value)); }

ACTION (next_minimum)
{
  if (!tf_session_take_provisional (session_of (window)))
    tf_window_say (window, _ ("A divide can be moved on the Laws bench, in a ledger that can be written to."));
}

/* A deed that needs a name asks for it and is then done. */
static void
with_person (gpointer window, GSimpleAction *action, gboolean (*deed) (TfSession *))
{
  if (tf_session_get_person (session_of (window)) == NULL)
    tf_window_ask_person (window, g_action_get_name (G_ACTION (action)));
  else
    deed (session_of (window));
}

ACTION (keep_divide) { with_person (window, action, tf_session_keep_divide); }
ACTION (compute_divide) { with_person (window, action, tf_session_compute_divide); }

ACTION (put_back_divide)
{
  if (!tf_session_put_back_divide (session_of (window)))
    tf_session_choose_divide (session_of (window), 0, 0, 0);
}

ACTION (change_show_polarity)
{
  tf_session_set_show_polarity (session_of (window), g_variant_get_boolean (value));
}

static const GActionEntry entries[] = {
  { "bench", NULL, "s", "'mark'", change_bench },
  { "enlarge", enlarge, "s", NULL, NULL },
  { "open-mark", open_mark, "(xb)", NULL, NULL },
  { "count-hints", count_hints, NULL, NULL, NULL },
  { "all-relations", NULL, NULL, "false", change_relations },
  { "stretch", stretch, "s", NULL, NULL },
  { "pick", pick, "(dddd)", NULL, NULL },
  { "next-divide", next_divide, NULL, NULL, NULL },
  { "choose-divide", choose_divide, "(ii)", NULL, NULL },
  { "next-handle", next_handle, NULL, NULL, NULL },
  { "move-divide", move_divide, "d", NULL, NULL },
  { "shift-divide", shift_divide, "i", NULL, NULL },
  { "next-minimum", next_minimum, NULL, NULL, NULL },
  { "keep-divide", keep_divide, NULL, NULL, NULL },
  { "compute-divide", compute_divide, NULL, NULL, NULL },
  { "put-back-divide", put_back_divide, NULL, NULL, NULL },
  { "show-polarity", NULL, NULL, "false", change_show_polarity },
};

void
tf_window_add_laws_actions (TfWindow *self)
{
  g_action_map_add_action_entries (G_ACTION_MAP (self), entries, G_N_ELEMENTS (entries), self);
}

static void
set_state (TfWindow *self, const char *name, gboolean on)
{
  GAction *action = g_action_map_lookup_action (G_ACTION_MAP (self), name);
  g_simple_action_set_state (G_SIMPLE_ACTION (action), g_variant_new_boolean (on));
}

void
tf_window_update_laws_actions (TfWindow *self)
{
  TfSession *session = tf_window_get_session (self);
  const TfDivideHold *hold = tf_session_get_divide (session);
  gboolean movable = tf_session_can_move_divide (session), shown = tf_session_shows_laws (session);
  tf_window_enable (self, "next-divide", shown);
  tf_window_enable (self, "choose-divide", shown);
  tf_window_enable (self, "next-handle", hold->cycle != 0);
  tf_window_enable (self, "move-divide", movable);
  tf_window_enable (self, "shift-divide", tf_session_can_shift_divide (session));
  tf_window_enable (self, "next-minimum", shown && tf_session_is_writable (session));
  tf_window_enable (self, "keep-divide", hold->in_hand);
  tf_window_enable (self, "compute-divide", movable);
  tf_window_enable (self, "put-back-divide", hold->cycle != 0);
  set_state (self, "show-polarity", tf_session_get_show_polarity (session));
  set_state (self, "all-relations", tf_session_get_all_relations (session));
  tf_window_update_study_actions (self);
}
