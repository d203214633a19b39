/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* bench-ledger LEDGER ROUNDS [study]: what a window asks of a large ledger; one line of JSON, least
 * milliseconds of the rounds:
 *   open    the file opened and a version asked for
 *   wings   opened, all points read, judged, and the picture of 1240 x 132 drawn
 *   begin   the tally of a sample of all points made, once
 *   move    a divide moved by half a degree: judged, shares with exact intervals, the robust slope,
 *           and what lies over the dots drawn
 *   study   opened, the default study run with all its what-ifs, without what takes draws
 *   rows    opened, all whole rows read, as an export does (once)
 * With the word study that alone, for looking at where its time goes.
 * Nothing is judged here whether it is good. */

#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <sys/resource.h>

#include "tf-study.h"
#include "tf-tally.h"
#include "tf-wings.h"

enum
{
  WIDTH = 1240,
  HEIGHT = 132
};

typedef struct
{
  const char *path;
  TfStudy *study;
  TfDivides *divides;
  TfSample *sample;
  TfTally *tally;
  TfWings wings;
  TfWingsDot *dots;
  cairo_surface_t *picture;
  guint turn;
} Bench;

static double
now_ms (void)
{
  return (double)g_get_monotonic_time () / 1000;
}

static double
do_open (Bench *bench)
{
  double begun = now_ms ();
  g_autoptr (TfLedger) ledger = tf_ledger_open (bench->path, NULL);
  if (ledger == NULL)
    exit (1);
  tf_ledger_get_version (ledger);
  return now_ms () - begun;
}

/* A made ledger's blocks are filled by who first writes to it: here, once, by a person who is new. */
static void
do_fill (Bench *bench)
{
  g_autoptr (TfLedger) ledger = tf_ledger_open (bench->path, NULL);
  if (ledger == NULL || tf_ledger_person (ledger, "bench desk", NULL) == 0)
    exit (1);
}

/* As the window does it: half of the points in a second thread. */
typedef struct
{
  const Bench *bench;
  const GArray *points;
  guint first, end;
} Part;

static gpointer
judge_part (gpointer data)
{
  const Part *part = data;
  for (guint k = part->first; k < part->end; k++)
    {
      const TfPoint *p = &g_array_index (part->points, TfPoint, k);
      TfSampleRow row;
      tf_study_point (p, &row);
      TfVerdict verdict = tf_verdict_judge (&row, part->bench->divides, &part->bench->study->verdict);
      part->bench->dots[k] = (TfWingsDot){ p->year, p->lat_deg, p->flux_mx, p->leading,
                                           (gint8)verdict.kind, p->hint, (gint64)k + 1 };
    }
  return NULL;
}

static double
do_wings (Bench *bench)
{
  double begun = now_ms ();
  g_autoptr (TfLedger) ledger = tf_ledger_open (bench->path, NULL);
  g_autoptr (GArray) points = ledger != NULL ? tf_ledger_points (ledger, NULL) : NULL;
  if (points == NULL || points->len == 0)
    exit (1);
  bench->dots = g_realloc_n (bench->dots, points->len, sizeof *bench->dots);
  Part parts[2] = { { bench, points, 0, points->len / 2 }, { bench, points, points->len / 2, points->len } };
  GThread *other = g_thread_new ("half", judge_part, &parts[1]);
  judge_part (&parts[0]);
  g_thread_join (other);
  bench->wings.dots = bench->dots;
  bench->wings.n = points->len;
  tf_wings_fit (&bench->wings, 2000);
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  cairo_t *cr = cairo_create (bench->picture);
  tf_wings_draw (cr, &bench->wings, &style, (TfArea){ 0, 0, WIDTH, HEIGHT });
  cairo_destroy (cr);
  return now_ms () - begun;
}

static double
do_begin (Bench *bench)
{
  g_autoptr (TfLedger) ledger = tf_ledger_open (bench->path, NULL);
  g_autoptr (GArray) points = tf_ledger_points (ledger, NULL);
  bench->sample = tf_sample_new ();
  for (guint k = 0; k < points->len; k++)
    {
      TfSampleRow row;
      tf_study_point (&g_array_index (points, TfPoint, k), &row);
      tf_sample_add (bench->sample, &row);
    }
  double begun = now_ms ();
  bench->tally = tf_tally_new (bench->sample, NULL, bench->divides,
                               &bench->study->verdict, &bench->study->joy);
  return now_ms () - begun;
}

