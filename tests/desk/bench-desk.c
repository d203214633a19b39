/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* bench-desk FRAME [FRAME BEFORE]: processor time of the main thread a frame of animation, from the window's own
 * frame clock, while a large frame with its hints is panned and zoomed, a large outline is brushed, and a picture is
 * saved. With the frame before: its marks lie over the plate as 40 ghosts, and inversion lines are on. By hand; no test.
 */

#include <adwaita.h>
#include <glib/gstdio.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

#include "tf-desk-resources.h"
#include "tf-window.h"

enum
{
  N_FRAMES = 150,
  N_GHOSTS = 40
};

typedef enum
{
  DO_PAN,
  DO_ZOOM,
  DO_BRUSH
} What;

typedef struct
{
  TfWindow *window;
  What what;
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

/* As quick as a hand is: three places a frame of animation, zigzag over the whole disk. */
static void
brush_on (TfSession *session, guint n)
{
  const TfGeometry *geometry = tf_frame_get_geometry (tf_session_get_frame (session));
  double middle = tf_geometry_central_carrington (geometry);
  for (guint k = 0; k < 3; k++)
    {
      double at = (3.0 * n + k) / (3.0 * N_FRAMES), row = fmod (8 * at, 1);
      double west = -55 + 110 * (fmod (8 * at, 2) < 1 ? row : 1 - row);
      tf_session_brush_to (session, middle + west, -40 + 80 * at);
    }
  tf_session_measure_line (session);
}

static gboolean
move (GtkWidget *widget, GdkFrameClock *clock, gpointer data)
{
  Run *run = data;
  TfSession *session = tf_window_get_session (run->window);
  double way = run->n % 50 < 25 ? 1 : -1;
  if (run->what == DO_ZOOM)
    tf_session_zoom (session, way > 0 ? 1.06 : 1 / 1.06, 300, 250);
  else if (run->what == DO_PAN)
    tf_session_pan (session, 7 * way, 3 * way);
  else
    brush_on (session, run->n);
  return G_SOURCE_CONTINUE;
}

static int
by_value (gconstpointer a, gconstpointer b)
{
  double x = *(const double *)a, y = *(const double *)b;
  return (x > y) - (x < y);
}

static void
measure (TfWindow *window, const char *name, What what)
{
  Run run = { .window = window, .what = what };
  GdkFrameClock *clock = gtk_widget_get_frame_clock (GTK_WIDGET (window));
  g_signal_connect (clock, "before-paint", G_CALLBACK (before), &run);
  g_signal_connect (clock, "after-paint", G_CALLBACK (after), &run);
  guint tick = gtk_widget_add_tick_callback (GTK_WIDGET (window), move, &run, NULL);
  while (run.n < N_FRAMES)
    g_main_context_iteration (NULL, TRUE);
  gtk_widget_remove_tick_callback (GTK_WIDGET (window), tick);
  g_signal_handlers_disconnect_by_data (clock, &run);
  qsort (run.ms, N_FRAMES, sizeof *run.ms, by_value);
  printf ("%-20s median %5.1f ms  p95 %5.1f ms  most %5.1f ms\n", name, run.ms[N_FRAMES / 2],
          run.ms[N_FRAMES * 95 / 100], run.ms[N_FRAMES - 1]);
}

static void
turn (double seconds)
{
  gint64 end = g_get_monotonic_time () + (gint64)(seconds * 1e6);
  while (g_get_monotonic_time () < end)
    if (!g_main_context_iteration (NULL, FALSE))
      g_usleep (2000);
}

static void
wait_for_work (TfSession *session)
{
  do
    turn (0.2);
  while (tf_session_get_frame (session) == NULL || tf_session_is_loading (session)
         || tf_session_get_progress (session, NULL) != NULL || tf_session_get_pending (session) > 0);
}

/* On the frame before this one: marks all over the disk. */
static void
mark_before (TfSession *session)
{
  tf_session_step_frame (session, -1);
  wait_for_work (session);
  TfTime time = tf_frame_get_info (tf_session_get_frame (session))->time;
  double middle = tf_geometry_central_carrington (tf_frame_get_geometry (tf_session_get_frame (session)));
  for (guint k = 0; k < N_GHOSTS; k++)
    {
      g_autoptr (TfOutline) cap
          = tf_outline_new_cap (time, middle - 45 + 90.0 * (k % 8) / 7, -30 + 60.0 * (k / 8) / 4, 3, 60);
      tf_session_set_draft (session, cap);
      tf_session_set_replaces (session, FALSE);
      tf_session_keep (session);
      wait_for_work (session);
    }
  tf_session_step_frame (session, 1);
  wait_for_work (session);
  tf_session_set_overlay (session, TF_OVERLAY_GHOSTS, TRUE);
  tf_session_set_overlay (session, TF_OVERLAY_INVERSION, TRUE);
  do
    turn (0.5);
  while (tf_session_is_tracing (session));
  const GPtrArray *ghosts = tf_session_get_ghosts (session);
  g_autoptr (GArray) lines = tf_session_dup_lines (session);
  printf ("%u ghosts, %u lines\n", ghosts != NULL ? ghosts->len : 0, lines->len);
}

/* A brush as wide as a region over the whole disk, beginning with the strongest hint. */
static void
brush (TfWindow *window)
{
  TfSession *session = tf_window_get_session (window);
  double middle = tf_geometry_central_carrington (tf_frame_get_geometry (tf_session_get_frame (session)));
  tf_session_choose_region (session, NULL);
  tf_session_step_hint (session, 1);
  turn (0.5);
  tf_session_set_tool (session, TF_TOOL_BRUSH_IN);
  tf_session_set_brush (session, 4);
  tf_session_brush_begin (session, middle - 55, -40);
  measure (window, "brush over all", DO_BRUSH);
  tf_session_brush_end (session);
  guint n = 0;
  tf_outline_get_ring (tf_session_get_draft (session), 0, FALSE, &n);
  printf ("the outline has %u rings, the first %u corners\n", tf_outline_get_n_rings (tf_session_get_draft (session)), n);
  tf_session_discard_draft (session);
}

int
main (int argc, char **argv)
{
  g_autofree char *folder = g_dir_make_tmp ("tiltfield-bench-XXXXXX", NULL);
  if (argc < 2 || argc > 3 || folder == NULL)
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
  char *frames[] = { argv[1], argc > 2 ? argv[2] : NULL, NULL };
  gtk_window_set_default_size (GTK_WINDOW (window), 1280, 720);
  gtk_window_present (GTK_WINDOW (window));
  tf_session_open_ledger (session, path, 'T');
  tf_session_add_frames (session, frames);
  tf_session_set_person (session, "north desk");
  wait_for_work (session);
  turn (2);
  printf ("%u regions\n", g_list_model_get_n_items (tf_session_get_regions (session)));
  if (argc > 2)
    mark_before (session);
  measure (window, "pan, fit", DO_PAN);
  measure (window, "zoom, fit", DO_ZOOM);
  tf_session_fit (session);
  brush (window);
  tf_session_zoom (session, 6, 400, 250);
  turn (0.5);
  measure (window, "pan, close", DO_PAN);
  measure (window, "zoom, close", DO_ZOOM);
  gtk_window_destroy (GTK_WINDOW (window));
  turn (0.2);
  return 0;
}
