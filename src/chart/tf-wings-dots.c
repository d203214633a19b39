/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-wings-private.h"

#include <math.h>

#include "tf-chart-private.h"
#include "tf-verdict.h"

/* Dots one by one. On pixels they are rastered here (a path of cairo's costs some 30 us a dot, this
 * one below 1 us); in PDF and SVG they are paths. Both have the same places, sizes and colours:
 * hints first, then marks, what breaks last.
 */

#define HINT_ALPHA 0.55
#define RASTER_MAX 16384.0 /* pixels a side */

/* One symbol, in pixels or user units. */
typedef struct
{
  double x, y, radius;
  double alpha;
  int polarity;    /* 1 disc, -1 ring, 0 plain disc */
  gboolean breaks; /* a struck diamond instead */
} Dot;

static Dot
dot_of (const TfWings *wings, TfArea plot, const TfWingsDot *dot)
{
  gboolean breaks = !wings->plain && dot->verdict == TF_VERDICT_BREAKS;
  double radius = tf_wings_radius (dot->flux_mx);
  return (Dot){ .x = tf_wings_x (wings, plot, dot->year),
                .y = tf_wings_y (wings, plot, (double)dot->lat_deg),
                .radius = breaks ? MAX (radius, 2.5) + 1.5 : radius,
                .alpha = dot->hint ? HINT_ALPHA : 1,
                .polarity = wings->plain ? 0 : dot->leading,
                .breaks = breaks };
}

static double
ring_width (double radius)
{
  return CLAMP (radius * 0.36, 0.9, 1.6);
}

/* Calls @put for each dot in drawing order. */
static void
each_dot (const TfWings *wings, TfArea plot, guint first, guint end,
          void (*put) (const Dot *dot, gpointer data), gpointer data)
{
  for (int layer = 0; layer < 3; layer++)
    for (guint k = first; k < end; k++)
      {
        const TfWingsDot *source = &wings->dots[k];
        if (!isfinite (source->lat_deg) || !isfinite (source->year))
          continue;
        Dot dot = dot_of (wings, plot, source);
        if (layer == (dot.breaks ? 2 : source->hint ? 0 : 1))
          put (&dot, data);
      }
}

/* -- on pixels ------------------------------------------------------------------------------- */

typedef struct
{
  const TfChartStyle *style;
  TfColour edge;
  guint32 *pixels;
  int width, height, stride;
  double scale_x, scale_y; /* pixels a user unit */
  TfArea plot;
} Raster;

static void
blend (guint32 *pixel, TfColour colour, double alpha)
{
  guint32 below = *pixel, out = 0;
  const double parts[4] = { colour.b, colour.g, colour.r, 1 };
  for (int k = 0; k < 4; k++)
    {
      double part = parts[k] * 255 * alpha + (below >> (8 * k) & 255) * (1 - alpha);
      out |= (guint32)(part + 0.5) << (8 * k);
    }
  *pixel = out;
}

static double
cover (double inside)
{
  return CLAMP (inside + 0.5, 0, 1);
}

static void
put_round (const Raster *raster, guint32 *pixel, const Dot *dot, double dx, double dy)
{
  double far = sqrt (dx * dx + dy * dy), alpha = cover (dot->radius - far) * dot->alpha;
  if (!(alpha > 0))
    return;
  if (dot->polarity > 0)
    {
      double edge = cover (far - (dot->radius - 0.6 * raster->scale_x));
      blend (pixel, tf_chart_mix (raster->style->positive, raster->edge, edge), alpha * 0.95);
    }
  else if (dot->polarity < 0)
    blend (pixel, raster->style->negative,
           alpha
               * cover (far - dot->radius
                        + ring_width (dot->radius / raster->scale_x) * raster->scale_x));
  else
    blend (pixel, raster->style->slate, alpha * 0.9);
}

static void
put_struck (const Raster *raster, guint32 *pixel, const Dot *dot, double dx, double dy)
{
  double width = CLAMP (dot->radius * 0.17, 1.0, 2.2), reach = dot->radius * 0.95;
  double along = fabs (dx - dy) * G_SQRT2 / 2, off = fabs (dx + dy) * G_SQRT2 / 2;
  double red = cover ((dot->radius - fabs (dx) - fabs (dy)) * G_SQRT2 / 2);
  double stroke = cover (reach * G_SQRT2 - along);
  if (red > 0)
    blend (pixel, raster->style->breaks, red * dot->alpha);
  if (stroke > 0 && dot->radius >= TF_SEAM_RADIUS * raster->scale_x)
    blend (pixel, raster->style->ground, stroke * cover (width * 0.5 + 0.6 - off) * dot->alpha);
  if (stroke > 0)
    blend (pixel, raster->style->ink, stroke * cover (width * 0.5 - off) * dot->alpha);
}

