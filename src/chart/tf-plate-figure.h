/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The plate as a figure: the picture with what lies over it, a scale bar, and under it when and by
 * what it was taken, the field range, and a legend of the symbols that are in it. The picture comes
 * as a cairo surface; words about the frame come from the caller. */

#include "tf-overlay.h"

G_BEGIN_DECLS

typedef struct
{
  cairo_surface_t *picture; /* borrowed: of the view, at any resolution */
  double width, height;     /* of the view: the area into which the overlay projects */
  TfOverlay overlay;
  double units_a_mm;    /* of the scale bar; NaN: none */
  const char *scale_at; /* nullable: where it holds: "at the disk’s centre" */
  const char *head;     /* time, instrument, place: one or two lines */
  double range_gauss;
  guint32 low, high; /* colours at the ends of the range, 0xRRGGBB */
  guint32 middle;
  const char *caution; /* nullable */
} TfPlateFigure;

/** tf_plate_figure_height: of the whole figure, @width wide, with labels of the style's size. */
double tf_plate_figure_height (const TfPlateFigure *figure, const TfChartStyle *style,
                               double width);
void tf_plate_figure_draw (cairo_t *cr, const TfPlateFigure *figure, const TfChartStyle *style,
                           TfArea area);
/** tf_plate_figure_bar: length of the scale bar, Mm: 1, 2 or 5 times a power of ten, near a fifth
 * of the picture; NaN without a scale. */
double tf_plate_figure_bar (const TfPlateFigure *figure);

G_END_DECLS
