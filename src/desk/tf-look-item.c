/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-look-item.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-series-chart.h"

struct _TfLookItem
{
  GObject parent;
  TfLookSpec *spec;
  TfStripLook look;
  char *caption, *why;
  gboolean waiting;
};

G_DEFINE_FINAL_TYPE (TfLookItem, tf_look_item, G_TYPE_OBJECT)

static guint changed_signal;

void
tf_look_spec_free (TfLookSpec *spec)
{
  g_free (spec->path);
  g_clear_pointer (&spec->edge, g_array_unref);
  g_free (spec);
}

TfLookItem *
tf_look_item_new (TfLookSpec *spec)
{
  TfLookItem *self = g_object_new (TF_TYPE_LOOK_ITEM, NULL);
  self->spec = spec;
  self->waiting = spec->kind != TF_LOOK_GAP;
  self->caption = spec->kind == TF_LOOK_GAP ? g_strdup_printf (_ ("%.0f h without"), spec->gap_s / 3600)
                                            : tf_series_chart_dup_day (spec->time);
  self->look = (TfStripLook){ .caption = self->caption,
                              .why = spec->kind == TF_LOOK_GAP ? _ ("no frame") : NULL,
                              .poles = spec->poles,
                              .positive_x = spec->positive[0],
                              .positive_y = spec->positive[1],
                              .negative_x = spec->negative[0],
                              .negative_y = spec->negative[1],
                              .hint = spec->is_hint,
                              .ghost = spec->kind == TF_LOOK_GHOST };
  if (spec->edge != NULL)
    {
      self->look.edge = (const double *)(gconstpointer)spec->edge->data;
      self->look.n_edge = spec->edge->len / 2;
    }
  return self;
}

const TfLookSpec *
tf_look_item_get_spec (TfLookItem *self)
{
  return self->spec;
}

const TfStripLook *
tf_look_item_get_look (TfLookItem *self)
{
  return &self->look;
}

/* A surface is no thing for two threads, its pixels are: the copy lies over them and keeps them. */
static cairo_surface_t *
over_pixels (cairo_surface_t *picture)
{
  static const cairo_user_data_key_t keeps = { 0 };
  cairo_surface_t *over = cairo_image_surface_create_for_data (
      cairo_image_surface_get_data (picture), cairo_image_surface_get_format (picture),
      cairo_image_surface_get_width (picture), cairo_image_surface_get_height (picture),
      cairo_image_surface_get_stride (picture));
  cairo_surface_set_user_data (over, &keeps, cairo_surface_reference (picture),
                               (cairo_destroy_func_t)cairo_surface_destroy);
  return over;
}

void
tf_look_item_copy_look (TfLookItem *self, TfStripLook *copy)
{
  *copy = self->look;
  copy->caption = g_strdup (self->look.caption);
  copy->why = g_strdup (self->look.why);
  copy->edge = g_memdup2 (self->look.edge, 2 * sizeof (double) * self->look.n_edge);
  copy->picture = self->look.picture != NULL ? over_pixels (self->look.picture) : NULL;
}

void
tf_look_copy_clear (TfStripLook *copy)
{
  g_free ((char *)copy->caption);
  g_free ((char *)copy->why);
  g_free ((double *)copy->edge);
  g_clear_pointer (&copy->picture, cairo_surface_destroy);
}

void
tf_look_item_take_picture (TfLookItem *self, cairo_surface_t *picture, const char *why)
{
  g_return_if_fail (TF_IS_LOOK_ITEM (self));
  g_clear_pointer (&self->look.picture, cairo_surface_destroy);
  self->look.picture = picture;
  self->waiting = FALSE;
  g_free (self->why);
  self->look.why = self->why = g_strdup (why);
  g_signal_emit (self, changed_signal, 0);
}

static gboolean
is_same_view (const TfView *a, const TfView *b)
{
  return fabs (a->zoom - b->zoom) < 1e-9 && fabs (a->centre_lon_deg - b->centre_lon_deg) < 1e-9
         && fabs (a->centre_lat_deg - b->centre_lat_deg) < 1e-9;
}

gboolean
tf_look_item_share_picture (TfLookItem *self, TfLookItem *other)
{
  if (other->waiting || other->look.picture == NULL || self->spec->frame != other->spec->frame
      || g_strcmp0 (self->spec->path, other->spec->path) != 0
      || !is_same_view (&self->spec->view, &other->spec->view))
    return FALSE;
  tf_look_item_take_picture (self, cairo_surface_reference (other->look.picture), NULL);
  return TRUE;
}

void
tf_look_item_want_picture (TfLookItem *self)
{
  self->waiting = self->spec->kind != TF_LOOK_GAP;
}

gboolean
tf_look_item_is_waiting (TfLookItem *self)
{
  return self->waiting;
}

char *
tf_look_item_dup_words (TfLookItem *self)
{
  switch (self->spec->kind)
    {
    case TF_LOOK_GAP:
      return g_strdup_printf (_ ("No frame for %.0f hours"), self->spec->gap_s / 3600);
    case TF_LOOK_GHOST:
      return g_strdup_printf (
          _ ("%s: nothing marked or hinted; dotted is the nearest outline, carried here"),
          self->caption);
    default:
      return self->why != NULL
                 ? g_strdup_printf ("%s: %s", self->caption, self->why)
                 : g_strdup_printf (self->spec->is_hint ? _ ("%s: hint") : _ ("%s: mark"),
                                    self->caption);
    }
}

static void
finalize (GObject *object)
{
  TfLookItem *self = TF_LOOK_ITEM (object);
  g_clear_pointer (&self->look.picture, cairo_surface_destroy);
  tf_look_spec_free (self->spec);
  g_free (self->caption);
  g_free (self->why);
  G_OBJECT_CLASS (tf_look_item_parent_class)->finalize (object);
}

static void
tf_look_item_class_init (TfLookItemClass *klass)
{
  G_OBJECT_CLASS (klass)->finalize = finalize;
  changed_signal = g_signal_new ("changed", TF_TYPE_LOOK_ITEM, G_SIGNAL_RUN_LAST, 0, NULL, NULL,
                                 NULL, G_TYPE_NONE, 0);
}

static void
tf_look_item_init (TfLookItem *self)
{
}
