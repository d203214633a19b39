/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-actions-follow.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-followed-private.h"
#include "tf-save-as.h"
#include "tf-window-private.h"

static const char *const take_names[] = { "flux", "meridian", "mean" };

static TfFollowed *
followed_of (gpointer window)
{
  return g_object_get_data (G_OBJECT (window), "followed");
}

#define ACTION(name) static void name (GSimpleAction *action, GVariant *value, gpointer window)

/* -- the moment ------------------------------------------------------------------------------ */

ACTION (play) { tf_followed_set_playing (followed_of (window), g_variant_get_boolean (value)); }
ACTION (blink) { tf_followed_set_blink (followed_of (window), g_variant_get_boolean (value)); }
ACTION (change_speed)
{
  tf_followed_set_speed (followed_of (window), g_variant_get_double (value));
}
ACTION (step)
{
  tf_followed_step (followed_of (window), g_variant_get_int32 (value) < 0 ? -1 : 1, FALSE);
}
ACTION (all_times)
{
  tf_followed_brush (followed_of (window), TF_TIME_UNKNOWN, TF_TIME_UNKNOWN);
}
ACTION (choose) { tf_followed_choose (followed_of (window), g_variant_get_int64 (value)); }
ACTION (beside) { tf_followed_set_beside (followed_of (window), g_variant_get_int64 (value)); }

ACTION (change_take)
{
  for (guint k = 0; k < G_N_ELEMENTS (take_names); k++)
    if (strcmp (g_variant_get_string (value, NULL), take_names[k]) == 0)
      tf_followed_set_take (followed_of (window), (TfTake)k);
}

/* The frame of the look in view, on Mark, with its mark chosen. */
ACTION (to_mark)
{
  TfFollowed *followed = followed_of (window);
  g_autoptr (TfLookItem) item = g_list_model_get_item (
      tf_followed_get_looks (followed), (guint)MAX (tf_followed_get_now (followed), 0));
  const TfLookSpec *spec = item != NULL ? tf_look_item_get_spec (item) : NULL;
  if (spec == NULL || spec->frame == 0)
    return;
  tf_session_choose_sighting (followed->session, spec->frame,
                              (TfSight){ spec->mark, spec->is_hint });
  g_action_group_activate_action (G_ACTION_GROUP (window), "bench", g_variant_new_string ("mark"));
}

/* -- what people say: each asks for the reason ------------------------------------------------ */

typedef struct
{
  GtkWidget *reason, *passages;
  TfSight sight; /* that the cut is before */
  TfReturnOffer offer;
  gboolean same;
} Question; /* of what was in view when it was asked, whatever is read meanwhile */

static void
say_refused (TfWindow *window)
{
  tf_window_say (window, _ ("That cannot be recorded now: the ledger cannot be written to, or the "
                            "passage has changed meanwhile."));
}

static GtkWidget *
ask (TfWindow *window, const char *heading, const char *body, const char *yes, Question **question)
{
  GtkWidget *dialog = adw_message_dialog_new (GTK_WINDOW (window), heading, body);
  AdwMessageDialog *message = ADW_MESSAGE_DIALOG (dialog);
  Question *q = g_new0 (Question, 1);
  GtkWidget *box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 8);
  adw_message_dialog_add_responses (message, "cancel", _ ("_Cancel"), "yes", yes, NULL);
  adw_message_dialog_set_response_appearance (message, "yes", ADW_RESPONSE_SUGGESTED);
  adw_message_dialog_set_default_response (message, "yes");
  adw_message_dialog_set_close_response (message, "cancel");
  q->reason = gtk_entry_new ();
  gtk_entry_set_placeholder_text (GTK_ENTRY (q->reason), _ ("Reason"));
  gtk_entry_set_activates_default (GTK_ENTRY (q->reason), TRUE);
  gtk_accessible_update_property (GTK_ACCESSIBLE (q->reason), GTK_ACCESSIBLE_PROPERTY_LABEL,
                                  _ ("Reason"), -1);
  gtk_box_append (GTK_BOX (box), q->reason);
  adw_message_dialog_set_extra_child (message, box);
  g_object_set_data_full (G_OBJECT (dialog), "question", q, g_free);
  *question = q;
  return dialog;
}

