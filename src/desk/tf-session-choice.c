/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Several outlines chosen at once: the chosen one, which the slip shows, and others with it; and
 * what makes one of them, joining. */

#include "tf-session-private.h"

#include <glib/gi18n-lib.h>

gboolean
tf_session_is_chosen (TfSession *self, TfRegionItem *item)
{
  return item != NULL
         && (item == self->region || g_ptr_array_find (self->also, item, NULL));
}

guint
tf_session_get_n_chosen (TfSession *self)
{
  return (self->region != NULL ? 1 : 0) + self->also->len;
}

GPtrArray *
tf_session_dup_chosen (TfSession *self)
{
  GPtrArray *chosen = g_ptr_array_new_with_free_func (g_object_unref);
  if (self->region != NULL)
    g_ptr_array_add (chosen, g_object_ref (self->region));
  for (guint k = 0; k < self->also->len; k++)
    g_ptr_array_add (chosen, g_object_ref (self->also->pdata[k]));
  return chosen;
}

/* The list came new: the same hints and marks are chosen with the chosen one, as far as they are
 * there. */
void
tf_session_choose_also_again (TfSession *self)
{
  g_autoptr (GPtrArray) now = g_ptr_array_new_with_free_func (g_object_unref);
  guint n = g_list_model_get_n_items (G_LIST_MODEL (self->regions));
  for (guint j = 0; j < self->also->len; j++)
    for (guint k = 0; k < n; k++)
      {
        g_autoptr (TfRegionItem) item = g_list_model_get_item (G_LIST_MODEL (self->regions), k);
        const TfRow *row = tf_region_item_get_row (item);
        if (item != self->region
            && tf_region_item_is (self->also->pdata[j], row->mark, row->is_hint))
          g_ptr_array_add (now, g_object_ref (item));
      }
  g_ptr_array_set_size (self->also, 0);
  for (guint k = 0; k < now->len; k++)
    g_ptr_array_add (self->also, g_object_ref (now->pdata[k]));
  if (self->region == NULL && self->also->len > 0)
    self->region = g_ptr_array_steal_index (self->also, 0);
}

static void
changed (TfSession *self)
{
  g_clear_pointer (&self->saved, g_free);
  tf_session_judge_choice (self);
  tf_session_emit (self, TF_SIGNAL_REGIONS);
  tf_session_emit (self, TF_SIGNAL_CHOICE);
}

void
tf_session_toggle_region (TfSession *self, TfRegionItem *item)
{
  guint at;
  g_return_if_fail (TF_IS_SESSION (self));
  if (item == NULL)
    return;
  if (self->region == NULL)
    {
      tf_session_choose_region (self, item);
      return;
    }
  if (item == self->region)
    {
      g_clear_object (&self->region);
      if (self->also->len > 0)
        self->region = g_ptr_array_steal_index (self->also, 0);
    }
  else if (g_ptr_array_find (self->also, item, &at))
    g_ptr_array_remove_index (self->also, at);
  else
    g_ptr_array_add (self->also, g_object_ref (item));
  changed (self);
}

gboolean
tf_session_extend_hint (TfSession *self, int step)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  g_autoptr (GPtrArray) before = tf_session_dup_chosen (self);
  if (!tf_session_step_hint (self, step))
    return FALSE;
  for (guint k = 0; k < before->len; k++)
    if (before->pdata[k] != self->region)
      g_ptr_array_add (self->also, g_object_ref (before->pdata[k]));
  changed (self);
  return TRUE;
}

static gboolean
is_plain_hint (TfRegionItem *item)
{
  return tf_region_item_get_row (item)->is_hint && !tf_region_item_is_carried (item);
}

void
tf_session_choose_all (TfSession *self)
{
  g_return_if_fail (TF_IS_SESSION (self));
  guint n = g_list_model_get_n_items (G_LIST_MODEL (self->regions));
  gboolean hints = FALSE;
  g_clear_object (&self->region);
  g_ptr_array_set_size (self->also, 0);
  for (guint pass = 0; pass < 2; pass++)
    for (guint k = 0; k < n; k++)
      {
        g_autoptr (TfRegionItem) item = g_list_model_get_item (G_LIST_MODEL (self->regions), k);
        if (pass == 0)
          hints = hints || is_plain_hint (item);
        else if (hints ? !is_plain_hint (item) : tf_region_item_get_row (item)->is_hint)
          continue;
        else if (self->region == NULL)
          self->region = g_object_ref (item);
        else
          g_ptr_array_add (self->also, g_object_ref (item));
      }
  changed (self);
}

gboolean
tf_session_step_mark (TfSession *self, int step)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  GListModel *list = G_LIST_MODEL (self->regions);
  int n = (int)g_list_model_get_n_items (list), at = step > 0 ? -1 : n;
  for (int k = 0; k < n; k++)
    {
      g_autoptr (TfRegionItem) item = g_list_model_get_item (list, (guint)k);
      if (item == self->region)
        at = k;
    }
  for (int tried = 0; tried < n; tried++)
    {
      at = (at + step + n) % n;
      g_autoptr (TfRegionItem) item = g_list_model_get_item (list, (guint)at);
      if (!tf_region_item_get_row (item)->is_hint)
        {
          tf_session_choose_region (self, item);
          return TRUE;
        }
    }
  return FALSE;
}

/* -- joining --------------------------------------------------------------------------------- */

gboolean
tf_session_can_join (TfSession *self)
{
  return self->frame != NULL && self->draft == NULL && self->region != NULL
         && g_list_model_get_n_items (G_LIST_MODEL (self->regions)) > 1;
}

/* The chosen one's place is taken by the draft; the others are taken away when it is kept. */
gboolean
tf_session_join (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  g_autoptr (GError) error = NULL;
  g_autoptr (TfOutline) joined = NULL;
  if (!tf_session_can_join (self) || self->also->len == 0)
    return FALSE;
  joined = tf_outline_ref (tf_region_item_get_row (self->region)->outline);
  for (guint k = 0; k < self->also->len && joined != NULL; k++)
    {
      TfOutline *more
          = tf_outline_join (joined, tf_region_item_get_row (self->also->pdata[k])->outline, &error);
      tf_outline_unref (joined);
      joined = more;
    }
  if (joined == NULL)
    {
      tf_session_say (self, error->message);
      return FALSE;
    }
  self->tool = TF_TOOL_NONE;
  tf_session_change_draft (self, g_steal_pointer (&joined), NULL);
  for (guint k = 0; k < self->also->len; k++)
    g_ptr_array_add (self->joined, g_object_ref (self->also->pdata[k]));
  g_ptr_array_set_size (self->also, 0);
  tf_session_store_draft (self);
  tf_session_emit (self, TF_SIGNAL_CHOICE);
  return TRUE;
}
