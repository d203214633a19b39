/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-chart.h"

#include <locale.h>
#include <math.h>

Picture
picture_new (int width, int height, TfColour ground)
{
  Picture picture = { .width = width, .height = height };
  picture.surface = cairo_image_surface_create (CAIRO_FORMAT_ARGB32, width, height);
  picture.cr = cairo_create (picture.surface);
  tf_chart_set (picture.cr, ground);
  cairo_paint (picture.cr);
  return picture;
}

void
picture_clear (Picture *picture)
{
  cairo_destroy (picture->cr);
  cairo_surface_destroy (picture->surface);
}

TfColour
picture_at (const Picture *picture, int x, int y)
{
  g_assert_true (x >= 0 && x < picture->width && y >= 0 && y < picture->height);
  cairo_surface_flush (picture->surface);
  int stride = cairo_image_surface_get_stride (picture->surface) / 4;
  guint32 pixel = ((const guint32 *)(const void *)cairo_image_surface_get_data (
      picture->surface))[y * stride + x];
  return (TfColour){ (pixel >> 16 & 255) / 255.0, (pixel >> 8 & 255) / 255.0, (pixel & 255) / 255.0,
                     (pixel >> 24) / 255.0 };
}

double
colour_distance (TfColour a, TfColour b)
{
  return MAX (MAX (fabs (a.r - b.r), fabs (a.g - b.g)), fabs (a.b - b.b));
}

guint
picture_count_in (const Picture *picture, TfColour colour, double tolerance, int x0, int y0, int x1,
                  int y1)
{
  guint n = 0;
  for (int y = MAX (y0, 0); y < MIN (y1, picture->height); y++)
    for (int x = MAX (x0, 0); x < MIN (x1, picture->width); x++)
      n += colour_distance (picture_at (picture, x, y), colour) <= tolerance;
  return n;
}

guint
picture_count (const Picture *picture, TfColour colour, double tolerance)
{
  return picture_count_in (picture, colour, tolerance, 0, 0, picture->width, picture->height);
}

guint
picture_changed (const Picture *picture, TfColour ground)
{
  return (guint)(picture->width * picture->height) - picture_count (picture, ground, 0.01);
}

int
main (int argc, char **argv)
{
  setlocale (LC_ALL, "C.UTF-8");
  g_test_init (&argc, &argv, NULL);
  g_test_set_nonfatal_assertions ();
  add_symbol_tests ();
  add_dial_tests ();
  add_wings_tests ();
  add_overlay_tests ();
  add_plate_figure_tests ();
  add_laws_chart_tests ();
  add_power_plot_tests ();
  add_sheet_tests ();
  return g_test_run ();
}
