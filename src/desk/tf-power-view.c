/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-power-view.h"

#include <math.h>
#include <string.h>
#include <adwaita.h>
#include <glib/gi18n-lib.h>

#include "tf-option-row.h"
#include "tf-power-plot.h"
#include "tf-power-run.h"
#include "tf-widget-style.h"

struct _TfPowerView
{
  GtkWidget parent;
  GtkWidget *box, *start, *stop;
  GtkProgressBar *progress;
  GtkWidget *chart;
  GtkLabel *words;
  GPtrArray *rows; /* of TfOptionRow */
  TfPowerParams params;
  TfPowerCurve *curve; /* as far as it is worked out; NULL: nothing yet */
  double wanted;       /* the power that the curve was asked for */
  TfCancel *cancel;    /* of what is under way; NULL: nothing is */
};

G_DEFINE_FINAL_TYPE (TfPowerView, tf_power_view, GTK_TYPE_WIDGET)

static const double label_share = 0.9;

static TfPowerCurve *
curve_copy (const TfPowerCurve *curve)
{
  TfPowerCurve *copy = g_memdup2 (curve, sizeof *curve);
  copy->points = g_array_copy (curve->points);
  return copy;
}

/* -- in a thread: one number of regions after the other ------------------------------------------- */

typedef struct
{
  TfPowerView *view; /* kept alive by the task */
  TfPowerParams params;
  TfCancel *cancel;
} Job;

typedef struct
{
  TfPowerView *view;
  TfCancel *cancel;
  TfPowerCurve *part;
} Part;

static void
job_free (gpointer data)
{
  Job *job = data;
  tf_cancel_unref (job->cancel);
  g_free (job);
}

static void show (TfPowerView *self);

static gboolean
take_part (gpointer data)
{
  Part *part = data;
  TfPowerView *self = part->view;
  if (self->cancel == part->cancel && self->curve == NULL)
    self->curve = g_steal_pointer (&part->part);
  else if (self->cancel == part->cancel)
    g_array_append_vals (self->curve->points, part->part->points->data, part->part->points->len);
  if (self->cancel == part->cancel)
    show (self);
  g_clear_pointer (&part->part, tf_power_curve_free);
  tf_cancel_unref (part->cancel);
  g_object_unref (self);
  g_free (part);
  return G_SOURCE_REMOVE;
}

static void
run (GTask *task, gpointer source, gpointer data, GCancellable *cancellable)
{
  const Job *job = data;
  g_autoptr (TfWorkers) workers = tf_workers_new (0);
  const TfWork work = { .workers = workers, .cancel = job->cancel };
  for (gint64 n = job->params.least; n <= job->params.most; n *= 2)
    {
      TfPowerParams one = job->params;
      one.least = one.most = (int)n;
      TfPowerCurve *curve = tf_power_run (&one, &work, NULL);
      if (curve == NULL)
        break;
      Part *part = g_new (Part, 1);
      *part = (Part){ g_object_ref (job->view), tf_cancel_ref (job->cancel), curve };
      g_idle_add_full (G_PRIORITY_HIGH, take_part, part, NULL); /* before the end of the task */
    }
  g_task_return_boolean (task, TRUE);
}

static void
ran (GObject *source, GAsyncResult *result, gpointer data)
{
  TfPowerView *self = TF_POWER_VIEW (source);
  const Job *job = g_task_get_task_data (G_TASK (result));
  if (self->cancel == job->cancel)
    g_clear_pointer (&self->cancel, tf_cancel_unref);
  show (self);
}

/* -- asking ---------------------------------------------------------------------------------------- */

static guint
count_points (const TfPowerParams *params)
{
  guint n = 0;
  for (gint64 k = params->least; k <= params->most; k *= 2)
    n++;
  return n;
}

void
tf_power_view_stop (TfPowerView *self)
{
  g_return_if_fail (TF_IS_POWER_VIEW (self));
  if (self->cancel != NULL)
    tf_cancel_raise (self->cancel);
  g_clear_pointer (&self->cancel, tf_cancel_unref);
  if (self->box != NULL)
    show (self);
}

