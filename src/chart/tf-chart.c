/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-chart.h"
#include "tf-chart-private.h"

#include <glib/gi18n-lib.h>
#include <math.h>
#include <string.h>

#include "tf-number.h"

/* The palette. Against its ground text has a contrast of at least 4.5, a symbol at least 3 (ratios
 * of WCAG 2.1, 1.4.3 and 1.4.11); the amber of the light ground reaches it by the edge round its
 * disc. */
typedef struct
{
  guint32 ink, faint, ground, band, line;
  guint32 positive, negative, breaks, teal, slate;
} Palette;

static const Palette palettes[2][2] = {
  {
      { 0x23272E, 0x63676E, 0xFAF9F7, 0xECEBE8, 0xD3D2CE, 0xD98A00, 0x4B5FD6, 0xC7293A, 0x0D6B66,
        0x5B6470 },
      { 0x000000, 0x333333, 0xFFFFFF, 0xE2E2E2, 0x808080, 0x8A5600, 0x2B3BB0, 0xA00D20, 0x064D49,
        0x3B434C },
  },
  {
      { 0xE9EAEC, 0xA6AAB1, 0x1B1C20, 0x282A30, 0x43464E, 0xF0A32C, 0x8F9CFF, 0xFF6673, 0x45B8AF,
        0xA3ADB8 },
      { 0xFFFFFF, 0xD6D6D6, 0x000000, 0x262626, 0x8A8A8A, 0xFFBE55, 0xB3BDFF, 0xFF8F98, 0x74DCD3,
        0xCBD3DC },
  },
};

static TfColour
colour_of (guint32 rgb)
{
  return (TfColour){ (rgb >> 16 & 255) / 255.0, (rgb >> 8 & 255) / 255.0, (rgb & 255) / 255.0,
                     1.0 };
}

TfChartStyle
tf_chart_style (gboolean dark, gboolean contrast, double text_pt)
{
  const Palette *p = &palettes[dark ? 1 : 0][contrast ? 1 : 0];
  return (TfChartStyle){
    .dark = dark,
    .contrast = contrast,
    .text_pt = text_pt,
    .font = "Sans",
    .ink = colour_of (p->ink),
    .faint = colour_of (p->faint),
    .ground = colour_of (p->ground),
    .band = colour_of (p->band),
    .line = colour_of (p->line),
    .positive = colour_of (p->positive),
    .negative = colour_of (p->negative),
    .breaks = colour_of (p->breaks),
    .teal = colour_of (p->teal),
    .slate = colour_of (p->slate),
  };
}

void
tf_chart_set (cairo_t *cr, TfColour colour)
{
  cairo_set_source_rgba (cr, colour.r, colour.g, colour.b, colour.a);
}

void
tf_chart_set_alpha (cairo_t *cr, TfColour colour, double alpha)
{
  cairo_set_source_rgba (cr, colour.r, colour.g, colour.b, colour.a * alpha);
}

TfColour
tf_chart_mix (TfColour a, TfColour b, double share)
{
  return (TfColour){ a.r + share * (b.r - a.r), a.g + share * (b.g - a.g),
                     a.b + share * (b.b - a.b), a.a };
}

TfColour
tf_chart_edge (const TfChartStyle *style)
{
  return style->dark ? style->positive : tf_chart_mix (style->positive, style->ink, 0.4);
}

/* -- symbols --------------------------------------------------------------------------------- */


static void
circle (cairo_t *cr, double x, double y, double radius)
{
  cairo_new_sub_path (cr);
  cairo_arc (cr, x, y, radius, 0, 2 * G_PI);
  cairo_close_path (cr);
}

