/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* What lies over the plate: graticule (10 deg), limb, central meridian, outlines, axes, labels. The
 * caller gives a projection function, so that the same drawing serves every look and the export.
 */

#include "tf-chart.h"
#include "tf-outline.h"

G_BEGIN_DECLS

/** TfProjectFunc: Carrington place -> point of the area; FALSE when it is not to be seen. */
typedef gboolean (*TfProjectFunc) (double lon_deg, double lat_deg, double *x, double *y,
                                   gpointer data);

typedef enum
{
  TF_STROKE_HINT,  /* dashed */
  TF_STROKE_MARK,  /* solid */
  TF_STROKE_DRAFT, /* being drawn */
  TF_STROKE_GHOST, /* carried from another time */
} TfStroke;

typedef struct
{
  const TfOutline *outline; /* borrowed; carried to the frame's time by the caller */
  TfStroke stroke;
  gboolean chosen;
  const char *label;               /* "0412", "hint"; nullable */
  double positive[2], negative[2]; /* poles, Carrington lon, lat; NaN: no axis */
  int verdict; /* TfVerdictKind, -1 none: a small diamond beside the label when it breaks */
} TfOverlayItem;

/** TfOverlayLine: a line that belongs to no outline; each kind has dashes of its own. */
typedef enum
{
  TF_LINE_INVERSION, /* between the polarities */
  TF_LINE_PENUMBRA,  /* edge of a spot in the intensity frame of the same time */
  TF_LINE_UMBRA,
  TF_N_LINE_KINDS
} TfLineKind;
typedef struct
{
  TfLineKind kind;
  const TfVertex *points; /* borrowed; Carrington */
  guint n;
} TfOverlayLine;

typedef struct
{
  TfProjectFunc project;
  gpointer data;
  double central_carrington_deg; /* NaN on maps */
  double step_deg;               /* 10 */
  gboolean graticule, outlines, axes, labels;
  const TfOverlayItem *items;
  guint n_items;
  const TfOverlayLine *lines; /* nullable */
  guint n_lines;
  double limb_x, limb_y, limb_rx, limb_ry, limb_turn; /* ellipse of the limb; rx NaN: none */
  const double (*draft)[2]; /* line being drawn, in area points; nullable */
  guint n_draft;
  gboolean on_dark; /* the picture under it is dark */
} TfOverlay;

void
tf_overlay_draw (cairo_t *cr, const TfOverlay *overlay, const TfChartStyle *style, TfArea area);
/** tf_overlay_stroke_line: strokes the path of @cr as the overlay does a line of that kind. */
void tf_overlay_stroke_line (cairo_t *cr, const TfOverlay *overlay, const TfChartStyle *style,
                             TfLineKind kind);
/** tf_overlay_stroke_outline: strokes the path of @cr as the overlay does an item's outline. */
void tf_overlay_stroke_outline (cairo_t *cr, const TfOverlay *overlay, const TfChartStyle *style,
                                TfStroke stroke, gboolean chosen);
/** tf_overlay_hit: index of the item whose outline holds the point (the smallest), or -1. */
int tf_overlay_hit (const TfOverlay *overlay, TfArea area, double x, double y);

G_END_DECLS
