/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-dial.h"
#include "tf-chart-private.h"

#include <glib/gi18n-lib.h>
#include <math.h>

/* Where the parts of a dial lie in its area. */
typedef struct
{
  double x, y, radius;   /* the circle */
  gboolean words;        /* room for labels at all */
  gboolean beside;       /* leader and witnesses stand at the right; else under the circle */
  double side_x, side_y; /* where they begin */
  double name_y;         /* top of the relation's name */
} Layout;

#define PAD        4.0
#define MIN_TEXT   8.0
#define SIDE_LINES 4.2 /* of the column beside the circle; it ends above the name */

static double
line_height (const TfChartStyle *style)
{
  return style->text_pt * 1.45;
}

static double
pole_radius (const Layout *at)
{
  return CLAMP (at->radius * 0.085, 2.5, 9.0);
}

/* Width of the column with the expected leader and the witnesses. */
static double
side_width (cairo_t *cr, const TfChartStyle *style)
{
  double a, b;
  tf_chart_measure (cr, style, _ ("expected"), &a, NULL);
  tf_chart_measure (cr, style, _ ("witnesses"), &b, NULL);
  return MAX (MAX (a, b), style->text_pt * 4.5);
}

static double
under_width (cairo_t *cr, const TfChartStyle *style)
{
  double words;
  tf_chart_measure (cr, style, _ ("witnesses"), &words, NULL);
  return words + 4 * PAD + 8 * style->text_pt * 0.38;
}

/* The words in a size in which they fit the width, not below MIN_TEXT. */
static TfChartStyle
fit_words (cairo_t *cr, const TfDial *dial, const TfChartStyle *style, double width)
{
  TfChartStyle fit = *style;
  for (; fit.text_pt > MIN_TEXT; fit.text_pt = MAX (fit.text_pt * 0.9, MIN_TEXT))
    {
      double name = 0;
      if (dial->joy_name != NULL)
        tf_chart_measure (cr, &fit, dial->joy_name, &name, NULL);
      if (MAX (name + 2 * PAD, under_width (cr, &fit)) <= width)
        break;
    }
  return fit;
}

static Layout
lay_out (cairo_t *cr, const TfDial *dial, const TfChartStyle *style, TfArea area)
{
  Layout at = { .x = area.x + area.width / 2, .y = area.y + area.height / 2 };
  double line = line_height (style), letter = style->text_pt * 1.2;
  double bare = MIN (area.width, area.height) / 2 - PAD;
  at.radius = MAX (bare, 1.0);
  if (!(style->text_pt > 0) || bare < 2.2 * line || under_width (cr, style) > area.width)
    return at;
  at.words = TRUE;
  double foot = dial->joy_name != NULL && isfinite (dial->joy_deg) ? line + 2 : 0;
  double side = side_width (cr, style) + 2 * PAD;
  double beside = MIN (area.width / 2 - letter - PAD - side, (area.height - foot) / 2 - PAD);
  double under = MIN (area.width / 2 - letter - 2 * PAD, (area.height - foot - 2 * line) / 2 - PAD);
  double column = SIDE_LINES * line;
  at.beside = beside >= under && PAD + column + foot <= area.height;
  at.radius = MAX (at.beside ? beside : under, 1.0);
  at.y = area.y + PAD + MAX (at.radius, at.beside ? column / 2 : 0);
  at.name_y = at.y + at.radius + 3;
  at.side_x = area.x + PAD;
  at.side_y = at.name_y + foot;
  if (at.beside)
    {
      at.side_x = at.x + at.radius + letter + 2 * PAD;
      at.side_y = MAX (area.y + PAD, at.y + MIN (0.7 * line, at.radius - column));
      at.name_y = MAX (at.name_y, at.side_y + column);
    }
  return at;
}

/* -- the drawing ----------------------------------------------------------------------------- */

/* Both wedges of half width @half about a bearing, as one path. */
static void
fan_path (cairo_t *cr, const Layout *at, double radius, double bearing_deg, double half_deg)
{
  double middle = -bearing_deg * G_PI / 180, half = MIN (half_deg, 90) * G_PI / 180;
  cairo_new_path (cr);
  for (int turn = 0; turn < 2; turn++)
    {
      double angle = middle + turn * G_PI;
      cairo_move_to (cr, at->x, at->y);
      cairo_arc (cr, at->x, at->y, radius, angle - half, angle + half);
      cairo_close_path (cr);
    }
}

/* Joy's law gives a tilt that is positive equatorwards; the bearing is counted towards north. */
static double
joy_bearing (const TfDial *dial)
{
  return dial->lat_deg < 0 ? dial->joy_deg : -dial->joy_deg;
}

