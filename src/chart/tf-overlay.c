/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-overlay.h"
#include "tf-overlay-private.h"

#include <math.h>

#include "tf-chart-private.h"

/* -- colours --------------------------------------------------------------------------------- */

/* A magnetogram is mid grey with white and black in it, so that each line lies on a broader one of
 * the other brightness. */
TfColour
tf_overlay_halo_colour (const TfOverlay *overlay)
{
  return overlay->on_dark ? (TfColour){ 0.05, 0.06, 0.08, 0.6 } : (TfColour){ 1, 1, 1, 0.8 };
}

TfColour
tf_overlay_line_colour (const TfOverlay *overlay, const TfChartStyle *style,
                        const TfOverlayItem *item)
{
  gboolean dark = overlay->on_dark;
  if (style->contrast)
    return dark ? (TfColour){ 1, 1, 1, 1 } : (TfColour){ 0, 0, 0, 1 };
  if (item->chosen)
    return dark ? (TfColour){ 1.0, 0.945, 0.78, 1 } : (TfColour){ 0.10, 0.12, 0.16, 1 };
  if (item->stroke == TF_STROKE_GHOST)
    return dark ? (TfColour){ 0.62, 0.68, 0.74, 1 } : (TfColour){ 0.45, 0.49, 0.54, 1 };
  return dark ? (TfColour){ 0.80, 0.87, 0.90, 1 } : (TfColour){ 0.22, 0.29, 0.35, 1 };
}

static TfColour
grid_colour (const TfOverlay *overlay, const TfChartStyle *style)
{
  double alpha = style->contrast ? 0.45 : 0.17;
  return overlay->on_dark ? (TfColour){ 1, 1, 1, alpha } : (TfColour){ 0, 0, 0, alpha };
}

/* The path twice: a halo under the line itself. Dashes are on the line alone. */
static void
stroke_on (cairo_t *cr, TfColour halo, TfColour line, double width, const double *dash, int n_dash)
{
  cairo_set_line_join (cr, CAIRO_LINE_JOIN_BEVEL);
  cairo_set_line_cap (cr, CAIRO_LINE_CAP_BUTT);
  cairo_set_dash (cr, dash, n_dash, 0);
  tf_chart_set (cr, halo);
  cairo_set_line_width (cr, width + 1.6);
  cairo_stroke_preserve (cr);
  tf_chart_set (cr, line);
  cairo_set_line_width (cr, width);
  cairo_stroke (cr);
  cairo_set_dash (cr, NULL, 0, 0);
}

/* -- graticule and limb ---------------------------------------------------------------------- */

static void
along_meridian (double t, double *lon_deg, double *lat_deg, gconstpointer line)
{
  *lon_deg = *(const double *)line;
  *lat_deg = -90 + 180 * t;
}

static void
along_parallel (double t, double *lon_deg, double *lat_deg, gconstpointer line)
{
  *lon_deg = fmod (360 * t, 360);
  *lat_deg = *(const double *)line;
}

static void
draw_meridians (cairo_t *cr, const TfOverlay *overlay, double step)
{
  double zero = isfinite (overlay->central_carrington_deg) ? overlay->central_carrington_deg : 0;
  g_autoptr (TfTrail) trail = tf_trail_new ();
  for (double lon = 0; lon < 360 - 1e-9; lon += step)
    {
      double at = fmod (zero + lon + 360, 360);
      tf_trail_add_line (trail, overlay, along_meridian, &at, 15, FALSE);
    }
  tf_trail_path (trail, cr);
}

static void
draw_parallels (cairo_t *cr, const TfOverlay *overlay, double step)
{
  g_autoptr (TfTrail) trail = tf_trail_new ();
  for (double lat = -floor (89.999 / step) * step; lat < 90; lat += step)
    tf_trail_add_line (trail, overlay, along_parallel, &lat, 36, FALSE);
  tf_trail_path (trail, cr);
}

static void
draw_graticule (cairo_t *cr, const TfOverlay *overlay, const TfChartStyle *style)
{
  double step = overlay->step_deg > 0 ? overlay->step_deg : 10;
  double central = overlay->central_carrington_deg, equator = 0;
  TfColour line = grid_colour (overlay, style);
  tf_chart_set (cr, line);
  cairo_set_line_width (cr, 1);
  cairo_new_path (cr);
  draw_meridians (cr, overlay, step);
  draw_parallels (cr, overlay, step);
  cairo_stroke (cr);
  g_autoptr (TfTrail) trail = tf_trail_new ();
  if (isfinite (central))
    tf_trail_add_line (trail, overlay, along_meridian, &central, 15, FALSE);
  tf_trail_add_line (trail, overlay, along_parallel, &equator, 36, FALSE);
  tf_trail_path (trail, cr);
  line.a = MIN (line.a * 2.2, 1);
  tf_chart_set (cr, line);
  cairo_stroke (cr);
}