static Question *
answer_of (AdwMessageDialog *dialog, const char *answer)
{
  return strcmp (answer, "yes") == 0 ? g_object_get_data (G_OBJECT (dialog), "question") : NULL;
}

/* A deed needs a name; the question is asked when there is one. */
static gboolean
has_person (gpointer window, GSimpleAction *action)
{
  if (tf_session_get_person (tf_window_get_session (window)) != NULL)
    return TRUE;
  const char *name = g_action_get_name (G_ACTION (action));
  tf_window_ask_person (window, g_action_get_parameter_type (G_ACTION (action)) == NULL ? name : NULL);
  return FALSE;
}

static TfSight
sight_in_view (TfFollowed *followed)
{
  g_autoptr (TfLookItem) item = g_list_model_get_item (
      tf_followed_get_looks (followed), (guint)MAX (tf_followed_get_now (followed), 0));
  const TfLookSpec *spec = item != NULL ? tf_look_item_get_spec (item) : NULL;
  return spec != NULL ? (TfSight){ spec->mark, spec->is_hint } : (TfSight){ 0 };
}

static gboolean
cut_asked (TfFollowed *followed, const Question *q)
{
  TfSight now = sight_in_view (followed);
  return now.mark == q->sight.mark && now.is_hint == q->sight.is_hint
         && tf_followed_cut (followed, gtk_editable_get_text (GTK_EDITABLE (q->reason)));
}

static void
cut_answered (AdwMessageDialog *dialog, const char *answer, TfWindow *window)
{
  Question *q = answer_of (dialog, answer);
  if (q != NULL && !cut_asked (followed_of (window), q))
    say_refused (window);
}

ACTION (cut)
{
  Question *q;
  TfFollowed *followed = followed_of (window);
  if (!tf_followed_can_cut (followed))
    {
      tf_window_say (window, _ ("Choose a look with an outline that has another before it: the cut is "
                                "made between the two."));
      return;
    }
  if (!has_person (window, action))
    return;
  GtkWidget *dialog = ask (window, _ ("Cut the passage here?"),
                           _ ("This outline and those after it become another region. The journal "
                              "keeps who said so; Ctrl+Z takes it back."),
                           _ ("_Cut"), &q);
  q->sight = sight_in_view (followed);
  g_signal_connect_object (dialog, "response", G_CALLBACK (cut_answered), window, 0);
  gtk_window_present (GTK_WINDOW (dialog));
  gtk_widget_grab_focus (q->reason);
}

static void
join_answered (AdwMessageDialog *dialog, const char *answer, TfWindow *window)
{
  Question *q = answer_of (dialog, answer);
  if (q == NULL)
    return;
  TfPassageItem *item = gtk_drop_down_get_selected_item (GTK_DROP_DOWN (q->passages));
  if (item == NULL
      || !tf_followed_join (followed_of (window), tf_passage_item_get_row (item)->id,
                            gtk_editable_get_text (GTK_EDITABLE (q->reason))))
    say_refused (window);
}

/* As they are now: a list that changed under the hand would join what nobody chose. */
static GListModel *
list_others (TfFollowed *followed)
{
  GListModel *all = tf_followed_get_passages (followed);
  GListStore *others = g_list_store_new (TF_TYPE_PASSAGE_ITEM);
  for (guint k = 0; k < g_list_model_get_n_items (all); k++)
    {
      g_autoptr (TfPassageItem) item = g_list_model_get_item (all, k);
      if (tf_passage_item_get_row (item)->id != tf_followed_get_chosen (followed))
        g_list_store_append (others, item);
    }
  return G_LIST_MODEL (others);
}

/* Hours between two passages; those that overlap in time are seldom one. */
static double
gap_between (const TfPassageRow *a, const TfPassageRow *b)
{
  double gap = fmax (b->first_time.s - a->last_time.s, a->first_time.s - b->last_time.s);
  return gap > 0 ? gap : HUGE_VAL;
}

