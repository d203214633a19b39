/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-watch.h"

#include <sys/stat.h>

#include "tf-intake.h"

enum
{
  LOOK_MS = 1000,     /* between two looks at files that are on their way */
  QUIET_S = 20,       /* between looks when nothing is said: not every file system tells */
  PATIENCE_LOOKS = 60 /* a file that rests but stays short is handed on, so that it is told */
};

/* What is known of one file. */
typedef struct
{
  gint64 size, mtime;
  guint looks; /* at which it was as it is now */
  gboolean handed_on;
} Seen;

typedef struct
{
  int refs; /* atomic: owner, thread */
  GMutex mutex;
  char *folder;
  GHashTable *files; /* path -> Seen; guarded */
} Shared;

struct _TfWatch
{
  Shared *shared;
  TfWatchFunc func;
  gpointer data;
  GFileMonitor *monitor;
  GCancellable *gone;
  guint timer;
  gboolean looking, again;
  guint n_waiting;
};

static void
shared_unref (Shared *shared)
{
  if (!g_atomic_int_dec_and_test (&shared->refs))
    return;
  g_mutex_clear (&shared->mutex);
  g_hash_table_unref (shared->files);
  g_free (shared->folder);
  g_free (shared);
}

/* -- in the thread --------------------------------------------------------------------------- */

typedef struct
{
  GPtrArray *ready;
  guint n_waiting;
} Looked;

static void
looked_free (gpointer data)
{
  Looked *looked = data;
  g_ptr_array_unref (looked->ready);
  g_free (looked);
}

static Seen *
see (Shared *shared, const char *path, const struct stat *info)
{
  Seen *seen = g_hash_table_lookup (shared->files, path);
  if (seen == NULL)
    {
      seen = g_new0 (Seen, 1);
      seen->size = -1;
      g_hash_table_insert (shared->files, g_strdup (path), seen);
    }
  gint64 mtime = (gint64)info->st_mtim.tv_sec * 1000000000 + info->st_mtim.tv_nsec;
  gboolean same = seen->size == info->st_size && seen->mtime == mtime;
  seen->looks = same ? seen->looks + 1 : 0;
  seen->handed_on = same && seen->handed_on;
  seen->size = info->st_size;
  seen->mtime = mtime;
  return seen;
}

static void
look_at (Shared *shared, const char *path, Looked *looked)
{
  struct stat info;
  if (stat (path, &info) != 0 || !S_ISREG (info.st_mode))
    return;
  Seen *seen = see (shared, path, &info);
  if (seen->handed_on)
    return;
  if (seen->looks > 0 && (tf_fits_is_whole (path) || seen->looks >= PATIENCE_LOOKS))
    {
      seen->handed_on = TRUE;
      g_ptr_array_add (looked->ready, g_strdup (path));
    }
  else
    looked->n_waiting++;
}

static void
look_in_thread (GTask *task, gpointer source, gpointer data, GCancellable *cancellable)
{
  Shared *shared = data;
  Looked *looked = g_new0 (Looked, 1);
  looked->ready = g_ptr_array_new_with_free_func (g_free);
  const char *folders[] = { shared->folder, NULL };
  g_auto (GStrv) files = tf_intake_list ((char *const *)folders, NULL); /* gone for a while: none */
  g_mutex_lock (&shared->mutex);
  for (guint k = 0; files != NULL && files[k] != NULL; k++)
    look_at (shared, files[k], looked);
  g_mutex_unlock (&shared->mutex);
  g_task_return_pointer (task, looked, looked_free);
}

/* -- in the main context --------------------------------------------------------------------- */

static void look (TfWatch *watch);

static gboolean
timer_ends (gpointer data)
{
  TfWatch *watch = data;
  watch->timer = 0;
  look (watch);
  return G_SOURCE_REMOVE;
}

static void
look_later (TfWatch *watch)
{
  if (watch->timer == 0)
    watch->timer = watch->n_waiting > 0 ? g_timeout_add (LOOK_MS, timer_ends, watch)
                                        : g_timeout_add_seconds (QUIET_S, timer_ends, watch);
}

static void
looked_done (GObject *source, GAsyncResult *result, gpointer data)
{
  g_autoptr (GError) error = NULL;
  Looked *looked = g_task_propagate_pointer (G_TASK (result), &error);
  if (looked == NULL)
    return; /* the watch is gone */
  TfWatch *watch = data;
  watch->looking = FALSE;
  watch->n_waiting = looked->n_waiting;
  g_ptr_array_add (looked->ready, NULL);
  if (watch->again)
    look (watch);
  else
    look_later (watch);
  if (looked->ready->len > 1)
    watch->func ((char *const *)looked->ready->pdata, watch->data);
  looked_free (looked);
}

static void
look (TfWatch *watch)
{
  watch->again = watch->looking;
  if (watch->looking)
    return;
  watch->looking = TRUE;
  g_clear_handle_id (&watch->timer, g_source_remove);
  g_atomic_int_inc (&watch->shared->refs);
  g_autoptr (GTask) task = g_task_new (NULL, watch->gone, looked_done, watch);
  g_task_set_task_data (task, watch->shared, (GDestroyNotify)shared_unref);
  g_task_run_in_thread (task, look_in_thread);
}

/* Something moved in the folder: a look soon, since a file in the making moves many times. */
static void
told (GFileMonitor *monitor, GFile *file, GFile *other, GFileMonitorEvent event, TfWatch *watch)
{
  g_clear_handle_id (&watch->timer, g_source_remove);
  watch->timer = g_timeout_add (LOOK_MS / 2, timer_ends, watch);
}

TfWatch *
tf_watch_new (const char *folder, TfWatchFunc func, gpointer data, GError **error)
{
  g_return_val_if_fail (folder != NULL && func != NULL, NULL);
  g_autoptr (GDir) dir = g_dir_open (folder, 0, error);
  if (dir == NULL)
    return NULL;
  TfWatch *watch = g_new0 (TfWatch, 1);
  g_autoptr (GFile) file = g_file_new_for_path (folder);
  watch->shared = g_new0 (Shared, 1);
  watch->shared->refs = 1;
  watch->shared->folder = g_canonicalize_filename (folder, NULL);
  watch->shared->files = g_hash_table_new_full (g_str_hash, g_str_equal, g_free, g_free);
  g_mutex_init (&watch->shared->mutex);
  watch->func = func;
  watch->data = data;
  watch->gone = g_cancellable_new ();
  /* without one the quiet looks are left */
  watch->monitor = g_file_monitor_directory (file, G_FILE_MONITOR_WATCH_MOVES, NULL, NULL);
  if (watch->monitor != NULL)
    g_signal_connect (watch->monitor, "changed", G_CALLBACK (told), watch);
  look (watch);
  return watch;
}

void
tf_watch_free (TfWatch *watch)
{
  if (watch == NULL)
    return;
  g_cancellable_cancel (watch->gone);
  g_clear_handle_id (&watch->timer, g_source_remove);
  if (watch->monitor != NULL)
    g_signal_handlers_disconnect_by_data (watch->monitor, watch);
  g_clear_object (&watch->monitor);
  g_object_unref (watch->gone);
  shared_unref (watch->shared);
  g_free (watch);
}

const char *
tf_watch_get_folder (const TfWatch *watch)
{
  return watch->shared->folder;
}

guint
tf_watch_get_n_waiting (const TfWatch *watch)
{
  return watch->n_waiting;
}
