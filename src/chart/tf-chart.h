/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* What all charts share: colours for light and dark, symbols, number labels. A chart is draw (cr,
 * model, area): no widget, the same for window, PNG, SVG and PDF; hit-testing stands beside it,
 * from the same geometry.
 *
 * Polarity: positive a filled disc, negative an open ring. Verdict: breaks a struck diamond (red),
 * keeps a plain one, cannot say a hollow one. Nothing rests on colour alone.
 */

#include <cairo.h>
#include <glib.h>

G_BEGIN_DECLS

typedef struct
{
  double r, g, b, a;
} TfColour;

typedef struct
{
  gboolean dark;
  gboolean contrast; /* high contrast asked for */
  double text_pt;    /* size of labels in user units (pixels on screen) */
  const char *font;  /* Pango family list; "Sans" */
  TfColour ink, faint, ground, band,
      line; /* text, quiet text, background, shaded band, thin lines */
  TfColour positive, negative, breaks, teal, slate;
} TfChartStyle;

/** tf_chart_style: the project's own colours. @text_pt: size of a label. */
TfChartStyle tf_chart_style (gboolean dark, gboolean contrast, double text_pt);
void tf_chart_set (cairo_t *cr, TfColour colour);
void tf_chart_set_alpha (cairo_t *cr, TfColour colour, double alpha);

typedef struct
{
  double x, y, width, height;
} TfArea;

/** tf_chart_pole: disc (+1) or ring (-1) of @radius about a point. */
void tf_chart_pole (cairo_t *cr, const TfChartStyle *style, double x, double y, double radius,
                    int polarity);
typedef enum
{
  TF_DIAMOND_HOLLOW, /* cannot say */
  TF_DIAMOND_PLAIN,  /* keeps */
  TF_DIAMOND_STRUCK, /* breaks */
} TfDiamond;
void tf_chart_diamond (cairo_t *cr, const TfChartStyle *style, double x, double y, double radius,
                       TfDiamond kind);
/** tf_chart_text: @align_x, @align_y: 0 the text begins at the point, 0.5 centred, 1 ends there.
 * Returns its width. */
double tf_chart_text (cairo_t *cr, const TfChartStyle *style, double x, double y, double align_x,
                      double align_y, TfColour colour, const char *text);
/** tf_chart_dup_place: "N17 W23" of latitude and CMD or longitude, whole degrees, in the current
 * language. */
char *tf_chart_dup_place (double lat_deg, double cmd_deg);
/** tf_chart_dup_flux: "6.1·10²¹ Mx". */
char *tf_chart_dup_flux (double mx);

G_END_DECLS
