/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The pictures of the strip: one frame after the other in a thread, those near the look in view
 * first. What was begun for another passage, range or palette is dropped. */

#include "tf-followed-private.h"

#include <glib/gi18n-lib.h>

typedef struct
{
  TfLookItem *item; /* touched in the main thread only */
  char *path;
  TfFrameSpec which;
  TfView view;
  TfPaint paint;
  TfPool *pool;
} Order;

static void
order_free (gpointer data)
{
  Order *order = data;
  g_clear_object (&order->item);
  g_free (order->path);
  tf_pool_unref (order->pool);
  g_free (order);
}

static void
render_in_thread (GTask *task, gpointer source, gpointer data, GCancellable *cancellable)
{
  const Order *order = data;
  GError *error = NULL;
  TfWork work = { .pool = order->pool };
  g_autoptr (TfFrame) frame = tf_frame_open (order->path, &order->which, &work, &error);
  if (frame == NULL)
    {
      g_task_return_error (task, error);
      return;
    }
  cairo_surface_t *surface
      = cairo_image_surface_create (CAIRO_FORMAT_ARGB32, TF_LOOK_WIDTH, TF_LOOK_HEIGHT);
  cairo_surface_flush (surface);
  tf_picture_render (frame, &order->view, &order->paint,
                     (guint32 *)(gpointer)cairo_image_surface_get_data (surface),
                     (guint)cairo_image_surface_get_stride (surface) / 4, &work);
  cairo_surface_mark_dirty (surface);
  g_task_return_pointer (task, surface, (GDestroyNotify)cairo_surface_destroy);
}

static void
rendered (GObject *source, GAsyncResult *result, gpointer data)
{
  TfFollowed *self = TF_FOLLOWED (source);
  Order *order = g_task_get_task_data (G_TASK (result));
  g_autoptr (GError) error = NULL;
  cairo_surface_t *picture = g_task_propagate_pointer (G_TASK (result), &error);
  g_autoptr (TfLookItem) item = g_steal_pointer (&order->item); /* let go of here */
  self->rendering = FALSE;
  if (g_task_get_cancellable (G_TASK (result)) == self->drawing && self->drawing != NULL)
    tf_look_item_take_picture (item, g_steal_pointer (&picture),
                               error != NULL ? _ ("cannot be read") : NULL);
  g_clear_pointer (&picture, cairo_surface_destroy);
  tf_followed_render (self);
}

static TfLookItem *
next_waiting (GListModel *looks, int now)
{
  int n = (int)g_list_model_get_n_items (looks);
  for (int away = 0; away < n; away++)
    for (int side = 1; side >= -1; side -= 2)
      {
        int at = MAX (now, 0) + side * away;
        g_autoptr (TfLookItem) item = at >= 0 ? g_list_model_get_item (looks, (guint)at) : NULL;
        if (item != NULL && tf_look_item_is_waiting (item))
          return g_steal_pointer (&item);
      }
  return NULL;
}

void
tf_followed_render (TfFollowed *self)
{
  if (self->rendering || self->drawing == NULL)
    return;
  TfLookItem *item = next_waiting (G_LIST_MODEL (self->looks), self->now);
  if (item == NULL)
    item = next_waiting (G_LIST_MODEL (self->beside_looks), 0);
  if (item == NULL)
    return;
  if (self->pool == NULL)
    self->pool = tf_pool_new ();
  self->range = tf_session_get_range (self->session);
  self->palette = tf_session_get_palette (self->session);
  const TfLookSpec *spec = tf_look_item_get_spec (item);
  Order *order = g_new0 (Order, 1);
  order->item = item;
  order->path = g_strdup (spec->path);
  order->which = spec->which;
  order->view = spec->view;
  order->paint = (TfPaint){
    .range_gauss = self->range, .palette = self->palette, .ground = 0xff17191d, .dark = TRUE
  };
  order->pool = tf_pool_ref (self->pool);
  self->rendering = TRUE;
  g_autoptr (GTask) task = g_task_new (self, self->drawing, rendered, NULL);
  g_task_set_check_cancellable (task, FALSE);
  g_task_set_task_data (task, order, order_free);
  g_task_run_in_thread (task, render_in_thread);
}

static void
forget_in (GListStore *store)
{
  guint n = g_list_model_get_n_items (G_LIST_MODEL (store));
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfLookItem) item = g_list_model_get_item (G_LIST_MODEL (store), k);
      tf_look_item_want_picture (item);
    }
}

void
tf_followed_forget_pictures (TfFollowed *self)
{
  if (self->drawing != NULL)
    g_cancellable_cancel (self->drawing);
  g_clear_object (&self->drawing);
  self->drawing = g_cancellable_new ();
  forget_in (self->looks);
  forget_in (self->beside_looks);
  tf_followed_render (self);
}
