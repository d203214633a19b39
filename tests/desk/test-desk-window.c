/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-desk.h"

#include <math.h>

#include "tf-dial-view.h"
#include "tf-how.h"
#include "tf-plate.h"
#include "tf-roll.h"
#include "tf-slip-frame.h"
#include "tf-slip-row.h"
#include "tf-slip.h"
#include "tf-window.h"
#include "tf-wings-view.h"

static TfWindow *
window_new (void)
{
  g_autoptr (AdwApplication) application
      = adw_application_new ("io.tiltfield.Test", G_APPLICATION_NON_UNIQUE);
  g_application_set_resource_base_path (G_APPLICATION (application), "/io/tiltfield/Tiltfield");
  g_application_register (G_APPLICATION (application), NULL, NULL);
  return tf_window_new (GTK_APPLICATION (application));
}

static gboolean
enabled (TfWindow *window, const char *name)
{
  return g_action_group_get_action_enabled (G_ACTION_GROUP (window), name);
}

static void
templates (void)
{
  if (!test_desk_has_display ())
    return;
  TfWindow *window = window_new ();
  gtk_window_present (GTK_WINDOW (window));
  g_assert_false (enabled (window, "keep"));
  g_assert_false (enabled (window, "draw"));
  g_assert_false (enabled (window, "undo"));
  g_assert_false (enabled (window, "cancel-work"));
  g_assert_true (enabled (window, "new-ledger"));
  g_assert_true (enabled (window, "add-frames"));
  gtk_window_destroy (GTK_WINDOW (window));
}

static gboolean
has_regions (gpointer session)
{
  return tf_session_get_frame (session) != NULL
         && g_list_model_get_n_items (tf_session_get_regions (session)) > 0;
}

/* A window on a ledger with one frame and its hints. */
static TfWindow *
window_on (const char *name)
{
  g_autofree char *path = test_desk_path (name);
  g_autoptr (TfSession) session = test_desk_session (path);
  tf_session_close (session);
  TfWindow *window = window_new ();
  gtk_window_present (GTK_WINDOW (window));
  tf_session_set_person (tf_window_get_session (window), "north desk");
  const char *paths[] = { path, NULL };
  tf_window_open (window, (char *const *)paths);
  test_desk_wait ("the frame in the window", has_regions, tf_window_get_session (window));
  return window;
}

static void
activate (TfWindow *window, const char *name)
{
  g_action_group_activate_action (G_ACTION_GROUP (window), name, NULL);
}

static void
actions_follow (void)
{
  if (!test_desk_has_display ())
    return;
  TfWindow *window = window_on ("actions.ledger");
  TfSession *session = tf_window_get_session (window);
  g_assert_true (TF_IS_PLATE (gtk_window_get_focus (GTK_WINDOW (window))));
  g_assert_true (enabled (window, "draw"));
  g_assert_true (enabled (window, "next-hint"));
  g_assert_false (enabled (window, "keep"));
  activate (window, "next-hint");
  g_assert_true (enabled (window, "keep"));
  g_assert_true (enabled (window, "drop-hint"));
  g_assert_false (enabled (window, "withdraw"));
  g_assert_false (enabled (window, "class"));
  activate (window, "draw");
  g_assert_cmpint (tf_session_get_tool (session), ==, TF_TOOL_OUTLINE);
  activate (window, "cancel-drawing");
  g_assert_cmpint (tf_session_get_tool (session), ==, TF_TOOL_NONE);
  g_action_group_activate_action (G_ACTION_GROUP (window), "look", g_variant_new_string ("close"));
  g_assert_cmpint (tf_session_get_view (session)->look, ==, TF_LOOK_CLOSE);
  g_action_group_activate_action (G_ACTION_GROUP (window), "range", g_variant_new_double (NAN));
  g_assert_true (isfinite (tf_session_get_range (session)));
  gtk_window_destroy (GTK_WINDOW (window));
}