static void
draw_limb (cairo_t *cr, const TfOverlay *overlay, const TfChartStyle *style)
{
  if (!(overlay->limb_rx > 0) || !(overlay->limb_ry > 0)
      || !isfinite (overlay->limb_x + overlay->limb_y))
    return;
  TfColour line = grid_colour (overlay, style);
  cairo_save (cr);
  cairo_translate (cr, overlay->limb_x, overlay->limb_y);
  cairo_rotate (cr, isfinite (overlay->limb_turn) ? overlay->limb_turn : 0);
  cairo_scale (cr, overlay->limb_rx, overlay->limb_ry);
  cairo_new_path (cr);
  cairo_arc (cr, 0, 0, 1, 0, 2 * G_PI);
  cairo_restore (cr);
  line.a = MIN (line.a * 3.2, 1);
  tf_chart_set (cr, line);
  cairo_set_line_width (cr, 1.2);
  cairo_stroke (cr);
}

/* -- outlines -------------------------------------------------------------------------------- */

static void
stroke_item (cairo_t *cr, const TfOverlay *overlay, const TfChartStyle *style,
             const TfOverlayItem *item)
{
  static const double dashes[] = { 6, 4 }, dots[] = { 1.5, 3.5 };
  gboolean ghost = item->stroke == TF_STROKE_GHOST, dashed = item->stroke == TF_STROKE_HINT;
  double width = (item->chosen ? 2.6 : 1.4) + (style->contrast ? 0.6 : 0);
  stroke_on (cr, tf_overlay_halo_colour (overlay), tf_overlay_line_colour (overlay, style, item),
             width,
             ghost    ? dots
             : dashed ? dashes
                      : NULL,
             ghost || dashed ? 2 : 0);
}

void
tf_overlay_stroke_outline (cairo_t *cr, const TfOverlay *overlay, const TfChartStyle *style,
                           TfStroke stroke, gboolean chosen)
{
  TfOverlayItem item = { .stroke = stroke, .chosen = chosen };
  stroke_item (cr, overlay, style, &item);
}

static void
draw_rings (cairo_t *cr, const TfOverlay *overlay, const TfChartStyle *style,
            const TfOverlayItem *item, double box[4])
{
  const TfOutline *outline = item->outline;
  cairo_new_path (cr);
  for (guint k = 0; k < tf_outline_get_n_rings (outline); k++)
    {
      guint n;
      const TfVertex *ring = tf_outline_get_ring (outline, k, FALSE, &n);
      g_autoptr (TfTrail) trail = tf_trail_new_ring (overlay, ring, n);
      tf_trail_widen (trail, box);
      tf_trail_path (trail, cr);
    }
  stroke_item (cr, overlay, style, item);
  for (guint k = 0; k < tf_outline_get_n_left_out (outline); k++)
    {
      static const double dots[] = { 2, 2 };
      guint n;
      const TfVertex *ring = tf_outline_get_ring (outline, k, TRUE, &n);
      g_autoptr (TfTrail) trail = tf_trail_new_ring (overlay, ring, n);
      tf_trail_path (trail, cr);
      stroke_on (cr, tf_overlay_halo_colour (overlay),
                 tf_overlay_line_colour (overlay, style, item), 1, dots, 2);
    }
}

static void
draw_pole (cairo_t *cr, const TfOverlay *overlay, const TfChartStyle *style, double x, double y,
           double radius, int polarity)
{
  cairo_new_path (cr);
  cairo_arc (cr, x, y, radius * (polarity < 0 ? TF_RING_SHARE : 1) + 1.5, 0, 2 * G_PI);
  if (polarity < 0) /* a ring stays open, so that the field can be seen in it */
    {
      cairo_new_sub_path (cr);
      cairo_arc_negative (cr, x, y, MAX (radius - 3.4, 0.5), 2 * G_PI, 0);
    }
  tf_chart_set (cr, tf_overlay_halo_colour (overlay));
  cairo_fill (cr);
  tf_chart_pole (cr, style, x, y, radius, polarity);
}

