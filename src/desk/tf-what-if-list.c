/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-what-if-list.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-chart.h"
#include "tf-number.h"
#include "tf-widget-style.h"

struct _TfWhatIfItem
{
  GObject parent;
  char *name, *words, *share, *slope, *missing;
  double share_moves, slope_moves; /* of what the study says: points; share of the slope; NaN */
  double share_most, slope_most;   /* the greatest in the list */
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

const char *
tf_what_if_item_get_name (TfWhatIfItem *item)
{
  return item->name;
}

static TfWhatIfItem *
item_new (const TfWhatIf *row, const TfWhatIf *chosen)
{
  TfWhatIfItem *item = g_object_new (TF_TYPE_WHAT_IF_ITEM, NULL);
  item->name = g_strdup (row->name);
  item->words = g_strdup (_ (row->title));
  item->missing = row->missing != NULL ? g_strdup (tf_what_if_missing (row->missing)) : NULL;
  item->share = dup_number (100 * row->share, ".1f", " %");
  item->slope = dup_number (row->slope, ".2f", "");
  item->chosen = row == chosen;
  item->share_moves = row->share - chosen->share;
  item->slope_moves = row->slope - chosen->slope;
  return item;
}

static double
size_of (double moves)
{
  return isfinite (moves) ? fabs (moves) : 0;
}

/* As chosen, then by how much each choice moves the results, then those that cannot be told. */
static int
by_effect (gconstpointer a, gconstpointer b)
{
  const TfWhatIfItem *left = *(TfWhatIfItem *const *)a, *right = *(TfWhatIfItem *const *)b;
  if (left->chosen != right->chosen)
    return right->chosen - left->chosen;
  if ((left->missing != NULL) != (right->missing != NULL))
    return (left->missing != NULL) - (right->missing != NULL);
  double l = size_of (left->share_moves) / fmax (left->share_most, 1e-12)
             + size_of (left->slope_moves) / fmax (left->slope_most, 1e-12),
         r = size_of (right->share_moves) / fmax (right->share_most, 1e-12)
             + size_of (right->slope_moves) / fmax (right->slope_most, 1e-12);
  return (l < r) - (l > r);
}

void
tf_what_if_list_fill (GListStore *store, const GArray *rows)
{
  g_autoptr (GPtrArray) items = g_ptr_array_new_with_free_func (g_object_unref);
  double share_most = 0, slope_most = 0;
  const TfWhatIf *chosen = rows->len > 0 ? &g_array_index (rows, TfWhatIf, 0) : NULL;
  for (guint k = 0; k < rows->len; k++)
    {
      TfWhatIfItem *item = item_new (&g_array_index (rows, TfWhatIf, k), chosen);
      share_most = fmax (share_most, size_of (item->share_moves));
      slope_most = fmax (slope_most, size_of (item->slope_moves));
      g_ptr_array_add (items, item);
    }
  for (guint k = 0; k < items->len; k++)
    {
      TfWhatIfItem *item = items->pdata[k];
      item->share_most = share_most;
      item->slope_most = slope_most;
    }
  g_ptr_array_sort (items, by_effect);
  g_list_store_splice (store, 0, g_list_model_get_n_items (G_LIST_MODEL (store)), items->pdata,
                       items->len);
}

/* -- the effect ------------------------------------------------------------------------------ */

/* From the middle to where the choice moves the number; the longest of the list fills its half. */
static void
draw_one (cairo_t *cr, const TfChartStyle *style, double moves, double most, double y, double height,
          double width)
{
  double middle = width / 2, end = middle;
  if (isfinite (moves) && most > 0)
    end = middle + moves / most * (middle - 2);
  cairo_rectangle (cr, fmin (middle, end), y, fabs (end - middle), height);
  tf_chart_set (cr, style->slate);
  cairo_fill (cr);
  cairo_rectangle (cr, middle - 0.5, y - 1, 1, height + 2);
  tf_chart_set (cr, style->faint);
  cairo_fill (cr);
}

static void
draw_effect (GtkDrawingArea *area, cairo_t *cr, int width, int height, gpointer data)
{
  const TfWhatIfItem *item = g_object_get_data (G_OBJECT (area), "item");
  TfChartStyle style = tf_widget_chart_style (GTK_WIDGET (area), 0.8);
  if (item == NULL || item->chosen || item->missing != NULL)
    return;
  double half = width / 2.0 - 3, bar = fmax (4, style.text_pt * 0.4), y = (height - bar) / 2;
  draw_one (cr, &style, item->share_moves, item->share_most, y, bar, half);
  cairo_translate (cr, half + 6, 0);
  draw_one (cr, &style, item->slope_moves, item->slope_most, y, bar, half);
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
  GtkWidget *all = gtk_box_new (GTK_ORIENTATION_VERTICAL, 1);
  GtkWidget *box = gtk_box_new (GTK_ORIENTATION_HORIZONTAL, 6), *effect = gtk_drawing_area_new ();
  add_label (box, 0, 7);
  add_label (box, 1, 6);
  add_label (box, 1, 5);
  gtk_drawing_area_set_content_height (GTK_DRAWING_AREA (effect), 8);
  gtk_drawing_area_set_content_width (GTK_DRAWING_AREA (effect), 120);
  gtk_drawing_area_set_draw_func (GTK_DRAWING_AREA (effect), draw_effect, NULL, NULL);
  gtk_box_append (GTK_BOX (all), box);
  gtk_box_append (GTK_BOX (all), effect);
  gtk_list_item_set_child (row, all);
}

static char *
dup_moves (const TfWhatIfItem *item)
{
  if (item->missing != NULL)
    return g_strdup (item->missing);
  g_autofree char *share = dup_number (100 * item->share_moves, "+.1f", ""),
                  *slope = dup_number (item->slope_moves, "+.2f", "");
  return item->chosen ? g_strdup ("")
                      : g_strdup_printf (_ ("moves the share by %s points, the slope by %s"), share, slope);
}

static void
bind (GtkSignalListItemFactory *factory, GtkListItem *row, gpointer data)
{
  TfWhatIfItem *item = gtk_list_item_get_item (row);
  GtkWidget *all = gtk_list_item_get_child (row), *box = gtk_widget_get_first_child (all);
  GtkWidget *effect = gtk_widget_get_last_child (all), *label = gtk_widget_get_first_child (box);
  g_autofree char *moves = dup_moves (item);
  g_autofree char *words = g_strdup_printf (_ ("%s: share %s, slope %s. %s"), item->words, item->share,
                                            item->slope, moves);
  gtk_label_set_label (GTK_LABEL (label), item->words);
  label = gtk_widget_get_next_sibling (label);
  gtk_label_set_label (GTK_LABEL (label), item->share);
  label = gtk_widget_get_next_sibling (label);
  gtk_label_set_label (GTK_LABEL (label), item->slope);
  gtk_widget_set_tooltip_text (all, *moves != '\0' ? moves : NULL);
  g_object_set_data_full (G_OBJECT (effect), "item", g_object_ref (item), g_object_unref);
  gtk_widget_set_visible (effect, !item->chosen && item->missing == NULL);
  gtk_widget_queue_draw (effect);
  GtkWidget *cell = gtk_widget_get_parent (all); /* what takes the keyboard and is read aloud */
  if (cell != NULL)
    gtk_accessible_update_property (GTK_ACCESSIBLE (cell), GTK_ACCESSIBLE_PROPERTY_LABEL, words, -1);
  if (item->chosen)
    gtk_widget_add_css_class (all, "as-chosen");
  else
    gtk_widget_remove_css_class (all, "as-chosen");
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
  g_free (item->name);
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
