/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-chart.h"

#include <math.h>
#include <string.h>
#include <glib/gstdio.h>

#include "tf-check.h"
#include "tf-figure.h"
#include "tf-plate-figure.h"

enum
{
  WIDTH = 400,
  HEIGHT = 300
};

static gboolean
nowhere (double lon_deg, double lat_deg, double *x, double *y, gpointer data)
{
  *x = lon_deg;
  *y = lat_deg;
  return isfinite (lon_deg + lat_deg);
}

static TfPlateFigure
figure_of (double units_a_mm)
{
  TfPlateFigure figure = { .width = WIDTH,
                           .height = HEIGHT,
                           .overlay = { .project = nowhere,
                                        .central_carrington_deg = NAN,
                                        .limb_rx = NAN,
                                        .on_dark = TRUE },
                           .units_a_mm = units_a_mm,
                           .head = "2013-10-12T06:00:00Z · BRINDLE-1K",
                           .range_gauss = 200,
                           .low = 0x000000,
                           .middle = 0x808080,
                           .high = 0xffffff };
  return figure;
}

/* 1, 2 or 5 times a power of ten, a tenth to a fifth of the picture. */
static void
test_bar (void)
{
  for (double scale = 0.003; scale < 300; scale *= 1.37)
    {
      TfPlateFigure figure = figure_of (scale);
      double mm = tf_plate_figure_bar (&figure);
      double first = mm / pow (10, floor (log10 (mm) + 1e-9));
      g_assert_true (fabs (first - 1) < 1e-6 || fabs (first - 2) < 1e-6 || fabs (first - 5) < 1e-6);
      tf_check_between ("bar's share of the picture", mm * scale / WIDTH, 0.0799, 0.2001);
    }
  TfPlateFigure none = figure_of (NAN);
  tf_check_nan ("no scale", tf_plate_figure_bar (&none));
}

/* The bar as drawn is as long as it says: white pixels in the lower left of the picture. */
static void
test_bar_length (void)
{
  TfPlateFigure figure = figure_of (0.8);
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 10);
  int height = (int)ceil (tf_plate_figure_height (&figure, &style, WIDTH)), longest = 0;
  cairo_surface_t *page = cairo_image_surface_create (CAIRO_FORMAT_RGB24, WIDTH, height);
  cairo_t *cr = cairo_create (page);
  tf_plate_figure_draw (cr, &figure, &style, (TfArea){ 0, 0, WIDTH, height });
  cairo_destroy (cr);
  cairo_surface_flush (page);
  for (int y = HEIGHT - 14; y < HEIGHT - 6; y++)
    {
      const guint32 *row = (const guint32 *)(gconstpointer)(cairo_image_surface_get_data (page)
                                                            + y * cairo_image_surface_get_stride (page));
      int run = 0;
      for (int x = 0; x < WIDTH; x++)
        {
          run = (row[x] & 255) > 100 ? run + 1 : 0;
          longest = MAX (longest, run);
        }
    }
  tf_check_near ("length of the bar", longest, tf_plate_figure_bar (&figure) * 0.8, 2.5);
  cairo_surface_destroy (page);
}

/* What is in the picture is in the legend: each more makes the figure no lower, many make it
 * higher. */
static void
test_legend_grows (void)
{
  TfVertex points[] = { { 10, 10 }, { 50, 50 } };
  TfOverlayLine lines[] = { { TF_LINE_INVERSION, points, 2 },
                            { TF_LINE_PENUMBRA, points, 2 },
                            { TF_LINE_UMBRA, points, 2 } };
  TfPlateFigure figure = figure_of (1);
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 10);
  double bare = tf_plate_figure_height (&figure, &style, WIDTH);
  figure.overlay.lines = lines;
  double before = bare;
  for (guint n = 1; n <= 3; n++)
    {
      figure.overlay.n_lines = n;
      double now = tf_plate_figure_height (&figure, &style, 200);
      g_assert_cmpfloat (now, >=, n > 1 ? before : 0);
      before = now;
    }
  figure.overlay.n_lines = 3;
  g_assert_cmpfloat (tf_plate_figure_height (&figure, &style, WIDTH), >, bare + 10);
}

static void
draw (cairo_t *cr, const TfChartStyle *style, TfArea area, gpointer data)
{
  tf_plate_figure_draw (cr, data, style, area);
}

static void
test_pdf_has_its_fonts (void)
{
  g_autoptr (GError) error = NULL;
  g_autofree char *folder = g_dir_make_tmp ("tf-figure-XXXXXX", NULL),
                  *path = g_build_filename (folder, "plate.pdf", NULL), *bytes = NULL;
  TfPlateFigure figure = figure_of (1);
  TfFigurePage page = { .width_mm = 88, .height_mm = 90, .text_mm = 2.5 };
  gsize n = 0;
  g_assert_true (tf_figure_write (path, &page, draw, &figure, &error));
  g_assert_true (g_file_get_contents (path, &bytes, &n, NULL));
  g_assert_nonnull (memmem (bytes, n, "FontFile", strlen ("FontFile")));
  g_remove (path);
  g_rmdir (folder);
}

void
add_plate_figure_tests (void)
{
  g_test_add_func ("/chart/plate-figure/the-bar-is-a-round-length", test_bar);
  g_test_add_func ("/chart/plate-figure/the-bar-is-as-long-as-it-says", test_bar_length);
  g_test_add_func ("/chart/plate-figure/what-is-seen-is-in-the-legend", test_legend_grows);
  g_test_add_func ("/chart/plate-figure/a-pdf-has-its-fonts", test_pdf_has_its_fonts);
}
