/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-look-view.h"

#include <glib/gi18n-lib.h>

#include "tf-passage-content.h"
#include "tf-widget-style.h"

struct _TfLookView
{
  GtkWidget parent;
  TfLookItem *item;
  gboolean large;
};

G_DEFINE_FINAL_TYPE (TfLookView, tf_look_view, GTK_TYPE_WIDGET)

enum
{
  STRIP_WIDTH = 136,
  LARGE_WIDTH = 276
};
static const TfColour on_night = { 0.88, 0.89, 0.91, 1 };
static const double label_share = 0.82, caption_lines = 1.7, caption_letters = 7.5;

static double
picture_height (double width)
{
  return width * TF_LOOK_HEIGHT / TF_LOOK_WIDTH;
}

static void
snapshot (GtkWidget *widget, GtkSnapshot *snapshot)
{
  TfLookView *self = TF_LOOK_VIEW (widget);
  int width = gtk_widget_get_width (widget), height = gtk_widget_get_height (widget);
  static const TfStripLook nothing = { 0 };
  graphene_rect_t all = GRAPHENE_RECT_INIT (0, 0, (float)width, (float)height);
  TfChartStyle style = tf_widget_chart_style (widget, label_share);
  style.ink = on_night; /* the strip is dark in light and dark */
  cairo_t *cr = gtk_snapshot_append_cairo (snapshot, &all);
  double foot = self->large ? 0 : style.text_pt * caption_lines;
  double shown = MIN (width, (height - foot) * TF_LOOK_WIDTH / TF_LOOK_HEIGHT);
  tf_strip_draw_look (cr, self->item != NULL ? tf_look_item_get_look (self->item) : &nothing, &style,
                      (TfArea){ (width - shown) / 2, 0, shown, picture_height (shown) + foot },
                      !self->large);
  cairo_destroy (cr);
}

static void
measure (GtkWidget *widget, GtkOrientation orientation, int for_size, int *minimum, int *natural,
         int *minimum_baseline, int *natural_baseline)
{
  TfLookView *self = TF_LOOK_VIEW (widget);
  TfChartStyle style = tf_widget_chart_style (widget, label_share);
  int width = self->large ? LARGE_WIDTH
                          : MAX (STRIP_WIDTH, (int)(style.text_pt * caption_letters));
  int height = (int)(picture_height (width) + (self->large ? 0 : style.text_pt * caption_lines));
  *minimum = *natural = orientation == GTK_ORIENTATION_HORIZONTAL ? width : height;
}

static void
changed (TfLookView *self)
{
  char *words = self->item != NULL ? tf_look_item_dup_words (self->item) : g_strdup ("");
  gtk_widget_set_tooltip_text (GTK_WIDGET (self), *words != '\0' ? words : NULL);
  GtkWidget *parent = gtk_widget_get_parent (GTK_WIDGET (self));
  if (parent != NULL && !self->large) /* the list's own cell: nothing names it otherwise */
    gtk_accessible_update_property (GTK_ACCESSIBLE (parent), GTK_ACCESSIBLE_PROPERTY_LABEL, words,
                                    -1);
  tf_widget_describe (GTK_WIDGET (self), words);
  gtk_widget_queue_draw (GTK_WIDGET (self));
}

void
tf_look_view_set_item (TfLookView *self, TfLookItem *item)
{
  g_return_if_fail (TF_IS_LOOK_VIEW (self));
  if (self->item != NULL)
    g_signal_handlers_disconnect_by_data (self->item, self);
  g_set_object (&self->item, item);
  if (item != NULL)
    g_signal_connect_swapped (item, "changed", G_CALLBACK (changed), self);
  changed (self);
}

void
tf_look_view_set_large (TfLookView *self, gboolean large)
{
  g_return_if_fail (TF_IS_LOOK_VIEW (self));
  self->large = large;
  gtk_widget_queue_resize (GTK_WIDGET (self));
}

GtkWidget *
tf_look_view_new (void)
{
  return g_object_new (TF_TYPE_LOOK_VIEW, NULL);
}

static void
dispose (GObject *object)
{
  TfLookView *self = TF_LOOK_VIEW (object);
  if (self->item != NULL)
    g_signal_handlers_disconnect_by_data (self->item, self);
  g_clear_object (&self->item);
  G_OBJECT_CLASS (tf_look_view_parent_class)->dispose (object);
}

static void
tf_look_view_class_init (TfLookViewClass *klass)
{
  GtkWidgetClass *widget = GTK_WIDGET_CLASS (klass);
  G_OBJECT_CLASS (klass)->dispose = dispose;
  widget->snapshot = snapshot;
  widget->measure = measure;
  gtk_widget_class_set_css_name (widget, "look");
  gtk_widget_class_set_accessible_role (widget, GTK_ACCESSIBLE_ROLE_IMG);
}

static void
tf_look_view_init (TfLookView *self)
{
  gtk_accessible_update_property (GTK_ACCESSIBLE (self), GTK_ACCESSIBLE_PROPERTY_LABEL,
                                  _ ("Close look"), -1);
}
