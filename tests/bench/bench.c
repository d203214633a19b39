/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* The jobs of tests/bench/run that run in one warm process, one at a time as they are asked for:
 *   bench make FILE SIZE      a simulated frame, SIZE pixels a side, 32-bit integers, RICE_1, a row a tile
 *   bench serve FILE THREADS  reads names of jobs from standard input, a line each; answers each with a line of JSON:
 *                             milliseconds, minor page faults, and what was counted
 * Nothing is judged here. */

#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/resource.h>

#include "bench-bare.h"
#include "bench-frame.h"
#include "tf-geometry.h"
#include "tf-hint.h"
#include "tf-picture.h"

enum
{
  BOX = 400,                         /* pixels a side of the region that is dragged */
  VIEW_WIDTH = 940, VIEW_HEIGHT = 660, /* of the plate in a window of 1280 x 720 */
};

typedef struct
{
  const char *path;
  TfWork work;
  TfFrame *frame;
  TfOutline *outline; /* a circle as large as the box */
  TfMask *mask;
  TfMeasureParams params;
  TfHintParams hints;
  Bare *bare;
  guint32 *picture;
} Bench;

typedef guint (*JobFunc) (Bench *bench); /* returns what it counted; 0: it failed */

static guint
do_bare (Bench *bench)
{
  return bench_bare_read (bench->bare);
}

static guint
do_open (Bench *bench)
{
  guint rings = 0;
  g_autoptr (TfFrame) frame = tf_frame_open (bench->path, NULL, &bench->work, NULL);
  if (frame != NULL)
    tf_frame_get_noise (frame, &rings);
  return rings;
}

static guint
do_mask (Bench *bench)
{
  g_autoptr (TfMask) mask = tf_mask_new (bench->frame, bench->outline, bench->params.mu_min, 0);
  return tf_mask_get_n (mask);
}

static guint
do_drag (Bench *bench)
{
  g_auto (TfMeasure) m = { 0 };
  tf_measure_masked (&m, bench->frame, bench->mask, NULL, &bench->params, NULL);
  return m.positive.pixels + m.negative.pixels;
}

static guint
do_region (Bench *bench)
{
  g_auto (TfMeasure) m = { 0 };
  tf_measure_region (&m, bench->frame, bench->outline, &bench->params, NULL);
  return m.positive.pixels + m.negative.pixels;
}

static guint
do_picture (Bench *bench)
{
  TfView view = { .look = TF_LOOK_DISK, .width = VIEW_WIDTH, .height = VIEW_HEIGHT };
  TfPaint paint = { .range_gauss = 200, .palette = TF_PALETTE_GREY, .ground = 0xff202020u };
  tf_view_fit (&view, tf_frame_get_geometry (bench->frame), TRUE);
  return tf_picture_render (bench->frame, &view, &paint, bench->picture, VIEW_WIDTH, NULL) ? VIEW_WIDTH * VIEW_HEIGHT : 0;
}

static guint
do_hints (Bench *bench)
{
  TfMeasureParams measure;
  tf_measure_params_init (&measure);
  g_autoptr (GPtrArray) hints = tf_hints_find (bench->frame, &bench->hints, &measure, &bench->work, NULL);
  return hints != NULL ? hints->len : 0;
}

static const struct
{
  const char *name;
  JobFunc func;
} jobs[] = {
  { "bare", do_bare }, { "open", do_open }, { "mask", do_mask },   { "drag", do_drag },
  { "region", do_region }, { "picture", do_picture }, { "hints", do_hints },
};

static double
spent (const struct rusage *used)
{
  return 1000.0 * (double)(used->ru_utime.tv_sec + used->ru_stime.tv_sec)
         + 0.001 * (double)(used->ru_utime.tv_usec + used->ru_stime.tv_usec);
}

