/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-chart.h"

#include <math.h>
#include <string.h>
#include <glib/gstdio.h>

#include "made-study.h"
#include "tf-check.h"
#include "tf-figure.h"
#include "tf-plot-private.h"

#define WIDTH 420

static const TfLawsChart *
chart_named (const char *name)
{
  for (const TfLawsChart *chart = tf_laws_chart_table; chart->name != NULL; chart++)
    if (strcmp (chart->name, name) == 0)
      return chart;
  g_assert_not_reached ();
}

static Picture
draw (const TfLawsChart *chart, const TfLawsCharts *charts, const TfChartStyle *style, TfArea *area)
{
  int height = (int)chart->height (charts, style, WIDTH);
  *area = (TfArea){ 0, 0, WIDTH, height };
  Picture picture = picture_new (WIDTH, height, style->ground);
  chart->draw (picture.cr, charts, style, *area);
  g_assert_cmpint (cairo_status (picture.cr), ==, CAIRO_STATUS_SUCCESS);
  return picture;
}

/* Leftmost and rightmost column in which a colour is found between two rows; -1: none. */
static int
last_column (const Picture *picture, TfColour colour, int top, int foot)
{
  for (int x = picture->width - 1; x >= 0; x--)
    if (picture_count_in (picture, colour, 0.1, x, top, x + 1, foot) > 0)
      return x;
  return -1;
}

/* The red ends where the share is, on the scale that the axis of the same picture has: the bars of
 * two groups have lengths in the proportion of their shares. */
static void
the_bars_are_as_long_as_the_shares (void)
{
  g_auto (MadeStudy) study = made_study_new (2000, 11);
  g_autoptr (TfLawsCharts) charts = tf_laws_charts_new (&study.facts);
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  TfArea area;
  const TfLawsChart *chart = chart_named ("hale");
  g_auto (Picture) picture = draw (chart, charts, &style, &area);
  double lengths[5], shares[5];
  int left = 0, row_height = (int)((area.height - 6.6 * 11) / 5);
  while (picture_count_in (&picture, style.breaks, 0.1, left, 0, left + 1, picture.height) == 0)
    left++;
  guint n = 0;
  for (guint k = 0; k < study.hale->len; k++)
    {
      const TfHaleRow *row = &g_array_index (study.hale, TfHaleRow, k);
      if (row->hemisphere == 0 && row->cycle != 0)
        continue;
      g_assert_cmpuint (n, <, 5);
      shares[n] = row->share;
      lengths[n] = last_column (&picture, style.breaks, (int)(4 + n * row_height),
                                (int)(4 + (n + 1) * row_height))
                   - left + 1;
      n++;
    }
  g_assert_cmpuint (n, ==, 5);
  for (guint k = 0; k < 4; k++)
    tf_check_near ("length of a bar", lengths[k] / lengths[4], shares[k] / shares[4],
                   4 / lengths[4]);
}

/* Wherever it lies, an interval stays on its axis: past either end there are numbers and names. */
static void
an_interval_ends_with_its_axis (void)
{
  static const double intervals[][2] = { { 0.1, 0.2 }, { 0.2, 0.9 }, { 0.7, 0.9 }, { -0.4, 0.1 }, { -0.9, -0.2 } };
  const TfPlot plot = { .plot = { 40, 0, 100, 40 }, .x0 = 0, .x1 = 0.3, .y0 = 0, .y1 = 1 };
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  for (guint k = 0; k < G_N_ELEMENTS (intervals); k++)
    {
      g_auto (Picture) picture = picture_new (200, 40, style.ground);
      tf_plot_whisker_x (picture.cr, &plot, &style, intervals[k][0], intervals[k][1], 20, 4);
      g_assert_cmpuint (picture_count_in (&picture, style.ink, 0.5, 38, 0, 142, 40), >, 5);
      g_assert_cmpuint (picture_count_in (&picture, style.ink, 0.5, 0, 0, 38, 40), ==, 0);
      g_assert_cmpuint (picture_count_in (&picture, style.ink, 0.5, 142, 0, 200, 40), ==, 0);
    }
}

