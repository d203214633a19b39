/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-laws-study.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-condition-list.h"
#include "tf-option-row.h"
#include "tf-widget-style.h"

typedef struct
{
  const char *title;
  const TfOption *options;
  gsize offset; /* of the parameters in TfStudy */
  gboolean open;
} Part;

static const Part parts[] = {
  { N_ ("Sieve"), tf_sieve_options, G_STRUCT_OFFSET (TfStudy, sieve), TRUE },
  { N_ ("One mark a passage"), tf_sampling_options, G_STRUCT_OFFSET (TfStudy, sampling), FALSE },
  { N_ ("Joy’s law"), tf_joy_options, G_STRUCT_OFFSET (TfStudy, joy), FALSE },
  { N_ ("Cycle by"), tf_divide_options, G_STRUCT_OFFSET (TfStudy, divide), FALSE },
  { N_ ("Verdict"), tf_verdict_options, G_STRUCT_OFFSET (TfStudy, verdict), FALSE },
  { N_ ("Since emergence"), tf_emergence_options, G_STRUCT_OFFSET (TfStudy, emergence), FALSE },
  { N_ ("Intervals of shares"), tf_hale_options, G_STRUCT_OFFSET (TfStudy, hale), FALSE },
};

struct _TfLawsStudy
{
  GtkWidget parent;
  TfSession *session;
  GtkWidget *box;
  GPtrArray *rows[G_N_ELEMENTS (parts)]; /* of TfOptionRow */
  TfConditionList *of_marks, *of_regions;
  GtkLabel *floor;
};

G_DEFINE_FINAL_TYPE (TfLawsStudy, tf_laws_study, GTK_TYPE_WIDGET)

/* The floor is worked out from the frames, not chosen: what stands in the sentence stands here. */
static void
show_floor (TfLawsStudy *self, const TfFindings *findings)
{
  double floor = findings != NULL ? findings->even_floor_gauss : NAN;
  g_autofree char *text = isfinite (floor)
                              ? g_strdup_printf (_ ("Even floor of the radial field, from the frames: "
                                                    "%.0f G"),
                                                 floor)
                              : g_strdup ("");
  gtk_label_set_label (self->floor, text);
  gtk_widget_set_visible (GTK_WIDGET (self->floor), *text != '\0');
}

static void
show (TfLawsStudy *self)
{
  const TfStudy *study = tf_session_get_study (self->session);
  const TfLawsAnswer *answer = tf_session_get_laws (self->session);
  const TfFindings *findings = answer != NULL ? answer->findings : NULL;
  show_floor (self, findings);
  tf_condition_list_show (self->of_marks, study->mark_conditions, findings);
  tf_condition_list_show (self->of_regions, study->region_conditions, findings);
  for (guint p = 0; p < G_N_ELEMENTS (parts); p++)
    for (guint k = 0; k < self->rows[p]->len; k++)
      tf_option_row_show (self->rows[p]->pdata[k], (const char *)study + parts[p].offset);
}

static void
changed (TfLawsStudy *self)
{
  if (self->session == NULL)
    return;
  g_autoptr (TfStudy) study = tf_study_copy (tf_session_get_study (self->session));
  for (guint p = 0; p < G_N_ELEMENTS (parts); p++)
    for (guint k = 0; k < self->rows[p]->len; k++)
      tf_option_row_store (self->rows[p]->pdata[k], (char *)study + parts[p].offset);
  g_ptr_array_unref (study->mark_conditions);
  g_ptr_array_unref (study->region_conditions);
  study->mark_conditions = tf_condition_list_dup (self->of_marks);
  study->region_conditions = tf_condition_list_dup (self->of_regions);
  tf_session_set_study (self->session, study);
}

static TfConditionList *
add_conditions (TfLawsStudy *self, GtkWidget *box, const char *title, const char *add)
{
  GtkWidget *list = tf_condition_list_new (title, add);
  g_signal_connect_swapped (list, "changed", G_CALLBACK (changed), self);
  gtk_box_append (GTK_BOX (box), list);
  return TF_CONDITION_LIST (list);
}

/* The sieve is more than its options. */
static void
add_sieve (TfLawsStudy *self, GtkWidget *box)
{
  GtkWidget *floor = gtk_label_new (NULL);
  self->of_marks = add_conditions (self, box, _ ("Conditions on marks, before one is picked"),
                                   _ ("Add a condition on marks"));
  self->of_regions = add_conditions (self, box, _ ("Conditions on what was picked"),
                                     _ ("Add a condition on regions"));
  self->floor = GTK_LABEL (floor);
  gtk_label_set_xalign (self->floor, 0);
  gtk_label_set_wrap (self->floor, TRUE);
  gtk_widget_add_css_class (floor, "caption");
  gtk_box_append (GTK_BOX (box), floor);
}

static void
add_part (TfLawsStudy *self, guint p)
{
  GtkWidget *part = gtk_expander_new (_ (parts[p].title));
  GtkWidget *box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 8);
  gtk_accessible_update_property (GTK_ACCESSIBLE (part), GTK_ACCESSIBLE_PROPERTY_LABEL,
                                  _ (parts[p].title), -1);
  gtk_widget_add_css_class (part, "study-part");
  gtk_expander_set_expanded (GTK_EXPANDER (part), parts[p].open);
  gtk_widget_set_margin_top (box, 6);
  gtk_widget_set_margin_bottom (box, 6);
  self->rows[p] = g_ptr_array_new ();
  for (const TfOption *option = parts[p].options; option->name != NULL; option++)
    {
      GtkWidget *row = tf_option_row_new (option);
      g_signal_connect_swapped (row, "changed", G_CALLBACK (changed), self);
      g_ptr_array_add (self->rows[p], row);
      gtk_box_append (GTK_BOX (box), row);
    }
  if (p == 0)
    add_sieve (self, box);
  gtk_expander_set_child (GTK_EXPANDER (part), box);
  tf_widget_focus_when_open (part, box);
  gtk_box_append (GTK_BOX (self->box), part);
}

void
tf_laws_study_set_session (TfLawsStudy *self, TfSession *session)
{
  g_return_if_fail (TF_IS_LAWS_STUDY (self) && TF_IS_SESSION (session) && self->session == NULL);
  self->session = g_object_ref (session);
  g_signal_connect_object (session, "laws-changed", G_CALLBACK (show), self, G_CONNECT_SWAPPED);
  show (self);
}

static void
dispose (GObject *object)
{
  TfLawsStudy *self = TF_LAWS_STUDY (object);
  g_clear_pointer (&self->box, gtk_widget_unparent);
  for (guint p = 0; p < G_N_ELEMENTS (parts); p++)
    g_clear_pointer (&self->rows[p], g_ptr_array_unref);
  g_clear_object (&self->session);
  G_OBJECT_CLASS (tf_laws_study_parent_class)->dispose (object);
}

static void
tf_laws_study_class_init (TfLawsStudyClass *klass)
{
  G_OBJECT_CLASS (klass)->dispose = dispose;
  gtk_widget_class_set_layout_manager_type (GTK_WIDGET_CLASS (klass), GTK_TYPE_BIN_LAYOUT);
}

static void
tf_laws_study_init (TfLawsStudy *self)
{
  self->box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 4);
  gtk_widget_set_parent (self->box, GTK_WIDGET (self));
  for (guint p = 0; p < G_N_ELEMENTS (parts); p++)
    add_part (self, p);
}

GtkWidget *
tf_laws_study_new (void)
{
  return g_object_new (TF_TYPE_LAWS_STUDY, NULL);
}
