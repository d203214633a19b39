/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* bench-desk FRAME: processor time of the main thread a frame of animation, from the window's own
 * frame clock, while a large frame with its hints is panned and zoomed. By hand; no test.
 */

#include <adwaita.h>
#include <glib/gstdio.h>
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

#include "tf-desk-resources.h"
#include "tf-window.h"

enum
{
  N_FRAMES = 150
};

typedef struct
{
  TfWindow *window;
  gboolean zoom;
  guint n;
  double start;
  double ms[N_FRAMES];
} Run;

static double
thread_ms (void)
{
  struct timespec t;
  clock_gettime (CLOCK_THREAD_CPUTIME_ID, &t);
  return (double)t.tv_sec * 1e3 + (double)t.tv_nsec / 1e6;
}

static void
before (GdkFrameClock *clock, Run *run)
{
  run->start = thread_ms ();
}

static void
after (GdkFrameClock *clock, Run *run)
{
  if (run->n < N_FRAMES)
    run->ms[run->n++] = thread_ms () - run->start;
}

static gboolean
move (GtkWidget *widget, GdkFrameClock *clock, gpointer data)
{
  Run *run = data;
  TfSession *session = tf_window_get_session (run->window);
  double way = run->n % 50 < 25 ? 1 : -1;
  if (run->zoom)
    tf_session_zoom (session, way > 0 ? 1.06 : 1 / 1.06, 300, 250);
  else
    tf_session_pan (session, 7 * way, 3 * way);
  return G_SOURCE_CONTINUE;
}

static int
by_value (gconstpointer a, gconstpointer b)
{
  double x = *(const double *)a, y = *(const double *)b;
  return (x > y) - (x < y);
}

static void
measure (TfWindow *window, const char *name, gboolean zoom)
{
  Run run = { .window = window, .zoom = zoom };
  GdkFrameClock *clock = gtk_widget_get_frame_clock (GTK_WIDGET (window));
  g_signal_connect (clock, "before-paint", G_CALLBACK (before), &run);
  g_signal_connect (clock, "after-paint", G_CALLBACK (after), &run);
  guint tick = gtk_widget_add_tick_callback (GTK_WIDGET (window), move, &run, NULL);
  while (run.n < N_FRAMES)
    g_main_context_iteration (NULL, TRUE);
  gtk_widget_remove_tick_callback (GTK_WIDGET (window), tick);
  g_signal_handlers_disconnect_by_data (clock, &run);
  qsort (run.ms, N_FRAMES, sizeof *run.ms, by_value);
  printf ("%-12s median %5.1f ms  p95 %5.1f ms\n", name, run.ms[N_FRAMES / 2],
          run.ms[N_FRAMES * 95 / 100]);
}

static void
turn (double seconds)
{
  gint64 end = g_get_monotonic_time () + (gint64)(seconds * 1e6);
  while (g_get_monotonic_time () < end)
    if (!g_main_context_iteration (NULL, FALSE))
      g_usleep (2000);
}

int
main (int argc, char **argv)
{
  g_autofree char *folder = g_dir_make_tmp ("tiltfield-bench-XXXXXX", NULL);
  if (argc != 2 || folder == NULL)
    return 2;
  g_setenv ("XDG_STATE_HOME", folder, TRUE);
  g_setenv ("XDG_CONFIG_HOME", folder, TRUE);
  g_setenv ("XDG_CACHE_HOME", folder, TRUE);
  g_resources_register (tf_desk_get_resource ());
  adw_init ();
  g_autoptr (AdwApplication) application
      = adw_application_new ("io.tiltfield.Bench", G_APPLICATION_NON_UNIQUE);
  g_application_register (G_APPLICATION (application), NULL, NULL);
  TfWindow *window = tf_window_new (GTK_APPLICATION (application));
  TfSession *session = tf_window_get_session (window);
  g_autofree char *path = g_build_filename (folder, "bench.ledger", NULL);
  char *frames[] = { argv[1], NULL };
  gtk_window_set_default_size (GTK_WINDOW (window), 1280, 720);
  gtk_window_present (GTK_WINDOW (window));
  tf_session_open_ledger (session, path, 'T');
  tf_session_add_frames (session, frames);
  do
    turn (0.2);
  while (tf_session_get_frame (session) == NULL || tf_session_get_progress (session, NULL) != NULL);
  turn (2);
  printf ("%u regions\n", g_list_model_get_n_items (tf_session_get_regions (session)));
  measure (window, "pan, fit", FALSE);
  measure (window, "zoom, fit", TRUE);
  tf_session_zoom (session, 6, 400, 250);
  turn (0.5);
  measure (window, "pan, close", FALSE);
  measure (window, "zoom, close", TRUE);
  gtk_window_destroy (GTK_WINDOW (window));
  turn (0.2);
  return 0;
}
