/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-window.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-actions-laws.h"
#include "tf-laws-bench.h"
#include "tf-list.h"
#include "tf-actions-follow.h"
#include "tf-follow-bench.h"
#include "tf-plate-pane.h"
#include "tf-preferences.h"
#include "tf-roll.h"
#include "tf-slip-words.h"
#include "tf-slip.h"
#include "tf-save-as.h"
#include "tf-widget-style.h"
#include "tf-window-private.h"
#include "tf-wings-view.h"

struct _TfWindow
{
  AdwApplicationWindow parent;
  AdwToastOverlay *toasts;
  GtkStack *stack, *benches;
  GtkMenuButton *ledger_button;
  GtkLabel *ledger_name, *age, *problem, *ledger_problem, *feed_trouble, *wings_words, *saving;
  GtkButton *person_button;
  GtkRevealer *problem_bar, *ledger_bar, *feed_bar, *loose_bar, *saving_bar;
  GtkProgressBar *saving_share;
  GtkWidget *wings_offer, *make_here;
  AdwClamp *roll_clamp, *slip_clamp;
  TfRoll *roll;
  TfList *list;
  GtkStack *left_stack;
  TfPlatePane *plate_pane;
  TfSlip *slip;
  TfWingsView *wings;
  TfLawsBench *laws;
  TfFollowBench *follow;
  TfFollowed *followed;
  TfSession *session;
  AdwToast *toast; /* the last one, while it stands */
  gint64 said;     /* when it came, us */
  guint age_timer;
};

G_DEFINE_FINAL_TYPE (TfWindow, tf_window, ADW_TYPE_APPLICATION_WINDOW)

enum
{
  AGE_SECONDS = 30,
  TOAST_SECONDS = 4,
  ROLL_WIDTH = 166,
  SLIP_WIDTH = 304
};
#define TOAST_COMES_US (600 * 1000)
#define USUAL_TEXT 13.5 /* pixels of a letter where nobody asked for another size */
static const char sqlite_magic[] = "SQLite format 3";

TfSession *
tf_window_get_session (TfWindow *self)
{
  return self->session;
}

void
tf_window_focus_plate (TfWindow *self)
{
  gtk_widget_grab_focus (GTK_WIDGET (tf_plate_pane_get_plate (self->plate_pane)));
}

static void
toast_gone (AdwToast *toast, TfWindow *self)
{
  if (self->toast == toast)
    g_clear_object (&self->toast);
}

/* What was said before is past: it does not stand in the way of what is said now. One that has only just
 * come is written over: the overlay is not asked to let go of what is still coming in. */
void
tf_window_say (TfWindow *self, const char *text)
{
  g_autofree char *plain = g_markup_escape_text (text, -1);
  gint64 now = g_get_monotonic_time ();
  if (self->toast != NULL && now - self->said < TOAST_COMES_US)
    {
      adw_toast_set_title (self->toast, plain);
      return;
    }
  AdwToast *toast = adw_toast_new (plain);
  adw_toast_set_timeout (toast, TOAST_SECONDS);
  if (self->toast != NULL)
    adw_toast_dismiss (self->toast);
  g_set_object (&self->toast, toast);
  self->said = now;
  g_signal_connect_object (toast, "dismissed", G_CALLBACK (toast_gone), self, 0);
  adw_toast_overlay_add_toast (self->toasts, toast);
}

gboolean
tf_window_can_make_here (TfWindow *self)
{
  const char *path = tf_session_get_ledger_path (self->session);
  return path != NULL && !tf_session_has_ledger (self->session)
         && !g_file_test (path, G_FILE_TEST_EXISTS);
}

gboolean
tf_window_show_bench (TfWindow *self, const char *name)
{
  if (gtk_stack_get_child_by_name (self->benches, name) == NULL)
    return FALSE;
  gtk_stack_set_visible_child_name (self->benches, name);
  return TRUE;
}

void
tf_window_enlarge_chart (TfWindow *self, const char *name)
{
  tf_laws_bench_enlarge (self->laws, name);
}

