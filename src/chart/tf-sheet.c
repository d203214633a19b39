/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-sheet.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-chart-private.h"

#define TEXT_MOST_PT  9.0
#define TEXT_LEAST_PT 5.0
#define MARGIN        30.0 /* about a centimetre */
#define GAP           0.45 /* between columns and lines, of a letter's size */

/* A page that is being written: the same functions measure it and draw it. */
typedef struct
{
  cairo_t *cr;
  const TfChartStyle *style;
  TfArea area;  /* within the margins */
  double text;  /* letter size */
  double y;     /* where the next thing goes */
  double foot;  /* nothing below this */
  gboolean dry; /* only measured */
  guint left;   /* things that had no room */
} Page;

static PangoLayout *
new_layout (const Page *page, const char *text, double width, double size, gboolean bold)
{
  PangoLayout *layout = pango_cairo_create_layout (page->cr);
  PangoFontDescription *font = pango_font_description_from_string (page->style->font);
  pango_font_description_set_absolute_size (font, size * PANGO_SCALE);
  if (bold)
    pango_font_description_set_weight (font, PANGO_WEIGHT_BOLD);
  pango_layout_set_font_description (layout, font);
  pango_font_description_free (font);
  pango_layout_set_width (layout, (int)(width * PANGO_SCALE));
  pango_layout_set_wrap (layout, PANGO_WRAP_WORD_CHAR);
  pango_layout_set_text (layout, text, -1);
  return layout;
}

/* Draws a text that goes on in the next line; returns its height. */
static double
put_text (const Page *page, double x, double y, double width, double size, gboolean bold,
          TfColour colour, const char *text, gboolean dry)
{
  if (text == NULL || *text == '\0')
    return 0.0;
  PangoLayout *layout = new_layout (page, text, width, size, bold);
  int height;
  pango_layout_get_size (layout, NULL, &height);
  if (!dry)
    {
      tf_chart_set (page->cr, colour);
      cairo_move_to (page->cr, x, y);
      pango_cairo_show_layout (page->cr, layout);
    }
  g_object_unref (layout);
  return (double)height / PANGO_SCALE;
}

static void
rule (const Page *page, double y)
{
  if (page->dry)
    return;
  tf_chart_set (page->cr, page->style->line);
  cairo_set_line_width (page->cr, 0.5);
  cairo_move_to (page->cr, page->area.x, y);
  cairo_line_to (page->cr, page->area.x + page->area.width, y);
  cairo_stroke (page->cr);
}

/* A line of its own over the whole width; one without room is counted. */
static void
add_text (Page *page, double size, gboolean bold, TfColour colour, const char *text)
{
  double height = put_text (page, page->area.x, page->y, page->area.width, size, bold, colour, text, TRUE);
  if (page->y + height > page->foot)
    {
      page->left++;
      return;
    }
  put_text (page, page->area.x, page->y, page->area.width, size, bold, colour, text, page->dry);
  page->y += height + (height > 0.0 ? GAP * page->text : 0.0);
}

static void
add_head (Page *page, const char *title, const char *subtitle)
{
  add_text (page, 1.7 * page->text, TRUE, page->style->ink, title);
  add_text (page, page->text, FALSE, page->style->faint, subtitle);
}

/* The cautions stand at the foot; what comes before them ends above. */
static void
reserve_foot (Page *page, const char *const *cautions)
{
  double height = 0.0, y = page->area.y + page->area.height;
  for (guint k = 0; cautions != NULL && cautions[k] != NULL; k++)
    height += put_text (page, page->area.x, 0, page->area.width, page->text, FALSE, page->style->ink, cautions[k], TRUE);
  page->foot = y - height - 2.0 * page->text;
  rule (page, page->foot + 0.5 * page->text);
  y -= height;
  for (guint k = 0; cautions != NULL && cautions[k] != NULL; k++)
    y += put_text (page, page->area.x, y, page->area.width, page->text, FALSE, page->style->ink, cautions[k], page->dry);
}

/* -- the table ---------------------------------------------------------------------------------- */

static double
row_height (Page *page, const char *const *cells, const double *widths, gboolean bold, gboolean draw)
{
  double sum = 0.0, x = page->area.x, most = 0.0;
  for (guint k = 0; k < TF_SHEET_COLUMNS; k++)
    sum += widths[k];
  for (guint k = 0; k < TF_SHEET_COLUMNS; k++)
    {
      double width = page->area.width * widths[k] / sum;
      if (widths[k] > 0.0)
        most = fmax (most, put_text (page, x, page->y, width - GAP * page->text, page->text, bold, page->style->ink,
                                     cells[k], !draw || page->dry));
      x += width;
    }
  return most;
}

static void
add_row (Page *page, const char *const *cells, const double *widths, gboolean bold)
{
  double height = row_height (page, cells, widths, bold, FALSE) + GAP * page->text;
  if (page->y + height > page->foot)
    {
      page->left++;
      return;
    }
  row_height (page, cells, widths, bold, TRUE);
  page->y += height;
  rule (page, page->y - 0.5 * GAP * page->text);
}

