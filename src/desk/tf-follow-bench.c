/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-follow-bench.h"

#include <glib/gi18n-lib.h>

#include "tf-dial-view.h"
#include "tf-follow-facts.h"
#include "tf-followed-private.h"
#include "tf-look-view.h"
#include "tf-series-view.h"
#include "tf-slip-words.h"
#include "tf-widget-style.h"

struct _TfFollowBench
{
  GtkWidget parent;
  GtkWidget *box, *work, *nothing, *beside_box, *offers, *others, *others_title, *busy;
  GtkDropDown *passage;
  GtkListView *strip, *beside;
  TfSeriesView *series;
  TfLookView *large;
  GtkLabel *large_words, *verdict, *links, *nothing_words, *beside_words;
  TfVerdictSign *sign;
  GtkGrid *facts;
  TfFollowed *followed;
  GtkSingleSelection *moment, *beside_moment;
  guint frames;     /* since the list changed */
  guint showing;    /* tick that brings the chosen look into sight; 0 */
  gboolean filling; /* what changes now is not the person's doing */
};

enum
{
  SETTLED_FRAMES = 3 /* a list knows its width some frames after it was filled */
};

G_DEFINE_FINAL_TYPE (TfFollowBench, tf_follow_bench, GTK_TYPE_WIDGET)

/* -- the strip ------------------------------------------------------------------------------- */

static void
cell_setup (GtkSignalListItemFactory *factory, GtkListItem *cell)
{
  gtk_list_item_set_child (cell, tf_look_view_new ());
}

static void
cell_bind (GtkSignalListItemFactory *factory, GtkListItem *cell)
{
  tf_look_view_set_item (TF_LOOK_VIEW (gtk_list_item_get_child (cell)),
                         gtk_list_item_get_item (cell));
}

static void
cell_unbind (GtkSignalListItemFactory *factory, GtkListItem *cell)
{
  tf_look_view_set_item (TF_LOOK_VIEW (gtk_list_item_get_child (cell)), NULL);
}

static GtkSingleSelection *
fill_strip (GtkListView *strip, GListModel *looks)
{
  GtkSingleSelection *selection = gtk_single_selection_new (g_object_ref (looks));
  gtk_single_selection_set_autoselect (selection, FALSE);
  gtk_single_selection_set_can_unselect (selection, TRUE);
  GtkListItemFactory *factory = gtk_signal_list_item_factory_new ();
  g_signal_connect (factory, "setup", G_CALLBACK (cell_setup), NULL);
  g_signal_connect (factory, "bind", G_CALLBACK (cell_bind), NULL);
  g_signal_connect (factory, "unbind", G_CALLBACK (cell_unbind), NULL);
  gtk_list_view_set_factory (strip, factory);
  g_object_unref (factory);
  gtk_list_view_set_model (strip, GTK_SELECTION_MODEL (selection));
  return selection;
}

/* The chosen look is wholly in sight, in the middle when it was not; all cells are equally wide. */
static gboolean
show_now (GtkWidget *strip, GdkFrameClock *clock, gpointer data)
{
  TfFollowBench *self = data;
  if (++self->frames < SETTLED_FRAMES)
    return G_SOURCE_CONTINUE;
  GtkAdjustment *across = gtk_scrollable_get_hadjustment (GTK_SCROLLABLE (strip));
  guint n = g_list_model_get_n_items (tf_followed_get_looks (self->followed));
  double now = tf_followed_get_now (self->followed), page = gtk_adjustment_get_page_size (across),
         at = gtk_adjustment_get_value (across), cell = gtk_adjustment_get_upper (across) / MAX (n, 1);
  if (page > cell && (now * cell < at || (now + 1) * cell > at + page))
    gtk_adjustment_set_value (across, (now + 0.5) * cell - page / 2);
  self->showing = 0;
  return G_SOURCE_REMOVE;
}

/* After the list has been laid out anew. */
static void
want_now_in_sight (TfFollowBench *self)
{
  self->frames = 0;
  if (self->showing == 0 && gtk_widget_get_mapped (GTK_WIDGET (self->strip)))
    self->showing = gtk_widget_add_tick_callback (GTK_WIDGET (self->strip), show_now, self, NULL);
}