TfPowerCurve *
tf_window_dup_power (TfWindow *self, double *wanted)
{
  return tf_power_view_dup_curve (tf_laws_bench_get_power (self->laws), wanted);
}

void
tf_window_get_wings_span (TfWindow *self, double *from, double *to)
{
  tf_wings_view_get_span (self->wings, from, to);
}

/* The switcher changes the bench as the action does. */
static void
bench_changed (TfWindow *self)
{
  const char *name = gtk_stack_get_visible_child_name (self->benches);
  GAction *bench = g_action_map_lookup_action (G_ACTION_MAP (self), "bench");
  if (name != NULL)
    g_simple_action_set_state (G_SIMPLE_ACTION (bench), g_variant_new_string (name));
}

/* -- the age of the newest frame ------------------------------------------------------------- */

static double
age_of (TfTime newest)
{
  g_autoptr (GDateTime) now = g_date_time_new_now_utc ();
  TfTime time = tf_time_from_calendar (g_date_time_get_year (now), g_date_time_get_month (now),
                                       g_date_time_get_day_of_month (now),
                                       g_date_time_get_hour (now), g_date_time_get_minute (now),
                                       g_date_time_get_seconds (now), TF_SCALE_UTC);
  return time.s - newest.s;
}

static void
show_age (TfWindow *self)
{
  double cadence;
  TfTime newest = tf_session_get_newest (self->session, &cadence);
  gtk_widget_set_visible (GTK_WIDGET (self->age), tf_time_is_known (newest));
  if (!tf_time_is_known (newest))
    return;
  double age = age_of (newest);
  gboolean late = isfinite (cadence) && age > 2 * cadence;
  g_autofree char *words = tf_words_dup_age (age), *step = tf_words_dup_age (cadence);
  /* With large text the head has no room for a sentence; the age and "late" are never cut. */
  gboolean brief = tf_widget_text_size (GTK_WIDGET (self)) > 1.4 * USUAL_TEXT;
  g_autofree char *aged = brief ? g_strdup (words) : g_strdup_printf (_ ("newest %s"), words);
  g_autofree char *text = late ? g_strdup_printf (_ ("%s · late"), aged) : g_strdup (aged);
  g_autofree char *iso = tf_time_dup_iso (newest, 0);
  g_autofree char *tip
      = g_strdup_printf (_ ("Newest frame: %s. Usual step between frames: %s."), iso, step);
  gtk_label_set_label (self->age, text);
  gtk_widget_set_tooltip_text (GTK_WIDGET (self->age), tip);
  if (late)
    gtk_widget_add_css_class (GTK_WIDGET (self->age), "late");
  else
    gtk_widget_remove_css_class (GTK_WIDGET (self->age), "late");
}

static gboolean
age_tick (gpointer data)
{
  show_age (data);
  return G_SOURCE_CONTINUE;
}

/* What held the keyboard is gone with the choice: the keys go to the plate. */
static void
rescue_focus (TfWindow *self)
{
  GtkWidget *focus = gtk_window_get_focus (GTK_WINDOW (self));
  GtkWidget *plate = GTK_WIDGET (tf_plate_pane_get_plate (self->plate_pane));
  if (gtk_widget_get_mapped (plate)
      && (focus == NULL || !gtk_widget_get_mapped (focus) || !gtk_widget_is_sensitive (focus)))
    gtk_widget_grab_focus (plate);
}

/* -- following the session ------------------------------------------------------------------- */

static void
show_page (TfWindow *self)
{
  gboolean ledger = tf_session_has_ledger (self->session);
  gboolean loading = tf_session_get_ledger_path (self->session) != NULL && !ledger
                     && tf_session_get_ledger_problem (self->session) == NULL;
  guint n = tf_session_get_n_frames (self->session);
  const char *page = n > 0 ? "work" : ledger ? "no-frames" : loading ? "opening" : "welcome";
  if (n == 0 && tf_session_get_progress (self->session, NULL) != NULL)
    page = "taking-in";
  gboolean came = g_strcmp0 (gtk_stack_get_visible_child_name (self->stack), page) != 0;
  gtk_stack_set_visible_child_name (self->stack, page);
  if (came && n > 0)
    tf_window_focus_plate (self); /* not on the first button of the head */
  gtk_revealer_set_reveal_child (self->loose_bar,
                                 n > 0 && tf_session_get_ledger_path (self->session) == NULL);
}