static void
a_bar_opens_its_regions_one_after_the_other (void)
{
  g_auto (MadeStudy) study = made_study_new (400, 5);
  g_autoptr (TfLawsCharts) charts = tf_laws_charts_new (&study.facts);
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  const TfLawsChart *chart = chart_named ("hale");
  TfArea area = { 0, 0, WIDTH, chart->height (charts, &style, WIDTH) };
  double y = 4.4 + (area.height - 6.6 * 11) * 0.1; /* the first bar of five: 23 north */
  int row = -1;
  guint n = 0, breaks = 0;
  for (guint k = 0; k < 400; k++)
    breaks += study.verdicts[k].kind == TF_VERDICT_BREAKS && study.verdicts[k].cycle.number == 23
              && tf_sample_get (study.sample, k)->lat_deg > 0;
  g_assert_cmpuint (breaks, >, 1);
  int first = chart->hit (charts, &style, area, 120, y, -1);
  do
    {
      int next = chart->hit (charts, &style, area, 120, y, row);
      g_assert_cmpint (next, >=, 0);
      g_assert_cmpint (study.verdicts[next].kind, ==, TF_VERDICT_BREAKS);
      g_assert_cmpint (study.verdicts[next].cycle.number, ==, 23);
      tf_check_between ("north", tf_sample_get (study.sample, (guint)next)->lat_deg, 0, 90);
      row = next;
      n++;
    }
  while (chart->hit (charts, &style, area, 120, y, row) != first);
  g_assert_cmpuint (n, ==, breaks);
  g_assert_cmpint (chart->hit (charts, &style, area, 120, area.height + 50, -1), ==, -1);
}

static void
the_line_of_joy_is_drawn_where_the_fit_is (void)
{
  g_auto (MadeStudy) study = made_study_new (3000, 3);
  g_autoptr (TfLawsCharts) charts = tf_laws_charts_new (&study.facts);
  const TfJoyFit *fit = &g_array_index (study.joy, TfJoyFit, 0);
  tf_check_near ("the made slope", fit->slope, 0.45, 0.06);
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  TfArea area;
  const TfLawsChart *chart = chart_named ("joy");
  g_auto (Picture) picture = draw (chart, charts, &style, &area);
  /* the region nearest to a place tells where the place is in data */
  guint seen = 0;
  for (guint k = 0; k < 3000 && seen < 40; k++)
    {
      const TfSampleRow *row = tf_sample_get (study.sample, k);
      if (!tf_joy_uses (row, &study.verdicts[k], &study.facts.joy_params)
          || fabs (fabs (row->lat_deg) - 33) > 2 || fabs (row->axis_tilt_deg) > 59)
        continue;
      seen++;
    }
  g_assert_cmpuint (seen, >, 0);
  /* teal along the rightmost column of the plot stands at slope * 40 deg: between the tilts of 0 and
   * 60 deg it is at the share that the fit says */
  int zero = -1, top = 19, x = WIDTH - 18;
  for (int y = 20; y < picture.height; y++)
    if (picture_count_in (&picture, tf_chart_style (FALSE, FALSE, 11).teal, 0.12, x, y, x + 1, y + 1)
        > 0)
      {
        zero = y;
        break;
      }
  g_assert_cmpint (zero, >, top);
  double plot_height = area.height - 4.6 * 11 * 1.12 - 11 * 1.7 - 2.2 * 11;
  double lat = 40.0 * (x + 0.5 - 3.2 * 11) / (WIDTH - 3.2 * 11 - 1.2 * 11);
  double tilt = 60 - (zero + 1 - 1.7 * 11) / plot_height * 120;
  tf_check_near ("height of the line", tilt, fit->slope * lat, 1.5);
}

static void
a_dot_is_hit_where_it_is_drawn (void)
{
  g_auto (MadeStudy) study = made_study_new (60, 9);
  g_autoptr (TfLawsCharts) charts = tf_laws_charts_new (&study.facts);
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  const TfLawsChart *chart = chart_named ("joy");
  TfArea area;
  g_auto (Picture) picture = draw (chart, charts, &style, &area);
  guint found = 0;
  g_autoptr (GHashTable) rows = g_hash_table_new (NULL, NULL);
  for (int y = 0; y < picture.height; y += 2)
    for (int x = 0; x < WIDTH; x += 2)
      {
        int row = chart->hit (charts, &style, area, x, y, -1);
        if (row >= 0)
          g_hash_table_add (rows, GINT_TO_POINTER (row));
      }
  for (guint k = 0; k < 60; k++)
    found += tf_joy_uses (tf_sample_get (study.sample, k), &study.verdicts[k],
                          &study.facts.joy_params)
             && fabs (tf_sample_get (study.sample, k)->axis_tilt_deg) < 45;
  tf_check_between ("nearly all dots can be hit", g_hash_table_size (rows) / (double)found, 0.9,
                    1.1);
}

