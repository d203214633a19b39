/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-feed.h"

enum
{
  REPORT_MS = 100
};

struct _TfFeed
{
  int refs; /* atomic: owner and thread */
  char *ledger_path;
  char **paths;
  TfCancel *cancel;
  GThread *thread;
  GMutex mutex;
  TfFeedState state; /* guarded by mutex */
  gboolean changed;  /* guarded by mutex */
  guint timer;       /* main thread */
  TfFeedFunc func;
  gpointer data;
};

static void
feed_unref (TfFeed *feed)
{
  if (!g_atomic_int_dec_and_test (&feed->refs))
    return;
  g_free (feed->ledger_path);
  g_strfreev (feed->paths);
  tf_cancel_unref (feed->cancel);
  g_mutex_clear (&feed->mutex);
  g_ptr_array_unref (feed->state.messages);
  g_free (feed->state.error);
  g_free (feed);
}

static void
count (TfFeedState *state, const TfIntakeReport *report)
{
  state->done = report->done;
  state->total = report->total;
  state->hints += report->n_hints;
  state->added += report->outcome == TF_INTAKE_ADDED;
  state->there += report->outcome == TF_INTAKE_THERE;
  state->refused += report->outcome == TF_INTAKE_REFUSED;
  state->failed += report->outcome == TF_INTAKE_FAILED;
  if (report->message != NULL && report->outcome == TF_INTAKE_FAILED)
    g_ptr_array_add (state->messages, g_strdup (report->message));
}

static void
reported (const TfIntakeReport *report, gpointer data)
{
  TfFeed *feed = data;
  g_mutex_lock (&feed->mutex);
  count (&feed->state, report);
  feed->changed = TRUE;
  g_mutex_unlock (&feed->mutex);
}

static gboolean
fill (TfFeed *feed, GError **error)
{
  g_auto (GStrv) files = tf_intake_list (feed->paths, error);
  if (files == NULL)
    return FALSE;
  g_mutex_lock (&feed->mutex);
  feed->state.listing = FALSE;
  feed->state.total = g_strv_length (files);
  feed->changed = TRUE;
  g_mutex_unlock (&feed->mutex);
  g_autoptr (TfLedger) ledger = tf_ledger_open (feed->ledger_path, error);
  if (ledger == NULL)
    return FALSE;
  TfIntakeParams params;
  tf_intake_params_init (&params);
  return tf_intake_fill (ledger, files, &params, feed->cancel, reported, feed, error);
}

static gpointer
feed_main (gpointer data)
{
  TfFeed *feed = data;
  g_autoptr (GError) error = NULL;
  gboolean good = fill (feed, &error);
  g_mutex_lock (&feed->mutex);
  feed->state.cancelled = tf_cancel_is_raised (feed->cancel);
  if (!good && !feed->state.cancelled && error != NULL)
    feed->state.error = g_strdup (error->message);
  feed->state.finished = TRUE;
  feed->changed = TRUE;
  g_mutex_unlock (&feed->mutex);
  feed_unref (feed);
  return NULL;
}

static TfFeedState
copy_state (TfFeed *feed)
{
  TfFeedState copy = feed->state;
  copy.messages
      = g_ptr_array_copy (feed->state.messages, (GCopyFunc)(void (*) (void))g_strdup, NULL);
  g_ptr_array_set_free_func (copy.messages, g_free);
  copy.error = g_strdup (feed->state.error);
  return copy;
}

static gboolean
tick (gpointer data)
{
  TfFeed *feed = data;
  g_mutex_lock (&feed->mutex);
  gboolean changed = feed->changed;
  feed->changed = FALSE;
  TfFeedState state = changed ? copy_state (feed) : (TfFeedState){ 0 };
  g_mutex_unlock (&feed->mutex);
  if (!changed)
    return G_SOURCE_CONTINUE;
  gboolean finished = state.finished;
  if (finished)
    feed->timer = 0;
  feed->func (&state, feed->data); /* may free the feed when finished */
  g_ptr_array_unref (state.messages);
  g_free (state.error);
  return finished ? G_SOURCE_REMOVE : G_SOURCE_CONTINUE;
}

TfFeed *
tf_feed_new (const char *ledger_path, char *const *paths, TfFeedFunc func, gpointer data)
{
  g_return_val_if_fail (ledger_path != NULL && paths != NULL && func != NULL, NULL);
  TfFeed *feed = g_new0 (TfFeed, 1);
  feed->refs = 2;
  feed->ledger_path = g_strdup (ledger_path);
  feed->paths = g_strdupv ((char **)paths);
  feed->cancel = tf_cancel_new ();
  feed->state.listing = TRUE;
  feed->state.messages = g_ptr_array_new_with_free_func (g_free);
  feed->func = func;
  feed->data = data;
  g_mutex_init (&feed->mutex);
  feed->timer = g_timeout_add (REPORT_MS, tick, feed);
  feed->thread = g_thread_new ("tf-feed", feed_main, feed);
  return feed;
}

void
tf_feed_cancel (TfFeed *feed)
{
  g_return_if_fail (feed != NULL);
  tf_cancel_raise (feed->cancel);
}

void
tf_feed_free (TfFeed *feed)
{
  if (feed == NULL)
    return;
  tf_cancel_raise (feed->cancel);
  g_clear_handle_id (&feed->timer, g_source_remove);
  g_thread_join (feed->thread);
  feed_unref (feed);
}