static double
do_move (Bench *bench)
{
  double lat = 14 + 0.5 * (bench->turn++ % 12), begun = now_ms ();
  TfTime times[] = { tf_time_from_year (2007), tf_time_from_year (2010.4) };
  const double lats[] = { lat + 2, lat };
  TfDivides *moved = tf_divides_with (bench->divides, 24, 1, times, lats, 2);
  tf_divides_unref (bench->divides);
  bench->divides = moved;
  tf_tally_move (bench->tally, moved, 24, 1);
  g_autoptr (GArray) hale = tf_tally_hale (bench->tally, 0.95);
  TfJoyFit fit = tf_tally_joy (bench->tally);
  bench->wings.divides = moved;
  bench->wings.plain = TRUE;
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  cairo_t *cr = cairo_create (bench->picture);
  tf_wings_draw_over (cr, &bench->wings, &style, (TfArea){ 0, 0, WIDTH, HEIGHT });
  cairo_destroy (cr);
  return isfinite (fit.slope) && hale->len > 1 ? now_ms () - begun : INFINITY;
}

static double
do_study (Bench *bench)
{
  double begun = now_ms ();
  g_autoptr (TfLedger) ledger = tf_ledger_open (bench->path, NULL);
  g_autoptr (TfStudy) study = tf_study_new_default ();
  study->hale.draws = study->joy.draws = study->drift.draws = 0;
  g_autoptr (TfFindings) findings = ledger != NULL ? tf_study_run (study, ledger, NULL) : NULL;
  if (findings == NULL)
    exit (1);
  return now_ms () - begun;
}

static double
do_rows (Bench *bench)
{
  double begun = now_ms ();
  g_autoptr (TfLedger) ledger = tf_ledger_open (bench->path, NULL);
  const TfRowQuery query = { .marks = TRUE, .no_outlines = TRUE };
  g_autoptr (GPtrArray) rows = ledger != NULL ? tf_ledger_rows (ledger, &query, NULL) : NULL;
  if (rows == NULL || rows->len == 0)
    exit (1);
  return now_ms () - begun;
}

/* Processor time of all threads, ms. */
static double
cpu_ms (void)
{
  struct rusage used;
  getrusage (RUSAGE_SELF, &used);
  return 1000.0 * (double)(used.ru_utime.tv_sec + used.ru_stime.tv_sec)
         + (double)(used.ru_utime.tv_usec + used.ru_stime.tv_usec) / 1000.0;
}

static double
least (Bench *bench, double (*job) (Bench *), guint rounds)
{
  double best = INFINITY;
  for (guint k = 0; k < rounds; k++)
    best = fmin (best, job (bench));
  return best;
}

int
main (int argc, char **argv)
{
  if (argc != 3 && argc != 4)
    return 2;
  guint rounds = (guint)MAX (atoi (argv[2]), 1);
  Bench bench = { .path = argv[1], .study = tf_study_new_default () };
  do_fill (&bench);
  if (argc == 4)
    {
      printf ("%.1f\n", least (&bench, do_study, rounds));
      tf_study_free (bench.study);
      return 0;
    }
  bench.divides = tf_divides_new (&bench.study->divide);
  bench.picture = cairo_image_surface_create (CAIRO_FORMAT_ARGB32, WIDTH, HEIGHT);
  bench.wings.lat_max_deg = 45;
  bench.wings.frame_year = bench.wings.pick_from = bench.wings.pick_to = NAN;
  bench.wings.pick_low = bench.wings.pick_high = NAN;
  double open_ms = least (&bench, do_open, rounds), wings_ms = least (&bench, do_wings, rounds);
  double begin_ms = do_begin (&bench), move_ms = least (&bench, do_move, 12 + rounds);
  double cpu = cpu_ms (), study_ms = least (&bench, do_study, rounds);
  double study_cpu = (cpu_ms () - cpu) / rounds, rows_ms = do_rows (&bench);
  printf ("{\"n\": %u, \"open\": %.2f, \"wings\": %.2f, \"begin\": %.2f, \"move\": %.3f, "
          "\"study\": %.1f, \"study_cpu\": %.1f, \"rows\": %.1f}\n",
          bench.wings.n, open_ms, wings_ms, begin_ms, move_ms, study_ms, study_cpu, rows_ms);
  tf_tally_free (bench.tally);
  tf_sample_free (bench.sample);
  tf_divides_unref (bench.divides);
  tf_study_free (bench.study);
  cairo_surface_destroy (bench.picture);
  g_free (bench.dots);
  return 0;
}
