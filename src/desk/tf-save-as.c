/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-save-as.h"

#include <glib/gi18n-lib.h>

#include "tf-preferences.h"
#include "tf-session-private.h"

static const char folder_key[] = "save-folder";

enum
{
  LOOK_MS = 100,
  QUIET_US = 400 * 1000 /* what is done by then shows no bar */
};

struct _TfSaving
{
  TfSession *session; /* NULL once that is closed */
  char *path, *name;
  char *words; /* NULL: not for long yet */
  TfSaveFunc func;
  gpointer job;
  GDestroyNotify free_job;
  TfCancel *cancel;
  gint64 begun;
  guint timer;
  gint done, total; /* atomic */
};

/* -- where to -------------------------------------------------------------------------------- */

typedef struct
{
  char *what;
  TfSaveChosen chosen;
} Asked;

static void
asked_free (gpointer data, GClosure *closure)
{
  Asked *asked = data;
  g_free (asked->what);
  g_free (asked);
}

static void
answered (GtkNativeDialog *dialog, int response, gpointer data)
{
  const Asked *asked = data;
  TfWindow *window = TF_WINDOW (gtk_native_dialog_get_transient_for (dialog));
  g_autoptr (GFile) file = gtk_file_chooser_get_file (GTK_FILE_CHOOSER (dialog));
  g_autofree char *path = file != NULL ? g_file_get_path (file) : NULL;
  if (response == GTK_RESPONSE_ACCEPT && path != NULL)
    {
      g_autofree char *folder = g_path_get_dirname (path);
      tf_preferences_set (folder_key, folder);
      asked->chosen (window, asked->what, path);
    }
  else if (response == GTK_RESPONSE_ACCEPT)
    tf_window_say (window, _ ("That place is not on this computer: nothing was saved."));
  g_object_unref (dialog);
}

/* Where the last file was saved, while that is there. */
static void
begin_where_saved_last (GtkFileChooser *chooser)
{
  g_autofree char *path = tf_preferences_dup (folder_key);
  g_autoptr (GFile) folder = path != NULL ? g_file_new_for_path (path) : NULL;
  if (folder != NULL && g_file_test (path, G_FILE_TEST_IS_DIR))
    gtk_file_chooser_set_current_folder (chooser, folder, NULL);
}

void
tf_save_as_ask (TfWindow *window, const char *title, const char *name, const char *what,
                TfSaveChosen chosen)
{
  g_return_if_fail (TF_IS_WINDOW (window) && chosen != NULL);
  GtkFileChooserNative *chooser
      = gtk_file_chooser_native_new (title, GTK_WINDOW (window), GTK_FILE_CHOOSER_ACTION_SAVE,
                                     _ ("_Save"), _ ("_Cancel"));
  Asked *asked = g_new (Asked, 1);
  *asked = (Asked){ g_strdup (what), chosen };
  gtk_native_dialog_set_modal (GTK_NATIVE_DIALOG (chooser), TRUE);
  begin_where_saved_last (GTK_FILE_CHOOSER (chooser));
  gtk_file_chooser_set_current_name (GTK_FILE_CHOOSER (chooser), name);
  g_signal_connect_data (chooser, "response", G_CALLBACK (answered), asked, asked_free, 0);
  gtk_native_dialog_show (GTK_NATIVE_DIALOG (chooser));
}

/* -- in the thread --------------------------------------------------------------------------- */

void
tf_saving_tell (TfSaving *saving, guint done, guint total)
{
  g_atomic_int_set (&saving->done, (gint)done);
  g_atomic_int_set (&saving->total, (gint)total);
}

gboolean
tf_saving_is_stopped (TfSaving *saving)
{
  return tf_cancel_is_raised (saving->cancel);
}

TfCancel *
tf_saving_get_cancel (TfSaving *saving)
{
  return saving->cancel;
}

static void
save_in_thread (GTask *task, gpointer source, gpointer data, GCancellable *cancellable)
{
  TfSaving *saving = data;
  GError *error = NULL;
  char *said = saving->func (saving, saving->job, saving->path, &error);
  if (said != NULL)
    g_task_return_pointer (task, said, g_free);
  else
    g_task_return_error (task, error);
}