static gboolean
has_joy (const TfDial *dial)
{
  return isfinite (dial->joy_deg) && isfinite (dial->joy_scatter_deg) && isfinite (dial->lat_deg);
}

static void
draw_joy (cairo_t *cr, const Layout *at, const TfDial *dial, const TfChartStyle *style)
{
  fan_path (cr, at, at->radius, joy_bearing (dial), dial->joy_scatter_deg);
  tf_chart_set (cr, tf_chart_mix (style->ground, style->slate, style->dark ? 0.34 : 0.24));
  cairo_fill_preserve (cr);
  if (style->contrast)
    {
      tf_chart_set (cr, style->slate);
      cairo_set_line_width (cr, 1);
      cairo_stroke (cr);
    }
  cairo_new_path (cr);
}

static void
draw_circle (cairo_t *cr, const Layout *at, const TfChartStyle *style)
{
  static const double dash[] = { 3, 3 };
  cairo_new_path (cr);
  cairo_arc (cr, at->x, at->y, at->radius, 0, 2 * G_PI);
  tf_chart_set (cr, tf_chart_mix (style->ground, style->slate, 0.6));
  cairo_set_line_width (cr, 1);
  cairo_stroke (cr);
  cairo_save (cr);
  cairo_set_dash (cr, dash, 2, 0);
  cairo_move_to (cr, at->x - at->radius, at->y);
  cairo_line_to (cr, at->x + at->radius, at->y);
  cairo_stroke (cr);
  cairo_restore (cr);
  cairo_move_to (cr, at->x, at->y - at->radius);
  cairo_line_to (cr, at->x, at->y - at->radius + CLAMP (at->radius * 0.1, 2, 6));
  cairo_stroke (cr);
}

static void
draw_axis (cairo_t *cr, const Layout *at, const TfDial *dial, const TfChartStyle *style)
{
  double pole = pole_radius (at), reach = at->radius - pole - 2;
  double angle = dial->bearing_deg * G_PI / 180;
  double dx = cos (angle), dy = -sin (angle);
  if (isfinite (dial->sigma_deg) && dial->sigma_deg > 0)
    {
      fan_path (cr, at, at->radius - 1, dial->bearing_deg, dial->sigma_deg);
      tf_chart_set_alpha (cr, style->ink, style->contrast ? 0.45 : 0.3);
      cairo_fill (cr);
    }
  double bar = MAX (reach - pole, 1);
  cairo_move_to (cr, at->x - dx * bar, at->y - dy * bar);
  cairo_line_to (cr, at->x + dx * bar, at->y + dy * bar);
  tf_chart_set (cr, style->ink);
  cairo_set_line_width (cr, CLAMP (at->radius * 0.03, 1.2, 3));
  cairo_stroke (cr);
  for (int end = -1; end <= 1; end += 2)
    {
      double x = at->x + end * dx * reach, y = at->y + end * dy * reach;
      cairo_arc (cr, x, y, pole + 1.5, 0, 2 * G_PI);
      tf_chart_set (cr, style->ground);
      cairo_fill (cr);
      tf_chart_pole (cr, style, x, y, pole, end * dial->leading_polarity);
    }
}

static void
draw_witnesses (cairo_t *cr, const TfDial *dial, const TfChartStyle *style, double x, double y,
                double radius)
{
  for (int k = 0; k < 3; k++)
    {
      double at = x + radius + k * radius * 3;
      if (dial->witnesses[k] == 2)
        {
          cairo_arc (cr, at, y, 1.2, 0, 2 * G_PI);
          tf_chart_set (cr, style->faint);
          cairo_fill (cr);
        }
      else
        tf_chart_pole (cr, style, at, y, radius, dial->witnesses[k]);
    }
}

/* A label and a symbol after it, or, in the column at the right, below it. */
static double
draw_expected (cairo_t *cr, const TfDial *dial, const TfChartStyle *style, double x, double y,
               double radius)
{
  double width = tf_chart_text (cr, style, x, y, 0, 0.5, style->faint, _ ("expected"));
  tf_chart_pole (cr, style, x + width + 2 * PAD + radius, y, radius, dial->expected);
  return width + 2 * PAD + 2 * radius;
}

static void
draw_beside (cairo_t *cr, const Layout *at, const TfDial *dial, const TfChartStyle *style)
{
  double radius = style->text_pt * 0.38, line = line_height (style), y = at->side_y + line / 2;
  tf_chart_text (cr, style, at->side_x, y, 0, 0.5, style->faint, _ ("expected"));
  y += line;
  tf_chart_pole (cr, style, at->side_x + radius, y, radius, dial->expected);
  y += line * 1.1;
  tf_chart_text (cr, style, at->side_x, y, 0, 0.5, style->faint, _ ("witnesses"));
  draw_witnesses (cr, dial, style, at->side_x, y + line, radius);
}

