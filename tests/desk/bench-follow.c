/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* bench-follow LEDGER: how long the passage with most sightings takes to open on the Follow bench, in
 * seconds and in readings of its rows from the ledger alone; how long until all its looks have
 * pictures; and what one drawing of its charts costs. By hand; no test.
 *
 * An invented Sun of twelve days at a cadence of 96 minutes:
 *   tiltfield-run simulate frames suns --n-frames 180 --cadence-hours 1.6 --size 512 --n-regions 6
 *   tiltfield-run fill suns.ledger suns && tiltfield-run follow suns.ledger
 */

#include <gtk/gtk.h>
#include <stdio.h>
#include <time.h>

#include "tf-followed.h"
#include "tf-series-view.h"

static const int width = 900, height = 400;
enum
{
  MOST_SECONDS = 120,
  DRAWINGS = 10
};

static double
now_s (void)
{
  return (double)g_get_monotonic_time () / 1e6;
}

/* Of this thread. */
static double
processor_s (void)
{
  struct timespec t;
  clock_gettime (CLOCK_THREAD_CPUTIME_ID, &t);
  return (double)t.tv_sec + (double)t.tv_nsec / 1e9;
}

typedef gboolean (*Until) (gpointer data);

static double
turn (Until until, gpointer data)
{
  double begun = now_s ();
  while (!until (data) && now_s () - begun < MOST_SECONDS)
    g_main_context_iteration (NULL, TRUE);
  return now_s () - begun;
}

static gboolean
is_open (gpointer session)
{
  return tf_session_has_ledger (session) && tf_session_get_n_frames (session) > 0;
}

static gboolean
has_content (gpointer followed)
{
  return tf_followed_get_content (followed) != NULL;
}

static gboolean
has_pictures (gpointer followed)
{
  GListModel *looks = tf_followed_get_looks (followed);
  for (guint k = 0; k < g_list_model_get_n_items (looks); k++)
    {
      g_autoptr (TfLookItem) item = g_list_model_get_item (looks, k);
      if (tf_look_item_is_waiting (item))
        return FALSE;
    }
  return TRUE;
}

static double
read_bare (const char *path, gint64 passage)
{
  g_autoptr (TfLedger) ledger = tf_ledger_open (path, NULL);
  double begun = now_s ();
  g_autoptr (GPtrArray) rows = tf_ledger_passage_rows (ledger, passage, FALSE, TRUE, NULL);
  return rows != NULL ? now_s () - begun : 0;
}

static double
draw (TfFollowed *followed)
{
  TfSeriesChart chart = tf_followed_chart (followed);
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  cairo_surface_t *surface = cairo_image_surface_create (CAIRO_FORMAT_RGB24, width, height);
  cairo_t *cr = cairo_create (surface);
  double begun = processor_s ();
  for (int k = 0; k < DRAWINGS; k++)
    tf_series_chart_draw (cr, &chart, &style, (TfArea){ 0, 0, width, height });
  double taken = (processor_s () - begun) / DRAWINGS;
  cairo_destroy (cr);
  cairo_surface_destroy (surface);
  return taken;
}

int
main (int argc, char **argv)
{
  if (argc != 2)
    {
      fprintf (stderr, "bench-follow LEDGER\n");
      return 2;
    }
  g_autoptr (TfSession) session = tf_session_new ();
  tf_session_open_ledger (session, argv[1], 0);
  turn (is_open, session);
  g_autoptr (TfFollowed) followed = tf_followed_new (session);
  tf_followed_set_active (followed, TRUE);
  double opened = turn (has_content, followed);
  const TfPassageContent *content = tf_followed_get_content (followed);
  if (content == NULL)
    {
      fprintf (stderr, "%s\n", tf_followed_get_problem (followed));
      return 1;
    }
  guint n = content->rows->len;
  double bare = read_bare (argv[1], content->passage->id);
  double pictures = turn (has_pictures, followed);
  printf ("%u sightings: open %.3f s, %.1f readings of its rows (%.3f s); all looks %.2f s; charts "
          "%.1f ms of a processor\n",
          n, opened, opened / bare, bare, pictures, draw (followed) * 1e3);
  tf_followed_close (followed);
  tf_session_close (session);
  return 0;
}