static void
look_selected (TfFollowBench *self)
{
  guint at = gtk_single_selection_get_selected (self->moment);
  if (!self->filling && !self->followed->taking && at != GTK_INVALID_LIST_POSITION)
    tf_followed_set_now (self->followed, (int)at);
}

static void
look_activated (GtkListView *strip, guint position, TfFollowBench *self)
{
  tf_followed_set_now (self->followed, (int)position);
  gtk_widget_activate_action (GTK_WIDGET (self), "win.follow-mark", NULL);
}

/* -- which passage --------------------------------------------------------------------------- */

static void
passage_selected (TfFollowBench *self)
{
  TfPassageItem *item = gtk_drop_down_get_selected_item (self->passage);
  if (!self->filling && !self->followed->taking && item != NULL)
    tf_followed_choose (self->followed, tf_passage_item_get_row (item)->id);
}

static void
select_passage (TfFollowBench *self)
{
  GListModel *passages = tf_followed_get_passages (self->followed);
  gint64 chosen = tf_followed_get_chosen (self->followed);
  guint n = g_list_model_get_n_items (passages);
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfPassageItem) item = g_list_model_get_item (passages, k);
      if (tf_passage_item_get_row (item)->id == chosen)
        gtk_drop_down_set_selected (self->passage, k);
    }
}

/* -- what is known --------------------------------------------------------------------------- */

static GtkWidget *
label_new (const char *text, gboolean name)
{
  GtkWidget *label = gtk_label_new (text);
  gtk_label_set_xalign (GTK_LABEL (label), 0);
  gtk_label_set_yalign (GTK_LABEL (label), 0);
  gtk_label_set_wrap (GTK_LABEL (label), TRUE);
  gtk_widget_add_css_class (label, name ? "dim-label" : "slip-value");
  gtk_widget_set_hexpand (label, !name);
  return label;
}

static void
clear_children (GtkWidget *box)
{
  GtkWidget *child;
  while ((child = gtk_widget_get_first_child (box)) != NULL)
    {
      if (GTK_IS_GRID (box))
        gtk_grid_remove (GTK_GRID (box), child);
      else
        gtk_box_remove (GTK_BOX (box), child);
    }
}

static void
show_facts (TfFollowBench *self)
{
  g_autoptr (GPtrArray) facts = tf_follow_facts (self->followed);
  clear_children (GTK_WIDGET (self->facts));
  for (guint k = 0; k < facts->len; k++)
    {
      const TfFact *fact = g_ptr_array_index (facts, k);
      GtkWidget *value = label_new (fact->value, FALSE);
      gtk_widget_set_tooltip_text (value, fact->how);
      gtk_grid_attach (self->facts, label_new (fact->name, TRUE), 0, (int)k, 1, 1);
      gtk_grid_attach (self->facts, value, 1, (int)k, 1, 1);
    }
  int diamond;
  g_autofree char *verdict = tf_follow_dup_verdict (self->followed, &diamond);
  gtk_label_set_label (self->verdict, verdict);
  tf_verdict_sign_set (self->sign, (TfDiamond)diamond);
}

static void
show_links (TfFollowBench *self, const TfPassageContent *content)
{
  GString *text = g_string_new (NULL);
  for (guint k = 0; k < content->links->len; k++)
    {
      const TfPassageLink *link = &g_array_index (content->links, TfPassageLink, k);
      g_autofree char *words = tf_follow_dup_link (content, link);
      g_string_append_printf (text, "%s%s", k > 0 ? "\n" : "", words);
    }
  gtk_label_set_label (self->links, text->len > 0 ? text->str : _ ("No links: seen once."));
  g_string_free (text, TRUE);
}

/* -- what may have come round ---------------------------------------------------------------- */

static const TfPassageRow *
other_row (const TfPassageContent *content, gint64 id)
{
  for (guint k = 0; k < content->others->len; k++)
    {
      const TfPassageRow *row = g_ptr_array_index (content->others, k);
      if (row->id == id)
        return row;
    }
  return NULL;
}

