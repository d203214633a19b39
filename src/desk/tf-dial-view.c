/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-dial-view.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-widget-style.h"

struct _TfDialView
{
  GtkWidget parent;
  TfDial dial;
};

G_DEFINE_FINAL_TYPE (TfDialView, tf_dial_view, GTK_TYPE_WIDGET)

static const double label_share = 0.8;
enum
{
  HEIGHT = 128,
  SIGN_SIZE = 22
};

static void
snapshot (GtkWidget *widget, GtkSnapshot *snapshot)
{
  TfDialView *self = TF_DIAL_VIEW (widget);
  int width = gtk_widget_get_width (widget), height = gtk_widget_get_height (widget);
  graphene_rect_t all = GRAPHENE_RECT_INIT (0, 0, (float)width, (float)height);
  TfChartStyle style = tf_widget_chart_style (widget, label_share);
  cairo_t *cr = gtk_snapshot_append_cairo (snapshot, &all);
  tf_dial_draw (cr, &self->dial, &style, (TfArea){ 0, 0, width, height });
  cairo_destroy (cr);
}

static void
measure (GtkWidget *widget, GtkOrientation orientation, int for_size, int *minimum, int *natural,
         int *minimum_baseline, int *natural_baseline)
{
  double text = tf_widget_text_size (widget) / 14.0; /* room for the labels at larger text */
  *minimum = *natural = (int)(HEIGHT * fmax (1, 0.3 + 0.7 * text));
}

void
tf_dial_view_set (TfDialView *self, const TfDial *dial)
{
  g_return_if_fail (TF_IS_DIAL_VIEW (self) && dial != NULL);
  self->dial = *dial;
  tf_widget_describe (GTK_WIDGET (self), tf_dial_dup_description (dial));
  gtk_widget_queue_draw (GTK_WIDGET (self));
}

static void
tf_dial_view_class_init (TfDialViewClass *klass)
{
  GtkWidgetClass *widget = GTK_WIDGET_CLASS (klass);
  widget->snapshot = snapshot;
  widget->measure = measure;
  gtk_widget_class_set_accessible_role (widget, GTK_ACCESSIBLE_ROLE_IMG);
}

static void
tf_dial_view_init (TfDialView *self)
{
  gtk_accessible_update_property (GTK_ACCESSIBLE (self), GTK_ACCESSIBLE_PROPERTY_LABEL, _ ("Dial"),
                                  -1);
  self->dial.bearing_deg = self->dial.joy_deg = NAN;
}

/* -- the diamond beside the verdict ---------------------------------------------------------- */

struct _TfVerdictSign
{
  GtkWidget parent;
  TfDiamond kind;
};

G_DEFINE_FINAL_TYPE (TfVerdictSign, tf_verdict_sign, GTK_TYPE_WIDGET)

static void
sign_snapshot (GtkWidget *widget, GtkSnapshot *snapshot)
{
  int size = MIN (gtk_widget_get_width (widget), gtk_widget_get_height (widget));
  graphene_rect_t all = GRAPHENE_RECT_INIT (0, 0, (float)size, (float)size);
  TfChartStyle style = tf_widget_chart_style (widget, 1);
  cairo_t *cr = gtk_snapshot_append_cairo (snapshot, &all);
  tf_chart_diamond (cr, &style, size / 2.0, size / 2.0, size * 0.36,
                    TF_VERDICT_SIGN (widget)->kind);
  cairo_destroy (cr);
}

static void
sign_measure (GtkWidget *widget, GtkOrientation orientation, int for_size, int *minimum,
              int *natural, int *minimum_baseline, int *natural_baseline)
{
  *minimum = *natural = SIGN_SIZE;
}

void
tf_verdict_sign_set (TfVerdictSign *self, TfDiamond kind)
{
  g_return_if_fail (TF_IS_VERDICT_SIGN (self));
  self->kind = kind;
  gtk_widget_queue_draw (GTK_WIDGET (self));
}

static void
tf_verdict_sign_class_init (TfVerdictSignClass *klass)
{
  GtkWidgetClass *widget = GTK_WIDGET_CLASS (klass);
  widget->snapshot = sign_snapshot;
  widget->measure = sign_measure;
  gtk_widget_class_set_accessible_role (
      widget, GTK_ACCESSIBLE_ROLE_PRESENTATION); /* the words stand beside it */
}

static void
tf_verdict_sign_init (TfVerdictSign *self)
{
}