/* The one that ends where this begins, or begins where this ends, is offered first. */
static guint
find_nearest (TfFollowed *followed, GListModel *others)
{
  const TfPassageRow *here = tf_followed_get_content (followed)->passage;
  guint nearest = 0, n = g_list_model_get_n_items (others);
  double least = HUGE_VAL;
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfPassageItem) item = g_list_model_get_item (others, k);
      double gap = gap_between (here, tf_passage_item_get_row (item));
      if (gap < least)
        {
          least = gap;
          nearest = k;
        }
    }
  return nearest;
}

static GtkWidget *
other_passages (TfFollowed *followed)
{
  GListModel *others = list_others (followed);
  GtkWidget *choice = gtk_drop_down_new (
      others, gtk_property_expression_new (TF_TYPE_PASSAGE_ITEM, NULL, "words"));
  gtk_drop_down_set_enable_search (GTK_DROP_DOWN (choice), TRUE);
  gtk_drop_down_set_selected (GTK_DROP_DOWN (choice), find_nearest (followed, others));
  gtk_accessible_update_property (GTK_ACCESSIBLE (choice), GTK_ACCESSIBLE_PROPERTY_LABEL,
                                  _ ("The other passage"), -1);
  return choice;
}

ACTION (join)
{
  Question *q;
  TfFollowed *followed = followed_of (window);
  if (!tf_followed_can_join (followed))
    {
      tf_window_say (window, _ ("There is no other passage to join this one to, or the ledger cannot be "
                                "written to."));
      return;
    }
  if (!has_person (window, action))
    return;
  GtkWidget *dialog = ask (window, _ ("Join to which passage?"),
                           _ ("Both are one region from now on. The journal keeps who said so; Ctrl+Z "
                              "takes it back."),
                           _ ("_Join"), &q);
  q->passages = other_passages (followed);
  gtk_box_prepend (GTK_BOX (gtk_widget_get_parent (q->reason)), q->passages);
  g_signal_connect_object (dialog, "response", G_CALLBACK (join_answered), window, 0);
  gtk_window_present (GTK_WINDOW (dialog));
}

static const TfReturnOffer *
offer_at (TfFollowed *followed, guint at)
{
  const TfPassageContent *content = tf_followed_get_content (followed);
  return content != NULL && at < content->returns->len
             ? &g_array_index (content->returns, TfReturnOffer, at)
             : NULL;
}

static void
offer_answered (AdwMessageDialog *dialog, const char *answer, TfWindow *window)
{
  Question *q = answer_of (dialog, answer);
  if (q != NULL
      && !tf_followed_answer (followed_of (window), &q->offer, q->same,
                              gtk_editable_get_text (GTK_EDITABLE (q->reason))))
    say_refused (window);
}

ACTION (answer)
{
  guint at;
  gboolean same;
  Question *q;
  g_variant_get (value, "(ub)", &at, &same);
  const TfReturnOffer *offer = offer_at (followed_of (window), at);
  if (offer == NULL || !has_person (window, action))
    return;
  GtkWidget *dialog
      = ask (window, same ? _ ("The same region, come round?") : _ ("Not the same region?"),
             _ ("A lineage is made by a person's word alone. The journal keeps who said so; Ctrl+Z takes "
                "it back."),
             same ? _ ("_Same region") : _ ("_Not the same"), &q);
  q->offer = *offer;
  q->same = same;
  g_signal_connect_object (dialog, "response", G_CALLBACK (offer_answered), window, 0);
  gtk_window_present (GTK_WINDOW (dialog));
  gtk_widget_grab_focus (q->reason);
}

/* The same without questions: for who drives the window over the session bus. */
ACTION (cut_for)
{
  if (!tf_followed_cut (followed_of (window), g_variant_get_string (value, NULL)))
    say_refused (window);
}
ACTION (join_for)
{
  gint64 other;
  const char *reason;
  g_variant_get (value, "(x&s)", &other, &reason);
  if (!tf_followed_join (followed_of (window), other, reason))
    say_refused (window);
}

/* -- saving ---------------------------------------------------------------------------------- */

ACTION (save_to)
{
  const char *what, *path;
  g_variant_get (value, "(&s&s)", &what, &path);
  tf_follow_save (followed_of (window), what, path);
}

