/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The strip: un-projected close looks of one region in time order, all about the place that turns
 * with the Sun, at one scale and one field range, solar north up and west at the right. Pictures come
 * in as cairo surfaces. Where frames are missing a look says so.
 */

#include <cairo.h>

#include "tf-chart.h"

G_BEGIN_DECLS

typedef struct
{
  cairo_surface_t *picture; /* borrowed; NULL: not there (yet) */
  const char *caption;      /* "12 Oct 06:00" */
  const char *why;          /* in place of the picture: "no frame", "the file is gone" */
  gboolean poles;           /* both places are there */
  double positive_x, positive_y, negative_x, negative_y; /* shares of the picture, 0 to 1, y down */
  const double *edge; /* outline: x, y in turn as shares of the picture, NaN between rings; borrowed */
  guint n_edge;       /* pairs */
  gboolean hint;      /* its outline is dashed */
  gboolean ghost;     /* the outline is carried from another time: drawn dotted */
} TfStripLook;

/** tf_strip_draw_look: one look; the picture keeps its shape within @area, the caption under it.
 * @caption: whether there is to be one */
void tf_strip_draw_look (cairo_t *cr, const TfStripLook *look, const TfChartStyle *style, TfArea area,
                         gboolean caption);
/** tf_strip_draw: @n looks in rows of as many as fit at @width units each. Returns the height that
 * was used. @cr NULL: only works it out. */
double tf_strip_draw (cairo_t *cr, const TfStripLook *looks, guint n, const TfChartStyle *style,
                      TfArea area, double width, double shape);

G_END_DECLS
