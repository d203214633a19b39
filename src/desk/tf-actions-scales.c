/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Scales of instruments: those that are kept, and those that frames taken nearly at once offer; looked
 * at, taken and taken back by a deed. */

#include <math.h>
#include <string.h>
#include <adwaita.h>
#include <glib/gi18n-lib.h>

#include "tf-actions-laws.h"
#include "tf-pair.h"
#include "tf-session-studies.h"
#include "tf-window-private.h"

static TfSession *
session_of (gpointer window)
{
  return tf_window_get_session (TF_WINDOW (window));
}

/* -- working them out, in a thread ------------------------------------------------------------------ */

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

typedef struct
{
  GPtrArray *kept;    /* TfKeptScale */
  GPtrArray *offered; /* TfPairScale */
} Scales;

static void
scales_free (gpointer data)
{
  Scales *scales = data;
  g_clear_pointer (&scales->kept, g_ptr_array_unref);
  g_clear_pointer (&scales->offered, g_ptr_array_unref);
  g_free (scales);
}

static void
work_out_scales (GTask *task, gpointer source, gpointer data, GCancellable *cancellable)
{
  const Pairing *pairing = data;
  GError *error = NULL;
  TfPairParams params;
  Scales *scales = g_new0 (Scales, 1);
  g_autoptr (TfWorkers) workers = tf_workers_new (0);
  const TfWork work = { .workers = workers, .cancel = pairing->cancel };
  tf_options_reset (tf_pair_options, &params);
  g_autoptr (TfLedger) ledger = tf_ledger_open (pairing->path, &error);
  scales->kept = ledger != NULL ? tf_ledger_scales (ledger, &error) : NULL;
  scales->offered = scales->kept != NULL ? tf_pair_scales (ledger, &params, &work, &error) : NULL;
  if (scales->offered != NULL)
    {
      g_task_return_pointer (task, scales, scales_free);
      return;
    }
  scales_free (scales);
  g_task_return_error (task, error);
}

/* -- what the dialog says ---------------------------------------------------------------------------- */

static GtkWidget *
new_label (const char *text, const char *style)
{
  GtkWidget *label = gtk_label_new (text);
  gtk_label_set_xalign (GTK_LABEL (label), 0);
  gtk_label_set_wrap (GTK_LABEL (label), TRUE);
  gtk_label_set_selectable (GTK_LABEL (label), TRUE);
  if (style != NULL)
    gtk_widget_add_css_class (label, style);
  return label;
}

static void
add_line (GtkWidget *box, const char *text, const char *style)
{
  gtk_box_append (GTK_BOX (box), new_label (text, style));
}

/* One number is right only where these agree. */
static void
add_bins (GtkGrid *grid, const char *title, const TfPairBin *bins, guint n, int *row)
{
  static const char *const heads[] = { N_ ("factor"), N_ ("its interval"), N_ ("cells") };
  gtk_grid_attach (grid, new_label (title, "caption-heading"), 0, *row, 1, 1);
  for (int k = 0; k < (int)G_N_ELEMENTS (heads); k++)
    gtk_grid_attach (grid, new_label (_ (heads[k]), "caption-heading"), k + 1, *row, 1, 1);
  ++*row;
  for (guint k = 0; k < n; k++)
    {
      const TfPairBin *bin = &bins[k];
      if (!isfinite (bin->factor))
        continue;
      g_autofree char *range = isfinite (bin->to) ? g_strdup_printf ("%.4g–%.4g", bin->from, bin->to)
                                                  : g_strdup_printf (_ ("from %.4g"), bin->from);
      g_autofree char *factor = g_strdup_printf ("%.3f", bin->factor),
                      *interval = g_strdup_printf ("%.3f–%.3f", bin->interval.low, bin->interval.high),
                      *cells = g_strdup_printf ("%u", bin->n);
      const char *const texts[] = { range, factor, interval, cells };
      for (int c = 0; c < (int)G_N_ELEMENTS (texts); c++)
        gtk_grid_attach (grid, new_label (texts[c], "caption"), c, *row, 1, 1);
      ++*row;
    }
}

