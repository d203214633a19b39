/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* A trail: a line on the Sun as it is seen in the area, as pieces. Where the line goes over the
 * limb or across the seam of a map the piece ends, at the place of the crossing; drawing and
 * hit-testing both read trails. */

#include "tf-overlay.h"

G_BEGIN_DECLS

#pragma GCC visibility push(hidden)

typedef struct
{
  GArray *points;  /* of TfTrailPoint */
  GArray *starts;  /* of guint: where each piece begins */
  gboolean closed; /* one piece whose end meets its beginning */
} TfTrail;

typedef struct
{
  double x, y;
} TfTrailPoint;

/** TfTrailFunc: the place at @t of the line, Carrington deg. */
typedef void (*TfTrailFunc) (double t, double *lon_deg, double *lat_deg, gconstpointer line);

TfTrail *tf_trail_new (void);
void tf_trail_free (TfTrail *trail);
/** tf_trail_add_line: the line from t = 0 to 1 in @n steps; goes on from the last piece when
 * @joined. */
void tf_trail_add_line (TfTrail *trail, const TfOverlay *overlay, TfTrailFunc func,
                        gconstpointer line, guint n, gboolean joined);
/** tf_trail_add_arc: along a great circle. */
void tf_trail_add_arc (TfTrail *trail, const TfOverlay *overlay, TfVertex from, TfVertex to,
                       gboolean joined);
/** tf_trail_new_ring: a closed ring of great circles; a piece cut at the first vertex only is made
 * whole. */
TfTrail *tf_trail_new_ring (const TfOverlay *overlay, const TfVertex *ring, guint n);
guint tf_trail_get_n_pieces (const TfTrail *trail);
const TfTrailPoint *tf_trail_get_piece (const TfTrail *trail, guint k, guint *n);
/** tf_trail_path: adds all pieces to the path of @cr. */
void tf_trail_path (const TfTrail *trail, cairo_t *cr);
/** tf_trail_contains: even-odd over the pieces, each closed by a straight line (the limb, the
 * seam). */
gboolean tf_trail_contains (const TfTrail *trail, double x, double y);
/** tf_trail_area: sum of the pieces' areas, square units. */
double tf_trail_area (const TfTrail *trail);
/** tf_trail_widen: @box (x0, y0, x1, y1) widened to hold the largest piece (the label stands by
 * it); begin with (INF, INF, -INF, -INF). */
void tf_trail_widen (const TfTrail *trail, double box[4]);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfTrail, tf_trail_free)

/** tf_overlay_draw_labels: names of the items, placed so that they stand clear of the outlines;
 * @boxes: one (x0, y0, x1, y1) an item, x1 < x0 where nothing of it is seen. */
void tf_overlay_draw_labels (cairo_t *cr, const TfOverlay *overlay, const TfChartStyle *style,
                             TfArea area, double (*boxes)[4]);
/** tf_overlay_line_colour: of an item's outline and label; tf_overlay_halo_colour: of what sets it
 * off. */
TfColour tf_overlay_line_colour (const TfOverlay *overlay, const TfChartStyle *style,
                                 const TfOverlayItem *item);
TfColour tf_overlay_halo_colour (const TfOverlay *overlay);

#pragma GCC visibility pop

G_END_DECLS
