/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-overlay-private.h"

#include <math.h>

#include "tf-chart-private.h"
#include "tf-verdict.h"

#define GAP 4.0

typedef double Box[4]; /* x0, y0, x1, y1 */

static gboolean
overlap (const double a[4], const double b[4])
{
  return a[0] < b[2] && b[0] < a[2] && a[1] < b[3] && b[1] < a[3];
}

static gboolean
within (const double a[4], TfArea area)
{
  return a[0] >= area.x && a[1] >= area.y && a[2] <= area.x + area.width
         && a[3] <= area.y + area.height;
}

/* The places to try, in order: above, below, right, left of the outline. */
static void
place_at (int place, const double outline[4], double width, double height, double label[4])
{
  double x = (outline[0] + outline[2] - width) / 2, y = (outline[1] + outline[3] - height) / 2;
  if (place == 0)
    y = outline[1] - GAP - height;
  else if (place == 1)
    y = outline[3] + GAP;
  else if (place == 2)
    x = outline[2] + GAP;
  else
    x = outline[0] - GAP - width;
  label[0] = x;
  label[1] = y;
  label[2] = x + width;
  label[3] = y + height;
}

/* Outlines and labels that a label at @label would lie upon; one outside the area counts as many.
 * */
static guint
clashes (const double label[4], TfArea area, double (*boxes)[4], guint n, const GArray *taken)
{
  guint found = within (label, area) ? 0 : 1000;
  for (guint k = 0; k < n; k++)
    found += boxes[k][2] >= boxes[k][0] && overlap (label, boxes[k]);
  for (guint k = 0; k < taken->len; k++)
    found += 2 * overlap (label, g_array_index (taken, Box, k));
  return found;
}

static void
draw_label (cairo_t *cr, const TfOverlay *overlay, const TfChartStyle *style,
            const TfOverlayItem *item, const double label[4], gboolean breaks)
{
  double x = label[0], y = (label[1] + label[3]) / 2, radius = style->text_pt * 0.42;
  TfColour halo = tf_overlay_halo_colour (overlay);
  if (breaks)
    {
      TfChartStyle over = tf_chart_style (overlay->on_dark, style->contrast, style->text_pt);
      over.slate = tf_overlay_line_colour (overlay, style, item); /* a rim, else only the stroke shows */
      tf_chart_diamond (cr, &over, x + radius, y, radius + 1.5, TF_DIAMOND_PLAIN);
      tf_chart_diamond (cr, &over, x + radius, y, radius, TF_DIAMOND_STRUCK);
      x += 2 * radius + GAP;
    }
  tf_chart_text_on (cr, style, x, y, 0, 0.5, halo, tf_overlay_line_colour (overlay, style, item),
                    item->label);
}

static void
place_label (cairo_t *cr, const TfOverlay *overlay, const TfChartStyle *style, TfArea area,
             double (*boxes)[4], guint k, GArray *taken)
{
  const TfOverlayItem *item = &overlay->items[k];
  gboolean breaks = item->verdict == TF_VERDICT_BREAKS;
  Box best = { 0 }, label;
  double width, height;
  guint least = G_MAXUINT;
  tf_chart_measure (cr, style, item->label, &width, &height);
  if (breaks)
    width += style->text_pt * 0.84 + GAP;
  for (int place = 0; place < 4; place++)
    {
      place_at (place, boxes[k], width, height, label);
      guint found = clashes (label, area, boxes, overlay->n_items, taken);
      if (found < least)
        {
          least = found;
          for (int j = 0; j < 4; j++)
            best[j] = label[j];
        }
    }
  g_array_append_val (taken, best);
  draw_label (cr, overlay, style, item, best, breaks);
}

/* The chosen item is placed first, so that it has the first choice. */
void
tf_overlay_draw_labels (cairo_t *cr, const TfOverlay *overlay, const TfChartStyle *style,
                        TfArea area, double (*boxes)[4])
{
  g_autoptr (GArray) taken = g_array_new (FALSE, FALSE, sizeof (Box));
  double seen[4] = { area.x, area.y, area.x + area.width, area.y + area.height };
  for (int chosen = 1; chosen >= 0; chosen--)
    for (guint k = 0; k < overlay->n_items; k++)
      {
        const TfOverlayItem *item = &overlay->items[k];
        if ((item->chosen != 0) != chosen || item->label == NULL || *item->label == '\0')
          continue;
        if (boxes[k][2] >= boxes[k][0] && overlap (boxes[k], seen))
          place_label (cr, overlay, style, area, boxes, k, taken);
      }
}