static void
keep_scale (GtkButton *button, TfWindow *window)
{
  const TfKeptScale *scale = g_object_get_data (G_OBJECT (button), "scale");
  if (tf_session_get_person (session_of (window)) == NULL)
    tf_window_ask_person (window, NULL);
  else if (tf_session_keep_scale (session_of (window), scale))
    {
      gtk_widget_set_sensitive (GTK_WIDGET (button), FALSE);
      gtk_button_set_label (button, isfinite (scale->factor) ? _ ("Taken") : _ ("Taken back"));
    }
  else
    tf_window_say (window, _ ("The ledger cannot be written to."));
}

static void
add_button (Pairing *pairing, const char *label, const TfKeptScale *scale, gboolean is_kept)
{
  GtkWidget *button = gtk_button_new_with_label (is_kept ? _ ("Taken") : label);
  g_autofree char *words = g_strdup_printf ("%s: %s", label, scale->instrument);
  gtk_accessible_update_property (GTK_ACCESSIBLE (button), GTK_ACCESSIBLE_PROPERTY_LABEL, words, -1);
  gtk_widget_set_halign (button, GTK_ALIGN_START);
  gtk_widget_set_sensitive (button, !is_kept);
  g_object_set_data_full (G_OBJECT (button), "scale", tf_kept_scale_copy (scale),
                          (GDestroyNotify)tf_kept_scale_free);
  g_signal_connect_object (button, "clicked", G_CALLBACK (keep_scale), pairing->window, 0);
  gtk_box_append (GTK_BOX (pairing->box), button);
}

static void
add_kept (Pairing *pairing, const TfKeptScale *kept)
{
  g_autofree char *sigma = isfinite (kept->sigma) ? g_strdup_printf (" ± %.3f", kept->sigma) : g_strdup ("");
  g_autofree char *line = g_strdup_printf (_ ("Kept by %s: %s × %.3f%s is like %s"), kept->person,
                                           kept->instrument, kept->factor, sigma, kept->reference);
  TfKeptScale none = *kept;
  none.factor = NAN;
  add_line (pairing->box, line, NULL);
  add_button (pairing, _ ("Take it back"), &none, FALSE);
}

static gboolean
is_among (const GPtrArray *kept, const TfKeptScale *scale)
{
  for (guint k = 0; k < kept->len; k++)
    {
      const TfKeptScale *other = kept->pdata[k];
      if (strcmp (other->instrument, scale->instrument) == 0
          && g_strcmp0 (other->reference, scale->reference) == 0
          && fabs (other->factor - scale->factor) < 1e-6)
        return TRUE;
    }
  return FALSE;
}

static void
add_offer (Pairing *pairing, const TfPairScale *s, const GPtrArray *kept)
{
  GtkWidget *grid = gtk_grid_new ();
  int row = 0;
  TfPairParams params;
  tf_options_reset (tf_pair_options, &params);
  g_autofree char *head
      = g_strdup_printf (_ ("%s × %.3f (%.3f–%.3f) is like %s"), s->instrument, s->factor,
                         s->interval.low, s->interval.high, s->reference);
  g_autofree char *pairs = g_strdup_printf (
      g_dngettext (GETTEXT_PACKAGE, "%u pair of frames", "%u pairs of frames", s->frame_pairs), s->frame_pairs);
  g_autofree char *from
      = g_strdup_printf (_ ("%s, %u cells, median %.1f h apart; offset %.1f ± %.1f G, χ² %.2f"), pairs,
                         s->cells, s->hours, s->offset_gauss, s->offset_sigma, s->chi2);
  g_autofree char *options = tf_options_dup_canonical (tf_pair_options, &params, "pair/1");
  g_autofree char *evidence
      = g_strdup_printf ("%s frame-pairs=%u cells=%u", options, s->frame_pairs, s->cells);
  const TfKeptScale scale = { s->instrument, s->reference, s->factor, s->sigma, evidence, NULL };
  add_line (pairing->box, head, "heading");
  add_line (pairing->box, from, NULL);
  add_button (pairing, _ ("Take this scale"), &scale, is_among (kept, &scale));
  gtk_grid_set_column_spacing (GTK_GRID (grid), 14);
  add_bins (GTK_GRID (grid), _ ("by μ"), s->by_mu, TF_PAIR_MU_BINS, &row);
  add_bins (GTK_GRID (grid), _ ("by field, G"), s->by_field, TF_PAIR_FIELD_BINS, &row);
  gtk_box_append (GTK_BOX (pairing->box), grid);
}