/* -- what a screen reader meets -------------------------------------------------------------- */

static gboolean
has_words (GtkWidget *widget)
{
  if (GTK_IS_LABEL (widget) && gtk_label_get_label (GTK_LABEL (widget))[0] != '\0')
    return TRUE;
  for (GtkWidget *child = gtk_widget_get_first_child (widget); child != NULL;
       child = gtk_widget_get_next_sibling (child))
    if (has_words (child))
      return TRUE;
  return FALSE;
}

static gboolean
is_named (GtkWidget *widget)
{
  return gtk_test_accessible_has_property (GTK_ACCESSIBLE (widget), GTK_ACCESSIBLE_PROPERTY_LABEL)
         || has_words (widget);
}

static void
check_names (GtkWidget *widget, guint *n)
{
  gboolean press = GTK_IS_BUTTON (widget) || GTK_IS_MENU_BUTTON (widget);
  gboolean draws = TF_IS_PLATE (widget) || TF_IS_DIAL_VIEW (widget) || TF_IS_WINGS_VIEW (widget);
  gboolean part = GTK_IS_MENU_BUTTON (gtk_widget_get_parent (widget))
                  || GTK_IS_WINDOW_CONTROLS (gtk_widget_get_parent (widget));
  if ((press || draws || GTK_IS_SCALE (widget) || GTK_IS_TEXT_VIEW (widget)) && !part)
    {
      if (!is_named (widget))
        g_error ("a %s has no name", G_OBJECT_TYPE_NAME (widget));
      (*n)++;
    }
  if (draws
      && !gtk_test_accessible_has_property (GTK_ACCESSIBLE (widget),
                                            GTK_ACCESSIBLE_PROPERTY_DESCRIPTION))
    g_error ("a %s does not say what it shows", G_OBJECT_TYPE_NAME (widget));
  for (GtkWidget *child = gtk_widget_get_first_child (widget); child != NULL;
       child = gtk_widget_get_next_sibling (child))
    check_names (child, n);
}

static void
names (void)
{
  if (!test_desk_has_display ())
    return;
  TfWindow *window = window_on ("names.ledger");
  guint n = 0;
  activate (window, "next-hint");
  check_names (GTK_WIDGET (window), &n);
  g_assert_cmpuint (n, >, 30);
  gtk_window_destroy (GTK_WINDOW (window));
}

/* -- the slip -------------------------------------------------------------------------------- */

static void
count_rows (GtkWidget *widget, guint *n)
{
  if (TF_IS_SLIP_ROW (widget) && tf_slip_row_get_value (TF_SLIP_ROW (widget))[0] != '\0')
    {
      g_assert_nonnull (strstr (tf_slip_row_get_how (TF_SLIP_ROW (widget)), "flux-centroid/1"));
      (*n)++;
    }
  for (GtkWidget *child = gtk_widget_get_first_child (widget); child != NULL;
       child = gtk_widget_get_next_sibling (child))
    count_rows (child, n);
}

static void
slip_says_how (void)
{
  if (!test_desk_has_display ())
    return;
  TfWindow *window = window_on ("slip.ledger");
  guint n = 0;
  activate (window, "next-hint");
  count_rows (GTK_WIDGET (window), &n);
  g_assert_cmpuint (n, ==, 6);
  gtk_window_destroy (GTK_WINDOW (window));
}

/* -- what is written and pressed ------------------------------------------------------------- */

static GtkWidget *
find_widget (GtkWidget *widget, GType type)
{
  if (G_TYPE_CHECK_INSTANCE_TYPE (widget, type))
    return widget;
  GtkWidget *found = NULL;
  for (GtkWidget *child = gtk_widget_get_first_child (widget); child != NULL && found == NULL;
       child = gtk_widget_get_next_sibling (child))
    found = find_widget (child, type);
  return found;
}