static void
run_job (Bench *bench, const char *name)
{
  struct rusage before, after;
  for (guint k = 0; k < G_N_ELEMENTS (jobs); k++)
    if (strcmp (jobs[k].name, name) == 0)
      {
        getrusage (RUSAGE_SELF, &before);
        gint64 begun = g_get_monotonic_time ();
        guint n = jobs[k].func (bench);
        double ms = (double)(g_get_monotonic_time () - begun) / 1000;
        getrusage (RUSAGE_SELF, &after);
        printf ("{\"job\":\"%s\",\"ms\":%.3f,\"cpu_ms\":%.3f,\"faults\":%ld,\"n\":%u,\"peak_mb\":%.1f}\n", name, ms, spent (&after) - spent (&before),
                after.ru_minflt - before.ru_minflt, n, (double)after.ru_maxrss / 1024);
        fflush (stdout);
        return;
      }
  printf ("{\"job\":\"%s\",\"n\":0}\n", name);
  fflush (stdout);
}

/* A circle about the strongest region nearer the middle of the disk than mu 0.8, grown until its box holds BOX x BOX pixels. */
static TfOutline *
make_outline (const Bench *bench)
{
  const TfGeometry *g = tf_frame_get_geometry (bench->frame);
  g_autoptr (GPtrArray) hints = tf_hints_find (bench->frame, &bench->hints, &bench->params, &bench->work, NULL);
  double lon = tf_geometry_central_carrington (g), lat = g->observer.b0_deg, radius = 0.1;
  for (guint k = hints->len; k-- > 0;)
    {
      const TfMeasure *m = &((const TfHint *)hints->pdata[k])->measure;
      if (m->mu > 0.8)
        {
          lon = m->carrington_lon_deg;
          lat = m->lat_deg;
        }
    }
  for (;; radius *= 1.02)
    {
      guint x, y, w, h;
      TfOutline *outline = tf_outline_new_cap (tf_frame_get_info (bench->frame)->time, lon, lat, radius, 72);
      g_autoptr (TfMask) mask = tf_mask_new (bench->frame, outline, bench->params.mu_min, 0);
      tf_mask_get_box (mask, &x, &y, &w, &h);
      if (w * h >= BOX * BOX || w >= g->width)
        return outline;
      tf_outline_unref (outline);
    }
}

static int
serve (const char *path, guint threads)
{
  char line[64];
  g_autoptr (GError) error = NULL;
  Bench bench = { .path = path };
  bench.work.pool = tf_pool_new ();
  bench.work.workers = tf_workers_new (threads);
  bench.frame = tf_frame_open (path, NULL, &bench.work, &error);
  bench.bare = bench_bare_new (path, threads);
  if (bench.frame == NULL || bench.bare == NULL)
    {
      fprintf (stderr, "%s\n", error != NULL ? error->message : "CFITSIO does not read the frame");
      return 1;
    }
  tf_measure_params_init (&bench.params);
  bench.params.outline_term = FALSE;
  tf_hint_params_init (&bench.hints);
  bench.outline = make_outline (&bench);
  bench.mask = tf_mask_new (bench.frame, bench.outline, bench.params.mu_min, 0);
  bench.picture = g_new (guint32, VIEW_WIDTH * VIEW_HEIGHT);
  while (fgets (line, sizeof line, stdin) != NULL)
    run_job (&bench, g_strchomp (line));
  g_free (bench.picture);
  bench_bare_free (bench.bare);
  tf_mask_free (bench.mask);
  tf_outline_unref (bench.outline);
  tf_frame_unref (bench.frame);
  tf_workers_unref (bench.work.workers);
  tf_pool_unref (bench.work.pool);
  return 0;
}

int
main (int argc, char **argv)
{
  if (argc == 4 && strcmp (argv[1], "make") == 0)
    return bench_frame_make (argv[2], (guint)atoi (argv[3]));
  if (argc == 4 && strcmp (argv[1], "serve") == 0)
    return serve (argv[2], (guint)atoi (argv[3]));
  fprintf (stderr, "bench make FILE SIZE | bench serve FILE THREADS\n");
  return 2;
}
