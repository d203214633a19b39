/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Keys whose command may not be possible now: they do it, or say why not. Buttons are greyed
 * instead and need no words. */

#include "tf-window-private.h"

#include <string.h>
#include <glib/gi18n-lib.h>

typedef enum
{
  CHOSEN_NOTHING,
  CHOSEN_HINT,
  CHOSEN_MARK,
  N_CHOSEN
} Chosen;

typedef struct
{
  const char *action;
  const char *why[N_CHOSEN]; /* NULL: nothing to say */
} Key;

static const Key keys[] = {
  { "next-hint",
    { N_ ("No hint waits on any frame shown."), N_ ("No hint waits on any frame shown."),
      N_ ("No hint waits on any frame shown.") } },
  { "previous-hint",
    { N_ ("No hint waits on any frame shown."), N_ ("No hint waits on any frame shown."),
      N_ ("No hint waits on any frame shown.") } },
  { "keep",
    { N_ ("Choose a hint first (.), or draw an outline (O)."), NULL,
      N_ ("This is a mark already.") } },
  { "keep-new",
    { N_ ("Choose a hint first (.), or draw an outline (O)."), N_ ("It begins a new region anyway: K keeps it."),
      N_ ("This is a mark already.") } },
  { "split-proposed",
    { N_ ("Choose a hint or mark first: . and U, or click."), N_ ("No split is proposed here. S splits along a line of your own."),
      N_ ("No split is proposed here. S splits along a line of your own.") } },
  { "drop-hint",
    { N_ ("Choose a hint first (.)."), NULL, N_ ("X drops a hint. Delete withdraws a mark.") } },
  { "withdraw",
    { N_ ("Choose a mark first."), N_ ("Delete withdraws a mark. X drops a hint."), NULL } },
  { "confirm-match",
    { N_ ("Choose a marked region that others may list (L, M)."),
      N_ ("Keep the hint first: a number belongs to a region."),
      N_ ("Nothing that others list is within 5° of it, or the list (L) is not in sight.") } },
  { "class",
    { N_ ("Choose a mark first: a class belongs to a region."),
      N_ ("Keep the hint first: a class belongs to a region."), NULL } },
  { "brush-in", { N_ ("Choose a hint or mark first: . and U, or click."), NULL, NULL } },
  { "brush-out", { N_ ("Choose a hint or mark first: . and U, or click."), NULL, NULL } },
  { "split", { N_ ("Choose a hint or mark first: . and U, or click."), NULL, NULL } },
  { "leave-out", { N_ ("Choose a hint or mark first: . and U, or click."), NULL, NULL } },
  { "corners", { N_ ("Choose a hint or mark first: . and U, or click."), NULL, NULL } },
  { "pin", { N_ ("Choose a hint or mark first: . and U, or click."), NULL, NULL } },
  { "join",
    { N_ ("Choose a hint or mark first: . and U, or click."), N_ ("There is nothing to join it with."),
      N_ ("There is nothing to join it with.") } },
  { "carry",
    { N_ ("No frame before this one has marks."), N_ ("No frame before this one has marks."),
      N_ ("No frame before this one has marks.") } },
  { "carry-on",
    { N_ ("Choose a mark first: its region is carried to the next frame."),
      N_ ("Keep the hint first: then its region can be carried."), NULL } },
};

static Chosen
chosen_of (TfSession *session)
{
  TfRegionItem *region = tf_session_get_region (session);
  if (region == NULL)
    return CHOSEN_NOTHING;
  return tf_region_item_get_row (region)->is_hint ? CHOSEN_HINT : CHOSEN_MARK;
}

static const char *
why_not (TfSession *session, const char *action)
{
  if (tf_session_get_frame_item (session) == NULL)
    return NULL;
  if (!tf_session_is_writable (session) && !g_str_has_suffix (action, "-hint"))
    return _ ("No ledger is open that can be written to: nothing can be recorded.");
  if (tf_session_get_draft (session) != NULL)
    return strcmp (action, "keep") == 0 ? NULL
                                        : _ ("A draft is in hand: K keeps it, Esc discards it.");
  for (guint k = 0; k < G_N_ELEMENTS (keys); k++)
    if (strcmp (keys[k].action, action) == 0 && keys[k].why[chosen_of (session)] != NULL)
      return _ (keys[k].why[chosen_of (session)]);
  return NULL;
}

void
tf_window_press (TfWindow *self, const char *detailed)
{
  g_autofree char *name = NULL;
  g_autoptr (GVariant) target = NULL;
  if (!g_action_parse_detailed_name (detailed, &name, &target, NULL))
    return;
  if (g_action_group_get_action_enabled (G_ACTION_GROUP (self), name))
    {
      g_action_group_activate_action (G_ACTION_GROUP (self), name, target);
      return;
    }
  const char *why = why_not (tf_window_get_session (self), name);
  if (why != NULL)
    tf_window_say (self, why);
}