static gboolean
frame_tells_how (gpointer window)
{
  GtkWidget *how = find_widget (find_widget (window, TF_TYPE_SLIP_FRAME), TF_TYPE_HOW);
  const char *text = tf_how_get_text (TF_HOW (how));
  return text != NULL && strstr (text, "median absolute deviation") != NULL
         && strstr (text, "observer, B0, L0: ") != NULL;
}

/* With no region chosen the slip tells of the frame, and how its figures were got. */
static void
frame_says_how (void)
{
  if (!test_desk_has_display ())
    return;
  TfWindow *window = window_on ("frame-how.ledger");
  test_desk_wait ("the frame's figures to say how they were got", frame_tells_how, window);
  gtk_window_destroy (GTK_WINDOW (window));
}

static gboolean
has_mark (gpointer session)
{
  TfRegionItem *item = tf_session_get_region (session);
  return item != NULL && !tf_region_item_get_row (item)->is_hint;
}

static gboolean
is_saved (gpointer session)
{
  return tf_session_get_pending (session) == 0;
}

static void
check_note_in_file (const char *path, const char *expected)
{
  g_autoptr (TfLedger) ledger = tf_ledger_open (path, NULL);
  TfRowQuery query = { .marks = TRUE };
  g_autoptr (GPtrArray) rows = tf_ledger_rows (ledger, &query, NULL);
  g_assert_cmpuint (rows->len, ==, 1);
  g_assert_cmpstr (((TfRow *)rows->pdata[0])->note, ==, expected);
}

/* Escape, a click beside every region, another frame: the choice goes before the entry knows. */
static void
note_outlives_choice (void)
{
  if (!test_desk_has_display ())
    return;
  g_autofree char *path = test_desk_path ("note.ledger");
  TfWindow *window = window_on ("note.ledger");
  TfSession *session = tf_window_get_session (window);
  activate (window, "next-hint");
  activate (window, "keep");
  test_desk_wait ("the mark", has_mark, session);
  GtkWidget *note = find_widget (GTK_WIDGET (window), GTK_TYPE_TEXT_VIEW);
  gtk_widget_grab_focus (note);
  gtk_text_buffer_set_text (gtk_text_view_get_buffer (GTK_TEXT_VIEW (note)), "seen twice", -1);
  tf_session_choose_region (session, NULL);
  g_assert_null (tf_session_get_region (session));
  test_desk_wait ("the note to be saved", is_saved, session);
  check_note_in_file (path, "seen twice");
  gtk_window_destroy (GTK_WINDOW (window));
}

static gboolean
says (GtkWidget *widget, const char *words)
{
  if (GTK_IS_LABEL (widget) && strstr (gtk_label_get_label (GTK_LABEL (widget)), words) != NULL)
    return TRUE;
  for (GtkWidget *child = gtk_widget_get_first_child (widget); child != NULL;
       child = gtk_widget_get_next_sibling (child))
    if (says (child, words))
      return TRUE;
  return FALSE;
}

static void
press (TfWindow *window, const char *key)
{
  g_action_group_activate_action (G_ACTION_GROUP (window), "press", g_variant_new_string (key));
}

static void
keys_say_why_not (void)
{
  if (!test_desk_has_display ())
    return;
  TfWindow *window = window_on ("keys.ledger");
  press (window, "keep");
  g_assert_true (says (GTK_WIDGET (window), "Choose a hint first (.), or draw an outline"));
  press (window, "next-hint");
  press (window, "class::β");
  g_assert_true (says (GTK_WIDGET (window), "Keep the hint first"));
  press (window, "keep");
  test_desk_wait ("the mark", has_mark, tf_window_get_session (window));
  press (window, "drop-hint");
  g_assert_true (says (GTK_WIDGET (window), "Delete withdraws a mark"));
  gtk_window_destroy (GTK_WINDOW (window));
}

static int
least_width (GtkWidget *widget)
{
  int least;
  gtk_widget_measure (widget, GTK_ORIENTATION_HORIZONTAL, -1, &least, NULL, NULL, NULL);
  return least;
}