static GtkWidget *
button_new (const char *label, const char *action, GVariant *target)
{
  GtkWidget *button = gtk_button_new_with_label (label);
  gtk_actionable_set_action_name (GTK_ACTIONABLE (button), action);
  gtk_actionable_set_action_target_value (GTK_ACTIONABLE (button), target);
  return button;
}

static void
add_offer (TfFollowBench *self, const TfPassageContent *content, guint at)
{
  const TfReturnOffer *offer = &g_array_index (content->returns, TfReturnOffer, at);
  gint64 id = offer->earlier == content->passage->id ? offer->later : offer->earlier;
  const TfPassageRow *row = other_row (content, id);
  if (row == NULL)
    return;
  g_autofree char *name = tf_passage_dup_name (row), *day = tf_series_chart_dup_day (row->first_time);
  g_autofree char *lon = tf_words_dup_signed (offer->lon_deg, 1),
                  *lat = tf_words_dup_signed (offer->lat_deg, 1);
  g_autofree char *text = g_strdup_printf (
      id == offer->later
          ? _ ("May come back as %s on %s: %s° in longitude, %s° in latitude from its carried "
               "place.")
          : _ ("May be the return of %s, first seen %s: %s° in longitude, %s° in latitude from "
               "its carried place."),
      name, day, lon, lat);
  GtkWidget *words = label_new (text, TRUE), *buttons = gtk_box_new (GTK_ORIENTATION_HORIZONTAL, 6);
  gtk_label_set_max_width_chars (GTK_LABEL (words), 30);
  gtk_box_append (GTK_BOX (buttons),
                  button_new (_ ("Side by side"), "win.follow-beside", g_variant_new_int64 (id)));
  gtk_box_append (GTK_BOX (buttons), button_new (_ ("Same region…"), "win.follow-answer",
                                                 g_variant_new ("(ub)", at, TRUE)));
  gtk_box_append (GTK_BOX (buttons),
                  button_new (_ ("Not…"), "win.follow-answer", g_variant_new ("(ub)", at, FALSE)));
  gtk_box_append (GTK_BOX (self->offers), words);
  gtk_box_append (GTK_BOX (self->offers), buttons);
}

/* The passages that are one region with it already. */
static void
show_others (TfFollowBench *self, const TfPassageContent *content)
{
  clear_children (self->others);
  for (guint k = 0; k < content->others->len; k++)
    {
      const TfPassageRow *row = g_ptr_array_index (content->others, k);
      if (row->same != content->passage->same)
        continue;
      g_autofree char *name = tf_passage_dup_name (row), *day = tf_series_chart_dup_day (row->first_time);
      g_autofree char *text
          = g_strdup_printf (_ ("The same region: %s from %s, %s"), name, day, row->vantage);
      gtk_box_append (GTK_BOX (self->others), label_new (text, TRUE));
      GtkWidget *button
          = button_new (_ ("Side by side"), "win.follow-beside", g_variant_new_int64 (row->id));
      gtk_widget_set_halign (button, GTK_ALIGN_START);
      gtk_box_append (GTK_BOX (self->others), button);
    }
  gtk_widget_set_visible (self->others_title,
                          gtk_widget_get_first_child (self->others) != NULL);
}

/* What waits for an answer stands above the facts. */
static void
show_offers (TfFollowBench *self, const TfPassageContent *content)
{
  clear_children (self->offers);
  for (guint k = 0; k < content->returns->len; k++)
    add_offer (self, content, k);
  gtk_widget_set_visible (self->offers, gtk_widget_get_first_child (self->offers) != NULL);
}

static void
show_beside (TfFollowBench *self)
{
  const TfPassageContent *beside = tf_followed_get_beside (self->followed);
  gtk_widget_set_visible (self->beside_box, beside != NULL);
  if (beside == NULL)
    return;
  g_autofree char *name = tf_passage_dup_name (beside->passage),
                  *first = tf_series_chart_dup_day (beside->passage->first_time),
                  *last = tf_series_chart_dup_day (beside->passage->last_time);
  g_autofree char *text
      = g_strdup_printf (_ ("Beside it: %s, %s – %s, at its own scale"), name, first, last);
  gtk_label_set_label (self->beside_words, text);
}

/* -- following ------------------------------------------------------------------------------- */

