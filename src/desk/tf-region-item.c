/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-region-item.h"

#include <string.h>
#include <glib/gi18n-lib.h>

struct _TfRegionItem
{
  GObject parent;
  TfRow *row;
  TfVerdict verdict;
  char *label;
};

G_DEFINE_FINAL_TYPE (TfRegionItem, tf_region_item, G_TYPE_OBJECT)

static void
finalize (GObject *object)
{
  tf_row_free (TF_REGION_ITEM (object)->row);
  g_free (TF_REGION_ITEM (object)->label);
  G_OBJECT_CLASS (tf_region_item_parent_class)->finalize (object);
}

static void
tf_region_item_class_init (TfRegionItemClass *klass)
{
  G_OBJECT_CLASS (klass)->finalize = finalize;
}

static void
tf_region_item_init (TfRegionItem *self)
{
}

TfRegionItem *
tf_region_item_new (TfRow *row, TfVerdict verdict)
{
  g_return_val_if_fail (row != NULL, NULL);
  TfRegionItem *self = g_object_new (TF_TYPE_REGION_ITEM, NULL);
  self->row = row;
  self->verdict = verdict;
  const char *dash = strrchr (row->region, '-');
  const char *count = dash != NULL ? dash + 1 : row->region;
  if (tf_region_item_is_carried (self))
    self->label = g_strdup_printf (_ ("%s carried"), count);
  else
    self->label = g_strdup (row->is_hint ? _ ("hint") : count);
  return self;
}

const TfRow *
tf_region_item_get_row (TfRegionItem *self)
{
  return self->row;
}

TfVerdict
tf_region_item_get_verdict (TfRegionItem *self)
{
  return self->verdict;
}

const char *
tf_region_item_get_label (TfRegionItem *self)
{
  return self->label;
}

gboolean
tf_region_item_is_carried (TfRegionItem *self)
{
  return self->row->is_hint && self->row->mark < 0;
}

gboolean
tf_region_item_is (TfRegionItem *self, gint64 mark, gboolean is_hint)
{
  return self != NULL && self->row->mark == mark && self->row->is_hint == is_hint;
}