static void
put_raster (const Dot *dot, gpointer data)
{
  const Raster *raster = data;
  Dot at = *dot;
  at.x = (dot->x - raster->plot.x) * raster->scale_x;
  at.y = (dot->y - raster->plot.y) * raster->scale_y;
  at.radius = dot->radius * raster->scale_x;
  double reach = at.radius + 1.5;
  if (!(at.x > -reach && at.x < raster->width + reach && at.y > -reach
        && at.y < raster->height + reach))
    return;
  int left = MAX ((int)floor (at.x - reach), 0),
      right = MIN ((int)ceil (at.x + reach), raster->width - 1);
  int top = MAX ((int)floor (at.y - reach), 0),
      foot = MIN ((int)ceil (at.y + reach), raster->height - 1);
  for (int y = top; y <= foot; y++)
    for (int x = left; x <= right; x++)
      {
        guint32 *pixel = raster->pixels + (gsize)y * (gsize)raster->stride + x;
        if (at.breaks)
          put_struck (raster, pixel, &at, x + 0.5 - at.x, y + 0.5 - at.y);
        else
          put_round (raster, pixel, &at, x + 0.5 - at.x, y + 0.5 - at.y);
      }
}

static void
draw_pixels (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea plot, guint first,
             guint end)
{
  double one = 1, two = 0, sx, sy;
  cairo_user_to_device_distance (cr, &one, &two);
  cairo_surface_get_device_scale (cairo_get_target (cr), &sx, &sy);
  double scale = CLAMP (hypot (one, two) * sx, 0.25, 8);
  int width = (int)ceil (MIN (plot.width * scale, RASTER_MAX));
  int height = (int)ceil (MIN (plot.height * scale, RASTER_MAX));
  cairo_surface_t *picture = cairo_image_surface_create (CAIRO_FORMAT_ARGB32, width, height);
  if (cairo_surface_status (picture) == CAIRO_STATUS_SUCCESS)
    {
      cairo_surface_flush (picture);
      Raster raster = { style,
                        tf_chart_edge (style),
                        (guint32 *)(void *)cairo_image_surface_get_data (picture),
                        width,
                        height,
                        cairo_image_surface_get_stride (picture) / 4,
                        scale,
                        scale,
                        plot };
      each_dot (wings, plot, first, end, put_raster, &raster);
      cairo_surface_mark_dirty (picture);
      cairo_surface_set_device_scale (picture, scale, scale);
      cairo_set_source_surface (cr, picture, plot.x, plot.y);
      cairo_pattern_set_filter (cairo_get_source (cr), CAIRO_FILTER_BILINEAR);
      cairo_paint (cr);
    }
  cairo_surface_destroy (picture);
}

/* -- as paths -------------------------------------------------------------------------------- */

typedef struct
{
  cairo_t *cr;
  const TfChartStyle *style;
} Paths;

static void
put_path (const Dot *dot, gpointer data)
{
  const Paths *paths = data;
  cairo_t *cr = paths->cr;
  cairo_new_path (cr);
  if (dot->breaks)
    {
      tf_chart_diamond (cr, paths->style, dot->x, dot->y, dot->radius, TF_DIAMOND_STRUCK);
      return;
    }
  double width = ring_width (dot->radius);
  cairo_arc (cr, dot->x, dot->y, dot->polarity < 0 ? dot->radius - width / 2 : dot->radius, 0,
             2 * G_PI);
  cairo_set_line_width (cr, dot->polarity < 0 ? width : 0.5);
  if (dot->polarity < 0)
    {
      tf_chart_set_alpha (cr, paths->style->negative, dot->alpha);
      cairo_stroke (cr);
      return;
    }
  tf_chart_set_alpha (cr, dot->polarity > 0 ? paths->style->positive : paths->style->slate,
                      dot->alpha * 0.95);
  cairo_fill_preserve (cr);
  tf_chart_set_alpha (cr, dot->polarity > 0 ? tf_chart_edge (paths->style) : paths->style->slate,
                      dot->alpha);
  cairo_stroke (cr);
}

void
tf_wings_draw_dots (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea plot,
                    guint first, guint end)
{
  cairo_surface_type_t type = cairo_surface_get_type (cairo_get_target (cr));
  if (type == CAIRO_SURFACE_TYPE_PDF || type == CAIRO_SURFACE_TYPE_SVG
      || type == CAIRO_SURFACE_TYPE_PS)
    {
      Paths paths = { cr, style };
      each_dot (wings, plot, first, end, put_path, &paths);
    }
  else
    draw_pixels (cr, wings, style, plot, first, end);
}