static void
the_histogram_opens_a_region_of_the_bin (void)
{
  g_auto (MadeStudy) study = made_study_new (500, 2);
  g_autoptr (TfLawsCharts) charts = tf_laws_charts_new (&study.facts);
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  const TfLawsChart *chart = chart_named ("tilts");
  TfArea area = { 0, 0, WIDTH, chart->height (charts, &style, WIDTH) };
  double middle = 4.2 * 11 + (WIDTH - 4.2 * 11 - 1.2 * 11) * (90 + 12.5) / 180;
  int row = chart->hit (charts, &style, area, middle, 100, -1);
  g_assert_cmpint (row, >=, 0);
  tf_check_between ("tilt of the bin", tf_sample_get (study.sample, (guint)row)->axis_tilt_deg, 10,
                    15);
}

/* Charts say the same in grey: nothing of one brightness stands for two things side by side. */
static double
grey (TfColour c)
{
  return 0.299 * c.r + 0.587 * c.g + 0.114 * c.b;
}

static void
what_stands_side_by_side_differs_in_grey (void)
{
  for (int dark = 0; dark < 2; dark++)
    {
      TfChartStyle s = tf_chart_style (dark, FALSE, 11);
      tf_check_between ("bar against its ground", fabs (grey (s.breaks) - grey (s.band)), 0.25, 1);
      tf_check_between ("whisker against the bar", fabs (grey (s.ink) - grey (s.breaks)), 0.15, 1);
      tf_check_between ("fit against the ground", fabs (grey (s.teal) - grey (s.ground)), 0.4, 1);
      tf_check_between ("dots against the ground", fabs (grey (s.slate) - grey (s.ground)), 0.4, 1);
    }
}

static void
nothing_to_show_is_said (void)
{
  g_auto (MadeStudy) study = made_study_new (0, 1);
  g_autoptr (TfLawsCharts) charts = tf_laws_charts_new (&study.facts);
  TfChartStyle style = tf_chart_style (TRUE, TRUE, 22);
  for (const TfLawsChart *chart = tf_laws_chart_table; chart->name != NULL; chart++)
    {
      TfArea area;
      g_auto (Picture) picture = draw (chart, charts, &style, &area);
      g_autofree char *words = chart->dup_description (charts);
      g_assert_cmpuint (strlen (words), >, 5);
      g_assert_cmpint (chart->hit (charts, &style, area, 100, 100, -1), ==, -1);
      chart->draw (picture.cr, charts, &style, (TfArea){ 0, 0, 3, 3 });
      g_assert_cmpint (cairo_status (picture.cr), ==, CAIRO_STATUS_SUCCESS);
    }
}

static void
many_regions_are_drawn_in_no_time (void)
{
  g_auto (MadeStudy) study = made_study_new (20000, 4);
  g_autoptr (TfLawsCharts) charts = tf_laws_charts_new (&study.facts);
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  TfArea area;
  g_auto (Picture) picture = draw (chart_named ("joy"), charts, &style, &area);
  /* cells, not dots: the middle of the cloud is darker than its edge */
  tf_check_between ("the middle of the cloud is dark",
                    grey (picture_at (&picture, WIDTH / 2 - 30, (int)(area.height * 0.40))), 0, 0.8);
}

/* A region that grows on the disk: tilt and separation by age; the median of each age is drawn where
 * it is. */
static TfEmergence *
emergence_of (guint passages)
{
  g_autoptr (TfSample) every = tf_sample_new ();
  for (guint passage = 1; passage <= passages; passage++)
    for (int half = 0; half < 12; half++)
      {
        TfSampleRow row;
        tf_sample_row_init (&row);
        row.time = (TfTime){ 4e8 + passage * 1e6 + half * 43200 };
        row.region = row.passage = passage;
        row.lat_deg = 15;
        row.cmd_deg = -50 + 7 * half;
        row.mu = 0.8;
        row.axis_tilt_deg = 2 + half;
        row.separation_deg = 1 + 0.3 * half;
        row.flux_mx = 1e20 + 5e20 * half;
        row.born = 1;
        tf_sample_add (every, &row);
      }
  TfEmergenceParams params;
  tf_options_reset (tf_emergence_options, &params);
  return tf_emergence_new (every, &params);
}

