/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-laws-bench.h"

#include <math.h>
#include <string.h>
#include <adwaita.h>
#include <glib/gi18n-lib.h>

#include "tf-actions-laws.h"
#include "tf-chart-view.h"
#include "tf-dipole-table.h"
#include "tf-laws-study.h"
#include "tf-session-studies.h"
#include "tf-study-task.h"
#include "tf-what-if-list.h"
#include "tf-widget-style.h"

struct _TfLawsBench
{
  GtkWidget parent;
  TfSession *session;
  GtkWidget *parts;
  GtkBox *study, *one;
  GtkLabel *study_name, *study_state, *edition_words, *stretch, *one_title, *words, *progress, *cautions;
  GtkMenuButton *study_menu;
  gconstpointer in_menu; /* the list that the menu shows; compared, never followed */
  char *name_in_menu;
  GtkWidget *all_times, *relations, *edition_bar;
  GtkStack *stack;
  GtkGrid *charts;
  AdwStatusPage *nothing;
  GtkListView *what_if;
  GListStore *rows;
  GPtrArray *views; /* of TfChartView, in the order of the table; borrowed */
  TfChartView *large;
  GtkBox *power_box;
  TfPowerView *power;
  GtkWidget *save_one;
  GtkScrolledWindow *charts_scrolled, *one_scrolled;
  guint arranging; /* the charts are about to be put into other columns; 0: they are not */
  GtkExpander *dipole;
  GtkGrid *dipoles;
};

G_DEFINE_FINAL_TYPE (TfLawsBench, tf_laws_bench, GTK_TYPE_WIDGET)

/* -- following the session ------------------------------------------------------------------- */

static void
show_words (TfLawsBench *self, const TfLawsAnswer *answer)
{
  gboolean in_hand = tf_session_get_divide (self->session)->in_hand;
  const char *progress = in_hand ? _ ("A divide is in hand: intervals that take draws come when it is let go.")
                         : tf_session_awaits_laws (self->session)
                             ? _ ("Drawing the intervals…")
                             : "";
  gtk_label_set_label (self->progress, progress);
  gtk_widget_set_visible (GTK_WIDGET (self->progress), *progress != '\0');
  gtk_label_set_label (self->words, answer != NULL && answer->words != NULL ? answer->words : "");
}

static void
show_cautions (TfLawsBench *self, const TfLawsAnswer *answer)
{
  g_autoptr (GString) text = g_string_new (NULL);
  const TfFindings *findings = answer != NULL ? answer->findings : NULL;
  for (guint k = 0; findings != NULL && k < tf_notes_get_n (findings->cautions); k++)
    {
      g_autofree char *line = tf_note_dup_text (tf_notes_get (findings->cautions, k), FALSE);
      g_string_append_printf (text, "%s%s", k > 0 ? "\n" : "", line);
    }
  gtk_label_set_label (self->cautions, text->str);
}

/* While a divide moves what takes long is left as it was. */
static void
show_what_if (TfLawsBench *self, const TfLawsAnswer *answer)
{
  if (answer == NULL || answer->findings == NULL)
    g_list_store_remove_all (self->rows);
  else if (answer->findings->what_if->len > 0)
    tf_what_if_list_fill (self->rows, answer->findings->what_if);
}

/* Filled when it is looked at. */
static void
show_dipoles (TfLawsBench *self)
{
  TfLawsAnswer *answer = tf_session_get_laws (self->session);
  gboolean moving = tf_session_get_divide (self->session)->in_hand;
  if (gtk_expander_get_expanded (self->dipole) && !moving)
    tf_dipole_table_fill (self->dipoles, answer != NULL ? answer->findings : NULL);
}

static void
show_charts (TfLawsBench *self, const TfLawsAnswer *answer)
{
  TfLawsCharts *charts = answer != NULL ? answer->charts : NULL;
  for (guint k = 0; k < self->views->len; k++)
    tf_chart_view_show (self->views->pdata[k], charts);
  tf_chart_view_show (self->large, charts);
}

