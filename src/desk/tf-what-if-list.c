/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-what-if-list.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-number.h"

struct _TfWhatIfItem
{
  GObject parent;
  char *words, *share, *slope, *missing;
  gboolean chosen;
};

G_DEFINE_FINAL_TYPE (TfWhatIfItem, tf_what_if_item, G_TYPE_OBJECT)

static char *
dup_number (double value, const char *form, const char *unit)
{
  if (!isfinite (value))
    return g_strdup ("—");
  g_autofree char *number = tf_number_dup_form (value, form, TRUE);
  return g_strconcat (number, unit, NULL);
}

void
tf_what_if_list_fill (GListStore *store, const GArray *rows)
{
  g_autoptr (GPtrArray) items = g_ptr_array_new_with_free_func (g_object_unref);
  for (guint k = 0; k < rows->len; k++)
    {
      const TfWhatIf *row = &g_array_index (rows, TfWhatIf, k);
      TfWhatIfItem *item = g_object_new (TF_TYPE_WHAT_IF_ITEM, NULL);
      item->words = g_strdup (_ (row->title));
      item->missing = row->missing != NULL ? g_strdup (tf_what_if_missing (row->missing)) : NULL;
      item->share = dup_number (100 * row->share, ".1f", " %");
      item->slope = dup_number (row->slope, ".2f", "");
      item->chosen = strcmp (row->name, "as-chosen") == 0;
      g_ptr_array_add (items, item);
    }
  g_list_store_splice (store, 0, g_list_model_get_n_items (G_LIST_MODEL (store)), items->pdata,
                       items->len);
}

/* -- a row ----------------------------------------------------------------------------------- */

static GtkWidget *
add_label (GtkWidget *box, gfloat xalign, int chars)
{
  GtkWidget *label = gtk_label_new (NULL);
  gtk_label_set_xalign (GTK_LABEL (label), xalign);
  gtk_label_set_width_chars (GTK_LABEL (label), chars);
  gtk_label_set_wrap (GTK_LABEL (label), xalign < 0.5f);
  gtk_widget_set_hexpand (label, xalign < 0.5f);
  gtk_box_append (GTK_BOX (box), label);
  return label;
}

static void
set_up (GtkSignalListItemFactory *factory, GtkListItem *row, gpointer data)
{
  GtkWidget *box = gtk_box_new (GTK_ORIENTATION_HORIZONTAL, 6);
  add_label (box, 0, 12);
  add_label (box, 1, 6);
  add_label (box, 1, 5);
  gtk_list_item_set_child (row, box);
  gtk_list_item_set_activatable (row, FALSE);
}

static void
bind (GtkSignalListItemFactory *factory, GtkListItem *row, gpointer data)
{
  const TfWhatIfItem *item = gtk_list_item_get_item (row);
  GtkWidget *box = gtk_list_item_get_child (row), *label = gtk_widget_get_first_child (box);
  gtk_label_set_label (GTK_LABEL (label), item->words);
  label = gtk_widget_get_next_sibling (label);
  gtk_label_set_label (GTK_LABEL (label), item->share);
  label = gtk_widget_get_next_sibling (label);
  gtk_label_set_label (GTK_LABEL (label), item->slope);
  gtk_widget_set_tooltip_text (box, item->missing);
  GtkWidget *cell = gtk_widget_get_parent (box); /* what takes the keyboard and is read aloud */
  g_autofree char *all = g_strdup_printf (_ ("%s: share %s, slope %s. %s"), item->words, item->share,
                                           item->slope, item->missing != NULL ? item->missing : "");
  if (cell != NULL)
    gtk_accessible_update_property (GTK_ACCESSIBLE (cell), GTK_ACCESSIBLE_PROPERTY_LABEL, all, -1);
  if (item->chosen)
    gtk_widget_add_css_class (box, "as-chosen");
  else
    gtk_widget_remove_css_class (box, "as-chosen");
}

GtkListItemFactory *
tf_what_if_factory_new (void)
{
  GtkListItemFactory *factory = gtk_signal_list_item_factory_new ();
  g_signal_connect (factory, "setup", G_CALLBACK (set_up), NULL);
  g_signal_connect (factory, "bind", G_CALLBACK (bind), NULL);
  return factory;
}

static void
finalize (GObject *object)
{
  TfWhatIfItem *item = TF_WHAT_IF_ITEM (object);
  g_free (item->words);
  g_free (item->share);
  g_free (item->slope);
  g_free (item->missing);
  G_OBJECT_CLASS (tf_what_if_item_parent_class)->finalize (object);
}

static void
tf_what_if_item_class_init (TfWhatIfItemClass *klass)
{
  G_OBJECT_CLASS (klass)->finalize = finalize;
}

static void
tf_what_if_item_init (TfWhatIfItem *item)
{
}