void
tf_power_view_start (TfPowerView *self)
{
  g_return_if_fail (TF_IS_POWER_VIEW (self));
  tf_power_view_stop (self);
  g_clear_pointer (&self->curve, tf_power_curve_free);
  self->cancel = tf_cancel_new ();
  self->wanted = self->params.power;
  Job *job = g_new0 (Job, 1);
  *job = (Job){ self, self->params, tf_cancel_ref (self->cancel) };
  g_autoptr (GTask) task = g_task_new (self, NULL, ran, NULL);
  g_task_set_task_data (task, job, job_free);
  g_task_run_in_thread (task, run);
  show (self);
}

gboolean
tf_power_view_is_busy (TfPowerView *self)
{
  return self->cancel != NULL;
}

gboolean
tf_power_view_set_option (TfPowerView *self, const char *name, const char *text)
{
  g_return_val_if_fail (TF_IS_POWER_VIEW (self), FALSE);
  gboolean good = tf_options_set (tf_power_options, &self->params, name, text, NULL);
  for (guint k = 0; k < self->rows->len; k++)
    tf_option_row_show (self->rows->pdata[k], &self->params);
  return good;
}

TfPowerCurve *
tf_power_view_dup_curve (TfPowerView *self, double *wanted)
{
  *wanted = self->wanted;
  return self->curve != NULL ? curve_copy (self->curve) : NULL;
}

/* -- showing ----------------------------------------------------------------------------------------- */

static void
draw (GtkDrawingArea *area, cairo_t *cr, int width, int height, gpointer data)
{
  TfPowerView *self = data;
  TfChartStyle style = tf_widget_chart_style (GTK_WIDGET (area), label_share);
  if (self->curve != NULL)
    tf_power_plot_draw (cr, self->curve, self->wanted, &style, (TfArea){ 0, 0, width, height });
}

static void
show (TfPowerView *self)
{
  gboolean busy = self->cancel != NULL;
  guint done = self->curve != NULL ? self->curve->points->len : 0,
        total = count_points (&self->params);
  g_autofree char *count = g_strdup_printf (_ ("%u of %u numbers of regions"), done, total);
  g_autofree char *words
      = self->curve != NULL
            ? tf_power_plot_dup_description (self->curve, self->wanted)
            : g_strdup (_ ("Pairs of invented groups are compared as this study compares its groups; "
                           "how often the difference is found is the power."));
  gtk_widget_set_sensitive (self->start, !busy);
  gtk_widget_set_sensitive (self->stop, busy);
  gtk_widget_set_visible (GTK_WIDGET (self->progress), busy);
  gtk_progress_bar_set_text (self->progress, count);
  gtk_progress_bar_set_fraction (self->progress, total > 0 ? (double)done / total : 0);
  gtk_label_set_label (self->words, words);
  gtk_widget_set_visible (self->chart, self->curve != NULL);
  tf_widget_describe (self->chart, g_strdup (words));
  gtk_widget_queue_draw (self->chart);
}

static void
changed (TfPowerView *self)
{
  for (guint k = 0; k < self->rows->len; k++)
    tf_option_row_store (self->rows->pdata[k], &self->params);
}

static GtkWidget *
new_flow (void)
{
  GtkWidget *flow = gtk_flow_box_new ();
  gtk_flow_box_set_selection_mode (GTK_FLOW_BOX (flow), GTK_SELECTION_NONE);
  gtk_flow_box_set_column_spacing (GTK_FLOW_BOX (flow), 14);
  gtk_flow_box_set_row_spacing (GTK_FLOW_BOX (flow), 6);
  gtk_flow_box_set_max_children_per_line (GTK_FLOW_BOX (flow), 4);
  return flow;
}

/* What is asked stands open; how it is worked out is folded away. */
static GtkWidget *
new_options (TfPowerView *self)
{
  static const char *const first[] = { "what", "first", "second", "power", NULL };
  GtkWidget *box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 6), *asked = new_flow (), *how = new_flow ();
  GtkWidget *more = gtk_expander_new (_ ("How it is worked out"));
  for (const TfOption *option = tf_power_options; option->name != NULL; option++)
    {
      GtkWidget *row = tf_option_row_new (option);
      tf_option_row_show (TF_OPTION_ROW (row), &self->params);
      g_signal_connect_swapped (row, "changed", G_CALLBACK (changed), self);
      g_ptr_array_add (self->rows, row);
      gtk_flow_box_append (GTK_FLOW_BOX (g_strv_contains (first, option->name) ? asked : how), row);
      gtk_widget_set_focusable (gtk_widget_get_parent (row), FALSE);
    }
  gtk_expander_set_child (GTK_EXPANDER (more), how);
  gtk_accessible_update_property (GTK_ACCESSIBLE (more), GTK_ACCESSIBLE_PROPERTY_LABEL,
                                  _ ("How it is worked out"), -1);
  gtk_box_append (GTK_BOX (box), asked);
  gtk_box_append (GTK_BOX (box), more);
  return box;
}