static void
show_page (TfLawsBench *self, const TfLawsAnswer *answer)
{
  const char *now = gtk_stack_get_visible_child_name (self->stack);
  const char *page = answer == NULL ? "working" : "charts";
  if (answer != NULL && answer->findings == NULL)
    page = answer->empty && !answer->study->sieve.with_hints ? "hints" : "nothing";
  if (answer != NULL && answer->trouble != NULL)
    adw_status_page_set_description (self->nothing, answer->trouble);
  if (g_strcmp0 (now, "power") == 0 || (strcmp (page, "charts") == 0 && g_strcmp0 (now, "one") == 0))
    return; /* one of them is enlarged */
  gtk_stack_set_visible_child_name (self->stack, page);
}

static void
show_stretch (TfLawsBench *self)
{
  TfStretch s = tf_session_get_stretch (self->session);
  g_autoptr (GString) text = g_string_new (NULL);
  if (!isnan (s.from_year))
    g_string_append_printf (text, _ ("Picked on the wings: %.2f to %.2f"), s.from_year, s.to_year);
  if (!isnan (s.low_deg))
    g_string_append_printf (text, _ (", latitudes %.0f° to %.0f°"), s.low_deg, s.high_deg);
  gtk_label_set_label (self->stretch, text->len > 0 ? text->str : _ ("All times and latitudes"));
  gtk_widget_set_visible (self->all_times, text->len > 0);
}

/* -- the study's name and state -------------------------------------------------------------- */

static char *
dup_state (TfLawsBench *self)
{
  guint version = tf_session_get_kept_version (self->session);
  gboolean changed = tf_session_is_study_changed (self->session);
  if (version > 0)
    return g_strdup_printf (changed ? _ ("Changed since version %u") : _ ("Version %u, as kept"),
                            version);
  return g_strdup (changed ? _ ("Not kept") : _ ("As the program sets it; not kept"));
}

/* A study that is being worked out whole, counted in steps. */
static void
show_task (TfLawsBench *self)
{
  g_autofree char *words = tf_session_dup_study_task (self->session);
  gtk_widget_set_visible (self->edition_bar, words != NULL);
  gtk_label_set_label (self->edition_words, words != NULL ? words : "");
}

static void
show_study (TfLawsBench *self)
{
  const char *name = tf_session_get_study (self->session)->name;
  g_autofree char *state = dup_state (self);
  g_autofree char *words = g_strdup_printf (_ ("Study: %s"), name);
  GtkPopover *open = gtk_menu_button_get_popover (self->study_menu);
  gconstpointer kept = tf_session_get_studies (self->session);
  gtk_label_set_label (self->study_name, name);
  gtk_label_set_label (self->study_state, state);
  gtk_accessible_update_property (GTK_ACCESSIBLE (self->study_menu), GTK_ACCESSIBLE_PROPERTY_LABEL,
                                  words, -1);
  tf_widget_name_inside (GTK_WIDGET (self->study_menu), words);
  if ((open == NULL || !gtk_widget_get_visible (GTK_WIDGET (open)))
      && (open == NULL || kept != self->in_menu || g_strcmp0 (name, self->name_in_menu) != 0))
    {
      g_autoptr (GMenuModel) menu = tf_study_menu_new (self->session);
      gtk_menu_button_set_menu_model (self->study_menu, menu);
      self->in_menu = kept;
      g_free (self->name_in_menu);
      self->name_in_menu = g_strdup (name);
    }
  show_task (self);
}

static void
laws_changed (TfLawsBench *self)
{
  const TfLawsAnswer *answer = tf_session_get_laws (self->session);
  show_study (self);
  show_stretch (self);
  show_words (self, answer);
  show_cautions (self, answer);
  show_what_if (self, answer);
  show_charts (self, answer);
  show_dipoles (self);
  show_page (self, answer);
}

/* Return on a row, or a double click: that choice becomes the study's, as a new edition. */
static void
what_if_activated (GtkListView *view, guint place, TfLawsBench *self)
{
  g_autoptr (TfWhatIfItem) item = g_list_model_get_item (G_LIST_MODEL (self->rows), place);
  if (item != NULL)
    gtk_widget_activate_action (GTK_WIDGET (self), "win.apply-what-if", "s",
                                tf_what_if_item_get_name (item));
}