static void
add_lines (Page *page, const TfShiftSheet *sheet)
{
  add_row (page, sheet->columns, sheet->widths, TRUE);
  for (guint k = 0; k < sheet->n_lines; k++)
    {
      const TfSheetLine *line = &sheet->lines[k];
      if (line->heading != NULL)
        add_text (page, page->text, TRUE, page->style->teal, line->heading);
      else
        add_row (page, line->cells, sheet->widths, FALSE);
    }
}

static void
add_notes (Page *page, const char *title, const char *const *notes)
{
  if (notes == NULL || notes[0] == NULL)
    return;
  page->y += page->text;
  add_text (page, 1.15 * page->text, TRUE, page->style->ink, title);
  for (guint k = 0; notes[k] != NULL; k++)
    add_text (page, page->text, FALSE, page->style->ink, notes[k]);
}

static Page
page_new (cairo_t *cr, const TfChartStyle *style, TfArea area, double text, gboolean dry)
{
  Page page = { .cr = cr, .style = style, .text = text, .dry = dry };
  page.area = (TfArea){ area.x + MARGIN, area.y + MARGIN, area.width - 2 * MARGIN, area.height - 2 * MARGIN };
  page.y = page.area.y;
  return page;
}

static void
say_left (Page *page)
{
  if (page->left == 0)
    return;
  g_autofree char *text = g_strdup_printf (
      ngettext ("%u line has no room on this page; the JSON has all of them", "%u lines have no room on this page; the JSON has all of them",
                page->left),
      page->left);
  put_text (page, page->area.x, page->foot - 0.8 * page->text, page->area.width, page->text, TRUE, page->style->ink, text, page->dry);
}

typedef void (*PageFunc) (Page *page, gconstpointer sheet);

/* The largest letters with which everything has room. */
static guint
write_page (cairo_t *cr, const TfChartStyle *style, TfArea area, PageFunc func, gconstpointer sheet)
{
  double text = TEXT_MOST_PT;
  for (;; text -= 0.25)
    {
      Page dry = page_new (cr, style, area, text, TRUE);
      func (&dry, sheet);
      if (dry.left == 0 || text <= TEXT_LEAST_PT)
        break;
    }
  Page page = page_new (cr, style, area, text, FALSE);
  func (&page, sheet);
  say_left (&page);
  return page.left;
}

static void
write_shift (Page *page, gconstpointer data)
{
  const TfShiftSheet *sheet = data;
  reserve_foot (page, sheet->cautions);
  add_head (page, sheet->title, sheet->subtitle);
  page->y += 0.5 * page->text;
  add_lines (page, sheet);
  add_notes (page, sheet->notes_title, sheet->notes);
}

guint
tf_shift_sheet_draw (cairo_t *cr, const TfShiftSheet *sheet, const TfChartStyle *style, TfArea area)
{
  g_return_val_if_fail (cr != NULL && sheet != NULL && style != NULL, 0);
  return write_page (cr, style, area, write_shift, sheet);
}

/* -- one region --------------------------------------------------------------------------------- */

#define PICTURE_SHARE 0.62 /* of the page's width; the dial has the rest */
#define DIAL_TEXT     7.0

static void
add_pictures (Page *page, const TfRegionSheet *sheet)
{
  double side = PICTURE_SHARE * page->area.width, rest = page->area.width - side - 2 * page->text;
  if (!page->dry && sheet->picture != NULL)
    sheet->picture (page->cr, page->style, (TfArea){ page->area.x, page->y, side, side }, sheet->picture_data);
  if (!page->dry && sheet->dial != NULL)
    {
      TfChartStyle style = *page->style;
      style.text_pt = DIAL_TEXT;
      tf_dial_draw (page->cr, sheet->dial, &style, (TfArea){ page->area.x + side + 2 * page->text, page->y, rest, rest * 1.15 });
    }
  page->y += side + 0.4 * page->text;
  add_text (page, 0.9 * page->text, FALSE, page->style->faint, sheet->picture_words);
}

static void
add_figures (Page *page, const TfRegionSheet *sheet)
{
  static const double widths[TF_SHEET_COLUMNS] = { 0.24, 0.3, 0.46 };
  for (guint k = 0; k < sheet->n_figures; k++)
    {
      const TfSheetFigure *figure = &sheet->figures[k];
      const char *cells[TF_SHEET_COLUMNS] = { figure->label, figure->value, figure->how };
      add_row (page, cells, widths, FALSE);
    }
}

static void
write_region (Page *page, gconstpointer data)
{
  const TfRegionSheet *sheet = data;
  reserve_foot (page, sheet->cautions);
  add_head (page, sheet->title, sheet->subtitle);
  page->y += 0.5 * page->text;
  add_pictures (page, sheet);
  page->y += 0.5 * page->text;
  add_figures (page, sheet);
  add_notes (page, _ ("Notes"), sheet->notes);
}

guint
tf_region_sheet_draw (cairo_t *cr, const TfRegionSheet *sheet, const TfChartStyle *style, TfArea area)
{
  g_return_val_if_fail (cr != NULL && sheet != NULL && style != NULL, 0);
  return write_page (cr, style, area, write_region, sheet);
}