static void
emergence_is_drawn_by_age (void)
{
  g_autoptr (TfEmergence) emergence = emergence_of (9), two = emergence_of (2);
  g_assert_cmpuint (emergence->passages, ==, 9);
  g_auto (MadeStudy) study = made_study_new (50, 1);
  study.facts.emergence = emergence;
  g_autoptr (TfLawsCharts) charts = tf_laws_charts_new (&study.facts);
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  const TfLawsChart *chart = chart_named ("emergence");
  TfArea area;
  g_assert_true (chart->has (charts));
  g_auto (Picture) picture = draw (chart, charts, &style, &area);
  g_assert_cmpuint (picture_count (&picture, style.ink, 0.2), >, 12 * 20);  /* rings of all */
  g_assert_cmpuint (picture_count (&picture, style.teal, 0.25), >, 100);    /* lines of halves */
  g_autofree char *words = chart->dup_description (charts);
  g_assert_nonnull (strstr (words, "9 passages"));
  study.facts.emergence = two; /* no median: said, rather than empty frames */
  g_autoptr (TfLawsCharts) few = tf_laws_charts_new (&study.facts);
  g_auto (Picture) said = draw (chart, few, &style, &area);
  g_assert_cmpuint (picture_count (&said, style.line, 0.05) * 10, <,
                    picture_count (&picture, style.line, 0.05)); /* letters alone, no frames */
  g_autofree char *why = chart->dup_description (few);
  g_assert_nonnull (strstr (why, "2 passages born"));
}

/* -- files ----------------------------------------------------------------------------------- */

static gsize
count_bytes (const char *text, gsize length, const char *what)
{
  gsize n = 0, size = strlen (what);
  for (gsize k = 0; k + size <= length; k++)
    n += memcmp (text + k, what, size) == 0;
  return n;
}

static void
figures_are_files_with_their_fonts (void)
{
  g_auto (MadeStudy) study = made_study_new (300, 8);
  g_autoptr (TfLawsCharts) charts = tf_laws_charts_new (&study.facts);
  g_autofree char *top = g_dir_make_tmp ("tiltfield-figures-XXXXXX", NULL);
  g_autofree char *folder = g_build_filename (top, "made", "figures", NULL);
  static const struct
  {
    const char *ending, *begins, *has;
  } forms[] = { { "pdf", "%PDF-", "FontFile" }, { "svg", "<?xml", "<symbol" }, { "png", "\211PNG", "IEND" } };
  for (guint k = 0; k < G_N_ELEMENTS (forms); k++)
    {
      g_autoptr (GError) error = NULL;
      g_autoptr (GPtrArray) files
          = tf_laws_charts_write (charts, folder, forms[k].ending, "Of 300 …", &error);
      g_assert_no_error (error);
      g_assert_cmpuint (files->len, ==, 5); /* none is known to be born on the disk */
      for (guint f = 0; f < files->len; f++)
        {
          g_autofree char *text = NULL;
          gsize length = 0;
          g_assert_true (g_file_get_contents (files->pdata[f], &text, &length, NULL));
          g_assert_true (g_str_has_prefix (text, forms[k].begins));
          gsize n = count_bytes (text, length, forms[k].has)
                    + (k == 1 ? count_bytes (text, length, "id=\"glyph") : 0);
          g_assert_cmpuint (n, >, 0);
          g_unlink (files->pdata[f]);
        }
    }
  g_autoptr (GError) error = NULL;
  g_assert_null (tf_laws_charts_write (charts, folder, "bmp", NULL, &error));
  g_assert_error (error, TF_CHART_ERROR, TF_CHART_ERROR_ENDING);
  g_rmdir (folder);
  g_autofree char *made = g_path_get_dirname (folder);
  g_rmdir (made);
  g_rmdir (top);
}

void
add_laws_chart_tests (void)
{
  g_test_add_func ("/chart/laws/the-bars-are-as-long-as-the-shares",
                   the_bars_are_as_long_as_the_shares);
  g_test_add_func ("/chart/laws/an-interval-ends-with-its-axis", an_interval_ends_with_its_axis);
  g_test_add_func ("/chart/laws/a-bar-opens-its-regions-one-after-the-other",
                   a_bar_opens_its_regions_one_after_the_other);
  g_test_add_func ("/chart/laws/the-line-of-joy-is-drawn-where-the-fit-is",
                   the_line_of_joy_is_drawn_where_the_fit_is);
  g_test_add_func ("/chart/laws/a-dot-is-hit-where-it-is-drawn", a_dot_is_hit_where_it_is_drawn);
  g_test_add_func ("/chart/laws/the-histogram-opens-a-region-of-the-bin",
                   the_histogram_opens_a_region_of_the_bin);
  g_test_add_func ("/chart/laws/what-stands-side-by-side-differs-in-grey",
                   what_stands_side_by_side_differs_in_grey);
  g_test_add_func ("/chart/laws/nothing-to-show-is-said", nothing_to_show_is_said);
  g_test_add_func ("/chart/laws/many-regions-are-drawn-in-no-time",
                   many_regions_are_drawn_in_no_time);
  g_test_add_func ("/chart/laws/emergence-is-drawn-by-age", emergence_is_drawn_by_age);
  g_test_add_func ("/chart/figures-are-files-with-their-fonts", figures_are_files_with_their_fonts);
}