/* The list is one stop on the way through the bench: the arrows go along its rows. */
static gboolean
what_if_key (GtkEventControllerKey *keys, guint key, guint code, GdkModifierType state, TfLawsBench *self)
{
  gboolean back = key == GDK_KEY_ISO_Left_Tab || (state & GDK_SHIFT_MASK) != 0;
  if (key != GDK_KEY_Tab && key != GDK_KEY_ISO_Left_Tab)
    return FALSE;
  return gtk_widget_grab_focus (back ? GTK_WIDGET (self->words) : GTK_WIDGET (self->dipole));
}

/* -- charts ---------------------------------------------------------------------------------- */

static void
row_chosen (TfChartView *view, int row, TfLawsBench *self)
{
  const TfLawsAnswer *answer = tf_session_get_laws (self->session);
  if (answer == NULL || answer->findings == NULL
      || (guint)row >= tf_sample_get_n (answer->findings->sample))
    return;
  gint64 mark = answer->findings->marks[row];
  gtk_widget_activate_action (GTK_WIDGET (self), "win.open-mark", "(xb)", mark < 0 ? -mark : mark,
                              mark < 0);
}

static GtkWidget *
new_head (const TfLawsChart *chart)
{
  GtkWidget *box = gtk_box_new (GTK_ORIENTATION_HORIZONTAL, 6);
  GtkWidget *title = gtk_label_new (_ (chart->title)), *button = gtk_button_new ();
  gtk_label_set_xalign (GTK_LABEL (title), 0);
  gtk_label_set_ellipsize (GTK_LABEL (title), PANGO_ELLIPSIZE_END);
  gtk_widget_set_hexpand (title, TRUE);
  gtk_widget_add_css_class (title, "heading");
  g_autofree char *words = g_strdup_printf (_ ("Enlarge: %s"), _ (chart->title));
  gtk_button_set_icon_name (GTK_BUTTON (button), "view-fullscreen-symbolic");
  gtk_widget_add_css_class (button, "flat");
  gtk_widget_set_tooltip_text (button, words);
  gtk_accessible_update_property (GTK_ACCESSIBLE (button), GTK_ACCESSIBLE_PROPERTY_LABEL, words, -1);
  gtk_actionable_set_action_name (GTK_ACTIONABLE (button), "win.enlarge");
  gtk_actionable_set_action_target (GTK_ACTIONABLE (button), "s", chart->name);
  gtk_box_append (GTK_BOX (box), title);
  gtk_box_append (GTK_BOX (box), button);
  return box;
}

static void
add_chart (TfLawsBench *self, const TfLawsChart *chart)
{
  GtkWidget *box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 4);
  GtkWidget *view = tf_chart_view_new (chart);
  int place = (int)self->views->len;
  gtk_widget_set_valign (view, GTK_ALIGN_START);
  gtk_box_append (GTK_BOX (box), new_head (chart));
  gtk_box_append (GTK_BOX (box), view);
  gtk_grid_attach (self->charts, box, place % 2, place / 2, 1, 1);
  g_signal_connect_object (view, "row-chosen", G_CALLBACK (row_chosen), self, 0);
  g_ptr_array_add (self->views, view);
}

/* Two charts side by side, or with little room for their text one below the other. */
static gboolean
arrange_charts (gpointer data)
{
  TfLawsBench *self = data;
  GtkAdjustment *across = gtk_scrolled_window_get_hadjustment (self->charts_scrolled);
  double text = tf_widget_chart_style (GTK_WIDGET (self->charts), 1).text_pt;
  int columns = gtk_adjustment_get_page_size (across) < 2 * 20 * text ? 1 : 2, place = 0;
  GtkLayoutManager *layout = gtk_widget_get_layout_manager (GTK_WIDGET (self->charts));
  for (GtkWidget *box = gtk_widget_get_first_child (GTK_WIDGET (self->charts)); box != NULL;
       box = gtk_widget_get_next_sibling (box), place++)
    {
      GtkLayoutChild *child = gtk_layout_manager_get_layout_child (layout, box);
      g_object_set (child, "column", place % columns, "row", place / columns, NULL);
    }
  self->arranging = 0;
  return G_SOURCE_REMOVE;
}

