/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-strip.h"

#include <math.h>

#include "tf-chart-private.h"

static const TfColour night = { 0.09, 0.098, 0.114, 1 }, pale = { 0.93, 0.93, 0.95, 1 },
                      shadow = { 0.06, 0.065, 0.08, 0.75 };
static const double gap = 8;

static void
draw_picture (cairo_t *cr, const TfStripLook *look, TfArea area)
{
  int width = cairo_image_surface_get_width (look->picture),
      height = cairo_image_surface_get_height (look->picture);
  cairo_save (cr);
  cairo_translate (cr, area.x, area.y);
  cairo_scale (cr, area.width / width, area.height / height);
  cairo_set_source_surface (cr, look->picture, 0, 0);
  cairo_pattern_set_filter (cairo_get_source (cr), CAIRO_FILTER_BILINEAR);
  cairo_paint (cr);
  cairo_restore (cr);
}

static void
draw_edge (cairo_t *cr, const TfStripLook *look, TfArea area, double unit)
{
  double dash[2] = { unit * (look->ghost ? 1.2 : 4), unit * (look->ghost ? 2.2 : 2.5) };
  gboolean open = FALSE;
  cairo_new_path (cr);
  for (guint k = 0; k < look->n_edge; k++)
    {
      double x = look->edge[2 * k], y = look->edge[2 * k + 1];
      if (!isfinite (x) || !isfinite (y))
        {
          if (open)
            cairo_close_path (cr);
          open = FALSE;
          continue;
        }
      if (open)
        cairo_line_to (cr, area.x + x * area.width, area.y + y * area.height);
      else
        cairo_move_to (cr, area.x + x * area.width, area.y + y * area.height);
      open = TRUE;
    }
  if (open)
    cairo_close_path (cr);
  tf_chart_set (cr, shadow);
  cairo_set_line_width (cr, unit * 2.2);
  cairo_stroke_preserve (cr);
  if (look->hint || look->ghost)
    cairo_set_dash (cr, dash, 2, 0);
  tf_chart_set (cr, pale);
  cairo_set_line_width (cr, unit);
  cairo_stroke (cr);
  cairo_set_dash (cr, NULL, 0, 0);
}

static void
draw_axis (cairo_t *cr, const TfStripLook *look, const TfChartStyle *style, TfArea area,
           double unit)
{
  double px = area.x + look->positive_x * area.width, py = area.y + look->positive_y * area.height,
         nx = area.x + look->negative_x * area.width, ny = area.y + look->negative_y * area.height;
  for (int pass = 0; pass < 2; pass++)
    {
      cairo_move_to (cr, px, py);
      cairo_line_to (cr, nx, ny);
      tf_chart_set (cr, pass == 0 ? shadow : pale);
      cairo_set_line_width (cr, unit * (pass == 0 ? 3 : 1.3));
      cairo_stroke (cr);
    }
  tf_chart_pole (cr, style, px, py, unit * 4, 1);
  tf_chart_pole (cr, style, nx, ny, unit * 4, -1);
}

static void
draw_missing (cairo_t *cr, const TfStripLook *look, const TfChartStyle *style, TfArea area)
{
  double dash[2] = { 3, 3 };
  tf_chart_set (cr, night);
  cairo_rectangle (cr, area.x, area.y, area.width, area.height);
  cairo_fill_preserve (cr);
  tf_chart_set_alpha (cr, pale, 0.35);
  cairo_set_line_width (cr, 1);
  cairo_set_dash (cr, dash, 2, 0);
  cairo_stroke (cr);
  cairo_set_dash (cr, NULL, 0, 0);
  if (look->why == NULL)
    return;
  TfColour quiet = pale;
  quiet.a = 0.75;
  tf_chart_text (cr, style, area.x + area.width / 2, area.y + area.height / 2, 0.5, 0.5, quiet,
                 look->why);
}

void
tf_strip_draw_look (cairo_t *cr, const TfStripLook *look, const TfChartStyle *style, TfArea area,
                    gboolean caption)
{
  double foot = caption ? style->text_pt * 1.7 : 0, unit = fmax (area.width / 160, 0.5);
  TfArea picture = { area.x, area.y, area.width, fmax (area.height - foot, 1) };
  cairo_save (cr);
  if (look->picture != NULL)
    {
      cairo_rectangle (cr, picture.x, picture.y, picture.width, picture.height);
      cairo_clip (cr);
      draw_picture (cr, look, picture);
      draw_edge (cr, look, picture, unit);
      if (look->poles)
        draw_axis (cr, look, style, picture, unit);
      cairo_reset_clip (cr);
    }
  else
    draw_missing (cr, look, style, picture);
  cairo_restore (cr);
  if (caption && look->caption != NULL)
    tf_chart_text (cr, style, area.x + area.width / 2, picture.y + picture.height + foot / 2, 0.5,
                   0.5, style->ink, look->caption);
}

double
tf_strip_draw (cairo_t *cr, const TfStripLook *looks, guint n, const TfChartStyle *style,
               TfArea area, double width, double shape)
{
  guint columns = (guint)fmax (floor ((area.width + gap) / (width + gap)), 1);
  double height = width / shape + style->text_pt * 1.7;
  for (guint k = 0; k < n && cr != NULL; k++)
    {
      TfArea one = { area.x + (k % columns) * (width + gap),
                     area.y + (double)(k / columns) * (height + gap), width, height };
      tf_strip_draw_look (cr, &looks[k], style, one, TRUE);
    }
  return (double)((n + columns - 1) / columns) * (height + gap);
}