static void
scales_there (GObject *source, GAsyncResult *result, gpointer data)
{
  Pairing *pairing = g_task_get_task_data (G_TASK (result));
  g_autoptr (GError) error = NULL;
  Scales *scales = g_task_propagate_pointer (G_TASK (result), &error);
  if (!tf_cancel_is_raised (pairing->cancel)) /* else the dialog is closed */
    {
      gtk_box_remove (GTK_BOX (pairing->box), gtk_widget_get_first_child (pairing->box));
      for (guint k = 0; scales != NULL && k < scales->kept->len; k++)
        add_kept (pairing, scales->kept->pdata[k]);
      if (scales == NULL || scales->offered->len == 0)
        add_line (pairing->box,
                  error != NULL ? error->message
                                : _ ("No two instruments have frames near each other in time."),
                  NULL);
      for (guint k = 0; scales != NULL && k < scales->offered->len; k++)
        add_offer (pairing, scales->offered->pdata[k], scales->kept);
    }
  g_clear_pointer (&scales, scales_free);
}

/* -- the command ------------------------------------------------------------------------------------- */

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

static void
pair (GSimpleAction *action, GVariant *value, gpointer window)
{
  const char *path = tf_session_get_ledger_path (session_of (window));
  if (path == NULL)
    return;
  GtkWidget *dialog = adw_message_dialog_new (
      GTK_WINDOW (window), _ ("Scales of instruments"),
      _ ("From frames taken nearly at once. A scale acts where the sieve says so, on fluxes: conditions on "
         "flux, and weights. Measures, and the floor they were made with, stay as they are."));
  GtkWidget *scrolled = gtk_scrolled_window_new (), *box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 6);
  Pairing *pairing = g_new0 (Pairing, 1);
  *pairing = (Pairing){ g_strdup (path), tf_cancel_new (), g_object_ref (dialog), box,
                        g_object_ref (window) };
  add_line (box, _ ("Comparing frames…"), "dim-label");
  tf_window_set_lines (ADW_MESSAGE_DIALOG (dialog), scrolled, box);
  adw_message_dialog_add_response (ADW_MESSAGE_DIALOG (dialog), "close", _ ("_Close"));
  adw_message_dialog_set_close_response (ADW_MESSAGE_DIALOG (dialog), "close");
  g_signal_connect_data (dialog, "response", G_CALLBACK (pair_closed), tf_cancel_ref (pairing->cancel),
                         unref_cancel, 0);
  g_autoptr (GTask) task = g_task_new (NULL, NULL, scales_there, NULL);
  g_task_set_task_data (task, pairing, pairing_free);
  g_task_run_in_thread (task, work_out_scales);
  gtk_window_present (GTK_WINDOW (dialog));
}

void
tf_window_add_scale_actions (TfWindow *self)
{
  static const GActionEntry entries[] = { { "pair", pair, NULL, NULL, NULL } };
  g_action_map_add_action_entries (G_ACTION_MAP (self), entries, G_N_ELEMENTS (entries), self);
}