/* A bar stands only while there is something in it. */
static void
show_bar (GtkRevealer *bar, GtkLabel *label, const char *text)
{
  gtk_widget_set_visible (GTK_WIDGET (bar), text != NULL);
  if (text != NULL)
    gtk_label_set_label (label, text);
  gtk_revealer_set_reveal_child (bar, text != NULL);
}

static void
show_saving (TfWindow *self)
{
  double share;
  show_bar (self->saving_bar, self->saving, tf_save_as_get_words (self->session, &share));
  gtk_widget_set_visible (GTK_WIDGET (self->saving_share), share >= 0);
  gtk_progress_bar_set_fraction (self->saving_share, CLAMP (share, 0, 1));
}

static void
ledger_changed (TfWindow *self)
{
  g_autofree char *name = tf_session_dup_ledger_name (self->session);
  const char *person = tf_session_get_person (self->session);
  const char *problem = tf_session_get_ledger_problem (self->session);
  const char *path = tf_session_get_ledger_path (self->session);
  gtk_label_set_label (self->ledger_name, name != NULL ? name : _ ("no ledger"));
  g_autofree char *title = g_strdup_printf (name != NULL ? "%s · Tiltfield" : "Tiltfield", name);
  gtk_window_set_title (GTK_WINDOW (self), title);
  gtk_button_set_label (self->person_button, person != NULL ? person : _ ("who?"));
  show_bar (self->ledger_bar, self->ledger_problem, problem);
  gtk_widget_set_visible (self->make_here, tf_window_can_make_here (self));
  if (tf_session_has_ledger (self->session))
    {
      tf_preferences_set ("ledger", path);
      tf_window_restore_watch (self);
    }
  show_page (self);
  tf_window_update_actions (self);
}

static void
frames_changed (TfWindow *self)
{
  show_page (self);
  show_age (self);
  tf_window_update_actions (self);
}

static void
status_changed (TfWindow *self)
{
  const char *problem = tf_session_get_problem (self->session);
  guint pending = tf_session_get_pending (self->session);
  g_autofree char *text = NULL;
  if (problem != NULL && pending > 1)
    text = g_strdup_printf (ngettext ("%s %u more deed waits behind it.",
                                      "%s %u more deeds wait behind it.", pending - 1),
                            problem, pending - 1);
  show_bar (self->problem_bar, self->problem, text != NULL ? text : problem);
  show_bar (self->feed_bar, self->feed_trouble, tf_session_get_feed_trouble (self->session));
  show_saving (self);
  show_page (self);
  tf_window_update_actions (self);
}

static void
points_changed (TfWindow *self)
{
  guint hidden;
  tf_session_get_dots (self->session, &hidden);
  gboolean bare = tf_session_get_n_marks (self->session) == 0;
  gtk_widget_set_visible (self->wings_offer, bare && hidden > 0);
  g_autofree char *text
      = g_strdup_printf (ngettext ("No marks yet: nobody has judged. %u hint waits.",
                                   "No marks yet: nobody has judged. %u hints wait.", hidden),
                         hidden);
  gtk_label_set_label (self->wings_words, text);
  tf_window_update_actions (self);
}

static void
person_needed (TfWindow *self)
{
  tf_window_ask_person (self, NULL);
}

static void
message (TfSession *session, const char *text, TfWindow *self)
{
  tf_window_say (self, text);
}

