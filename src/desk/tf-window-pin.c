/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The question that goes with a pinned pole: which polarity, and why. */

#include "tf-window-private.h"

#include <string.h>
#include <glib/gi18n-lib.h>

typedef struct
{
  TfWindow *window; /* borrowed: the dialog's parent */
  GtkWidget *positive, *reason;
  double lon_deg, lat_deg;
} Question;

static const char reason_key[] = "tf-pin-reason";

static void
reason_changed (GtkEditable *entry, AdwMessageDialog *dialog)
{
  g_autofree char *text = g_strstrip (g_strdup (gtk_editable_get_text (entry)));
  adw_message_dialog_set_response_enabled (dialog, "pin", text[0] != '\0');
}

static void
answered (AdwMessageDialog *dialog, const char *answer, Question *q)
{
  TfSession *session = tf_window_get_session (q->window);
  g_autofree char *reason = g_strstrip (g_strdup (gtk_editable_get_text (GTK_EDITABLE (q->reason))));
  if (strcmp (answer, "pin") != 0)
    return;
  g_object_set_data_full (G_OBJECT (q->window), reason_key, g_strdup (reason), g_free);
  tf_session_pin_pole (session, gtk_check_button_get_active (GTK_CHECK_BUTTON (q->positive)) ? 1 : -1,
                       q->lon_deg, q->lat_deg, reason);
}

static void
question_free (gpointer data, GClosure *closure)
{
  g_free (data);
}

/* Of the two poles the nearer is most likely meant. */
static gboolean
is_positive (TfSession *session, double lon_deg, double lat_deg)
{
  const TfMeasure *m = tf_session_get_measure (session);
  if (m == NULL)
    return TRUE;
  const TfPole *p = &m->positive, *n = &m->negative;
  return !(tf_sphere_distance (lon_deg, lat_deg, p->carrington_lon_deg, p->lat_deg)
           > tf_sphere_distance (lon_deg, lat_deg, n->carrington_lon_deg, n->lat_deg));
}

static GtkWidget *
content_new (Question *q, gboolean positive)
{
  GtkWidget *box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 8);
  q->positive = gtk_check_button_new_with_label (_ ("Positive pole"));
  GtkWidget *negative = gtk_check_button_new_with_label (_ ("Negative pole"));
  gtk_check_button_set_group (GTK_CHECK_BUTTON (negative), GTK_CHECK_BUTTON (q->positive));
  gtk_check_button_set_active (GTK_CHECK_BUTTON (positive ? q->positive : negative), TRUE);
  q->reason = gtk_entry_new ();
  gtk_entry_set_placeholder_text (GTK_ENTRY (q->reason), _ ("why"));
  gtk_entry_set_activates_default (GTK_ENTRY (q->reason), TRUE);
  gtk_accessible_update_property (GTK_ACCESSIBLE (q->reason), GTK_ACCESSIBLE_PROPERTY_LABEL,
                                  _ ("Reason"), -1);
  gtk_box_append (GTK_BOX (box), q->positive);
  gtk_box_append (GTK_BOX (box), negative);
  gtk_box_append (GTK_BOX (box), q->reason);
  return box;
}

void
tf_window_ask_pin (TfWindow *self, double lon_deg, double lat_deg)
{
  TfSession *session = tf_window_get_session (self);
  if (tf_session_get_person (session) == NULL)
    {
      tf_window_ask_person (self, NULL);
      return;
    }
  Question *q = g_new0 (Question, 1);
  *q = (Question){ .window = self, .lon_deg = lon_deg, .lat_deg = lat_deg };
  GtkWidget *dialog = adw_message_dialog_new (
      GTK_WINDOW (self), _ ("Pin a pole here?"),
      _ ("The measure then takes this place for the pole, and says so. Which polarity leads is "
         "still for the data to say."));
  adw_message_dialog_set_extra_child (ADW_MESSAGE_DIALOG (dialog),
                                      content_new (q, is_positive (session, lon_deg, lat_deg)));
  adw_message_dialog_add_responses (ADW_MESSAGE_DIALOG (dialog), "not", _ ("_Cancel"), "pin",
                                    _ ("_Pin it"), NULL);
  adw_message_dialog_set_response_appearance (ADW_MESSAGE_DIALOG (dialog), "pin",
                                              ADW_RESPONSE_SUGGESTED);
  adw_message_dialog_set_default_response (ADW_MESSAGE_DIALOG (dialog), "pin");
  adw_message_dialog_set_close_response (ADW_MESSAGE_DIALOG (dialog), "not");
  adw_message_dialog_set_response_enabled (ADW_MESSAGE_DIALOG (dialog), "pin", FALSE);
  g_signal_connect (q->reason, "changed", G_CALLBACK (reason_changed), dialog);
  g_signal_connect_data (dialog, "response", G_CALLBACK (answered), q, question_free, 0);
  const char *last = g_object_get_data (G_OBJECT (self), reason_key);
  if (last != NULL) /* often the same again: Return takes it, typing replaces it */
    gtk_editable_set_text (GTK_EDITABLE (q->reason), last);
  gtk_window_present (GTK_WINDOW (dialog));
  gtk_widget_grab_focus (q->reason); /* and selects it */
}
