/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-plate-figure.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-chart-private.h"
#include "tf-overlay-private.h"
#include "tf-verdict.h"

#define LINE_HEIGHT 1.5 /* of the text's size */
#define SAMPLE      2.6 /* width of a legend's sample, of the text's size */

/* -- what is in it --------------------------------------------------------------------------- */

typedef enum
{
  SIGN_MARK,
  SIGN_HINT,
  SIGN_GHOST,
  SIGN_DRAFT,
  SIGN_POSITIVE,
  SIGN_NEGATIVE,
  SIGN_BREAKS,
  SIGN_INVERSION,
  SIGN_PENUMBRA,
  SIGN_UMBRA,
  N_SIGNS
} Sign;

static const char *const sign_names[N_SIGNS] = {
  N_ ("mark"),
  N_ ("hint, nobody has judged it"),
  N_ ("outline of the frame before"),
  N_ ("draft"),
  N_ ("positive pole"),
  N_ ("negative pole"),
  N_ ("breaks Hale’s law"),
  N_ ("inversion line"),
  N_ ("edge of a penumbra"),
  N_ ("edge of an umbra"),
};

static void
find_item_signs (const TfPlateFigure *figure, gboolean in[N_SIGNS])
{
  static const Sign of_stroke[] = { [TF_STROKE_HINT] = SIGN_HINT,
                                    [TF_STROKE_MARK] = SIGN_MARK,
                                    [TF_STROKE_DRAFT] = SIGN_DRAFT,
                                    [TF_STROKE_GHOST] = SIGN_GHOST };
  const TfOverlay *overlay = &figure->overlay;
  for (guint k = 0; k < overlay->n_items; k++)
    {
      const TfOverlayItem *item = &overlay->items[k];
      gboolean ghost = item->stroke == TF_STROKE_GHOST, axis = isfinite (item->positive[0]);
      in[of_stroke[item->stroke]] |= overlay->outlines || ghost;
      in[SIGN_POSITIVE] |= overlay->axes && axis;
      in[SIGN_NEGATIVE] |= overlay->axes && axis;
      in[SIGN_BREAKS] |= overlay->outlines && item->verdict == TF_VERDICT_BREAKS;
    }
}

static void
find_signs (const TfPlateFigure *figure, gboolean in[N_SIGNS])
{
  static const Sign of_line[] = { [TF_LINE_INVERSION] = SIGN_INVERSION,
                                  [TF_LINE_PENUMBRA] = SIGN_PENUMBRA,
                                  [TF_LINE_UMBRA] = SIGN_UMBRA };
  for (int k = 0; k < N_SIGNS; k++)
    in[k] = FALSE;
  find_item_signs (figure, in);
  for (guint k = 0; k < figure->overlay.n_lines; k++)
    in[of_line[figure->overlay.lines[k].kind]] = TRUE;
}

/* -- the legend ------------------------------------------------------------------------------ */

static void
draw_line_sample (cairo_t *cr, const TfPlateFigure *figure, const TfChartStyle *style, Sign sign,
                  double x, double y, double width)
{
  static const TfStroke strokes[] = { [SIGN_MARK] = TF_STROKE_MARK,
                                      [SIGN_HINT] = TF_STROKE_HINT,
                                      [SIGN_GHOST] = TF_STROKE_GHOST,
                                      [SIGN_DRAFT] = TF_STROKE_DRAFT };
  TfOverlay light = figure->overlay;
  light.on_dark = style->dark;
  cairo_new_path (cr);
  cairo_move_to (cr, x, y);
  cairo_line_to (cr, x + width, y);
  if (sign <= SIGN_DRAFT)
    tf_overlay_stroke_outline (cr, &light, style, strokes[sign], sign == SIGN_DRAFT);
  else
    tf_overlay_stroke_line (cr, &light, style, (TfLineKind)(sign - SIGN_INVERSION));
}