static void
save_chosen (TfWindow *window, const char *what, const char *path)
{
  tf_follow_save (followed_of (window), what, path);
}

ACTION (save)
{
  const char *what = g_variant_get_string (value, NULL);
  g_autofree char *name = tf_follow_dup_file_name (followed_of (window), what);
  const char *title = strcmp (what, "figure") == 0
                          ? _ ("Save strip and charts: PDF, SVG or PNG by the ending")
                      : strcmp (what, "series") == 0
                          ? _ ("Save the series: CSV, VOTable, FITS or JSON by the ending")
                          : _ ("Save the film: .webm or .gif, or a folder for numbered PNG");
  tf_save_as_ask (window, title, name, what, save_chosen);
}

/* -- together -------------------------------------------------------------------------------- */

static const GActionEntry entries[] = {
  { "follow-play", NULL, NULL, "false", play },
  { "follow-blink", NULL, NULL, "false", blink },
  { "follow-speed", NULL, "d", "4.0", change_speed },
  { "follow-take", NULL, "s", "'flux'", change_take },
  { "follow-step", step, "i", NULL, NULL },
  { "follow-all-times", all_times, NULL, NULL, NULL },
  { "follow-choose", choose, "x", NULL, NULL },
  { "follow-beside", beside, "x", NULL, NULL },
  { "follow-mark", to_mark, NULL, NULL, NULL },
  { "follow-cut", cut, NULL, NULL, NULL },
  { "follow-join", join, NULL, NULL, NULL },
  { "follow-answer", answer, "(ub)", NULL, NULL },
  { "follow-cut-for", cut_for, "s", NULL, NULL },
  { "follow-join-for", join_for, "(xs)", NULL, NULL },
  { "follow-save", save, "s", NULL, NULL },
  { "follow-save-to", save_to, "(ss)", NULL, NULL },
};

static void
set_state (TfWindow *window, const char *name, GVariant *floating)
{
  g_autoptr (GVariant) state = g_variant_ref_sink (floating);
  GAction *action = g_action_map_lookup_action (G_ACTION_MAP (window), name);
  g_autoptr (GVariant) now = g_action_get_state (action);
  if (!g_variant_equal (now, state))
    g_simple_action_set_state (G_SIMPLE_ACTION (action), state);
}

static void
update (TfWindow *window)
{
  TfFollowed *followed = followed_of (window);
  set_state (window, "follow-play", g_variant_new_boolean (tf_followed_get_playing (followed)));
  set_state (window, "follow-blink", g_variant_new_boolean (tf_followed_get_blink (followed)));
  set_state (window, "follow-speed", g_variant_new_double (tf_followed_get_speed (followed)));
  set_state (window, "follow-take",
             g_variant_new_string (take_names[tf_followed_get_take (followed)]));
}

/* What is chosen on Mark or on the wings is what Follow shows; the same choice read again changes
 * nothing there. */
static void
choice_changed (TfWindow *window)
{
  TfRegionItem *region = tf_session_get_region (tf_window_get_session (window));
  const TfRow *row = region != NULL ? tf_region_item_get_row (region) : NULL;
  TfSight sight = row != NULL ? (TfSight){ row->mark, row->is_hint } : (TfSight){ 0 };
  TfSight *last = g_object_get_data (G_OBJECT (window), "followed-choice");
  if (sight.mark == last->mark && sight.is_hint == last->is_hint)
    return;
  *last = sight;
  if (sight.mark != 0)
    tf_followed_choose_sight (followed_of (window), sight);
}

void
tf_window_add_follow_actions (TfWindow *window, TfFollowed *followed)
{
  g_object_set_data_full (G_OBJECT (window), "followed", g_object_ref (followed), g_object_unref);
  g_object_set_data_full (G_OBJECT (window), "followed-choice", g_new0 (TfSight, 1), g_free);
  g_action_map_add_action_entries (G_ACTION_MAP (window), entries, G_N_ELEMENTS (entries), window);
  g_signal_connect_object (followed, "moment-changed", G_CALLBACK (update), window,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (tf_window_get_session (window), "choice-changed",
                           G_CALLBACK (choice_changed), window, G_CONNECT_SWAPPED);
  update (window);
}