static void
draw_under (cairo_t *cr, const Layout *at, const TfDial *dial, const TfChartStyle *style)
{
  double radius = style->text_pt * 0.38, line = line_height (style), words;
  tf_chart_measure (cr, style, _ ("witnesses"), &words, NULL);
  double x = at->side_x, y = at->side_y + line / 2;
  draw_expected (cr, dial, style, x, y, radius);
  y += line;
  tf_chart_text (cr, style, x, y, 0, 0.5, style->faint, _ ("witnesses"));
  draw_witnesses (cr, dial, style, x + words + 2 * PAD, y, radius);
}

static void
draw_words (cairo_t *cr, const Layout *at, const TfDial *dial, const TfChartStyle *style)
{
  tf_chart_text (cr, style, at->x - at->radius - PAD, at->y, 1, 0.5, style->faint,
                 C_ ("east", "E"));
  tf_chart_text (cr, style, at->x + at->radius + PAD, at->y, 0, 0.5, style->faint,
                 C_ ("west", "W"));
  if (dial->joy_name != NULL && has_joy (dial))
    tf_chart_text (cr, style, at->x, at->name_y, 0.5, 0, style->faint, dial->joy_name);
  if (at->beside)
    draw_beside (cr, at, dial, style);
  else
    draw_under (cr, at, dial, style);
}

void
tf_dial_draw (cairo_t *cr, const TfDial *dial, const TfChartStyle *style, TfArea area)
{
  g_return_if_fail (cr != NULL && dial != NULL && style != NULL);
  if (!(area.width > 4) || !(area.height > 4))
    return;
  TfChartStyle fit = fit_words (cr, dial, style, area.width);
  Layout at = lay_out (cr, dial, &fit, area);
  cairo_save (cr);
  cairo_rectangle (cr, area.x, area.y, area.width, area.height);
  cairo_clip (cr);
  if (has_joy (dial))
    draw_joy (cr, &at, dial, style);
  draw_circle (cr, &at, style);
  if (isfinite (dial->bearing_deg))
    draw_axis (cr, &at, dial, style);
  if (at.words)
    draw_words (cr, &at, dial, &fit);
  cairo_restore (cr);
}

/* -- in words -------------------------------------------------------------------------------- */

static const char *
polarity_word (int polarity)
{
  return polarity == 2  ? _ ("absent")
         : polarity > 0 ? _ ("positive")
         : polarity < 0 ? _ ("negative")
                        : _ ("undecided");
}

static void
append_axis (GString *text, const TfDial *dial)
{
  if (!isfinite (dial->bearing_deg))
    {
      g_string_append (text, _ ("No axis."));
      return;
    }
  g_autofree char *bearing = tf_chart_dup_degrees (dial->bearing_deg, TRUE);
  g_autofree char *sigma = tf_chart_dup_degrees (dial->sigma_deg, FALSE);
  if (isfinite (dial->sigma_deg))
    g_string_append_printf (text, _ ("Axis at %s ± %s from west towards north."), bearing, sigma);
  else
    g_string_append_printf (text, _ ("Axis at %s from west towards north."), bearing);
}

char *
tf_dial_dup_description (const TfDial *dial)
{
  g_return_val_if_fail (dial != NULL, NULL);
  GString *text = g_string_new (NULL);
  append_axis (text, dial);
  g_string_append_c (text, ' ');
  if (dial->leading_polarity != 0)
    g_string_append_printf (text, _ ("Leading polarity %s."),
                            polarity_word (dial->leading_polarity));
  else
    g_string_append (text, _ ("Leading polarity unknown."));
  g_string_append_c (text, ' ');
  if (dial->expected != 0)
    g_string_append_printf (text, _ ("Hale’s law expects %s to lead."),
                            polarity_word (dial->expected));
  else
    g_string_append (text, _ ("What Hale’s law expects is unknown."));
  if (has_joy (dial))
    {
      g_autofree char *tilt = tf_chart_dup_degrees (dial->joy_deg, TRUE);
      g_autofree char *scatter = tf_chart_dup_degrees (dial->joy_scatter_deg, FALSE);
      g_string_append_c (text, ' ');
      g_string_append_printf (text, _ ("Joy’s law (%s) expects a tilt of %s ± %s."),
                              dial->joy_name != NULL ? dial->joy_name : "—", tilt, scatter);
    }
  g_string_append_c (text, ' ');
  g_string_append_printf (text, _ ("Witnesses: %s, %s, %s."), polarity_word (dial->witnesses[0]),
                          polarity_word (dial->witnesses[1]), polarity_word (dial->witnesses[2]));
  return g_string_free (text, FALSE);
}
