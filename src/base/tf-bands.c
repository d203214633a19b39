/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-bands.h"

struct _TfCancel
{
  int raised;
};

TfCancel *
tf_cancel_new (void)
{
  return g_atomic_rc_box_new0 (TfCancel);
}

TfCancel *
tf_cancel_ref (TfCancel *cancel)
{
  return g_atomic_rc_box_acquire (cancel);
}

void
tf_cancel_unref (TfCancel *cancel)
{
  if (cancel != NULL)
    g_atomic_rc_box_release (cancel);
}

void
tf_cancel_raise (TfCancel *cancel)
{
  g_atomic_int_set (&cancel->raised, 1);
}

gboolean
tf_cancel_is_raised (const TfCancel *cancel)
{
  return cancel != NULL && g_atomic_int_get (&((TfCancel *)cancel)->raised) != 0;
}

struct _TfWorkers
{
  guint n;
  GThreadPool *threads; /* n - 1 of them; NULL when n is 1 */
};

/* One call of tf_bands_run: every thread takes the next band until none is left. */
typedef struct
{
  TfBandFunc func;
  gpointer data;
  guint n_rows, n_bands;
  int next;        /* atomic: the next band to take */
  int next_worker; /* atomic */
  const TfCancel *cancel;
  GMutex mutex;
  GCond done;
  guint running; /* helpers not yet back, guarded by mutex */
} Run;

static void
take_bands (Run *run)
{
  guint worker = (guint)g_atomic_int_add (&run->next_worker, 1);
  for (;;)
    {
      guint band = (guint)g_atomic_int_add (&run->next, 1);
      if (band >= run->n_bands || tf_cancel_is_raised (run->cancel))
        return;
      guint first = band * TF_BAND_ROWS;
      run->func (band, first, MIN (TF_BAND_ROWS, run->n_rows - first), worker, run->data);
    }
}

static void
help (gpointer data, gpointer unused)
{
  Run *run = data;
  take_bands (run);
  g_mutex_lock (&run->mutex);
  if (--run->running == 0)
    g_cond_signal (&run->done);
  g_mutex_unlock (&run->mutex);
}

TfWorkers *
tf_workers_new (guint n)
{
  TfWorkers *workers = g_atomic_rc_box_new0 (TfWorkers);
  workers->n = n > 0 ? n : MAX (1, g_get_num_processors ());
  if (workers->n > 1)
    workers->threads = g_thread_pool_new (help, NULL, (int)workers->n - 1, FALSE, NULL);
  return workers;
}

TfWorkers *
tf_workers_ref (TfWorkers *workers)
{
  return g_atomic_rc_box_acquire (workers);
}

static void
workers_clear (gpointer data)
{
  TfWorkers *workers = data;
  if (workers->threads != NULL)
    g_thread_pool_free (workers->threads, FALSE, TRUE);
}

void
tf_workers_unref (TfWorkers *workers)
{
  if (workers != NULL)
    g_atomic_rc_box_release_full (workers, workers_clear);
}

guint
tf_workers_get_n (const TfWorkers *workers)
{
  return workers != NULL ? workers->n : 1;
}

guint
tf_bands_count (guint n_rows)
{
  return (n_rows + TF_BAND_ROWS - 1) / TF_BAND_ROWS;
}

gboolean
tf_bands_run (const TfWork *work, guint n_rows, TfBandFunc func, gpointer data)
{
  g_return_val_if_fail (func != NULL, FALSE);
  TfWorkers *workers = work != NULL ? work->workers : NULL;
  Run run = { .func = func, .data = data, .n_rows = n_rows, .n_bands = tf_bands_count (n_rows),
              .cancel = work != NULL ? work->cancel : NULL };
  guint helpers = MIN (tf_workers_get_n (workers), MAX (run.n_bands, 1)) - 1;
  g_mutex_init (&run.mutex);
  g_cond_init (&run.done);
  run.running = helpers;
  for (guint k = 0; k < helpers; k++)
    g_thread_pool_push (workers->threads, &run, NULL); /* never fails: the threads are shared */
  take_bands (&run);
  g_mutex_lock (&run.mutex);
  while (run.running > 0)
    g_cond_wait (&run.done, &run.mutex);
  g_mutex_unlock (&run.mutex);
  g_mutex_clear (&run.mutex);
  g_cond_clear (&run.done);
  return !tf_cancel_is_raised (run.cancel);
}