static void
passage_changed (TfFollowBench *self)
{
  const TfPassageContent *content = tf_followed_get_content (self->followed);
  const char *problem = tf_followed_get_problem (self->followed);
  gtk_widget_set_visible (self->work, content != NULL);
  gtk_widget_set_visible (self->nothing, content == NULL);
  gtk_label_set_label (self->nothing_words,
                       problem != NULL ? problem : _ ("Reading the passages…"));
  self->filling = TRUE;
  select_passage (self);
  self->filling = FALSE;
  if (content == NULL)
    return;
  show_links (self, content);
  show_offers (self, content);
  show_others (self, content);
  show_beside (self);
}

static void
moment_changed (TfFollowBench *self)
{
  int shown = tf_followed_get_shown (self->followed), now = tf_followed_get_now (self->followed);
  g_autoptr (TfLookItem) item
      = shown >= 0 ? g_list_model_get_item (tf_followed_get_looks (self->followed), (guint)shown)
                   : NULL;
  tf_look_view_set_item (self->large, item);
  g_autofree char *words = item != NULL ? tf_look_item_dup_words (item) : g_strdup ("");
  gtk_label_set_label (self->large_words, words);
  self->filling = TRUE;
  guint selected = gtk_single_selection_get_selected (self->moment);
  if (now >= 0 && selected != (guint)now)
    gtk_single_selection_set_selected (self->moment, (guint)now);
  want_now_in_sight (self);
  self->filling = FALSE;
  if (!tf_followed_get_playing (self->followed) && !tf_followed_get_blink (self->followed))
    show_facts (self);
}

static void
passages_changed (TfFollowBench *self)
{
  self->filling = TRUE;
  select_passage (self);
  self->filling = FALSE;
}

static void
busy_changed (TfFollowBench *self)
{
  gtk_widget_set_visible (self->busy, tf_followed_is_busy (self->followed));
}

/* The chosen passage's words are cut where the panel is narrow; the list shows them whole. */
static void
words_setup (GtkSignalListItemFactory *factory, GtkListItem *cell)
{
  GtkWidget *label = gtk_label_new (NULL);
  gtk_label_set_xalign (GTK_LABEL (label), 0);
  gtk_label_set_ellipsize (GTK_LABEL (label), PANGO_ELLIPSIZE_END);
  gtk_label_set_width_chars (GTK_LABEL (label), 22);
  gtk_list_item_set_child (cell, label);
}

static void
words_bind (GtkSignalListItemFactory *factory, GtkListItem *cell)
{
  const char *words = tf_passage_item_get_words (gtk_list_item_get_item (cell));
  gtk_label_set_label (GTK_LABEL (gtk_list_item_get_child (cell)), words);
  gtk_widget_set_tooltip_text (gtk_list_item_get_child (cell), words);
}

static void
fill_passages (TfFollowBench *self)
{
  g_autoptr (GtkListItemFactory) factory = gtk_signal_list_item_factory_new ();
  g_signal_connect (factory, "setup", G_CALLBACK (words_setup), NULL);
  g_signal_connect (factory, "bind", G_CALLBACK (words_bind), NULL);
  g_autoptr (GtkExpression) words
      = gtk_property_expression_new (TF_TYPE_PASSAGE_ITEM, NULL, "words");
  gtk_drop_down_set_expression (self->passage, words);
  gtk_drop_down_set_factory (self->passage, factory);
  gtk_drop_down_set_model (self->passage, tf_followed_get_passages (self->followed));
  tf_widget_name_inside (GTK_WIDGET (self->passage), _ ("Passage"));
}