void
tf_chart_pole (cairo_t *cr, const TfChartStyle *style, double x, double y, double radius,
               int polarity)
{
  double width = CLAMP (radius * 0.36, 1.0, 3.0);
  cairo_save (cr);
  cairo_new_path (cr);
  if (polarity > 0)
    {
      double edge = CLAMP (radius * 0.16, 0.5, 1.2);
      circle (cr, x, y, radius - edge / 2);
      tf_chart_set (cr, style->positive);
      cairo_fill_preserve (cr);
      tf_chart_set (cr, tf_chart_edge (style));
      cairo_set_line_width (cr, edge);
      cairo_stroke (cr);
    }
  else if (polarity < 0)
    {
      circle (cr, x, y, radius * TF_RING_SHARE - width / 2);
      tf_chart_set (cr, style->negative);
      cairo_set_line_width (cr, width);
      cairo_stroke (cr);
    }
  else
    {
      double half = radius * 0.7;
      cairo_move_to (cr, x - half, y);
      cairo_line_to (cr, x + half, y);
      tf_chart_set (cr, style->slate);
      cairo_set_line_width (cr, width);
      cairo_stroke (cr);
    }
  cairo_restore (cr);
}

void
tf_chart_diamond_path (cairo_t *cr, double x, double y, double radius)
{
  cairo_move_to (cr, x, y - radius);
  cairo_line_to (cr, x + radius, y);
  cairo_line_to (cr, x, y + radius);
  cairo_line_to (cr, x - radius, y);
  cairo_close_path (cr);
}

/* On a large one a seam of the ground's colour parts the stroke from the red. */
static void
draw_struck (cairo_t *cr, const TfChartStyle *style, double x, double y, double radius)
{
  double reach = radius * 0.95, width = CLAMP (radius * 0.17, 1.0, 2.2);
  tf_chart_set (cr, style->breaks);
  cairo_fill (cr);
  cairo_set_line_cap (cr, CAIRO_LINE_CAP_ROUND);
  cairo_move_to (cr, x - reach, y + reach);
  cairo_line_to (cr, x + reach, y - reach);
  if (radius >= TF_SEAM_RADIUS)
    {
      tf_chart_set (cr, style->ground);
      cairo_set_line_width (cr, width + 1.2);
      cairo_stroke_preserve (cr);
    }
  tf_chart_set (cr, style->ink);
  cairo_set_line_width (cr, width);
  cairo_stroke (cr);
}

void
tf_chart_diamond (cairo_t *cr, const TfChartStyle *style, double x, double y, double radius,
                  TfDiamond kind)
{
  cairo_save (cr);
  cairo_new_path (cr);
  tf_chart_diamond_path (cr, x, y, kind == TF_DIAMOND_HOLLOW ? radius - 0.5 : radius);
  if (kind == TF_DIAMOND_STRUCK)
    draw_struck (cr, style, x, y, radius);
  else
    {
      tf_chart_set (cr, style->slate);
      cairo_set_line_width (cr, CLAMP (radius * 0.25, 1.0, 2.0));
      if (kind == TF_DIAMOND_PLAIN)
        cairo_fill (cr);
      else
        cairo_stroke (cr);
    }
  cairo_restore (cr);
}

/* -- text ------------------------------------------------------------------------------------ */

static PangoLayout *
new_layout (cairo_t *cr, const TfChartStyle *style, const char *text)
{
  PangoLayout *layout = pango_cairo_create_layout (cr);
  PangoFontDescription *font
      = pango_font_description_from_string (style->font != NULL ? style->font : "Sans");
  pango_font_description_set_absolute_size (font, MAX (style->text_pt, 1.0) * PANGO_SCALE);
  pango_layout_set_font_description (layout, font);
  pango_layout_set_text (layout, text, -1);
  pango_font_description_free (font);
  return layout;
}

void
tf_chart_measure (cairo_t *cr, const TfChartStyle *style, const char *text, double *width,
                  double *height)
{
  g_autoptr (PangoLayout) layout = new_layout (cr, style, text != NULL ? text : "");
  PangoRectangle box;
  pango_layout_get_extents (layout, NULL, &box);
  if (width != NULL)
    *width = (double)box.width / PANGO_SCALE;
  if (height != NULL)
    *height = (double)box.height / PANGO_SCALE;
}

