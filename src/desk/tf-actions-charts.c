/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The charts of the Laws bench as files, and scales of instruments from frames taken nearly at once:
 * offered, looked at, taken by a deed. */

#include <math.h>
#include <string.h>
#include <adwaita.h>
#include <glib/gi18n-lib.h>

#include "tf-actions-laws.h"
#include "tf-figure.h"
#include "tf-laws-bench.h"
#include "tf-pair.h"
#include "tf-power-plot.h"
#include "tf-save-as.h"
#include "tf-session-studies.h"
#include "tf-window-private.h"

static TfSession *
session_of (gpointer window)
{
  return tf_window_get_session (TF_WINDOW (window));
}

#define ACTION(name) static void name (GSimpleAction *action, GVariant *value, gpointer window)

/* -- one chart ---------------------------------------------------------------------------------------- */

typedef struct
{
  const TfLawsChart *chart;
  TfLawsAnswer *answer;
} Figure;

static void
figure_free (gpointer data)
{
  tf_laws_answer_unref (((Figure *)data)->answer);
  g_free (data);
}

static char *
write_figure (TfSaving *saving, gpointer job, const char *path, GError **error)
{
  const Figure *figure = job;
  return tf_laws_chart_write (figure->chart, figure->answer->charts, path, figure->answer->words,
                              tf_saving_get_cancel (saving), error)
             ? g_strdup_printf (_ ("Saved: %s"), path)
             : NULL;
}

static void
chart_chosen (TfWindow *window, const char *name, const char *path)
{
  TfLawsAnswer *answer = tf_session_get_laws (session_of (window));
  const TfLawsChart *chart = tf_laws_chart_find (name);
  if (chart == NULL || answer == NULL || answer->charts == NULL)
    {
      tf_window_say (window, _ ("There is no chart to save yet."));
      return;
    }
  Figure *figure = g_new (Figure, 1);
  *figure = (Figure){ chart, tf_laws_answer_ref (answer) };
  tf_save_as (session_of (window), path, write_figure, figure, figure_free);
}

ACTION (save_chart)
{
  const char *name, *path;
  g_variant_get (value, "(&s&s)", &name, &path);
  g_autofree char *file = g_strconcat (name, ".pdf", NULL);
  if (*path == '\0')
    tf_save_as_ask (window, _ ("Save the chart (PDF, SVG or PNG)"), file, name, chart_chosen);
  else
    chart_chosen (window, name, path);
}

/* -- the power curve ------------------------------------------------------------------------------------ */

typedef struct
{
  TfPowerCurve *curve;
  double wanted;
} Power;

static void
power_free (gpointer data)
{
  tf_power_curve_free (((Power *)data)->curve);
  g_free (data);
}

static char *
write_power (TfSaving *saving, gpointer job, const char *path, GError **error)
{
  const Power *power = job;
  return tf_power_plot_write (power->curve, power->wanted, path, error)
             ? g_strdup_printf (_ ("Saved: %s"), path)
             : NULL;
}

static void
power_chosen (TfWindow *window, const char *what, const char *path)
{
  Power power;
  power.curve = tf_window_dup_power (window, &power.wanted);
  if (power.curve == NULL)
    tf_window_say (window, _ ("There is no chart to save yet."));
  else
    tf_save_as (session_of (window), path, write_power, g_memdup2 (&power, sizeof power), power_free);
}

ACTION (save_power)
{
  const char *path = g_variant_get_string (value, NULL);
  if (*path == '\0')
    tf_save_as_ask (window, _ ("Save the chart (PDF, SVG or PNG)"), "power.pdf", "", power_chosen);
  else
    power_chosen (window, "", path);
}

/* -- scales of instruments ------------------------------------------------------------------------------- */

typedef struct
{
  char *path;
  TfCancel *cancel;
  GtkWidget *dialog, *box; /* the dialog is kept alive until the answer is there */
  TfWindow *window;
} Pairing;

static void
pairing_free (gpointer data)
{
  Pairing *pairing = data;
  g_free (pairing->path);
  tf_cancel_unref (pairing->cancel);
  g_object_unref (pairing->dialog);
  g_object_unref (pairing->window);
  g_free (pairing);
}

static void
work_out_scales (GTask *task, gpointer source, gpointer data, GCancellable *cancellable)
{
  const Pairing *pairing = data;
  GError *error = NULL;
  TfPairParams params;
  g_autoptr (TfWorkers) workers = tf_workers_new (0);
  const TfWork work = { .workers = workers, .cancel = pairing->cancel };
  tf_options_reset (tf_pair_options, &params);
  g_autoptr (TfLedger) ledger = tf_ledger_open (pairing->path, &error);
  GPtrArray *scales = ledger != NULL ? tf_pair_scales (ledger, &params, &work, &error) : NULL;
  if (scales != NULL)
    g_task_return_pointer (task, scales, (GDestroyNotify)g_ptr_array_unref);
  else
    g_task_return_error (task, error);
}

static void
add_line (GtkWidget *box, const char *text, const char *style)
{
  GtkWidget *label = gtk_label_new (text);
  gtk_label_set_xalign (GTK_LABEL (label), 0);
  gtk_label_set_wrap (GTK_LABEL (label), TRUE);
  gtk_label_set_selectable (GTK_LABEL (label), TRUE);
  if (style != NULL)
    gtk_widget_add_css_class (label, style);
  gtk_box_append (GTK_BOX (box), label);
}

/* One number is right only where these agree. */
static void
add_bins (GtkWidget *box, const char *title, const TfPairBin *bins, guint n)
{
  g_autoptr (GString) text = g_string_new (title);
  for (guint k = 0; k < n; k++)
    if (isfinite (bins[k].factor))
      g_string_append_printf (text, _ ("\n%.4g to %.4g: %.3f (%.3f–%.3f), %u cells"), bins[k].from,
                              bins[k].to, bins[k].factor, bins[k].interval.low,
                              bins[k].interval.high, bins[k].n);
  add_line (box, text->str, "caption");
}