void
tf_follow_bench_set_followed (TfFollowBench *self, TfFollowed *followed)
{
  g_return_if_fail (TF_IS_FOLLOW_BENCH (self) && self->followed == NULL);
  self->followed = g_object_ref (followed);
  self->filling = TRUE;
  fill_passages (self);
  self->moment = fill_strip (self->strip, tf_followed_get_looks (followed));
  self->beside_moment = fill_strip (self->beside, tf_followed_get_beside_looks (followed));
  self->filling = FALSE;
  g_signal_connect_object (self->moment, "notify::selected", G_CALLBACK (look_selected), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (self->passage, "notify::selected", G_CALLBACK (passage_selected), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect (self->strip, "activate", G_CALLBACK (look_activated), self);
  tf_series_view_set_followed (self->series, followed);
  g_signal_connect_object (followed, "passages-changed", G_CALLBACK (passages_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (followed, "passage-changed", G_CALLBACK (passage_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (followed, "moment-changed", G_CALLBACK (moment_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (followed, "busy-changed", G_CALLBACK (busy_changed), self,
                           G_CONNECT_SWAPPED);
  passage_changed (self);
}

/* In view: passages are made anew when they are due. */
static void
mapped (GtkWidget *widget, gpointer data)
{
  TfFollowBench *self = TF_FOLLOW_BENCH (widget);
  if (self->followed != NULL)
    tf_followed_set_active (self->followed, GPOINTER_TO_INT (data));
}

static void
dispose (GObject *object)
{
  TfFollowBench *self = TF_FOLLOW_BENCH (object);
  if (self->showing != 0)
    gtk_widget_remove_tick_callback (GTK_WIDGET (self->strip), self->showing);
  self->showing = 0;
  g_clear_object (&self->moment);
  g_clear_object (&self->beside_moment);
  g_clear_object (&self->followed);
  g_clear_pointer (&self->box, gtk_widget_unparent);
  G_OBJECT_CLASS (tf_follow_bench_parent_class)->dispose (object);
}

static void
bind_children (GtkWidgetClass *widget)
{
  gtk_widget_class_bind_template_child (widget, TfFollowBench, box);
  gtk_widget_class_bind_template_child (widget, TfFollowBench, work);
  gtk_widget_class_bind_template_child (widget, TfFollowBench, nothing);
  gtk_widget_class_bind_template_child (widget, TfFollowBench, nothing_words);
  gtk_widget_class_bind_template_child (widget, TfFollowBench, busy);
  gtk_widget_class_bind_template_child (widget, TfFollowBench, passage);
  gtk_widget_class_bind_template_child (widget, TfFollowBench, strip);
  gtk_widget_class_bind_template_child (widget, TfFollowBench, beside);
  gtk_widget_class_bind_template_child (widget, TfFollowBench, beside_box);
  gtk_widget_class_bind_template_child (widget, TfFollowBench, beside_words);
  gtk_widget_class_bind_template_child (widget, TfFollowBench, series);
  gtk_widget_class_bind_template_child (widget, TfFollowBench, large);
  gtk_widget_class_bind_template_child (widget, TfFollowBench, large_words);
  gtk_widget_class_bind_template_child (widget, TfFollowBench, verdict);
  gtk_widget_class_bind_template_child (widget, TfFollowBench, sign);
  gtk_widget_class_bind_template_child (widget, TfFollowBench, facts);
  gtk_widget_class_bind_template_child (widget, TfFollowBench, links);
  gtk_widget_class_bind_template_child (widget, TfFollowBench, offers);
  gtk_widget_class_bind_template_child (widget, TfFollowBench, others);
  gtk_widget_class_bind_template_child (widget, TfFollowBench, others_title);
}

static void
tf_follow_bench_class_init (TfFollowBenchClass *klass)
{
  GtkWidgetClass *widget = GTK_WIDGET_CLASS (klass);
  G_OBJECT_CLASS (klass)->dispose = dispose;
  g_type_ensure (TF_TYPE_LOOK_VIEW);
  g_type_ensure (TF_TYPE_SERIES_VIEW);
  g_type_ensure (TF_TYPE_VERDICT_SIGN);
  gtk_widget_class_set_layout_manager_type (widget, GTK_TYPE_BIN_LAYOUT);
  gtk_widget_class_set_css_name (widget, "follow");
  gtk_widget_class_set_template_from_resource (widget, "/io/tiltfield/Tiltfield/follow-bench.ui");
  bind_children (widget);
}

static void
tf_follow_bench_init (TfFollowBench *self)
{
  gtk_widget_init_template (GTK_WIDGET (self));
  tf_look_view_set_large (self->large, TRUE);
  g_signal_connect (self, "map", G_CALLBACK (mapped), GINT_TO_POINTER (TRUE));
  g_signal_connect (self, "unmap", G_CALLBACK (mapped), GINT_TO_POINTER (FALSE));
}