/* Else the Sun shifts sideways whenever a region is chosen. */
static void
slip_keeps_its_width (void)
{
  if (!test_desk_has_display ())
    return;
  TfWindow *window = window_on ("width.ledger");
  GtkWidget *slip = find_widget (GTK_WIDGET (window), TF_TYPE_SLIP);
  int before = least_width (slip);
  press (window, "next-hint");
  g_assert_cmpint (least_width (slip), ==, before);
  press (window, "keep");
  test_desk_wait ("the mark", has_mark, tf_window_get_session (window));
  g_assert_cmpint (least_width (slip), ==, before);
  activate (window, "cancel-drawing");
  g_assert_cmpint (least_width (slip), ==, before);
  gtk_window_destroy (GTK_WINDOW (window));
}

static void
narrowed_roll_says_so (void)
{
  if (!test_desk_has_display ())
    return;
  TfWindow *window = window_on ("narrowed.ledger");
  TfSession *session = tf_window_get_session (window);
  GtkWidget *roll = find_widget (GTK_WIDGET (window), TF_TYPE_ROLL);
  g_assert_false (says (roll, "of 1 frames"));
  tf_session_pick (session, 1999, 2000.5);
  g_assert_true (says (roll, "1 Jan 1999 to 2 Jul 2000: 0 of 1 frames"));
  activate (window, "show-all-times");
  g_assert_cmpuint (g_list_model_get_n_items (tf_session_get_frames (session)), ==, 1);
  gtk_window_destroy (GTK_WINDOW (window));
}

static void
ledger_by_name_or_bytes (void)
{
  g_autofree char *plain = test_desk_path ("plain.txt"), *ledger = test_desk_path ("bytes.db");
  g_file_set_contents (plain, "not a ledger", -1, NULL);
  g_file_set_contents (ledger, "SQLite format 3\0rest", 20, NULL);
  g_assert_true (tf_window_is_ledger ("/nowhere/a.ledger"));
  g_assert_true (tf_window_is_ledger (ledger));
  g_assert_false (tf_window_is_ledger (plain));
  g_assert_false (tf_window_is_ledger ("/nowhere/a.fits"));
}

static void
help_overlay (void)
{
  if (!test_desk_has_display ())
    return;
  g_autoptr (GtkBuilder) builder
      = gtk_builder_new_from_resource ("/io/tiltfield/Tiltfield/gtk/help-overlay.ui");
  g_assert_true (GTK_IS_SHORTCUTS_WINDOW (gtk_builder_get_object (builder, "help_overlay")));
  gtk_window_destroy (GTK_WINDOW (gtk_builder_get_object (builder, "help_overlay")));
}

void
test_desk_add_window (void)
{
  g_test_add_func ("/desk/window/templates-stand-and-nothing-can-be-kept-without-a-ledger",
                   templates);
  g_test_add_func ("/desk/window/commands-are-possible-when-they-make-sense", actions_follow);
  g_test_add_func ("/desk/window/every-button-and-drawing-has-a-name", names);
  g_test_add_func ("/desk/window/a-note-outlives-the-choice-of-its-region", note_outlives_choice);
  g_test_add_func ("/desk/window/a-key-that-can-do-nothing-says-why", keys_say_why_not);
  g_test_add_func ("/desk/slip/its-width-stays-whatever-is-chosen", slip_keeps_its_width);
  g_test_add_func ("/desk/window/a-narrowed-roll-says-so", narrowed_roll_says_so);
  g_test_add_func ("/desk/window/the-help-overlay-opens", help_overlay);
  g_test_add_func ("/desk/window/a-ledger-is-known-by-its-ending-or-its-first-bytes",
                   ledger_by_name_or_bytes);
  g_test_add_func ("/desk/slip/every-number-says-how-it-was-got", slip_says_how);
  g_test_add_func ("/desk/slip/the-frame-says-how-its-figures-were-got", frame_says_how);
}