static void
take_scale (GtkButton *button, TfWindow *window)
{
  const TfKeptScale *scale = g_object_get_data (G_OBJECT (button), "scale");
  if (tf_session_get_person (session_of (window)) == NULL)
    tf_window_ask_person (window, NULL);
  else if (tf_session_keep_scale (session_of (window), scale))
    {
      gtk_widget_set_sensitive (GTK_WIDGET (button), FALSE);
      gtk_button_set_label (button, _ ("Taken"));
    }
  else
    tf_window_say (window, _ ("The ledger cannot be written to."));
}

static void
add_scale (Pairing *pairing, const TfPairScale *s)
{
  GtkWidget *box = pairing->box, *take = gtk_button_new_with_label (_ ("Take this scale"));
  TfPairParams params;
  tf_options_reset (tf_pair_options, &params);
  g_autofree char *head
      = g_strdup_printf (_ ("%s × %.3f (%.3f–%.3f) is like %s"), s->instrument, s->factor,
                         s->interval.low, s->interval.high, s->reference);
  g_autofree char *from = g_strdup_printf (
      _ ("%u frame pairs, %u cells, median %.1f h apart; offset %.1f ± %.1f G, χ² %.2f"),
      s->frame_pairs, s->cells, s->hours, s->offset_gauss, s->offset_sigma, s->chi2);
  g_autofree char *options = tf_options_dup_canonical (tf_pair_options, &params, "pair/1");
  g_autofree char *evidence
      = g_strdup_printf ("%s frame-pairs=%u cells=%u", options, s->frame_pairs, s->cells);
  const TfKeptScale kept = { s->instrument, s->reference, s->factor, s->sigma, evidence, NULL };
  add_line (box, head, "heading");
  add_line (box, from, NULL);
  add_bins (box, _ ("by μ"), s->by_mu, TF_PAIR_MU_BINS);
  add_bins (box, _ ("by field, G"), s->by_field, TF_PAIR_FIELD_BINS);
  gtk_widget_set_halign (take, GTK_ALIGN_START);
  g_object_set_data_full (G_OBJECT (take), "scale", tf_kept_scale_copy (&kept),
                          (GDestroyNotify)tf_kept_scale_free);
  g_signal_connect_object (take, "clicked", G_CALLBACK (take_scale), pairing->window, 0);
  gtk_box_append (GTK_BOX (box), take);
}

static void
scales_there (GObject *source, GAsyncResult *result, gpointer data)
{
  Pairing *pairing = g_task_get_task_data (G_TASK (result));
  g_autoptr (GError) error = NULL;
  g_autoptr (GPtrArray) scales = g_task_propagate_pointer (G_TASK (result), &error);
  if (tf_cancel_is_raised (pairing->cancel))
    return; /* the dialog is closed */
  gtk_box_remove (GTK_BOX (pairing->box), gtk_widget_get_first_child (pairing->box));
  if (scales == NULL || scales->len == 0)
    add_line (pairing->box,
              error != NULL ? error->message
                            : _ ("No two instruments have frames near each other in time."),
              NULL);
  for (guint k = 0; scales != NULL && k < scales->len; k++)
    add_scale (pairing, scales->pdata[k]);
}

static void
pair_closed (AdwMessageDialog *dialog, const char *answer, TfCancel *cancel)
{
  tf_cancel_raise (cancel);
}

static void
unref_cancel (gpointer data, GClosure *closure)
{
  tf_cancel_unref (data);
}

ACTION (pair)
{
  const char *path = tf_session_get_ledger_path (session_of (window));
  if (path == NULL)
    return;
  GtkWidget *dialog = adw_message_dialog_new (
      GTK_WINDOW (window), _ ("Scales of instruments"),
      _ ("From frames taken nearly at once. A scale is offered, and acts on fluxes only where the sieve "
         "says so; measures stay as they were made."));
  GtkWidget *scrolled = gtk_scrolled_window_new (), *box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 6);
  Pairing *pairing = g_new0 (Pairing, 1);
  *pairing = (Pairing){ g_strdup (path), tf_cancel_new (), g_object_ref (dialog), box,
                        g_object_ref (window) };
  add_line (box, _ ("Comparing frames…"), "dim-label");
  gtk_scrolled_window_set_child (GTK_SCROLLED_WINDOW (scrolled), box);
  gtk_widget_set_size_request (scrolled, 420, 280);
  adw_message_dialog_set_extra_child (ADW_MESSAGE_DIALOG (dialog), scrolled);
  adw_message_dialog_add_response (ADW_MESSAGE_DIALOG (dialog), "close", _ ("_Close"));
  g_signal_connect_data (dialog, "response", G_CALLBACK (pair_closed), tf_cancel_ref (pairing->cancel),
                         unref_cancel, 0);
  g_autoptr (GTask) task = g_task_new (NULL, NULL, scales_there, NULL);
  g_task_set_task_data (task, pairing, pairing_free);
  g_task_run_in_thread (task, work_out_scales);
  gtk_window_present (GTK_WINDOW (dialog));
}

void
tf_window_add_chart_actions (TfWindow *self)
{
  static const GActionEntry entries[] = {
    { "save-chart", save_chart, "(ss)", NULL, NULL },
    { "save-power", save_power, "s", NULL, NULL },
    { "pair", pair, NULL, NULL, NULL },
  };
  g_action_map_add_action_entries (G_ACTION_MAP (self), entries, G_N_ELEMENTS (entries), self);
}
