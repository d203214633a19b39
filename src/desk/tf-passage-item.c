/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-passage-item.h"

#include <glib/gi18n-lib.h>

#include "tf-series-chart.h"

struct _TfPassageItem
{
  GObject parent;
  TfPassageRow *row;
  char *words;
};

G_DEFINE_FINAL_TYPE (TfPassageItem, tf_passage_item, G_TYPE_OBJECT)

char *
tf_passage_dup_name (const TfPassageRow *row)
{
  return *row->number != '\0' ? g_strdup (row->number)
                              : g_strdup_printf (_ ("hints %.6s"), row->content_id);
}

TfPassageItem *
tf_passage_item_new (TfPassageRow *row)
{
  TfPassageItem *self = g_object_new (TF_TYPE_PASSAGE_ITEM, NULL);
  self->row = row;
  g_autofree char *name = tf_passage_dup_name (row),
                  *first = tf_series_chart_dup_day (row->first_time),
                  *last = tf_series_chart_dup_day (row->last_time);
  g_autofree char *count
      = row->n_marks > 0
            ? g_strdup_printf (ngettext ("%u mark", "%u marks", row->n_marks), row->n_marks)
            : g_strdup_printf (ngettext ("%u hint", "%u hints", row->n_hints), row->n_hints);
  self->words = g_strcmp0 (row->vantage, "earth") == 0 || g_strcmp0 (row->vantage, "unknown") == 0
                    ? g_strdup_printf ("%s · %s – %s · %s", name, first, last, count)
                    : g_strdup_printf ("%s · %s – %s · %s · %s", name, first, last, count, row->vantage);
  return self;
}

const TfPassageRow *
tf_passage_item_get_row (TfPassageItem *self)
{
  return self->row;
}

const char *
tf_passage_item_get_words (TfPassageItem *self)
{
  return self->words;
}

static void
get_property (GObject *object, guint id, GValue *value, GParamSpec *spec)
{
  g_value_set_string (value, TF_PASSAGE_ITEM (object)->words);
}

static void
finalize (GObject *object)
{
  TfPassageItem *self = TF_PASSAGE_ITEM (object);
  g_clear_pointer (&self->row, tf_passage_row_free);
  g_free (self->words);
  G_OBJECT_CLASS (tf_passage_item_parent_class)->finalize (object);
}

static void
tf_passage_item_class_init (TfPassageItemClass *klass)
{
  G_OBJECT_CLASS (klass)->finalize = finalize;
  G_OBJECT_CLASS (klass)->get_property = get_property;
  g_object_class_install_property (
      G_OBJECT_CLASS (klass), 1,
      g_param_spec_string ("words", NULL, NULL, NULL, G_PARAM_READABLE | G_PARAM_STATIC_STRINGS));
}

static void
tf_passage_item_init (TfPassageItem *self)
{
}