/* -- in the main thread ---------------------------------------------------------------------- */

static void
saving_free (TfSaving *saving)
{
  g_clear_handle_id (&saving->timer, g_source_remove);
  saving->free_job (saving->job);
  tf_cancel_unref (saving->cancel);
  g_free (saving->path);
  g_free (saving->name);
  g_free (saving->words);
  g_free (saving);
}

static double
share_of (TfSaving *saving)
{
  int total = g_atomic_int_get (&saving->total);
  return total > 0 ? (double)g_atomic_int_get (&saving->done) / total : -1;
}

static gboolean
look (gpointer data)
{
  TfSaving *saving = data;
  gint64 taken = g_get_monotonic_time () - saving->begun;
  int done = g_atomic_int_get (&saving->done), total = g_atomic_int_get (&saving->total);
  if (saving->session == NULL || taken < QUIET_US)
    return G_SOURCE_CONTINUE;
  g_free (saving->words);
  saving->words
      = tf_saving_is_stopped (saving) ? g_strdup_printf (_ ("%s: stopping…"), saving->name)
        : total > 0 ? g_strdup_printf (_ ("Saving %s: %d of %d"), saving->name, done, total)
                    : g_strdup_printf (_ ("Saving %s: %.0f s"), saving->name, (double)taken / 1e6);
  tf_session_emit (saving->session, TF_SIGNAL_STATUS);
  return G_SOURCE_CONTINUE;
}

static void
saved (GObject *source, GAsyncResult *result, gpointer data)
{
  TfSaving *saving = data;
  g_autoptr (GError) error = NULL;
  g_autofree char *said = g_task_propagate_pointer (G_TASK (result), &error);
  TfSession *session = saving->session;
  if (session != NULL)
    {
      session->saving = NULL;
      tf_session_emit (session, TF_SIGNAL_STATUS);
      tf_session_say (session, said != NULL ? said : error->message);
    }
  saving_free (saving);
}

const char *
tf_save_as_get_words (TfSession *session, double *share)
{
  *share = session->saving != NULL ? share_of (session->saving) : -1;
  return session->saving != NULL ? session->saving->words : NULL;
}

gboolean
tf_save_as_is_busy (TfSession *session)
{
  return session->saving != NULL;
}

void
tf_save_as_stop (TfSession *session)
{
  g_return_if_fail (TF_IS_SESSION (session));
  if (session->saving != NULL)
    tf_cancel_raise (session->saving->cancel);
}

void
tf_save_as_close (TfSession *session)
{
  if (session->saving == NULL)
    return;
  tf_save_as_stop (session);
  session->saving->session = NULL;
  session->saving = NULL;
}

void
tf_save_as (TfSession *session, const char *path, TfSaveFunc func, gpointer job,
            GDestroyNotify free_job)
{
  g_return_if_fail (TF_IS_SESSION (session) && path != NULL && func != NULL);
  if (session->saving != NULL)
    {
      tf_session_say (session, _ ("Another file is being saved: wait for it, or stop it."));
      free_job (job);
      return;
    }
  TfSaving *saving = g_new0 (TfSaving, 1);
  saving->session = session;
  saving->path = g_strdup (path);
  saving->name = g_path_get_basename (path);
  saving->func = func;
  saving->job = job;
  saving->free_job = free_job;
  saving->cancel = tf_cancel_new ();
  saving->begun = g_get_monotonic_time ();
  saving->timer = g_timeout_add (LOOK_MS, look, saving);
  session->saving = saving;
  g_autoptr (GTask) task = g_task_new (NULL, NULL, saved, saving);
  g_task_set_task_data (task, saving, NULL);
  g_task_run_in_thread (task, save_in_thread);
}

static void
cancel_saving (GSimpleAction *action, GVariant *value, gpointer window)
{
  tf_save_as_stop (tf_window_get_session (window));
}

void
tf_save_as_add_actions (TfWindow *window)
{
  static const GActionEntry entries[] = { { "cancel-saving", cancel_saving, NULL, NULL, NULL } };
  g_action_map_add_action_entries (G_ACTION_MAP (window), entries, G_N_ELEMENTS (entries), window);
}