static void
connect_session (TfWindow *self)
{
  TfSession *session = self->session;
  g_signal_connect_object (session, "ledger-changed", G_CALLBACK (ledger_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "frames-changed", G_CALLBACK (frames_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "status-changed", G_CALLBACK (status_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "points-changed", G_CALLBACK (points_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "person-needed", G_CALLBACK (person_needed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "frame-changed", G_CALLBACK (tf_window_update_actions), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "choice-changed", G_CALLBACK (tf_window_update_actions), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "regions-changed", G_CALLBACK (tf_window_update_actions), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "view-changed", G_CALLBACK (tf_window_update_actions), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "overlays-changed", G_CALLBACK (tf_window_update_actions), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "laws-changed", G_CALLBACK (tf_window_update_laws_actions), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "shift-changed", G_CALLBACK (tf_window_update_actions), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "message", G_CALLBACK (message), self, 0);
}

/* -- what stands at the left ------------------------------------------------------------------- */

void
tf_window_show_list (TfWindow *self, gboolean list)
{
  gtk_stack_set_visible_child_name (self->left_stack, list ? "regions" : "frames");
}

static void
left_changed (TfWindow *self)
{
  gboolean list = g_strcmp0 (gtk_stack_get_visible_child_name (self->left_stack), "regions") == 0;
  GAction *action = g_action_map_lookup_action (G_ACTION_MAP (self), "list");
  g_simple_action_set_state (G_SIMPLE_ACTION (action), g_variant_new_boolean (list));
  tf_session_set_list_shown (self->session, list);
}

/* The panels have a width of their own, which grows with the user's text but slower, so that the
 * plate keeps its room. */
static void
set_widths (TfWindow *self)
{
  double share = fmin (fmax (tf_widget_text_size (GTK_WIDGET (self)) / USUAL_TEXT, 0.9), 2.5);
  int roll = (int)(ROLL_WIDTH * (0.55 + 0.45 * share)),
      slip = (int)(SLIP_WIDTH * (0.6 + 0.4 * share));
  adw_clamp_set_maximum_size (self->roll_clamp, roll);
  adw_clamp_set_tightening_threshold (self->roll_clamp, roll);
  adw_clamp_set_maximum_size (self->slip_clamp, slip);
  adw_clamp_set_tightening_threshold (self->slip_clamp, slip);
  gtk_widget_set_size_request (GTK_WIDGET (self->roll), roll, -1);
  gtk_widget_set_size_request (GTK_WIDGET (self->slip), slip, -1);
  show_age (self);
}

/* -- opening --------------------------------------------------------------------------------- */

gboolean
tf_window_is_ledger (const char *path)
{
  if (g_str_has_suffix (path, ".ledger"))
    return TRUE;
  char first[sizeof sqlite_magic] = { 0 };
  FILE *file = fopen (path, "rb");
  if (file == NULL)
    return FALSE;
  gsize n = fread (first, 1, sizeof first, file);
  fclose (file);
  return n == sizeof first && memcmp (first, sqlite_magic, sizeof first) == 0;
}

void
tf_window_open (TfWindow *self, char *const *paths)
{
  g_return_if_fail (TF_IS_WINDOW (self) && paths != NULL);
  g_autoptr (GPtrArray) frames = g_ptr_array_new ();
  const char *ledger = NULL;
  for (guint k = 0; paths[k] != NULL; k++)
    {
      if (tf_window_is_ledger (paths[k]))
        ledger = paths[k];
      else
        g_ptr_array_add (frames, paths[k]);
    }
  g_ptr_array_add (frames, NULL);
  if (ledger != NULL)
    tf_session_open_ledger (self->session, ledger, 0);
  if (frames->len > 1)
    tf_session_add_frames (self->session, (char *const *)frames->pdata);
}

/* -- closing --------------------------------------------------------------------------------- */

static void
close_answered (AdwMessageDialog *dialog, const char *answer, TfWindow *self)
{
  if (strcmp (answer, "close") != 0)
    return;
  while (tf_session_get_problem (self->session) != NULL)
    tf_session_give_up (self->session);
  gtk_window_destroy (GTK_WINDOW (self));
}

static gboolean
close_request (GtkWindow *window)
{
  TfWindow *self = TF_WINDOW (window);
  gtk_window_set_focus (window, NULL); /* a note under the pen is kept */
  if (tf_session_get_problem (self->session) == NULL)
    return FALSE; /* deeds on their way are waited for by the session */
  GtkWidget *dialog = adw_message_dialog_new (window, _ ("Close without saving?"),
                                              tf_session_get_problem (self->session));
  adw_message_dialog_add_responses (ADW_MESSAGE_DIALOG (dialog), "stay", _ ("_Stay"), "close",
                                    _ ("_Close"), NULL);
  adw_message_dialog_set_response_appearance (ADW_MESSAGE_DIALOG (dialog), "close",
                                              ADW_RESPONSE_DESTRUCTIVE);
  g_signal_connect_object (dialog, "response", G_CALLBACK (close_answered), self, 0);
  gtk_window_present (GTK_WINDOW (dialog));
  return TRUE;
}

static void
dispose (GObject *object)
{
  TfWindow *self = TF_WINDOW (object);
  g_clear_handle_id (&self->age_timer, g_source_remove);
  if (self->session != NULL)
    {
      g_signal_handlers_disconnect_by_data (self->session, self);
      tf_session_close (self->session);
    }
  if (self->followed != NULL)
    tf_followed_close (self->followed);
  g_clear_object (&self->followed);
  g_clear_object (&self->session);
  g_clear_object (&self->toast);
  G_OBJECT_CLASS (tf_window_parent_class)->dispose (object);
}

static void
bind_children (GtkWidgetClass *widget)
{
  gtk_widget_class_bind_template_child (widget, TfWindow, toasts);
  gtk_widget_class_bind_template_child (widget, TfWindow, stack);
  gtk_widget_class_bind_template_child (widget, TfWindow, benches);
  gtk_widget_class_bind_template_child (widget, TfWindow, laws);
  gtk_widget_class_bind_template_child (widget, TfWindow, ledger_button);
  gtk_widget_class_bind_template_child (widget, TfWindow, ledger_name);
  gtk_widget_class_bind_template_child (widget, TfWindow, age);
  gtk_widget_class_bind_template_child (widget, TfWindow, person_button);
  gtk_widget_class_bind_template_child (widget, TfWindow, problem_bar);
  gtk_widget_class_bind_template_child (widget, TfWindow, problem);
  gtk_widget_class_bind_template_child (widget, TfWindow, ledger_bar);
  gtk_widget_class_bind_template_child (widget, TfWindow, ledger_problem);
  gtk_widget_class_bind_template_child (widget, TfWindow, feed_bar);
  gtk_widget_class_bind_template_child (widget, TfWindow, feed_trouble);
  gtk_widget_class_bind_template_child (widget, TfWindow, loose_bar);
  gtk_widget_class_bind_template_child (widget, TfWindow, saving_bar);
  gtk_widget_class_bind_template_child (widget, TfWindow, saving);
  gtk_widget_class_bind_template_child (widget, TfWindow, saving_share);
  gtk_widget_class_bind_template_child (widget, TfWindow, wings_offer);
  gtk_widget_class_bind_template_child (widget, TfWindow, make_here);
  gtk_widget_class_bind_template_child (widget, TfWindow, wings_words);
  gtk_widget_class_bind_template_child (widget, TfWindow, roll_clamp);
  gtk_widget_class_bind_template_child (widget, TfWindow, slip_clamp);
  gtk_widget_class_bind_template_child (widget, TfWindow, roll);
  gtk_widget_class_bind_template_child (widget, TfWindow, list);
  gtk_widget_class_bind_template_child (widget, TfWindow, left_stack);
  gtk_widget_class_bind_template_child (widget, TfWindow, plate_pane);
  gtk_widget_class_bind_template_child (widget, TfWindow, slip);
  gtk_widget_class_bind_template_child (widget, TfWindow, wings);
  gtk_widget_class_bind_template_child (widget, TfWindow, follow);
}

static void
tf_window_class_init (TfWindowClass *klass)
{
  GtkWidgetClass *widget = GTK_WIDGET_CLASS (klass);
  G_OBJECT_CLASS (klass)->dispose = dispose;
  GTK_WINDOW_CLASS (klass)->close_request = close_request;
  g_type_ensure (TF_TYPE_ROLL);
  g_type_ensure (TF_TYPE_LIST);
  g_type_ensure (TF_TYPE_PLATE_PANE);
  g_type_ensure (TF_TYPE_SLIP);
  g_type_ensure (TF_TYPE_WINGS_VIEW);
  g_type_ensure (TF_TYPE_LAWS_BENCH);
  g_type_ensure (TF_TYPE_FOLLOW_BENCH);
  gtk_widget_class_set_template_from_resource (widget, "/io/tiltfield/Tiltfield/window.ui");
  bind_children (widget);
}

static void
restore_preferences (TfWindow *self)
{
  g_autofree char *person = tf_preferences_dup ("person"),
                  *palette = tf_preferences_dup ("palette");
  if (person != NULL)
    tf_session_set_person (self->session, person);
  if (g_strcmp0 (palette, "amber-indigo") == 0)
    tf_session_set_palette (self->session, TF_PALETTE_AMBER_INDIGO);
  tf_window_restore_plate (self);
}

/* The scroller within an AdwStatusPage takes the keyboard and has no name; the page's own title is told already. */
static void
pass_over_status_pages (GtkWidget *widget)
{
  if (ADW_IS_STATUS_PAGE (widget))
    gtk_widget_set_focusable (gtk_widget_get_first_child (widget), FALSE);
  for (GtkWidget *child = gtk_widget_get_first_child (widget); child != NULL;
       child = gtk_widget_get_next_sibling (child))
    pass_over_status_pages (child);
}

static void
tf_window_init (TfWindow *self)
{
  gtk_widget_init_template (GTK_WIDGET (self));
  pass_over_status_pages (GTK_WIDGET (self->stack));
  self->session = tf_session_new ();
  connect_session (self);
  tf_window_add_actions (self);
  tf_window_add_laws_actions (self);
  tf_window_add_study_actions (self);
  tf_window_add_chart_actions (self);
  tf_window_add_bundle_actions (self);
  tf_window_add_scale_actions (self);
  g_signal_connect_object (self->benches, "notify::visible-child", G_CALLBACK (bench_changed), self,
                           G_CONNECT_SWAPPED);
  tf_window_add_drop (self);
  restore_preferences (self);
  tf_roll_set_session (self->roll, self->session);
  tf_list_set_session (self->list, self->session);
  g_signal_connect_object (self->left_stack, "notify::visible-child", G_CALLBACK (left_changed), self,
                           G_CONNECT_SWAPPED);
  tf_plate_pane_set_session (self->plate_pane, self->session);
  tf_slip_set_session (self->slip, self->session);
  g_signal_connect_object (self->session, "choice-changed", G_CALLBACK (rescue_focus), self,
                           G_CONNECT_SWAPPED | G_CONNECT_AFTER);
  tf_wings_view_set_session (self->wings, self->session);
  tf_laws_bench_set_session (self->laws, self->session);
  self->followed = tf_followed_new (self->session);
  tf_window_add_follow_actions (self, self->followed);
  tf_follow_bench_set_followed (self->follow, self->followed);
  self->age_timer = g_timeout_add_seconds (AGE_SECONDS, age_tick, self);
  GtkSettings *settings = gtk_widget_get_settings (GTK_WIDGET (self));
  g_signal_connect_object (settings, "notify::gtk-xft-dpi", G_CALLBACK (set_widths), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (settings, "notify::gtk-font-name", G_CALLBACK (set_widths), self,
                           G_CONNECT_SWAPPED);
  set_widths (self);
  ledger_changed (self);
  status_changed (self);
  points_changed (self);
}

TfWindow *
tf_window_new (GtkApplication *application)
{
  return g_object_new (TF_TYPE_WINDOW, "application", application, NULL);
}