static void
draw_sample (cairo_t *cr, const TfPlateFigure *figure, const TfChartStyle *style, Sign sign,
             double x, double y)
{
  double width = SAMPLE * style->text_pt, radius = style->text_pt * 0.42, middle = x + width / 2;
  if (sign == SIGN_POSITIVE || sign == SIGN_NEGATIVE)
    tf_chart_pole (cr, style, middle, y, radius, sign == SIGN_POSITIVE ? 1 : -1);
  else if (sign == SIGN_BREAKS)
    tf_chart_diamond (cr, style, middle, y, radius * 1.15, TF_DIAMOND_STRUCK);
  else
    draw_line_sample (cr, figure, style, sign, x, y, width);
}

/* Entries from the left, a new row where one does not fit. Returns the rows; draws with @cr. */
static guint
lay_legend (cairo_t *cr, const TfPlateFigure *figure, const TfChartStyle *style, double x, double y,
            double width, gboolean draw)
{
  gboolean in[N_SIGNS];
  double gap = style->text_pt, at = 0;
  guint rows = 0;
  find_signs (figure, in);
  for (int k = 0; k < N_SIGNS; k++)
    {
      double text;
      if (!in[k])
        continue;
      tf_chart_measure (cr, style, _ (sign_names[k]), &text, NULL);
      double need = SAMPLE * style->text_pt + gap / 2 + text;
      if (rows == 0 || at + need > width)
        {
          rows++;
          at = 0;
        }
      double row_y = y + (rows - 0.5) * LINE_HEIGHT * style->text_pt;
      if (draw)
        {
          draw_sample (cr, figure, style, (Sign)k, x + at, row_y);
          tf_chart_text (cr, style, x + at + need - text, row_y, 0, 0.5, style->ink,
                         _ (sign_names[k]));
        }
      at += need + gap;
    }
  return rows;
}

/* -- scale bar and range --------------------------------------------------------------------- */

double
tf_plate_figure_bar (const TfPlateFigure *figure)
{
  double fifth = figure->width / 5 / figure->units_a_mm;
  if (!(fifth > 0) || !isfinite (fifth))
    return NAN;
  double ten = pow (10, floor (log10 (fifth))), share = fifth / ten;
  return ten * (share < 2 ? 1 : share < 5 ? 2 : 5);
}

/* At the lower left of the picture, in the picture's own units. */
static void
draw_bar (cairo_t *cr, const TfPlateFigure *figure, const TfChartStyle *style)
{
  double mm = tf_plate_figure_bar (figure);
  if (isnan (mm))
    return;
  double length = mm * figure->units_a_mm, x = style->text_pt, y = figure->height - style->text_pt;
  TfColour ink = { 1, 1, 1, 0.95 }, halo = tf_overlay_halo_colour (&figure->overlay);
  for (int k = 0; k < 2; k++)
    {
      cairo_new_path (cr);
      cairo_move_to (cr, x, y - style->text_pt * 0.3);
      cairo_line_to (cr, x, y);
      cairo_line_to (cr, x + length, y);
      cairo_line_to (cr, x + length, y - style->text_pt * 0.3);
      tf_chart_set (cr, k == 0 ? halo : ink);
      cairo_set_line_width (cr, k == 0 ? style->text_pt * 0.35 : style->text_pt * 0.12);
      cairo_stroke (cr);
    }
  g_autofree char *words = figure->scale_at != NULL
                               ? g_strdup_printf (_ ("%g Mm %s"), mm, figure->scale_at)
                               : g_strdup_printf (_ ("%g Mm"), mm);
  tf_chart_text_on (cr, style, x, y - style->text_pt * 0.5, 0, 1, halo, ink, words);
}

static TfColour
colour_of (guint32 rgb)
{
  return (TfColour){ (rgb >> 16 & 255) / 255.0, (rgb >> 8 & 255) / 255.0, (rgb & 255) / 255.0, 1 };
}

