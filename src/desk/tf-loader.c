/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-loader.h"

enum
{
  N_KEPT = 3
};

typedef struct
{
  char *path;
  TfFrameSpec spec;
  TfCorrection correction;
  TfFrame *frame;
} Kept;

struct _TfLoader
{
  int refs; /* the owner and each request under way; main thread */
  gboolean gone;
  TfPool *pool;
  TfWorkers *workers;
  TfCancel *cancel; /* of the newest request */
  guint64 serial;
  TfLoadFunc func;
  gpointer data;
  GQueue kept; /* of Kept, newest first */
};

typedef struct
{
  TfLoader *loader;
  guint64 serial;
  char *path;
  TfFrameSpec spec;
  TfCorrection correction;
  TfWork work;
} Request;

static void
loader_unref (TfLoader *loader)
{
  if (--loader->refs == 0)
    g_free (loader);
}

static void
kept_free (gpointer data)
{
  Kept *kept = data;
  g_free (kept->path);
  tf_frame_unref (kept->frame);
  g_free (kept);
}

static void
request_free (gpointer data)
{
  Request *request = data;
  g_free (request->path);
  tf_pool_unref (request->work.pool);
  tf_workers_unref (request->work.workers);
  tf_cancel_unref (request->work.cancel);
  g_free (request);
}

static Kept *
find_kept (TfLoader *loader, const char *path, const TfFrameSpec *spec,
           const TfCorrection *correction)
{
  for (GList *l = loader->kept.head; l != NULL; l = l->next)
    {
      Kept *kept = l->data;
      if (g_str_equal (kept->path, path) && kept->spec.hdu == spec->hdu
          && kept->spec.plane == spec->plane
          && tf_correction_equal (&kept->correction, correction))
        return kept;
    }
  return NULL;
}

static void
keep (TfLoader *loader, const Request *request, TfFrame *frame)
{
  Kept *kept = g_new0 (Kept, 1);
  kept->path = g_strdup (request->path);
  kept->spec = request->spec;
  kept->correction = request->correction;
  kept->frame = tf_frame_ref (frame);
  g_queue_push_head (&loader->kept, kept);
  while (loader->kept.length > N_KEPT)
    kept_free (g_queue_pop_tail (&loader->kept));
}

static void
open_in_thread (GTask *task, gpointer source, gpointer data, GCancellable *cancellable)
{
  Request *request = data;
  GError *error = NULL;
  g_autoptr (TfFrame) frame
      = tf_frame_open (request->path, &request->spec, &request->work, &error);
  if (frame != NULL)
    tf_frame_get_level (frame, 1, NULL, NULL); /* here, not while it is drawn */
  /* what cannot be corrected is shown as its header has it */
  TfFrame *seen
      = frame != NULL ? tf_frame_corrected (frame, &request->correction, &request->work) : NULL;
  if (frame != NULL)
    g_task_return_pointer (task, seen != NULL ? seen : g_steal_pointer (&frame),
                           (GDestroyNotify)tf_frame_unref);
  else
    g_task_return_error (task, error);
}

static void
opened (GObject *source, GAsyncResult *result, gpointer data)
{
  TfLoader *loader = data;
  const Request *request = g_task_get_task_data (G_TASK (result));
  g_autoptr (GError) error = NULL;
  g_autoptr (TfFrame) frame = g_task_propagate_pointer (G_TASK (result), &error);
  if (!loader->gone && frame != NULL)
    keep (loader, request, frame);
  if (!loader->gone && request->serial == loader->serial
      && !g_error_matches (error, TF_FRAME_ERROR, TF_FRAME_ERROR_CANCELLED))
    loader->func (frame, error, loader->data);
  loader_unref (loader);
}

TfLoader *
tf_loader_new (TfPool *pool)
{
  TfLoader *loader = g_new0 (TfLoader, 1);
  loader->refs = 1;
  loader->pool = tf_pool_ref (pool);
  loader->workers = tf_workers_new (0);
  g_queue_init (&loader->kept);
  return loader;
}

void
tf_loader_free (TfLoader *loader)
{
  if (loader == NULL)
    return;
  tf_loader_cancel (loader);
  loader->gone = TRUE;
  g_queue_clear_full (&loader->kept, kept_free);
  g_clear_pointer (&loader->workers, tf_workers_unref);
  g_clear_pointer (&loader->pool, tf_pool_unref);
  loader_unref (loader);
}

void
tf_loader_cancel (TfLoader *loader)
{
  loader->serial++;
  if (loader->cancel != NULL)
    tf_cancel_raise (loader->cancel);
  g_clear_pointer (&loader->cancel, tf_cancel_unref);
}

static Request *
request_new (TfLoader *loader, const char *path, const TfFrameSpec *spec,
             const TfCorrection *correction)
{
  Request *request = g_new0 (Request, 1);
  request->serial = loader->serial;
  request->path = g_strdup (path);
  request->spec = *spec;
  request->correction = *correction;
  request->work.pool = tf_pool_ref (loader->pool);
  request->work.workers = tf_workers_ref (loader->workers);
  request->work.cancel = tf_cancel_ref (loader->cancel);
  return request;
}

void
tf_loader_open (TfLoader *loader, const char *path, const TfFrameSpec *spec,
                const TfCorrection *correction, TfLoadFunc func, gpointer data)
{
  g_return_if_fail (loader != NULL && path != NULL && spec != NULL && correction != NULL);
  tf_loader_cancel (loader);
  loader->func = func;
  loader->data = data;
  Kept *kept = find_kept (loader, path, spec, correction);
  if (kept != NULL)
    {
      g_autoptr (TfFrame) frame = tf_frame_ref (kept->frame);
      func (frame, NULL, data);
      return;
    }
  loader->cancel = tf_cancel_new ();
  loader->refs++;
  g_autoptr (GTask) task = g_task_new (NULL, NULL, opened, loader);
  g_task_set_task_data (task, request_new (loader, path, spec, correction), request_free);
  g_task_run_in_thread (task, open_in_thread);
}
