/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-thumbs.h"

#include <glib/gstdio.h>

#include "tf-picture.h"

enum
{
  PICTURE_SIZE = 2 * TF_THUMB_SIZE
}; /* sharp at scale 2 */
static const double range_gauss = 300;

struct _TfThumbs
{
  GQueue waiting; /* of TfFrameItem, the head is made next; main thread */
  GHashTable *asked;
  gboolean busy;
  GCancellable *cancellable;
  TfPool *pool;
};

typedef struct
{
  TfFrameItem *item; /* touched in the main thread only */
  char *path, *cache;
  TfFrameSpec spec;
  TfPool *pool;
  TfThumbs *thumbs; /* NULL once it is gone */
} Order;

static void
order_free (gpointer data)
{
  Order *order = data;
  g_clear_object (&order->item);
  g_free (order->path);
  g_free (order->cache);
  tf_pool_unref (order->pool);
  g_free (order);
}

static char *
dup_cache_path (const TfFrameRow *row)
{
  if (row->checksum == NULL || row->checksum[0] == '\0')
    return NULL;
  g_autofree char *name = g_strdup_printf ("%s-%d-%d.png", row->checksum, row->hdu, row->plane);
  return g_build_filename (g_get_user_cache_dir (), "tiltfield", "thumbnails", name, NULL);
}

static GBytes *
render (TfFrame *frame)
{
  TfView view = { .look = TF_LOOK_DISK, .width = PICTURE_SIZE, .height = PICTURE_SIZE, .zoom = 1 };
  TfPaint paint = {
    .range_gauss = range_gauss, .palette = TF_PALETTE_GREY, .ground = 0xff17191d, .dark = TRUE
  };
  guint32 *pixels = g_new (guint32, PICTURE_SIZE * PICTURE_SIZE);
  tf_view_fit (&view, tf_frame_get_geometry (frame), TRUE);
  tf_picture_render (frame, &view, &paint, pixels, PICTURE_SIZE, NULL);
  return g_bytes_new_take (pixels, PICTURE_SIZE * PICTURE_SIZE * sizeof *pixels);
}

static GdkTexture *
make (const Order *order, GError **error)
{
  if (order->cache != NULL && g_file_test (order->cache, G_FILE_TEST_EXISTS))
    return gdk_texture_new_from_filename (order->cache, error);
  TfWork work = { .pool = order->pool };
  g_autoptr (TfFrame) frame = tf_frame_open (order->path, &order->spec, &work, error);
  if (frame == NULL)
    return NULL;
  g_autoptr (GBytes) bytes = render (frame);
  GdkTexture *texture = gdk_memory_texture_new (PICTURE_SIZE, PICTURE_SIZE, GDK_MEMORY_DEFAULT,
                                                bytes, PICTURE_SIZE * 4);
  if (order->cache != NULL)
    {
      g_autofree char *folder = g_path_get_dirname (order->cache);
      g_mkdir_with_parents (folder, 0700);
      gdk_texture_save_to_png (texture, order->cache); /* a cache: made again when this fails */
    }
  return texture;
}

static void
make_in_thread (GTask *task, gpointer source, gpointer data, GCancellable *cancellable)
{
  GError *error = NULL;
  GdkTexture *texture = make (data, &error);
  if (texture != NULL)
    g_task_return_pointer (task, texture, g_object_unref);
  else
    g_task_return_error (task, error);
}

static void make_next (TfThumbs *thumbs);

static void
made (GObject *source, GAsyncResult *result, gpointer data)
{
  Order *order = g_task_get_task_data (G_TASK (result));
  g_autoptr (GdkTexture) texture = g_task_propagate_pointer (G_TASK (result), NULL);
  g_autoptr (TfFrameItem) item
      = g_steal_pointer (&order->item); /* let go of here, not in the worker */
  if (g_cancellable_is_cancelled (g_task_get_cancellable (G_TASK (result))))
    return; /* the roll is gone */
  if (texture != NULL)
    tf_frame_item_set_thumbnail (item, texture);
  order->thumbs->busy = FALSE;
  make_next (order->thumbs);
}

static void
make_next (TfThumbs *thumbs)
{
  TfFrameItem *item = thumbs->busy ? NULL : g_queue_pop_head (&thumbs->waiting);
  if (item == NULL)
    return;
  const TfFrameRow *row = tf_frame_item_get_row (item);
  Order *order = g_new0 (Order, 1);
  order->item = item;
  order->path = g_strdup (row->path);
  order->cache = dup_cache_path (row);
  order->spec = (TfFrameSpec){ .hdu = row->hdu, .plane = row->plane };
  order->pool = tf_pool_ref (thumbs->pool);
  order->thumbs = thumbs;
  thumbs->busy = TRUE;
  g_autoptr (GTask) task = g_task_new (NULL, thumbs->cancellable, made, NULL);
  g_task_set_check_cancellable (task, FALSE);
  g_task_set_priority (task, G_PRIORITY_LOW);
  g_task_set_task_data (task, order, order_free);
  g_task_run_in_thread (task, make_in_thread);
}

TfThumbs *
tf_thumbs_new (void)
{
  TfThumbs *thumbs = g_new0 (TfThumbs, 1);
  g_queue_init (&thumbs->waiting);
  thumbs->asked = g_hash_table_new_full (NULL, NULL, g_object_unref, NULL);
  thumbs->cancellable = g_cancellable_new ();
  thumbs->pool = tf_pool_new ();
  return thumbs;
}

void
tf_thumbs_ask (TfThumbs *thumbs, TfFrameItem *item)
{
  g_return_if_fail (thumbs != NULL && TF_IS_FRAME_ITEM (item));
  if (tf_frame_item_get_thumbnail (item) != NULL
      || tf_frame_item_get_state (item) == TF_FRAME_REFUSED
      || g_hash_table_contains (thumbs->asked, item))
    return;
  g_hash_table_add (thumbs->asked, g_object_ref (item));
  g_queue_push_head (&thumbs->waiting, g_object_ref (item));
  make_next (thumbs);
}

void
tf_thumbs_free (TfThumbs *thumbs)
{
  if (thumbs == NULL)
    return;
  g_cancellable_cancel (thumbs->cancellable);
  g_object_unref (thumbs->cancellable);
  g_queue_clear_full (&thumbs->waiting, g_object_unref);
  g_hash_table_unref (thumbs->asked);
  tf_pool_unref (thumbs->pool);
  g_free (thumbs);
}