static void
room_changed (TfLawsBench *self)
{
  if (self->arranging == 0)
    self->arranging = g_idle_add (arrange_charts, self);
}

gboolean
tf_laws_bench_enlarge (TfLawsBench *self, const char *name)
{
  g_return_val_if_fail (TF_IS_LAWS_BENCH (self) && name != NULL, FALSE);
  if (*name == '\0')
    {
      gtk_stack_set_visible_child_name (self->stack, "charts");
      return TRUE;
    }
  if (strcmp (name, "power") == 0)
    {
      gtk_stack_set_visible_child_name (self->stack, "power");
      return TRUE;
    }
  const TfLawsChart *chart = tf_laws_chart_find (name);
  if (chart == NULL)
    return FALSE;
  tf_chart_view_set_chart (self->large, chart);
  gtk_adjustment_set_value (gtk_scrolled_window_get_vadjustment (self->one_scrolled), 0);
  gtk_label_set_label (self->one_title, _ (chart->title));
  gtk_actionable_set_action_target (GTK_ACTIONABLE (self->save_one), "(ss)", name, "");
  gtk_widget_set_visible (self->relations, strcmp (name, "joy") == 0);
  gtk_stack_set_visible_child_name (self->stack, "one");
  return TRUE;
}

TfPowerView *
tf_laws_bench_get_power (TfLawsBench *self)
{
  return self->power;
}

const char *
tf_laws_bench_get_words (TfLawsBench *self)
{
  return gtk_label_get_label (self->words);
}

/* -- the widget ------------------------------------------------------------------------------ */

