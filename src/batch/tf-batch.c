/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-batch.h"

#include <math.h>
#include <signal.h>
#include <stdio.h>
#include <string.h>
#include <unistd.h>
#include <glib-unix.h>
#include <glib/gi18n-lib.h>

#include "tf-json.h"
#include "tf-number.h"

static const TfVerb *
find_verb (const char *name)
{
  for (const TfVerb *v = tf_verbs; v->name != NULL; v++)
    if (strcmp (v->name, name) == 0)
      return v;
  return NULL;
}

GOptionContext *
tf_batch_context (const char *verb)
{
  const TfVerb *v = find_verb (verb);
  g_return_val_if_fail (v != NULL, NULL);
  GOptionContext *context = g_option_context_new (v->words);
  g_autofree char *about = g_strdup_printf (_ ("Example:\n  %s"), v->example);
  g_option_context_set_summary (context, _ (v->summary));
  g_option_context_set_description (context, about);
  g_option_context_set_translation_domain (context, GETTEXT_PACKAGE);
  return context;
}

void
tf_batch_add_frame_words (GOptionContext *context, TfFrameWords *words)
{
  words->spec = (TfFrameSpec){ 0, 0 };
  const GOptionEntry entries[] = {
    { "hdu", 0, 0, G_OPTION_ARG_INT, &words->spec.hdu, N_ ("HDU of the file, 1 = primary (default: the first picture)"), "N" },
    { "plane", 0, 0, G_OPTION_ARG_INT, &words->spec.plane, N_ ("plane of a cube, from 1"), "N" },
    { NULL },
  };
  g_option_context_add_main_entries (context, entries, GETTEXT_PACKAGE);
}

gboolean
tf_batch_parse (GOptionContext *context, int *argc, char ***argv)
{
  g_autoptr (GOptionContext) own = context;
  g_autoptr (GError) error = NULL;
  if (g_option_context_parse (own, argc, argv, &error))
    return TRUE;
  if (g_str_has_suffix (error->message, "."))
    error->message[strlen (error->message) - 1] = '\0';
  g_autofree char *line = g_strdup_printf (_ ("%s: %s. See %s --help."), g_get_prgname (), error->message, g_get_prgname ());
  tf_batch_say (line);
  return FALSE;
}

int
tf_batch_usage (const char *verb, const char *what)
{
  g_autofree char *line = g_strdup_printf (_ ("tiltfield-run %s: %s See tiltfield-run %s --help."), verb, what, verb);
  tf_batch_say (line);
  return TF_EXIT_CALL;
}

void
tf_batch_print (const char *text)
{
  fputs (text, stdout);
}

void
tf_batch_say (const char *text)
{
  fprintf (stderr, "%s\n", text);
}

void
tf_batch_say_error (const GError *error)
{
  tf_batch_say (error != NULL ? error->message : _ ("Something failed without saying why; please report this."));
}

void
tf_batch_print_json (JsonBuilder *builder)
{
  g_autofree char *text = tf_json_dup_text (builder, TRUE);
  printf ("%s\n", text);
}

void
tf_batch_build_texts (JsonBuilder *builder, const char *key, const GPtrArray *texts)
{
  json_builder_set_member_name (builder, key);
  json_builder_begin_array (builder);
  for (guint k = 0; k < texts->len; k++)
    json_builder_add_string_value (builder, g_ptr_array_index (texts, k));
  json_builder_end_array (builder);
}

typedef struct
{
  TfWork work; /* first: callers hold a pointer to it */
  guint source;
  GThread *thread;
  GMainLoop *loop;
} BatchWork;

static gboolean
on_interrupt (gpointer data)
{
  tf_cancel_raise (data);
  tf_batch_say (_ ("Stopping after what is in hand; what is done stays, start again to go on."));
  signal (SIGINT, SIG_DFL); /* a second Ctrl-C ends at once */
  return G_SOURCE_REMOVE;
}

/* Signals are watched in a thread of their own, since the work runs in the main one. */
static gpointer
watch_signals (gpointer data)
{
  BatchWork *own = data;
  GMainContext *context = g_main_loop_get_context (own->loop);
  g_main_context_push_thread_default (context);
  g_main_loop_run (own->loop);
  g_main_context_pop_thread_default (context);
  return NULL;
}

TfWork *
tf_batch_work_new (guint threads)
{
  BatchWork *own = g_new0 (BatchWork, 1);
  own->work.pool = tf_pool_new ();
  own->work.workers = tf_workers_new (threads);
  own->work.cancel = tf_cancel_new ();
  g_autoptr (GMainContext) context = g_main_context_new ();
  own->loop = g_main_loop_new (context, FALSE);
  g_autoptr (GSource) source = g_unix_signal_source_new (SIGINT);
  g_source_set_callback (source, on_interrupt, own->work.cancel, NULL);
  g_source_attach (source, context);
  own->thread = g_thread_new ("signals", watch_signals, own);
  return &own->work;
}

static gboolean
quit_loop (gpointer loop)
{
  g_main_loop_quit (loop);
  return G_SOURCE_REMOVE;
}

void
tf_batch_work_free (TfWork *work)
{
  if (work == NULL)
    return;
  BatchWork *own = (BatchWork *)work;
  g_autoptr (GSource) source = g_idle_source_new ();
  g_source_set_callback (source, quit_loop, own->loop, NULL);
  g_source_attach (source, g_main_loop_get_context (own->loop));
  g_thread_join (own->thread);
  g_main_loop_unref (own->loop);
  tf_workers_unref (work->workers);
  tf_pool_unref (work->pool);
  tf_cancel_unref (work->cancel);
  g_free (own);
}

gboolean
tf_batch_read_numbers (const char *text, double *numbers, guint n)
{
  g_auto (GStrv) parts = g_strsplit (text, ",", -1);
  if (g_strv_length (parts) != n)
    return FALSE;
  for (guint k = 0; k < n; k++)
    if (!tf_number_read (parts[k], &numbers[k]))
      return FALSE;
  return TRUE;
}

void
tf_progress_begin (TfProgress *progress)
{
  progress->begun = progress->shown = g_get_monotonic_time ();
  progress->terminal = isatty (STDERR_FILENO);
}

void
tf_progress_step (TfProgress *progress, guint done, guint total)
{
  gint64 now = g_get_monotonic_time ();
  gint64 pause = progress->terminal ? G_USEC_PER_SEC / 5 : 60 * (gint64)G_USEC_PER_SEC;
  if (now - progress->shown < pause || done == 0)
    return;
  progress->shown = now;
  double seconds = (double)(now - progress->begun) / G_USEC_PER_SEC;
  double rate = done / seconds;
  g_autofree char *line
      = g_strdup_printf (_ ("%u of %u frames, %.1f a second, about %.0f s left"), done, total, rate, (total - done) / rate);
  fprintf (stderr, progress->terminal ? "\r%s\033[K" : "%s\n", line);
  fflush (stderr);
}

void
tf_progress_end (TfProgress *progress)
{
  if (progress->terminal)
    fprintf (stderr, "\r\033[K");
}