/* Small regions get small poles, so that the two stay apart. */
static void
draw_poles (cairo_t *cr, const TfOverlay *overlay, const TfChartStyle *style,
            const TfOverlayItem *item)
{
  TfChartStyle over = tf_chart_style (overlay->on_dark, style->contrast, style->text_pt);
  const double *places[2] = { item->negative, item->positive };
  double x[2], y[2], radius = item->chosen ? 6 : 4.5;
  gboolean seen[2];
  for (int k = 0; k < 2; k++)
    seen[k] = isfinite (places[k][0] + places[k][1])
              && overlay->project (places[k][0], places[k][1], &x[k], &y[k], overlay->data);
  if (seen[0] && seen[1])
    radius = CLAMP (0.3 * hypot (x[1] - x[0], y[1] - y[0]), 2.5, radius);
  for (int k = 0; k < 2; k++)
    if (seen[k])
      draw_pole (cr, overlay, &over, x[k], y[k], radius, k == 0 ? -1 : 1);
}

static void
draw_item_axis (cairo_t *cr, const TfOverlay *overlay, const TfChartStyle *style,
                const TfOverlayItem *item)
{
  TfVertex positive = { item->positive[0], item->positive[1] },
           negative = { item->negative[0], item->negative[1] };
  g_autoptr (TfTrail) trail = tf_trail_new ();
  tf_trail_add_arc (trail, overlay, positive, negative, FALSE);
  cairo_new_path (cr);
  tf_trail_path (trail, cr);
  stroke_on (cr, tf_overlay_halo_colour (overlay), tf_overlay_line_colour (overlay, style, item),
             item->chosen ? 2 : 1.4, NULL, 0);
  draw_poles (cr, overlay, style, item);
}

/* -- lines of no outline --------------------------------------------------------------------- */

void
tf_overlay_stroke_line (cairo_t *cr, const TfOverlay *overlay, const TfChartStyle *style,
                        TfLineKind kind)
{
  static const struct
  {
    double dash[4], width;
    int n;
  } kinds[TF_N_LINE_KINDS] = {
    [TF_LINE_INVERSION] = { { 9, 2.5, 2, 2.5 }, 2.0, 4 },
    [TF_LINE_PENUMBRA] = { { 3, 2.5 }, 1.1, 2 },
    [TF_LINE_UMBRA] = { { 1.2, 1.4 }, 1.5, 2 },
  };
  TfOverlayItem plain = { .stroke = TF_STROKE_MARK };
  TfChartStyle over = tf_chart_style (overlay->on_dark, style->contrast, style->text_pt);
  TfColour line = kind == TF_LINE_INVERSION && !style->contrast
                      ? tf_chart_mix (over.teal, over.ink, overlay->on_dark ? 0.35 : 0)
                      : tf_overlay_line_colour (overlay, style, &plain);
  stroke_on (cr, tf_overlay_halo_colour (overlay), line,
             kinds[kind].width + (style->contrast ? 0.6 : 0), kinds[kind].dash, kinds[kind].n);
}

static void
along_points (double t, double *lon_deg, double *lat_deg, gconstpointer data)
{
  const TfOverlayLine *line = data;
  double at = t * (line->n - 1);
  guint k = MIN ((guint)at, line->n - 2);
  const TfVertex *a = &line->points[k], *b = a + 1;
  *lon_deg = a->lon_deg + (at - k) * remainder (b->lon_deg - a->lon_deg, 360);
  *lat_deg = a->lat_deg + (at - k) * (b->lat_deg - a->lat_deg);
}

static void
draw_lines (cairo_t *cr, const TfOverlay *overlay, const TfChartStyle *style)
{
  for (int kind = 0; kind < TF_N_LINE_KINDS; kind++)
    {
      g_autoptr (TfTrail) trail = tf_trail_new ();
      for (guint k = 0; k < overlay->n_lines; k++)
        if ((int)overlay->lines[k].kind == kind && overlay->lines[k].n > 1)
          tf_trail_add_line (trail, overlay, along_points, &overlay->lines[k],
                             overlay->lines[k].n - 1, FALSE);
      if (tf_trail_get_n_pieces (trail) == 0)
        continue;
      cairo_new_path (cr);
      tf_trail_path (trail, cr);
      tf_overlay_stroke_line (cr, overlay, style, (TfLineKind)kind);
    }
}