void
tf_laws_bench_set_session (TfLawsBench *self, TfSession *session)
{
  g_return_if_fail (TF_IS_LAWS_BENCH (self) && TF_IS_SESSION (session) && self->session == NULL);
  self->session = g_object_ref (session);
  GtkWidget *study = tf_laws_study_new ();
  tf_laws_study_set_session (TF_LAWS_STUDY (study), session);
  gtk_box_append (self->study, study);
  g_signal_connect_object (session, "laws-changed", G_CALLBACK (laws_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "status-changed", G_CALLBACK (show_task), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "points-changed", G_CALLBACK (show_stretch), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (self->dipole, "notify::expanded", G_CALLBACK (show_dipoles), self,
                           G_CONNECT_SWAPPED);
  laws_changed (self);
}

static void
map (GtkWidget *widget)
{
  TfLawsBench *self = TF_LAWS_BENCH (widget);
  GTK_WIDGET_CLASS (tf_laws_bench_parent_class)->map (widget);
  if (self->session != NULL)
    tf_session_show_laws (self->session, TRUE);
}

static void
unmap (GtkWidget *widget)
{
  TfLawsBench *self = TF_LAWS_BENCH (widget);
  if (self->session != NULL)
    tf_session_show_laws (self->session, FALSE);
  GTK_WIDGET_CLASS (tf_laws_bench_parent_class)->unmap (widget);
}

static void
dispose (GObject *object)
{
  TfLawsBench *self = TF_LAWS_BENCH (object);
  g_clear_handle_id (&self->arranging, g_source_remove);
  g_clear_pointer (&self->parts, gtk_widget_unparent);
  g_clear_pointer (&self->views, g_ptr_array_unref);
  g_clear_object (&self->rows);
  g_clear_pointer (&self->name_in_menu, g_free);
  g_clear_object (&self->session);
  G_OBJECT_CLASS (tf_laws_bench_parent_class)->dispose (object);
}

static void
tf_laws_bench_class_init (TfLawsBenchClass *klass)
{
  GtkWidgetClass *widget = GTK_WIDGET_CLASS (klass);
  G_OBJECT_CLASS (klass)->dispose = dispose;
  widget->map = map;
  widget->unmap = unmap;
  gtk_widget_class_set_layout_manager_type (widget, GTK_TYPE_BIN_LAYOUT);
  gtk_widget_class_set_css_name (widget, "laws");
  gtk_widget_class_set_template_from_resource (widget, "/io/tiltfield/Tiltfield/laws.ui");
  gtk_widget_class_bind_template_child (widget, TfLawsBench, parts);
  gtk_widget_class_bind_template_child (widget, TfLawsBench, study);
  gtk_widget_class_bind_template_child (widget, TfLawsBench, study_menu);
  gtk_widget_class_bind_template_child (widget, TfLawsBench, study_name);
  gtk_widget_class_bind_template_child (widget, TfLawsBench, study_state);
  gtk_widget_class_bind_template_child (widget, TfLawsBench, edition_bar);
  gtk_widget_class_bind_template_child (widget, TfLawsBench, edition_words);
  gtk_widget_class_bind_template_child (widget, TfLawsBench, stretch);
  gtk_widget_class_bind_template_child (widget, TfLawsBench, all_times);
  gtk_widget_class_bind_template_child (widget, TfLawsBench, stack);
  gtk_widget_class_bind_template_child (widget, TfLawsBench, charts);
  gtk_widget_class_bind_template_child (widget, TfLawsBench, charts_scrolled);
  gtk_widget_class_bind_template_child (widget, TfLawsBench, one);
  gtk_widget_class_bind_template_child (widget, TfLawsBench, power_box);
  gtk_widget_class_bind_template_child (widget, TfLawsBench, save_one);
  gtk_widget_class_bind_template_child (widget, TfLawsBench, one_scrolled);
  gtk_widget_class_bind_template_child (widget, TfLawsBench, dipole);
  gtk_widget_class_bind_template_child (widget, TfLawsBench, dipoles);
  gtk_widget_class_bind_template_child (widget, TfLawsBench, one_title);
  gtk_widget_class_bind_template_child (widget, TfLawsBench, relations);
  gtk_widget_class_bind_template_child (widget, TfLawsBench, nothing);
  gtk_widget_class_bind_template_child (widget, TfLawsBench, words);
  gtk_widget_class_bind_template_child (widget, TfLawsBench, progress);
  gtk_widget_class_bind_template_child (widget, TfLawsBench, what_if);
  gtk_widget_class_bind_template_child (widget, TfLawsBench, cautions);
}

static void
tf_laws_bench_init (TfLawsBench *self)
{
  gtk_widget_init_template (GTK_WIDGET (self));
  self->views = g_ptr_array_new ();
  for (const TfLawsChart *chart = tf_laws_chart_table; chart->name != NULL; chart++)
    add_chart (self, chart);
  g_signal_connect_object (gtk_scrolled_window_get_hadjustment (self->charts_scrolled),
                           "notify::page-size", G_CALLBACK (room_changed), self, G_CONNECT_SWAPPED);
  self->large = TF_CHART_VIEW (tf_chart_view_new (&tf_laws_chart_table[0]));
  g_signal_connect_object (self->large, "row-chosen", G_CALLBACK (row_chosen), self, 0);
  gtk_widget_set_vexpand (GTK_WIDGET (self->large), TRUE);
  tf_chart_view_set_fits (self->large, TRUE);
  gtk_box_append (self->one, GTK_WIDGET (self->large));
  self->power = TF_POWER_VIEW (tf_power_view_new ());
  gtk_box_append (self->power_box, GTK_WIDGET (self->power));
  self->rows = g_list_store_new (TF_TYPE_WHAT_IF_ITEM);
  g_autoptr (GtkNoSelection) model
      = gtk_no_selection_new (g_object_ref (G_LIST_MODEL (self->rows)));
  g_autoptr (GtkListItemFactory) factory = tf_what_if_factory_new ();
  gtk_list_view_set_model (self->what_if, GTK_SELECTION_MODEL (model));
  gtk_list_view_set_factory (self->what_if, factory);
  g_signal_connect_object (self->what_if, "activate", G_CALLBACK (what_if_activated), self, 0);
  tf_widget_focus_when_open (GTK_WIDGET (self->dipole), GTK_WIDGET (self->dipoles));
  GtkEventController *keys = gtk_event_controller_key_new ();
  gtk_event_controller_set_propagation_phase (keys, GTK_PHASE_CAPTURE);
  g_signal_connect_object (keys, "key-pressed", G_CALLBACK (what_if_key), self, 0);
  gtk_widget_add_controller (GTK_WIDGET (self->what_if), keys);
}
