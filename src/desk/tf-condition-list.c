/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-condition-list.h"

#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-condition-row.h"

struct _TfConditionList
{
  GtkWidget parent;
  GtkWidget *box, *rows;
  GtkButton *add;
  GtkLabel *title;
};

G_DEFINE_FINAL_TYPE (TfConditionList, tf_condition_list, GTK_TYPE_WIDGET)

static void
changed (TfConditionList *self)
{
  g_signal_emit_by_name (self, "changed");
}

static void
removed (TfConditionRow *row, TfConditionList *self)
{
  gtk_box_remove (GTK_BOX (self->rows), GTK_WIDGET (row));
  gtk_widget_grab_focus (GTK_WIDGET (self->add));
  changed (self);
}

static TfConditionRow *
append (TfConditionList *self, const TfCondition *condition)
{
  GtkWidget *row = tf_condition_row_new (condition);
  g_signal_connect_swapped (row, "changed", G_CALLBACK (changed), self);
  g_signal_connect (row, "removed", G_CALLBACK (removed), self);
  gtk_box_append (GTK_BOX (self->rows), row);
  return TF_CONDITION_ROW (row);
}

void
tf_condition_list_add (TfConditionList *self)
{
  g_return_if_fail (TF_IS_CONDITION_LIST (self));
  tf_condition_row_focus (append (self, NULL));
}

GPtrArray *
tf_condition_list_dup (TfConditionList *self)
{
  g_return_val_if_fail (TF_IS_CONDITION_LIST (self), NULL);
  GPtrArray *all = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_condition_free);
  for (GtkWidget *row = gtk_widget_get_first_child (self->rows); row != NULL;
       row = gtk_widget_get_next_sibling (row))
    {
      TfCondition *condition = tf_condition_row_dup (TF_CONDITION_ROW (row));
      if (condition != NULL)
        g_ptr_array_add (all, condition);
    }
  return all;
}

static gboolean
says (TfConditionList *self, const GPtrArray *conditions)
{
  g_autoptr (GPtrArray) now = tf_condition_list_dup (self);
  gboolean same = now->len == conditions->len;
  for (guint k = 0; same && k < now->len; k++)
    {
      g_autofree char *a = tf_condition_dup_text (now->pdata[k]);
      g_autofree char *b = tf_condition_dup_text (conditions->pdata[k]);
      same = strcmp (a, b) == 0;
    }
  return same;
}

static void
tell (TfConditionList *self, const TfFindings *findings)
{
  for (GtkWidget *row = gtk_widget_get_first_child (self->rows); row != NULL;
       row = gtk_widget_get_next_sibling (row))
    {
      g_autoptr (TfCondition) condition = tf_condition_row_dup (TF_CONDITION_ROW (row));
      g_autofree char *key = condition != NULL ? tf_condition_dup_text (condition) : NULL;
      if (key == NULL)
        continue;
      tf_condition_row_tell (TF_CONDITION_ROW (row),
                             GPOINTER_TO_UINT (g_hash_table_lookup (findings->left_out, key)),
                             GPOINTER_TO_UINT (g_hash_table_lookup (findings->passed_without, key)));
    }
}

void
tf_condition_list_show (TfConditionList *self, const GPtrArray *conditions,
                        const TfFindings *findings)
{
  g_return_if_fail (TF_IS_CONDITION_LIST (self) && conditions != NULL);
  if (!says (self, conditions))
    {
      for (GtkWidget *row = gtk_widget_get_first_child (self->rows); row != NULL;
           row = gtk_widget_get_first_child (self->rows))
        gtk_box_remove (GTK_BOX (self->rows), row);
      for (guint k = 0; k < conditions->len; k++)
        append (self, conditions->pdata[k]);
    }
  if (findings != NULL)
    tell (self, findings);
}

static void
dispose (GObject *object)
{
  g_clear_pointer (&TF_CONDITION_LIST (object)->box, gtk_widget_unparent);
  G_OBJECT_CLASS (tf_condition_list_parent_class)->dispose (object);
}

static void
tf_condition_list_class_init (TfConditionListClass *klass)
{
  G_OBJECT_CLASS (klass)->dispose = dispose;
  gtk_widget_class_set_layout_manager_type (GTK_WIDGET_CLASS (klass), GTK_TYPE_BIN_LAYOUT);
  g_signal_new ("changed", TF_TYPE_CONDITION_LIST, G_SIGNAL_RUN_LAST, 0, NULL, NULL, NULL, G_TYPE_NONE,
                0);
}

static void
tf_condition_list_init (TfConditionList *self)
{
  self->box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 6);
  self->rows = gtk_box_new (GTK_ORIENTATION_VERTICAL, 8);
  self->title = GTK_LABEL (gtk_label_new (NULL));
  self->add = GTK_BUTTON (gtk_button_new ());
  gtk_label_set_xalign (self->title, 0);
  gtk_label_set_wrap (self->title, TRUE);
  gtk_widget_add_css_class (GTK_WIDGET (self->title), "caption");
  gtk_widget_add_css_class (GTK_WIDGET (self->title), "dim-label");
  gtk_widget_set_halign (GTK_WIDGET (self->add), GTK_ALIGN_START);
  g_signal_connect_swapped (self->add, "clicked", G_CALLBACK (tf_condition_list_add), self);
  gtk_box_append (GTK_BOX (self->box), GTK_WIDGET (self->title));
  gtk_box_append (GTK_BOX (self->box), self->rows);
  gtk_box_append (GTK_BOX (self->box), GTK_WIDGET (self->add));
  gtk_widget_set_parent (self->box, GTK_WIDGET (self));
}

GtkWidget *
tf_condition_list_new (const char *title, const char *add)
{
  TfConditionList *self = g_object_new (TF_TYPE_CONDITION_LIST, NULL);
  gtk_label_set_label (self->title, title);
  gtk_button_set_label (self->add, add);
  return GTK_WIDGET (self);
}