static void
draw_draft (cairo_t *cr, const TfOverlay *overlay, const TfChartStyle *style)
{
  static const double dash[] = { 2, 4 };
  TfOverlayItem item = { .chosen = TRUE };
  TfColour halo = tf_overlay_halo_colour (overlay),
           line = tf_overlay_line_colour (overlay, style, &item);
  guint n = overlay->n_draft;
  if (overlay->draft == NULL || n == 0)
    return;
  cairo_new_path (cr);
  for (guint k = 0; k < n; k++)
    cairo_line_to (cr, overlay->draft[k][0], overlay->draft[k][1]);
  stroke_on (cr, halo, line, 2, NULL, 0);
  if (n > 2) /* how it would close */
    {
      cairo_move_to (cr, overlay->draft[n - 1][0], overlay->draft[n - 1][1]);
      cairo_line_to (cr, overlay->draft[0][0], overlay->draft[0][1]);
      stroke_on (cr, halo, line, 1, dash, 2);
    }
  cairo_arc (cr, overlay->draft[0][0], overlay->draft[0][1], 3.5, 0, 2 * G_PI);
  tf_chart_set (cr, line);
  cairo_fill (cr);
}

/* Ghosts have a switch of their own: the caller gives them or not; what is being drawn is seen. */
static gboolean
shows_outline (const TfOverlay *overlay, const TfOverlayItem *item)
{
  gboolean always = item->stroke == TF_STROKE_GHOST || item->stroke == TF_STROKE_DRAFT;
  return item->outline != NULL && (overlay->outlines || always);
}

static void
draw_items (cairo_t *cr, const TfOverlay *overlay, const TfChartStyle *style, double (*boxes)[4])
{
  for (int chosen = 0; chosen <= 1; chosen++) /* the chosen one lies on top */
    for (guint k = 0; k < overlay->n_items; k++)
      {
        const TfOverlayItem *item = &overlay->items[k];
        if ((item->chosen != 0) != chosen)
          continue;
        if (shows_outline (overlay, item))
          draw_rings (cr, overlay, style, item, boxes[k]);
        if (overlay->axes)
          draw_item_axis (cr, overlay, style, item);
      }
}

void
tf_overlay_draw (cairo_t *cr, const TfOverlay *overlay, const TfChartStyle *style, TfArea area)
{
  g_return_if_fail (cr != NULL && overlay != NULL && style != NULL && overlay->project != NULL);
  double (*boxes)[4] = g_malloc_n (MAX (overlay->n_items, 1), sizeof (double[4]));
  for (guint k = 0; k < overlay->n_items; k++)
    {
      boxes[k][0] = boxes[k][1] = INFINITY;
      boxes[k][2] = boxes[k][3] = -INFINITY;
    }
  cairo_save (cr);
  cairo_rectangle (cr, area.x, area.y, area.width, area.height);
  cairo_clip (cr);
  cairo_set_antialias (cr, CAIRO_ANTIALIAS_FAST); /* half the time, and no eye sees it */
  if (overlay->graticule)
    draw_graticule (cr, overlay, style);
  draw_limb (cr, overlay, style);
  draw_lines (cr, overlay, style);
  draw_items (cr, overlay, style, boxes);
  draw_draft (cr, overlay, style);
  if (overlay->labels)
    tf_overlay_draw_labels (cr, overlay, style, area, boxes);
  cairo_restore (cr);
  g_free (boxes);
}

/* -- hit-testing ----------------------------------------------------------------------------- */

/* Square units of the outline as seen when it holds the point, else infinity. */
static double
hit_area (const TfOverlay *overlay, const TfOutline *outline, double x, double y)
{
  gboolean inside = FALSE;
  double square = 0;
  for (guint k = 0; k < tf_outline_get_n_rings (outline); k++)
    {
      guint n;
      const TfVertex *ring = tf_outline_get_ring (outline, k, FALSE, &n);
      g_autoptr (TfTrail) trail = tf_trail_new_ring (overlay, ring, n);
      inside ^= tf_trail_contains (trail, x, y);
      square += tf_trail_area (trail);
    }
  for (guint k = 0; inside && k < tf_outline_get_n_left_out (outline); k++)
    {
      guint n;
      const TfVertex *ring = tf_outline_get_ring (outline, k, TRUE, &n);
      g_autoptr (TfTrail) trail = tf_trail_new_ring (overlay, ring, n);
      if (tf_trail_contains (trail, x, y))
        inside = FALSE;
    }
  return inside ? square : INFINITY;
}

int
tf_overlay_hit (const TfOverlay *overlay, TfArea area, double x, double y)
{
  g_return_val_if_fail (overlay != NULL && overlay->project != NULL, -1);
  double best = INFINITY;
  int found = -1;
  if (!(x >= area.x && x <= area.x + area.width && y >= area.y && y <= area.y + area.height))
    return -1;
  for (guint k = 0; k < overlay->n_items; k++)
    {
      double square = overlay->items[k].outline != NULL
                          ? hit_area (overlay, overlay->items[k].outline, x, y)
                          : INFINITY;
      if (square < best)
        {
          best = square;
          found = (int)k;
        }
    }
  return found;
}