static void
draw_range (cairo_t *cr, const TfPlateFigure *figure, const TfChartStyle *style, double x, double y)
{
  const guint32 colours[] = { figure->low, figure->middle, figure->high };
  double width = style->text_pt * 9, height = style->text_pt * 0.8;
  g_autofree char *low = g_strdup_printf (_ ("−%.0f G"), figure->range_gauss),
                  *high = g_strdup_printf (_ ("+%.0f G"), figure->range_gauss);
  double at = x + tf_chart_text (cr, style, x, y, 0, 0.5, style->ink, low) + style->text_pt * 0.5;
  cairo_pattern_t *ramp = cairo_pattern_create_linear (at, 0, at + width, 0);
  for (int k = 0; k < 3; k++)
    {
      TfColour c = colour_of (colours[k]);
      cairo_pattern_add_color_stop_rgb (ramp, k / 2.0, c.r, c.g, c.b);
    }
  cairo_rectangle (cr, at, y - height / 2, width, height);
  cairo_set_source (cr, ramp);
  cairo_fill_preserve (cr);
  cairo_pattern_destroy (ramp);
  tf_chart_set (cr, style->line);
  cairo_set_line_width (cr, 0.5);
  cairo_stroke (cr);
  tf_chart_text (cr, style, at + width + style->text_pt * 0.5, y, 0, 0.5, style->ink, high);
}

/* -- the whole ------------------------------------------------------------------------------- */

/* Labels of the picture keep the size of the page's, whatever the picture is scaled by. */
static void
draw_picture (cairo_t *cr, const TfPlateFigure *figure, const TfChartStyle *style, TfArea area)
{
  double scale = area.width / figure->width;
  TfChartStyle over = tf_chart_style (TRUE, style->contrast, style->text_pt / scale);
  over.font = style->font;
  cairo_save (cr);
  cairo_translate (cr, area.x, area.y);
  cairo_rectangle (cr, 0, 0, area.width, area.height);
  cairo_clip (cr);
  cairo_scale (cr, scale, scale);
  if (figure->picture != NULL)
    {
      double shrink = figure->width / cairo_image_surface_get_width (figure->picture);
      cairo_save (cr);
      cairo_scale (cr, shrink, shrink);
      cairo_set_source_surface (cr, figure->picture, 0, 0);
      cairo_paint (cr);
      cairo_restore (cr);
    }
  tf_overlay_draw (cr, &figure->overlay, &over, (TfArea){ 0, 0, figure->width, figure->height });
  draw_bar (cr, figure, &over);
  cairo_restore (cr);
}

static guint
n_lines (const char *text)
{
  guint n = text != NULL && *text != '\0' ? 1 : 0;
  for (; n > 0 && *text != '\0'; text++)
    n += *text == '\n' ? 1 : 0;
  return n;
}

double
tf_plate_figure_height (const TfPlateFigure *figure, const TfChartStyle *style, double width)
{
  g_return_val_if_fail (figure != NULL && style != NULL && figure->width > 0, width);
  cairo_surface_t *nothing = cairo_recording_surface_create (CAIRO_CONTENT_COLOR, NULL);
  cairo_t *cr = cairo_create (nothing);
  guint rows = n_lines (figure->head) + 1 + n_lines (figure->caution)
               + lay_legend (cr, figure, style, 0, 0, width - style->text_pt, FALSE);
  cairo_destroy (cr);
  cairo_surface_destroy (nothing);
  return width * figure->height / figure->width + (rows + 0.5) * LINE_HEIGHT * style->text_pt;
}

static double
draw_words (cairo_t *cr, const TfChartStyle *style, double x, double y, const char *text)
{
  g_auto (GStrv) lines = g_strsplit (text != NULL ? text : "", "\n", -1);
  double step = LINE_HEIGHT * style->text_pt;
  for (guint k = 0; lines[k] != NULL; k++, y += step)
    tf_chart_text (cr, style, x, y + step / 2, 0, 0.5, style->ink, lines[k]);
  return y;
}

void
tf_plate_figure_draw (cairo_t *cr, const TfPlateFigure *figure, const TfChartStyle *style,
                      TfArea area)
{
  g_return_if_fail (cr != NULL && figure != NULL && style != NULL && figure->width > 0);
  double step = LINE_HEIGHT * style->text_pt;
  TfArea picture = { area.x, area.y, area.width, area.width * figure->height / figure->width };
  draw_picture (cr, figure, style, picture);
  double x = area.x + style->text_pt / 2, width = area.width - style->text_pt;
  double y = picture.y + picture.height + step / 3;
  y = draw_words (cr, style, x, y, figure->head);
  draw_range (cr, figure, style, x, y + step / 2);
  y += step;
  y += step * lay_legend (cr, figure, style, x, y, width, TRUE);
  if (figure->caution != NULL)
    draw_words (cr, style, x, y, figure->caution);
}