static GtkWidget *
new_buttons (TfPowerView *self)
{
  GtkWidget *box = gtk_box_new (GTK_ORIENTATION_HORIZONTAL, 8), *progress = gtk_progress_bar_new ();
  GtkWidget *save = gtk_button_new_with_label (_ ("Save…"));
  self->start = gtk_button_new_with_label (_ ("Work it out"));
  self->stop = gtk_button_new_with_label (_ ("Stop"));
  self->progress = GTK_PROGRESS_BAR (progress);
  gtk_progress_bar_set_show_text (self->progress, TRUE);
  gtk_widget_set_hexpand (progress, TRUE);
  gtk_widget_set_valign (progress, GTK_ALIGN_CENTER);
  gtk_accessible_update_property (GTK_ACCESSIBLE (progress), GTK_ACCESSIBLE_PROPERTY_LABEL,
                                  _ ("How far it is"), -1);
  gtk_actionable_set_action_name (GTK_ACTIONABLE (save), "win.save-power");
  gtk_actionable_set_action_target (GTK_ACTIONABLE (save), "s", "");
  g_signal_connect_swapped (self->start, "clicked", G_CALLBACK (tf_power_view_start), self);
  g_signal_connect_swapped (self->stop, "clicked", G_CALLBACK (tf_power_view_stop), self);
  gtk_box_append (GTK_BOX (box), self->start);
  gtk_box_append (GTK_BOX (box), self->stop);
  gtk_box_append (GTK_BOX (box), save);
  gtk_box_append (GTK_BOX (box), progress);
  return box;
}

/* -- the widget ------------------------------------------------------------------------------------- */

static void
dispose (GObject *object)
{
  TfPowerView *self = TF_POWER_VIEW (object);
  g_clear_pointer (&self->box, gtk_widget_unparent);
  tf_power_view_stop (self);
  g_clear_pointer (&self->curve, tf_power_curve_free);
  g_clear_pointer (&self->rows, g_ptr_array_unref);
  G_OBJECT_CLASS (tf_power_view_parent_class)->dispose (object);
}

static void
tf_power_view_class_init (TfPowerViewClass *klass)
{
  G_OBJECT_CLASS (klass)->dispose = dispose;
  gtk_widget_class_set_layout_manager_type (GTK_WIDGET_CLASS (klass), GTK_TYPE_BIN_LAYOUT);
}

static void
tf_power_view_init (TfPowerView *self)
{
  AdwStyleManager *manager = adw_style_manager_get_default ();
  self->rows = g_ptr_array_new ();
  tf_options_reset (tf_power_options, &self->params);
  self->params.runs = 100; /* a first look: more can be asked for */
  self->params.draws = 100;
  self->box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 8);
  self->chart = gtk_drawing_area_new ();
  self->words = GTK_LABEL (gtk_label_new (NULL));
  gtk_label_set_wrap (self->words, TRUE);
  gtk_label_set_xalign (self->words, 0);
  gtk_label_set_selectable (self->words, TRUE);
  gtk_drawing_area_set_content_height (GTK_DRAWING_AREA (self->chart), 320);
  gtk_drawing_area_set_draw_func (GTK_DRAWING_AREA (self->chart), draw, self, NULL);
  gtk_accessible_update_property (GTK_ACCESSIBLE (self->chart), GTK_ACCESSIBLE_PROPERTY_LABEL,
                                  _ ("Power"), -1);
  gtk_box_append (GTK_BOX (self->box), new_options (self));
  gtk_box_append (GTK_BOX (self->box), new_buttons (self));
  gtk_box_append (GTK_BOX (self->box), self->chart);
  gtk_box_append (GTK_BOX (self->box), GTK_WIDGET (self->words));
  gtk_widget_set_parent (self->box, GTK_WIDGET (self));
  g_signal_connect_object (manager, "notify::dark", G_CALLBACK (gtk_widget_queue_draw), self->chart,
                           G_CONNECT_SWAPPED);
  show (self);
}

GtkWidget *
tf_power_view_new (void)
{
  return g_object_new (TF_TYPE_POWER_VIEW, NULL);
}