static double
put_text (cairo_t *cr, const TfChartStyle *style, double x, double y, double align_x,
          double align_y, const TfColour *halo, TfColour colour, const char *text)
{
  if (text == NULL || *text == '\0' || !isfinite (x) || !isfinite (y))
    return 0;
  g_autoptr (PangoLayout) layout = new_layout (cr, style, text);
  PangoRectangle box;
  pango_layout_get_extents (layout, NULL, &box);
  double width = (double)box.width / PANGO_SCALE, height = (double)box.height / PANGO_SCALE;
  cairo_save (cr);
  cairo_new_path (cr);
  cairo_move_to (cr, x - align_x * width, y - align_y * height);
  if (halo != NULL)
    {
      pango_cairo_layout_path (cr, layout);
      tf_chart_set (cr, *halo);
      cairo_set_line_width (cr, 2.5);
      cairo_set_line_join (cr, CAIRO_LINE_JOIN_ROUND);
      cairo_stroke (cr);
      cairo_move_to (cr, x - align_x * width, y - align_y * height);
    }
  tf_chart_set (cr, colour);
  pango_cairo_show_layout (cr, layout);
  cairo_restore (cr);
  return width;
}

double
tf_chart_text (cairo_t *cr, const TfChartStyle *style, double x, double y, double align_x,
               double align_y, TfColour colour, const char *text)
{
  return put_text (cr, style, x, y, align_x, align_y, NULL, colour, text);
}

double
tf_chart_text_on (cairo_t *cr, const TfChartStyle *style, double x, double y, double align_x,
                  double align_y, TfColour halo, TfColour colour, const char *text)
{
  return put_text (cr, style, x, y, align_x, align_y, &halo, colour, text);
}

/* -- words ----------------------------------------------------------------------------------- */

char *
tf_chart_dup_place (double lat_deg, double cmd_deg)
{
  if (!isfinite (lat_deg))
    return g_strdup ("—");
  int lat = (int)lround (fabs (lat_deg));
  const char *north = lat_deg < 0 ? C_ ("south", "S") : C_ ("north", "N");
  if (!isfinite (cmd_deg))
    return g_strdup_printf ("%s%02d", north, lat);
  int cmd = (int)lround (fabs (cmd_deg));
  const char *west = cmd_deg < 0 ? C_ ("east", "E") : C_ ("west", "W");
  return g_strdup_printf ("%s%02d %s%02d", north, lat, west, cmd);
}

static void
append_superscript (GString *text, int number)
{
  static const char *const digits[] = { "⁰", "¹", "²", "³", "⁴", "⁵", "⁶", "⁷", "⁸", "⁹" };
  char plain[16];
  g_snprintf (plain, sizeof plain, "%d", number);
  for (const char *c = plain; *c != '\0'; c++)
    g_string_append (text, *c == '-' ? "⁻" : digits[*c - '0']);
}

char *
tf_chart_dup_flux (double mx)
{
  if (!isfinite (mx))
    return g_strdup ("—");
  if (!(fabs (mx) > 0))
    return g_strdup (_ ("0 Mx"));
  int power = (int)floor (log10 (fabs (mx)));
  double digits = fabs (mx) / pow (10, power);
  if (digits >= 9.95)
    {
      digits /= 10;
      power++;
    }
  g_autofree char *number = tf_number_dup_form (digits, ".1f", TRUE);
  GString *text = g_string_new (mx < 0 ? "−" : "");
  g_string_append_printf (text, "%s·10", number);
  append_superscript (text, power);
  g_string_append (text, " Mx");
  return g_string_free (text, FALSE);
}

char *
tf_chart_dup_degrees (double deg, gboolean sign)
{
  if (!isfinite (deg))
    return g_strdup ("—");
  long whole = lround (deg);
  return g_strdup_printf ("%s%ld°", whole < 0 ? "−" : sign && whole > 0 ? "+" : "", labs (whole));
}
